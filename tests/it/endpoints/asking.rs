//! Asking a stand-in through the service.

use std::time::Duration;

use dipcast::config::Config;
use dipcast::service::records::{FetchedWeather, Options};
use dipcast::service::{
    Clock, DeviceChoice, EndpointOrder, PredictError, PredictionOrder, Site, SourceTrouble, SpanOrder, Weather,
    WeatherChecks, WeatherSource,
};

use super::bodies::{JUNE, NOW};

/// Every source at this address, short patience, nothing kept beyond the test.
pub fn config(url: &str) -> Config {
    let mut config = crate::support::config();
    let weather = &mut config.weather;
    weather.contact = "operator@display.example".to_owned();
    weather.first_wait = Duration::from_millis(1);
    weather.try_timeout = Duration::from_millis(400);
    weather.total_timeout = Duration::from_secs(5);
    weather.open_meteo.enabled = true;
    for address in [
        &mut weather.open_meteo.forecast_url,
        &mut weather.open_meteo.archive_url,
        &mut weather.open_meteo.past_forecast_url,
        &mut weather.met_norway.url,
        &mut weather.nasa_power.url,
    ] {
        *address = url.to_owned();
    }
    config.store.file = None;
    config
}

pub fn weather(config: &Config) -> Weather {
    Weather::new(config, Clock::of(|| NOW))
}

/// An order for these hours at 50 N 8 E.
pub fn order(source: &str, from_unix_s: i64, hours: i64) -> PredictionOrder {
    PredictionOrder {
        device: DeviceChoice::Example("shelf-180".to_owned()),
        site: Site::default(),
        weather: WeatherSource::Endpoint(Box::new(EndpointOrder {
            source: source.to_owned(),
            latitude_deg: 50.0,
            longitude_deg: 8.0,
            span: SpanOrder::Between {
                from_unix_s,
                to_unix_s: from_unix_s + 3600 * hours,
            },
            climate: None,
        })),
        weather_checks: WeatherChecks::default(),
        options: Options::default(),
    }
}

/// Two days of June.
pub fn june(source: &str) -> PredictionOrder {
    order(source, JUNE, 48)
}

/// What came, or why nothing did.
pub async fn fetched(weather: &Weather, order: PredictionOrder) -> Result<FetchedWeather, SourceTrouble> {
    match weather.fetched(order).await {
        Ok(PredictionOrder {
            weather: WeatherSource::Fetched(fetched),
            ..
        }) => Ok(*fetched),
        Ok(other) => panic!("not fetched: {:?}", other.weather),
        Err(PredictError::Source(trouble)) => Err(trouble),
        Err(other) => panic!("{other}: {other:?}"),
    }
}
