//! The rules that make a supply sound.

use super::address::walk;
use super::{Circuit, Fault, Harmonic, Output, Parts, Phases, Rail, Transformer, WindingValues};
use crate::bounds::{self, Range};
use crate::quantity::{Band, Dimension, write_quantity};
use std::fmt;

/// Tells whether the value at a pointer is known, or stands in for one that could not be read.
type Known<'a> = &'a dyn Fn(&str) -> bool;

/// The faults found so far. A fault counts only where all that it rests on is known.
struct Findings<'a> {
    known: Option<Known<'a>>,
    list: Vec<Fault>,
}

impl Findings<'_> {
    /// Takes the pieces of a pointer: they are put together only where somebody asks, not for every supply of a sweep.
    fn knows(&self, pointer: fmt::Arguments<'_>) -> bool {
        self.known.is_none_or(|known| known(&pointer.to_string()))
    }

    /// Adds a fault at a field, which rests on that field and on `others`.
    fn add(&mut self, pointer: impl Into<String>, detail: impl Into<String>, others: &[&str]) {
        let pointer = pointer.into();
        if self.knows(format_args!("{pointer}")) && others.iter().all(|other| self.knows(format_args!("{other}"))) {
            self.list.push(Fault::new(pointer, detail));
        }
    }
}

impl Parts {
    /// The faults of parts in which some values stand in for others that could not be read: `known` tells by JSON Pointer
    /// which do not, and a rule that rests on any other is left out. In the order of the rules.
    #[must_use]
    pub fn faults(&self, known: &dyn Fn(&str) -> bool) -> Vec<Fault> {
        judge(self, Some(known))
    }
}

/// Every fault of the parts, in the order of the rules.
pub(super) fn faults(parts: &Parts) -> Vec<Fault> {
    judge(parts, None)
}

/// All values are known where `known` is left out.
fn judge(parts: &Parts, known: Option<Known<'_>>) -> Vec<Fault> {
    let mut found = Findings {
        known,
        list: Vec::new(),
    };
    ranges(parts, &mut found);
    line(parts, &mut found);
    if let Some(transformer) = &parts.transformer {
        windings(transformer, &mut found);
    }
    if parts.outputs.is_empty() {
        found.add("/outputs", "a supply has at least one output", &[]);
    }
    let most = bounds::OUTPUTS_MAXIMUM;
    if parts.outputs.len() > most {
        found.add("/outputs", format!("at most {most} outputs are solved together"), &[]);
    }
    for (index, output) in parts.outputs.iter().enumerate() {
        output_faults(parts, output, &format!("/outputs/{index}"), &mut found);
        taps(parts, index, &mut found);
    }
    found.list
}

/// A winding has a tap or has none, for all outputs on it alike.
fn taps(parts: &Parts, index: usize, found: &mut Findings<'_>) {
    let output = &parts.outputs[index];
    let exists = parts
        .transformer
        .as_ref()
        .is_some_and(|t| output.winding < t.windings.len());
    let tap = output.rectifier.circuit.needs_tap();
    let differs = |(other, o): (usize, &Output)| {
        o.winding == output.winding
            && o.rectifier.circuit.needs_tap() != tap
            && found.knows(format_args!("/outputs/{other}/winding"))
            && found.knows(format_args!("/outputs/{other}/rectifier/circuit"))
    };
    if exists && parts.outputs[..index].iter().enumerate().any(differs) {
        let detail = "an earlier output uses this winding the other way: a winding either has a tap or has none";
        found.add(
            format!("/outputs/{index}/winding"),
            detail,
            &[&format!("/outputs/{index}/rectifier/circuit")],
        );
    }
}

