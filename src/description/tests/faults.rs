//! Faulty descriptions and exactly the faults they have.

use super::{example, put, read, take, tree};
use crate::description::read_supply;
use crate::supply::Fault;
use serde_json::{Value, json};

/// The faults of the example with some values put and some fields taken away.
pub(super) fn faults_of(changes: &[(&str, Value)], taken: &[&str]) -> Vec<Fault> {
    let mut value = example();
    taken.iter().for_each(|pointer| take(&mut value, pointer));
    changes
        .iter()
        .for_each(|(pointer, new)| put(&mut value, pointer, new.clone()));
    read(&value).expect_err("faults")
}

/// Holds that the faults stand at these pointers and nowhere else, each with these words.
pub(super) fn assert_faults(faults: &[Fault], expected: &[(&str, &str)], case: &str) {
    let mut found: Vec<&str> = faults.iter().map(|f| f.pointer.as_str()).collect();
    let mut wanted: Vec<&str> = expected.iter().map(|(pointer, _)| *pointer).collect();
    found.sort_unstable();
    wanted.sort_unstable();
    assert_eq!(found, wanted, "{case}: {faults:#?}");
    for (pointer, words) in expected {
        let detail = &faults
            .iter()
            .find(|f| f.pointer == *pointer)
            .expect("found above")
            .detail;
        assert!(detail.contains(words), "{case}: {detail:?} lacks {words:?}");
    }
}

pub(super) const DIODE: &str = "/outputs/0/rectifier/diode";
pub(super) const CAPACITOR: &str = "/outputs/0/rails/0/filter/0/capacitor";
pub(super) const LOAD: &str = "/outputs/0/rails/0/load";

#[test]
fn the_worked_example_reads() {
    let supply = read(&example()).expect("a sound supply");
    assert_eq!(supply.name(), Some("Kiln controller, 24 V rail"));
    let voltage = supply.line().voltage;
    assert_eq!(
        (voltage.low(), voltage.nominal(), voltage.high()),
        (207.0, 230.0, 253.0)
    );
    let harmonic = &supply.line().harmonics[0];
    assert_eq!(
        (harmonic.order, harmonic.fraction.nominal(), harmonic.phase.nominal()),
        (5, 0.03, 180.0)
    );
    let rail = &supply.outputs()[0].rails[0];
    assert_eq!(rail.filter.len(), 2);
    let capacitor = rail.filter[0].capacitor.as_ref().expect("a capacitor");
    assert_eq!(
        (capacitor.capacitance.low(), capacitor.capacitance.high()),
        (3760e-6, 5640e-6)
    );
    assert_eq!(capacitor.ratings.endurance.map(|b| b.nominal()), Some(5000.0));
    assert_eq!(supply.surroundings().ambient.high(), 50.0);
}

#[test]
fn what_is_left_out_has_its_default() {
    let mut value = example();
    for pointer in [
        "/name",
        "/line/phases",
        "/line/resistance",
        "/line/inductance",
        "/line/harmonics/0/phase",
        "/transformer/primary_leakage_inductance",
        "/transformer/windings/0/leakage_inductance",
        "/transformer/rating",
        "/transformer/core_loss",
        "/outputs/0/winding",
        "/outputs/0/rectifier/diode/ratings",
        "/outputs/0/rails/0/filter/0/capacitor/count",
        "/outputs/0/rails/0/filter/0/capacitor/ratings",
        "/outputs/0/rails/0/filter/1/series/inductance",
        "/surroundings",
    ] {
        take(&mut value, pointer);
    }
    let supply = read(&value).expect("a sound supply");
    let given = |pointer: &str| supply.quantity(pointer).expect(pointer).band;
    for pointer in [
        "/line/resistance",
        "/line/inductance",
        "/line/harmonics/0/phase",
        "/transformer/primary_leakage_inductance",
        "/transformer/windings/0/leakage_inductance",
        "/outputs/0/rails/0/filter/1/series/inductance",
    ] {
        assert_eq!((given(pointer).low(), given(pointer).high()), (0.0, 0.0), "{pointer}");
    }
    let ambient = given("/surroundings/ambient");
    assert_eq!((ambient.low(), ambient.high()), (25.0, 25.0));
    assert!(supply.name().is_none());
    assert_eq!(
        supply.outputs()[0].rails[0].filter[0]
            .capacitor
            .as_ref()
            .map(|c| c.count),
        Some(1)
    );
    take(&mut value, "/outputs/0/rails/0/filter");
    take(&mut value, "/line/harmonics");
    assert!(read(&value).expect("sound").outputs()[0].rails[0].filter.is_empty());
}

