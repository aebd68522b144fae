//! Propagation over a stretch of time through every change of conduction, with the derivative of the end state with
//! respect to the start state (saltation at each event) where it is asked for.

use super::conduction::{Choice, Instant, NOISE, Regimes, extend, multiply};
use super::crossing::{Search, Watched};
use super::flow::Flow;
use super::{SolverError, Work};
use crate::bounds::{EVENT_STEPS_MAXIMUM, EVENTS_PER_CYCLE_MAXIMUM};
use crate::network::{Element, Network};
use nalgebra::{DMatrix, DVector};

/// A stretch of time solved.
#[derive(Clone, Debug)]
pub struct Run {
    /// The stretches of one pattern each, in order.
    pub flows: Vec<Flow>,
    /// The full state at the end.
    pub end: Vec<f64>,
    /// Derivative of the full state at the end with respect to that at the start, where it was asked for.
    pub derivative: Option<DMatrix<f64>>,
    /// The pattern at the end.
    pub conducting: u64,
    /// Whether any diode conducted.
    pub conducted: bool,
}

/// From where and how far to propagate.
#[derive(Clone, Copy, Debug)]
pub struct Task<'a> {
    /// Absolute time at the start, in seconds from the zero crossing of the line.
    pub start: f64,
    /// Seconds to propagate.
    pub duration: f64,
    /// The full state at the start.
    pub full: &'a [f64],
    /// A pattern to look from.
    pub hint: u64,
    /// Whether the derivative is wanted.
    pub derivative: bool,
}

/// Propagates a network.
///
/// # Errors
/// A [`SolverError`] where no pattern fits, conduction chatters, or an event cannot be located.
pub fn run(regimes: &mut Regimes<'_>, task: Task<'_>, work: &mut Work) -> Result<Run, SolverError> {
    let network = regimes.network;
    let end = task.start + task.duration;
    let mut stretch = Stretch {
        time: task.start,
        full: task.full.to_vec(),
        sources: Vec::new(),
        derivative: task
            .derivative
            .then(|| DMatrix::identity(task.full.len(), task.full.len())),
        rate_before: None,
    };
    let mut flows = Vec::new();
    let mut hint = task.hint;
    let mut conducted = false;
    let diodes = network.diodes();
    work.cycles += 1;
    let mut scratch = Vec::new();
    let mut stalled = Stall::default();
    for _ in 0..EVENTS_PER_CYCLE_MAXIMUM {
        network.oscillator.at(stretch.time, &mut stretch.sources);
        let instant = Instant {
            time: stretch.time,
            full: &stretch.full,
            sources: &stretch.sources,
        };
        let choice = regimes.choose(instant, hint)?;
        work.patterns = regimes.assembled();
        let regime = regimes.get(choice.regime);
        hint = regime.pattern.conducting;
        conducted |= hint & diodes != 0;
        stretch.enter(regime, &choice);
        let mut flow = Flow::new(choice.regime, regime, stretch.time, &choice.state, &stretch.sources);
        let watched = watch(network, regime, &flow, &mut scratch);
        let left = end - stretch.time;
        let crossing = Search::new(&regime.basis, stretch.time, &watched)
            .first(stalled.skipped(network.oscillator.period()).min(left), left)
            .map_err(|_| SolverError::EventSteps {
                limit: EVENT_STEPS_MAXIMUM,
            })?;
        flow.length = crossing.map_or(left, |c| c.since);
        stalled.take(flow.length, network.oscillator.period());
        let event = crossing.map(|c| watched[c.tag].switches.trailing_zeros() as usize);
        stretch.leave(regime, &flow, network, event);
        flows.push(flow);
        let Some(crossing) = crossing else {
            return Ok(Run {
                flows,
                end: stretch.full,
                derivative: stretch.derivative,
                conducting: hint,
                conducted,
            });
        };
        work.events += 1;
        hint ^= watched[crossing.tag].switches;
        // What the event brought to zero is zero from here on, not what rounding left of it.
        stretch.full = regimes.settled(hint, &stretch.full, &stretch.sources)?;
        if stretch.time >= end {
            stretch.time = end;
        }
    }
    Err(SolverError::Chatter {
        limit: EVENTS_PER_CYCLE_MAXIMUM,
    })
}

/// Stretches shorter than this part of a cycle make no headway.
const HEADWAY: f64 = 1e-8;
/// So many of them, counted twice each and less one for each longer one, are a stall.
const STALL: u32 = 8;

