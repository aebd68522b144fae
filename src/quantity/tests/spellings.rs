//! Every spelling of a lone quantity, against the literal that the compiler rounds.

use crate::quantity::Dimension::{self, *};
use crate::quantity::read_quantity;

fn reads(text: &str, dimension: Dimension, value: f64) {
    let found = read_quantity(text, dimension).unwrap_or_else(|error| panic!("{text:?}: {error}"));
    assert_eq!(found.to_bits(), value.to_bits(), "{text:?}: {found:e} for {value:e}");
}

/// Units, prefixes and the places where spaces may stand.
const SPELLINGS: &[(&str, Dimension, f64)] = &[
    ("230 V", Voltage, 230.0),
    ("230V", Voltage, 230.0),
    ("230\u{a0}V", Voltage, 230.0),
    ("230\u{202f}V", Voltage, 230.0),
    ("230\u{2009}V", Voltage, 230.0),
    ("230  V", Voltage, 230.0),
    ("230\tV", Voltage, 230.0),
    ("+230 V", Voltage, 230.0),
    ("-12.5 V", Voltage, -12.5),
    ("\u{2212}12.5 V", Voltage, -12.5),
    ("0.78 V", Voltage, 0.78),
    (".78 V", Voltage, 0.78),
    ("5. V", Voltage, 5.0),
    ("007 V", Voltage, 7.0),
    ("20.50 V", Voltage, 20.5),
    ("1.5 kV", Voltage, 1500.0),
    ("1.5kV", Voltage, 1500.0),
    ("650 mV", Voltage, 0.65),
    ("33 uV", Voltage, 33e-6),
    ("33 \u{b5}V", Voltage, 33e-6),
    ("33 \u{3bc}V", Voltage, 33e-6),
    ("3 nV", Voltage, 3e-9),
    ("3 pV", Voltage, 3e-12),
    ("1 MV", Voltage, 1e6),
    ("1 GV", Voltage, 1e9),
    ("0 V", Voltage, 0.0),
    ("-0 V", Voltage, 0.0),
    ("0.000 mV", Voltage, 0.0),
    ("0e99999 V", Voltage, 0.0),
    ("1.2 A", Current, 1.2),
    ("50 mA", Current, 50e-3),
    ("0.05 A", Current, 0.05),
    ("10 uA", Current, 10e-6),
    ("10 \u{b5}A", Current, 10e-6),
    ("2 kA", Current, 2000.0),
    ("1.9 W", Power, 1.9),
    ("250 mW", Power, 250e-3),
    ("1.1 kW", Power, 1100.0),
    ("1.1 MW", Power, 1.1e6),
    ("60 VA", ApparentPower, 60.0),
    ("1 kVA", ApparentPower, 1000.0),
    ("2.5 MVA", ApparentPower, 2.5e6),
    ("500 mVA", ApparentPower, 0.5),
    ("11 ohm", Resistance, 11.0),
    ("11 Ohm", Resistance, 11.0),
    ("11 \u{3a9}", Resistance, 11.0),
    ("11 \u{2126}", Resistance, 11.0),
    ("11\u{3a9}", Resistance, 11.0),
    ("12 mohm", Resistance, 12e-3),
    ("12 m\u{3a9}", Resistance, 12e-3),
    ("12 m\u{2126}", Resistance, 12e-3),
    ("12 mOhm", Resistance, 12e-3),
    ("12mohm", Resistance, 12e-3),
    ("700 uohm", Resistance, 700e-6),
    ("700 \u{b5}\u{3a9}", Resistance, 700e-6),
    ("700 \u{3bc}\u{2126}", Resistance, 700e-6),
    ("4.7 kohm", Resistance, 4700.0),
    ("4.7 k\u{3a9}", Resistance, 4700.0),
    ("1 Mohm", Resistance, 1e6),
    ("2.2 Gohm", Resistance, 2.2e9),
    ("1 Tohm", Resistance, 1e12),
    ("1 T\u{3a9}", Resistance, 1e12),
    ("0 ohm", Resistance, 0.0),
    ("0.8 mH", Inductance, 0.8e-3),
    ("60 uH", Inductance, 60e-6),
    ("60 \u{b5}H", Inductance, 60e-6),
    ("7e-05 H", Inductance, 7e-5),
    ("7E-5 H", Inductance, 7e-5),
    ("7e-5H", Inductance, 7e-5),
    ("7e\u{2212}5 H", Inductance, 7e-5),
    ("70e-3 mH", Inductance, 70e-6),
    ("7e+1 uH", Inductance, 70e-6),
    ("7e0000001 uH", Inductance, 70e-6),
    ("680 nH", Inductance, 680e-9),
    ("4700 uF", Capacitance, 4700e-6),
    ("4700uF", Capacitance, 4700e-6),
    ("4700 \u{b5}F", Capacitance, 4700e-6),
    ("4700 \u{3bc}F", Capacitance, 4700e-6),
    ("4700\u{a0}\u{b5}F", Capacitance, 4700e-6),
    ("4.7 mF", Capacitance, 4.7e-3),
    ("0.0047 F", Capacitance, 0.0047),
    ("4.7e-3 F", Capacitance, 4.7e-3),
    ("100 nF", Capacitance, 100e-9),
    ("22 pF", Capacitance, 22e-12),
    ("0.1 uF", Capacitance, 0.1e-6),
    ("2.7 F", Capacitance, 2.7),
    ("50 Hz", Frequency, 50.0),
    ("0.4 kHz", Frequency, 400.0),
    ("16.7 Hz", Frequency, 16.7),
    ("1.2 MHz", Frequency, 1.2e6),
    ("2.4 GHz", Frequency, 2.4e9),
    ("8 %", Ratio, 0.08),
    ("8%", Ratio, 0.08),
    ("8\u{202f}%", Ratio, 0.08),
    ("0.07 %", Ratio, 0.0007),
    ("3.5 %", Ratio, 0.035),
    ("100 %", Ratio, 1.0),
    ("-2 %", Ratio, -0.02),
    ("180 deg", Angle, 180.0),
    ("180deg", Angle, 180.0),
    ("180\u{b0}", Angle, 180.0),
    ("180 \u{b0}", Angle, 180.0),
    ("-30 deg", Angle, -30.0),
    ("45 degC", Temperature, 45.0),
    ("45degC", Temperature, 45.0),
    ("45 \u{b0}C", Temperature, 45.0),
    ("45\u{b0}C", Temperature, 45.0),
    ("-40 \u{2103}", Temperature, -40.0),
    ("\u{2212}40 \u{b0}C", Temperature, -40.0),
    ("10 K", TemperatureDifference, 10.0),
    ("0.5 K", TemperatureDifference, 0.5),
    ("20 ms", Time, 20e-3),
    ("8.33 ms", Time, 8.33e-3),
    ("50 us", Time, 50e-6),
    ("50 \u{b5}s", Time, 50e-6),
    ("4 ns", Time, 4e-9),
    ("2 s", Time, 2.0),
    ("5 min", Time, 300.0),
    ("0.1 min", Time, 6.0),
    ("2.3 min", Time, 138.0),
    ("1.1 h", Time, 3960.0),
    ("24 h", Time, 86400.0),
    ("20000 h", Life, 20000.0),
    ("2e4 h", Life, 20000.0),
    ("30 J", Energy, 30.0),
    ("1.2 kJ", Energy, 1200.0),
    ("5 mJ", Energy, 5e-3),
    ("40 uC", Charge, 40e-6),
    ("3 C", Charge, 3.0),
    ("120 A2s", JouleIntegral, 120.0),
    ("120 A\u{b2}s", JouleIntegral, 120.0),
    ("120A2s", JouleIntegral, 120.0),
    ("25 mm", Length, 25e-3),
    ("1.5 m", Length, 1.5),
    ("35 um", Length, 35e-6),
    // Just below the largest, just above the smallest number, and more digits than a double holds.
    ("1.7976931348623157e308 V", Voltage, f64::MAX),
    ("2.2250738585072014e-308 V", Voltage, f64::MIN_POSITIVE),
    ("2.2250738585072014e-299 nV", Voltage, f64::MIN_POSITIVE),
    ("2.2250738585072014e-306 %", Ratio, f64::MIN_POSITIVE),
    (
        "0.1000000000000000055511151231257827021181583404541015625 V",
        Voltage,
        0.1,
    ),
    ("3.14159265358979323846264338327950288 V", Voltage, std::f64::consts::PI),
    // Halfway between two doubles: to the even one; a hair above: up.
    ("9007199254740993 V", Voltage, 9_007_199_254_740_992.0),
    ("9007199254740993.0000000001 V", Voltage, 9_007_199_254_740_994.0),
];

