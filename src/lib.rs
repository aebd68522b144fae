//! Mainstay designs and verifies the mains input stage of a product: line, transformer, rectifier, reservoir and filter, load.
//!
//! # Layout
//! A floor uses the floors below it and never one above; `tests/tidy` reads the sources and holds that.
//!
//! | floor | room | question |
//! |---|---|---|
//! | 0 | [`quantity`] | what is a quantity? |
//! | 0 | [`bounds`] | what do we accept, how much work do we do? |
//! | 0 | [`supply`] | what is a supply? |
//! | 1 | [`network`] | how is it wired? |
//! | 1 | [`solver`] | how does it behave? |
//! | 1 | [`figures`] | what does that mean? |
//! | 2 | [`worst_case`] | how bad can it get? |
//! | 2 | [`policy`] | is it allowed? |
//! | 2 | [`design`] | which one to pick? |
//! | 2 | [`transient`] | what happens at switch-on? |
//! | 2 | [`plot`] | how is it shown? |
//! | 3 | [`description`] | how is a supply written down? |
//! | 3 | [`app`] | what can be done? |
//! | 4 | [`api`] | how do programs ask? |
//! | 4 | [`page`] | how do people ask? |
//!
//! # The path of a request
//! A description is read into a [`supply::Supply`] once, with every fault collected; it passes
//! `network -> solver -> figures` as plain values and is written out once.

pub mod api;
pub mod app;
pub mod bounds;
pub mod clock;
pub mod config;
pub mod description;
pub mod design;
pub mod figures;
pub mod network;
pub mod page;
pub mod plot;
pub mod policy;
pub mod quantity;
pub mod solver;
pub mod supply;
pub mod telemetry;
pub mod transient;
pub mod worst_case;
