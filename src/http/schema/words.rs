//! The words faults are told in.

use serde_json::Value;

/// Longest piece of a caller's text that is repeated in a fault.
const LONGEST_QUOTE: usize = 60;

/// What was found, short enough to print.
pub(super) fn found(value: &Value) -> String {
    match value {
        Value::Null => "null".to_owned(),
        Value::Bool(truth) => truth.to_string(),
        Value::Number(number) => format!("the number {number}"),
        Value::String(text) => format!("the text {}", quoted(text)),
        Value::Array(items) => format!("a list of {}", items.len()),
        Value::Object(_) => "an object".to_owned(),
    }
}

/// A caller's text in quotes, cut if long.
pub(super) fn quoted(text: &str) -> String {
    let short: String = text.chars().take(LONGEST_QUOTE).collect();
    if short.len() == text.len() {
        format!("{text:?}")
    } else {
        format!("{short:?}...")
    }
}

pub(super) fn wrong_type(allowed: &[&str], value: &Value) -> String {
    let names: Vec<&str> = allowed.iter().map(|name| type_in_words(name)).collect();
    let expected = names.join(" or ");
    let hint = match value {
        Value::String(text) if looks_like_number(allowed, text) => "; write it without quotes",
        Value::Null => "; leave the field out if you do not know it",
        _ => "",
    };
    format!("expected {expected}, found {}{hint}", found(value))
}

fn looks_like_number(allowed: &[&str], text: &str) -> bool {
    let numeric = allowed.contains(&"number") || allowed.contains(&"integer");
    numeric && text.trim().parse::<f64>().is_ok_and(f64::is_finite)
}

fn type_in_words(name: &str) -> &str {
    match name {
        "number" => "a number",
        "integer" => "a whole number",
        "string" => "a text",
        "boolean" => "true or false",
        "array" => "a list",
        "object" => "an object",
        other => other,
    }
}

pub(super) fn is_of_type(value: &Value, name: &str) -> bool {
    match name {
        "number" => value.is_number(),
        "integer" => value.is_i64() || value.is_u64(),
        "string" => value.is_string(),
        "boolean" => value.is_boolean(),
        "array" => value.is_array(),
        "object" => value.is_object(),
        "null" => value.is_null(),
        _ => false,
    }
}

/// JSON knows one kind of number: 3.0 is the whole number 3.
pub(super) fn make_whole(value: &mut Value) {
    if let Some(number) = value
        .as_f64()
        .filter(|number| value.is_f64() && number.fract() == 0.0 && number.abs() < 9e15)
    {
        *value = if number < 0.0 {
            Value::from(number as i64)
        } else {
            Value::from(number as u64)
        };
    }
}

pub(super) fn one_of(names: &[&str]) -> String {
    match names {
        [only] => format!("{only:?}"),
        _ => format!("one of {}", names.join(", ")),
    }
}

/// "; did you mean X?" with the nearest known name, or nothing if none is near.
pub(super) fn did_you_mean(name: &str, known: &[&str]) -> String {
    let close = |candidate: &&&str| strsim::jaro_winkler(name, candidate);
    let nearest = known.iter().max_by(|a, b| close(a).total_cmp(&close(b)));
    let near = nearest.filter(|candidate| close(candidate) > 0.75);
    near.map_or_else(String::new, |candidate| format!("; did you mean {candidate:?}?"))
}
