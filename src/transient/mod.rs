//! PURE: what happens at switch-on, in a dip, at disconnection? So far: the largest diode currents at switch-on.

#[cfg(test)]
mod tests;

use crate::network::{Network, Signal, Unsolvable};
use crate::solver::conduction::Regimes;
use crate::solver::cycle::{Task, run};
use crate::solver::integral::{Extremes, take_extremes};
use crate::solver::{SolverError, Work};

/// Angles of the line at which switch-on is tried before the worst is narrowed down.
const ANGLES: usize = 24;
/// Golden-section steps that narrow the worst angle down: to a thousandth of the spacing.
const NARROWING: usize = 14;
/// A capacitor that has moved this far, of the largest rail voltage, in no time at all was charged by an impulse.
const IMPULSE: f64 = 1e-6;

/// The largest current of any diode of each output at switch-on, every capacitor and inductor empty, at the worst angle of
/// the line; in amperes. Infinite where nothing limits it.
///
/// # Errors
/// A [`SolverError`] where a run fails.
pub fn switch_on_surge(network: &Network) -> Result<Vec<f64>, SolverError> {
    let mut regimes = Regimes::new(network);
    let outputs = network.probes.outputs.len();
    let mut peaks = vec![0.0_f64; outputs];
    let mut table = Vec::with_capacity(ANGLES);
    for index in 0..ANGLES {
        let found = first_cycle(&mut regimes, index as f64 / ANGLES as f64)?;
        for (peak, value) in peaks.iter_mut().zip(&found) {
            *peak = peak.max(*value);
        }
        table.push(found);
    }
    if peaks.iter().any(|peak| peak.is_infinite()) {
        return Ok(peaks);
    }
    for (output, peak) in peaks.iter_mut().enumerate() {
        let best = (0..ANGLES)
            .max_by(|&a, &b| table[a][output].total_cmp(&table[b][output]))
            .unwrap_or(0);
        let narrowed = narrow(best as f64, |angle| {
            first_cycle(&mut regimes, angle / ANGLES as f64).map(|found| found[output])
        })?;
        *peak = peak.max(narrowed);
    }
    Ok(peaks)
}

/// Golden-section search for a maximum within one grid step on either side of `centre`.
fn narrow(centre: f64, mut value: impl FnMut(f64) -> Result<f64, SolverError>) -> Result<f64, SolverError> {
    let golden = 0.5 * (5.0_f64.sqrt() - 1.0);
    let (mut low, mut high) = (centre - 1.0, centre + 1.0);
    let (mut a, mut b) = (high - golden * (high - low), low + golden * (high - low));
    let (mut at_a, mut at_b) = (value(a)?, value(b)?);
    let mut best = at_a.max(at_b);
    for _ in 0..NARROWING {
        if at_a > at_b {
            (high, b, at_b) = (b, a, at_a);
            a = high - golden * (high - low);
            at_a = value(a)?;
        } else {
            (low, a, at_a) = (a, b, at_b);
            b = low + golden * (high - low);
            at_b = value(b)?;
        }
        best = best.max(at_a).max(at_b);
    }
    Ok(best)
}

/// The largest diode current of each output in the first cycle after switch-on at a fraction of the line's cycle.
fn first_cycle(regimes: &mut Regimes<'_>, fraction: f64) -> Result<Vec<f64>, SolverError> {
    let network = regimes.network;
    let period = network.oscillator.period();
    let empty = vec![0.0; network.full_state()];
    let task = Task {
        start: fraction.rem_euclid(1.0) * period,
        duration: period,
        full: &empty,
        hint: 0,
        derivative: false,
    };
    let outputs = &network.probes.outputs;
    let run = match run(regimes, task, &mut Work::default()) {
        // An empty capacitor across a source without impedance: no finite current satisfies the diodes.
        Err(SolverError::NoConduction {
            reason: Unsolvable::ShortedSource,
            ..
        }) => return Ok(vec![f64::INFINITY; outputs.len()]),
        other => other?,
    };
    if run.flows.first().is_some_and(|flow| charged_at_once(regimes, flow)) {
        return Ok(vec![f64::INFINITY; outputs.len()]);
    }
    let mut peaks = Vec::with_capacity(outputs.len());
    let mut coefficients = Vec::new();
    for output in outputs {
        let mut extremes = Extremes::NONE;
        for diode in &output.diodes {
            for flow in run.flows.iter().filter(|flow| flow.length > 0.0) {
                let regime = regimes.get(flow.regime);
                let row = regime.modal(&regime.signal(&Signal::current(diode.branch)));
                flow.signal(regime, &row, &mut coefficients);
                take_extremes(&regime.basis, flow, &coefficients, &mut extremes);
            }
        }
        peaks.push(extremes.highest.max(0.0));
    }
    Ok(peaks)
}

/// Whether a capacitor that was empty is not so at the very beginning: nothing limited the current.
fn charged_at_once(regimes: &Regimes<'_>, flow: &crate::solver::flow::Flow) -> bool {
    let network = regimes.network;
    let regime = regimes.get(flow.regime);
    network.capacitors.iter().any(|&branch| {
        let mut coefficients = Vec::new();
        flow.signal(
            regime,
            &regime.modal(&regime.signal(&Signal::voltage(branch))),
            &mut coefficients,
        );
        let volts = flow.value(&regime.basis, &coefficients, 0.0, &mut vec![0.0; regime.basis.width]);
        volts.abs() > IMPULSE * network.voltage_scale
    })
}
