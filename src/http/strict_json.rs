//! JSON that refuses a name given twice in one object (nobody can say which one was meant) and values without end (a
//! few megabytes of text can be hundreds of megabytes of values).

use std::cell::Cell;
use std::fmt;

use serde::de::{DeserializeSeed, Deserializer, Error, MapAccess, SeqAccess, Visitor};
use serde_json::{Map, Number, Value};

/// Most values in one text: the longest series in every column is less than half of it.
pub const MOST_VALUES: usize = 4_000_000;

/// Reads one JSON value from UTF-8 text; a leading byte order mark is skipped.
///
/// # Errors
/// Not JSON, not UTF-8, nested deeper than 128, a number beyond f64, a repeated name, or more than [`MOST_VALUES`];
/// with line and column.
pub fn parse(text: &[u8]) -> Result<Value, serde_json::Error> {
    let text = text.strip_prefix(b"\xef\xbb\xbf").unwrap_or(text);
    let left = Cell::new(MOST_VALUES);
    let mut reader = serde_json::Deserializer::from_slice(text);
    let value = Strict { left: &left }.deserialize(&mut reader)?;
    reader.end()?;
    Ok(value)
}

/// Reads a value, as long as any are left.
#[derive(Clone, Copy)]
struct Strict<'a> {
    left: &'a Cell<usize>,
}

impl<'de> DeserializeSeed<'de> for Strict<'_> {
    type Value = Value;

    fn deserialize<D: Deserializer<'de>>(self, deserializer: D) -> Result<Value, D::Error> {
        let left = self.left.get().checked_sub(1);
        self.left
            .set(left.ok_or_else(|| D::Error::custom(format!("more than {MOST_VALUES} values")))?);
        deserializer.deserialize_any(self)
    }
}

impl<'de> Visitor<'de> for Strict<'_> {
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
        while let Some(item) = items.next_element_seed(self)? {
            list.push(item);
        }
        Ok(Value::Array(list))
    }
    fn visit_map<A: MapAccess<'de>>(self, mut members: A) -> Result<Value, A::Error> {
        let mut object = Map::new();
        while let Some(name) = members.next_key::<String>()? {
            if object.contains_key(&name) {
                return Err(A::Error::custom(format!(
                    "the name {name:?} is given twice in one object"
                )));
            }
            object.insert(name, members.next_value_seed(self)?);
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
    fn values_without_end_are_refused() {
        let text = format!("[{}1]", "1,".repeat(MOST_VALUES));
        assert!(
            parse(text.as_bytes())
                .unwrap_err()
                .to_string()
                .starts_with("more than 4000000 values")
        );
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
