//! The rules that make a supply sound.

use super::address::walk;
use super::{Circuit, Fault, Load, Output, Parts, Phases, Transformer, WindingValues};
use crate::bounds::{self, Range};
use crate::quantity::{Band, Dimension, write_quantity};

/// Every fault of the parts, in the order of a description.
pub(super) fn faults(parts: &Parts) -> Vec<Fault> {
    let mut faults = Vec::new();
    ranges(parts, &mut faults);
    line(parts, &mut faults);
    if let Some(transformer) = &parts.transformer {
        windings(transformer, &mut faults);
    }
    if parts.outputs.is_empty() {
        faults.push(Fault::new("/outputs", "a supply has at least one output"));
    }
    let most = bounds::OUTPUTS_MAXIMUM;
    if parts.outputs.len() > most {
        faults.push(Fault::new(
            "/outputs",
            format!("at most {most} outputs are solved together"),
        ));
    }
    for (index, output) in parts.outputs.iter().enumerate() {
        output_faults(parts, output, &format!("/outputs/{index}"), &mut faults);
        let tap = output.rectifier.circuit.needs_tap();
        let others = &parts.outputs[..index];
        if others
            .iter()
            .any(|o| o.winding == output.winding && o.rectifier.circuit.needs_tap() != tap)
        {
            let detail = "an earlier output uses this winding the other way: a winding either has a tap or has none";
            faults.push(Fault::new(format!("/outputs/{index}/winding"), detail));
        }
    }
    faults
}

fn ranges(parts: &Parts, faults: &mut Vec<Fault>) {
    let mut copy = parts.clone();
    walk(&mut copy, &mut |visit, band| {
        let fault = match (visit.range, visit.dimension) {
            (Some(range), dimension) => outside(range, dimension, band),
            (None, Dimension::Angle) => beyond(-bounds::ANGLE_MAXIMUM, bounds::ANGLE_MAXIMUM, Dimension::Angle, band),
            (None, dimension) => beyond(
                bounds::TEMPERATURE_MINIMUM,
                bounds::TEMPERATURE_MAXIMUM,
                dimension,
                band,
            ),
        };
        if let Some(detail) = fault {
            faults.push(Fault::new(visit.pointer, detail));
        }
    });
}

fn outside(range: Range, dimension: Dimension, band: &Band) -> Option<String> {
    let straddles = band.low() < range.minimum && band.high() >= range.minimum && !band.is_point();
    let ends_hold = range.accepts(band.low()) && range.accepts(band.nominal()) && range.accepts(band.high());
    if ends_hold && (!straddles || band.low() == 0.0) {
        return None;
    }
    let zero = if range.zero { "0 or " } else { "" };
    Some(format!(
        "a {} here is {zero}between {} and {}",
        dimension.name(),
        write_quantity(range.minimum, dimension),
        write_quantity(range.maximum, dimension),
    ))
}

fn beyond(minimum: f64, maximum: f64, dimension: Dimension, band: &Band) -> Option<String> {
    (band.low() < minimum || band.high() > maximum).then(|| {
        format!(
            "must lie between {} and {}",
            write_quantity(minimum, dimension),
            write_quantity(maximum, dimension)
        )
    })
}

fn line(parts: &Parts, faults: &mut Vec<Fault>) {
    let harmonics = &parts.line.harmonics;
    if harmonics.len() > bounds::HARMONICS_MAXIMUM {
        let most = bounds::HARMONICS_MAXIMUM;
        faults.push(Fault::new(
            "/line/harmonics",
            format!("at most {most} harmonics are taken"),
        ));
    }
    for (index, harmonic) in harmonics.iter().enumerate() {
        let pointer = format!("/line/harmonics/{index}/order");
        if harmonic.order < 2 || harmonic.order > bounds::HARMONIC_ORDER_MAXIMUM {
            let most = bounds::HARMONIC_ORDER_MAXIMUM;
            faults.push(Fault::new(pointer, format!("an order lies between 2 and {most}")));
        } else if harmonics[..index].iter().any(|other| other.order == harmonic.order) {
            faults.push(Fault::new(pointer, format!("order {} is given twice", harmonic.order)));
        }
    }
}

