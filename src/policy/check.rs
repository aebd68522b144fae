//! Stresses held against ratings.

use super::subject::{Quantity, Subject, Worst};
use super::{Policy, Rule};
use crate::worst_case::Attained;

/// A ratio this far above one is rounding: a stress on the limit passes.
const ON_THE_LIMIT: f64 = 1e-12;

/// The outcome of one check.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Verdict {
    /// The stress is within what is allowed.
    Pass,
    /// It is not.
    Fail,
    /// The component has no rating to hold it against.
    Unrated,
}

/// The outcome of all checks together.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Whole {
    /// Every check passes.
    Pass,
    /// At least one fails.
    Fail,
    /// None fails, but a rating is missing, or the policy rules on nothing of this supply.
    Incomplete,
}

/// One component's quantity under one rule.
#[derive(Clone, Debug, PartialEq)]
pub struct Check {
    /// JSON Pointer of the component inside the supply.
    pub component: String,
    /// Which of its quantities.
    pub quantity: Quantity,
    /// The worst stress over all ends of all bands.
    pub stress: f64,
    /// The rating, where it is known.
    pub rating: Option<f64>,
    /// Fraction of the rating that is allowed.
    pub factor: f64,
    /// What is allowed: factor times rating.
    pub allowed: Option<f64>,
    /// Stress over allowed.
    pub ratio: Option<f64>,
    /// The outcome.
    pub verdict: Verdict,
    /// The ends at which the stress is attained.
    pub at: Vec<Attained>,
    /// The rule's source.
    pub source: String,
}

/// Holds every subject that a rule of the policy speaks of against it. `stress` gives a subject's worst stress and where it is
/// attained.
#[must_use]
pub fn check(policy: &Policy, subjects: &[Subject], stress: impl Fn(&Subject) -> Option<Worst>) -> (Vec<Check>, Whole) {
    let mut checks = Vec::new();
    for subject in subjects {
        for rule in policy.rules.iter().filter(|rule| rule.quantity == subject.quantity) {
            if let Some((value, at)) = stress(subject) {
                checks.push(one(rule, subject, value, at));
            }
        }
    }
    let any = |verdict: Verdict| checks.iter().any(|c| c.verdict == verdict);
    let whole = if any(Verdict::Fail) {
        Whole::Fail
    } else if any(Verdict::Unrated) || checks.is_empty() {
        Whole::Incomplete
    } else {
        Whole::Pass
    };
    (checks, whole)
}

fn one(rule: &Rule, subject: &Subject, stress: f64, at: Vec<Attained>) -> Check {
    let allowed = subject.rating.map(|rating| rule.factor * rating);
    let ratio = allowed.map(|allowed| stress / allowed);
    let verdict = match ratio {
        None => Verdict::Unrated,
        Some(ratio) if ratio <= 1.0 + ON_THE_LIMIT => Verdict::Pass,
        Some(_) => Verdict::Fail,
    };
    Check {
        component: subject.component.clone(),
        quantity: subject.quantity,
        stress,
        rating: subject.rating,
        factor: rule.factor,
        allowed,
        ratio,
        verdict,
        at,
        source: rule.source.clone().into_owned(),
    }
}
