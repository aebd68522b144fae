//! Extremes of every figure over the bands.

use super::corners::Corners;
use crate::quantity::{Dimension, End};
use crate::supply::Supply;
use rayon::prelude::*;

/// Points looked at inside a band along which a figure's sign of change differs between corners.
const INTERIOR: usize = 9;
/// Rounds of such looking, each from the best points of the one before.
const ROUNDS: usize = 3;
/// A change this small, relative to the figure, has no sign.
const FLAT: f64 = 1e-9;

/// Where a band stands.
#[derive(Clone, Debug, PartialEq)]
pub enum Chosen {
    /// At an end.
    End(End),
    /// At a value inside.
    Value(f64),
}

/// One band's place in the point that attains an extreme.
#[derive(Clone, Debug, PartialEq)]
pub struct Attained {
    /// JSON Pointer of the quantity.
    pub pointer: String,
    /// What it measures.
    pub dimension: Dimension,
    /// Where in its band it stands.
    pub chosen: Chosen,
}

/// How an extreme is known.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum KnownBy {
    /// Along every band the figure changes with the same sign at all corners.
    Monotone,
    /// It does not, or the corners were too many: the best point of a search.
    Searched,
}

/// Lowest, nominal and highest value of one figure.
#[derive(Clone, Debug, PartialEq)]
pub struct Range {
    /// Lowest value.
    pub minimum: f64,
    /// Value with every quantity nominal.
    pub nominal: f64,
    /// Highest value.
    pub maximum: f64,
    /// Where the lowest is attained; empty where nothing is uncertain.
    pub at_minimum: Vec<Attained>,
    /// Where the highest is attained.
    pub at_maximum: Vec<Attained>,
    /// How both are known.
    pub known_by: KnownBy,
}

/// The extremes of every figure, in the figures' order.
#[derive(Clone, Debug, PartialEq)]
pub struct Extremes {
    /// One a figure.
    pub ranges: Vec<Range>,
    /// How many corners there are; `None` where that overflows.
    pub corners: Option<usize>,
    /// Points solved.
    pub solved: usize,
    /// Whether every corner was solved.
    pub all_corners: bool,
}

/// Values of the bands, and the figures there.
type Point = (Vec<f64>, Vec<f64>);

/// Points of the bands with their figures.
#[derive(Debug)]
pub struct Survey {
    points: Vec<Point>,
}

/// Solves the corners of a supply and finds every figure's extremes. `solve` gives the figures of a supply without bands;
/// `signs_of` adds figures of its own. Work is spread over the cores.
///
/// # Errors
/// The first failure of `solve`, by order of the points.
pub fn survey<E: Send>(
    supply: &Supply,
    corners_maximum: usize,
    solve: impl Fn(&Supply) -> Result<Vec<f64>, E> + Sync,
) -> Result<Extremes, E> {
    let corners = Corners::of(supply);
    let count = corners.count().filter(|count| *count <= corners_maximum);
    let solve_all = |points: Vec<Vec<f64>>| -> Result<Survey, E> {
        let solved: Vec<Result<Point, E>> = points
            .into_par_iter()
            .map(|point| solve(&corners.at(&point)).map(|figures| (point, figures)))
            .collect();
        let points = solved.into_iter().collect::<Result<_, E>>()?;
        Ok(Survey { points })
    };
    let nominal = solve(&corners.at(&corners.nominal()))?;
    if corners.bands.is_empty() {
        return Ok(certain(&nominal));
    }
    let mut mixed = Vec::new();
    let mut survey = match count {
        Some(count) => {
            let survey = solve_all((0..count).map(|index| corners.values(index)).collect())?;
            mixed = mixed_bands(&corners, &survey, nominal.len());
            survey
        }
        None => by_signs(&corners, &nominal, &solve_all)?,
    };
    survey.points.push((corners.nominal(), nominal.clone()));
    for _ in 0..ROUNDS {
        let further = further_points(&corners, &survey, &mixed);
        if further.is_empty() {
            break;
        }
        survey.points.extend(solve_all(further)?.points);
    }
    let ranges = (0..nominal.len())
        .map(|figure| {
            let known = if count.is_some() && mixed.iter().all(|(f, _)| *f != figure) {
                KnownBy::Monotone
            } else {
                KnownBy::Searched
            };
            range(&corners, &survey, figure, nominal[figure], known)
        })
        .collect();
    Ok(Extremes {
        ranges,
        corners: corners.count(),
        solved: survey.points.len(),
        all_corners: count.is_some(),
    })
}

fn certain(figures: &[f64]) -> Extremes {
    let ranges = figures
        .iter()
        .map(|&value| Range {
            minimum: value,
            nominal: value,
            maximum: value,
            at_minimum: Vec::new(),
            at_maximum: Vec::new(),
            known_by: KnownBy::Monotone,
        })
        .collect();
    Extremes {
        ranges,
        corners: Some(1),
        solved: 1,
        all_corners: true,
    }
}

