//! Sizing one circuit with one capacitance: the transformer that just holds the valley.

use super::Need;
use crate::figures::Figures;
use crate::quantity::{Band, Dimension, read_band, write_quantity};
use crate::supply::{
    Capacitor, CapacitorRatings, Circuit, Diode, DiodeRatings, Load, Output, Parts, Phases, Rail, Rectifier, Section,
    Supply, Transformer, Winding, WindingValues,
};
use crate::worst_case::{Corners, Extremes, survey};

/// Rounds of transformer rating against current.
const ROUNDS: usize = 8;
/// Relative change of the current at which the rating has settled.
const SETTLED: f64 = 0.01;
/// Steps of the search for the voltage.
const VOLTAGE_STEPS: usize = 40;

/// A transformer by its nameplate.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Nameplate {
    /// Rated volts of the winding, of each half.
    pub(super) voltage: f64,
    /// Rated amperes.
    pub(super) current: f64,
    /// Regulation as a fraction.
    pub(super) regulation: f64,
    /// Volt-amperes.
    pub(super) rating: f64,
}

/// A circuit with a capacitance, to be sized.
pub(super) struct Sizing<'a, Solve> {
    pub(super) need: &'a Need,
    pub(super) circuit: Circuit,
    pub(super) capacitance: f64,
    pub(super) corners_maximum: usize,
    pub(super) solve: &'a Solve,
}

impl<E: Send, Solve: Fn(&Supply) -> Result<Vec<f64>, E> + Sync> Sizing<'_, Solve> {
    /// Apparent power of a winding.
    pub(super) fn rating(&self, voltage: f64, current: f64) -> f64 {
        let parts = match self.circuit {
            c if c.needs_tap() => 2.0,
            c if c.is_three_phase() => 3.0_f64.sqrt(),
            _ => 1.0,
        };
        parts * voltage * current
    }

    /// The supply with a given transformer.
    pub(super) fn supply(&self, plate: Nameplate) -> Option<Supply> {
        let need = self.need;
        let three = need.line.phases == Phases::Three;
        let pulses = if self.circuit == Circuit::HalfWave { 1.0 } else { 2.0 };
        let ripple = pulses * if three { 3.0 } else { 1.0 } * need.line.frequency.nominal();
        let nominal = self.capacitance;
        let capacitor = Capacitor {
            capacitance: toleranced(nominal, need.assumptions.capacitance_tolerance)?,
            esr: Band::point(need.assumptions.loss_factor / (std::f64::consts::TAU * ripple * nominal)).ok()?,
            count: 1,
            ratings: CapacitorRatings::default(),
        };
        let rails = need.rails.iter().map(|rail| Rail {
            filter: vec![Section {
                series: None,
                capacitor: Some(capacitor.clone()),
            }],
            load: rail.load.clone(),
        });
        let primary_voltage = Band::point(need.line.voltage.nominal()).ok()?;
        Supply::new(Parts {
            name: None,
            line: need.line.clone(),
            transformer: Some(Transformer {
                primary_voltage,
                primary_resistance: None,
                primary_leakage_inductance: Band::ZERO,
                windings: vec![Winding {
                    values: WindingValues::Nameplate {
                        rated_voltage: Band::point(plate.voltage).ok()?,
                        rated_current: Band::point(plate.current).ok()?,
                    },
                    leakage_inductance: Band::ZERO,
                }],
                regulation: Some(Band::point(plate.regulation).ok()?),
                rating: Some(Band::point(plate.rating).ok()?),
                core_loss: None,
            }),
            outputs: vec![Output {
                winding: 0,
                rectifier: Rectifier {
                    circuit: self.circuit,
                    diode: Diode {
                        ratings: DiodeRatings::default(),
                        ..need.assumptions.diode.clone()
                    },
                    stack: None,
                    coupling: None,
                },
                rails: rails.collect(),
            }],
            surroundings: need.surroundings.clone(),
        })
        .ok()
    }

    /// Extremes over all corners.
    pub(super) fn extremes(&self, supply: &Supply) -> Result<Extremes, E> {
        survey(supply, self.corners_maximum, self.solve)
    }

    /// The smallest of the valleys' margins, and the largest winding current, at the corners of a supply.
    fn margin(&self, supply: &Supply, places: &Places) -> Result<(f64, f64), E> {
        use rayon::prelude::*;
        let corners = Corners::of(supply);
        let count = corners.count().unwrap_or(usize::MAX).min(self.corners_maximum);
        let rows: Vec<Result<Vec<f64>, E>> = (0..count)
            .into_par_iter()
            .map(|index| (self.solve)(&corners.at(&corners.values(index))))
            .collect();
        let mut margin = f64::INFINITY;
        let mut current = 0.0_f64;
        for row in rows {
            let row = row?;
            for (rail, &place) in self.need.rails.iter().zip(&places.valleys) {
                margin = margin.min(row[place] - rail.valley_min);
            }
            current = current.max(row[places.winding_current]);
        }
        Ok((margin, current))
    }

    /// The transformer that just holds the valley at the worst corner; `None` where the search does not end.
    pub(super) fn size(&self, places: &Places) -> Result<Option<Nameplate>, E> {
        let direct: f64 = self
            .need
            .rails
            .iter()
            .map(|r| load_current(&r.load, r.valley_min))
            .sum();
        let crowding = match self.circuit {
            Circuit::HalfWave => 2.4,
            Circuit::CentreTap => 1.3,
            c if c.is_three_phase() => 1.0,
            _ => 1.8,
        };
        let mut current = crowding * direct.max(1e-6);
        let mut voltage = self.first_voltage();
        for _ in 0..ROUNDS {
            let Some((found, carried)) = self.voltage(voltage, current, places)? else {
                return Ok(None);
            };
            voltage = found;
            let settled = (carried - current).abs() <= SETTLED * carried;
            current = carried.max(1e-9);
            if settled {
                return Ok(Some(self.plate(voltage, current)));
            }
        }
        Ok(Some(self.plate(voltage, current)))
    }

    /// The nameplate for a voltage and a current, with the assumed regulation.
    pub(super) fn plate(&self, voltage: f64, current: f64) -> Nameplate {
        let rating = self.rating(voltage, current);
        Nameplate {
            voltage,
            current,
            regulation: self.need.assumptions.regulation_at(rating),
            rating,
        }
    }

    fn first_voltage(&self) -> f64 {
        let valley = self.need.rails.iter().map(|r| r.valley_min).fold(0.0, f64::max);
        let line = &self.need.line.voltage;
        let crest = match self.circuit {
            Circuit::ThreePhaseHalfWave => std::f64::consts::SQRT_2 / 3.0_f64.sqrt(),
            _ => std::f64::consts::SQRT_2,
        };
        1.25 * (valley + 2.0) / crest * line.nominal() / line.low()
    }

    /// The rated voltage at which the margin vanishes, by regula falsi (Illinois) between brackets, at a fixed rated current.
    fn voltage(&self, first: f64, current: f64, places: &Places) -> Result<Option<(f64, f64)>, E> {
        let margin = |voltage: f64| -> Result<Option<(f64, f64)>, E> {
            match self.supply(self.plate(voltage, current)) {
                Some(supply) => self.margin(&supply, places).map(Some),
                None => Ok(None),
            }
        };
        let Some(mut at_low) = margin(first)? else {
            return Ok(None);
        };
        let (mut low, mut high, mut at_high) = (first, first, at_low);
        for _ in 0..VOLTAGE_STEPS {
            if at_low.0 <= 0.0 && at_high.0 >= 0.0 {
                break;
            }
            if at_low.0 > 0.0 {
                (high, at_high) = (low, at_low);
                low *= 0.8;
                let Some(found) = margin(low)? else { return Ok(None) };
                at_low = found;
            } else {
                (low, at_low) = (high, at_high);
                high *= 1.25;
                let Some(found) = margin(high)? else { return Ok(None) };
                at_high = found;
            }
        }
        if !(at_low.0 <= 0.0 && at_high.0 >= 0.0) {
            return Ok(None);
        }
        let (mut f_low, mut f_high) = (at_low.0, at_high.0);
        for _ in 0..VOLTAGE_STEPS {
            if high - low <= 1e-4 * high {
                break;
            }
            let next = (high * f_low - low * f_high) / (f_low - f_high);
            let next = if next > low && next < high {
                next
            } else {
                0.5 * (low + high)
            };
            let Some(found) = margin(next)? else { return Ok(None) };
            if found.0 >= 0.0 {
                (high, at_high) = (next, found);
                f_high = found.0;
                f_low *= 0.5;
                if found.0 <= 1e-4 * self.need.rails[0].valley_min {
                    break;
                }
            } else {
                low = next;
                f_low = found.0;
                f_high *= 0.5;
            }
        }
        Ok(Some((high, at_high.1)))
    }
}