fn ranges(parts: &Parts, found: &mut Findings<'_>) {
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
            found.add(visit.pointer, detail, &[]);
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
        "this {} must be {zero}between {} and {}",
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

fn line(parts: &Parts, found: &mut Findings<'_>) {
    let harmonics = &parts.line.harmonics;
    if harmonics.len() > bounds::HARMONICS_MAXIMUM {
        let most = bounds::HARMONICS_MAXIMUM;
        found.add("/line/harmonics", format!("at most {most} harmonics are taken"), &[]);
    }
    for (index, harmonic) in harmonics.iter().enumerate() {
        let pointer = format!("/line/harmonics/{index}/order");
        let same = |(other, h): (usize, &Harmonic)| {
            h.order == harmonic.order && found.knows(format_args!("/line/harmonics/{other}/order"))
        };
        if harmonic.order < 2 || harmonic.order > bounds::HARMONIC_ORDER_MAXIMUM {
            let most = bounds::HARMONIC_ORDER_MAXIMUM;
            found.add(pointer, format!("an order lies between 2 and {most}"), &[]);
        } else if harmonics[..index].iter().enumerate().any(same) {
            found.add(pointer, format!("order {} is given twice", harmonic.order), &[]);
        }
    }
}

fn windings(transformer: &Transformer, found: &mut Findings<'_>) {
    let count = transformer.windings.len();
    if count == 0 || count > bounds::WINDINGS_MAXIMUM {
        let most = bounds::WINDINGS_MAXIMUM;
        found.add(
            "/transformer/windings",
            format!("a transformer has between 1 and {most} windings"),
            &[],
        );
    }
    let (mut nameplates, mut measured) = (false, false);
    for (index, winding) in transformer.windings.iter().enumerate() {
        if found.knows(format_args!("/transformer/windings/{index}")) {
            let is_nameplate = matches!(winding.values, WindingValues::Nameplate { .. });
            nameplates |= is_nameplate;
            measured |= !is_nameplate;
        }
    }
    let mut add = |field: &str, detail: &str| found.add(format!("/transformer/{field}"), detail, &[]);
    if nameplates && measured {
        add(
            "windings",
            "give either rated_voltage and rated_current for every winding, or open_circuit_voltage and resistance for every winding",
        );
    }
    if nameplates && transformer.regulation.is_none() {
        add(
            "regulation",
            "is needed to derive the resistances of windings given by rated_voltage and rated_current, for example \"12 %\"",
        );
    }
    if nameplates && transformer.primary_resistance.is_some() {
        add(
            "primary_resistance",
            "is derived from the regulation; give one or the other",
        );
    }
    if measured && !nameplates && transformer.primary_resistance.is_none() {
        add("primary_resistance", "is needed, for example \"11 ohm\"");
    }
    if measured && !nameplates && transformer.regulation.is_some() {
        add(
            "regulation",
            "goes with rated_voltage and rated_current; where the resistances are given it has no meaning",
        );
    }
}

fn output_faults(parts: &Parts, output: &Output, at: &str, found: &mut Findings<'_>) {
    let circuit = output.rectifier.circuit;
    let name = circuit.name();
    let circuit_at = format!("{at}/rectifier/circuit");
    let winding_exists = parts
        .transformer
        .as_ref()
        .map_or(output.winding == 0, |t| output.winding < t.windings.len());
    if !winding_exists {
        let detail = format!("there is no winding {} (they count from 0)", output.winding);
        found.add(format!("{at}/winding"), detail, &["/transformer/windings"]);
    }
    if circuit.is_three_phase() != (parts.line.phases == Phases::Three) {
        let phases = if circuit.is_three_phase() {
            "three phases"
        } else {
            "one phase"
        };
        let detail = format!("{name} needs a line of {phases}; set /line/phases");
        found.add(&circuit_at, detail, &["/line/phases"]);
    }
    if circuit.needs_tap() && parts.transformer.is_none() {
        let detail = format!("{name} needs a tapped winding, hence a transformer");
        found.add(&circuit_at, detail, &["/transformer"]);
    }
    columns(output, at, found);
    if output.rails.len() != circuit.rails() {
        let wanted = if circuit.rails() == 2 {
            "two rails, positive first"
        } else {
            "one rail"
        };
        let detail = format!("{name} feeds {wanted}");
        found.add(format!("{at}/rails"), detail, &[&circuit_at]);
    }
    for (index, rail) in output.rails.iter().enumerate() {
        rail_faults(rail, &format!("{at}/rails/{index}"), found);
    }
}

fn rail_faults(rail: &Rail, at: &str, found: &mut Findings<'_>) {
    if rail.filter.len() > bounds::SECTIONS_MAXIMUM {
        let most = bounds::SECTIONS_MAXIMUM;
        found.add(
            format!("{at}/filter"),
            format!("at most {most} sections are taken"),
            &[],
        );
    }
    for (index, section) in rail.filter.iter().enumerate() {
        let at = format!("{at}/filter/{index}");
        if section.series.is_none() && section.capacitor.is_none() {
            let fields = [format!("{at}/series"), format!("{at}/capacitor")];
            let detail = "a section has a series part, a capacitor, or both";
            found.add(&at, detail, &[&fields[0], &fields[1]]);
        }
        if let Some(capacitor) = &section.capacitor {
            count(capacitor.count, &format!("{at}/capacitor"), found);
        }
    }
}

fn columns(output: &Output, at: &str, found: &mut Findings<'_>) {
    let circuit = output.rectifier.circuit;
    let name = circuit.name();
    let doubler = matches!(circuit, Circuit::FullWaveDoubler | Circuit::HalfWaveDoubler);
    let needs = [
        ("stack", &output.rectifier.stack, doubler),
        (
            "coupling",
            &output.rectifier.coupling,
            circuit == Circuit::HalfWaveDoubler,
        ),
    ];
    for (field, given, needed) in needs {
        let pointer = format!("{at}/rectifier/{field}");
        let detail = match (given, needed) {
            (None, true) => format!("{name} needs its {field} capacitor"),
            (Some(_), false) => format!("{name} has no {field} capacitor"),
            (Some(capacitor), true) => {
                count(capacitor.count, &pointer, found);
                continue;
            }
            (None, false) => continue,
        };
        found.add(pointer, detail, &[&format!("{at}/rectifier/circuit")]);
    }
}

fn count(count: u32, at: &str, found: &mut Findings<'_>) {
    if count == 0 || count > bounds::COUNT_MAXIMUM {
        let most = bounds::COUNT_MAXIMUM;
        found.add(
            format!("{at}/count"),
            format!("between 1 and {most} capacitors stand in parallel"),
            &[],
        );
    }
}
