//! Why a text is no quantity, and what would be one.

use super::dimension::Dimension;
use super::parse::TEXT_MAXIMUM;

/// Why a text is no quantity. Its `Display` says what is wrong and what would be right.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum QuantityError {
    /// Nothing there.
    #[error("is empty; write {} with its unit, for example \"{}\"", .dimension.named(), .dimension.example())]
    Empty {
        /// What was expected.
        dimension: Dimension,
    },
    /// More text than any quantity needs.
    #[error("is longer than {TEXT_MAXIMUM} characters; write {} alone, for example \"{}\"", .dimension.named(), .dimension.example())]
    TooLong {
        /// What was expected.
        dimension: Dimension,
    },
    /// A character that occurs in no quantity.
    #[error("{character:?} has no place in a quantity; write {} in plain characters, for example \"{}\"", .dimension.named(), .dimension.example())]
    Character {
        /// The first of them.
        character: char,
        /// What was expected.
        dimension: Dimension,
    },
    /// No number where one was expected.
    #[error("{text:?} does not begin with a number; write {} with its unit, for example \"{}\"", .dimension.named(), .dimension.example())]
    NoNumber {
        /// The text at that place.
        text: String,
        /// What was expected.
        dimension: Dimension,
    },
    /// An infinity or what is no number.
    #[error("{text:?} is not a finite number; write {} with its unit, for example \"{}\"", .dimension.named(), .dimension.example())]
    NotFinite {
        /// The text at that place.
        text: String,
        /// What was expected.
        dimension: Dimension,
    },
    /// A number without a unit.
    #[error("{text:?} has no unit; write {} with its unit, for example \"{}\"", .dimension.named(), .dimension.example())]
    NoUnit {
        /// The text.
        text: String,
        /// What was expected.
        dimension: Dimension,
    },
    /// A comma for a decimal point.
    #[error("{text:?} has a decimal comma; write a point, for example \"4.7\" for 4,7")]
    DecimalComma {
        /// The text.
        text: String,
    },
    /// Digits in groups, or a comma that may be meant to group them.
    #[error(
        "{text:?} has separators between its digits; write the digits together and one decimal point at most, for example \"4700\" or \"4.7\""
    )]
    Separators {
        /// The text.
        text: String,
    },
    /// A unit of another dimension.
    #[error("{unit:?} is a unit of {}, but {} is wanted, for example \"{}\"", .found.name(), .dimension.named(), .dimension.example())]
    WrongDimension {
        /// The unit as written.
        unit: String,
        /// A dimension it belongs to.
        found: Dimension,
        /// What was expected.
        dimension: Dimension,
    },
    /// No unit that is known.
    #[error("{unit:?} is not a unit of {}; {advice}", .dimension.name())]
    UnknownUnit {
        /// The unit as written.
        unit: String,
        /// What was expected.
        dimension: Dimension,
        /// What to write instead.
        advice: String,
    },
    /// Beyond the largest number that is kept.
    #[error("{text:?} is too large a number; write one of at most 1e308 in base units")]
    Overflow {
        /// The text.
        text: String,
    },
    /// Too near to zero to be kept with all its digits.
    #[error("{text:?} is too small a number; write 0 or one of at least 1e-307 in base units")]
    Underflow {
        /// The text.
        text: String,
    },
    /// A tolerance that cannot be read.
    #[error(
        "{text:?} is not a tolerance; write \"\u{b1}20 %\", \"+/-20 %\", \"-10 %/+50 %\", \"\u{b1}10 V\" or \"(0.05 A to 1.4 A)\" with a unit on each number"
    )]
    Tolerance {
        /// The text behind the nominal value.
        text: String,
    },
    /// A band that runs from high to low.
    #[error("{text:?} runs from high to low; write the low end first: low <= nominal <= high")]
    Inverted {
        /// The ends as written.
        text: String,
    },
    /// Ends that do not enclose the nominal value.
    #[error("the nominal value lies outside {text:?}; write ends that enclose it: low <= nominal <= high")]
    NominalOutside {
        /// The ends as written.
        text: String,
    },
    /// A band where one value is wanted.
    #[error("one value is wanted here, not a band; write {} alone, for example \"{}\"", .dimension.named(), .dimension.example())]
    NotAlone {
        /// What was expected.
        dimension: Dimension,
    },
}
