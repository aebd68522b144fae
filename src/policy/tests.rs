//! Checks against the worked example of the standard, and the edges of a verdict.

use super::*;
use crate::quantity::Band;
use crate::worst_case::Attained;

fn subject(quantity: Quantity, rating: Option<f64>) -> Subject {
    Subject {
        component: "/outputs/0/rectifier/diode".to_owned(),
        quantity,
        figures: vec!["x".to_owned()],
        shared_by: 1.0,
        rating,
        output: 0,
    }
}

/// MIL-STD-975M Appendix A, 3.4, worked example: 140 V on a 200 V part, 5 A surge on 10 A, 0.5 A on 1 A pass, on the limit.
#[test]
fn the_standards_own_example_passes_on_the_limit() {
    let policy = published("mil-std-975m").unwrap();
    let rows = [
        (Quantity::DiodeReverseVoltage, 140.0, 200.0),
        (Quantity::DiodeCurrentSurge, 5.0, 10.0),
        (Quantity::DiodeCurrentMean, 0.5, 1.0),
    ];
    let stress = |wanted: Quantity, more: f64| {
        move |subject: &Subject| {
            let (_, value, _) = rows.into_iter().find(|r| r.0 == subject.quantity)?;
            let value = if subject.quantity == wanted {
                value * more
            } else {
                value
            };
            Some((value, Vec::<Attained>::new()))
        }
    };
    let subjects: Vec<Subject> = rows.iter().map(|&(q, _, rating)| subject(q, Some(rating))).collect();
    let (checks, whole) = check(&policy, &subjects, stress(Quantity::DiodeCurrentMean, 1.0));
    assert_eq!(whole, Whole::Pass);
    assert!(checks.iter().all(|c| c.ratio == Some(1.0)), "{checks:?}");
    for (quantity, ..) in rows {
        let (checks, whole) = check(&policy, &subjects, stress(quantity, 1.001));
        assert_eq!(whole, Whole::Fail);
        assert_eq!(checks.iter().filter(|c| c.verdict == Verdict::Fail).count(), 1);
    }
}

#[test]
fn a_missing_rating_is_never_a_pass() {
    let policy = published("mil-std-975m").unwrap();
    let nothing = |_: &Subject| Some((0.0, Vec::new()));
    let unrated = [
        subject(Quantity::DiodeReverseVoltage, None),
        subject(Quantity::DiodeCurrentMean, Some(1.0)),
    ];
    assert_eq!(check(&policy, &unrated, nothing).1, Whole::Incomplete);
    assert_eq!(
        check(&policy, &[], nothing).1,
        Whole::Incomplete,
        "a policy that rules on nothing proves nothing"
    );
    let failing = |s: &Subject| Some((if s.rating.is_some() { 9.0 } else { 0.0 }, Vec::new()));
    assert_eq!(
        check(&policy, &unrated, failing).1,
        Whole::Fail,
        "a failure is worse than a gap"
    );
    let unbounded = |_: &Subject| Some((f64::INFINITY, Vec::new()));
    assert_eq!(check(&policy, &unrated[1..], unbounded).1, Whole::Fail);
}

#[test]
fn every_published_rule_lies_between_nothing_and_the_rating() {
    for name in PUBLISHED {
        let policy = published(name).unwrap();
        assert_eq!(policy.name, name);
        assert!(!policy.rules.is_empty() && !policy.omitted.is_empty(), "{name}");
        for rule in &policy.rules {
            assert!(
                rule.factor > 0.0 && rule.factor <= 1.0 && rule.source.len() > 10,
                "{rule:?}"
            );
        }
    }
    assert!(published("unheard-of").is_none());
}

/// A bank's ripple current divides between its capacitors.
#[test]
fn each_capacitor_of_a_bank_bears_its_share() {
    use crate::supply::{
        Capacitor, CapacitorRatings, Circuit, Diode, Line, Load, Output, Parts, Phases, Rail, Rectifier,
    };
    let supply = crate::supply::Supply::new(Parts {
        name: None,
        line: Line {
            voltage: Band::exactly(24.0),
            frequency: Band::exactly(50.0),
            phases: Phases::One,
            resistance: Band::exactly(0.5),
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
                    ratings: Default::default(),
                },
                stack: None,
                coupling: None,
            },
            rails: vec![Rail {
                filter: vec![crate::supply::Section {
                    series: None,
                    capacitor: Some(Capacitor {
                        capacitance: Band::exactly(1e-3),
                        esr: Band::ZERO,
                        count: 3,
                        ratings: CapacitorRatings {
                            ripple_current: Band::new(1.9, 2.0, 2.1).ok(),
                            ..CapacitorRatings::default()
                        },
                    }),
                }],
                load: Load::Open,
            }],
        }],
        surroundings: Default::default(),
    })
    .unwrap();
    let ripple = subjects(&supply)
        .into_iter()
        .find(|s| s.quantity == Quantity::CapacitorRippleCurrent)
        .unwrap();
    assert_eq!(
        (ripple.shared_by, ripple.rating),
        (3.0, Some(1.9)),
        "a rating counts at its lowest"
    );
    assert_eq!(ripple.component, "/outputs/0/rails/0/filter/0/capacitor");
}
