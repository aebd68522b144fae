//! What is no quantity, the kind of refusal, and the words that say what would be right.

use crate::quantity::Dimension::{self, *};
use crate::quantity::{QuantityError, TEXT_MAXIMUM, read_band, read_quantity};

/// The kind of an error, as its variant is named.
fn kind(error: &QuantityError) -> &'static str {
    match error {
        QuantityError::Empty { .. } => "Empty",
        QuantityError::TooLong { .. } => "TooLong",
        QuantityError::Character { .. } => "Character",
        QuantityError::NoNumber { .. } => "NoNumber",
        QuantityError::NotFinite { .. } => "NotFinite",
        QuantityError::NoUnit { .. } => "NoUnit",
        QuantityError::DecimalComma { .. } => "DecimalComma",
        QuantityError::Separators { .. } => "Separators",
        QuantityError::WrongDimension { .. } => "WrongDimension",
        QuantityError::UnknownUnit { .. } => "UnknownUnit",
        QuantityError::Overflow { .. } => "Overflow",
        QuantityError::Underflow { .. } => "Underflow",
        QuantityError::Tolerance { .. } => "Tolerance",
        QuantityError::Inverted { .. } => "Inverted",
        QuantityError::NominalOutside { .. } => "NominalOutside",
        QuantityError::NotAlone { .. } => "NotAlone",
    }
}