#[test]
fn spellings_read_to_the_nearest_double() {
    for &(text, dimension, value) in SPELLINGS {
        reads(text, dimension, value);
        reads(&format!("  {text}\u{a0}"), dimension, value);
    }
}

/// IEC 60062 (from memory): the letter stands for the point; R, K, M, G, T and L for milli in resistances; p, n, u, m and F
/// in capacitances.
const CODES: &[(&str, Dimension, f64)] = &[
    ("4R7", Resistance, 4.7),
    ("4K7", Resistance, 4700.0),
    ("4k7", Resistance, 4700.0),
    ("R22", Resistance, 0.22),
    ("R047", Resistance, 0.047),
    ("0R047", Resistance, 0.047),
    ("47R", Resistance, 47.0),
    ("0R", Resistance, 0.0),
    ("K47", Resistance, 470.0),
    ("10K", Resistance, 10e3),
    ("10k", Resistance, 10e3),
    ("1M0", Resistance, 1e6),
    ("2M2", Resistance, 2.2e6),
    ("5G6", Resistance, 5.6e9),
    ("1T0", Resistance, 1e12),
    ("3L3", Resistance, 3.3e-3),
    ("L50", Resistance, 0.5e-3),
    ("10L", Resistance, 10e-3),
    ("59R04", Resistance, 59.04),
    ("4n7", Capacitance, 4.7e-9),
    ("100n", Capacitance, 100e-9),
    ("p33", Capacitance, 0.33e-12),
    ("47p", Capacitance, 47e-12),
    ("22u", Capacitance, 22e-6),
    ("2u2", Capacitance, 2.2e-6),
    ("4\u{b5}7", Capacitance, 4.7e-6),
    ("4\u{3bc}7", Capacitance, 4.7e-6),
    ("2m2", Capacitance, 2.2e-3),
    ("10m", Capacitance, 10e-3),
    ("1F5", Capacitance, 1.5),
];

#[test]
fn letter_codes_of_iec_60062_read() {
    for &(text, dimension, value) in CODES {
        reads(text, dimension, value);
        reads(&format!(" {text} "), dimension, value);
    }
}

#[test]
fn the_tables_are_long_enough_to_mean_something() {
    assert!(
        SPELLINGS.len() + CODES.len() >= 160,
        "{} and {}",
        SPELLINGS.len(),
        CODES.len()
    );
}

#[test]
fn every_dimension_reads_its_own_example_and_its_own_unit() {
    for dimension in Dimension::ALL {
        let example = dimension.example();
        assert!(read_quantity(example, dimension).is_ok(), "{example}");
        assert!(
            example.ends_with(dimension.unit()),
            "{example} is in {}",
            dimension.unit()
        );
        reads(
            &format!("1 {}", dimension.unit()),
            dimension,
            if dimension == Ratio { 0.01 } else { 1.0 },
        );
        assert!(dimension.unit().is_ascii() && dimension.name().chars().all(|c| c == ' ' || c.is_ascii_lowercase()));
    }
}
