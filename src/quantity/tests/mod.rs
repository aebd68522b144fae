//! Spellings, refusals, bands, writing, preferred values, and the laws that hold for all of them.

mod bands;
mod laws;
mod preferred;
mod refusals;
mod spellings;
mod writing;
