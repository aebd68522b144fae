//! The search over circuits and capacitances.

use super::pick::{self, Pick};
use super::size::{Nameplate, Places, Sizing, load_current};
use super::{Minimise, Need};
use crate::figures::Figures;
use crate::policy::{Check, Policy, Subject, Whole, Worst, check, subjects};
use crate::quantity::{Band, Series};
use crate::supply::{Circuit, Supply};
use crate::worst_case::{Extremes, Range};

/// Capacitances tried for one circuit.
const CAPACITANCES_MAXIMUM: usize = 12;
/// Ripple, of the valley, at the largest and at the smallest capacitance tried.
const RIPPLE: (f64, f64) = (0.03, 0.6);

/// A supply that holds at every end of every band.
#[derive(Clone, Debug)]
pub struct Candidate {
    /// The supply, its parts rated.
    pub supply: Supply,
    /// What each part must bear, and the preferred value chosen.
    pub picks: Vec<Pick>,
    /// Extremes of all figures.
    pub worst_case: Extremes,
    /// Pointer and unit of each of them.
    pub pointers: Vec<(String, &'static str)>,
    /// The policy's checks.
    pub checks: Vec<Check>,
    /// What they amount to.
    pub verdict: Whole,
    /// What was minimised; the smaller the better.
    pub score: f64,
}

/// How near the nearest rejected supply came.
#[derive(Clone, Debug, PartialEq)]
pub struct Miss {
    /// Its circuit.
    pub circuit: Circuit,
    /// Its capacitance in farads.
    pub capacitance: f64,
    /// What it reached.
    pub value: f64,
    /// What was required.
    pub limit: f64,
    /// Unit of both.
    pub unit: &'static str,
}

/// Supplies that were rejected for one reason.
#[derive(Clone, Debug, PartialEq)]
pub struct Rejection {
    /// What stood in the way.
    pub reason: String,
    /// How many.
    pub count: usize,
    /// The nearest of them, where there is a measure.
    pub nearest: Option<Miss>,
}

/// What a search found.
#[derive(Clone, Debug)]
pub struct Outcome {
    /// The best, the best first.
    pub candidates: Vec<Candidate>,
    /// Supplies considered.
    pub considered: usize,
    /// Why the others fell away.
    pub rejected: Vec<Rejection>,
    /// Whether everything was considered that the search covers.
    pub complete: bool,
}

enum Verdict {
    Holds(Box<Candidate>),
    Rejected(String, Option<Miss>),
}

/// Searches. `solve` gives the figures of a supply without bands; `surge` the largest diode current of each output at switch-on,
/// worst over the corners, with the corner.
pub fn search<E: Send>(
    need: &Need,
    policy: &Policy,
    corners_maximum: usize,
    solve: &(impl Fn(&Supply) -> Result<Figures, E> + Sync),
    surge: &(impl Fn(&Supply) -> Result<Vec<Worst>, E> + Sync),
) -> Outcome {
    use rayon::prelude::*;
    let values = |supply: &Supply| solve(supply).map(|figures| figures.values());
    let cases: Vec<(Circuit, f64)> = need
        .circuits
        .iter()
        .flat_map(|&circuit| capacitances(need, circuit).into_iter().map(move |c| (circuit, c)))
        .collect();
    let verdicts: Vec<Verdict> = cases
        .par_iter()
        .map(|&(circuit, capacitance)| {
            let sizing = Sizing {
                need,
                circuit,
                capacitance,
                corners_maximum,
                solve: &values,
            };
            let failed = || Verdict::Rejected("no periodic solution at a corner".to_owned(), None);
            one(&sizing, policy, solve, surge).unwrap_or_else(|_| failed())
        })
        .collect();
    let mut outcome = Outcome {
        candidates: Vec::new(),
        considered: cases.len(),
        rejected: Vec::new(),
        complete: true,
    };
    for verdict in verdicts {
        match verdict {
            Verdict::Holds(candidate) => outcome.candidates.push(*candidate),
            Verdict::Rejected(reason, miss) => reject(&mut outcome.rejected, reason, miss),
        }
    }
    outcome.candidates.sort_by(|a, b| a.score.total_cmp(&b.score));
    outcome.candidates.truncate(need.limit);
    outcome
}

fn reject(list: &mut Vec<Rejection>, reason: String, miss: Option<Miss>) {
    let excess = |miss: &Miss| (miss.value / miss.limit - 1.0).abs();
    match list.iter_mut().find(|r| r.reason == reason) {
        None => list.push(Rejection {
            reason,
            count: 1,
            nearest: miss,
        }),
        Some(known) => {
            known.count += 1;
            let nearer = match (&known.nearest, &miss) {
                (Some(old), Some(new)) => excess(new) < excess(old),
                (None, Some(_)) => true,
                _ => false,
            };
            if nearer {
                known.nearest = miss;
            }
        }
    }
}

/// Preferred capacitances for a circuit: IEC 60063 E6, from large to small ripple by the sawtooth estimate.
fn capacitances(need: &Need, circuit: Circuit) -> Vec<f64> {
    let pulses = match circuit {
        Circuit::HalfWave => 1.0,
        Circuit::ThreePhaseHalfWave => 3.0,
        Circuit::ThreePhaseBridge => 6.0,
        _ => 2.0,
    };
    let frequency = pulses * need.line.frequency.nominal();
    let rail = need.rails.iter().map(|rail| {
        let current = load_current(&rail.load, rail.valley_min).max(1e-6);
        let largest = rail
            .ripple_pp_max
            .unwrap_or(f64::INFINITY)
            .min(RIPPLE.1 * rail.valley_min);
        let smallest = (0.3 * largest).min(RIPPLE.0 * rail.valley_min);
        (current / (frequency * largest), current / (frequency * smallest))
    });
    let (low, high) = rail.fold((0.0_f64, 0.0_f64), |(low, high), (a, b)| (low.max(a), high.max(b)));
    let mut values = Series::E6.between(0.5 * low, high.max(2.0 * low));
    values.truncate(CAPACITANCES_MAXIMUM);
    values
}

fn one<E: Send, Solve: Fn(&Supply) -> Result<Vec<f64>, E> + Sync>(
    sizing: &Sizing<'_, Solve>,
    policy: &Policy,
    solve: &impl Fn(&Supply) -> Result<Figures, E>,
    surge: &impl Fn(&Supply) -> Result<Vec<Worst>, E>,
) -> Result<Verdict, E> {
    let unsized_miss = || Verdict::Rejected("no winding voltage holds the valley".to_owned(), None);
    let Some(first) = sizing.supply(sizing.plate(10.0, 1.0)) else {
        return Ok(unsized_miss());
    };
    let figures = solve(&first.at_ends(|_| None))?;
    let Some(exact) = sizing.size(&Places::of(&figures))? else {
        return Ok(unsized_miss());
    };
    let plate = rounded(sizing, exact);
    let Some(supply) = sizing.supply(plate) else {
        return Ok(unsized_miss());
    };
    let extremes = sizing.extremes(&supply)?;
    let pointers: Vec<(String, &'static str)> = figures
        .pointers()
        .into_iter()
        .map(|(pointer, figure)| (pointer, figure.unit))
        .collect();
    if let Some(rejected) = misses(sizing, &extremes, &pointers) {
        return Ok(rejected);
    }
    let sized = Sized {
        exact,
        plate,
        surges: surge(&supply)?,
        supply,
        extremes,
        pointers,
    };
    Ok(completed(sizing, policy, sized))
}

/// A supply that holds, its parts not rated yet.
struct Sized {
    exact: Nameplate,
    plate: Nameplate,
    supply: Supply,
    surges: Vec<Worst>,
    extremes: Extremes,
    pointers: Vec<(String, &'static str)>,
}

impl Sized {
    fn range(&self, wanted: &str) -> Option<&Range> {
        let index = self.pointers.iter().position(|(pointer, _)| pointer == wanted)?;
        self.extremes.ranges.get(index)
    }

    fn stress(&self, subject: &Subject) -> Option<Worst> {
        let place = |wanted: &str| self.pointers.iter().position(|(pointer, _)| pointer == wanted);
        subject.worst(&self.extremes, place, &self.surges)
    }
}

/// Rates the parts of a supply that holds and checks them.
fn completed<E: Send, Solve: Fn(&Supply) -> Result<Vec<f64>, E> + Sync>(
    sizing: &Sizing<'_, Solve>,
    policy: &Policy,
    sized: Sized,
) -> Verdict {
    let mut ratings = match pick::ratings(&sized.supply, policy, |subject| sized.stress(subject)) {
        Ok(picks) => picks,
        Err(missing) => {
            let miss = Miss {
                circuit: sizing.circuit,
                capacitance: sizing.capacitance,
                value: missing.required,
                limit: missing.largest,
                unit: missing.unit,
            };
            return Verdict::Rejected(format!("no preferred {} reaches it", missing.quantity), Some(miss));
        }
    };
    let valley = sized
        .range("/outputs/0/rails/0/voltage/valley")
        .map(|r| r.at_minimum.clone());
    let current = sized
        .range("/outputs/0/winding/current_rms")
        .map(|r| r.at_maximum.clone());
    let mut picks = pick::transformer(
        sized.plate,
        sized.exact,
        &valley.unwrap_or_default(),
        &current.unwrap_or_default(),
    );
    picks.extend(pick::resistances(&sized.supply));
    picks.push(capacitance_pick(sizing.capacitance));
    picks.append(&mut ratings);
    if let Some(range) = sized.range("/line/current_rms") {
        picks.push(pick::fuse(sizing.need, range.maximum, range.at_maximum.clone()));
    }
    let supply = rated(&sized.supply, &picks);
    let (checks, verdict) = check(policy, &subjects(&supply), |subject| sized.stress(subject));
    let score = match sizing.need.minimise {
        Minimise::Loss => sized.range("/losses/total").map_or(f64::INFINITY, |r| r.maximum),
        Minimise::Volume => volume(&supply, sized.plate),
    };
    Verdict::Holds(Box::new(Candidate {
        supply,
        picks,
        worst_case: sized.extremes,
        pointers: sized.pointers,
        checks,
        verdict,
        score,
    }))
}

fn capacitance_pick(capacitance: f64) -> Pick {
    Pick {
        component: "/outputs/0/rails/0/filter/0/capacitor".to_owned(),
        quantity: "capacitance",
        stress: capacitance,
        factor: 1.0,
        required: capacitance,
        chosen: Some(capacitance),
        unit: "F",
        at: Vec::new(),
        source: "IEC 60063, E6",
    }
}

/// Steps of the R10 series of ISO 3 (from memory).
const R10: [f64; 10] = [1.0, 1.25, 1.6, 2.0, 2.5, 3.15, 4.0, 5.0, 6.3, 8.0];

/// A nameplate one can order: voltage up to a tenth of a volt (three digits), rating up to the next R10 step.
fn rounded<E: Send, Solve: Fn(&Supply) -> Result<Vec<f64>, E> + Sync>(
    sizing: &Sizing<'_, Solve>,
    exact: Nameplate,
) -> Nameplate {
    let decade = 10.0_f64.powf(exact.rating.log10().floor());
    let rating = R10
        .iter()
        .map(|step| step * decade)
        .find(|v| *v >= exact.rating * (1.0 - 1e-9))
        .unwrap_or(10.0 * decade);
    let steps = 10.0_f64.powf(exact.voltage.log10().floor() - 2.0).max(1e-9);
    // A larger transformer sags less, so that the voltage found for the exact rating holds for it too.
    let voltage = (exact.voltage / steps - 1e-9).ceil() * steps;
    let voltage: f64 = format!("{voltage:.9}").parse().unwrap_or(voltage);
    Nameplate {
        voltage,
        current: rating / sizing.rating(voltage, 1.0),
        regulation: sizing.need.assumptions.regulation_at(rating),
        rating,
    }
}

fn misses<E: Send, Solve: Fn(&Supply) -> Result<Vec<f64>, E> + Sync>(
    sizing: &Sizing<'_, Solve>,
    extremes: &Extremes,
    pointers: &[(String, &'static str)],
) -> Option<Verdict> {
    for (index, rail) in sizing.need.rails.iter().enumerate() {
        let range = |field: &str| {
            let wanted = format!("/outputs/0/rails/{index}/voltage/{field}");
            pointers
                .iter()
                .position(|(p, _)| *p == wanted)
                .map(|i| &extremes.ranges[i])
        };
        let limits = [
            (
                "valley_min",
                range("valley").map(|r| r.minimum),
                Some(rail.valley_min),
                false,
            ),
            ("crest_max", range("crest").map(|r| r.maximum), rail.crest_max, true),
            (
                "ripple_pp_max",
                range("ripple_pp").map(|r| r.maximum),
                rail.ripple_pp_max,
                true,
            ),
        ];
        for (name, value, limit, upper) in limits {
            if let (Some(value), Some(limit)) = (value, limit)
                && (if upper { value > limit } else { value < limit })
            {
                let miss = Miss {
                    circuit: sizing.circuit,
                    capacitance: sizing.capacitance,
                    value,
                    limit,
                    unit: "V",
                };
                return Some(Verdict::Rejected(name.to_owned(), Some(miss)));
            }
        }
    }
    None
}

/// The supply with the chosen ratings written into its parts; where nothing is preferred, what is required is the rating.
fn rated(supply: &Supply, picks: &[Pick]) -> Supply {
    let mut parts = supply.clone().into_parts();
    let value = |component: &str, quantity: &str| {
        let pick = picks
            .iter()
            .filter(|p| p.component == component && p.quantity == quantity);
        let most = pick.map(|p| p.chosen.unwrap_or(p.required)).fold(0.0_f64, f64::max);
        Band::point(most).ok().filter(|b| b.nominal() > 0.0)
    };
    for (index, output) in parts.outputs.iter_mut().enumerate() {
        let diode = format!("/outputs/{index}/rectifier/diode");
        let ratings = &mut output.rectifier.diode.ratings;
        ratings.reverse_voltage = value(&diode, "reverse_voltage");
        ratings.current_mean = value(&diode, "current_mean");
        ratings.current_rms = value(&diode, "current_rms");
        ratings.current_surge = value(&diode, "current_surge");
        for (r, rail) in output.rails.iter_mut().enumerate() {
            for (s, section) in rail.filter.iter_mut().enumerate() {
                if let Some(capacitor) = &mut section.capacitor {
                    let at = format!("/outputs/{index}/rails/{r}/filter/{s}/capacitor");
                    capacitor.ratings.voltage = value(&at, "voltage");
                    capacitor.ratings.ripple_current = value(&at, "ripple_current");
                }
            }
        }
    }
    Supply::new(parts).unwrap_or_else(|_| supply.clone())
}

/// An estimate in cubic centimetres: 10 (S / 1 VA)^0.75 for the transformer and, for each capacitor, twice its stored energy at rated
/// voltage in joules; common practice, good for ranking alone.
fn volume(supply: &Supply, plate: Nameplate) -> f64 {
    let capacitors = supply
        .outputs()
        .iter()
        .flat_map(|o| &o.rails)
        .flat_map(|r| &r.filter)
        .filter_map(|s| s.capacitor.as_ref());
    let energy: f64 = capacitors
        .map(|c| {
            let volts = c.ratings.voltage.map_or(0.0, |v| v.nominal());
            0.5 * c.capacitance.nominal() * volts * volts
        })
        .sum();
    10.0 * plate.rating.powf(0.75) + 2.0 * energy
}
