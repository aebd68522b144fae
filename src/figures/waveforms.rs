//! Samples of one cycle for plots.

use super::compute::value;
use crate::network::{Network, Signal};
use crate::solver::periodic::Periodic;

/// One cycle of the line, sampled from zero crossing to zero crossing.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Waveforms {
    /// Seconds from the zero crossing of the line, both ends included.
    pub time: Vec<f64>,
    /// Volts, one list a rail, output by output.
    pub rails: Vec<Vec<f64>>,
    /// Amperes, one list a diode, output by output.
    pub diodes: Vec<Vec<f64>>,
    /// Amperes, phase 1.
    pub line_current: Vec<f64>,
}

/// Samples the solution at `points` equally spaced times.
#[must_use]
pub fn waveforms(network: &Network, periodic: &Periodic<'_>, points: usize) -> Waveforms {
    let probes = &network.probes;
    let rails: Vec<&Signal> = probes
        .outputs
        .iter()
        .flat_map(|o| &o.rails)
        .map(|r| &r.voltage)
        .collect();
    let currents: Vec<Signal> = probes
        .outputs
        .iter()
        .flat_map(|o| &o.diodes)
        .map(|d| Signal::current(d.branch))
        .collect();
    let period = network.oscillator.period();
    let time: Vec<f64> = (0..points)
        .map(|k| period * k as f64 / (points.max(2) - 1) as f64)
        .collect();
    let sample = |signal: &Signal| sampled(periodic, signal, &time, period);
    Waveforms {
        rails: rails.into_iter().map(sample).collect(),
        diodes: currents.iter().map(sample).collect(),
        line_current: probes.line_currents.first().map(sample).unwrap_or_default(),
        time,
    }
}

fn sampled(periodic: &Periodic<'_>, signal: &Signal, time: &[f64], period: f64) -> Vec<f64> {
    let flows: Vec<_> = periodic
        .run
        .flows
        .iter()
        .map(|flow| {
            let regime = periodic.regimes.get(flow.regime);
            let mut coefficients = Vec::new();
            flow.signal(regime, &regime.modal(&regime.signal(signal)), &mut coefficients);
            (flow, regime, coefficients)
        })
        .collect();
    let end = periodic.start + period;
    time.iter()
        .map(|&t| {
            let t = if t >= end { t - period } else { t };
            let found = flows.iter().rev().find(|(flow, ..)| flow.start <= t).or(flows.first());
            found.map_or(0.0, |(flow, regime, coefficients)| {
                value(&regime.basis, flow, coefficients, (t - flow.start).max(0.0))
            })
        })
        .collect()
}
