//! Quantities by their pointers.

use super::{at, band, capacitor, nameplate, output, parts, supply, wound};
use crate::quantity::{Dimension, End};
use crate::supply::{Circuit, Harmonic, Load, Parts, Section, Series, Supply};

fn pointers(parts: Parts) -> Vec<(String, Dimension)> {
    let slots = Supply::new(parts).expect("sound").slots();
    slots.into_iter().map(|slot| (slot.pointer, slot.dimension)).collect()
}

#[test]
fn slots_stand_in_the_order_of_a_description() {
    use Dimension as D;
    let expected = [
        ("/line/voltage", D::Voltage),
        ("/line/frequency", D::Frequency),
        ("/line/resistance", D::Resistance),
        ("/line/inductance", D::Inductance),
        ("/transformer/primary_voltage", D::Voltage),
        ("/transformer/primary_resistance", D::Resistance),
        ("/transformer/primary_leakage_inductance", D::Inductance),
        ("/transformer/windings/0/open_circuit_voltage", D::Voltage),
        ("/transformer/windings/0/resistance", D::Resistance),
        ("/transformer/windings/0/leakage_inductance", D::Inductance),
        ("/transformer/windings/1/open_circuit_voltage", D::Voltage),
        ("/transformer/windings/1/resistance", D::Resistance),
        ("/transformer/windings/1/leakage_inductance", D::Inductance),
        ("/outputs/0/rectifier/diode/threshold_voltage", D::Voltage),
        ("/outputs/0/rectifier/diode/slope_resistance", D::Resistance),
        ("/outputs/0/rails/0/filter/0/capacitor/capacitance", D::Capacitance),
        ("/outputs/0/rails/0/filter/0/capacitor/esr", D::Resistance),
        ("/outputs/0/rails/0/load/current", D::Current),
        ("/surroundings/ambient", D::Temperature),
    ];
    let expected: Vec<(String, D)> = expected.map(|(pointer, d)| (pointer.to_owned(), d)).to_vec();
    assert_eq!(pointers(parts()), expected);
}

/// A supply with every optional part, so that every quantity there is has its pointer.
fn full() -> Parts {
    let mut parts = parts();
    parts.line.harmonics = vec![Harmonic {
        order: 5,
        fraction: at(0.03),
        phase: at(180.0),
    }];
    let transformer = wound(&mut parts);
    transformer.windings = vec![nameplate(18.0, 2.0)];
    transformer.primary_resistance = None;
    transformer.regulation = Some(at(0.1));
    transformer.rating = Some(at(40.0));
    transformer.core_loss = Some(at(1.9));
    let mut doubler = output(Circuit::HalfWaveDoubler, 0);
    let ratings = &mut doubler.rectifier.diode.ratings;
    (ratings.reverse_voltage, ratings.current_mean) = (Some(at(100.0)), Some(at(3.0)));
    (ratings.current_rms, ratings.current_surge) = (Some(at(4.7)), Some(at(80.0)));
    let mut rated = capacitor();
    (rated.ratings.voltage, rated.ratings.ripple_current) = (Some(at(35.0)), Some(at(3.1)));
    (rated.ratings.endurance, rated.ratings.temperature) = (Some(at(5000.0)), Some(at(105.0)));
    doubler.rails[0].filter = vec![Section {
        series: Some(Series {
            resistance: at(0.5),
            inductance: at(0.01),
        }),
        capacitor: Some(rated),
    }];
    doubler.rails[0].load = Load::Regulator {
        output_voltage: at(15.0),
        output_current: at(1.0),
        dropout: at(1.2),
        quiescent_current: at(0.005),
    };
    parts.outputs = vec![doubler];
    parts
}

