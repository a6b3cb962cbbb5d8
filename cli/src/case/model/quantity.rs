//! The values that keys take: quantities, one or many of them, ranges.

use std::borrow::Cow;

use schemars::{JsonSchema, Schema, SchemaGenerator, json_schema};
use serde::Deserialize;
use serde::de::value::MapAccessDeserializer;
use serde::de::{self, Deserializer, MapAccess, SeqAccess, Visitor};

use super::located::Located;

/// A bare number or an expression, not yet evaluated.
#[derive(Clone, Debug, PartialEq)]
pub enum Quantity {
    /// In the key's SI unit, a length in the case's unit.
    Number(f64),
    /// An expression with units and givens.
    Text(String),
}

/// A quantity that stands in the file.
pub type Amount = Located<Quantity>;

/// A point (r, z).
pub type Pair = [Amount; 2];

/// One quantity or a list of them.
#[derive(Clone, Debug)]
pub enum OneOrMany {
    /// One.
    One(Quantity),
    /// A list.
    Many(Vec<Amount>),
}

/// A value, a list, or points between two ends.
#[derive(Clone, Debug)]
pub enum Range {
    /// One value.
    One(Quantity),
    /// A list of values.
    List(Vec<Amount>),
    /// Points between two ends, ends included.
    Points(PointsBetween),
}

/// Points between two ends, ends included.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct PointsBetween {
    /// First value.
    pub from: Amount,
    /// Last value.
    pub to: Amount,
    /// Number of points, ends included.
    pub points: Amount,
    /// Whether the points are evenly spaced (default) or in equal ratios.
    pub spacing: Option<Spacing>,
}

/// How points lie between two ends.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize, JsonSchema)]
#[serde(rename_all = "lowercase")]
pub enum Spacing {
    /// Equal differences.
    Even,
    /// Equal ratios.
    Log,
}

/// Reads a number or a string as a quantity; used by all visitors here.
macro_rules! visit_quantity {
    ($wrap:expr) => {
        fn visit_i64<E: de::Error>(self, number: i64) -> Result<Self::Value, E> {
            // Whole numbers beyond 2^53 are no sizes of round parts.
            Ok($wrap(Quantity::Number(number as f64)))
        }

        fn visit_u64<E: de::Error>(self, number: u64) -> Result<Self::Value, E> {
            Ok($wrap(Quantity::Number(number as f64)))
        }

        fn visit_f64<E: de::Error>(self, number: f64) -> Result<Self::Value, E> {
            Ok($wrap(Quantity::Number(number)))
        }

        fn visit_str<E: de::Error>(self, text: &str) -> Result<Self::Value, E> {
            Ok($wrap(Quantity::Text(text.to_owned())))
        }
    };
}

fn amounts<'de, A: SeqAccess<'de>>(mut list: A) -> Result<Vec<Amount>, A::Error> {
    let mut amounts = Vec::new();
    while let Some(amount) = list.next_element()? {
        amounts.push(amount);
    }
    Ok(amounts)
}

impl<'de> Deserialize<'de> for Quantity {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        struct Reader;
        impl Visitor<'_> for Reader {
            type Value = Quantity;

            fn expecting(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
                f.write_str("a number or an expression in quotes")
            }

            visit_quantity!(std::convert::identity);
        }
        deserializer.deserialize_any(Reader)
    }
}

impl<'de> Deserialize<'de> for OneOrMany {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        struct Reader;
        impl<'de> Visitor<'de> for Reader {
            type Value = OneOrMany;

            fn expecting(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
                f.write_str("a number, an expression in quotes, or a list of them")
            }

            visit_quantity!(OneOrMany::One);

            fn visit_seq<A: SeqAccess<'de>>(self, list: A) -> Result<Self::Value, A::Error> {
                amounts(list).map(OneOrMany::Many)
            }
        }
        deserializer.deserialize_any(Reader)
    }
}

impl<'de> Deserialize<'de> for Range {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        struct Reader;
        impl<'de> Visitor<'de> for Reader {
            type Value = Range;

            fn expecting(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
                f.write_str("a value, a list, or a table with from, to and points")
            }

            visit_quantity!(Range::One);

            fn visit_seq<A: SeqAccess<'de>>(self, list: A) -> Result<Self::Value, A::Error> {
                amounts(list).map(Range::List)
            }

            fn visit_map<A: MapAccess<'de>>(self, map: A) -> Result<Self::Value, A::Error> {
                PointsBetween::deserialize(MapAccessDeserializer::new(map)).map(Range::Points)
            }
        }
        deserializer.deserialize_any(Reader)
    }
}

impl JsonSchema for Quantity {
    fn inline_schema() -> bool {
        true
    }

    fn schema_name() -> Cow<'static, str> {
        "Quantity".into()
    }

    fn json_schema(_: &mut SchemaGenerator) -> Schema {
        json_schema!({ "type": ["number", "string"] })
    }
}

impl JsonSchema for OneOrMany {
    fn inline_schema() -> bool {
        true
    }

    fn schema_name() -> Cow<'static, str> {
        "OneOrMany".into()
    }

    fn json_schema(generator: &mut SchemaGenerator) -> Schema {
        let one = generator.subschema_for::<Quantity>();
        json_schema!({ "anyOf": [one, { "type": "array", "items": one, "minItems": 1 }] })
    }
}

impl JsonSchema for Range {
    fn inline_schema() -> bool {
        true
    }

    fn schema_name() -> Cow<'static, str> {
        "Range".into()
    }

    fn json_schema(generator: &mut SchemaGenerator) -> Schema {
        let one = generator.subschema_for::<Quantity>();
        let points = generator.subschema_for::<PointsBetween>();
        json_schema!({ "anyOf": [one, { "type": "array", "items": one, "minItems": 1 }, points] })
    }
}
