//! Spellings, round trips, preferred values.

use super::*;
use proptest::prelude::*;

fn reads(text: &str, dimension: Dimension, value: f64) {
    let found = read_quantity(text, dimension).unwrap_or_else(|error| panic!("{text:?}: {error}"));
    assert_eq!(found.to_bits(), value.to_bits(), "{text:?}: {found:e} for {value:e}");
}

#[test]
fn spellings_read_to_the_nearest_double() {
    use Dimension as D;
    let rows: &[(&str, D, f64)] = &[
        ("4700 uF", D::Capacitance, 4700e-6),
        ("4700uF", D::Capacitance, 4700e-6),
        ("4700 \u{b5}F", D::Capacitance, 4700e-6),
        ("4700 \u{3bc}F", D::Capacitance, 4700e-6),
        ("4700\u{a0}uF", D::Capacitance, 4700e-6),
        ("4700\u{202f}uF", D::Capacitance, 4700e-6),
        ("4.7 mF", D::Capacitance, 4.7e-3),
        ("0.0047 F", D::Capacitance, 0.0047),
        ("100 nF", D::Capacitance, 100e-9),
        ("22 pF", D::Capacitance, 22e-12),
        ("12 mohm", D::Resistance, 12e-3),
        ("12 m\u{3a9}", D::Resistance, 12e-3),
        ("12 m\u{2126}", D::Resistance, 12e-3),
        ("12 mOhm", D::Resistance, 12e-3),
        ("4.7 kohm", D::Resistance, 4.7e3),
        ("1 Mohm", D::Resistance, 1e6),
        ("0.8 mH", D::Inductance, 0.8e-3),
        ("7e-05 H", D::Inductance, 7e-5),
        ("7E-5 H", D::Inductance, 7e-5),
        ("60 uH", D::Inductance, 60e-6),
        ("230 V", D::Voltage, 230.0),
        ("+230 V", D::Voltage, 230.0),
        ("-12.5 V", D::Voltage, -12.5),
        ("\u{2212}12.5 V", D::Voltage, -12.5),
        ("0.78 V", D::Voltage, 0.78),
        (".78 V", D::Voltage, 0.78),
        ("1.5 kV", D::Voltage, 1500.0),
        ("1.2 A", D::Current, 1.2),
        ("50 mA", D::Current, 0.05),
        ("1.9 W", D::Power, 1.9),
        ("60 VA", D::ApparentPower, 60.0),
        ("1 kVA", D::ApparentPower, 1000.0),
        ("50 Hz", D::Frequency, 50.0),
        ("0.4 kHz", D::Frequency, 400.0),
        ("8 %", D::Ratio, 0.08),
        ("8%", D::Ratio, 0.08),
        ("180 deg", D::Angle, 180.0),
        ("180\u{b0}", D::Angle, 180.0),
        ("45 degC", D::Temperature, 45.0),
        ("45 \u{b0}C", D::Temperature, 45.0),
        ("-40 \u{2103}", D::Temperature, -40.0),
        ("10 K", D::TemperatureDifference, 10.0),
        ("20 ms", D::Time, 0.02),
        ("20000 h", D::Life, 20000.0),
        ("30 J", D::Energy, 30.0),
        ("0 ohm", D::Resistance, 0.0),
        ("-0 V", D::Voltage, 0.0),
    ];
    for &(text, dimension, value) in rows {
        reads(text, dimension, value);
        reads(&format!("  {text} "), dimension, value);
    }
}

/// Letter codes of IEC 60062 (from memory).
#[test]
fn letter_codes_read() {
    let ohms = [("4R7", 4.7), ("4K7", 4700.0), ("4k7", 4700.0), ("R22", 0.22), ("R047", 0.047), ("47R", 47.0), ("1M0", 1e6), ("3L3", 3.3e-3), ("10K", 10e3)];
    for (text, value) in ohms {
        reads(text, Dimension::Resistance, value);
    }
    let farads = [("4n7", 4.7e-9), ("22u", 22e-6), ("2m2", 2.2e-3), ("p33", 0.33e-12), ("100n", 100e-9), ("4\u{b5}7", 4.7e-6)];
    for (text, value) in farads {
        reads(text, Dimension::Capacitance, value);
    }
    assert_eq!(read_band("4k7 \u{b1}5 %", Dimension::Resistance).unwrap().high(), 4700.0 * 1.05);
    assert!(read_quantity("4k7", Dimension::Voltage).is_err());
}

