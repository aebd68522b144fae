//! PURE: how is it wired? Elements to one linear network per conduction pattern.
//!
//! A [`Network`] is a list of branches over *Kirchhoff rows*. A row is a node, where branch currents sum to zero, or the
//! core of an ideal transformer, where ampere-turns sum to zero. With `K` the matrix of the rows, `K i = 0`, and by
//! Tellegen's theorem `v = K' p`: a node's row carries its potential, a core's row the volts per turn. An ideal
//! transformer therefore needs no branch and no approximation, and graph theory's tree and links become a basis of the
//! columns of `K` and the rest.
//!
//! [`Pattern`] reduces the network for one choice of which switches conduct to its minimal state equations.

mod build;
mod circuits;
mod pattern;
mod pattern_solve;
mod probes;

#[cfg(test)]
mod tests;

pub use build::{Builder, Node, Turns};
pub use pattern::{Pattern, Unsolvable};
pub use probes::{CapacitorProbe, ChokeProbe, DiodeProbe, OutputProbes, Probes, RailProbe, Signal};

use crate::supply::Supply;

/// What a branch is made of.
#[derive(Clone, Debug, PartialEq)]
pub enum Element {
    /// The line's electromotive force: one coefficient a row of [`Oscillator`], in volts.
    Emf(Vec<f64>),
    /// A connection without resistance.
    Wire,
    /// Ohms, more than zero.
    Resistor(f64),
    /// Henries, more than zero.
    Inductor(f64),
    /// Farads, more than zero.
    Capacitor(f64),
    /// Amperes, constant, more than zero.
    CurrentSource(f64),
    /// Carries no current; its voltage is read. Where it is all that defines a potential, the potential is zero.
    Meter,
    /// Two states: conducting, with `v = threshold + slope * i` and `i >= 0`; or open, with `v <= threshold`.
    Switch {
        /// Volts, zero or more.
        threshold: f64,
        /// Ohms, zero or more.
        slope: f64,
    },
}

/// One branch of a network.
#[derive(Clone, Debug, PartialEq)]
pub struct Branch {
    /// What it is made of.
    pub element: Element,
    /// Its column of `K`: the rows it meets and with which weight. A branch from node `a` to node `b` has +1 at `a` and
    /// -1 at `b`; a winding in it adds its turns at the core's row.
    pub column: Vec<(usize, f64)>,
}

/// The time functions of the sources: `sin(k w t)` and `cos(k w t)` for each order `k`, in that order.
#[derive(Clone, Debug, PartialEq)]
pub struct Oscillator {
    /// Angular frequency of the line in radians per second.
    pub angular_frequency: f64,
    /// Orders present, the fundamental first.
    pub orders: Vec<u32>,
}

impl Oscillator {
    /// How many time functions there are.
    #[must_use]
    pub fn width(&self) -> usize {
        2 * self.orders.len()
    }

    /// Angular frequency of the `index`-th order in radians per second.
    #[must_use]
    pub fn angular(&self, index: usize) -> f64 {
        self.angular_frequency * f64::from(self.orders[index])
    }

    /// The time functions at `time` seconds.
    pub fn at(&self, time: f64, values: &mut Vec<f64>) {
        values.clear();
        for index in 0..self.orders.len() {
            let (sine, cosine) = (self.angular(index) * time).sin_cos();
            values.push(sine);
            values.push(cosine);
        }
    }

    /// The coefficients of the derivative of a function with coefficients `row`.
    #[must_use]
    pub fn derivative(&self, row: &[f64]) -> Vec<f64> {
        let mut out = vec![0.0; row.len()];
        for index in 0..self.orders.len() {
            let angular = self.angular(index);
            out[2 * index] = -angular * row[2 * index + 1];
            out[2 * index + 1] = angular * row[2 * index];
        }
        out
    }

    /// Cycle time in seconds.
    #[must_use]
    pub fn period(&self) -> f64 {
        std::f64::consts::TAU / self.angular_frequency
    }
}

/// What half a cycle does to a symmetric circuit: the state returns mirrored and the switches have changed places.
#[derive(Clone, Debug, PartialEq)]
pub struct HalfCycle {
    /// For each component of the full state, the component whose value it takes, and with which sign.
    pub state: Vec<(usize, f64)>,
    /// For each switch, the switch whose place it takes.
    pub switches: Vec<usize>,
}

/// A supply as a network, every band at its nominal value.
#[derive(Clone, Debug, PartialEq)]
pub struct Network {
    /// How many Kirchhoff rows there are.
    pub rows: usize,
    /// All branches.
    pub branches: Vec<Branch>,
    /// The time functions of the sources.
    pub oscillator: Oscillator,
    /// Indices of the switch branches.
    pub switches: Vec<usize>,
    /// Indices of the capacitor branches; their voltages are the first part of the full state.
    pub capacitors: Vec<usize>,
    /// Indices of the inductor branches; their currents are the second part of the full state.
    pub inductors: Vec<usize>,
    /// The symmetry of the circuit under half a cycle, where it has one.
    pub half_cycle: Option<HalfCycle>,
    /// A voltage each capacitor is charged towards without load, in volts: where the search starts.
    pub charge: Vec<f64>,
    /// A current that the circuit may carry, in amperes: the measure against which a current is small.
    pub current_scale: f64,
    /// A voltage that the circuit may show, in volts.
    pub voltage_scale: f64,
    /// Where to read what.
    pub probes: Probes,
}

impl Network {
    /// The network of a supply with every band at its nominal value.
    #[must_use]
    pub fn of(supply: &Supply) -> Self {
        circuits::network(supply)
    }

    /// One bit a switch that is a diode of a rectifier rather than part of a load.
    #[must_use]
    pub fn diodes(&self) -> u64 {
        let diodes = self.probes.outputs.iter().flat_map(|o| &o.diodes);
        diodes
            .filter_map(|diode| self.switches.iter().position(|&b| b == diode.branch))
            .fold(0, |bits, switch| bits | 1 << switch)
    }

    /// Length of the full state: every capacitor's voltage, then every inductor's current.
    #[must_use]
    pub fn full_state(&self) -> usize {
        self.capacitors.len() + self.inductors.len()
    }
}
