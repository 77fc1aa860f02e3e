//! `dipcast serve --demo`: a prediction through the service's own HTTP API, shown as a table.
//!
//! The demo plays in an invented place with invented weather; both files are inside the binary.

use std::net::SocketAddr;
use std::time::Duration;

use reqwest::multipart::{Form, Part};
use serde_json::Value;

const REQUEST: &str = include_str!("../../openapi/examples/demo-request.json");
const WEATHER: &[u8] = include_bytes!("../../openapi/examples/demo-weather.csv");

/// Sends the demo's request to the running service and returns what to print.
pub(super) async fn run(address: SocketAddr) -> Result<String, String> {
    let base = format!("http://{address}");
    let answer = ask(&base)
        .await
        .map_err(|error| format!("the demo's request failed: {error:?}"))?;
    let mut text = String::from(SCENE);
    text.push_str(&table(&answer));
    text.push_str(&causes(&answer));
    text.push_str(&links(&base));
    Ok(text)
}

/// Far more than a slow machine needs.
const LONGEST_WAIT: Duration = Duration::from_secs(300);

const SCENE: &str = "\n\
    The demo: a shelf device in the gift shop of the lighthouse on Tolmarrow Skerry, an island that does not exist,\n\
    through a year of invented weather. Somebody comes by within twelve hours of being needed.\n\n";

async fn ask(base: &str) -> Result<Value, reqwest::Error> {
    let client = super::local_client(LONGEST_WAIT)?;
    let form = Form::new()
        .part("request", Part::text(REQUEST).mime_str("application/json")?)
        .part(
            "weather",
            Part::bytes(WEATHER)
                .file_name("demo-weather.csv")
                .mime_str("text/csv")?,
        );
    let answer = client
        .post(format!("{base}/v1/predictions"))
        .multipart(form)
        .send()
        .await?;
    answer.error_for_status()?.json().await
}

fn table(answer: &Value) -> String {
    let mut text = line("", ["cycles", "stall hours", "water [g]", "visits"].map(str::to_owned));
    let months = answer["months"].as_array().map(Vec::as_slice).unwrap_or_default();
    for month in months {
        text.push_str(&row(month["label"].as_str().unwrap_or_default(), month));
    }
    text + &row("year", &answer["summary"])
}

fn row(name: &str, period: &Value) -> String {
    let bands = &period["bands"];
    let cells = [
        with_band(&period["cycles"], &bands["cycles"]),
        with_band(&period["stall_hours"]["total"], &bands["stall_hours"]),
        with_band(&period["water_g"]["total"], &bands["water_g"]),
        whole(&period["visits"]),
    ];
    line(name, cells)
}

fn line(name: &str, [cycles, stall, water, visits]: [String; 4]) -> String {
    format!("{name:<8} {cycles:>28} {stall:>18} {water:>21} {visits:>7}\n")
}

fn causes(answer: &Value) -> String {
    let stall = &answer["summary"]["stall_hours"];
    format!(
        "\nStall hours: {} too humid, {} dry, {} frozen; {} while the shop is open. Longest stall {} h.\n\
         Bands are the 5th and 95th percentile over {} samples of what is uncertain. No measured counts stand behind the\n\
         defaults yet: an uncalibrated period is right within a factor of 1.5 to 2.\n",
        whole(&stall["humid"]),
        whole(&stall["dry"]),
        whole(&stall["frozen"]),
        whole(&stall["open"]),
        whole(&answer["stall_spells_summary"]["longest_hours"]),
        answer["model"]["samples"],
    )
}

fn links(base: &str) -> String {
    format!(
        "\nOpen      {base}/docs/  (every operation, to try out)\n          {base}/v1/example-devices\n          \
         {base}/v1/fluids\n\
         Repeat    curl -sS {base}/v1/predictions -F request=@openapi/examples/demo-request.json -F weather=@openapi/examples/demo-weather.csv\n\
         Table     the same with {base}/v1/predictions?format=csv\n\
         Stop      Ctrl-C\n\n"
    )
}

fn with_band(value: &Value, band: &Value) -> String {
    format!("{} ({}-{})", whole(value), whole(&band["low"]), whole(&band["high"]))
}

/// A number without decimals, thousands apart.
fn whole(value: &Value) -> String {
    let digits = format!("{:.0}", value.as_f64().unwrap_or(f64::NAN));
    let count = digits.len();
    let spaced = digits.chars().enumerate().flat_map(|(place, digit)| {
        let gap = place > 0 && (count - place).is_multiple_of(3);
        gap.then_some(',').into_iter().chain([digit])
    });
    spaced.collect()
}
