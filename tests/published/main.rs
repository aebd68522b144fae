//! Figures against published values. Each check names its source beside it.

#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::new_without_default,
    missing_docs,
    unreachable_pub,
    reason = "a test that cannot go on fails; test crates export nothing"
)]

#[path = "../support/mod.rs"]
mod support;

mod constant_current;
mod ideal;
mod infinite_capacitance;
mod overlap;
mod pulse_tables;
mod schade;
mod source_inductance;
mod textbooks;
mod zero_resistance;
