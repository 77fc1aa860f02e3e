//! Weather by coordinates: an order becomes readings before its run starts.
//!
//! Reading order: [`EndpointOrder`] is what is wanted, [`Sources`](SourceReport) whom it may be asked of, `shelf` looks into
//! the store before it asks, `flights` ask once for all who wait, and [`Weather`] puts the answers together.

mod flights;
mod order;
mod shelf;
mod sources;

pub use crate::intake::endpoints::fixture::Climate;
pub use order::{EndpointOrder, SpanOrder};
pub use sources::{SourceReport, SourceState};

use std::sync::Arc;
use std::time::Duration;

use tokio::time::Instant;

use self::order::instant;
use self::shelf::{Held, Shelf};
use self::sources::{Named, Sources};
use super::error::SourceTrouble;
use super::run::{check_length, checked_device};
use super::{Clock, OrderFault, PredictError, PredictionOrder, WeatherSource};
use crate::config::Config;
use crate::intake::endpoints::{
    Asking, Coordinates, Facts, FetchError, FetchedWeather, Piece, Provenance, Question, Source, Wanted, fixture, join,
};
use crate::model::notes::Assumption;
use crate::model::weather::{RawReadings, WeatherFault};
use crate::store::StoreError;

/// Fetches weather by coordinates; cheap to clone.
#[derive(Debug, Clone)]
pub struct Weather(Arc<Inner>);

#[derive(Debug)]
struct Inner {
    clock: Clock,
    total_timeout: Duration,
    sources: Sources,
    shelf: Arc<Shelf>,
}

/// An order that was found sound.
enum Plan {
    Invented(Climate, Wanted),
    Asked(Arc<Source>, Wanted, Vec<Question>),
}

impl Weather {
    /// With these settings and this clock; nothing is opened or asked yet.
    pub fn new(config: &Config, clock: Clock) -> Self {
        Self(Arc::new(Inner {
            sources: Sources::new(&config.weather),
            shelf: Arc::new(Shelf::new(&config.store, clock.clone())),
            total_timeout: config.weather.total_timeout,
            clock,
        }))
    }

    /// Opens the store if its file is there.
    ///
    /// # Errors
    /// A file that is damaged or of a later version.
    pub async fn open_store(&self) -> Result<(), StoreError> {
        self.0.shelf.open().await
    }

    /// All sources with their present state.
    pub async fn sources(&self) -> Vec<SourceReport> {
        let mut reports = self.0.sources.reports();
        for report in &mut reports {
            if report.past.last_success_unix_s.is_none() {
                report.past.last_success_unix_s = self.0.shelf.newest(report.facts.name).await;
            }
        }
        reports
    }

    /// The order with its weather at hand; an order whose weather came with it stays as it is.
    ///
    /// # Errors
    /// Every fault of the endpoint and of the device, before anything is asked of a source; then what the source failed in.
    pub async fn fetched(&self, mut order: PredictionOrder) -> Result<PredictionOrder, PredictError> {
        let WeatherSource::Endpoint(endpoint) = &order.weather else {
            return Ok(order);
        };
        let plan = match (self.plan(&order, endpoint), checked_device(&order.device)) {
            (Ok(plan), Ok(_)) => plan,
            (plan, device) => {
                let in_weather = plan.err().into_iter().flatten().map(OrderFault::Weather);
                let faults = device.err().into_iter().flatten().chain(in_weather).collect();
                return Err(PredictError::Faults(faults));
            }
        };
        check_length(&order, plan.wanted().span.hours())?;
        let fetched = match plan {
            Plan::Invented(climate, wanted) => fixture::weather(climate, wanted.at, wanted.elevation_m, wanted.span),
            Plan::Asked(source, wanted, questions) => self.asked(source, wanted, questions).await?,
        };
        order.weather = WeatherSource::Fetched(Box::new(fetched));
        Ok(order)
    }

    fn plan(&self, order: &PredictionOrder, endpoint: &EndpointOrder) -> Result<Plan, Vec<WeatherFault>> {
        let now_unix_s = self.0.clock.now_unix_s();
        let at = Coordinates::new(endpoint.latitude_deg, endpoint.longitude_deg);
        let span = endpoint.span.hours(now_unix_s);
        let named = self.0.sources.named(&endpoint.source);
        let climate = named.as_ref().map_or(Ok(None), |named| climate(endpoint, named));
        let (at, span, named, climate) = match (at, span, named, climate) {
            (Ok(at), Ok(span), Ok(named), Ok(climate)) => (at, span, named, climate),
            (at, span, named, climate) => {
                let faults = at.err().into_iter().flatten();
                return Err(faults
                    .chain(span.err())
                    .chain(named.err())
                    .chain(climate.err())
                    .collect());
            }
        };
        let wanted = Wanted {
            at,
            elevation_m: order.site.elevation_m,
            span,
            now_unix_s,
        };
        planned(named, climate, wanted).map_err(|faults| endpoint.span.in_its_own_words(faults))
    }

