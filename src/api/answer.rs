//! Shapes that several answers share: figures, ends, checks.

use crate::figures as plain;
use crate::policy;
use crate::quantity::write_quantity;
use crate::worst_case::{Attained, Chosen};
use serde::Serialize;
use std::borrow::Cow;
use std::collections::BTreeMap;
use utoipa::openapi::RefOr;
use utoipa::openapi::schema::{ObjectBuilder, Schema, SchemaType, Type};
use utoipa::{PartialSchema, ToSchema};

/// What every answer says: results do not replace people.
pub(super) const CAUTIONS: [&str; 3] = [
    "Mains voltage and charged capacitors can kill. Work on a mains circuit only if you are licensed to, and discharge capacitors first.",
    "Results are calculations; they do not replace local codes, type tests or a licensed person.",
    "Parts vary beyond their bands, and line transients are not part of the model: confirm on the bench.",
];

/// What the model leaves out, in every answer.
pub(super) const ASSUMPTIONS: [&str; 8] = [
    "Diodes follow the straight line of IEC 60747-2: open below V(TO), r_T above it; no reverse current, no recovery, no capacitance.",
    "Capacitors are a capacitance with a series resistance that do not change with frequency, voltage or temperature; no leakage.",
    "Chokes and windings do not saturate; the transformer draws no magnetising current and passes direct current.",
    "Every value holds at the temperature it was given for; heat is not solved.",
    "Figures are of the periodic steady state; line transients, dips and imbalance are not part of it.",
    "A string of open diodes divides its reverse voltage equally.",
    "A current load draws its current as long as its rail is above zero.",
    "The capacitors of a rail without any load leak a hundred-billionth of their reactive current, which settles them at the crest.",
];

pub(super) fn cautions() -> Vec<String> {
    CAUTIONS.map(str::to_owned).to_vec()
}

pub(super) fn assumptions() -> Vec<String> {
    ASSUMPTIONS.map(str::to_owned).to_vec()
}

/// Voltage of a rail at its load, in volts; both rails of a split rectifier are positive numbers.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct RailVoltage {
    /// Mean, volts.
    #[schema(example = 22.01)]
    pub mean: f64,
    /// Lowest instantaneous value, volts.
    #[schema(example = 21.2)]
    pub valley: f64,
    /// Highest instantaneous value, volts.
    #[schema(example = 22.8)]
    pub crest: f64,
    /// Crest less valley, volts.
    #[schema(example = 1.6)]
    pub ripple_pp: f64,
    /// Rms of the alternating part, volts.
    #[schema(example = 0.46)]
    pub ripple_rms: f64,
}

/// Current of a load, in amperes.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct RailCurrent {
    /// Mean, amperes.
    #[schema(example = 1.2)]
    pub mean: f64,
    /// Rms, amperes.
    #[schema(example = 1.2)]
    pub rms: f64,
}

/// A rail.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct RailFigures {
    /// At the load, volts.
    pub voltage: RailVoltage,
    /// Into the load, amperes.
    pub current: RailCurrent,
    /// Mean power into the load, watts.
    #[schema(example = 26.4)]
    pub power: f64,
}

/// A diode.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct DiodeFigures {
    /// Name within its output.
    #[schema(example = "D1")]
    pub name: String,
    /// Mean forward current, amperes.
    #[schema(example = 0.6)]
    pub current_mean: f64,
    /// Rms forward current, amperes.
    #[schema(example = 1.4)]
    pub current_rms: f64,
    /// Largest forward current, amperes.
    #[schema(example = 4.9)]
    pub current_peak: f64,
    /// Largest reverse voltage, a positive number of volts.
    #[schema(example = 24.0)]
    pub reverse_voltage_peak: f64,
    /// Degrees of the cycle with current.
    #[schema(example = 62.0)]
    pub conduction_angle: f64,
    /// Forward loss, watts.
    #[schema(example = 0.5)]
    pub loss: f64,
}

/// A bank of capacitors.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct CapacitorFigures {
    /// Name within its output.
    #[schema(example = "C1")]
    pub name: String,
    /// Largest voltage across the bank, volts.
    #[schema(example = 22.8)]
    pub voltage_peak: f64,
    /// Rms current of the whole bank, amperes.
    #[schema(example = 1.9)]
    pub ripple_current_rms: f64,
    /// Loss of the whole bank, watts.
    #[schema(example = 0.15)]
    pub loss: f64,
}

