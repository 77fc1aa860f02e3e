//! Weather by coordinates: requests, sources, and what the network can do to them.

mod fixture;
