//! Bands in every spelling, their ends against exact decimals.

use crate::quantity::Dimension::{self, *};
use crate::quantity::{Band, BandError, End, read_band};

/// Text, dimension, low, nominal, high.
const BANDS: &[(&str, Dimension, [f64; 3])] = &[
    ("4700 uF", Capacitance, [4700e-6, 4700e-6, 4700e-6]),
    ("4700 uF \u{b1}20 %", Capacitance, [3760e-6, 4700e-6, 5640e-6]),
    ("4700 uF \u{b1} 20 %", Capacitance, [3760e-6, 4700e-6, 5640e-6]),
    ("4700 uF\u{b1}20%", Capacitance, [3760e-6, 4700e-6, 5640e-6]),
    (
        "4700\u{a0}\u{b5}F\u{a0}\u{b1}20\u{a0}%",
        Capacitance,
        [3760e-6, 4700e-6, 5640e-6],
    ),
    ("4700 uF +/-20 %", Capacitance, [3760e-6, 4700e-6, 5640e-6]),
    ("4700 uF +/- 20 %", Capacitance, [3760e-6, 4700e-6, 5640e-6]),
    ("4700 uF +/\u{2212}20 %", Capacitance, [3760e-6, 4700e-6, 5640e-6]),
    ("4700uF+/-20%", Capacitance, [3760e-6, 4700e-6, 5640e-6]),
    ("4700 uF +-20 %", Capacitance, [3760e-6, 4700e-6, 5640e-6]),
    ("4700 uF -10 %/+50 %", Capacitance, [4230e-6, 4700e-6, 7050e-6]),
    ("4700 uF -10% / +50%", Capacitance, [4230e-6, 4700e-6, 7050e-6]),
    ("4700 uF +50 %/-10 %", Capacitance, [4230e-6, 4700e-6, 7050e-6]),
    ("4700 uF \u{2212}10 %/+50 %", Capacitance, [4230e-6, 4700e-6, 7050e-6]),
    ("4700 uF \u{2013}10 %/+50 %", Capacitance, [4230e-6, 4700e-6, 7050e-6]),
    ("4700 uF - 10 %/+ 50 %", Capacitance, [4230e-6, 4700e-6, 7050e-6]),
    ("4700 uF -0 %/+100 %", Capacitance, [4700e-6, 4700e-6, 9400e-6]),
    ("4700 uF \u{b1}700 uF", Capacitance, [4e-3, 4.7e-3, 5.4e-3]),
    ("4700 uF -0.7 mF/+10 %", Capacitance, [4e-3, 4.7e-3, 5170e-6]),
    ("4700 uF (4 mF to 5 mF)", Capacitance, [4e-3, 4.7e-3, 5e-3]),
    ("4u7 \u{b1}10 %", Capacitance, [4.23e-6, 4.7e-6, 5.17e-6]),
    ("4u7 (4u to 5u6)", Capacitance, [4e-6, 4.7e-6, 5.6e-6]),
    ("4k7 \u{b1}5 %", Resistance, [4465.0, 4700.0, 4935.0]),
    ("4k7\u{b1}5%", Resistance, [4465.0, 4700.0, 4935.0]),
    ("4k7 \u{b1}R50", Resistance, [4699.5, 4700.0, 4700.5]),
    ("4k7 -1 %/+2 %", Resistance, [4653.0, 4700.0, 4794.0]),
    ("230 V \u{b1}10 %", Voltage, [207.0, 230.0, 253.0]),
    ("230 V \u{b1}10 V", Voltage, [220.0, 230.0, 240.0]),
    ("-12 V \u{b1}5 %", Voltage, [-12.6, -12.0, -11.4]),
    ("-12 V -1 V/+2 V", Voltage, [-13.0, -12.0, -10.0]),
    ("1 V \u{b1}150 %", Voltage, [-0.5, 1.0, 2.5]),
    ("0 V \u{b1}10 mV", Voltage, [-0.01, 0.0, 0.01]),
    ("0 V \u{b1}10 %", Voltage, [0.0, 0.0, 0.0]),
    ("0.3 A \u{b1}0.1 A", Current, [0.2, 0.3, 0.4]),
    ("1.2 A (0.05 A to 1.4 A)", Current, [0.05, 1.2, 1.4]),
    ("1.2 A(0.05A to 1.4A)", Current, [0.05, 1.2, 1.4]),
    ("1.2 A ( 50 mA  to  1400 mA )", Current, [0.05, 1.2, 1.4]),
    ("1.2 A (1.2 A to 1.2 A)", Current, [1.2, 1.2, 1.2]),
    ("50 Hz \u{b1}1 %", Frequency, [49.5, 50.0, 50.5]),
    // Points of the ratio, not percent of a percentage.
    ("8 % \u{b1}1 %", Ratio, [0.07, 0.08, 0.09]),
    ("8 % -2 %/+1 %", Ratio, [0.06, 0.08, 0.09]),
    ("8 % (7 % to 9 %)", Ratio, [0.07, 0.08, 0.09]),
    ("25 degC \u{b1}10 K", Temperature, [15.0, 25.0, 35.0]),
    ("25 \u{b0}C -5 K/+15 K", Temperature, [20.0, 25.0, 40.0]),
    ("25 degC (0 degC to 50 degC)", Temperature, [0.0, 25.0, 50.0]),
    ("-20 degC \u{b1}10 %", Temperature, [-22.0, -20.0, -18.0]),
    ("180 deg \u{b1}15 deg", Angle, [165.0, 180.0, 195.0]),
    ("180\u{b0}\u{b1}15\u{b0}", Angle, [165.0, 180.0, 195.0]),
    ("2 min \u{b1}10 s", Time, [110.0, 120.0, 130.0]),
    ("20000 h \u{b1}10 %", Life, [18000.0, 20000.0, 22000.0]),
];