/// A choke.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct ChokeFigures {
    /// Name within its output.
    #[schema(example = "L1")]
    pub name: String,
    /// Mean current, amperes.
    #[schema(example = 1.2)]
    pub current_mean: f64,
    /// Rms current, amperes.
    #[schema(example = 1.21)]
    pub current_rms: f64,
    /// Largest current, amperes.
    #[schema(example = 1.5)]
    pub current_peak: f64,
}

/// A winding; of each half where it is tapped; the line itself where there is no transformer.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct WindingFigures {
    /// Rms current, amperes.
    #[schema(example = 2.0)]
    pub current_rms: f64,
    /// Largest current, amperes.
    #[schema(example = 4.9)]
    pub current_peak: f64,
    /// Copper loss of all halves and phases, watts.
    #[schema(example = 0.9)]
    pub copper_loss: f64,
}

/// An output.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct OutputFigures {
    /// Its rails.
    pub rails: Vec<RailFigures>,
    /// Its diodes.
    pub diodes: Vec<DiodeFigures>,
    /// Its capacitors: coupling and stack first, then the filters from the rectifier to the load, rail by rail.
    pub capacitors: Vec<CapacitorFigures>,
    /// Its chokes.
    pub chokes: Vec<ChokeFigures>,
    /// Its winding.
    pub winding: WindingFigures,
}

/// The line: currents of phase 1, powers over all phases.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct LineFigures {
    /// Rms current, amperes.
    #[schema(example = 0.18)]
    pub current_rms: f64,
    /// Largest current, amperes.
    #[schema(example = 0.44)]
    pub current_peak: f64,
    /// Power from the source, watts.
    #[schema(example = 30.1)]
    pub active_power: f64,
    /// Volt-amperes at the source.
    #[schema(example = 41.3)]
    pub apparent_power: f64,
    /// Active over apparent power; 0 where there is no current.
    #[schema(example = 0.73)]
    pub power_factor: f64,
    /// Cosine of the angle between the fundamentals; 0 where there is no current.
    #[schema(example = 0.98)]
    pub displacement_factor: f64,
    /// Rms of all harmonics over the fundamental's, a fraction; 0 where there is no current.
    #[schema(example = 0.89)]
    pub thd: f64,
    /// Rms amperes of orders 1 to 40.
    pub harmonics: Vec<f64>,
}

/// Losses, in watts.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct Losses {
    /// All of them, watts.
    #[schema(example = 3.7)]
    pub total: f64,
    /// In the line's resistance, watts.
    #[schema(example = 0.01)]
    pub line: f64,
    /// In copper and core, watts.
    #[schema(example = 1.3)]
    pub transformer: f64,
    /// In the diodes, watts.
    #[schema(example = 2.0)]
    pub rectifiers: f64,
    /// In the capacitors' loss resistances, watts.
    #[schema(example = 0.15)]
    pub capacitors: f64,
    /// In the series resistances of the filters, watts.
    #[schema(example = 0.0)]
    pub filters: f64,
}

/// Every figure of an operating point.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct Figures {
    /// One an output.
    pub outputs: Vec<OutputFigures>,
    /// The line.
    pub line: LineFigures,
    /// The losses.
    pub losses: Losses,
    /// Power of the loads over power from the line; 0 where no power flows.
    #[schema(example = 0.88)]
    pub efficiency: f64,
}

impl From<&plain::Figures> for Figures {
    fn from(figures: &plain::Figures) -> Self {
        let (line, losses) = (&figures.line, &figures.losses);
        Self {
            outputs: figures.outputs.iter().map(output).collect(),
            line: LineFigures {
                current_rms: line.current_rms,
                current_peak: line.current_peak,
                active_power: line.active_power,
                apparent_power: line.apparent_power,
                power_factor: line.power_factor,
                displacement_factor: line.displacement_factor,
                thd: line.thd,
                harmonics: line.harmonics.clone(),
            },
            losses: Losses {
                total: losses.total,
                line: losses.line,
                transformer: losses.transformer,
                rectifiers: losses.rectifiers,
                capacitors: losses.capacitors,
                filters: losses.filters,
            },
            efficiency: figures.efficiency,
        }
    }
}