/// Where conduction only grazes, its current is rounding and patterns take turns without headway. Every further turn then passes
/// over a little more time before it looks for an event, a hundred millionth of a cycle at first: what conducts there is rounding too.
#[derive(Clone, Copy, Debug, Default)]
struct Stall {
    turns: u32,
}

impl Stall {
    fn take(&mut self, length: f64, period: f64) {
        self.turns = match length / period {
            part if part < HEADWAY => self.turns + 2,
            part if part < 1e-3 => self.turns.saturating_sub(1),
            _ => 0,
        };
    }

    /// Seconds to pass over.
    fn skipped(self, period: f64) -> f64 {
        match self.turns.checked_sub(STALL) {
            None => 0.0,
            Some(extra) => 1e-8 * period * f64::from(1_u32 << extra.min(12)),
        }
    }
}

/// Slacks this near, relative to their size, are one: of diodes in series, or of opposite ones of a bridge.
const ALIKE: f64 = 1e-9;

/// The slacks worth watching: those that are not zero throughout, each once with all switches that share it.
fn watch(network: &Network, regime: &super::regime::Regime, flow: &Flow, scratch: &mut Vec<f64>) -> Vec<Watched> {
    let mut watched: Vec<Watched> = Vec::with_capacity(regime.slack.len());
    for (tag, row) in regime.slack_modal.iter().enumerate() {
        flow.signal(regime, row, scratch);
        let scale = match network.branches[network.switches[tag]].element {
            Element::Switch { .. } if regime.pattern.conducting >> tag & 1 == 1 => network.current_scale,
            _ => network.voltage_scale,
        };
        let size: f64 = scratch.iter().map(|c| c.abs()).fold(0.0, f64::max);
        if size <= 1e-13 * scale {
            continue;
        }
        let alike = |w: &&mut Watched| {
            w.signal
                .iter()
                .zip(scratch.iter())
                .all(|(a, b)| (a - b).abs() <= ALIKE * size)
        };
        if let Some(known) = watched.iter_mut().find(alike) {
            known.switches |= 1 << tag;
            continue;
        }
        watched.push(Watched {
            signal: scratch.clone(),
            switches: 1 << tag,
        });
    }
    watched
}

/// The moving end of a propagation.
struct Stretch {
    time: f64,
    full: Vec<f64>,
    sources: Vec<f64>,
    derivative: Option<DMatrix<f64>>,
    /// Rate of the full state just before the last event, and the derivative of the event's time.
    rate_before: Option<(DVector<f64>, DVector<f64>)>,
}

impl Stretch {
    /// Saltation: the state moves by the difference of its rates times the shift of the event.
    fn enter(&mut self, regime: &super::regime::Regime, choice: &Choice) {
        let Some(derivative) = &mut self.derivative else { return };
        if let Some((before, shift)) = self.rate_before.take() {
            let extended = extend(&choice.state, &self.sources);
            let after = DVector::from_vec(multiply(&regime.expand_rate, &extended));
            *derivative += (before - after) * shift.transpose();
        }
    }

    fn leave(&mut self, regime: &super::regime::Regime, flow: &Flow, network: &Network, event: Option<usize>) {
        let state = flow.state(regime, flow.length);
        self.time += flow.length;
        network.oscillator.at(self.time, &mut self.sources);
        let extended = extend(&state, &self.sources);
        self.full = multiply(&regime.pattern.expand, &extended);
        let Some(derivative) = &mut self.derivative else { return };
        let n = regime.pattern.states;
        let inner = regime.pattern.contract.columns(0, network.full_state()) * &*derivative;
        let inner = Flow::transition(regime, flow.length) * inner;
        *derivative = regime.pattern.expand.columns(0, n) * &inner;
        let Some(switch) = event else { return };
        let slack = &regime.slack[switch];
        let rate_row = regime.pattern.derivative(network, slack);
        let rate: f64 = rate_row.iter().zip(&extended).map(|(a, b)| a * b).sum();
        let size: f64 = rate_row.iter().zip(&extended).map(|(a, b)| (a * b).abs()).sum();
        if rate.abs() <= NOISE * size || rate == 0.0 {
            return;
        }
        let gradient = DVector::from_fn(inner.ncols(), |c, _| {
            (0..n).map(|r| slack[r] * inner[(r, c)]).sum::<f64>()
        });
        let before = DVector::from_vec(multiply(&regime.expand_rate, &extended));
        self.rate_before = Some((before, gradient * (-1.0 / rate)));
    }
}
