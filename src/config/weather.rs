//! `[weather]`: the sources of weather by coordinates.

use std::fmt;
use std::time::Duration;

use super::reader::Reader;

/// Weather by coordinates.
#[derive(Debug, Clone)]
pub struct Weather {
    /// How whoever runs this service can be reached; empty if unsaid.
    pub contact: String,
    /// For everything one prediction has to fetch.
    pub total_timeout: Duration,
    /// For one try.
    pub try_timeout: Duration,
    /// Tries of one question, the first included.
    pub tries: usize,
    /// Before the second try.
    pub first_wait: Duration,
    /// Largest answer after decompression [bytes].
    pub answer_bytes: usize,
    /// Failures in a row after which a source rests.
    pub failures_before_rest: u32,
    /// For how long.
    pub rest: Duration,
    /// Open-Meteo.
    pub open_meteo: OpenMeteo,
    /// MET Norway.
    pub met_norway: MetNorway,
    /// NASA POWER.
    pub nasa_power: NasaPower,
}

/// Open-Meteo.
#[derive(Debug, Clone)]
pub struct OpenMeteo {
    /// May it be asked.
    pub enabled: bool,
    /// Address of the forecast.
    pub forecast_url: String,
    /// Address of the reanalysis.
    pub archive_url: String,
    /// Address of past forecasts.
    pub past_forecast_url: String,
    /// Key, if there is one.
    pub api_key: ApiKey,
    /// Where old hours come from.
    pub history: History,
    /// How much it may be asked.
    pub budget: Budget,
}

/// Where hours older than a week come from.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum History {
    /// The reanalysis.
    Reanalysis,
    /// The first hours of forecasts made at the time.
    PastForecasts,
}

/// MET Norway.
#[derive(Debug, Clone)]
pub struct MetNorway {
    /// May it be asked.
    pub enabled: bool,
    /// Address of the forecast.
    pub url: String,
    /// How much it may be asked.
    pub budget: Budget,
}

/// NASA POWER.
#[derive(Debug, Clone)]
pub struct NasaPower {
    /// May it be asked.
    pub enabled: bool,
    /// Address of the hourly values of a point.
    pub url: String,
    /// How much it may be asked.
    pub budget: Budget,
}

/// How much a source may be asked.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Budget {
    /// Weighted calls a minute.
    pub per_minute: u32,
    /// Weighted calls an hour.
    pub per_hour: u32,
    /// Weighted calls a day.
    pub per_day: u32,
    /// Questions at once.
    pub parallel: usize,
}

/// A secret: it does not show in logs.
#[derive(Clone, PartialEq, Eq)]
pub struct ApiKey(String);

impl ApiKey {
    /// Wraps a key; empty for none.
    pub fn new(key: impl Into<String>) -> Self {
        Self(key.into())
    }

    /// The key itself, if there is one.
    pub fn reveal(&self) -> Option<&str> {
        (!self.0.is_empty()).then_some(self.0.as_str())
    }
}

impl fmt::Debug for ApiKey {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        out.write_str(if self.0.is_empty() {
            "ApiKey(none)"
        } else {
            "ApiKey(...)"
        })
    }
}

pub(super) fn read(reader: &mut Reader) -> Weather {
    let weather = Weather {
        contact: reader.text("weather.contact"),
        total_timeout: reader.seconds("weather.total_timeout_s", 1..=600),
        try_timeout: reader.seconds("weather.try_timeout_s", 1..=300),
        tries: reader.whole("weather.tries", 1..=10) as usize,
        first_wait: Duration::from_millis(reader.whole("weather.first_wait_ms", 1..=60_000)),
        answer_bytes: reader.whole("weather.answer_bytes", 1024..=1 << 28) as usize,
        failures_before_rest: reader.whole("weather.failures_before_rest", 1..=1000) as u32,
        rest: reader.seconds("weather.rest_s", 1..=86_400),
        open_meteo: read_open_meteo(reader),
        met_norway: read_met_norway(reader),
        nasa_power: read_nasa_power(reader),
    };
    check_contact(&weather.contact, reader);
    weather
}

fn read_open_meteo(reader: &mut Reader) -> OpenMeteo {
    OpenMeteo {
        enabled: reader.flag("weather.open_meteo.enabled"),
        forecast_url: address(reader, "weather.open_meteo.forecast_url"),
        archive_url: address(reader, "weather.open_meteo.archive_url"),
        past_forecast_url: address(reader, "weather.open_meteo.past_forecast_url"),
        api_key: ApiKey::new(reader.text("weather.open_meteo.api_key")),
        history: match reader.choice("weather.open_meteo.history", &["reanalysis", "past_forecasts"]) {
            Some("past_forecasts") => History::PastForecasts,
            _ => History::Reanalysis,
        },
        budget: Budget {
            per_minute: calls(reader, "weather.open_meteo.calls_per_minute"),
            per_hour: calls(reader, "weather.open_meteo.calls_per_hour"),
            per_day: calls(reader, "weather.open_meteo.calls_per_day"),
            parallel: reader.whole("weather.open_meteo.parallel", 1..=64) as usize,
        },
    }
}

