//! CSV weather: the documented form, any form whose meaning can be told by looking ([`detect`]), or any form with an
//! explicit mapping ([`Layout`]).
//!
//! The documented form needs no layout: UTF-8, comma, decimal point, one header row of these names in any order, `time` in
//! RFC 3339 with `Z` or an offset, one row a reading, at any spacing and in any order. Needed are `time`,
//! `air_temperature_c`, and `relative_humidity_pct` or `dew_point_c`; cells may be empty. Gzip is recognised by itself.
//!
//! ```
//! let text = "time,air_temperature_c,relative_humidity_pct,dew_point_c,air_pressure_hpa,wind_speed_m_s,shortwave_w_m2\n\
//!             2026-01-01T00:00:00Z,20.5,50,9.8,1010.5,0.1,0\n\
//!             2026-01-01T02:00:00+01:00,20.4,51,,1010.6,,0\n";
//! let readings = dipcast::intake::csv::read(text.as_bytes(), None, &Default::default()).unwrap();
//! assert_eq!(readings.time_unix_s, [1_767_225_600, 1_767_229_200]);
//! ```
//!
//! Reading order: `layout` says what a mapping is and `layout_check` what is wrong with one; `source` turns bytes into
//! text, `records` text into rows, `pattern`, `shown` and `clock` time cells into instants, `number` and `plan` cells into
//! SI values, and
//! `rows` puts them together.

mod clock;
mod detect;
mod faults;
mod layout;
mod layout_check;
mod limits;
mod lines;
mod long_form;
mod number;
mod own_form;
mod pattern;
mod plan;
mod read;
mod records;
mod repeated_hour;
mod rows;
mod said;
mod shown;
mod sniff;
mod source;

pub use detect::{
    Candidate, ColumnFinding, ColumnHint, ColumnHints, Confidence, Detection, Hints, Question, Role, detect,
};
pub use layout::{
    Ambiguous, Clock, ColumnMapping, Columns, Dialect, FixedColumn, LabelName, Layout, LongForm, Nonexistent,
    RowFilter, TimeLayout,
};
pub use limits::Limits;
pub use own_form::OWN_HEADER;
pub use read::{read, read_with_hints};
