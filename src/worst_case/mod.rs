//! PURE: how bad can it get? Corners and the extremes over them.
//!
//! Every quantity of the circuit that is a band stands at its low or its high end: a corner. All corners are solved; where
//! there are more than the bound, the signs of the changes from the nominal point to each band's ends choose two corners a
//! figure. A figure whose sign of change with some band differs between corners may have its extreme inside: it is then
//! searched for along that band.

mod corners;
mod extremes;

#[cfg(test)]
mod tests;

pub use corners::{Corners, circuit_bands};
pub use extremes::{Attained, Chosen, Extremes, KnownBy, Range, Survey, survey};
