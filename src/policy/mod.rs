//! PURE: is it allowed? Rules as data, ratings against stresses, verdicts.
//!
//! A [`Policy`] is a list of [`Rule`]s. A rule names a kind of component and a quantity: which stress is held against which
//! rating, and the fraction of the rating that is allowed. Every component of that kind gets a check; without the rating
//! the check is unrated, and the whole is then never a pass.

mod check;
mod published;
mod subject;

#[cfg(test)]
mod tests;

pub use check::{Check, Verdict, Whole, check};
pub use published::{PUBLISHED, published};
pub use subject::{Quantity, Subject, Worst, subjects};

use std::borrow::Cow;

/// One rule: `stress <= factor * rating`.
#[derive(Clone, Debug, PartialEq)]
pub struct Rule {
    /// Which stress and rating, of which kind of component.
    pub quantity: Quantity,
    /// Fraction of the rating that is allowed.
    pub factor: f64,
    /// Document and clause.
    pub source: Cow<'static, str>,
}

/// A team's or a published set of rules.
#[derive(Clone, Debug, PartialEq)]
pub struct Policy {
    /// The name it is asked for by.
    pub name: Cow<'static, str>,
    /// What it is.
    pub title: Cow<'static, str>,
    /// The document behind it.
    pub source: Cow<'static, str>,
    /// The rules.
    pub rules: Vec<Rule>,
    /// What the document also rules and this service does not check.
    pub omitted: Vec<Cow<'static, str>>,
}
