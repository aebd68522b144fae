//! PURE: what is a supply? Sound by construction, one file a part of it.
