//! IO: what can be done? One method a use case, called by api and page alike.

mod compute;
mod derating;
mod design;
mod operating_point;
mod sweep;
mod worst_case;

pub use derating::Derated;
pub use design::Designed;
pub use operating_point::OperatingPoint;
pub use sweep::{Axis, Plan, PlanKind, Rows, Scale};
pub use worst_case::WorstCase;

use crate::config::Limits;
use crate::solver::SolverError;
use compute::Compute;

/// Why something could not be done.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum AppError {
    /// The circuit has no periodic solution, or none was found.
    #[error("the circuit has no periodic solution")]
    NoSolution(#[from] SolverError),
    /// A figure came out as no finite number.
    #[error("figure {pointer} is not a finite number")]
    NotFinite {
        /// JSON Pointer of the figure.
        pointer: String,
    },
    /// The work was given up because nobody waits for it any more, or it panicked.
    #[error("the computation ended without a result")]
    Lost,
}

/// The application: every use case, with its bounds.
#[derive(Debug)]
pub struct App {
    /// Bounds on requests and work.
    pub limits: Limits,
    compute: Compute,
}

impl App {
    /// An application within `limits`.
    ///
    /// # Errors
    /// Where the threads for computation cannot be started.
    pub fn new(limits: Limits) -> Result<Self, rayon::ThreadPoolBuildError> {
        Ok(Self {
            limits,
            compute: Compute::new(limits.compute_maximum)?,
        })
    }
}
