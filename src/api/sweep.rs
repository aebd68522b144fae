//! `POST /v1/sweep`: a table of operating points, streamed as JSON, CSV or lines of JSON.

mod read;
mod stream;

use super::AppState;
use super::examples;
use super::extract::Body;
use super::negotiate::{self, Known};
use super::problem::{BodyErrors, Kind, Problem};
use crate::description::form;
use axum::extract::State;
use axum::http::HeaderMap;
use axum::response::Response;
use serde::Serialize;
use utoipa::ToSchema;
use utoipa_axum::router::OpenApiRouter;
use utoipa_axum::routes;

/// A representation of the table.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Format {
    /// One JSON object.
    Json,
    /// CSV by RFC 4180.
    Csv,
    /// A JSON text a line.
    Lines,
}

const FORMATS: [Known<Format>; 3] = [
    (Format::Json, "application", "json"),
    (Format::Csv, "text", "csv"),
    (Format::Lines, "application", "x-ndjson"),
];

/// The resource's routes.
pub(super) fn router() -> OpenApiRouter<AppState> {
    OpenApiRouter::new().routes(routes!(sweep))
}

/// A supply, the points to solve, the columns wanted. Give `axes` for a grid, or `random` for draws from every band; exactly one of them.
#[derive(Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct SweepRequest {
    /// The supply; quantities that are not swept stand at their nominal value.
    pub supply: form::Supply,
    /// Axes of a grid; the first varies slowest.
    #[schema(required = false, min_items = 1, max_items = 8)]
    pub axes: Vec<SweepAxis>,
    /// Draws from every band, in place of axes.
    #[schema(required = false, nullable = false)]
    pub random: Option<RandomDraws>,
    /// JSON Pointers: of figures, and of swept quantities of the supply.
    #[schema(min_items = 1, max_items = 256, example = json!(["/outputs/0/rails/0/voltage/valley"]))]
    pub columns: Vec<String>,
}

/// An axis: give `from`, `to`, `points` and perhaps `scale`, or `values`.
#[derive(Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct SweepAxis {
    /// JSON Pointer of a quantity inside the supply.
    #[schema(example = "/line/voltage")]
    pub pointer: String,
    /// First value, as text with its unit.
    #[schema(required = false, nullable = false, example = "207 V")]
    pub from: Option<String>,
    /// Last value, as text with its unit.
    #[schema(required = false, nullable = false, example = "253 V")]
    pub to: Option<String>,
    /// How many values, both ends included.
    #[schema(required = false, nullable = false, minimum = 1, maximum = 1000000, example = 11)]
    pub points: Option<u32>,
    /// Equal steps or equal ratios; `linear` where left out.
    #[schema(required = false, nullable = false)]
    pub scale: Option<SweepScale>,
    /// The values themselves, as text with their unit.
    #[schema(required = false, min_items = 1, max_items = 10000, example = json!(["207 V", "230 V", "253 V"]))]
    pub values: Vec<String>,
}

/// How an axis is divided.
#[derive(Serialize, ToSchema)]
#[serde(rename_all = "lowercase")]
#[schema(example = "linear")]
pub enum SweepScale {
    /// Equal steps.
    Linear,
    /// Equal ratios.
    Log,
}

/// Draws from every band, uniform between its ends.
#[derive(Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct RandomDraws {
    /// How many.
    #[schema(minimum = 1, maximum = 10000000, example = 1000)]
    pub samples: u32,
    /// The seed of the draws: the same seed, the same rows.
    #[schema(minimum = 0, maximum = 4294967295_u32, example = 1)]
    pub seed: u32,
}

/// A column of the table.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct SweepColumn {
    /// JSON Pointer of the figure or the swept quantity.
    #[schema(example = "/outputs/0/rails/0/voltage/valley")]
    pub pointer: String,
    /// Unit of its numbers; 1 for a fraction.
    #[schema(example = "V")]
    pub unit: String,
}

/// The table.
#[derive(Serialize, ToSchema)]
pub struct SweepTable {
    /// The columns.
    pub columns: Vec<SweepColumn>,
    /// One row a point, one number a column; a point without a solution is a row of nulls.
    pub rows: Vec<Vec<Option<f64>>>,
    /// How many points there are.
    #[schema(example = 3)]
    pub points: u64,
    /// How many of them have no solution.
    #[schema(example = 0)]
    pub unsolved: u64,
}

/// Sweep
///
/// Solves many operating points and streams them as a table: as JSON, as CSV (`text/csv`, a header line with units) or as lines of JSON
/// (`application/x-ndjson`, the columns first, one array a row, and at the end a line that counts the points), chosen by `Accept`.
#[utoipa::path(
    post, path = "/v1/sweep", operation_id = "sweepSupply", tag = "supply",
    request_body(
        content = SweepRequest, description = "A supply, the points to solve, the columns wanted.",
        example = json!({
            "supply": examples::supply(),
            "axes": [{"pointer": "/line/voltage", "from": "207 V", "to": "253 V", "points": 3}],
            "columns": ["/line/voltage", "/outputs/0/rails/0/voltage/valley"]
        })
    ),
    responses(
        (status = 200, description = "The table.", content(
            (SweepTable = "application/json"),
            (String = "text/csv"),
            (String = "application/x-ndjson")
        )),
        (status = 406, description = "None of the acceptable representations exists.", body = Problem, content_type = "application/problem+json"),
        BodyErrors
    )
)]
async fn sweep(State(state): State<AppState>, headers: HeaderMap, body: Body) -> Result<Response, Problem> {
    let Some(format) = negotiate::choose(&headers, &FORMATS) else {
        let detail = "a sweep comes as application/json, text/csv or application/x-ndjson";
        return Err(Problem::new(Kind::NOT_ACCEPTABLE, detail));
    };
    let request = read::read(&body.0, state.app.limits).map_err(Problem::faulty)?;
    let request = read::columns(&state, request)?;
    let points = request.plan.points();
    let rows = state.app.sweep(request.plan);
    Ok(stream::response(format, request.columns, points, rows))
}
