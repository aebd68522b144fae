//! The time functions that every signal of a pattern is made of.
//!
//! One, the line's sinusoids over absolute time, and for each natural mode an exponential over time since the pattern began.
//! A mode too slow to be told from a constant within a cycle is written with `(e^(rate t) - 1) / rate` instead, which
//! keeps its digits down to a rate of zero.

use super::modes::Modes;
use crate::network::Oscillator;
use nalgebra::Complex;

/// Modes slower than this per cycle take the form that keeps its digits.
const SLOW: f64 = 0.02;
/// What a sinusoid counts for at its zero, of its amplitude, where rounding is judged.
pub(super) const SINUSOID_FLOOR: f64 = 1e-3;
/// Terms of the series of `(e^z - 1) / z` for slow modes: `0.02^8 / 9!` is below rounding.
pub(super) const SLOW_TERMS: usize = 8;

/// One time function of a natural mode.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ModeFunction {
    /// Eigenvalue in 1/s.
    pub rate: Complex<f64>,
    /// Whether it stands for a complex pair, with two functions.
    pub pair: bool,
    /// Written as `(e^(rate t) - 1) / rate`.
    pub slow: bool,
    /// Index of its first function in the basis.
    pub at: usize,
}

/// The basis of a pattern's signals: `[1, sin, cos, ..., modes]`.
#[derive(Clone, Debug)]
pub struct Basis {
    /// Angular frequency of each order of the line, in radians per second.
    pub angular: Vec<f64>,
    /// Functions of the natural modes.
    pub modes: Vec<ModeFunction>,
    /// How many functions there are.
    pub width: usize,
}

/// `(e^z - 1) / z`, exact to rounding for every z.
#[must_use]
pub fn phi(z: Complex<f64>) -> Complex<f64> {
    if z.norm() < 0.5 {
        let mut term = Complex::from(1.0);
        let mut sum = term;
        for k in 2..20 {
            term *= z / f64::from(k);
            sum += term;
            if term.norm() < 1e-18 {
                break;
            }
        }
        sum
    } else {
        (z.exp() - 1.0) / z
    }
}

impl Basis {
    /// The basis for a pattern's modes under the line's time functions.
    #[must_use]
    pub fn new(oscillator: &Oscillator, modes: &Modes) -> Self {
        let first = 1 + oscillator.width();
        let period = oscillator.period();
        let functions: Vec<ModeFunction> = modes
            .modes
            .iter()
            .map(|mode| ModeFunction {
                rate: mode.rate,
                pair: mode.pair,
                slow: mode.rate.norm() * period < SLOW,
                at: first + mode.at,
            })
            .collect();
        Self {
            angular: (0..oscillator.orders.len()).map(|i| oscillator.angular(i)).collect(),
            modes: functions,
            width: first + modes.right.ncols(),
        }
    }

    /// The functions `since` seconds into the pattern, at absolute time `time`.
    pub fn values(&self, time: f64, since: f64, out: &mut [f64]) {
        out[0] = 1.0;
        for (index, &angular) in self.angular.iter().enumerate() {
            let (sine, cosine) = (angular * time).sin_cos();
            out[1 + 2 * index] = sine;
            out[2 + 2 * index] = cosine;
        }
        for mode in &self.modes {
            if mode.pair {
                let z = mode.rate * since;
                let value = if mode.slow { phi(z) * since } else { z.exp() };
                out[mode.at] = value.re;
                out[mode.at + 1] = value.im;
            } else {
                let z = mode.rate.re * since;
                out[mode.at] = match (mode.slow, z == 0.0) {
                    (true, true) => since,
                    (true, false) => z.exp_m1() / mode.rate.re,
                    (false, _) => z.exp(),
                };
            }
        }
    }

    /// Turns a signal's coefficients into those of its derivative, in place.
    pub fn differentiate(&self, signal: &mut [f64]) {
        signal[0] = 0.0;
        for (index, &angular) in self.angular.iter().enumerate() {
            let (sine, cosine) = (signal[1 + 2 * index], signal[2 + 2 * index]);
            signal[1 + 2 * index] = -angular * cosine;
            signal[2 + 2 * index] = angular * sine;
        }
        for mode in &self.modes {
            let (at, rate) = (mode.at, mode.rate);
            // The slow function's derivative is one plus the rate times itself.
            if mode.slow {
                signal[0] += signal[at];
            }
            if mode.pair {
                let (re, im) = (signal[at], signal[at + 1]);
                signal[at] = rate.re * re + rate.im * im;
                signal[at + 1] = -rate.im * re + rate.re * im;
            } else {
                signal[at] *= rate.re;
            }
        }
    }

    /// The value of a signal from the values of the functions.
    #[must_use]
    pub fn dot(signal: &[f64], values: &[f64]) -> f64 {
        signal.iter().zip(values).map(|(a, b)| a * b).sum()
    }

    /// The size of a signal: the sum of its terms' magnitudes. A sinusoid counts for at least a thousandth of its amplitude,
    /// since near its zero its own rounding does not shrink with it.
    #[must_use]
    pub fn magnitude(&self, signal: &[f64], values: &[f64]) -> f64 {
        let sinusoids = 1..=2 * self.angular.len();
        signal
            .iter()
            .zip(values)
            .enumerate()
            .map(|(index, (a, b))| {
                let value = b.abs();
                let floor = if sinusoids.contains(&index) {
                    SINUSOID_FLOOR
                } else {
                    0.0
                };
                a.abs() * value.max(floor)
            })
            .sum()
    }
}
