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
