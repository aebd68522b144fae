//! The published form of a supply: the shape of requests, answers and stored records.
//!
//! These types are written out and documented; reading goes through [`super::read`], which finds every fault.

mod load;

pub use load::{Load, LoadKind};

use super::quantities::{
    Angle, ApparentPower, Capacitance, Current, Frequency, Inductance, Life, Power, Ratio, Resistance, Temperature,
    Voltage,
};
use serde::Serialize;
use utoipa::ToSchema;

/// A mains input stage: line, transformer, outputs, surroundings.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Supply {
    /// A name for people; no meaning for the computation.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, max_length = 200, example = "Kiln controller, 24 V rail")]
    pub name: Option<String>,
    /// The mains as the supply sees it.
    pub line: Line,
    /// Left out: the rectifier sits on the line itself.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub transformer: Option<Transformer>,
    /// Windings with their rectifiers and rails.
    #[schema(min_items = 1, max_items = 8)]
    pub outputs: Vec<Output>,
    /// Where the supply lives; 25 degC where left out.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub surroundings: Option<Surroundings>,
}

/// The mains: `sqrt(2) V (sin(w t) + sum of harmonics)` behind a resistance and an inductance.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Line {
    /// Rms volts of the fundamental; line to line when `phases` is 3.
    pub voltage: Voltage,
    /// Hertz.
    pub frequency: Frequency,
    /// 1 or 3; 1 where left out.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, minimum = 1, maximum = 3, example = 1)]
    pub phases: Option<u32>,
    /// Ohms per phase; 0 where left out.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub resistance: Option<Resistance>,
    /// Henries per phase; 0 where left out.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub inductance: Option<Inductance>,
    /// Harmonics of the source; none where left out.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    #[schema(required = false, max_items = 16)]
    pub harmonics: Vec<Harmonic>,
}

/// One harmonic of the line voltage: `fraction * sin(order * w t + phase)` of the fundamental's amplitude.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Harmonic {
    /// Multiple of the line frequency.
    #[schema(minimum = 2, maximum = 50, example = 5)]
    pub order: u32,
    /// Percent of the fundamental.
    pub fraction: Ratio,
    /// Degrees; 0 where left out.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub phase: Option<Angle>,
}

/// A transformer without magnetising current. Its windings are given either by `open_circuit_voltage` and `resistance`, together with
/// `primary_resistance`, or by `rated_voltage` and `rated_current`, together with `regulation`, from which the service derives the
/// resistances: half of the regulation to each side.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Transformer {
    /// Rated volts, rms; line to line when the line has three phases.
    pub primary_voltage: Voltage,
    /// Ohms of the primary's copper; given with `open_circuit_voltage` and `resistance`, left out with `regulation`.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub primary_resistance: Option<Resistance>,
    /// Henries; 0 where left out.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub primary_leakage_inductance: Option<Inductance>,
    /// The secondary windings.
    #[schema(min_items = 1, max_items = 8)]
    pub windings: Vec<Winding>,
    /// Percent: `(open-circuit voltage - rated voltage) / rated voltage`, every winding at its rated current. Given with
    /// `rated_voltage` and `rated_current`.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub regulation: Option<Ratio>,
    /// Volt-amperes.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub rating: Option<ApparentPower>,
    /// Watts at rated primary voltage.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub core_loss: Option<Power>,
}

/// A secondary winding, of each half where it is tapped: either `open_circuit_voltage` with `resistance`, or `rated_voltage` with
/// `rated_current`, the same pair in all windings of a transformer.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Winding {
    /// Rms volts without load, with `primary_voltage` on the primary; line to line for three phases. Goes with `resistance`.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub open_circuit_voltage: Option<Voltage>,
    /// Ohms of copper. Goes with `open_circuit_voltage`.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub resistance: Option<Resistance>,
    /// Rms volts at rated current, with `primary_voltage` on the primary. Goes with `rated_current`.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub rated_voltage: Option<Voltage>,
    /// Rms amperes. Goes with `rated_voltage` and the transformer's `regulation`.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub rated_current: Option<Current>,
    /// Henries; 0 where left out.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub leakage_inductance: Option<Inductance>,
}

