//! Device.
