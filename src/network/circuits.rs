//! From a supply to its network: line, transformer, rectifier circuits, filters and loads.

mod rail;
mod rectifier;

use super::build::{Builder, Node};
use super::probes::{Probes, Signal};
use super::{Element, HalfCycle, Network, Oscillator};
use crate::supply::{Circuit, Derived, Phases, Supply};
use rectifier::Output;
use std::f64::consts::{SQRT_2, TAU};

/// The terminals that a rectifier is fed from.
#[derive(Clone, Debug)]
pub(super) struct Feed {
    /// Live terminals: one for a plain winding, two for a tapped one (the second mirrored), three for three phases.
    pub(super) live: Vec<Node>,
    /// Return, tap or star point.
    pub(super) common: Node,
    /// Current of each winding part; empty without a transformer.
    pub(super) windings: Vec<Signal>,
    /// Copper resistance of each winding part in ohms.
    pub(super) winding_resistance: f64,
    /// Crest of each live terminal against the common one without load, in volts.
    pub(super) crest: f64,
}

/// The network of a supply with every band at its nominal value.
pub(super) fn network(supply: &Supply) -> Network {
    let oscillator = oscillator(supply);
    let mut wiring = Wiring {
        builder: Builder::new(oscillator),
        probes: Probes::default(),
        mirror: Mirror::default(),
    };
    let feeds = match supply.derived_transformer() {
        None => vec![wiring.line_feed(supply)],
        Some(transformer) => wiring.transformer_feeds(supply, &transformer),
    };
    let mut voltage_scale: f64 = 0.0;
    let mut current_scale = 0.0;
    let mut charge = Vec::new();
    for output in supply.outputs() {
        let feed = &feeds[output.winding];
        let laid = Output::lay(&mut wiring.builder, &mut wiring.mirror, feed, output);
        voltage_scale = voltage_scale.max(laid.voltage);
        current_scale += laid.current;
        charge.extend(laid.charge);
        wiring.probes.outputs.push(laid.probes);
    }
    let symmetric = supply.line().harmonics.iter().all(|h| h.order % 2 == 1)
        && supply.outputs().iter().all(|o| {
            !matches!(
                o.rectifier.circuit,
                Circuit::HalfWave | Circuit::HalfWaveDoubler | Circuit::ThreePhaseHalfWave
            )
        });
    let mirror = wiring.mirror;
    let mut network = wiring.builder.finish(wiring.probes);
    network.half_cycle = symmetric.then(|| mirror.half_cycle(&network));
    for (branch, volts) in charge {
        if let Some(index) = network.capacitors.iter().position(|&b| b == branch) {
            network.charge[index] = volts;
        }
    }
    network.voltage_scale = voltage_scale;
    network.current_scale = if current_scale > 0.0 {
        current_scale
    } else {
        idle_current(&network)
    };
    network
}

/// Without a load the capacitors' reactive current is the measure of a current.
fn idle_current(network: &Network) -> f64 {
    let farads: f64 = network
        .capacitors
        .iter()
        .map(|&b| match network.branches[b].element {
            Element::Capacitor(farads) => farads,
            _ => 0.0,
        })
        .sum();
    let current = network.voltage_scale * network.oscillator.angular_frequency * farads;
    if current > 0.0 { current } else { 1.0 }
}

fn oscillator(supply: &Supply) -> Oscillator {
    let line = supply.line();
    let orders = std::iter::once(1).chain(line.harmonics.iter().map(|h| h.order));
    Oscillator {
        angular_frequency: TAU * line.frequency.nominal(),
        orders: orders.collect(),
    }
}

/// Which branches half a cycle exchanges: pairs of branch, the branch whose place it takes, and the sign.
#[derive(Debug, Default)]
pub(super) struct Mirror {
    pairs: Vec<(usize, usize, f64)>,
}

impl Mirror {
    /// The branch's current returns reversed after half a cycle.
    pub(super) fn reversed(&mut self, branch: usize) {
        self.pairs.push((branch, branch, -1.0));
    }

    /// The two branches take each other's places.
    pub(super) fn exchanged(&mut self, one: usize, other: usize) {
        self.pairs.push((one, other, 1.0));
        self.pairs.push((other, one, 1.0));
    }

    /// Two chains of branches take each other's places.
    pub(super) fn chains_exchanged(&mut self, one: &[usize], other: &[usize]) {
        for (&a, &b) in one.iter().zip(other) {
            self.exchanged(a, b);
        }
    }

    fn half_cycle(&self, network: &Network) -> HalfCycle {
        let partner = |branch: usize| {
            self.pairs
                .iter()
                .find(|p| p.0 == branch)
                .map_or((branch, 1.0), |p| (p.1, p.2))
        };
        let stored: Vec<usize> = network.capacitors.iter().chain(&network.inductors).copied().collect();
        let place = |list: &[usize], branch: usize| list.iter().position(|&b| b == branch).unwrap_or(0);
        HalfCycle {
            state: stored
                .iter()
                .map(|&branch| {
                    let (other, sign) = partner(branch);
                    (place(&stored, other), sign)
                })
                .collect(),
            switches: network
                .switches
                .iter()
                .map(|&branch| place(&network.switches, partner(branch).0))
                .collect(),
        }
    }
}

struct Wiring {
    builder: Builder,
    probes: Probes,
    mirror: Mirror,
}

