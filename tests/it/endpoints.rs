//! Weather by coordinates: requests, sources, and what the network can do to them.

mod asking;
mod bodies;
mod fixture;
mod scenarios;
mod stand_in;
