//! Nusselt numbers of spheres and cylinders. With the Schmidt number in place of the Prandtl number the same forms give
//! the Sherwood number.

/// x to a power, x at least 0, within a few units of the last place; half the price of the library's exact power.
#[inline]
fn power(x: f64, exponent: f64) -> f64 {
    (exponent * x.ln()).exp()
}

/// Nusselt number of a sphere in natural convection [Churchill1983].
///
/// `rayleigh` 0 to 1e11, `prandtl` at least 0.7 (a Schmidt number of 0.6 is taken as near enough). Tends to 2 as the
/// Rayleigh number goes to 0.
///
/// ```
/// let nusselt = dipcast::model::transfer::sphere_nusselt_natural(7e6, 0.7);
/// assert!((nusselt / 25.34 - 1.0).abs() < 1e-3);
/// ```
#[inline]
pub fn sphere_nusselt_natural(rayleigh: f64, prandtl: f64) -> f64 {
    2.0 + 0.589 * rayleigh.sqrt().sqrt() / power(1.0 + power(0.469 / prandtl, 9.0 / 16.0), 4.0 / 9.0)
}

/// The driving forces of a sphere's film as logarithms: minus infinity where there is none.
#[derive(Clone, Copy)]
pub(super) struct SphereDrive {
    ln_grashof: f64,
    ln_forced_part: f64,
}

impl SphereDrive {
    #[inline]
    pub(super) fn new(grashof: f64, reynolds: f64) -> Self {
        Self {
            ln_grashof: grashof.ln(),
            ln_forced_part: forced_speed_part(reynolds).ln(),
        }
    }

    /// [`blend`] of [`sphere_nusselt_natural`] and [`sphere_nusselt_forced`] in one go: products and powers become sums
    /// of logarithms, which halves the price in the hottest loop of the model.
    #[inline]
    pub(super) fn nusselt(&self, prandtl: f64) -> f64 {
        const LN_CHURCHILL: f64 = -0.529_329_095_330_550_4; // ln 0.589
        let ln_prandtl = prandtl.ln();
        let bracket = (4.0 / 9.0) * (1.0 + power(0.469 / prandtl, 9.0 / 16.0)).ln();
        let ln_natural = LN_CHURCHILL + 0.25 * (self.ln_grashof + ln_prandtl) - bracket;
        let ln_forced = self.ln_forced_part + 0.4 * ln_prandtl;
        2.0 + power((3.0 * ln_natural).exp() + (3.0 * ln_forced).exp(), 1.0 / 3.0)
    }
}

/// Nusselt number of a sphere in forced flow [Whitaker1972], without the viscosity ratio, which is 1 in air.
///
/// `reynolds` 3.5 to 7.6e4 in the source, `prandtl` 0.71 to 380; tends to 2 as the Reynolds number goes to 0.
///
/// ```
/// let nusselt = dipcast::model::transfer::sphere_nusselt_forced(100.0, 0.7);
/// assert!((nusselt / 6.589 - 1.0).abs() < 1e-3);
/// ```
#[inline]
pub fn sphere_nusselt_forced(reynolds: f64, prandtl: f64) -> f64 {
    2.0 + forced_speed_part(reynolds) * power(prandtl, 0.4)
}

/// The part of [`sphere_nusselt_forced`] that does not depend on the fluid.
#[inline]
fn forced_speed_part(reynolds: f64) -> f64 {
    0.4 * reynolds.sqrt() + 0.06 * power(reynolds, 2.0 / 3.0)
}

/// Nusselt number of a sphere in forced flow after [RanzMarshall1952]; the second opinion beside
/// [`sphere_nusselt_forced`], 11 % higher at a Reynolds number of 100.
///
/// `reynolds` 0 to 200 in the source (used by others to 5e4), `prandtl` 0.6 to 380.
#[inline]
pub fn sphere_nusselt_ranz_marshall(reynolds: f64, prandtl: f64) -> f64 {
    2.0 + 0.6 * reynolds.sqrt() * power(prandtl, 1.0 / 3.0)
}

