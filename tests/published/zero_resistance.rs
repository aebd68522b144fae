//! A source without any impedance: the reservoir follows it while a diode conducts.

use crate::support::{Simple, printed, table};
use mainstay::supply::Circuit;

#[test]
fn a_stiff_source_into_a_reservoir_matches_the_exact_solution() {
    for row in table(include_str!("tables/zero_resistance.csv")) {
        let k: f64 = row["k"].parse().unwrap();
        for (circuit, kind) in [
            (Circuit::HalfWave, "half"),
            (Circuit::Bridge, "full"),
            (Circuit::CentreTap, "full"),
        ] {
            let figures = Simple::new(circuit).reservoir(k).figures();
            let (rail, diode) = (&figures.outputs[0].rails[0], &figures.outputs[0].diodes[0]);
            let see = |column: &str, found: f64| {
                let column = format!("{kind}_{column}");
                printed(&format!("{circuit:?} k={k} {column}"), found, &row[&column]);
            };
            see("mean", rail.voltage.mean);
            see("peak", diode.current_peak / diode.current_mean);
            see("rms", diode.current_rms / diode.current_mean);
            // Conduction ends at 180 degrees less atan(k).
            see("on_deg", 180.0 - k.atan().to_degrees() - diode.conduction_angle);
        }
    }
}
