//! The same device with one uncertain number changed, for bands: cheap, because the geometry is shared.

use super::{Device, balance};

/// Largest share of the last possible lifted volume at which a changed device may still tip.
const LARGEST_SHARE: f64 = 0.999;
/// Least and greatest factor on the tip volume.
const FACTORS: (f64, f64) = (0.2, 5.0);

impl Device {
    /// The same device tipping at `factor` times the lifted volume; the factor is held to 0.2-5, a factor that is no
    /// number counts as 1.
    ///
    /// The result is held just below the volume at which the body runs out of liquid or the head is full, because beyond
    /// it there is no cycle. Where the balance follows from masses the whole lean moves with the factor and the volume at
    /// which the lift stops rising is found anew, so the tip volume follows the factor closely, not exactly.
    #[must_use]
    pub fn with_tip_volume_factor(&self, factor: f64) -> Self {
        let factor = if factor.is_finite() {
            factor.clamp(FACTORS.0, FACTORS.1)
        } else {
            1.0
        };
        let hydrostatics = self.hydrostatics.with_lean_volume_factor(factor);
        let most_m3 = LARGEST_SHARE * hydrostatics.last_volume_m3();
        let wanted_m3 = (factor * self.tip_volume_m3).min(most_m3);
        let tip_volume_m3 = if hydrostatics.leans() {
            balance::stops_rising_m3(&hydrostatics, wanted_m3).unwrap_or(wanted_m3)
        } else {
            wanted_m3
        };
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
