//! Weather by coordinates: an order becomes readings before its run starts.

mod order;

pub use crate::intake::endpoints::fixture::Climate;
pub use order::{EndpointOrder, SpanOrder};

use super::run::{check_length, checked_device};
use super::{Clock, OrderFault, PredictError, PredictionOrder, WeatherSource};
use crate::intake::endpoints::{Coordinates, FIXTURE, HourSpan, fixture};
use crate::model::weather::WeatherFault;

/// Fetches weather by coordinates; cheap to clone.
#[derive(Debug, Clone)]
pub struct Weather {
    clock: Clock,
}

/// An order that was found sound.
struct Wanted {
    at: Coordinates,
    elevation_m: Option<f64>,
    span: HourSpan,
    climate: Climate,
}

impl Weather {
    /// With this clock.
    pub fn new(clock: Clock) -> Self {
        Self { clock }
    }

    /// The order with its weather at hand; an order whose weather came with it stays as it is.
    ///
    /// # Errors
    /// Every fault of the endpoint and of the device, before anything is asked of a source.
    pub async fn fetched(&self, mut order: PredictionOrder) -> Result<PredictionOrder, PredictError> {
        let WeatherSource::Endpoint(endpoint) = &order.weather else {
            return Ok(order);
        };
        let (wanted, device) = (self.wanted(&order, endpoint), checked_device(&order.device));
        let wanted = match (wanted, device) {
            (Ok(wanted), Ok(_)) => wanted,
            (wanted, device) => {
                let in_weather = wanted.err().into_iter().flatten().map(OrderFault::Weather);
                let faults = device.err().into_iter().flatten().chain(in_weather).collect();
                return Err(PredictError::Faults(faults));
            }
        };
        check_length(&order, wanted.span.hours())?;
        let fetched = fixture::weather(wanted.climate, wanted.at, wanted.elevation_m, wanted.span);
        order.weather = WeatherSource::Fetched(Box::new(fetched));
        Ok(order)
    }

    fn wanted(&self, order: &PredictionOrder, endpoint: &EndpointOrder) -> Result<Wanted, Vec<WeatherFault>> {
        let at = Coordinates::new(endpoint.latitude_deg, endpoint.longitude_deg);
        let span = endpoint.span.hours(self.clock.now_unix_s());
        let climate = climate(endpoint);
        let coverage = span.as_ref().ok().and_then(fixture::coverage_fault);
        match (at, span, climate, coverage) {
            (Ok(at), Ok(span), Ok(climate), None) => Ok(Wanted {
                at,
                elevation_m: order.site.elevation_m,
                span,
                climate,
            }),
            (at, span, climate, coverage) => {
                let faults = at.err().into_iter().flatten();
                Err(faults.chain(span.err()).chain(climate.err()).chain(coverage).collect())
            }
        }
    }
}

fn climate(endpoint: &EndpointOrder) -> Result<Climate, WeatherFault> {
    if endpoint.source != FIXTURE.name {
        let detail = format!("expected {}, found {:?}", FIXTURE.name, endpoint.source);
        return Err(WeatherFault::column("endpoint/source", "unknown_source", detail));
    }
    endpoint.climate.ok_or_else(|| {
        let names = Climate::ALL.map(Climate::name).join(", ");
        let detail = format!("the built-in source needs a climate: one of {names}");
        WeatherFault::column("endpoint/climate", "no_climate", detail)
    })
}
