//! Means, products and Fourier coefficients of signals over a stretch of one pattern, in closed form; and their extremes.

use super::basis::{Basis, SLOW_TERMS, phi};
use super::crossing::{Search, Watched};
use super::flow::Flow;
use crate::network::Oscillator;
use nalgebra::{Complex, DMatrix};

type C = Complex<f64>;

/// A complex time function of which the basis holds the real part, the imaginary part, or both.
struct Function {
    kind: Kind,
    /// Index of the real part in the basis, where it is there.
    real: Option<usize>,
    /// Index of the imaginary part.
    imaginary: Option<usize>,
}

enum Kind {
    /// `amplitude * e^(rate t)`.
    Exponential { amplitude: C, rate: C },
    /// `(e^(rate t) - 1) / rate` with a rate too small to matter much within a cycle.
    Slow { rate: C },
}

/// The integrals of all products of the basis functions over one flow, and what Fourier coefficients need.
pub struct Integrals {
    /// Seconds.
    length: f64,
    start: f64,
    functions: Vec<Function>,
    gram: DMatrix<f64>,
}

impl Integrals {
    /// The integrals over a flow.
    #[must_use]
    pub fn new(basis: &Basis, flow: &Flow) -> Self {
        let functions = functions(basis, flow.start);
        let mut gram = DMatrix::zeros(basis.width, basis.width);
        for (index, u) in functions.iter().enumerate() {
            for v in &functions[index..] {
                let straight = product(&u.kind, &v.kind, false, flow.length);
                let conjugate = product(&u.kind, &v.kind, true, flow.length);
                let sum = 0.5 * (straight + conjugate);
                let difference = 0.5 * (straight - conjugate);
                let mut put = |a: Option<usize>, b: Option<usize>, value: f64| {
                    if let (Some(a), Some(b)) = (a, b) {
                        gram[(a, b)] = value;
                        gram[(b, a)] = value;
                    }
                };
                put(u.real, v.real, sum.re);
                put(u.imaginary, v.imaginary, -difference.re);
                put(u.real, v.imaginary, difference.im);
                put(u.imaginary, v.real, sum.im);
            }
        }
        Self {
            length: flow.length,
            start: flow.start,
            functions,
            gram,
        }
    }

    /// The integral of a signal.
    #[must_use]
    pub fn integral(&self, signal: &[f64]) -> f64 {
        signal.iter().enumerate().map(|(i, c)| c * self.gram[(0, i)]).sum()
    }

    /// The integral of the product of two signals.
    #[must_use]
    pub fn product(&self, one: &[f64], other: &[f64]) -> f64 {
        let mut sum = 0.0;
        for (i, a) in one.iter().enumerate() {
            if *a != 0.0 {
                sum += a * other
                    .iter()
                    .enumerate()
                    .map(|(j, b)| b * self.gram[(i, j)])
                    .sum::<f64>();
            }
        }
        sum
    }

    /// Adds the integrals of `signal * e^(-i k w t)` for `k` = 1, 2, ... to `out`.
    pub fn fourier(&self, signal: &[f64], oscillator: &Oscillator, out: &mut [C]) {
        let turn = C::new(0.0, -oscillator.angular_frequency);
        for function in &self.functions {
            let part = |index: Option<usize>| index.map_or(0.0, |i| signal[i]);
            let (re, im) = (part(function.real), part(function.imaginary));
            if re == 0.0 && im == 0.0 {
                continue;
            }
            // re Re(u) + im Im(u) is half of (re - i im) u and its conjugate.
            let weight = 0.5 * C::new(re, -im);
            for (index, sum) in out.iter_mut().enumerate() {
                let order = index as f64 + 1.0;
                let rate = turn * order;
                let amplitude = (rate * self.start).exp();
                let carrier = Kind::Exponential { amplitude, rate };
                let straight = product(&carrier, &function.kind, false, self.length);
                let conjugate = product(&carrier, &function.kind, true, self.length);
                *sum += weight * straight + weight.conj() * conjugate;
            }
        }
    }
}

fn functions(basis: &Basis, start: f64) -> Vec<Function> {
    let one = Function {
        kind: Kind::Exponential {
            amplitude: C::from(1.0),
            rate: C::from(0.0),
        },
        real: Some(0),
        imaginary: None,
    };
    let sources = basis.angular.iter().enumerate().map(|(index, &angular)| Function {
        kind: Kind::Exponential {
            amplitude: C::new(0.0, angular * start).exp(),
            rate: C::new(0.0, angular),
        },
        real: Some(2 + 2 * index),
        imaginary: Some(1 + 2 * index),
    });
    let modes = basis.modes.iter().map(|mode| Function {
        kind: if mode.slow {
            Kind::Slow { rate: mode.rate }
        } else {
            Kind::Exponential {
                amplitude: C::from(1.0),
                rate: mode.rate,
            }
        },
        real: Some(mode.at),
        imaginary: mode.pair.then_some(mode.at + 1),
    });
    std::iter::once(one).chain(sources).chain(modes).collect()
}

