//! Nameplates against hand calculations.

use super::{at, nameplate, output, parts, supply, wound};
use crate::supply::{Circuit, Derived, Supply};

fn assert_near(found: f64, expected: f64, what: &str) {
    assert!(
        (found - expected).abs() <= 1e-12 * expected.abs(),
        "{what}: {found} for {expected}"
    );
}

fn derived(circuits: [Circuit; 2]) -> Derived {
    let mut parts = parts();
    let transformer = wound(&mut parts);
    transformer.primary_resistance = None;
    transformer.regulation = Some(at(0.1));
    transformer.core_loss = Some(at(1.5));
    transformer.windings = vec![nameplate(20.0, 2.0), nameplate(11.5, 1.0)];
    transformer.windings[1].leakage_inductance = at(60e-6);
    parts.outputs = vec![output(circuits[0], 0), output(circuits[1], 1)];
    Supply::new(parts)
        .expect("sound")
        .derived_transformer()
        .expect("a transformer")
}

/// By hand, for 230 V to 20 V at 2 A and 11.5 V at 1 A with a regulation of 10 %:
///
/// - without load `20 * 1.1 = 22 V` and `11.5 * 1.1 = 12.65 V`;
/// - half of the drop of 2 V falls on the first winding: `1 V / 2 A = 0.5 ohm`; half of 1.15 V on the second:
///   `0.575 V / 1 A = 0.575 ohm`;
/// - both together draw `2 * 22 / 230 + 1 * 12.65 / 230 = 56.65 / 230 A` from the primary, whose half of the drop is seen
///   at the windings as 1 V of 22 V, hence as `230 / 22 V` at the primary: `(230 / 22) * 230 / 56.65 = 42.446...  ohm`.
#[test]
fn resistances_of_a_nameplate() {
    let derived = derived([Circuit::Bridge, Circuit::HalfWave]);
    assert_near(derived.windings[0].open_circuit_voltage, 22.0, "first voltage");
    assert_near(derived.windings[1].open_circuit_voltage, 12.65, "second voltage");
    assert_near(derived.windings[0].resistance, 0.5, "first resistance");
    assert_near(derived.windings[1].resistance, 0.575, "second resistance");
    assert_near(
        derived.primary_resistance,
        230.0 * 230.0 / (22.0 * 56.65),
        "primary resistance",
    );
    assert_eq!(derived.windings[1].leakage_inductance, 60e-6);
    assert_eq!((derived.core_loss, derived.primary_voltage), (1.5, 230.0));
    // The check backwards: loaded with rated currents in phase, the first winding gives its rated 20 V.
    let current = (2.0 * 22.0 + 1.0 * 12.65) / 230.0;
    let at_primary = 230.0 - current * derived.primary_resistance;
    assert_near(
        at_primary * 22.0 / 230.0 - 2.0 * derived.windings[0].resistance,
        20.0,
        "rated voltage",
    );
}

/// The first winding is tapped: each half has 22 V and 0.5 ohm as before, but two halves at 2 A draw
/// `2 * 2 * 22 / 230 + 12.65 / 230 = 100.65 / 230 A`.
#[test]
fn both_halves_of_a_tapped_winding_load_the_primary() {
    let derived = derived([Circuit::CentreTap, Circuit::HalfWave]);
    assert_near(derived.windings[0].open_circuit_voltage, 22.0, "each half");
    assert_near(derived.windings[0].resistance, 0.5, "each half");
    assert_near(
        derived.primary_resistance,
        230.0 * 230.0 / (22.0 * 100.65),
        "primary resistance",
    );
}

#[test]
fn measured_values_are_taken_as_they_are() {
    let supply = supply();
    let transformer = supply.transformer().expect("a transformer");
    assert!(!transformer.is_nameplate());
    let derived = supply.derived_transformer().expect("a transformer");
    assert_eq!(derived.primary_resistance, 11.0);
    assert_eq!(
        (derived.windings[0].open_circuit_voltage, derived.windings[0].resistance),
        (20.5, 0.21)
    );
    assert_eq!(
        (derived.windings[1].open_circuit_voltage, derived.windings[1].resistance),
        (12.0, 0.1)
    );
    assert_eq!(derived.core_loss, 0.0);
}
