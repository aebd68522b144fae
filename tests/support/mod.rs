//! Supplies for tests: small builders in plain numbers.

#![allow(dead_code, reason = "each test crate uses a part of it")]

use mainstay::figures::{self, Figures};
use mainstay::network::Network;
use mainstay::quantity::Band;
use mainstay::solver;
use mainstay::supply::{
    Capacitor, Circuit, Diode, Line, Load, Output, Parts, Phases, Rail, Rectifier, Section, Series, Supply,
    Surroundings, Transformer, Winding, WindingValues,
};

/// A band without width.
pub fn band(value: f64) -> Band {
    Band::point(value).unwrap()
}

/// A single-output supply in plain numbers: 1 V crest, 1 rad/s, ideal diodes, unless changed.
#[derive(Clone, Debug)]
pub struct Simple {
    pub circuit: Circuit,
    /// Crest of the line in volts; of each phase where there are three.
    pub crest: f64,
    pub hertz: f64,
    pub line: (f64, f64),
    pub threshold: f64,
    pub slope: f64,
    pub stack: Option<(f64, f64)>,
    pub coupling: Option<(f64, f64)>,
    /// Series resistance, series inductance, capacitance, loss resistance; zero leaves a part out.
    pub sections: Vec<(f64, f64, f64, f64)>,
    pub load: Load,
}

impl Simple {
    pub fn new(circuit: Circuit) -> Self {
        Self {
            circuit,
            crest: 1.0,
            hertz: 1.0 / std::f64::consts::TAU,
            line: (0.0, 0.0),
            threshold: 0.0,
            slope: 0.0,
            stack: None,
            coupling: None,
            sections: Vec::new(),
            load: Load::Resistance { resistance: band(1.0) },
        }
    }

    /// A reservoir without loss behind the rectifier.
    pub fn reservoir(mut self, farads: f64) -> Self {
        self.sections = vec![(0.0, 0.0, farads, 0.0)];
        self
    }

    pub fn line(mut self, ohms: f64, henries: f64) -> Self {
        self.line = (ohms, henries);
        self
    }

    pub fn resistance(mut self, ohms: f64) -> Self {
        self.load = Load::Resistance { resistance: band(ohms) };
        self
    }

    pub fn current(mut self, amperes: f64) -> Self {
        self.load = Load::Current { current: band(amperes) };
        self
    }

    pub fn mains(mut self, rms: f64, hertz: f64) -> Self {
        self.crest = rms * std::f64::consts::SQRT_2;
        self.hertz = hertz;
        self
    }

    fn bank((farads, ohms): (f64, f64)) -> Capacitor {
        Capacitor {
            capacitance: band(farads),
            esr: band(ohms),
            count: 1,
            ratings: Default::default(),
        }
    }

    pub fn supply(&self) -> Supply {
        let three = self.circuit.is_three_phase();
        let rms = self.crest / std::f64::consts::SQRT_2;
        let tapped = self.circuit.needs_tap();
        // A tapped circuit has the impedance in each half winding, all others in the line.
        let (line, half) = if tapped {
            ((0.0, 0.0), self.line)
        } else {
            (self.line, (0.0, 0.0))
        };
        let line_voltage = if three { rms * 3.0_f64.sqrt() } else { rms };
        let section = |&(r, l, c, esr): &(f64, f64, f64, f64)| Section {
            series: (r > 0.0 || l > 0.0).then(|| Series {
                resistance: band(r),
                inductance: band(l),
            }),
            capacitor: (c > 0.0).then(|| Self::bank((c, esr))),
        };
        let rail = Rail {
            filter: self.sections.iter().map(section).collect(),
            load: self.load.clone(),
        };
        let rails = vec![rail; self.circuit.rails()];
        Supply::new(Parts {
            name: None,
            line: Line {
                voltage: band(line_voltage),
                frequency: band(self.hertz),
                phases: if three { Phases::Three } else { Phases::One },
                resistance: band(line.0),
                inductance: band(line.1),
                harmonics: Vec::new(),
            },
            transformer: tapped.then(|| one_to_one(line_voltage, half)),
            outputs: vec![Output {
                winding: 0,
                rectifier: Rectifier {
                    circuit: self.circuit,
                    diode: Diode {
                        threshold_voltage: band(self.threshold),
                        slope_resistance: band(self.slope),
                        ratings: Default::default(),
                    },
                    stack: self.stack.map(Self::bank),
                    coupling: self.coupling.map(Self::bank),
                },
                rails,
            }],
            surroundings: Surroundings::default(),
        })
        .unwrap()
    }

