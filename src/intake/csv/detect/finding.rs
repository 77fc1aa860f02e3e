//! What was found out about a file, and what has to be asked.

use crate::intake::csv::layout::Layout;
use crate::model::notes::Assumption;
use crate::model::weather::{Quantity, Unit, WeatherFault};

/// What was found out about a file.
#[derive(Debug, Clone, PartialEq)]
pub struct Detection {
    /// True: gzipped.
    pub gzip: bool,
    /// Line of the column names, from 1; none where columns have no names.
    pub header_row: Option<usize>,
    /// Line of the first reading, from 1.
    pub first_row: usize,
    /// Every column of the file, in its order.
    pub columns: Vec<ColumnFinding>,
    /// Where the zone was found, in words; none where it was not.
    pub zone_from: Option<String>,
    /// The layout, complete but for what is asked.
    pub layout: Layout,
    /// What has to be answered, and what might be.
    pub questions: Vec<Question>,
    /// What was taken without being asked, in words.
    pub said: Vec<Assumption>,
}

/// One column of the file.
#[derive(Debug, Clone, PartialEq)]
pub struct ColumnFinding {
    /// As the header has it; empty where there is none.
    pub name: String,
    /// What the layout calls it: its name, or its place.
    pub reference: String,
    /// What it is taken for.
    pub role: Role,
    /// Its unit, where it is known.
    pub unit: Option<Unit>,
    /// How sure that is.
    pub confidence: Confidence,
    /// Why, in words.
    pub why: String,
}

/// What a column is taken for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Role {
    /// The time, or a part of it.
    Time,
    /// A variable that is read.
    Read(Quantity),
    /// A variable that is not read: asked for, or left out.
    Open(Quantity),
    /// Decides which rows are read, or names what a row holds.
    Selects,
    /// Nothing that is read.
    Other,
}

/// How sure a finding is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Confidence {
    /// Not decided.
    Low,
    /// Follows from the values, or from a custom of the trade; said in the answer.
    Medium,
    /// Written in the file, or in the hints.
    High,
}

/// One thing that cannot be told from the file.
#[derive(Debug, Clone, PartialEq)]
pub struct Question {
    /// Stable code, for example `no_zone`.
    pub code: &'static str,
    /// True: without an answer the file is not read. False: the variable is left out.
    pub needed: bool,
    /// The variable it is about.
    pub about: Option<Quantity>,
    /// The column it is about.
    pub column: Option<String>,
    /// A row that shows it.
    pub row: Option<usize>,
    /// The question in a sentence.
    pub text: String,
    /// The answers that fit the file.
    pub candidates: Vec<Candidate>,
}

/// One answer to a question.
#[derive(Debug, Clone, PartialEq)]
pub struct Candidate {
    /// What it means, in words.
    pub meaning: String,
    /// The member of `weather` to send, as JSON: `"hints": {"zone": "UTC"}`.
    pub send: String,
}

impl ColumnFinding {
    /// A column of the documented form.
    pub(super) fn own(name: &str, layout: &Layout) -> Self {
        let read = layout
            .columns
            .mapped()
            .into_iter()
            .find(|(_, mapping)| mapping.column == name);
        Self {
            name: name.into(),
            reference: name.into(),
            role: read.as_ref().map_or(Role::Time, |(quantity, _)| Role::Read(*quantity)),
            unit: read.and_then(|(_, mapping)| Unit::parse(&mapping.unit)),
            confidence: Confidence::High,
            why: "a name of the documented form".into(),
        }
    }
}

impl Candidate {
    /// An answer that is given by a hint: `hint` is the inside of the object, as JSON.
    pub(super) fn hint(meaning: impl Into<String>, hint: &serde_json::Value) -> Self {
        Self {
            meaning: meaning.into(),
            send: format!("\"hints\": {hint}"),
        }
    }
}

impl Question {
    /// The question as a fault, with its candidates and what to send back.
    fn fault(&self) -> WeatherFault {
        let answer = |candidate: &Candidate| format!("{} ({})", candidate.send, candidate.meaning);
        let answers: Vec<String> = self.candidates.iter().map(answer).collect();
        let send = if answers.is_empty() { "" } else { " Send " };
        WeatherFault {
            row: self.row,
            column: self.column.clone(),
            code: self.code,
            detail: format!("{}{send}{}", self.text, answers.join(", or ")),
        }
    }
}

impl Detection {
    /// The layout, if nothing that is needed is left to ask.
    ///
    /// # Errors
    /// Every open question with its candidates and the line to send back.
    pub fn settled(&self) -> Result<&Layout, Vec<WeatherFault>> {
        let open: Vec<WeatherFault> = self
            .questions
            .iter()
            .filter(|q| q.needed)
            .map(Question::fault)
            .collect();
        if open.is_empty() { Ok(&self.layout) } else { Err(open) }
    }
}
