//! All findings put together.

use super::columns::{self, Choice, Found, Mapped};
use super::decide::Decide;
use super::finding::{ColumnFinding, Confidence, Detection, Question, Role};
use super::long::{self, Long};
use super::meaning::time_words;
use super::sample::Sample;
use super::survey::{Ask, Survey};
use super::table::Table;
use super::times::{self, Names, TimeColumns};
use super::words::TimeWord;
use super::{Hints, cells};
use crate::intake::csv::layout::{Columns, Dialect, Layout, RowFilter, TimeLayout};
use crate::intake::csv::limits::Limits;
use crate::model::notes::Assumption;
use crate::model::weather::WeatherFault;

/// Columns of words that are looked at as categories, at most.
const MOST_TEXTS: usize = 12;

/// The detection of a table.
pub(super) fn detection(
    bytes: &[u8],
    sample: &Sample,
    table: &Table,
    hints: &Hints,
    limits: &Limits,
) -> Result<Detection, Vec<WeatherFault>> {
    let words: Vec<Vec<TimeWord>> = table.names.iter().map(time_words).collect();
    let references = references(table);
    let names = Names {
        table,
        words: &words,
        references: &references,
    };
    let mut questions = Vec::new();
    let time = times::find(&names, hints).unwrap_or_else(|question| {
        questions.push(*question);
        TimeColumns::default()
    });
    let dialect = table.dialect(&sample.encoding);
    let mut survey = survey(bytes, &dialect, table, &time, hints, limits).map_err(|fault| vec![fault])?;
    let long = long::find(table, &references, &time.at, &survey).filter(|_| !has_temperature(table));
    let wide = wide_choices(table, &references, &words, &time, &mut survey, hints);
    let mapped = columns::map(long.as_ref().map_or(&wide, |long| &long.choices), hints)?;
    let mut decide = Decide {
        table,
        hints,
        references: &references,
        words: &words,
        time: &time,
        survey: &survey,
        questions,
        said: said_of(sample, table),
        zone_from: None,
    };
    let layout = Layout {
        dialect: dialect.clone(),
        time: decide.time(),
        rows: decide.rows(long.as_ref()),
        columns: mapped.columns.clone(),
        missing: hints.missing.clone(),
        long_form: long.as_ref().map(|long| long.form.clone()),
    };
    decide.decimal_sign(&mapped);
    let columns = findings(
        table,
        &references,
        &time,
        layout.rows.as_ref(),
        long.as_ref(),
        &mapped.found,
    );
    Ok(told(decide, sample, mapped, columns, layout))
}

/// Everything asked and said, in the order in which it is read.
fn told(decide: Decide, sample: &Sample, mapped: Mapped, columns: Vec<ColumnFinding>, layout: Layout) -> Detection {
    let questions = [decide.questions, mapped.questions].concat();
    let mut said = vec![summary(&layout.time, decide.zone_from.as_deref(), &layout.columns)];
    said.extend(decide.said);
    said.extend(mapped.said);
    said.extend(questions.iter().filter(|question| !question.needed).map(left_out));
    Detection {
        gzip: sample.gzip,
        header_row: decide.table.header.map(|at| at + 1),
        first_row: decide.survey.first_row.max(1),
        columns,
        zone_from: decide.zone_from,
        layout,
        questions,
        said,
    }
}

fn survey(
    bytes: &[u8],
    dialect: &Dialect,
    table: &Table,
    time: &TimeColumns,
    hints: &Hints,
    limits: &Limits,
) -> Result<Survey, WeatherFault> {
    let ask = Ask {
        dialect,
        time_at: &time.at,
        formats: wanted_formats(time, hints),
        values: &others(table, time),
        texts: &texts(table, time),
    };
    Survey::run(bytes, ask, limits)
}

/// Every column that does not hold the time.
fn others(table: &Table, time: &TimeColumns) -> Vec<usize> {
    (0..table.names.len()).filter(|at| !time.at.contains(at)).collect()
}

/// The layout in a sentence.
fn summary(time: &TimeLayout, zone_from: Option<&str>, columns: &Columns) -> Assumption {
    let zone = match (&time.zone, zone_from) {
        (Some(zone), Some(from)) => format!("zone {zone} (from {from})"),
        (None, Some(from)) => format!("zone from {from}"),
        _ => "zone not known".into(),
    };
    let read = columns.mapped().into_iter().map(|(quantity, mapping)| {
        format!(
            "{} from {:?} in {}",
            quantity.name().replace('_', " "),
            mapping.column,
            mapping.unit
        )
    });
    let read: Vec<String> = read.collect();
    let value = format!(
        "time from {:?} as {}, {zone}; {}",
        time.columns.join(" "),
        time.format,
        read.join(", ")
    );
    Assumption::new(
        "form of the weather file, found by looking",
        value,
        "every figure; send a layout to fix it",
    )
}

/// A variable that is not needed and was not read, with the way to have it read.
fn left_out(question: &Question) -> Assumption {
    let what = format!(
        "{}, not read",
        question
            .about
            .map_or("column".to_string(), |q| q.name().replace('_', " "))
    );
    let answers: Vec<&str> = question
        .candidates
        .iter()
        .take(3)
        .map(|candidate| candidate.send.as_str())
        .collect();
    let value = format!("{} To read it, send {}", question.text, answers.join(" or "));
    Assumption::new(what, value, "only what depends on it")
}

