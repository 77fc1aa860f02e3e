//! Examples of requests and answers: the files of `openapi/examples/`, which the tests send and compare, and the tables as
//! they are.

use serde_json::{Value, json};
use utoipa::openapi::example::{Example, ExampleBuilder};
use utoipa::openapi::path::Operation;
use utoipa::openapi::{Content, OpenApi, RefOr};

use crate::http::health::Health;
use crate::http::v1::weather_sources::WeatherSourceList;
use crate::http::v1::{evaporants::EvaporantList, example_devices::ExampleDeviceList, fluids::FluidList};

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

/// Media type and text of the answer to the shortest request.
const ANSWERS: [(&str, &str); 3] = [
    (
        "application/json",
        include_str!("../../../openapi/examples/answers/shortest.json"),
    ),
    (
        "text/csv",
        include_str!("../../../openapi/examples/answers/shortest.csv"),
    ),
    (
        "application/x-ndjson",
        include_str!("../../../openapi/examples/answers/shortest.ndjson"),
    ),
];

pub(super) fn add(document: &mut OpenApi) {
    if let Some(prediction) = post(document, "/v1/predictions") {
        add_requests(prediction);
        for (media_type, text) in ANSWERS {
            let value = match media_type {
                "application/json" => parsed(text),
                _ => text.into(),
            };
            add_answer(prediction, media_type, "The answer to the shortest request", value);
        }
    }
    if let Some(inspection) = post(document, "/v1/weather/inspections") {
        let text = include_str!("../../../openapi/examples/answers/inspection.json");
        add_answer(
            inspection,
            "application/json",
            "A logger in a form of its own",
            parsed(text),
        );
    }
    let tables = [
        ("/v1/fluids", first_of(json!(FluidList::all()))),
        ("/v1/evaporants", first_of(json!(EvaporantList::all()))),
        ("/v1/example-devices", first_of(json!(ExampleDeviceList::all()))),
        ("/v1/weather-sources", first_of(json!(WeatherSourceList::built_in()))),
    ];
    for (path, value) in tables {
        add_to_get(document, path, "The first of the list", value);
    }
    add_to_get(document, "/livez", "Alive", json!(Health::of("ok")));
    add_to_get(document, "/readyz", "Ready", json!(Health::of("ready")));
}

fn add_requests(prediction: &mut Operation) {
    let Some(RefOr::T(body)) = prediction.request_body.as_mut() else {
        return;
    };
    let Some(RefOr::T(content)) = body.content.get_mut("application/json") else {
        return;
    };
    for (name, summary, text) in REQUESTS {
        add_example(content, name, summary, parsed(text));
    }
}

fn add_to_get(document: &mut OpenApi, path: &str, summary: &str, value: Value) {
    let item = document.paths.paths.get_mut(path);
    if let Some(operation) = item.and_then(|item| item.get.as_mut()) {
        add_answer(operation, "application/json", summary, value);
    }
}

fn add_answer(operation: &mut Operation, media_type: &str, summary: &str, value: Value) {
    let Some(RefOr::T(answer)) = operation.responses.responses.get_mut("200") else {
        return;
    };
    if let Some(RefOr::T(content)) = answer.content.get_mut(media_type) {
        add_example(content, "real", summary, value);
    }
}

fn add_example(content: &mut Content, name: &str, summary: &str, value: Value) {
    let example: Example = ExampleBuilder::new().summary(summary).value(Some(value)).build();
    content.examples.insert(name.to_owned(), RefOr::T(example));
}

fn post<'a>(document: &'a mut OpenApi, path: &str) -> Option<&'a mut Operation> {
    document.paths.paths.get_mut(path)?.post.as_mut()
}

fn parsed(text: &str) -> Value {
    serde_json::from_str(text).expect("the examples are JSON; a test sends them")
}

/// A list cut to its first item: enough to see its form.
fn first_of(mut list: Value) -> Value {
    if let Some(items) = list["items"].as_array_mut() {
        items.truncate(1);
    }
    list
}
