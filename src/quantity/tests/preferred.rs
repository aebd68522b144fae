//! The E series against the formula and the tables of IEC 60063.

use crate::quantity::{Dimension, Series, next_up, read_quantity};

const ALL: [Series; 6] = [
    Series::E3,
    Series::E6,
    Series::E12,
    Series::E24,
    Series::E48,
    Series::E96,
];

/// IEC 60063: E24 differs from the rounded powers of the 24th root of ten at exactly eight values.
#[test]
fn e24_departs_from_the_formula_at_eight_values() {
    let formula = |i: usize| (10.0_f64.powf(i as f64 / 24.0) * 10.0).round() / 10.0;
    let (values, departing): (Vec<f64>, Vec<f64>) = Series::E24
        .values()
        .iter()
        .enumerate()
        .filter(|&(i, &value)| value != formula(i))
        .map(|(i, &value)| (value, formula(i)))
        .unzip();
    assert_eq!(values, [2.7, 3.0, 3.3, 3.6, 3.9, 4.3, 4.7, 8.2]);
    assert_eq!(departing, [2.6, 2.9, 3.2, 3.5, 3.8, 4.2, 4.6, 8.3]);
}

/// IEC 60063 (from memory): the series of fewer values, and some of the three-figure ones.
#[test]
fn the_series_hold_the_values_of_the_standard() {
    assert_eq!(Series::E3.values(), [1.0, 2.2, 4.7]);
    assert_eq!(Series::E6.values(), [1.0, 1.5, 2.2, 3.3, 4.7, 6.8]);
    assert_eq!(
        Series::E12.values(),
        [1.0, 1.2, 1.5, 1.8, 2.2, 2.7, 3.3, 3.9, 4.7, 5.6, 6.8, 8.2]
    );
    let e48 = [
        1.0, 1.05, 1.1, 1.15, 1.21, 1.27, 1.33, 1.4, 1.47, 1.54, 1.62, 1.69, 1.78, 1.87, 1.96, 2.05,
    ];
    assert_eq!(Series::E48.values()[..16], e48);
    assert_eq!(
        Series::E48.values()[40..],
        [6.81, 7.15, 7.5, 7.87, 8.25, 8.66, 9.09, 9.53]
    );
    assert_eq!(
        Series::E96.values()[..12],
        [1.0, 1.02, 1.05, 1.07, 1.1, 1.13, 1.15, 1.18, 1.21, 1.24, 1.27, 1.3]
    );
    assert_eq!(
        Series::E96.values()[88..],
        [8.25, 8.45, 8.66, 8.87, 9.09, 9.31, 9.53, 9.76]
    );
    for (series, count) in ALL.into_iter().zip([3, 6, 12, 24, 48, 96]) {
        let values = series.values();
        assert_eq!(values.len(), count);
        assert!(values[0] == 1.0 && values.is_sorted_by(|a, b| a < b) && values.iter().all(|v| *v < 10.0));
    }
}

#[test]
fn neighbours_are_the_doubles_that_their_text_reads_to() {
    let farads = |text: &str| read_quantity(text, Dimension::Capacitance).unwrap();
    assert_eq!(Series::E6.up(4e-3), Some(farads("4.7 mF")));
    assert_eq!(Series::E6.down(5e-3), Some(farads("4.7 mF")));
    assert_eq!(Series::E3.up(2.3e-6), Some(farads("4.7 uF")));
    assert_eq!(Series::E12.up(8.3e-9), Some(farads("10 nF")));
    assert_eq!(Series::E12.down(9.9e-9), Some(farads("8.2 nF")));
    assert_eq!(Series::E6.between(4e-3, 11e-3), [4.7e-3, 6.8e-3, 10e-3]);
    assert_eq!(Series::E6.between(1.0, 1.0), [1.0]);
    assert!(Series::E6.between(2.0, 1.0).is_empty());
}

#[test]
fn a_preferred_value_is_its_own_neighbour_to_within_rounding() {
    for series in ALL {
        for decade in [-12, -3, 0, 1, 6] {
            for mantissa in series.values() {
                let value: f64 = format!("{mantissa}e{decade}").parse().unwrap();
                for near in [value, value.next_up(), value.next_down()] {
                    assert_eq!(
                        (series.up(near), series.down(near)),
                        (Some(value), Some(value)),
                        "{series:?} {value:e}"
                    );
                }
                assert!(series.up(value * 1.0001) > Some(value) && series.down(value * 0.9999) < Some(value));
            }
        }
    }
}

#[test]
fn around_counts_neighbours_on_either_side() {
    assert_eq!(Series::E6.around(4.7e-3, 1, 2), [3.3e-3, 4.7e-3, 6.8e-3, 10e-3]);
    assert_eq!(Series::E6.around(5e-3, 1, 2), [4.7e-3, 6.8e-3, 10e-3]);
    assert_eq!(Series::E6.around(5e-3, 0, 0), [0.0; 0]);
    assert_eq!(Series::E6.around(1.0, 0, 0), [1.0]);
    assert_eq!(Series::E12.around(1.0, 2, 0), [0.68, 0.82, 1.0]);
    for bad in [0.0, -1.0, f64::NAN, f64::INFINITY, 1e-310] {
        assert!(Series::E24.around(bad, 3, 3).is_empty());
        assert_eq!((Series::E24.up(bad), Series::E24.down(bad)), (None, None));
    }
}

#[test]
fn the_range_of_numbers_bounds_the_series() {
    let all = Series::E3.around(1.0, usize::MAX, usize::MAX);
    assert!(
        all.len() > 1800 && all.len() < 1900 && all.iter().all(|v| v.is_normal()),
        "{}",
        all.len()
    );
    assert_eq!(Series::E3.down(f64::MAX), Some(1e308));
    assert_eq!(Series::E3.up(f64::MAX), None);
    assert_eq!(Series::E3.up(f64::MIN_POSITIVE), Some(4.7e-308));
    assert_eq!(Series::E3.down(f64::MIN_POSITIVE), None);
}

#[test]
fn a_list_of_ratings_is_climbed_to_the_next() {
    let list = [1.0, 2.5, 6.3];
    assert_eq!(next_up(&list, 2.5), Some(2.5));
    assert_eq!(next_up(&list, 2.5_f64.next_up()), Some(2.5));
    assert_eq!(next_up(&list, 2.6), Some(6.3));
    assert_eq!(next_up(&list, -3.0), Some(1.0));
    assert_eq!(next_up(&list, 7.0), None);
    assert_eq!(next_up(&list, f64::NAN), None);
    assert_eq!(next_up(&[], 1.0), None);
}