#[test]
fn every_optional_quantity_has_its_pointer() {
    let found = pointers(full());
    let expected = [
        "/line/harmonics/0/fraction",
        "/line/harmonics/0/phase",
        "/transformer/regulation",
        "/transformer/windings/0/rated_voltage",
        "/transformer/windings/0/rated_current",
        "/transformer/rating",
        "/transformer/core_loss",
        "/outputs/0/rectifier/diode/ratings/reverse_voltage",
        "/outputs/0/rectifier/diode/ratings/current_mean",
        "/outputs/0/rectifier/diode/ratings/current_rms",
        "/outputs/0/rectifier/diode/ratings/current_surge",
        "/outputs/0/rectifier/coupling/capacitance",
        "/outputs/0/rectifier/coupling/esr",
        "/outputs/0/rectifier/stack/capacitance",
        "/outputs/0/rectifier/stack/esr",
        "/outputs/0/rails/0/filter/0/series/resistance",
        "/outputs/0/rails/0/filter/0/series/inductance",
        "/outputs/0/rails/0/filter/0/capacitor/ratings/voltage",
        "/outputs/0/rails/0/filter/0/capacitor/ratings/ripple_current",
        "/outputs/0/rails/0/filter/0/capacitor/ratings/endurance",
        "/outputs/0/rails/0/filter/0/capacitor/ratings/temperature",
        "/outputs/0/rails/0/load/output_voltage",
        "/outputs/0/rails/0/load/output_current",
        "/outputs/0/rails/0/load/dropout",
        "/outputs/0/rails/0/load/quiescent_current",
    ];
    // In the order of a description: their places among all slots rise.
    let places: Vec<usize> = expected
        .iter()
        .map(|pointer| {
            found
                .iter()
                .position(|(p, _)| p == pointer)
                .unwrap_or_else(|| panic!("{pointer}"))
        })
        .collect();
    assert!(places.is_sorted(), "{found:#?}");
    let mut unique: Vec<&str> = found.iter().map(|(pointer, _)| pointer.as_str()).collect();
    unique.sort_unstable();
    unique.dedup();
    assert_eq!(unique.len(), found.len(), "no pointer twice");
}

#[test]
fn a_quantity_is_found_by_its_pointer_alone() {
    let supply = supply();
    let slot = supply.quantity("/line/voltage").expect("a quantity");
    assert_eq!(
        (slot.dimension, slot.band),
        (Dimension::Voltage, band(207.0, 230.0, 253.0))
    );
    for pointer in [
        "",
        "/",
        "/line",
        "line/voltage",
        "/line/voltage/",
        "/line/phases",
        "/outputs/1/rails/0/load/current",
    ] {
        assert_eq!(supply.quantity(pointer).expect_err(pointer).pointer, pointer);
    }
}

#[test]
fn with_replaces_what_it_names_and_nothing_else() {
    let supply = supply();
    let current = "/outputs/0/rails/0/load/current";
    let changed = supply
        .with(&[("/line/voltage", at(115.0)), (current, at(0.5))])
        .expect("sound");
    for (before, after) in supply.slots().iter().zip(changed.slots()) {
        let expected = match before.pointer.as_str() {
            "/line/voltage" => at(115.0),
            pointer if pointer == current => at(0.5),
            _ => before.band,
        };
        assert_eq!(after.band, expected, "{}", before.pointer);
    }
    let faults = supply
        .with(&[("/line/voltage", at(-1.0)), (current, at(-1.0))])
        .expect_err("faults");
    let pointers: Vec<&str> = faults.iter().map(|f| f.pointer.as_str()).collect();
    assert_eq!(pointers, ["/line/voltage", current]);
    let faults = supply
        .with(&[("/line/colour", at(1.0)), ("/line/voltage", at(1.0))])
        .expect_err("a fault");
    assert_eq!(faults.len(), 1);
    assert_eq!(faults[0].pointer, "/line/colour");
}

#[test]
fn ends_are_chosen_for_bands_and_only_for_bands() {
    let mut parts = parts();
    parts.outputs[0].rails[0].load = Load::Current {
        current: band(0.05, 1.2, 1.4),
    };
    let supply = Supply::new(parts).expect("sound");
    let current = "/outputs/0/rails/0/load/current";
    let bands: Vec<String> = supply.bands().into_iter().map(|slot| slot.pointer).collect();
    assert_eq!(bands, ["/line/voltage", current]);
    let mut asked = Vec::new();
    let chosen = supply.at_ends(|pointer| {
        asked.push(pointer.to_owned());
        (pointer == current).then_some(End::High)
    });
    assert_eq!(asked, bands, "points are not asked for");
    assert_eq!(chosen.quantity("/line/voltage").expect("there").band, at(230.0));
    assert_eq!(chosen.quantity(current).expect("there").band, at(1.4));
    assert!(chosen.bands().is_empty());
    let low = supply.at_ends(|_| Some(End::Low));
    assert_eq!(low.quantity("/line/voltage").expect("there").band, at(207.0));
    assert_eq!(low.quantity("/line/frequency").expect("there").band, at(50.0));
}
