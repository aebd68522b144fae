//! One conduction pattern: which branches form the tree, and what of it is state.
//!
//! Branches enter the tree greedily in the order voltage sources and shorts, capacitors, resistors, inductors, current
//! sources, opens: a normal tree (Bryant 1959; Chua and Lin 1975), found here by Gaussian elimination of the columns of
//! `K`, so that ideal transformers count as well. What is left over in each class is exactly its excess: capacitors in
//! loops of capacitors and sources, inductors in cut sets of inductors and sources. They are no states of their own and
//! leave none, however stiff a regularised circuit would be.

use super::{Element, Network};
use nalgebra::DMatrix;

/// Why a pattern of conduction has no solution.
#[derive(Clone, Copy, Debug, PartialEq, Eq, thiserror::Error)]
pub enum Unsolvable {
    /// A loop of voltage sources and shorts whose voltages do not cancel.
    #[error("conducting switches short a source that has no impedance")]
    ShortedSource,
    /// A current source whose current has nowhere to go.
    #[error("open switches leave a current source without a path")]
    BrokenCurrent,
    /// A matrix that ought to be positive definite is not, in floating point.
    #[error("the element values are too far apart to be told from zero")]
    Singular,
}

/// Classes of branches, in the order in which they enter the tree.
pub(super) const CLASSES: usize = 6;
pub(super) const SHORT: usize = 0;
pub(super) const CAPACITOR: usize = 1;
pub(super) const RESISTOR: usize = 2;
pub(super) const INDUCTOR: usize = 3;
pub(super) const SOURCE: usize = 4;
pub(super) const OPEN: usize = 5;

/// Entries below this fraction of a column's largest are rounding: turns ratios are the only entries that are not whole.
const RANK_TOLERANCE: f64 = 1e-9;

/// Tree and links of one pattern, by class.
#[derive(Debug)]
pub(super) struct Topology {
    /// Branches of the tree, a list a class.
    pub(super) tree: [Vec<usize>; CLASSES],
    /// Links, a list a class.
    pub(super) links: [Vec<usize>; CLASSES],
    /// `F`: currents of the tree are `-F` times the currents of the links; a tree row a branch index.
    fundamental: DMatrix<f64>,
    /// Row of `fundamental` for a tree branch; column for a link.
    place: Vec<usize>,
}

impl Topology {
    /// The block of `F` for a class of the tree and a class of links.
    pub(super) fn block(&self, tree: usize, links: usize) -> DMatrix<f64> {
        let rows = &self.tree[tree];
        let columns = &self.links[links];
        DMatrix::from_fn(rows.len(), columns.len(), |r, c| {
            self.fundamental[(self.place[rows[r]], self.place[columns[c]])]
        })
    }
}

/// Class of a branch under a pattern; `conducting` holds one bit a switch.
pub(super) fn class(network: &Network, branch: usize, conducting: u64) -> usize {
    match network.branches[branch].element {
        Element::Emf(_) | Element::Wire => SHORT,
        Element::Capacitor(_) => CAPACITOR,
        Element::Resistor(_) => RESISTOR,
        Element::Inductor(_) => INDUCTOR,
        Element::CurrentSource(_) => SOURCE,
        Element::Meter => OPEN,
        Element::Switch { slope, .. } => {
            let index = network.switches.iter().position(|&b| b == branch).unwrap_or(0);
            match (conducting >> index & 1 == 1, slope > 0.0) {
                (false, _) => OPEN,
                (true, true) => RESISTOR,
                (true, false) => SHORT,
            }
        }
    }
}

