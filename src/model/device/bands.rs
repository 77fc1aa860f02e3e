//! The same device with one uncertain number changed, for bands: cheap, because the geometry is shared.

use super::{Device, balance};

/// Largest share of the last possible lifted volume at which a changed device may still tip.
const LARGEST_SHARE: f64 = 0.999;
/// Least and greatest factor on the tip volume.
const FACTORS: (f64, f64) = (0.2, 5.0);
/// Rounds in which the lean is moved until the tip volume fits, and how well it has to.
const LEAN_ROUNDS: usize = 8;
const LEAN_TOLERANCE: f64 = 1e-3;

impl Device {
    /// The same device tipping at `factor` times the lifted volume; the factor is held to 0.2-5, a factor that is no
    /// number counts as 1.
    ///
    /// The result is held just below the volume at which the body runs out of liquid or the head is full, because beyond
    /// it there is no cycle. Where the balance follows from masses the whole lean moves along, until the lift stops
    /// rising at the wanted volume within a thousandth; a device that leans by more than about 25 degrees before the tip
    /// can stay short of it.
    #[must_use]
    pub fn with_tip_volume_factor(&self, factor: f64) -> Self {
        let factor = if factor.is_finite() {
            factor.clamp(FACTORS.0, FACTORS.1)
        } else {
            1.0
        };
        let wanted_m3 = (factor * self.tip_volume_m3).min(LARGEST_SHARE * self.hydrostatics.last_volume_m3());
        if !self.hydrostatics.leans() {
            return Self {
                tip_volume_m3: wanted_m3,
                ..self.clone()
            };
        }
        let mut lean_factor = wanted_m3 / self.tip_volume_m3;
        let mut changed = self.with_lean_moved(lean_factor);
        for _ in 0..LEAN_ROUNDS {
            if (changed.tip_volume_m3 / wanted_m3 - 1.0).abs() < LEAN_TOLERANCE {
                break;
            }
            lean_factor *= wanted_m3 / changed.tip_volume_m3;
            changed = self.with_lean_moved(lean_factor);
        }
        changed
    }

    /// The lean moved to `factor` times the volumes; it tips where the lift stops rising, at the latest leaning as before.
    fn with_lean_moved(&self, factor: f64) -> Self {
        let hydrostatics = self.hydrostatics.with_lean_volume_factor(factor);
        let latest_m3 = (factor * self.tip_volume_m3).min(LARGEST_SHARE * hydrostatics.last_volume_m3());
        let tip_volume_m3 = balance::stops_rising_m3(&hydrostatics, latest_m3).unwrap_or(latest_m3);
        Self {
            hydrostatics,
            tip_volume_m3,
            ..self.clone()
        }
    }

    /// The same device with another share of the temperature difference closed by vapour in a dip, held to 0-1; a share
    /// that is no number changes nothing.
    #[must_use]
    pub fn with_vapour_reset(&self, vapour_reset: f64) -> Self {
        let mut changed = self.clone();
        if vapour_reset.is_finite() {
            changed.dip.vapour_reset = vapour_reset.clamp(0.0, 1.0);
        }
        changed
    }
}
