//! From tree and links to state equations.

use super::pattern::{CAPACITOR, INDUCTOR, OPEN, Pattern, RESISTOR, SHORT, SOURCE, Topology, Unsolvable, topology};
use super::{Element, Network};
use nalgebra::DMatrix;

/// A meter outweighs an open switch by this factor where both float, so that it reads zero.
const METER_WEIGHT: f64 = 1e9;

type Rows = DMatrix<f64>;

/// Everything known so far of one pattern, rows over the extended state.
struct Reduction<'a> {
    network: &'a Network,
    topology: Topology,
    conducting: u64,
    states: usize,
    width: usize,
    voltage: Rows,
    current: Rows,
}

pub(super) fn reduce(network: &Network, conducting: u64) -> Result<Pattern, Unsolvable> {
    let topology = topology(network, conducting);
    if !topology.tree[SOURCE].is_empty() {
        return Err(Unsolvable::BrokenCurrent);
    }
    let states = topology.tree[CAPACITOR].len() + topology.links[INDUCTOR].len();
    let width = states + network.oscillator.width() + 1;
    let branches = network.branches.len();
    let mut reduction = Reduction {
        network,
        topology,
        conducting,
        states,
        width,
        voltage: Rows::zeros(branches, width),
        current: Rows::zeros(branches, width),
    };
    reduction.given();
    reduction.check_shorts()?;
    reduction.resistors()?;
    let (capacitor_rates, capacitor_mass) = reduction.capacitors()?;
    let (inductor_rates, inductor_mass) = reduction.inductors()?;
    reduction.shorts()?;
    reduction.opens()?;
    reduction.finish(&capacitor_rates, &inductor_rates, &capacitor_mass, &inductor_mass)
}

fn invert(matrix: Rows, right: &Rows) -> Result<Rows, Unsolvable> {
    if matrix.nrows() == 0 {
        return Ok(Rows::zeros(0, right.ncols()));
    }
    let factors = nalgebra::Cholesky::new(matrix).ok_or(Unsolvable::Singular)?;
    Ok(factors.solve(right))
}

