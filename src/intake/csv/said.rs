//! What a layout leaves to be assumed, or leaves out, in words.

use super::layout::Layout;
use super::long_form::HOLD_HOURS;
use crate::model::notes::Assumption;

/// What has to be said about readings read by this layout.
pub(super) fn assumptions(layout: &Layout, left_out: usize) -> Vec<Assumption> {
    let mut said = Vec::new();
    if layout.time.label.is_none() {
        let value = "instant: taken at the time beside them";
        said.push(Assumption::new(
            "what the readings' times mean",
            value,
            "means of an hour would shift by half an hour",
        ));
    }
    if let Some(long) = &layout.long_form {
        let hours = long.hold_hours.unwrap_or(HOLD_HOURS);
        let value = format!("each holds until the next of its name, {hours} hours at most; looked at every 10 minutes");
        said.push(Assumption::new(
            "values noted one by one",
            value,
            "the hours between two notes",
        ));
    }
    if let (Some(rows), true) = (&layout.rows, left_out > 0) {
        let value = format!(
            "only rows with {} = {:?}; {left_out} others left out",
            rows.column, rows.equals
        );
        said.push(Assumption::new("rows of the file", value, "as the layout asks"));
    }
    if let Some(year) = layout.time.year {
        let value = format!("{year}, as the layout asks; the file's own years are passed over");
        said.push(Assumption::new(
            "year of the readings",
            value,
            "the dates in the answer",
        ));
    }
    said
}
