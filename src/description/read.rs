//! A supply from its description.

use super::fields::{Faults, Fields, Place};
use super::json::Json;
use crate::quantity::{Band, Dimension as D};
use crate::supply::{
    Capacitor, CapacitorRatings, Circuit, Diode, DiodeRatings, Fault, Harmonic, Line, Load, Output, Parts, Phases,
    Rail, Rectifier, Section, Series, Supply, Surroundings, Transformer, Winding, WindingValues,
};

/// Reads a supply.
///
/// # Errors
/// Every fault found, with its pointer inside the supply: of shape first, and where the shape is sound, of the supply as
/// a whole.
pub fn read_supply(json: &Json) -> Result<Supply, Vec<Fault>> {
    let faults = Faults::default();
    let parts = supply(&Place::new(json, "", &faults));
    Supply::new(faults.settle(parts)?)
}

fn supply(place: &Place<'_>) -> Option<Parts> {
    let mut f = place.object()?;
    let name = match f.optional("name") {
        None => Some(None),
        Some(place) => name(&place).map(Some),
    };
    let line = f.required("line").and_then(|p| line(&p));
    let transformer = match f.optional("transformer") {
        None => Some(None),
        Some(place) => transformer(&place).map(Some),
    };
    let outputs = f.required("outputs").and_then(|p| read_each(&p, output));
    let surroundings = match f.optional("surroundings") {
        None => Some(Surroundings::default()),
        Some(place) => surroundings(&place),
    };
    f.finish("a supply");
    Some(Parts {
        name: name?,
        line: line?,
        transformer: transformer?,
        outputs: outputs?,
        surroundings: surroundings?,
    })
}

fn name(place: &Place<'_>) -> Option<String> {
    let text = place.text()?;
    if text.chars().count() > crate::bounds::NAME_MAXIMUM {
        place.fault(format!("must be at most {} characters", crate::bounds::NAME_MAXIMUM));
        return None;
    }
    if text.chars().any(char::is_control) {
        place.fault("must not contain control characters");
        return None;
    }
    Some(text.to_owned())
}

/// Reads every item of an array; `None` where one of them is faulty, all of them looked at.
pub fn read_each<T>(place: &Place<'_>, read: impl Fn(&Place<'_>) -> Option<T>) -> Option<Vec<T>> {
    let items: Vec<Option<T>> = place.list()?.iter().map(read).collect();
    items.into_iter().collect()
}

/// Reads a line; also part of a need.
pub fn line(place: &Place<'_>) -> Option<Line> {
    let mut f = place.object()?;
    let voltage = f.band("voltage", D::Voltage);
    let frequency = f.band("frequency", D::Frequency);
    let phases = match f.optional("phases") {
        None => Some(Phases::One),
        Some(place) => phases(&place),
    };
    let resistance = f.band_or("resistance", D::Resistance, Band::ZERO);
    let inductance = f.band_or("inductance", D::Inductance, Band::ZERO);
    let harmonics = match f.optional("harmonics") {
        None => Some(Vec::new()),
        Some(place) => read_each(&place, harmonic),
    };
    f.finish("a line");
    Some(Line {
        voltage: voltage?,
        frequency: frequency?,
        phases: phases?,
        resistance: resistance?,
        inductance: inductance?,
        harmonics: harmonics?,
    })
}

fn phases(place: &Place<'_>) -> Option<Phases> {
    match place.integer(1..=3)? {
        1 => Some(Phases::One),
        3 => Some(Phases::Three),
        _ => {
            place.fault("must be 1 or 3");
            None
        }
    }
}

fn harmonic(place: &Place<'_>) -> Option<Harmonic> {
    let mut f = place.object()?;
    let order = f
        .required("order")
        .and_then(|p| p.integer(2..=u64::from(crate::bounds::HARMONIC_ORDER_MAXIMUM)));
    let fraction = f.band("fraction", D::Ratio);
    let phase = f.band_or("phase", D::Angle, Band::ZERO);
    f.finish("a harmonic");
    Some(Harmonic {
        order: u32::try_from(order?).ok()?,
        fraction: fraction?,
        phase: phase?,
    })
}

/// Notes `"part"` in a component's place: this version keeps no parts list.
fn no_part(f: &mut Fields<'_>) {
    if let Some(place) = f.optional("part") {
        place.fault("this version keeps no parts list; give the component's values");
    }
}

