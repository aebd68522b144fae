//! Quantities and bands from text.

use super::band::Band;
use super::dimension::{Dimension, PREFIXES};
use super::error::QuantityError;
use super::number::{Decimal, DecimalError, take_sign};

/// Longest text that is read, in characters: three doubles with all their digits, units and the words between are below 100.
pub const TEXT_MAXIMUM: usize = 128;

/// Characters of a text that an error repeats.
const REPEATED_MAXIMUM: usize = 40;

/// Reads a quantity or a band: `"4700 uF"`, `"4700 uF ±20 %"`, `"4700 uF -10 %/+50 %"`, `"230 V ±10 V"`,
/// `"1.2 A (0.05 A to 1.4 A)"`. Each end is the double nearest to the exact decimal.
///
/// A percentage is of the nominal value, except behind a ratio, where it is points of that ratio: `"8 % ±1 %"` lies
/// between 7 % and 9 %. The width of a band of temperatures is in kelvins: `"25 degC ±5 K"`.
///
/// ```
/// use mainstay::quantity::{Dimension, read_band};
///
/// let line = read_band("230 V ±10 %", Dimension::Voltage)?;
/// assert_eq!((line.low(), line.nominal(), line.high()), (207.0, 230.0, 253.0));
/// let refused = read_band("4700", Dimension::Capacitance).map_err(|error| error.to_string());
/// assert_eq!(refused, Err("\"4700\" has no unit; write a capacitance with its unit, for example \"4700 uF\"".to_owned()));
/// # Ok::<(), mainstay::quantity::QuantityError>(())
/// ```
///
/// # Errors
/// [`QuantityError`], whose text says what is wrong and what would be right.
pub fn read_band(text: &str, dimension: Dimension) -> Result<Band, QuantityError> {
    let (nominal, rest) = begin(text, dimension)?;
    let value = rounded(&nominal, text)?;
    let (low, high) = if rest.is_empty() {
        (value, value)
    } else {
        ends(&nominal, rest, dimension)?
    };
    let disordered = |_| match low > high {
        true => QuantityError::Inverted { text: shorten(rest) },
        false => QuantityError::NominalOutside { text: shorten(rest) },
    };
    Band::new(low, value, high).map_err(disordered)
}

/// Reads one quantity.
///
/// # Errors
/// As [`read_band`], and [`QuantityError::NotAlone`] for a band, one of no width included.
pub fn read_quantity(text: &str, dimension: Dimension) -> Result<f64, QuantityError> {
    let (nominal, rest) = begin(text, dimension)?;
    if rest.is_empty() {
        return rounded(&nominal, text);
    }
    ends(&nominal, rest, dimension)?;
    Err(QuantityError::NotAlone { dimension })
}

/// The nominal value, and what stands behind it.
fn begin(text: &str, dimension: Dimension) -> Result<(Decimal, &str), QuantityError> {
    if text.chars().count() > TEXT_MAXIMUM {
        return Err(QuantityError::TooLong { dimension });
    }
    if let Some(character) = text.chars().find(|&c| !is_known(c)) {
        return Err(QuantityError::Character { character, dimension });
    }
    let text = text.trim_matches(is_space);
    if text.is_empty() {
        return Err(QuantityError::Empty { dimension });
    }
    let (nominal, rest) = take_quantity(text, dimension)?;
    Ok((nominal, rest.trim_start_matches(is_space)))
}

/// The low and the high end from the text behind the nominal value.
fn ends(nominal: &Decimal, text: &str, dimension: Dimension) -> Result<(f64, f64), QuantityError> {
    let (low, high) = match text.strip_prefix('(') {
        Some(inner) => range(inner, text, dimension)?,
        None => {
            let (down, up) = widths(nominal, text, dimension)?;
            (nominal.minus(&down), nominal.plus(&up))
        }
    };
    Ok((rounded(&low, text)?, rounded(&high, text)?))
}

/// Takes a number with its unit, or a letter code, off the beginning; the rest.
fn take_quantity(text: &str, dimension: Dimension) -> Result<(Decimal, &str), QuantityError> {
    if let Some(read) = letter_code(text, dimension) {
        return Ok(read);
    }
    let (number, word, rest) = take_number_and_word(text, dimension)?;
    let scale = dimension.scale_of(word).ok_or_else(|| unit_error(word, dimension))?;
    let exact = number.scaled(scale.factor, scale.exponent);
    rounded(&exact, text)?;
    Ok((exact, rest))
}

