//! Switch-on against closed forms and published values.

use super::*;
use crate::quantity::Band;
use crate::supply::{
    Capacitor, Circuit, Diode, Line, Load, Output, Parts, Phases, Rail, Rectifier, Section, Supply, Surroundings,
};

fn network(ohms: f64, henries: f64, farads: f64) -> Network {
    let band = Band::exactly;
    let supply = Supply::new(Parts {
        name: None,
        line: Line {
            voltage: band(230.0),
            frequency: band(50.0),
            phases: Phases::One,
            resistance: band(ohms),
            inductance: band(henries),
            harmonics: Vec::new(),
        },
        transformer: None,
        outputs: vec![Output {
            winding: 0,
            rectifier: Rectifier {
                circuit: Circuit::Bridge,
                diode: Diode {
                    threshold_voltage: band(0.0),
                    slope_resistance: band(0.0),
                    ratings: Default::default(),
                },
                stack: None,
                coupling: None,
            },
            rails: vec![Rail {
                filter: vec![Section {
                    series: None,
                    capacitor: Some(Capacitor {
                        capacitance: band(farads),
                        esr: band(0.0),
                        count: 1,
                        ratings: Default::default(),
                    }),
                }],
                load: Load::Open,
            }],
        }],
        surroundings: Surroundings::default(),
    })
    .unwrap();
    Network::of(&supply)
}

/// 230 V, 50 Hz, 0.4 ohm, 0.795775 mH (the reference impedance of IEC TR 60725), 470 uF, bridge: on the real sine the worst angle is
/// near 80 degrees and the current 200.12 A; switched on at 90 degrees it is 196.984 A. Computed by event-located integration.
#[test]
fn surge_through_the_reference_impedance() {
    let network = network(0.4, 0.795_775e-3, 470e-6);
    let worst = switch_on_surge(&network).unwrap()[0];
    assert!((worst - 200.12).abs() < 0.006, "{worst}");
    let at_crest = first_cycle(&mut Regimes::new(&network), 0.25).unwrap()[0];
    assert!((at_crest - 196.984).abs() < 0.0006, "{at_crest}");
}

/// Resistance alone: the largest current is crest over resistance, at the crest.
#[test]
fn surge_through_a_resistance() {
    let worst = switch_on_surge(&network(5.0, 0.0, 470e-6)).unwrap()[0];
    assert!((worst - 230.0 * std::f64::consts::SQRT_2 / 5.0).abs() < 1e-3, "{worst}");
}

#[test]
fn nothing_limits_a_stiff_source() {
    assert!(switch_on_surge(&network(0.0, 0.0, 470e-6)).unwrap()[0].is_infinite());
}
