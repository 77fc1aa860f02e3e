//! Choosing the format of an answer: `?format=` wins, then `Accept`, then JSON.

use axum::http::{HeaderMap, header};
use mime::Mime;
use serde::{Deserialize, Serialize};
use utoipa::{IntoParams, ToSchema};

use super::error::{FaultItem, Problem, ProblemCode};

/// A format of answers.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Format {
    /// One JSON document.
    Json,
    /// The hours as a table (RFC 4180).
    Csv,
    /// The hours as one JSON object a line.
    NdJson,
}

impl Format {
    /// Its name in `?format=`.
    pub fn name(self) -> &'static str {
        match self {
            Format::Json => "json",
            Format::Csv => "csv",
            Format::NdJson => "ndjson",
        }
    }

    /// Its media type, as sent.
    pub fn media_type(self) -> &'static str {
        match self {
            Format::Json => "application/json",
            Format::Csv => "text/csv; charset=utf-8; header=present",
            Format::NdJson => "application/x-ndjson",
        }
    }

    fn essence(self) -> &'static str {
        match self {
            Format::Csv => "text/csv",
            other => other.media_type(),
        }
    }
}

/// The twin of `Accept`, for links and spreadsheets.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema, IntoParams)]
#[into_params(parameter_in = Query)]
pub struct FormatQuery {
    /// The twin of `Accept`, for links and spreadsheets; it wins.
    #[param(inline)]
    pub format: Option<FormatName>,
}

/// A format by name.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema)]
#[serde(rename_all = "lowercase")]
pub enum FormatName {
    /// One document.
    Json,
    /// The hours as a table.
    Csv,
    /// The hours as one object a line.
    Ndjson,
}

/// The twin of `Accept` where there is JSON alone.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema, IntoParams)]
#[into_params(parameter_in = Query)]
pub struct JsonFormatQuery {
    /// The twin of `Accept`; it wins.
    #[param(inline)]
    pub format: Option<JsonFormatName>,
}

/// The one format there is.
#[derive(Debug, Clone, Copy, Serialize, Deserialize, ToSchema)]
#[serde(rename_all = "lowercase")]
pub enum JsonFormatName {
    /// One document.
    Json,
}

/// For resources that exist as JSON alone.
///
/// # Errors
/// As [`choose`].
pub fn json_only(headers: &HeaderMap, query: Option<&str>) -> Result<(), Problem> {
    choose(headers, query, &[Format::Json]).map(drop)
}

/// Picks one of the formats on offer; the first is the default.
///
/// # Errors
/// 406 with the list of what exists; 422 for an unknown query parameter.
pub fn choose(headers: &HeaderMap, query: Option<&str>, offered: &[Format]) -> Result<Format, Problem> {
    match format_of_query(query)? {
        Some(name) => {
            let chosen = offered.iter().find(|format| format.name() == name);
            chosen
                .copied()
                .ok_or_else(|| not_acceptable(&format!("format={name}"), offered))
        }
        None => of_accept(headers, offered),
    }
}

fn format_of_query(query: Option<&str>) -> Result<Option<String>, Problem> {
    let pairs: Vec<(String, String)> = form_pairs(query.unwrap_or_default());
    let unknown = pairs.iter().filter(|(name, _)| name != "format");
    let mut faults: Vec<FaultItem> = unknown.map(|(name, _)| unknown_parameter(name)).collect();
    if pairs.iter().filter(|(name, _)| name == "format").count() > 1 {
        faults.push(FaultItem::in_query("format", "repeated", "give format once"));
    }
    if faults.is_empty() {
        Ok(pairs.into_iter().next().map(|(_, value)| value))
    } else {
        Err(Problem::with_faults(ProblemCode::InvalidRequest, faults))
    }
}

fn form_pairs(query: &str) -> Vec<(String, String)> {
    let pairs = query.split('&').filter(|pair| !pair.is_empty());
    let split = pairs.map(|pair| pair.split_once('=').unwrap_or((pair, "")));
    split.map(|(name, value)| (name.to_owned(), value.to_owned())).collect()
}

