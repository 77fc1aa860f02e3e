//! Station pressure of every hour: as read, reduced from sea level, or the standard atmosphere.

use super::series::{Flag, Sightings};
use crate::model::air::standard_pressure_pa;
use crate::model::notes::Assumption;

const GRAVITY_M_S2: f64 = 9.80665;
/// Gas constant of dry air [J/(kg K)].
const DRY_AIR_J_KGK: f64 = 287.05;
/// Fall of temperature with height in the column below the station [K/m].
const LAPSE_K_M: f64 = 0.0065;
/// What vapour adds to the virtual temperature of that column [K/Pa]: 0.12 K/hPa.
const VAPOUR_K_PA: f64 = 0.12e-2;
/// Air of an hour without temperature, for its pressure only [K].
const STANDARD_TEMP_K: f64 = 288.15;

/// Station pressure [Pa] from pressure at mean sea level [Pa], elevation [m], air temperature [K] and vapour pressure [Pa]
/// at the station.
///
/// The reduction WMO-No. 8 and national services use below about 750 m, turned round: the column below the station is as
/// warm as the station, 6.5 K/km warmer downwards, moist. Services that take the mean of the last 12 hours' temperature,
/// or correct for plateaus, differ by 1 to 3 hPa at 400 m.
pub fn station_pressure_pa(sea_level_pa: f64, elevation_m: f64, temp_k: f64, vapour_pressure_pa: f64) -> f64 {
    let column_k = temp_k + LAPSE_K_M * elevation_m / 2.0 + VAPOUR_K_PA * vapour_pressure_pa;
    sea_level_pa * (-GRAVITY_M_S2 * elevation_m / (DRY_AIR_J_KGK * column_k)).exp()
}

/// Pressure of the hours as read, NaN = missing; `None` where no column was sent.
pub(super) struct HourlyPressure<'a> {
    pub read_pa: Option<Vec<f64>>,
    pub is_sea_level: bool,
    pub elevation_m: Option<f64>,
    pub temp_k: &'a [f64],
    pub vapour_pressure_pa: &'a [f64],
    pub row_of_hour: &'a [u32],
}

/// What was said on the way.
pub(super) struct Said<'a> {
    pub flags: &'a mut Vec<Flag>,
    pub assumptions: &'a mut Vec<Assumption>,
}

/// A station pressure [Pa] for every hour.
pub(super) fn of_station(mut hourly: HourlyPressure, said: &mut Said) -> Vec<f64> {
    let elevation_m = hourly.elevation_m.unwrap_or(0.0);
    match hourly.read_pa.take().filter(|read| read.iter().any(|p| !p.is_nan())) {
        None => standard(hourly.elevation_m, hourly.temp_k.len(), said),
        Some(mut read) => {
            fill_missing(&mut read, hourly.row_of_hour, said);
            if hourly.is_sea_level {
                reduce(&mut read, elevation_m, &hourly, said);
            } else {
                compare_with_elevation(&read, hourly.elevation_m, said);
            }
            read
        }
    }
}

fn standard(elevation_m: Option<f64>, hours: usize, said: &mut Said) -> Vec<f64> {
    let pressure_pa = standard_pressure_pa(elevation_m.unwrap_or(0.0));
    let place = elevation_m.map_or("0 m, since no elevation was given".to_string(), |e| format!("{e} m"));
    let value = format!("{:.1} hPa, ICAO standard atmosphere at {place}", pressure_pa / 100.0);
    said.assumptions
        .push(Assumption::new("air pressure, not sent", value, EFFECT));
    vec![pressure_pa; hours]
}

/// Wet bulb at 22 °C and 40 %: 13.90 °C at 0 m, 13.29 °C at 1600 m.
const EFFECT: &str = "cooling of the head: 0.4 K of wet bulb per 1000 m of elevation";

fn fill_missing(read: &mut [f64], row_of_hour: &[u32], said: &mut Said) {
    let mut missing = Sightings::default();
    for (at, _) in read.iter().enumerate().filter(|(_, p)| p.is_nan()) {
        missing.add(if row_of_hour[at] > 0 {
            row_of_hour[at] as usize
        } else {
            at + 1
        });
    }
    super::gaps::fill_all(read);
    let detail = "hours without air pressure; interpolated between the hours around them, which matters little";
    missing.flag_into(said.flags, "pressure_filled", detail);
}

