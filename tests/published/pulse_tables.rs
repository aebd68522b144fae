//! Three- and six-pulse rectifiers with a reservoir and a resistor: rows computed by event-located integration to six
//! digits. Three-pulse rows are relative to the phase crest with `Rs` in each phase; six-pulse rows to the line-to-line
//! crest with `Rs` the resistance of the whole loop, two phases.

use crate::support::{Simple, printed, significant, table, turn_on_voltage};
use mainstay::supply::Circuit;

fn check(case: &str, circuit: Circuit, expected: usize) {
    let mut rows = table(include_str!("tables/extra_reference.csv"));
    rows.retain(|row| row["case"] == case);
    assert_eq!(rows.len(), expected);
    for row in &rows {
        let k: f64 = row["omegaC_R0"].parse().unwrap();
        let r: f64 = row["Rs_over_R0_pct"].parse::<f64>().unwrap() / 100.0;
        let mut simple = Simple::new(circuit).reservoir(k).line(r, 0.0);
        if circuit == Circuit::ThreePhaseBridge {
            simple = simple.line(0.5 * r, 0.0);
            simple.crest = 1.0 / 3.0_f64.sqrt();
        }
        let figures = simple.figures();
        let name = format!("{case} k={k} r={r}");
        let output = &figures.outputs[0];
        let (voltage, diode) = (&output.rails[0].voltage, &output.diodes[0]);
        let see = |column: &str, found: f64| printed(&format!("{name} {column}"), found, &row[column]);
        see("Vdc_over_Vpk", voltage.mean);
        see("ripple_rms_pct_of_Vdc", 100.0 * voltage.ripple_rms / voltage.mean);
        // The voltage falls on after turn-on until the current has grown to the load's. The table's lowest voltage is that
        // of a grid of samples, between the two.
        let turn_on = turn_on_voltage(&simple.supply());
        let (lowest, digit) = (
            row["vmin_over_Vpk"].parse::<f64>().unwrap(),
            significant(&row["vmin_over_Vpk"]),
        );
        assert!(
            lowest <= turn_on + 0.51 * digit && voltage.valley <= lowest + 0.51 * digit,
            "{name} valley {lowest}"
        );
        see(
            "cap_Irms_over_Idc",
            output.capacitors[0].ripple_current_rms / voltage.mean,
        );
        see("diode_Irms_over_Iavg", diode.current_rms / diode.current_mean);
        see("diode_Ipk_over_Iavg", diode.current_peak / diode.current_mean);
    }
}

#[test]
fn three_pulse_rows_agree_to_the_printed_digits() {
    check("three_pulse", Circuit::ThreePhaseHalfWave, 48);
}

#[test]
fn six_pulse_rows_agree_to_the_printed_digits() {
    check("six_pulse", Circuit::ThreePhaseBridge, 41);
}