fn output(output: &plain::OutputFigures) -> OutputFigures {
    OutputFigures {
        rails: output.rails.iter().map(rail).collect(),
        diodes: output.diodes.iter().map(diode).collect(),
        capacitors: output
            .capacitors
            .iter()
            .map(|c| CapacitorFigures {
                name: c.name.clone(),
                voltage_peak: c.voltage_peak,
                ripple_current_rms: c.ripple_current_rms,
                loss: c.loss,
            })
            .collect(),
        chokes: output
            .chokes
            .iter()
            .map(|c| ChokeFigures {
                name: c.name.clone(),
                current_mean: c.current_mean,
                current_rms: c.current_rms,
                current_peak: c.current_peak,
            })
            .collect(),
        winding: WindingFigures {
            current_rms: output.winding.current_rms,
            current_peak: output.winding.current_peak,
            copper_loss: output.winding.copper_loss,
        },
    }
}

fn rail(rail: &plain::RailFigures) -> RailFigures {
    RailFigures {
        voltage: RailVoltage {
            mean: rail.voltage.mean,
            valley: rail.voltage.valley,
            crest: rail.voltage.crest,
            ripple_pp: rail.voltage.ripple_pp,
            ripple_rms: rail.voltage.ripple_rms,
        },
        current: RailCurrent {
            mean: rail.current.mean,
            rms: rail.current.rms,
        },
        power: rail.power,
    }
}

fn diode(diode: &plain::DiodeFigures) -> DiodeFigures {
    DiodeFigures {
        name: diode.name.clone(),
        current_mean: diode.current_mean,
        current_rms: diode.current_rms,
        current_peak: diode.current_peak,
        reverse_voltage_peak: diode.reverse_voltage_peak,
        conduction_angle: diode.conduction_angle,
        loss: diode.loss,
    }
}

/// For each uncertain quantity, by its JSON Pointer, the end of its band (`low`, `nominal`, `high`) or a value within it.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize)]
pub struct Ends(BTreeMap<String, String>);

impl PartialSchema for Ends {
    fn schema() -> RefOr<Schema> {
        let end = ObjectBuilder::new()
            .schema_type(SchemaType::Type(Type::String))
            .description(Some(
                "`low`, `nominal`, `high`, or a quantity within the band, as text with its unit.",
            ));
        ObjectBuilder::new()
            .schema_type(SchemaType::Type(Type::Object))
            .description(Some(
                "For some quantities, by their JSON Pointer inside the supply, where in the band they stand.",
            ))
            .additional_properties(Some(end))
            .examples([serde_json::json!({"/line/voltage": "high"})])
            .build()
            .into()
    }
}

impl ToSchema for Ends {
    fn name() -> Cow<'static, str> {
        Cow::Borrowed("Ends")
    }
}

/// The ends at which something is attained.
pub(super) fn ends(attained: &[Attained]) -> Ends {
    let ends = attained
        .iter()
        .map(|a| {
            let text = match a.chosen {
                Chosen::End(end) => end.as_str().to_owned(),
                Chosen::Value(value) => write_quantity(value, a.dimension),
            };
            (a.pointer.clone(), text)
        })
        .collect();
    Ends(ends)
}

/// The outcome of one check.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "lowercase")]
#[schema(example = "pass")]
pub enum Verdict {
    /// The stress is within what is allowed.
    Pass,
    /// It is not.
    Fail,
    /// The component has no rating to hold it against.
    Unrated,
}

/// The outcome of all checks together.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "lowercase")]
#[schema(example = "pass")]
pub enum WholeVerdict {
    /// Every check passes.
    Pass,
    /// At least one fails.
    Fail,
    /// None fails, but a rating is missing, or no rule speaks of this supply.
    Incomplete,
}

impl From<policy::Whole> for WholeVerdict {
    fn from(whole: policy::Whole) -> Self {
        match whole {
            policy::Whole::Pass => Self::Pass,
            policy::Whole::Fail => Self::Fail,
            policy::Whole::Incomplete => Self::Incomplete,
        }
    }
}

/// One component's quantity under one rule.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct Check {
    /// JSON Pointer of the component inside the supply.
    #[schema(example = "/outputs/0/rectifier/diode")]
    pub component: String,
    /// Which of its quantities.
    #[schema(example = "reverse_voltage")]
    pub quantity: String,
    /// The worst stress over all ends of all bands, in `unit`; null where nothing bounds it.
    #[schema(example = 28.4, required = true)]
    pub stress: Option<f64>,
    /// Unit of stress, rating and allowed.
    #[schema(example = "V")]
    pub unit: String,
    /// The rating, in `unit`; null where the component has none.
    #[schema(example = 100.0, required = true)]
    pub rating: Option<f64>,
    /// Fraction of the rating that the rule allows.
    #[schema(example = 0.7)]
    pub factor: f64,
    /// Factor times rating, in `unit`; null without a rating.
    #[schema(example = 70.0, required = true)]
    pub allowed: Option<f64>,
    /// Stress over allowed; null where one of them is missing.
    #[schema(example = 0.41, required = true)]
    pub ratio: Option<f64>,
    /// The outcome.
    pub verdict: Verdict,
    /// The ends at which the stress is attained, by JSON Pointer.
    pub at: Ends,
    /// The rule's source.
    #[schema(example = "MIL-STD-975M Appendix A, 3.4: PIV 0.70")]
    pub source: String,
}

