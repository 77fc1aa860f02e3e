//! Schemas: JSON Schema 2020-12, as 3.1 has it, in the words of the Schema Object of 3.0.3.

use serde_json::{Map, Value, json};

use super::Writer;
use super::objects::Kind;

type Members = Map<String, Value>;

/// Keywords said alike in both versions.
const ALIKE: [&str; 21] = [
    "title",
    "description",
    "format",
    "default",
    "enum",
    "multipleOf",
    "minimum",
    "maximum",
    "minLength",
    "maxLength",
    "pattern",
    "minItems",
    "maxItems",
    "uniqueItems",
    "minProperties",
    "maxProperties",
    "required",
    "deprecated",
    "readOnly",
    "writeOnly",
    "discriminator",
];

impl Writer {
    /// Rewrites one schema and those inside it.
    pub(super) fn schema(&mut self, schema: &Value) -> Value {
        let Value::Object(members) = schema else {
            self.fault(format!("3.0 has no schema {schema}"));
            return Value::Null;
        };
        if members.contains_key("$ref") {
            return self.reference_schema(members);
        }
        if let Some(of) = nullable_choice(members) {
            return self.nullable(members, of);
        }
        let mut written = Members::new();
        for (name, value) in members {
            self.within(name, |writer| writer.keyword(name, value, members, &mut written));
        }
        written.into()
    }

    fn keyword(&mut self, name: &str, value: &Value, beside: &Members, into: &mut Members) {
        match name {
            "type" => self.kind(value, into),
            "const" => put(into, "enum", json!([value])),
            "examples" => self.first_example(value, into),
            "exclusiveMinimum" => self.exclusive("minimum", name, value, beside, into),
            "exclusiveMaximum" => self.exclusive("maximum", name, value, beside, into),
            "contentMediaType" => self.binary(beside, into),
            "properties" => put(into, name, self.write(Kind::MapOf(&Kind::Schema), value)),
            "items" | "not" => put(into, name, self.schema(value)),
            "oneOf" | "anyOf" => self.alternatives(name, value, beside, into),
            "allOf" => put(into, name, self.write(Kind::ListOf(&Kind::Schema), value)),
            "additionalProperties" if value.is_boolean() => put(into, name, value.clone()),
            "additionalProperties" => put(into, name, self.schema(value)),
            "description" if into.contains_key(name) => {}
            _ if ALIKE.contains(&name) => put(into, name, value.clone()),
            _ => self.fault("3.0 has no such keyword"),
        }
    }

    /// One type, or one type and null.
    fn kind(&mut self, value: &Value, into: &mut Members) {
        let names: Vec<&Value> = match value {
            Value::Array(names) => names.iter().collect(),
            one => vec![one],
        };
        let (null, others): (Vec<&Value>, Vec<&Value>) = names.into_iter().partition(|name| **name == "null");
        let [one] = others[..] else {
            return self.fault(format!("3.0 knows one type and null beside it, found {value}"));
        };
        put(into, "type", one.clone());
        if !null.is_empty() {
            put(into, "nullable", true.into());
        }
    }

    fn first_example(&mut self, value: &Value, into: &mut Members) {
        match value.as_array().and_then(|examples| examples.first()) {
            Some(first) => put(into, "example", first.clone()),
            None => self.fault(format!("expected a list of examples, found {value}")),
        }
    }

    /// A number of its own in 3.1, a word beside the bound in 3.0.
    fn exclusive(&mut self, bound: &str, name: &str, value: &Value, beside: &Members, into: &mut Members) {
        if beside.contains_key(bound) || !value.is_number() {
            return self.fault(format!("3.0 knows one {bound}, inclusive or not; found {value}"));
        }
        put(into, bound, value.clone());
        put(into, name, true.into());
    }

    fn binary(&mut self, beside: &Members, into: &mut Members) {
        let is_text = beside.get("type").is_some_and(|kind| kind == "string");
        if !is_text || beside.get("format").is_some_and(|format| format != "binary") {
            return self.fault("3.0 knows media types of whole strings without another format");
        }
        put(into, "format", "binary".into());
    }

