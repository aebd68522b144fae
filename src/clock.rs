//! IO: the only file that asks for time, ids or randomness.
