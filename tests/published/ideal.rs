//! Ideal rectifiers without a filter: closed forms, to 1e-9. They stand in every text on power electronics, among them
//! M. H. Rashid, *Power Electronics*, chapter 3, and N. Mohan, T. M. Undeland, W. P. Robbins, *Power Electronics*, chapter 5;
//! the exact values are derived.

use crate::support::{Simple, close};
use mainstay::figures::Figures;
use mainstay::supply::{Circuit, Load};
use std::f64::consts::{FRAC_1_SQRT_2, PI, SQRT_2};

const EXACT: f64 = 1e-9;

/// Mean, rms, form factor, ripple factor, reverse voltage over the crest.
fn resistive(circuit: Circuit, mean: f64, rms: f64, reverse: f64) -> Figures {
    let figures = Simple::new(circuit).figures();
    let output = &figures.outputs[0];
    let rail = &output.rails[0];
    let name = format!("{circuit:?}");
    close(&format!("{name} mean"), rail.voltage.mean, mean, EXACT);
    close(&format!("{name} rms"), rail.current.rms, rms, EXACT);
    let form = rms / mean;
    close(
        &format!("{name} form factor"),
        rail.current.rms / rail.current.mean,
        form,
        EXACT,
    );
    let ripple = (form * form - 1.0).sqrt();
    close(
        &format!("{name} ripple factor"),
        rail.voltage.ripple_rms / rail.voltage.mean,
        ripple,
        EXACT,
    );
    close(
        &format!("{name} reverse voltage"),
        output.diodes[0].reverse_voltage_peak,
        reverse,
        EXACT,
    );
    figures
}

#[test]
fn half_wave_resistive_constants() {
    let figures = resistive(Circuit::HalfWave, 1.0 / PI, 0.5, 1.0);
    let rail = &figures.outputs[0].rails[0];
    close(
        "conversion efficiency",
        rail.voltage.mean.powi(2) / rail.power,
        4.0 / PI.powi(2),
        EXACT,
    );
    // Transformer utilisation: d.c. power over the volt-amperes of the winding.
    let va = FRAC_1_SQRT_2 * figures.line.current_rms;
    close(
        "utilisation",
        rail.voltage.mean * rail.current.mean / va,
        2.0 * SQRT_2 / PI.powi(2),
        EXACT,
    );
    close(
        "fundamental of the current",
        figures.line.harmonics[0],
        0.5 * FRAC_1_SQRT_2,
        EXACT,
    );
    close(
        "second harmonic over mean",
        figures.line.harmonics[1] / rail.current.mean,
        SQRT_2 / 3.0,
        EXACT,
    );
    for order in [3, 5, 7, 39] {
        assert!(figures.line.harmonics[order - 1] < 1e-12, "odd order {order} vanishes");
    }
}

#[test]
fn centre_tap_resistive_constants() {
    let figures = resistive(Circuit::CentreTap, 2.0 / PI, FRAC_1_SQRT_2, 2.0);
    let rail = &figures.outputs[0].rails[0];
    let direct = rail.voltage.mean * rail.current.mean;
    let secondary = 2.0 * FRAC_1_SQRT_2 * figures.outputs[0].winding.current_rms;
    close(
        "secondary utilisation",
        direct / secondary,
        4.0 * SQRT_2 / PI.powi(2),
        EXACT,
    );
    let primary = figures.line.apparent_power;
    close("primary utilisation", direct / primary, 8.0 / PI.powi(2), EXACT);
    close(
        "of the mean of both",
        2.0 * direct / (primary + secondary),
        0.671_498,
        1e-6,
    );
}

#[test]
fn bridge_resistive_constants() {
    let figures = resistive(Circuit::Bridge, 2.0 / PI, FRAC_1_SQRT_2, 1.0);
    let rail = &figures.outputs[0].rails[0];
    close(
        "conversion efficiency",
        rail.voltage.mean.powi(2) / rail.power,
        8.0 / PI.powi(2),
        EXACT,
    );
    close("power factor", figures.line.power_factor, 1.0, EXACT);
    close(
        "peak-to-peak ripple over mean",
        rail.voltage.ripple_pp / rail.voltage.mean,
        PI / 2.0,
        EXACT,
    );
}

#[test]
fn three_phase_half_wave_resistive_constants() {
    let mean = 3.0 * 3.0_f64.sqrt() / (2.0 * PI);
    let rms = (0.5 + 3.0 * 3.0_f64.sqrt() / (8.0 * PI)).sqrt();
    let figures = resistive(Circuit::ThreePhaseHalfWave, mean, rms, 3.0_f64.sqrt());
    let rail = &figures.outputs[0].rails[0];
    let ripple = (1.0 - (PI / 3.0).cos()) / mean;
    close(
        "peak-to-peak ripple over mean",
        rail.voltage.ripple_pp / rail.voltage.mean,
        ripple,
        EXACT,
    );
}

