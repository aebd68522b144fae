//! `GET /v1/figures`.

use super::AppState;
use super::problem::PlainErrors;
use crate::figures::CATALOGUE;
use serde::Serialize;
use utoipa::ToSchema;
use utoipa_axum::router::OpenApiRouter;
use utoipa_axum::routes;

/// The resource's routes.
pub(super) fn router() -> OpenApiRouter<AppState> {
    OpenApiRouter::new().routes(routes!(figures))
}

/// One figure's definition.
#[derive(Serialize, ToSchema)]
pub struct FigureDefinition {
    /// JSON Pointer inside the figures; indices are written `{output}`, `{rail}` and so on and count from 0.
    #[schema(example = "/outputs/{output}/rails/{rail}/voltage/valley")]
    pub pointer: String,
    /// Unit of the number; 1 for a fraction.
    #[schema(example = "V")]
    pub unit: String,
    /// What it tells an engineer.
    #[schema(example = "Lowest instantaneous voltage at the load")]
    pub meaning: String,
    /// How it is computed.
    #[schema(example = "minimum of u over one line cycle")]
    pub definition: String,
    /// Where the definition comes from.
    #[schema(example = "IEC 60050-103, mean value of a periodic quantity")]
    pub source: String,
}

/// The list of all figures.
#[derive(Serialize, ToSchema)]
pub struct FigureList {
    /// One a figure.
    pub figures: Vec<FigureDefinition>,
}

/// Figures
///
/// Every figure with its pointer, unit, meaning, definition and source.
#[utoipa::path(
    get, path = "/v1/figures", operation_id = "listFigures", tag = "reference",
    responses(
        (status = 200, description = "All figures.", body = FigureList,
         example = json!({"figures": [{"pointer": "/efficiency", "unit": "1", "meaning": "Efficiency", "definition": "power of all loads over active power", "source": "common practice"}]})),
        PlainErrors,
    )
)]
async fn figures() -> axum::Json<FigureList> {
    let figures = CATALOGUE.iter().map(|figure| FigureDefinition {
        pointer: figure.pointer.to_owned(),
        unit: figure.unit.to_owned(),
        meaning: figure.meaning.to_owned(),
        definition: figure.definition.to_owned(),
        source: figure.source.to_owned(),
    });
    axum::Json(FigureList {
        figures: figures.collect(),
    })
}
