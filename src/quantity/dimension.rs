//! What a quantity measures, and in which units it is written.

/// What a quantity measures.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Dimension {
    /// Volts.
    Voltage,
    /// Amperes.
    Current,
    /// Watts.
    Power,
    /// Volt-amperes.
    ApparentPower,
    /// Ohms.
    Resistance,
    /// Henries.
    Inductance,
    /// Farads.
    Capacitance,
    /// Hertz.
    Frequency,
    /// A fraction, written in percent.
    Ratio,
    /// Degrees of angle.
    Angle,
    /// Degrees Celsius.
    Temperature,
    /// Kelvins.
    TemperatureDifference,
    /// Seconds.
    Time,
    /// Hours.
    Life,
    /// Joules.
    Energy,
}

/// A unit as it may be written, without its prefix.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Unit {
    pub(super) text: &'static str,
    /// Decimal exponent of the unit in base units.
    pub(super) exponent: i32,
    /// Whether SI prefixes may stand before it.
    pub(super) prefixed: bool,
}

const fn unit(text: &'static str, exponent: i32, prefixed: bool) -> Unit {
    Unit {
        text,
        exponent,
        prefixed,
    }
}

impl Dimension {
    /// Every dimension.
    pub const ALL: [Self; 15] = [
        Self::Voltage,
        Self::Current,
        Self::Power,
        Self::ApparentPower,
        Self::Resistance,
        Self::Inductance,
        Self::Capacitance,
        Self::Frequency,
        Self::Ratio,
        Self::Angle,
        Self::Temperature,
        Self::TemperatureDifference,
        Self::Time,
        Self::Life,
        Self::Energy,
    ];

    /// The units it may be written in; the first is the one it is written back in.
    pub(super) fn units(self) -> &'static [Unit] {
        match self {
            Self::Voltage => const { &[unit("V", 0, true)] },
            Self::Current => const { &[unit("A", 0, true)] },
            Self::Power => const { &[unit("W", 0, true)] },
            Self::ApparentPower => const { &[unit("VA", 0, true)] },
            Self::Resistance => {
                const { &[unit("ohm", 0, true), unit("Ohm", 0, true), unit("\u{3a9}", 0, true), unit("\u{2126}", 0, true)] }
            }
            Self::Inductance => const { &[unit("H", 0, true)] },
            Self::Capacitance => const { &[unit("F", 0, true)] },
            Self::Frequency => const { &[unit("Hz", 0, true)] },
            Self::Ratio => const { &[unit("%", -2, false)] },
            Self::Angle => const { &[unit("deg", 0, false), unit("\u{b0}", 0, false)] },
            Self::Temperature => {
                const { &[unit("degC", 0, false), unit("\u{b0}C", 0, false), unit("\u{2103}", 0, false)] }
            }
            Self::TemperatureDifference => const { &[unit("K", 0, false)] },
            Self::Time => const { &[unit("s", 0, true)] },
            Self::Life => const { &[unit("h", 0, false)] },
            Self::Energy => const { &[unit("J", 0, true)] },
        }
    }

    /// The unit it is written back in, for example `"V"`, `"ohm"`, `"%"`, `"degC"`.
    #[must_use]
    pub fn unit(self) -> &'static str {
        self.units()[0].text
    }

    /// The name in sentences.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            Self::Voltage => "voltage",
            Self::Current => "current",
            Self::Power => "power",
            Self::ApparentPower => "apparent power",
            Self::Resistance => "resistance",
            Self::Inductance => "inductance",
            Self::Capacitance => "capacitance",
            Self::Frequency => "frequency",
            Self::Ratio => "ratio",
            Self::Angle => "angle",
            Self::Temperature => "temperature",
            Self::TemperatureDifference => "temperature difference",
            Self::Time => "time",
            Self::Life => "life",
            Self::Energy => "energy",
        }
    }

    /// A quantity of this dimension as one would write it.
    #[must_use]
    pub fn example(self) -> &'static str {
        match self {
            Self::Voltage => "230 V",
            Self::Current => "1.2 A",
            Self::Power => "1.9 W",
            Self::ApparentPower => "60 VA",
            Self::Resistance => "12 mohm",
            Self::Inductance => "0.4 mH",
            Self::Capacitance => "4700 uF",
            Self::Frequency => "50 Hz",
            Self::Ratio => "8 %",
            Self::Angle => "180 deg",
            Self::Temperature => "45 degC",
            Self::TemperatureDifference => "10 K",
            Self::Time => "20 ms",
            Self::Life => "20000 h",
            Self::Energy => "30 J",
        }
    }
}

/// SI prefixes that occur on a bench, with their decimal exponents. The micro sign has three spellings.
pub(super) const PREFIXES: [(&str, i32); 10] = [
    ("p", -12),
    ("n", -9),
    ("u", -6),
    ("\u{b5}", -6),
    ("\u{3bc}", -6),
    ("m", -3),
    ("k", 3),
    ("M", 6),
    ("G", 9),
    ("T", 12),
];
