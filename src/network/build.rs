//! Laying branches between nodes.

use super::{Branch, Element, Network, Oscillator, Probes};

/// A node, or a core, of a network under construction: the index of its Kirchhoff row. `Node::GROUND` has none.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Node(Option<usize>);

impl Node {
    /// The node whose potential is zero.
    pub const GROUND: Self = Self(None);
}

/// A winding in series with a branch: which core, and how many turns. A positive current through the branch magnetises
/// the core with `turns` ampere-turns.
pub type Turns = (Node, f64);

/// Builds a network branch by branch.
#[derive(Debug)]
pub struct Builder {
    rows: usize,
    branches: Vec<Branch>,
    oscillator: Oscillator,
}

impl Builder {
    /// An empty network driven by `oscillator`.
    #[must_use]
    pub fn new(oscillator: Oscillator) -> Self {
        Self {
            rows: 0,
            branches: Vec::new(),
            oscillator,
        }
    }

    /// The time functions of the sources.
    #[must_use]
    pub fn oscillator(&self) -> &Oscillator {
        &self.oscillator
    }

    /// Farads of a branch; none where it is no capacitor.
    pub(super) fn farads(&self, branch: usize) -> f64 {
        match self.branches[branch].element {
            Element::Capacitor(farads) => farads,
            _ => 0.0,
        }
    }

    /// A new node, or the core of a transformer.
    pub fn node(&mut self) -> Node {
        self.rows += 1;
        Node(Some(self.rows - 1))
    }

    /// A branch from `from` to `to`; its index.
    pub fn branch(&mut self, from: Node, to: Node, element: Element) -> usize {
        self.wound(from, to, None, element)
    }

    /// A branch with a winding in series.
    pub(super) fn wound(&mut self, from: Node, to: Node, turns: Option<Turns>, element: Element) -> usize {
        let mut column = Vec::with_capacity(3);
        if from != to {
            column.extend(from.0.map(|row| (row, 1.0)));
            column.extend(to.0.map(|row| (row, -1.0)));
        }
        if let Some((Node(Some(core)), turns)) = turns {
            column.push((core, turns));
        }
        self.branches.push(Branch { element, column });
        self.branches.len() - 1
    }

    /// Elements in series from `from` to `to`, with a winding in series where `turns` is given; the branches' indices.
    /// At least one branch is laid: a wire where nothing else is there.
    pub fn series(&mut self, from: Node, to: Node, turns: Option<Turns>, elements: Vec<Element>) -> Vec<usize> {
        let elements = if elements.is_empty() {
            vec![Element::Wire]
        } else {
            elements
        };
        let last = elements.len() - 1;
        let mut here = from;
        let mut laid = Vec::with_capacity(elements.len());
        for (index, element) in elements.into_iter().enumerate() {
            let (next, winding) = if index == last {
                (to, turns)
            } else {
                (self.node(), None)
            };
            laid.push(self.wound(here, next, winding, element));
            here = next;
        }
        laid
    }

    /// The finished network.
    #[must_use]
    pub fn finish(self, probes: Probes) -> Network {
        let pick = |wanted: fn(&Element) -> bool| -> Vec<usize> {
            (0..self.branches.len())
                .filter(|&index| wanted(&self.branches[index].element))
                .collect()
        };
        let capacitors = pick(|e| matches!(e, Element::Capacitor(_)));
        Network {
            rows: self.rows,
            switches: pick(|e| matches!(e, Element::Switch { .. })),
            inductors: pick(|e| matches!(e, Element::Inductor(_))),
            charge: vec![0.0; capacitors.len()],
            capacitors,
            half_cycle: None,
            current_scale: 1.0,
            voltage_scale: 1.0,
            branches: self.branches,
            oscillator: self.oscillator,
            probes,
        }
    }
}