fn read_met_norway(reader: &mut Reader) -> MetNorway {
    MetNorway {
        enabled: reader.flag("weather.met_norway.enabled"),
        url: address(reader, "weather.met_norway.url"),
        budget: Budget {
            per_minute: calls(reader, "weather.met_norway.calls_per_minute"),
            per_hour: calls(reader, "weather.met_norway.calls_per_hour"),
            per_day: calls(reader, "weather.met_norway.calls_per_day"),
            parallel: reader.whole("weather.met_norway.parallel", 1..=64) as usize,
        },
    }
}

fn read_nasa_power(reader: &mut Reader) -> NasaPower {
    NasaPower {
        enabled: reader.flag("weather.nasa_power.enabled"),
        url: address(reader, "weather.nasa_power.url"),
        budget: Budget {
            per_minute: calls(reader, "weather.nasa_power.calls_per_minute"),
            per_hour: calls(reader, "weather.nasa_power.calls_per_hour"),
            per_day: calls(reader, "weather.nasa_power.calls_per_day"),
            parallel: reader.whole("weather.nasa_power.parallel", 1..=64) as usize,
        },
    }
}

fn calls(reader: &mut Reader, setting: &'static str) -> u32 {
    reader.whole(setting, 1..=10_000_000) as u32
}

fn address(reader: &mut Reader, setting: &'static str) -> String {
    let text = reader.text(setting);
    let parsed = reqwest::Url::parse(&text).ok();
    let fits = parsed.is_some_and(|url| {
        matches!(url.scheme(), "http" | "https") && url.has_host() && url.query().is_none() && url.fragment().is_none()
    });
    if !fits {
        let detail = format!("expected an address such as https://weather.example/v1 without ? and #, found {text:?}");
        reader.fault(setting, detail);
    }
    text
}

fn check_contact(contact: &str, reader: &mut Reader) {
    let printable = contact.bytes().all(|byte| (0x20..0x7f).contains(&byte));
    if !printable || contact.len() > 200 {
        let detail = format!("expected a mail address or a page in plain ASCII, found {contact:?}");
        reader.fault("weather.contact", detail);
    }
}

#[cfg(test)]
mod tests {
    use crate::config::{Config, DEFAULTS, History};
    use figment::Figment;
    use figment::providers::{Format, Toml};

    fn load(file: &str) -> Result<Config, String> {
        let figment = Figment::from(Toml::string(DEFAULTS)).merge(Toml::string(file));
        Config::from_figment(figment).map_err(|error| error.to_string())
    }

    #[test]
    fn only_sources_whose_terms_allow_it_are_on() {
        let weather = load("").unwrap().weather;
        assert!(!weather.open_meteo.enabled && weather.contact.is_empty());
        assert!(weather.nasa_power.enabled);
        assert_eq!(weather.open_meteo.history, History::Reanalysis);
    }

    #[test]
    fn both_ends_of_the_bounds_are_held() {
        for (setting, low, high) in [
            ("total_timeout_s", 1, 600),
            ("tries", 1, 10),
            ("answer_bytes", 1024, 1 << 28),
        ] {
            let with = |value: i64| load(&format!("[weather]\n{setting} = {value}\n"));
            assert!(with(low).is_ok() && with(high).is_ok(), "{setting}");
            assert!(with(low - 1).is_err() && with(high + 1).is_err(), "{setting}");
        }
        assert!(load("[weather.nasa_power]\ncalls_per_day = 0\n").is_err());
        assert!(load("[store]\nweather_mib = 0\n").is_err());
    }

    #[test]
    fn addresses_are_checked_and_keys_do_not_show() {
        for wrong in [
            "weather.example",
            "ftp://weather.example/",
            "https://weather.example/?key=1",
            "",
        ] {
            let told = load(&format!("[weather.met_norway]\nurl = \"{wrong}\"\n")).unwrap_err();
            assert!(told.contains("weather.met_norway.url"), "{told}");
        }
        let config = load("[weather.open_meteo]\napi_key = \"hush\"\n").unwrap();
        assert!(!format!("{config:?}").contains("hush"));
        assert_eq!(config.weather.open_meteo.api_key.reveal(), Some("hush"));
        assert!(load("[weather]\ncontact = \"a\\nb\"\n").is_err());
    }

    #[test]
    fn an_empty_file_name_keeps_nothing() {
        assert_eq!(load("[store]\nfile = \"\"\n").unwrap().store.file, None);
        assert!(load("").unwrap().store.file.is_some());
    }
}
