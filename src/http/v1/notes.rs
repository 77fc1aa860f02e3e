//! Assumptions and cautions: data, not prose in a manual.

use serde::Serialize;
use utoipa::ToSchema;

use crate::service::records;

/// A value that was not given and had to be assumed.
#[derive(Debug, Clone, Serialize, ToSchema)]
pub struct Assumption {
    /// What was assumed.
    pub what: String,
    /// The value taken, with its unit.
    pub value: String,
    /// What it moves in the answer.
    pub effect: String,
}

/// A hazard to look at; it defers to local codes and licensed practice.
#[derive(Debug, Clone, Serialize, ToSchema)]
pub struct Caution {
    /// Stable code for programs.
    #[schema(examples("flammable_fluid"))]
    pub code: String,
    /// How urgent it is.
    pub severity: Severity,
    /// A plain sentence.
    pub text: String,
}

/// How urgent a caution is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum Severity {
    /// Good to know.
    Info,
    /// Look at it before installing.
    Warning,
    /// Someone can be hurt.
    Danger,
}

impl From<records::Severity> for Severity {
    fn from(record: records::Severity) -> Self {
        match record {
            records::Severity::Info => Severity::Info,
            records::Severity::Warning => Severity::Warning,
            records::Severity::Danger => Severity::Danger,
        }
    }
}

impl From<records::Assumption> for Assumption {
    fn from(record: records::Assumption) -> Self {
        Self {
            what: record.what,
            value: record.value,
            effect: record.effect,
        }
    }
}

impl From<records::Caution> for Caution {
    fn from(record: records::Caution) -> Self {
        Self {
            code: record.code.to_owned(),
            severity: record.severity.into(),
            text: record.text,
        }
    }
}

impl From<&records::Hazard> for Caution {
    fn from(record: &records::Hazard) -> Self {
        record.caution().into()
    }
}