#[test]
fn a_missing_field_is_named() {
    for pointer in [
        "/line",
        "/line/voltage",
        "/line/frequency",
        "/line/harmonics/0/order",
        "/line/harmonics/0/fraction",
        "/transformer/primary_voltage",
        "/transformer/windings",
        "/outputs",
        "/outputs/0/rectifier",
        "/outputs/0/rectifier/circuit",
        "/outputs/0/rectifier/diode",
        "/outputs/0/rectifier/diode/threshold_voltage",
        "/outputs/0/rectifier/diode/slope_resistance",
        "/outputs/0/rails",
        "/outputs/0/rails/0/filter/0/capacitor/capacitance",
        "/outputs/0/rails/0/filter/0/capacitor/esr",
        "/outputs/0/rails/0/load",
        "/outputs/0/rails/0/load/current",
    ] {
        assert_faults(&faults_of(&[], &[pointer]), &[(pointer, "is missing")], pointer);
    }
    // Without its kind it is not known which fields a load has.
    let kind = "/outputs/0/rails/0/load/kind";
    assert_faults(&faults_of(&[], &[kind]), &[(kind, "is missing")], kind);
    let faults = faults_of(&[], &["/transformer/primary_resistance"]);
    assert_faults(
        &faults,
        &[("/transformer/primary_resistance", "is needed")],
        "resistance",
    );
    let faults = faults_of(&[], &["/transformer/windings/0/resistance"]);
    assert_faults(
        &faults,
        &[("/transformer/windings/0", "open_circuit_voltage and resistance")],
        "pair",
    );
}

#[test]
fn an_unknown_field_is_an_error_at_every_level() {
    let objects = [
        ("", "a supply"),
        ("/line", "a line"),
        ("/line/harmonics/0", "a harmonic"),
        ("/transformer", "a transformer"),
        ("/transformer/windings/0", "a winding"),
        ("/outputs/0", "an output"),
        ("/outputs/0/rectifier", "a rectifier"),
        (DIODE, "a diode"),
        ("/outputs/0/rectifier/diode/ratings", "the ratings of a diode"),
        ("/outputs/0/rails/0", "a rail"),
        ("/outputs/0/rails/0/filter/0", "a filter section"),
        ("/outputs/0/rails/0/filter/1/series", "a series part"),
        (CAPACITOR, "a capacitor"),
        (
            "/outputs/0/rails/0/filter/0/capacitor/ratings",
            "the ratings of a capacitor",
        ),
        (LOAD, "a current load"),
        ("/surroundings", "the surroundings"),
    ];
    let mut all = Vec::new();
    for (object, thing) in objects {
        let pointer = format!("{object}/colour");
        let faults = faults_of(&[(&pointer, json!("red"))], &[]);
        let words = format!("\"colour\" is not a field of {thing}; its fields are ");
        assert_faults(&faults, &[(&pointer, &words)], object);
        all.push((pointer, words));
    }
    let changes: Vec<(&str, Value)> = all.iter().map(|(pointer, _)| (pointer.as_str(), json!(1))).collect();
    let expected: Vec<(&str, &str)> = all.iter().map(|(p, w)| (p.as_str(), w.as_str())).collect();
    assert_faults(&faults_of(&changes, &[]), &expected, "all levels at once");
}

#[test]
fn the_nearest_field_is_suggested() {
    for (pointer, near) in [
        ("/line/voltge", "did you mean voltage?"),
        ("/line/pahses", "did you mean phases?"),
        (
            "/outputs/0/rectifier/diode/ratings/current_men",
            "did you mean current_mean?",
        ),
        (
            "/outputs/0/rectifier/diode/ratings/current_rns",
            "did you mean current_rms?",
        ),
        ("/outputs/0/rails/0/filter/0/capacitor/cuont", "did you mean count?"),
    ] {
        let faults = faults_of(&[(pointer, json!("1 V"))], &[]);
        assert_faults(&faults, &[(pointer, near)], pointer);
    }
    let faults = faults_of(&[("/line/x", json!(1))], &[]);
    assert!(!faults[0].detail.contains("did you mean"), "{}", faults[0].detail);
    // A key is a reference token: ~ and / are escaped.
    let mut value = example();
    value["line"]["a/b~c"] = json!(1);
    assert_eq!(read(&value).expect_err("a fault")[0].pointer, "/line/a~1b~0c");
}

