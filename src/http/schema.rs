//! Checks a JSON value against the published schema and tells every fault at once.
//!
//! The document at `/openapi.json` is the only description of a request; what it says is what is checked. Understood
//! are the words the document uses: `$ref`, `type`, `enum`, bounds, lengths, `properties`, `required`,
//! `additionalProperties`, `items`, `allOf`, and `oneOf` with `null` or with a discriminator.

mod words;

use serde_json::{Map, Value};

use super::error::FaultItem;

/// The named schemas of the document.
#[derive(Debug)]
pub struct Schemas(Map<String, Value>);

impl Schemas {
    /// Takes the schemas out of an OpenAPI document.
    pub fn of(document: &Value) -> Self {
        let schemas = document.pointer("/components/schemas").and_then(Value::as_object);
        Self(schemas.cloned().unwrap_or_default())
    }

    /// All faults of a value against a named schema; whole numbers written as 3.0 become 3 where a whole one is wanted.
    pub fn check(&self, name: &str, value: &mut Value) -> Vec<FaultItem> {
        let mut check = Check {
            schemas: self,
            path: Vec::new(),
            faults: Vec::new(),
        };
        check.value(self.named(name), value);
        check.faults
    }

    fn named(&self, name: &str) -> &Value {
        self.0.get(name).unwrap_or(&Value::Null)
    }

    fn resolve<'a>(&'a self, schema: &'a Value) -> &'a Value {
        let reference = schema.get("$ref").and_then(Value::as_str);
        reference
            .and_then(|path| path.rsplit('/').next())
            .map_or(schema, |name| self.named(name))
    }
}

enum Step {
    Member(String),
    Item(usize),
}

struct Check<'a> {
    schemas: &'a Schemas,
    path: Vec<Step>,
    faults: Vec<FaultItem>,
}

