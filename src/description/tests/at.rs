//! Points chosen within the bands of a supply.

use super::{example, put, read, tree};
use crate::description::request::read_at;
use crate::quantity::Band;
use crate::supply::{Fault, Supply};
use serde_json::{Value, json};

const CURRENT: &str = "/outputs/0/rails/0/load/current";

fn supply() -> Supply {
    read(&example()).expect("a sound supply")
}

fn chosen(at: &Value) -> Result<Supply, Vec<Fault>> {
    read_at(&tree(&at.to_string()), &supply())
}

fn value(supply: &Supply, pointer: &str) -> f64 {
    let band = supply.quantity(pointer).expect(pointer).band;
    assert!(band.is_point(), "{pointer}");
    band.nominal()
}

#[test]
fn all_that_is_not_chosen_is_nominal() {
    let point = chosen(&json!({})).expect("a point");
    assert!(point.bands().is_empty());
    assert_eq!(value(&point, "/line/voltage"), 230.0);
    assert_eq!(value(&point, CURRENT), 1.2);
    assert_eq!(value(&point, "/surroundings/ambient"), 25.0);
}

#[test]
fn ends_and_quantities_within_are_chosen() {
    let at = |text: &str| {
        value(
            &chosen(&json!({"/line/voltage": text})).expect("a point"),
            "/line/voltage",
        )
    };
    for (text, volts) in [
        ("low", 207.0),
        ("nominal", 230.0),
        ("high", 253.0),
        ("218 V", 218.0),
        ("0.253 kV", 253.0),
    ] {
        assert_eq!(at(text), volts, "{text}");
    }
    let both = chosen(&json!({"/line/voltage": "low", CURRENT: "high"})).expect("a point");
    assert_eq!((value(&both, "/line/voltage"), value(&both, CURRENT)), (207.0, 1.4));
    // A quantity without width has its ends, too.
    let frequency = chosen(&json!({"/line/frequency": "high"})).expect("a point");
    assert_eq!(value(&frequency, "/line/frequency"), 50.0);
}

#[test]
fn every_fault_is_found_at_its_key() {
    let faults = chosen(&json!({
        "/line/voltage": "300 V",
        "/line/frequency": "50 V",
        "/line/resistance": 0.25,
        "/line/inductance": null,
        "/line/colour": "low",
        "line/voltage": "low",
        "/outputs/0/rails/0/load": "low",
        "/surroundings/ambient": "lowest",
        CURRENT: "1 A ±10 %",
    }))
    .expect_err("faults");
    let detail = |pointer: &str| {
        let found = faults.iter().find(|f| f.pointer == pointer);
        &found.unwrap_or_else(|| panic!("{pointer} in {faults:#?}")).detail
    };
    assert_eq!(faults.len(), 9, "{faults:#?}");
    assert!(detail("/~1line~1voltage").contains("207 V to 253 V"));
    assert!(detail("/~1line~1frequency").contains("unit of voltage"));
    assert!(detail("/~1line~1resistance").contains("a string, not a number"));
    assert!(detail("/~1line~1inductance").contains("not null"));
    assert!(detail("/~1line~1colour").contains("not a quantity of this supply"));
    assert!(detail("/line~1voltage").contains("not a quantity of this supply"));
    assert!(detail("/~1outputs~10~1rails~10~1load").contains("not a quantity of this supply"));
    assert!(detail("/~1surroundings~1ambient").contains("\"low\", \"nominal\", \"high\""));
    assert!(detail("/~1outputs~10~1rails~10~1load~1current").contains("one value is wanted"));
}

#[test]
fn what_is_no_object_and_what_is_given_twice() {
    for at in [json!([]), json!("low"), json!(null)] {
        let faults = chosen(&at).expect_err("a fault");
        assert_eq!((faults.len(), faults[0].pointer.as_str()), (1, ""), "{at}");
    }
    for (first, second) in [("low", "high"), ("300 V", "low")] {
        let text = format!(r#"{{"/line/voltage": "{first}", "/line/voltage": "{second}"}}"#);
        let faults = read_at(&tree(&text), &supply()).expect_err("a fault");
        assert!(
            faults
                .iter()
                .any(|f| f.pointer == "/~1line~1voltage" && f.detail == "is given twice"),
            "{faults:?}"
        );
    }
}

#[test]
fn a_regulator_may_feed_nothing_at_one_end() {
    let mut value = example();
    let load = json!({"kind": "regulator", "output_voltage": "15 V", "output_current": "1 A (0 A to 1 A)", "dropout": "1.2 V"});
    put(&mut value, "/outputs/0/rails/0/load", load);
    let supply = read(&value).expect("sound while some current may flow");
    let at = tree(r#"{"/outputs/0/rails/0/load/output_current": "low"}"#);
    let chosen = read_at(&at, &supply).expect("sound without any");
    let slot = chosen
        .quantity("/outputs/0/rails/0/load/output_current")
        .expect("still there");
    assert_eq!(slot.band, Band::ZERO);
}
