//! Examples of requests: the files of `openapi/examples/`, which the tests run.

use utoipa::openapi::example::ExampleBuilder;
use utoipa::openapi::{OpenApi, RefOr};

/// Name, summary, text.
const REQUESTS: [(&str, &str, &str); 3] = [
    (
        "own_device",
        "A device of your own and a day of readings, in an invented shop",
        include_str!("../../../openapi/examples/own-device.json"),
    ),
    (
        "example_device",
        "The shortest request: an example device and six hours",
        include_str!("../../../openapi/examples/shortest.json"),
    ),
    (
        "by_coordinates",
        "Weather of a place by its coordinates, from the built-in source, with no network",
        include_str!("../../../openapi/examples/by-coordinates.json"),
    ),
];

pub(super) fn add(document: &mut OpenApi) {
    let path = document.paths.paths.get_mut("/v1/predictions");
    let operation = path.and_then(|item| item.post.as_mut());
    let Some(RefOr::T(body)) = operation.and_then(|operation| operation.request_body.as_mut()) else {
        return;
    };
    let Some(RefOr::T(content)) = body.content.get_mut("application/json") else {
        return;
    };
    for (name, summary, text) in REQUESTS {
        let value = serde_json::from_str(text).expect("the examples are JSON; a test sends them");
        let example = ExampleBuilder::new()
            .summary(summary)
            .value(Some::<serde_json::Value>(value))
            .build();
        content.examples.insert(name.to_owned(), RefOr::T(example));
    }
}
