//! The first zero of a set of signals, with none stepped over.
//!
//! Over a step each signal is bounded from below by its Taylor polynomial of third order with a bound on the fourth
//! derivative, written in Bernstein form (a polynomial whose Bernstein coefficients are all positive is positive); modes
//! too fast for the step are bounded by their envelope instead. A step is taken only where every signal is proven positive,
//! or proven to fall through zero once; anything else halves it. The zero itself is found by Newton's method kept inside
//! its bracket.

use super::basis::Basis;
use crate::bounds::EVENT_STEPS_MAXIMUM;

/// Modes that turn by more than this within a step are bounded by their envelope.
const ENVELOPE: f64 = 1.5;
/// The order of the polynomial, plus one.
const TERMS: usize = 4;
/// At the start, a derivative this far below the sum of its terms' magnitudes is rounding.
const NOISE: f64 = 1e-11;
/// Rounding of a coefficient, of the largest coefficient.
const ROUNDING: f64 = 1e-14;

/// A signal that must stay positive.
#[derive(Clone, Debug)]
pub struct Watched {
    /// Coefficients over the basis.
    pub signal: Vec<f64>,
    /// One bit a switch whose slack it is.
    pub switches: u64,
}

/// Where the first zero is.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Crossing {
    /// Seconds since the pattern began.
    pub since: f64,
    /// Index of the signal that falls through zero.
    pub tag: usize,
}

/// The search gave up.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct StepsExhausted;

/// A stretch of time being searched.
pub struct Search<'a> {
    basis: &'a Basis,
    /// Absolute time at which the pattern began.
    start: f64,
    /// Derivatives of the signals: `[signal][order]`, coefficients over the basis.
    derivatives: Vec<[Vec<f64>; TERMS]>,
    watched: &'a [Watched],
    scratch: Vec<f64>,
}

enum Verdict {
    Positive,
    FallsOnce,
    Unknown,
}

impl<'a> Search<'a> {
    /// A search over `watched` in a pattern that began at `start`.
    #[must_use]
    pub fn new(basis: &'a Basis, start: f64, watched: &'a [Watched]) -> Self {
        let derivatives = watched
            .iter()
            .map(|w| {
                let zeroth = w.signal.clone();
                let next = |signal: &[f64]| {
                    let mut signal = signal.to_vec();
                    basis.differentiate(&mut signal);
                    signal
                };
                let first = next(&zeroth);
                let second = next(&first);
                let third = next(&second);
                [zeroth, first, second, third]
            })
            .collect();
        Self {
            basis,
            start,
            derivatives,
            watched,
            scratch: vec![0.0; basis.width],
        }
    }

    /// The first zero after `from` and not after `to`, both in seconds since the pattern began.
    ///
    /// # Errors
    /// [`StepsExhausted`] after the bound on steps.
    pub fn first(&mut self, from: f64, to: f64) -> Result<Option<Crossing>, StepsExhausted> {
        if self.watched.is_empty() {
            return Ok(None);
        }
        let smallest = 4.0 * f64::EPSILON * (self.start.abs() + to);
        let mut here = from;
        let mut step = to - from;
        for _ in 0..EVENT_STEPS_MAXIMUM {
            if here >= to {
                return Ok(None);
            }
            let last = step >= to - here;
            let there = if last { to } else { here + step };
            match self.judge(here, there, here == from) {
                Judgement::AllPositive => {
                    here = there;
                    step *= 4.0;
                }
                Judgement::Crossings(tags) => {
                    let first = tags
                        .into_iter()
                        .map(|index| Crossing {
                            since: self.refine(index, here, there),
                            tag: index,
                        })
                        .min_by(|a, b| a.since.total_cmp(&b.since));
                    return Ok(first);
                }
                Judgement::Unknown(index) => {
                    step = 0.5 * (there - here);
                    if step <= smallest {
                        // Touches zero within rounding: an event in its own right, for the caller to judge.
                        return Ok(Some(Crossing {
                            since: there,
                            tag: index,
                        }));
                    }
                }
            }
        }
        Err(StepsExhausted)
    }