/// Gauss-Jordan elimination of the columns of `K` in the order of the classes.
pub(super) fn topology(network: &Network, conducting: u64) -> Topology {
    let count = network.branches.len();
    let mut order: Vec<(usize, usize)> = (0..count).map(|b| (class(network, b, conducting), b)).collect();
    order.sort_unstable();
    let mut k = DMatrix::<f64>::zeros(network.rows, count);
    for (branch, b) in network.branches.iter().enumerate() {
        for &(row, weight) in &b.column {
            k[(row, branch)] += weight;
        }
    }
    let mut tree: [Vec<usize>; CLASSES] = Default::default();
    let mut links: [Vec<usize>; CLASSES] = Default::default();
    let mut place: Vec<usize> = (0..count).collect();
    let mut used = vec![false; network.rows];
    for &(class, branch) in &order {
        let mut pivot = None;
        let mut largest = RANK_TOLERANCE
            * network.branches[branch]
                .column
                .iter()
                .fold(0.0_f64, |m, c| m.max(c.1.abs()));
        for row in 0..network.rows {
            if !used[row] && k[(row, branch)].abs() > largest {
                largest = k[(row, branch)].abs();
                pivot = Some(row);
            }
        }
        match pivot {
            None => links[class].push(branch),
            Some(row) => {
                used[row] = true;
                tree[class].push(branch);
                place[branch] = row;
                eliminate(&mut k, row, branch);
            }
        }
    }
    Topology {
        tree,
        links,
        fundamental: k,
        place,
    }
}

fn eliminate(k: &mut DMatrix<f64>, row: usize, column: usize) {
    let pivot = k[(row, column)];
    for c in 0..k.ncols() {
        k[(row, c)] /= pivot;
    }
    for other in 0..k.nrows() {
        let factor = k[(other, column)];
        if other == row || factor == 0.0 {
            continue;
        }
        for c in 0..k.ncols() {
            let change = factor * k[(row, c)];
            let sum = k[(other, c)] - change;
            // What cancels to rounding is zero in the graph and must stay so, or it would be taken for a pivot.
            k[(other, c)] = if sum.abs() <= RANK_TOLERANCE * change.abs() {
                0.0
            } else {
                sum
            };
        }
    }
}

/// The linear network of one conduction pattern, reduced to its minimal state.
///
/// All rows are over the extended state `z = [x, w, 1]`: the state, the oscillator's time functions, and one.
#[derive(Clone, Debug)]
pub struct Pattern {
    /// One bit a switch: conducting or not.
    pub conducting: u64,
    /// Length of the minimal state.
    pub states: usize,
    /// How many of the states, the first ones, are voltages; the rest are currents.
    pub voltages: usize,
    /// Length of the extended state.
    pub width: usize,
    /// `dx/dt`, a row a state.
    pub rate: DMatrix<f64>,
    /// The square root of the energy weight of each state: `sqrt(C)` or `sqrt(L)`.
    pub weight: Vec<f64>,
    /// Voltage of each branch.
    pub voltage: DMatrix<f64>,
    /// Current of each branch.
    pub current: DMatrix<f64>,
    /// The full state.
    pub expand: DMatrix<f64>,
    /// The minimal state from `[full state, w, 1]`: charge and flux carry over.
    pub contract: DMatrix<f64>,
}

impl Pattern {
    /// The reduced equations of `network` with the switches of `conducting` closed.
    ///
    /// # Errors
    /// [`Unsolvable`] where the pattern contradicts itself.
    pub fn new(network: &Network, conducting: u64) -> Result<Self, Unsolvable> {
        super::pattern_solve::reduce(network, conducting)
    }

    /// The rate of change of a row's quantity, as a row: `d/dt (r z)`.
    #[must_use]
    pub fn derivative(&self, network: &Network, row: &[f64]) -> Vec<f64> {
        let n = self.states;
        let mut out = vec![0.0; self.width];
        for (state, &weight) in row[..n].iter().enumerate() {
            for (column, value) in out.iter_mut().enumerate() {
                *value += weight * self.rate[(state, column)];
            }
        }
        let sources = network.oscillator.derivative(&row[n..self.width - 1]);
        for (value, source) in out[n..].iter_mut().zip(sources) {
            *value += source;
        }
        out
    }
}
