//! The published form of a load.

use crate::description::quantities::{Current, Resistance, Voltage};
use serde::Serialize;
use std::borrow::Cow;
use utoipa::openapi::schema::{AdditionalProperties, Schema};
use utoipa::openapi::{RefOr, schema::Object};
use utoipa::{PartialSchema, ToSchema};

/// What a rail feeds: one of its kinds, which takes no fields but its own.
///
/// The schema is the one derived for the kinds with every one of them closed, which the derivation does for structs alone.
#[derive(Clone, Debug, PartialEq, Serialize)]
#[serde(transparent)]
pub struct Load(pub LoadKind);

impl PartialSchema for Load {
    fn schema() -> RefOr<Schema> {
        let mut schema = LoadKind::schema();
        if let RefOr::T(Schema::OneOf(kinds)) = &mut schema {
            kinds.description = Some("What a rail feeds.".to_owned());
            kinds.items.iter_mut().for_each(|kind| {
                if let RefOr::T(Schema::Object(object)) = kind {
                    close(object);
                }
            });
        }
        schema
    }
}

fn close(object: &mut Object) {
    object.additional_properties = Some(Box::new(AdditionalProperties::FreeForm(false)));
}

impl ToSchema for Load {
    fn name() -> Cow<'static, str> {
        Cow::Borrowed("Load")
    }

    fn schemas(schemas: &mut Vec<(String, RefOr<Schema>)>) {
        LoadKind::schemas(schemas);
    }
}

/// The kinds of load.
#[derive(Clone, Debug, PartialEq, Serialize, ToSchema)]
#[serde(tag = "kind", rename_all = "lowercase")]
pub enum LoadKind {
    /// A resistor.
    #[schema(title = "ResistanceLoad")]
    Resistance {
        /// Ohms.
        resistance: Resistance,
    },
    /// A current, drawn as long as the rail is above zero.
    #[schema(title = "CurrentLoad")]
    Current {
        /// Amperes.
        current: Current,
    },
    /// A linear regulator and the load behind it. With `v` the rail voltage it draws
    /// `quiescent_current + min(output_current, max(0, v - dropout) * output_current / output_voltage)`.
    #[schema(title = "RegulatorLoad")]
    Regulator {
        /// Regulated voltage in volts.
        output_voltage: Voltage,
        /// Amperes drawn at the regulated voltage.
        output_current: Current,
        /// Volts between rail and output below which regulation ends.
        dropout: Voltage,
        /// The regulator's own current in amperes; 0 where left out.
        #[serde(skip_serializing_if = "Option::is_none")]
        #[schema(nullable = false)]
        quiescent_current: Option<Current>,
    },
    /// Nothing.
    #[schema(title = "OpenLoad")]
    Open {},
}
