//! IO: logs and metrics.
