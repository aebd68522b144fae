//! What a rail feeds.

use crate::quantity::Band;

/// The load of a rail.
#[derive(Clone, Debug, PartialEq)]
pub enum Load {
    /// A resistor.
    Resistance {
        /// Ohms.
        resistance: Band,
    },
    /// Draws its current as long as the rail is above zero.
    Current {
        /// Amperes.
        current: Band,
    },
    /// A linear regulator with the load behind it. With `v` the rail voltage it draws
    /// `quiescent_current + min(output_current, max(0, v - dropout) * output_current / output_voltage)`.
    Regulator {
        /// Regulated voltage in volts.
        output_voltage: Band,
        /// Current drawn at the regulated voltage, in amperes.
        output_current: Band,
        /// Voltage between rail and output below which regulation ends, in volts.
        dropout: Band,
        /// The regulator's own current in amperes, drawn as long as the rail is above zero.
        quiescent_current: Band,
    },
    /// Nothing.
    Open,
}

impl Load {
    /// The name in descriptions.
    #[must_use]
    pub fn kind(&self) -> &'static str {
        match self {
            Self::Resistance { .. } => "resistance",
            Self::Current { .. } => "current",
            Self::Regulator { .. } => "regulator",
            Self::Open => "open",
        }
    }
}
