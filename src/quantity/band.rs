//! A quantity with its low and high ends.

/// One end of a band, or its nominal value.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum End {
    /// The lowest value.
    Low,
    /// The value aimed at.
    Nominal,
    /// The highest value.
    High,
}

impl End {
    /// The word for it.
    #[must_use]
    pub fn as_str(self) -> &'static str {
        match self {
            Self::Low => "low",
            Self::Nominal => "nominal",
            Self::High => "high",
        }
    }
}

/// Three numbers that are no band.
#[derive(Clone, Copy, Debug, PartialEq, Eq, thiserror::Error)]
pub enum BandError {
    /// One of them is not finite.
    #[error("a quantity is a finite number")]
    NotFinite,
    /// They are not in order.
    #[error("a band needs low <= nominal <= high")]
    Disordered,
}

/// A quantity that lies between a low and a high end, with a nominal value in between. Always finite, always ordered, and
/// a zero in it is never a negative zero.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Band {
    low: f64,
    nominal: f64,
    high: f64,
}

impl Band {
    /// Nothing, exactly.
    pub const ZERO: Self = Self::exactly(0.0);

    /// A band from `low` to `high` around `nominal`.
    ///
    /// # Errors
    /// [`BandError`] where a number is not finite or they are not in order.
    pub fn new(low: f64, nominal: f64, high: f64) -> Result<Self, BandError> {
        if !(low.is_finite() && nominal.is_finite() && high.is_finite()) {
            Err(BandError::NotFinite)
        } else if low <= nominal && nominal <= high {
            // Adding zero turns a negative zero into a plain one, and nothing else.
            Ok(Self {
                low: low + 0.0,
                nominal: nominal + 0.0,
                high: high + 0.0,
            })
        } else {
            Err(BandError::Disordered)
        }
    }

    /// A band without width.
    ///
    /// # Errors
    /// [`BandError::NotFinite`].
    pub fn point(value: f64) -> Result<Self, BandError> {
        Self::new(value, value, value)
    }

    /// A band without width, of a number known to be finite when the program is written.
    ///
    /// # Panics
    /// Where it is not finite.
    #[must_use]
    pub const fn exactly(value: f64) -> Self {
        assert!(value.is_finite(), "a quantity is finite");
        let value = value + 0.0;
        Self {
            low: value,
            nominal: value,
            high: value,
        }
    }

    /// The lowest value.
    #[must_use]
    pub const fn low(&self) -> f64 {
        self.low
    }

    /// The value aimed at.
    #[must_use]
    pub const fn nominal(&self) -> f64 {
        self.nominal
    }

    /// The highest value.
    #[must_use]
    pub const fn high(&self) -> f64 {
        self.high
    }

    /// The value at an end.
    #[must_use]
    pub const fn at(&self, end: End) -> f64 {
        match end {
            End::Low => self.low,
            End::Nominal => self.nominal,
            End::High => self.high,
        }
    }

    /// Whether it has no width.
    #[must_use]
    pub fn is_point(&self) -> bool {
        self.low == self.high
    }

    /// The band without width at an end.
    #[must_use]
    pub const fn collapsed(&self, end: End) -> Self {
        let value = self.at(end);
        Self {
            low: value,
            nominal: value,
            high: value,
        }
    }

    /// Whether a value lies within, ends included.
    #[must_use]
    pub fn contains(&self, value: f64) -> bool {
        self.low <= value && value <= self.high
    }
}