impl Check<'_> {
    fn value(&mut self, schema: &Value, value: &mut Value) {
        let schema = self.schemas.resolve(schema);
        if let Some(choices) = schema.get("oneOf").and_then(Value::as_array) {
            return self.one_of(schema, choices, value);
        }
        for part in members_of(schema, "allOf") {
            self.value(part, value);
        }
        if !self.has_type(schema, value) || !self.is_listed(schema, value) {
            return;
        }
        match value {
            Value::Number(_) => self.bounds(schema, value),
            Value::String(text) => self.length(schema, text.chars().count(), "minLength", "maxLength", "characters"),
            Value::Array(items) => self.items(schema, items),
            Value::Object(members) => self.object(schema, members),
            Value::Null | Value::Bool(_) => {}
        }
    }

    fn one_of(&mut self, schema: &Value, choices: &[Value], value: &mut Value) {
        if let Some(discriminator) = schema.get("discriminator") {
            return self.tagged(discriminator, value);
        }
        let nullable = choices.iter().any(is_null_type);
        if let (true, Value::Null) = (nullable, &value) {
            return;
        }
        if let Some(choice) = choices.iter().find(|choice| !is_null_type(choice)) {
            self.value(choice, value);
        }
    }

    fn tagged(&mut self, discriminator: &Value, value: &mut Value) {
        let tag = discriminator
            .get("propertyName")
            .and_then(Value::as_str)
            .unwrap_or_default();
        let empty = Map::new();
        let mapping = discriminator
            .get("mapping")
            .and_then(Value::as_object)
            .unwrap_or(&empty);
        let Some(object) = value.as_object() else {
            return self.fault(
                "wrong_type",
                format!("expected an object with {tag:?}, found {}", words::found(value)),
            );
        };
        let chosen = object.get(tag).and_then(Value::as_str).unwrap_or_default();
        match mapping
            .get(chosen)
            .and_then(Value::as_str)
            .and_then(|path| path.rsplit('/').next())
        {
            Some(name) => self.value(self.schemas.named(name), value),
            None => self.unknown_tag(tag, object.get(tag).cloned(), mapping),
        }
    }

    fn unknown_tag(&mut self, tag: &str, found: Option<Value>, mapping: &Map<String, Value>) {
        let names: Vec<&str> = mapping.keys().map(String::as_str).collect();
        let expected = words::one_of(&names);
        let Some(found) = found else {
            return self.fault("required", format!("{tag:?} is missing; expected {expected}"));
        };
        let nearest = words::did_you_mean(found.as_str().unwrap_or_default(), &names);
        let detail = format!("expected {expected}, found {}{nearest}", words::found(&found));
        self.within(Step::Member(tag.to_owned()), |check| check.fault("not_allowed", detail));
    }

    fn has_type(&mut self, schema: &Value, value: &mut Value) -> bool {
        let allowed: Vec<&str> = match schema.get("type") {
            Some(Value::String(name)) => vec![name.as_str()],
            Some(Value::Array(names)) => names.iter().filter_map(Value::as_str).collect(),
            _ => return true,
        };
        if allowed.contains(&"integer") && !allowed.contains(&"number") {
            words::make_whole(value);
        }
        let fits = allowed.iter().any(|name| words::is_of_type(value, name));
        if !fits {
            self.fault("wrong_type", words::wrong_type(&allowed, value));
        }
        fits
    }

    fn is_listed(&mut self, schema: &Value, value: &Value) -> bool {
        let Some(listed) = schema.get("enum").and_then(Value::as_array) else {
            return true;
        };
        let fits = listed.contains(value);
        if !fits {
            let names: Vec<&str> = listed.iter().filter_map(Value::as_str).collect();
            let nearest = words::did_you_mean(value.as_str().unwrap_or_default(), &names);
            self.fault(
                "not_allowed",
                format!(
                    "expected {}, found {}{nearest}",
                    words::one_of(&names),
                    words::found(value)
                ),
            );
        }
        fits
    }

    fn bounds(&mut self, schema: &Value, value: &Value) {
        let number = value.as_f64().unwrap_or(f64::NAN);
        let bound = |word: &str| schema.get(word).and_then(Value::as_f64);
        let below = bound("minimum")
            .filter(|low| number < *low)
            .map(|low| ("below_minimum", format!("at least {low}")));
        let not_above = bound("exclusiveMinimum").filter(|low| number <= *low);
        let not_above = not_above.map(|low| ("below_minimum", format!("more than {low}")));
        let above = bound("maximum")
            .filter(|high| number > *high)
            .map(|high| ("above_maximum", format!("at most {high}")));
        for (code, expected) in [below, not_above, above].into_iter().flatten() {
            self.fault(code, format!("expected {expected}, found {value}"));
        }
    }

    fn length(&mut self, schema: &Value, length: usize, low: &str, high: &str, unit: &str) {
        let bound = |word: &str| schema.get(word).and_then(Value::as_u64).map(|bound| bound as usize);
        if let Some(low) = bound(low).filter(|low| length < *low) {
            self.fault("too_short", format!("expected at least {low} {unit}, found {length}"));
        }
        if let Some(high) = bound(high).filter(|high| length > *high) {
            self.fault("too_long", format!("expected at most {high} {unit}, found {length}"));
        }
    }

    fn items(&mut self, schema: &Value, items: &mut [Value]) {
        self.length(schema, items.len(), "minItems", "maxItems", "items");
        let Some(item_schema) = schema.get("items") else { return };
        for (index, item) in items.iter_mut().enumerate() {
            self.within(Step::Item(index), |check| check.value(item_schema, item));
        }
    }

    fn object(&mut self, schema: &Value, members: &mut Map<String, Value>) {
        let empty = Map::new();
        let properties = schema.get("properties").and_then(Value::as_object).unwrap_or(&empty);
        for name in members_of(schema, "required").iter().filter_map(Value::as_str) {
            if !members.contains_key(name) {
                self.fault("required", format!("{name:?} is missing"));
            }
        }
        for (name, member) in members.iter_mut() {
            let member_schema = properties.get(name).or_else(|| extra_schema(schema));
            self.within(Step::Member(name.clone()), |check| match member_schema {
                Some(member_schema) => check.value(member_schema, member),
                None if refuses_extra(schema) => check.unknown_field(name, properties),
                None => {}
            });
        }
    }

    fn unknown_field(&mut self, name: &str, properties: &Map<String, Value>) {
        let known: Vec<&str> = properties.keys().map(String::as_str).collect();
        let nearest = words::did_you_mean(name, &known);
        let hint = if nearest.is_empty() {
            format!("; known here: {}", known.join(", "))
        } else {
            nearest
        };
        self.fault(
            "unknown_field",
            format!("there is no field {}{hint}", words::quoted(name)),
        );
    }

    fn within(&mut self, step: Step, inner: impl FnOnce(&mut Self)) {
        self.path.push(step);
        inner(self);
        self.path.pop();
    }

    fn fault(&mut self, code: &str, detail: String) {
        let pointer = self.path.iter().map(|step| match step {
            Step::Member(name) => format!("/{}", name.replace('~', "~0").replace('/', "~1")),
            Step::Item(index) => format!("/{index}"),
        });
        let pointer: String = pointer.collect();
        self.faults.push(FaultItem::at(pointer, code, detail));
    }
}

fn members_of<'a>(schema: &'a Value, word: &str) -> &'a [Value] {
    schema.get(word).and_then(Value::as_array).map_or(&[], Vec::as_slice)
}

