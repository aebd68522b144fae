//! PURE: how does it behave? Propagation, events, periodic state, transients.