    /// Asks one question after another: sources want it so, and what came is kept even if a later one fails.
    async fn asked(
        &self,
        source: Arc<Source>,
        wanted: Wanted,
        questions: Vec<Question>,
    ) -> Result<FetchedWeather, PredictError> {
        let asking = Asking {
            now_unix_s: wanted.now_unix_s,
            deadline: Instant::now() + self.0.total_timeout,
        };
        let facts = source.adapter().facts();
        let mut pieces = Vec::new();
        let mut said = Vec::new();
        for question in &questions {
            let answer = self.0.shelf.answer(Arc::clone(&source), question.clone(), asking);
            let held = tokio::time::timeout_at(asking.deadline, answer).await;
            let held = held.unwrap_or(Err(FetchError::TooSlow(self.0.total_timeout)));
            let held = held.map_err(|error| PredictError::Source(SourceTrouble::of(facts, &error)))?;
            pieces.push(held.piece(question));
            said.extend(stale(&held));
        }
        Ok(together(facts, source.adapter().gap_hours(), &wanted, &pieces, said))
    }
}

impl Plan {
    fn wanted(&self) -> &Wanted {
        match self {
            Self::Invented(_, wanted) | Self::Asked(_, wanted, _) => wanted,
        }
    }
}

fn planned(named: Named, climate: Option<Climate>, wanted: Wanted) -> Result<Plan, Vec<WeatherFault>> {
    match (named, climate) {
        (Named::Network(source), _) => {
            let questions = source.adapter().questions(&wanted)?;
            Ok(Plan::Asked(source, wanted, questions))
        }
        (Named::BuiltIn, climate) => match fixture::coverage_fault(&wanted.span) {
            Some(fault) => Err(vec![fault]),
            None => Ok(Plan::Invented(climate.unwrap_or(Climate::Temperate), wanted)),
        },
    }
}

/// The built-in source needs a climate; no other takes one.
fn climate(endpoint: &EndpointOrder, named: &Named) -> Result<Option<Climate>, WeatherFault> {
    let fault = |code, detail: String| Err(WeatherFault::column("endpoint/climate", code, detail));
    let names = || Climate::ALL.map(Climate::name).join(", ");
    match (named, endpoint.climate) {
        (Named::BuiltIn, None) => fault(
            "no_climate",
            format!("the built-in source needs a climate: one of {}", names()),
        ),
        (Named::Network(_), Some(_)) => fault(
            "climate_of_real_weather",
            format!("{} knows the climate itself; leave climate out", endpoint.source),
        ),
        (_, climate) => Ok(climate),
    }
}

fn stale(held: &Held) -> Option<Assumption> {
    let because = held.stale_because.as_ref()?;
    Some(Assumption::new(
        "weather that has expired",
        format!(
            "as fetched at {}; the source did not answer: {because}",
            instant(held.fetched_unix_s)
        ),
        "forecasts age by the day; history hardly does",
    ))
}

fn together(
    facts: &'static Facts,
    gap_hours: Option<usize>,
    wanted: &Wanted,
    pieces: &[Piece],
    said: Vec<Assumption>,
) -> FetchedWeather {
    let (mut readings, stretches) = join(pieces);
    let served = pieces[0].parsed.served;
    readings.assumptions.extend(said);
    say_elevation(&mut readings, wanted.elevation_m, served.elevation_m);
    if let Some(hours) = gap_hours {
        readings.assumptions.push(Assumption::new(
            "longest gap that is interpolated, unless given",
            format!("{hours} h, since the source's later hours come that far apart"),
            "the daily course between those hours is flattened",
        ));
    }
    FetchedWeather {
        readings,
        elevation_m: served.elevation_m,
        gap_hours,
        provenance: Provenance {
            facts,
            asked: wanted.at,
            asked_elevation_m: wanted.elevation_m,
            served,
            span: wanted.span,
            stretches,
        },
    }
}

/// Readings for another height are not corrected, but said [m].
const HEIGHTS_APART_M: f64 = 50.0;

fn say_elevation(readings: &mut RawReadings, asked_m: Option<f64>, served_m: Option<f64>) {
    let said = match (asked_m, served_m) {
        (None, Some(served_m)) => Assumption::new(
            "elevation, not given",
            format!("{served_m:.0} m, that of the source's readings"),
            "air temperature by 0.65 K per 100 m, pressure",
        ),
        (Some(asked_m), Some(served_m)) if (asked_m - served_m).abs() > HEIGHTS_APART_M => Assumption::new(
            "elevation of the weather",
            format!("readings are for {served_m:.0} m, the place is at {asked_m:.0} m; not corrected"),
            "air temperature by 0.65 K per 100 m",
        ),
        _ => return,
    };
    readings.assumptions.push(said);
}
