//! PURE: every range we accept and every bound on our work, each with its reason.
