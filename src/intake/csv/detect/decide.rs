//! The time settled: the one way to read it, its zone, what it says about the values; and which rows are read.

use super::Hints;
use super::columns::Mapped;
use super::finding::{Question, Role};
use super::long::Long;
use super::survey::{Fit, Survey};
use super::table::Table;
use super::times::TimeColumns;
use super::words::TimeWord;
use super::{meaning, questions, typical_year, zone};
use crate::intake::csv::layout::{Clock, LabelName, RowFilter, TimeLayout};
use crate::model::notes::Assumption;
use crate::model::weather::Quantity;

/// Times that come back in fewer rows than one in 50, or fewer than 4, are left to the reading to judge.
const REPEATED_ROWS: (usize, usize) = (50, 4);

/// What is known so far, and what is asked and said on the way.
pub(super) struct Decide<'a> {
    pub table: &'a Table,
    pub hints: &'a Hints,
    pub references: &'a [String],
    pub words: &'a [Vec<TimeWord>],
    pub time: &'a TimeColumns,
    pub survey: &'a Survey,
    pub questions: Vec<Question>,
    pub said: Vec<Assumption>,
    pub zone_from: Option<String>,
}

impl<'a> Decide<'a> {
    /// The layout of the time, as far as it can be told.
    pub(super) fn time(&mut self) -> TimeLayout {
        let columns = self.time.at.iter().map(|at| self.references[*at].clone()).collect();
        let mut layout = TimeLayout {
            columns,
            zone: self.hints.zone.clone(),
            label: self.hints.label,
            year: self.hints.year,
            ..TimeLayout::utc_or_offset("")
        };
        if self.time.at.is_empty() {
            return layout;
        }
        if let Some(number) = self.time.number {
            layout.format = number.into();
            if number == "spreadsheet_days" {
                self.settle_zone(&mut layout, None);
            } else {
                self.zone_from = Some("an epoch counts in UTC".into());
            }
            return layout;
        }
        if let Some(fit) = self.fit() {
            self.settle(&mut layout, fit);
        }
        layout
    }

    fn settle(&mut self, layout: &mut TimeLayout, fit: &Fit) {
        layout.format.clone_from(&fit.format.text);
        layout.clock = fit
            .format
            .clock
            .or((fit.hour_24 && !fit.hour_0).then_some(Clock::From1To24));
        layout.label = layout.label.or_else(|| self.label(layout.clock));
        if layout.year.is_none() && fit.is_typical_year() {
            layout.year = Some(typical_year(fit.leap_day));
        }
        if fit.offsets == fit.read && fit.read > 0 {
            layout.zone = None;
            self.zone_from = Some("the offset of each time".into());
        } else {
            self.settle_zone(layout, fit.format.zone.clone());
        }
    }

    fn name(&self) -> String {
        self.time
            .at
            .iter()
            .map(|at| self.references[*at].as_str())
            .collect::<Vec<_>>()
            .join(" ")
    }