    /// Alternatives are bare references, or discriminators are not understood: what was said beside them moves up.
    fn alternatives(&mut self, name: &str, value: &Value, beside: &Members, into: &mut Members) {
        let Some(choices) = value.as_array().filter(|_| beside.contains_key("discriminator")) else {
            return put(into, name, self.write(Kind::ListOf(&Kind::Schema), value));
        };
        let bare = choices.iter().map(|choice| json!({"$ref": choice["$ref"]})).collect();
        if choices.iter().any(|choice| !choice["$ref"].is_string()) {
            self.fault("alternatives with a discriminator have to be references");
        }
        put(into, name, Value::Array(bare));
        let mut description = beside
            .get("description")
            .and_then(Value::as_str)
            .unwrap_or_default()
            .to_owned();
        for choice in choices {
            if let (Some(reference), Some(text)) = (choice["$ref"].as_str(), choice["description"].as_str()) {
                let called = reference.rsplit('/').next().unwrap_or(reference);
                description.push_str(&format!("\n\n{called}: {text}"));
            }
        }
        put(into, "description", description.trim().into());
    }

    /// A reference hides what stands beside it in 3.0; wrapped, both are seen. One alternative says the same as `allOf`,
    /// which generators take for inheritance where the target has a discriminator.
    fn reference_schema(&mut self, members: &Members) -> Value {
        let bare = json!({"$ref": members["$ref"]});
        if members.len() == 1 {
            return bare;
        }
        let mut written = Members::new();
        for (name, value) in members.iter().filter(|(name, _)| *name != "$ref") {
            self.within(name, |writer| writer.keyword(name, value, members, &mut written));
        }
        put(&mut written, "oneOf", json!([bare]));
        written.into()
    }

    /// A named schema or null. `nullable` beside a reference would not allow null, strictly read, so null is an
    /// alternative of its own.
    fn nullable(&mut self, members: &Members, of: &Value) -> Value {
        let mut beside: Members = members.clone();
        beside.remove("oneOf");
        let Value::Object(mut named) = of.clone() else {
            return self.schema(of);
        };
        if let Some(text) = named.remove("description") {
            beside.entry("description").or_insert(text);
        }
        let named = self.within("oneOf", |writer| writer.schema(&named.into()));
        let mut written = Members::new();
        for (name, value) in &beside {
            self.within(name, |writer| writer.keyword(name, value, &beside, &mut written));
        }
        put(
            &mut written,
            "oneOf",
            json!([named, {"type": "string", "nullable": true, "enum": [null]}]),
        );
        written.into()
    }
}

fn put(into: &mut Members, name: &str, value: Value) {
    into.insert(name.to_owned(), value);
}

