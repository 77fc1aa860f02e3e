//! Weather that needs no network: invented climates by a formula, the same for the same place and hour on every call.
//!
//! With `d` the days since 1970-01-01T00:00Z, `s` the solar hour (UTC plus a 24th of a day for each 15 degrees east),
//! `n_k` a smooth noise between -1 and 1 with nodes every `k` days, drawn from coordinates, climate and node number:
//!
//! ```text
//! season      = -cos(2 pi (d - 20) / 365.2425), its sign turned south of the equator
//! daily       = cos(2 pi (s - 15) / 24)
//! temperature = mean + seasonal * season + diurnal * daily + spell * n_3 + 0.5 n_0.25              [degC]
//! depression  = mean + seasonal * season + diurnal * daily + spell * n_2.5, at least 0.3           [K]
//! humidity    = saturation pressure(temperature - depression) / saturation pressure(temperature)   [-]
//! wind        = mean * (1 + 0.6 n_1.5 + 0.2 daily), at least 0.2                                   [m/s]
//! pressure    = standard atmosphere at the elevation * (1 + 0.012 n_4)                             [Pa]
//! short-wave  = clearness * (1 + 0.5 n_2) * 1361 * (1 + 0.033 cos(2 pi n / 365)) * sin(height)     [W/m2]
//! ```
//!
//! The sun's height is that of the middle of the hour: declination 23.45 degrees * sin(2 pi (284 + n) / 365) on the n-th
//! day of the year [Cooper1969], eccentricity and height as in [DuffieBeckman2013], eq. 1.4.1 and 1.6.5; solar constant
//! [KoppLean2011]. Short-wave readings are means of the hour that follows, all others instants.

use std::f64::consts::TAU;

use super::coordinates::Coordinates;
use super::facts::FIXTURE;
use super::report::{FetchedWeather, Nature, Provenance, Served, Stretch};
use super::span::{DAY_S, HourSpan};
use crate::model::air::{saturation_pressure_pa, standard_pressure_pa};
use crate::model::notes::Assumption;
use crate::model::weather::{Label, RawReadings, WeatherFault};

/// An invented climate.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Climate {
    /// Hot dry summers, cold winters, wide days.
    DryContinental,
    /// Warm and moist all year, by the sea.
    HumidCoast,
    /// Mild, changeable, rather moist.
    Temperate,
    /// Long frost, short summers.
    Cold,
}

/// The numbers of a climate; those of the dew point's depression after those of the temperature.
struct Recipe {
    mean_c: f64,
    seasonal_k: f64,
    diurnal_k: f64,
    spell_k: f64,
    depression_k: f64,
    depression_seasonal_k: f64,
    depression_diurnal_k: f64,
    depression_spell_k: f64,
    wind_m_s: f64,
    clearness: f64,
}

impl Climate {
    /// All of them.
    pub const ALL: [Self; 4] = [Self::DryContinental, Self::HumidCoast, Self::Temperate, Self::Cold];

    /// Its name in requests.
    pub fn name(self) -> &'static str {
        match self {
            Self::DryContinental => "dry_continental",
            Self::HumidCoast => "humid_coast",
            Self::Temperate => "temperate",
            Self::Cold => "cold",
        }
    }

    fn recipe(self) -> Recipe {
        let row = |[mean_c, seasonal_k, diurnal_k, spell_k]: [f64; 4],
                   depression: [f64; 4],
                   [wind_m_s, clearness]: [f64; 2]| Recipe {
            mean_c,
            seasonal_k,
            diurnal_k,
            spell_k,
            depression_k: depression[0],
            depression_seasonal_k: depression[1],
            depression_diurnal_k: depression[2],
            depression_spell_k: depression[3],
            wind_m_s,
            clearness,
        };
        match self {
            Self::DryContinental => row([14.0, 13.0, 7.0, 4.0], [12.0, 5.0, 5.0, 4.0], [3.0, 0.60]),
            Self::HumidCoast => row([24.0, 5.0, 3.0, 1.5], [4.5, 0.5, 2.0, 2.0], [4.0, 0.50]),
            Self::Temperate => row([10.5, 8.0, 4.0, 4.0], [5.0, 1.5, 3.0, 2.5], [3.5, 0.42]),
            Self::Cold => row([-4.0, 15.0, 4.0, 6.0], [3.5, 1.5, 1.5, 1.5], [3.0, 0.45]),
        }
    }
}

