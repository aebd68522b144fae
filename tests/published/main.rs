//! Figures against published values. Each check names its source beside it.

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
