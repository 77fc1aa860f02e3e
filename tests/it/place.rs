//! From the weather outside to the air at the device.

mod any;
mod cases;
mod house;
mod outside;
