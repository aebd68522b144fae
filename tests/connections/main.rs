//! The service at its socket: a real listener on loopback, bytes in, bytes out, peers that dawdle, crowd or vanish.

#![allow(clippy::unwrap_used, clippy::expect_used, reason = "a test that cannot go on fails")]

mod bounds;
mod client;
mod description;
mod headers;
mod refusals;