    pub fn figures(&self) -> Figures {
        solve(&self.supply())
    }
}

/// A transformer whose (half) winding, with its resistance and leakage, gives the line voltage again.
pub fn one_to_one(volts: f64, (ohms, henries): (f64, f64)) -> Transformer {
    Transformer {
        primary_voltage: band(volts),
        primary_resistance: Some(band(0.0)),
        primary_leakage_inductance: band(0.0),
        windings: vec![Winding {
            values: WindingValues::Measured {
                open_circuit_voltage: band(volts),
                resistance: band(ohms),
            },
            leakage_inductance: band(henries),
        }],
        regulation: None,
        rating: None,
        core_loss: None,
    }
}

/// The figures of a supply at its nominal values.
pub fn solve(supply: &Supply) -> Figures {
    let network = Network::of(supply);
    let periodic = solver::solve(&network).unwrap_or_else(|error| panic!("{error}: {supply:?}"));
    figures::compute(&network, &periodic)
}

/// Rail voltage at the instant at which the first diode begins to conduct, at nominal values.
pub fn turn_on_voltage(supply: &Supply) -> f64 {
    let network = Network::of(supply);
    let periodic = solver::solve(&network).unwrap();
    let output = &network.probes.outputs[0];
    let switch = network
        .switches
        .iter()
        .position(|&b| b == output.diodes[0].branch)
        .unwrap();
    let conducts = |flow: &solver::flow::Flow| periodic.regimes.get(flow.regime).pattern.conducting >> switch & 1 == 1;
    let flows = &periodic.run.flows;
    let first = (1..flows.len())
        .find(|&i| conducts(&flows[i]) && !conducts(&flows[i - 1]))
        .unwrap();
    let (flow, regime) = (&flows[first], periodic.regimes.get(flows[first].regime));
    let mut signal = Vec::new();
    flow.signal(
        regime,
        &regime.modal(&regime.signal(&output.rails[0].voltage)),
        &mut signal,
    );
    flow.value(&regime.basis, &signal, 0.0, &mut vec![0.0; regime.basis.width])
}

/// Asserts `|found - expected| <= relative * |expected|`, printing what was compared.
#[track_caller]
pub fn close(what: &str, found: f64, expected: f64, relative: f64) {
    let error = (found - expected).abs() / expected.abs().max(f64::MIN_POSITIVE);
    assert!(
        error <= relative,
        "{what}: found {found:.12e}, expected {expected:.12e}, off by {error:.1e}"
    );
}

/// Asserts that a number rounds to the digits printed in a table: within 0.51 of the last digit's unit.
#[track_caller]
pub fn printed(what: &str, found: f64, text: &str) {
    let expected: f64 = text.parse().unwrap();
    let unit = last_digit(text);
    assert!(
        (found - expected).abs() <= 0.51 * unit,
        "{what}: found {found:.9e}, printed {text}"
    );
}

/// The unit of the sixth significant digit of a number in a table that drops trailing zeros.
pub fn significant(text: &str) -> f64 {
    let value: f64 = text.parse().unwrap();
    10.0_f64.powf(value.abs().log10().floor() - 5.0).min(last_digit(text))
}

/// The unit of a printed number's last digit.
pub fn last_digit(text: &str) -> f64 {
    let (mantissa, exponent) = text.split_once(['e', 'E']).unwrap_or((text, "0"));
    let decimals = mantissa
        .split_once('.')
        .map_or(0, |(_, fraction)| fraction.len() as i32);
    10.0_f64.powi(exponent.parse::<i32>().unwrap() - decimals)
}

/// A table with a header line: rows of (column name, text).
pub fn table(text: &str) -> Vec<std::collections::HashMap<String, String>> {
    let mut lines = text.lines().filter(|l| !l.starts_with('#') && !l.trim().is_empty());
    let header: Vec<&str> = lines.next().unwrap().split(',').collect();
    lines
        .map(|line| {
            let cells = line.split(',').map(|c| c.trim().to_owned());
            header.iter().map(|h| h.trim().to_owned()).zip(cells).collect()
        })
        .collect()
}
