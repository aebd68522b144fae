//! PURE: how does it behave? Propagation, events, periodic state, transients.
//!
//! One method serves every circuit. Between two changes of conduction the network is linear and its solution is written
//! down exactly, as a sum of exponentials and the line's sinusoids ([`flow`]); the first change is bracketed so that none
//! is stepped over ([`crossing`]); the next pattern follows from the complementarity conditions ([`conduction`]); the
//! periodic state is found by shooting with Newton's method on the exact derivative of the cycle map ([`periodic`]); means,
//! rms values and Fourier coefficients are integrals in closed form ([`integral`]).

pub mod basis;
pub mod conduction;
pub mod crossing;
pub mod cycle;
pub mod flow;
pub mod integral;
pub mod modes;
pub mod periodic;
pub mod regime;

#[cfg(test)]
mod tests;

pub use cycle::{Run, run};
pub use periodic::{Periodic, solve};

use crate::network::Unsolvable;

/// Why a circuit was not solved.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum SolverError {
    /// No pattern of conduction satisfies the conditions of every switch at an instant.
    #[error("no conduction pattern satisfies every diode at {time:.6e} s: {reason}")]
    NoConduction {
        /// Seconds from the zero crossing of the line.
        time: f64,
        /// What stood against the patterns that were tried.
        reason: Unsolvable,
    },
    /// Conduction changed more often in a cycle than any sound circuit does.
    #[error("conduction changed more than {limit} times in one cycle")]
    Chatter {
        /// The bound.
        limit: usize,
    },
    /// An event could not be bracketed within the bound on steps.
    #[error("an event could not be located within {limit} steps")]
    EventSteps {
        /// The bound.
        limit: usize,
    },
    /// The matrix of a conduction pattern has no usable eigenvectors.
    #[error("the natural modes of a conduction pattern could not be computed")]
    Modes,
    /// The search for the periodic state used up its budget.
    #[error("no periodic state within {cycles} cycles; the best repeats to {residual:.1e} of its size")]
    NotPeriodic {
        /// Cycles run.
        cycles: usize,
        /// Relative residual of the best state.
        residual: f64,
    },
}

/// Work that a solution cost.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Work {
    /// Cycles or half cycles propagated.
    pub cycles: usize,
    /// Changes of conduction located.
    pub events: usize,
    /// Conduction patterns assembled.
    pub patterns: usize,
    /// Newton iterations.
    pub iterations: usize,
}
