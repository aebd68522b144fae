//! Random supplies: every circuit, every load, bands of every shape, values with all their digits.

use crate::bounds::{self, Range};
use crate::quantity::Band;
use crate::supply::{
    Capacitor, CapacitorRatings, Circuit, Diode, DiodeRatings, Harmonic, Line, Load, Output, Parts, Phases, Rail,
    Rectifier, Section, Series, Supply, Surroundings, Transformer, Winding, WindingValues,
};
use proptest::collection::vec;
use proptest::option;
use proptest::prelude::*;
use proptest::sample::select;

/// A value of a range, with random digits or a few of them.
fn value(range: Range) -> BoxedStrategy<f64> {
    let (low, high) = (range.minimum, range.maximum);
    let any = (low.ln()..=high.ln()).prop_map(move |x| x.exp().clamp(low, high));
    let round = any.clone().prop_map(move |x| {
        let text = format!("{x:.2e}");
        text.parse().unwrap_or(x).clamp(low, high)
    });
    prop_oneof![any, round].boxed()
}

fn sorted(mut three: [f64; 3]) -> Band {
    three.sort_by(f64::total_cmp);
    Band::new(three[0], three[1], three[2]).expect("in order")
}

/// A band within a range.
fn band(range: Range) -> BoxedStrategy<Band> {
    let one = value(range).prop_map(Band::exactly);
    let three = [value(range), value(range), value(range)].prop_map(sorted);
    let near = (value(range), 0.0..0.5_f64, 0.0..0.5_f64).prop_map(move |(x, down, up)| {
        let low = (x - x * down).max(range.minimum);
        Band::new(low, x, (x + x * up).min(range.maximum)).expect("in order")
    });
    let percent = (value(range), 1..100_i32).prop_map(move |(x, p)| {
        let share = f64::from(p) / 100.0;
        let low = (x - x * share).max(range.minimum);
        Band::new(low, x, (x + x * share).min(range.maximum)).expect("in order")
    });
    if range.zero {
        let from_zero = value(range).prop_map(|x| Band::new(0.0, x, x).expect("in order"));
        prop_oneof![one, three, near, percent, from_zero, Just(Band::ZERO)].boxed()
    } else {
        prop_oneof![one, three, near, percent].boxed()
    }
}

/// A band between two plain numbers, negative ones too.
fn between(low: f64, high: f64) -> BoxedStrategy<Band> {
    let three = [low..high, low..high, low..high].prop_map(sorted);
    prop_oneof![
        (low..high).prop_map(Band::exactly),
        three,
        (low.ceil() as i32..high as i32).prop_map(|x| Band::exactly(f64::from(x)))
    ]
    .boxed()
}

fn temperature() -> BoxedStrategy<Band> {
    between(bounds::TEMPERATURE_MINIMUM, bounds::TEMPERATURE_MAXIMUM)
}

fn line(phases: Phases) -> BoxedStrategy<Line> {
    let orders = proptest::sample::subsequence((2..=bounds::HARMONIC_ORDER_MAXIMUM).collect::<Vec<u32>>(), 0..4);
    let angle = || between(-bounds::ANGLE_MAXIMUM, bounds::ANGLE_MAXIMUM);
    let harmonic = (band(bounds::HARMONIC_FRACTION), angle());
    let harmonics = (orders, vec(harmonic, 4)).prop_map(|(orders, values)| {
        let pairs = orders.into_iter().zip(values);
        pairs
            .map(|(order, (fraction, phase))| Harmonic { order, fraction, phase })
            .collect::<Vec<_>>()
    });
    (
        band(bounds::VOLTAGE),
        band(bounds::FREQUENCY),
        band(bounds::RESISTANCE_OR_ZERO),
        band(bounds::INDUCTANCE_OR_ZERO),
        harmonics,
    )
        .prop_map(move |(voltage, frequency, resistance, inductance, harmonics)| Line {
            voltage,
            frequency,
            phases,
            resistance,
            inductance,
            harmonics,
        })
        .boxed()
}

fn windings(count: usize, nameplate: bool) -> BoxedStrategy<Vec<Winding>> {
    let values = if nameplate {
        (band(bounds::VOLTAGE), band(bounds::CURRENT))
            .prop_map(|(rated_voltage, rated_current)| WindingValues::Nameplate {
                rated_voltage,
                rated_current,
            })
            .boxed()
    } else {
        (band(bounds::VOLTAGE), band(bounds::RESISTANCE_OR_ZERO))
            .prop_map(|(open_circuit_voltage, resistance)| WindingValues::Measured {
                open_circuit_voltage,
                resistance,
            })
            .boxed()
    };
    let winding = (values, band(bounds::INDUCTANCE_OR_ZERO)).prop_map(|(values, leakage_inductance)| Winding {
        values,
        leakage_inductance,
    });
    vec(winding, count).boxed()
}

fn transformer(count: usize) -> BoxedStrategy<Transformer> {
    let wound = any::<bool>().prop_flat_map(move |nameplate| {
        let own = (band(bounds::RESISTANCE_OR_ZERO), band(bounds::REGULATION));
        (windings(count, nameplate), own).prop_map(move |(windings, (resistance, regulation))| {
            (
                windings,
                (!nameplate).then_some(resistance),
                nameplate.then_some(regulation),
            )
        })
    });
    (
        band(bounds::VOLTAGE),
        band(bounds::INDUCTANCE_OR_ZERO),
        wound,
        option::of(band(bounds::APPARENT_POWER)),
        option::of(band(bounds::POWER_OR_ZERO)),
    )
        .prop_map(|(primary_voltage, leakage, wound, rating, core_loss)| Transformer {
            primary_voltage,
            primary_resistance: wound.1,
            primary_leakage_inductance: leakage,
            windings: wound.0,
            regulation: wound.2,
            rating,
            core_loss,
        })
        .boxed()
}

