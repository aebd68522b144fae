//! Published derating rules, each with its source. They are starting points: the team's own policy decides.

use super::{Policy, Quantity, Rule};
use std::borrow::Cow;

/// Names of the published policies.
pub const PUBLISHED: [&str; 4] = [
    "mil-std-975m",
    "reliability-center-severe",
    "reliability-center-benign",
    "navy-sd-18-normal-2",
];

type Rows = &'static [(Quantity, f64, &'static str)];

/// The published policy of a name.
#[must_use]
pub fn published(name: &str) -> Option<Policy> {
    let (title, source, rows, omitted): (&'static str, &'static str, Rows, &[&'static str]) = match name {
        "mil-std-975m" => (
            "NASA standard parts derating, rectifier diodes",
            "MIL-STD-975M (NASA), Appendix A, 5 August 1994; cancelled 5 May 1998",
            &[
                (Quantity::DiodeReverseVoltage, 0.70, "MIL-STD-975M Appendix A, 3.4: PIV 0.70"),
                (Quantity::DiodeCurrentMean, 0.50, "MIL-STD-975M Appendix A, 3.4: forward current 0.50"),
                (Quantity::DiodeCurrentSurge, 0.50, "MIL-STD-975M Appendix A, 3.4: surge current 0.50"),
            ],
            &[
                "junction temperature at most 125 degC: heat is not solved yet",
                "capacitors: the appendix rules on ceramic, glass, film and tantalum, not on aluminium electrolytics",
                "transformers and inductors by hot-spot temperature: heat is not solved yet",
            ],
        ),
        "reliability-center-severe" => (
            "Derating sheet of the System Reliability Center, severe environment",
            "System Reliability Center (Rome, New York), derating sheet",
            &[
                (Quantity::DiodeReverseVoltage, 0.70, "System Reliability Center sheet, power rectifier, severe: reverse voltage 70 %"),
                (Quantity::DiodeCurrentMean, 0.90, "System Reliability Center sheet, power rectifier, severe: forward current 90 %"),
                (Quantity::CapacitorVoltage, 0.70, "System Reliability Center sheet, aluminium electrolytic, severe: voltage 70 %"),
            ],
            &[
                "junction temperature at most 95 degC: heat is not solved yet",
                "electrolytics 20 K below their maximum temperature: heat is not solved yet",
            ],
        ),
        "reliability-center-benign" => (
            "Derating sheet of the System Reliability Center, benign environment",
            "System Reliability Center (Rome, New York), derating sheet",
            &[
                (Quantity::DiodeReverseVoltage, 0.80, "System Reliability Center sheet, power rectifier, benign: reverse voltage 80 %"),
                (Quantity::CapacitorVoltage, 0.80, "System Reliability Center sheet, aluminium electrolytic, benign: voltage 80 %"),
            ],
            &[
                "junction temperature at most 115 degC: heat is not solved yet",
                "electrolytics 20 K below their maximum temperature: heat is not solved yet",
            ],
        ),
        "navy-sd-18-normal-2" => (
            "US Navy part requirements, power rectifier, normal environment, quality level 2",
            "SD-18, Table 1A",
            &[
                (Quantity::DiodeReverseVoltage, 0.75, "SD-18 Table 1A, power rectifier, normal, level 2: VR 75 %"),
                (Quantity::DiodeCurrentMean, 0.85, "SD-18 Table 1A, power rectifier, normal, level 2: IF 85 %"),
            ],
            &[
                "junction temperature at most 85 degC: heat is not solved yet",
                "the table was read from flattened text; its columns are this service's reading",
            ],
        ),
        _ => return None,
    };
    let name = PUBLISHED.into_iter().find(|known| *known == name)?;
    Some(Policy {
        name: Cow::Borrowed(name),
        title: Cow::Borrowed(title),
        source: Cow::Borrowed(source),
        rules: rows
            .iter()
            .map(|&(quantity, factor, source)| Rule {
                quantity,
                factor,
                source: Cow::Borrowed(source),
            })
            .collect(),
        omitted: omitted.iter().map(|text| Cow::Borrowed(*text)).collect(),
    })
}
