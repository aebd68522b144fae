//! Extremes of made-up figures against brute force over fine grids.

use super::*;
use crate::quantity::{Band, End};
use crate::supply::{Circuit, Diode, Line, Load, Output, Parts, Phases, Rail, Rectifier, Supply};

/// A supply whose line voltage, frequency, resistance and load are uncertain.
fn supply() -> Supply {
    let band = |low, nominal, high| Band::new(low, nominal, high).unwrap();
    Supply::new(Parts {
        name: None,
        line: Line {
            voltage: band(200.0, 230.0, 250.0),
            frequency: band(49.0, 50.0, 51.0),
            phases: Phases::One,
            resistance: band(0.5, 1.0, 2.0),
            inductance: Band::ZERO,
            harmonics: Vec::new(),
        },
        transformer: None,
        outputs: vec![Output {
            winding: 0,
            rectifier: Rectifier {
                circuit: Circuit::Bridge,
                diode: Diode {
                    threshold_voltage: Band::exactly(0.8),
                    slope_resistance: Band::ZERO,
                    ratings: crate::supply::DiodeRatings {
                        reverse_voltage: Some(band(90.0, 100.0, 110.0)),
                        ..Default::default()
                    },
                },
                stack: None,
                coupling: None,
            },
            rails: vec![Rail {
                filter: Vec::new(),
                load: Load::Resistance {
                    resistance: band(10.0, 20.0, 40.0),
                },
            }],
        }],
        surroundings: Default::default(),
    })
    .unwrap()
}

/// Monotone in all; with a ridge inside; bent by one band according to another.
fn figures(supply: &Supply) -> Result<Vec<f64>, ()> {
    let line = supply.line();
    let Load::Resistance { resistance } = supply.outputs()[0].rails[0].load.clone() else {
        return Err(());
    };
    let (v, f, r, load) = (
        line.voltage.nominal(),
        line.frequency.nominal(),
        line.resistance.nominal(),
        resistance.nominal(),
    );
    Ok(vec![
        v - 3.0 * r + load / f,
        -(load - 25.0).powi(2) + 0.01 * v * (load - 24.0),
        (r - 1.0) * load,
    ])
}

fn brute(index: usize) -> (f64, f64) {
    let supply = supply();
    let corners = Corners::of(&supply);
    let steps = 12;
    let (mut low, mut high) = (f64::INFINITY, f64::NEG_INFINITY);
    for code in 0..(steps + 1_usize).pow(4) {
        let values: Vec<f64> = corners
            .bands
            .iter()
            .enumerate()
            .map(|(band, slot)| {
                let step = code / (steps + 1_usize).pow(band as u32) % (steps + 1);
                slot.band.low() + (slot.band.high() - slot.band.low()) * step as f64 / steps as f64
            })
            .collect();
        let value = figures(&corners.at(&values)).unwrap()[index];
        (low, high) = (low.min(value), high.max(value));
    }
    (low, high)
}

#[test]
fn ratings_are_no_corner_of_the_circuit() {
    let pointers: Vec<String> = circuit_bands(&supply()).into_iter().map(|s| s.pointer).collect();
    let expected = [
        "/line/voltage",
        "/line/frequency",
        "/line/resistance",
        "/outputs/0/rails/0/load/resistance",
    ];
    assert_eq!(pointers, expected);
    assert_eq!(Corners::of(&supply()).count(), Some(16));
}

#[test]
fn extremes_agree_with_brute_force() {
    let found = survey(&supply(), 4096, figures).unwrap();
    assert!(found.all_corners);
    for (index, range) in found.ranges.iter().enumerate() {
        let (low, high) = brute(index);
        // The grid may miss an interior extreme by its step; the survey must not lie inside it by more.
        assert!(
            range.minimum <= low + 0.3 && range.maximum >= high - 0.3,
            "figure {index}: {range:?} for {low} to {high}"
        );
    }
    assert_eq!(found.ranges[0].known_by, KnownBy::Monotone);
    assert_eq!(found.ranges[1].known_by, KnownBy::Searched);
    let inside = found.ranges[1]
        .at_maximum
        .iter()
        .find(|a| a.pointer.ends_with("load/resistance"))
        .unwrap();
    assert!(
        matches!(inside.chosen, Chosen::Value(ohms) if (24.0..29.0).contains(&ohms)),
        "{inside:?}"
    );
    let ends: Vec<Chosen> = found.ranges[0].at_minimum.iter().map(|a| a.chosen.clone()).collect();
    assert_eq!(ends, [End::Low, End::High, End::High, End::Low].map(Chosen::End));
}

#[test]
fn beyond_the_bound_signs_choose_and_the_answer_says_so() {
    let found = survey(&supply(), 8, figures).unwrap();
    assert!(!found.all_corners && found.corners == Some(16));
    let (low, high) = brute(0);
    assert!((found.ranges[0].minimum - low).abs() < 1e-9 && (found.ranges[0].maximum - high).abs() < 1e-9);
    assert!(found.ranges.iter().all(|r| r.known_by == KnownBy::Searched));
}

#[test]
fn a_supply_without_bands_has_one_point() {
    let found = survey(&supply().at_ends(|_| None), 4096, figures).unwrap();
    assert_eq!((found.corners, found.solved), (Some(1), 1));
    assert!(
        found
            .ranges
            .iter()
            .all(|r| r.minimum == r.maximum && r.at_minimum.is_empty())
    );
}

#[test]
fn a_corner_that_fails_fails_the_survey() {
    let failing = |supply: &Supply| {
        if supply.line().voltage.nominal() > 240.0 {
            Err("high line")
        } else {
            Ok(vec![1.0])
        }
    };
    assert_eq!(survey(&supply(), 4096, failing).unwrap_err(), "high line");
}
