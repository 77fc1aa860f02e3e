//! Which column is which variable, and in which unit.

use super::finding::{Confidence, Question, Role};
use super::meaning::{Meaning, meaning};
use super::questions;
use super::survey::Values;
use super::table::Name;
use super::units::{from_values, missing_marks};
use super::{Hints, QUANTITIES};
use crate::intake::csv::layout::{ColumnMapping, Columns};
use crate::model::notes::Assumption;
use crate::model::weather::{Quantity, Unit, WeatherFault};

/// A column that may be a variable, or, where a column holds names, one of these names.
pub(super) struct Choice {
    /// Number among the choices.
    pub at: usize,
    /// What the layout calls it.
    pub reference: String,
    pub meaning: Option<Meaning>,
    pub values: Values,
}

impl Choice {
    pub(super) fn new(at: usize, reference: String, name: &Name, values: Values) -> Self {
        Self {
            at,
            reference,
            meaning: meaning(name),
            values,
        }
    }

    fn quantity(&self) -> Option<Quantity> {
        self.meaning.as_ref().map(|meaning| meaning.quantity)
    }

    /// Words that tell one sensor from another; that it is a mean of the hour does not.
    fn tag(&self) -> Vec<&str> {
        let plain = [
            "air",
            "hourly",
            "avg",
            "average",
            "mean",
            "mittel",
            "mittelwert",
            "luft",
            "aussen",
            "of",
            "in",
            "de",
            "l",
            "the",
            "at",
            "relative",
        ];
        let words = self.meaning.iter().flat_map(|meaning| &meaning.tag).map(String::as_str);
        words.filter(|word| !plain.contains(word)).collect()
    }
}

/// What came of the columns.
#[derive(Default)]
pub(super) struct Mapped {
    pub columns: Columns,
    pub questions: Vec<Question>,
    pub said: Vec<Assumption>,
    pub found: Vec<Found>,
}

/// What one choice was taken for.
pub(super) struct Found {
    pub at: usize,
    pub role: Role,
    pub unit: Option<Unit>,
    pub confidence: Confidence,
    pub why: String,
}

/// Maps every variable that can be told, and asks for those that cannot.
pub(super) fn map(choices: &[Choice], hints: &Hints) -> Result<Mapped, Vec<WeatherFault>> {
    let mut mapper = Mapper {
        choices,
        hints,
        temperature: None,
        mapped: Mapped::default(),
    };
    let faults: Vec<WeatherFault> = QUANTITIES
        .into_iter()
        .filter_map(|quantity| mapper.hinted_fault(quantity))
        .collect();
    if !faults.is_empty() {
        return Err(faults);
    }
    for quantity in QUANTITIES {
        mapper.map(quantity);
    }
    mapper.one_pressure();
    mapper.ask_for_humidity();
    Ok(mapper.mapped)
}

struct Mapper<'a> {
    choices: &'a [Choice],
    hints: &'a Hints,
    temperature: Option<(usize, Option<Unit>)>,
    mapped: Mapped,
}

