//! The published description of the API, and its pages.

use super::AppState;
use axum::Router;
use axum::http::header;
use axum::routing::get;
use utoipa::OpenApi;
use utoipa_swagger_ui::{Config, SwaggerUi};

#[derive(OpenApi)]
#[openapi(
    info(
        title = "Mainstay",
        description = "Designs and verifies the mains input stage of a product: line, transformer, rectifier, reservoir and filter, load.\n\n\
            Quantities in requests are text with their unit (`\"4700 uF ±20 %\"`); results are plain numbers in SI base units, temperatures in \
            degrees Celsius, angles in degrees. Inputs and results are addressed by JSON Pointer (RFC 6901). Every error is a problem by RFC 9457.\n\n\
            **Cautions.** Mains voltage and charged capacitors can kill. Results are calculations from a model whose limits each answer states \
            under `assumptions`; they do not replace local codes, type tests or a licensed person.",
        license(name = "MIT OR Apache-2.0", identifier = "MIT OR Apache-2.0"),
        contact(name = "The Mainstay developers"),
    ),
    servers((url = "/", description = "This service")),
    security(()),
    tags(
        (name = "supply", description = "The truth about a supply: operating point, worst case, sweep, derating, design"),
        (name = "reference", description = "Figures and policies with their definitions and sources"),
        (name = "service", description = "The service itself"),
    )
)]
struct Base;

/// The document without its routes.
pub(super) fn base() -> utoipa::openapi::OpenApi {
    Base::openapi()
}

/// The document as it is served and published.
#[must_use]
pub fn text(document: &utoipa::openapi::OpenApi) -> String {
    let mut text = document.to_pretty_json().unwrap_or_default();
    text.push('\n');
    text
}

/// The document and its page, which works without any other host.
pub(super) fn router(document: &utoipa::openapi::OpenApi) -> Router<AppState> {
    let text = text(document);
    let serve = move || {
        let text = text.clone();
        async move { ([(header::CONTENT_TYPE, "application/json")], text) }
    };
    let config = Config::from("/openapi.json").validator_url("none");
    Router::new()
        .route("/openapi.json", get(serve))
        .merge(SwaggerUi::new("/docs").config(config))
}
