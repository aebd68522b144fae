//! PURE: what is a supply? Sound by construction, one file a part of it.
//!
//! A [`Supply`] can only be made by [`Supply::new`], which checks every rule that ties one part to another and reports
//! all faults at once; the inner floors therefore never meet a winding that does not exist or a doubler without its
//! column. The parts themselves are plain values.

mod address;
mod fault;
mod filter;
mod line;
mod load;
mod rectifier;
mod sound;
mod transformer;

#[cfg(test)]
mod tests;

pub use address::{NoSuchQuantity, Slot};
pub use fault::Fault;
pub use filter::{Capacitor, CapacitorRatings, Section, Series};
pub use line::{Harmonic, Line, Phases};
pub use load::Load;
pub use rectifier::{Circuit, Diode, DiodeRatings, Rectifier};
pub use transformer::{Derived, DerivedWinding, Transformer, Winding, WindingValues};

use crate::quantity::Band;

/// Where the supply lives.
#[derive(Clone, Debug, PartialEq)]
pub struct Surroundings {
    /// Air temperature around the supply, in degrees Celsius.
    pub ambient: Band,
}

impl Default for Surroundings {
    fn default() -> Self {
        Self {
            ambient: Band::exactly(25.0),
        }
    }
}

/// A filter and a load.
#[derive(Clone, Debug, PartialEq)]
pub struct Rail {
    /// Filter sections from the rectifier to the load; may be empty.
    pub filter: Vec<Section>,
    /// What the rail feeds.
    pub load: Load,
}

/// A winding, its rectifier and the rails behind it.
#[derive(Clone, Debug, PartialEq)]
pub struct Output {
    /// Index into the transformer's windings; 0 where there is no transformer.
    pub winding: usize,
    /// The rectifier on that winding.
    pub rectifier: Rectifier,
    /// One rail, or two for a split bridge: positive first.
    pub rails: Vec<Rail>,
}

/// The parts of a supply before their rules have been checked.
#[derive(Clone, Debug, PartialEq)]
pub struct Parts {
    /// A name for people.
    pub name: Option<String>,
    /// The mains as the supply sees it.
    pub line: Line,
    /// Left out: the rectifier sits on the line itself.
    pub transformer: Option<Transformer>,
    /// At least one output.
    pub outputs: Vec<Output>,
    /// Where the supply lives.
    pub surroundings: Surroundings,
}

/// A whole mains input stage, sound by construction.
#[derive(Clone, Debug, PartialEq)]
pub struct Supply {
    parts: Parts,
}

impl Supply {
    /// Checks every rule that ties the parts together.
    ///
    /// # Errors
    /// Every fault found, each with the JSON Pointer of the field inside the supply.
    pub fn new(parts: Parts) -> Result<Self, Vec<Fault>> {
        let faults = sound::faults(&parts);
        if faults.is_empty() {
            Ok(Self { parts })
        } else {
            Err(faults)
        }
    }

    /// The name given to it, if any.
    #[must_use]
    pub fn name(&self) -> Option<&str> {
        self.parts.name.as_deref()
    }

    /// The mains as the supply sees it.
    #[must_use]
    pub fn line(&self) -> &Line {
        &self.parts.line
    }

    /// The transformer, where there is one.
    #[must_use]
    pub fn transformer(&self) -> Option<&Transformer> {
        self.parts.transformer.as_ref()
    }

    /// The outputs, at least one.
    #[must_use]
    pub fn outputs(&self) -> &[Output] {
        &self.parts.outputs
    }

    /// Where the supply lives.
    #[must_use]
    pub fn surroundings(&self) -> &Surroundings {
        &self.parts.surroundings
    }

    /// Whether a winding is used with a tap.
    #[must_use]
    pub fn is_tapped(&self, winding: usize) -> bool {
        self.outputs()
            .iter()
            .any(|o| o.winding == winding && o.rectifier.circuit.needs_tap())
    }

    /// What the circuit needs of the transformer, every band at its nominal value.
    #[must_use]
    pub fn derived_transformer(&self) -> Option<Derived> {
        let transformer = self.transformer()?;
        let halves: Vec<f64> = (0..transformer.windings.len())
            .map(|winding| if self.is_tapped(winding) { 2.0 } else { 1.0 })
            .collect();
        Some(transformer.derived(&halves))
    }

    /// The parts again, to build a changed supply from.
    #[must_use]
    pub fn into_parts(self) -> Parts {
        self.parts
    }
}