fn windings(transformer: &Transformer, faults: &mut Vec<Fault>) {
    let count = transformer.windings.len();
    if count == 0 || count > bounds::WINDINGS_MAXIMUM {
        let most = bounds::WINDINGS_MAXIMUM;
        faults.push(Fault::new(
            "/transformer/windings",
            format!("a transformer has between 1 and {most} windings"),
        ));
    }
    let nameplates = transformer
        .windings
        .iter()
        .filter(|w| matches!(w.values, WindingValues::Nameplate { .. }))
        .count();
    if nameplates > 0 && nameplates < count {
        faults.push(Fault::new(
            "/transformer/windings",
            "give either rated_voltage and rated_current for every winding, or open_circuit_voltage and resistance for every winding",
        ));
    }
    if nameplates > 0 && transformer.regulation.is_none() {
        faults.push(Fault::new(
            "/transformer/regulation",
            "is needed to derive the resistances of windings given by rated_voltage and rated_current, for example \"12 %\"",
        ));
    }
    if nameplates == 0 {
        if transformer.primary_resistance.is_none() {
            faults.push(Fault::new(
                "/transformer/primary_resistance",
                "is needed, for example \"11 ohm\"",
            ));
        }
        if transformer.regulation.is_some() {
            faults.push(Fault::new(
                "/transformer/regulation",
                "goes with rated_voltage and rated_current; where the resistances are given it has no meaning",
            ));
        }
    }
    if nameplates > 0 && transformer.primary_resistance.is_some() {
        faults.push(Fault::new(
            "/transformer/primary_resistance",
            "is derived from the regulation; give one or the other",
        ));
    }
}

fn output_faults(parts: &Parts, output: &Output, at: &str, faults: &mut Vec<Fault>) {
    let circuit = output.rectifier.circuit;
    let name = circuit.name();
    let winding_exists = parts
        .transformer
        .as_ref()
        .map_or(output.winding == 0, |t| output.winding < t.windings.len());
    if !winding_exists {
        let detail = format!("there is no winding {} (they count from 0)", output.winding);
        faults.push(Fault::new(format!("{at}/winding"), detail));
    }
    if circuit.is_three_phase() != (parts.line.phases == Phases::Three) {
        let phases = if circuit.is_three_phase() {
            "three phases"
        } else {
            "one phase"
        };
        faults.push(Fault::new(
            format!("{at}/rectifier/circuit"),
            format!("{name} needs a line of {phases}; set /line/phases"),
        ));
    }
    if circuit.needs_tap() && parts.transformer.is_none() {
        faults.push(Fault::new(
            format!("{at}/rectifier/circuit"),
            format!("{name} needs a tapped winding, hence a transformer"),
        ));
    }
    columns(output, at, faults);
    if output.rails.len() != circuit.rails() {
        let wanted = if circuit.rails() == 2 {
            "two rails, positive first"
        } else {
            "one rail"
        };
        faults.push(Fault::new(format!("{at}/rails"), format!("{name} feeds {wanted}")));
    }
    for (index, rail) in output.rails.iter().enumerate() {
        let at = format!("{at}/rails/{index}");
        if rail.filter.len() > bounds::SECTIONS_MAXIMUM {
            let most = bounds::SECTIONS_MAXIMUM;
            faults.push(Fault::new(
                format!("{at}/filter"),
                format!("at most {most} sections are taken"),
            ));
        }
        for (section_index, section) in rail.filter.iter().enumerate() {
            let at = format!("{at}/filter/{section_index}");
            if section.series.is_none() && section.capacitor.is_none() {
                faults.push(Fault::new(&at, "a section has a series part, a capacitor, or both"));
            }
            if let Some(capacitor) = &section.capacitor {
                count(capacitor.count, &format!("{at}/capacitor"), faults);
            }
        }
        if let Load::Regulator { output_current, .. } = &rail.load
            && output_current.high() == 0.0
        {
            faults.push(Fault::new(
                format!("{at}/load/output_current"),
                "a regulator without a load is a current load of its quiescent current",
            ));
        }
    }
}

fn columns(output: &Output, at: &str, faults: &mut Vec<Fault>) {
    let circuit = output.rectifier.circuit;
    let needs = [
        (
            "stack",
            output.rectifier.stack.as_ref(),
            matches!(circuit, Circuit::FullWaveDoubler | Circuit::HalfWaveDoubler),
        ),
        (
            "coupling",
            output.rectifier.coupling.as_ref(),
            circuit == Circuit::HalfWaveDoubler,
        ),
    ];
    for (field, given, needed) in needs {
        let pointer = format!("{at}/rectifier/{field}");
        match (given, needed) {
            (None, true) => faults.push(Fault::new(
                pointer,
                format!("{} needs its {field} capacitor", circuit.name()),
            )),
            (Some(_), false) => faults.push(Fault::new(
                pointer,
                format!("{} has no {field} capacitor", circuit.name()),
            )),
            (Some(capacitor), true) => count(capacitor.count, &pointer, faults),
            (None, false) => {}
        }
    }
}

fn count(count: u32, at: &str, faults: &mut Vec<Fault>) {
    if count == 0 || count > bounds::COUNT_MAXIMUM {
        let most = bounds::COUNT_MAXIMUM;
        faults.push(Fault::new(
            format!("{at}/count"),
            format!("between 1 and {most} capacitors stand in parallel"),
        ));
    }
}
