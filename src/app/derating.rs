//! A supply held against a policy.

use super::worst_case::worst_case;
use super::{App, AppError};
use crate::network::Network;
use crate::policy::{Check, Policy, Quantity, Subject, Whole, Worst, check, subjects};
use crate::supply::Supply;
use crate::transient::switch_on_surge;
use crate::worst_case::{Extremes, survey};

/// The checks of a policy.
#[derive(Clone, Debug)]
pub struct Derated {
    /// The policy.
    pub policy: Policy,
    /// One a component, quantity and rule.
    pub checks: Vec<Check>,
    /// What they amount to.
    pub verdict: Whole,
    /// How the extremes behind them were found.
    pub extremes: Extremes,
}

/// The largest diode current of each output at switch-on, over the corners, with the corner.
pub(super) fn surges(supply: &Supply, corners_maximum: usize) -> Result<Vec<Worst>, AppError> {
    let extremes = survey(supply, corners_maximum, |point| -> Result<_, AppError> {
        Ok(switch_on_surge(&Network::of(point))?)
    })?;
    Ok(extremes
        .ranges
        .into_iter()
        .map(|range| (range.maximum, range.at_maximum))
        .collect())
}

fn derate(supply: &Supply, policy: Policy, corners_maximum: usize) -> Result<Derated, AppError> {
    let worst = worst_case(supply, corners_maximum)?;
    let wants_surge = policy
        .rules
        .iter()
        .any(|rule| rule.quantity == Quantity::DiodeCurrentSurge);
    let surges = if wants_surge {
        surges(supply, corners_maximum)?
    } else {
        Vec::new()
    };
    let place = |wanted: &str| worst.figures.iter().position(|(pointer, _)| pointer == wanted);
    let stress = |subject: &Subject| subject.worst(&worst.extremes, place, &surges);
    let (checks, verdict) = check(&policy, &subjects(supply), stress);
    Ok(Derated {
        policy,
        checks,
        verdict,
        extremes: worst.extremes,
    })
}

impl App {
    /// Holds a supply against a policy, at every end of every band.
    ///
    /// # Errors
    /// [`AppError`], of the first corner that fails.
    pub async fn derating(&self, supply: Supply, policy: Policy) -> Result<Derated, AppError> {
        let maximum = self.limits.corners_maximum;
        self.compute.run(move || derate(&supply, policy, maximum)).await?
    }
}
