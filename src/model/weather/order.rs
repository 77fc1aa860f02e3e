//! Readings into the order of time; several readings of one moment.

use super::readings::{RawReadings, WeatherFault};
use super::series::{ROWS_NAMED, Sightings};
use super::zone::instant_text;

/// Two readings of the same moment further apart than this cannot be of the same place [K]: it is the change WMO-No. 305
/// already doubts over a whole hour.
const CONTRADICTION_K: f64 = 4.0;

/// Sorts by time, keeping the order of equal times; flags rows that stood out of order.
pub(super) fn sort_by_time(raw: &mut RawReadings) {
    let mut backwards = Sightings::default();
    for at in 1..raw.len() {
        if raw.time_unix_s[at] < raw.time_unix_s[at - 1] {
            backwards.add(raw.row[at] as usize);
        }
    }
    if backwards.count() == 0 {
        return;
    }
    let mut order: Vec<usize> = (0..raw.len()).collect();
    order.sort_by_key(|&at| raw.time_unix_s[at]);
    raw.time_unix_s = order.iter().map(|&at| raw.time_unix_s[at]).collect();
    raw.row = order.iter().map(|&at| raw.row[at]).collect();
    for column in raw.columns_mut() {
        *column = order.iter().map(|&at| column[at]).collect();
    }
    let detail = "rows that are earlier than the one before them; all rows were sorted by time";
    backwards.flag_into(&mut raw.flags, "unsorted_rows", detail);
}

/// Flags moments with several readings (they are averaged later) and refuses contradictory ones. Needs sorted readings.
pub(super) fn check_repeats(raw: &mut RawReadings) -> Vec<WeatherFault> {
    let mut repeats = Sightings::default();
    let (mut faults, mut contradictions) = (Vec::new(), 0);
    for at in 1..raw.len() {
        if raw.time_unix_s[at] != raw.time_unix_s[at - 1] {
            continue;
        }
        repeats.add(raw.row[at] as usize);
        if (raw.air_temp_k[at] - raw.air_temp_k[at - 1]).abs() > CONTRADICTION_K {
            contradictions += 1;
            if contradictions <= ROWS_NAMED {
                faults.push(contradiction(raw, at));
            }
        }
    }
    if contradictions > ROWS_NAMED {
        faults.push(WeatherFault::whole(
            "contradictory_rows",
            format!("{contradictions} such pairs in all"),
        ));
    }
    let detail = "rows with a time that is there already; readings of the same time are averaged";
    repeats.flag_into(&mut raw.flags, "repeated_times", detail);
    faults
}

fn contradiction(raw: &RawReadings, at: usize) -> WeatherFault {
    let (first_k, second_k) = (raw.air_temp_k[at - 1], raw.air_temp_k[at]);
    let detail = format!(
        "{} is given twice (rows {} and {}) with air temperatures {:.1} K apart, more than {CONTRADICTION_K} K: several \
         stations, sensors or report types in one file? Choose one with `rows`, or remove the wrong row",
        instant_text(raw.time_unix_s[at]),
        raw.row[at - 1],
        raw.row[at],
        (second_k - first_k).abs(),
    );
    WeatherFault::row(
        raw.row[at] as usize,
        Some("air_temperature"),
        "contradictory_rows",
        detail,
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    fn readings(times: &[i64], temps_k: &[f64]) -> RawReadings {
        RawReadings {
            time_unix_s: times.to_vec(),
            row: (2..2 + times.len() as u32).collect(),
            air_temp_k: temps_k.to_vec(),
            relative_humidity: Some(temps_k.iter().map(|t| t / 1000.0).collect()),
            ..Default::default()
        }
    }

    #[test]
    fn rows_out_of_order_are_sorted_with_their_values_and_flagged() {
        let mut raw = readings(&[7200, 0, 3600], &[282.0, 280.0, 281.0]);
        sort_by_time(&mut raw);
        assert_eq!(raw.time_unix_s, [0, 3600, 7200]);
        assert_eq!(raw.air_temp_k, [280.0, 281.0, 282.0]);
        assert_eq!(raw.relative_humidity.unwrap(), [0.280, 0.281, 0.282]);
        assert_eq!(raw.row, [3, 4, 2]);
        assert_eq!((raw.flags[0].code, &raw.flags[0].rows[..]), ("unsorted_rows", &[3][..]));
    }

    #[test]
    fn repeated_times_are_flagged_and_contradictions_refused() {
        let mut raw = readings(&[0, 0, 3600, 3600], &[280.0, 281.0, 280.0, 290.0]);
        let faults = check_repeats(&mut raw);
        assert_eq!(raw.flags[0].count, 2);
        assert_eq!((faults.len(), faults[0].row), (1, Some(5)));
        assert!(faults[0].detail.contains("rows 4 and 5"), "{}", faults[0].detail);
    }

    #[test]
    fn many_contradictions_are_counted_after_twenty() {
        let times: Vec<i64> = (0..100).map(|i| i / 2 * 3600).collect();
        let temps: Vec<f64> = (0..100).map(|i| 280.0 + 10.0 * f64::from(i % 2)).collect();
        let faults = check_repeats(&mut readings(&times, &temps));
        assert_eq!(faults.len(), 21);
        assert!(faults[20].detail.contains("50 such pairs"));
    }
}
