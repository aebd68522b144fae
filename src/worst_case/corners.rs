//! The corners of a supply's bands.

use crate::quantity::End;
use crate::supply::{Slot, Supply};

/// The uncertain quantities that act on the circuit; ratings and surroundings do not.
#[must_use]
pub fn circuit_bands(supply: &Supply) -> Vec<Slot> {
    let mut bands = supply.bands();
    bands.retain(|slot| acts(&slot.pointer));
    bands
}

fn acts(pointer: &str) -> bool {
    !pointer.contains("/ratings/") && !pointer.starts_with("/surroundings/") && pointer != "/transformer/rating"
}

/// A supply and the bands whose ends make its corners.
#[derive(Clone, Debug)]
pub struct Corners<'a> {
    /// The supply.
    pub supply: &'a Supply,
    /// The bands, in the order of a description.
    pub bands: Vec<Slot>,
}

impl<'a> Corners<'a> {
    /// The corners of a supply.
    #[must_use]
    pub fn of(supply: &'a Supply) -> Self {
        Self {
            supply,
            bands: circuit_bands(supply),
        }
    }

    /// How many corners there are; `None` where that overflows.
    #[must_use]
    pub fn count(&self) -> Option<usize> {
        u32::try_from(self.bands.len())
            .ok()
            .and_then(|n| 1_usize.checked_shl(n))
            .filter(|_| self.bands.len() < 63)
    }

    /// The supply with every band at a value: `values` one a band.
    #[must_use]
    pub fn at(&self, values: &[f64]) -> Supply {
        let chosen: Vec<(&str, f64)> = self
            .bands
            .iter()
            .zip(values)
            .map(|(slot, value)| (slot.pointer.as_str(), *value))
            .collect();
        self.supply.at_values(&chosen)
    }

    /// The values of corner `index`: bit `i` set means that band `i` stands at its high end.
    #[must_use]
    pub fn values(&self, index: usize) -> Vec<f64> {
        self.bands
            .iter()
            .enumerate()
            .map(|(bit, slot)| slot.band.at(if index >> bit & 1 == 1 { End::High } else { End::Low }))
            .collect()
    }

    /// The nominal values.
    #[must_use]
    pub fn nominal(&self) -> Vec<f64> {
        self.bands.iter().map(|slot| slot.band.nominal()).collect()
    }
}
