//! Named rules for the vapour that people, plants and cleaning add to a room's air.

use crate::model::air::{GAS_CONSTANT_J_MOLK, MOLAR_MASS_WATER_KG_MOL, ZERO_CELSIUS_K};

/// Where a room's own vapour comes from.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum MoistureRule {
    /// Nothing is added: the outdoor air, warmed.
    None,
    /// The same excess all the time.
    GivenExcess {
        /// Vapour above that of the outdoor air [g/m³ of room air].
        excess_g_m3: f64,
    },
    /// Upper bound of an internal humidity class [ISO13788].
    Iso13788 {
        /// 1 storage, 2 offices and shops, 3 dwellings few live in, 4 dwellings many live in, sports halls, kitchens,
        /// 5 laundries, breweries, pools.
        class: u8,
    },
    /// Design line of a survey of 27 detached houses: what one in ten exceeds [Kalamees2006].
    FieldSurvey,
}

/// Upper bounds of the classes 1 to 5 at 0 °C outdoors and below [kg/m³] [ISO13788], remembered. The fifth class has no
/// bound in the standard; its figure is drawn up to this one.
const CLASS_BOUNDS_KG_M3: [f64; 5] = [0.002, 0.004, 0.006, 0.008, 0.010];
/// Outdoors at which a class's excess has sunk to nothing [°C] [ISO13788], remembered.
const CLASS_ENDS_C: f64 = 20.0;
/// The survey's line: (outdoors [°C], excess [kg/m³]), level beyond both ends [Kalamees2006].
const SURVEY_LINE: [(f64, f64); 2] = [(5.0, 0.004), (15.0, 0.0015)];

/// Vapour a rule adds [kg/m³ of room air] at an outdoor temperature [K].
///
/// Classes beyond 1 to 5 are taken at the nearest of them.
pub fn excess_kg_m3(rule: MoistureRule, outdoor_temp_k: f64) -> f64 {
    let outdoor_c = outdoor_temp_k - ZERO_CELSIUS_K;
    match rule {
        MoistureRule::None => 0.0,
        MoistureRule::GivenExcess { excess_g_m3 } => 1e-3 * excess_g_m3,
        MoistureRule::Iso13788 { class } => {
            let bound = CLASS_BOUNDS_KG_M3[usize::from(class.clamp(1, 5)) - 1];
            bound * ((CLASS_ENDS_C - outdoor_c) / CLASS_ENDS_C).clamp(0.0, 1.0)
        }
        MoistureRule::FieldSurvey => {
            let [(cold_c, most), (warm_c, least)] = SURVEY_LINE;
            let share = ((outdoor_c - cold_c) / (warm_c - cold_c)).clamp(0.0, 1.0);
            most + share * (least - most)
        }
    }
}

/// Vapour pressure [Pa] of so much vapour [kg/m³] at a temperature [K], ideal gas.
pub fn vapour_pressure_excess_pa(excess_kg_m3: f64, temp_k: f64) -> f64 {
    excess_kg_m3 * VAPOUR_GAS_CONSTANT_J_KGK * temp_k
}

/// Gas constant of water vapour [J/(kg K)].
pub(super) const VAPOUR_GAS_CONSTANT_J_KGK: f64 = GAS_CONSTANT_J_MOLK / MOLAR_MASS_WATER_KG_MOL;

#[cfg(test)]
mod tests {
    use super::*;

    fn grams(rule: MoistureRule, outdoor_c: f64) -> f64 {
        1e3 * excess_kg_m3(rule, outdoor_c + 273.15)
    }

    /// End points of the classes, remembered: 270, 540, 810, 1080 Pa, which are 2, 4, 6, 8 g/m³ at 20 °C.
    #[test]
    fn classes_are_as_high_as_the_standard_draws_them() {
        for (class, bound_pa) in [(1, 270.0), (2, 540.0), (3, 810.0), (4, 1080.0)] {
            let rule = MoistureRule::Iso13788 { class };
            let pa = vapour_pressure_excess_pa(excess_kg_m3(rule, 263.15), 293.15);
            assert!((pa / bound_pa - 1.0).abs() < 0.01, "class {class}: {pa}");
            assert_eq!(grams(rule, 20.0), 0.0);
            assert_eq!(grams(rule, 30.0), 0.0);
            assert!((grams(rule, 10.0) - 0.5 * grams(rule, 0.0)).abs() < 1e-12);
        }
    }

    /// The abstract's own figures: +4 g/m³ at +5 °C and below, +1.5 g/m³ at +15 °C and above [Kalamees2006].
    #[test]
    fn the_survey_line_ends_where_it_was_published() {
        let at = |c| grams(MoistureRule::FieldSurvey, c);
        assert_eq!((at(-20.0), at(5.0)), (4.0, 4.0));
        assert!((at(15.0) - 1.5).abs() < 1e-12 && (at(30.0) - 1.5).abs() < 1e-12);
        assert!((at(10.0) - 2.75).abs() < 1e-12);
    }

    #[test]
    fn a_given_excess_is_taken_as_it_is() {
        assert_eq!(grams(MoistureRule::GivenExcess { excess_g_m3: 3.0 }, 5.0), 3.0);
        assert_eq!(grams(MoistureRule::None, -10.0), 0.0);
    }
}
