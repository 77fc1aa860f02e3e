//! One working fluid: its curves and what it is.

use std::borrow::Cow;

use super::hazards::Hazard;
use crate::model::air::GAS_CONSTANT_J_MOLK;
use crate::model::notes::Caution;

/// Temperature at which the polynomials of a row are centred [K], 20 °C.
pub(super) const CENTRE_K: f64 = 293.15;

/// Coefficients of a cubic in (T - 293.15 K).
pub(super) type Cubic = [f64; 4];

/// Saturation curve of a working fluid, in one of two forms.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum VapourCurve {
    /// ln p [Pa] = a + b/T + c ln T + d T.
    FourTerms([f64; 4]),
    /// ln p [Pa] = a - b/(T + c), T [K]: Antoine's form.
    Antoine([f64; 3]),
}

impl VapourCurve {
    #[inline]
    pub(super) fn log_pressure(&self, temp_k: f64) -> f64 {
        match self {
            Self::FourTerms([a, b, c, d]) => a + b / temp_k + c * temp_k.ln() + d * temp_k,
            Self::Antoine([a, b, c]) => a - b / (temp_k + c),
        }
    }

    #[inline]
    pub(super) fn log_slope(&self, temp_k: f64) -> f64 {
        match self {
            Self::FourTerms([_, b, c, d]) => (c - b / temp_k) / temp_k + d,
            Self::Antoine([_, b, c]) => b / ((temp_k + c) * (temp_k + c)),
        }
    }
}

/// A working fluid: curves in SI over its valid range, identity, sources and hazards.
#[derive(Debug, Clone, PartialEq)]
pub struct WorkingFluid {
    /// Stable name for programs, for example `diethyl_ether`.
    pub name: Cow<'static, str>,
    /// Name for people.
    pub title: Cow<'static, str>,
    /// Registry number of the substance (CAS); empty for a custom fluid.
    pub cas: &'static str,
    /// Molar mass [kg/mol].
    pub molar_mass_kg_mol: f64,
    /// Hottest temperature a sealed glass body should see by default [K]; a device may set its own.
    pub max_temp_k: f64,
    /// Where each number comes from, one sentence a quantity.
    pub sources: &'static [&'static str],
    /// Hazard and regulatory notes.
    pub hazards: Cow<'static, [Hazard]>,
    pub(super) valid_from_k: f64,
    pub(super) valid_to_k: f64,
    pub(super) vapour: VapourCurve,
    pub(super) density: Cubic,
    pub(super) latent: Cubic,
    pub(super) heat_capacity: Cubic,
    pub(super) tension: Cubic,
    pub(super) compressibility: Cubic,
}

#[inline]
fn cubic(coefficients: &Cubic, temp_k: f64) -> f64 {
    let t = temp_k - CENTRE_K;
    let [a, b, c, d] = coefficients;
    a + t * (b + t * (c + t * d))
}

impl WorkingFluid {
    /// Saturation pressure [Pa] at a temperature [K].
    ///
    /// ```
    /// let fluid = dipcast::model::fluids::working_fluid("n_pentane").expect("a row of the table");
    /// assert!((fluid.vapour_pressure_pa(293.15) - 56_568.0).abs() < 10.0);
    /// ```
    #[inline]
    pub fn vapour_pressure_pa(&self, temp_k: f64) -> f64 {
        self.vapour.log_pressure(temp_k).exp()
    }

    /// Slope of the saturation pressure [Pa/K] at a temperature [K]; the exact derivative.
    #[inline]
    pub fn vapour_slope_pa_k(&self, temp_k: f64) -> f64 {
        self.vapour_pressure_pa(temp_k) * self.vapour.log_slope(temp_k)
    }

    /// Pressure [Pa] and slope [Pa/K] together, for the price of one.
    #[inline]
    pub fn vapour_pressure_and_slope(&self, temp_k: f64) -> (f64, f64) {
        let pressure = self.vapour_pressure_pa(temp_k);
        (pressure, pressure * self.vapour.log_slope(temp_k))
    }

