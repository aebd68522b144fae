//! Every rule of soundness by a supply that breaks it and no other; quantities by their pointers; nameplates by hand.

mod addresses;
mod rules;
mod transformers;

use super::{
    Capacitor, CapacitorRatings, Circuit, Diode, DiodeRatings, Line, Load, Output, Parts, Phases, Rail, Rectifier,
    Section, Supply, Surroundings, Transformer, Winding, WindingValues,
};
use crate::quantity::Band;

/// A band without width.
fn at(value: f64) -> Band {
    Band::exactly(value)
}

fn band(low: f64, nominal: f64, high: f64) -> Band {
    Band::new(low, nominal, high).expect("in order")
}

fn capacitor() -> Capacitor {
    Capacitor {
        capacitance: at(4700e-6),
        esr: at(0.042),
        count: 1,
        ratings: CapacitorRatings::default(),
    }
}

fn rail() -> Rail {
    Rail {
        filter: vec![Section {
            series: None,
            capacitor: Some(capacitor()),
        }],
        load: Load::Current { current: at(1.2) },
    }
}

fn output(circuit: Circuit, winding: usize) -> Output {
    let doubler = matches!(circuit, Circuit::FullWaveDoubler | Circuit::HalfWaveDoubler);
    Output {
        winding,
        rectifier: Rectifier {
            circuit,
            diode: Diode {
                threshold_voltage: at(0.78),
                slope_resistance: at(0.018),
                ratings: DiodeRatings::default(),
            },
            stack: doubler.then(capacitor),
            coupling: (circuit == Circuit::HalfWaveDoubler).then(capacitor),
        },
        rails: vec![rail(); circuit.rails()],
    }
}

fn measured(volts: f64, ohms: f64) -> Winding {
    Winding {
        values: WindingValues::Measured {
            open_circuit_voltage: at(volts),
            resistance: at(ohms),
        },
        leakage_inductance: at(0.0),
    }
}

fn nameplate(volts: f64, amperes: f64) -> Winding {
    Winding {
        values: WindingValues::Nameplate {
            rated_voltage: at(volts),
            rated_current: at(amperes),
        },
        leakage_inductance: at(0.0),
    }
}

/// 230 V to two windings of 20.5 V and 12 V; a bridge on the first.
fn parts() -> Parts {
    Parts {
        name: None,
        line: Line {
            voltage: band(207.0, 230.0, 253.0),
            frequency: at(50.0),
            phases: Phases::One,
            resistance: at(0.25),
            inductance: at(0.4e-3),
            harmonics: Vec::new(),
        },
        transformer: Some(Transformer {
            primary_voltage: at(230.0),
            primary_resistance: Some(at(11.0)),
            primary_leakage_inductance: at(0.0),
            windings: vec![measured(20.5, 0.21), measured(12.0, 0.1)],
            regulation: None,
            rating: None,
            core_loss: None,
        }),
        outputs: vec![output(Circuit::Bridge, 0)],
        surroundings: Surroundings::default(),
    }
}

fn supply() -> Supply {
    Supply::new(parts()).expect("sound")
}

/// The transformer of some parts.
fn wound(parts: &mut Parts) -> &mut Transformer {
    parts.transformer.as_mut().expect("a transformer")
}
