//! Preferred ratings for a supply that holds.

use super::Need;
use super::size::Nameplate;
use crate::policy::{Policy, Quantity, Subject, Worst, subjects};
use crate::quantity::next_up;
use crate::supply::Supply;
use crate::worst_case::Attained;

/// Rated voltages of electrolytic capacitors in volts; common practice, after IEC 60063's R5 and R10 steps.
const CAPACITOR_VOLTAGES: [f64; 15] = [
    6.3, 10.0, 16.0, 25.0, 35.0, 50.0, 63.0, 80.0, 100.0, 160.0, 200.0, 250.0, 350.0, 400.0, 450.0,
];
/// Repetitive reverse voltages of rectifier diodes in volts; common practice.
const REVERSE_VOLTAGES: [f64; 9] = [50.0, 100.0, 200.0, 400.0, 600.0, 800.0, 1000.0, 1200.0, 1600.0];
/// Mean forward currents of rectifier diodes in amperes; common practice.
const MEAN_CURRENTS: [f64; 15] = [
    0.5, 1.0, 1.5, 2.0, 3.0, 4.0, 6.0, 8.0, 10.0, 15.0, 25.0, 35.0, 50.0, 80.0, 100.0,
];
/// Preferred fuse ratings of IEC 60127 in amperes (from memory).
const FUSES: [f64; 24] = [
    0.032, 0.04, 0.05, 0.063, 0.08, 0.1, 0.125, 0.16, 0.2, 0.25, 0.315, 0.4, 0.5, 0.63, 0.8, 1.0, 1.25, 1.6, 2.0, 2.5,
    3.15, 4.0, 5.0, 6.3,
];
/// Part of its rating that a fuse carries in continuous duty: the habit for fuses rated to open at 1.35 times (UL 248-14), safe for
/// those that must hold 1.5 times for an hour (IEC 60127).
const FUSE_LOADING: f64 = 0.75;

/// One requirement on a part, and the preferred value that meets it.
#[derive(Clone, Debug, PartialEq)]
pub struct Pick {
    /// JSON Pointer of the component inside the supply; `/line` for the fuse.
    pub component: String,
    /// What is required.
    pub quantity: &'static str,
    /// The stress at the worst corner.
    pub stress: f64,
    /// Fraction of the rating that the policy allows.
    pub factor: f64,
    /// The least that will do: stress over factor.
    pub required: f64,
    /// The preferred value, where the quantity has preferred values.
    pub chosen: Option<f64>,
    /// Unit of all of them.
    pub unit: &'static str,
    /// The corner that asks for it.
    pub at: Vec<Attained>,
    /// Where the preferred values or the requirement come from.
    pub source: &'static str,
}

/// A rating that no preferred value reaches.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Unreachable {
    pub(super) quantity: &'static str,
    pub(super) required: f64,
    pub(super) largest: f64,
    pub(super) unit: &'static str,
}

/// Picks a preferred value for every rating of the supply. `stress` gives a subject's worst stress and its corner.
pub(super) fn ratings(
    supply: &Supply,
    policy: &Policy,
    stress: impl Fn(&Subject) -> Option<Worst>,
) -> Result<Vec<Pick>, Unreachable> {
    let mut picks = Vec::new();
    for subject in subjects(supply) {
        if subject.quantity == Quantity::TransformerApparentPower {
            continue;
        }
        let Some((value, at)) = stress(&subject) else { continue };
        let factor = policy
            .rules
            .iter()
            .find(|r| r.quantity == subject.quantity)
            .map_or(1.0, |r| r.factor);
        let required = value / factor;
        let (list, source): (&[f64], _) = match subject.quantity {
            Quantity::DiodeReverseVoltage => (&REVERSE_VOLTAGES, "preferred reverse voltages, common practice"),
            Quantity::DiodeCurrentMean => (&MEAN_CURRENTS, "preferred mean currents, common practice"),
            Quantity::CapacitorVoltage => (&CAPACITOR_VOLTAGES, "preferred capacitor voltages, common practice"),
            Quantity::DiodeCurrentSurge => (&[], "largest diode current at switch-on at the worst angle of the line"),
            _ => (&[], "rms value at the worst corner"),
        };
        let chosen = next_up(list, required);
        if !list.is_empty() && chosen.is_none() {
            return Err(Unreachable {
                quantity: subject.quantity.name(),
                required,
                largest: list[list.len() - 1],
                unit: subject.quantity.unit(),
            });
        }
        picks.push(Pick {
            component: subject.component,
            quantity: subject.quantity.name(),
            stress: value,
            factor,
            required,
            chosen,
            unit: subject.quantity.unit(),
            at,
            source,
        });
    }
    Ok(picks)
}

/// The transformer's requirements.
pub(super) fn transformer(plate: Nameplate, exact: Nameplate, valley: &[Attained], current: &[Attained]) -> Vec<Pick> {
    let pick = |quantity, required: f64, chosen: f64, unit, at: &[Attained], source| Pick {
        component: "/transformer".to_owned(),
        quantity,
        stress: required,
        factor: 1.0,
        required,
        chosen: Some(chosen),
        unit,
        at: at.to_vec(),
        source,
    };
    vec![
        pick(
            "open_circuit_voltage",
            exact.voltage * (1.0 + exact.regulation),
            plate.voltage * (1.0 + plate.regulation),
            "V",
            valley,
            "lowest winding voltage, of each half of a tap, that holds the valley at the worst corner",
        ),
        pick(
            "rated_voltage",
            exact.voltage,
            plate.voltage,
            "V",
            valley,
            "the same at rated current",
        ),
        pick(
            "apparent_power",
            exact.rating,
            plate.rating,
            "VA",
            current,
            "rated voltage times the largest rms winding current; R10 step of ISO 3",
        ),
        pick(
            "regulation",
            exact.regulation,
            plate.regulation,
            "1",
            current,
            "assumed relation of regulation to rating",
        ),
    ]
}

/// The resistances that the nameplate stands for: what a transformer may have at the most.
pub(super) fn resistances(supply: &Supply) -> Vec<Pick> {
    let Some(derived) = supply.derived_transformer() else {
        return Vec::new();
    };
    let pick = |quantity, ohms: f64| Pick {
        component: "/transformer".to_owned(),
        quantity,
        stress: ohms,
        factor: 1.0,
        required: ohms,
        chosen: None,
        unit: "ohm",
        at: Vec::new(),
        source: "half of the assumed regulation to each side; the most that the winding may have",
    };
    let windings = derived
        .windings
        .iter()
        .map(|winding| pick("winding_resistance", winding.resistance));
    std::iter::once(pick("primary_resistance", derived.primary_resistance))
        .chain(windings)
        .collect()
}

/// The line fuse.
pub(super) fn fuse(need: &Need, current: f64, at: Vec<Attained>) -> Pick {
    let three = need.line.phases == crate::supply::Phases::Three;
    Pick {
        component: "/line".to_owned(),
        quantity: "fuse_current",
        stress: current,
        factor: FUSE_LOADING,
        required: current / FUSE_LOADING,
        chosen: next_up(&FUSES, current / FUSE_LOADING),
        unit: "A",
        at,
        source: if three {
            "IEC 60127 ratings, one a phase; confirm the time-current characteristic against switch-on"
        } else {
            "IEC 60127 ratings; confirm the time-current characteristic against switch-on"
        },
    }
}
