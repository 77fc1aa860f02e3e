//! The description once more as OpenAPI 3.0.3, for generators that cannot read 3.1.
//!
//! What 3.0 says otherwise is rewritten; what it cannot say is a fault, and a test converts the whole document, so that
//! nothing is lost in silence. Three things have no place in 3.0 and are left out on purpose: `license.identifier` where
//! it repeats the name, examples after the first, and the media type of a file inside a form (it becomes `binary`).

mod objects;
mod schema;

use serde_json::{Map, Value};

use objects::{Kind, field};

/// The version the twin is written in.
pub const TWIN_VERSION: &str = "3.0.3";

/// One thing that 3.0 cannot say: where it stands (JSON pointer) and what it is.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct TwinFault {
    /// JSON pointer (RFC 6901) into the 3.1 document.
    pub pointer: String,
    /// What stands there, and why it cannot be kept.
    pub detail: String,
}

/// Rewrites a 3.1 document as 3.0.3.
///
/// # Errors
/// Everything that 3.0 has no words for, all at once.
pub fn twin(document: &Value) -> Result<Value, Vec<TwinFault>> {
    let mut writer = Writer::default();
    let mut written = writer.write(Kind::Document, document);
    match (writer.faults.is_empty(), written.get_mut("openapi")) {
        (true, Some(version)) => {
            *version = TWIN_VERSION.into();
            Ok(written)
        }
        (true, None) => Err(vec![TwinFault {
            pointer: String::new(),
            detail: "expected an OpenAPI document, found no field openapi".into(),
        }]),
        (false, _) => Err(writer.faults),
    }
}

/// Walks the document, knows where it is, and collects what cannot be kept.
#[derive(Default)]
struct Writer {
    path: Vec<String>,
    faults: Vec<TwinFault>,
}

impl Writer {
    fn fault(&mut self, detail: impl Into<String>) {
        let escaped = self.path.iter().map(|step| step.replace('~', "~0").replace('/', "~1"));
        let pointer = escaped.map(|step| format!("/{step}")).collect();
        let detail = detail.into();
        self.faults.push(TwinFault { pointer, detail });
    }

    /// Goes one step down and comes back.
    fn within<T>(&mut self, step: &str, work: impl FnOnce(&mut Self) -> T) -> T {
        self.path.push(step.to_owned());
        let done = work(self);
        self.path.pop();
        done
    }

    fn write(&mut self, kind: Kind, value: &Value) -> Value {
        match (kind, value) {
            (Kind::Plain, _) => value.clone(),
            (Kind::Schema, _) => self.schema(value),
            (Kind::MapOf(inner), Value::Object(members)) => self.map(*inner, members).into(),
            (Kind::ListOf(inner), Value::Array(items)) => self.list(*inner, items).into(),
            (_, Value::Object(members)) if members.contains_key("$ref") => self.reference(members),
            (_, Value::Object(members)) => self.object(kind, members).into(),
            _ => {
                self.fault(format!("expected {kind:?}, found {value}"));
                Value::Null
            }
        }
    }

    fn map(&mut self, kind: Kind, members: &Map<String, Value>) -> Map<String, Value> {
        let each = members.iter().map(|(name, value)| {
            let written = self.within(name, |writer| writer.write(kind, value));
            (name.clone(), written)
        });
        each.collect()
    }

    fn list(&mut self, kind: Kind, items: &[Value]) -> Vec<Value> {
        let each = items.iter().enumerate().map(|(index, value)| {
            let step = index.to_string();
            self.within(&step, |writer| writer.write(kind, value))
        });
        each.collect()
    }

    /// Outside schemas a reference stands alone in 3.0.
    fn reference(&mut self, members: &Map<String, Value>) -> Value {
        if members.len() > 1 {
            self.fault("3.0 ignores what stands beside a $ref here");
        }
        Value::Object(members.clone())
    }

    fn object(&mut self, kind: Kind, members: &Map<String, Value>) -> Map<String, Value> {
        let mut written = Map::new();
        for (name, value) in members {
            if kind == Kind::License && name == "identifier" && members.get("name") == Some(value) {
                continue;
            }
            let child = self.within(name, |writer| match field(kind, name) {
                Some(inner) => Some(writer.write(inner, value)),
                None => {
                    writer.fault(format!("3.0 has no such field in {kind:?}"));
                    None
                }
            });
            written.extend(child.map(|child| (name.clone(), child)));
        }
        written
    }
}

#[cfg(test)]
mod tests {
    use serde_json::json;

    use super::*;

    fn with_schema(schema: Value) -> Value {
        json!({"openapi": "3.1.0", "info": {"title": "t", "version": "1"}, "paths": {},
               "components": {"schemas": {"A": schema}}})
    }

    fn faults_of(document: &Value) -> Vec<String> {
        twin(document)
            .expect_err("3.0 cannot say that")
            .into_iter()
            .map(|fault| fault.pointer)
            .collect()
    }

    #[test]
    fn a_document_without_a_version_is_refused() {
        assert_eq!(faults_of(&json!({"paths": {}})), [""]);
        assert_eq!(faults_of(&json!(3)), [""]);
    }

    #[test]
    fn fields_of_3_1_alone_are_faults() {
        let mut document = with_schema(json!({}));
        document["webhooks"] = json!({});
        document["jsonSchemaDialect"] = json!("x");
        document["info"]["summary"] = json!("s");
        document["info"]["license"] = json!({"name": "MIT", "identifier": "ISC"});
        document["components"]["pathItems"] = json!({});
        assert_eq!(
            faults_of(&document),
            [
                "/components/pathItems",
                "/info/license/identifier",
                "/info/summary",
                "/jsonSchemaDialect",
                "/webhooks"
            ]
        );
    }

    #[test]
    fn a_licence_named_by_its_identifier_keeps_its_name() {
        let mut document = with_schema(json!({}));
        document["info"]["license"] = json!({"name": "MIT", "identifier": "MIT"});
        assert_eq!(
            twin(&document).expect("fine")["info"]["license"],
            json!({"name": "MIT"})
        );
    }

    #[test]
    fn text_beside_a_reference_to_an_answer_is_a_fault() {
        let mut document = with_schema(json!({}));
        let reference = json!({"$ref": "#/components/responses/R", "description": "lost"});
        document["paths"] = json!({"/a": {"get": {"responses": {"200": reference}}}});
        assert_eq!(faults_of(&document), ["/paths/~1a/get/responses/200"]);
    }

    #[test]
    fn names_of_schemas_and_properties_are_no_keywords() {
        let odd = json!({"type": "object", "properties": {"const": {"const": 1}, "webhooks": {"type": "string"}}});
        let written = twin(&with_schema(odd)).expect("fine");
        let expected =
            json!({"type": "object", "properties": {"const": {"enum": [1]}, "webhooks": {"type": "string"}}});
        assert_eq!(written["components"]["schemas"]["A"], expected);
    }
}
