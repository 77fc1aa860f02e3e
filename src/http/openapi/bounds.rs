//! Writes the device room's bounds into the schema of a device: one list, two uses.

use std::collections::BTreeMap;

use utoipa::Number;
use utoipa::openapi::schema::{OneOf, Schema};
use utoipa::openapi::{Components, RefOr};

use crate::service::records::{ALL_BOUNDS, Bound};

type Schemas = BTreeMap<String, RefOr<Schema>>;

/// Name of the schema the paths of the bounds start at.
const DEVICE: &str = "Device";

pub(super) fn add(components: &mut Components) {
    for bound in ALL_BOUNDS {
        let steps: Vec<&str> = bound.field.split('/').collect();
        assert!(
            apply(&mut components.schemas, DEVICE, &steps, bound),
            "the schema has no field {}",
            bound.field
        );
    }
}

/// Follows a path from a named schema; true if it led to a number.
fn apply(schemas: &mut Schemas, name: &str, steps: &[&str], bound: &Bound) -> bool {
    let choices = match schemas.get(name) {
        Some(RefOr::T(Schema::OneOf(one_of))) => names_of(one_of),
        _ => Vec::new(),
    };
    if !choices.is_empty() {
        // Alternatives may share a field; each that has it gets the bound.
        return choices
            .iter()
            .filter(|choice| apply(schemas, choice, steps, bound))
            .count()
            > 0;
    }
    match property(schemas, name, steps) {
        Some(Step::Number) => set(schemas, name, steps[0], bound),
        Some(Step::Into(next)) => apply(schemas, &next, rest(steps), bound),
        None => false,
    }
}

enum Step {
    Number,
    Into(String),
}

fn property(schemas: &Schemas, name: &str, steps: &[&str]) -> Option<Step> {
    let Some(RefOr::T(Schema::Object(object))) = schemas.get(name) else {
        return None;
    };
    let property = object.properties.get(*steps.first()?)?;
    if steps.len() == 1 {
        Some(Step::Number)
    } else {
        target(property).map(Step::Into)
    }
}

/// The steps after a field; a `*` stands for any item of a list.
fn rest<'a>(steps: &'a [&'a str]) -> &'a [&'a str] {
    let after = &steps[1..];
    after.strip_prefix(&["*"]).unwrap_or(after)
}

fn set(schemas: &mut Schemas, name: &str, field: &str, bound: &Bound) -> bool {
    let Some(RefOr::T(Schema::Object(object))) = schemas.get_mut(name) else {
        return false;
    };
    let Some(RefOr::T(Schema::Object(number))) = object.properties.get_mut(field) else {
        return false;
    };
    number.minimum = Some(plain(bound.minimum));
    number.maximum = Some(plain(bound.maximum));
    true
}

/// Whole numbers without a decimal point.
fn plain(value: f64) -> Number {
    if value.fract() == 0.0 {
        Number::Int(value as isize)
    } else {
        Number::Float(value)
    }
}

/// The named schema a property refers to, through null or a list.
fn target(property: &RefOr<Schema>) -> Option<String> {
    match property {
        RefOr::Ref(reference) => reference.ref_location.rsplit('/').next().map(str::to_owned),
        RefOr::T(Schema::OneOf(one_of)) => names_of(one_of).into_iter().next(),
        RefOr::T(Schema::Array(array)) => match &array.items {
            utoipa::openapi::schema::ArrayItems::RefOrSchema(items) => target(items),
            _ => None,
        },
        _ => None,
    }
}

fn names_of(one_of: &OneOf) -> Vec<String> {
    one_of.items.iter().filter_map(target).collect()
}
