//! The mains as the supply sees it.

use crate::quantity::Band;

/// How many phases the line has.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Phases {
    /// One phase and its return.
    #[default]
    One,
    /// Three phases, each lagging the one before by 120 degrees.
    Three,
}

/// One harmonic of the line voltage.
#[derive(Clone, Debug, PartialEq)]
pub struct Harmonic {
    /// Multiple of the line frequency, 2 or more.
    pub order: u32,
    /// Amplitude as a fraction of the fundamental's.
    pub fraction: Band,
    /// Phase in degrees: the harmonic is `fraction * sin(order * w * t + phase)`.
    pub phase: Band,
}

/// The mains: `sqrt(2) * V * (sin(w t) + sum of harmonics)` behind a resistance and an inductance.
#[derive(Clone, Debug, PartialEq)]
pub struct Line {
    /// Rms voltage of the fundamental in volts; line to line for three phases.
    pub voltage: Band,
    /// Frequency in hertz.
    pub frequency: Band,
    /// One or three.
    pub phases: Phases,
    /// Resistance per phase in ohms.
    pub resistance: Band,
    /// Inductance per phase in henries.
    pub inductance: Band,
    /// Harmonics of the source, none by default.
    pub harmonics: Vec<Harmonic>,
}
