//! Where to read what: the signals behind the figures, as sums over branches.

/// A linear combination of branch voltages and branch currents.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Signal {
    /// Branch index and weight of its voltage.
    pub voltages: Vec<(usize, f64)>,
    /// Branch index and weight of its current.
    pub currents: Vec<(usize, f64)>,
}

impl Signal {
    /// The current of one branch.
    #[must_use]
    pub fn current(branch: usize) -> Self {
        Self {
            voltages: Vec::new(),
            currents: vec![(branch, 1.0)],
        }
    }

    /// The voltage of one branch.
    #[must_use]
    pub fn voltage(branch: usize) -> Self {
        Self {
            voltages: vec![(branch, 1.0)],
            currents: Vec::new(),
        }
    }

    /// The same signal times `factor`.
    #[must_use]
    pub fn times(mut self, factor: f64) -> Self {
        for (_, weight) in self.voltages.iter_mut().chain(&mut self.currents) {
            *weight *= factor;
        }
        self
    }

    /// The sum of two signals.
    #[must_use]
    pub fn plus(mut self, other: Self) -> Self {
        self.voltages.extend(other.voltages);
        self.currents.extend(other.currents);
        self
    }
}

/// One diode.
#[derive(Clone, Debug, PartialEq)]
pub struct DiodeProbe {
    /// Name within its output, D1 first.
    pub name: String,
    /// Its branch.
    pub branch: usize,
}

/// One bank of capacitors.
#[derive(Clone, Debug, PartialEq)]
pub struct CapacitorProbe {
    /// Name within its output, C1 first.
    pub name: String,
    /// JSON Pointer of the capacitor inside the supply.
    pub pointer: String,
    /// Current into the bank.
    pub current: Signal,
    /// Voltage across the bank's terminals, the loss resistance included.
    pub voltage: Signal,
    /// Loss resistance of the bank in ohms.
    pub esr: f64,
}

/// One series part with an inductance.
#[derive(Clone, Debug, PartialEq)]
pub struct ChokeProbe {
    /// Name within its output, L1 first.
    pub name: String,
    /// JSON Pointer of the series part inside the supply.
    pub pointer: String,
    /// Its current.
    pub current: Signal,
}

/// One rail.
#[derive(Clone, Debug, PartialEq)]
pub struct RailProbe {
    /// Voltage at the load, positive on both sides of a split rectifier.
    pub voltage: Signal,
    /// Current of the load.
    pub current: Signal,
}

/// One output.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct OutputProbes {
    /// Its rails.
    pub rails: Vec<RailProbe>,
    /// Its diodes.
    pub diodes: Vec<DiodeProbe>,
    /// Its capacitors: coupling and stack first, then the filters.
    pub capacitors: Vec<CapacitorProbe>,
    /// Its chokes.
    pub chokes: Vec<ChokeProbe>,
    /// Current of each winding part (each half, each phase); empty without a transformer.
    pub windings: Vec<Signal>,
    /// Copper resistance of each winding part in ohms.
    pub winding_resistance: f64,
    /// Branches of the series resistances in the filters.
    pub filter_resistors: Vec<usize>,
}

/// Everything the figures read.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Probes {
    /// One an output.
    pub outputs: Vec<OutputProbes>,
    /// Line current of each phase, out of the source.
    pub line_currents: Vec<Signal>,
    /// Source voltage of each phase.
    pub line_voltages: Vec<Signal>,
    /// Line resistance per phase in ohms.
    pub line_resistance: f64,
    /// Primary current of each phase; empty without a transformer.
    pub primary_currents: Vec<Signal>,
    /// Primary copper resistance per phase in ohms.
    pub primary_resistance: f64,
    /// Branches that stand for core loss.
    pub core_resistors: Vec<usize>,
}