/// Figure and band where the sign of the figure's change along the band is not the same at all corners.
fn mixed_bands(corners: &Corners<'_>, survey: &Survey, figures: usize) -> Vec<(usize, usize)> {
    let mut mixed = Vec::new();
    for figure in 0..figures {
        for band in 0..corners.bands.len() {
            let (mut rises, mut falls) = (false, false);
            for index in (0..survey.points.len()).filter(|index| index >> band & 1 == 0) {
                let (low, high) = (
                    survey.points[index].1[figure],
                    survey.points[index | 1 << band].1[figure],
                );
                let flat = FLAT * low.abs().max(high.abs());
                rises |= high - low > flat;
                falls |= low - high > flat;
            }
            if rises && falls {
                mixed.push((figure, band));
            }
        }
    }
    mixed
}

/// Points around the best ones known, for figures that may have an extreme inside: along a band with mixed signs points inside it,
/// along any other its ends, since the best end may be another one there.
fn further_points(corners: &Corners<'_>, survey: &Survey, mixed: &[(usize, usize)]) -> Vec<Vec<f64>> {
    let mut points: Vec<Vec<f64>> = Vec::new();
    let mut figures: Vec<usize> = mixed.iter().map(|(figure, _)| *figure).collect();
    figures.dedup();
    for figure in figures {
        for best in [lowest(survey, figure), highest(survey, figure)] {
            for (band, slot) in corners.bands.iter().enumerate() {
                let inner = if mixed.contains(&(figure, band)) { INTERIOR } else { 0 };
                for step in 0..=inner + 1 {
                    let share = step as f64 / (inner + 1) as f64;
                    let mut point = survey.points[best].0.clone();
                    point[band] = match step {
                        0 => slot.band.low(),
                        _ if step == inner + 1 => slot.band.high(),
                        _ => slot.band.low() + share * (slot.band.high() - slot.band.low()),
                    };
                    if !points.contains(&point) && survey.points.iter().all(|(known, _)| *known != point) {
                        points.push(point);
                    }
                }
            }
        }
    }
    points
}

/// With too many corners: each band's ends from the nominal point give signs, the signs two corners a figure.
fn by_signs<E>(
    corners: &Corners<'_>,
    nominal: &[f64],
    solve_all: &impl Fn(Vec<Vec<f64>>) -> Result<Survey, E>,
) -> Result<Survey, E> {
    let centre = corners.nominal();
    let mut ends = Vec::new();
    for (band, slot) in corners.bands.iter().enumerate() {
        for end in [End::Low, End::High] {
            let mut point = centre.clone();
            point[band] = slot.band.at(end);
            ends.push(point);
        }
    }
    let mut survey = solve_all(ends)?;
    let mut wanted: Vec<Vec<f64>> = Vec::new();
    for figure in 0..nominal.len() {
        for rising in [true, false] {
            let point: Vec<f64> = corners
                .bands
                .iter()
                .enumerate()
                .map(|(band, slot)| {
                    let rises = survey.points[2 * band + 1].1[figure] >= survey.points[2 * band].1[figure];
                    slot.band.at(if rises == rising { End::High } else { End::Low })
                })
                .collect();
            if !wanted.contains(&point) {
                wanted.push(point);
            }
        }
    }
    survey.points.extend(solve_all(wanted)?.points);
    Ok(survey)
}

/// The point with the lowest value; of points that are equal within rounding the first, a corner rather than a point inside.
fn lowest(survey: &Survey, figure: usize) -> usize {
    best(survey, figure, 1.0)
}

/// The point with the highest value, likewise.
fn highest(survey: &Survey, figure: usize) -> usize {
    best(survey, figure, -1.0)
}

fn best(survey: &Survey, figure: usize, sign: f64) -> usize {
    let values = || survey.points.iter().map(|(_, figures)| sign * figures[figure]);
    let least = values().fold(f64::INFINITY, f64::min);
    let equal = least + FLAT * least.abs();
    values().position(|value| value <= equal).unwrap_or(0)
}

fn range(corners: &Corners<'_>, survey: &Survey, figure: usize, nominal: f64, known_by: KnownBy) -> Range {
    let (low, high) = (lowest(survey, figure), highest(survey, figure));
    Range {
        minimum: survey.points[low].1[figure],
        nominal,
        maximum: survey.points[high].1[figure],
        at_minimum: attained(corners, &survey.points[low].0),
        at_maximum: attained(corners, &survey.points[high].0),
        known_by,
    }
}

fn attained(corners: &Corners<'_>, point: &[f64]) -> Vec<Attained> {
    corners
        .bands
        .iter()
        .zip(point)
        .map(|(slot, &value)| Attained {
            pointer: slot.pointer.clone(),
            dimension: slot.dimension,
            chosen: [End::Low, End::High, End::Nominal]
                .into_iter()
                .find(|end| slot.band.at(*end) == value)
                .map_or(Chosen::Value(value), Chosen::End),
        })
        .collect()
}
