//! `POST /v1/design`.

mod read;

use super::AppState;
use super::answer::{self, Check, Ends, FigureRange, WholeVerdict};
use super::examples;
use super::extract::Body;
use super::policies::{InlinePolicy, PolicyAnswer};
use super::problem::{BodyErrors, Problem};
use crate::app::Designed;
use crate::description::quantities::{ApparentPower, Capacitance, Ratio, Voltage};
use crate::description::{describe, form};
use crate::design::{Candidate, Minimise};
use axum::extract::State;
use serde::Serialize;
use utoipa::ToSchema;
use utoipa_axum::router::OpenApiRouter;
use utoipa_axum::routes;

/// The resource's routes.
pub(super) fn router() -> OpenApiRouter<AppState> {
    OpenApiRouter::new().routes(routes!(design))
}

/// What a supply must do.
#[derive(Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct DesignRequest {
    /// The mains.
    pub line: form::Line,
    /// Where the supply lives; 25 degC where left out.
    #[schema(required = false, nullable = false)]
    pub surroundings: Option<form::Surroundings>,
    /// What the rails must do.
    pub need: DesignNeed,
    /// Where parts come from; this version knows `values`: preferred values of standards.
    pub choose_from: ChooseFrom,
    /// What to rank by; `volume` where left out.
    #[schema(required = false, nullable = false)]
    pub minimise: Option<DesignMinimise>,
    /// Name of the published policy whose factors the ratings are chosen by.
    #[schema(required = false, nullable = false, example = "reliability-center-severe")]
    pub policy: Option<String>,
    /// Rules of your own, in place of `policy`.
    #[schema(required = false, nullable = false)]
    pub inline_policy: Option<InlinePolicy>,
    /// How many candidates are wanted; 5 where left out.
    #[schema(required = false, nullable = false, minimum = 1, maximum = 50, example = 3)]
    pub limit: Option<u32>,
    /// What is assumed of parts that are not chosen yet, where it is to differ from the usual.
    #[schema(required = false, nullable = false)]
    pub assume: Option<DesignAssume>,
}

/// What the rails must do.
#[derive(Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct DesignNeed {
    /// One rail, or two for a split bridge: positive first.
    #[schema(min_items = 1, max_items = 2)]
    pub rails: Vec<RailNeed>,
    /// Circuits to consider; all that fit where left out.
    #[schema(required = false, max_items = 8)]
    pub circuits: Vec<form::Circuit>,
}

/// What one rail must do, at every end of every band.
#[derive(Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct RailNeed {
    /// Lowest instantaneous voltage allowed.
    pub valley_min: Voltage,
    /// Highest instantaneous voltage allowed; no bound where left out.
    #[schema(required = false, nullable = false)]
    pub crest_max: Option<Voltage>,
    /// Largest ripple allowed, peak to peak; no bound where left out.
    #[schema(required = false, nullable = false)]
    pub ripple_pp_max: Option<Voltage>,
    /// What the rail feeds.
    pub load: form::Load,
}

/// Where parts come from.
#[derive(Serialize, ToSchema)]
#[serde(rename_all = "lowercase")]
#[schema(example = "values")]
pub enum ChooseFrom {
    /// Preferred values of standards.
    Values,
}

/// What to rank by.
#[derive(Serialize, ToSchema)]
#[serde(rename_all = "lowercase")]
#[schema(example = "volume")]
pub enum DesignMinimise {
    /// An estimate of the volume of transformer and capacitors.
    Volume,
    /// The largest total loss over all corners.
    Loss,
}

/// Assumptions of a design.
#[derive(Clone, Debug, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct DesignAssume {
    /// Regulation of transformers against their rating, ratings rising: straight lines on logarithmic axes between the points, level
    /// beyond them. One point is a fixed regulation.
    #[schema(required = false, max_items = 50)]
    pub regulation: Vec<RegulationPoint>,
    /// The straight line of the diodes; ratings are chosen, not taken from here.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub diode: Option<form::Diode>,
    /// Tolerance of capacitors, either way.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub capacitance_tolerance: Option<Ratio>,
    /// Loss factor of capacitors at the ripple frequency.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub loss_factor: Option<Ratio>,
}

