//! CSV weather: the documented form, or any form with an explicit mapping ([`Layout`]).
//!
//! Reading order: `layout` says what a mapping is and `layout_check` what is wrong with one; `source` turns bytes into
//! text, `records` text into rows, `pattern` and `clock` time cells into instants, `number` and `plan` cells into SI values.

mod clock;
mod faults;
mod layout;
mod layout_check;
mod limits;
mod number;
mod own_form;
mod pattern;
mod plan;
mod read;
mod records;
mod sniff;
mod source;

pub use layout::{
    Ambiguous, Clock, ColumnMapping, Columns, Dialect, LabelName, Layout, Nonexistent, RowFilter, TimeLayout,
};
pub use limits::Limits;
pub use own_form::OWN_HEADER;
pub use read::read;
