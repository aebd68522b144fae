//! From a periodic solution to its figures: integrals in closed form over each stretch, extremes at located turning points.

use super::{
    CapacitorFigures, ChokeFigures, DiodeFigures, Figures, LineFigures, Losses, OutputFigures, RailCurrent,
    RailFigures, RailVoltage, WindingFigures,
};
use crate::bounds::LINE_ORDERS;
use crate::network::{Network, OutputProbes, Signal};
use crate::solver::basis::Basis;
use crate::solver::flow::Flow;
use crate::solver::integral::{Extremes, Integrals, take_extremes};
use crate::solver::periodic::Periodic;
use crate::solver::regime::{ModalRow, Regime};
use nalgebra::Complex;

/// What is gathered of one signal over the cycle.
#[derive(Clone, Copy, Debug)]
struct Gathered {
    integral: f64,
    square: f64,
    extremes: Extremes,
}

impl Gathered {
    const NONE: Self = Self {
        integral: 0.0,
        square: 0.0,
        extremes: Extremes::NONE,
    };

    fn peak(&self) -> f64 {
        self.extremes.highest.max(-self.extremes.lowest)
    }
}

/// The signals of a network in a fixed order, and the pairs whose product is wanted.
struct Reading {
    signals: Vec<Signal>,
    wants_extremes: Vec<bool>,
    products: Vec<(usize, usize)>,
    /// Switch index and signal of each diode's current, to know when it conducts.
    conduction: Vec<(usize, usize)>,
}

impl Reading {
    fn signal(&mut self, signal: &Signal, extremes: bool) -> usize {
        self.signals.push(signal.clone());
        self.wants_extremes.push(extremes);
        self.signals.len() - 1
    }
}

/// Where each probe's signals stand in the reading.
struct Places {
    outputs: Vec<OutputPlaces>,
    line: Vec<(usize, usize, usize)>,
    primary: Vec<usize>,
    core: Vec<usize>,
}

struct OutputPlaces {
    /// Voltage, current, product.
    rails: Vec<(usize, usize, usize)>,
    /// Current, voltage, product, conduction.
    diodes: Vec<(usize, usize, usize, usize)>,
    /// Current, voltage.
    capacitors: Vec<(usize, usize)>,
    chokes: Vec<usize>,
    windings: Vec<usize>,
    filters: Vec<usize>,
}

/// The figures of a periodic solution.
#[must_use]
pub fn compute(network: &Network, periodic: &Periodic<'_>) -> Figures {
    let (reading, places) = plan(network);
    let totals = gather(network, periodic, &reading);
    let mut figures = Figures::default();
    for (probes, places) in network.probes.outputs.iter().zip(&places.outputs) {
        figures.outputs.push(output(network, probes, places, &totals));
    }
    line(network, &places, &totals, &mut figures);
    figures
}

fn plan(network: &Network) -> (Reading, Places) {
    let mut reading = Reading {
        signals: Vec::new(),
        wants_extremes: Vec::new(),
        products: Vec::new(),
        conduction: Vec::new(),
    };
    let probes = &network.probes;
    // The line comes first: its first phase is the one whose harmonics are taken.
    let line = probes
        .line_currents
        .iter()
        .zip(&probes.line_voltages)
        .map(|(current, voltage)| pair(&mut reading, current, voltage, (true, false)))
        .collect();
    let outputs = probes
        .outputs
        .iter()
        .map(|o| plan_output(network, o, &mut reading))
        .collect();
    let primary = probes
        .primary_currents
        .iter()
        .map(|s| reading.signal(s, false))
        .collect();
    let core = probes
        .core_resistors
        .iter()
        .map(|&b| pair(&mut reading, &Signal::current(b), &Signal::voltage(b), (false, false)).2)
        .collect();
    let places = Places {
        outputs,
        line,
        primary,
        core,
    };
    (reading, places)
}

/// Two signals and their product.
fn pair(reading: &mut Reading, one: &Signal, other: &Signal, extremes: (bool, bool)) -> (usize, usize, usize) {
    let a = reading.signal(one, extremes.0);
    let b = reading.signal(other, extremes.1);
    reading.products.push((a, b));
    (a, b, reading.products.len() - 1)
}

fn plan_output(network: &Network, probes: &OutputProbes, reading: &mut Reading) -> OutputPlaces {
    OutputPlaces {
        rails: probes
            .rails
            .iter()
            .map(|rail| pair(reading, &rail.voltage, &rail.current, (true, false)))
            .collect(),
        diodes: probes
            .diodes
            .iter()
            .map(|diode| {
                let signals = (Signal::current(diode.branch), Signal::voltage(diode.branch));
                let (current, voltage, product) = pair(reading, &signals.0, &signals.1, (true, true));
                let switch = network.switches.iter().position(|&b| b == diode.branch).unwrap_or(0);
                reading.conduction.push((switch, current));
                (current, voltage, product, reading.conduction.len() - 1)
            })
            .collect(),
        capacitors: probes
            .capacitors
            .iter()
            .map(|c| (reading.signal(&c.current, false), reading.signal(&c.voltage, true)))
            .collect(),
        chokes: probes.chokes.iter().map(|c| reading.signal(&c.current, true)).collect(),
        windings: probes.windings.iter().map(|w| reading.signal(w, true)).collect(),
        filters: probes
            .filter_resistors
            .iter()
            .map(|&b| pair(reading, &Signal::current(b), &Signal::voltage(b), (false, false)).2)
            .collect(),
    }
}