/// One point of the relation between rating and regulation.
#[derive(Clone, Debug, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct RegulationPoint {
    /// Volt-amperes.
    pub rating: ApparentPower,
    /// Percent.
    pub regulation: Ratio,
}

/// One requirement on a part, and the preferred value that meets it.
#[derive(Serialize, ToSchema)]
pub struct Pick {
    /// JSON Pointer of the component inside the supply; `/line` for the fuse.
    #[schema(example = "/outputs/0/rectifier/diode")]
    pub component: String,
    /// What is required.
    #[schema(example = "reverse_voltage")]
    pub quantity: String,
    /// The stress at the worst corner, in `unit`; null where nothing bounds it.
    #[schema(example = 28.4, required = true)]
    pub stress: Option<f64>,
    /// Fraction of the rating that is allowed.
    #[schema(example = 0.7)]
    pub factor: f64,
    /// The least that will do, in `unit`: stress over factor; null where nothing bounds it.
    #[schema(example = 40.6, required = true)]
    pub required: Option<f64>,
    /// The preferred value, in `unit`; null where the quantity has no preferred values.
    #[schema(example = 50.0, required = true)]
    pub chosen: Option<f64>,
    /// Unit of all of them; 1 for a fraction.
    #[schema(example = "V")]
    pub unit: String,
    /// The corner that asks for it.
    pub at: Ends,
    /// Where the preferred values or the requirement come from.
    #[schema(example = "preferred reverse voltages, common practice")]
    pub source: String,
}

/// A supply that holds at every end of every band.
#[derive(Serialize, ToSchema)]
pub struct DesignCandidate {
    /// The supply, its parts rated.
    pub supply: form::Supply,
    /// What each part must bear, and the preferred value chosen.
    pub picks: Vec<Pick>,
    /// Extremes of the figures that a design review asks for.
    pub worst_case: Vec<FigureRange>,
    /// The policy's checks.
    pub checks: Vec<Check>,
    /// What they amount to.
    pub verdict: WholeVerdict,
    /// What was minimised: cubic centimetres or watts; the smaller the better.
    #[schema(example = 310.0)]
    pub score: f64,
}

/// How near the nearest rejected supply came.
#[derive(Serialize, ToSchema)]
pub struct NearestMiss {
    /// Its circuit.
    pub circuit: form::Circuit,
    /// Its capacitance.
    pub capacitance: Capacitance,
    /// What it reached, in `unit`.
    #[schema(example = 36.1)]
    pub value: f64,
    /// What was required, in `unit`.
    #[schema(example = 35.0)]
    pub limit: f64,
    /// Unit of both.
    #[schema(example = "V")]
    pub unit: String,
}

/// Supplies that were rejected for one reason.
#[derive(Serialize, ToSchema)]
pub struct Rejection {
    /// What stood in the way: a requirement by its name, or a sentence.
    #[schema(example = "crest_max")]
    pub reason: String,
    /// How many.
    #[schema(example = 4)]
    pub count: u64,
    /// The nearest of them, where there is a measure.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub nearest: Option<NearestMiss>,
}

/// Supplies that hold, the best first.
#[derive(Serialize, ToSchema)]
pub struct DesignAnswer {
    /// The best, the best first; none where nothing holds.
    pub candidates: Vec<DesignCandidate>,
    /// Supplies considered: circuits times preferred capacitances.
    #[schema(example = 16)]
    pub considered: u64,
    /// Why the others fell away.
    pub rejected: Vec<Rejection>,
    /// Whether everything was considered that the search covers.
    #[schema(example = true)]
    pub complete: bool,
    /// What was minimised, in words.
    #[schema(example = "volume of transformer and capacitors in cubic centimetres, estimated")]
    pub score: String,
    /// The policy whose factors the ratings were chosen by.
    pub policy: PolicyAnswer,
    /// What was assumed of parts that are not chosen yet.
    pub assumed: DesignAssume,
    /// What the model and the assumptions leave out.
    pub assumptions: Vec<String>,
    /// What to beware of.
    pub cautions: Vec<String>,
}

