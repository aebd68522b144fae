//! The operating point of a supply at one choice within its bands.

use super::{App, AppError};
use crate::figures::{self, Figures, Waveforms};
use crate::network::Network;
use crate::solver;
use crate::supply::{Derived, Supply};

/// An operating point solved.
#[derive(Clone, Debug)]
pub struct OperatingPoint {
    /// Its figures.
    pub figures: Figures,
    /// One cycle, where it was asked for.
    pub waveforms: Option<Waveforms>,
    /// Seconds of one cycle.
    pub period: f64,
    /// Relative change of the state over the cycle.
    pub residual: f64,
    /// Newton iterations.
    pub iterations: usize,
    /// Located changes of conduction, all iterations together.
    pub events: usize,
    /// What was derived from the transformer's nameplate, where it was given by one.
    pub derived: Option<Derived>,
}

/// The figures of a supply without bands, every one of them finite.
pub(super) fn solved(supply: &Supply) -> Result<Figures, AppError> {
    let network = Network::of(supply);
    let periodic = solver::solve(&network)?;
    finite(figures::compute(&network, &periodic))
}

/// Figures of which every one is a finite number.
pub(super) fn finite(figures: Figures) -> Result<Figures, AppError> {
    match figures.values().iter().position(|value| !value.is_finite()) {
        None => Ok(figures),
        Some(index) => Err(AppError::NotFinite {
            pointer: figures.pointers().swap_remove(index).0,
        }),
    }
}

fn operating_point(supply: &Supply, points: Option<usize>) -> Result<OperatingPoint, AppError> {
    let network = Network::of(supply);
    let periodic = solver::solve(&network)?;
    let figures = finite(figures::compute(&network, &periodic))?;
    Ok(OperatingPoint {
        figures,
        waveforms: points.map(|points| figures::waveforms(&network, &periodic, points)),
        period: network.oscillator.period(),
        residual: periodic.residual,
        iterations: periodic.work.iterations,
        events: periodic.work.events,
        derived: supply.derived_transformer(),
    })
}

impl App {
    /// Pointer and unit of every figure that a supply has, in the figures' order; nothing is solved.
    #[must_use]
    pub fn figure_pointers(&self, supply: &Supply) -> Vec<(String, &'static str)> {
        let shape = Figures::shaped(&Network::of(supply));
        shape
            .pointers()
            .into_iter()
            .map(|(pointer, figure)| (pointer, figure.unit))
            .collect()
    }

    /// Solves a supply without bands; `points` samples of one cycle where they are wanted.
    ///
    /// # Errors
    /// [`AppError`].
    pub async fn operating_point(&self, supply: Supply, points: Option<usize>) -> Result<OperatingPoint, AppError> {
        self.compute.run(move || operating_point(&supply, points)).await?
    }
}
