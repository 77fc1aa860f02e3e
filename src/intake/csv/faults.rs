//! Faults of single rows: the first twenty in full, the rest counted.

use crate::model::weather::{ROWS_NAMED, WeatherFault};

/// Faults after which reading stops.
const HOPELESS: usize = 10_000;

/// Collects faults while the file is read to its end.
#[derive(Default)]
pub(super) struct RowFaults {
    named: Vec<WeatherFault>,
    more: usize,
}

impl RowFaults {
    /// Takes a fault; builds it only while it will be named.
    pub(super) fn add(&mut self, fault: impl FnOnce() -> WeatherFault) {
        if self.named.len() < ROWS_NAMED {
            self.named.push(fault());
        } else {
            self.more += 1;
        }
    }

    /// True when so many rows are wrong that reading on tells nothing new.
    pub(super) fn are_hopeless(&self) -> bool {
        self.more >= HOPELESS
    }

    /// All that was found; empty when nothing was.
    pub(super) fn finish(mut self) -> Vec<WeatherFault> {
        if self.more > 0 {
            let rest = if self.are_hopeless() {
                "; the rest of the file was not read"
            } else {
                ""
            };
            let detail = format!("{} more faults in rows further down{rest}", self.more);
            self.named.push(WeatherFault::whole("more_faults", detail));
        }
        self.named
    }
}

/// What a cell holds, for messages: cut to a readable length.
pub(super) fn quoted(cell: &[u8]) -> String {
    const LONGEST: usize = 40;
    let text = String::from_utf8_lossy(cell);
    let short: String = text.chars().take(LONGEST).collect();
    let dots = if short.len() < text.len() { "..." } else { "" };
    format!("{short:?}{dots}")
}
