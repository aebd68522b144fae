//! The periodic steady state by shooting (Aprille and Trick 1972; Skelboe 1980).
//!
//! Newton's method on the cycle map, with its exact derivative; on the half-cycle map where the circuit is symmetric. A step
//! that does not bring the state closer is halved; where that fails the circuit is marched for a while and Newton tries
//! again. The search ends: with a periodic state, or with its budget.

use super::conduction::Regimes;
use super::cycle::{Run, Task, run};
use super::{SolverError, Work};
use crate::bounds::{CYCLES_MAXIMUM, EVENTS_MAXIMUM};
use crate::network::Network;
use nalgebra::{DMatrix, DVector};

/// Relative residual and step at which the state counts as periodic.
const TOLERANCE: f64 = 1e-12;
/// A residual no better than this after rounding has set in is still accepted.
const ACCEPTABLE: f64 = 1e-9;
/// The cycle is taken to begin this fraction before the line's zero crossing, where no circuit changes conduction by
/// symmetry alone.
const BEFORE_ZERO: f64 = 0.03;
/// A cycle in which no diode conducts tells nothing of the charge that it settles at (without a load it even repeats
/// itself): the search begins below that, lowering its guess by this factor at most so many times.
const IDLE_FACTOR: f64 = 0.93;
const IDLE_STEPS: usize = 60;
/// Largest change of a capacitor's voltage in one Newton step, of the largest rail voltage: where conduction only grazes the
/// crest the derivative says nothing of what lies further down.
const CHARGE_STEP: f64 = 0.3;
/// Halvings of one Newton step.
const HALVINGS: usize = 6;

/// A periodic steady state.
#[derive(Debug)]
pub struct Periodic<'a> {
    /// The patterns that occur in it.
    pub regimes: Regimes<'a>,
    /// One whole cycle.
    pub run: Run,
    /// Absolute time at its beginning.
    pub start: f64,
    /// The full state at its beginning.
    pub full: Vec<f64>,
    /// Relative change of the state over the cycle.
    pub residual: f64,
    /// What it cost.
    pub work: Work,
}

struct Shooting<'a> {
    regimes: Regimes<'a>,
    work: Work,
    start: f64,
    duration: f64,
    hint: u64,
    half: bool,
}

struct Shot {
    /// Change of the state over the (half) cycle, mirrored where it is a half.
    change: DVector<f64>,
    derivative: Option<DMatrix<f64>>,
    residual: f64,
    conducted: bool,
}

/// Finds the periodic steady state of a network.
///
/// # Errors
/// A [`SolverError`] with the reason where there is none within the budget.
pub fn solve(network: &Network) -> Result<Periodic<'_>, SolverError> {
    let mut full = network.charge.clone();
    full.resize(network.full_state(), 0.0);
    solve_from(network, &full)
}

/// Finds the periodic steady state, searching from a full state such as a neighbour's.
///
/// # Errors
/// As [`solve`].
pub fn solve_from<'a>(network: &'a Network, guess: &[f64]) -> Result<Periodic<'a>, SolverError> {
    let period = network.oscillator.period();
    let half = network.half_cycle.is_some();
    let mut shooting = Shooting {
        regimes: Regimes::new(network),
        work: Work::default(),
        start: -BEFORE_ZERO * period,
        duration: if half { 0.5 * period } else { period },
        hint: 0,
        half,
    };
    let full = shooting.newton(DVector::from_column_slice(guess))?;
    shooting.finish(full)
}

impl<'a> Shooting<'a> {
    fn shoot(&mut self, full: &DVector<f64>, derivative: bool) -> Result<Shot, SolverError> {
        let task = Task {
            start: self.start,
            duration: self.duration,
            full: full.as_slice(),
            hint: self.hint,
            derivative,
        };
        let run = run(&mut self.regimes, task, &mut self.work)?;
        let network = self.regimes.network;
        let mut end = DVector::from_vec(run.end);
        let mut derivative = run.derivative;
        if let Some(mirror) = network.half_cycle.as_ref().filter(|_| self.half) {
            let plain = end.clone();
            for (index, &(from, sign)) in mirror.state.iter().enumerate() {
                end[index] = sign * plain[from];
            }
            derivative = derivative.map(|d| {
                let mut out = d.clone();
                for (index, &(from, sign)) in mirror.state.iter().enumerate() {
                    out.row_mut(index).copy_from(&(d.row(from) * sign));
                }
                out
            });
        }
        let change = end - full;
        let residual = self.size(&change, full);
        Ok(Shot {
            change,
            derivative,
            residual,
            conducted: run.conducted,
        })
    }

    /// The largest component relative to its scale.
    fn size(&self, change: &DVector<f64>, full: &DVector<f64>) -> f64 {
        let network = self.regimes.network;
        let capacitors = network.capacitors.len();
        let current = full.rows(capacitors, full.len() - capacitors).amax();
        change
            .iter()
            .enumerate()
            .map(|(index, value)| {
                let scale = if index < capacitors {
                    network.voltage_scale
                } else {
                    network.current_scale.max(current)
                };
                value.abs() / scale
            })
            .fold(0.0, f64::max)
    }

