//! What every source behind a network has in common: questions out, answers in.

use std::fmt::Debug;

use super::coordinates::Coordinates;
use super::facts::Facts;
use super::report::{Nature, Served};
use super::span::HourSpan;
use crate::model::weather::{RawReadings, WeatherFault};

/// What is wanted of a source.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Wanted {
    /// Where.
    pub at: Coordinates,
    /// How high [m above mean sea level], if the asker knows.
    pub elevation_m: Option<f64>,
    /// Which hours.
    pub span: HourSpan,
    /// The present, seconds since 1970.
    pub now_unix_s: i64,
}

/// One question to a source.
#[derive(Debug, Clone, PartialEq)]
pub struct Question {
    /// Which of the source's services, for the log and for finding the answer again.
    pub service: &'static str,
    /// Address.
    pub url: String,
    /// What is asked, in order; no keys.
    pub parameters: Vec<(&'static str, String)>,
    /// A key to send along, by the name of its parameter.
    pub key: Option<(&'static str, String)>,
    /// The place asked for.
    pub at: Coordinates,
    /// Hours the answer is taken for.
    pub span: HourSpan,
    /// What kind of knowledge the answer is; a forecast's hours before its making count as recent days.
    pub nature: Nature,
    /// How long the answer holds, unless the source says otherwise [s]; none holds for good.
    pub holds_s: Option<i64>,
    /// What it counts in the budget.
    pub weight: f64,
}

impl Question {
    /// The question without address and key: the same for the same weather wherever it is asked.
    pub fn name(&self) -> String {
        let parameters = self.parameters.iter().map(|(name, value)| format!("{name}={value}"));
        format!("{} {}", self.service, parameters.collect::<Vec<_>>().join("&"))
    }
}

/// An answer that was understood.
#[derive(Debug, Clone, PartialEq)]
pub struct Parsed {
    /// The place it is for.
    pub served: Served,
    /// Its readings in SI, NaN where missing; rows count from 1.
    pub readings: RawReadings,
}

/// Why an answer was not understood.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum AnswerFault {
    /// Cut short or garbled: asking again may help.
    Garbled(String),
    /// Whole, but not what the source is known to answer: asking again does not help.
    Wrong(String),
}

/// A source behind a network.
pub trait Adapter: Debug + Send + Sync {
    /// What is known of it.
    fn facts(&self) -> &'static Facts;

    /// What to ask, one after another in order of time, for what is wanted.
    ///
    /// # Errors
    /// Hours the source does not know; columns are `endpoint/from` and `endpoint/to`.
    fn questions(&self, wanted: &Wanted) -> Result<Vec<Question>, Vec<WeatherFault>>;

    /// Reads an answer.
    ///
    /// # Errors
    /// Anything but what the source is known to answer.
    fn parse(&self, question: &Question, answer: &[u8]) -> Result<Parsed, AnswerFault>;

    /// Longest gap that has to be interpolated between its later hours [h], where it exceeds the usual.
    fn gap_hours(&self) -> Option<usize> {
        None
    }
}
