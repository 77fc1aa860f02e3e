//! The only room that knows the web framework, the API description and the wire format.
//!
//! Reading order: [`router`] is the one list of routes; [`error`] the one way a request fails; [`v1`] the resources.

/// What the handlers share.
pub mod app;
/// Room in memory for request bodies.
pub mod body_room;
/// The one way a request fails: problem documents.
pub mod error;
/// Strict reading of requests.
pub mod extract;
/// Is the process alive, is it ready, what did it count.
pub mod health;
/// What happens around every request.
pub mod middleware;
/// Choosing the format of an answer.
pub mod negotiate;
/// The API's description.
pub mod openapi;
/// Pages for people.
pub mod pages;
/// The table of problem types.
pub mod problems;
/// The one list of routes.
pub mod router;
/// Checks a JSON value against the published schema, all faults at once.
pub mod schema;
/// Connections: accept, time out, cap, drain.
pub mod server;
/// JSON that refuses repeated names.
pub mod strict_json;
/// Version 1 of the resources.
pub mod v1;
