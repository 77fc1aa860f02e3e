//! One file a resource, shaped like the URLs.

mod access;
mod places;
mod inspections;
mod predictions;
mod problems;
mod service;
mod tables;
