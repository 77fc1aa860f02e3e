//! What the samples vary: quasi-random draws from stated ranges.

use sobol_burley::sample;
use statrs::function::erf::erfc_inv;

use super::forcing::AirShift;
use super::request::{BandRange, BandRanges};
use crate::model::cycle::Tuning;
use crate::model::device::Device;

/// Quantiles beyond these are not drawn, so that no sample leaves its range by more than two fifths of its half-width.
const QUANTILES: (f64, f64) = (0.01, 0.99);
/// The standard normal's 95th percentile.
const Z95: f64 = 1.644_853_626_951_472_7;

/// One draw of everything uncertain.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Sample {
    pub(super) air: AirShift,
    pub(super) tuning: Tuning,
    tip_volume_factor: f64,
    vapour_reset: f64,
}

impl Sample {
    /// The draw number `index` of a seed.
    ///
    /// Points of an Owen-scrambled Sobol sequence [Burley2020]. A range's ends are its 5th and 95th percentiles:
    /// humidity is normal; the factors are log-normal, since halving and doubling are equally likely; the share
    /// `vapour_reset` is uniform and held within 0 and 1, since nothing is known of its middle.
    pub(super) fn draw(ranges: &BandRanges, index: usize, seed: u64) -> Self {
        let quantile = |dimension: u32| f64::from(sample(index as u32, dimension, folded(seed)));
        Self {
            air: AirShift {
                humidity: normal(ranges.humidity_points, quantile(0)) / 100.0,
                speed_factor: log_normal(ranges.air_speed_factor, quantile(1)),
            },
            tuning: Tuning {
                transfer_factor: log_normal(ranges.transfer_factor, quantile(2)),
                cup_factor: log_normal(ranges.cup_factor, quantile(3)),
            },
            tip_volume_factor: log_normal(ranges.tip_volume_factor, quantile(4)),
            vapour_reset: uniform(ranges.vapour_reset, quantile(5)).clamp(0.0, 1.0),
        }
    }

    /// The device of this draw.
    pub(super) fn device(&self, nominal: &Device) -> Device {
        nominal
            .with_tip_volume_factor(self.tip_volume_factor)
            .with_vapour_reset(self.vapour_reset)
    }
}

fn folded(seed: u64) -> u32 {
    (seed ^ (seed >> 32)) as u32
}

/// The standard normal's quantile, `sqrt(2) erf⁻¹(2 u - 1)`.
fn z(quantile: f64) -> f64 {
    let quantile = quantile.clamp(QUANTILES.0, QUANTILES.1);
    -std::f64::consts::SQRT_2 * erfc_inv(2.0 * quantile)
}

fn normal(range: BandRange, quantile: f64) -> f64 {
    let (middle, half) = ((range.high + range.low) / 2.0, (range.high - range.low) / 2.0);
    middle + half * z(quantile) / Z95
}

fn log_normal(range: BandRange, quantile: f64) -> f64 {
    let logs = BandRange {
        low: range.low.ln(),
        high: range.high.ln(),
    };
    normal(logs, quantile).exp()
}

/// Uniform, with 5 % of the draws on each side of the range.
fn uniform(range: BandRange, quantile: f64) -> f64 {
    range.low + (range.high - range.low) * (quantile - 0.05) / 0.9
}

#[cfg(test)]
mod tests {
    use super::*;

    const RANGE: BandRange = BandRange { low: 0.5, high: 2.0 };

    #[test]
    fn a_range_ends_at_its_percentiles() {
        for shape in [normal, log_normal, uniform] {
            assert!((shape(RANGE, 0.05) - 0.5).abs() < 1e-9);
            assert!((shape(RANGE, 0.95) - 2.0).abs() < 1e-9);
        }
        assert!((log_normal(RANGE, 0.5) - 1.0).abs() < 1e-9);
        assert!(log_normal(RANGE, 0.0) > 0.3);
    }

    /// A Sobol sequence puts one of each 32 draws into each 32nd of every range.
    #[test]
    fn thirty_two_draws_fill_every_range_evenly() {
        let draws: Vec<f64> = (0..32)
            .map(|i| Sample::draw(&BandRanges::default(), i, 1).vapour_reset)
            .collect();
        let below_middle = draws.iter().filter(|reset| **reset < 0.5).count();
        assert_eq!(below_middle, 16);
        assert!(draws.iter().all(|reset| (0.0..=1.0).contains(reset)));
    }

    #[test]
    fn a_seed_repeats_itself_and_another_differs() {
        let draw = |seed| Sample::draw(&BandRanges::default(), 3, seed);
        assert_eq!(draw(7), draw(7));
        assert_ne!(draw(7), draw(8));
        assert_ne!(draw(7), draw(7 + (1 << 40)));
    }

    #[test]
    fn a_range_without_width_is_its_value() {
        let fixed = BandRange { low: 0.3, high: 0.3 };
        assert_eq!(uniform(fixed, 0.77), 0.3);
        assert!((log_normal(fixed, 0.77) - 0.3).abs() < 1e-15);
    }
}
