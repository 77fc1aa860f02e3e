//! What is known of each source before anything is asked of it.

/// A source and its terms.
#[derive(Debug, PartialEq, Eq)]
pub struct Facts {
    /// Name in requests.
    pub name: &'static str,
    /// Name for people.
    pub title: &'static str,
    /// What it covers, in words.
    pub coverage: &'static str,
    /// Does it know hours that are over.
    pub knows_past: bool,
    /// Does it know hours to come.
    pub knows_future: bool,
    /// What it tells of each hour, by the names used in layouts.
    pub variables: &'static [&'static str],
    /// Credit to show beside every use.
    pub credit: &'static str,
    /// Where the credit leads.
    pub credit_url: Option<&'static str>,
    /// Terms of the data.
    pub licence: &'static str,
}

/// The built-in source.
pub static FIXTURE: Facts = Facts {
    name: "fixture",
    title: "Invented weather, built in",
    coverage: "any place and any hour of the years 1900 to 2199; invented, by a formula",
    knows_past: true,
    knows_future: true,
    variables: &[
        "air_temperature",
        "relative_humidity",
        "station_pressure",
        "wind_speed",
        "shortwave",
    ],
    credit: "Invented weather of dipcast's built-in source; no measurement stands behind it",
    credit_url: None,
    licence: "none needed",
};

/// Open-Meteo.
pub static OPEN_METEO: Facts = Facts {
    name: "open_meteo",
    title: "Open-Meteo",
    coverage: "the whole world; reanalysis since 1940, or past forecasts since 2022, and forecast for 16 days",
    knows_past: true,
    knows_future: true,
    variables: &[
        "air_temperature",
        "relative_humidity",
        "dew_point",
        "station_pressure",
        "wind_speed",
        "shortwave",
    ],
    credit: "Weather data by Open-Meteo.com",
    credit_url: Some("https://open-meteo.com/"),
    licence: "CC BY 4.0",
};

/// MET Norway.
pub static MET_NORWAY: Facts = Facts {
    name: "met_norway",
    title: "MET Norway Locationforecast",
    coverage: "the whole world; forecast for nine to ten days, hourly for two and a half, then every six hours",
    knows_past: false,
    knows_future: true,
    variables: &[
        "air_temperature",
        "relative_humidity",
        "dew_point",
        "sea_level_pressure",
        "wind_speed",
    ],
    credit: "Data from MET Norway",
    credit_url: Some("https://www.met.no/"),
    licence: "NLOD 2.0 and CC BY 4.0",
};

/// NASA POWER.
pub static NASA_POWER: Facts = Facts {
    name: "nasa_power",
    title: "NASA POWER",
    coverage: "the whole world; history since 2001, a few days behind the present",
    knows_past: true,
    knows_future: false,
    variables: &[
        "air_temperature",
        "relative_humidity",
        "dew_point",
        "station_pressure",
        "wind_speed",
        "shortwave",
    ],
    credit: "Data from the NASA Langley Research Center (LaRC) POWER project",
    credit_url: Some("https://power.larc.nasa.gov/"),
    licence: "free to use, with credit",
};
