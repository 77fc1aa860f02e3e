//! The API description: written by the binary, complete, and fit for generators.

use dipcast::http::{openapi, router};
use serde_json::Value;

use crate::support::{ask, get, service};

fn document() -> Value {
    serde_json::to_value(router::document()).unwrap()
}

/// Path, method and operation of everything described.
fn operations(document: &Value) -> Vec<(String, String, Value)> {
    let paths = document["paths"].as_object().unwrap();
    let each = paths.iter().flat_map(|(path, item)| {
        let item = item.as_object().unwrap().iter();
        item.map(|(method, operation)| (path.clone(), method.clone(), operation.clone()))
    });
    each.collect()
}

#[test]
fn the_committed_file_is_what_the_binary_writes() {
    let written = openapi::text(&router::document());
    let committed =
        std::fs::read_to_string(concat!(env!("CARGO_MANIFEST_DIR"), "/openapi/v1.json")).unwrap_or_default();
    assert!(
        written == committed,
        "openapi/v1.json is out of date; mend it with: cargo run -q -- openapi > openapi/v1.json"
    );
}

#[test]
fn the_head_is_complete() {
    let document = document();
    assert!(document["openapi"].as_str().unwrap().starts_with("3.1"));
    assert_eq!(document["info"]["version"], openapi::API_VERSION);
    assert_eq!(document["info"]["license"]["name"], "MIT OR Apache-2.0");
    assert_eq!(document["servers"][0]["url"], "/");
    assert_eq!(document["security"].as_array().unwrap().len(), 3);
}

#[test]
fn every_operation_is_named_and_every_answer_described() {
    let document = document();
    let mut ids = Vec::new();
    for (path, method, operation) in operations(&document) {
        let id = operation["operationId"].as_str().unwrap().to_owned();
        assert!(
            ["get_", "list_", "create_"].iter().any(|verb| id.starts_with(verb)),
            "{id}"
        );
        assert!(
            !operation["summary"].as_str().unwrap_or_default().is_empty(),
            "{method} {path}"
        );
        for (status, response) in operation["responses"].as_object().unwrap() {
            let response = match response["$ref"].as_str() {
                Some(reference) => document.pointer(reference.trim_start_matches('#')).unwrap(),
                None => response,
            };
            assert!(
                !response["description"].as_str().unwrap().is_empty(),
                "{method} {path} {status}"
            );
        }
        ids.push(id);
    }
    let count = ids.len();
    ids.sort();
    ids.dedup();
    assert_eq!(ids.len(), count, "an operation id is used twice: {ids:?}");
}

#[test]
fn every_reference_leads_somewhere() {
    let document = document();
    let mut references = Vec::new();
    collect(&document, "$ref", &mut references);
    assert!(references.len() > 10);
    for reference in references {
        let target = reference.as_str().unwrap().trim_start_matches('#');
        assert!(document.pointer(target).is_some(), "{target}");
    }
}

#[test]
fn alternatives_are_tagged_or_nullable() {
    let mut alternatives = Vec::new();
    collect_objects_with(&document(), "oneOf", &mut alternatives);
    for schema in alternatives {
        let choices = schema["oneOf"].as_array().unwrap();
        let nullable = choices.len() == 2 && choices.iter().any(|choice| choice["type"] == "null");
        assert!(nullable || schema["discriminator"].is_object(), "{schema}");
    }
}

/// Only what is listed here is served without being described: the files of the docs page.
#[tokio::test]
async fn everything_served_is_described_and_everything_described_is_served() {
    let document = document();
    let described: Vec<String> = document["paths"].as_object().unwrap().keys().cloned().collect();
    let sources = sources_under(std::path::Path::new(concat!(env!("CARGO_MANIFEST_DIR"), "/src/http")));
    assert!(
        !sources.contains(".route(") && !sources.contains(".nest("),
        "routes go through routes!()"
    );
    let router = service();
    for path in described {
        let concrete = path.replace("{code}", "busy");
        let options = axum::http::Request::builder()
            .method("TRACE")
            .uri(&concrete)
            .body(axum::body::Body::empty());
        assert_eq!(
            ask(&router, options.unwrap()).await.status,
            405,
            "{path} is described but not served"
        );
    }
    assert_eq!(get(&router, "/docs/").await.status, 200);
}

fn collect(value: &Value, name: &str, found: &mut Vec<Value>) {
    match value {
        Value::Object(members) => {
            for (key, member) in members {
                if key == name {
                    found.push(member.clone());
                }
                collect(member, name, found);
            }
        }
        Value::Array(items) => items.iter().for_each(|item| collect(item, name, found)),
        _ => {}
    }
}

fn collect_objects_with(value: &Value, name: &str, found: &mut Vec<Value>) {
    match value {
        Value::Object(members) => {
            if members.contains_key(name) {
                found.push(value.clone());
            }
            members
                .values()
                .for_each(|member| collect_objects_with(member, name, found));
        }
        Value::Array(items) => items.iter().for_each(|item| collect_objects_with(item, name, found)),
        _ => {}
    }
}

fn sources_under(folder: &std::path::Path) -> String {
    let entries = std::fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path());
    let each = entries.map(|path| {
        if path.is_dir() {
            sources_under(&path)
        } else {
            std::fs::read_to_string(path).unwrap()
        }
    });
    each.collect()
}
