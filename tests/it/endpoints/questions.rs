//! What sources are asked, and what they are not asked.

use dipcast::config::{ApiKey, History};
use dipcast::service::records::Nature;
use dipcast::service::{OrderFault, PredictError, PredictionOrder, SourceState, SpanOrder, Weather, WeatherSource};

use super::asking::{config, fetched, june, order, weather};
use super::bodies::{JUNE, NOW, TODAY, celsius, met_norway, nasa_power};
use super::conduct::{DAY, open_meteo_stand_in};
use super::stand_in::{Reply, StandIn};

async fn faults(weather: &Weather, order: PredictionOrder) -> Vec<(String, &'static str)> {
    match weather.fetched(order).await {
        Err(PredictError::Faults(faults)) => faults
            .into_iter()
            .map(|fault| match fault {
                OrderFault::Weather(fault) => (fault.column.unwrap(), fault.code),
                other => panic!("{other:?}"),
            })
            .collect(),
        other => panic!("{other:?}"),
    }
}

#[tokio::test]
async fn questions_say_what_the_services_want_to_hear() {
    let stand_in = open_meteo_stand_in().await;
    let mut config = config(&stand_in.url);
    config.weather.open_meteo.api_key = ApiKey::new("hush");
    let mut wanted = june("open_meteo");
    wanted.site.elevation_m = Some(95.0);
    fetched(&weather(&config), wanted).await.unwrap();
    let seen = &stand_in.seen()[0];
    let expected = [
        ("latitude", "50"),
        ("longitude", "8"),
        ("timezone", "GMT"),
        ("timeformat", "unixtime"),
        ("wind_speed_unit", "ms"),
        ("elevation", "95"),
        ("start_date", "2025-06-01"),
        ("end_date", "2025-06-02"),
        ("apikey", "hush"),
    ];
    for (name, value) in expected {
        assert_eq!(seen.parameter(name).as_deref(), Some(value), "{name}: {}", seen.target);
    }
    let agent = seen.header("user-agent").unwrap();
    assert!(
        agent.starts_with("dipcast/") && agent.contains("operator@display.example"),
        "{agent}"
    );
    assert_eq!(
        seen.header("accept").as_deref(),
        Some("application/json, application/geo+json")
    );
}

#[tokio::test]
async fn coordinates_are_asked_with_four_decimals_and_utc_is_said() {
    let stand_in = StandIn::start(|_, seen| match seen.parameter("time-standard") {
        Some(_) => Reply::json(nasa_power(JUNE, 48).to_string()),
        None => Reply::json(met_norway(NOW - 1200, 60, 0).to_string()),
    });
    let stand_in = stand_in.await;
    let weather = weather(&config(&stand_in.url));
    let mut forecast = order("met_norway", NOW - 1200, 24);
    let WeatherSource::Endpoint(endpoint) = &mut forecast.weather else {
        unreachable!()
    };
    (endpoint.latitude_deg, endpoint.longitude_deg) = (50.123_456, 8.000_01);
    fetched(&weather, forecast).await.unwrap();
    fetched(&weather, june("nasa_power")).await.unwrap();
    let seen = stand_in.seen();
    assert_eq!(
        (seen[0].parameter("lat").unwrap(), seen[0].parameter("lon").unwrap()),
        ("50.1235".into(), "8".into())
    );
    assert_eq!(seen[1].parameter("time-standard").as_deref(), Some("UTC"));
    assert_eq!(
        (seen[1].parameter("start").unwrap(), seen[1].parameter("end").unwrap()),
        ("20250601".into(), "20250602".into())
    );
}