/// The other of two alternatives of which one is null.
fn nullable_choice(members: &Members) -> Option<&Value> {
    let choices = members.get("oneOf")?.as_array()?;
    let null = |choice: &&Value| choice["type"] == "null";
    match &choices[..] {
        [first, second] if null(&second) && !null(&first) => Some(first),
        [first, second] if null(&first) && !null(&second) => Some(second),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn written(schema: Value) -> Value {
        let mut writer = Writer::default();
        let written = writer.schema(&schema);
        assert!(writer.faults.is_empty(), "{:?}", writer.faults);
        written
    }

    fn pointers(schema: Value) -> Vec<String> {
        let mut writer = Writer::default();
        writer.schema(&schema);
        writer.faults.into_iter().map(|fault| fault.pointer).collect()
    }

    #[test]
    fn null_beside_a_type_is_nullable() {
        let expected = json!({"type": "number", "nullable": true, "minimum": 0});
        assert_eq!(written(json!({"type": ["number", "null"], "minimum": 0})), expected);
        assert_eq!(written(json!({"type": ["number"]})), json!({"type": "number"}));
        assert_eq!(pointers(json!({"type": ["number", "string"]})), ["/type"]);
        assert_eq!(pointers(json!({"type": "null"})), ["/type"]);
    }

    #[test]
    fn constants_examples_and_open_bounds_are_reworded() {
        assert_eq!(written(json!({"const": "a"})), json!({"enum": ["a"]}));
        assert_eq!(written(json!({"examples": [[1, 2], [3]]})), json!({"example": [1, 2]}));
        assert_eq!(pointers(json!({"examples": []})), ["/examples"]);
        let expected = json!({"minimum": 0, "exclusiveMinimum": true, "maximum": 2.5, "exclusiveMaximum": true});
        assert_eq!(
            written(json!({"exclusiveMinimum": 0, "exclusiveMaximum": 2.5})),
            expected
        );
        assert_eq!(
            pointers(json!({"exclusiveMinimum": 0, "minimum": 1})),
            ["/exclusiveMinimum"]
        );
    }

    #[test]
    fn a_file_is_binary() {
        let file = json!({"type": "string", "format": "binary"});
        assert_eq!(written(json!({"type": "string", "contentMediaType": "text/csv"})), file);
        let inside = json!({"type": "string", "format": "date", "contentMediaType": "text/csv"});
        assert_eq!(pointers(inside), ["/contentMediaType"]);
        assert_eq!(
            pointers(json!({"type": "string", "contentEncoding": "base64"})),
            ["/contentEncoding"]
        );
    }

    #[test]
    fn text_beside_a_reference_is_kept() {
        let expected = json!({"oneOf": [{"$ref": "#/a"}], "description": "Why."});
        assert_eq!(written(json!({"$ref": "#/a", "description": "Why."})), expected);
        assert_eq!(written(json!({"$ref": "#/a"})), json!({"$ref": "#/a"}));
    }

    #[test]
    fn a_reference_or_null_keeps_both() {
        let or_null = json!({"oneOf": [{"$ref": "#/a", "description": "Why."}, {"type": "null"}], "default": null});
        let expected = json!({"oneOf": [{"$ref": "#/a"}, {"type": "string", "nullable": true, "enum": [null]}],
                              "description": "Why.", "default": null});
        assert_eq!(written(or_null), expected);
        let own_text = json!({"description": "Own.", "oneOf": [{"type": "null"}, {"$ref": "#/a"}]});
        assert_eq!(written(own_text)["description"], "Own.");
    }

    #[test]
    fn alternatives_with_a_discriminator_are_bare_and_their_text_moves_up() {
        let tagged = json!({"description": "All.", "discriminator": {"propertyName": "kind"},
                            "oneOf": [{"$ref": "#/s/A", "description": "One."}, {"$ref": "#/s/B"}]});
        let expected = json!({"description": "All.\n\nA: One.", "discriminator": {"propertyName": "kind"},
                              "oneOf": [{"$ref": "#/s/A"}, {"$ref": "#/s/B"}]});
        assert_eq!(written(tagged), expected);
        let unnamed = json!({"discriminator": {"propertyName": "kind"}, "oneOf": [{"type": "object"}]});
        assert_eq!(pointers(unnamed), ["/oneOf"]);
    }

    #[test]
    fn what_3_0_has_no_word_for_is_a_fault_wherever_it_stands() {
        for keyword in [
            "prefixItems",
            "patternProperties",
            "propertyNames",
            "unevaluatedProperties",
            "dependentRequired",
            "if",
            "contains",
            "$defs",
            "$id",
            "$comment",
            "minContains",
        ] {
            let deep = json!({"type": "object", "properties": {"x": {"type": "array", "items": {keyword: {}}}}});
            assert_eq!(pointers(deep), [format!("/properties/x/items/{keyword}")]);
        }
        assert_eq!(
            pointers(json!({"additionalProperties": {"not": true}})),
            ["/additionalProperties/not"]
        );
        assert_eq!(
            pointers(json!({"anyOf": [{"type": "null"}, {"type": "null"}]})).len(),
            2
        );
    }
}
