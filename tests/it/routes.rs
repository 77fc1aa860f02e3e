//! One file a resource, shaped like the URLs.

mod access;
mod problems;
mod service;
