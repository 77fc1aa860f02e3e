//! Weather by coordinates: requests, sources, and what the network can do to them.

pub mod asking;
pub mod bodies;
mod conduct;
mod fixture;
mod forms;
mod questions;
mod scenarios;
pub mod stand_in;
mod through_http;
