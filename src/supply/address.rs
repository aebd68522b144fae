//! Every quantity of a supply by its JSON Pointer (RFC 6901).
//!
//! One walk visits them all, in the order of a description; reading, replacing and checking quantities are built on it,
//! so that no quantity can be forgotten by one of them.

use super::{Capacitor, Load, Parts, Rail, Rectifier, Supply, Transformer, Winding, WindingValues, fault::Fault};
use crate::bounds::{self, Range};
use crate::quantity::{Band, Dimension, End};

/// One quantity of a supply.
#[derive(Clone, Debug, PartialEq)]
pub struct Slot {
    /// Its JSON Pointer inside the supply.
    pub pointer: String,
    /// What it measures.
    pub dimension: Dimension,
    /// Its value.
    pub band: Band,
}

/// A pointer that leads to no quantity of the supply.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[error("{pointer:?} is not a quantity of this supply")]
pub struct NoSuchQuantity {
    /// The pointer that was asked for.
    pub pointer: String,
}

/// What a walk is told about each quantity.
pub(super) struct Visit<'a> {
    pub(super) pointer: &'a str,
    pub(super) dimension: Dimension,
    /// `None` where only the sign-less bounds of its dimension hold (angles, temperatures).
    pub(super) range: Option<Range>,
}

struct Walker<'a> {
    path: String,
    visit: &'a mut dyn FnMut(Visit<'_>, &mut Band),
}

impl Walker<'_> {
    fn at(&mut self, step: &str, inside: impl FnOnce(&mut Self)) {
        let length = self.path.len();
        self.path.push('/');
        self.path.push_str(step);
        inside(self);
        self.path.truncate(length);
    }

    fn each<T>(&mut self, step: &str, items: &mut [T], mut inside: impl FnMut(&mut Self, &mut T)) {
        for (index, item) in items.iter_mut().enumerate() {
            let length = self.path.len();
            self.path.push('/');
            self.path.push_str(step);
            self.path.push('/');
            self.path.push_str(&index.to_string());
            inside(self, item);
            self.path.truncate(length);
        }
    }

    fn quantity(&mut self, step: &str, dimension: Dimension, range: impl Into<Option<Range>>, band: &mut Band) {
        let range = range.into();
        let length = self.path.len();
        self.path.push('/');
        self.path.push_str(step);
        (self.visit)(
            Visit {
                pointer: &self.path,
                dimension,
                range,
            },
            band,
        );
        self.path.truncate(length);
    }

    fn optional(&mut self, step: &str, dimension: Dimension, range: Range, band: &mut Option<Band>) {
        if let Some(band) = band {
            self.quantity(step, dimension, range, band);
        }
    }
}

