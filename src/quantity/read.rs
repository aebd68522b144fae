//! Quantities and bands from text.

use super::band::{Band, BandError};
use super::dimension::{Dimension, PREFIXES};
use super::number::{Decimal, DecimalError};

/// Longest text that is read, in bytes: the longest sensible band is half as long.
pub const TEXT_MAXIMUM: usize = 128;

/// Why a text is no quantity.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum QuantityError {
    /// Nothing there.
    #[error("is empty; write a {dimension} with its unit, for example \"{example}\"")]
    Empty {
        /// What was expected.
        dimension: &'static str,
        /// What it would look like.
        example: &'static str,
    },
    /// More text than any quantity needs.
    #[error("is longer than {TEXT_MAXIMUM} bytes")]
    TooLong,
    /// No number where one was expected.
    #[error("{text:?} does not begin with a number; write a {dimension} with its unit, for example \"{example}\"")]
    NoNumber {
        /// The text at that place.
        text: String,
        /// What was expected.
        dimension: &'static str,
        /// What it would look like.
        example: &'static str,
    },
    /// A number without a unit.
    #[error("{text:?} has no unit; write a {dimension} with its unit, for example \"{example}\"")]
    NoUnit {
        /// The text.
        text: String,
        /// What was expected.
        dimension: &'static str,
        /// What it would look like.
        example: &'static str,
    },
    /// A comma within a number.
    #[error("{text:?} has a comma; write the decimal point as \".\" and no thousands separators")]
    Comma {
        /// The text.
        text: String,
    },
    /// A unit of another dimension.
    #[error("{unit:?} is a unit of {found}, but a {dimension} is wanted, for example \"{example}\"")]
    WrongDimension {
        /// The unit as written.
        unit: String,
        /// The dimension it belongs to.
        found: &'static str,
        /// What was expected.
        dimension: &'static str,
        /// What it would look like.
        example: &'static str,
    },
    /// No unit that is known.
    #[error("{unit:?} is not a unit of {dimension}; write for example \"{example}\"{hint}")]
    UnknownUnit {
        /// The unit as written.
        unit: String,
        /// What was expected.
        dimension: &'static str,
        /// What it would look like.
        example: &'static str,
        /// What may have been meant.
        hint: &'static str,
    },
    /// Too large or too small a number.
    #[error("{text:?} is too large or too small a number")]
    OutOfRange {
        /// The text.
        text: String,
    },
    /// A tolerance that cannot be read.
    #[error("{text:?} is not a tolerance; write \"±20 %\", \"+/-20 %\", \"-10 %/+50 %\", \"±10 V\" or \"(0.05 A to 1.4 A)\" with a unit on each number")]
    Tolerance {
        /// The text behind the nominal value.
        text: String,
    },
    /// Ends that do not enclose the nominal value.
    #[error("a band needs low <= nominal <= high")]
    Disordered,
    /// A band where one value is wanted.
    #[error("one value is wanted here, not a band")]
    NotAlone,
}

/// Reads a quantity or a band: `"4700 uF"`, `"4700 uF ±20 %"`, `"4700 uF -10 %/+50 %"`, `"230 V ±10 V"`,
/// `"1.2 A (0.05 A to 1.4 A)"`.
///
/// A percentage after a ratio is points of that ratio: `"8 % ±1 %"` lies between 7 % and 9 %.
///
/// # Errors
/// [`QuantityError`], whose text says what is wrong and what would be right.
pub fn read_band(text: &str, dimension: Dimension) -> Result<Band, QuantityError> {
    let reader = Reader { dimension };
    if text.len() > TEXT_MAXIMUM {
        return Err(QuantityError::TooLong);
    }
    let text = text.trim_matches(is_space);
    if text.is_empty() {
        return Err(QuantityError::Empty {
            dimension: dimension.name(),
            example: dimension.example(),
        });
    }
    let (nominal, rest) = reader.quantity(text)?;
    let rest = rest.trim_start_matches(is_space);
    let (low, high) = if rest.is_empty() {
        (nominal, nominal)
    } else if let Some(inner) = rest.strip_prefix('(') {
        reader.range(inner, rest)?
    } else {
        reader.tolerance(nominal, rest)?
    };
    Band::new(low, nominal, high).map_err(|error| match error {
        BandError::NotFinite => QuantityError::OutOfRange { text: text.to_owned() },
        BandError::Disordered => QuantityError::Disordered,
    })
}

