//! A rail: filter sections and the load behind them.

use super::impedance;
use crate::network::Element;
use crate::network::build::{Builder, Node};
use crate::network::probes::{CapacitorProbe, ChokeProbe, RailProbe, Signal};
use crate::supply::{Capacitor, Load, Rail};

/// A rail laid into the network.
#[derive(Debug)]
pub(super) struct Laid {
    pub(super) probe: RailProbe,
    /// Section index and probe.
    pub(super) capacitors: Vec<(usize, CapacitorProbe)>,
    /// Section index and probe.
    pub(super) chokes: Vec<(usize, ChokeProbe)>,
    /// Branches of series resistances.
    pub(super) resistors: Vec<usize>,
    /// Capacitor branch and the voltage it is charged towards.
    pub(super) charge: Vec<(usize, f64)>,
    /// Current the load would draw at the voltage without load, in amperes.
    pub(super) current: f64,
}

/// A bank of capacitors laid into the network.
#[derive(Debug)]
pub(super) struct Bank {
    /// Capacitor first, then its loss resistance where it has one.
    pub(super) branches: Vec<usize>,
    pub(super) probe: CapacitorProbe,
}

/// Lays a bank as one capacitor: `count` times the capacitance behind a `count`-th of the loss resistance.
pub(super) fn lay_bank(builder: &mut Builder, (from, to): (Node, Node), bank: &Capacitor) -> Bank {
    let count = f64::from(bank.count);
    let esr = bank.esr.nominal() / count;
    let mut elements = vec![Element::Capacitor(bank.capacitance.nominal() * count)];
    elements.extend(impedance(esr, 0.0));
    let branches = builder.series(from, to, None, elements);
    let voltage = branches
        .iter()
        .map(|&b| Signal::voltage(b))
        .reduce(Signal::plus)
        .unwrap_or_default();
    let probe = CapacitorProbe {
        name: String::new(),
        pointer: String::new(),
        current: Signal::current(branches[0]),
        voltage,
        esr,
    };
    Bank { branches, probe }
}

/// Lays a rail between its rectifier's terminals.
pub(super) fn lay_rail(builder: &mut Builder, (positive, negative): (Node, Node), rail: &Rail, crest: f64) -> Laid {
    let mut laid = Laid {
        probe: RailProbe {
            voltage: Signal::default(),
            current: Signal::default(),
        },
        capacitors: Vec::new(),
        chokes: Vec::new(),
        resistors: Vec::new(),
        charge: Vec::new(),
        current: 0.0,
    };
    // A choke-input filter settles near the mean of the rectified wave, any other near its crest.
    let choke_input = rail
        .filter
        .first()
        .and_then(|s| s.series.as_ref())
        .is_some_and(|s| s.inductance.nominal() > 0.0);
    let settled = if choke_input { 0.6 * crest } else { crest };
    let mut here = positive;
    for (index, section) in rail.filter.iter().enumerate() {
        if let Some(series) = &section.series {
            let elements = impedance(series.resistance.nominal(), series.inductance.nominal());
            if !elements.is_empty() {
                let has_choke = series.inductance.nominal() > 0.0;
                let has_resistance = series.resistance.nominal() > 0.0;
                let next = builder.node();
                let branches = builder.series(here, next, None, elements);
                if has_resistance {
                    laid.resistors.push(branches[0]);
                }
                if has_choke {
                    laid.chokes.push((index, choke(branches[0])));
                }
                here = next;
            }
        }
        if let Some(capacitor) = &section.capacitor {
            let bank = lay_bank(builder, (here, negative), capacitor);
            laid.charge.push((bank.branches[0], settled));
            laid.capacitors.push((index, bank.probe));
        }
    }
    lay_load(builder, (here, negative), &rail.load, crest, &mut laid);
    laid
}

fn choke(branch: usize) -> ChokeProbe {
    ChokeProbe {
        name: String::new(),
        pointer: String::new(),
        current: Signal::current(branch),
    }
}

fn lay_load(builder: &mut Builder, (positive, negative): (Node, Node), load: &Load, crest: f64, laid: &mut Laid) {
    match load {
        Load::Resistance { resistance } => {
            let ohms = resistance.nominal();
            let branch = builder.branch(positive, negative, Element::Resistor(ohms));
            laid.probe.voltage = Signal::voltage(branch);
            laid.probe.current = Signal::current(branch);
            laid.current = crest / ohms;
        }
        Load::Current { current } => {
            lay_sink(builder, (positive, negative), current.nominal(), crest, laid);
        }
        Load::Regulator {
            output_voltage,
            output_current,
            dropout,
            quiescent_current,
        } => {
            lay_sink(builder, (positive, negative), quiescent_current.nominal(), crest, laid);
            let amperes = output_current.nominal();
            if amperes > 0.0 {
                let element = Element::Switch {
                    threshold: dropout.nominal(),
                    slope: output_voltage.nominal() / amperes,
                };
                let inside = builder.node();
                let pass = builder.branch(positive, inside, element);
                builder.branch(inside, negative, Element::CurrentSource(amperes));
                builder.branch(negative, inside, freewheel(crest));
                laid.probe.current = std::mem::take(&mut laid.probe.current).plus(Signal::current(pass));
                laid.current += amperes;
            }
        }
        Load::Open => lay_sink(builder, (positive, negative), 0.0, crest, laid),
    }
    if laid.current == 0.0 {
        lay_leak(builder, (positive, negative), laid);
    }
}

/// Keeps a current source from pulling its terminals below zero: there it feeds itself. Its threshold, far below what any
/// figure shows, lets diodes go first that hold the rail at zero themselves, as they do while ideal ones commutate.
fn freewheel(crest: f64) -> Element {
    Element::Switch {
        threshold: 1e-12 * crest,
        slope: 0.0,
    }
}

/// Without any load a capacitor keeps whatever charge it once got, and no steady state is singled out. Every real one leaks; here a
/// hundred-billionth of its reactive current, which settles it at the crest and shows in no figure beyond 1e-7.
const LEAK: f64 = 1e-11;

/// The leak of the capacitors of a rail that draws nothing; nothing where there are none.
fn lay_leak(builder: &mut Builder, (positive, negative): (Node, Node), laid: &Laid) {
    let farads: f64 = laid.charge.iter().map(|(branch, _)| builder.farads(*branch)).sum();
    if farads > 0.0 {
        let ohms = 1.0 / (LEAK * builder.oscillator().angular_frequency * farads);
        builder.branch(positive, negative, Element::Resistor(ohms));
    }
}

/// A current drawn as long as the voltage is above zero; a meter where there is none.
fn lay_sink(builder: &mut Builder, (positive, negative): (Node, Node), amperes: f64, crest: f64, laid: &mut Laid) {
    if amperes > 0.0 {
        let sink = builder.branch(positive, negative, Element::CurrentSource(amperes));
        let freewheel = builder.branch(negative, positive, freewheel(crest));
        laid.probe.voltage = Signal::voltage(sink);
        laid.probe.current = Signal::current(sink).plus(Signal::current(freewheel).times(-1.0));
        laid.current += amperes;
    } else {
        let meter = builder.branch(positive, negative, Element::Meter);
        laid.probe.voltage = Signal::voltage(meter);
        laid.probe.current = Signal::current(meter);
    }
}