/// What a layout calls each column: its name, or its place where the name is missing or repeated.
fn references(table: &Table) -> Vec<String> {
    let unique = |name: &str| table.names.iter().filter(|other| other.first == name).count() == 1;
    let reference = |(at, name): (usize, &super::table::Name)| {
        let usable =
            !name.first.is_empty() && unique(&name.first) && !name.first.starts_with('#') && name.first.len() <= 200;
        if usable && table.header.is_some() {
            name.first.clone()
        } else {
            format!("#{}", at + 1)
        }
    };
    table.names.iter().enumerate().map(reference).collect()
}

fn wanted_formats(time: &TimeColumns, hints: &Hints) -> Vec<super::formats::Format> {
    let both = |format: &super::formats::Format| format.text.contains("%d") && format.text.contains("%m");
    let wanted = |format: &&super::formats::Format| {
        hints.day_first.is_none_or(|day_first| {
            !both(format) || format.text.starts_with("%Y") || format.is_day_first() == day_first
        })
    };
    time.formats.iter().filter(wanted).cloned().collect()
}

/// Columns whose words may tell series apart: words, or numbers of a station or sensor.
fn texts(table: &Table, time: &TimeColumns) -> Vec<usize> {
    let identifies = [
        "id", "station", "site", "sensor", "device", "location", "node", "channel", "logger", "stations",
    ];
    let is_text = |at: &usize| {
        let cells = || {
            table
                .rows
                .iter()
                .take(60)
                .filter_map(|(_, row)| row.get(*at))
                .filter(|cell| !cell.is_empty())
        };
        let words = cells()
            .filter(|cell| cells::Look::of(cell) == cells::Look::Text)
            .count()
            * 2
            > cells().count();
        words
            || super::meaning::words(&table.names[*at].first)
                .iter()
                .any(|word| identifies.contains(&word.as_str()))
    };
    (0..table.names.len())
        .filter(|at| !time.at.contains(at))
        .filter(is_text)
        .take(MOST_TEXTS)
        .collect()
}

fn has_temperature(table: &Table) -> bool {
    let meanings = table.names.iter().filter_map(super::meaning::meaning);
    meanings
        .into_iter()
        .any(|m| m.quantity == crate::model::weather::Quantity::AirTemperature && (!m.bare || m.unit.is_some()))
}

fn wide_choices(
    table: &Table,
    references: &[String],
    words: &[Vec<TimeWord>],
    time: &TimeColumns,
    survey: &mut Survey,
    hints: &Hints,
) -> Vec<Choice> {
    let choice = |at: usize| {
        let ignored = hints.ignore.contains(&references[at]);
        let apart = time.at.contains(&at)
            || ignored
            || words[at]
                .iter()
                .any(|word| !matches!(word, TimeWord::Minute | TimeWord::Stamp));
        let name = if apart {
            super::table::Name::default()
        } else {
            table.names[at].clone()
        };
        let values = survey.values.remove(&at).filter(|_| !apart).unwrap_or_default();
        Choice::new(at, references[at].clone(), &name, values)
    };
    (0..table.names.len()).map(choice).collect()
}

fn said_of(sample: &Sample, table: &Table) -> Vec<Assumption> {
    let mut said = Vec::new();
    if sample.fallback && !sample.lines.iter().all(String::is_empty) {
        let value = "windows-1252: the file is not UTF-8, and nothing in it says what it is";
        said.push(Assumption::new(
            "encoding of the weather file",
            value,
            "signs such as ° and accents in the header",
        ));
    }
    if let Some(sign) = table.signs.thousands {
        let value = format!("{sign:?} between groups of three digits is read over");
        said.push(Assumption::new(
            "numbers of the weather file",
            value,
            "every number that has it",
        ));
    }
    said
}

fn findings(
    table: &Table,
    references: &[String],
    time: &TimeColumns,
    rows: Option<&RowFilter>,
    long: Option<&Long>,
    found: &[Found],
) -> Vec<ColumnFinding> {
    let of_column = |at: usize| {
        let reference = &references[at];
        let selects = rows.is_some_and(|rows| rows.column == *reference)
            || long.is_some_and(|long| long.name_at == at || long.value_at == at);
        let read = found.iter().rev().find(|found| long.is_none() && found.at == at);
        match read {
            _ if time.at.contains(&at) => finding(table, at, reference, Role::Time, "holds the time"),
            _ if selects => finding(table, at, reference, Role::Selects, "tells which reading a row is"),
            Some(found) => ColumnFinding {
                unit: found.unit,
                confidence: found.confidence,
                ..finding(table, at, reference, found.role, &found.why)
            },
            None => finding(table, at, reference, Role::Other, "not read"),
        }
    };
    let named = long.into_iter().flat_map(|long| &long.choices).map(|choice| {
        let read = found.iter().rev().find(|found| found.at == choice.at);
        ColumnFinding {
            name: choice.reference.clone(),
            reference: choice.reference.clone(),
            role: read.map_or(Role::Other, |found| found.role),
            unit: read.and_then(|found| found.unit),
            confidence: read.map_or(Confidence::High, |found| found.confidence),
            why: read.map_or("not read".into(), |found| found.why.clone()),
        }
    });
    (0..table.names.len()).map(of_column).chain(named).collect()
}

fn finding(table: &Table, at: usize, reference: &str, role: Role, why: &str) -> ColumnFinding {
    ColumnFinding {
        name: table.names[at].first.clone(),
        reference: reference.into(),
        role,
        unit: None,
        confidence: Confidence::High,
        why: why.into(),
    }
}
