//! A supply that breaks one rule has one fault, at the field that breaks it.

use super::{at, band, capacitor, measured, nameplate, output, parts, rail, wound};
use crate::bounds;
use crate::quantity::Band;
use crate::supply::{Circuit, Harmonic, Parts, Phases, Section, Supply, WindingValues};

type Case = (&'static str, fn(&mut Parts), &'static str, &'static str);

fn faults(change: impl Fn(&mut Parts)) -> Vec<(String, String)> {
    let mut parts = parts();
    change(&mut parts);
    let faults = Supply::new(parts).err().unwrap_or_default();
    faults.into_iter().map(|f| (f.pointer, f.detail)).collect()
}

fn assert_cases(cases: &[Case]) {
    for (rule, change, pointer, words) in cases {
        let faults = faults(change);
        assert_eq!(faults.len(), 1, "{rule}: {faults:#?}");
        assert_eq!(faults[0].0, *pointer, "{rule}");
        assert!(faults[0].1.contains(words), "{rule}: {}", faults[0].1);
    }
}

fn circuit(parts: &mut Parts, circuit: Circuit) {
    parts.outputs[0] = output(circuit, 0);
}

fn harmonic(order: u32) -> Harmonic {
    Harmonic {
        order,
        fraction: at(0.03),
        phase: at(0.0),
    }
}

#[test]
fn every_circuit_is_sound_where_its_needs_are_met() {
    for circuit in Circuit::ALL {
        let mut parts = parts();
        if circuit.is_three_phase() {
            parts.line.phases = Phases::Three;
        }
        parts.outputs = vec![output(circuit, 0), output(circuit, 1)];
        assert!(Supply::new(parts.clone()).is_ok(), "{}", circuit.name());
        // On the line itself, where no tap is needed.
        parts.transformer = None;
        parts.outputs = vec![output(circuit, 0)];
        assert_eq!(Supply::new(parts).is_ok(), !circuit.needs_tap(), "{}", circuit.name());
    }
}

#[test]
fn windings_phases_and_taps() {
    assert_cases(&[
        (
            "winding beyond the last",
            |p| p.outputs[0].winding = 2,
            "/outputs/0/winding",
            "no winding 2",
        ),
        (
            "winding without a transformer",
            |p| {
                p.transformer = None;
                p.outputs[0].winding = 1;
            },
            "/outputs/0/winding",
            "no winding 1",
        ),
        (
            "three phases from one",
            |p| circuit(p, Circuit::ThreePhaseBridge),
            "/outputs/0/rectifier/circuit",
            "three phases",
        ),
        (
            "one phase from three",
            |p| p.line.phases = Phases::Three,
            "/outputs/0/rectifier/circuit",
            "one phase",
        ),
        (
            "a tap of the line",
            |p| {
                p.transformer = None;
                circuit(p, Circuit::CentreTap);
            },
            "/outputs/0/rectifier/circuit",
            "tapped winding",
        ),
        (
            "a tapped output after one without",
            |p| p.outputs.push(output(Circuit::CentreTap, 0)),
            "/outputs/1/winding",
            "a tap or has none",
        ),
        (
            "an output without a tap after a tapped one",
            |p| {
                p.outputs = vec![
                    output(Circuit::Bridge, 1),
                    output(Circuit::SplitBridge, 0),
                    output(Circuit::HalfWave, 0),
                ];
            },
            "/outputs/2/winding",
            "a tap or has none",
        ),
    ]);
    let agreeing = faults(|p| {
        p.outputs = vec![
            output(Circuit::CentreTap, 0),
            output(Circuit::SplitBridge, 0),
            output(Circuit::Bridge, 1),
        ];
    });
    assert_eq!(agreeing, []);
}

#[test]
fn rails_and_columns() {
    assert_cases(&[
        (
            "two rails of a bridge",
            |p| p.outputs[0].rails.push(rail()),
            "/outputs/0/rails",
            "one rail",
        ),
        (
            "one rail of a split bridge",
            |p| {
                circuit(p, Circuit::SplitBridge);
                p.outputs[0].rails.pop();
            },
            "/outputs/0/rails",
            "two rails",
        ),
        (
            "no rail",
            |p| p.outputs[0].rails.clear(),
            "/outputs/0/rails",
            "one rail",
        ),
        (
            "a doubler without its column",
            |p| {
                circuit(p, Circuit::FullWaveDoubler);
                p.outputs[0].rectifier.stack = None;
            },
            "/outputs/0/rectifier/stack",
            "needs its stack",
        ),
        (
            "a half-wave doubler without its coupling",
            |p| {
                circuit(p, Circuit::HalfWaveDoubler);
                p.outputs[0].rectifier.coupling = None;
            },
            "/outputs/0/rectifier/coupling",
            "needs its coupling",
        ),
        (
            "a coupling in a full-wave doubler",
            |p| {
                circuit(p, Circuit::FullWaveDoubler);
                p.outputs[0].rectifier.coupling = Some(capacitor());
            },
            "/outputs/0/rectifier/coupling",
            "no coupling",
        ),
    ]);
}

#[test]
fn sections_loads_and_outputs() {
    assert_cases(&[
        (
            "an empty section",
            |p| {
                p.outputs[0].rails[0].filter.push(Section {
                    series: None,
                    capacitor: None,
                });
            },
            "/outputs/0/rails/0/filter/1",
            "a series part, a capacitor, or both",
        ),
        (
            "too many sections",
            |p| {
                let section = p.outputs[0].rails[0].filter[0].clone();
                p.outputs[0].rails[0].filter = vec![section; bounds::SECTIONS_MAXIMUM + 1];
            },
            "/outputs/0/rails/0/filter",
            "at most 6",
        ),
        (
            "no capacitor in a bank",
            |p| {
                let bank = &mut p.outputs[0].rails[0].filter[0].capacitor;
                bank.as_mut().expect("a bank").count = 0;
            },
            "/outputs/0/rails/0/filter/0/capacitor/count",
            "between 1 and 1000",
        ),
        ("no output", |p| p.outputs.clear(), "/outputs", "at least one"),
        (
            "too many outputs",
            |p| p.outputs = vec![output(Circuit::Bridge, 0); bounds::OUTPUTS_MAXIMUM + 1],
            "/outputs",
            "at most 8",
        ),
    ]);
}

#[test]
fn harmonics() {
    assert_cases(&[
        (
            "an order twice",
            |p| p.line.harmonics = vec![harmonic(5), harmonic(7), harmonic(5)],
            "/line/harmonics/2/order",
            "order 5 is given twice",
        ),
        (
            "the fundamental",
            |p| p.line.harmonics = vec![harmonic(1)],
            "/line/harmonics/0/order",
            "between 2 and 50",
        ),
        (
            "too high an order",
            |p| p.line.harmonics = vec![harmonic(51)],
            "/line/harmonics/0/order",
            "between 2 and 50",
        ),
        (
            "too many",
            |p| p.line.harmonics = (2..19).map(harmonic).collect(),
            "/line/harmonics",
            "at most 16",
        ),
    ]);
}

#[test]
fn nameplates_are_not_mixed_with_measurements() {
    assert_cases(&[
        (
            "one winding each way",
            |p| {
                wound(p).windings[1] = nameplate(12.0, 1.0);
                wound(p).primary_resistance = None;
                wound(p).regulation = Some(at(0.1));
            },
            "/transformer/windings",
            "for every winding",
        ),
        (
            "a nameplate without regulation",
            |p| {
                wound(p).windings = vec![nameplate(18.0, 2.0)];
                wound(p).primary_resistance = None;
            },
            "/transformer/regulation",
            "is needed",
        ),
        (
            "a nameplate beside a primary resistance",
            |p| {
                wound(p).windings = vec![nameplate(18.0, 2.0)];
                wound(p).regulation = Some(at(0.1));
            },
            "/transformer/primary_resistance",
            "derived from the regulation",
        ),
        (
            "measured without a primary resistance",
            |p| wound(p).primary_resistance = None,
            "/transformer/primary_resistance",
            "is needed",
        ),
        (
            "measured with a regulation",
            |p| wound(p).regulation = Some(at(0.1)),
            "/transformer/regulation",
            "has no meaning",
        ),
        (
            "too many windings",
            |p| wound(p).windings = vec![measured(12.0, 0.1); bounds::WINDINGS_MAXIMUM + 1],
            "/transformer/windings",
            "between 1 and 8",
        ),
    ]);
    let none = faults(|p| wound(p).windings.clear());
    assert_eq!(none.len(), 2, "no winding, and none for the output: {none:?}");
}

#[test]
fn ranges() {
    assert_cases(&[
        (
            "no voltage",
            |p| p.line.voltage = at(0.0),
            "/line/voltage",
            "between 1 mV and 100 kV",
        ),
        (
            "a negative end",
            |p| p.line.voltage = band(-1.0, 230.0, 253.0),
            "/line/voltage",
            "between",
        ),
        (
            "a high end too high",
            |p| p.line.voltage = band(207.0, 230.0, 2e5),
            "/line/voltage",
            "between",
        ),
        (
            "a negative resistance",
            |p| p.line.resistance = at(-0.1),
            "/line/resistance",
            "0 or between",
        ),
        (
            "less than the least but not zero",
            |p| p.line.inductance = at(1e-18),
            "/line/inductance",
            "this inductance must be 0 or between",
        ),
        (
            "ambient below any part",
            |p| p.surroundings.ambient = at(-101.0),
            "/surroundings/ambient",
            "between",
        ),
        (
            "an angle of more than two turns",
            |p| {
                let mut third = harmonic(3);
                third.phase = at(721.0);
                p.line.harmonics = vec![third];
            },
            "/line/harmonics/0/phase",
            "between -720 deg and 720 deg",
        ),
        (
            "a rating of nothing",
            |p| p.outputs[0].rectifier.diode.ratings.current_surge = Some(at(0.0)),
            "/outputs/0/rectifier/diode/ratings/current_surge",
            "between",
        ),
        (
            "a winding of no volts",
            |p| {
                wound(p).windings[1].values = WindingValues::Measured {
                    open_circuit_voltage: Band::ZERO,
                    resistance: at(0.1),
                };
            },
            "/transformer/windings/1/open_circuit_voltage",
            "between",
        ),
    ]);
    // Zero itself, and a band that begins there, where zero is accepted.
    assert_eq!(faults(|p| p.line.resistance = at(0.0)), []);
    assert_eq!(faults(|p| p.line.resistance = band(0.0, 0.1, 0.2)), []);
}

#[test]
fn all_broken_rules_are_reported_at_once() {
    let found = faults(|p| {
        p.line.frequency = at(0.0);
        p.line.harmonics = vec![harmonic(1)];
        wound(p).primary_resistance = None;
        p.outputs[0].winding = 5;
        p.outputs[0].rectifier.stack = Some(capacitor());
        p.outputs[0].rails.clear();
    });
    let pointers: Vec<&str> = found.iter().map(|(pointer, _)| pointer.as_str()).collect();
    let expected = [
        "/line/frequency",
        "/line/harmonics/0/order",
        "/transformer/primary_resistance",
        "/outputs/0/winding",
        "/outputs/0/rectifier/stack",
        "/outputs/0/rails",
    ];
    assert_eq!(pointers, expected);
}

#[test]
fn rules_rest_on_known_values_alone() {
    let mut broken = parts();
    broken.line.voltage = at(0.0);
    broken.line.phases = Phases::Three;
    broken.outputs[0].winding = 9;
    let pointers = |unknown: &'static str| -> Vec<String> {
        let found = broken.faults(&|pointer| pointer != unknown);
        found.into_iter().map(|f| f.pointer).collect()
    };
    let all = ["/line/voltage", "/outputs/0/winding", "/outputs/0/rectifier/circuit"];
    assert_eq!(pointers(""), all);
    assert_eq!(pointers("/line/voltage"), all[1..]);
    assert_eq!(pointers("/transformer/windings"), [all[0], all[2]]);
    assert_eq!(pointers("/line/phases"), all[..2]);
    assert_eq!(pointers("/outputs/0/rectifier/circuit"), all[..2]);
}
