//! The rectifier circuits, each a netlist between a feed and its rails.

use super::rail::{Bank, Laid, lay_bank, lay_rail};
use super::{Feed, Mirror};
use crate::network::Element;
use crate::network::build::{Builder, Node};
use crate::network::probes::{DiodeProbe, OutputProbes};
use crate::supply::{self, Capacitor, Circuit};

/// An output laid into the network.
#[derive(Debug, Default)]
pub(super) struct Output {
    pub(super) probes: OutputProbes,
    /// Capacitor branch and the voltage it is charged towards without load.
    pub(super) charge: Vec<(usize, f64)>,
    /// Largest rail voltage without load, in volts.
    pub(super) voltage: f64,
    /// Current that the loads would draw there, in amperes.
    pub(super) current: f64,
}

/// Where a rail hangs: positive node, negative node, its voltage without load.
struct RailPort {
    positive: Node,
    negative: Node,
    crest: f64,
}

struct Circuitry<'a> {
    builder: &'a mut Builder,
    mirror: &'a mut Mirror,
    output: &'a supply::Output,
    laid: Output,
}

impl Output {
    /// Lays the rectifier, the filters and the loads of one output.
    pub(super) fn lay(builder: &mut Builder, mirror: &mut Mirror, feed: &Feed, output: &supply::Output) -> Self {
        let mut circuitry = Circuitry {
            builder,
            mirror,
            output,
            laid: Self::default(),
        };
        circuitry.laid.probes.windings = feed.windings.clone();
        circuitry.laid.probes.winding_resistance = feed.winding_resistance;
        let ports = circuitry.rectifier(feed);
        for (index, (port, rail)) in ports.iter().zip(&output.rails).enumerate() {
            let at = format!("/rails/{index}/filter");
            let laid = lay_rail(circuitry.builder, (port.positive, port.negative), rail, port.crest);
            circuitry.collect(laid, port.crest, &at);
        }
        circuitry.laid
    }
}

