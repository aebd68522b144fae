//! A need from its request.

use crate::api::policies;
use crate::bounds;
use crate::description::fields::{Faults, Fields, Place};
use crate::description::{json::Json, read, read_each};
use crate::design::{Assumptions, Minimise, Need, RailNeed, RegulationPoint, designable};
use crate::policy::{Policy, published};
use crate::quantity::{Band, Dimension};
use crate::supply::{
    Circuit, Fault, Line, Output, Parts, Rail, Rectifier, Supply, Surroundings, Transformer, Winding, WindingValues,
};

/// Candidates where their number is left out, and at the most.
const LIMIT_DEFAULT: u64 = 5;
const LIMIT_MAXIMUM: u64 = 50;
/// The policy where none is given.
const POLICY_DEFAULT: &str = "reliability-center-severe";

/// A circuit that was asked for, and where.
type Named = (Circuit, String);

/// Reads a need and its policy.
pub(super) fn read(json: &Json) -> Result<(Need, Policy), Vec<Fault>> {
    let faults = Faults::default();
    let request = Place::new(json, "", &faults).object().and_then(|mut f| {
        let line = f.required("line").and_then(|place| read::line(&place));
        let surroundings = match f.optional("surroundings") {
            None => Some(Surroundings::default()),
            Some(place) => read::surroundings(&place),
        };
        let need = f.required("need").and_then(|place| rails_and_circuits(&place));
        choose_from(&mut f);
        let minimise = minimise(&mut f);
        let limit = f.integer_or("limit", 1..=LIMIT_MAXIMUM, LIMIT_DEFAULT);
        let policy = policy(&mut f);
        let assumptions = match f.optional("assume") {
            None => Some(Assumptions::default()),
            Some(place) => assumptions(&place),
        };
        f.finish("this request");
        let (rails, circuits) = need?;
        let line = line?;
        let circuits = fitting(circuits, &line, rails.len(), &faults)?;
        let need = Need {
            line,
            surroundings: surroundings?,
            rails,
            circuits,
            assumptions: assumptions?,
            minimise: minimise?,
            limit: usize::try_from(limit?).ok()?,
        };
        sound(&need, &faults);
        Some((need, policy?))
    });
    faults.settle(request)
}

/// Ranges of the line and the loads are checked on a supply that has them.
fn sound(need: &Need, faults: &Faults) {
    let circuit = need.circuits[0];
    let volts = need.line.voltage;
    let parts = Parts {
        name: None,
        line: need.line.clone(),
        transformer: Some(Transformer {
            primary_voltage: Band::exactly(230.0),
            primary_resistance: Some(Band::ZERO),
            primary_leakage_inductance: Band::ZERO,
            windings: vec![Winding {
                values: WindingValues::Measured {
                    open_circuit_voltage: Band::exactly(10.0),
                    resistance: Band::ZERO,
                },
                leakage_inductance: Band::ZERO,
            }],
            regulation: None,
            rating: None,
            core_loss: None,
        }),
        outputs: vec![Output {
            winding: 0,
            rectifier: Rectifier {
                circuit,
                diode: need.assumptions.diode.clone(),
                stack: None,
                coupling: None,
            },
            rails: need
                .rails
                .iter()
                .map(|rail| Rail {
                    filter: Vec::new(),
                    load: rail.load.clone(),
                })
                .collect(),
        }],
        surroundings: need.surroundings.clone(),
    };
    for fault in Supply::new(parts).err().unwrap_or_default() {
        let pointer = fault
            .pointer
            .replace("/outputs/0/rails", "/need/rails")
            .replace("/outputs/0/rectifier/diode", "/assume/diode");
        faults.note(pointer, fault.detail);
    }
    if volts.low() <= 0.0 {
        faults.note("/line/voltage", "must be above zero at its lowest");
    }
}

fn rails_and_circuits(place: &Place<'_>) -> Option<(Vec<RailNeed>, Vec<Named>)> {
    let mut f = place.object()?;
    let rails = f.required("rails").and_then(|p| {
        let rails = read_each(&p, rail)?;
        if rails.is_empty() || rails.len() > 2 {
            p.fault("one or two rails are designed");
            return None;
        }
        Some(rails)
    });
    if let Some(life) = f.optional("life_min") {
        life.fault("this version does not compute life; leave it out");
    }
    let circuits = match f.optional("circuits") {
        None => Some(Vec::new()),
        Some(p) => read_each(&p, |item| Some((read::circuit(item)?, item.pointer.clone()))),
    };
    f.finish("a need");
    Some((rails?, circuits?))
}

fn rail(place: &Place<'_>) -> Option<RailNeed> {
    let mut f = place.object()?;
    let valley_min = f.required("valley_min").and_then(|p| volts(&p));
    let crest_max = optional_volts(&mut f, "crest_max");
    let ripple_pp_max = optional_volts(&mut f, "ripple_pp_max");
    let load = f.required("load").and_then(|p| read::load(&p));
    let (valley_min, crest_max) = (valley_min?, crest_max?);
    if crest_max.is_some_and(|crest| crest <= valley_min) {
        f.fault_at("crest_max", "must lie above valley_min");
        return None;
    }
    f.finish("a rail's need");
    Some(RailNeed {
        valley_min,
        crest_max,
        ripple_pp_max: ripple_pp_max?,
        load: load?,
    })
}

