//! Many operating points as a table, streamed.

use super::{App, AppError};
use crate::figures;
use crate::network::Network;
use crate::quantity::Band;
use crate::solver::periodic::solve_from;
use crate::supply::Supply;
use rand::Rng;
use rand::SeedableRng;
use rayon::prelude::*;
use tokio::sync::mpsc;

/// Points of one run: solved one after the other, each from its neighbour's state, whatever the number of cores.
const RUN: u64 = 64;
/// Runs of one block: handed to the cores together, sent on together.
const RUNS: u64 = 16;
/// Blocks that may wait for a slow reader.
const BLOCKS_WAITING: usize = 2;

/// How an axis is divided.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Scale {
    /// Equal steps.
    Linear,
    /// Equal ratios.
    Logarithmic,
}

/// One axis of a grid: a quantity and its values.
#[derive(Clone, Debug, PartialEq)]
pub struct Axis {
    /// JSON Pointer inside the supply.
    pub pointer: String,
    /// Values in base units.
    pub values: Vec<f64>,
}

impl Axis {
    /// `points` values from `from` to `to`.
    #[must_use]
    pub fn spaced(from: f64, to: f64, points: usize, scale: Scale) -> Vec<f64> {
        let last = points.saturating_sub(1);
        (0..points)
            .map(|k| {
                let share = k as f64 / last.max(1) as f64;
                match scale {
                    _ if k == 0 => from,
                    _ if k == last => to,
                    Scale::Linear => from + share * (to - from),
                    Scale::Logarithmic => from * (to / from).powf(share),
                }
            })
            .collect()
    }
}

/// Which points a sweep solves.
#[derive(Clone, Debug, PartialEq)]
pub enum PlanKind {
    /// Every combination; the first axis varies slowest.
    Grid(Vec<Axis>),
    /// Draws from every band, uniform between its ends.
    Random {
        /// How many.
        samples: u64,
        /// The seed of the draws.
        seed: u64,
    },
}

/// A sweep.
#[derive(Clone, Debug, PartialEq)]
pub struct Plan {
    /// The supply; quantities that no axis names are nominal.
    pub supply: Supply,
    /// Which points.
    pub kind: PlanKind,
    /// Index of each column among the inputs (axes, or the bands drawn from) followed by the figures.
    pub columns: Vec<usize>,
    /// Pointers of the inputs.
    pub inputs: Vec<String>,
    /// Inputs' bands for random draws.
    pub bands: Vec<Band>,
}

/// A block of rows; a point without a solution is `None`.
#[derive(Clone, Debug, PartialEq)]
pub struct Rows {
    /// The rows, in order.
    pub rows: Vec<Option<Vec<f64>>>,
}

impl Plan {
    /// How many points there are.
    #[must_use]
    pub fn points(&self) -> u64 {
        match &self.kind {
            PlanKind::Grid(axes) => axes.iter().map(|a| a.values.len() as u64).product(),
            PlanKind::Random { samples, .. } => *samples,
        }
    }

    /// The inputs' values at a point.
    fn values(&self, index: u64) -> Vec<f64> {
        match &self.kind {
            PlanKind::Grid(axes) => {
                let mut rest = index;
                let mut values = vec![0.0; axes.len()];
                for (slot, axis) in values.iter_mut().zip(axes).rev() {
                    let count = axis.values.len() as u64;
                    *slot = axis.values[(rest % count) as usize];
                    rest /= count;
                }
                values
            }
            PlanKind::Random { seed, .. } => {
                // Each sample has its own stream, so that a row does not depend on where the work was cut.
                let mut random =
                    rand_pcg::Pcg64::seed_from_u64(seed.wrapping_add(index.wrapping_mul(0x9e37_79b9_7f4a_7c15)));
                self.bands
                    .iter()
                    .map(|band| {
                        let share: f64 = random.random();
                        (band.low() + share * (band.high() - band.low())).clamp(band.low(), band.high())
                    })
                    .collect()
            }
        }
    }

    /// Solves the points from `first` to before `last`, one after the other.
    fn run(&self, first: u64, last: u64) -> Vec<Option<Vec<f64>>> {
        let mut guess: Option<Vec<f64>> = None;
        (first..last)
            .map(|index| {
                let inputs = self.values(index);
                let row = self.point(&inputs, &mut guess);
                if row.is_none() {
                    guess = None;
                }
                row
            })
            .collect()
    }

    fn point(&self, inputs: &[f64], guess: &mut Option<Vec<f64>>) -> Option<Vec<f64>> {
        let chosen: Vec<(&str, Band)> = self
            .inputs
            .iter()
            .zip(inputs)
            .map(|(pointer, value)| Band::point(*value).map(|band| (pointer.as_str(), band)))
            .collect::<Result<_, _>>()
            .ok()?;
        let supply = self.supply.with(&chosen).ok()?;
        let network = Network::of(&supply);
        // A neighbour's state is a guess; where it leads nowhere the search begins afresh.
        let periodic = guess
            .as_deref()
            .filter(|full| full.len() == network.full_state())
            .and_then(|full| solve_from(&network, full).ok())
            .or_else(|| crate::solver::solve(&network).ok())?;
        *guess = Some(periodic.full.clone());
        let values = figures::compute(&network, &periodic).values();
        let row: Vec<f64> = self
            .columns
            .iter()
            .map(|&column| {
                inputs
                    .get(column)
                    .copied()
                    .unwrap_or_else(|| values[column - inputs.len()])
            })
            .collect();
        row.iter().all(|v| v.is_finite()).then_some(row)
    }

    /// Solves one block, spread over the cores.
    fn block(&self, first: u64, last: u64) -> Rows {
        let starts: Vec<u64> = (first..last).step_by(RUN as usize).collect();
        let runs: Vec<Vec<Option<Vec<f64>>>> = starts
            .into_par_iter()
            .map(|start| self.run(start, (start + RUN).min(last)))
            .collect();
        Rows {
            rows: runs.into_iter().flatten().collect(),
        }
    }
}

impl App {
    /// Starts a sweep; its rows arrive in order, in blocks. The sweep stops when the receiver is dropped.
    pub fn sweep(self: &std::sync::Arc<Self>, plan: Plan) -> mpsc::Receiver<Result<Rows, AppError>> {
        let (sender, receiver) = mpsc::channel(BLOCKS_WAITING);
        let app = std::sync::Arc::clone(self);
        let plan = std::sync::Arc::new(plan);
        tokio::spawn(async move {
            let points = plan.points();
            let mut first = 0;
            while first < points {
                let last = (first + RUN * RUNS).min(points);
                let share = std::sync::Arc::clone(&plan);
                let rows = app.compute.run(move || share.block(first, last)).await;
                let lost = rows.is_err();
                if sender.send(rows).await.is_err() || lost {
                    return;
                }
                first = last;
            }
        });
        receiver
    }
}
