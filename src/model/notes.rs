//! Small records that travel with every result.

/// A value that was not given and had to be assumed; shown to the user.
#[derive(Debug, Clone, PartialEq)]
pub struct Assumption {
    /// What was assumed, in words a display engineer would use.
    pub what: String,
    /// The value taken, with its unit.
    pub value: String,
    /// What the assumption moves in the answer.
    pub effect: String,
}

impl Assumption {
    /// Builds one from three texts.
    pub fn new(what: impl Into<String>, value: impl Into<String>, effect: impl Into<String>) -> Self {
        Self {
            what: what.into(),
            value: value.into(),
            effect: effect.into(),
        }
    }
}

/// One thing wrong with an input. All faults of an input are reported at once.
#[derive(Debug, Clone, PartialEq)]
pub struct Fault {
    /// Slash path of the field inside its own object, for example `tube/bore_mm`; empty for the whole.
    pub field: String,
    /// Stable code for programs, for example `below_minimum`.
    pub code: &'static str,
    /// Expected, found and remedy, in a sentence.
    pub detail: String,
}

impl Fault {
    /// Builds one from its parts.
    pub fn new(field: impl Into<String>, code: &'static str, detail: impl Into<String>) -> Self {
        Self {
            field: field.into(),
            code,
            detail: detail.into(),
        }
    }
}

/// How urgent a caution is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Severity {
    /// Good to know.
    Info,
    /// Look at it before installing.
    Warning,
    /// Someone can be hurt.
    Danger,
}

/// A hazard sentence that belongs to an answer, not to a manual.
#[derive(Debug, Clone, PartialEq)]
pub struct Caution {
    /// Stable code for programs, for example `flammable_fluid`.
    pub code: &'static str,
    /// How urgent it is.
    pub severity: Severity,
    /// A plain sentence that defers to local codes and licensed practice.
    pub text: String,
}
