//! Preferred values: the E series of IEC 60063.

/// A series of IEC 60063.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Series {
    /// Three values a decade.
    E3,
    /// Six values a decade.
    E6,
    /// Twelve values a decade.
    E12,
    /// Twenty-four values a decade.
    E24,
}

/// IEC 60063, E24 (from memory; eight of its values differ from the rounded powers of the 24th root of ten).
const E24: [f64; 24] = [
    1.0, 1.1, 1.2, 1.3, 1.5, 1.6, 1.8, 2.0, 2.2, 2.4, 2.7, 3.0, 3.3, 3.6, 3.9, 4.3, 4.7, 5.1, 5.6, 6.2, 6.8, 7.5, 8.2, 9.1,
];

impl Series {
    /// The values of one decade, from 1 up.
    #[must_use]
    pub fn values(self) -> Vec<f64> {
        let step = match self {
            Self::E3 => 8,
            Self::E6 => 4,
            Self::E12 => 2,
            Self::E24 => 1,
        };
        E24.iter().copied().step_by(step).collect()
    }

    /// The preferred values from `low` to `high`, both included where they are preferred themselves. Each is the double
    /// nearest to its decimal.
    #[must_use]
    pub fn between(self, low: f64, high: f64) -> Vec<f64> {
        if !(low > 0.0 && high.is_finite() && low <= high) {
            return Vec::new();
        }
        let first = low.log10().floor() as i32 - 1;
        let last = high.log10().floor() as i32 + 1;
        let slack = 1e-12;
        (first..=last)
            .flat_map(|decade| {
                self.values()
                    .into_iter()
                    .filter_map(move |value| format!("{value}e{decade}").parse::<f64>().ok())
            })
            .filter(|value| *value >= low * (1.0 - slack) && *value <= high * (1.0 + slack))
            .collect()
    }

    /// The lowest preferred value that is not below `value`.
    #[must_use]
    pub fn up(self, value: f64) -> Option<f64> {
        self.between(value, 11.0 * value).first().copied()
    }
}

/// The lowest of an ascending list that is not below `value`.
#[must_use]
pub fn next_up(list: &[f64], value: f64) -> Option<f64> {
    list.iter().copied().find(|item| *item >= value * (1.0 - 1e-12))
}
