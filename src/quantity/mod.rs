//! PURE: what is a quantity? Units, bands and their text.
//!
//! Inside, a quantity is a finite number in its base unit (volts, ohms, degrees Celsius, degrees of angle, hours of life, a
//! fraction for a ratio); outside it is text with its unit. Reading is exact decimal arithmetic with one rounding at its end:
//! `"4700 uF"` is the same bits as `4700e-6`, and the ends of `"230 V ±10 %"` are 207 and 253.
//!
//! ```
//! use mainstay::quantity::{Dimension, read_band, write_band};
//!
//! let band = read_band("4700 µF ±20 %", Dimension::Capacitance)?;
//! assert_eq!(band.low(), 3760e-6);
//! assert_eq!(write_band(&band, Dimension::Capacitance), "4.7 mF ±20 %");
//! assert!(read_band("4700", Dimension::Capacitance).is_err(), "no unit, no quantity");
//! # Ok::<(), mainstay::quantity::QuantityError>(())
//! ```

mod band;
mod dimension;
mod error;
mod number;
mod parse;
mod preferred;
mod write;

#[cfg(test)]
mod tests;

pub use band::{Band, BandError, End};
pub use dimension::Dimension;
pub use error::QuantityError;
pub use parse::{TEXT_MAXIMUM, read_band, read_quantity};
pub use preferred::{Series, next_up};
pub use write::{write_band, write_quantity};
