//! Numbers that a JSON document can hold.

use std::borrow::Cow;

use schemars::{JsonSchema, Schema, SchemaGenerator, json_schema};
use serde::{Deserialize, Deserializer, Serialize, Serializer};

use super::common::Missing;

/// A finite number. JSON has no NaN and no infinity (RFC 8259), so neither has a document; a value
/// that could not be computed is `null` and has an entry in the document's `missing` list.
/// Negative zero is stored as zero.
#[derive(Clone, Copy, Debug, Default, PartialEq, PartialOrd)]
pub struct Number(f64);

/// A value that no document can hold.
#[derive(Clone, Copy, Debug, PartialEq, thiserror::Error)]
#[error("{0} is not a finite number")]
pub struct NotFinite(pub f64);

impl Number {
    /// Zero.
    pub const ZERO: Self = Self(0.0);

    /// Takes a finite value; refuses NaN and infinities.
    pub fn new(value: f64) -> Result<Self, NotFinite> {
        if value.is_finite() {
            // −0.0 + 0.0 is 0.0: equal results are equal bytes.
            Ok(Self(value + 0.0))
        } else {
            Err(NotFinite(value))
        }
    }

    /// The value.
    #[must_use]
    pub const fn get(self) -> f64 {
        self.0
    }

    /// Takes a value, or leaves `None` and notes at `path` (a JSON pointer, RFC 6901) why.
    pub fn or_missing(
        value: f64,
        path: &str,
        reason: &str,
        missing: &mut Vec<Missing>,
    ) -> Option<Self> {
        let number = Self::new(value).ok();
        if number.is_none() {
            missing.push(Missing {
                path: path.to_owned(),
                reason: reason.to_owned(),
            });
        }
        number
    }

    /// Three numbers at once, as for a position.
    pub fn triple(values: [f64; 3]) -> Result<[Self; 3], NotFinite> {
        let [x, y, z] = values;
        Ok([Self::new(x)?, Self::new(y)?, Self::new(z)?])
    }
}

impl TryFrom<f64> for Number {
    type Error = NotFinite;

    fn try_from(value: f64) -> Result<Self, NotFinite> {
        Self::new(value)
    }
}

impl From<Number> for f64 {
    fn from(number: Number) -> Self {
        number.0
    }
}

impl Serialize for Number {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.serialize_f64(self.0)
    }
}

impl<'de> Deserialize<'de> for Number {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        Self::new(f64::deserialize(deserializer)?).map_err(serde::de::Error::custom)
    }
}

impl JsonSchema for Number {
    fn inline_schema() -> bool {
        true
    }

    fn schema_name() -> Cow<'static, str> {
        "Number".into()
    }

    fn json_schema(_: &mut SchemaGenerator) -> Schema {
        json_schema!({ "type": "number" })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn refuses_what_json_cannot_hold() {
        assert!(Number::new(f64::NAN).is_err());
        assert!(Number::new(f64::INFINITY).is_err());
        let mut missing = Vec::new();
        let sum = Number::or_missing(f64::NAN, "/points/3/sum", "no solution", &mut missing);
        assert_eq!(sum, None);
        assert_eq!(missing[0].path, "/points/3/sum");
    }

    #[test]
    fn negative_zero_is_written_as_zero() {
        let number = Number::new(-0.0).unwrap();
        assert_eq!(serde_json::to_string(&number).unwrap(), "0.0");
    }

    proptest::proptest! {
        #[test]
        fn reads_back_to_the_same_double(bits in proptest::num::u64::ANY) {
            let value = f64::from_bits(bits);
            if let Ok(number) = Number::new(value) {
                let text = serde_json::to_string(&number).unwrap();
                let back: Number = serde_json::from_str(&text).unwrap();
                proptest::prop_assert_eq!(back.get().to_bits(), number.get().to_bits());
            }
        }
    }
}