/// A winding, its rectifier and the one or two rails behind it.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Output {
    /// Index into the transformer's windings, from 0; 0 where left out, and on the line itself. Outputs on one winding are all with
    /// or all without its tap.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, minimum = 0, maximum = 7, example = 0)]
    pub winding: Option<u32>,
    /// The rectifier on that winding.
    pub rectifier: Rectifier,
    /// One rail, or two for a split bridge: positive first, then negative.
    #[schema(min_items = 1, max_items = 2)]
    pub rails: Vec<Rail>,
}

/// How the diodes are connected.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "kebab-case")]
#[schema(example = "bridge")]
pub enum Circuit {
    /// One diode.
    HalfWave,
    /// Four diodes on one winding.
    Bridge,
    /// Two diodes on a tapped winding.
    CentreTap,
    /// Four diodes on a tapped winding, a rail on either side of the tap.
    SplitBridge,
    /// Two diodes, two column capacitors.
    FullWaveDoubler,
    /// Two diodes, a coupling and a column capacitor.
    HalfWaveDoubler,
    /// Three diodes on three phases, returned to the star point.
    ThreePhaseHalfWave,
    /// Six diodes on three phases.
    ThreePhaseBridge,
}

/// A rectifier circuit with its diodes.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Rectifier {
    /// How the diodes are connected.
    pub circuit: Circuit,
    /// Every diode of the rectifier.
    pub diode: Diode,
    /// Doublers: the column capacitor, each of two in the full-wave one.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub stack: Option<Capacitor>,
    /// Half-wave doubler: the coupling capacitor.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub coupling: Option<Capacitor>,
}

/// A diode by the straight line of IEC 60747-2: above the threshold it conducts `(v - V(TO)) / r_T`, below it nothing.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Diode {
    /// V(TO) in volts.
    pub threshold_voltage: Voltage,
    /// r_T in ohms.
    pub slope_resistance: Resistance,
    /// What one diode bears.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub ratings: Option<DiodeRatings>,
}

/// What one diode bears.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct DiodeRatings {
    /// Repetitive peak reverse voltage V_RRM in volts.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub reverse_voltage: Option<Voltage>,
    /// Mean forward current I_F(AV) in amperes.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub current_mean: Option<Current>,
    /// Rms forward current I_F(RMS) in amperes.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub current_rms: Option<Current>,
    /// Surge current I_FSM in amperes.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub current_surge: Option<Current>,
}

/// A rail: a filter and a load.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Rail {
    /// Sections from the rectifier to the load; none where left out.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    #[schema(required = false, max_items = 6)]
    pub filter: Vec<Section>,
    /// What the rail feeds.
    pub load: Load,
}

/// A section of a filter: a series part, a capacitor behind it, or both.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Section {
    /// In the rail's path, before the capacitor.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub series: Option<Series>,
    /// Across the rail.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub capacitor: Option<Capacitor>,
}

/// A resistance, a choke, or a choke with its resistance.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Series {
    /// Ohms; 0 where left out.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub resistance: Option<Resistance>,
    /// Henries; 0 where left out.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub inductance: Option<Inductance>,
}

/// A bank of equal capacitors in parallel.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Capacitor {
    /// Farads, each.
    pub capacitance: Capacitance,
    /// Equivalent series resistance in ohms, each.
    pub esr: Resistance,
    /// How many in parallel; 1 where left out.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, minimum = 1, maximum = 1000, example = 1)]
    pub count: Option<u32>,
    /// What each bears.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub ratings: Option<CapacitorRatings>,
}

/// What one capacitor bears.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct CapacitorRatings {
    /// Rated voltage in volts.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub voltage: Option<Voltage>,
    /// Rated ripple current in amperes rms at twice the line frequency.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub ripple_current: Option<Current>,
    /// Endurance in hours at rated ripple current and upper category temperature; kept, not yet used.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub endurance: Option<Life>,
    /// Upper category temperature in degrees Celsius; kept, not yet used.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub temperature: Option<Temperature>,
}

/// Where the supply lives.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Surroundings {
    /// Air temperature in degrees Celsius; kept, not yet used. 25 degC where left out.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub ambient: Option<Temperature>,
}
