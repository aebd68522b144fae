//! The transformer between line and rectifiers.

use crate::quantity::Band;

/// How a winding was specified.
#[derive(Clone, Debug, PartialEq)]
pub enum WindingValues {
    /// By measurement: what the circuit needs, directly.
    Measured {
        /// Rms volts without load, with the rated voltage on the primary; of each half of a tapped winding.
        open_circuit_voltage: Band,
        /// Copper resistance in ohms; of each half.
        resistance: Band,
    },
    /// By data sheet: the voltage at rated current; the transformer's regulation gives the rest.
    Nameplate {
        /// Rms volts at rated current, rated primary voltage.
        rated_voltage: Band,
        /// Rms amperes.
        rated_current: Band,
    },
}

/// One secondary winding, or each half of a tapped one.
#[derive(Clone, Debug, PartialEq)]
pub struct Winding {
    /// Voltage and resistance, measured or by nameplate.
    pub values: WindingValues,
    /// Leakage inductance in henries, seen at this winding.
    pub leakage_inductance: Band,
}

/// A transformer with one primary and one or more secondary windings on one core.
#[derive(Clone, Debug, PartialEq)]
pub struct Transformer {
    /// Rated primary voltage, rms; line to line for three phases.
    pub primary_voltage: Band,
    /// Primary copper resistance in ohms; absent where the regulation gives it.
    pub primary_resistance: Option<Band>,
    /// Primary leakage inductance in henries.
    pub primary_leakage_inductance: Band,
    /// At least one.
    pub windings: Vec<Winding>,
    /// `(open-circuit voltage - rated voltage) / rated voltage` with every winding at its rated current.
    pub regulation: Option<Band>,
    /// Rated apparent power in volt-amperes.
    pub rating: Option<Band>,
    /// Core loss in watts at rated primary voltage.
    pub core_loss: Option<Band>,
}

/// What the circuit needs of one winding.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DerivedWinding {
    /// Rms volts without load.
    pub open_circuit_voltage: f64,
    /// Ohms.
    pub resistance: f64,
    /// Henries.
    pub leakage_inductance: f64,
}

/// What the circuit needs of a transformer, all bands at their nominal value.
#[derive(Clone, Debug, PartialEq)]
pub struct Derived {
    /// Ohms.
    pub primary_resistance: f64,
    /// Henries.
    pub primary_leakage_inductance: f64,
    /// Volts.
    pub primary_voltage: f64,
    /// Watts at rated primary voltage.
    pub core_loss: f64,
    /// One a winding.
    pub windings: Vec<DerivedWinding>,
}

impl Transformer {
    /// Whether any value is derived from the nameplate rather than given.
    #[must_use]
    pub fn is_nameplate(&self) -> bool {
        self.primary_resistance.is_none()
            || self
                .windings
                .iter()
                .any(|w| matches!(w.values, WindingValues::Nameplate { .. }))
    }

    /// The values the circuit needs, every band at its nominal value.
    ///
    /// A nameplate winding has `V0 = V (1 + e)` for regulation `e`; half of the drop `e V` at rated current falls on its
    /// own resistance and half on the primary's, all windings loaded at once (common practice). `halves` says for
    /// each winding how many halves it has: 2 where a tapped circuit uses it.
    #[must_use]
    pub fn derived(&self, halves: &[f64]) -> Derived {
        let regulation = self.regulation.map_or(0.0, |r| r.nominal());
        let primary_voltage = self.primary_voltage.nominal();
        let windings: Vec<DerivedWinding> = self
            .windings
            .iter()
            .map(|winding| {
                let (open_circuit_voltage, resistance) = match &winding.values {
                    WindingValues::Measured {
                        open_circuit_voltage,
                        resistance,
                    } => (open_circuit_voltage.nominal(), resistance.nominal()),
                    WindingValues::Nameplate {
                        rated_voltage,
                        rated_current,
                    } => (
                        rated_voltage.nominal() * (1.0 + regulation),
                        0.5 * regulation * rated_voltage.nominal() / rated_current.nominal(),
                    ),
                };
                DerivedWinding {
                    open_circuit_voltage,
                    resistance,
                    leakage_inductance: winding.leakage_inductance.nominal(),
                }
            })
            .collect();
        let primary_resistance = self.primary_resistance.map_or_else(
            || {
                let current = self.rated_primary_current(&windings, halves);
                0.5 * regulation / (1.0 + regulation) * primary_voltage / current
            },
            |r| r.nominal(),
        );
        Derived {
            primary_resistance,
            primary_leakage_inductance: self.primary_leakage_inductance.nominal(),
            primary_voltage,
            core_loss: self.core_loss.map_or(0.0, |p| p.nominal()),
            windings,
        }
    }

    /// Rms primary current with every nameplate winding at its rated current, in amperes.
    fn rated_primary_current(&self, windings: &[DerivedWinding], halves: &[f64]) -> f64 {
        self.windings
            .iter()
            .zip(windings)
            .enumerate()
            .map(|(index, (winding, derived))| match &winding.values {
                WindingValues::Nameplate { rated_current, .. } => {
                    halves.get(index).copied().unwrap_or(1.0) * rated_current.nominal() * derived.open_circuit_voltage
                        / self.primary_voltage.nominal()
                }
                WindingValues::Measured { .. } => 0.0,
            })
            .sum()
    }
}