fn volts(place: &Place<'_>) -> Option<f64> {
    let value = place.quantity(Dimension::Voltage)?;
    if (0.1..=bounds::VOLTAGE.maximum).contains(&value) {
        return Some(value);
    }
    place.fault("must lie between 100 mV and 100 kV");
    None
}

fn optional_volts(f: &mut Fields<'_>, field: &'static str) -> Option<Option<f64>> {
    match f.optional(field) {
        None => Some(None),
        Some(place) => volts(&place).map(Some),
    }
}

/// The circuits asked for, each fitting the line and the rails; all that fit where none was named.
fn fitting(named: Vec<Named>, line: &Line, rails: usize, faults: &Faults) -> Option<Vec<Circuit>> {
    let fit = designable(line.phases, rails);
    if fit.is_empty() {
        faults.note("/need/rails", "no circuit feeds so many rails from this line");
        return None;
    }
    if named.is_empty() {
        return Some(fit.to_vec());
    }
    let mut circuits = Vec::new();
    for (circuit, pointer) in named {
        if !fit.contains(&circuit) {
            let names: Vec<&str> = fit.iter().map(|c| c.name()).collect();
            faults.note(
                pointer,
                format!("for this line and these rails {} can be designed", names.join(", ")),
            );
        } else if !circuits.contains(&circuit) {
            circuits.push(circuit);
        }
    }
    (!circuits.is_empty()).then_some(circuits)
}

fn choose_from(f: &mut Fields<'_>) {
    if let Some(place) = f.required("choose_from")
        && place.text() == Some("parts")
    {
        place.fault("this version keeps no parts list; choose from \"values\"");
    } else if let Some(place) = f.optional("choose_from") {
        let _ = place.word(&["values"]);
    }
}

fn minimise(f: &mut Fields<'_>) -> Option<Minimise> {
    let Some(place) = f.optional("minimise") else {
        return Some(Minimise::Volume);
    };
    if place.text() == Some("cost") {
        place.fault("preferred values have no price; minimise volume or loss");
        return None;
    }
    place.word(&["volume", "loss"]).map(|word| {
        if word == "loss" {
            Minimise::Loss
        } else {
            Minimise::Volume
        }
    })
}

fn policy(f: &mut Fields<'_>) -> Option<Policy> {
    let named = f.optional("policy");
    let inline = f.optional("inline_policy");
    match (named, inline) {
        (None, None) => published(POLICY_DEFAULT),
        _ => policies::either(f),
    }
}

fn assumptions(place: &Place<'_>) -> Option<Assumptions> {
    let usual = Assumptions::default();
    let mut f = place.object()?;
    let regulation = match f.optional("regulation") {
        None => Some(usual.regulation),
        Some(p) => regulation(&p),
    };
    let diode = match f.optional("diode") {
        None => Some(usual.diode),
        Some(p) => read::diode(&p),
    };
    let tolerance = fraction(&mut f, "capacitance_tolerance", usual.capacitance_tolerance, 0.0, 0.9);
    let loss_factor = fraction(&mut f, "loss_factor", usual.loss_factor, 0.0, 10.0);
    f.finish("assumptions");
    Some(Assumptions {
        regulation: regulation?,
        diode: diode?,
        capacitance_tolerance: tolerance?,
        loss_factor: loss_factor?,
    })
}

fn fraction(f: &mut Fields<'_>, field: &'static str, usual: f64, low: f64, high: f64) -> Option<f64> {
    let Some(place) = f.optional(field) else {
        return Some(usual);
    };
    let value = place.quantity(Dimension::Ratio)?;
    if (low..=high).contains(&value) {
        return Some(value);
    }
    place.fault(format!("must lie between {} % and {} %", 100.0 * low, 100.0 * high));
    None
}

fn regulation(place: &Place<'_>) -> Option<Vec<RegulationPoint>> {
    let points = read_each(place, |item| {
        let mut f = item.object()?;
        let rating = f.required("rating").and_then(|p| p.quantity(Dimension::ApparentPower));
        let regulation = f.required("regulation").and_then(|p| p.quantity(Dimension::Ratio));
        f.finish("a point");
        let (rating, regulation) = (rating?, regulation?);
        if !(bounds::APPARENT_POWER.accepts(rating) && bounds::REGULATION.accepts(regulation)) {
            item.fault("needs a rating above zero and a regulation above 0 % and at most 100 %");
            return None;
        }
        Some(RegulationPoint { rating, regulation })
    })?;
    let rising = points.windows(2).all(|pair| pair[0].rating < pair[1].rating);
    if points.is_empty() || points.len() > 50 || !rising {
        place.fault("needs between 1 and 50 points with rising ratings");
        return None;
    }
    Some(points)
}