fn transformer(place: &Place<'_>) -> Option<Transformer> {
    let mut f = place.object()?;
    no_part(&mut f);
    let primary_voltage = f.band("primary_voltage", D::Voltage);
    let primary_resistance = f.band_if("primary_resistance", D::Resistance);
    let leakage = f.band_or("primary_leakage_inductance", D::Inductance, Band::ZERO);
    let windings = f.required("windings").and_then(|p| read_each(&p, winding));
    let regulation = f.band_if("regulation", D::Ratio);
    let rating = f.band_if("rating", D::ApparentPower);
    let core_loss = f.band_if("core_loss", D::Power);
    f.finish("a transformer");
    Some(Transformer {
        primary_voltage: primary_voltage?,
        primary_resistance: primary_resistance?,
        primary_leakage_inductance: leakage?,
        windings: windings?,
        regulation: regulation?,
        rating: rating?,
        core_loss: core_loss?,
    })
}

fn winding(place: &Place<'_>) -> Option<Winding> {
    let mut f = place.object()?;
    let open_circuit_voltage = f.band_if("open_circuit_voltage", D::Voltage);
    let resistance = f.band_if("resistance", D::Resistance);
    let rated_voltage = f.band_if("rated_voltage", D::Voltage);
    let rated_current = f.band_if("rated_current", D::Current);
    let leakage = f.band_or("leakage_inductance", D::Inductance, Band::ZERO);
    f.finish("a winding");
    let values = match (open_circuit_voltage?, resistance?, rated_voltage?, rated_current?) {
        (Some(open_circuit_voltage), Some(resistance), None, None) => WindingValues::Measured {
            open_circuit_voltage,
            resistance,
        },
        (None, None, Some(rated_voltage), Some(rated_current)) => WindingValues::Nameplate {
            rated_voltage,
            rated_current,
        },
        _ => {
            place.fault(
                "needs open_circuit_voltage and resistance, or rated_voltage and rated_current, and no other pair",
            );
            return None;
        }
    };
    Some(Winding {
        values,
        leakage_inductance: leakage?,
    })
}

fn output(place: &Place<'_>) -> Option<Output> {
    let mut f = place.object()?;
    let most = crate::bounds::WINDINGS_MAXIMUM as u64;
    let winding = f.integer_or("winding", 0..=most, 0);
    let rectifier = f.required("rectifier").and_then(|p| rectifier(&p));
    let rails = f.required("rails").and_then(|p| read_each(&p, rail));
    f.finish("an output");
    Some(Output {
        winding: usize::try_from(winding?).ok()?,
        rectifier: rectifier?,
        rails: rails?,
    })
}

/// Reads the name of a circuit.
pub fn circuit(place: &Place<'_>) -> Option<Circuit> {
    let names: Vec<&'static str> = Circuit::ALL.iter().map(|c| c.name()).collect();
    let word = place.word(&names)?;
    Circuit::ALL.into_iter().find(|c| c.name() == word)
}

fn rectifier(place: &Place<'_>) -> Option<Rectifier> {
    let mut f = place.object()?;
    let circuit = f.required("circuit").and_then(|p| circuit(&p));
    let diode = f.required("diode").and_then(|p| diode(&p));
    let stack = optional_capacitor(&mut f, "stack");
    let coupling = optional_capacitor(&mut f, "coupling");
    f.finish("a rectifier");
    Some(Rectifier {
        circuit: circuit?,
        diode: diode?,
        stack: stack?,
        coupling: coupling?,
    })
}

fn optional_capacitor(f: &mut Fields<'_>, field: &'static str) -> Option<Option<Capacitor>> {
    match f.optional(field) {
        None => Some(None),
        Some(place) => capacitor(&place).map(Some),
    }
}

/// Reads a diode; also an assumption of a need.
pub fn diode(place: &Place<'_>) -> Option<Diode> {
    let mut f = place.object()?;
    no_part(&mut f);
    if let Some(points) = f.optional("points") {
        points.fault("this version solves straight-line diodes only; give threshold_voltage and slope_resistance");
    }
    let threshold_voltage = f.band("threshold_voltage", D::Voltage);
    let slope_resistance = f.band("slope_resistance", D::Resistance);
    let ratings = match f.optional("ratings") {
        None => Some(DiodeRatings::default()),
        Some(place) => diode_ratings(&place),
    };
    f.finish("a diode");
    Some(Diode {
        threshold_voltage: threshold_voltage?,
        slope_resistance: slope_resistance?,
        ratings: ratings?,
    })
}