impl Circuitry<'_> {
    fn diode(&mut self, from: Node, to: Node) -> usize {
        let diode = &self.output.rectifier.diode;
        let element = Element::Switch {
            threshold: diode.threshold_voltage.nominal(),
            slope: diode.slope_resistance.nominal(),
        };
        let branch = self.builder.branch(from, to, element);
        let name = format!("D{}", self.laid.probes.diodes.len() + 1);
        self.laid.probes.diodes.push(DiodeProbe { name, branch });
        branch
    }

    /// Voltage of a terminal's crest less `diodes` thresholds, never below a tenth of the crest.
    fn less(&self, crest: f64, diodes: f64) -> f64 {
        let threshold = self.output.rectifier.diode.threshold_voltage.nominal();
        (crest - diodes * threshold).max(0.1 * crest)
    }

    fn rectifier(&mut self, feed: &Feed) -> Vec<RailPort> {
        let circuit = self.output.rectifier.circuit;
        let (live, common) = (&feed.live, feed.common);
        match circuit {
            Circuit::HalfWave | Circuit::ThreePhaseHalfWave => {
                let positive = self.builder.node();
                for &terminal in live {
                    self.diode(terminal, positive);
                }
                vec![self.port(positive, common, feed.crest, 1.0)]
            }
            Circuit::CentreTap => {
                let positive = self.builder.node();
                let one = self.diode(live[0], positive);
                let other = self.diode(live[1], positive);
                self.mirror.exchanged(one, other);
                vec![self.port(positive, common, feed.crest, 1.0)]
            }
            Circuit::Bridge => {
                let (positive, negative) = self.full_bridge(live[0], common);
                vec![self.port(positive, negative, feed.crest, 2.0)]
            }
            Circuit::SplitBridge => {
                let (positive, negative) = self.full_bridge(live[0], live[1]);
                vec![
                    self.port(positive, common, feed.crest, 1.0),
                    self.port(common, negative, feed.crest, 1.0),
                ]
            }
            Circuit::ThreePhaseBridge => self.three_phase_bridge(feed),
            Circuit::FullWaveDoubler => self.full_wave_doubler(feed),
            Circuit::HalfWaveDoubler => self.half_wave_doubler(feed),
        }
    }

    fn port(&self, positive: Node, negative: Node, crest: f64, diodes: f64) -> RailPort {
        RailPort {
            positive,
            negative,
            crest: self.less(crest, diodes),
        }
    }

    fn full_bridge(&mut self, one: Node, other: Node) -> (Node, Node) {
        let (positive, negative) = (self.builder.node(), self.builder.node());
        let d1 = self.diode(one, positive);
        let d2 = self.diode(other, positive);
        let d3 = self.diode(negative, one);
        let d4 = self.diode(negative, other);
        self.mirror.exchanged(d1, d2);
        self.mirror.exchanged(d3, d4);
        (positive, negative)
    }

    /// Diodes in the order in which they begin to conduct.
    fn three_phase_bridge(&mut self, feed: &Feed) -> Vec<RailPort> {
        let (positive, negative) = (self.builder.node(), self.builder.node());
        let live = &feed.live;
        let d1 = self.diode(live[0], positive);
        let d2 = self.diode(negative, live[2]);
        let d3 = self.diode(live[1], positive);
        let d4 = self.diode(negative, live[0]);
        let d5 = self.diode(live[2], positive);
        let d6 = self.diode(negative, live[1]);
        self.mirror.exchanged(d1, d4);
        self.mirror.exchanged(d2, d5);
        self.mirror.exchanged(d3, d6);
        vec![self.port(positive, negative, feed.crest * 3.0_f64.sqrt(), 2.0)]
    }

    fn full_wave_doubler(&mut self, feed: &Feed) -> Vec<RailPort> {
        let (positive, negative) = (self.builder.node(), self.builder.node());
        let d1 = self.diode(feed.live[0], positive);
        let d2 = self.diode(negative, feed.live[0]);
        self.mirror.exchanged(d1, d2);
        let crest = self.less(feed.crest, 1.0);
        if let Some(stack) = self.output.rectifier.stack.clone() {
            let upper = self.column(&stack, (positive, feed.common), crest, "/rectifier/stack");
            let lower = self.column(&stack, (feed.common, negative), crest, "/rectifier/stack");
            self.mirror.chains_exchanged(&upper, &lower);
        }
        vec![RailPort {
            positive,
            negative,
            crest: 2.0 * crest,
        }]
    }

    fn half_wave_doubler(&mut self, feed: &Feed) -> Vec<RailPort> {
        let (middle, positive) = (self.builder.node(), self.builder.node());
        self.diode(feed.common, middle);
        self.diode(middle, positive);
        let crest = self.less(feed.crest, 1.0);
        if let Some(coupling) = self.output.rectifier.coupling.clone() {
            self.column(&coupling, (middle, feed.live[0]), crest, "/rectifier/coupling");
        }
        if let Some(stack) = self.output.rectifier.stack.clone() {
            self.column(&stack, (positive, feed.common), 2.0 * crest, "/rectifier/stack");
        }
        vec![RailPort {
            positive,
            negative: feed.common,
            crest: 2.0 * crest,
        }]
    }

    fn column(&mut self, capacitor: &Capacitor, (from, to): (Node, Node), volts: f64, pointer: &str) -> Vec<usize> {
        let Bank { branches, mut probe } = lay_bank(self.builder, (from, to), capacitor);
        probe.pointer = pointer.to_owned();
        self.add_capacitor(probe);
        self.laid.charge.push((branches[0], volts));
        branches
    }

    fn add_capacitor(&mut self, mut probe: crate::network::probes::CapacitorProbe) {
        probe.name = format!("C{}", self.laid.probes.capacitors.len() + 1);
        self.laid.probes.capacitors.push(probe);
    }

    fn collect(&mut self, rail: Laid, crest: f64, at: &str) {
        for (section, mut probe) in rail.capacitors {
            probe.pointer = format!("{at}/{section}/capacitor");
            self.add_capacitor(probe);
        }
        for (section, mut probe) in rail.chokes {
            probe.pointer = format!("{at}/{section}/series");
            probe.name = format!("L{}", self.laid.probes.chokes.len() + 1);
            self.laid.probes.chokes.push(probe);
        }
        self.laid.probes.filter_resistors.extend(rail.resistors);
        self.laid.probes.rails.push(rail.probe);
        self.laid.charge.extend(rail.charge);
        self.laid.voltage = self.laid.voltage.max(crest);
        self.laid.current += rail.current;
    }
}
