//! JSON that refuses a name given twice in one object: nobody can say which one was meant.

use std::fmt;

use serde::de::{Deserialize, Deserializer, Error, MapAccess, SeqAccess, Visitor};
use serde_json::{Map, Number, Value};

/// Reads one JSON value from UTF-8 text; a leading byte order mark is skipped.
///
/// # Errors
/// Not JSON, not UTF-8, nested deeper than 128, a number beyond f64, or a repeated name; with line and column.
pub fn parse(text: &[u8]) -> Result<Value, serde_json::Error> {
    let text = text.strip_prefix(b"\xef\xbb\xbf").unwrap_or(text);
    serde_json::from_slice::<Strict>(text).map(|strict| strict.0)
}

struct Strict(Value);

impl<'de> Deserialize<'de> for Strict {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        deserializer.deserialize_any(StrictVisitor).map(Strict)
    }
}

struct StrictVisitor;

impl<'de> Visitor<'de> for StrictVisitor {
    type Value = Value;

    fn expecting(&self, out: &mut fmt::Formatter) -> fmt::Result {
        out.write_str("a JSON value")
    }
    fn visit_bool<E>(self, value: bool) -> Result<Value, E> {
        Ok(Value::Bool(value))
    }
    fn visit_i64<E>(self, value: i64) -> Result<Value, E> {
        Ok(Value::from(value))
    }
    fn visit_u64<E>(self, value: u64) -> Result<Value, E> {
        Ok(Value::from(value))
    }
    fn visit_f64<E: Error>(self, value: f64) -> Result<Value, E> {
        Number::from_f64(value)
            .map(Value::Number)
            .ok_or_else(|| E::custom("a number beyond the range of JSON"))
    }
    fn visit_str<E>(self, value: &str) -> Result<Value, E> {
        Ok(Value::String(value.to_owned()))
    }
    fn visit_string<E>(self, value: String) -> Result<Value, E> {
        Ok(Value::String(value))
    }
    fn visit_unit<E>(self) -> Result<Value, E> {
        Ok(Value::Null)
    }
    fn visit_seq<A: SeqAccess<'de>>(self, mut items: A) -> Result<Value, A::Error> {
        let mut list = Vec::new();
        while let Some(Strict(item)) = items.next_element()? {
            list.push(item);
        }
        Ok(Value::Array(list))
    }
    fn visit_map<A: MapAccess<'de>>(self, mut members: A) -> Result<Value, A::Error> {
        let mut object = Map::new();
        while let Some((name, Strict(member))) = members.next_entry::<String, Strict>()? {
            if object.contains_key(&name) {
                return Err(A::Error::custom(format!(
                    "the name {name:?} is given twice in one object"
                )));
            }
            object.insert(name, member);
        }
        Ok(Value::Object(object))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn plain_json_passes_unchanged() {
        let text = br#"{"a": [1, -2, 0.5, null, true, "x"], "b": {}}"#;
        assert_eq!(parse(text).unwrap(), serde_json::from_slice::<Value>(text).unwrap());
        assert_eq!(parse(b"\xef\xbb\xbf{}").unwrap(), Value::Object(Map::new()));
    }

    #[test]
    fn what_json_does_not_know_is_refused() {
        for text in [
            "",
            "{",
            "{\"a\":NaN}",
            "{\"a\":1e999}",
            "{\"a\":1,\"a\":2}",
            "[1,]",
            "\"\u{fffd}",
            "{} {}",
        ] {
            assert!(parse(text.as_bytes()).is_err(), "{text}");
        }
        assert!(parse(b"\"\xff\"").is_err());
        assert!(parse("[".repeat(100_000).as_bytes()).is_err(), "deep nesting");
    }
}
