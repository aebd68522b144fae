//! `POST /v1/worst-case`.

use super::AppState;
use super::answer::{self, Coverage, FigureRange};
use super::examples;
use super::extract::Body;
use super::problem::{BodyErrors, Problem};
use crate::description::fields::{Faults, Place};
use crate::description::{form, json::Json, request};
use crate::supply::{Fault, Supply};
use crate::worst_case::circuit_bands;
use axum::extract::State;
use serde::Serialize;
use utoipa::ToSchema;
use utoipa_axum::router::OpenApiRouter;
use utoipa_axum::routes;

/// The resource's routes.
pub(super) fn router() -> OpenApiRouter<AppState> {
    OpenApiRouter::new().routes(routes!(worst_case))
}

/// A supply with its bands.
#[derive(Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct WorstCaseRequest {
    /// The supply.
    pub supply: form::Supply,
}

/// The extremes of every figure.
#[derive(Serialize, ToSchema)]
pub struct WorstCaseAnswer {
    /// One a figure.
    pub figures: Vec<FigureRange>,
    /// How the corners were covered.
    pub coverage: Coverage,
    /// What the model leaves out.
    pub assumptions: Vec<String>,
    /// What to beware of.
    pub cautions: Vec<String>,
}

/// Worst case
///
/// Solves every corner of the bands and returns lowest, nominal and highest value of every figure, with the ends that attain them.
#[utoipa::path(
    post, path = "/v1/worst-case", operation_id = "findWorstCase", tag = "supply",
    request_body(
        content = WorstCaseRequest, description = "A supply with its bands.",
        example = json!({"supply": examples::supply()})
    ),
    responses((status = 200, description = "The extremes of every figure.", body = WorstCaseAnswer), BodyErrors)
)]
async fn worst_case(State(state): State<AppState>, body: Body) -> Result<axum::Json<WorstCaseAnswer>, Problem> {
    let supply = read(&body.0, state.app.limits.bands_maximum).map_err(Problem::faulty)?;
    let found = state.app.worst_case(supply).await?;
    let figures = found.figures.iter().zip(&found.extremes.ranges);
    Ok(axum::Json(WorstCaseAnswer {
        figures: figures
            .map(|((pointer, figure), range)| answer::range(pointer, figure.unit, range))
            .collect(),
        coverage: Coverage::from(&found.extremes),
        assumptions: answer::assumptions(),
        cautions: answer::cautions(),
    }))
}

fn read(json: &Json, bands_maximum: usize) -> Result<Supply, Vec<Fault>> {
    let faults = Faults::default();
    let supply = Place::new(json, "", &faults).object().and_then(|mut f| {
        let supply = f
            .required("supply")
            .and_then(|place| banded(&place, bands_maximum, &faults));
        f.finish("this request");
        supply
    });
    faults.settle(supply)
}

/// Reads a supply with no more uncertain quantities than the bound.
pub(super) fn banded(place: &Place<'_>, maximum: usize, faults: &Faults) -> Option<Supply> {
    let supply = request::supply(place, faults)?;
    let count = circuit_bands(&supply).len();
    if count > maximum {
        place.fault(format!(
            "has {count} uncertain quantities; at most {maximum} are taken (--bands-maximum)"
        ));
        return None;
    }
    Some(supply)
}