fn reduce(read: &mut [f64], elevation_m: f64, hourly: &HourlyPressure, said: &mut Said) {
    for (at, pressure_pa) in read.iter_mut().enumerate() {
        let known = |value: f64, else_take: f64| if value.is_nan() { else_take } else { value };
        let temp_k = known(hourly.temp_k[at], STANDARD_TEMP_K);
        let vapour_pa = known(hourly.vapour_pressure_pa[at], 0.0);
        *pressure_pa = station_pressure_pa(*pressure_pa, elevation_m, temp_k, vapour_pa);
    }
    let value = match hourly.elevation_m {
        Some(elevation_m) => {
            format!("reduced from sea level to {elevation_m} m with the hour's temperature and vapour")
        }
        None => "taken as sea-level pressure, 0 m, since no elevation was given".to_string(),
    };
    said.assumptions
        .push(Assumption::new("station pressure", value, EFFECT));
}

/// Weather moves the barometer by up to about 7 % around the standard atmosphere, mostly by less than 3 %.
const PRESSURE_OFF: f64 = 0.06;

fn compare_with_elevation(read: &[f64], elevation_m: Option<f64>, said: &mut Said) {
    let Some(elevation_m) = elevation_m else { return };
    let (mean_pa, standard_pa) = (
        read.iter().sum::<f64>() / read.len() as f64,
        standard_pressure_pa(elevation_m),
    );
    if (mean_pa / standard_pa - 1.0).abs() > PRESSURE_OFF {
        let detail = format!(
            "the mean pressure of {:.0} hPa does not belong to {elevation_m} m (about {:.0} hPa); used as it is. Sea-level \
             pressure sent as station pressure, or a wrong elevation?",
            mean_pa / 100.0,
            standard_pa / 100.0
        );
        said.flags.push(Flag {
            code: "pressure_against_elevation",
            count: read.len(),
            rows: Vec::new(),
            detail,
        });
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn hourly(
        read_pa: Option<Vec<f64>>,
        is_sea_level: bool,
        elevation_m: Option<f64>,
    ) -> (Vec<f64>, Vec<Flag>, String) {
        let (mut flags, mut assumptions) = (Vec::new(), Vec::new());
        let hours = HourlyPressure {
            read_pa,
            is_sea_level,
            elevation_m,
            temp_k: &[288.15, f64::NAN],
            vapour_pressure_pa: &[1000.0, f64::NAN],
            row_of_hour: &[2, 0],
        };
        let pressure = of_station(
            hours,
            &mut Said {
                flags: &mut flags,
                assumptions: &mut assumptions,
            },
        );
        (
            pressure,
            flags,
            assumptions.first().map_or(String::new(), |a| a.value.clone()),
        )
    }

    #[test]
    fn a_missing_column_takes_the_standard_atmosphere_and_says_so() {
        let (pressure, _, said) = hourly(None, false, Some(1600.0));
        // ICAO standard atmosphere, 1600 m: 835.2 hPa (Doc 7488; remembered).
        assert!((pressure[1] - 83_524.0).abs() < 30.0, "{pressure:?}");
        assert!(said.contains("1600 m"), "{said}");
        assert!(
            hourly(Some(vec![f64::NAN; 2]), false, None)
                .2
                .contains("no elevation was given")
        );
    }

    #[test]
    fn missing_hours_are_filled_and_flagged() {
        let (pressure, flags, _) = hourly(Some(vec![100_000.0, f64::NAN]), false, Some(100.0));
        assert_eq!(pressure, [100_000.0, 100_000.0]);
        assert_eq!((flags[0].code, &flags[0].rows[..]), ("pressure_filled", &[2][..]));
    }

    /// The standard atmosphere itself: dry, 288.15 K at sea level, 6.5 K/km. At 500 m the ICAO table has 954.61 hPa and
    /// 284.9 K (remembered).
    #[test]
    fn reduction_meets_the_standard_atmosphere() {
        assert!((station_pressure_pa(101_325.0, 500.0, 284.9, 0.0) - 95_461.0).abs() < 15.0);
        assert_eq!(station_pressure_pa(101_325.0, 0.0, 284.9, 900.0), 101_325.0);
    }

    #[test]
    fn sea_level_pressure_sent_for_a_mountain_is_flagged() {
        assert_eq!(
            hourly(Some(vec![101_325.0; 2]), false, Some(1600.0)).1[0].code,
            "pressure_against_elevation"
        );
        let (pressure, flags, said) = hourly(Some(vec![101_325.0; 2]), true, Some(1600.0));
        assert!(flags.is_empty() && pressure[0] < 85_000.0 && said.contains("reduced from sea level"));
    }
}