/// The integral of `u v`, or of `u` times the conjugate of `v`, from 0 to `length`.
fn product(u: &Kind, v: &Kind, conjugate: bool, length: f64) -> C {
    let turned = |z: C| if conjugate { z.conj() } else { z };
    match (u, v) {
        (Kind::Exponential { amplitude: a, rate: r }, Kind::Exponential { amplitude: b, rate: s }) => {
            a * turned(*b) * phi((r + turned(*s)) * length) * length
        }
        (Kind::Exponential { amplitude, rate }, Kind::Slow { rate: slow }) => {
            amplitude * slow_moment(turned(*slow), *rate, length)
        }
        (Kind::Slow { rate: slow }, Kind::Exponential { amplitude, rate }) => {
            turned(*amplitude) * slow_moment(*slow, turned(*rate), length)
        }
        (Kind::Slow { rate: r }, Kind::Slow { rate: s }) => slow_product(*r, turned(*s), length),
    }
}

/// Coefficients of the slow function's power series: `t + r t^2 / 2 + r^2 t^3 / 6 + ...`, from the first power on.
fn slow_series(rate: C) -> [C; SLOW_TERMS] {
    let mut series = [C::from(1.0); SLOW_TERMS];
    for k in 1..SLOW_TERMS {
        series[k] = series[k - 1] * rate / (k as f64 + 1.0);
    }
    series
}

/// The integral of a slow function times `e^(rate t)`.
fn slow_moment(slow: C, rate: C, length: f64) -> C {
    let moments = moments(rate, length);
    slow_series(slow).iter().zip(&moments[1..]).map(|(c, m)| c * m).sum()
}

fn slow_product(one: C, other: C, length: f64) -> C {
    let (one, other) = (slow_series(one), slow_series(other));
    let mut sum = C::from(0.0);
    for (i, a) in one.iter().enumerate() {
        for (j, b) in other.iter().enumerate() {
            let power = (i + j + 3) as f64;
            sum += a * b * length.powf(power) / power;
        }
    }
    sum
}

/// The integrals of `t^n e^(rate t)` from 0 to `length`, n = 0, 1, ...
fn moments(rate: C, length: f64) -> [C; SLOW_TERMS + 1] {
    let z = rate * length;
    let mut moments = [C::from(0.0); SLOW_TERMS + 1];
    if z.norm() < 1.0 {
        for (n, moment) in moments.iter_mut().enumerate() {
            let mut term = C::from(1.0);
            let mut sum = C::from(0.0);
            for k in 0..22 {
                sum += term / (n + k + 1) as f64;
                term *= z / (k as f64 + 1.0);
            }
            *moment = sum * length.powi(n as i32 + 1);
        }
    } else {
        // By parts upwards; what rounding grows in the high moments is weighted away by the slow function's series.
        let end = z.exp();
        moments[0] = (end - 1.0) / rate;
        for n in 1..=SLOW_TERMS {
            moments[n] = (end * length.powi(n as i32) - moments[n - 1] * n as f64) / rate;
        }
    }
    moments
}

/// Lowest and highest value of a signal.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Extremes {
    /// Lowest value.
    pub lowest: f64,
    /// Highest value.
    pub highest: f64,
}

impl Extremes {
    /// Before any value was seen.
    pub const NONE: Self = Self {
        lowest: f64::INFINITY,
        highest: f64::NEG_INFINITY,
    };

    /// Takes a value in.
    pub fn take(&mut self, value: f64) {
        self.lowest = self.lowest.min(value);
        self.highest = self.highest.max(value);
    }
}

/// Takes the extremes of a signal over a flow in: its ends, and every turning point between, located as a zero of its
/// derivative. Nothing is searched where the signal cannot leave the extremes known so far.
pub fn take_extremes(basis: &Basis, flow: &Flow, signal: &[f64], extremes: &mut Extremes) {
    let mut scratch = vec![0.0; basis.width];
    extremes.take(flow.value(basis, signal, 0.0, &mut scratch));
    extremes.take(flow.value(basis, signal, flow.length, &mut scratch));
    let mut slope = signal.to_vec();
    basis.differentiate(&mut slope);
    basis.values(flow.start, 0.0, &mut scratch);
    let quiet = 1e-12 * basis.magnitude(&slope, &scratch);
    let mut from = 0.0;
    // A signal turns a few times at most between two events; the bound only guards against rounding.
    for _ in 0..64 {
        let sign = slope_sign(basis, flow, &slope, from, quiet, &mut scratch);
        if sign == 0.0 {
            return;
        }
        let watched = [Watched {
            signal: slope.iter().map(|c| c * sign).collect(),
            switches: 0,
        }];
        let found = Search::new(basis, flow.start, &watched).first(from, flow.length);
        let Ok(Some(turn)) = found else { return };
        extremes.take(flow.value(basis, signal, turn.since, &mut scratch));
        from = turn.since + 1e-9 * flow.length;
        if from >= flow.length {
            return;
        }
    }
}

/// The sign a slope has just after `from`: of the first of its derivatives that is not rounding.
fn slope_sign(basis: &Basis, flow: &Flow, slope: &[f64], from: f64, quiet: f64, scratch: &mut [f64]) -> f64 {
    let mut derivative = slope.to_vec();
    for order in 0..3 {
        basis.values(flow.start + from, from, scratch);
        let value = Basis::dot(&derivative, scratch);
        let floor = if order == 0 {
            quiet
        } else {
            1e-12 * basis.magnitude(&derivative, scratch)
        };
        if value.abs() > floor {
            return value.signum();
        }
        basis.differentiate(&mut derivative);
    }
    0.0
}
