//! PURE: how bad can it get? Corners and the extremes over them.
