//! Quantities as text in the published form: one named schema a dimension.

use crate::quantity::{Band, Dimension, write_band, write_quantity};
use serde::Serialize;
use std::borrow::Cow;
use utoipa::openapi::schema::{ObjectBuilder, Schema, Type};
use utoipa::openapi::{RefOr, schema::SchemaType};
use utoipa::{PartialSchema, ToSchema};

/// A number as it is read: a few more digits than a double holds, and an exponent that keeps it finite.
const NUMBER: &str = r"(?:[0-9]{1,18}(?:\.[0-9]{0,20})?|\.[0-9]{1,20})(?:[eE][+-]?[0-9]{1,2})?";

struct Form {
    dimension: Dimension,
    /// Units with their prefixes, as a regular expression.
    units: &'static str,
    examples: &'static [&'static str],
    meaning: &'static str,
}

/// The texts of a dimension as a regular expression. A text of it is refused for one reason alone: a band whose ends are
/// not in order, which no regular expression can tell.
fn pattern(dimension: Dimension, units: &str) -> String {
    let sign = if is_signed(dimension) { "[+-]?" } else { r"\+?" };
    let unit = format!("{sign}{NUMBER}[ \u{a0}]?{units}");
    let code = match dimension {
        Dimension::Resistance => "|[0-9]{0,4}[RLKkMGT][0-9]{1,4}|[0-9]{1,4}[RLKkMGT]",
        Dimension::Capacitance => "|[0-9]{0,4}[pnu\u{b5}\u{3bc}mF][0-9]{1,4}|[0-9]{1,4}[pnu\u{b5}\u{3bc}mF]",
        _ => "",
    };
    let own = match dimension {
        Dimension::Temperature => "K",
        _ => units,
    };
    let own = format!(r"[0-9]{{1,9}}(?:\.[0-9]{{1,20}})?(?:e-[0-9]{{1,2}})? ?{own}");
    let more = r"[0-9]{1,3}(?:\.[0-9]{1,20})? ?%";
    // A percentage reaches down to zero at the most where nothing is negative. Behind a ratio it is points of that ratio.
    let less = if is_signed(dimension) || dimension == Dimension::Ratio {
        more
    } else {
        r"(?:100|[0-9]{1,2}(?:\.[0-9]{1,20})?) ?%"
    };
    let tolerance = format!("(?:\u{b1}|\\+/-) ?(?:{less}|{own})");
    let sided = format!(r"-(?:{less}|{own}) ?/ ?\+(?:{more}|{own})");
    let range = format!(r"\({unit} to {unit}\)");
    format!("^(?:{unit}{code})(?: ?(?:{tolerance}|{sided}|{range}))?$")
}

/// Whether quantities of a dimension may be negative.
fn is_signed(dimension: Dimension) -> bool {
    matches!(dimension, Dimension::Angle | Dimension::Temperature)
}

fn schema(form: &Form) -> RefOr<Schema> {
    let pattern = pattern(form.dimension, form.units);
    let description = format!(
        "{} Text with its unit; where the quantity is uncertain the same text carries its band: a tolerance or both ends. A bare number is refused.",
        form.meaning
    );
    ObjectBuilder::new()
        .schema_type(SchemaType::Type(Type::String))
        .description(Some(description))
        .pattern(Some(pattern))
        .max_length(Some(crate::quantity::TEXT_MAXIMUM))
        .examples(form.examples.iter().copied())
        .build()
        .into()
}

macro_rules! quantities {
    ($($name:ident, $units:literal, $meaning:literal, [$($example:literal),+];)+) => {$(
        #[doc = $meaning]
        #[derive(Clone, Debug, PartialEq, Eq, Serialize)]
        pub struct $name(pub String);

        impl $name {
            /// A band as text.
            #[must_use]
            pub fn of(band: &Band) -> Self {
                Self(write_band(band, Dimension::$name))
            }

            /// A lone quantity as text.
            #[must_use]
            pub fn exactly(value: f64) -> Self {
                Self(write_quantity(value, Dimension::$name))
            }
        }

        impl PartialSchema for $name {
            fn schema() -> RefOr<Schema> {
                schema(&Form {
                    dimension: Dimension::$name,
                    units: $units,
                    examples: &[$($example),+],
                    meaning: $meaning,
                })
            }
        }

        impl ToSchema for $name {
            fn name() -> Cow<'static, str> {
                Cow::Borrowed(stringify!($name))
            }
        }
    )+};
}

quantities! {
    Voltage, "[pnu\u{b5}\u{3bc}mkMG]?V", "A voltage, in volts.", ["230 V", "230 V \u{b1}10 %", "20.5 V"];
    Current, "[pnu\u{b5}\u{3bc}mkMG]?A", "A current, in amperes.", ["1.2 A", "1.2 A (0.05 A to 1.4 A)"];
    Power, "[pnu\u{b5}\u{3bc}mkMG]?W", "A power, in watts.", ["1.9 W"];
    ApparentPower, "[pnu\u{b5}\u{3bc}mkMG]?VA", "An apparent power, in volt-amperes.", ["60 VA"];
    Resistance, "[pnu\u{b5}\u{3bc}mkMGT]?(?:ohm|Ohm|\u{3a9}|\u{2126})", "A resistance, in ohms; letter codes of IEC 60062 are read too.", ["12 mohm", "11 ohm", "4k7", "R047"];
    Inductance, "[pnu\u{b5}\u{3bc}mkMG]?H", "An inductance, in henries.", ["0.4 mH", "60 uH", "0 H"];
    Capacitance, "[pnu\u{b5}\u{3bc}mkMG]?F", "A capacitance, in farads; letter codes of IEC 60062 are read too.", ["4700 uF \u{b1}20 %", "470 uF", "4n7"];
    Frequency, "[pnu\u{b5}\u{3bc}mkMG]?Hz", "A frequency, in hertz.", ["50 Hz", "50 Hz \u{b1}1 %"];
    Ratio, "%", "A ratio, in percent; a tolerance on it is in points of percent.", ["8 %", "3 %"];
    Angle, "(?:deg|\u{b0})", "An angle, in degrees.", ["180 deg", "0 deg"];
    Temperature, "(?:degC|\u{b0}C|\u{2103})", "A temperature, in degrees Celsius.", ["45 degC", "25 degC (0 degC to 50 degC)"];
    Time, "(?:[pnu\u{b5}\u{3bc}mkMG]?s|min|h)", "A time, in seconds.", ["20 ms", "1.5 s", "10 min"];
    Life, "h", "A life, in hours.", ["20000 h"];
}