impl Wiring {
    /// Source voltage of a phase over the oscillator's time functions, with the sign of a branch voltage: a source
    /// drives current along its branch, so the voltage from its start to its end is minus the source voltage.
    fn emf(&self, supply: &Supply, phase: usize) -> Element {
        let line = supply.line();
        let per_phase = match line.phases {
            Phases::One => 1.0,
            Phases::Three => 3.0_f64.sqrt(),
        };
        let crest = SQRT_2 * line.voltage.nominal() / per_phase;
        let lag = TAU / 3.0 * phase as f64;
        let mut row = vec![-crest * lag.cos(), crest * lag.sin()];
        for harmonic in &line.harmonics {
            let angle = harmonic.phase.nominal().to_radians() - f64::from(harmonic.order) * lag;
            let amplitude = crest * harmonic.fraction.nominal();
            row.push(-amplitude * angle.cos());
            row.push(-amplitude * angle.sin());
        }
        Element::Emf(row)
    }

    /// The source of one phase with its impedance, and behind it a winding where `turns` is given.
    fn lay_line(
        &mut self,
        supply: &Supply,
        phase: usize,
        (from, to): (Node, Node),
        (resistance, inductance): (f64, f64),
        turns: Option<(Node, f64)>,
    ) {
        let mut elements = vec![self.emf(supply, phase)];
        elements.extend(impedance(resistance, inductance));
        let laid = self.builder.series(from, to, turns, elements);
        for &branch in &laid {
            self.mirror.reversed(branch);
        }
        self.probes.line_currents.push(Signal::current(laid[0]));
        self.probes.line_voltages.push(Signal::voltage(laid[0]).times(-1.0));
    }

    fn line_feed(&mut self, supply: &Supply) -> Feed {
        let line = supply.line();
        let impedance = (line.resistance.nominal(), line.inductance.nominal());
        self.probes.line_resistance = impedance.0;
        let phases = phases(supply);
        let mut live = Vec::new();
        for phase in 0..phases {
            let node = self.builder.node();
            self.lay_line(supply, phase, (Node::GROUND, node), impedance, None);
            live.push(node);
        }
        Feed {
            live,
            common: Node::GROUND,
            windings: Vec::new(),
            winding_resistance: 0.0,
            crest: SQRT_2 * line.voltage.nominal() / (phases as f64).sqrt(),
        }
    }

    fn transformer_feeds(&mut self, supply: &Supply, transformer: &Derived) -> Vec<Feed> {
        let line = supply.line();
        let resistance = line.resistance.nominal() + transformer.primary_resistance;
        let inductance = line.inductance.nominal() + transformer.primary_leakage_inductance;
        self.probes.line_resistance = line.resistance.nominal();
        self.probes.primary_resistance = transformer.primary_resistance;
        let mut cores = Vec::new();
        for phase in 0..phases(supply) {
            let core = self.builder.node();
            let star = Node::GROUND;
            self.lay_line(supply, phase, (star, star), (resistance, inductance), Some((core, 1.0)));
            if transformer.core_loss > 0.0 {
                let ohms = transformer.primary_voltage.powi(2) / transformer.core_loss;
                let laid = self
                    .builder
                    .wound(star, star, Some((core, 1.0)), Element::Resistor(ohms));
                self.mirror.reversed(laid);
                self.probes.core_resistors.push(laid);
            }
            cores.push(core);
        }
        self.probes.primary_currents = self.probes.line_currents.clone();
        (0..transformer.windings.len())
            .map(|winding| self.winding_feed(supply, transformer, winding, &cores))
            .collect()
    }

    fn winding_feed(&mut self, supply: &Supply, transformer: &Derived, index: usize, cores: &[Node]) -> Feed {
        let winding = &transformer.windings[index];
        let ratio = winding.open_circuit_voltage / transformer.primary_voltage;
        let phase_voltage = supply.line().voltage.nominal() / (cores.len() as f64).sqrt();
        let common = Node::GROUND;
        // Ampere-turns of a secondary oppose those of the primary, hence the minus sign.
        let mut parts: Vec<(Node, f64)> = cores.iter().map(|&core| (core, -ratio)).collect();
        let tapped = supply.is_tapped(index);
        if tapped {
            parts.push((cores[0], ratio));
        }
        let used = supply.outputs().iter().any(|o| o.winding == index);
        let mut feed = Feed {
            live: Vec::new(),
            common,
            windings: Vec::new(),
            winding_resistance: winding.resistance,
            crest: SQRT_2 * phase_voltage * ratio,
        };
        if !used {
            return feed;
        }
        let mut chains = Vec::new();
        for turns in parts {
            let node = self.builder.node();
            let elements = impedance(winding.resistance, winding.leakage_inductance);
            let laid = self.builder.series(common, node, Some(turns), elements);
            feed.live.push(node);
            feed.windings.push(Signal::current(laid[0]));
            chains.push(laid);
        }
        if tapped {
            self.mirror.chains_exchanged(&chains[0], &chains[1]);
        } else {
            chains.iter().flatten().for_each(|&branch| self.mirror.reversed(branch));
        }
        feed
    }
}

fn phases(supply: &Supply) -> usize {
    match supply.line().phases {
        Phases::One => 1,
        Phases::Three => 3,
    }
}

/// A resistance and an inductance in series, each left out where it is zero.
pub(super) fn impedance(resistance: f64, inductance: f64) -> Vec<Element> {
    let mut elements = Vec::new();
    if resistance > 0.0 {
        elements.push(Element::Resistor(resistance));
    }
    if inductance > 0.0 {
        elements.push(Element::Inductor(inductance));
    }
    elements
}
