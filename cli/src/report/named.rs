//! A list of named things that becomes one JSON object, in the order of the case.

use std::borrow::Cow;

use schemars::{JsonSchema, Schema, SchemaGenerator, json_schema};
use serde::ser::{Serialize, SerializeMap, Serializer};

/// Things with names, in order.
#[derive(Clone, Debug, PartialEq)]
pub struct Named<T>(pub Vec<(String, T)>);

impl<T> Default for Named<T> {
    fn default() -> Self {
        Self(Vec::new())
    }
}

impl<T> Named<T> {
    /// Whether there is none.
    pub fn is_empty(&self) -> bool {
        self.0.is_empty()
    }

    /// The thing of this name.
    pub fn get(&self, name: &str) -> Option<&T> {
        self.0.iter().find(|(of, _)| of == name).map(|(_, thing)| thing)
    }

    /// Names and things, in order.
    pub fn iter(&self) -> impl Iterator<Item = (&str, &T)> {
        self.0.iter().map(|(name, thing)| (name.as_str(), thing))
    }
}

impl<T> FromIterator<(String, T)> for Named<T> {
    fn from_iter<I: IntoIterator<Item = (String, T)>>(things: I) -> Self {
        Self(things.into_iter().collect())
    }
}

impl<T: Serialize> Serialize for Named<T> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut map = serializer.serialize_map(Some(self.0.len()))?;
        for (name, thing) in &self.0 {
            map.serialize_entry(name, thing)?;
        }
        map.end()
    }
}

impl<T: JsonSchema> JsonSchema for Named<T> {
    fn inline_schema() -> bool {
        true
    }

    fn schema_name() -> Cow<'static, str> {
        format!("Named_{}", T::schema_name()).into()
    }

    fn json_schema(generator: &mut SchemaGenerator) -> Schema {
        let of = generator.subschema_for::<T>();
        json_schema!({ "type": "object", "additionalProperties": of })
    }
}
