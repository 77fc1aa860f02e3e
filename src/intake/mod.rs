//! Bytes in: weather files and weather services become hourly series.
/// CSV in a documented form.
pub mod csv;
/// Weather by coordinates: one file per source.
pub mod endpoints;