impl From<&policy::Check> for Check {
    fn from(check: &policy::Check) -> Self {
        let finite = |value: f64| Some(value).filter(|v| v.is_finite());
        Self {
            component: check.component.clone(),
            quantity: check.quantity.name().to_owned(),
            stress: finite(check.stress),
            unit: check.quantity.unit().to_owned(),
            rating: check.rating,
            factor: check.factor,
            allowed: check.allowed,
            ratio: check.ratio.and_then(finite),
            verdict: match check.verdict {
                policy::Verdict::Pass => Verdict::Pass,
                policy::Verdict::Fail => Verdict::Fail,
                policy::Verdict::Unrated => Verdict::Unrated,
            },
            at: ends(&check.at),
            source: check.source.clone(),
        }
    }
}

/// Lowest, nominal and highest value of one figure over all ends of all bands.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct FigureRange {
    /// JSON Pointer of the figure.
    #[schema(example = "/outputs/0/rails/0/voltage/valley")]
    pub pointer: String,
    /// Its unit; 1 for a fraction.
    #[schema(example = "V")]
    pub unit: String,
    /// Lowest value, in `unit`.
    #[schema(example = 17.3)]
    pub minimum: f64,
    /// Value with every quantity nominal, in `unit`.
    #[schema(example = 21.2)]
    pub nominal: f64,
    /// Highest value, in `unit`.
    #[schema(example = 27.9)]
    pub maximum: f64,
    /// The ends at which the lowest is attained, by JSON Pointer.
    pub at_minimum: Ends,
    /// The ends at which the highest is attained, by JSON Pointer.
    pub at_maximum: Ends,
    /// How both are known.
    pub known_by: KnownBy,
}

/// How an extreme is known.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "lowercase")]
#[schema(example = "monotone")]
pub enum KnownBy {
    /// Every corner was solved, and along every band the figure changes with the same sign at all of them.
    Monotone,
    /// It does not, or the corners were too many: the best point of a search over corners and points inside the bands.
    Searched,
}

/// The range of one figure.
pub(super) fn range(pointer: &str, unit: &str, range: &crate::worst_case::Range) -> FigureRange {
    FigureRange {
        pointer: pointer.to_owned(),
        unit: unit.to_owned(),
        minimum: range.minimum,
        nominal: range.nominal,
        maximum: range.maximum,
        at_minimum: ends(&range.at_minimum),
        at_maximum: ends(&range.at_maximum),
        known_by: match range.known_by {
            crate::worst_case::KnownBy::Monotone => KnownBy::Monotone,
            crate::worst_case::KnownBy::Searched => KnownBy::Searched,
        },
    }
}

/// How the corners were covered.
#[derive(Clone, Debug, Serialize, ToSchema)]
pub struct Coverage {
    /// Corners of the bands; null where they are too many to count.
    #[schema(example = 8, required = true)]
    pub corners: Option<u64>,
    /// Points solved, those inside the bands included.
    #[schema(example = 9)]
    pub solved: u64,
    /// Whether every corner was solved. Where not, the signs of the changes along each band chose the corners.
    #[schema(example = true)]
    pub all_corners: bool,
    /// The same in words.
    #[schema(example = "all 8 corners were solved")]
    pub statement: String,
}

impl From<&crate::worst_case::Extremes> for Coverage {
    fn from(extremes: &crate::worst_case::Extremes) -> Self {
        let corners = extremes.corners.map(|count| count as u64);
        let total = corners.map_or_else(|| "very many".to_owned(), |count| count.to_string());
        Self {
            corners,
            solved: extremes.solved as u64,
            all_corners: extremes.all_corners,
            statement: if extremes.all_corners {
                format!("all {total} corners were solved")
            } else {
                format!(
                    "there are {total} corners; the signs of the changes along each band chose which of them were solved"
                )
            },
        }
    }
}
