//! PURE: what does that mean? From a solution to what an engineer reads, and the list of all figures.

mod catalogue;
mod compute;
mod pointer;
mod waveforms;

#[cfg(test)]
mod tests;

pub use catalogue::{CATALOGUE, Figure};
pub use compute::compute;
pub use waveforms::{Waveforms, waveforms};

/// Voltage of a rail, at its load.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct RailVoltage {
    /// Volts.
    pub mean: f64,
    /// Lowest instantaneous value, volts.
    pub valley: f64,
    /// Highest instantaneous value, volts.
    pub crest: f64,
    /// Crest less valley, volts.
    pub ripple_pp: f64,
    /// Rms of the voltage less its mean, volts.
    pub ripple_rms: f64,
}

/// Current of a load.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct RailCurrent {
    /// Amperes.
    pub mean: f64,
    /// Amperes.
    pub rms: f64,
}

/// A rail.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct RailFigures {
    /// At the load.
    pub voltage: RailVoltage,
    /// Into the load.
    pub current: RailCurrent,
    /// Mean power into the load, watts.
    pub power: f64,
}

/// A diode.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct DiodeFigures {
    /// Name within its output.
    pub name: String,
    /// Amperes.
    pub current_mean: f64,
    /// Amperes.
    pub current_rms: f64,
    /// Amperes.
    pub current_peak: f64,
    /// Largest reverse voltage, a positive number of volts.
    pub reverse_voltage_peak: f64,
    /// Degrees of the cycle with current.
    pub conduction_angle: f64,
    /// Watts.
    pub loss: f64,
}

/// A bank of capacitors.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct CapacitorFigures {
    /// Name within its output.
    pub name: String,
    /// Largest voltage across the bank, volts.
    pub voltage_peak: f64,
    /// Rms current of the whole bank, amperes.
    pub ripple_current_rms: f64,
    /// Watts, whole bank.
    pub loss: f64,
}

/// A choke.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct ChokeFigures {
    /// Name within its output.
    pub name: String,
    /// Amperes.
    pub current_mean: f64,
    /// Amperes.
    pub current_rms: f64,
    /// Amperes.
    pub current_peak: f64,
}

/// A winding of the transformer; of each half where it is tapped, of each phase where there are three.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct WindingFigures {
    /// Amperes.
    pub current_rms: f64,
    /// Amperes.
    pub current_peak: f64,
    /// Watts, all its halves and phases together.
    pub copper_loss: f64,
}

/// An output.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct OutputFigures {
    /// Its rails.
    pub rails: Vec<RailFigures>,
    /// Its diodes.
    pub diodes: Vec<DiodeFigures>,
    /// Its capacitors.
    pub capacitors: Vec<CapacitorFigures>,
    /// Its chokes.
    pub chokes: Vec<ChokeFigures>,
    /// Its winding, or the line itself where there is no transformer.
    pub winding: WindingFigures,
}

/// The line.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct LineFigures {
    /// Amperes, phase 1.
    pub current_rms: f64,
    /// Amperes, phase 1.
    pub current_peak: f64,
    /// Watts, all phases.
    pub active_power: f64,
    /// Volt-amperes, all phases.
    pub apparent_power: f64,
    /// Active over apparent power.
    pub power_factor: f64,
    /// Cosine of the angle between the fundamentals of voltage and current.
    pub displacement_factor: f64,
    /// Rms of all harmonics over that of the fundamental.
    pub thd: f64,
    /// Rms amperes of orders 1 to 40, phase 1.
    pub harmonics: Vec<f64>,
}

/// Losses in watts.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Losses {
    /// All of them.
    pub total: f64,
    /// In the line's resistance.
    pub line: f64,
    /// In copper and core.
    pub transformer: f64,
    /// In the diodes.
    pub rectifiers: f64,
    /// In the capacitors' loss resistances.
    pub capacitors: f64,
    /// In the series resistances of the filters.
    pub filters: f64,
}

/// Every figure of an operating point.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Figures {
    /// One an output.
    pub outputs: Vec<OutputFigures>,
    /// The line.
    pub line: LineFigures,
    /// The losses.
    pub losses: Losses,
    /// Power of the loads over power from the line.
    pub efficiency: f64,
}
