//! Files with one value a row: a column names what was read, and the value stands beside it.

use super::cells::Look;
use super::columns::Choice;
use super::meaning::{is_unit, meaning, words};
use super::survey::{Survey, Values};
use super::table::{Name, Table};
use crate::intake::csv::layout::LongForm;
use crate::model::weather::Quantity;

/// The names in a file of one value a row.
pub(super) struct Long {
    pub form: LongForm,
    pub name_at: usize,
    pub value_at: usize,
    /// Each name, as a column of its own.
    pub choices: Vec<Choice>,
}

/// What the column of the values is called: common practice, no source.
const VALUE_WORDS: [&str; 12] = [
    "value", "values", "val", "wert", "messwert", "valeur", "valor", "verdi", "waarde", "valore", "reading", "state",
];

/// `None` unless a column names an air temperature among its words, with one column of numbers for them.
pub(super) fn find(table: &Table, references: &[String], time_at: &[usize], survey: &Survey) -> Option<Long> {
    let names_temperature = |at: &usize| {
        let names = &survey.categories[at].names;
        names
            .iter()
            .filter_map(|name| called(name, ""))
            .any(|m| m == Quantity::AirTemperature)
    };
    let few = survey
        .categories
        .iter()
        .filter(|(_, categories)| categories.are_few())
        .map(|(at, _)| *at);
    let name_at = few.filter(|at| !time_at.contains(at)).find(names_temperature)?;
    let value_at = value_column(table, time_at, name_at)?;
    let unit_at = (0..table.names.len()).find(|at| *at != name_at && is_unit_column(table, *at));
    let names = survey.categories[&name_at].names.iter().filter(|name| !name.is_empty());
    let choices = names
        .enumerate()
        .map(|(at, name)| {
            let full = Name {
                first: name.clone(),
                more: String::new(),
                unit: unit_beside(table, name_at, unit_at, name),
            };
            Choice::new(at, name.clone(), &full, values(table, name_at, value_at, name))
        })
        .collect();
    let form = LongForm {
        name_column: references[name_at].clone(),
        value_column: references[value_at].clone(),
        hold_hours: None,
    };
    Some(Long {
        form,
        name_at,
        value_at,
        choices,
    })
}

fn called(name: &str, unit: &str) -> Option<Quantity> {
    meaning(&Name {
        first: name.into(),
        more: String::new(),
        unit: unit.into(),
    })
    .map(|meaning| meaning.quantity)
}

/// The column called so, or the only one of numbers.
fn value_column(table: &Table, time_at: &[usize], name_at: usize) -> Option<usize> {
    let numeric = |at: &usize| {
        let cells = || {
            table
                .rows
                .iter()
                .take(60)
                .filter_map(|(_, row)| row.get(*at))
                .filter(|cell| !cell.is_empty())
        };
        cells().count() > 0 && cells().filter(|cell| Look::of(cell) == Look::Number).count() * 10 >= cells().count() * 9
    };
    let free: Vec<usize> = (0..table.names.len())
        .filter(|at| !time_at.contains(at) && *at != name_at)
        .filter(numeric)
        .collect();
    let called = |at: &&usize| {
        words(&table.names[**at].first)
            .iter()
            .any(|word| VALUE_WORDS.contains(&word.as_str()))
    };
    match (free.iter().find(called), &free[..]) {
        (Some(named), _) => Some(*named),
        (None, [only]) => Some(*only),
        _ => None,
    }
}

fn is_unit_column(table: &Table, at: usize) -> bool {
    let mut cells = table
        .rows
        .iter()
        .take(60)
        .filter_map(|(_, row)| row.get(at))
        .filter(|cell| !cell.is_empty())
        .peekable();
    cells.peek().is_some() && cells.all(|cell| is_unit(cell))
}

fn unit_beside(table: &Table, name_at: usize, unit_at: Option<usize>, name: &str) -> String {
    let row = table
        .rows
        .iter()
        .find(|(_, row)| row.get(name_at).is_some_and(|cell| cell == name));
    unit_at.and_then(|at| row?.1.get(at).cloned()).unwrap_or_default()
}

/// The numbers beside one name, in the sample.
fn values(table: &Table, name_at: usize, value_at: usize, name: &str) -> Values {
    let mut values = Values::default();
    let sign = table.signs.decimal as u8;
    let thousands = table.signs.thousands.map(|sign| sign as u8);
    for (_, row) in table
        .rows
        .iter()
        .filter(|(_, row)| row.get(name_at).is_some_and(|cell| cell == name))
    {
        values.add(
            row.get(value_at).map(|cell| cell.as_bytes()).unwrap_or_default(),
            sign,
            thousands,
        );
    }
    values
}
