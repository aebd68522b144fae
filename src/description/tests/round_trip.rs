//! What is written reads back to the same bits.

use super::supplies::supply;
use super::{example, read, tree};
use crate::description::describe::describe;
use crate::description::read_supply;
use crate::supply::Supply;
use proptest::prelude::*;
use serde_json::{Value, json};

fn bits(supply: &Supply) -> Vec<[u64; 3]> {
    let ends = |band: &crate::quantity::Band| [band.low(), band.nominal(), band.high()].map(f64::to_bits);
    supply.slots().iter().map(|slot| ends(&slot.band)).collect()
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(400))]

    #[test]
    fn a_supply_reads_back_to_the_same_bits(supply in supply()) {
        let text = serde_json::to_string(&describe(&supply)).expect("a JSON text");
        let back = read_supply(&tree(&text));
        prop_assert_eq!(back.as_ref(), Ok(&supply), "{}", text);
        let back = back.expect("read above");
        prop_assert_eq!(bits(&back), bits(&supply));
        prop_assert_eq!(describe(&back), describe(&supply));
    }
}

#[test]
fn what_has_its_default_is_left_out_and_nothing_is_null() {
    let written = serde_json::to_value(describe(&read(&example()).expect("sound"))).expect("a value");
    assert_eq!(written.pointer("/line/phases"), None);
    assert_eq!(written.pointer("/transformer/primary_leakage_inductance"), None);
    assert_eq!(written.pointer("/outputs/0/winding"), None);
    assert_eq!(written.pointer("/outputs/0/rails/0/filter/0/capacitor/count"), None);
    let capacitor = "/outputs/0/rails/0/filter/0/capacitor/capacitance";
    assert_eq!(written.pointer(capacitor), Some(&json!("4.7 mF ±20 %")));
    assert_eq!(written.pointer("/outputs/0/rectifier/circuit"), Some(&json!("bridge")));
    assert_eq!(
        written.pointer("/outputs/0/rails/0/load"),
        Some(&json!({"kind": "current", "current": "1.2 A (50 mA to 1.4 A)"}))
    );
    assert!(!written.to_string().contains("null"));
}

#[test]
fn every_word_of_the_form_is_one_that_is_read() {
    for circuit in crate::supply::Circuit::ALL {
        let word = serde_json::to_value(crate::description::describe::circuit(circuit)).expect("a word");
        assert_eq!(word, Value::from(circuit.name()));
    }
}