    /// The one way of reading the times; a question where several are left.
    fn fit(&mut self) -> Option<&'a Fit> {
        let standing: Vec<&'a Fit> = self.survey.standing().collect();
        let steady: Vec<&'a Fit> = standing.iter().copied().filter(|fit| fit.leap.is_none()).collect();
        match (&standing[..], &steady[..]) {
            ([], _) => {
                let best = self
                    .survey
                    .fits
                    .iter()
                    .max_by_key(|fit| fit.read)
                    .filter(|fit| fit.read > 0);
                if best.is_none() {
                    self.questions.push(questions::no_time(self.references));
                }
                best
            }
            ([only], _) => {
                self.say_why(only);
                Some(only)
            }
            (several, [only]) => {
                let row = several.iter().find_map(|fit| fit.leap).unwrap_or(0);
                let value = format!(
                    "{}: only so do the rows follow one another (row {row})",
                    only.format.text
                );
                self.said.push(Assumption::new(
                    "day and month of the readings",
                    value,
                    "the date of every reading",
                ));
                Some(only)
            }
            (several, _) => {
                let (row, cell) = self.first_cell();
                let question = questions::day_or_month(several, &self.name(), row, &cell);
                self.questions.push(question);
                None
            }
        }
    }

    fn say_why(&mut self, only: &Fit) {
        let other = self.survey.fits.iter().find(|fit| fit.refuted.is_some());
        if let Some((row, cell)) = other.and_then(|fit| fit.refuted.as_ref()) {
            let value = format!("{}, decided by row {row} ({cell:?})", only.format.text);
            self.said.push(Assumption::new(
                "day and month of the readings",
                value,
                "the date of every reading",
            ));
        }
    }

    fn first_cell(&self) -> (usize, String) {
        let row = self.table.rows.first();
        row.map_or((0, String::new()), |(line, cells)| {
            let joined: Vec<&str> = self
                .time
                .at
                .iter()
                .filter_map(|at| cells.get(*at))
                .map(String::as_str)
                .collect();
            (*line, joined.join(" "))
        })
    }

    /// Hours counted to 24 end at their stamp, as typical years have it; or the header says which end it is.
    fn label(&mut self, clock: Option<Clock>) -> Option<LabelName> {
        let words: Vec<String> = self
            .time
            .at
            .iter()
            .flat_map(|at| meaning::words(&self.table.names[*at].first))
            .collect();
        let has = |list: &[&str]| words.iter().any(|word| list.contains(&word.as_str()));
        let (label, why) = if has(&["ending", "end", "bis"]) {
            (LabelName::MeanOfPrecedingHour, "as the header says")
        } else if has(&["beginning", "start", "von"]) {
            (LabelName::MeanOfFollowingHour, "as the header says")
        } else if clock == Some(Clock::From1To24) {
            (
                LabelName::MeanOfPrecedingHour,
                "hours counted from 1 to 24 end at their stamp",
            )
        } else {
            return None;
        };
        let value = format!("{}: {why}", crate::model::weather::Label::from(label).name());
        self.said.push(Assumption::new(
            "what the readings' times mean",
            value,
            "means of an hour would shift by an hour",
        ));
        Some(label)
    }

    fn settle_zone(&mut self, layout: &mut TimeLayout, in_cells: Option<String>) {
        if layout.zone.is_some() {
            self.zone_from = Some("the hints".into());
            return;
        }
        let found = in_cells
            .map(|zone| zone::Found {
                zone,
                from: "each time".into(),
            })
            .or_else(|| self.header_zone())
            .or_else(|| zone::in_column(self.table, self.words))
            .or_else(|| zone::in_preamble(self.table));
        match found {
            Some(zone::Found { zone, from }) => {
                layout.zone = Some(zone);
                self.zone_from = Some(from);
            }
            None => {
                let (row, _) = self.first_cell();
                let question = questions::no_zone(&self.name(), row);
                self.questions.push(question);
            }
        }
    }

    fn header_zone(&self) -> Option<zone::Found> {
        let names = self.time.at.iter().map(|at| &self.table.names[*at]);
        let texts = names.flat_map(|name| [&name.first, &name.unit, &name.more]);
        texts.into_iter().find_map(|text| {
            let zone = zone::written(text)?;
            Some(zone::Found {
                zone,
                from: format!("the header {text:?}"),
            })
        })
    }

    /// The rows to be read: as the hints say, or a question where times repeat and a column tells them apart.
    pub(super) fn rows(&mut self, long: Option<&Long>) -> Option<RowFilter> {
        if self.hints.rows.is_some() || long.is_some() {
            return self.hints.rows.clone();
        }
        let repeated = self.survey.standing().next().map_or(0, |fit| fit.repeated);
        if repeated < REPEATED_ROWS.1 || repeated * REPEATED_ROWS.0 < self.survey.rows {
            return None;
        }
        let few = self
            .survey
            .categories
            .iter()
            .filter(|(_, categories)| categories.are_few());
        let best = few.min_by_key(|(_, categories)| categories.repeated)?;
        if best.1.repeated * 5 < repeated {
            let question = questions::which_rows(&self.references[*best.0], best.1, repeated);
            self.questions.push(question);
        }
        None
    }

    /// A sign that was not decided matters only where a column is read that may hold it.
    pub(super) fn decimal_sign(&mut self, mapped: &Mapped) {
        let large = [
            Quantity::StationPressure,
            Quantity::SeaLevelPressure,
            Quantity::Shortwave,
            Quantity::AirTemperature,
            Quantity::RelativeHumidity,
        ];
        let reads = mapped
            .found
            .iter()
            .any(|found| matches!(found.role, Role::Read(q) | Role::Open(q) if large.contains(&q)));
        if let Some((row, cell)) = self.table.signs.unsure.as_ref().filter(|_| reads) {
            self.questions.push(questions::decimal_sign(*row, cell));
        }
    }
}
