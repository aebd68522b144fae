//! IO: the only file that asks for time, ids or randomness.

use std::sync::atomic::{AtomicU64, Ordering};
use std::time::{Instant, SystemTime, UNIX_EPOCH};

static NEXT: AtomicU64 = AtomicU64::new(0);

/// The present instant, for durations.
#[must_use]
pub fn now() -> Instant {
    Instant::now()
}

/// A name for a request that no other request of this process has, nor, but for chance, one of another process.
#[must_use]
pub fn request_id() -> String {
    let nanos = SystemTime::now()
        .duration_since(UNIX_EPOCH)
        .map_or(0, |d| d.as_nanos() as u64);
    let count = NEXT.fetch_add(1, Ordering::Relaxed);
    format!("{nanos:016x}-{count:06x}")
}
