//! Capacitor-input filters feeding a constant current, the load of a linear regulator. Rows computed by event-located
//! integration to six digits; normalised by `k = w C Vp / I`, `r = Rs I / Vp`.

use crate::support::{Simple, last_digit, printed, table};
use mainstay::supply::Circuit;

fn check(case: &str, circuit: Circuit, expected: usize) {
    let mut rows = table(include_str!("tables/extra_reference.csv"));
    rows.retain(|row| row["case"] == case);
    assert_eq!(rows.len(), expected);
    for row in &rows {
        let k: f64 = row["omegaC_R0"].parse().unwrap();
        let r: f64 = row["Rs_over_R0_pct"].parse::<f64>().unwrap() / 100.0;
        let figures = Simple::new(circuit).reservoir(k).line(r, 0.0).current(1.0).figures();
        let name = format!("{case} k={k} r={r}");
        let output = &figures.outputs[0];
        let (voltage, diode) = (&output.rails[0].voltage, &output.diodes[0]);
        let see = |column: &str, found: f64| printed(&format!("{name} {column}"), found, &row[column]);
        see("Vdc_over_Vpk", voltage.mean);
        see("ripple_rms_pct_of_Vdc", 100.0 * voltage.ripple_rms / voltage.mean);
        // The table's lowest voltage is that of a grid of samples: up to 1e-6 of the crest above the true one.
        let sampled = |column: &str, found: f64, slack: f64| {
            let off = (found - row[column].parse::<f64>().unwrap()).abs();
            assert!(
                off <= 0.51 * last_digit(&row[column]) + slack,
                "{name} {column}: found {found}"
            );
        };
        sampled(
            "ripple_pp_pct_of_Vdc",
            100.0 * voltage.ripple_pp / voltage.mean,
            1e-4 / voltage.mean,
        );
        sampled("vmin_over_Vpk", voltage.valley, 1e-6);
        see("diode_Irms_over_Iavg", diode.current_rms / diode.current_mean);
        see("diode_Ipk_over_Iavg", diode.current_peak / diode.current_mean);
        see("cap_Irms_over_Idc", output.capacitors[0].ripple_current_rms);
        let angle = row["off_deg"].parse::<f64>().unwrap() - row["on_deg"].parse::<f64>().unwrap();
        let difference = (diode.conduction_angle - angle).abs();
        assert!(
            difference <= 1.05e-4,
            "{name} conduction angle {} for {angle}",
            diode.conduction_angle
        );
    }
}

#[test]
fn half_wave_rows_agree_to_the_printed_digits() {
    check("half_cc", Circuit::HalfWave, 32);
}

#[test]
fn full_wave_rows_agree_for_the_bridge() {
    check("full_cc", Circuit::Bridge, 36);
}

#[test]
fn full_wave_rows_agree_for_the_centre_tap() {
    check("full_cc", Circuit::CentreTap, 36);
}