/// Text, dimension, kind, and words that the message must hold.
const REFUSALS: &[(&str, Dimension, &str, &str)] = &[
    ("", Voltage, "Empty", "for example \"230 V\""),
    ("   ", Voltage, "Empty", "is empty"),
    ("\u{a0}", Inductance, "Empty", "write an inductance"),
    (
        "4700",
        Capacitance,
        "NoUnit",
        "\"4700\" has no unit; write a capacitance with its unit, for example \"4700 uF\"",
    ),
    ("230", Voltage, "NoUnit", "for example \"230 V\""),
    ("60", ApparentPower, "NoUnit", "an apparent power"),
    ("1e3", Voltage, "NoUnit", "no unit"),
    ("0", Resistance, "NoUnit", "no unit"),
    ("0.08", Ratio, "NoUnit", "for example \"8 %\""),
    ("230 (200 V to 240 V)", Voltage, "NoUnit", "no unit"),
    ("230 \u{b1}10 %", Voltage, "NoUnit", "no unit"),
    ("V", Voltage, "NoNumber", "does not begin with a number"),
    ("--5 V", Voltage, "NoNumber", "number"),
    ("+-5 V", Voltage, "NoNumber", "number"),
    (". V", Voltage, "NoNumber", "number"),
    ("- V", Voltage, "NoNumber", "number"),
    ("about 5 V", Voltage, "NoNumber", "number"),
    ("e5 V", Voltage, "NoNumber", "number"),
    ("\u{b1}10 V", Voltage, "NoNumber", "number"),
    ("\u{2013}5 V", Voltage, "NoNumber", "number"),
    ("R", Resistance, "NoNumber", "number"),
    ("k", Resistance, "NoNumber", "number"),
    ("inf V", Voltage, "NotFinite", "not a finite number"),
    ("-inf V", Voltage, "NotFinite", "finite"),
    ("+Infinity V", Voltage, "NotFinite", "finite"),
    ("INF", Voltage, "NotFinite", "finite"),
    ("nan V", Voltage, "NotFinite", "finite"),
    ("NaN", Capacitance, "NotFinite", "finite"),
    ("0,23 kV", Voltage, "DecimalComma", "point"),
    ("4,7 uF", Capacitance, "DecimalComma", "comma"),
    ("0,230 kV", Voltage, "DecimalComma", "comma"),
    (",5 V", Voltage, "DecimalComma", "comma"),
    ("-,5 V", Voltage, "DecimalComma", "comma"),
    ("5, V", Voltage, "DecimalComma", "comma"),
    ("1,2345 V", Voltage, "DecimalComma", "comma"),
    ("1,234 V", Voltage, "Separators", "4700"),
    ("1,234.5 V", Voltage, "Separators", "together"),
    ("1,234,567 V", Voltage, "Separators", "separators"),
    ("1.234.567 V", Voltage, "Separators", "one decimal point"),
    ("1.2.3 V", Voltage, "Separators", "one decimal point"),
    ("1..2 V", Voltage, "Separators", "one decimal point"),
    ("4'700 uF", Capacitance, "Separators", "separators"),
    ("4_700 uF", Capacitance, "Separators", "separators"),
    ("4 700 uF", Capacitance, "Separators", "separators"),
    ("4\u{202f}700 uF", Capacitance, "Separators", "separators"),
    ("1e999 V", Voltage, "Overflow", "too large"),
    ("-1e309 V", Voltage, "Overflow", "too large"),
    ("1e99999 V", Voltage, "Overflow", "too large"),
    ("1e306 kV", Voltage, "Overflow", "too large"),
    ("1e308 min", Time, "Overflow", "too large"),
    ("1e-400 V", Voltage, "Underflow", "too small"),
    ("1e-99999 V", Voltage, "Underflow", "too small"),
    ("1e-310 V", Voltage, "Underflow", "too small"),
    ("2.2250738585072009e-308 V", Voltage, "Underflow", "too small"),
    ("1e-300 pF", Capacitance, "Underflow", "write 0"),
    ("1e-307 %", Ratio, "Underflow", "too small"),
    (
        "5 A",
        Voltage,
        "WrongDimension",
        "\"A\" is a unit of current, but a voltage is wanted",
    ),
    (
        "5 ohm",
        Inductance,
        "WrongDimension",
        "resistance, but an inductance is wanted, for example \"0.4 mH\"",
    ),
    ("60 W", ApparentPower, "WrongDimension", "power, but an apparent power"),
    ("60 VA", Power, "WrongDimension", "apparent power, but a power"),
    ("5 mV", Current, "WrongDimension", "voltage"),
    ("5 K", Temperature, "WrongDimension", "temperature difference"),
    ("5 degC", TemperatureDifference, "WrongDimension", "temperature"),
    ("45 C", Temperature, "WrongDimension", "charge"),
    ("45 deg", Temperature, "WrongDimension", "angle"),
    ("45 degC", Angle, "WrongDimension", "temperature"),
    ("5 %", Voltage, "WrongDimension", "ratio"),
    ("5 V", Ratio, "WrongDimension", "voltage"),
    ("50 s", Frequency, "WrongDimension", "time"),
    ("20 ms", Life, "WrongDimension", "time"),
    ("5 uH", Capacitance, "WrongDimension", "inductance"),
    ("5 H", Time, "WrongDimension", "inductance"),
    ("5 J", JouleIntegral, "WrongDimension", "energy"),
    ("5 A2s", Energy, "WrongDimension", "joule integral"),
    ("5 mm", Resistance, "WrongDimension", "length"),
    ("10 m\u{3a9}", Capacitance, "WrongDimension", "resistance"),
    ("5 KV", Voltage, "UnknownUnit", "kilo is a small k: write \"kV\""),
    ("4.7 Kohm", Resistance, "UnknownUnit", "write \"kohm\""),
    ("4.7 K\u{3a9}", Resistance, "UnknownUnit", "kilo"),
    (
        "10 K",
        Resistance,
        "UnknownUnit",
        "a prefix needs its unit: write \"kohm\"",
    ),
    ("4.7k", Resistance, "UnknownUnit", "write \"kohm\""),
    ("4.7 u", Capacitance, "UnknownUnit", "write \"uF\""),
    ("5 m", Voltage, "UnknownUnit", "write \"mV\""),
    ("5 K", Voltage, "UnknownUnit", "write \"kV\""),
    ("4k7", Voltage, "UnknownUnit", "not a unit of voltage"),
    ("4n7", Resistance, "UnknownUnit", "not a unit of resistance"),
    ("4R7", Capacitance, "UnknownUnit", "not a unit of capacitance"),
    ("-4k7", Resistance, "UnknownUnit", "not a unit"),
    ("4k7k", Resistance, "UnknownUnit", "not a unit"),
    ("5 volts", Voltage, "UnknownUnit", "write for example \"230 V\""),
    ("5 ohms", Resistance, "UnknownUnit", "not a unit of resistance"),
    ("5 v", Voltage, "UnknownUnit", "write \"V\""),
    ("5 mv", Voltage, "UnknownUnit", "write \"mV\""),
    ("50 hz", Frequency, "UnknownUnit", "write \"Hz\""),
    ("50 KHZ", Frequency, "UnknownUnit", "write \"kHz\""),
    ("5 OHM", Resistance, "UnknownUnit", "write \"ohm\""),
    ("5 fF", Capacitance, "UnknownUnit", "not a unit"),
    ("5 TV", Voltage, "UnknownUnit", "not a unit"),
    ("5 THz", Frequency, "UnknownUnit", "not a unit"),
    ("5 cm", Length, "UnknownUnit", "not a unit"),
    ("5 mdeg", Angle, "UnknownUnit", "not a unit"),
    ("5 mdegC", Temperature, "UnknownUnit", "not a unit"),
    ("5 mK", TemperatureDifference, "UnknownUnit", "not a unit"),
    ("5 m%", Ratio, "UnknownUnit", "not a unit"),
    ("2 kh", Life, "UnknownUnit", "20000 h"),
    ("2 a", Life, "UnknownUnit", "20000 h"),
    ("2 mmin", Time, "UnknownUnit", "not a unit"),
    ("2 kA2s", JouleIntegral, "UnknownUnit", "120 A2s"),
    ("5 uuF", Capacitance, "UnknownUnit", "not a unit"),
    ("5e V", Voltage, "UnknownUnit", "not a unit"),
    ("5 e3 V", Voltage, "UnknownUnit", "not a unit"),
    ("0x10 V", Voltage, "UnknownUnit", "not a unit"),
    ("5 V\u{b2}", Voltage, "UnknownUnit", "not a unit"),
    ("\u{ff15} V", Voltage, "Character", "plain characters"),
    ("5 \u{1f50c}", Voltage, "Character", "plain characters"),
    ("5 \u{3c9}", Resistance, "Character", "no place"),
    ("5\u{200b} V", Voltage, "Character", "no place"),
    ("5 V\n", Voltage, "Character", "no place"),
    ("5 V\0", Voltage, "Character", "no place"),
    ("\u{661} V", Voltage, "Character", "no place"),
    ("230 V \u{b1}10", Voltage, "Tolerance", "a unit on each number"),
    ("230 V \u{b1}", Voltage, "Tolerance", "not a tolerance"),
    ("230 V \u{b1}-10 %", Voltage, "Tolerance", "not a tolerance"),
    ("230 V \u{b1}+10 %", Voltage, "Tolerance", "not a tolerance"),
    ("230 V 10 %", Voltage, "Tolerance", "not a tolerance"),
    ("230 V +10 %", Voltage, "Tolerance", "-10 %/+50 %"),
    ("230 V -10 %", Voltage, "Tolerance", "not a tolerance"),
    ("230 V -10 %/-5 %", Voltage, "Tolerance", "not a tolerance"),
    ("230 V +10 %/+5 %", Voltage, "Tolerance", "not a tolerance"),
    ("230 V -10/+10 %", Voltage, "Tolerance", "a unit on each number"),
    ("230 V \u{b1}10 % extra", Voltage, "Tolerance", "not a tolerance"),
    ("230 V \u{b1}10 %%", Voltage, "UnknownUnit", "ratio"),
    ("230 V (200 V)", Voltage, "Tolerance", "not a tolerance"),
    ("230 V (200 V to 240 V", Voltage, "Tolerance", "not a tolerance"),
    ("230 V (200 V to 240 V) x", Voltage, "Tolerance", "not a tolerance"),
    ("230 V (200 V - 240 V)", Voltage, "Tolerance", "(0.05 A to 1.4 A)"),
    ("230 V V", Voltage, "Tolerance", "not a tolerance"),
    ("4k7 ohm", Resistance, "Tolerance", "not a tolerance"),
    ("230 V \u{b1}10 A", Voltage, "WrongDimension", "current"),
    (
        "25 degC \u{b1}5 degC",
        Temperature,
        "WrongDimension",
        "temperature difference is wanted, for example \"10 K\"",
    ),
    ("230 V (200 A to 240 V)", Voltage, "WrongDimension", "current"),
    ("230 V (200 V to 240)", Voltage, "NoUnit", "no unit"),
    ("230 V (200 to 240 V)", Voltage, "UnknownUnit", "not a unit"),
    ("230 V ()", Voltage, "NoNumber", "number"),
    ("230 V \u{b1}10,5 %", Voltage, "DecimalComma", "comma"),
    ("230 V (260 V to 200 V)", Voltage, "Inverted", "low end first"),
    (
        "230 V (240 V to 260 V)",
        Voltage,
        "NominalOutside",
        "low <= nominal <= high",
    ),
    ("230 V (200 V to 220 V)", Voltage, "NominalOutside", "outside"),
    ("1.7e308 V \u{b1}10 %", Voltage, "Overflow", "too large"),
    ("1e-307 V \u{b1}99.99 %", Voltage, "Underflow", "too small"),
];

