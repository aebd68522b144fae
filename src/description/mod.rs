//! IO: how is a supply written down? The one published form, read with every fault collected, and written back.
//!
//! Requests, stored records and reports share it. [`json`] turns bytes into a tree, [`fields`] takes objects apart and
//! notes every fault with its pointer, [`read`] makes a [`crate::supply::Supply`], [`form`] is the shape that is published
//! and written back.

pub mod describe;
pub mod fields;
pub mod form;
pub mod json;
pub mod quantities;
pub mod read;
pub mod request;

#[cfg(test)]
mod tests;

pub use read::{read_each, read_supply};
