//! One value put in the place of a sound one: the one fault, where it is and what it says.

use super::faults::{CAPACITOR, DIODE, LOAD, assert_faults, faults_of};
use serde_json::{Value, json};

type Case = (String, Value, &'static str);

fn at(base: &str, field: &str) -> String {
    format!("{base}/{field}")
}

fn assert_cases(cases: Vec<Case>) {
    for (pointer, value, words) in cases {
        let faults = faults_of(&[(&pointer, value.clone())], &[]);
        assert_faults(&faults, &[(&pointer, words)], &format!("{pointer} = {value}"));
    }
}

#[test]
fn quantities() {
    assert_cases(vec![
        ("/line/voltage".into(), json!(230), "for example \"230 V\""),
        ("/line/voltage".into(), json!(null), "not null"),
        ("/line/voltage".into(), json!("230"), "has no unit"),
        ("/line/voltage".into(), json!("230 A"), "is a unit of current"),
        ("/line/voltage".into(), json!("2,3 kV"), "decimal comma"),
        ("/line/voltage".into(), json!("inf V"), "not a finite number"),
        ("/line/voltage".into(), json!("nan V"), "not a finite number"),
        ("/line/voltage".into(), json!("-230 V"), "between"),
        ("/line/voltage".into(), json!("0 V"), "between"),
        ("/line/voltage".into(), json!("230 V (240 V to 250 V)"), "low"),
        ("/line/voltage".into(), json!("230 V (250 V to 210 V)"), "low end first"),
        ("/line/voltage".into(), json!("230 V ±120 %"), "between"),
        ("/line/voltage".into(), json!(["230 V"]), "not an array"),
        ("/line/voltage".into(), json!({"value": 230}), "not an object"),
        ("/line/frequency".into(), json!(true), "a frequency as text"),
        ("/line/inductance".into(), json!([]), "an inductance as text"),
        ("/line/inductance".into(), json!("0.4 mh"), "not a unit of inductance"),
        ("/line/harmonics/0/fraction".into(), json!("120 %"), "between"),
        ("/line/harmonics/0/fraction".into(), json!(0.03), "bare number"),
        ("/line/harmonics/0/phase".into(), json!("900 deg"), "between"),
        ("/transformer/primary_voltage".into(), json!("1 MV"), "between"),
        ("/transformer/rating".into(), json!("60 W"), "is a unit of power"),
        (
            "/transformer/core_loss".into(),
            json!("1.9 VA"),
            "is a unit of apparent power",
        ),
        ("/transformer/windings/0/resistance".into(), json!("-1 ohm"), "between"),
        (
            at(DIODE, "threshold_voltage"),
            json!("0.78 mohm"),
            "is a unit of resistance",
        ),
        (at(DIODE, "ratings/current_surge"), json!("0 A"), "between"),
        (at(CAPACITOR, "capacitance"), json!("-4700 uF"), "between"),
        (at(CAPACITOR, "capacitance"), json!(4700e-6), "for example \"4700 uF\""),
        (at(CAPACITOR, "ratings/endurance"), json!("5000 s"), "is a unit of time"),
        (
            at(CAPACITOR, "ratings/temperature"),
            json!("105 K"),
            "is a unit of temperature difference",
        ),
        (at(LOAD, "current"), json!("-1 A"), "between"),
        ("/surroundings/ambient".into(), json!("500 degC"), "between"),
    ]);
}

#[test]
fn whole_numbers_words_and_names() {
    assert_cases(vec![
        ("/line/phases".into(), json!(2), "must be 1 or 3"),
        ("/line/phases".into(), json!(1.5), "whole number"),
        ("/line/phases".into(), json!("1"), "a whole number, not a string"),
        ("/line/harmonics/0/order".into(), json!(1), "from 2 to 50"),
        ("/outputs/0/winding".into(), json!(-1), "whole number"),
        ("/outputs/0/winding".into(), json!(3), "no winding 3"),
        (at(CAPACITOR, "count"), json!(0), "from 1 to 1000"),
        (
            "/outputs/0/rectifier/circuit".into(),
            json!("brige"),
            "must be one of half-wave, bridge",
        ),
        (
            "/outputs/0/rectifier/circuit".into(),
            json!(4),
            "a string, not a number",
        ),
        ("/name".into(), json!("x".repeat(201)), "at most 200 characters"),
        ("/name".into(), json!("line\nbreak"), "control characters"),
        ("/name".into(), json!(null), "not null"),
    ]);
}

#[test]
fn shapes() {
    assert_cases(vec![
        ("/line".into(), json!("230 V"), "an object, not a string"),
        ("/line/harmonics".into(), json!({}), "an array, not an object"),
        ("/line/harmonics/0".into(), json!(5), "an object, not a number"),
        ("/transformer".into(), json!(null), "an object, not null"),
        ("/transformer/windings".into(), json!("20 V"), "an array, not a string"),
        (
            "/transformer/windings/0".into(),
            json!("20 V"),
            "an object, not a string",
        ),
        ("/outputs".into(), json!({}), "an array, not an object"),
        ("/outputs/0".into(), json!([]), "an object, not an array"),
        (
            "/outputs/0/rectifier".into(),
            json!("bridge"),
            "an object, not a string",
        ),
        (DIODE.into(), json!("fast"), "an object, not a string"),
        (at(DIODE, "ratings"), json!([]), "an object, not an array"),
        ("/outputs/0/rails".into(), json!(1), "an array, not a number"),
        ("/outputs/0/rails/0".into(), json!(false), "an object, not a boolean"),
        ("/outputs/0/rails/0/filter".into(), json!(null), "an array, not null"),
        (
            "/outputs/0/rails/0/filter/1/series".into(),
            json!("0.5 ohm"),
            "an object",
        ),
        (CAPACITOR.into(), json!("4700 uF"), "an object, not a string"),
        (LOAD.into(), json!("1 A"), "an object, not a string"),
        (
            at(LOAD, "kind"),
            json!("inductive"),
            "must be one of resistance, current, regulator, open",
        ),
        (at(LOAD, "kind"), json!(7), "a string, not a number"),
        ("/surroundings".into(), json!("25 degC"), "an object, not a string"),
    ]);
}

#[test]
fn rules() {
    assert_cases(vec![
        ("/outputs".into(), json!([]), "at least one output"),
        ("/outputs/0/rails".into(), json!([]), "one rail"),
        (
            "/outputs/0/rails/0/filter/0".into(),
            json!({}),
            "a series part, a capacitor, or both",
        ),
        (
            "/outputs/0/rectifier/circuit".into(),
            json!("three-phase-bridge"),
            "three phases",
        ),
        (
            "/outputs/0/rectifier/stack".into(),
            json!({"capacitance": "470 uF", "esr": "60 mohm"}),
            "has no stack",
        ),
    ]);
    let again = faults_of(&[("/line/harmonics/1", json!({"order": 5, "fraction": "1 %"}))], &[]);
    assert_faults(&again, &[("/line/harmonics/1/order", "given twice")], "an order twice");
}
