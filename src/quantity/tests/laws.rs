//! What holds for every number and every text.

use crate::quantity::{Band, Dimension, read_band, read_quantity, write_band, write_quantity};
use proptest::prelude::*;

fn dimension() -> impl Strategy<Value = Dimension> {
    proptest::sample::select(Dimension::ALL.to_vec())
}

/// Numbers of every size: as engineers write them, as calculations leave them, and any normal double at all.
fn value() -> impl Strategy<Value = f64> {
    prop_oneof![
        1 => Just(0.0),
        4 => -1e6..1e6_f64,
        4 => (-18.0..18.0_f64, any::<bool>()).prop_map(|(e, s)| if s { 10.0_f64.powf(e) } else { -(10.0_f64.powf(e)) }),
        4 => (1..100_000_u32, -12..6_i32).prop_map(|(m, e)| format!("{m}e{e}").parse().unwrap()),
        8 => proptest::num::f64::NORMAL,
    ]
}

fn bits(band: Band) -> [u64; 3] {
    [band.low(), band.nominal(), band.high()].map(f64::to_bits)
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(1024))]

    #[test]
    fn what_is_written_reads_back_to_the_same_bits(value in value(), dimension in dimension()) {
        let text = write_quantity(value, dimension);
        prop_assert!(text.is_ascii());
        let back = read_quantity(&text, dimension);
        prop_assert_eq!(back.as_ref().map(|v| v.to_bits()), Ok(value.to_bits()), "{}", text);
    }

    #[test]
    fn a_mantissa_within_the_prefixes_has_one_to_three_digits(exponent in -12.0..12.0_f64) {
        let text = write_quantity(10.0_f64.powf(exponent), Dimension::Voltage);
        let mantissa: f64 = text.split(' ').next().unwrap().parse().unwrap();
        prop_assert!((1.0..1000.0).contains(&mantissa), "{}", text);
    }

    #[test]
    fn bands_read_back_to_the_same_bits(mut ends in [value(), value(), value()], dimension in dimension()) {
        ends.sort_by(f64::total_cmp);
        let band = Band::new(ends[0], ends[1], ends[2]).unwrap();
        let text = write_band(&band, dimension);
        let back = read_band(&text, dimension);
        prop_assert_eq!(back.map(bits), Ok(bits(band)), "{}", text);
    }

    #[test]
    fn a_percentage_gives_the_doubles_nearest_to_the_exact_ends(thousandths in 1..10_000_000_u64, percent in 0..=100_u64) {
        let text = format!("{}e-3 V \u{b1}{percent} %", thousandths);
        let band = read_band(&text, Dimension::Voltage).unwrap();
        let end = |hundredths: u64| format!("{}e-5", thousandths * hundredths).parse::<f64>().unwrap();
        prop_assert_eq!((band.low(), band.high()), (end(100 - percent), end(100 + percent)));
        prop_assert_eq!(read_band(&write_band(&band, Dimension::Voltage), Dimension::Voltage), Ok(band));
    }

    #[test]
    fn a_width_gives_the_doubles_nearest_to_the_exact_ends(nominal in -100_000..100_000_i64, width in 0..100_000_i64) {
        let text = format!("{nominal}e-4 V \u{b1}{width}e-1 mV");
        let band = read_band(&text, Dimension::Voltage).unwrap();
        let end = |units: i64| format!("{units}e-4").parse::<f64>().unwrap();
        prop_assert_eq!((band.low(), band.high()), (end(nominal - width), end(nominal + width)));
    }

    #[test]
    fn no_text_panics(text in any::<String>(), dimension in dimension()) {
        if let Err(error) = read_band(&text, dimension) {
            prop_assert!(!error.to_string().is_empty());
        }
        if let Ok(value) = read_quantity(&text, dimension) {
            prop_assert_eq!(read_band(&text, dimension), Ok(Band::exactly(value)));
        }
    }

    #[test]
    fn no_text_near_a_quantity_panics_or_breaks_the_order(
        text in "[-+±]?[0-9]{0,4}[.,]?[0-9]{0,4}(e-?[0-9]{0,6})?[ \u{a0}]?[pnuµmkMGTKR]?(F|ohm|Ω|V|%|deg|°C|min|A2s)?( ?[±(+/-]{1,3}[0-9.]{0,3} ?(%|V|F|to|K)?){0,3}\\)?",
        dimension in dimension(),
    ) {
        if let Ok(band) = read_band(&text, dimension) {
            prop_assert!(band.low() <= band.nominal() && band.nominal() <= band.high());
            prop_assert!(band.low().is_finite() && band.high().is_finite());
        }
    }

    #[test]
    fn whatever_reads_is_given_back_the_same(
        text in "-?[0-9]{1,4}(\\.[0-9]{1,4})? ?[pnumkMG]?V( ?(±[0-9]{1,2}(\\.[0-9])? ?%|±[0-9]{1,3} ?m?V|-[0-9]{1,2} %/\\+[0-9]{1,3} %))?",
    ) {
        let band = read_band(&text, Dimension::Voltage).unwrap();
        let written = write_band(&band, Dimension::Voltage);
        prop_assert_eq!(read_band(&written, Dimension::Voltage).map(bits), Ok(bits(band)), "{}", written);
    }
}
