//! A sweep from its request.

use super::SweepColumn;
use crate::api::AppState;
use crate::api::problem::Problem;
use crate::app::{Axis, Plan, PlanKind, Scale};
use crate::config::Limits;
use crate::description::fields::{Faults, Place};
use crate::description::{json::Json, read_each, request};
use crate::quantity::Band;
use crate::supply::{Fault, Slot, Supply};
use crate::worst_case::circuit_bands;

/// Most axes of one grid.
const AXES_MAXIMUM: usize = 8;
/// Most points of one axis.
const AXIS_POINTS_MAXIMUM: u64 = 1_000_000;
/// Largest seed.
const SEED_MAXIMUM: u64 = u32::MAX as u64;

/// A sweep, read.
pub(super) struct Request {
    pub(super) plan: Plan,
    pub(super) columns: Vec<SweepColumn>,
    /// Pointers of the columns, and where in the request each stands.
    wanted: Vec<(String, String)>,
    /// Units of the inputs.
    units: Vec<&'static str>,
}

/// Reads all of a request but what its columns mean, which depends on the figures.
pub(super) fn read(json: &Json, limits: Limits) -> Result<Request, Vec<Fault>> {
    let faults = Faults::default();
    let request = Place::new(json, "", &faults).object().and_then(|mut f| {
        let supply = f.required("supply").and_then(|place| request::supply(&place, &faults));
        let axes = f.optional("axes");
        let random = f.optional("random");
        let columns = f
            .required("columns")
            .and_then(|place| columns_wanted(&place, limits.sweep_columns_maximum));
        f.finish("this request");
        let supply = supply?;
        let (kind, inputs) = match (axes, random) {
            (Some(axes), None) => grid(&axes, &supply, &faults)?,
            (None, Some(random)) => draws(&random, &supply)?,
            (Some(_), Some(random)) => {
                random.fault("goes in place of axes, not beside them");
                return None;
            }
            (None, None) => {
                faults.note("/axes", "is missing: give axes or random");
                return None;
            }
        };
        let plan = Plan {
            bands: inputs.iter().map(|slot| slot.band).collect(),
            inputs: inputs.iter().map(|slot| slot.pointer.clone()).collect(),
            supply: supply.at_ends(|_| None),
            kind,
            columns: Vec::new(),
        };
        bounded(&plan, limits, &faults);
        Some(Request {
            plan,
            columns: Vec::new(),
            wanted: columns?,
            units: inputs.iter().map(|slot| si_unit(slot)).collect(),
        })
    });
    faults.settle(request)
}

/// Results are plain numbers in SI base units: a ratio is a fraction.
fn si_unit(slot: &Slot) -> &'static str {
    match slot.dimension {
        crate::quantity::Dimension::Ratio => "1",
        other => other.unit(),
    }
}

fn columns_wanted(place: &Place<'_>, maximum: usize) -> Option<Vec<(String, String)>> {
    let items = place.list()?;
    if items.is_empty() || items.len() > maximum {
        place.fault(format!(
            "between 1 and {maximum} columns are taken (--sweep-columns-maximum)"
        ));
        return None;
    }
    read_each(place, |item| Some((item.text()?.to_owned(), item.pointer.clone())))
}

fn bounded(plan: &Plan, limits: Limits, faults: &Faults) {
    let product = match &plan.kind {
        PlanKind::Grid(axes) => axes.iter().try_fold(1_u64, |n, a| n.checked_mul(a.values.len() as u64)),
        PlanKind::Random { samples, .. } => Some(*samples),
    };
    let most = limits.sweep_points_maximum;
    if product.is_none_or(|points| points > most) {
        let pointer = if matches!(plan.kind, PlanKind::Grid(_)) {
            "/axes"
        } else {
            "/random/samples"
        };
        faults.note(
            pointer,
            format!("more than {most} points; ask for fewer or raise --sweep-points-maximum"),
        );
    }
}

fn grid(place: &Place<'_>, supply: &Supply, faults: &Faults) -> Option<(PlanKind, Vec<Slot>)> {
    let items = place.list()?;
    if items.is_empty() || items.len() > AXES_MAXIMUM {
        place.fault(format!("between 1 and {AXES_MAXIMUM} axes are taken"));
        return None;
    }
    let read: Vec<(Axis, Slot)> = read_each(place, |item| axis(item, supply))?;
    for (index, (axis, _)) in read.iter().enumerate() {
        if read[..index].iter().any(|(other, _)| other.pointer == axis.pointer) {
            faults.note(
                format!("{}/{index}/pointer", place.pointer),
                "another axis sweeps this quantity already",
            );
        }
    }
    let (axes, slots) = read.into_iter().unzip();
    Some((PlanKind::Grid(axes), slots))
}