/// Visits every quantity of the parts, in the order of a description.
pub(super) fn walk(parts: &mut Parts, visit: &mut dyn FnMut(Visit<'_>, &mut Band)) {
    use Dimension as D;
    let mut walker = Walker {
        path: String::with_capacity(64),
        visit,
    };
    let walker = &mut walker;
    let line = &mut parts.line;
    walker.at("line", |w| {
        w.quantity("voltage", D::Voltage, bounds::VOLTAGE, &mut line.voltage);
        w.quantity("frequency", D::Frequency, bounds::FREQUENCY, &mut line.frequency);
        w.quantity(
            "resistance",
            D::Resistance,
            bounds::RESISTANCE_OR_ZERO,
            &mut line.resistance,
        );
        w.quantity(
            "inductance",
            D::Inductance,
            bounds::INDUCTANCE_OR_ZERO,
            &mut line.inductance,
        );
        w.each("harmonics", &mut line.harmonics, |w, harmonic| {
            w.quantity("fraction", D::Ratio, bounds::HARMONIC_FRACTION, &mut harmonic.fraction);
            w.quantity("phase", D::Angle, None, &mut harmonic.phase);
        });
    });
    if let Some(transformer) = &mut parts.transformer {
        walker.at("transformer", |w| walk_transformer(w, transformer));
    }
    walker.each("outputs", &mut parts.outputs, |w, output| {
        w.at("rectifier", |w| walk_rectifier(w, &mut output.rectifier));
        w.each("rails", &mut output.rails, walk_rail);
    });
    walker.at("surroundings", |w| {
        w.quantity("ambient", D::Temperature, None, &mut parts.surroundings.ambient);
    });
}

fn walk_transformer(w: &mut Walker<'_>, transformer: &mut Transformer) {
    use Dimension as D;
    w.quantity(
        "primary_voltage",
        D::Voltage,
        bounds::VOLTAGE,
        &mut transformer.primary_voltage,
    );
    w.optional(
        "primary_resistance",
        D::Resistance,
        bounds::RESISTANCE_OR_ZERO,
        &mut transformer.primary_resistance,
    );
    w.quantity(
        "primary_leakage_inductance",
        D::Inductance,
        bounds::INDUCTANCE_OR_ZERO,
        &mut transformer.primary_leakage_inductance,
    );
    w.optional("regulation", D::Ratio, bounds::REGULATION, &mut transformer.regulation);
    w.each("windings", &mut transformer.windings, walk_winding);
    w.optional(
        "rating",
        D::ApparentPower,
        bounds::APPARENT_POWER,
        &mut transformer.rating,
    );
    w.optional("core_loss", D::Power, bounds::POWER_OR_ZERO, &mut transformer.core_loss);
}

fn walk_winding(w: &mut Walker<'_>, winding: &mut Winding) {
    use Dimension as D;
    match &mut winding.values {
        WindingValues::Measured {
            open_circuit_voltage,
            resistance,
        } => {
            w.quantity(
                "open_circuit_voltage",
                D::Voltage,
                bounds::VOLTAGE,
                open_circuit_voltage,
            );
            w.quantity("resistance", D::Resistance, bounds::RESISTANCE_OR_ZERO, resistance);
        }
        WindingValues::Nameplate {
            rated_voltage,
            rated_current,
        } => {
            w.quantity("rated_voltage", D::Voltage, bounds::VOLTAGE, rated_voltage);
            w.quantity("rated_current", D::Current, bounds::CURRENT, rated_current);
        }
    }
    w.quantity(
        "leakage_inductance",
        D::Inductance,
        bounds::INDUCTANCE_OR_ZERO,
        &mut winding.leakage_inductance,
    );
}

fn walk_rectifier(w: &mut Walker<'_>, rectifier: &mut Rectifier) {
    use Dimension as D;
    let diode = &mut rectifier.diode;
    w.at("diode", |w| {
        w.quantity(
            "threshold_voltage",
            D::Voltage,
            bounds::VOLTAGE_OR_ZERO,
            &mut diode.threshold_voltage,
        );
        w.quantity(
            "slope_resistance",
            D::Resistance,
            bounds::RESISTANCE_OR_ZERO,
            &mut diode.slope_resistance,
        );
        let ratings = &mut diode.ratings;
        w.at("ratings", |w| {
            w.optional(
                "reverse_voltage",
                D::Voltage,
                bounds::VOLTAGE,
                &mut ratings.reverse_voltage,
            );
            w.optional("current_mean", D::Current, bounds::CURRENT, &mut ratings.current_mean);
            w.optional("current_rms", D::Current, bounds::CURRENT, &mut ratings.current_rms);
            w.optional("current_surge", D::Current, bounds::CURRENT, &mut ratings.current_surge);
        });
    });
    if let Some(capacitor) = &mut rectifier.coupling {
        w.at("coupling", |w| walk_capacitor(w, capacitor));
    }
    if let Some(capacitor) = &mut rectifier.stack {
        w.at("stack", |w| walk_capacitor(w, capacitor));
    }
}

fn walk_capacitor(w: &mut Walker<'_>, capacitor: &mut Capacitor) {
    use Dimension as D;
    w.quantity(
        "capacitance",
        D::Capacitance,
        bounds::CAPACITANCE,
        &mut capacitor.capacitance,
    );
    w.quantity("esr", D::Resistance, bounds::RESISTANCE_OR_ZERO, &mut capacitor.esr);
    let ratings = &mut capacitor.ratings;
    w.at("ratings", |w| {
        w.optional("voltage", D::Voltage, bounds::VOLTAGE, &mut ratings.voltage);
        w.optional(
            "ripple_current",
            D::Current,
            bounds::CURRENT,
            &mut ratings.ripple_current,
        );
        w.optional("endurance", D::Life, bounds::LIFE, &mut ratings.endurance);
        if let Some(temperature) = &mut ratings.temperature {
            w.quantity("temperature", D::Temperature, None, temperature);
        }
    });
}

fn walk_rail(w: &mut Walker<'_>, rail: &mut Rail) {
    use Dimension as D;
    w.each("filter", &mut rail.filter, |w, section| {
        if let Some(series) = &mut section.series {
            w.at("series", |w| {
                w.quantity(
                    "resistance",
                    D::Resistance,
                    bounds::RESISTANCE_OR_ZERO,
                    &mut series.resistance,
                );
                w.quantity(
                    "inductance",
                    D::Inductance,
                    bounds::INDUCTANCE_OR_ZERO,
                    &mut series.inductance,
                );
            });
        }
        if let Some(capacitor) = &mut section.capacitor {
            w.at("capacitor", |w| walk_capacitor(w, capacitor));
        }
    });
    w.at("load", |w| match &mut rail.load {
        Load::Resistance { resistance } => {
            w.quantity("resistance", D::Resistance, bounds::RESISTANCE, resistance);
        }
        Load::Current { current } => {
            w.quantity("current", D::Current, bounds::CURRENT_OR_ZERO, current);
        }
        Load::Regulator {
            output_voltage,
            output_current,
            dropout,
            quiescent_current,
        } => {
            w.quantity("output_voltage", D::Voltage, bounds::VOLTAGE, output_voltage);
            w.quantity("output_current", D::Current, bounds::CURRENT_OR_ZERO, output_current);
            w.quantity("dropout", D::Voltage, bounds::VOLTAGE_OR_ZERO, dropout);
            w.quantity(
                "quiescent_current",
                D::Current,
                bounds::CURRENT_OR_ZERO,
                quiescent_current,
            );
        }
        Load::Open => {}
    });
}

impl Supply {
    /// Every quantity with its pointer, in the order of a description.
    #[must_use]
    pub fn slots(&self) -> Vec<Slot> {
        let mut slots = Vec::new();
        let mut parts = self.clone().into_parts();
        walk(&mut parts, &mut |visit, band| {
            slots.push(Slot {
                pointer: visit.pointer.to_owned(),
                dimension: visit.dimension,
                band: *band,
            });
        });
        slots
    }

    /// The quantities that are uncertain: bands with a width.
    #[must_use]
    pub fn bands(&self) -> Vec<Slot> {
        let mut slots = self.slots();
        slots.retain(|slot| !slot.band.is_point());
        slots
    }

    /// This supply with every band at one of its ends, or where `choose` answers `None`, at its nominal value.
    #[must_use]
    pub fn at_ends(&self, mut choose: impl FnMut(&str) -> Option<End>) -> Self {
        let mut parts = self.clone().into_parts();
        walk(&mut parts, &mut |visit, band| {
            if !band.is_point() {
                *band = band.collapsed(choose(visit.pointer).unwrap_or(End::Nominal));
            }
        });
        Self { parts }
    }

    /// This supply with some of its bands at values within them, and every other band nominal. A value outside its band counts as the
    /// nearest end, so that what comes back is as sound as this supply is.
    #[must_use]
    pub fn at_values(&self, values: &[(&str, f64)]) -> Self {
        let mut parts = self.clone().into_parts();
        walk(&mut parts, &mut |visit, band| {
            let chosen = values.iter().find(|(pointer, _)| *pointer == visit.pointer);
            let value = chosen.map_or(band.nominal(), |(_, value)| value.clamp(band.low(), band.high()));
            *band = Band::point(value).unwrap_or(band.collapsed(End::Nominal));
        });
        Self { parts }
    }

    /// This supply with some quantities replaced; all others are kept as they are.
    ///
    /// # Errors
    /// A fault for every pointer that leads to no quantity and for every rule that the new values break.
    pub fn with(&self, values: &[(&str, Band)]) -> Result<Self, Vec<Fault>> {
        let mut parts = self.clone().into_parts();
        let mut found = vec![false; values.len()];
        walk(&mut parts, &mut |visit, band| {
            for (index, (pointer, value)) in values.iter().enumerate() {
                if *pointer == visit.pointer {
                    *band = *value;
                    found[index] = true;
                }
            }
        });
        let missing: Vec<Fault> = values
            .iter()
            .zip(&found)
            .filter(|(_, found)| !**found)
            .map(|((pointer, _), _)| Fault::new(*pointer, "is not a quantity of this supply"))
            .collect();
        if missing.is_empty() {
            Self::new(parts)
        } else {
            Err(missing)
        }
    }

    /// The quantity at `pointer`.
    ///
    /// # Errors
    /// [`NoSuchQuantity`] where the pointer leads to none.
    pub fn quantity(&self, pointer: &str) -> Result<Slot, NoSuchQuantity> {
        self.slots()
            .into_iter()
            .find(|slot| slot.pointer == pointer)
            .ok_or_else(|| NoSuchQuantity {
                pointer: pointer.to_owned(),
            })
    }
}
