//! Filter sections and the capacitors in them.

use crate::quantity::Band;

/// What one capacitor of a bank bears.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct CapacitorRatings {
    /// Rated voltage in volts.
    pub voltage: Option<Band>,
    /// Rated ripple current in amperes rms, at twice the line frequency, for one capacitor.
    pub ripple_current: Option<Band>,
    /// Endurance in hours at rated ripple current and upper category temperature.
    pub endurance: Option<Band>,
    /// Upper category temperature in degrees Celsius.
    pub temperature: Option<Band>,
}

/// A bank of equal capacitors in parallel.
#[derive(Clone, Debug, PartialEq)]
pub struct Capacitor {
    /// Capacitance of each in farads.
    pub capacitance: Band,
    /// Equivalent series resistance of each in ohms.
    pub esr: Band,
    /// How many in parallel, at least one.
    pub count: u32,
    /// What each bears.
    pub ratings: CapacitorRatings,
}

/// A resistance and a choke in the rail's path.
#[derive(Clone, Debug, PartialEq)]
pub struct Series {
    /// Resistance in ohms, the choke's copper included.
    pub resistance: Band,
    /// Inductance in henries.
    pub inductance: Band,
}

/// One section of a filter: an optional series part, then an optional capacitor across the rail.
#[derive(Clone, Debug, PartialEq)]
pub struct Section {
    /// In the rail's path, before the capacitor.
    pub series: Option<Series>,
    /// Across the rail.
    pub capacitor: Option<Capacitor>,
}
