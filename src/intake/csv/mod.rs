//! CSV weather.