fn unknown_parameter(name: &str) -> FaultItem {
    FaultItem::in_query(
        name,
        "unknown_parameter",
        format!("there is no query parameter {name:?} here, only format"),
    )
}

fn of_accept(headers: &HeaderMap, offered: &[Format]) -> Result<Format, Problem> {
    let values: Vec<&str> = headers
        .get_all(header::ACCEPT)
        .iter()
        .filter_map(|value| value.to_str().ok())
        .collect();
    if values.is_empty() {
        return Ok(offered[0]);
    }
    let ranges: Vec<Mime> = values
        .iter()
        .flat_map(|value| value.split(','))
        .filter_map(|range| range.trim().parse().ok())
        .collect();
    let weighed = offered
        .iter()
        .enumerate()
        .map(|(order, format)| (quality(&ranges, *format), order, *format));
    let best = weighed
        .filter(|(quality, ..)| *quality > 0.0)
        .max_by(|a, b| a.0.total_cmp(&b.0).then(b.1.cmp(&a.1)));
    best.map(|(_, _, format)| format)
        .ok_or_else(|| not_acceptable(&values.join(", "), offered))
}

/// Weight of a format: that of the most exact range that covers it (RFC 9110, 12.5.1).
fn quality(ranges: &[Mime], format: Format) -> f64 {
    let (kind, subtype) = format.essence().split_once('/').unwrap_or_default();
    let exactness = |range: &Mime| match (range.type_().as_str(), range.subtype().as_str()) {
        (a, b) if a == kind && b == subtype => 3,
        (a, "*") if a == kind => 2,
        ("*", "*") => 1,
        _ => 0,
    };
    let most_exact = ranges
        .iter()
        .filter(|range| exactness(range) > 0)
        .max_by_key(|range| exactness(range));
    most_exact.map_or(0.0, weight)
}

fn weight(range: &Mime) -> f64 {
    range
        .get_param("q")
        .and_then(|q| q.as_str().parse().ok())
        .unwrap_or(1.0)
}

fn not_acceptable(asked: &str, offered: &[Format]) -> Problem {
    let names: Vec<String> = offered
        .iter()
        .map(|format| format!("{} (format={})", format.essence(), format.name()))
        .collect();
    let detail = format!("asked for {asked:?}; this resource exists as {}", names.join(", "));
    Problem {
        available: offered.iter().map(|format| format.essence()).collect(),
        ..Problem::new(ProblemCode::NotAcceptable, detail)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const ALL: [Format; 3] = [Format::Json, Format::Csv, Format::NdJson];

    fn accept(value: &str) -> Option<Format> {
        let mut headers = HeaderMap::new();
        headers.insert(header::ACCEPT, value.parse().unwrap());
        choose(&headers, None, &ALL).ok()
    }

    #[test]
    fn the_most_wanted_format_is_taken() {
        assert_eq!(accept("*/*"), Some(Format::Json));
        assert_eq!(accept("text/html,application/xhtml+xml,*/*;q=0.8"), Some(Format::Json));
        assert_eq!(accept("text/*"), Some(Format::Csv));
        assert_eq!(accept("application/json;q=0.5, text/csv"), Some(Format::Csv));
        assert_eq!(accept("application/x-ndjson"), Some(Format::NdJson));
        assert_eq!(accept("application/json;q=0, */*"), Some(Format::Csv));
        assert_eq!(accept("text/html"), None);
        assert_eq!(accept("nonsense"), None);
    }

    #[test]
    fn the_query_wins_and_is_strict() {
        let mut headers = HeaderMap::new();
        headers.insert(header::ACCEPT, "application/json".parse().unwrap());
        assert_eq!(choose(&headers, Some("format=csv"), &ALL).unwrap(), Format::Csv);
        let refused = choose(&headers, Some("format=xml"), &ALL).unwrap_err();
        assert_eq!(
            refused.available,
            ["application/json", "text/csv", "application/x-ndjson"]
        );
        assert_eq!(
            choose(&headers, Some("fromat=csv"), &ALL).unwrap_err().code,
            ProblemCode::InvalidRequest
        );
    }
}
