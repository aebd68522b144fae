//! Quantities and bands as the shortest text that reads back to the same bits.

use super::band::Band;
use super::dimension::Dimension;
use super::read::read_band;

/// Prefixes that are written, by decimal exponent.
const WRITTEN: [(&str, i32); 9] = [
    ("", 0),
    ("p", -12),
    ("n", -9),
    ("u", -6),
    ("m", -3),
    ("k", 3),
    ("M", 6),
    ("G", 9),
    ("T", 12),
];

/// A quantity as text with its unit: the shortest decimal of its bits, its point shifted by the prefix that makes it readable.
#[must_use]
pub fn write_quantity(value: f64, dimension: Dimension) -> String {
    let unit = dimension.units()[0];
    // The shortest digits of the value as `d.ddd` times a power of ten.
    let scientific = format!("{value:e}");
    let (mantissa, exponent) = scientific.split_once('e').unwrap_or((&scientific, "0"));
    let exponent: i32 = exponent.parse().unwrap_or(0);
    if value == 0.0 {
        return format!("0 {}", unit.text);
    }
    if !unit.prefixed {
        return format!("{} {}", shifted(mantissa, exponent - unit.exponent), unit.text);
    }
    let (prefix, shift) = WRITTEN
        .into_iter()
        .filter(|(_, shift)| *shift <= exponent)
        .max_by_key(|(_, shift)| *shift)
        .unwrap_or(("p", -12));
    let places = exponent - shift;
    format!("{} {prefix}{}", shifted(mantissa, places), unit.text)
}

/// `d.ddd` times ten to the `places`, plainly where that is short.
fn shifted(mantissa: &str, places: i32) -> String {
    let (sign, unsigned) = mantissa.strip_prefix('-').map_or(("", mantissa), |rest| ("-", rest));
    let digits: String = unsigned.chars().filter(char::is_ascii_digit).collect();
    if !(-7..=15).contains(&places) {
        return format!("{mantissa}e{places}");
    }
    let point = 1 + places;
    let length = digits.len() as i32;
    let text = if point <= 0 {
        format!("0.{}{digits}", "0".repeat(point.unsigned_abs() as usize))
    } else if point >= length {
        format!("{digits}{}", "0".repeat((point - length) as usize))
    } else {
        let (whole, fraction) = digits.split_at(point as usize);
        format!("{whole}.{fraction}")
    };
    format!("{sign}{text}")
}

/// A band as text: a lone quantity where it has no width, else the shortest of `±p %`, `-p %/+q %`, `±x` and `(low to high)` that
/// reads back to the same bits.
#[must_use]
pub fn write_band(band: &Band, dimension: Dimension) -> String {
    let nominal = write_quantity(band.nominal(), dimension);
    if band.is_point() {
        return nominal;
    }
    let full = format!(
        "{nominal} ({} to {})",
        write_quantity(band.low(), dimension),
        write_quantity(band.high(), dimension)
    );
    let mut best = full;
    for candidate in candidates(band, dimension, &nominal) {
        if candidate.chars().count() < best.chars().count() && read_band(&candidate, dimension).as_ref() == Ok(band) {
            best = candidate;
        }
    }
    best
}

fn candidates(band: &Band, dimension: Dimension, nominal: &str) -> Vec<String> {
    let (down, up) = (band.nominal() - band.low(), band.high() - band.nominal());
    let mut out = Vec::new();
    if band.nominal() != 0.0 && dimension != Dimension::Ratio {
        let percent = |width: f64| rounded(100.0 * width / band.nominal().abs());
        let (below, above) = (percent(down), percent(up));
        out.push(format!("{nominal} \u{b1}{below} %"));
        out.push(format!("{nominal} -{below} %/+{above} %"));
    }
    let own = match dimension {
        Dimension::Temperature => Dimension::TemperatureDifference,
        other => other,
    };
    let width = |value: f64| write_quantity(rounded(value).parse().unwrap_or(value), own);
    out.push(format!("{nominal} \u{b1}{}", width(down)));
    out.push(format!("{nominal} -{}/+{}", width(down), width(up)));
    out
}

/// A number without the rounding of the subtraction that it came from: ten significant digits.
fn rounded(value: f64) -> String {
    let text = format!("{value:.9e}");
    text.parse::<f64>().map_or(text, |v| format!("{v}"))
}