/// First and last year that can be asked for.
const YEARS: (&str, &str) = ("1900", "2199");
/// 1900-01-01 and 2200-01-01 [unix s].
const COVERAGE: HourSpan = HourSpan {
    from_unix_s: -2_208_988_800,
    to_unix_s: 7_258_118_400,
};

/// Why these hours cannot be had, if they cannot.
pub fn coverage_fault(span: &HourSpan) -> Option<WeatherFault> {
    let fits = span.common(&COVERAGE) == Some(*span);
    (!fits).then(|| {
        let detail = format!(
            "the built-in source knows the years {} to {}; ask for hours within them",
            YEARS.0, YEARS.1
        );
        WeatherFault::column("endpoint/from", "beyond_coverage", detail)
    })
}

/// The weather of a place; `elevation_m` [m] is for its pressure.
pub fn weather(climate: Climate, at: Coordinates, elevation_m: Option<f64>, span: HourSpan) -> FetchedWeather {
    let sky = Sky {
        recipe: climate.recipe(),
        seed: seed(climate, &at),
        at,
        pressure_pa: standard_pressure_pa(elevation_m.unwrap_or(0.0)),
    };
    let air: Vec<Air> = span.starts().map(|unix_s| sky.air(unix_s)).collect();
    let column = |of: fn(&Air) -> f64| Some(air.iter().map(of).collect::<Vec<f64>>());
    let readings = RawReadings {
        air_temp_k: air.iter().map(|air| air.temp_k).collect(),
        relative_humidity: column(|air| air.humidity),
        pressure_pa: column(|air| air.pressure_pa),
        wind_speed_m_s: column(|air| air.wind_m_s),
        shortwave_w_m2: column(|air| air.shortwave_w_m2),
        shortwave_label: Some(Label::MeanOfFollowingHour),
        assumptions: assumptions(climate, elevation_m),
        ..RawReadings::hourly(span.from_unix_s, span.hours())
    };
    FetchedWeather {
        readings,
        elevation_m,
        gap_hours: None,
        provenance: provenance(at, elevation_m, span),
    }
}

fn assumptions(climate: Climate, elevation_m: Option<f64>) -> Vec<Assumption> {
    let mut said = vec![Assumption::new(
        "weather",
        format!(
            "invented: climate {} of the built-in source, no measurement",
            climate.name()
        ),
        "everything in this answer: it is for trying out, not for planning a site",
    )];
    if elevation_m.is_none() {
        said.push(Assumption::new(
            "elevation, not given",
            "0 m",
            "pressure of the invented air: cooling of the head by 0.4 K of wet bulb per 1000 m",
        ));
    }
    said
}

fn provenance(at: Coordinates, elevation_m: Option<f64>, span: HourSpan) -> Provenance {
    Provenance {
        facts: &FIXTURE,
        asked: at,
        asked_elevation_m: elevation_m,
        served: Served { at, elevation_m },
        span,
        stretches: vec![Stretch {
            span,
            nature: Nature::Invented,
            fetched_unix_s: None,
            stale: false,
            hours_missing: 0,
        }],
    }
}

struct Sky {
    recipe: Recipe,
    seed: u64,
    at: Coordinates,
    pressure_pa: f64,
}

struct Air {
    temp_k: f64,
    humidity: f64,
    pressure_pa: f64,
    wind_m_s: f64,
    shortwave_w_m2: f64,
}

