//! The description in OpenAPI 3.0.3: written from the 3.1 one, committed, served, and nothing lost on the way.

use dipcast::http::{openapi, router};
use serde_json::Value;

use crate::support::{get, service};

fn both() -> (Value, Value) {
    let document = serde_json::to_value(router::document()).unwrap();
    let twin = openapi::twin(&document).unwrap_or_else(|faults| panic!("3.0 cannot say: {faults:#?}"));
    (document, twin)
}

#[test]
fn the_committed_twin_is_what_the_binary_writes() {
    let written = openapi::twin_text(&router::document())
        .unwrap_or_else(|faults| panic!("3.0 cannot say, so say it otherwise in 3.1: {faults:#?}"));
    let committed =
        std::fs::read_to_string(concat!(env!("CARGO_MANIFEST_DIR"), "/openapi/v1-3.0.json")).unwrap_or_default();
    assert!(
        written == committed,
        "openapi/v1-3.0.json is out of date; mend it with: cargo run -q -- openapi --version 3.0 > openapi/v1-3.0.json"
    );
}

#[tokio::test]
async fn the_twin_is_served_as_committed() {
    let answer = get(&service(), "/openapi-3.0.json").await;
    assert_eq!(answer.header("content-type"), "application/json");
    assert_eq!(answer.json(), both().1);
    assert_eq!(answer.json()["openapi"], openapi::TWIN_VERSION);
}

/// Paths, operations, parameters, answers, media types, schemas and fields of schemas: all that has a name.
#[test]
fn every_name_is_in_both() {
    let (document, twin) = both();
    assert!(names(&document).len() > 300);
    assert_eq!(names(&document), names(&twin));
}

#[test]
fn every_bound_and_pattern_is_in_both() {
    let (document, twin) = both();
    for keyword in [
        "minimum",
        "maximum",
        "pattern",
        "maxLength",
        "minItems",
        "maxItems",
        "required",
        "enum",
        "default",
    ] {
        let nulls = |value: &Value| value.get("enum") == Some(&serde_json::json!([null]));
        let count = |value: &Value| count(value, &|object| object.get(keyword).is_some() && !nulls(object));
        assert_eq!(count(&document), count(&twin), "{keyword}");
    }
    let nullable = |value: &Value| count(value, &|object| object.get("nullable").is_some());
    let with_null = |object: &Value| {
        let among = |list: &Value| list.as_array().is_some_and(|types| types.contains(&"null".into()));
        object.get("type").is_some_and(|kind| kind == "null" || among(kind))
    };
    assert_eq!(count(&document, &with_null), nullable(&twin));
}

#[test]
fn every_description_is_in_the_twin() {
    let (document, twin) = both();
    let all = twin.to_string();
    let lost: Vec<String> = texts(&document, "description")
        .into_iter()
        .filter(|text| {
            let quoted = Value::from(text.as_str()).to_string();
            !all.contains(quoted.trim_matches('"'))
        })
        .collect();
    assert!(lost.is_empty(), "{lost:?}");
}

#[test]
fn every_reference_of_the_twin_leads_somewhere() {
    let twin = both().1;
    let references = texts(&twin, "$ref");
    assert!(references.len() > 100);
    for reference in references {
        assert!(twin.pointer(reference.trim_start_matches('#')).is_some(), "{reference}");
    }
}

/// Pointers to everything under `paths` and to every schema's fields.
fn names(document: &Value) -> Vec<String> {
    let mut found = Vec::new();
    let schemas = document["components"]["schemas"].as_object().unwrap();
    for (name, schema) in schemas {
        found.push(name.clone());
        let fields = schema["properties"]
            .as_object()
            .into_iter()
            .flat_map(|fields| fields.keys());
        found.extend(fields.map(|field| format!("{name}/{field}")));
    }
    for (path, item) in document["paths"].as_object().unwrap() {
        for (method, operation) in item.as_object().unwrap() {
            found.push(format!("{method} {path} {}", operation["operationId"]));
            for (status, answer) in operation["responses"].as_object().unwrap() {
                let kinds = answer["content"]
                    .as_object()
                    .into_iter()
                    .flat_map(|content| content.keys());
                found.extend(kinds.map(|kind| format!("{method} {path} {status} {kind}")));
            }
        }
    }
    found
}

fn each_object(value: &Value, visit: &mut impl FnMut(&Value)) {
    match value {
        Value::Object(members) => {
            visit(value);
            members.values().for_each(|member| each_object(member, visit));
        }
        Value::Array(items) => items.iter().for_each(|item| each_object(item, visit)),
        _ => {}
    }
}

fn count(value: &Value, holds: &impl Fn(&Value) -> bool) -> usize {
    let mut found = 0;
    each_object(value, &mut |object| found += usize::from(holds(object)));
    found
}

fn texts(value: &Value, name: &str) -> Vec<String> {
    let mut found = Vec::new();
    each_object(value, &mut |object| {
        found.extend(object.get(name).and_then(Value::as_str).map(str::to_owned));
    });
    found
}
