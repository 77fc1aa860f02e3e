//! How much of wind and sun reaches the device.

use super::definition::{AtDevice, Outdoors, Place};
use crate::model::notes::Assumption;
use crate::model::weather::HourlySeries;

/// Air speed at a device outdoors over wind speed at a station's 10 m where nothing is said: the logarithmic profile over
/// a town of roughness 0.5 m, from 10 m down to 1.5 m, gives 0.37; ours, nothing measured.
pub(super) const DEFAULT_SHELTER: f64 = 0.35;
/// Air speed taken in a case [m/s]: ours, nothing measured.
pub(super) const CASE_AIR_SPEED_M_S: f64 = 0.05;
/// Air speed taken outdoors where no wind was read [m/s]: ours, as near an open door.
pub(super) const NO_WIND_AIR_SPEED_M_S: f64 = 0.4;
/// Air speed taken where the readings were taken [m/s]: an ordinary room's.
pub(super) const AT_DEVICE_AIR_SPEED_M_S: f64 = 0.1;

/// One number for every hour, and what had to be said about it.
pub(super) struct Column {
    pub(super) values: Vec<f64>,
    pub(super) said: Option<Assumption>,
}

const SPEED: &str = "air speed at the device";
const SPEED_EFFECT: &str =
    "cycles and water: half or twice as much moves the period by about a fifth in an ordinary room";

/// Air speed at the device [m/s], hour by hour.
pub(super) fn air_speed(place: &Place, series: &HourlySeries) -> Column {
    let hours = series.known.len();
    let steady = |given: Option<f64>, default: f64, why: &str| Column {
        values: vec![given.unwrap_or(default); hours],
        said: given
            .is_none()
            .then(|| Assumption::new(SPEED, format!("{default} m/s{why}"), SPEED_EFFECT)),
    };
    match place {
        Place::AtDevice(at) => steady(at.air_speed_m_s, AT_DEVICE_AIR_SPEED_M_S, ""),
        Place::Room(room) => steady(
            room.air_speed_m_s,
            room.spot.air_speed_m_s(),
            ", as its spot in the room has it",
        ),
        Place::Case(case) => steady(case.air_speed_m_s, CASE_AIR_SPEED_M_S, ", as in a closed case"),
        Place::Outdoors(outdoors) => match (outdoors.air_speed_m_s, &series.wind_speed_m_s) {
            (None, Some(wind)) => sheltered(outdoors, wind, &series.known),
            (given, _) => steady(given, NO_WIND_AIR_SPEED_M_S, ": no wind was read"),
        },
    }
}

/// Wind times shelter; an hour without wind takes the mean of the others.
fn sheltered(outdoors: &Outdoors, wind_m_s: &[f64], known: &[bool]) -> Column {
    let factor = outdoors.shelter_factor.unwrap_or(DEFAULT_SHELTER);
    let read: Vec<f64> = wind_m_s.iter().copied().filter(|speed| !speed.is_nan()).collect();
    let mean_m_s = if read.is_empty() {
        NO_WIND_AIR_SPEED_M_S / DEFAULT_SHELTER
    } else {
        read.iter().sum::<f64>() / read.len() as f64
    };
    let speed = |wind: &f64| factor * if wind.is_nan() { mean_m_s } else { *wind };
    let missing = (0..wind_m_s.len())
        .filter(|at| known[*at] && wind_m_s[*at].is_nan())
        .count();
    Column {
        values: wind_m_s.iter().map(speed).collect(),
        said: said_of_wind(outdoors.shelter_factor, missing, mean_m_s),
    }
}

fn said_of_wind(given: Option<f64>, missing: usize, mean_m_s: f64) -> Option<Assumption> {
    let factor = given.is_none().then(|| {
        format!("{DEFAULT_SHELTER} of the wind that was read: a sheltered spot 1.5 m above the ground of a town")
    });
    let gaps =
        (missing > 0).then(|| format!("{missing} h without wind taken at the mean of the others, {mean_m_s:.1} m/s"));
    let parts: Vec<String> = factor.into_iter().chain(gaps).collect();
    (!parts.is_empty()).then(|| Assumption::new(SPEED, parts.join("; "), SPEED_EFFECT))
}

/// Irradiance that reaches the device [W/m²], hour by hour; none where there is none.
pub(super) fn shortwave(place: &Place, series: &HourlySeries) -> (Option<Vec<f64>>, Option<Assumption>) {
    let exposure = exposure(place);
    if exposure <= 0.0 {
        return (
            None,
            series
                .shortwave_w_m2
                .as_ref()
                .map(|_| said_of_sun("none reaches the device")),
        );
    }
    let Some(read) = &series.shortwave_w_m2 else {
        return (None, Some(said_of_sun("none was read, so none is counted")));
    };
    let missing = (0..read.len())
        .filter(|at| series.known[*at] && read[*at].is_nan())
        .count();
    let reaching = read
        .iter()
        .map(|value| exposure * value.max(0.0))
        .map(|v| if v.is_nan() { 0.0 } else { v });
    let mut value = format!(
        "{} % of what falls on the level, spread evenly over head and body (a quarter of the surface counts)",
        100.0 * exposure
    );
    if missing > 0 {
        value += &format!("; none in {missing} h in which it was not read");
    }
    (Some(reaching.collect()), Some(said_of_sun(&value)))
}

fn said_of_sun(value: &str) -> Assumption {
    Assumption::new(
        "sunlight on the device",
        value,
        "sun on the body drives it, sun on the head slows it; a wet dark felt takes up most of what it gets",
    )
}

fn exposure(place: &Place) -> f64 {
    match place {
        Place::AtDevice(AtDevice { shortwave_exposure, .. }) => shortwave_exposure.unwrap_or(0.0),
        Place::Outdoors(outdoors) => outdoors.shortwave_exposure.unwrap_or(1.0),
        Place::Room(room) => room.shortwave_exposure.unwrap_or(0.0),
        Place::Case(case) => exposure(&case.inside),
    }
}