#[test]
fn bands_read_in_every_spelling_with_one_rounding() {
    for &(text, dimension, ends) in BANDS {
        let band = read_band(text, dimension).unwrap_or_else(|error| panic!("{text:?}: {error}"));
        let found = [band.low(), band.nominal(), band.high()];
        assert_eq!(
            found.map(f64::to_bits),
            ends.map(f64::to_bits),
            "{text:?}: {found:?} for {ends:?}"
        );
    }
}

#[test]
fn a_band_is_finite_and_ordered_by_construction() {
    assert_eq!(Band::new(1.0, f64::NAN, 2.0), Err(BandError::NotFinite));
    assert_eq!(Band::new(f64::NEG_INFINITY, 1.0, 2.0), Err(BandError::NotFinite));
    assert_eq!(Band::point(f64::INFINITY), Err(BandError::NotFinite));
    assert_eq!(Band::new(2.0, 1.0, 3.0), Err(BandError::Disordered));
    assert_eq!(Band::new(1.0, 4.0, 3.0), Err(BandError::Disordered));
    let zero = Band::new(-0.0, -0.0, 0.0).unwrap();
    assert_eq!([zero.low(), zero.nominal()].map(f64::to_bits), [0, 0]);
    assert_eq!(Band::exactly(-0.0).low().to_bits(), 0);
    assert_eq!(Band::ZERO, Band::point(0.0).unwrap());
}

#[test]
fn ends_are_picked_by_name() {
    const HALF: Band = Band::exactly(0.5);
    let band = Band::new(1.0, 2.0, 4.0).unwrap();
    for (end, word, value) in [
        (End::Low, "low", 1.0),
        (End::Nominal, "nominal", 2.0),
        (End::High, "high", 4.0),
    ] {
        assert_eq!((end.as_str(), band.at(end)), (word, value));
        assert_eq!(band.collapsed(end), Band::exactly(value));
        assert!(band.contains(value));
    }
    assert!(!band.contains(0.99) && !band.contains(4.01) && !band.contains(f64::NAN));
    assert!(HALF.is_point() && !band.is_point());
}
