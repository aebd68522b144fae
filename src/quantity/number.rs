//! Decimal numbers kept exactly, so that a prefix, a minute or a percentage is worked in before the one rounding to a double.

/// A decimal number: sign, digits and a power of ten. Nothing is lost in its arithmetic.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Decimal {
    negative: bool,
    /// Digits 0 to 9, the least significant first, the most significant not zero; none for zero.
    digits: Vec<u8>,
    /// Power of ten of the least significant digit.
    exponent: i32,
}

/// Why a decimal is not usable.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum DecimalError {
    /// There is none at this place.
    Missing,
    /// It has more than one point.
    Points,
    /// Beyond the largest double.
    TooLarge,
    /// Not zero, yet nearer to zero than the doubles that carry all their digits.
    TooSmall,
}

/// Digits of an exponent that are read: more can only over- or underflow.
const EXPONENT_DIGITS: usize = 4;

impl Decimal {
    /// Takes a number off the beginning of `text`; the rest.
    pub(super) fn take(text: &str) -> Result<(Self, &str), DecimalError> {
        let (negative, unsigned) = take_sign(text);
        let is_part = |c: char| c.is_ascii_digit() || c == '.';
        let body = unsigned.find(|c| !is_part(c)).unwrap_or(unsigned.len());
        let (whole, fraction) = unsigned[..body].split_once('.').unwrap_or((&unsigned[..body], ""));
        if whole.is_empty() && fraction.is_empty() {
            return Err(DecimalError::Missing);
        }
        if fraction.contains('.') {
            return Err(DecimalError::Points);
        }
        let mut number = Self::around(whole, fraction);
        number.negative = negative && !number.is_zero();
        let (exponent, rest) = take_exponent(&unsigned[body..], number.is_zero())?;
        Ok((number.scaled(1, exponent), rest))
    }

    /// The number whose point stands between two runs of ASCII digits.
    pub(super) fn around(whole: &str, fraction: &str) -> Self {
        let digits = whole
            .bytes()
            .chain(fraction.bytes())
            .rev()
            .map(|byte| i64::from(byte - b'0'));
        Self::carried(digits.collect(), -(fraction.len() as i32))
    }

    /// Its value, rounded once to the nearest double.
    pub(super) fn value(&self) -> Result<f64, DecimalError> {
        if self.is_zero() {
            return Ok(0.0);
        }
        let sign = if self.negative { "-" } else { "" };
        let digits: String = self.digits.iter().rev().map(|digit| char::from(b'0' + digit)).collect();
        let value: f64 = format!("{sign}{digits}e{}", self.exponent)
            .parse()
            .map_err(|_| DecimalError::Missing)?;
        if value.is_infinite() {
            Err(DecimalError::TooLarge)
        } else if value.is_normal() {
            Ok(value)
        } else {
            Err(DecimalError::TooSmall)
        }
    }

    /// Times a whole number and a power of ten.
    pub(super) fn scaled(&self, factor: u32, exponent: i32) -> Self {
        let digits = self
            .digits
            .iter()
            .map(|&digit| i64::from(digit) * i64::from(factor))
            .collect();
        let product = Self::carried(digits, self.exponent + exponent);
        Self {
            negative: self.negative && !product.is_zero(),
            ..product
        }
    }

    /// The product, without its sign.
    pub(super) fn magnitude_times(&self, other: &Self) -> Self {
        let mut sums = vec![0_i64; self.digits.len() + other.digits.len()];
        for (i, &a) in self.digits.iter().enumerate() {
            for (j, &b) in other.digits.iter().enumerate() {
                sums[i + j] += i64::from(a) * i64::from(b);
            }
        }
        Self::carried(sums, self.exponent + other.exponent)
    }

    pub(super) fn plus(&self, other: &Self) -> Self {
        self.combined(other, 1)
    }

    pub(super) fn minus(&self, other: &Self) -> Self {
        self.combined(other, -1)
    }

    fn is_zero(&self) -> bool {
        self.digits.is_empty()
    }

    fn combined(&self, other: &Self, sign: i64) -> Self {
        let exponent = self.exponent.min(other.exponent);
        let offset = |number: &Self| (number.exponent - exponent).unsigned_abs() as usize;
        let length = (self.digits.len() + offset(self)).max(other.digits.len() + offset(other));
        let mut sums = vec![0_i64; length];
        for (number, sign) in [(self, 1), (other, sign)] {
            let sign = if number.negative { -sign } else { sign };
            for (place, &digit) in number.digits.iter().enumerate() {
                sums[place + offset(number)] += sign * i64::from(digit);
            }
        }
        Self::carried(sums, exponent)
    }

    /// From sums a decimal place, which may be of any size and sign.
    fn carried(sums: Vec<i64>, exponent: i32) -> Self {
        let mut digits = Vec::with_capacity(sums.len() + 4);
        let mut carry = 0_i64;
        for sum in &sums {
            let total = sum + carry;
            digits.push(total.rem_euclid(10) as u8);
            carry = total.div_euclid(10);
        }
        if carry < 0 {
            let opposite = Self::carried(sums.into_iter().map(|sum| -sum).collect(), exponent);
            return Self {
                negative: true,
                ..opposite
            };
        }
        while carry > 0 {
            digits.push((carry % 10) as u8);
            carry /= 10;
        }
        while digits.last() == Some(&0) {
            digits.pop();
        }
        Self {
            negative: false,
            digits,
            exponent,
        }
    }
}

/// A sign off the beginning, a hyphen or a true minus sign alike: whether it is a minus; the rest.
pub(super) fn take_sign(text: &str) -> (bool, &str) {
    for (spelling, negative) in [('-', true), ('\u{2212}', true), ('+', false)] {
        if let Some(rest) = text.strip_prefix(spelling) {
            return (negative, rest);
        }
    }
    (false, text)
}

/// An exponent such as `e-05`; nothing where the letter is not followed by a whole number.
fn take_exponent(text: &str, of_zero: bool) -> Result<(i32, &str), DecimalError> {
    let Some(after) = text.strip_prefix(['e', 'E']) else {
        return Ok((0, text));
    };
    let (negative, digits) = take_sign(after);
    let length = digits.find(|c: char| !c.is_ascii_digit()).unwrap_or(digits.len());
    if length == 0 {
        return Ok((0, text));
    }
    let (digits, rest) = digits.split_at(length);
    let digits = digits.trim_start_matches('0');
    if of_zero || digits.is_empty() {
        return Ok((0, rest));
    }
    let beyond = if negative {
        DecimalError::TooSmall
    } else {
        DecimalError::TooLarge
    };
    if digits.len() > EXPONENT_DIGITS {
        return Err(beyond);
    }
    let value: i32 = digits.parse().map_err(|_| beyond)?;
    Ok((if negative { -value } else { value }, rest))
}