/// A capacitance with its tolerance, as its text reads: the same band whether it is computed here or read back.
fn toleranced(farads: f64, tolerance: f64) -> Option<Band> {
    let (nominal, width) = (
        write_quantity(farads, Dimension::Capacitance),
        write_quantity(tolerance, Dimension::Ratio),
    );
    read_band(&format!("{nominal} \u{b1}{width}"), Dimension::Capacitance).ok()
}

/// Where the figures that sizing reads stand among the values.
#[derive(Clone, Debug)]
pub(super) struct Places {
    pub(super) valleys: Vec<usize>,
    pub(super) winding_current: usize,
}

impl Places {
    pub(super) fn of(figures: &Figures) -> Self {
        let pointers = figures.pointers();
        let place = |wanted: &str| pointers.iter().position(|(pointer, _)| pointer == wanted).unwrap_or(0);
        Self {
            valleys: (0..figures.outputs[0].rails.len())
                .map(|rail| place(&format!("/outputs/0/rails/{rail}/voltage/valley")))
                .collect(),
            winding_current: place("/outputs/0/winding/current_rms"),
        }
    }
}

/// The largest direct current a load draws at a voltage.
pub(super) fn load_current(load: &Load, volts: f64) -> f64 {
    match load {
        Load::Resistance { resistance } => volts / resistance.low(),
        Load::Current { current } => current.high(),
        Load::Regulator {
            output_current,
            quiescent_current,
            ..
        } => output_current.high() + quiescent_current.high(),
        Load::Open => 0.0,
    }
}