/// Takes a number and the word behind it, which is never empty.
fn take_number_and_word(text: &str, dimension: Dimension) -> Result<(Decimal, &str, &str), QuantityError> {
    let (number, rest) = Decimal::take(text).map_err(|error| number_error(text, dimension, error))?;
    let after = rest.trim_start_matches(is_space);
    if let Some(tail) = rest.strip_prefix(',') {
        return Err(comma_error(text, tail));
    }
    if rest.starts_with(['\'', '_']) || after.starts_with(|c: char| c.is_ascii_digit()) {
        return Err(QuantityError::Separators { text: shorten(text) });
    }
    let (word, rest) = after.split_at(after.find(ends_unit).unwrap_or(after.len()));
    if word.is_empty() {
        return Err(QuantityError::NoUnit {
            text: shorten(text),
            dimension,
        });
    }
    Ok((number, word, rest))
}

/// Letter codes of IEC 60062, in which the letter stands for the point: `4k7`, `R047`, `4n7`, `22u`.
fn letter_code(text: &str, dimension: Dimension) -> Option<(Decimal, &str)> {
    let letters: &[(char, i32)] = match dimension {
        Dimension::Resistance => &[('R', 0), ('L', -3), ('K', 3), ('k', 3), ('M', 6), ('G', 9), ('T', 12)],
        Dimension::Capacitance => &[
            ('p', -12),
            ('n', -9),
            ('u', -6),
            ('\u{b5}', -6),
            ('\u{3bc}', -6),
            ('m', -3),
            ('F', 0),
        ],
        _ => return None,
    };
    let (word, rest) = text.split_at(text.find(ends_unit).unwrap_or(text.len()));
    let at = word.find(|c: char| !c.is_ascii_digit())?;
    let letter = word[at..].chars().next()?;
    let &(_, exponent) = letters.iter().find(|(known, _)| *known == letter)?;
    let (whole, fraction) = (&word[..at], &word[at + letter.len_utf8()..]);
    let is_code = fraction.bytes().all(|b| b.is_ascii_digit()) && !(whole.is_empty() && fraction.is_empty());
    is_code.then(|| (Decimal::around(whole, fraction).scaled(1, exponent), rest))
}

/// `low to high)` behind the bracket.
fn range(inner: &str, whole: &str, dimension: Dimension) -> Result<(Decimal, Decimal), QuantityError> {
    let bad = || QuantityError::Tolerance { text: shorten(whole) };
    let (low, rest) = take_quantity(inner.trim_start_matches(is_space), dimension)?;
    let rest = rest.trim_start_matches(is_space).strip_prefix("to").ok_or_else(bad)?;
    let (high, rest) = take_quantity(rest.trim_start_matches(is_space), dimension)?;
    if rest.trim_matches(is_space) == ")" {
        Ok((low, high))
    } else {
        Err(bad())
    }
}

/// How far a band reaches down and up: `±p %`, `±x unit`, or `-p %/+q %` in either order of the two.
fn widths(nominal: &Decimal, text: &str, dimension: Dimension) -> Result<(Decimal, Decimal), QuantityError> {
    let width = |part: &str| whole_width(nominal, part, text, dimension);
    for sign in ["\u{b1}", "+/-", "+/\u{2212}", "+-"] {
        if let Some(rest) = text.strip_prefix(sign) {
            let both = width(rest)?;
            return Ok((both.clone(), both));
        }
    }
    let bad = || QuantityError::Tolerance { text: shorten(text) };
    let (one, other) = text.split_once('/').ok_or_else(bad)?;
    let (one, other) = (one.trim_matches(is_space), other.trim_matches(is_space));
    let (down, up) = match (
        strip_minus(one),
        other.strip_prefix('+'),
        one.strip_prefix('+'),
        strip_minus(other),
    ) {
        (Some(down), Some(up), ..) | (.., Some(up), Some(down)) => (down, up),
        _ => return Err(bad()),
    };
    Ok((width(down)?, width(up)?))
}

/// One width, a percentage of the nominal value or a quantity of its own, with nothing behind it.
fn whole_width(nominal: &Decimal, part: &str, text: &str, dimension: Dimension) -> Result<Decimal, QuantityError> {
    let bad = || QuantityError::Tolerance { text: shorten(text) };
    let part = part.trim_matches(is_space);
    if !part.starts_with(|c: char| c.is_ascii_alphanumeric() || c == '.') {
        return Err(bad());
    }
    let relative = dimension != Dimension::Ratio && part.contains('%');
    let own = match dimension {
        _ if relative => Dimension::Ratio,
        Dimension::Temperature => Dimension::TemperatureDifference,
        other => other,
    };
    let (width, rest) = take_quantity(part, own).map_err(|error| match error {
        QuantityError::NoUnit { .. } | QuantityError::NoNumber { .. } => bad(),
        other => other,
    })?;
    if !rest.is_empty() {
        return Err(bad());
    }
    Ok(if relative {
        nominal.magnitude_times(&width)
    } else {
        width
    })
}

