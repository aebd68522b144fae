//! Preferred values: the E series of IEC 60063.

use std::sync::LazyLock;

/// A series of IEC 60063, named for the number of its values in a decade.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Series {
    /// Three values a decade.
    E3,
    /// Six values a decade.
    E6,
    /// Twelve values a decade.
    E12,
    /// Twenty-four values a decade.
    E24,
    /// Forty-eight values a decade.
    E48,
    /// Ninety-six values a decade.
    E96,
}

/// IEC 60063, E24 (from memory; eight of its values differ from the rounded powers of the 24th root of ten).
const E24: [f64; 24] = [
    1.0, 1.1, 1.2, 1.3, 1.5, 1.6, 1.8, 2.0, 2.2, 2.4, 2.7, 3.0, 3.3, 3.6, 3.9, 4.3, 4.7, 5.1, 5.6, 6.2, 6.8, 7.5, 8.2,
    9.1,
];
const E12: [f64; 12] = every(2);
const E6: [f64; 6] = every(4);
const E3: [f64; 3] = every(8);
static E48: LazyLock<[f64; 48]> = LazyLock::new(three_figures);
static E96: LazyLock<[f64; 96]> = LazyLock::new(three_figures);

/// Every so manieth value of E24, from the first.
const fn every<const COUNT: usize>(step: usize) -> [f64; COUNT] {
    let mut values = [0.0; COUNT];
    let mut index = 0;
    while index < COUNT {
        values[index] = E24[index * step];
        index += 1;
    }
    values
}

/// IEC 60063, E48 and E96: 10^(i/n) to three figures, without exception in these two series.
fn three_figures<const COUNT: usize>() -> [f64; COUNT] {
    std::array::from_fn(|index| (100.0 * 10.0_f64.powf(index as f64 / COUNT as f64)).round() / 100.0)
}

/// How much of itself a number may lie beyond a preferred value and still count as it: what a few roundings come to.
const SLACK: f64 = 1e-12;

impl Series {
    /// The values of one decade, from 1 up, ascending.
    #[must_use]
    pub fn values(self) -> &'static [f64] {
        match self {
            Self::E3 => &E3,
            Self::E6 => &E6,
            Self::E12 => &E12,
            Self::E24 => &E24,
            Self::E48 => &*E48,
            Self::E96 => &*E96,
        }
    }

    /// The lowest preferred value that is not below `value`, to within the rounding of a few operations; the double
    /// nearest to its decimal. Nothing where `value` is not positive and finite, or at the ends of the range of numbers.
    #[must_use]
    pub fn up(self, value: f64) -> Option<f64> {
        self.value_at(self.place_up(value)?)
    }

    /// The highest preferred value that is not above `value`; otherwise as [`Series::up`].
    #[must_use]
    pub fn down(self, value: f64) -> Option<f64> {
        self.value_at(self.place_down(value)?)
    }

    /// The preferred values about `value`, ascending: the nearest `below` under it, itself where it is preferred, and the
    /// nearest `above` over it. Empty where `value` is not positive and finite.
    #[must_use]
    pub fn around(self, value: f64, below: usize, above: usize) -> Vec<f64> {
        let (Some(down), Some(up)) = (self.place_down(value), self.place_up(value)) else {
            return Vec::new();
        };
        let reach = |count: usize| i64::try_from(count).unwrap_or(i64::MAX).min(self.places());
        // Where the value is preferred itself, both places are its own, and it counts on neither side.
        let own = i64::from(down == up);
        let (first, last) = (down + 1 - own - reach(below), up - 1 + own + reach(above));
        (first..=last).filter_map(|place| self.value_at(place)).collect()
    }

    /// The preferred values from `low` to `high`, both included where they are preferred themselves.
    #[must_use]
    pub fn between(self, low: f64, high: f64) -> Vec<f64> {
        match (self.place_up(low), self.place_down(high)) {
            (Some(first), Some(last)) => (first..=last).filter_map(|place| self.value_at(place)).collect(),
            _ => Vec::new(),
        }
    }

    fn count(self) -> i64 {
        self.values().len() as i64
    }

    /// More places than there are between the smallest and the largest number.
    fn places(self) -> i64 {
        700 * self.count()
    }

    /// The value at a place, counted from 1 at place 0; nothing beyond the range of numbers.
    fn value_at(self, place: i64) -> Option<f64> {
        let index = usize::try_from(place.rem_euclid(self.count())).ok()?;
        let mantissa = self.values().get(index)?;
        // By way of the decimal, so that 4.7 in the decade of milli is the very double that "4.7 mF" reads to.
        let value: f64 = format!("{mantissa}e{}", place.div_euclid(self.count())).parse().ok()?;
        value.is_normal().then_some(value)
    }

    /// The place of the highest value that is not above a number.
    fn place_down(self, value: f64) -> Option<i64> {
        let bound = value * (1.0 + SLACK);
        let start = self.start(value)?;
        (start..start + 3 * self.count()).rfind(|&place| self.value_at(place).is_some_and(|v| v <= bound))
    }

    /// The place of the lowest value that is not below a number.
    fn place_up(self, value: f64) -> Option<i64> {
        let bound = value * (1.0 - SLACK);
        let start = self.start(value)?;
        (start..start + 3 * self.count()).find(|&place| self.value_at(place).is_some_and(|v| v >= bound))
    }

    /// A place less than two decades below a number, and not above it.
    fn start(self, value: f64) -> Option<i64> {
        let usable = value.is_normal() && value > 0.0;
        usable.then(|| (value.log10().floor() as i64 - 1) * self.count())
    }
}

/// The lowest of an ascending list of preferred ratings that is not below `value`, to within the rounding of a few
/// operations; nothing where the list ends below it.
#[must_use]
pub fn next_up(list: &[f64], value: f64) -> Option<f64> {
    list.iter().copied().find(|item| *item >= value - SLACK * value.abs())
}
