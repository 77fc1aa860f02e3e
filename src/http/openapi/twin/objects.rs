//! Which fields the objects of OpenAPI 3.0.3 have, and what stands in them (specification, section 4.7).

/// What stands at a place of the document.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Kind {
    Document,
    Info,
    License,
    PathItem,
    Operation,
    Parameter,
    RequestBody,
    Response,
    Header,
    MediaType,
    Components,
    /// Handled keyword by keyword, elsewhere.
    Schema,
    /// Said alike in both versions: text, numbers, values of examples, servers, tags, keys.
    Plain,
    MapOf(&'static Kind),
    ListOf(&'static Kind),
}

use Kind::*;

/// What stands in a field; `None` where 3.0 has no such field. Fields of our document that are missing here are found
/// by the test that converts it.
pub(super) fn field(kind: Kind, name: &str) -> Option<Kind> {
    if name.starts_with("x-") {
        return Some(Plain);
    }
    let fields: &[(&str, Kind)] = match kind {
        Document => &DOCUMENT,
        Info => &INFO,
        License => &[("name", Plain), ("url", Plain)],
        PathItem => &PATH_ITEM,
        Operation => &OPERATION,
        Parameter => &PARAMETER,
        Header => &HEADER,
        RequestBody => &REQUEST_BODY,
        Response => &RESPONSE,
        MediaType => &MEDIA_TYPE,
        Components => &COMPONENTS,
        Schema | Plain | MapOf(_) | ListOf(_) => &[],
    };
    fields.iter().find(|(known, _)| *known == name).map(|(_, inner)| *inner)
}

const DOCUMENT: [(&str, Kind); 7] = [
    ("openapi", Plain),
    ("info", Info),
    ("servers", Plain),
    ("paths", MapOf(&PathItem)),
    ("components", Components),
    ("security", Plain),
    ("tags", Plain),
];

const INFO: [(&str, Kind); 5] = [
    ("title", Plain),
    ("description", Plain),
    ("contact", Plain),
    ("license", License),
    ("version", Plain),
];

const PATH_ITEM: [(&str, Kind); 6] = [
    ("get", Operation),
    ("put", Operation),
    ("post", Operation),
    ("patch", Operation),
    ("delete", Operation),
    ("parameters", ListOf(&Parameter)),
];

const OPERATION: [(&str, Kind); 9] = [
    ("tags", Plain),
    ("summary", Plain),
    ("description", Plain),
    ("operationId", Plain),
    ("parameters", ListOf(&Parameter)),
    ("requestBody", RequestBody),
    ("responses", MapOf(&Response)),
    ("deprecated", Plain),
    ("security", Plain),
];

const PARAMETER: [(&str, Kind); 10] = [
    ("name", Plain),
    ("in", Plain),
    ("description", Plain),
    ("required", Plain),
    ("deprecated", Plain),
    ("style", Plain),
    ("explode", Plain),
    ("schema", Schema),
    ("example", Plain),
    ("examples", Plain),
];

const HEADER: [(&str, Kind); 5] = [
    ("description", Plain),
    ("required", Plain),
    ("deprecated", Plain),
    ("schema", Schema),
    ("example", Plain),
];

const REQUEST_BODY: [(&str, Kind); 3] = [
    ("description", Plain),
    ("content", MapOf(&MediaType)),
    ("required", Plain),
];

const RESPONSE: [(&str, Kind); 3] = [
    ("description", Plain),
    ("headers", MapOf(&Header)),
    ("content", MapOf(&MediaType)),
];

const MEDIA_TYPE: [(&str, Kind); 4] = [
    ("schema", Schema),
    ("example", Plain),
    ("examples", Plain),
    ("encoding", Plain),
];

const COMPONENTS: [(&str, Kind); 7] = [
    ("schemas", MapOf(&Schema)),
    ("responses", MapOf(&Response)),
    ("parameters", MapOf(&Parameter)),
    ("examples", Plain),
    ("requestBodies", MapOf(&RequestBody)),
    ("headers", MapOf(&Header)),
    ("securitySchemes", Plain),
];