    fn judge(&mut self, here: f64, there: f64, at_start: bool) -> Judgement {
        let mut scratch = std::mem::take(&mut self.scratch);
        self.basis.values(self.start + here, here, &mut scratch);
        let mut crossings = Vec::new();
        let mut judgement = None;
        for index in 0..self.watched.len() {
            match self.verdict(index, &scratch, here, there, at_start) {
                Verdict::Positive => {}
                Verdict::FallsOnce => crossings.push(index),
                Verdict::Unknown => {
                    judgement = Some(Judgement::Unknown(index));
                    break;
                }
            }
        }
        self.scratch = scratch;
        judgement.unwrap_or(if crossings.is_empty() {
            Judgement::AllPositive
        } else {
            Judgement::Crossings(crossings)
        })
    }

    /// What can be proven of one signal over `[here, there]`; `values` are the functions at `here`.
    fn verdict(&self, index: usize, values: &[f64], here: f64, there: f64, at_start: bool) -> Verdict {
        let h = there - here;
        let envelope = self.envelope(index, here, h);
        let mut c = [0.0; TERMS];
        for (order, value) in c.iter_mut().enumerate() {
            let signal = &self.derivatives[index][order];
            *value = self.smooth_dot(signal, values, h);
        }
        let noise = if at_start {
            self.noise(index, values)
        } else {
            [0.0; TERMS]
        };
        if at_start && !envelope.any {
            // What rounding left of a derivative that is zero must not be taken for its sign.
            for (value, noise) in c.iter_mut().zip(noise) {
                if value.abs() > noise {
                    break;
                }
                *value = 0.0;
            }
        }
        let r = envelope.fourth;
        let bernstein = [
            c[0],
            c[0] + c[1] * h / 4.0,
            c[0] + c[1] * h / 2.0 + c[2] * h * h / 12.0,
            c[0] + 0.75 * c[1] * h + 0.25 * c[2] * h * h + c[3] * h.powi(3) / 24.0,
            c[0] + c[1] * h + 0.5 * c[2] * h * h + c[3] * h.powi(3) / 6.0 - r * h.powi(4) / 24.0,
        ];
        if bernstein.iter().all(|b| b + envelope.lowest >= -noise[0])
            && (at_start || bernstein[4] + envelope.lowest > 0.0)
        {
            return Verdict::Positive;
        }
        let slope = [
            c[1],
            c[1] + c[2] * h / 3.0,
            c[1] + 2.0 * c[2] * h / 3.0 + c[3] * h * h / 6.0,
            c[1] + c[2] * h + 0.5 * c[3] * h * h + r * h.powi(3) / 6.0,
        ];
        if slope.iter().all(|d| d + envelope.steepest < 0.0) {
            let end = bernstein[4] + r * h.powi(4) / 12.0 + envelope.highest;
            if end < 0.0 || self.value_at(index, there) <= 0.0 {
                return Verdict::FallsOnce;
            }
            return Verdict::Positive;
        }
        Verdict::Unknown
    }

    /// What of a signal and its derivatives may be rounding at the start: a part of their terms' magnitudes, and, since a mode's
    /// coefficient is as uncertain as the largest, a part of that at the rate of the fastest.
    fn noise(&self, index: usize, values: &[f64]) -> [f64; TERMS] {
        let modes = self.basis.modes.iter().map(|m| m.rate.norm());
        let fastest = modes.chain(self.basis.angular.iter().copied()).fold(0.0, f64::max);
        let derivatives = &self.derivatives[index];
        let largest = derivatives[0].iter().fold(0.0_f64, |m, c| m.max(c.abs()));
        let mut rounding = ROUNDING * largest;
        std::array::from_fn(|order| {
            let noise = NOISE * self.basis.magnitude(&derivatives[order], values) + rounding;
            rounding *= fastest;
            noise
        })
    }