/// Design
///
/// From a need to supplies in preferred values: for every circuit and preferred capacitance the transformer that just holds the valley at
/// the worst corner, and preferred ratings for every part, each with the corner that asks for it.
#[utoipa::path(
    post, path = "/v1/design", operation_id = "designSupply", tag = "supply",
    request_body(content = DesignRequest, description = "What a supply must do.", example = json!(examples::need())),
    responses((status = 200, description = "Supplies that hold, and why others do not.", body = DesignAnswer), BodyErrors)
)]
async fn design(State(state): State<AppState>, body: Body) -> Result<axum::Json<DesignAnswer>, Problem> {
    let (need, policy) = read::read(&body.0).map_err(Problem::faulty)?;
    let designed = state.app.design(need, policy).await?;
    Ok(axum::Json(answer(&designed)))
}

fn answer(designed: &Designed) -> DesignAnswer {
    let (need, outcome) = (&designed.need, &designed.outcome);
    let mut assumptions = answer::assumptions();
    assumptions.push("The regulation of a transformer follows from its rating by the relation under assumed; small mains transformers, common practice.".to_owned());
    assumptions.push("Transformers have no leakage inductance and no core loss in the search; both lower the rail a little: confirm the chosen part by an operating point.".to_owned());
    let mut cautions = answer::cautions();
    cautions.push("Ratings hold for the corners of the bands given; switch-on and line transients ask for more: a surge current stands under picks.".to_owned());
    cautions.extend(
        designed
            .policy
            .omitted
            .iter()
            .map(|text| format!("Not checked: {text}.")),
    );
    DesignAnswer {
        candidates: outcome.candidates.iter().map(candidate).collect(),
        considered: outcome.considered as u64,
        rejected: outcome.rejected.iter().map(rejection).collect(),
        complete: outcome.complete,
        score: match need.minimise {
            Minimise::Volume => {
                "volume of transformer and capacitors in cubic centimetres, estimated for ranking alone"
            }
            Minimise::Loss => "largest total loss over all corners in watts",
        }
        .to_owned(),
        policy: PolicyAnswer::from(&designed.policy),
        assumed: assumed(need),
        assumptions,
        cautions,
    }
}

fn assumed(need: &crate::design::Need) -> DesignAssume {
    let assumptions = &need.assumptions;
    let mut diode = describe::diode(&assumptions.diode);
    diode.ratings = None;
    DesignAssume {
        regulation: assumptions
            .regulation
            .iter()
            .map(|point| RegulationPoint {
                rating: ApparentPower::exactly(point.rating),
                regulation: Ratio::exactly(point.regulation),
            })
            .collect(),
        diode: Some(diode),
        capacitance_tolerance: Some(Ratio::exactly(assumptions.capacitance_tolerance)),
        loss_factor: Some(Ratio::exactly(assumptions.loss_factor)),
    }
}

fn rejection(rejection: &crate::design::Rejection) -> Rejection {
    Rejection {
        reason: rejection.reason.clone(),
        count: rejection.count as u64,
        nearest: rejection.nearest.as_ref().map(|miss| NearestMiss {
            circuit: describe::circuit(miss.circuit),
            capacitance: Capacitance::exactly(miss.capacitance),
            value: miss.value,
            limit: miss.limit,
            unit: miss.unit.to_owned(),
        }),
    }
}

/// Figures that a design review asks for.
fn reviewed(pointer: &str) -> bool {
    pointer.contains("/voltage/")
        || pointer.contains("_peak")
        || pointer.ends_with("current_rms")
        || pointer == "/losses/total"
}

fn candidate(candidate: &Candidate) -> DesignCandidate {
    let finite = |value: f64| Some(value).filter(|v| v.is_finite());
    let rows = candidate.pointers.iter().zip(&candidate.worst_case.ranges);
    DesignCandidate {
        supply: describe::describe(&candidate.supply),
        picks: candidate
            .picks
            .iter()
            .map(|pick| Pick {
                component: pick.component.clone(),
                quantity: pick.quantity.to_owned(),
                stress: finite(pick.stress),
                factor: pick.factor,
                required: finite(pick.required),
                chosen: pick.chosen,
                unit: pick.unit.to_owned(),
                at: answer::ends(&pick.at),
                source: pick.source.to_owned(),
            })
            .collect(),
        worst_case: rows
            .filter(|((pointer, _), _)| reviewed(pointer))
            .map(|((pointer, unit), range)| answer::range(pointer, unit, range))
            .collect(),
        checks: candidate.checks.iter().map(Check::from).collect(),
        verdict: candidate.verdict.into(),
        score: candidate.score,
    }
}
