//! The line and its harmonics.

use super::each;
use crate::bounds;
use crate::description::fields::Place;
use crate::quantity::{Band, Dimension as D};
use crate::supply::{Harmonic, Line, Phases};

/// Stands in for a line that is not there.
pub(super) fn unread() -> Line {
    Line {
        voltage: Band::ZERO,
        frequency: Band::ZERO,
        phases: Phases::One,
        resistance: Band::ZERO,
        inductance: Band::ZERO,
        harmonics: Vec::new(),
    }
}

pub(super) fn line(place: &Place<'_>) -> Line {
    let mut f = place.fields();
    let line = Line {
        voltage: f.band("voltage", D::Voltage),
        frequency: f.band("frequency", D::Frequency),
        phases: f.optional("phases").map_or(Phases::One, |place| phases(&place)),
        resistance: f.band_or("resistance", D::Resistance, Band::ZERO),
        inductance: f.band_or("inductance", D::Inductance, Band::ZERO),
        harmonics: each(f.optional("harmonics"), harmonic),
    };
    f.finish("a line");
    line
}

fn phases(place: &Place<'_>) -> Phases {
    match place.integer(0..=u64::from(u32::MAX)) {
        Some(3) => Phases::Three,
        None | Some(1) => Phases::One,
        Some(_) => {
            place.fault("must be 1 or 3");
            Phases::One
        }
    }
}

fn harmonic(place: &Place<'_>) -> Harmonic {
    let mut f = place.fields();
    let orders = 2..=u64::from(bounds::HARMONIC_ORDER_MAXIMUM);
    let order = f.required("order").and_then(|place| place.integer(orders));
    let harmonic = Harmonic {
        order: order.and_then(|order| u32::try_from(order).ok()).unwrap_or(0),
        fraction: f.band("fraction", D::Ratio),
        phase: f.band_or("phase", D::Angle, Band::ZERO),
    };
    f.finish("a harmonic");
    harmonic
}
