//! The extremes of every figure over the bands.

use super::operating_point::solved;
use super::{App, AppError};
use crate::figures::Figure;
use crate::supply::Supply;
use crate::worst_case::{Extremes, survey};

/// The extremes of every figure.
#[derive(Clone, Debug)]
pub struct WorstCase {
    /// Pointer and definition of each figure.
    pub figures: Vec<(String, &'static Figure)>,
    /// Their extremes.
    pub extremes: Extremes,
}

pub(super) fn worst_case(supply: &Supply, corners_maximum: usize) -> Result<WorstCase, AppError> {
    let figures = solved(&supply.at_ends(|_| None))?.pointers();
    let extremes = survey(supply, corners_maximum, |point| solved(point).map(|f| f.values()))?;
    Ok(WorstCase { figures, extremes })
}

impl App {
    /// Finds the extremes of every figure of a supply over its bands.
    ///
    /// # Errors
    /// [`AppError`], of the first corner that fails.
    pub async fn worst_case(&self, supply: Supply) -> Result<WorstCase, AppError> {
        let maximum = self.limits.corners_maximum;
        self.compute.run(move || worst_case(&supply, maximum)).await?
    }
}
