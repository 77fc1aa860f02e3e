//! Which room may know which outside crate, and what the model may never touch.

use super::source::{self, Source, assert_none};

/// The wire: only `http` (and the command line, which starts it) may name these.
const WEB: [&str; 8] = [
    "axum",
    "hyper",
    "hyper_util",
    "http_body_util",
    "tower",
    "tower_http",
    "utoipa",
    "utoipa_axum",
];

/// All that the model may name from outside this crate.
const MODEL_MAY_USE: [&str; 8] = [
    "core",
    "std",
    "jiff",
    "rayon",
    "sobol_burley",
    "statrs",
    "strsim",
    "thiserror",
];

/// Parts of the standard library that are IO or a clock; any `now` is refused besides.
const MODEL_MAY_NOT_USE: [&str; 6] = ["env", "fs", "io", "net", "process", "SystemTime"];

#[test]
fn the_model_is_pure_and_the_wire_stays_in_its_room() {
    let dependencies = dependencies(&source::read("Cargo.toml"));
    let complaints: Vec<String> = source::sources()
        .iter()
        .flat_map(|file| impurities(file, &dependencies))
        .collect();
    assert_none(
        "outside crates in the wrong room (tests/it/house_rules/purity.rs):",
        &complaints,
    );
}

#[test]
fn the_rule_bites() {
    let dependencies = ["axum", "serde", "jiff"].map(String::from);
    let wrong = [
        ("src/model/air/mod.rs", "use serde::Serialize;"),
        ("src/model/air/mod.rs", "use std::{fmt, time::SystemTime};"),
        ("src/model/air/mod.rs", "fn f() { std::fs::remove_file(\"x\"); }"),
        ("src/model/weather/mod.rs", "fn f() { jiff::Zoned::now(); }"),
        ("src/service/mod.rs", "use axum::Json;"),
    ];
    for (path, text) in wrong {
        assert_eq!(
            impurities(&Source::parse(path, text), &dependencies).len(),
            1,
            "{path}: {text}"
        );
    }
    let right = [
        (
            "src/model/air/mod.rs",
            "use std::fmt; use jiff::tz::TimeZone; // serde\nconst A: &str = \"serde\";",
        ),
        (
            "src/http/mod.rs",
            "use axum::Json; use std::time::Instant; use serde::Serialize;",
        ),
    ];
    for (path, text) in right {
        assert_none(path, &impurities(&Source::parse(path, text), &dependencies));
    }
    assert!(self::dependencies("[dependencies]\nhyper-util = \"1\"\n").contains(&"hyper_util".to_string()));
}

/// The names under `[dependencies]`, as they are written in code.
fn dependencies(manifest: &str) -> Vec<String> {
    let (_, after) = manifest
        .split_once("[dependencies]")
        .expect("Cargo.toml has [dependencies]");
    after
        .lines()
        .take_while(|line| !line.starts_with('['))
        .filter_map(|line| line.split_once('=').map(|(name, _)| name.trim().replace('-', "_")))
        .collect()
}

fn impurities(file: &Source, dependencies: &[String]) -> Vec<String> {
    let mut complaints = Vec::new();
    for word in words(&file.text) {
        let why = match file.room() {
            "model" => model_fault(&word, dependencies),
            "http" | "main" => None,
            _ => WEB
                .contains(&word.as_str())
                .then_some("only http knows the web framework"),
        };
        complaints.extend(why.map(|why| format!("{}: {word} ({why})", file.path)));
    }
    complaints
}

fn model_fault(word: &str, dependencies: &[String]) -> Option<&'static str> {
    if word == "now" || MODEL_MAY_NOT_USE.contains(&word) {
        return Some("the model has no IO and no clock");
    }
    let outside = dependencies.iter().any(|name| name == word);
    (outside && !MODEL_MAY_USE.contains(&word)).then_some("not among the crates the model may use")
}

/// The names that stand in a path (before or after `::`) or in a `use`, each once.
fn words(text: &str) -> Vec<String> {
    let stream: proc_macro2::TokenStream = text.parse().expect("the file parsed before");
    let mut all = Vec::new();
    source::each_token(stream, &mut |token| {
        if !matches!(token, proc_macro2::TokenTree::Group(_)) {
            all.push(token.to_string());
        }
    });
    let mut found = Vec::new();
    let mut in_use = false;
    for (index, word) in all.iter().enumerate() {
        in_use = word == "use" || (in_use && word != ";");
        let beside_colons = all.get(index + 1).is_some_and(|next| next == ":") || (index > 0 && all[index - 1] == ":");
        if (in_use || beside_colons) && !found.contains(word) {
            found.push(word.clone());
        }
    }
    found
}
