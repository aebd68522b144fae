//! `POST /v1/operating-point`.

use super::AppState;
use super::answer::{self, Ends, Figures};
use super::examples;
use super::extract::Body;
use super::negotiate::{self, Known};
use super::problem::{BodyErrors, Kind, Problem};
use crate::app;
use crate::description::fields::{Faults, Place};
use crate::description::{form, json::Json, request};
use crate::figures::Waveforms as PlainWaveforms;
use crate::plot;
use crate::supply::{Fault, Load, Supply};
use axum::extract::State;
use axum::http::{HeaderMap, header};
use axum::response::{IntoResponse, Response};
use serde::Serialize;
use utoipa::ToSchema;
use utoipa_axum::router::OpenApiRouter;
use utoipa_axum::routes;

/// Fewest points of a waveform: the ends of a cycle.
const POINTS_MINIMUM: u64 = 2;
/// Points of a waveform where their number is left out.
const POINTS_DEFAULT: u64 = 400;

/// A representation of the answer.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Format {
    /// The figures.
    Json,
    /// One cycle as a plot.
    Plot,
}

const FORMATS: [Known<Format>; 2] = [
    (Format::Json, "application", "json"),
    (Format::Plot, "image", "svg+xml"),
];

/// The resource's routes.
pub(super) fn router() -> OpenApiRouter<AppState> {
    OpenApiRouter::new().routes(routes!(operating_point))
}

/// A supply and a point within its bands.
#[derive(Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct OperatingPointRequest {
    /// The supply.
    pub supply: form::Supply,
    /// For some quantities, by JSON Pointer inside the supply, an end of the band (`low`, `nominal`, `high`) or a quantity within it; all
    /// others are nominal.
    #[schema(required = false, nullable = false)]
    pub at: Option<Ends>,
    /// Asks for one cycle of waveforms.
    #[schema(required = false, nullable = false)]
    pub waveforms: Option<WaveformsRequest>,
}

/// How finely to sample a cycle.
#[derive(Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct WaveformsRequest {
    /// Points, both ends of the cycle included; 400 where left out.
    #[schema(required = false, nullable = false, minimum = 2, maximum = 20000, example = 400)]
    pub points: Option<u32>,
}

/// One cycle of the line, from zero crossing to zero crossing.
#[derive(Serialize, ToSchema)]
pub struct Waveforms {
    /// Seconds.
    pub time: Vec<f64>,
    /// Volts, one list a rail, output by output.
    pub rails: Vec<Vec<f64>>,
    /// Amperes, one list a diode, output by output.
    pub diodes: Vec<Vec<f64>>,
    /// Amperes, phase 1.
    pub line_current: Vec<f64>,
}

impl From<PlainWaveforms> for Waveforms {
    fn from(w: PlainWaveforms) -> Self {
        Self {
            time: w.time,
            rails: w.rails,
            diodes: w.diodes,
            line_current: w.line_current,
        }
    }
}

/// How the point was solved.
#[derive(Serialize, ToSchema)]
pub struct Solution {
    /// Seconds of one cycle.
    #[schema(example = 0.02)]
    pub period: f64,
    /// Relative change of the state over one cycle; 0 is perfectly periodic.
    #[schema(example = 1e-15)]
    pub residual: f64,
    /// Newton iterations.
    #[schema(example = 5)]
    pub iterations: u64,
    /// Version of the engine.
    #[schema(example = "0.1.0")]
    pub engine: String,
}

/// What was derived from a transformer's nameplate.
#[derive(Serialize, ToSchema)]
pub struct DerivedTransformer {
    /// Ohms.
    #[schema(example = 24.0)]
    pub primary_resistance: f64,
    /// One a winding.
    pub windings: Vec<DerivedWinding>,
}

/// What was derived for one winding.
#[derive(Serialize, ToSchema)]
pub struct DerivedWinding {
    /// Volts without load, of each half.
    #[schema(example = 20.5)]
    pub open_circuit_voltage: f64,
    /// Ohms, of each half.
    #[schema(example = 0.3)]
    pub resistance: f64,
}

/// The truth about a supply at one point within its bands.
#[derive(Serialize, ToSchema)]
pub struct OperatingPointAnswer {
    /// Every figure.
    pub figures: Figures,
    /// One cycle, where it was asked for.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub waveforms: Option<Waveforms>,
    /// What was derived from the transformer's nameplate, where it was given by one.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub derived: Option<DerivedTransformer>,
    /// How it was solved.
    pub solution: Solution,
    /// What the model leaves out.
    pub assumptions: Vec<String>,
    /// What to beware of.
    pub cautions: Vec<String>,
}