#[test]
fn a_slip_in_an_optional_field_casts_doubt_on_its_default() {
    // Without the slip this is a sound three-phase supply: nothing is said about one phase.
    let faults = faults_of(
        &[
            ("/line/phasse", json!(3)),
            ("/outputs/0/rectifier/circuit", json!("three-phase-bridge")),
        ],
        &["/line/phases"],
    );
    assert_faults(&faults, &[("/line/phasse", "did you mean phases?")], "slip");
}

#[test]
fn what_this_version_does_not_know_is_said_once() {
    let capacitor = json!({"part": "C-17"});
    for (pointer, value, at, words) in [
        (CAPACITOR, capacitor, "/part", "no parts list"),
        (DIODE, json!({"part": "D-3"}), "/part", "no parts list"),
        ("/transformer", json!({"part": "T-1"}), "/part", "no parts list"),
        (
            "/outputs/0/rails/0/filter/1/series",
            json!({"part": "L-1"}),
            "/part",
            "no parts list",
        ),
        (
            DIODE,
            json!({"points": [{"voltage": "0.6 V", "current": "10 mA"}]}),
            "/points",
            "straight-line diodes only",
        ),
        (
            LOAD,
            json!({"kind": "power", "power": "30 W", "minimum_voltage": "18 V"}),
            "/kind",
            "no constant-power loads",
        ),
    ] {
        let at = format!("{pointer}{at}");
        assert_faults(&faults_of(&[(pointer, value)], &[]), &[(&at, words)], pointer);
    }
    let faults = faults_of(&[("/transformer/series", json!([0, 1]))], &[]);
    assert_faults(&faults, &[("/transformer/series", "none in series")], "series");
    // They are not offered as fields either.
    let faults = faults_of(&[("/outputs/0/rectifier/diode/colour", json!(1))], &[]);
    assert!(
        !faults[0].detail.contains("part") && !faults[0].detail.contains("points"),
        "{}",
        faults[0].detail
    );
}

#[test]
fn all_faults_of_shape_and_range_are_reported_together() {
    let faults = faults_of(
        &[
            ("/name", json!(5)),
            ("/line/voltage", json!(230)),
            ("/line/frequency", json!("-50 Hz")),
            ("/line/phases", json!(2)),
            ("/line/harmonics/0/order", json!(99)),
            ("/line/harmonics/0/fraction", json!("200 %")),
            ("/transformer/primary_resistance", json!("11 V")),
            ("/transformer/windings/0/resistance", json!("-1 ohm")),
            ("/transformer/colour", json!("blue")),
            ("/outputs/0/winding", json!(4)),
            ("/outputs/0/rectifier/circuit", json!("ring")),
            ("/outputs/0/rectifier/diode/slope_resistance", json!("-18 mohm")),
            ("/outputs/0/rails/0/filter/0/capacitor/count", json!(2.5)),
            ("/outputs/0/rails/0/filter/0/capacitor/ratings/voltage", json!("0 V")),
            ("/outputs/0/rails/0/filter/1", json!({})),
            (
                "/outputs/0/rails/0/load",
                json!({"kind": "regulator", "output_voltage": "15 V", "output_current": "0 A"}),
            ),
            ("/surroundings/ambient", json!("-200 degC")),
        ],
        &[],
    );
    let expected = [
        ("/name", "a string"),
        ("/line/voltage", "bare number"),
        ("/line/frequency", "between"),
        ("/line/phases", "1 or 3"),
        ("/line/harmonics/0/order", "from 2 to 50"),
        ("/line/harmonics/0/fraction", "between"),
        ("/transformer/primary_resistance", "unit of voltage"),
        ("/transformer/windings/0/resistance", "between"),
        ("/transformer/colour", "not a field"),
        ("/outputs/0/winding", "no winding 4"),
        ("/outputs/0/rectifier/circuit", "must be one of"),
        ("/outputs/0/rectifier/diode/slope_resistance", "between"),
        ("/outputs/0/rails/0/filter/0/capacitor/count", "whole number"),
        ("/outputs/0/rails/0/filter/0/capacitor/ratings/voltage", "between"),
        ("/outputs/0/rails/0/filter/1", "a series part, a capacitor, or both"),
        ("/outputs/0/rails/0/load/dropout", "is missing"),
        ("/surroundings/ambient", "between"),
    ];
    assert_faults(&faults, &expected, "all together");
}

