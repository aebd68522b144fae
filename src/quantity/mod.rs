//! PURE: what is a quantity? Units, bands and their text.