fn diode() -> BoxedStrategy<Diode> {
    let current = || option::of(band(bounds::CURRENT));
    let ratings = (option::of(band(bounds::VOLTAGE)), current(), current(), current());
    (band(bounds::VOLTAGE_OR_ZERO), band(bounds::RESISTANCE_OR_ZERO), ratings)
        .prop_map(|(threshold_voltage, slope_resistance, ratings)| Diode {
            threshold_voltage,
            slope_resistance,
            ratings: DiodeRatings {
                reverse_voltage: ratings.0,
                current_mean: ratings.1,
                current_rms: ratings.2,
                current_surge: ratings.3,
            },
        })
        .boxed()
}

fn capacitor() -> BoxedStrategy<Capacitor> {
    let ratings = (
        option::of(band(bounds::VOLTAGE)),
        option::of(band(bounds::CURRENT)),
        option::of(band(bounds::LIFE)),
        option::of(temperature()),
    );
    (
        band(bounds::CAPACITANCE),
        band(bounds::RESISTANCE_OR_ZERO),
        1..=bounds::COUNT_MAXIMUM,
        ratings,
    )
        .prop_map(|(capacitance, esr, count, ratings)| Capacitor {
            capacitance,
            esr,
            count,
            ratings: CapacitorRatings {
                voltage: ratings.0,
                ripple_current: ratings.1,
                endurance: ratings.2,
                temperature: ratings.3,
            },
        })
        .boxed()
}

fn load() -> BoxedStrategy<Load> {
    let regulator = (
        band(bounds::VOLTAGE),
        band(bounds::CURRENT),
        band(bounds::VOLTAGE_OR_ZERO),
        band(bounds::CURRENT_OR_ZERO),
    );
    prop_oneof![
        band(bounds::RESISTANCE).prop_map(|resistance| Load::Resistance { resistance }),
        band(bounds::CURRENT_OR_ZERO).prop_map(|current| Load::Current { current }),
        regulator.prop_map(
            |(output_voltage, output_current, dropout, quiescent_current)| Load::Regulator {
                output_voltage,
                output_current,
                dropout,
                quiescent_current,
            }
        ),
        Just(Load::Open),
    ]
    .boxed()
}

fn rail() -> BoxedStrategy<Rail> {
    let series = (band(bounds::RESISTANCE_OR_ZERO), band(bounds::INDUCTANCE_OR_ZERO))
        .prop_map(|(resistance, inductance)| Series { resistance, inductance });
    let section = prop_oneof![
        capacitor().prop_map(|c| (None, Some(c))),
        series.clone().prop_map(|s| (Some(s), None)),
        (series, capacitor()).prop_map(|(s, c)| (Some(s), Some(c))),
    ];
    let section = section.prop_map(|(series, capacitor)| Section { series, capacitor });
    (vec(section, 0..3), load())
        .prop_map(|(filter, load)| Rail { filter, load })
        .boxed()
}

/// An output of a circuit on a winding.
fn output(circuit: Circuit, winding: usize) -> BoxedStrategy<Output> {
    let stack = matches!(circuit, Circuit::FullWaveDoubler | Circuit::HalfWaveDoubler);
    let coupling = circuit == Circuit::HalfWaveDoubler;
    (diode(), capacitor(), capacitor(), vec(rail(), circuit.rails()))
        .prop_map(move |(diode, one, other, rails)| Output {
            winding,
            rectifier: Rectifier {
                circuit,
                diode,
                stack: stack.then_some(one),
                coupling: coupling.then_some(other),
            },
            rails,
        })
        .boxed()
}

/// A winding for each of some outputs, and their circuits.
fn outputs(three_phase: bool, windings: usize) -> BoxedStrategy<Vec<Output>> {
    let taps = vec(any::<bool>(), windings.max(1));
    let places = vec((0..windings.max(1), any::<prop::sample::Index>()), 1..4);
    (taps, places)
        .prop_flat_map(move |(taps, places)| {
            let one = |(winding, index): (usize, prop::sample::Index)| {
                let tap = taps[winding] && windings > 0 && !three_phase;
                let fitting: Vec<Circuit> = Circuit::ALL
                    .into_iter()
                    .filter(|c| c.is_three_phase() == three_phase && c.needs_tap() == tap)
                    .collect();
                output(*index.get(&fitting), winding)
            };
            places.into_iter().map(one).collect::<Vec<_>>()
        })
        .boxed()
}

fn name() -> BoxedStrategy<Option<String>> {
    let letters = vec(select("aZ0 \"\\/~µΩ±-é漢😀".chars().collect::<Vec<char>>()), 0..20);
    option::of(letters.prop_map(|letters| letters.into_iter().collect())).boxed()
}

/// A sound supply.
pub(super) fn supply() -> BoxedStrategy<Supply> {
    (any::<bool>(), 0..3_usize)
        .prop_flat_map(|(three_phase, count)| {
            let phases = if three_phase { Phases::Three } else { Phases::One };
            let transformer = if count == 0 {
                Just(None).boxed()
            } else {
                transformer(count).prop_map(Some).boxed()
            };
            let ambient = prop_oneof![Just(Surroundings::default().ambient), temperature()];
            (name(), line(phases), transformer, outputs(three_phase, count), ambient)
        })
        .prop_map(|(name, line, transformer, outputs, ambient)| {
            let parts = Parts {
                name,
                line,
                transformer,
                outputs,
                surroundings: Surroundings { ambient },
            };
            Supply::new(parts).expect("sound by construction")
        })
        .boxed()
}