    fn value_at(&self, index: usize, since: f64) -> f64 {
        let mut values = vec![0.0; self.basis.width];
        self.basis.values(self.start + since, since, &mut values);
        Basis::dot(&self.derivatives[index][0], &values)
    }

    /// The dot product without the modes that are bounded by their envelope over a step `h`.
    fn smooth_dot(&self, signal: &[f64], values: &[f64], h: f64) -> f64 {
        let first = self.basis.modes.first().map_or(self.basis.width, |m| m.at);
        let mut sum: f64 = (0..first).map(|i| signal[i] * values[i]).sum();
        for mode in &self.basis.modes {
            if mode.slow || mode.rate.norm() * h <= ENVELOPE {
                sum += signal[mode.at] * values[mode.at];
                if mode.pair {
                    sum += signal[mode.at + 1] * values[mode.at + 1];
                }
            }
        }
        sum
    }

    fn envelope(&self, index: usize, here: f64, h: f64) -> Envelope {
        let signal = &self.derivatives[index][0];
        let mut envelope = Envelope::default();
        for (k, &angular) in self.basis.angular.iter().enumerate() {
            envelope.fourth += signal[1 + 2 * k].hypot(signal[2 + 2 * k]) * angular.powi(4);
        }
        for mode in &self.basis.modes {
            let size = if mode.pair {
                signal[mode.at].hypot(signal[mode.at + 1])
            } else {
                signal[mode.at].abs()
            };
            let rate = mode.rate.norm();
            let growth = |since: f64| (mode.rate.re * since).exp();
            let largest = size * growth(here).max(growth(here + h));
            if mode.slow {
                envelope.fourth += largest * rate.powi(3);
            } else if rate * h <= ENVELOPE {
                envelope.fourth += largest * rate.powi(4);
            } else {
                envelope.any = true;
                envelope.steepest += largest * rate;
                if mode.pair {
                    envelope.lowest -= largest;
                    envelope.highest += largest;
                } else {
                    let (a, b) = (signal[mode.at] * growth(here), signal[mode.at] * growth(here + h));
                    envelope.lowest += a.min(b);
                    envelope.highest += a.max(b);
                    let slope = signal[mode.at] * mode.rate.re;
                    envelope.steepest -= largest * rate;
                    envelope.steepest += (slope * growth(here)).max(slope * growth(here + h));
                }
            }
        }
        envelope
    }

    /// The zero of a signal that falls through it once between `low` and `high`.
    fn refine(&mut self, index: usize, mut low: f64, mut high: f64) -> f64 {
        let mut scratch = std::mem::take(&mut self.scratch);
        let [zeroth, first, ..] = &self.derivatives[index];
        let mut at = 0.5 * (low + high);
        for _ in 0..100 {
            self.basis.values(self.start + at, at, &mut scratch);
            let (value, slope) = (Basis::dot(zeroth, &scratch), Basis::dot(first, &scratch));
            if value > 0.0 {
                low = at;
            } else {
                high = at;
            }
            let newton = at - value / slope;
            let close = 2.0 * f64::EPSILON * (self.start.abs() + at);
            if (newton - at).abs() <= close || high - low <= close {
                break;
            }
            at = if newton > low && newton < high {
                newton
            } else {
                0.5 * (low + high)
            };
        }
        self.scratch = scratch;
        at
    }
}

enum Judgement {
    AllPositive,
    Crossings(Vec<usize>),
    Unknown(usize),
}

/// Bounds over a step on what the polynomial leaves out.
#[derive(Clone, Copy, Debug, Default)]
struct Envelope {
    /// Largest fourth derivative of the smooth part.
    fourth: f64,
    /// Lowest and highest value of the fast modes' sum.
    lowest: f64,
    highest: f64,
    /// Largest slope of the fast modes' sum.
    steepest: f64,
    /// Whether there are fast modes.
    any: bool,
}