impl Sky {
    fn air(&self, unix_s: i64) -> Air {
        let recipe = &self.recipe;
        let days = unix_s as f64 / DAY_S as f64;
        let north = if self.at.latitude_deg < 0.0 { -1.0 } else { 1.0 };
        let season = -north * (TAU * (days - 20.0) / 365.2425).cos();
        let daily = (TAU * (self.solar_day(days) - 15.0 / 24.0)).cos();
        let temp_c = recipe.mean_c
            + recipe.seasonal_k * season
            + recipe.diurnal_k * daily
            + recipe.spell_k * self.noise(1, days / 3.0)
            + 0.5 * self.noise(2, days * 4.0);
        let depression_k = recipe.depression_k
            + recipe.depression_seasonal_k * season
            + recipe.depression_diurnal_k * daily
            + recipe.depression_spell_k * self.noise(3, days / 2.5);
        let temp_k = rounded(temp_c, 100.0) + 273.15;
        let dew_point_k = temp_k - depression_k.max(0.3);
        let wind_m_s = recipe.wind_m_s * (1.0 + 0.6 * self.noise(4, days / 1.5) + 0.2 * daily);
        Air {
            temp_k,
            humidity: rounded(
                saturation_pressure_pa(dew_point_k) / saturation_pressure_pa(temp_k),
                10_000.0,
            ),
            pressure_pa: rounded(self.pressure_pa * (1.0 + 0.012 * self.noise(5, days / 4.0)), 1.0),
            wind_m_s: rounded(wind_m_s.max(0.2), 100.0),
            shortwave_w_m2: rounded(self.shortwave_w_m2(days + 0.5 / 24.0), 10.0),
        }
    }

    /// Days of mean solar time.
    fn solar_day(&self, days: f64) -> f64 {
        days + self.at.longitude_deg / 360.0
    }

    /// On the level, under this climate's clouds [W/m2].
    fn shortwave_w_m2(&self, days: f64) -> f64 {
        let day_of_year = days.rem_euclid(365.2425).floor() + 1.0;
        let declination = 23.45_f64.to_radians() * (TAU * (284.0 + day_of_year) / 365.0).sin();
        let latitude = self.at.latitude_deg.to_radians();
        let hour_angle = TAU * (self.solar_day(days).rem_euclid(1.0) - 0.5);
        let sine_of_height = latitude.sin() * declination.sin() + latitude.cos() * declination.cos() * hour_angle.cos();
        let clearness = (self.recipe.clearness * (1.0 + 0.5 * self.noise(6, days / 2.0))).min(0.8);
        let outside_air_w_m2 = 1361.0 * (1.0 + 0.033 * (TAU * day_of_year / 365.0).cos());
        clearness * outside_air_w_m2 * sine_of_height.max(0.0)
    }

    /// Between -1 and 1, smooth, the same for the same place and moment. Nodes lie at whole numbers.
    fn noise(&self, kind: u64, position: f64) -> f64 {
        let node = position.floor();
        let blend = 0.5 - 0.5 * (TAU / 2.0 * (position - node)).cos();
        let (before, after) = (self.drawn(kind, node as i64), self.drawn(kind, node as i64 + 1));
        before + (after - before) * blend
    }

    fn drawn(&self, kind: u64, node: i64) -> f64 {
        let bits = mixed(self.seed ^ mixed(kind ^ mixed(node as u64)));
        (bits >> 11) as f64 / (1u64 << 52) as f64 - 1.0
    }
}

fn seed(climate: Climate, at: &Coordinates) -> u64 {
    let whole = |degrees: f64| (degrees * 1e4).round() as i64 as u64;
    mixed(whole(at.latitude_deg) ^ mixed(whole(at.longitude_deg) ^ mixed(climate as u64)))
}

