//! The parts of the method against closed forms.

use super::basis::{Basis, phi};
use super::crossing::{Search, Watched};
use super::flow::Flow;
use super::integral::{Extremes, Integrals, take_extremes};
use super::modes::Modes;
use super::regime::Regime;
use crate::network::{Builder, Element, Node, Oscillator, Probes};
use nalgebra::{Complex, DMatrix};

fn rates(matrix: &DMatrix<f64>) -> Vec<Complex<f64>> {
    let modes = Modes::new(matrix, &vec![1.0; matrix.nrows()]).unwrap();
    let identity = &modes.right * &modes.left;
    assert!((identity - DMatrix::identity(matrix.nrows(), matrix.nrows())).amax() < 1e-7);
    modes.modes.iter().map(|m| m.rate).collect()
}

#[test]
fn eigenvalues_of_known_matrices() {
    let spread = rates(&DMatrix::from_row_slice(2, 2, &[-1e9, 0.0, 1.0, -1.0]));
    assert!(spread.iter().any(|r| (r.re + 1.0).abs() < 1e-12) && spread.iter().any(|r| (r.re + 1e9).abs() < 1e-3));
    let ring = rates(&DMatrix::from_row_slice(2, 2, &[0.0, -3.0, 3.0, 0.0]));
    assert_eq!(ring, [Complex::new(0.0, 3.0)]);
    // The companion matrix of (s + 1)(s + 2)(s + 3).
    let mut three: Vec<f64> = rates(&DMatrix::from_row_slice(
        3,
        3,
        &[0.0, 1.0, 0.0, 0.0, 0.0, 1.0, -6.0, -11.0, -6.0],
    ))
    .iter()
    .map(|r| r.re)
    .collect();
    three.sort_by(f64::total_cmp);
    for (found, expected) in three.iter().zip([-3.0, -2.0, -1.0]) {
        assert!((found - expected).abs() < 1e-12, "{three:?}");
    }
    // A defective matrix is solved as its neighbour: the double rate -2 splits by less than 1e-4.
    let double = rates(&DMatrix::from_row_slice(2, 2, &[-2.0, 1.0, 0.0, -2.0]));
    assert!(
        double.iter().all(|r| (r - Complex::from(-2.0)).norm() < 1e-4),
        "{double:?}"
    );
}

#[test]
fn phi_keeps_its_digits() {
    for x in [1e-12, 1e-3, 0.4, 0.6, 3.0] {
        let (found, expected) = (phi(Complex::from(x)).re, x.exp_m1() / x);
        assert!(
            (found - expected).abs() < 1e-15 * expected * 4.0,
            "{x}: {found} {expected}"
        );
    }
}

/// A source behind a resistance and an inductance: i' = (A sin wt - R i) / L, one mode of rate -R / L.
fn resistor_and_inductor(ohms: f64, henries: f64) -> Regime {
    let oscillator = Oscillator {
        angular_frequency: 2.0,
        orders: vec![1],
    };
    let mut builder = Builder::new(oscillator);
    let elements = vec![
        Element::Emf(vec![-5.0, 0.0]),
        Element::Resistor(ohms),
        Element::Inductor(henries),
    ];
    builder.series(Node::GROUND, Node::GROUND, None, elements);
    Regime::new(&builder.finish(Probes::default()), 0).unwrap().unwrap()
}

#[test]
fn a_first_order_circuit_follows_its_closed_form() {
    for (ohms, henries) in [(3.0, 0.7), (1e-9, 0.7), (1e6, 0.7)] {
        let regime = resistor_and_inductor(ohms, henries);
        let flow = Flow::new(0, &regime, 0.0, &[0.25], &[0.0, 1.0]);
        let (a, w) = (ohms / henries, 2.0_f64);
        let drive = 5.0 / henries;
        let steady = |t: f64| drive * (a * (w * t).sin() - w * (w * t).cos()) / (a * a + w * w);
        for t in [1e-9, 0.1, 1.0, 3.0] {
            let expected = steady(t) + (0.25 - steady(0.0)) * (-a * t).exp();
            let found = flow.state(&regime, t)[0];
            assert!(
                (found - expected).abs() < 1e-12 * (1.0 + expected.abs()),
                "R={ohms} t={t}: {found} {expected}"
            );
        }
    }
}

/// Simpson's rule on ten thousand intervals.
fn simpson(f: impl Fn(f64) -> f64, length: f64) -> f64 {
    let n = 10_000;
    let h = length / f64::from(n);
    let inner: f64 = (1..n)
        .map(|k| f(f64::from(k) * h) * if k % 2 == 1 { 4.0 } else { 2.0 })
        .sum();
    (f(0.0) + f(length) + inner) * h / 3.0
}

