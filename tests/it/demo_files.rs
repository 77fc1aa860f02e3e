//! The demo's invented year is what its formula says.

use std::f64::consts::TAU;
use std::fmt::Write;

/// The formula, as told in `openapi/examples/README.md`; `hour` counts from 2026-01-01T00:00:00Z.
fn invented(hour: u32) -> (f64, f64, f64) {
    let day = f64::from(hour) / 24.0;
    let season = -(TAU * (day - 20.0) / 365.0).cos();
    let daily = (TAU * (f64::from(hour % 24) - 15.0) / 24.0).cos();
    let spell = (TAU * day / 5.3).sin() + 0.6 * (TAU * day / 11.7 + 1.0).sin();
    let temperature_c = 16.5 + 4.5 * season + 1.2 * daily + 0.9 * spell;
    let humidity_pct = 64.0 + 13.0 * (TAU * day / 7.1 + 0.5).sin() + 10.0 * (TAU * day / 3.7 + 1.3).sin() - 5.0 * daily
        + 4.0 * (TAU * day / 29.0).sin();
    let pressure_hpa = 1011.0 + 9.0 * (TAU * day / 9.1 + 0.4).sin();
    (temperature_c, humidity_pct.clamp(30.0, 98.0), pressure_hpa)
}

#[test]
fn the_weather_of_the_demo_follows_its_formula() {
    let mut text = "time,air_temperature_c,relative_humidity_pct,air_pressure_hpa\n".to_owned();
    for hour in 0..8760 {
        let time = chrono::DateTime::from_timestamp(1_767_225_600 + i64::from(hour) * 3600, 0).unwrap();
        let (temperature_c, humidity_pct, pressure_hpa) = invented(hour);
        let time = time.to_rfc3339_opts(chrono::SecondsFormat::Secs, true);
        writeln!(text, "{time},{temperature_c:.1},{humidity_pct:.1},{pressure_hpa:.1}").unwrap();
    }
    let committed = crate::support::example("demo-weather.csv");
    let differing = text
        .lines()
        .zip(committed.lines())
        .filter(|(made, found)| made != found)
        .count();
    assert_eq!((differing, committed.lines().count()), (0, 8761));
}
