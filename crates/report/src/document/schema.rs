//! Names of the document forms and their JSON Schemas.

use std::borrow::Cow;

use schemars::{JsonSchema, Schema, SchemaGenerator, json_schema, schema_for};
use serde::{Deserialize, Deserializer, Serialize, Serializer};
use serde_json::Value;

use super::{LevelsDocument, ParamsDocument, PlanDocument, ShapeDocument, SweepDocument};

/// A document's form as a type: it is written as its name and reads nothing else.
macro_rules! form {
    ($name:ident, $text:literal) => {
        #[doc = concat!("The form `", $text, "`.")]
        #[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
        pub struct $name;

        impl $name {
            /// The form's name, as written in the document.
            pub const NAME: &'static str = $text;
        }

        impl Serialize for $name {
            fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
                serializer.serialize_str(Self::NAME)
            }
        }

        impl<'de> Deserialize<'de> for $name {
            fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
                let found = String::deserialize(deserializer)?;
                if found == Self::NAME {
                    return Ok(Self);
                }
                let message = format!("schema is \"{found}\", expected \"{}\"", Self::NAME);
                Err(serde::de::Error::custom(message))
            }
        }

        impl JsonSchema for $name {
            fn inline_schema() -> bool {
                true
            }

            fn schema_name() -> Cow<'static, str> {
                stringify!($name).into()
            }

            fn json_schema(_: &mut SchemaGenerator) -> Schema {
                json_schema!({ "type": "string", "const": $text })
            }
        }
    };
}

form!(LevelsSchema, "orbend/levels/1");
form!(SweepSchema, "orbend/sweep/1");
form!(ShapeSchema, "orbend/shape/1");
form!(ParamsSchema, "orbend/params/1");
form!(PlanSchema, "orbend/plan/1");

/// The JSON Schema (draft 2020-12) of every document with the short name of its form.
#[must_use]
pub fn schemas() -> [(&'static str, Value); 5] {
    [
        ("levels", schema_for!(LevelsDocument).to_value()),
        ("sweep", schema_for!(SweepDocument).to_value()),
        ("shape", schema_for!(ShapeDocument).to_value()),
        ("params", schema_for!(ParamsDocument).to_value()),
        ("plan", schema_for!(PlanDocument).to_value()),
    ]
}
