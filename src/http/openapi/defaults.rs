//! A default of null says no more than that a field may be left out; generators read it as a field that is always there.

use utoipa::openapi::schema::Schema;
use utoipa::openapi::{Components, RefOr};

/// Takes `default: null` out of the fields of every named schema.
pub(super) fn drop_nulls(components: &mut Components) {
    for schema in components.schemas.values_mut() {
        let RefOr::T(Schema::Object(object)) = schema else {
            continue;
        };
        for property in object.properties.values_mut() {
            if let RefOr::T(property) = property {
                drop_null(property);
            }
        }
    }
}

fn drop_null(property: &mut Schema) {
    let default = match property {
        Schema::Object(object) => &mut object.default,
        Schema::Array(array) => &mut array.default,
        Schema::OneOf(one_of) => &mut one_of.default,
        _ => return,
    };
    if default.as_ref().is_some_and(serde_json::Value::is_null) {
        *default = None;
    }
}
