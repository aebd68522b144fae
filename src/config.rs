//! IO: settings from flags and environment.