impl Reduction<'_> {
    fn tree(&self, class: usize) -> &[usize] {
        &self.topology.tree[class]
    }

    fn links(&self, class: usize) -> &[usize] {
        &self.topology.links[class]
    }

    fn block(&self, tree: usize, links: usize) -> Rows {
        self.topology.block(tree, links)
    }

    fn gather(from: &Rows, branches: &[usize]) -> Rows {
        Rows::from_fn(branches.len(), from.ncols(), |r, c| from[(branches[r], c)])
    }

    fn voltages(&self, branches: &[usize]) -> Rows {
        Self::gather(&self.voltage, branches)
    }

    fn currents(&self, branches: &[usize]) -> Rows {
        Self::gather(&self.current, branches)
    }

    fn put_voltages(&mut self, branches: &[usize], rows: &Rows) {
        for (r, &branch) in branches.iter().enumerate() {
            self.voltage.row_mut(branch).copy_from(&rows.row(r));
        }
    }

    fn put_currents(&mut self, branches: &[usize], rows: &Rows) {
        for (r, &branch) in branches.iter().enumerate() {
            self.current.row_mut(branch).copy_from(&rows.row(r));
        }
    }

    /// The value of a branch: ohms, henries, farads or amperes.
    fn value(&self, branch: usize) -> f64 {
        match self.network.branches[branch].element {
            Element::Resistor(v) | Element::Inductor(v) | Element::Capacitor(v) | Element::CurrentSource(v) => v,
            Element::Switch { slope, .. } => slope,
            Element::Emf(_) | Element::Wire | Element::Meter => 0.0,
        }
    }

    fn diagonal(&self, branches: &[usize]) -> Rows {
        let values: Vec<f64> = branches.iter().map(|&b| self.value(b)).collect();
        Rows::from_diagonal(&nalgebra::DVector::from_vec(values))
    }

    /// The part of a branch's voltage that is given: a source's, or a conducting switch's threshold.
    fn offset(&self, branch: usize) -> Vec<f64> {
        let mut row = vec![0.0; self.width];
        match &self.network.branches[branch].element {
            Element::Emf(coefficients) => row[self.states..self.width - 1].copy_from_slice(coefficients),
            Element::Switch { threshold, .. } => row[self.width - 1] = *threshold,
            _ => {}
        }
        row
    }

    fn offsets(&self, branches: &[usize]) -> Rows {
        let rows: Vec<Vec<f64>> = branches.iter().map(|&b| self.offset(b)).collect();
        Rows::from_fn(branches.len(), self.width, |r, c| rows[r][c])
    }

    /// States, sources and currents that need no solving.
    fn given(&mut self) {
        let shorts = self.tree(SHORT).to_vec();
        let offsets = self.offsets(&shorts);
        self.put_voltages(&shorts, &offsets);
        let capacitors = self.tree(CAPACITOR).to_vec();
        for (state, &branch) in capacitors.iter().enumerate() {
            self.voltage[(branch, state)] = 1.0;
        }
        let inductors = self.links(INDUCTOR).to_vec();
        for (index, &branch) in inductors.iter().enumerate() {
            self.current[(branch, capacitors.len() + index)] = 1.0;
        }
        for branch in self.links(SOURCE).to_vec() {
            self.current[(branch, self.width - 1)] = self.value(branch);
        }
        let tied = self.links(CAPACITOR).to_vec();
        let voltages = self.loop_voltages(CAPACITOR, &[SHORT, CAPACITOR]);
        self.put_voltages(&tied, &voltages);
    }

    /// `F'` times the voltages of the tree's `classes`, for the links of one class.
    fn loop_voltages(&self, links: usize, classes: &[usize]) -> Rows {
        let mut sum = Rows::zeros(self.links(links).len(), self.width);
        for &class in classes {
            sum += self.block(class, links).transpose() * self.voltages(self.tree(class));
        }
        sum
    }

    /// `-F` times the currents of the links' `classes`, for the tree of one class.
    fn cut_currents(&self, tree: usize, classes: &[usize]) -> Rows {
        let mut sum = Rows::zeros(self.tree(tree).len(), self.width);
        for &class in classes {
            sum -= self.block(tree, class) * self.currents(self.links(class));
        }
        sum
    }

    /// A short that closes a loop of shorts must find its own voltage there.
    fn check_shorts(&mut self) -> Result<(), Unsolvable> {
        let closing = self.links(SHORT).to_vec();
        let own = self.offsets(&closing);
        let found = self.loop_voltages(SHORT, &[SHORT]);
        let scale = self.network.voltage_scale;
        if (&own - &found)
            .iter()
            .any(|difference| difference.abs() > 1e-12 * scale)
        {
            return Err(Unsolvable::ShortedSource);
        }
        self.put_voltages(&closing, &own);
        Ok(())
    }

    /// Resistors: `(R_l + F' R_t F) i_l = F' v - thresholds`.
    fn resistors(&mut self) -> Result<(), Unsolvable> {
        let (tree, links) = (self.tree(RESISTOR).to_vec(), self.links(RESISTOR).to_vec());
        let f = self.block(RESISTOR, RESISTOR);
        let resistance = self.diagonal(&tree);
        let others = self.cut_currents(RESISTOR, &[INDUCTOR, SOURCE]);
        let tree_offsets = self.offsets(&tree);
        let drive = self.loop_voltages(RESISTOR, &[SHORT, CAPACITOR]) - self.offsets(&links)
            + f.transpose() * (&resistance * others + &tree_offsets);
        let matrix = self.diagonal(&links) + f.transpose() * &resistance * &f;
        let currents = invert(matrix, &drive)?;
        let voltages = self.diagonal(&links) * &currents + self.offsets(&links);
        self.put_currents(&links, &currents);
        self.put_voltages(&links, &voltages);
        let currents = self.cut_currents(RESISTOR, &[RESISTOR, INDUCTOR, SOURCE]);
        let voltages = &resistance * &currents + tree_offsets;
        self.put_currents(&tree, &currents);
        self.put_voltages(&tree, &voltages);
        Ok(())
    }

    /// Time derivative of rows that hold no state: sources only.
    fn source_derivative(&self, rows: &Rows) -> Rows {
        let mut out = Rows::zeros(rows.nrows(), rows.ncols());
        for r in 0..rows.nrows() {
            let row: Vec<f64> = rows.row(r).iter().copied().collect();
            let derivative = self.network.oscillator.derivative(&row[self.states..self.width - 1]);
            for (c, value) in derivative.into_iter().enumerate() {
                out[(r, self.states + c)] = value;
            }
        }
        out
    }

    /// Capacitors: `(C_t + F C_l F') dv/dt = -(F_C C_l F_E' de/dt + currents of the other links)`.
    fn capacitors(&mut self) -> Result<(Rows, Rows), Unsolvable> {
        let (tree, links) = (self.tree(CAPACITOR).to_vec(), self.links(CAPACITOR).to_vec());
        let f = self.block(CAPACITOR, CAPACITOR);
        let tied = self.diagonal(&links);
        let sources = self.block(SHORT, CAPACITOR).transpose() * self.voltages(self.tree(SHORT));
        let source_rates = self.source_derivative(&sources);
        let mass = self.diagonal(&tree) + &f * &tied * f.transpose();
        let right = self.cut_currents(CAPACITOR, &[RESISTOR, INDUCTOR, SOURCE]) - &f * &tied * &source_rates;
        let rates = invert(mass.clone(), &right)?;
        let tree_currents = self.diagonal(&tree) * &rates;
        let link_currents = &tied * (source_rates + f.transpose() * &rates);
        self.put_currents(&tree, &tree_currents);
        self.put_currents(&links, &link_currents);
        Ok((rates, mass))
    }

    /// Inductors: `(L_l + F' L_t F) di/dt = F' v`.
    fn inductors(&mut self) -> Result<(Rows, Rows), Unsolvable> {
        let (tree, links) = (self.tree(INDUCTOR).to_vec(), self.links(INDUCTOR).to_vec());
        let f = self.block(INDUCTOR, INDUCTOR);
        let tied = self.diagonal(&tree);
        let mass = self.diagonal(&links) + f.transpose() * &tied * &f;
        let right = self.loop_voltages(INDUCTOR, &[SHORT, CAPACITOR, RESISTOR]);
        let rates = invert(mass.clone(), &right)?;
        let link_voltages = self.diagonal(&links) * &rates;
        let tree_voltages = -(&tied * &f * &rates);
        let tree_currents = self.cut_currents(INDUCTOR, &[INDUCTOR, SOURCE]);
        self.put_voltages(&links, &link_voltages);
        self.put_voltages(&tree, &tree_voltages);
        self.put_currents(&tree, &tree_currents);
        Ok((rates, mass))
    }

    /// Currents of sources and shorts. Around a loop of shorts alone the currents divide as between equal resistances,
    /// however small: the sum of their squares is least.
    fn shorts(&mut self) -> Result<(), Unsolvable> {
        let (tree, closing) = (self.tree(SHORT).to_vec(), self.links(SHORT).to_vec());
        let others = self.cut_currents(SHORT, &[CAPACITOR, RESISTOR, INDUCTOR, SOURCE]);
        let f = self.block(SHORT, SHORT);
        let matrix = Rows::identity(closing.len(), closing.len()) + f.transpose() * &f;
        let currents = invert(matrix, &(f.transpose() * &others))?;
        let tree_currents = others - f * &currents;
        self.put_currents(&closing, &currents);
        self.put_currents(&tree, &tree_currents);
        Ok(())
    }

    fn open_weights(&self, branches: &[usize]) -> Rows {
        let weights = branches.iter().map(|&b| match self.network.branches[b].element {
            Element::Meter => METER_WEIGHT,
            _ => 1.0,
        });
        Rows::from_diagonal(&nalgebra::DVector::from_iterator(branches.len(), weights))
    }

    /// Voltages of opens and current sources. What only opens define divides between them as between equal leakages,
    /// however small: the sum of the squares is least.
    fn opens(&mut self) -> Result<(), Unsolvable> {
        let (floating, opens) = (self.tree(OPEN).to_vec(), self.links(OPEN).to_vec());
        let known = self.loop_voltages(OPEN, &[SHORT, CAPACITOR, RESISTOR, INDUCTOR]);
        let f = self.block(OPEN, OPEN);
        let weight = self.open_weights(&opens);
        let matrix = self.open_weights(&floating) + &f * &weight * f.transpose();
        let voltages = invert(matrix, &-(&f * &weight * &known))?;
        let open_voltages = known + f.transpose() * &voltages;
        self.put_voltages(&floating, &voltages);
        self.put_voltages(&opens, &open_voltages);
        let sources = self.links(SOURCE).to_vec();
        let source_voltages = self.loop_voltages(SOURCE, &[SHORT, CAPACITOR, RESISTOR, INDUCTOR]);
        self.put_voltages(&sources, &source_voltages);
        Ok(())
    }

    fn finish(
        self,
        capacitor_rates: &Rows,
        inductor_rates: &Rows,
        capacitor_mass: &Rows,
        inductor_mass: &Rows,
    ) -> Result<Pattern, Unsolvable> {
        let capacitors = capacitor_rates.nrows();
        let mut rate = Rows::zeros(self.states, self.width);
        rate.rows_mut(0, capacitors).copy_from(capacitor_rates);
        rate.rows_mut(capacitors, inductor_rates.nrows())
            .copy_from(inductor_rates);
        let masses = capacitor_mass.diagonal();
        let weight = masses
            .iter()
            .chain(inductor_mass.diagonal().iter())
            .map(|m| m.sqrt())
            .collect();
        let network = self.network;
        let mut expand = Rows::zeros(network.full_state(), self.width);
        for (index, &branch) in network.capacitors.iter().enumerate() {
            expand.row_mut(index).copy_from(&self.voltage.row(branch));
        }
        for (index, &branch) in network.inductors.iter().enumerate() {
            let row = network.capacitors.len() + index;
            expand.row_mut(row).copy_from(&self.current.row(branch));
        }
        let contract = self.contract(capacitor_mass, inductor_mass)?;
        Ok(Pattern {
            conducting: self.conducting,
            states: self.states,
            voltages: capacitors,
            width: self.width,
            rate,
            weight,
            voltage: self.voltage,
            current: self.current,
            expand,
            contract,
        })
    }

    /// Charge of every cut set of capacitors and flux of every loop of inductors carry over a change of pattern.
    fn contract(&self, capacitor_mass: &Rows, inductor_mass: &Rows) -> Result<Rows, Unsolvable> {
        let network = self.network;
        let full = network.full_state();
        let width = full + self.width - self.states;
        let stored = |branch: usize| {
            let capacitors = network.capacitors.iter().position(|&b| b == branch);
            let inductors = network.inductors.iter().position(|&b| b == branch);
            capacitors
                .or(inductors.map(|i| i + network.capacitors.len()))
                .unwrap_or(0)
        };
        let select = |branches: &[usize]| {
            let mut rows = Rows::zeros(branches.len(), width);
            for (r, &branch) in branches.iter().enumerate() {
                rows[(r, stored(branch))] = self.value(branch);
            }
            rows
        };
        let widen = |rows: &Rows| {
            let mut out = Rows::zeros(rows.nrows(), width);
            out.columns_mut(full, width - full)
                .copy_from(&rows.columns(self.states, self.width - self.states));
            out
        };
        let f = self.block(CAPACITOR, CAPACITOR);
        let tied = self.diagonal(self.links(CAPACITOR));
        let sources = self.block(SHORT, CAPACITOR).transpose() * self.voltages(self.tree(SHORT));
        let charge = select(self.tree(CAPACITOR)) + &f * (select(self.links(CAPACITOR)) - &tied * widen(&sources));
        let f = self.block(INDUCTOR, INDUCTOR);
        let forced = self.block(INDUCTOR, SOURCE) * widen(&self.currents(self.links(SOURCE)));
        let tree = self.tree(INDUCTOR);
        let flux = select(self.links(INDUCTOR)) - f.transpose() * (select(tree) + self.diagonal(tree) * forced);
        let mut contract = Rows::zeros(self.states, width);
        let capacitors = charge.nrows();
        contract
            .rows_mut(0, capacitors)
            .copy_from(&invert(capacitor_mass.clone(), &charge)?);
        contract
            .rows_mut(capacitors, flux.nrows())
            .copy_from(&invert(inductor_mass.clone(), &flux)?);
        Ok(contract)
    }
}
