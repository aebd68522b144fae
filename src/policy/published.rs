//! Published derating rules, each with its source. They are starting points: the team's own policy decides.

use super::{Policy, Quantity, Rule};
use std::borrow::Cow;

/// A policy as it was published.
struct Document {
    name: &'static str,
    title: &'static str,
    source: &'static str,
    /// Quantity, fraction of the rating, document and clause.
    rules: &'static [(Quantity, f64, &'static str)],
    /// What the document also rules and this service does not check.
    omitted: &'static [&'static str],
}

const DOCUMENTS: [Document; 4] = [
    Document {
        name: "mil-std-975m",
        title: "NASA standard parts derating, rectifier diodes",
        source: "MIL-STD-975M (NASA), Appendix A, 5 August 1994; cancelled 5 May 1998",
        rules: &[
            (
                Quantity::DiodeReverseVoltage,
                0.70,
                "MIL-STD-975M Appendix A, 3.4: PIV 0.70",
            ),
            (
                Quantity::DiodeCurrentMean,
                0.50,
                "MIL-STD-975M Appendix A, 3.4: forward current 0.50",
            ),
            (
                Quantity::DiodeCurrentSurge,
                0.50,
                "MIL-STD-975M Appendix A, 3.4: surge current 0.50",
            ),
        ],
        omitted: &[
            "junction temperature at most 125 degC: heat is not solved yet",
            "capacitors: the appendix rules on ceramic, glass, film and tantalum, not on aluminium electrolytics",
            "transformers and inductors by hot-spot temperature: heat is not solved yet",
        ],
    },
    Document {
        name: "reliability-center-severe",
        title: "Derating sheet of the System Reliability Center, severe environment",
        source: "System Reliability Center (Rome, New York), derating sheet",
        rules: &[
            (
                Quantity::DiodeReverseVoltage,
                0.70,
                "System Reliability Center sheet, power rectifier, severe: reverse voltage 70 %",
            ),
            (
                Quantity::DiodeCurrentMean,
                0.90,
                "System Reliability Center sheet, power rectifier, severe: forward current 90 %",
            ),
            (
                Quantity::CapacitorVoltage,
                0.70,
                "System Reliability Center sheet, aluminium electrolytic, severe: voltage 70 %",
            ),
        ],
        omitted: &[
            "junction temperature at most 95 degC: heat is not solved yet",
            "electrolytics 20 K below their maximum temperature: heat is not solved yet",
        ],
    },
    Document {
        name: "reliability-center-benign",
        title: "Derating sheet of the System Reliability Center, benign environment",
        source: "System Reliability Center (Rome, New York), derating sheet",
        rules: &[
            (
                Quantity::DiodeReverseVoltage,
                0.80,
                "System Reliability Center sheet, power rectifier, benign: reverse voltage 80 %",
            ),
            (
                Quantity::CapacitorVoltage,
                0.80,
                "System Reliability Center sheet, aluminium electrolytic, benign: voltage 80 %",
            ),
        ],
        omitted: &[
            "junction temperature at most 115 degC: heat is not solved yet",
            "electrolytics 20 K below their maximum temperature: heat is not solved yet",
        ],
    },
    Document {
        name: "navy-sd-18-normal-2",
        title: "US Navy part requirements, power rectifier, normal environment, quality level 2",
        source: "SD-18, Table 1A",
        rules: &[
            (
                Quantity::DiodeReverseVoltage,
                0.75,
                "SD-18 Table 1A, power rectifier, normal, level 2: VR 75 %",
            ),
            (
                Quantity::DiodeCurrentMean,
                0.85,
                "SD-18 Table 1A, power rectifier, normal, level 2: IF 85 %",
            ),
        ],
        omitted: &[
            "junction temperature at most 85 degC: heat is not solved yet",
            "the table was read from flattened text; its columns are this service's reading",
        ],
    },
];

/// Names of the published policies.
pub const PUBLISHED: [&str; DOCUMENTS.len()] = [
    DOCUMENTS[0].name,
    DOCUMENTS[1].name,
    DOCUMENTS[2].name,
    DOCUMENTS[3].name,
];

/// The published policy of a name.
#[must_use]
pub fn published(name: &str) -> Option<Policy> {
    let document = DOCUMENTS.iter().find(|document| document.name == name)?;
    let rules = document.rules.iter().map(|&(quantity, factor, source)| Rule {
        quantity,
        factor,
        source: Cow::Borrowed(source),
    });
    Some(Policy {
        name: Cow::Borrowed(document.name),
        title: Cow::Borrowed(document.title),
        source: Cow::Borrowed(document.source),
        rules: rules.collect(),
        omitted: document.omitted.iter().map(|text| Cow::Borrowed(*text)).collect(),
    })
}