#[test]
fn what_is_no_quantity_is_refused_with_its_kind_and_advice() {
    for &(text, dimension, wanted, words) in REFUSALS {
        let error = read_band(text, dimension).expect_err(text);
        assert_eq!(kind(&error), wanted, "{text:?} says {error}");
        assert!(
            error.to_string().contains(words),
            "{text:?} says {error}, not {words:?}"
        );
        let alone = read_quantity(text, dimension).expect_err(text);
        let order = matches!(
            error,
            QuantityError::Inverted { .. } | QuantityError::NominalOutside { .. }
        );
        assert_eq!(
            kind(&alone),
            if order { "NotAlone" } else { wanted },
            "{text:?} alone says {alone}"
        );
    }
}

#[test]
fn a_band_is_refused_where_one_value_is_wanted() {
    for text in [
        "230 V \u{b1}1 %",
        "230 V \u{b1}0 %",
        "230 V -0 V/+0 V",
        "230 V (200 V to 240 V)",
        "230 V (230 V to 230 V)",
    ] {
        let error = read_quantity(text, Voltage).expect_err(text);
        assert_eq!(error, QuantityError::NotAlone { dimension: Voltage });
        assert!(
            error.to_string().contains("a voltage alone, for example \"230 V\""),
            "{error}"
        );
    }
}

#[test]
fn the_bound_on_the_text_counts_characters() {
    let padded = |length: usize| format!("{}5 \u{3a9}", "0".repeat(length - 3));
    assert_eq!(read_quantity(&padded(TEXT_MAXIMUM), Resistance), Ok(5.0));
    let error = read_quantity(&padded(TEXT_MAXIMUM + 1), Resistance).expect_err("too long");
    assert_eq!(error, QuantityError::TooLong { dimension: Resistance });
    let long = "9".repeat(1 << 20);
    assert_eq!(
        read_band(&long, Voltage),
        Err(QuantityError::TooLong { dimension: Voltage })
    );
}

#[test]
fn an_error_repeats_no_more_than_a_line_of_the_text() {
    let error = read_band(&"\"".repeat(TEXT_MAXIMUM), Voltage).expect_err("quotes");
    assert!(error.to_string().chars().count() < 240, "{error}");
}