/// Reads one quantity.
///
/// # Errors
/// As [`read_band`], and [`QuantityError::NotAlone`] for a band.
pub fn read_quantity(text: &str, dimension: Dimension) -> Result<f64, QuantityError> {
    let band = read_band(text, dimension)?;
    if band.is_point() { Ok(band.nominal()) } else { Err(QuantityError::NotAlone) }
}

fn is_space(c: char) -> bool {
    matches!(c, ' ' | '\t' | '\u{a0}' | '\u{202f}' | '\u{2009}')
}

struct Reader {
    dimension: Dimension,
}

impl Reader {
    /// Takes a number with its unit off the beginning; the rest.
    fn quantity<'t>(&self, text: &'t str) -> Result<(f64, &'t str), QuantityError> {
        if let Some(read) = self.letter_code(text) {
            return read;
        }
        let (number, rest) = Decimal::take(text).map_err(|error| self.number_error(text, error))?;
        if rest.starts_with(',') {
            return Err(QuantityError::Comma { text: shorten(text) });
        }
        let after = rest.trim_start_matches(is_space);
        let word = &after[..after.find(ends_unit).unwrap_or(after.len())];
        if word.is_empty() {
            return Err(QuantityError::NoUnit {
                text: shorten(text),
                dimension: self.dimension.name(),
                example: self.dimension.example(),
            });
        }
        let shift = exponent_of(word, self.dimension).ok_or_else(|| self.unit_error(word))?;
        let value = number.value(shift).map_err(|error| self.number_error(text, error))?;
        Ok((value, &after[word.len()..]))
    }

    fn number_error(&self, text: &str, error: DecimalError) -> QuantityError {
        match error {
            DecimalError::OutOfRange => QuantityError::OutOfRange { text: shorten(text) },
            DecimalError::Missing => QuantityError::NoNumber {
                text: shorten(text),
                dimension: self.dimension.name(),
                example: self.dimension.example(),
            },
        }
    }

    fn unit_error(&self, word: &str) -> QuantityError {
        let (dimension, example) = (self.dimension.name(), self.dimension.example());
        let other = Dimension::ALL
            .into_iter()
            .find(|&d| d != self.dimension && exponent_of(word, d).is_some());
        if let Some(found) = other {
            return QuantityError::WrongDimension {
                unit: shorten(word),
                found: found.name(),
                dimension,
                example,
            };
        }
        let mut hint = "";
        if let Some(rest) = word.strip_prefix('K')
            && exponent_of(&format!("k{rest}"), self.dimension).is_some()
        {
            hint = "; kilo is a small k";
        }
        QuantityError::UnknownUnit {
            unit: shorten(word),
            dimension,
            example,
            hint,
        }
    }

    /// Letter codes of IEC 60062 for resistance and capacitance: `4k7`, `R047`, `4n7`, `22u`.
    fn letter_code<'t>(&self, text: &'t str) -> Option<Result<(f64, &'t str), QuantityError>> {
        let letters: &[(char, i32)] = match self.dimension {
            Dimension::Resistance => &[('R', 0), ('L', -3), ('K', 3), ('k', 3), ('M', 6), ('G', 9), ('T', 12)],
            Dimension::Capacitance => {
                &[('p', -12), ('n', -9), ('u', -6), ('\u{b5}', -6), ('\u{3bc}', -6), ('m', -3), ('F', 0)]
            }
            _ => return None,
        };
        let word = &text[..text.find(|c| is_space(c) || c == '(' || c == '\u{b1}').unwrap_or(text.len())];
        let at = word.find(|c: char| !c.is_ascii_digit())?;
        let letter = word[at..].chars().next()?;
        let &(_, shift) = letters.iter().find(|(l, _)| *l == letter)?;
        let (whole, fraction) = (&word[..at], &word[at + letter.len_utf8()..]);
        let digits = fraction.bytes().all(|b| b.is_ascii_digit());
        if !digits || (whole.is_empty() && fraction.is_empty()) || (letter == 'F' && fraction.is_empty()) {
            return None;
        }
        let value = Decimal::around(if whole.is_empty() { "0" } else { whole }, fraction).value(shift);
        let rest = &text[word.len()..];
        Some(value.map(|v| (v, rest)).map_err(|error| self.number_error(text, error)))
    }

    /// `low to high)` behind the bracket.
    fn range(&self, inner: &str, whole: &str) -> Result<(f64, f64), QuantityError> {
        let bad = || QuantityError::Tolerance { text: shorten(whole) };
        let (low, rest) = self.quantity(inner.trim_start_matches(is_space))?;
        let spaced = rest.trim_start_matches(is_space);
        let rest = spaced.strip_prefix("to").ok_or_else(bad)?;
        let (high, rest) = self.quantity(rest.trim_start_matches(is_space))?;
        let end = rest.trim_start_matches(is_space);
        if end == ")" { Ok((low, high)) } else { Err(bad()) }
    }

    /// `±p %`, `±x unit` or `-p %/+q %`, in either order of the two.
    fn tolerance(&self, nominal: f64, text: &str) -> Result<(f64, f64), QuantityError> {
        let bad = || QuantityError::Tolerance { text: shorten(text) };
        for sign in ["\u{b1}", "+/-", "+-"] {
            if let Some(rest) = text.strip_prefix(sign) {
                let (width, rest) = self.width(rest.trim_start_matches(is_space)).ok_or_else(bad)?;
                return match rest.trim_matches(is_space) {
                    "" => Ok((width.below(nominal), width.above(nominal))),
                    _ => Err(bad()),
                };
            }
        }
        let (one, other) = text.split_once('/').ok_or_else(bad)?;
        let (one, other) = (one.trim_matches(is_space), other.trim_matches(is_space));
        let minus = |t: &str| strip_minus(t).map(str::to_owned);
        let plus = |t: &str| t.strip_prefix('+').map(str::to_owned);
        let (down, up) = match (minus(one), plus(other), plus(one), minus(other)) {
            (Some(down), Some(up), ..) => (down, up),
            (_, _, Some(up), Some(down)) => (down, up),
            _ => return Err(bad()),
        };
        let whole = |t: &str| match self.width(t.trim_start_matches(is_space)) {
            Some((width, rest)) if rest.trim_matches(is_space).is_empty() => Ok(width),
            _ => Err(bad()),
        };
        Ok((whole(&down)?.below(nominal), whole(&up)?.above(nominal)))
    }

    /// The width of a tolerance: a percentage of the nominal value, or a quantity of its own.
    fn width<'t>(&self, text: &'t str) -> Option<(Width, &'t str)> {
        if text.starts_with(['-', '+', '\u{2212}']) {
            return None;
        }
        if self.dimension != Dimension::Ratio {
            let percent = Reader {
                dimension: Dimension::Ratio,
            };
            if let Ok((fraction, rest)) = percent.quantity(text) {
                return Some((Width::Fraction(fraction), rest));
            }
        }
        // A difference of temperatures is in kelvins.
        let own = match self.dimension {
            Dimension::Temperature => Dimension::TemperatureDifference,
            other => other,
        };
        let (value, rest) = Reader { dimension: own }.quantity(text).ok()?;
        Some((Width::Absolute(value), rest))
    }
}

