//! Commutation overlap with line inductance and constant load current. The closed forms are in N. Mohan, T. M. Undeland,
//! W. P. Robbins, *Power Electronics*, chapter 5, and M. H. Rashid, *Power Electronics*, chapter 3; held to 1e-8.

use crate::support::{Simple, close, printed};
use mainstay::figures::Figures;
use mainstay::supply::Circuit;
use std::f64::consts::PI;

const EXACT: f64 = 1e-8;

fn overlap(figures: &Figures, plain: f64) -> f64 {
    figures.outputs[0].diodes[0].conduction_angle - plain
}

/// `Vd / Vd0 = (1 + cos u) / 2` and the diode's angle is longer by `u`.
fn check(circuit: Circuit, henries: f64, cosine: f64, plain_mean: f64, plain_angle: f64) {
    let figures = Simple::new(circuit).line(0.0, henries).current(1.0).figures();
    let name = format!("{circuit:?} L={henries}");
    let mean = figures.outputs[0].rails[0].voltage.mean;
    close(&format!("{name} mean"), mean, plain_mean * 0.5 * (1.0 + cosine), EXACT);
    close(
        &format!("{name} overlap"),
        overlap(&figures, plain_angle),
        cosine.acos().to_degrees(),
        EXACT,
    );
}

#[test]
fn bridge_overlap_matches_closed_form() {
    for henries in [0.01, 0.05, 0.1, 0.2, 0.4] {
        check(Circuit::Bridge, henries, 1.0 - 2.0 * henries, 2.0 / PI, 180.0);
    }
}

#[test]
fn centre_tap_overlap_matches_closed_form() {
    for henries in [0.01, 0.1, 0.3] {
        check(Circuit::CentreTap, henries, 1.0 - henries, 2.0 / PI, 180.0);
    }
}

#[test]
fn three_phase_half_wave_overlap_matches_closed_form() {
    for henries in [0.01, 0.1, 0.3] {
        let cosine = 1.0 - 2.0 * henries / 3.0_f64.sqrt();
        check(
            Circuit::ThreePhaseHalfWave,
            henries,
            cosine,
            3.0 * 3.0_f64.sqrt() / (2.0 * PI),
            120.0,
        );
    }
}

#[test]
fn three_phase_bridge_overlap_matches_closed_form() {
    for henries in [0.01, 0.1, 0.3] {
        let cosine = 1.0 - 2.0 * henries / 3.0_f64.sqrt();
        check(
            Circuit::ThreePhaseBridge,
            henries,
            cosine,
            3.0 * 3.0_f64.sqrt() / PI,
            120.0,
        );
    }
}

#[test]
fn bridge_cases_in_volts_and_amperes() {
    // 120 V, 60 Hz, 1 mH, 10 A and 230 V, 50 Hz, 1 mH, 10 A: closed forms evaluated.
    for (rms, hertz, angle, mean) in [
        (120.0, 60.0, "17.14317", "105.638"),
        (230.0, 50.0, "11.27996", "205.0728"),
    ] {
        let figures = Simple::new(Circuit::Bridge)
            .mains(rms, hertz)
            .line(0.0, 1e-3)
            .current(10.0)
            .figures();
        printed("overlap", overlap(&figures, 180.0), angle);
        printed("mean", figures.outputs[0].rails[0].voltage.mean, mean);
    }
}

/// Data and the 10.8 V of M. H. Rashid, *Power Electronics*, 4th edition, example 3.16; the angle is the closed form's.
#[test]
fn rashid_three_phase_bridge_with_line_inductance() {
    let rms = 208.0 / 3.0_f64.sqrt();
    let figures = Simple::new(Circuit::ThreePhaseBridge)
        .mains(rms, 60.0)
        .line(0.0, 0.5e-3)
        .current(60.0)
        .figures();
    printed("overlap", overlap(&figures, 120.0), "22.61584");
    printed("mean", figures.outputs[0].rails[0].voltage.mean, "270.099");
    close(
        "voltage lost",
        280.899 - figures.outputs[0].rails[0].voltage.mean,
        10.8,
        1e-4,
    );
}

#[test]
fn bridge_line_current_with_overlap() {
    // u, displacement factor, fundamental over rms, distortion in percent, power factor: closed forms evaluated.
    let rows = [
        (10.0_f64, "0.993244", "0.913190", "44.6276", "0.907021"),
        (20.0, "0.973142", "0.925138", "41.0351", "0.900291"),
        (30.0, "0.940183", "0.936166", "37.5530", "0.880167"),
        (60.0, "0.773680", "0.963777", "27.6735", "0.745655"),
    ];
    for (angle, displacement, purity, distortion, factor) in rows {
        let henries = 0.5 * (1.0 - angle.to_radians().cos());
        let line = Simple::new(Circuit::Bridge)
            .line(0.0, henries)
            .current(1.0)
            .figures()
            .line;
        printed("displacement factor", line.displacement_factor, displacement);
        printed("fundamental over rms", line.harmonics[0] / line.current_rms, purity);
        printed("distortion", 100.0 * line.thd, distortion);
        printed("power factor", line.power_factor, factor);
    }
}
