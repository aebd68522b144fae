//! Capacitor-input filters after O. H. Schade, "Analysis of Rectifier Operation", Proc. IRE 31 (1943) 341-361. The curves
//! there are read to a few percent; the table holds the same 144 cases computed by two independent methods to six digits
//! (its last columns are the differences between the two).

use crate::support::{Simple, printed, significant, table, turn_on_voltage};
use mainstay::figures::Figures;
use mainstay::supply::Circuit;
use std::collections::HashMap;

type Row = HashMap<String, String>;

fn number(row: &Row, column: &str) -> f64 {
    row[column].parse().unwrap()
}

fn case(row: &Row, circuit: Circuit) -> (String, Simple) {
    let (k, r) = (number(row, "omegaC_RL"), number(row, "Rs_over_RL_pct") / 100.0);
    let mut simple = Simple::new(circuit).line(r, 0.0);
    if circuit == Circuit::FullWaveDoubler {
        simple.stack = Some((k, 0.0));
    } else {
        simple = simple.reservoir(k);
    }
    (format!("{circuit:?} k={k} r={r}"), simple)
}

fn check(row: &Row, circuit: Circuit) {
    let (name, simple) = case(row, circuit);
    let figures = simple.figures();
    let output = &figures.outputs[0];
    let (voltage, diode) = (&output.rails[0].voltage, &output.diodes[0]);
    let mean = voltage.mean;
    let see = |column: &str, found: f64| printed(&format!("{name} {column}"), found, &row[column]);
    see("Vdc_over_Vpk", mean);
    see("ripple_rms_pct_of_Vdc", 100.0 * voltage.ripple_rms / mean);
    // The voltage falls on after turn-on until the current has grown to the load's. The table's lowest voltage is that of a
    // grid of samples, between the two.
    let turn_on = turn_on_voltage(&simple.supply());
    let (pp, digit) = (
        number(row, "ripple_pp_pct_of_Vdc"),
        significant(&row["ripple_pp_pct_of_Vdc"]),
    );
    let (least, most) = (
        100.0 * (voltage.crest - turn_on) / mean,
        100.0 * voltage.ripple_pp / mean,
    );
    assert!(
        least <= pp + 0.51 * digit && pp <= most + 0.51 * digit,
        "{name} ripple {pp} between {least} and {most}"
    );
    see("diode_Irms_over_Iavg", diode.current_rms / diode.current_mean);
    see("diode_Ipk_over_Iavg", diode.current_peak / diode.current_mean);
    see("cap_Irms_over_Idc", output.capacitors[0].ripple_current_rms / mean);
    see("source_Irms_over_Idc", figures.line.current_rms / mean);
    see("source_PF", figures.line.power_factor);
    let angle = number(row, "off_deg") - number(row, "on_deg");
    let difference = (diode.conduction_angle - angle).abs();
    assert!(
        difference <= 1.05e-4,
        "{name} conduction angle {} for {angle}",
        diode.conduction_angle
    );
    let reverse = if circuit == Circuit::CentreTap {
        "centretap_PIV_over_Vpk"
    } else {
        "diode_PIV_over_Vpk"
    };
    see(reverse, diode.reverse_voltage_peak);
}

fn rows(topology: &str) -> Vec<Row> {
    let mut rows = table(include_str!("tables/schade_reference.csv"));
    rows.retain(|row| row["topology"] == topology);
    assert_eq!(rows.len(), 48);
    rows
}

#[test]
fn half_wave_rows_agree_to_the_printed_digits() {
    rows("half").iter().for_each(|row| check(row, Circuit::HalfWave));
}

#[test]
fn full_wave_rows_agree_for_the_bridge() {
    rows("full").iter().for_each(|row| check(row, Circuit::Bridge));
}

#[test]
fn full_wave_rows_agree_for_the_centre_tap() {
    rows("full").iter().for_each(|row| check(row, Circuit::CentreTap));
}

#[test]
fn full_wave_doubler_rows_agree_to_the_printed_digits() {
    rows("doubler")
        .iter()
        .for_each(|row| check(row, Circuit::FullWaveDoubler));
}

/// The scaling behind the combined current chart, with `n` = 1, 2, 1/2 for half-wave, full-wave and doubler: rows 2.01.
#[test]
fn peak_currents_follow_the_common_scaling() {
    let peak = |figures: &Figures| {
        let diode = &figures.outputs[0].diodes[0];
        diode.current_peak / diode.current_mean
    };
    let half = Simple::new(Circuit::HalfWave)
        .reservoir(200.0)
        .line(0.01, 0.0)
        .figures();
    let full = Simple::new(Circuit::Bridge).reservoir(100.0).line(0.02, 0.0).figures();
    let mut doubler = Simple::new(Circuit::FullWaveDoubler).line(0.005, 0.0);
    doubler.stack = Some((400.0, 0.0));
    printed("half-wave", peak(&half), "10.6700");
    printed("full-wave", peak(&full), "10.6694");
    printed("doubler", peak(&doubler.figures()), "10.6703");
}