#[test]
fn what_is_no_quantity_is_refused_with_advice() {
    use Dimension as D;
    let rows: &[(&str, D, &str)] = &[
        ("", D::Voltage, "for example \"230 V\""),
        ("   ", D::Voltage, "is empty"),
        ("4700", D::Capacitance, "has no unit"),
        ("230", D::Voltage, "for example \"230 V\""),
        ("0,23 kV", D::Voltage, "comma"),
        ("1,234.5 V", D::Voltage, "comma"),
        ("inf V", D::Voltage, "begin with a number"),
        ("nan V", D::Voltage, "begin with a number"),
        ("NaN", D::Voltage, "begin with a number"),
        ("Infinity V", D::Voltage, "begin with a number"),
        ("1e999 V", D::Voltage, "too large or too small"),
        ("1e-400 V", D::Voltage, "too large or too small"),
        ("1e99999 V", D::Voltage, "too large or too small"),
        ("5 A", D::Voltage, "unit of current"),
        ("5 ohm", D::Inductance, "unit of resistance"),
        ("60 W", D::ApparentPower, "unit of power"),
        ("5 K", D::Temperature, "temperature difference"),
        ("5 KV", D::Voltage, "kilo is a small k"),
        ("5 volts", D::Voltage, "not a unit of voltage"),
        ("5 mdeg", D::Angle, "not a unit"),
        ("5 mdegC", D::Temperature, "not a unit"),
        ("1.2.3 V", D::Voltage, "begin with a number"),
        ("V", D::Voltage, "begin with a number"),
        ("--5 V", D::Voltage, "begin with a number"),
        ("230 V \u{b1}10", D::Voltage, "tolerance"),
        ("230 V \u{b1}10 A", D::Voltage, "tolerance"),
        ("230 V 10 %", D::Voltage, "tolerance"),
        ("230 V (200 V)", D::Voltage, "tolerance"),
        ("230 V (200 V to 240)", D::Voltage, "no unit"),
        ("230 V (240 V to 260 V)", D::Voltage, "low <= nominal"),
        ("230 V (260 V to 200 V)", D::Voltage, "low <= nominal"),
        ("230 V \u{b1}-10 %", D::Voltage, "tolerance"),
        ("230 V +10 %", D::Voltage, "tolerance"),
        ("230 V \u{b1}10 % extra", D::Voltage, "tolerance"),
    ];
    for &(text, dimension, part) in rows {
        let error = read_band(text, dimension).expect_err(text).to_string();
        assert!(error.contains(part), "{text:?} says {error:?}, not {part:?}");
    }
    assert_eq!(read_band(&"9".repeat(200), D::Voltage), Err(QuantityError::TooLong));
    assert_eq!(read_quantity("230 V \u{b1}1 %", D::Voltage), Err(QuantityError::NotAlone));
}

#[test]
fn bands_read_in_every_spelling() {
    let rows = [
        ("4700 uF \u{b1}20 %", 4700e-6 * 0.8, 4700e-6 * 1.2),
        ("4700 uF +/-20 %", 4700e-6 * 0.8, 4700e-6 * 1.2),
        ("4700 uF -10 %/+50 %", 4700e-6 * 0.9, 4700e-6 * 1.5),
        ("4700 uF +50 %/-10 %", 4700e-6 * 0.9, 4700e-6 * 1.5),
        ("4700 uF \u{2212}10 % / +50 %", 4700e-6 * 0.9, 4700e-6 * 1.5),
        ("4700 uF (4 mF to 5 mF)", 4e-3, 5e-3),
        ("4700 uF \u{b1}700 uF", 4700e-6 - 700e-6, 4700e-6 + 700e-6),
    ];
    for (text, low, high) in rows {
        let band = read_band(text, Dimension::Capacitance).unwrap_or_else(|e| panic!("{text:?}: {e}"));
        assert_eq!((band.low(), band.nominal(), band.high()), (low, 4700e-6, high), "{text:?}");
    }
    let points = read_band("8 % \u{b1}1 %", Dimension::Ratio).unwrap();
    assert_eq!((points.low(), points.high()), (0.08 - 0.01, 0.08 + 0.01), "points of the ratio");
    let warm = read_band("25 degC \u{b1}10 K", Dimension::Temperature).unwrap();
    assert_eq!((warm.low(), warm.high()), (15.0, 35.0));
    let cold = read_band("-20 degC \u{b1}10 %", Dimension::Temperature).unwrap();
    assert!(cold.low() < cold.high());
}

