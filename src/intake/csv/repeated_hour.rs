//! The hour a clock shows twice in autumn: which of the two a row means, told from the order of rows.

use super::layout::Ambiguous;
use crate::model::weather::{Flag, ROWS_NAMED};

/// Keeps track of which pass of a repeated hour the file is in.
#[derive(Default)]
pub(super) struct RepeatedHour {
    /// The wall clock of this row and of the one before.
    here_s: Option<i64>,
    before_s: Option<i64>,
    /// True once the file is seen to run from late to early.
    backwards: Option<bool>,
    /// First and last wall clock and the first row of the repeated hour the file is in.
    stretch: Option<Stretch>,
    single: Vec<usize>,
}

struct Stretch {
    /// Tells one autumn from another: seconds between its two passes and its date.
    last_wall_s: i64,
    row: usize,
    turned: bool,
}

/// Wall clocks further apart than this belong to different autumns [s].
const SAME_AUTUMN_S: i64 = 2 * 86_400;

impl RepeatedHour {
    /// Notes the wall clock of the next row.
    pub(super) fn see(&mut self, wall_s: i64) {
        self.before_s = self.here_s.replace(wall_s);
        if let (None, Some(before_s)) = (self.backwards, self.before_s)
            && before_s != wall_s
        {
            self.backwards = Some(wall_s < before_s);
        }
    }

    /// The instant of a wall clock that occurs at `first` and `second`; `None` when such rows are refused.
    pub(super) fn choose(&mut self, rule: Ambiguous, wall_s: i64, first: i64, second: i64, row: usize) -> Option<i64> {
        match rule {
            Ambiguous::First => Some(first),
            Ambiguous::Second => Some(second),
            Ambiguous::Refuse => None,
            Ambiguous::RowOrder => {
                let second_pass = self.turned(wall_s, row) != self.backwards.unwrap_or(false);
                Some(if second_pass { second } else { first })
            }
        }
    }

    /// True once the clock was seen to jump against the run of the file within this repeated hour.
    fn turned(&mut self, wall_s: i64, row: usize) -> bool {
        let backwards = self.backwards.unwrap_or(false);
        let fresh = self
            .stretch
            .as_ref()
            .is_none_or(|s| (wall_s - s.last_wall_s).abs() > SAME_AUTUMN_S);
        if fresh {
            self.close();
            self.stretch = Some(Stretch {
                last_wall_s: wall_s,
                row,
                turned: false,
            });
        } else if let Some(stretch) = &mut self.stretch {
            let against = if backwards {
                wall_s >= stretch.last_wall_s
            } else {
                wall_s <= stretch.last_wall_s
            };
            stretch.turned |= against;
            stretch.last_wall_s = wall_s;
        }
        self.stretch.as_ref().is_some_and(|stretch| stretch.turned)
    }

    fn close(&mut self) {
        if let Some(stretch) = self.stretch.take().filter(|stretch| !stretch.turned) {
            self.single.push(stretch.row);
        }
    }

    /// Says where only one pass was there.
    pub(super) fn flags(mut self) -> Vec<Flag> {
        self.close();
        if self.single.is_empty() {
            return Vec::new();
        }
        let pass = if self.backwards.unwrap_or(false) {
            "second"
        } else {
            "first"
        };
        let detail = format!(
            "the hour that the clock repeats in autumn is there only once (first row of each); taken as the {pass}. Send times \
             with an offset, or layout.time.ambiguous"
        );
        let rows = self.single.iter().copied().take(ROWS_NAMED).collect();
        vec![Flag {
            code: "repeated_hour_once",
            count: self.single.len(),
            rows,
            detail,
        }]
    }
}
