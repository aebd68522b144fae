//! Figures by their JSON Pointer.

use super::catalogue::{CATALOGUE, Figure};
use super::{CapacitorFigures, ChokeFigures, DiodeFigures, Figures, OutputFigures, RailFigures};
use crate::bounds::LINE_ORDERS;
use crate::network::Network;

impl Figures {
    /// Figures of the shape that a network's have, all zero: for their pointers.
    #[must_use]
    pub fn shaped(network: &Network) -> Self {
        let outputs = network.probes.outputs.iter().map(|output| OutputFigures {
            rails: vec![RailFigures::default(); output.rails.len()],
            diodes: vec![DiodeFigures::default(); output.diodes.len()],
            capacitors: vec![CapacitorFigures::default(); output.capacitors.len()],
            chokes: vec![ChokeFigures::default(); output.chokes.len()],
            ..OutputFigures::default()
        });
        let mut figures = Self {
            outputs: outputs.collect(),
            ..Self::default()
        };
        figures.line.harmonics = vec![0.0; LINE_ORDERS];
        figures
    }

    /// Every figure's value, always in the same order for the same supply.
    #[must_use]
    pub fn values(&self) -> Vec<f64> {
        let mut values = Vec::with_capacity(128);
        for output in &self.outputs {
            output.values(&mut values);
        }
        let line = &self.line;
        values.extend([
            line.current_rms,
            line.current_peak,
            line.active_power,
            line.apparent_power,
            line.power_factor,
            line.displacement_factor,
            line.thd,
        ]);
        values.extend(&line.harmonics);
        let losses = &self.losses;
        values.extend([
            losses.total,
            losses.line,
            losses.transformer,
            losses.rectifiers,
            losses.capacitors,
            losses.filters,
            self.efficiency,
        ]);
        values
    }

    /// Pointer and definition of every value of [`Figures::values`], in its order.
    #[must_use]
    pub fn pointers(&self) -> Vec<(String, &'static Figure)> {
        let mut out = Vec::with_capacity(128);
        for (o, output) in self.outputs.iter().enumerate() {
            let counts = [
                ("rail", output.rails.len()),
                ("diode", output.diodes.len()),
                ("capacitor", output.capacitors.len()),
                ("choke", output.chokes.len()),
            ];
            for (kind, count) in counts {
                let mark = format!("{{{kind}}}");
                for index in 0..count {
                    let figures = CATALOGUE.iter().filter(|f| f.pointer.contains(&mark));
                    out.extend(figures.map(|f| (place(f, o, &mark, index), f)));
                }
            }
            let winding = CATALOGUE.iter().filter(|f| f.pointer.contains("/winding/"));
            out.extend(winding.map(|f| (place(f, o, "", 0), f)));
        }
        for figure in CATALOGUE.iter().filter(|f| !f.pointer.starts_with("/outputs/")) {
            if figure.pointer.contains("{order}") {
                let orders = self.line.harmonics.len();
                out.extend((0..orders).map(|k| (place(figure, 0, "{order}", k), figure)));
            } else {
                out.push((figure.pointer.to_owned(), figure));
            }
        }
        out
    }
}

fn place(figure: &Figure, output: usize, mark: &str, index: usize) -> String {
    let pointer = figure.pointer.replace("{output}", &output.to_string());
    if mark.is_empty() {
        pointer
    } else {
        pointer.replace(mark, &index.to_string())
    }
}

impl OutputFigures {
    fn values(&self, values: &mut Vec<f64>) {
        for rail in &self.rails {
            let voltage = &rail.voltage;
            values.extend([
                voltage.mean,
                voltage.valley,
                voltage.crest,
                voltage.ripple_pp,
                voltage.ripple_rms,
                rail.current.mean,
                rail.current.rms,
                rail.power,
            ]);
        }
        for diode in &self.diodes {
            values.extend([
                diode.current_mean,
                diode.current_rms,
                diode.current_peak,
                diode.reverse_voltage_peak,
                diode.conduction_angle,
                diode.loss,
            ]);
        }
        for capacitor in &self.capacitors {
            values.extend([capacitor.voltage_peak, capacitor.ripple_current_rms, capacitor.loss]);
        }
        for choke in &self.chokes {
            values.extend([choke.current_mean, choke.current_rms, choke.current_peak]);
        }
        values.extend([
            self.winding.current_rms,
            self.winding.current_peak,
            self.winding.copper_loss,
        ]);
    }
}
