//! What is asked, with the answers that fit the file and the line that gives each.

use serde_json::{Value, json};

use super::columns::Choice;
use super::finding::{Candidate, Question};
use super::survey::{Categories, Fit};
use crate::model::weather::{Quantity, Unit};

/// Most answers that are listed.
const MOST_CANDIDATES: usize = 12;

fn words(quantity: Quantity) -> String {
    quantity.name().replace('_', " ")
}

fn column_hint(quantity: Quantity, inside: Value) -> Value {
    json!({"columns": {(quantity.name()): inside}})
}

fn question(code: &'static str, needed: bool, text: String, candidates: Vec<Candidate>) -> Question {
    Question {
        code,
        needed,
        about: None,
        column: None,
        row: None,
        text,
        candidates,
    }
}

/// Nothing in the header speaks of the air temperature.
pub(super) fn missing_temperature(choices: &[Choice]) -> Question {
    let text = "expected a column of the air temperature; found none by its name. A bare letter such as T counts only with a unit.";
    missing(choices, Quantity::AirTemperature, ("air_temperature", "°C"), text)
}

/// Nothing in the header speaks of humidity.
pub(super) fn missing_humidity(choices: &[Choice]) -> Question {
    let text = "expected a column of relative humidity, dew point or wet bulb; found none by its name. Bare letters such as RH count only with a unit.";
    missing(choices, Quantity::RelativeHumidity, ("relative_humidity", "%"), text)
}

fn missing(choices: &[Choice], quantity: Quantity, (name, unit): (&str, &str), text: &str) -> Question {
    let candidates = open(choices).map(|choice| {
        let inside = json!({"column": choice.reference, "unit": unit});
        Candidate::hint(
            format!("{:?} (it holds {})", choice.reference, range(choice)),
            &column_hint(quantity, inside),
        )
    });
    Question {
        about: Some(quantity),
        column: Some(name.into()),
        ..question(
            "missing_column",
            true,
            text.into(),
            candidates.take(MOST_CANDIDATES).collect(),
        )
    }
}

/// Columns of numbers that are not known to be something else.
fn open(choices: &[Choice]) -> impl Iterator<Item = &Choice> {
    let known = |choice: &&Choice| {
        choice
            .meaning
            .as_ref()
            .is_some_and(|meaning| !meaning.bare || meaning.unit.is_some())
    };
    choices
        .iter()
        .filter(|choice| choice.values.count > 0)
        .filter(move |choice| !known(choice))
}

fn range(choice: &Choice) -> String {
    format!("{} to {}", choice.values.low, choice.values.high)
}

/// Several columns may be the same variable.
pub(super) fn several(quantity: Quantity, needed: bool, choices: Vec<&Choice>) -> Question {
    let text = format!(
        "{} columns may be the {}; which one is meant?",
        choices.len(),
        words(quantity)
    );
    let candidates = choices.iter().take(MOST_CANDIDATES).map(|choice| {
        let hint = column_hint(quantity, json!({"column": choice.reference}));
        Candidate::hint(format!("{:?} (it holds {})", choice.reference, range(choice)), &hint)
    });
    Question {
        about: Some(quantity),
        column: Some(quantity.name().into()),
        ..question("ambiguous_column", needed, text, candidates.collect())
    }
}

/// A column without a unit.
pub(super) fn unknown_unit(quantity: Quantity, needed: bool, choice: &Choice) -> Question {
    let strange = choice
        .meaning
        .as_ref()
        .and_then(|meaning| meaning.strange_unit.as_ref());
    let found = strange.map_or("none is written".to_string(), |unit| {
        format!("{unit:?} is written, which is not read here")
    });
    let text = format!(
        "the unit of the {} in {:?} is not known: {found}, and its values ({}) do not decide it.",
        words(quantity),
        choice.reference,
        range(choice)
    );
    let candidates = possible_units(quantity, choice).into_iter().map(|unit| {
        let hint = column_hint(quantity, json!({"column": choice.reference, "unit": unit.symbol()}));
        Candidate::hint(unit.symbol(), &hint)
    });
    Question {
        about: Some(quantity),
        column: Some(choice.reference.clone()),
        ..question("unknown_unit", needed, text, candidates.collect())
    }
}