fn axis(place: &Place<'_>, supply: &Supply) -> Option<(Axis, Slot)> {
    let mut f = place.object()?;
    let slot = f.required("pointer").and_then(|p| slot(&p, supply));
    let values = f.optional("values");
    let (from, to, points, scale) = (
        f.optional("from"),
        f.optional("to"),
        f.optional("points"),
        f.optional("scale"),
    );
    let pointer = f.pointer().to_owned();
    f.finish("an axis");
    let slot = slot?;
    let dimension = slot.dimension;
    let values = match (values, from, to, points) {
        (Some(values), None, None, None) => {
            let list = read_each(&values, |v| {
                v.quantity(dimension).filter(|x| holds(v, &slot, supply, *x))
            })?;
            if list.is_empty() {
                values.fault("an axis has at least one value");
                return None;
            }
            list
        }
        (None, Some(from), Some(to), Some(points)) => {
            let (low, high) = (from.quantity(dimension), to.quantity(dimension));
            let points = points.integer(1..=AXIS_POINTS_MAXIMUM);
            let scale = scale.map_or(Some(Scale::Linear), |p| {
                p.word(&["linear", "log"])
                    .map(|w| if w == "log" { Scale::Logarithmic } else { Scale::Linear })
            });
            let (low, high, points, scale) = (low?, high?, points?, scale?);
            if scale == Scale::Logarithmic && !(low > 0.0 && high > 0.0) {
                from.fault("a logarithmic axis runs between values above zero");
                return None;
            }
            if !(holds(&from, &slot, supply, low) && holds(&to, &slot, supply, high)) {
                return None;
            }
            Axis::spaced(low, high, usize::try_from(points).ok()?, scale)
        }
        _ => {
            place.fault(format!("{pointer}: give values, or from, to and points"));
            return None;
        }
    };
    Some((
        Axis {
            pointer: slot.pointer.clone(),
            values,
        },
        slot,
    ))
}

/// Whether the supply is sound with a quantity at a value.
fn holds(place: &Place<'_>, slot: &Slot, supply: &Supply, value: f64) -> bool {
    let tried = Band::point(value).map_err(|e| e.to_string()).and_then(|band| {
        let with = supply.at_ends(|_| None).with(&[(slot.pointer.as_str(), band)]);
        with.map_err(|faults| faults.first().map_or_else(String::new, |f| f.detail.clone()))
    });
    tried.map_err(|detail| place.fault(detail)).is_ok()
}

fn slot(place: &Place<'_>, supply: &Supply) -> Option<Slot> {
    supply
        .quantity(place.text()?)
        .map_err(|error| place.fault(error.to_string()))
        .ok()
}

fn draws(place: &Place<'_>, supply: &Supply) -> Option<(PlanKind, Vec<Slot>)> {
    let mut f = place.object()?;
    let samples = f
        .required("samples")
        .and_then(|p| p.integer(1..=AXIS_POINTS_MAXIMUM * 10));
    let seed = f.required("seed").and_then(|p| p.integer(0..=SEED_MAXIMUM));
    f.finish("random draws");
    let kind = PlanKind::Random {
        samples: samples?,
        seed: seed?,
    };
    Some((kind, circuit_bands(supply)))
}

/// Finds what the columns mean: inputs of the sweep by their own pointer, figures by theirs.
pub(super) fn columns(state: &AppState, mut request: Request) -> Result<Request, Problem> {
    let shape = state.app.figure_pointers(&request.plan.supply);
    let mut faults = Vec::new();
    for (pointer, place) in &request.wanted {
        let input = request.plan.inputs.iter().position(|p| p == pointer);
        let figure = shape.iter().position(|(p, _)| p == pointer);
        let (index, unit) = match (input, figure) {
            (Some(index), _) => (index, request.units[index]),
            (None, Some(index)) => (request.plan.inputs.len() + index, shape[index].1),
            (None, None) => {
                let shown = request::quoted(pointer);
                let detail = format!(
                    "{shown} is neither a figure of this supply nor a quantity that is swept; /v1/figures lists the figures"
                );
                faults.push(Fault::new(place.clone(), detail));
                continue;
            }
        };
        request.plan.columns.push(index);
        request.columns.push(SweepColumn {
            pointer: pointer.clone(),
            unit: unit.to_owned(),
        });
    }
    if faults.is_empty() {
        Ok(request)
    } else {
        Err(Problem::faulty(faults))
    }
}
