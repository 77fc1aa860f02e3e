//! Saturation pressure over liquid water and over ice, its slope, and the dew point.

use super::ZERO_CELSIUS_K;

/// Saturation pressure over liquid water [Pa] at a temperature [K].
///
/// 0 to 200 °C: [HylandWexler1983], liquid branch. Below 0 °C, over supercooled liquid: [MurphyKoop2005], eq. 10,
/// fitted down to 123 K. Outside both ranges the formulas continue; the two meet at 0 °C within 2e-5.
///
/// ```
/// let p = dipcast::model::air::saturation_pressure_pa(293.15);
/// assert!((p - 2338.8).abs() < 0.1);
/// ```
#[inline]
pub fn saturation_pressure_pa(temp_k: f64) -> f64 {
    if temp_k >= ZERO_CELSIUS_K {
        warm_log(temp_k).exp()
    } else {
        supercooled_log(temp_k).exp()
    }
}

/// Slope of [`saturation_pressure_pa`] [Pa/K] at a temperature [K]; the exact derivative of the same formulas.
#[inline]
pub fn saturation_slope_pa_k(temp_k: f64) -> f64 {
    if temp_k >= ZERO_CELSIUS_K {
        warm_log(temp_k).exp() * warm_log_slope(temp_k)
    } else {
        supercooled_log(temp_k).exp() * supercooled_log_slope(temp_k)
    }
}

/// Saturation pressure over ice [Pa] at a temperature [K, 110 to 273.16] [MurphyKoop2005], eq. 7.
///
/// Above the triple point the formula simply continues; it has no meaning there.
#[inline]
pub fn saturation_pressure_ice_pa(temp_k: f64) -> f64 {
    (9.550_426 - 5723.265 / temp_k + 3.530_68 * temp_k.ln() - 0.007_283_32 * temp_k).exp()
}

/// Slope of [`saturation_pressure_ice_pa`] [Pa/K] at a temperature [K] [MurphyKoop2005], eq. 7 differentiated.
#[inline]
pub fn saturation_slope_ice_pa_k(temp_k: f64) -> f64 {
    saturation_pressure_ice_pa(temp_k) * (5723.265 / (temp_k * temp_k) + 3.530_68 / temp_k - 0.007_283_32)
}

/// Dew point over liquid water [K] of a vapour pressure [Pa]; inverse of [`saturation_pressure_pa`] to 1e-12.
///
/// Zero or negative vapour pressure has no dew point and gives 0 K; NaN gives NaN.
pub fn dew_point_k(vapour_pressure_pa: f64) -> f64 {
    if vapour_pressure_pa <= 0.0 {
        return 0.0;
    }
    let target = vapour_pressure_pa.ln();
    // Start from the Magnus form, then Newton on ln p against 1/T, in which the curve is almost straight.
    let magnus = target - 6.4145_f64;
    let mut temp_k = ZERO_CELSIUS_K + (243.12 * magnus / (17.62 - magnus)).clamp(-150.0, 400.0);
    for _ in 0..20 {
        let (log, slope) = log_and_slope(temp_k);
        let next = temp_k / (1.0 + (log - target) / (slope * temp_k));
        if (next - temp_k).abs() <= 1e-12 * temp_k {
            return next;
        }
        temp_k = next;
    }
    temp_k
}

fn log_and_slope(temp_k: f64) -> (f64, f64) {
    if temp_k >= ZERO_CELSIUS_K {
        (warm_log(temp_k), warm_log_slope(temp_k))
    } else {
        (supercooled_log(temp_k), supercooled_log_slope(temp_k))
    }
}

/// ln p [Pa] of [HylandWexler1983] over liquid.
#[inline]
fn warm_log(t: f64) -> f64 {
    -5800.2206 / t
        + 1.391_499_3
        + t * (-0.048_640_239 + t * (4.176_476_8e-5 - 1.445_209_3e-8 * t))
        + 6.545_967_3 * t.ln()
}

#[inline]
fn warm_log_slope(t: f64) -> f64 {
    5800.2206 / (t * t) - 0.048_640_239 + t * (2.0 * 4.176_476_8e-5 - 3.0 * 1.445_209_3e-8 * t) + 6.545_967_3 / t
}

/// ln p [Pa] of [MurphyKoop2005], eq. 10.
#[inline]
fn supercooled_log(t: f64) -> f64 {
    let ln_t = t.ln();
    let cold = 53.878 - 1331.22 / t - 9.445_23 * ln_t + 0.014_025 * t;
    54.842_763 - 6763.22 / t - 4.21 * ln_t + 0.000_367 * t + (0.0415 * (t - 218.8)).tanh() * cold
}

#[inline]
fn supercooled_log_slope(t: f64) -> f64 {
    let step = (0.0415 * (t - 218.8)).tanh();
    let cold = 53.878 - 1331.22 / t - 9.445_23 * t.ln() + 0.014_025 * t;
    let cold_slope = 1331.22 / (t * t) - 9.445_23 / t + 0.014_025;
    6763.22 / (t * t) - 4.21 / t + 0.000_367 + step * cold_slope + 0.0415 * (1.0 - step * step) * cold
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_two_branches_meet_at_zero_celsius() {
        let (warm, cold) = (warm_log(ZERO_CELSIUS_K).exp(), supercooled_log(ZERO_CELSIUS_K).exp());
        assert!((warm / cold - 1.0).abs() < 2e-5, "{warm} {cold}");
        let slopes = warm_log_slope(ZERO_CELSIUS_K) / supercooled_log_slope(ZERO_CELSIUS_K);
        assert!((slopes - 1.0).abs() < 1e-3, "{slopes}");
    }

    #[test]
    fn slopes_are_the_derivatives_of_the_curves() {
        for t in [240.0, 260.0, 272.0, 280.0, 300.0, 350.0] {
            let numeric = (saturation_pressure_pa(t + 1e-3) - saturation_pressure_pa(t - 1e-3)) / 2e-3;
            assert!((numeric / saturation_slope_pa_k(t) - 1.0).abs() < 1e-7, "{t}");
            let numeric = (saturation_pressure_ice_pa(t + 1e-3) - saturation_pressure_ice_pa(t - 1e-3)) / 2e-3;
            assert!((numeric / saturation_slope_ice_pa_k(t) - 1.0).abs() < 1e-7, "{t}");
        }
    }

    #[test]
    fn ice_and_liquid_share_the_triple_point() {
        // 611.657 Pa at 273.16 K: the value both formulas of [MurphyKoop2005] are built on.
        assert!((saturation_pressure_ice_pa(273.16) - 611.657).abs() < 0.02);
        assert!((saturation_pressure_pa(273.16) - 611.657).abs() < 0.02);
    }

    #[test]
    fn dew_point_inverts_over_the_whole_range() {
        for step in 0..130 {
            let t = 200.0 + f64::from(step) * 1.37;
            assert!(
                (dew_point_k(saturation_pressure_pa(t)) - t).abs() < 1e-3_f64.min(2e-5 * t),
                "{t}"
            );
        }
        assert_eq!(dew_point_k(0.0), 0.0);
    }
}
