//! Decimal numbers in text, kept as digits and exponent so that a prefix shifts the point without rounding.

/// A decimal number at the beginning of a text.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Decimal {
    /// Sign and digits with at most one point.
    mantissa: String,
    /// Power of ten.
    exponent: i32,
}

/// Why a decimal is not usable.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum DecimalError {
    /// There is none at this place.
    Missing,
    /// Too large or too small for a double.
    OutOfRange,
}

/// Digits of an exponent that are read: more can only over- or underflow.
const EXPONENT_DIGITS: usize = 4;

impl Decimal {
    /// Takes a number off the beginning of `text`; the rest.
    pub(super) fn take(text: &str) -> Result<(Self, &str), DecimalError> {
        let (sign, unsigned) = take_sign(text);
        let body = unsigned
            .find(|c: char| !(c.is_ascii_digit() || c == '.'))
            .unwrap_or(unsigned.len());
        let digits = &unsigned[..body];
        if !digits.contains(|c: char| c.is_ascii_digit()) || digits.matches('.').count() > 1 {
            return Err(DecimalError::Missing);
        }
        let (exponent, rest) = take_exponent(&unsigned[body..])?;
        let mantissa = format!("{sign}{digits}");
        Ok((Self { mantissa, exponent }, rest))
    }

    /// A number given by its digits around a letter that stands for the point: `4k7`.
    pub(super) fn around(whole: &str, fraction: &str) -> Self {
        Self {
            mantissa: format!("{whole}.{fraction}0"),
            exponent: 0,
        }
    }

    /// Its value times a power of ten, rounded once.
    pub(super) fn value(&self, shift: i32) -> Result<f64, DecimalError> {
        let text = format!("{}e{}", self.mantissa, self.exponent + shift);
        let value: f64 = text.parse().map_err(|_| DecimalError::Missing)?;
        let zero = !self.mantissa.contains(|c: char| ('1'..='9').contains(&c));
        if zero {
            Ok(0.0)
        } else if value.is_normal() {
            Ok(value)
        } else {
            Err(DecimalError::OutOfRange)
        }
    }
}

fn take_sign(text: &str) -> (&'static str, &str) {
    for (spelling, sign) in [("-", "-"), ("\u{2212}", "-"), ("+", "")] {
        if let Some(rest) = text.strip_prefix(spelling) {
            return (sign, rest);
        }
    }
    ("", text)
}

/// An exponent such as `e-05`; nothing where the letter is not followed by a whole number.
fn take_exponent(text: &str) -> Result<(i32, &str), DecimalError> {
    let Some(after) = text.strip_prefix(['e', 'E']) else {
        return Ok((0, text));
    };
    let (sign, digits) = take_sign(after);
    let length = digits.find(|c: char| !c.is_ascii_digit()).unwrap_or(digits.len());
    if length == 0 {
        return Ok((0, text));
    }
    if length > EXPONENT_DIGITS {
        return Err(DecimalError::OutOfRange);
    }
    let value: i32 = digits[..length].parse().map_err(|_| DecimalError::OutOfRange)?;
    Ok((if sign == "-" { -value } else { value }, &digits[length..]))
}
