//! From the weather outside to the air at the device.

mod cases;
mod house;
mod outside;
