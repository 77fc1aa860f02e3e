//! Hour to hour: temperature changes that weather hardly makes.

use super::series::{Flag, Sightings};

/// Hours apart and the change above which a reading is doubted [K] (WMO-No. 305, guide on quality control of hourly
/// surface data). Honest weather exceeds one of these in 0.1 to 1.4 % of hours, so it is a flag, not a fault.
const STEPS: [(usize, f64); 5] = [(1, 4.0), (2, 7.0), (3, 9.0), (6, 15.0), (12, 25.0)];

/// Whole tenths of a degree are not whole in binary: a change of exactly the limit must not count [K].
const ROUNDING_K: f64 = 1e-6;

/// Flags hours whose temperature differs too much from one of the hours before. NaN = missing, never flagged.
pub(super) fn flag_steps(temp_k: &[f64], row_of_hour: &[u32], flags: &mut Vec<Flag>) {
    let mut seen = Sightings::default();
    for (hour, here) in temp_k.iter().enumerate() {
        let steep =
            |&(back, limit_k): &(usize, f64)| hour >= back && (here - temp_k[hour - back]).abs() > limit_k + ROUNDING_K;
        if STEPS.iter().any(steep) {
            seen.add(row_of_hour[hour] as usize);
        }
    }
    let detail =
        "hours whose temperature changed by more than 4, 7, 9, 15 or 25 K in 1, 2, 3, 6 or 12 hours; used as they are";
    seen.flag_into(flags, "temperature_step", detail);
}

#[cfg(test)]
mod tests {
    use super::*;

    fn steps(temp_k: &[f64]) -> usize {
        let rows: Vec<u32> = (1..=temp_k.len() as u32).collect();
        let mut flags = Vec::new();
        flag_steps(temp_k, &rows, &mut flags);
        flags.first().map_or(0, |flag| flag.count)
    }

    #[test]
    fn each_limit_counts_above_and_not_at_its_value() {
        for (back, limit_k) in STEPS {
            // A straight ramp to the limit and no further: at most that change over `back` hours.
            let ramp = |total_k: f64| {
                (0..=back)
                    .map(|h| 280.0 + total_k * h as f64 / back as f64)
                    .collect::<Vec<_>>()
            };
            assert_eq!(steps(&ramp(limit_k)), 0, "{back} h");
            assert_eq!(steps(&ramp(limit_k + 0.1)), 1, "{back} h");
        }
    }

    #[test]
    fn missing_hours_are_never_flagged() {
        assert_eq!(steps(&[280.0, f64::NAN, 284.0]), 0);
    }
}