#[tokio::test]
async fn past_and_forecast_join_into_one_series_with_its_seams_said() {
    let stand_in = open_meteo_stand_in().await;
    let mut wanted = june("open_meteo");
    let WeatherSource::Endpoint(endpoint) = &mut wanted.weather else {
        unreachable!()
    };
    endpoint.span = SpanOrder::AroundNow {
        past: Some("P70D".parse().unwrap()),
        ahead: Some("P10D".parse().unwrap()),
    };
    let came = fetched(&weather(&config(&stand_in.url)), wanted).await.unwrap();
    assert_eq!(came.readings.len(), 80 * 24);
    assert!(came.readings.air_temp_k.iter().all(|temp| !temp.is_nan()));
    let natures: Vec<Nature> = came.provenance.stretches.iter().map(|stretch| stretch.nature).collect();
    assert_eq!(
        natures,
        [
            Nature::Reanalysis,
            Nature::Reanalysis,
            Nature::RecentDays,
            Nature::Forecast
        ]
    );
    let said: Vec<&str> = came
        .readings
        .assumptions
        .iter()
        .map(|said| said.value.as_str())
        .collect();
    assert!(
        said.iter()
            .any(|said| said.contains("reanalysis before 2026-02-22T00:00Z")),
        "{said:?}"
    );
    assert!(
        said.iter().any(|said| said.contains("forecast from then on")),
        "{said:?}"
    );
    let asked: Vec<String> = stand_in
        .seen()
        .iter()
        .map(|seen| format!("{:?}", seen.parameter("start_date")))
        .collect();
    assert_eq!(
        asked,
        ["Some(\"2025-12-21\")", "Some(\"2026-01-01\")", "None"],
        "years, then the forecast"
    );
    // The first hour after the seam is hour 0 of the forecast's answer.
    let seam = came
        .readings
        .time_unix_s
        .iter()
        .position(|time| *time == TODAY - 7 * DAY)
        .unwrap();
    assert!((came.readings.air_temp_k[seam] - celsius(0) - 273.15).abs() < 1e-9);
}

#[tokio::test]
async fn history_may_come_from_past_forecasts() {
    let stand_in = open_meteo_stand_in().await;
    let mut config = config(&stand_in.url);
    config.weather.open_meteo.history = History::PastForecasts;
    let weather = weather(&config);
    let came = fetched(&weather, june("open_meteo")).await.unwrap();
    assert_eq!(came.provenance.stretches[0].nature, Nature::PastForecast);
    // 2021-06-01.
    let early = faults(&weather, order("open_meteo", 1_622_505_600, 24)).await;
    assert_eq!(early, [("endpoint/from".to_owned(), "beyond_coverage")]);
}

#[tokio::test]
async fn hours_a_source_does_not_know_are_refused_before_it_is_asked() {
    let stand_in = open_meteo_stand_in().await;
    let weather = weather(&config(&stand_in.url));
    let beyond = |field: &str| vec![(format!("endpoint/{field}"), "beyond_coverage")];
    assert_eq!(
        faults(&weather, order("nasa_power", TODAY, 48)).await,
        beyond("to"),
        "a forecast of history"
    );
    assert_eq!(
        faults(&weather, order("nasa_power", 946_684_800, 24)).await,
        beyond("from"),
        "2000"
    );
    assert_eq!(
        faults(&weather, order("met_norway", JUNE, 24)).await,
        beyond("from"),
        "history of a forecast"
    );
    assert_eq!(
        faults(&weather, order("open_meteo", TODAY, 24 * 17)).await,
        beyond("to"),
        "17 days ahead"
    );
    let mut ahead = june("nasa_power");
    let WeatherSource::Endpoint(endpoint) = &mut ahead.weather else {
        unreachable!()
    };
    endpoint.span = SpanOrder::AroundNow {
        past: None,
        ahead: Some("P3D".parse().unwrap()),
    };
    assert_eq!(faults(&weather, ahead).await, beyond("ahead"));
    assert!(stand_in.seen().is_empty());
}

#[tokio::test]
async fn a_source_without_what_it_needs_is_not_asked() {
    let stand_in = open_meteo_stand_in().await;
    let mut config = config(&stand_in.url);
    config.weather.contact = String::new();
    config.weather.open_meteo.enabled = false;
    let weather = weather(&config);
    for source in ["met_norway", "open_meteo"] {
        let found = faults(&weather, june(source)).await;
        assert_eq!(
            found[0],
            ("endpoint/source".to_owned(), "source_not_configured"),
            "{source}"
        );
    }
    let reports = weather.sources().await;
    let missing: Vec<&str> = reports
        .iter()
        .filter(|report| matches!(report.state, SourceState::NotConfigured(_)))
        .map(|report| report.facts.name)
        .collect();
    assert_eq!(missing, ["open_meteo", "met_norway"]);
}

#[tokio::test]
async fn a_climate_is_for_the_built_in_source_alone() {
    let stand_in = open_meteo_stand_in().await;
    let mut wanted = june("open_meteo");
    let WeatherSource::Endpoint(endpoint) = &mut wanted.weather else {
        unreachable!()
    };
    endpoint.climate = Some(dipcast::service::Climate::Cold);
    let found = faults(&weather(&config(&stand_in.url)), wanted).await;
    assert_eq!(found, [("endpoint/climate".to_owned(), "climate_of_real_weather")]);
}