/// Everything gathered over one cycle.
struct Totals {
    period: f64,
    signals: Vec<Gathered>,
    products: Vec<f64>,
    /// Seconds of conduction.
    conduction: Vec<f64>,
    /// Fourier integrals of the first line current and the first line voltage.
    current: Vec<Complex<f64>>,
    voltage: Vec<Complex<f64>>,
}

fn gather(network: &Network, periodic: &Periodic<'_>, reading: &Reading) -> Totals {
    let mut totals = Totals {
        period: network.oscillator.period(),
        signals: vec![Gathered::NONE; reading.signals.len()],
        products: vec![0.0; reading.products.len()],
        conduction: vec![0.0; reading.conduction.len()],
        current: vec![Complex::from(0.0); LINE_ORDERS],
        voltage: vec![Complex::from(0.0); 1],
    };
    let mut rows: Vec<(usize, Vec<ModalRow>)> = Vec::new();
    for flow in &periodic.run.flows {
        let regime = periodic.regimes.get(flow.regime);
        if !rows.iter().any(|(index, _)| *index == flow.regime) {
            let modal = reading
                .signals
                .iter()
                .map(|s| regime.modal(&regime.signal(s)))
                .collect();
            rows.push((flow.regime, modal));
        }
        if let Some((_, modal)) = rows.iter().find(|(index, _)| *index == flow.regime) {
            totals.add(network, regime, flow, modal, reading);
        }
    }
    totals
}

impl Totals {
    fn add(&mut self, network: &Network, regime: &Regime, flow: &Flow, modal: &[ModalRow], reading: &Reading) {
        if flow.length <= 0.0 {
            return;
        }
        let basis = &regime.basis;
        let integrals = Integrals::new(basis, flow);
        let mut signals = Vec::with_capacity(modal.len());
        for (index, row) in modal.iter().enumerate() {
            let mut signal = Vec::with_capacity(basis.width);
            flow.signal(regime, row, &mut signal);
            let gathered = &mut self.signals[index];
            if reading.wants_extremes[index] {
                take_extremes(basis, flow, &signal, &mut gathered.extremes);
            }
            gathered.integral += integrals.integral(&signal);
            gathered.square += integrals.product(&signal, &signal);
            signals.push(signal);
        }
        for (sum, &(a, b)) in self.products.iter_mut().zip(&reading.products) {
            *sum += integrals.product(&signals[a], &signals[b]);
        }
        for (time, &(switch, current)) in self.conduction.iter_mut().zip(&reading.conduction) {
            let conducting = regime.pattern.conducting >> switch & 1 == 1;
            if conducting && !is_nothing(&signals[current], network.current_scale) {
                *time += flow.length;
            }
        }
        if reading.signals.len() >= 2 {
            integrals.fourier(&signals[0], &network.oscillator, &mut self.current);
            integrals.fourier(&signals[1], &network.oscillator, &mut self.voltage);
        }
    }

    fn mean(&self, signal: usize) -> f64 {
        self.signals[signal].integral / self.period
    }

    fn mean_square(&self, signal: usize) -> f64 {
        (self.signals[signal].square / self.period).max(0.0)
    }

    fn rms(&self, signal: usize) -> f64 {
        self.mean_square(signal).sqrt()
    }

    fn peak(&self, signal: usize) -> f64 {
        self.signals[signal].peak()
    }

    fn product(&self, product: usize) -> f64 {
        self.products[product] / self.period
    }
}

/// Whether a signal is nothing but rounding.
fn is_nothing(signal: &[f64], scale: f64) -> bool {
    signal.iter().all(|c| c.abs() <= 1e-12 * scale)
}

