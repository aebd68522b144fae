//! A conduction pattern made ready for propagation: its modes, its response to the line, its switches' slacks.

use super::SolverError;
use super::basis::Basis;
use super::modes::Modes;
use crate::network::{Element, Network, Pattern, Signal, Unsolvable};
use nalgebra::{Complex, DMatrix};

/// A mode this close to a frequency of the line, relative to it, is moved away by as much: a loss-free resonance has no
/// steady state of its own.
const RESONANCE: f64 = 1e-8;

/// A row over the extended state carried over to the basis: the part that does not depend on where the pattern began.
#[derive(Clone, Debug, PartialEq)]
pub struct ModalRow {
    /// Weights of the modal coordinates.
    pub modal: Vec<f64>,
    /// Coefficients over the line's time functions, the steady response included.
    pub sources: Vec<f64>,
    /// The constant.
    pub constant: f64,
}

/// A pattern ready for propagation.
#[derive(Clone, Debug)]
pub struct Regime {
    /// The reduced network.
    pub pattern: Pattern,
    /// Its natural modes.
    pub modes: Modes,
    /// Its time functions.
    pub basis: Basis,
    /// Steady response of the modal coordinates to the line, a row a coordinate.
    pub steady: DMatrix<f64>,
    /// Constant drive of the modal coordinates.
    pub drive: Vec<f64>,
    /// For each switch the quantity that must stay positive: its current, or its threshold less its voltage.
    pub slack: Vec<Vec<f64>>,
    /// The same over the basis.
    pub slack_modal: Vec<ModalRow>,
    /// Rate of change of the full state, rows over the extended state.
    pub expand_rate: DMatrix<f64>,
}

impl Regime {
    /// Makes the pattern with the switches `conducting` ready.
    ///
    /// # Errors
    /// The inner `Unsolvable` where the pattern contradicts itself; a [`SolverError`] where numbers fail.
    pub fn new(network: &Network, conducting: u64) -> Result<Result<Self, Unsolvable>, SolverError> {
        let pattern = match Pattern::new(network, conducting) {
            Ok(pattern) => pattern,
            Err(unsolvable) => return Ok(Err(unsolvable)),
        };
        let n = pattern.states;
        let matrix = pattern.rate.columns(0, n).into_owned();
        let mut modes = Modes::new(&matrix, &pattern.weight)?;
        avoid_resonance(network, &mut modes);
        let basis = Basis::new(&network.oscillator, &modes);
        let driven = &modes.left * pattern.rate.columns(n, pattern.width - n);
        let steady = steady(network, &modes, &driven);
        let drive = driven.column(driven.ncols() - 1).iter().copied().collect();
        let expand_rate = expand_rate(network, &pattern);
        let mut regime = Self {
            slack: slack(network, &pattern),
            pattern,
            modes,
            basis,
            steady,
            drive,
            slack_modal: Vec::new(),
            expand_rate,
        };
        regime.slack_modal = regime.slack.iter().map(|row| regime.modal(row)).collect();
        Ok(Ok(regime))
    }

    /// A row over the extended state, over the basis.
    #[must_use]
    pub fn modal(&self, row: &[f64]) -> ModalRow {
        let n = self.pattern.states;
        let sources = self.pattern.width - n - 1;
        let modal: Vec<f64> = (0..n)
            .map(|c| (0..n).map(|r| row[r] * self.modes.right[(r, c)]).sum())
            .collect();
        let sources = (0..sources)
            .map(|c| row[n + c] + (0..n).map(|r| modal[r] * self.steady[(r, c)]).sum::<f64>())
            .collect();
        ModalRow {
            modal,
            sources,
            constant: row[self.pattern.width - 1],
        }
    }

    /// The row of a probe's signal over the extended state.
    #[must_use]
    pub fn signal(&self, signal: &Signal) -> Vec<f64> {
        let mut row = vec![0.0; self.pattern.width];
        let sums = [
            (&signal.voltages, &self.pattern.voltage),
            (&signal.currents, &self.pattern.current),
        ];
        for (terms, rows) in sums {
            for &(branch, weight) in terms {
                for (c, value) in row.iter_mut().enumerate() {
                    *value += weight * rows[(branch, c)];
                }
            }
        }
        row
    }
}

fn avoid_resonance(network: &Network, modes: &mut Modes) {
    let oscillator = &network.oscillator;
    for mode in &mut modes.modes {
        for index in 0..oscillator.orders.len() {
            let angular = oscillator.angular(index);
            if (mode.rate - Complex::new(0.0, angular)).norm() < RESONANCE * angular {
                mode.rate.re -= RESONANCE * angular;
            }
        }
    }
}

/// The steady response `p sin + q cos` of each mode `y' = a y + s sin + c cos`.
fn steady(network: &Network, modes: &Modes, driven: &DMatrix<f64>) -> DMatrix<f64> {
    let oscillator = &network.oscillator;
    let mut response = DMatrix::zeros(driven.nrows(), oscillator.width());
    for mode in &modes.modes {
        let complex = |column: usize| {
            let imaginary = if mode.pair { driven[(mode.at + 1, column)] } else { 0.0 };
            Complex::new(driven[(mode.at, column)], imaginary)
        };
        for index in 0..oscillator.orders.len() {
            let w = oscillator.angular(index);
            let (s, c) = (complex(2 * index), complex(2 * index + 1));
            // Without cancellation where the rate is near i w.
            let denominator = (mode.rate - Complex::new(0.0, w)) * (mode.rate + Complex::new(0.0, w));
            let p = (c * w - mode.rate * s) / denominator;
            let q = -(mode.rate * c + s * w) / denominator;
            response[(mode.at, 2 * index)] = p.re;
            response[(mode.at, 2 * index + 1)] = q.re;
            if mode.pair {
                response[(mode.at + 1, 2 * index)] = p.im;
                response[(mode.at + 1, 2 * index + 1)] = q.im;
            }
        }
    }
    response
}

fn slack(network: &Network, pattern: &Pattern) -> Vec<Vec<f64>> {
    network
        .switches
        .iter()
        .enumerate()
        .map(|(index, &branch)| {
            if pattern.conducting >> index & 1 == 1 {
                pattern.current.row(branch).iter().copied().collect()
            } else {
                let mut row: Vec<f64> = pattern.voltage.row(branch).iter().map(|v| -v).collect();
                if let Element::Switch { threshold, .. } = network.branches[branch].element {
                    row[pattern.width - 1] += threshold;
                }
                row
            }
        })
        .collect()
}

fn expand_rate(network: &Network, pattern: &Pattern) -> DMatrix<f64> {
    let rows: Vec<Vec<f64>> = (0..pattern.expand.nrows())
        .map(|r| {
            let row: Vec<f64> = pattern.expand.row(r).iter().copied().collect();
            pattern.derivative(network, &row)
        })
        .collect();
    DMatrix::from_fn(rows.len(), pattern.width, |r, c| rows[r][c])
}
