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
    let good =
        json!({"bore_mm": 5, "count": null, "finish": "clear", "inner": {"bore_mm": 2.5, "inner": null}, "marks": []});
    assert_eq!(faults("Tube", good), []);
    assert_eq!(faults("Shape", json!({"kind": "rod", "size": 1})), []);
}

#[test]
fn every_fault_is_told_at_once_with_its_place() {
    let bad = json!({"bor_mm": 5, "count": 0, "finish": "cleer", "inner": {"bore_mm": "2.5"}, "marks": [1, null, 3]});
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
