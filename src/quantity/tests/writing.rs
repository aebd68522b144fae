//! What is given back: short, readable, and the same bits.

use crate::quantity::Dimension::{self, *};
use crate::quantity::{Band, read_band, write_band, write_quantity};

#[test]
fn a_quantity_is_written_with_the_prefix_that_makes_it_readable() {
    let rows: &[(f64, Dimension, &str)] = &[
        (4700e-6, Capacitance, "4.7 mF"),
        (470e-6, Capacitance, "470 uF"),
        (1e-15, Capacitance, "0.001 pF"),
        (1e-20, Capacitance, "1e-8 pF"),
        (12e-3, Resistance, "12 mohm"),
        (999.0, Resistance, "999 ohm"),
        (1000.0, Resistance, "1 kohm"),
        (2.5e12, Resistance, "2.5 Tohm"),
        (2.5e12, Frequency, "2500 GHz"),
        (0.0, Resistance, "0 ohm"),
        (-0.0, Resistance, "0 ohm"),
        (230.0, Voltage, "230 V"),
        (-0.65, Voltage, "-650 mV"),
        (1e300, Voltage, "1e291 GV"),
        (0.1 + 0.2, Voltage, "300.00000000000004 mV"),
        (1100.0, ApparentPower, "1.1 kVA"),
        (7e-5, Inductance, "70 uH"),
        (0.08, Ratio, "8 %"),
        (0.035, Ratio, "3.5 %"),
        (0.07, Ratio, "7 %"),
        (1e-7, Ratio, "1e-5 %"),
        (180.0, Angle, "180 deg"),
        (-40.0, Temperature, "-40 degC"),
        (1500.0, TemperatureDifference, "1500 K"),
        (20e-3, Time, "20 ms"),
        (7200.0, Time, "7.2 ks"),
        (20000.0, Life, "20000 h"),
        (1e9, Life, "1e9 h"),
        (30.0, Energy, "30 J"),
        (40e-6, Charge, "40 uC"),
        (12000.0, JouleIntegral, "12000 A2s"),
        (0.025, Length, "25 mm"),
    ];
    for &(value, dimension, text) in rows {
        assert_eq!(write_quantity(value, dimension), text);
    }
}

#[test]
fn a_band_is_written_in_its_shortest_form() {
    let rows = [
        ("230 V", Voltage, "230 V"),
        ("230 V (207 V to 253 V)", Voltage, "230 V \u{b1}10 %"),
        ("230 V +/- 10 %", Voltage, "230 V \u{b1}10 %"),
        ("230 V \u{b1}10 V", Voltage, "230 V \u{b1}10 V"),
        ("-12 V \u{b1}5 %", Voltage, "-12 V \u{b1}5 %"),
        ("0 V \u{b1}10 mV", Voltage, "0 V \u{b1}10 mV"),
        ("0 V (-1 V to 2 V)", Voltage, "0 V (-1 V to 2 V)"),
        ("4700 uF \u{b1}20 %", Capacitance, "4.7 mF \u{b1}20 %"),
        ("4700 uF -10 %/+50 %", Capacitance, "4.7 mF -10 %/+50 %"),
        ("1.2 A (0.05 A to 1.4 A)", Current, "1.2 A (50 mA to 1.4 A)"),
        ("1 A (1 A to 1.5 A)", Current, "1 A -0 %/+50 %"),
        ("1 mV (1 mV to 100 V)", Voltage, "1 mV (1 mV to 100 V)"),
        ("8 % (7 % to 9 %)", Ratio, "8 % \u{b1}1 %"),
        ("8 % (5 % to 9 %)", Ratio, "8 % (5 % to 9 %)"),
        ("25 degC (0 degC to 50 degC)", Temperature, "25 degC \u{b1}25 K"),
        ("25 degC \u{b1}10 %", Temperature, "25 degC \u{b1}2.5 K"),
        (
            "25 degC (-10 degC to 40 degC)",
            Temperature,
            "25 degC (-10 degC to 40 degC)",
        ),
        ("180 deg \u{b1}7 deg", Angle, "180 deg \u{b1}7 deg"),
    ];
    for (text, dimension, written) in rows {
        let band = read_band(text, dimension).unwrap_or_else(|error| panic!("{text:?}: {error}"));
        assert_eq!(write_band(&band, dimension), written);
        assert_eq!(read_band(written, dimension), Ok(band));
    }
}

#[test]
fn what_cannot_be_read_is_never_written_as_something_else() {
    for value in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, 5e-324, -1e-310] {
        for dimension in Dimension::ALL {
            let text = write_quantity(value, dimension);
            assert!(read_band(&text, dimension).is_err(), "{value:e} became {text:?}");
        }
    }
}

#[test]
fn ends_one_bit_away_are_kept() {
    let band = Band::new(230.0_f64.next_down(), 230.0, 230.0_f64.next_up()).unwrap();
    assert_eq!(read_band(&write_band(&band, Voltage), Voltage), Ok(band));
}