/// Operating point
///
/// Solves the periodic steady state at one choice within every band and returns all figures: integrals and located extremes of the
/// exact solution, no samples. With `Accept: image/svg+xml` it returns one cycle as a plot instead.
#[utoipa::path(
    post, path = "/v1/operating-point", operation_id = "solveOperatingPoint", tag = "supply",
    request_body(
        content = OperatingPointRequest, description = "A supply and a point within its bands.",
        example = json!({"supply": examples::supply(), "at": {"/line/voltage": "low"}})
    ),
    responses(
        (status = 200, description = "The figures; or one cycle as a plot.", content(
            (OperatingPointAnswer = "application/json"),
            (String = "image/svg+xml")
        )),
        (status = 406, description = "None of the acceptable representations exists.", body = Problem, content_type = "application/problem+json"),
        BodyErrors
    )
)]
async fn operating_point(State(state): State<AppState>, headers: HeaderMap, body: Body) -> Result<Response, Problem> {
    let Some(format) = negotiate::choose(&headers, &FORMATS) else {
        let detail = "an operating point comes as application/json or image/svg+xml";
        return Err(Problem::new(Kind::NOT_ACCEPTABLE, detail));
    };
    let most = state.app.limits.waveform_points_maximum as u64;
    let (supply, points) = read(&body.0, most).map_err(Problem::faulty)?;
    let points = points.or((format == Format::Plot).then_some(POINTS_DEFAULT as usize));
    let point = state.app.operating_point(supply.clone(), points).await?;
    match (format, &point.waveforms) {
        (Format::Plot, Some(waves)) => plotted(&supply, waves),
        _ => Ok(axum::Json(answer(&supply, point)).into_response()),
    }
}

fn plotted(supply: &Supply, waves: &PlainWaveforms) -> Result<Response, Problem> {
    let name = supply.name().unwrap_or("Mains input stage");
    let title = format!("{name}: rail voltage, diode current and line current over one cycle");
    let svg = plot::waveforms(&title, waves).map_err(|error| {
        tracing::error!(error = %error, "a plot failed");
        Problem::new(Kind::INTERNAL, "the plot could not be drawn")
    })?;
    Ok(([(header::CONTENT_TYPE, "image/svg+xml")], svg).into_response())
}

fn read(json: &Json, points_maximum: u64) -> Result<(Supply, Option<usize>), Vec<Fault>> {
    let faults = Faults::default();
    let request = Place::new(json, "", &faults).object().and_then(|mut f| {
        let supply = f.required("supply").and_then(|place| request::supply(&place, &faults));
        let at = f.optional("at");
        let points = match f.optional("waveforms") {
            None => Some(None),
            Some(place) => points(&place, points_maximum).map(Some),
        };
        f.finish("this request");
        let supply = supply?;
        let chosen = match at {
            None => supply.at_ends(|_| None),
            Some(place) => request::at(&place, &supply, &faults)?,
        };
        Some((chosen, points?))
    });
    faults.settle(request)
}

/// Reads how finely to sample.
fn points(place: &Place<'_>, maximum: u64) -> Option<usize> {
    let mut f = place.object()?;
    let points = f.integer_or("points", POINTS_MINIMUM..=maximum, POINTS_DEFAULT);
    f.finish("waveforms");
    usize::try_from(points?).ok()
}

fn answer(supply: &Supply, point: app::OperatingPoint) -> OperatingPointAnswer {
    let mut cautions = answer::cautions();
    cautions.extend(dropouts(supply, &point));
    let nameplate = supply
        .transformer()
        .is_some_and(crate::supply::Transformer::is_nameplate);
    OperatingPointAnswer {
        figures: Figures::from(&point.figures),
        waveforms: point.waveforms.map(Waveforms::from),
        derived: point.derived.filter(|_| nameplate).map(|derived| DerivedTransformer {
            primary_resistance: derived.primary_resistance,
            windings: derived
                .windings
                .iter()
                .map(|w| DerivedWinding {
                    open_circuit_voltage: w.open_circuit_voltage,
                    resistance: w.resistance,
                })
                .collect(),
        }),
        solution: Solution {
            period: point.period,
            residual: point.residual,
            iterations: point.iterations as u64,
            engine: env!("CARGO_PKG_VERSION").to_owned(),
        },
        assumptions: answer::assumptions(),
        cautions,
    }
}

/// A caution for every regulator whose rail does not stay above its dropout.
fn dropouts(supply: &Supply, point: &app::OperatingPoint) -> Vec<String> {
    let mut out = Vec::new();
    for (o, (output, figures)) in supply.outputs().iter().zip(&point.figures.outputs).enumerate() {
        for (r, (rail, figures)) in output.rails.iter().zip(&figures.rails).enumerate() {
            if let Load::Regulator {
                output_voltage,
                dropout,
                ..
            } = &rail.load
            {
                let least = output_voltage.nominal() + dropout.nominal();
                let valley = figures.voltage.valley;
                if valley < least {
                    out.push(format!(
                        "The regulator of /outputs/{o}/rails/{r} drops out: its rail falls to {valley:.3} V, and it needs {least:.3} V."
                    ));
                }
            }
        }
    }
    out
}
