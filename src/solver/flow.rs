//! The exact solution within one conduction pattern.

use super::basis::Basis;
use super::regime::{ModalRow, Regime};
use nalgebra::{Complex, DMatrix};

/// A stretch of time in one pattern, its solution written over the pattern's basis.
#[derive(Clone, Debug)]
pub struct Flow {
    /// Index of its regime among the solver's.
    pub regime: usize,
    /// Absolute time at its beginning, in seconds from the zero crossing of the line.
    pub start: f64,
    /// Its length in seconds.
    pub length: f64,
    /// Constant part of each modal coordinate.
    constant: Vec<f64>,
    /// Coefficient of each modal coordinate's time function; real and imaginary part for a pair.
    transient: Vec<f64>,
}

impl Flow {
    /// The solution that has the minimal state `state` at time `start`.
    #[must_use]
    pub fn new(index: usize, regime: &Regime, start: f64, state: &[f64], sources: &[f64]) -> Self {
        let n = state.len();
        let mut constant = vec![0.0; n];
        let mut transient = vec![0.0; n];
        // Modal coordinates less the steady response to the line.
        let rest: Vec<f64> = (0..n)
            .map(|r| {
                let y: f64 = (0..n).map(|c| regime.modes.left[(r, c)] * state[c]).sum();
                let p: f64 = sources.iter().enumerate().map(|(c, w)| regime.steady[(r, c)] * w).sum();
                y - p
            })
            .collect();
        let first = regime.basis.width - n;
        for mode in &regime.basis.modes {
            let at = mode.at - first;
            let take = |from: &[f64]| Complex::new(from[at], if mode.pair { from[at + 1] } else { 0.0 });
            let (q, b) = (take(&rest), take(&regime.drive));
            let (fixed, moving) = if mode.slow {
                (q, mode.rate * q + b)
            } else {
                let settled = -b / mode.rate;
                (settled, q - settled)
            };
            constant[at] = fixed.re;
            transient[at] = moving.re;
            if mode.pair {
                constant[at + 1] = fixed.im;
                transient[at + 1] = moving.im;
            }
        }
        Self {
            regime: index,
            start,
            length: 0.0,
            constant,
            transient,
        }
    }

    /// A signal's coefficients over the basis.
    pub fn signal(&self, regime: &Regime, row: &ModalRow, out: &mut Vec<f64>) {
        out.clear();
        let constant: f64 = row.modal.iter().zip(&self.constant).map(|(g, q)| g * q).sum();
        out.push(row.constant + constant);
        out.extend_from_slice(&row.sources);
        let first = out.len();
        for mode in &regime.basis.modes {
            let at = mode.at - first;
            if mode.pair {
                let (g, h) = (row.modal[at], row.modal[at + 1]);
                let (c, d) = (self.transient[at], self.transient[at + 1]);
                out.push(g * c + h * d);
                out.push(h * c - g * d);
            } else {
                out.push(row.modal[at] * self.transient[at]);
            }
        }
    }

    /// The minimal state `since` seconds after the beginning.
    #[must_use]
    pub fn state(&self, regime: &Regime, since: f64) -> Vec<f64> {
        let n = self.constant.len();
        let mut values = vec![0.0; regime.basis.width];
        regime.basis.values(self.start + since, since, &mut values);
        let first = regime.basis.width - n;
        let mut modal: Vec<f64> = (0..n)
            .map(|r| {
                let steady: f64 = (0..first - 1).map(|c| regime.steady[(r, c)] * values[1 + c]).sum();
                self.constant[r] + steady
            })
            .collect();
        for mode in &regime.basis.modes {
            let at = mode.at - first;
            if mode.pair {
                let value = Complex::new(values[mode.at], values[mode.at + 1]);
                let moving = Complex::new(self.transient[at], self.transient[at + 1]) * value;
                modal[at] += moving.re;
                modal[at + 1] += moving.im;
            } else {
                modal[at] += self.transient[at] * values[mode.at];
            }
        }
        (0..n)
            .map(|r| (0..n).map(|c| regime.modes.right[(r, c)] * modal[c]).sum())
            .collect()
    }

    /// The transition matrix over `since` seconds.
    #[must_use]
    pub fn transition(regime: &Regime, since: f64) -> DMatrix<f64> {
        let n = regime.pattern.states;
        let mut moved = regime.modes.left.clone();
        let first = regime.basis.width - n;
        for mode in &regime.basis.modes {
            let at = mode.at - first;
            let factor = (mode.rate * since).exp();
            for column in 0..n {
                if mode.pair {
                    let value = factor * Complex::new(moved[(at, column)], moved[(at + 1, column)]);
                    moved[(at, column)] = value.re;
                    moved[(at + 1, column)] = value.im;
                } else {
                    moved[(at, column)] *= factor.re;
                }
            }
        }
        &regime.modes.right * moved
    }

    /// The value of a signal, given by its coefficients over the basis, `since` seconds after the beginning.
    #[must_use]
    pub fn value(&self, basis: &Basis, signal: &[f64], since: f64, scratch: &mut [f64]) -> f64 {
        basis.values(self.start + since, since, scratch);
        Basis::dot(signal, scratch)
    }
}
