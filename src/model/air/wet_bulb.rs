//! Thermodynamic wet bulb from the energy balance of adiabatic saturation.

use super::{
    Air, ZERO_CELSIUS_K, humidity_ratio, saturation_pressure_ice_pa, saturation_pressure_pa, saturation_slope_ice_pa_k,
    saturation_slope_pa_k, vapour_pressure_from_humidity_ratio_pa,
};

/// Enthalpies of adiabatic saturation: heat of the phase change at 0 °C, its change per kelvin [kJ/kg, kJ/(kg K)] and
/// the specific heat of the condensed water [kJ/(kg K)] [ASHRAE2017], ch. 1 eq. 33 and 35.
struct Phase {
    heat: f64,
    heat_slope: f64,
    water: f64,
    pressure: fn(f64) -> f64,
    slope: fn(f64) -> f64,
}

/// Specific heat of dry air and of vapour [kJ/(kg K)] [ASHRAE2017], ch. 1 eq. 30.
const DRY_AIR: f64 = 1.006;
const VAPOUR: f64 = 1.86;

const LIQUID: Phase = Phase {
    heat: 2501.0,
    heat_slope: -2.326,
    water: 4.186,
    pressure: saturation_pressure_pa,
    slope: saturation_slope_pa_k,
};

const ICE: Phase = Phase {
    heat: 2830.0,
    heat_slope: -0.24,
    water: 2.1,
    pressure: saturation_pressure_ice_pa,
    slope: saturation_slope_ice_pa_k,
};

/// Thermodynamic wet-bulb temperature over liquid water [K], also below 0 °C (supercooled wick) [ASHRAE2017], ch. 1 eq.
/// 33.
///
/// Range -80 to 90 °C while the vapour pressure stays below the total pressure. Saturated and supersaturated air give
/// the dry bulb.
///
/// ```
/// use dipcast::model::air::{Air, wet_bulb_k};
/// let air = Air::from_relative_humidity(295.15, 0.4, 101_325.0);
/// assert!((wet_bulb_k(&air) - 273.15 - 13.90).abs() < 0.02);
/// ```
pub fn wet_bulb_k(air: &Air) -> f64 {
    solve(air, &LIQUID)
}

/// Thermodynamic wet-bulb temperature over ice [K] [ASHRAE2017], ch. 1 eq. 35.
///
/// Only meaningful when the result is at or below 0 °C; air saturated over ice gives the dry bulb.
pub fn wet_bulb_ice_k(air: &Air) -> f64 {
    solve(air, &ICE)
}

/// Vapour pressure [Pa] of air at a temperature [K] and total pressure [Pa] whose wet bulb over liquid water [K] was read:
/// the same balance, solved for the humidity ratio [ASHRAE2017], ch. 1 eq. 33.
///
/// Wet bulbs at or above the temperature [K] give saturated air; depressions that no air can have give 0. NaN where the
/// water would boil.
///
/// ```
/// use dipcast::model::air::{Air, vapour_pressure_from_wet_bulb_pa, wet_bulb_k};
/// let air = Air::from_relative_humidity(295.15, 0.4, 95_000.0);
/// let read_back = vapour_pressure_from_wet_bulb_pa(295.15, wet_bulb_k(&air), 95_000.0);
/// assert!((read_back - air.vapour_pressure_pa).abs() < 1e-3);
/// ```
pub fn vapour_pressure_from_wet_bulb_pa(temp_k: f64, wet_bulb_k: f64, pressure_pa: f64) -> f64 {
    let saturation_pa = saturation_pressure_pa(wet_bulb_k);
    if wet_bulb_k >= temp_k {
        return saturation_pressure_pa(temp_k);
    }
    // Negated, so that a missing value ends here too.
    if !(saturation_pa < pressure_pa && temp_k > wet_bulb_k) {
        return f64::NAN;
    }
    let (dry_c, wet_c) = (temp_k - ZERO_CELSIUS_K, wet_bulb_k - ZERO_CELSIUS_K);
    let gained = (LIQUID.heat + LIQUID.heat_slope * wet_c) * humidity_ratio(saturation_pa, pressure_pa);
    let ratio = (gained - DRY_AIR * (dry_c - wet_c)) / (LIQUID.heat + VAPOUR * dry_c - LIQUID.water * wet_c);
    vapour_pressure_from_humidity_ratio_pa(ratio.max(0.0), pressure_pa)
}

fn solve(air: &Air, phase: &Phase) -> f64 {
    if air.temp_k.is_nan() || air.vapour_pressure_pa.is_nan() || air.pressure_pa.is_nan() {
        return f64::NAN;
    }
    if (phase.pressure)(air.temp_k) <= air.vapour_pressure_pa {
        return air.temp_k;
    }
    let (mut low, mut high) = (air.temp_k - 150.0, air.temp_k);
    let mut guess = air.temp_k;
    for _ in 0..60 {
        let (excess, slope) = imbalance(air, phase, guess);
        if excess > 0.0 {
            high = guess
        } else {
            low = guess
        }
        let newton = guess - excess / slope;
        let next = if newton > low && newton < high {
            newton
        } else {
            0.5 * (low + high)
        };
        if (next - guess).abs() < 1e-10 {
            return next;
        }
        guess = next;
    }
    guess
}

/// Enthalpy of the saturated stream less that of the air and the added water [kJ per kg dry air], and its slope in the
/// wet bulb. Rises with the wet bulb; zero at the answer.
fn imbalance(air: &Air, phase: &Phase, wet_k: f64) -> (f64, f64) {
    let saturation = (phase.pressure)(wet_k);
    if saturation >= air.pressure_pa {
        return (f64::INFINITY, 1.0);
    }
    let (dry_c, wet_c) = (air.temp_k - ZERO_CELSIUS_K, wet_k - ZERO_CELSIUS_K);
    let ratio = humidity_ratio(air.vapour_pressure_pa, air.pressure_pa);
    let saturated = humidity_ratio(saturation, air.pressure_pa);
    let rest = air.pressure_pa - saturation;
    let saturated_slope = super::MASS_RATIO * air.pressure_pa * (phase.slope)(wet_k) / (rest * rest);
    let heat = phase.heat + phase.heat_slope * wet_c;
    let excess =
        heat * saturated - DRY_AIR * (dry_c - wet_c) - ratio * (phase.heat + VAPOUR * dry_c - phase.water * wet_c);
    (
        excess,
        phase.heat_slope * saturated + heat * saturated_slope + DRY_AIR + phase.water * ratio,
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn saturated_air_is_its_own_wet_bulb() {
        for t in [263.15, 273.15, 295.15, 320.0] {
            let air = Air::from_relative_humidity(t, 1.0, 101_325.0);
            assert_eq!(wet_bulb_k(&air), t);
        }
    }

    #[test]
    fn thinner_air_has_a_colder_wet_bulb() {
        // 22 °C, 40 %: 13.90 °C at sea level, 13.29 °C at 1600 m.
        let high = Air::from_relative_humidity(295.15, 0.4, crate::model::air::standard_pressure_pa(1600.0));
        assert!((wet_bulb_k(&high) - 273.15 - 13.29).abs() < 0.02);
    }

    #[test]
    fn air_near_boiling_still_has_an_answer() {
        let air = Air::from_relative_humidity(372.0, 0.2, 70_000.0);
        let wet = wet_bulb_k(&air);
        assert!(wet > 300.0 && wet < 364.0, "{wet}");
    }
}