#[test]
fn writing_is_short_and_readable() {
    let rows = [
        (4700e-6, Dimension::Capacitance, "4.7 mF"),
        (470e-6, Dimension::Capacitance, "470 uF"),
        (12e-3, Dimension::Resistance, "12 mohm"),
        (230.0, Dimension::Voltage, "230 V"),
        (0.08, Dimension::Ratio, "8 %"),
        (0.035, Dimension::Ratio, "3.5 %"),
        (-40.0, Dimension::Temperature, "-40 degC"),
        (0.0, Dimension::Resistance, "0 ohm"),
        (1e-15, Dimension::Capacitance, "0.001 pF"),
        (20000.0, Dimension::Life, "20000 h"),
    ];
    for (value, dimension, text) in rows {
        assert_eq!(write_quantity(value, dimension), text);
    }
    let band = read_band("1.2 A (0.05 A to 1.4 A)", Dimension::Current).unwrap();
    assert_eq!(write_band(&band, Dimension::Current), "1.2 A (50 mA to 1.4 A)");
    let band = read_band("230 V +/- 10 %", Dimension::Voltage).unwrap();
    assert_eq!(write_band(&band, Dimension::Voltage), "230 V \u{b1}10 %");
}

/// IEC 60063: E24 differs from the rounded powers of the 24th root of ten at eight values.
#[test]
fn the_e24_series_departs_from_the_formula_where_the_standard_says() {
    let formula = |i: usize| (10.0_f64.powf(i as f64 / 24.0) * 10.0).round() / 10.0;
    let differing: Vec<f64> = Series::E24
        .values()
        .into_iter()
        .enumerate()
        .filter(|&(i, value)| (formula(i) - value).abs() > 1e-9)
        .map(|(_, value)| value)
        .collect();
    assert_eq!(differing, [2.7, 3.0, 3.3, 3.6, 3.9, 4.3, 4.7, 8.2]);
    assert_eq!(Series::E6.values(), [1.0, 1.5, 2.2, 3.3, 4.7, 6.8]);
    assert_eq!(Series::E12.values(), [1.0, 1.2, 1.5, 1.8, 2.2, 2.7, 3.3, 3.9, 4.7, 5.6, 6.8, 8.2]);
    assert_eq!(Series::E6.between(4e-3, 11e-3), [4.7e-3, 6.8e-3, 10e-3]);
    assert_eq!(Series::E3.up(2.3e-6), Some(4.7e-6));
    assert_eq!(next_up(&[1.0, 2.5, 6.3], 2.5), Some(2.5));
    assert_eq!(next_up(&[1.0, 2.5, 6.3], 7.0), None);
}

fn dimension() -> impl Strategy<Value = Dimension> {
    proptest::sample::select(Dimension::ALL.to_vec())
}

fn value() -> impl Strategy<Value = f64> {
    prop_oneof![
        (-1e6..1e6_f64),
        (-18.0..18.0_f64, any::<bool>()).prop_map(|(e, s)| if s { 10.0_f64.powf(e) } else { -(10.0_f64.powf(e)) }),
        (1..100_000_u32, -12..6_i32).prop_map(|(m, e)| format!("{m}e{e}").parse().unwrap()),
        proptest::num::f64::NORMAL,
    ]
}

proptest! {
    #[test]
    fn what_is_written_reads_back_to_the_same_bits(value in value(), dimension in dimension()) {
        // A percentage shifts the point by two: next to the ends of the range that is no longer a normal number.
        prop_assume!(value == 0.0 || (1e-290..1e290).contains(&value.abs()));
        let text = write_quantity(value, dimension);
        let back = read_quantity(&text, dimension);
        prop_assert_eq!(back.as_ref().map(|v| v.to_bits()), Ok(value.to_bits()), "{}", text);
    }

    #[test]
    fn bands_read_back_to_the_same_bits(mut ends in [value(), value(), value()], dimension in dimension()) {
        prop_assume!(ends.iter().all(|v| *v == 0.0 || (1e-290..1e290).contains(&v.abs())));
        ends.sort_by(f64::total_cmp);
        let band = Band::new(ends[0], ends[1], ends[2]).unwrap();
        let text = write_band(&band, dimension);
        prop_assert_eq!(read_band(&text, dimension), Ok(band), "{}", text);
    }

    #[test]
    fn no_text_panics(text in "\\PC{0,40}", dimension in dimension()) {
        let _ = read_band(&text, dimension);
    }

    #[test]
    fn no_text_near_a_quantity_panics(
        text in "[-+±]?[0-9]{0,4}[.,]?[0-9]{0,4}(e-?[0-9]{0,6})?[ \u{a0}]?[pnuµmkMGTKR]?(F|ohm|Ω|V|%|deg|°C)?( ?[±(+/-]{1,3}[0-9.]{0,3} ?(%|V|F|to)?){0,3}\\)?",
        dimension in dimension(),
    ) {
        if let Ok(band) = read_band(&text, dimension) {
            prop_assert!(band.low() <= band.nominal() && band.nominal() <= band.high() && band.high().is_finite());
        }
    }
}
