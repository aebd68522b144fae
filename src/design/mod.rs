//! PURE: which one to pick? From a need to supplies in preferred values.
//!
//! For every circuit and every preferred capacitance the lowest winding voltage is found that holds the valley at every
//! end of every band; the transformer's resistances follow from its rating by a stated relation, and its rating from the
//! current it then carries. What holds is completed with preferred ratings and ranked; what does not is counted, with the
//! nearest miss.

mod assume;
mod pick;
mod search;
mod size;

#[cfg(test)]
mod tests;

pub use assume::{Assumptions, RegulationPoint};
pub use pick::Pick;
pub use search::{Candidate, Miss, Outcome, Rejection, search};

use crate::supply::{Circuit, Line, Load, Phases, Surroundings};

/// What a rail must do, at every end of every band.
#[derive(Clone, Debug, PartialEq)]
pub struct RailNeed {
    /// Lowest instantaneous voltage allowed, volts.
    pub valley_min: f64,
    /// Highest instantaneous voltage allowed, volts.
    pub crest_max: Option<f64>,
    /// Largest ripple allowed, peak to peak, volts.
    pub ripple_pp_max: Option<f64>,
    /// What the rail feeds.
    pub load: Load,
}

/// What is to be kept small.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Minimise {
    /// An estimate of the volume of transformer and capacitors, in cubic centimetres.
    Volume,
    /// The largest total loss over all corners, in watts.
    Loss,
}

/// What a supply must do.
#[derive(Clone, Debug, PartialEq)]
pub struct Need {
    /// The mains.
    pub line: Line,
    /// Where the supply lives.
    pub surroundings: Surroundings,
    /// One rail, or two of a split bridge.
    pub rails: Vec<RailNeed>,
    /// Circuits to consider.
    pub circuits: Vec<Circuit>,
    /// What is assumed of parts that are not chosen yet.
    pub assumptions: Assumptions,
    /// What to rank by.
    pub minimise: Minimise,
    /// How many candidates are wanted.
    pub limit: usize,
}

/// Circuits that can be designed for a number of phases and rails.
#[must_use]
pub fn designable(phases: Phases, rails: usize) -> &'static [Circuit] {
    match (phases, rails) {
        (Phases::One, 1) => &[Circuit::Bridge, Circuit::CentreTap, Circuit::HalfWave],
        (Phases::One, 2) => &[Circuit::SplitBridge],
        (Phases::Three, 1) => &[Circuit::ThreePhaseBridge, Circuit::ThreePhaseHalfWave],
        _ => &[],
    }
}