/// The finishing step of the SplitMix64 generator [Steele2014].
fn mixed(number: u64) -> u64 {
    let mut bits = number.wrapping_add(0x9e37_79b9_7f4a_7c15);
    bits = (bits ^ (bits >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
    bits = (bits ^ (bits >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
    bits ^ (bits >> 31)
}

/// Rounded like a thermometer's reading, so that the last bits of a library's sine do not show.
fn rounded(value: f64, steps: f64) -> f64 {
    (value * steps).round() / steps
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::intake::endpoints::HOUR_S;

    fn at(latitude: f64, longitude: f64) -> Coordinates {
        Coordinates::new(latitude, longitude).unwrap()
    }

    fn year(climate: Climate, latitude: f64) -> RawReadings {
        let span = HourSpan {
            from_unix_s: 1_735_689_600,
            to_unix_s: 1_735_689_600 + 8760 * HOUR_S,
        };
        weather(climate, at(latitude, 11.0), Some(200.0), span).readings
    }

    fn mean(values: &[f64]) -> f64 {
        values.iter().sum::<f64>() / values.len() as f64
    }

    /// First output of the generator from state 0 (remembered; printed in many test suites).
    #[test]
    fn the_mixer_is_the_published_one() {
        assert_eq!(mixed(0), 0xe220_a839_7b1d_cdaf);
    }

    #[test]
    fn the_same_hour_is_the_same_in_any_span() {
        let span = |from: i64, hours: i64| HourSpan {
            from_unix_s: from * HOUR_S,
            to_unix_s: (from + hours) * HOUR_S,
        };
        let long = weather(Climate::Temperate, at(50.0, 8.0), None, span(400_000, 100)).readings;
        let short = weather(Climate::Temperate, at(50.0, 8.0), None, span(400_060, 10)).readings;
        assert_eq!(long.air_temp_k[60..70], short.air_temp_k[..]);
        let elsewhere = weather(Climate::Temperate, at(50.0, 8.1), None, span(400_060, 10)).readings;
        assert_ne!(elsewhere.air_temp_k, short.air_temp_k);
    }

    #[test]
    fn climates_are_what_they_are_called() {
        let (dry, humid) = (year(Climate::DryContinental, 40.0), year(Climate::HumidCoast, 25.0));
        let (mild, cold) = (year(Climate::Temperate, 50.0), year(Climate::Cold, 62.0));
        let humidity = |raw: &RawReadings| mean(raw.relative_humidity.as_ref().unwrap());
        assert!(
            humidity(&dry) < 0.60 && humidity(&humid) > 0.70,
            "{} {}",
            humidity(&dry),
            humidity(&humid)
        );
        assert!(mean(&cold.air_temp_k) < 273.15 && mean(&humid.air_temp_k) > 293.15);
        let july = |raw: &RawReadings| mean(&raw.air_temp_k[181 * 24..212 * 24]);
        let january = |raw: &RawReadings| mean(&raw.air_temp_k[..31 * 24]);
        assert!(july(&mild) - january(&mild) > 10.0, "summer is in July in the north");
        let south = year(Climate::Temperate, -50.0);
        assert!(january(&south) - july(&south) > 10.0, "and in January in the south");
    }

    #[test]
    fn every_reading_is_plausible() {
        for climate in Climate::ALL {
            let raw = year(climate, 45.0);
            let within = |values: &[f64], low: f64, high: f64| values.iter().all(|value| (low..=high).contains(value));
            assert!(within(&raw.air_temp_k, 230.0, 320.0), "{climate:?}");
            assert!(
                within(raw.relative_humidity.as_ref().unwrap(), 0.03, 1.0),
                "{climate:?}"
            );
            assert!(within(raw.wind_speed_m_s.as_ref().unwrap(), 0.2, 15.0), "{climate:?}");
            // The solar constant is the most there can be.
            assert!(within(raw.shortwave_w_m2.as_ref().unwrap(), 0.0, 1361.0), "{climate:?}");
            assert!(
                within(raw.pressure_pa.as_ref().unwrap(), 96_000.0, 101_000.0),
                "{climate:?}"
            );
        }
    }

    /// Noon of the solar day at longitude 90 east is 06:00 UTC; at the pole the summer sun shines all day, the winter sun never.
    #[test]
    fn the_sun_keeps_its_hours() {
        // 2025-06-21 and 2025-12-21.
        let day = |latitude: f64, from_unix_s: i64| {
            let span = HourSpan {
                from_unix_s,
                to_unix_s: from_unix_s + 24 * HOUR_S,
            };
            let raw = weather(Climate::Temperate, at(latitude, 90.0), None, span).readings;
            raw.shortwave_w_m2.unwrap()
        };
        let june = day(30.0, 1_750_464_000);
        let brightest = (0..24).max_by(|a, b| june[*a].total_cmp(&june[*b])).unwrap();
        assert!((5..=7).contains(&brightest), "{june:?}");
        assert_eq!(june[18], 0.0, "midnight there");
        assert!(day(89.0, 1_750_464_000).iter().all(|sun| *sun > 0.0));
        assert!(day(89.0, 1_766_275_200).iter().all(|sun| *sun == 0.0));
    }

    #[test]
    fn years_far_away_are_refused() {
        let span = HourSpan {
            from_unix_s: COVERAGE.from_unix_s - HOUR_S,
            to_unix_s: 0,
        };
        assert_eq!(coverage_fault(&span).unwrap().code, "beyond_coverage");
        assert_eq!(coverage_fault(&COVERAGE), None);
    }
}
