//! PURE: every range we accept and every bound on our work, each with its reason.
//!
//! A *bound* is what we accept or how much work we do; a *limit* is what a part or a requirement permits.

/// The closed range in which a quantity is accepted, in base units.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Range {
    /// Smallest value other than zero.
    pub minimum: f64,
    /// Largest value.
    pub maximum: f64,
    /// Whether zero itself is accepted.
    pub zero: bool,
}

impl Range {
    /// From `minimum` to `maximum`, zero excluded.
    #[must_use]
    pub const fn positive(minimum: f64, maximum: f64) -> Self {
        Self {
            minimum,
            maximum,
            zero: false,
        }
    }

    /// Zero, or from `minimum` to `maximum`.
    #[must_use]
    pub const fn or_zero(minimum: f64, maximum: f64) -> Self {
        Self {
            minimum,
            maximum,
            zero: true,
        }
    }

    /// Whether `value` is accepted.
    #[must_use]
    pub fn accepts(&self, value: f64) -> bool {
        (self.zero && value == 0.0) || (value >= self.minimum && value <= self.maximum)
    }
}

/// Source and winding voltages: from a fraction of a volt to medium voltage.
pub const VOLTAGE: Range = Range::positive(1e-3, 1e5);
/// Voltages that may vanish: thresholds, dropouts.
pub const VOLTAGE_OR_ZERO: Range = Range::or_zero(1e-9, 1e5);
/// From slow traction supplies to aircraft and tachometer generators.
pub const FREQUENCY: Range = Range::positive(0.1, 1e5);
/// A resistance that must be there: a load.
pub const RESISTANCE: Range = Range::positive(1e-9, 1e12);
/// A resistance that may be absent.
pub const RESISTANCE_OR_ZERO: Range = Range::or_zero(1e-12, 1e9);
/// From stray wiring to laboratory chokes.
pub const INDUCTANCE_OR_ZERO: Range = Range::or_zero(1e-15, 1e6);
/// From stray capacitance to double-layer banks.
pub const CAPACITANCE: Range = Range::positive(1e-15, 1e4);
/// Currents that may vanish.
pub const CURRENT_OR_ZERO: Range = Range::or_zero(1e-15, 1e6);
/// Currents that must be there: ratings.
pub const CURRENT: Range = Range::positive(1e-15, 1e6);
/// Powers that may vanish.
pub const POWER_OR_ZERO: Range = Range::or_zero(1e-12, 1e9);
/// Ratings of apparent power.
pub const APPARENT_POWER: Range = Range::positive(1e-9, 1e9);
/// Regulation: an open-circuit voltage above twice the rated one is not a power transformer.
pub const REGULATION: Range = Range::positive(1e-6, 1.0);
/// A harmonic larger than the fundamental is not a mains.
pub const HARMONIC_FRACTION: Range = Range::or_zero(1e-12, 1.0);
/// Angles in degrees, accepted over two turns either way; a range without a gap around zero is `ANGLE_MAXIMUM`.
pub const ANGLE_MAXIMUM: f64 = 720.0;
/// Lowest temperature accepted, in degrees Celsius: below it no electrolyte works.
pub const TEMPERATURE_MINIMUM: f64 = -100.0;
/// Highest temperature accepted, in degrees Celsius.
pub const TEMPERATURE_MAXIMUM: f64 = 400.0;
/// Rated lives in hours: up to a century.
pub const LIFE: Range = Range::positive(1.0, 1e6);

/// Highest order of a line harmonic: the fiftieth is the last that standards speak of.
pub const HARMONIC_ORDER_MAXIMUM: u32 = 50;
/// Harmonics of the source in one description.
pub const HARMONICS_MAXIMUM: usize = 16;
/// Windings of one transformer.
pub const WINDINGS_MAXIMUM: usize = 8;
/// Outputs of one supply: states and diodes grow with them.
pub const OUTPUTS_MAXIMUM: usize = 8;
/// Sections of one filter.
pub const SECTIONS_MAXIMUM: usize = 6;
/// Capacitors in parallel in one bank.
pub const COUNT_MAXIMUM: u32 = 1000;
/// Characters in a name.
pub const NAME_MAXIMUM: usize = 200;

/// Corners solved one by one; beyond it (more than twelve bands) signs of the derivatives choose.
pub const CORNERS_MAXIMUM: usize = 4096;
/// Newton iterations and marched cycles before a search for the periodic state gives up.
pub const CYCLES_MAXIMUM: usize = 1000;
/// Changes of conduction located in one search for the periodic state: a sound circuit needs a few hundred.
pub const EVENTS_MAXIMUM: usize = 20_000;
/// Changes of conduction in one cycle: a rectifier has a few dozen, a chattering description never ends.
pub const EVENTS_PER_CYCLE_MAXIMUM: usize = 400;
/// Function evaluations spent on bracketing one event.
pub const EVENT_STEPS_MAXIMUM: usize = 20_000;
/// Harmonics of the line current that are reported: orders 1 to 40, as IEC 61000-3-2 does.
pub const LINE_ORDERS: usize = 40;