#[test]
fn integrals_agree_with_quadrature_for_fast_and_slow_modes() {
    for ohms in [3.0, 1e-3, 40.0] {
        let regime = resistor_and_inductor(ohms, 0.7);
        let mut flow = Flow::new(0, &regime, 0.3, &[0.25], &[(0.6_f64).sin(), (0.6_f64).cos()]);
        flow.length = 1.1;
        let mut signal = Vec::new();
        flow.signal(&regime, &regime.modal(&[1.0, 0.4, 0.0, 0.2]), &mut signal);
        let value = |t: f64| flow.value(&regime.basis, &signal, t, &mut vec![0.0; regime.basis.width]);
        let integrals = Integrals::new(&regime.basis, &flow);
        let mean = simpson(value, 1.1);
        assert!(
            (integrals.integral(&signal) - mean).abs() < 1e-11,
            "R={ohms}: {} {mean}",
            integrals.integral(&signal)
        );
        let square = simpson(|t| value(t).powi(2), 1.1);
        assert!(
            (integrals.product(&signal, &signal) - square).abs() < 1e-10 * square.max(1.0),
            "R={ohms}"
        );
        let oscillator = Oscillator {
            angular_frequency: 2.0,
            orders: vec![1],
        };
        let mut fourier = vec![Complex::from(0.0); 3];
        integrals.fourier(&signal, &oscillator, &mut fourier);
        for (index, found) in fourier.iter().enumerate() {
            let order = 2.0 * (index as f64 + 1.0);
            let real = simpson(|t| value(t) * (order * (t + 0.3)).cos(), 1.1);
            let imaginary = -simpson(|t| value(t) * (order * (t + 0.3)).sin(), 1.1);
            assert!(
                (found - Complex::new(real, imaginary)).norm() < 1e-10,
                "R={ohms} order {}",
                index + 1
            );
        }
        let mut extremes = Extremes::NONE;
        take_extremes(&regime.basis, &flow, &signal, &mut extremes);
        let grid = (0..=10_000).map(|k| value(1.1 * f64::from(k) / 10_000.0));
        let (low, high) = grid.fold((f64::MAX, f64::MIN), |(a, b), v| (a.min(v), b.max(v)));
        assert!(
            (extremes.lowest - low).abs() < 1e-6 && (extremes.highest - high).abs() < 1e-6,
            "R={ohms}"
        );
        assert!(extremes.lowest <= low + 1e-12 && extremes.highest >= high - 1e-12);
    }
}

fn first(signal: Vec<f64>, basis: &Basis, to: f64) -> Option<f64> {
    let watched = [Watched { signal, switches: 1 }];
    Search::new(basis, 0.0, &watched)
        .first(0.0, to)
        .unwrap()
        .map(|c| c.since)
}

#[test]
fn the_first_zero_is_found_and_none_is_stepped_over() {
    // One, sin 2t, cos 2t, and a mode of rate -100/0.7.
    let basis = resistor_and_inductor(100.0, 0.7).basis;
    let rate: f64 = 100.0 / 0.7;
    // cos 2t falls through zero at pi / 4.
    let found = first(vec![0.0, 0.0, 1.0, 0.0], &basis, 3.0).unwrap();
    assert!((found - std::f64::consts::FRAC_PI_4).abs() < 1e-15);
    // A fast fall: e^(-rate t) - 0.4.
    let found = first(vec![-0.4, 0.0, 0.0, 1.0], &basis, 3.0).unwrap();
    assert!((found - (1.0_f64 / 0.4).ln() / rate).abs() < 1e-14);
    // From zero upwards, then down at pi: sin 2t.
    let found = first(vec![0.0, 1.0, 0.0, 0.0], &basis, 3.0).unwrap();
    assert!((found - std::f64::consts::FRAC_PI_2).abs() < 1e-14);
    // Never: 1.0001 + cos 2t touches nothing.
    assert_eq!(first(vec![1.0001, 0.0, 1.0, 0.0], &basis, 3.0), None);
    // Two zeros close together: 0.999999 + cos 2t is below zero for a millisecond around pi / 2.
    let found = first(vec![0.999_999, 0.0, 1.0, 0.0], &basis, 3.0).unwrap();
    let expected = 0.5 * (-0.999_999_f64).acos();
    assert!((found - expected).abs() < 1e-9, "{found} {expected}");
}
