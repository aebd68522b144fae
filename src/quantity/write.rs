//! Quantities and bands as the shortest text that reads back to the same bits.

use super::band::Band;
use super::dimension::Dimension;
use super::parse::read_band;

/// Prefixes that are written, by decimal exponent, ascending.
const WRITTEN: [(&str, i32); 9] = [
    ("p", -12),
    ("n", -9),
    ("u", -6),
    ("m", -3),
    ("", 0),
    ("k", 3),
    ("M", 6),
    ("G", 9),
    ("T", 12),
];

/// Powers of ten of the first digit between which a number is written plainly, without an exponent.
const PLAIN: std::ops::RangeInclusive<i32> = -4..=8;

/// Widths that are written in percent, as fractions of the nominal value: above and below, both ends read better.
const SENSIBLE: std::ops::Range<f64> = 1e-6..10.0;

/// A quantity as text with its unit, in ASCII: the fewest digits that read back to the same bits, the point shifted by the prefix
/// that leaves one to three digits before it, where there is one. Zero is written without sign or prefix.
///
/// What [`read_quantity`](super::read_quantity) refuses (infinities, what is no number, and numbers nearer to zero than 2.3e-308)
/// is written in a text that it refuses too.
#[must_use]
pub fn write_quantity(value: f64, dimension: Dimension) -> String {
    let unit = dimension.units()[0];
    if value == 0.0 || !value.is_finite() {
        return format!("{} {}", value.abs(), unit.text);
    }
    // The shortest digits of the value as `d.ddd` times a power of ten.
    let scientific = format!("{value:e}");
    let (mantissa, exponent) = scientific.split_once('e').unwrap_or((&scientific, "0"));
    let exponent: i32 = exponent.parse().unwrap_or(0);
    let (prefix, shift) = match unit.prefix_maximum {
        None => ("", unit.scale.exponent),
        Some(maximum) => {
            let fitting = WRITTEN
                .into_iter()
                .rev()
                .find(|(_, shift)| *shift <= exponent.min(maximum));
            fitting.unwrap_or(WRITTEN[0])
        }
    };
    format!("{} {prefix}{}", shifted(mantissa, exponent - shift), unit.text)
}

/// `d.ddd` times ten to the `places`, plainly where that is short.
fn shifted(mantissa: &str, places: i32) -> String {
    if !PLAIN.contains(&places) {
        return format!("{mantissa}e{places}");
    }
    let (sign, unsigned) = mantissa.strip_prefix('-').map_or(("", mantissa), |rest| ("-", rest));
    let digits: String = unsigned.chars().filter(char::is_ascii_digit).collect();
    let zeros = |count: usize| "0".repeat(count);
    let text = match usize::try_from(1 + places) {
        Ok(point) if point >= digits.len() => format!("{digits}{}", zeros(point - digits.len())),
        Ok(point) if point > 0 => format!("{}.{}", &digits[..point], &digits[point..]),
        _ => format!("0.{}{digits}", zeros((1 + places).unsigned_abs() as usize)),
    };
    format!("{sign}{text}")
}

/// A band as text: a lone quantity where it has no width, else the shortest of `±p %`, `-p %/+q %`, `±x unit` and
/// `nominal (low to high)` that reads back to the same bits. Temperatures get no percentages: their zero is arbitrary.
#[must_use]
pub fn write_band(band: &Band, dimension: Dimension) -> String {
    let nominal = write_quantity(band.nominal(), dimension);
    if band.is_point() {
        return nominal;
    }
    let (low, high) = (
        write_quantity(band.low(), dimension),
        write_quantity(band.high(), dimension),
    );
    let mut best = format!("{nominal} ({low} to {high})");
    for candidate in candidates(band, dimension, &nominal) {
        if candidate.chars().count() < best.chars().count() && read_band(&candidate, dimension).as_ref() == Ok(band) {
            best = candidate;
        }
    }
    best
}

/// Tolerances that may stand for a band, each still to be read back.
fn candidates(band: &Band, dimension: Dimension, nominal: &str) -> Vec<String> {
    let (down, up) = (band.nominal() - band.low(), band.high() - band.nominal());
    let mut out = Vec::new();
    let magnitude = band.nominal().abs();
    let no_percentage = matches!(dimension, Dimension::Ratio | Dimension::Temperature);
    let sensible = |width: f64| width == 0.0 || SENSIBLE.contains(&(width / magnitude));
    if !no_percentage && magnitude > 0.0 && sensible(down) && sensible(up) {
        let percent = |width: f64| write_quantity(without_noise(width / magnitude), Dimension::Ratio);
        let (below, above) = (percent(down), percent(up));
        out.push(format!("{nominal} \u{b1}{below}"));
        out.push(format!("{nominal} -{below}/+{above}"));
    }
    let own = match dimension {
        Dimension::Temperature => Dimension::TemperatureDifference,
        other => other,
    };
    out.push(format!("{nominal} \u{b1}{}", write_quantity(without_noise(down), own)));
    out
}

/// A number without the rounding of the subtraction that it came from: ten significant digits.
fn without_noise(value: f64) -> f64 {
    format!("{value:.9e}").parse().unwrap_or(value)
}