    /// Temperature [K] at which the saturation pressure is `pressure_pa` [Pa, above 0], to 1e-12 relative.
    ///
    /// Zero, negative or NaN pressure gives NaN.
    #[inline]
    pub fn saturation_temp_k(&self, pressure_pa: f64) -> f64 {
        self.saturation_temp_near_k(pressure_pa, CENTRE_K)
    }

    /// The same as [`Self::saturation_temp_k`], started from a temperature [K] near the answer: one step or two.
    #[inline]
    pub fn saturation_temp_near_k(&self, pressure_pa: f64, near_k: f64) -> f64 {
        if pressure_pa.is_nan() || pressure_pa <= 0.0 {
            return f64::NAN;
        }
        let target = pressure_pa.ln();
        let mut temp_k = near_k;
        for _ in 0..30 {
            // Newton on ln p against 1/T, in which every saturation curve is almost a straight line.
            let excess = self.vapour.log_pressure(temp_k) - target;
            let shrink = 1.0 + excess / (self.vapour.log_slope(temp_k) * temp_k);
            let next = temp_k / shrink.clamp(0.5, 2.0);
            // The step squares its error, so one below 1e-7 leaves nothing that a double can hold.
            if (next - temp_k).abs() <= 1e-7 * temp_k {
                return next;
            }
            temp_k = next;
        }
        temp_k
    }

    /// Density of the saturated liquid [kg/m3] at a temperature [K].
    #[inline]
    pub fn liquid_density_kg_m3(&self, temp_k: f64) -> f64 {
        cubic(&self.density, temp_k)
    }

    /// Latent heat of vaporisation [J/kg] at a temperature [K].
    #[inline]
    pub fn latent_heat_j_kg(&self, temp_k: f64) -> f64 {
        cubic(&self.latent, temp_k)
    }

    /// Specific heat of the liquid [J/(kg K)] at a temperature [K].
    #[inline]
    pub fn liquid_cp_j_kgk(&self, temp_k: f64) -> f64 {
        cubic(&self.heat_capacity, temp_k)
    }

    /// Surface tension against its vapour [N/m] at a temperature [K].
    #[inline]
    pub fn surface_tension_n_m(&self, temp_k: f64) -> f64 {
        cubic(&self.tension, temp_k)
    }

    /// Density of the saturated vapour [kg/m3] at a temperature [K], with its real-gas compressibility.
    #[inline]
    pub fn vapour_density_kg_m3(&self, temp_k: f64) -> f64 {
        let ideal = self.vapour_pressure_pa(temp_k) * self.molar_mass_kg_mol / (GAS_CONSTANT_J_MOLK * temp_k);
        ideal / cubic(&self.compressibility, temp_k)
    }

    /// Latent heat per volume of saturated vapour [J/m3] at a temperature [K]: T dp/dT (1 - rho_v/rho_l).
    ///
    /// This is the Clapeyron relation; it equals latent heat times vapour density as far as the row is consistent
    /// (within 2 %), and it needs no real-gas data beyond a correction of a few parts in a thousand.
    #[inline]
    pub fn latent_per_vapour_volume_j_m3(&self, temp_k: f64) -> f64 {
        let (pressure, slope) = self.vapour_pressure_and_slope(temp_k);
        let vapour =
            pressure * self.molar_mass_kg_mol / (GAS_CONSTANT_J_MOLK * temp_k * cubic(&self.compressibility, temp_k));
        temp_k * slope * (1.0 - vapour / self.liquid_density_kg_m3(temp_k))
    }

    /// Lowest and highest temperature [K] for which the row's numbers hold.
    pub fn valid_range_k(&self) -> (f64, f64) {
        (self.valid_from_k, self.valid_to_k)
    }

    /// The hazard and regulatory notes as cautions for an answer.
    pub fn cautions(&self) -> Vec<Caution> {
        self.hazards.iter().map(Hazard::caution).collect()
    }
}
