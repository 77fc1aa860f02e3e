//! Checks against the outside: published tables, general reference libraries, observed series. Sources stand in the
//! head of each file under `tests/reference` and `tests/data`, or beside the number.

mod air;
mod device;
mod fluids;
mod table;
mod transfer;

pub use table::rows;
