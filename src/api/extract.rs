//! Request bodies.

use super::AppState;
use super::problem::{Kind, Problem};
use crate::description::json::{self, Json};
use axum::body::Bytes;
use axum::extract::{FromRequest, Request};
use axum::http::{HeaderMap, header};

/// A JSON body, as a tree.
#[derive(Debug)]
pub struct Body(pub Json);

impl FromRequest<AppState> for Body {
    type Rejection = Problem;

    async fn from_request(request: Request, state: &AppState) -> Result<Self, Problem> {
        accepted(request.headers())?;
        let bytes = read(request, state.app.limits.body_maximum).await?;
        json::read(&bytes)
            .map(Body)
            .map_err(|error| Problem::new(Kind::NOT_JSON, error.to_string()))
    }
}

fn accepted(headers: &HeaderMap) -> Result<(), Problem> {
    let text = |name| headers.get(name).map(|v| v.to_str().unwrap_or("?"));
    let essence = |value: &str| value.split(';').next().unwrap_or("").trim().to_ascii_lowercase();
    match text(header::CONTENT_TYPE).map(essence) {
        Some(kind) if kind == "application/json" || (kind.starts_with("application/") && kind.ends_with("+json")) => {}
        Some(_) => {
            return Err(Problem::new(
                Kind::MEDIA_TYPE,
                "the content type is not application/json",
            ));
        }
        None => {
            return Err(Problem::new(
                Kind::MEDIA_TYPE,
                "there is no Content-Type; send application/json",
            ));
        }
    }
    match text(header::CONTENT_ENCODING) {
        None | Some("identity") => Ok(()),
        Some(_) => Err(Problem::new(Kind::MEDIA_TYPE, "content encodings are not taken")),
    }
}

async fn read(request: Request, maximum: usize) -> Result<Bytes, Problem> {
    use http_body_util::{BodyExt, LengthLimitError, Limited};
    let collected = Limited::new(request.into_body(), maximum).collect().await;
    collected.map(|body| body.to_bytes()).map_err(|error| {
        if error.downcast_ref::<LengthLimitError>().is_some() {
            Problem::new(Kind::TOO_LARGE, format!("at most {maximum} bytes are taken"))
        } else {
            Problem::new(Kind::TIMEOUT, "the body did not arrive whole")
        }
    })
}
