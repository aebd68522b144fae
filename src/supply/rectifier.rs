//! The rectifier: which circuit, which diodes, which capacitors belong to it.

use super::filter::Capacitor;
use crate::quantity::Band;

/// How the diodes are connected.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Circuit {
    /// One diode.
    HalfWave,
    /// Four diodes on one winding.
    Bridge,
    /// Two diodes on the two halves of a tapped winding.
    CentreTap,
    /// Four diodes on a tapped winding, one rail on either side of the tap.
    SplitBridge,
    /// Two diodes, two column capacitors; twice the crest.
    FullWaveDoubler,
    /// Two diodes, a coupling and a column capacitor.
    HalfWaveDoubler,
    /// Three diodes from three phases to one rail, returned to the star point.
    ThreePhaseHalfWave,
    /// Six diodes on three phases.
    ThreePhaseBridge,
}

impl Circuit {
    /// Every circuit, in the order of the documentation.
    pub const ALL: [Self; 8] = [
        Self::HalfWave,
        Self::Bridge,
        Self::CentreTap,
        Self::SplitBridge,
        Self::FullWaveDoubler,
        Self::HalfWaveDoubler,
        Self::ThreePhaseHalfWave,
        Self::ThreePhaseBridge,
    ];

    /// The name in descriptions.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            Self::HalfWave => "half-wave",
            Self::Bridge => "bridge",
            Self::CentreTap => "centre-tap",
            Self::SplitBridge => "split-bridge",
            Self::FullWaveDoubler => "full-wave-doubler",
            Self::HalfWaveDoubler => "half-wave-doubler",
            Self::ThreePhaseHalfWave => "three-phase-half-wave",
            Self::ThreePhaseBridge => "three-phase-bridge",
        }
    }

    /// Whether the circuit needs a three-phase line.
    #[must_use]
    pub fn is_three_phase(self) -> bool {
        matches!(self, Self::ThreePhaseHalfWave | Self::ThreePhaseBridge)
    }

    /// Whether the circuit needs a tapped winding, hence a transformer.
    #[must_use]
    pub fn needs_tap(self) -> bool {
        matches!(self, Self::CentreTap | Self::SplitBridge)
    }

    /// How many diodes it has.
    #[must_use]
    pub fn diodes(self) -> usize {
        match self {
            Self::HalfWave => 1,
            Self::CentreTap | Self::FullWaveDoubler | Self::HalfWaveDoubler => 2,
            Self::ThreePhaseHalfWave => 3,
            Self::Bridge | Self::SplitBridge => 4,
            Self::ThreePhaseBridge => 6,
        }
    }

    /// How many rails stand behind it.
    #[must_use]
    pub fn rails(self) -> usize {
        if self == Self::SplitBridge { 2 } else { 1 }
    }
}

/// What one diode bears.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct DiodeRatings {
    /// Repetitive peak reverse voltage V_RRM in volts.
    pub reverse_voltage: Option<Band>,
    /// Mean forward current I_F(AV) in amperes.
    pub current_mean: Option<Band>,
    /// Rms forward current I_F(RMS) in amperes.
    pub current_rms: Option<Band>,
    /// Non-repetitive surge current I_FSM in amperes.
    pub current_surge: Option<Band>,
}

/// The forward characteristic of every diode of a rectifier, and what each bears.
#[derive(Clone, Debug, PartialEq)]
pub struct Diode {
    /// Threshold voltage V_(TO) of IEC 60747-2, in volts.
    pub threshold_voltage: Band,
    /// Slope resistance r_T of IEC 60747-2, in ohms.
    pub slope_resistance: Band,
    /// What one diode bears.
    pub ratings: DiodeRatings,
}

/// A rectifier circuit with its diodes.
#[derive(Clone, Debug, PartialEq)]
pub struct Rectifier {
    /// How the diodes are connected.
    pub circuit: Circuit,
    /// All diodes are of one kind.
    pub diode: Diode,
    /// Column capacitor of a doubler; each of the two in the full-wave one.
    pub stack: Option<Capacitor>,
    /// Coupling capacitor of the half-wave doubler.
    pub coupling: Option<Capacitor>,
}
