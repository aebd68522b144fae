//! The limit of an infinite reservoir, in closed form.

use crate::support::{Simple, close, table};
use mainstay::supply::Circuit;

#[test]
fn a_very_large_reservoir_reaches_the_closed_form() {
    for row in table(include_str!("tables/infinite_capacitance.csv")) {
        let r: f64 = row["r"].parse().unwrap();
        // Ripple at this k is some 1e-6 of the mean, and its effect on these means smaller still.
        let ohms = 1e4;
        let k = 3e6 / ohms;
        let mut simple = Simple::new(Circuit::HalfWave).line(r * ohms, 0.0).resistance(ohms);
        match row["circuit"].as_str() {
            "half" => simple = simple.reservoir(k),
            "full" => {
                simple.circuit = Circuit::Bridge;
                simple = simple.reservoir(k);
            }
            _ => {
                simple.circuit = Circuit::FullWaveDoubler;
                simple.stack = Some((k, 0.0));
            }
        }
        let figures = simple.figures();
        let (rail, diode) = (&figures.outputs[0].rails[0], &figures.outputs[0].diodes[0]);
        let see = |column: &str, found: f64| {
            close(&format!("{row:?} {column}"), found, row[column].parse().unwrap(), 6e-6);
        };
        see("Vdc_over_Vpk", rail.voltage.mean);
        see("Irms_over_Iavg", diode.current_rms / diode.current_mean);
        see("Ipk_over_Iavg", diode.current_peak / diode.current_mean);
        see("psi_deg", 0.5 * diode.conduction_angle);
    }
}
