//! The answers every operation can give besides its own: problems, described once and referred to.

use serde_json::{Value, json};
use utoipa::openapi::path::{Operation, PathItem};
use utoipa::openapi::{ContentBuilder, Header, ObjectBuilder, OpenApi, Ref, RefOr, Response, ResponseBuilder, Type};

use crate::http::error::{PROBLEM_JSON, ProblemDocument};
use crate::http::problems::KINDS;

/// A made-up id of a request.
const REQUEST_ID: &str = "019b4c2e-7d10-7c3a-9f51-2a6f0e8d4b17";

/// Status, name in the components, what it says.
const PROBLEMS: [(&str, &str, &str); 13] = [
    (
        "400",
        "BadRequest",
        "The request cannot be read: not JSON, a broken form, an unreadable file.",
    ),
    ("401", "Unauthorized", "A valid key is needed."),
    ("404", "NotFound", "There is nothing here."),
    (
        "405",
        "MethodNotAllowed",
        "The path does not take this method; `Allow` names those it takes.",
    ),
    (
        "406",
        "NotAcceptable",
        "The format asked for does not exist; `available` lists those that do.",
    ),
    (
        "413",
        "BodyTooLarge",
        "The body, as sent or after decompression, is too large.",
    ),
    ("415", "UnsupportedMediaType", "The content type is not understood."),
    ("422", "Invalid", "Readable but wrong; `errors` lists every fault."),
    (
        "429",
        "TooManyRequests",
        "Too many requests; wait as many seconds as `Retry-After` says.",
    ),
    ("500", "InternalError", "Our fault; nothing about it is shown."),
    (
        "502",
        "BadGateway",
        "A weather source gave nothing of use; asking again does not help.",
    ),
    (
        "503",
        "TryAgain",
        "Busy, timed out or shutting down; try again after `Retry-After` seconds.",
    ),
    ("default", "Problem", "Any other problem."),
];

pub(super) fn add(document: &mut OpenApi) {
    let components = document.components.get_or_insert_default();
    for (status, name, description) in PROBLEMS {
        components
            .responses
            .insert(name.to_owned(), RefOr::T(problem(status, description)));
    }
    for (path, item) in &mut document.paths.paths {
        for (operation, posts) in operations(item) {
            add_problems(path, operation, posts);
        }
    }
}

fn operations(item: &mut PathItem) -> impl Iterator<Item = (&mut Operation, bool)> {
    let get = item.get.as_mut().map(|operation| (operation, false));
    let post = item.post.as_mut().map(|operation| (operation, true));
    get.into_iter().chain(post)
}

fn add_problems(path: &str, operation: &mut Operation, posts: bool) {
    let mut can_give = vec!["405", "500", "503"];
    if path.starts_with("/v1/") {
        can_give.extend(["401", "406", "422", "429"]);
    }
    if posts {
        can_give.extend(["400", "413", "415"]);
    }
    if path.contains('{') {
        can_give.extend(["400", "404"]);
    }
    if path == "/v1/predictions" {
        can_give.push("502");
    }
    if path == "/metrics" {
        can_give.push("401");
    }
    for (status, name, _) in PROBLEMS.iter().filter(|(status, ..)| can_give.contains(status)) {
        let reference = RefOr::Ref(Ref::from_response_name(*name));
        operation
            .responses
            .responses
            .entry((*status).to_owned())
            .or_insert(reference);
    }
}

fn problem(status: &str, description: &str) -> Response {
    let schema = Ref::from_schema_name("ProblemDocument");
    let content = ContentBuilder::new()
        .schema(Some(schema))
        .example(example(status))
        .build();
    let response = ResponseBuilder::new()
        .description(description)
        .content(PROBLEM_JSON, content);
    let with_id = response.header("X-Request-Id", header("The request's id.", Type::String));
    match status {
        "405" => with_id.header("Allow", header("The methods this path takes.", Type::String)),
        "429" | "503" => with_id.header("Retry-After", header("When to try again [s].", Type::Integer)),
        "401" => with_id.header("WWW-Authenticate", header("How to send the key.", Type::String)),
        _ => with_id,
    }
    .build()
}

/// A problem of this status as a caller meets it.
fn example(status: &str) -> Option<Value> {
    if status == "422" {
        let refused = include_str!("../../../openapi/examples/answers/refused.json");
        return Some(serde_json::from_str(refused).expect("the example is JSON; a test compares it"));
    }
    let kind = KINDS.iter().find(|kind| kind.status.as_str() == status)?;
    let problem = ProblemDocument {
        problem_type: format!("/problems/{}", kind.code),
        title: kind.title,
        status: kind.status.as_u16(),
        detail: kind.cause.to_owned(),
        instance: REQUEST_ID.to_owned(),
        errors: Vec::new(),
        available: if status == "406" {
            vec!["application/json"]
        } else {
            Vec::new()
        },
    };
    Some(json!(problem))
}

fn header(description: &str, kind: Type) -> Header {
    let mut header = Header::new(ObjectBuilder::new().schema_type(kind).build());
    header.description = Some(description.to_owned());
    header
}