impl Mapper<'_> {
    fn find(&self, name: &str) -> Option<&Choice> {
        let by_place = name.strip_prefix('#').and_then(|place| place.parse::<usize>().ok());
        let named = self.choices.iter().find(|choice| choice.reference == name.trim());
        named.or_else(|| self.choices.iter().find(|choice| by_place == Some(choice.at + 1)))
    }

    fn hinted_fault(&self, quantity: Quantity) -> Option<WeatherFault> {
        let name = self.hints.columns.of(quantity)?.column.as_ref()?;
        if self.find(name).is_some() {
            return None;
        }
        let known: Vec<String> = self
            .choices
            .iter()
            .take(30)
            .map(|choice| format!("{:?}", choice.reference))
            .collect();
        let detail = format!("the file has no such column; it has {}", known.join(", "));
        Some(WeatherFault::column(
            format!("hints/columns/{}/column", quantity.name()),
            "missing_column",
            detail,
        ))
    }

    fn map(&mut self, quantity: Quantity) {
        let hinted = self
            .hints
            .columns
            .of(quantity)
            .and_then(|hint| hint.column.as_deref())
            .and_then(|name| self.find(name));
        if let Some(choice) = hinted {
            let at = choice.at;
            return self.settle(quantity, at, "as the hints say", Confidence::High);
        }
        let named: Vec<usize> = self.named(quantity);
        match named[..] {
            [] => {
                if quantity == Quantity::AirTemperature {
                    let question = questions::missing_temperature(self.choices);
                    self.mapped.questions.push(question);
                }
            }
            [only] => self.settle(quantity, only, "by its name", Confidence::High),
            _ => self.choose(quantity, &named),
        }
    }

    /// Choices whose name speaks of this variable; bare letters only with a unit.
    fn named(&self, quantity: Quantity) -> Vec<usize> {
        let speaks = |choice: &&Choice| {
            let counts = |meaning: &Meaning| !meaning.bare || meaning.unit.is_some();
            choice.quantity() == Some(quantity)
                && choice.meaning.as_ref().is_some_and(counts)
                && !self.taken(choice.at)
                && (choice.values.count > 0 || !choice.values.marks.is_empty())
        };
        self.choices.iter().filter(speaks).map(|choice| choice.at).collect()
    }

    fn taken(&self, at: usize) -> bool {
        let hinted = |quantity: Quantity| self.hints.columns.of(quantity).and_then(|hint| hint.column.as_deref());
        let given = QUANTITIES
            .into_iter()
            .filter_map(hinted)
            .filter_map(|name| self.find(name))
            .any(|choice| choice.at == at);
        given
            || self
                .mapped
                .found
                .iter()
                .any(|found| found.at == at && matches!(found.role, Role::Read(_)))
    }

    /// Several columns of one variable: the one that belongs to the temperature, or one reading in two units.
    fn choose(&mut self, quantity: Quantity, named: &[usize]) {
        if let Some((temperature, _)) = self.temperature {
            let tag = self.choices[temperature].tag();
            let same: Vec<usize> = named
                .iter()
                .copied()
                .filter(|at| self.choices[*at].tag() == tag)
                .collect();
            if let [only] = same[..] {
                let with = format!("it has the same mark as {:?}", self.choices[temperature].reference);
                self.say(quantity, only, &with);
                return self.settle(quantity, only, &with, Confidence::Medium);
            }
        }
        if let Some(first) = self.same_reading(named) {
            return self.settle(
                quantity,
                first,
                "the same reading stands in several units; the first is taken",
                Confidence::High,
            );
        }
        let of_temperature = self
            .mapped
            .questions
            .iter()
            .any(|question| question.about == Some(Quantity::AirTemperature));
        for at in named {
            self.note(*at, Role::Open(quantity), None, Confidence::Low, "one of several");
        }
        // Once the temperature is chosen, the humidity beside it may follow by itself.
        let needed = quantity == Quantity::AirTemperature;
        if needed || !(of_temperature && is_humidity(quantity)) {
            let question = questions::several(quantity, needed, named.iter().map(|at| &self.choices[*at]).collect());
            self.mapped.questions.push(question);
        }
    }

    fn same_reading(&self, named: &[usize]) -> Option<usize> {
        let unit = |at: &usize| self.choices[*at].meaning.as_ref().and_then(|meaning| meaning.unit);
        let units: Vec<Unit> = named.iter().filter_map(unit).collect();
        let distinct = units
            .iter()
            .enumerate()
            .all(|(place, unit)| !units[..place].contains(unit));
        let tags = named
            .windows(2)
            .all(|pair| self.choices[pair[0]].tag() == self.choices[pair[1]].tag());
        (units.len() == named.len() && distinct && tags).then(|| named[0])
    }

    /// Takes a column for a variable, if its unit is known.
    fn settle(&mut self, quantity: Quantity, at: usize, why: &str, confidence: Confidence) {
        let unit = self.unit(quantity, at);
        if quantity == Quantity::AirTemperature {
            self.temperature = Some((at, unit.as_ref().map(|(unit, _, _)| *unit)));
        }
        let Some((unit, unit_why, unit_confidence)) = unit else {
            self.note(at, Role::Open(quantity), None, Confidence::Low, "its unit is not known");
            let needed = quantity == Quantity::AirTemperature;
            self.mapped
                .questions
                .push(questions::unknown_unit(quantity, needed, &self.choices[at]));
            return;
        };
        let choice = &self.choices[at];
        let marks = missing_marks(quantity, unit, &choice.values);
        let mut mapping = ColumnMapping::new(choice.reference.clone(), unit.symbol());
        mapping.missing = marks.iter().map(|(mark, _)| mark.clone()).collect();
        if unit_confidence < Confidence::High {
            let value = format!("{} for {:?}: {unit_why}", unit.symbol(), choice.reference);
            let what = format!("unit of {}", quantity.name().replace('_', " "));
            self.mapped
                .said
                .push(Assumption::new(what, value, "every figure, if it is another unit"));
        }
        self.mapped.said.extend(told(quantity, choice, &marks));
        *self.mapped.columns.slot(quantity) = Some(mapping);
        self.note(
            at,
            Role::Read(quantity),
            Some(unit),
            confidence.min(unit_confidence),
            &format!("{why}; unit {unit_why}"),
        );
    }

    /// Unit of a column, why, and how sure.
    fn unit(&self, quantity: Quantity, at: usize) -> Option<(Unit, String, Confidence)> {
        let choice = &self.choices[at];
        let hinted = self
            .hints
            .columns
            .of(quantity)
            .and_then(|hint| hint.unit.as_deref())
            .and_then(Unit::parse);
        if let Some(unit) = hinted {
            return Some((unit, "as the hints say".into(), Confidence::High));
        }
        let meaning = choice.meaning.as_ref().filter(|meaning| meaning.quantity == quantity);
        if let Some(unit) = meaning.and_then(|meaning| meaning.unit) {
            return Some((unit, "as the header says".into(), Confidence::High));
        }
        if meaning.is_some_and(|meaning| meaning.strange_unit.is_some()) {
            return None;
        }
        if let Some(unit) = from_values(quantity, &choice.values) {
            let range = format!(
                "the only unit in which {} to {} can be read",
                choice.values.low, choice.values.high
            );
            return Some((unit, range, Confidence::Medium));
        }
        let like_temperature = matches!(quantity, Quantity::DewPoint | Quantity::WetBulb);
        let (_, unit) = self.temperature.filter(|_| like_temperature)?;
        Some((
            unit?,
            "as the air temperature, which has one unit with it".into(),
            Confidence::Medium,
        ))
    }

    /// Station pressure is taken where both are there: it needs no reduction.
    fn one_pressure(&mut self) {
        if self.mapped.columns.station_pressure.is_some() && self.mapped.columns.sea_level_pressure.take().is_some() {
            let role = Role::Read(Quantity::SeaLevelPressure);
            for found in self.mapped.found.iter_mut().filter(|found| found.role == role) {
                found.role = Role::Open(Quantity::SeaLevelPressure);
                found.why = "left out: the pressure of the station is there".into();
            }
        }
    }

    fn ask_for_humidity(&mut self) {
        let columns = &self.mapped.columns;
        if columns.relative_humidity.is_some() || columns.dew_point.is_some() || columns.wet_bulb.is_some() {
            return;
        }
        let mut asked = self
            .mapped
            .questions
            .iter_mut()
            .filter(|question| question.about.is_some_and(is_humidity))
            .peekable();
        if asked.peek().is_some() {
            asked.for_each(|question| question.needed = true);
            return;
        }
        let waits = self
            .mapped
            .found
            .iter()
            .any(|found| matches!(found.role, Role::Open(quantity) if is_humidity(quantity)));
        if !waits {
            self.mapped.questions.push(questions::missing_humidity(self.choices));
        }
    }

    fn say(&mut self, quantity: Quantity, at: usize, why: &str) {
        let what = format!("column of {}", quantity.name().replace('_', " "));
        let value = format!("{:?}: {why}", self.choices[at].reference);
        self.mapped
            .said
            .push(Assumption::new(what, value, "which sensor the figures speak of"));
    }

    fn note(&mut self, at: usize, role: Role, unit: Option<Unit>, confidence: Confidence, why: &str) {
        self.mapped.found.push(Found {
            at,
            role,
            unit,
            confidence,
            why: why.to_string(),
        });
    }
}

/// What has to be said of a column besides its unit.
fn told(quantity: Quantity, choice: &Choice, marks: &[(String, usize)]) -> Vec<Assumption> {
    let mut said = Vec::new();
    if quantity == Quantity::StationPressure && says_no_place(choice) {
        let name = &choice.reference;
        let value = format!("{name:?} is taken as read at the station, not reduced to sea level");
        let effect =
            "1.2 % of the pressure for each 100 m of elevation; if it is reduced, name it as sea_level_pressure";
        said.push(Assumption::new("air pressure", value, effect));
    }
    said.extend(marks.iter().map(|(mark, count)| {
        let value = format!(
            "{mark} in {:?}, {count} times: missing, not a reading",
            choice.reference
        );
        Assumption::new("marks of missing readings", value, "which hours are known")
    }));
    said
}

/// A pressure of which the name does not say where it was read.
fn says_no_place(choice: &Choice) -> bool {
    let name = choice.reference.to_lowercase();
    !["station", "stn", "qfe"].iter().any(|word| name.contains(word))
}

fn is_humidity(quantity: Quantity) -> bool {
    matches!(
        quantity,
        Quantity::RelativeHumidity | Quantity::DewPoint | Quantity::WetBulb
    )
}
