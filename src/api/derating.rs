//! `POST /v1/derating`.

use super::AppState;
use super::answer::{self, Check, Coverage, WholeVerdict};
use super::examples;
use super::extract::Body;
use super::policies::{self, InlinePolicy, PolicyAnswer};
use super::problem::{BodyErrors, Problem};
use super::worst_case::banded;
use crate::description::fields::{Faults, Place};
use crate::description::{form, json::Json};
use crate::policy::Policy;
use crate::supply::{Fault, Supply};
use axum::extract::State;
use serde::Serialize;
use utoipa::ToSchema;
use utoipa_axum::router::OpenApiRouter;
use utoipa_axum::routes;

/// The resource's routes.
pub(super) fn router() -> OpenApiRouter<AppState> {
    OpenApiRouter::new().routes(routes!(derating))
}

/// A supply, and the policy to hold it against: a published one by name, or one of your own; exactly one of them.
#[derive(Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct DeratingRequest {
    /// The supply; ratings stand under `ratings` of each component.
    pub supply: form::Supply,
    /// Name of a published policy; `/v1/policies` lists them.
    #[schema(required = false, nullable = false, example = "mil-std-975m")]
    pub policy: Option<String>,
    /// Rules of your own.
    #[schema(required = false, nullable = false)]
    pub inline_policy: Option<InlinePolicy>,
}

/// The policy's checks and what they amount to.
#[derive(Serialize, ToSchema)]
pub struct DeratingAnswer {
    /// One a component, quantity and rule.
    pub checks: Vec<Check>,
    /// What they amount to: never `pass` while a rating is missing.
    pub verdict: WholeVerdict,
    /// The policy, with what it rules and this service does not check.
    pub policy: PolicyAnswer,
    /// How the corners were covered.
    pub coverage: Coverage,
    /// What the model leaves out.
    pub assumptions: Vec<String>,
    /// What to beware of.
    pub cautions: Vec<String>,
}

/// Derating
///
/// Holds the worst stress of every component, over every end of every band, against a policy's fraction of its rating.
#[utoipa::path(
    post, path = "/v1/derating", operation_id = "checkDerating", tag = "supply",
    request_body(
        content = DeratingRequest, description = "A supply and a policy.",
        example = json!({"supply": examples::supply(), "policy": "mil-std-975m"})
    ),
    responses((status = 200, description = "The checks.", body = DeratingAnswer), BodyErrors)
)]
async fn derating(State(state): State<AppState>, body: Body) -> Result<axum::Json<DeratingAnswer>, Problem> {
    let (supply, policy) = read(&body.0, state.app.limits.bands_maximum).map_err(Problem::faulty)?;
    let derated = state.app.derating(supply, policy).await?;
    let mut cautions = answer::cautions();
    cautions.extend(
        derated
            .policy
            .omitted
            .iter()
            .map(|text| format!("Not checked: {text}.")),
    );
    Ok(axum::Json(DeratingAnswer {
        checks: derated.checks.iter().map(Check::from).collect(),
        verdict: derated.verdict.into(),
        policy: PolicyAnswer::from(&derated.policy),
        coverage: Coverage::from(&derated.extremes),
        assumptions: answer::assumptions(),
        cautions,
    }))
}

fn read(json: &Json, bands_maximum: usize) -> Result<(Supply, Policy), Vec<Fault>> {
    let faults = Faults::default();
    let request = Place::new(json, "", &faults).object().and_then(|mut f| {
        let supply = f
            .required("supply")
            .and_then(|place| banded(&place, bands_maximum, &faults));
        let policy = policies::either(&mut f);
        f.finish("this request");
        Some((supply?, policy?))
    });
    faults.settle(request)
}
