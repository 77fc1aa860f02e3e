//! Collects every fault of a definition, so that all are told at once.

use super::bounds::Bound;
use crate::model::notes::Fault;

/// The faults found so far.
#[derive(Debug, Default)]
pub(super) struct Faults(pub(super) Vec<Fault>);

impl Faults {
    /// Adds a fault.
    pub(super) fn add(&mut self, field: &str, code: &'static str, detail: impl Into<String>) {
        self.0.push(Fault::new(field, code, detail));
    }

    /// A number that must be there.
    pub(super) fn number(&mut self, bound: Bound, value: f64) {
        self.number_at(bound.field, bound, value);
    }

    /// A number that may be missing.
    pub(super) fn optional(&mut self, bound: Bound, value: Option<f64>) {
        if let Some(value) = value {
            self.number(bound, value);
        }
    }

    /// A number at a path of its own, for lists.
    pub(super) fn number_at(&mut self, field: &str, bound: Bound, value: f64) {
        let Bound {
            unit, minimum, maximum, ..
        } = bound;
        let expected = format!("expected {minimum} to {maximum}{}", spaced(unit));
        if !value.is_finite() {
            self.add(
                field,
                "not_finite",
                format!("{expected}, found {value}; give a finite number"),
            );
        } else if value < minimum {
            let detail = format!("{expected}, found {value}; give at least {minimum}, and check the unit");
            self.add(field, "below_minimum", detail);
        } else if value > maximum {
            let detail = format!("{expected}, found {value}; give at most {maximum}, and check the unit");
            self.add(field, "above_maximum", detail);
        }
    }

    /// Whether nothing at or under these paths is faulty so far, so that checks across them make sense.
    pub(super) fn clean(&self, paths: &[&str]) -> bool {
        let under = |field: &str, path: &str| {
            field
                .strip_prefix(path)
                .is_some_and(|rest| rest.is_empty() || rest.starts_with('/'))
        };
        !self
            .0
            .iter()
            .any(|fault| paths.iter().any(|path| under(&fault.field, path)))
    }
}

fn spaced(unit: &str) -> String {
    if unit.is_empty() {
        String::new()
    } else {
        format!(" {unit}")
    }
}

/// The known name nearest to a wrong one, if any is near.
pub(super) fn nearest<'a>(wrong: &str, known: impl IntoIterator<Item = &'a str>) -> Option<&'a str> {
    let wrong = wrong.to_lowercase();
    let scored = known
        .into_iter()
        .map(|name| (strsim::jaro_winkler(&wrong, &name.to_lowercase()), name));
    scored
        .filter(|(score, _)| *score > 0.75)
        .max_by(|a, b| a.0.total_cmp(&b.0))
        .map(|(_, name)| name)
}
