//! `GET /v1/policies`, `GET /v1/policies/{name}`, and policies in requests.

use super::AppState;
use super::problem::{Kind, PlainErrors, Problem};
use crate::description::fields::{Fields, Place};
use crate::description::quantities::Ratio;
use crate::description::read_each;
use crate::policy::{self, PUBLISHED, Quantity, published};
use crate::quantity::Dimension;
use axum::extract::Path;
use serde::Serialize;
use std::borrow::Cow;
use utoipa::ToSchema;
use utoipa_axum::router::OpenApiRouter;
use utoipa_axum::routes;

/// Most rules of one policy.
const RULES_MAXIMUM: usize = 100;
/// Largest factor: a rule that allows more than the rating is a slip.
const FACTOR_MAXIMUM: f64 = 1.0;
/// Most characters of a name or a source.
const TEXT_MAXIMUM: usize = 300;

/// The resource's routes.
pub(super) fn router() -> OpenApiRouter<AppState> {
    OpenApiRouter::new().routes(routes!(list)).routes(routes!(one))
}

/// A derating rule: the stress may be at most `factor` times the rating.
#[derive(Clone, Debug, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Rule {
    /// Kind of component: `diode`, `capacitor` or `transformer`.
    #[schema(example = "diode", pattern = "^(?:diode|capacitor|transformer)$")]
    pub component: String,
    /// Which of its quantities. Diode: `reverse_voltage`, `current_mean`, `current_rms`, `current_surge`; capacitor: `voltage`,
    /// `ripple_current`; transformer: `apparent_power`.
    #[schema(
        example = "reverse_voltage",
        pattern = "^(?:reverse_voltage|current_mean|current_rms|current_surge|voltage|ripple_current|apparent_power)$"
    )]
    pub quantity: String,
    /// Percent of the rating that is allowed.
    pub factor: Ratio,
    /// Document and clause.
    #[schema(example = "MIL-STD-975M Appendix A, 3.4: PIV 0.70", max_length = 300)]
    pub source: String,
}

/// A policy: rules with their sources, and what its document rules that is not checked.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct PolicyAnswer {
    /// The name to ask for it by.
    #[schema(example = "mil-std-975m")]
    pub name: String,
    /// What it is.
    #[schema(example = "NASA standard parts derating, rectifier diodes")]
    pub title: String,
    /// The document behind it.
    #[schema(example = "MIL-STD-975M (NASA), Appendix A, 5 August 1994")]
    pub source: String,
    /// The rules.
    pub rules: Vec<Rule>,
    /// What the document also rules and this service does not check.
    pub omitted: Vec<String>,
}

impl From<&policy::Policy> for PolicyAnswer {
    fn from(policy: &policy::Policy) -> Self {
        let rules = policy.rules.iter().map(|rule| Rule {
            component: rule.quantity.component().to_owned(),
            quantity: rule.quantity.name().to_owned(),
            factor: Ratio::exactly(rule.factor),
            source: rule.source.clone().into_owned(),
        });
        Self {
            name: policy.name.clone().into_owned(),
            title: policy.title.clone().into_owned(),
            source: policy.source.clone().into_owned(),
            rules: rules.collect(),
            omitted: policy.omitted.iter().map(|text| text.clone().into_owned()).collect(),
        }
    }
}

/// The published policies.
#[derive(Serialize, ToSchema)]
pub struct PolicyList {
    /// One a policy.
    pub policies: Vec<PolicyAnswer>,
}

/// Policies
///
/// Every published policy with its rules and their sources.
#[utoipa::path(
    get, path = "/v1/policies", operation_id = "listPolicies", tag = "reference",
    responses(
        (status = 200, description = "All policies.", body = PolicyList, example = json!({"policies": []})),
        PlainErrors,
    )
)]
async fn list() -> axum::Json<PolicyList> {
    let policies = PUBLISHED
        .iter()
        .filter_map(|name| published(name))
        .map(|p| PolicyAnswer::from(&p));
    axum::Json(PolicyList {
        policies: policies.collect(),
    })
}

