//! What is assumed of parts that are not chosen yet. Every assumption is stated with the answer and can be overridden.

use crate::quantity::Band;
use crate::supply::{Diode, DiodeRatings};

/// One point of a relation between rating and regulation.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct RegulationPoint {
    /// Volt-amperes.
    pub rating: f64,
    /// Regulation as a fraction.
    pub regulation: f64,
}

/// Assumptions of a design.
#[derive(Clone, Debug, PartialEq)]
pub struct Assumptions {
    /// Regulation against rating, rising ratings; straight lines on logarithmic axes between the points, level beyond them.
    pub regulation: Vec<RegulationPoint>,
    /// Diode line; ratings are chosen.
    pub diode: Diode,
    /// Tolerance of capacitors, as a fraction either way.
    pub capacitance_tolerance: f64,
    /// Loss factor of capacitors at the ripple frequency: the loss resistance is that over the reactance.
    pub loss_factor: f64,
}

impl Default for Assumptions {
    fn default() -> Self {
        let point = |rating, regulation| RegulationPoint { rating, regulation };
        Self {
            // Common practice for small mains transformers: near 0.4 (S / 1 VA)^-0.3.
            regulation: vec![
                point(1.0, 0.40),
                point(10.0, 0.20),
                point(100.0, 0.10),
                point(1000.0, 0.05),
            ],
            // A silicon diode of a few amperes; common practice.
            diode: Diode {
                threshold_voltage: Band::exactly(0.8),
                slope_resistance: Band::exactly(0.02),
                ratings: DiodeRatings::default(),
            },
            // IEC 60384-4: the common tolerance of aluminium electrolytics (from memory).
            capacitance_tolerance: 0.2,
            // Aluminium electrolytics at 100 Hz; common practice.
            loss_factor: 0.15,
        }
    }
}

impl Assumptions {
    /// Regulation of a transformer of a rating in volt-amperes.
    #[must_use]
    pub fn regulation_at(&self, rating: f64) -> f64 {
        let points = &self.regulation;
        let Some(after) = points.iter().position(|p| p.rating >= rating) else {
            return points.last().map_or(0.1, |p| p.regulation);
        };
        if after == 0 {
            return points[0].regulation;
        }
        let (a, b) = (points[after - 1], points[after]);
        let share = (rating / a.rating).ln() / (b.rating / a.rating).ln();
        a.regulation * (b.regulation / a.regulation).powf(share)
    }
}
