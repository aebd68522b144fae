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
    /// Coulombs.
    Charge,
    /// Ampere squared seconds: what a fuse lets through, what a diode withstands.
    JouleIntegral,
    /// Metres.
    Length,
}

/// A unit as it may be written, without its prefix.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Unit {
    pub(super) text: &'static str,
    pub(super) scale: Scale,
    /// Decimal exponent of the largest SI prefix that may stand before it; none may where it is left out.
    pub(super) prefix_maximum: Option<i32>,
}

/// What a unit is in base units: a whole number times a power of ten.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Scale {
    pub(super) factor: u32,
    pub(super) exponent: i32,
}

const GIGA: i32 = 9;
const TERA: i32 = 12;

/// A base unit with prefixes up to one.
const fn prefixed(text: &'static str, maximum: i32) -> Unit {
    Unit {
        text,
        scale: Scale { factor: 1, exponent: 0 },
        prefix_maximum: Some(maximum),
    }
}

/// A unit that takes no prefix.
const fn bare(text: &'static str, factor: u32, exponent: i32) -> Unit {
    Unit {
        text,
        scale: Scale { factor, exponent },
        prefix_maximum: None,
    }
}

impl Dimension {
    /// Every dimension.
    pub const ALL: [Self; 18] = [
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
        Self::Charge,
        Self::JouleIntegral,
        Self::Length,
    ];

    /// The units it may be written in; the first is the one it is written back in.
    pub(super) fn units(self) -> &'static [Unit] {
        match self {
            Self::Voltage => const { &[prefixed("V", GIGA)] },
            Self::Current => const { &[prefixed("A", GIGA)] },
            Self::Power => const { &[prefixed("W", GIGA)] },
            Self::ApparentPower => const { &[prefixed("VA", GIGA)] },
            // Insulation is measured in teraohms; nothing else here grows so large.
            Self::Resistance => {
                const {
                    &[
                        prefixed("ohm", TERA),
                        prefixed("Ohm", TERA),
                        prefixed("\u{3a9}", TERA),
                        prefixed("\u{2126}", TERA),
                    ]
                }
            }
            Self::Inductance => const { &[prefixed("H", GIGA)] },
            Self::Capacitance => const { &[prefixed("F", GIGA)] },
            Self::Frequency => const { &[prefixed("Hz", GIGA)] },
            Self::Ratio => const { &[bare("%", 1, -2)] },
            Self::Angle => const { &[bare("deg", 1, 0), bare("\u{b0}", 1, 0)] },
            Self::Temperature => const { &[bare("degC", 1, 0), bare("\u{b0}C", 1, 0), bare("\u{2103}", 1, 0)] },
            Self::TemperatureDifference => const { &[bare("K", 1, 0)] },
            Self::Time => const { &[prefixed("s", GIGA), bare("min", 60, 0), bare("h", 3600, 0)] },
            Self::Life => const { &[bare("h", 1, 0)] },
            Self::Energy => const { &[prefixed("J", GIGA)] },
            Self::Charge => const { &[prefixed("C", GIGA)] },
            // No prefixes: a prefix before a power is raised with it, and few who write kA2s mean a million.
            Self::JouleIntegral => const { &[bare("A2s", 1, 0), bare("A\u{b2}s", 1, 0)] },
            Self::Length => const { &[prefixed("m", GIGA)] },
        }
    }

    /// What a unit with its prefix is in base units; nothing where it is no unit of this dimension.
    pub(super) fn scale_of(self, word: &str) -> Option<Scale> {
        self.units().iter().find_map(|unit| {
            let prefix = word.strip_suffix(unit.text)?;
            if prefix.is_empty() {
                return Some(unit.scale);
            }
            let &(_, exponent) = PREFIXES.iter().find(|(text, _)| *text == prefix)?;
            (exponent <= unit.prefix_maximum?).then_some(Scale {
                factor: unit.scale.factor,
                exponent: unit.scale.exponent + exponent,
            })
        })
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
            Self::Charge => "charge",
            Self::JouleIntegral => "joule integral",
            Self::Length => "length",
        }
    }

    /// The name with its article, for sentences: `"an apparent power"`.
    pub(super) fn named(self) -> String {
        let article = if self.name().starts_with(['a', 'e', 'i']) {
            "an"
        } else {
            "a"
        };
        format!("{article} {}", self.name())
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
            Self::Charge => "40 uC",
            Self::JouleIntegral => "120 A2s",
            Self::Length => "25 mm",
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