fn rounded(exact: &Decimal, text: &str) -> Result<f64, QuantityError> {
    exact.value().map_err(|error| match error {
        DecimalError::TooSmall => QuantityError::Underflow { text: shorten(text) },
        _ => QuantityError::Overflow { text: shorten(text) },
    })
}

fn number_error(text: &str, dimension: Dimension, error: DecimalError) -> QuantityError {
    let (_, unsigned) = take_sign(text);
    let lower = unsigned.to_ascii_lowercase();
    match error {
        DecimalError::TooLarge => QuantityError::Overflow { text: shorten(text) },
        DecimalError::TooSmall => QuantityError::Underflow { text: shorten(text) },
        DecimalError::Points => QuantityError::Separators { text: shorten(text) },
        DecimalError::Missing if unsigned.starts_with(',') => comma_error(text, &unsigned[1..]),
        DecimalError::Missing if lower.starts_with("inf") || lower.starts_with("nan") => QuantityError::NotFinite {
            text: shorten(text),
            dimension,
        },
        DecimalError::Missing => QuantityError::NoNumber {
            text: shorten(text),
            dimension,
        },
    }
}

/// A comma before three digits may be meant to group them; any other is a decimal comma.
fn comma_error(text: &str, tail: &str) -> QuantityError {
    let digits = tail.find(|c: char| !c.is_ascii_digit()).unwrap_or(tail.len());
    let (_, unsigned) = take_sign(text);
    let groups = digits == 3 && !unsigned.starts_with(['0', ',']);
    match groups {
        true => QuantityError::Separators { text: shorten(text) },
        false => QuantityError::DecimalComma { text: shorten(text) },
    }
}

fn unit_error(word: &str, dimension: Dimension) -> QuantityError {
    let unknown = |advice: String| QuantityError::UnknownUnit {
        unit: shorten(word),
        dimension,
        advice,
    };
    let unit = dimension.units()[0];
    let small = word.strip_prefix('K').map(|rest| format!("k{rest}"));
    if let Some(kilo) = small.as_deref().filter(|kilo| dimension.scale_of(kilo).is_some()) {
        return unknown(format!("kilo is a small k: write \"{kilo}\""));
    }
    let prefix = small.as_deref().unwrap_or(word);
    if unit.prefix_maximum.is_some() && PREFIXES.iter().any(|(text, _)| *text == prefix) {
        return unknown(format!("a prefix needs its unit: write \"{prefix}{}\"", unit.text));
    }
    let others = Dimension::ALL.into_iter().filter(|&other| other != dimension);
    if let Some(found) = others.into_iter().find(|other| other.scale_of(word).is_some()) {
        return QuantityError::WrongDimension {
            unit: shorten(word),
            found,
            dimension,
        };
    }
    match respelt(prefix, dimension) {
        Some(meant) => unknown(format!("write \"{meant}\"")),
        None => unknown(format!("write for example \"{}\"", dimension.example())),
    }
}

/// The unit that a word spells in the wrong case: `mv`, `hz`.
fn respelt(word: &str, dimension: Dimension) -> Option<String> {
    dimension.units().iter().find_map(|unit| {
        let at = word.len().checked_sub(unit.text.len())?;
        let (prefix, own) = (word.get(..at)?, word.get(at..)?);
        let meant = format!("{prefix}{}", unit.text);
        (own.eq_ignore_ascii_case(unit.text) && dimension.scale_of(&meant).is_some()).then_some(meant)
    })
}

fn is_space(c: char) -> bool {
    matches!(c, ' ' | '\t' | '\u{a0}' | '\u{202f}' | '\u{2009}')
}

/// Whether a character occurs in any quantity, or in what people write for one.
fn is_known(c: char) -> bool {
    let beyond_ascii = matches!(
        c,
        '\u{b0}'
            | '\u{2103}'
            | '\u{b1}'
            | '\u{b2}'
            | '\u{b5}'
            | '\u{3bc}'
            | '\u{3a9}'
            | '\u{2126}'
            | '\u{2212}'
            | '\u{2013}'
    );
    c.is_ascii_graphic() || is_space(c) || beyond_ascii
}

/// A tolerance's minus: hyphen, true minus or dash.
fn strip_minus(text: &str) -> Option<&str> {
    text.strip_prefix(['-', '\u{2212}', '\u{2013}'])
}

/// Where a unit ends.
fn ends_unit(c: char) -> bool {
    is_space(c) || matches!(c, '(' | ')' | '\u{b1}' | '/' | '+' | '-' | '\u{2212}' | '\u{2013}')
}

/// The beginning of a text, for an error message.
fn shorten(text: &str) -> String {
    text.chars().take(REPEATED_MAXIMUM).collect()
}
