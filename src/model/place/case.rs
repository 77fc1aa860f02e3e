//! The books of a display case: vapour in its air, dew on its glass.

use super::moisture::VAPOUR_GAS_CONSTANT_J_KGK;
use crate::model::air::saturation_pressure_pa;

/// A case in SI.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Case {
    /// Volume of air [m³].
    pub volume_m3: f64,
    /// Air exchanged with that around it, as a share of its volume [1/s].
    pub air_changes_1_s: f64,
    /// Devices of the predicted kind in it.
    pub devices: f64,
    /// Vapour from anything else [kg/s].
    pub other_vapour_kg_s: f64,
}

/// The air in a case, and what has condensed on its glass.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct CaseAir {
    /// Vapour pressure [Pa].
    pub vapour_pa: f64,
    /// Dew on the glass [kg]; it goes back into the air as soon as that can take it.
    pub dew_kg: f64,
}

impl Case {
    /// Vapour pressure [Pa] that a mass of vapour [kg] makes in the case at a temperature [K].
    pub fn pressure_of_pa(&self, vapour_kg: f64, temp_k: f64) -> f64 {
        vapour_kg * VAPOUR_GAS_CONSTANT_J_KGK * temp_k / self.volume_m3
    }

    /// Vapour that leaves with the air exchanged in a time [kg], inside at `inside_pa` and outside at `outside_pa` [Pa]
    /// all through it; negative where it comes in.
    pub fn vented_kg(&self, inside_pa: f64, outside_pa: f64, temp_k: f64, duration_s: f64) -> f64 {
        let exchanged_m3 = self.volume_m3 * self.air_changes_1_s * duration_s;
        exchanged_m3 * (inside_pa - outside_pa) / (VAPOUR_GAS_CONSTANT_J_KGK * temp_k)
    }

    /// The air after a net gain of water [kg] at a temperature [K]: what it cannot hold lies as dew, and dew makes up for
    /// what is missing.
    ///
    /// The vapour pressure of the case's air does not change with its temperature alone: warmed air leaves through the
    /// gaps with its share of vapour, at constant total pressure.
    pub fn after(&self, before: CaseAir, gained_kg: f64, temp_k: f64) -> CaseAir {
        let all_pa = before.vapour_pa + self.pressure_of_pa(before.dew_kg + gained_kg, temp_k);
        let vapour_pa = all_pa.min(saturation_pressure_pa(temp_k)).max(0.0);
        let dew_kg = (all_pa - vapour_pa).max(0.0) * self.volume_m3 / (VAPOUR_GAS_CONSTANT_J_KGK * temp_k);
        CaseAir { vapour_pa, dew_kg }
    }

    /// Vapour pressure [Pa] that settles when a steady source [kg/s] meets air of `outside_pa` [Pa] at a temperature [K];
    /// infinite in a case without air changes.
    pub fn settled_pa(&self, source_kg_s: f64, outside_pa: f64, temp_k: f64) -> f64 {
        outside_pa + self.pressure_of_pa(source_kg_s, temp_k) / self.air_changes_1_s
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const CASE: Case = Case {
        volume_m3: 0.020,
        air_changes_1_s: 1.0 / 3600.0,
        devices: 1.0,
        other_vapour_kg_s: 0.0,
    };

    /// 22 °C: saturation 2645 Pa [HylandWexler1983], a remembered row of its table, 19.4 g/m³, so 20 L hold 0.39 g.
    #[test]
    fn twenty_litres_hold_four_tenths_of_a_gram() {
        let one_g_pa = CASE.pressure_of_pa(1e-3, 295.15);
        assert!((saturation_pressure_pa(295.15) / one_g_pa - 0.388).abs() < 0.002);
    }

    #[test]
    fn what_the_air_cannot_hold_lies_on_the_glass_and_comes_back() {
        let dry = CaseAir {
            vapour_pa: 1300.0,
            dew_kg: 0.0,
        };
        let wet = CASE.after(dry, 1e-3, 295.15);
        assert_eq!(wet.vapour_pa, saturation_pressure_pa(295.15));
        assert!(wet.dew_kg > 0.7e-3 && wet.dew_kg < 0.9e-3);
        let back = CASE.after(wet, -1e-3, 295.15);
        assert!((back.vapour_pa - dry.vapour_pa).abs() < 1e-9 && back.dew_kg == 0.0);
    }

    #[test]
    fn a_steady_source_settles_where_the_air_carries_it_away() {
        let settled_pa = CASE.settled_pa(1e-7, 1300.0, 295.15);
        let vented_kg = CASE.vented_kg(settled_pa, 1300.0, 295.15, 3600.0);
        assert!((vented_kg - 3.6e-4).abs() < 1e-12);
    }
}