/// Natural and forced Nusselt numbers of a sphere together: the cubes of what exceeds pure conduction (2) add up
/// [Churchill1977].
#[inline]
pub fn blend(natural: f64, forced: f64) -> f64 {
    2.0 + cube_sum(natural - 2.0, forced - 2.0)
}

#[inline]
pub(super) fn cube_sum(a: f64, b: f64) -> f64 {
    (a * a * a + b * b * b).cbrt()
}

/// Mean Nusselt number of a cylinder in crossflow [ChurchillBernstein1977].
///
/// `reynolds` on the diameter, 0 to 1e7; valid where `reynolds * prandtl` exceeds 0.2. Tends to 0.3 as the flow stops.
///
/// ```
/// let nusselt = dipcast::model::transfer::cylinder_nusselt_crossflow(100.0, 0.7);
/// assert!((nusselt / 5.15 - 1.0).abs() < 0.01);
/// ```
#[inline]
pub fn cylinder_nusselt_crossflow(reynolds: f64, prandtl: f64) -> f64 {
    let bracket = (1.0 + power(0.4 / prandtl, 2.0 / 3.0)).sqrt().sqrt();
    let turbulent = power(1.0 + power(reynolds / 282_000.0, 0.625), 0.8);
    0.3 + 0.62 * reynolds.sqrt() * power(prandtl, 1.0 / 3.0) / bracket * turbulent
}

/// Mean Nusselt number of a vertical surface in natural convection, on its height [ChurchillChu1975], eq. 9.
///
/// `rayleigh` on the height, 0.1 to 1e12, any `prandtl`.
#[inline]
pub fn vertical_nusselt_natural(rayleigh: f64, prandtl: f64) -> f64 {
    let bracket = power(1.0 + power(0.492 / prandtl, 9.0 / 16.0), 8.0 / 27.0);
    let root = 0.825 + 0.387 * power(rayleigh, 1.0 / 6.0) / bracket;
    root * root
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn fast_powers_equal_the_printed_ones() {
        for prandtl in [0.5, 0.6, 0.71, 1.0, 1.3, 7.0] {
            let bracket = (1.0 + (0.469_f64 / prandtl).powf(9.0 / 16.0)).powf(4.0 / 9.0);
            for rayleigh in [1.0_f64, 1e3, 7e6] {
                let printed = 2.0 + 0.589 * rayleigh.powf(0.25) / bracket;
                assert!((sphere_nusselt_natural(rayleigh, prandtl) / printed - 1.0).abs() < 1e-12);
            }
            let printed = 2.0 + (0.4 * 130.0_f64.sqrt() + 0.06 * 130.0_f64.powf(2.0 / 3.0)) * prandtl.powf(0.4);
            assert!((sphere_nusselt_forced(130.0, prandtl) / printed - 1.0).abs() < 1e-12);
        }
    }

    #[test]
    fn the_short_cut_equals_the_blend() {
        for (grashof, reynolds, prandtl) in [(0.0, 0.0, 0.7), (1e4, 0.0, 0.6), (0.0, 150.0, 1.2), (2e4, 150.0, 0.7)] {
            let natural = sphere_nusselt_natural(grashof * prandtl, prandtl);
            let plain = blend(natural, sphere_nusselt_forced(reynolds, prandtl));
            let short = SphereDrive::new(grashof, reynolds).nusselt(prandtl);
            assert!((short / plain - 1.0).abs() < 1e-13, "{grashof} {reynolds} {prandtl}");
        }
    }

    #[test]
    fn without_motion_a_sphere_only_conducts() {
        assert!((sphere_nusselt_natural(0.0, 0.7) - 2.0).abs() < 1e-9);
        assert!((sphere_nusselt_forced(0.0, 0.6) - 2.0).abs() < 1e-9);
        assert!((blend(2.0, 2.0) - 2.0).abs() < 1e-9);
    }
}
