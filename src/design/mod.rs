//! PURE: which one to pick? From a need to supplies in preferred values.
