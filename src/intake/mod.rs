//! Bytes in: weather files become hourly series.
/// CSV in a documented form.
pub mod csv;
