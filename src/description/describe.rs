//! A supply in its published form.

use super::form;
use super::quantities as q;
use crate::quantity::Band;
use crate::supply::{
    Capacitor, Circuit, Diode, Line, Load, Output, Phases, Rail, Rectifier, Section, Supply, Surroundings, Transformer,
    Winding, WindingValues,
};

/// The published form of a supply. It reads back to the same supply, bit for bit; what has its default is left out.
#[must_use]
pub fn describe(supply: &Supply) -> form::Supply {
    form::Supply {
        name: supply.name().map(str::to_owned),
        line: line(supply.line()),
        transformer: supply.transformer().map(transformer),
        outputs: supply.outputs().iter().map(output).collect(),
        surroundings: (*supply.surroundings() != Surroundings::default()).then(|| form::Surroundings {
            ambient: Some(q::Temperature::of(&supply.surroundings().ambient)),
        }),
    }
}

fn unless_zero<T>(band: &Band, write: impl Fn(&Band) -> T) -> Option<T> {
    (*band != Band::ZERO).then(|| write(band))
}

fn line(line: &Line) -> form::Line {
    form::Line {
        voltage: q::Voltage::of(&line.voltage),
        frequency: q::Frequency::of(&line.frequency),
        phases: (line.phases == Phases::Three).then_some(3),
        resistance: unless_zero(&line.resistance, q::Resistance::of),
        inductance: unless_zero(&line.inductance, q::Inductance::of),
        harmonics: line
            .harmonics
            .iter()
            .map(|harmonic| form::Harmonic {
                order: harmonic.order,
                fraction: q::Ratio::of(&harmonic.fraction),
                phase: unless_zero(&harmonic.phase, q::Angle::of),
            })
            .collect(),
    }
}

fn transformer(transformer: &Transformer) -> form::Transformer {
    form::Transformer {
        primary_voltage: q::Voltage::of(&transformer.primary_voltage),
        primary_resistance: transformer.primary_resistance.as_ref().map(q::Resistance::of),
        primary_leakage_inductance: unless_zero(&transformer.primary_leakage_inductance, q::Inductance::of),
        windings: transformer.windings.iter().map(winding).collect(),
        regulation: transformer.regulation.as_ref().map(q::Ratio::of),
        rating: transformer.rating.as_ref().map(q::ApparentPower::of),
        core_loss: transformer.core_loss.as_ref().map(q::Power::of),
    }
}

fn winding(winding: &Winding) -> form::Winding {
    let mut out = form::Winding {
        open_circuit_voltage: None,
        resistance: None,
        rated_voltage: None,
        rated_current: None,
        leakage_inductance: unless_zero(&winding.leakage_inductance, q::Inductance::of),
    };
    match &winding.values {
        WindingValues::Measured {
            open_circuit_voltage,
            resistance,
        } => {
            out.open_circuit_voltage = Some(q::Voltage::of(open_circuit_voltage));
            out.resistance = Some(q::Resistance::of(resistance));
        }
        WindingValues::Nameplate {
            rated_voltage,
            rated_current,
        } => {
            out.rated_voltage = Some(q::Voltage::of(rated_voltage));
            out.rated_current = Some(q::Current::of(rated_current));
        }
    }
    out
}

fn output(output: &Output) -> form::Output {
    form::Output {
        winding: (output.winding != 0).then_some(output.winding as u32),
        rectifier: rectifier(&output.rectifier),
        rails: output.rails.iter().map(rail).collect(),
    }
}

fn rectifier(rectifier: &Rectifier) -> form::Rectifier {
    form::Rectifier {
        circuit: circuit(rectifier.circuit),
        diode: diode(&rectifier.diode),
        stack: rectifier.stack.as_ref().map(capacitor),
        coupling: rectifier.coupling.as_ref().map(capacitor),
    }
}

/// A circuit's published name.
#[must_use]
pub fn circuit(circuit: Circuit) -> form::Circuit {
    match circuit {
        Circuit::HalfWave => form::Circuit::HalfWave,
        Circuit::Bridge => form::Circuit::Bridge,
        Circuit::CentreTap => form::Circuit::CentreTap,
        Circuit::SplitBridge => form::Circuit::SplitBridge,
        Circuit::FullWaveDoubler => form::Circuit::FullWaveDoubler,
        Circuit::HalfWaveDoubler => form::Circuit::HalfWaveDoubler,
        Circuit::ThreePhaseHalfWave => form::Circuit::ThreePhaseHalfWave,
        Circuit::ThreePhaseBridge => form::Circuit::ThreePhaseBridge,
    }
}

/// A diode in its published form.
#[must_use]
pub fn diode(diode: &Diode) -> form::Diode {
    let ratings = &diode.ratings;
    form::Diode {
        threshold_voltage: q::Voltage::of(&diode.threshold_voltage),
        slope_resistance: q::Resistance::of(&diode.slope_resistance),
        ratings: (*ratings != Default::default()).then(|| form::DiodeRatings {
            reverse_voltage: ratings.reverse_voltage.as_ref().map(q::Voltage::of),
            current_mean: ratings.current_mean.as_ref().map(q::Current::of),
            current_rms: ratings.current_rms.as_ref().map(q::Current::of),
            current_surge: ratings.current_surge.as_ref().map(q::Current::of),
        }),
    }
}

fn capacitor(capacitor: &Capacitor) -> form::Capacitor {
    let ratings = &capacitor.ratings;
    form::Capacitor {
        capacitance: q::Capacitance::of(&capacitor.capacitance),
        esr: q::Resistance::of(&capacitor.esr),
        count: (capacitor.count != 1).then_some(capacitor.count),
        ratings: (*ratings != Default::default()).then(|| form::CapacitorRatings {
            voltage: ratings.voltage.as_ref().map(q::Voltage::of),
            ripple_current: ratings.ripple_current.as_ref().map(q::Current::of),
            endurance: ratings.endurance.as_ref().map(q::Life::of),
            temperature: ratings.temperature.as_ref().map(q::Temperature::of),
        }),
    }
}

fn rail(rail: &Rail) -> form::Rail {
    form::Rail {
        filter: rail.filter.iter().map(section).collect(),
        load: load(&rail.load),
    }
}

fn section(section: &Section) -> form::Section {
    form::Section {
        series: section.series.as_ref().map(|series| form::Series {
            resistance: unless_zero(&series.resistance, q::Resistance::of),
            inductance: unless_zero(&series.inductance, q::Inductance::of),
        }),
        capacitor: section.capacitor.as_ref().map(capacitor),
    }
}

fn load(load: &Load) -> form::Load {
    form::Load(match load {
        Load::Resistance { resistance } => form::LoadKind::Resistance {
            resistance: q::Resistance::of(resistance),
        },
        Load::Current { current } => form::LoadKind::Current {
            current: q::Current::of(current),
        },
        Load::Regulator {
            output_voltage,
            output_current,
            dropout,
            quiescent_current,
        } => form::LoadKind::Regulator {
            output_voltage: q::Voltage::of(output_voltage),
            output_current: q::Current::of(output_current),
            dropout: q::Voltage::of(dropout),
            quiescent_current: unless_zero(quiescent_current, q::Current::of),
        },
        Load::Open => form::LoadKind::Open {},
    })
}
