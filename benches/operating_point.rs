//! Time of one operating point, as ratios to a floor measured in the same run: the exact propagation of the same bridge over the two
//! stretches of a half cycle, written out by hand for this circuit alone, which no general method can undercut.

#![allow(
    missing_docs,
    clippy::unwrap_used,
    reason = "a benchmark exports nothing and may stop"
)]

use criterion::{Criterion, criterion_group, criterion_main};
use mainstay::description::{json, read_supply};
use mainstay::figures::{self};
use mainstay::network::Network;
use mainstay::quantity::Band;
use mainstay::solver::{self, periodic};
use mainstay::supply::Supply;
use std::hint::black_box;

fn supply(text: &str) -> Supply {
    read_supply(&json::read(text.as_bytes()).unwrap()).unwrap()
}

/// The bridge with leakage and a current load that the ratios are about.
fn bridge() -> Supply {
    supply(
        r#"{"line": {"voltage": "230 V", "frequency": "50 Hz", "resistance": "0.4 ohm", "inductance": "0.8 mH"},
            "transformer": {"primary_voltage": "230 V", "primary_resistance": "38 ohm",
                "windings": [{"open_circuit_voltage": "20.5 V", "resistance": "0.31 ohm", "leakage_inductance": "60 uH"}]},
            "outputs": [{"rectifier": {"circuit": "bridge", "diode": {"threshold_voltage": "0.78 V", "slope_resistance": "28 mohm"}},
                "rails": [{"filter": [{"capacitor": {"capacitance": "4700 uF", "esr": "42 mohm"}}],
                    "load": {"kind": "current", "current": "1 A"}}]}]}"#,
    )
}

fn two_sections() -> Supply {
    supply(
        r#"{"line": {"voltage": "230 V", "frequency": "50 Hz", "resistance": "0.4 ohm", "inductance": "0.8 mH"},
            "transformer": {"primary_voltage": "230 V", "primary_resistance": "38 ohm",
                "windings": [{"open_circuit_voltage": "20.5 V", "resistance": "0.31 ohm", "leakage_inductance": "60 uH"}]},
            "outputs": [{"rectifier": {"circuit": "bridge", "diode": {"threshold_voltage": "0.78 V", "slope_resistance": "28 mohm"}},
                "rails": [{"filter": [{"capacitor": {"capacitance": "2200 uF", "esr": "42 mohm"}},
                    {"series": {"resistance": "0.2 ohm", "inductance": "3 mH"}, "capacitor": {"capacitance": "2200 uF", "esr": "60 mohm"}}],
                    "load": {"kind": "current", "current": "1 A"}}]}]}"#,
    )
}

/// One Newton solution by hand: i and v of the same bridge over a half cycle, by matrix exponential of its two patterns in closed
/// form, the turn-off found by Newton's method. Returns the valley.
fn by_hand() -> f64 {
    let ratio: f64 = 20.5 / 230.0;
    let (r, l) = (ratio * ratio * 38.4 + 0.31 + 0.056, ratio * ratio * 0.8e-3 + 60e-6);
    let (c, esr, load, w) = (4700e-6, 0.042, 1.0, std::f64::consts::TAU * 50.0);
    let crest = 20.5 * std::f64::consts::SQRT_2;
    // State i, v: l i' = u - 1.56 - (r + esr) i - v + esr load; c v' = i - load.
    let damping = 0.5 * (r + esr) / l;
    let natural = 1.0 / (l * c);
    let root = (damping * damping - natural).max(0.0).sqrt();
    let (a, b) = (-damping + root, -damping - root);
    // Particular response of i to crest sin(w t).
    let (re, im) = (natural - w * w, 2.0 * damping * w);
    let size = crest * w / l / (re * re + im * im);
    let particular = |t: f64| size * (re * (w * t).cos() + im * (w * t).sin()) + load;
    let slope = |t: f64| size * w * (im * (w * t).cos() - re * (w * t).sin());
    let mut valley = 20.0;
    for _ in 0..5 {
        // Turn-on where the source meets the rail, then the current from rest.
        let on = ((valley + 1.56) / crest).min(1.0).asin() / w;
        let (i0, d0) = (-particular(on), -slope(on));
        let (ka, kb) = ((d0 - b * i0) / (a - b), (a * i0 - d0) / (a - b));
        let current = |t: f64| particular(t) + ka * (a * (t - on)).exp() + kb * (b * (t - on)).exp();
        let rate = |t: f64| slope(t) + ka * a * (a * (t - on)).exp() + kb * b * (b * (t - on)).exp();
        let mut off = on + 0.0033;
        for _ in 0..6 {
            off -= current(off) / rate(off);
        }
        let charge = size / w * (re * ((w * off).sin() - (w * on).sin()) - im * ((w * off).cos() - (w * on).cos()))
            + ka / a * ((a * (off - on)).exp() - 1.0)
            + kb / b * ((b * (off - on)).exp() - 1.0);
        valley += (charge - load * (0.01 - (off - on))) / c * 0.5;
    }
    valley
}

fn operating_points(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("operating point");
    group.bench_function("floor: this bridge alone, by hand, no figures", |b| {
        b.iter(|| black_box(by_hand()))
    });
    for (name, supply) in [("bridge with leakage", bridge()), ("two sections", two_sections())] {
        group.bench_function(format!("{name}: cold, all figures"), |b| {
            b.iter(|| {
                let network = Network::of(black_box(&supply));
                let periodic = solver::solve(&network).unwrap();
                figures::compute(&network, &periodic)
            });
        });
        group.bench_function(format!("{name}: cold, state alone"), |b| {
            b.iter(|| {
                let network = Network::of(black_box(&supply));
                solver::solve(&network).unwrap().residual
            });
        });
        let network = Network::of(&supply);
        let start = solver::solve(&network).unwrap().full;
        let near = supply.with(&[("/line/voltage", Band::point(230.5).unwrap())]).unwrap();
        group.bench_function(format!("{name}: from its neighbour, all figures"), |b| {
            b.iter(|| {
                let network = Network::of(black_box(&near));
                let periodic = periodic::solve_from(&network, &start).unwrap();
                figures::compute(&network, &periodic)
            });
        });
    }
    group.finish();
}

criterion_group!(benches, operating_points);
criterion_main!(benches);
