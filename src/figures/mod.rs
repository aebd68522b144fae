//! PURE: what does that mean? From a solution to what an engineer reads, and the list of all figures.