fn diode_ratings(place: &Place<'_>) -> Option<DiodeRatings> {
    let mut f = place.object()?;
    let reverse_voltage = f.band_if("reverse_voltage", D::Voltage);
    let current_mean = f.band_if("current_mean", D::Current);
    let current_rms = f.band_if("current_rms", D::Current);
    let current_surge = f.band_if("current_surge", D::Current);
    f.finish("the ratings of a diode");
    Some(DiodeRatings {
        reverse_voltage: reverse_voltage?,
        current_mean: current_mean?,
        current_rms: current_rms?,
        current_surge: current_surge?,
    })
}

fn capacitor(place: &Place<'_>) -> Option<Capacitor> {
    let mut f = place.object()?;
    no_part(&mut f);
    let capacitance = f.band("capacitance", D::Capacitance);
    let esr = f.band("esr", D::Resistance);
    let count = f.integer_or("count", 1..=u64::from(crate::bounds::COUNT_MAXIMUM), 1);
    let ratings = match f.optional("ratings") {
        None => Some(CapacitorRatings::default()),
        Some(place) => capacitor_ratings(&place),
    };
    f.finish("a capacitor");
    Some(Capacitor {
        capacitance: capacitance?,
        esr: esr?,
        count: u32::try_from(count?).ok()?,
        ratings: ratings?,
    })
}

fn capacitor_ratings(place: &Place<'_>) -> Option<CapacitorRatings> {
    let mut f = place.object()?;
    let voltage = f.band_if("voltage", D::Voltage);
    let ripple_current = f.band_if("ripple_current", D::Current);
    let endurance = f.band_if("endurance", D::Life);
    let temperature = f.band_if("temperature", D::Temperature);
    f.finish("the ratings of a capacitor");
    Some(CapacitorRatings {
        voltage: voltage?,
        ripple_current: ripple_current?,
        endurance: endurance?,
        temperature: temperature?,
    })
}

fn rail(place: &Place<'_>) -> Option<Rail> {
    let mut f = place.object()?;
    let filter = match f.optional("filter") {
        None => Some(Vec::new()),
        Some(place) => read_each(&place, section),
    };
    let load = f.required("load").and_then(|p| load(&p));
    f.finish("a rail");
    Some(Rail {
        filter: filter?,
        load: load?,
    })
}

fn section(place: &Place<'_>) -> Option<Section> {
    let mut f = place.object()?;
    let series = match f.optional("series") {
        None => Some(None),
        Some(place) => series(&place).map(Some),
    };
    let capacitor = optional_capacitor(&mut f, "capacitor");
    f.finish("a filter section");
    Some(Section {
        series: series?,
        capacitor: capacitor?,
    })
}

fn series(place: &Place<'_>) -> Option<Series> {
    let mut f = place.object()?;
    no_part(&mut f);
    let resistance = f.band_or("resistance", D::Resistance, Band::ZERO);
    let inductance = f.band_or("inductance", D::Inductance, Band::ZERO);
    f.finish("a series part");
    Some(Series {
        resistance: resistance?,
        inductance: inductance?,
    })
}

/// Reads a load; also part of a need.
pub fn load(place: &Place<'_>) -> Option<Load> {
    let mut f = place.object()?;
    let kind = f.required("kind");
    if let Some(place) = kind.as_ref().filter(|p| p.text() == Some("power")) {
        place.fault(
            "this version solves no constant-power loads yet; resistance, current, regulator and open are solved",
        );
        return None;
    }
    let load = match kind?.word(&["resistance", "current", "regulator", "open"])? {
        "resistance" => f
            .band("resistance", D::Resistance)
            .map(|resistance| Load::Resistance { resistance }),
        "current" => f.band("current", D::Current).map(|current| Load::Current { current }),
        "regulator" => regulator(&mut f),
        _ => Some(Load::Open),
    };
    f.finish("this load");
    load
}

fn regulator(f: &mut Fields<'_>) -> Option<Load> {
    let output_voltage = f.band("output_voltage", D::Voltage);
    let output_current = f.band("output_current", D::Current);
    let dropout = f.band("dropout", D::Voltage);
    let quiescent_current = f.band_or("quiescent_current", D::Current, Band::ZERO);
    Some(Load::Regulator {
        output_voltage: output_voltage?,
        output_current: output_current?,
        dropout: dropout?,
        quiescent_current: quiescent_current?,
    })
}

/// Reads the surroundings; also part of a need.
pub fn surroundings(place: &Place<'_>) -> Option<Surroundings> {
    let mut f = place.object()?;
    let ambient = f.band_or("ambient", D::Temperature, Surroundings::default().ambient);
    f.finish("the surroundings");
    Some(Surroundings { ambient: ambient? })
}
