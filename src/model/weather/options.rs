//! How readings are laid on hours.

use super::readings::WeatherFault;

/// Choices of [`super::regularise`]. The defaults are what the service states when nothing is asked for.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct RegulariseOptions {
    /// Elevation of the place [m above mean sea level, -430 to 9000]; `None`: 0 m is taken and said.
    pub elevation_m: Option<f64>,
    /// Longest run of missing hours that is interpolated; longer ones stay unknown [0 to 24].
    pub max_gap_hours: usize,
    /// Largest share of unknown hours that is not refused [0 to 1].
    pub max_unknown_share: f64,
    /// Most hours between the first and the last reading.
    pub max_hours: usize,
    /// Take columns that look swapped or in another unit as they are: flagged, not refused.
    pub accept_suspicious: bool,
}

impl Default for RegulariseOptions {
    fn default() -> Self {
        Self {
            elevation_m: None,
            max_gap_hours: 3,
            max_unknown_share: 0.1,
            max_hours: 1_000_000,
            accept_suspicious: false,
        }
    }
}

/// The Dead Sea shore and a little more than the highest summit [m].
const ELEVATION_RANGE_M: (f64, f64) = (-430.0, 9000.0);
/// Interpolating over more than a day would invent its daily course.
const LONGEST_GAP_HOURS: usize = 24;

impl RegulariseOptions {
    /// Everything wrong with the options themselves.
    pub fn faults(&self) -> Vec<WeatherFault> {
        let mut faults = Vec::new();
        let (low, high) = ELEVATION_RANGE_M;
        if let Some(elevation_m) = self.elevation_m.filter(|e| !(low..=high).contains(e)) {
            let detail = format!("elevation_m must be {low} to {high}; found {elevation_m}");
            faults.push(WeatherFault::whole("elevation_out_of_range", detail));
        }
        if self.max_gap_hours > LONGEST_GAP_HOURS {
            let detail = format!(
                "max_gap_hours must be 0 to {LONGEST_GAP_HOURS}; found {}",
                self.max_gap_hours
            );
            faults.push(WeatherFault::whole("gap_limit_out_of_range", detail));
        }
        if !(0.0..=1.0).contains(&self.max_unknown_share) {
            let detail = format!("max_unknown_share must be 0 to 1; found {}", self.max_unknown_share);
            faults.push(WeatherFault::whole("unknown_share_out_of_range", detail));
        }
        faults
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn defaults_are_sound_and_nonsense_is_named_all_at_once() {
        assert!(RegulariseOptions::default().faults().is_empty());
        let odd = RegulariseOptions {
            elevation_m: Some(f64::NAN),
            max_gap_hours: 100,
            max_unknown_share: -0.1,
            ..Default::default()
        };
        assert_eq!(odd.faults().len(), 3);
    }
}
