//! `dipcast serve --demo`: a prediction through the service's own HTTP API, shown as a table.
//!
//! The demo plays in an invented place with invented weather; both files are inside the binary.

use std::fmt::Write;
use std::net::SocketAddr;

use reqwest::multipart::{Form, Part};
use serde_json::Value;

const REQUEST: &str = include_str!("../../openapi/examples/demo-request.json");
const WEATHER: &[u8] = include_bytes!("../../openapi/examples/demo-weather.csv");

/// Sends the demo's request to the running service and returns what to print.
pub(super) async fn run(address: SocketAddr) -> Result<String, String> {
    let base = format!("http://{address}");
    let answer = ask(&base)
        .await
        .map_err(|error| format!("the demo's request failed: {error}"))?;
    let mut text = String::from(SCENE);
    text.push_str(&table(&answer));
    text.push_str(&causes(&answer));
    text.push_str(&links(&base));
    Ok(text)
}

const SCENE: &str = "\n\
    The demo: a shelf device in the gift shop of the lighthouse on Tolmarrow Skerry, an island that does not exist,\n\
    through a year of invented weather. Somebody comes by within twelve hours of being needed.\n\n";

async fn ask(base: &str) -> Result<Value, reqwest::Error> {
    let client = reqwest::Client::builder().no_proxy().build()?;
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
    let mut text = format!(
        "{:<9} {:>9} {:>19} {:>6} {:>11} {:>9} {:>17} {:>7}\n",
        "", "cycles", "", "stall", "", "water", "", "visits"
    );
    let _ = writeln!(
        text,
        "{:<9} {:>9} {:>19} {:>6} {:>11} {:>9} {:>17}",
        "", "", "(band)", "hours", "(band)", "grams", "(band)"
    );
    let months = answer["months"].as_array().map(Vec::as_slice).unwrap_or_default();
    for month in months {
        row(&mut text, month["label"].as_str().unwrap_or_default(), month);
    }
    row(&mut text, "year", &answer["summary"]);
    text
}

fn row(text: &mut String, name: &str, period: &Value) {
    let bands = &period["bands"];
    let _ = writeln!(
        text,
        "{name:<9} {:>9} {:>19} {:>6} {:>11} {:>9} {:>17} {:>7}",
        whole(&period["cycles"]),
        band(&bands["cycles"]),
        whole(&period["stall_hours"]["total"]),
        band(&bands["stall_hours"]),
        whole(&period["water_g"]["total"]),
        band(&bands["water_g"]),
        whole(&period["visits"]),
    );
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

fn band(band: &Value) -> String {
    format!("({}-{})", whole(&band["low"]), whole(&band["high"]))
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