#[test]
fn three_phase_bridge_resistive_constants() {
    let mean = 3.0 * 3.0_f64.sqrt() / PI;
    let rms = (1.5 + 9.0 * 3.0_f64.sqrt() / (4.0 * PI)).sqrt();
    let figures = resistive(Circuit::ThreePhaseBridge, mean, rms, 3.0_f64.sqrt());
    let rail = &figures.outputs[0].rails[0];
    let ripple = (1.0 - (PI / 6.0).cos()) * 3.0_f64.sqrt() / mean;
    close(
        "peak-to-peak ripple over mean",
        rail.voltage.ripple_pp / rail.voltage.mean,
        ripple,
        EXACT,
    );
}

/// Constant load current, no impedance: line currents are blocks.
#[test]
fn constant_current_line_constants_of_the_bridge() {
    let figures = Simple::new(Circuit::Bridge).current(1.0).figures();
    let line = &figures.line;
    close("power factor", line.power_factor, 2.0 * SQRT_2 / PI, EXACT);
    close("distortion", line.thd, (PI.powi(2) / 8.0 - 1.0).sqrt(), EXACT);
    for order in (3..40).step_by(2) {
        let expected = line.harmonics[0] / order as f64;
        close(&format!("order {order}"), line.harmonics[order - 1], expected, EXACT);
    }
    assert!(line.harmonics[1] < 1e-12);
    close(
        "mean voltage",
        figures.outputs[0].rails[0].voltage.mean,
        2.0 / PI,
        EXACT,
    );
}

#[test]
fn constant_current_constants_of_the_centre_tap() {
    let figures = Simple::new(Circuit::CentreTap).current(1.0).figures();
    let rail = &figures.outputs[0].rails[0];
    let secondary = 2.0 * FRAC_1_SQRT_2 * figures.outputs[0].winding.current_rms;
    close("secondary utilisation", rail.power / secondary, 2.0 / PI, EXACT);
}

#[test]
fn constant_current_constants_of_the_three_phase_bridge() {
    let figures = Simple::new(Circuit::ThreePhaseBridge).current(1.0).figures();
    let line = &figures.line;
    close("line rms", line.current_rms, (2.0_f64 / 3.0).sqrt(), EXACT);
    close("fundamental", line.harmonics[0], 6.0_f64.sqrt() / PI, EXACT);
    close("power factor", line.power_factor, 3.0 / PI, EXACT);
    close("distortion", line.thd, (PI.powi(2) / 9.0 - 1.0).sqrt(), EXACT);
    for order in 2..=40 {
        let found = line.harmonics[order - 1];
        if order % 6 == 1 || order % 6 == 5 {
            close(
                &format!("order {order}"),
                found,
                line.harmonics[0] / order as f64,
                EXACT,
            );
        } else {
            assert!(found < 1e-12, "order {order} vanishes: {found:e}");
        }
    }
}

#[test]
fn constant_current_constants_of_the_three_phase_half_wave() {
    let figures = Simple::new(Circuit::ThreePhaseHalfWave).current(1.0).figures();
    let diode = &figures.outputs[0].diodes[0];
    close("diode rms", diode.current_rms, 1.0 / 3.0_f64.sqrt(), EXACT);
    close("diode mean", diode.current_mean, 1.0 / 3.0, EXACT);
}

/// M. H. Rashid, *Power Electronics*, 4th edition, example 3.9: 60 A, 120 V per phase, 60 Hz.
#[test]
fn rashid_three_phase_bridge_diode() {
    let simple = Simple::new(Circuit::ThreePhaseBridge).mains(120.0, 60.0).current(60.0);
    let figures = simple.figures();
    let diode = &figures.outputs[0].diodes[0];
    close("mean", diode.current_mean, 20.0, EXACT);
    close("rms", diode.current_rms, 34.64, 2e-4);
    close("reverse voltage", diode.reverse_voltage_peak, 293.94, 2e-5);
}

#[test]
fn mean_over_rms_supply_voltage() {
    let mean = |circuit| {
        Simple::new(circuit).mains(1.0, 50.0).figures().outputs[0].rails[0]
            .voltage
            .mean
    };
    close("bridge", mean(Circuit::Bridge), 0.900_316, 1e-6);
    close(
        "three-phase half-wave, per phase",
        mean(Circuit::ThreePhaseHalfWave),
        1.169_545,
        1e-6,
    );
    close(
        "three-phase bridge, per phase",
        mean(Circuit::ThreePhaseBridge),
        2.339_090,
        1e-6,
    );
}

#[test]
fn an_open_rail_sits_at_the_crest() {
    let mut simple = Simple::new(Circuit::Bridge).reservoir(10.0).line(0.02, 0.0);
    simple.load = Load::Open;
    let figures = simple.figures();
    close("mean", figures.outputs[0].rails[0].voltage.mean, 1.0, 1e-7);
    close(
        "reverse voltage",
        figures.outputs[0].diodes[0].reverse_voltage_peak,
        1.0,
        1e-7,
    );
}
