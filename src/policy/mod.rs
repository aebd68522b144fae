//! PURE: is it allowed? Rules as data, ratings against stresses, verdicts.