fn output(network: &Network, probes: &OutputProbes, places: &OutputPlaces, totals: &Totals) -> OutputFigures {
    let rails = places.rails.iter().map(|&place| rail(place, totals)).collect();
    let diodes = probes
        .diodes
        .iter()
        .zip(&places.diodes)
        .map(|(probe, &(current, voltage, product, conduction))| DiodeFigures {
            name: probe.name.clone(),
            current_mean: totals.mean(current),
            current_rms: totals.rms(current),
            current_peak: totals.signals[current].extremes.highest.max(0.0),
            reverse_voltage_peak: (-totals.signals[voltage].extremes.lowest).max(0.0),
            conduction_angle: 360.0 * totals.conduction[conduction] / totals.period,
            loss: totals.product(product).max(0.0),
        })
        .collect();
    let capacitors = probes
        .capacitors
        .iter()
        .zip(&places.capacitors)
        .map(|(probe, &(current, voltage))| CapacitorFigures {
            name: probe.name.clone(),
            voltage_peak: totals.peak(voltage),
            ripple_current_rms: totals.rms(current),
            loss: probe.esr * totals.mean_square(current),
        })
        .collect();
    let chokes = probes
        .chokes
        .iter()
        .zip(&places.chokes)
        .map(|(probe, &current)| ChokeFigures {
            name: probe.name.clone(),
            current_mean: totals.mean(current),
            current_rms: totals.rms(current),
            current_peak: totals.peak(current),
        })
        .collect();
    // Without a transformer the rectifier's winding is the line itself.
    let line: Vec<usize>;
    let (windings, resistance) = if places.windings.is_empty() {
        line = (0..network.probes.line_currents.len()).map(|phase| 2 * phase).collect();
        (&line, 0.0)
    } else {
        (&places.windings, probes.winding_resistance)
    };
    OutputFigures {
        rails,
        diodes,
        capacitors,
        chokes,
        winding: WindingFigures {
            current_rms: windings.iter().map(|&w| totals.rms(w)).fold(0.0, f64::max),
            current_peak: windings.iter().map(|&w| totals.peak(w)).fold(0.0, f64::max),
            copper_loss: windings.iter().map(|&w| resistance * totals.mean_square(w)).sum(),
        },
    }
}

fn rail((voltage, current, product): (usize, usize, usize), totals: &Totals) -> RailFigures {
    let mean = totals.mean(voltage);
    let Extremes { lowest, highest } = totals.signals[voltage].extremes;
    RailFigures {
        voltage: RailVoltage {
            mean,
            valley: lowest,
            crest: highest,
            ripple_pp: highest - lowest,
            ripple_rms: (totals.mean_square(voltage) - mean * mean).max(0.0).sqrt(),
        },
        current: RailCurrent {
            mean: totals.mean(current),
            rms: totals.rms(current),
        },
        power: totals.product(product),
    }
}

fn line(network: &Network, places: &Places, totals: &Totals, figures: &mut Figures) {
    let probes = &network.probes;
    let current = places.line[0].0;
    let active_power: f64 = places.line.iter().map(|&(.., product)| totals.product(product)).sum();
    let apparent_power: f64 = places.line.iter().map(|&(i, u, _)| totals.rms(i) * totals.rms(u)).sum();
    let scale = 2.0 / totals.period / std::f64::consts::SQRT_2;
    let harmonics: Vec<f64> = totals.current.iter().map(|c| c.norm() * scale).collect();
    let fundamental = harmonics[0];
    let mean = totals.mean(current);
    let rest = (totals.mean_square(current) - mean * mean - fundamental * fundamental).max(0.0);
    let angle = totals.current[0] * totals.voltage[0].conj();
    figures.line = LineFigures {
        current_rms: totals.rms(current),
        current_peak: totals.peak(current),
        active_power,
        apparent_power,
        power_factor: ratio(active_power, apparent_power),
        displacement_factor: ratio(angle.re, angle.norm()),
        thd: ratio(rest.sqrt(), fundamental),
        harmonics,
    };
    let squares = |list: &mut dyn Iterator<Item = usize>| list.map(|s| totals.mean_square(s)).sum::<f64>();
    let core: f64 = places.core.iter().map(|&p| totals.product(p)).sum();
    let primary = probes.primary_resistance * squares(&mut places.primary.iter().copied());
    let mut losses = Losses {
        total: 0.0,
        line: probes.line_resistance * squares(&mut places.line.iter().map(|p| p.0)),
        transformer: primary + copper(network, figures) + core,
        rectifiers: figures.outputs.iter().flat_map(|o| &o.diodes).map(|d| d.loss).sum(),
        capacitors: figures.outputs.iter().flat_map(|o| &o.capacitors).map(|c| c.loss).sum(),
        filters: places
            .outputs
            .iter()
            .flat_map(|o| &o.filters)
            .map(|&p| totals.product(p))
            .sum(),
    };
    losses.total = losses.line + losses.transformer + losses.rectifiers + losses.capacitors + losses.filters;
    let load: f64 = figures.outputs.iter().flat_map(|o| &o.rails).map(|r| r.power).sum();
    figures.losses = losses;
    figures.efficiency = ratio(load, active_power);
}

/// Copper loss of all windings; a winding that several outputs share is counted once.
fn copper(network: &Network, figures: &Figures) -> f64 {
    let probes = &network.probes.outputs;
    (0..probes.len())
        .filter(|&index| probes[..index].iter().all(|o| o.windings != probes[index].windings))
        .map(|index| figures.outputs[index].winding.copper_loss)
        .sum()
}

/// A ratio, zero where there is nothing to relate to.
fn ratio(part: f64, whole: f64) -> f64 {
    if whole > 0.0 { part / whole } else { 0.0 }
}

/// The value of a signal at one time of the cycle.
pub(super) fn value(basis: &Basis, flow: &Flow, signal: &[f64], since: f64) -> f64 {
    let mut scratch = vec![0.0; basis.width];
    flow.value(basis, signal, since, &mut scratch)
}