fn is_null_type(schema: &Value) -> bool {
    schema.get("type").and_then(Value::as_str) == Some("null")
}

fn extra_schema(schema: &Value) -> Option<&Value> {
    schema.get("additionalProperties").filter(|extra| extra.is_object())
}

fn refuses_extra(schema: &Value) -> bool {
    schema.get("additionalProperties") == Some(&Value::Bool(false))
}

#[cfg(test)]
mod tests {
    use super::*;
    use serde_json::json;

    fn schemas() -> Schemas {
        Schemas::of(&json!({"components": {"schemas": {
            "Tube": {"type": "object", "additionalProperties": false, "required": ["bore_mm"], "properties": {
                "bore_mm": {"type": "number", "minimum": 1, "maximum": 50},
                "count": {"type": ["integer", "null"], "exclusiveMinimum": 0},
                "finish": {"type": "string", "enum": ["clear", "frosted"], "maxLength": 10},
                "inner": {"oneOf": [{"type": "null"}, {"$ref": "#/components/schemas/Tube"}]},
                "marks": {"type": "array", "maxItems": 2, "items": {"type": "number"}}}},
            "Shape": {"oneOf": [{"$ref": "#/components/schemas/Ring"}, {"$ref": "#/components/schemas/Rod"}],
                "discriminator": {"propertyName": "kind", "mapping": {
                    "ring": "#/components/schemas/Ring", "rod": "#/components/schemas/Rod"}}},
            "Ring": {"type": "object", "additionalProperties": false, "properties": {"kind": {"type": "string"}}},
            "Rod": {"type": "object", "additionalProperties": false, "properties": {"kind": {"type": "string"}, "size": {"type": "number"}}},
        }}}))
    }

    fn faults(name: &str, mut value: Value) -> Vec<(String, String, String)> {
        let found = schemas().check(name, &mut value);
        found
            .into_iter()
            .map(|fault| (fault.pointer.unwrap(), fault.code, fault.detail))
            .collect()
    }

    #[test]
    fn what_fits_has_no_faults() {
        let good = json!({"bore_mm": 5, "count": null, "finish": "clear", "inner": {"bore_mm": 2.5, "inner": null}, "marks": []});
        assert_eq!(faults("Tube", good), []);
        assert_eq!(faults("Shape", json!({"kind": "rod", "size": 1})), []);
    }

    #[test]
    fn every_fault_is_told_at_once_with_its_place() {
        let bad =
            json!({"bor_mm": 5, "count": 0, "finish": "cleer", "inner": {"bore_mm": "2.5"}, "marks": [1, null, 3]});
        let found = faults("Tube", bad);
        let short: Vec<(&str, &str)> = found
            .iter()
            .map(|(pointer, code, _)| (pointer.as_str(), code.as_str()))
            .collect();
        let expected = [
            ("", "required"),
            ("/bor_mm", "unknown_field"),
            ("/count", "below_minimum"),
            ("/finish", "not_allowed"),
            ("/inner/bore_mm", "wrong_type"),
            ("/marks", "too_long"),
            ("/marks/1", "wrong_type"),
        ];
        assert_eq!(short, expected, "{found:#?}");
        assert!(found[1].2.contains("did you mean \"bore_mm\"?"));
        assert!(found[3].2.contains("did you mean \"clear\"?"));
        assert!(found[4].2.contains("without quotes"));
    }

    #[test]
    fn tags_are_checked_before_the_rest() {
        assert_eq!(faults("Shape", json!({"kind": "rode"}))[0].0, "/kind");
        assert!(faults("Shape", json!({}))[0].2.contains("one of ring, rod"));
        assert_eq!(
            faults("Shape", json!({"kind": "ring", "size": 1}))[0].1,
            "unknown_field"
        );
        assert_eq!(faults("Shape", json!(3))[0].1, "wrong_type");
    }

    #[test]
    fn three_point_nought_is_a_whole_number() {
        let mut value = json!({"bore_mm": 5, "count": 3.0});
        assert_eq!(schemas().check("Tube", &mut value), []);
        assert_eq!(value["count"], json!(3));
        assert_eq!(faults("Tube", json!({"bore_mm": 5, "count": 3.5})).len(), 1);
    }

    #[test]
    fn pointers_escape_and_quotes_are_cut() {
        let long = "x".repeat(1000);
        let found = faults("Tube", json!({"bore_mm": 5, "a/b~c": 1, "finish": long}));
        assert_eq!(found[0].0, "/a~1b~0c");
        assert!(found[1].2.len() < 200);
    }
}