enum Width {
    Fraction(f64),
    Absolute(f64),
}

impl Width {
    fn below(&self, nominal: f64) -> f64 {
        match self {
            Self::Fraction(fraction) => (nominal * (1.0 - fraction)).min(nominal * (1.0 + fraction)),
            Self::Absolute(width) => nominal - width,
        }
    }

    fn above(&self, nominal: f64) -> f64 {
        match self {
            Self::Fraction(fraction) => (nominal * (1.0 - fraction)).max(nominal * (1.0 + fraction)),
            Self::Absolute(width) => nominal + width,
        }
    }
}

fn strip_minus(text: &str) -> Option<&str> {
    text.strip_prefix('-').or_else(|| text.strip_prefix('\u{2212}')).or_else(|| text.strip_prefix('\u{2013}'))
}

/// Where a unit ends.
fn ends_unit(c: char) -> bool {
    is_space(c) || matches!(c, '(' | ')' | '\u{b1}' | '/' | '+' | '-' | '\u{2212}' | '\u{2013}')
}

/// The decimal exponent of a prefixed unit of a dimension.
fn exponent_of(word: &str, dimension: Dimension) -> Option<i32> {
    dimension.units().iter().find_map(|unit| {
        let prefix = word.strip_suffix(unit.text)?;
        if prefix.is_empty() {
            return Some(unit.exponent);
        }
        let known = PREFIXES.iter().find(|(text, _)| *text == prefix);
        known.filter(|_| unit.prefixed).map(|(_, exponent)| unit.exponent + exponent)
    })
}

/// The beginning of a text, for an error message.
fn shorten(text: &str) -> String {
    text.chars().take(40).collect()
}
