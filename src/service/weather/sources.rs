//! The sources there are, and what state they are in.

use std::sync::Arc;
use std::time::Duration;

use crate::config;
use crate::intake::endpoints::{
    Adapter, BudgetLeft, FIXTURE, Facts, MET_NORWAY, MetNorway, NASA_POWER, NasaPower, OPEN_METEO, OpenMeteo, Past,
    Source,
};
use crate::model::weather::WeatherFault;

/// All sources, the built-in one first.
#[derive(Debug)]
pub(super) struct Sources(Vec<Listed>);

/// A source behind a network, or why it may not be asked.
#[derive(Debug)]
struct Listed {
    facts: &'static Facts,
    source: Result<Arc<Source>, &'static str>,
}

/// A source with its present state.
#[derive(Debug, Clone, PartialEq)]
pub struct SourceReport {
    /// What is known of it.
    pub facts: &'static Facts,
    /// Whether it can be asked.
    pub state: SourceState,
    /// How it went so far.
    pub past: Past,
    /// What is left of its budget; none for the built-in one.
    pub budget_left: Option<BudgetLeft>,
}

impl SourceReport {
    /// Of the built-in source: always ready.
    pub fn built_in() -> Self {
        Self {
            facts: &FIXTURE,
            state: SourceState::Ready,
            past: Past::default(),
            budget_left: None,
        }
    }
}

/// Whether a source can be asked.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum SourceState {
    /// It can.
    Ready,
    /// Something is missing in the settings; what.
    NotConfigured(&'static str),
    /// It failed, or asked to be left in peace, for so much longer.
    Resting(Duration),
}

/// What an order's name of a source leads to.
#[derive(Debug)]
pub(super) enum Named {
    BuiltIn,
    Network(Arc<Source>),
}

impl Sources {
    pub(super) fn new(config: &config::Weather) -> Self {
        let source = |adapter: Arc<dyn Adapter>, budget| Arc::new(Source::new(adapter, config, budget));
        let (open_meteo, met_norway, nasa_power) = (&config.open_meteo, &config.met_norway, &config.nasa_power);
        let listed = |facts, enabled: bool, reason, build: &dyn Fn() -> Arc<Source>| Listed {
            facts,
            source: if enabled { Ok(build()) } else { Err(reason) },
        };
        let contact = !config.contact.is_empty();
        let met_reason = if met_norway.enabled {
            "it wants to know whom to reach: set weather.contact"
        } else {
            "switched off: weather.met_norway.enabled"
        };
        Self(vec![
            listed(
                &OPEN_METEO,
                open_meteo.enabled,
                "its open hosts are for non-commercial use: if yours is, or if you have a key, set weather.open_meteo.enabled",
                &|| source(Arc::new(OpenMeteo::new(open_meteo.clone())), &open_meteo.budget),
            ),
            listed(&MET_NORWAY, met_norway.enabled && contact, met_reason, &|| {
                source(Arc::new(MetNorway::new(met_norway.clone())), &met_norway.budget)
            }),
            listed(
                &NASA_POWER,
                nasa_power.enabled,
                "switched off: weather.nasa_power.enabled",
                &|| source(Arc::new(NasaPower::new(nasa_power.clone())), &nasa_power.budget),
            ),
        ])
    }

    /// The source of this name.
    ///
    /// # Errors
    /// No such source, with those that can be asked; or one that is not configured, with what is missing.
    pub(super) fn named(&self, name: &str) -> Result<Named, WeatherFault> {
        if name == FIXTURE.name {
            return Ok(Named::BuiltIn);
        }
        let fault = |code, detail: String| WeatherFault::column("endpoint/source", code, detail);
        match self.0.iter().find(|listed| listed.facts.name == name) {
            Some(Listed { source: Ok(source), .. }) => Ok(Named::Network(Arc::clone(source))),
            Some(Listed {
                source: Err(reason), ..
            }) => {
                let detail = format!(
                    "{name} is not configured in this service ({reason}); configured are {}",
                    self.ready()
                );
                Err(fault("source_not_configured", detail))
            }
            None => Err(fault(
                "unknown_source",
                format!("there is no source {name:?}; configured are {}", self.ready()),
            )),
        }
    }

    fn ready(&self) -> String {
        let asked = self.0.iter().filter(|listed| listed.source.is_ok());
        let names: Vec<&str> = std::iter::once(FIXTURE.name)
            .chain(asked.map(|listed| listed.facts.name))
            .collect();
        names.join(", ")
    }

    /// Each with its state.
    pub(super) fn reports(&self) -> Vec<SourceReport> {
        std::iter::once(SourceReport::built_in())
            .chain(self.0.iter().map(Listed::report))
            .collect()
    }
}

impl Listed {
    fn report(&self) -> SourceReport {
        let state = match &self.source {
            Err(reason) => SourceState::NotConfigured(reason),
            Ok(source) => source.resting_for().map_or(SourceState::Ready, SourceState::Resting),
        };
        let source = self.source.as_ref().ok();
        SourceReport {
            facts: self.facts,
            state,
            past: source.map(|source| source.past()).unwrap_or_default(),
            budget_left: source.map(|source| source.budget_left()),
        }
    }
}