/// Policy
///
/// One published policy.
#[utoipa::path(
    get, path = "/v1/policies/{name}", operation_id = "getPolicy", tag = "reference",
    params(("name" = String, Path, description = "Name of the policy.", example = "mil-std-975m")),
    responses(
        (status = 200, description = "The policy.", body = PolicyAnswer,
         example = json!({"name": "mil-std-975m", "title": "NASA standard parts derating", "source": "MIL-STD-975M", "rules": [], "omitted": []})),
        (status = 404, description = "There is no policy of that name.", body = Problem, content_type = "application/problem+json"),
        PlainErrors,
    )
)]
async fn one(Path(name): Path<String>) -> Result<axum::Json<PolicyAnswer>, Problem> {
    published(&name)
        .map(|policy| axum::Json(PolicyAnswer::from(&policy)))
        .ok_or_else(|| {
            Problem::new(
                Kind::NOT_FOUND,
                "there is no policy of that name; /v1/policies lists them",
            )
        })
}

/// A policy of one's own.
#[derive(Clone, Debug, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct InlinePolicy {
    /// A name for the answer; `inline` where left out.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, example = "house-rules", max_length = 300)]
    pub name: Option<String>,
    /// The rules.
    #[schema(min_items = 1, max_items = 100)]
    pub rules: Vec<Rule>,
}

/// Reads the name of a published policy.
pub(super) fn named(place: &Place<'_>) -> Option<policy::Policy> {
    let found = published(place.text()?);
    if found.is_none() {
        place.fault(format!(
            "must be one of {}, or give inline_policy",
            PUBLISHED.join(", ")
        ));
    }
    found
}

/// Reads a policy of the request's own.
pub(super) fn inline(place: &Place<'_>) -> Option<policy::Policy> {
    let mut f = place.object()?;
    let name = match f.optional("name") {
        None => Some("inline".to_owned()),
        Some(place) => short(&place),
    };
    let rules = f.required("rules").and_then(|place| rules(&place));
    f.finish("a policy");
    Some(policy::Policy {
        name: Cow::Owned(name?),
        title: Cow::Borrowed("Policy of the request"),
        source: Cow::Borrowed("the request"),
        rules: rules?,
        omitted: Vec::new(),
    })
}

fn short(place: &Place<'_>) -> Option<String> {
    let text = place.text()?;
    if text.chars().count() > TEXT_MAXIMUM {
        place.fault(format!("must be at most {TEXT_MAXIMUM} characters"));
        return None;
    }
    Some(text.to_owned())
}

fn rules(place: &Place<'_>) -> Option<Vec<policy::Rule>> {
    let count = place.list()?.len();
    if count == 0 || count > RULES_MAXIMUM {
        place.fault(format!("between 1 and {RULES_MAXIMUM} rules are taken"));
        return None;
    }
    read_each(place, rule)
}

fn rule(place: &Place<'_>) -> Option<policy::Rule> {
    let mut f = place.object()?;
    let component = f
        .required("component")
        .and_then(|p| p.word(&["diode", "capacitor", "transformer"]));
    let quantity = f.required("quantity");
    let factor = f.required("factor").and_then(|p| factor(&p));
    let source = f.required("source").and_then(|p| short(&p));
    f.finish("a rule");
    let component = component?;
    let words: Vec<&'static str> = Quantity::ALL
        .iter()
        .filter(|q| q.component() == component)
        .map(|q| q.name())
        .collect();
    let word = quantity?.word(&words)?;
    let quantity = Quantity::ALL
        .into_iter()
        .find(|q| q.component() == component && q.name() == word)?;
    Some(policy::Rule {
        quantity,
        factor: factor?,
        source: Cow::Owned(source?),
    })
}

fn factor(place: &Place<'_>) -> Option<f64> {
    let value = place.quantity(Dimension::Ratio)?;
    if value > 0.0 && value <= FACTOR_MAXIMUM {
        return Some(value);
    }
    place.fault("must be more than 0 % and at most 100 % of the rating");
    None
}

/// Reads `policy` or `inline_policy` of a request; exactly one of them.
pub(super) fn either(f: &mut Fields<'_>) -> Option<policy::Policy> {
    match (f.optional("policy"), f.optional("inline_policy")) {
        (Some(place), None) => named(&place),
        (None, Some(place)) => inline(&place),
        (Some(_), Some(place)) => {
            place.fault("goes in place of policy, not beside it");
            None
        }
        (None, None) => {
            f.fault_at("policy", "is missing: give policy or inline_policy");
            None
        }
    }
}