#[test]
fn no_rule_judges_what_could_not_be_read() {
    let two_rails = json!([{"load": {"kind": "open"}}, {"load": {"kind": "open"}}]);
    let three_phase = ("/outputs/0/rectifier/circuit", json!("three-phase-bridge"));
    let split = ("/outputs/0/rectifier/circuit", json!("split-bridge"));
    let cases: Vec<(Vec<(&str, Value)>, &str)> = vec![
        // The circuit may need three phases, a tap, two rails, a column: nothing is known of it.
        (
            vec![
                ("/outputs/0/rectifier/circuit", json!(null)),
                ("/outputs/0/rails", two_rails.clone()),
                (
                    "/outputs/0/rectifier/stack",
                    json!({"capacitance": "1 uF", "esr": "1 ohm"}),
                ),
            ],
            "/outputs/0/rectifier/circuit",
        ),
        (vec![("/line/phases", json!("three")), three_phase], "/line/phases"),
        (
            vec![
                ("/transformer", json!(7)),
                split.clone(),
                ("/outputs/0/rails", two_rails),
            ],
            "/transformer",
        ),
        (
            vec![("/transformer/windings", json!(7)), ("/outputs/0/winding", json!(3))],
            "/transformer/windings",
        ),
        (vec![("/transformer/regulation", json!(5))], "/transformer/regulation"),
        (
            vec![("/transformer/primary_resistance", json!(5))],
            "/transformer/primary_resistance",
        ),
        (
            vec![("/outputs/0/rails/0/filter/1", json!({"series": 3}))],
            "/outputs/0/rails/0/filter/1/series",
        ),
    ];
    for (changes, pointer) in cases {
        assert_faults(&faults_of(&changes, &[]), &[(pointer, "")], &format!("{changes:?}"));
    }
    // A winding that is neither pair says nothing about regulation and primary resistance.
    let faults = faults_of(
        &[(
            "/transformer/windings/0",
            json!({"rated_voltage": "18 V", "resistance": "1 ohm"}),
        )],
        &["/transformer/primary_resistance"],
    );
    assert_faults(&faults, &[("/transformer/windings/0", "no other pair")], "pair");
    // Its other fields are still held against their ranges.
    let odd = json!({"rated_voltage": "-18 V", "leakage_inductance": "-1 H"});
    let faults = faults_of(&[("/transformer/windings/0", odd)], &[]);
    let expected = [
        ("/transformer/windings/0", "no other pair"),
        ("/transformer/windings/0/rated_voltage", "between"),
        ("/transformer/windings/0/leakage_inductance", "between"),
    ];
    assert_faults(&faults, &expected, "ranges of half a pair");
}

#[test]
fn a_field_given_twice_is_a_fault() {
    let text = example().to_string().replacen(
        "\"frequency\":\"50 Hz\"",
        "\"frequency\":\"50 Hz\",\"frequency\":\"60 Hz\",\"frequency\":\"60 Hz\"",
        1,
    );
    let faults = read_supply(&tree(&text)).expect_err("a fault");
    assert_faults(&faults, &[("/line/frequency", "is given twice")], "twice");
}

#[test]
fn what_is_no_object_is_no_supply() {
    for value in [json!(null), json!([]), json!("supply"), json!(1)] {
        assert_faults(
            &read(&value).expect_err("a fault"),
            &[("", "must be an object")],
            "no object",
        );
    }
    assert_faults(
        &read(&json!({})).expect_err("faults"),
        &[("/line", "is missing"), ("/outputs", "is missing")],
        "empty",
    );
}

#[test]
fn whole_numbers_may_be_written_with_a_point() {
    let mut value = example();
    put(&mut value, "/line/phases", json!(1.0));
    put(&mut value, "/line/harmonics/0/order", json!(5.0));
    put(&mut value, "/outputs/0/winding", json!(0.0));
    assert!(read(&value).is_ok());
}

#[test]
fn the_list_of_faults_is_bounded() {
    let harmonics = vec![json!(0); 5000];
    let faults = faults_of(&[("/line/harmonics", json!(harmonics))], &[]);
    assert_eq!(faults.len(), 200);
}
