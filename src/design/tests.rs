//! What a design assumes.

use super::*;
use crate::design::assume::RegulationPoint;

#[test]
fn regulation_is_read_between_the_points_and_held_beyond_them() {
    let mut assumptions = Assumptions::default();
    // The usual relation is near 0.4 (S / 1 VA)^-0.3, common practice for small mains transformers.
    for rating in [1.0, 5.0, 30.0, 200.0, 1000.0_f64] {
        let expected = 0.4 * rating.powf(-0.301);
        assert!(
            (assumptions.regulation_at(rating) / expected - 1.0).abs() < 0.01,
            "{rating} VA"
        );
    }
    assert_eq!(assumptions.regulation_at(0.1), 0.40);
    assert_eq!(assumptions.regulation_at(1e5), 0.05);
    assumptions.regulation = vec![RegulationPoint {
        rating: 50.0,
        regulation: 0.12,
    }];
    assert_eq!(
        (assumptions.regulation_at(1.0), assumptions.regulation_at(500.0)),
        (0.12, 0.12)
    );
}

#[test]
fn circuits_fit_their_line_and_rails() {
    assert!(designable(Phases::One, 1).contains(&Circuit::Bridge));
    assert_eq!(designable(Phases::One, 2), [Circuit::SplitBridge]);
    assert!(designable(Phases::Three, 1).iter().all(|c| c.is_three_phase()));
    assert!(designable(Phases::Three, 2).is_empty());
}