    fn newton(&mut self, mut full: DVector<f64>) -> Result<DVector<f64>, SolverError> {
        if full.is_empty() {
            return Ok(full);
        }
        let mut best: Option<(f64, DVector<f64>)> = None;
        let mut marches = 0;
        let mut shot = self.shoot(&full, true)?;
        for _ in 0..IDLE_STEPS {
            if shot.conducted {
                break;
            }
            full *= IDLE_FACTOR;
            shot = self.shoot(&full, true)?;
        }
        while self.work.cycles < CYCLES_MAXIMUM && self.work.events < EVENTS_MAXIMUM {
            self.work.iterations += 1;
            if best.as_ref().is_none_or(|(residual, _)| shot.residual < *residual) {
                best = Some((shot.residual, full.clone()));
            }
            let correction = shot.derivative.as_ref().map(Correction::new);
            let step = correction.as_ref().and_then(|c| c.step(&shot.change));
            let (Some(correction), Some(step)) = (correction, step) else {
                (full, shot) = self.march(full, 20)?;
                continue;
            };
            let length = self.size(&step, &full);
            if shot.residual <= TOLERANCE && length <= 100.0 * TOLERANCE {
                return Ok(full + step);
            }
            match self.damped(&full, &correction, &step, &shot)? {
                Some((next, taken)) => {
                    let stalled = taken.residual > 0.5 * shot.residual;
                    (full, shot) = (next, taken);
                    if stalled && shot.residual <= ACCEPTABLE * 1e-2 && length <= ACCEPTABLE {
                        return Ok(full);
                    }
                }
                None if shot.residual <= ACCEPTABLE && length <= 1e3 * ACCEPTABLE => return Ok(full),
                None => {
                    marches += 1;
                    (full, shot) = self.march(full, 5 * marches)?;
                }
            }
        }
        match best {
            Some((residual, full)) if residual <= ACCEPTABLE => Ok(full),
            best => Err(SolverError::NotPeriodic {
                cycles: self.work.cycles,
                residual: best.map_or(f64::INFINITY, |(residual, _)| residual),
            }),
        }
    }

    /// A Newton step, halved until it brings the state closer: until the next step, by the same derivative, is shorter.
    /// That measure weighs slow charges and fast currents alike, whatever their time constants (Deuflhard 2004).
    fn damped(
        &mut self,
        full: &DVector<f64>,
        correction: &Correction,
        step: &DVector<f64>,
        shot: &Shot,
    ) -> Result<Option<(DVector<f64>, Shot)>, SolverError> {
        let network = self.regimes.network;
        let length = self.size(step, full);
        let charge = step.rows(0, network.capacitors.len()).amax() / network.voltage_scale;
        let mut factor = if charge > CHARGE_STEP {
            CHARGE_STEP / charge
        } else {
            1.0
        };
        for _ in 0..HALVINGS {
            let next = full + step * factor;
            if let Ok(taken) = self.shoot(&next, true) {
                // A cycle without conduction repeats itself at any charge: not the state that was looked for.
                let idle = !taken.conducted && shot.conducted;
                let next_step = correction.step(&taken.change);
                let shorter = next_step.is_some_and(|s| self.size(&s, full) < (1.0 - 0.25 * factor) * length);
                if !idle && (shorter || taken.residual <= TOLERANCE) {
                    return Ok(Some((next, taken)));
                }
            }
            factor *= 0.5;
        }
        Ok(None)
    }

    fn march(&mut self, mut full: DVector<f64>, cycles: usize) -> Result<(DVector<f64>, Shot), SolverError> {
        for _ in 0..cycles {
            if self.work.events >= EVENTS_MAXIMUM {
                break;
            }
            let shot = self.shoot(&full, false)?;
            full += shot.change;
        }
        let shot = self.shoot(&full, true)?;
        Ok((full, shot))
    }

    fn finish(mut self, full: DVector<f64>) -> Result<Periodic<'a>, SolverError> {
        self.half = false;
        self.duration = self.regimes.network.oscillator.period();
        let task = Task {
            start: self.start,
            duration: self.duration,
            full: full.as_slice(),
            hint: self.hint,
            derivative: false,
        };
        let run = run(&mut self.regimes, task, &mut self.work)?;
        let change = DVector::from_column_slice(&run.end) - &full;
        let residual = if full.is_empty() {
            0.0
        } else {
            self.size(&change, &full)
        };
        Ok(Periodic {
            regimes: self.regimes,
            run,
            start: self.start,
            full: full.as_slice().to_vec(),
            residual,
            work: self.work,
        })
    }
}

/// Newton's correction by one derivative `D` of the cycle map: `(1 - D) step = change`.
struct Correction {
    factors: nalgebra::LU<f64, nalgebra::Dyn, nalgebra::Dyn>,
}

impl Correction {
    fn new(derivative: &DMatrix<f64>) -> Self {
        let n = derivative.nrows();
        Self {
            factors: (DMatrix::identity(n, n) - derivative).lu(),
        }
    }

    fn step(&self, change: &DVector<f64>) -> Option<DVector<f64>> {
        let step = self.factors.solve(change)?;
        step.iter().all(|v| v.is_finite()).then_some(step)
    }
}
