//! Filter sections and capacitors.

use super::refuse_part;
use crate::bounds;
use crate::description::fields::Place;
use crate::quantity::{Band, Dimension as D};
use crate::supply::{Capacitor, CapacitorRatings, Section, Series};

pub(super) fn section(place: &Place<'_>) -> Section {
    let mut f = place.fields();
    let section = Section {
        series: f.optional("series").map(|place| series(&place)),
        capacitor: f.optional("capacitor").map(|place| capacitor(&place)),
    };
    f.finish("a filter section");
    section
}

fn series(place: &Place<'_>) -> Series {
    let mut f = place.fields();
    refuse_part(&mut f);
    let series = Series {
        resistance: f.band_or("resistance", D::Resistance, Band::ZERO),
        inductance: f.band_or("inductance", D::Inductance, Band::ZERO),
    };
    f.finish("a series part");
    series
}

pub(super) fn capacitor(place: &Place<'_>) -> Capacitor {
    let mut f = place.fields();
    refuse_part(&mut f);
    let count = f.integer_or("count", 1..=u64::from(bounds::COUNT_MAXIMUM), 1);
    let ratings = f.optional("ratings");
    let capacitor = Capacitor {
        capacitance: f.band("capacitance", D::Capacitance),
        esr: f.band("esr", D::Resistance),
        count: count.and_then(|count| u32::try_from(count).ok()).unwrap_or(1),
        ratings: ratings.map_or_else(CapacitorRatings::default, |place| capacitor_ratings(&place)),
    };
    f.finish("a capacitor");
    capacitor
}

fn capacitor_ratings(place: &Place<'_>) -> CapacitorRatings {
    let mut f = place.fields();
    let ratings = CapacitorRatings {
        voltage: f.band_if("voltage", D::Voltage),
        ripple_current: f.band_if("ripple_current", D::Current),
        endurance: f.band_if("endurance", D::Life),
        temperature: f.band_if("temperature", D::Temperature),
    };
    f.finish("the ratings of a capacitor");
    ratings
}
