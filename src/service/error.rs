//! Why there is no prediction, in the words of the use case.

use super::records::{Facts, Fault, WeatherFault};
use crate::intake::endpoints::FetchError;

/// Why there is no prediction.
#[derive(Debug, thiserror::Error)]
pub enum PredictError {
    /// The order is wrong; everything found.
    #[error("the order has {} fault(s)", .0.len())]
    Faults(Vec<OrderFault>),
    /// More hours than are computed at once.
    #[error("{found} {}, more than the {} computed at once", .limit.what(), .limit.most())]
    TooMany {
        /// Which limit.
        limit: HourLimit,
        /// How many were asked for.
        found: usize,
    },
    /// All places and the queue are taken.
    #[error("{waiting} predictions are waiting for a place already")]
    Busy {
        /// Predictions in the queue.
        waiting: usize,
    },
    /// A source of weather gave nothing.
    #[error("{0}")]
    Source(SourceTrouble),
    /// The caller went away or asked to stop.
    #[error("the prediction was stopped")]
    Stopped,
    /// Something broke; the text is for the log alone.
    #[error("the prediction broke: {0}")]
    Broken(String),
}

/// Why a source of weather gave nothing.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct SourceTrouble {
    /// Name of the source.
    pub source: &'static str,
    /// What happened, in a sentence.
    pub detail: String,
    /// When the same order may succeed [s]; none if asking again does not help.
    pub retry_after_s: Option<u64>,
}

impl SourceTrouble {
    /// Of a source and its failure.
    pub(super) fn of(facts: &'static Facts, error: &FetchError) -> Self {
        Self {
            source: facts.name,
            detail: format!("{} gave no weather: {error}", facts.title),
            retry_after_s: error.retry_after().map(|wait| wait.as_secs().max(1)),
        }
    }
}

impl std::fmt::Display for SourceTrouble {
    fn fmt(&self, out: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        out.write_str(&self.detail)
    }
}

/// One thing wrong with an order, and in which part of it.
#[derive(Debug, Clone, PartialEq)]
pub enum OrderFault {
    /// There is no example of this name.
    Example(Fault),
    /// The device; the path is inside its definition.
    Device(Fault),
    /// The readings, or their layout.
    Weather(WeatherFault),
    /// The options or the place; the path is inside the order.
    Options(Fault),
}

/// A limit on what is computed at once.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum HourLimit {
    /// Hours by the averaged method.
    Averaged,
    /// Hours by the resolved method.
    Resolved,
    /// Hours times samples of the bands.
    Bands,
}

impl HourLimit {
    /// What is counted.
    pub fn what(self) -> &'static str {
        match self {
            HourLimit::Averaged => "hours by the averaged method",
            HourLimit::Resolved => "hours by the resolved method",
            HourLimit::Bands => "hour-samples (hours times samples of the bands)",
        }
    }

    /// The most that are computed at once.
    pub fn most(self) -> usize {
        match self {
            HourLimit::Averaged => super::AVERAGED_HOURS_MAX,
            HourLimit::Resolved => super::RESOLVED_HOURS_MAX,
            HourLimit::Bands => super::BAND_HOUR_SAMPLES_MAX,
        }
    }
}

/// What kind of trouble a weather fault is.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum WeatherTrouble {
    /// The file cannot be read at all.
    Unreadable,
    /// The file is larger than is taken, perhaps only after decompression.
    TooLarge,
    /// It can be read, but what it says cannot be right.
    Wrong,
}

/// Sorts a weather fault by its code.
pub fn trouble(fault: &WeatherFault) -> WeatherTrouble {
    match fault.code {
        "empty_file" | "no_readings" | "no_table" | "not_csv" | "damaged_gzip" | "wrong_encoding" | "open_quote"
        | "line_ends" => WeatherTrouble::Unreadable,
        "too_large" | "compression_bomb" | "too_many_rows" | "row_too_long" | "too_many_cells" => {
            WeatherTrouble::TooLarge
        }
        _ => WeatherTrouble::Wrong,
    }
}
