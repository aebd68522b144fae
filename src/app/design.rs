//! From a need to supplies.

use super::derating::surges;
use super::operating_point::solved;
use super::{App, AppError};
use crate::design::{Need, Outcome, search};
use crate::policy::Policy;

/// Supplies found for a need.
#[derive(Clone, Debug)]
pub struct Designed {
    /// The need.
    pub need: Need,
    /// The policy whose factors the ratings were chosen by.
    pub policy: Policy,
    /// What was found.
    pub outcome: Outcome,
}

impl App {
    /// Searches for supplies that hold at every end of every band.
    ///
    /// # Errors
    /// [`AppError::Lost`] alone: a supply without a solution is a rejected one.
    pub async fn design(&self, need: Need, policy: Policy) -> Result<Designed, AppError> {
        let maximum = self.limits.corners_maximum;
        self.compute
            .run(move || {
                let outcome = search(&need, &policy, maximum, &solved, &|supply| surges(supply, maximum));
                Designed { need, policy, outcome }
            })
            .await
    }
}