/// Units in which the values could be read at all.
fn possible_units(quantity: Quantity, choice: &Choice) -> Vec<Unit> {
    let kelvin_fits = choice.values.low > 150.0;
    quantity
        .units()
        .iter()
        .copied()
        .filter(|unit| *unit != Unit::Kelvin || kelvin_fits)
        .collect()
}

/// No zone anywhere.
pub(super) fn no_zone(time: &str, row: usize) -> Question {
    let zone = |meaning: &str, zone: &str| Candidate::hint(meaning, &json!({"zone": zone}));
    Question {
        column: Some(time.into()),
        row: Some(row),
        ..question(
            "no_zone",
            true,
            "the times have no offset, and neither the header nor the lines above it name a zone.".into(),
            vec![
                zone("they are UTC", "UTC"),
                zone(
                    "they are local standard time all year, for example an hour ahead of UTC",
                    "+01:00",
                ),
                zone("they follow the clocks of a place, summer time included", "Europe/Oslo"),
            ],
        )
    }
}

/// Day first or month first.
pub(super) fn day_or_month(standing: &[&Fit], time: &str, row: usize, cell: &str) -> Question {
    let candidates = standing.iter().map(|fit| {
        let day_first = fit.format.is_day_first();
        let meaning = if day_first { "day first" } else { "month first" };
        Candidate::hint(
            format!("{meaning} ({})", fit.format.text),
            &json!({"day_first": day_first}),
        )
    });
    Question {
        column: Some(time.into()),
        row: Some(row),
        ..question(
            "ambiguous_date",
            true,
            format!("{cell:?} can be day first or month first, and no row of the file decides it."),
            candidates.collect(),
        )
    }
}

/// No column holds the time.
pub(super) fn no_time(names: &[String]) -> Question {
    let candidates = names
        .iter()
        .take(MOST_CANDIDATES)
        .map(|name| Candidate::hint(format!("{name:?}"), &json!({"time": [name]})));
    Question {
        column: Some("time".into()),
        ..question(
            "no_time",
            true,
            "expected a column of date and time, or one of each, or year, month, day and hour; found none that can be read.".into(),
            candidates.collect(),
        )
    }
}

/// Several columns hold a date and time.
pub(super) fn several_times(names: &[String]) -> Question {
    let candidates = names
        .iter()
        .take(MOST_CANDIDATES)
        .map(|name| Candidate::hint(format!("{name:?}"), &json!({"time": [name]})));
    Question {
        column: Some("time".into()),
        ..question(
            "ambiguous_column",
            true,
            format!("{} columns hold a date and time; which one is meant?", names.len()),
            candidates.collect(),
        )
    }
}

/// A decimal sign that may be a sign between groups.
pub(super) fn decimal_sign(row: usize, cell: &str) -> Question {
    let sign = |meaning: &str, sign: &str| Candidate::hint(meaning, &json!({"decimal": sign}));
    Question {
        row: Some(row),
        ..question(
            "ambiguous_decimal",
            true,
            format!("{cell:?} can be one number with three decimals or thousands, and no cell decides it."),
            vec![
                sign("the decimal sign is a comma", ","),
                sign("the decimal sign is a point", "."),
            ],
        )
    }
}

/// Several series in one file, told apart by a column.
pub(super) fn which_rows(column: &str, categories: &Categories, repeated: usize) -> Question {
    let candidates = categories
        .names
        .iter()
        .filter(|name| !name.is_empty())
        .take(MOST_CANDIDATES)
        .map(|name| {
            Candidate::hint(
                format!("the rows of {name:?}"),
                &json!({"rows": {"column": column, "equals": name}}),
            )
        });
    Question {
        column: Some(column.into()),
        ..question(
            "several_series",
            true,
            format!("{repeated} times come more than once: the file holds several series, told apart by this column."),
            candidates.collect(),
        )
    }
}
