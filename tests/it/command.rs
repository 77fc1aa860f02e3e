//! The command line against the real program.

use std::process::{Command, Output};

use crate::program::Program;
use crate::support::example;

fn dipcast(arguments: &[&str]) -> Output {
    let mut command = Command::new(env!("CARGO_BIN_EXE_dipcast"));
    command
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .args(arguments)
        .output()
        .unwrap()
}

fn text(bytes: &[u8]) -> String {
    String::from_utf8_lossy(bytes).into_owned()
}

/// A file with this text that lives as long as the value.
fn file(content: &str) -> tempfile::NamedTempFile {
    let file = tempfile::NamedTempFile::new().unwrap();
    std::fs::write(file.path(), content).unwrap();
    file
}

#[test]
fn predict_prints_the_same_answer_as_the_service() {
    let asked = crate::support::request(24).to_string();
    let request = file(&asked);
    let printed = dipcast(&[
        "predict",
        "--request",
        request.path().to_str().unwrap(),
        "--format",
        "json",
    ]);
    assert!(printed.status.success(), "{}", text(&printed.stderr));
    let runtime = tokio::runtime::Runtime::new().unwrap();
    let served = runtime.block_on(crate::support::post_json(
        &crate::support::service(),
        "/v1/predictions",
        asked,
    ));
    assert_eq!(text(&printed.stdout).trim_end(), served.text());
}

#[test]
fn predict_reads_a_file_of_weather_and_prints_a_table() {
    let weather: String = example("demo-weather.csv")
        .lines()
        .take(25)
        .map(|line| format!("{line}\n"))
        .collect();
    let (request, weather) = (
        file(&crate::support::upload(serde_json::Value::Null).to_string()),
        file(&weather),
    );
    let paths = (request.path().to_str().unwrap(), weather.path().to_str().unwrap());
    let printed = dipcast(&["predict", "--request", paths.0, "--weather", paths.1, "--format", "csv"]);
    assert!(printed.status.success(), "{}", text(&printed.stderr));
    assert_eq!(text(&printed.stdout).matches("\r\n").count(), 25);
}

#[test]
fn predict_tells_every_fault_and_fails() {
    let request = file("{\"device_exampel\": \"shelf-180\", \"weather\": {\"kind\": \"inline\"}}");
    let printed = dipcast(&["predict", "--request", request.path().to_str().unwrap()]);
    assert!(!printed.status.success() && printed.stdout.is_empty());
    let told = text(&printed.stderr);
    assert!(
        told.contains("did you mean \"device_example\"?") && told.contains("\"start\" is missing"),
        "{told}"
    );
}

#[test]
fn openapi_prints_the_committed_description() {
    let printed = dipcast(&["openapi"]);
    let committed = std::fs::read_to_string(concat!(env!("CARGO_MANIFEST_DIR"), "/openapi/v1.json")).unwrap();
    assert!(
        text(&printed.stdout) == committed,
        "openapi/v1.json is not what is printed"
    );
}

#[test]
fn serve_refuses_an_open_port_without_keys() {
    let printed = dipcast(&["serve", "--bind", "0.0.0.0:0"]);
    assert!(!printed.status.success());
    assert!(
        text(&printed.stderr).contains("--allow-anonymous"),
        "{}",
        text(&printed.stderr)
    );
}

#[test]
fn healthcheck_fails_where_nobody_listens() {
    let printed = dipcast(&["healthcheck", "--url", "http://127.0.0.1:9"]);
    assert!(!printed.status.success());
    assert!(
        text(&printed.stderr).contains("is not ready"),
        "{}",
        text(&printed.stderr)
    );
}

#[test]
fn the_demo_shows_a_year_and_how_to_repeat_it_and_goes_on_serving() {
    let mut program = Program::start(&["--demo"]);
    let shown = program.printed_until("Stop");
    assert!(shown.contains("an island that does not exist"), "{shown}");
    assert_eq!(
        shown.lines().filter(|line| line.starts_with("2026-")).count(),
        12,
        "{shown}"
    );
    let repeat = shown
        .lines()
        .find_map(|line| line.strip_prefix("Repeat"))
        .unwrap()
        .trim();
    let mut words = repeat.split(' ');
    assert_eq!(words.next(), Some("curl"), "{repeat}");
    let url = format!("http://{}/v1/predictions", program.address);
    assert!(words.any(|word| word == url), "{repeat}");
    for file in repeat.split('@').skip(1).map(|rest| rest.split(' ').next().unwrap()) {
        assert!(
            std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join(file).is_file(),
            "{file}"
        );
    }
    let healthy = dipcast(&["healthcheck", "--url", &format!("http://{}", program.address)]);
    assert!(healthy.status.success(), "{}", text(&healthy.stderr));
}

#[test]
fn serve_ends_in_ten_seconds_at_sigterm_with_half_a_request_open() {
    use std::io::Write;
    let mut program = Program::start(&[]);
    let mut half = program.connect();
    half.write_all(
        b"POST /v1/predictions HTTP/1.1\r\nHost: x\r\nContent-Type: application/json\r\nContent-Length: 100\r\n\r\n{",
    )
    .unwrap();
    let (code, took) = program.terminate();
    assert_eq!(code, Some(0));
    assert!(took < std::time::Duration::from_secs(10), "{took:?}");
}
