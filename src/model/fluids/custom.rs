//! A working fluid from constants a user gives.

use std::borrow::Cow;

use super::hazards;
use super::working_fluid::{CENTRE_K, VapourCurve, WorkingFluid};
use crate::model::air::{GAS_CONSTANT_J_MOLK, ZERO_CELSIUS_K};
use crate::model::notes::Fault;

/// How the vapour pressure of a custom fluid is given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum CustomVapourPressure {
    /// Antoine's constants: log10 of the pressure [kPa] = a - b / (c + temperature [°C]).
    Antoine {
        /// Constant a.
        a: f64,
        /// Constant b [K].
        b: f64,
        /// Constant c [K].
        c: f64,
    },
    /// Three pairs of temperature [°C] and pressure [kPa], at least 5 K apart; the curve runs exactly through them.
    Points([(f64, f64); 3]),
}

/// Constants of a custom working fluid in practical units.
#[derive(Debug, Clone, PartialEq)]
pub struct CustomFluid {
    /// Name for the answer.
    pub name: String,
    /// Molar mass [g/mol, 10 to 500].
    pub molar_mass_g_mol: f64,
    /// Vapour pressure, as constants or as three points.
    pub vapour_pressure: CustomVapourPressure,
    /// Liquid density at 20 °C [kg/m3, 400 to 3500].
    pub density_kg_m3: f64,
    /// Thermal expansion of the liquid by volume [1/K, 0.0001 to 0.005].
    pub expansion_per_k: f64,
    /// Latent heat of vaporisation near 20 °C [kJ/kg, 40 to 2600], taken constant.
    pub latent_kj_kg: f64,
    /// Specific heat of the liquid [J/(kg K), 500 to 5000], taken constant.
    pub liquid_cp_j_kgk: f64,
    /// Surface tension [mN/m, 3 to 80], taken constant.
    pub surface_tension_mn_m: f64,
    /// Coldest temperature the constants hold for [°C].
    pub valid_from_c: f64,
    /// Hottest temperature the constants hold for [°C].
    pub valid_to_c: f64,
    /// Hottest temperature the sealed body may see [°C].
    pub max_temp_c: f64,
    /// Whether the liquid is flammable.
    pub flammable: bool,
    /// Whether it is toxic.
    pub toxic: bool,
    /// Anything else to show beside results; may be empty.
    pub note: String,
}

impl WorkingFluid {
    /// A working fluid from given constants.
    ///
    /// The vapour counts as an ideal gas. Refused, all faults at once, when a number is out of its range, when the
    /// vapour pressure does not rise over the valid range, or when pressure curve and latent heat differ by more than
    /// 15 % in the Clapeyron relation (one of the two is then wrong, or given in another unit). Fields are named as in
    /// [`CustomFluid`].
    pub fn custom(given: CustomFluid) -> Result<WorkingFluid, Vec<Fault>> {
        let mut faults = range_faults(&given);
        if !faults.is_empty() {
            return Err(faults);
        }
        let fluid = build(&given);
        faults.extend(curve_faults(&given, &fluid));
        if faults.is_empty() { Ok(fluid) } else { Err(faults) }
    }
}

fn build(given: &CustomFluid) -> WorkingFluid {
    WorkingFluid {
        name: Cow::Borrowed("custom"),
        title: Cow::Owned(given.name.trim().to_owned()),
        cas: "",
        molar_mass_kg_mol: given.molar_mass_g_mol / 1000.0,
        max_temp_k: given.max_temp_c + ZERO_CELSIUS_K,
        sources: &["all constants: given with the request, not checked beyond their own consistency"],
        hazards: Cow::Owned(hazards::declared(given.flammable, given.toxic, &given.note)),
        valid_from_k: given.valid_from_c + ZERO_CELSIUS_K,
        valid_to_k: given.valid_to_c + ZERO_CELSIUS_K,
        vapour: curve(&given.vapour_pressure),
        density: [
            given.density_kg_m3,
            -given.density_kg_m3 * given.expansion_per_k,
            0.0,
            0.0,
        ],
        latent: [given.latent_kj_kg * 1000.0, 0.0, 0.0, 0.0],
        heat_capacity: [given.liquid_cp_j_kgk, 0.0, 0.0, 0.0],
        tension: [given.surface_tension_mn_m / 1000.0, 0.0, 0.0, 0.0],
        compressibility: [1.0, 0.0, 0.0, 0.0],
    }
}

fn curve(given: &CustomVapourPressure) -> VapourCurve {
    const LN_10: f64 = std::f64::consts::LN_10;
    match *given {
        CustomVapourPressure::Antoine { a, b, c } => {
            VapourCurve::Antoine([a * LN_10 + 1000.0_f64.ln(), b * LN_10, c - ZERO_CELSIUS_K])
        }
        CustomVapourPressure::Points(points) => VapourCurve::FourTerms(through(points)),
    }
}

/// The curve ln p = a + b/T + c ln T through three points, by divided differences in 1/T.
fn through(points: [(f64, f64); 3]) -> [f64; 4] {
    let [p0, p1, p2] = points.map(|(temp_c, kpa)| (temp_c + ZERO_CELSIUS_K, (1000.0 * kpa).ln()));
    let slope = |from: (f64, f64), to: (f64, f64)| (to.1 - from.1) / (1.0 / to.0 - 1.0 / from.0);
    let bend = |from: f64, to: f64| (to.ln() - from.ln()) / (1.0 / to - 1.0 / from);
    let c = (slope(p1, p2) - slope(p0, p1)) / (bend(p1.0, p2.0) - bend(p0.0, p1.0));
    let b = slope(p0, p1) - c * bend(p0.0, p1.0);
    [p0.1 - b / p0.0 - c * p0.0.ln(), b, c, 0.0]
}

fn range_faults(given: &CustomFluid) -> Vec<Fault> {
    let rows = [
        ("molar_mass_g_mol", given.molar_mass_g_mol, 10.0, 500.0, "g/mol"),
        ("density_kg_m3", given.density_kg_m3, 400.0, 3500.0, "kg/m3"),
        ("expansion_per_k", given.expansion_per_k, 1e-4, 5e-3, "per K"),
        ("latent_kj_kg", given.latent_kj_kg, 40.0, 2600.0, "kJ/kg"),
        ("liquid_cp_j_kgk", given.liquid_cp_j_kgk, 500.0, 5000.0, "J/(kg K)"),
        ("surface_tension_mn_m", given.surface_tension_mn_m, 3.0, 80.0, "mN/m"),
        ("valid_from_c", given.valid_from_c, -80.0, 20.0, "°C"),
        ("valid_to_c", given.valid_to_c, 20.0, 150.0, "°C"),
        (
            "max_temp_c",
            given.max_temp_c,
            20.0,
            given.valid_to_c.max(20.0),
            "°C, no more than valid_to_c",
        ),
    ];
    let mut faults: Vec<Fault> = rows.iter().filter_map(|row| range_fault(*row)).collect();
    if given.name.trim().is_empty() {
        faults.push(Fault::new(
            "name",
            "missing",
            "Expected a name for the fluid, found an empty one: give it any name.",
        ));
    }
    faults.extend(pressure_faults(&given.vapour_pressure));
    faults
}

fn range_fault((field, value, low, high, unit): (&str, f64, f64, f64, &str)) -> Option<Fault> {
    if value >= low && value <= high {
        return None;
    }
    let code = match value {
        value if !value.is_finite() => "not_finite",
        value if value < low => "below_minimum",
        _ => "above_maximum",
    };
    let detail = format!("Expected {low} to {high} {unit}, found {value}: check the number and its unit.");
    Some(Fault::new(field, code, detail))
}

fn pressure_faults(given: &CustomVapourPressure) -> Vec<Fault> {
    match given {
        CustomVapourPressure::Antoine { a, b, c } => [
            ("vapour_pressure/a", *a, 3.0, 12.0, "(log10 of kPa)"),
            ("vapour_pressure/b", *b, 300.0, 4000.0, "K"),
            ("vapour_pressure/c", *c, 120.0, 320.0, "K (for temperatures in °C)"),
        ]
        .into_iter()
        .filter_map(range_fault)
        .collect(),
        CustomVapourPressure::Points(points) => point_faults(points),
    }
}

fn point_faults(points: &[(f64, f64); 3]) -> Vec<Fault> {
    let mut faults = Vec::new();
    for (place, (temp_c, kpa)) in points.iter().enumerate() {
        let temp_field = format!("vapour_pressure/points/{place}/temp_c");
        let pressure_field = format!("vapour_pressure/points/{place}/pressure_kpa");
        faults.extend(range_fault((&temp_field, *temp_c, -80.0, 200.0, "°C")));
        faults.extend(range_fault((&pressure_field, *kpa, 0.01, 3000.0, "kPa")));
    }
    if faults.is_empty()
        && points
            .windows(2)
            .any(|pair| pair[1].0 - pair[0].0 < 5.0 || pair[1].1 <= pair[0].1)
    {
        faults.push(Fault::new(
            "vapour_pressure/points",
            "not_rising",
            format!(
                "Expected three points in rising order, 5 K or more apart, pressure rising too; found {points:?}: sort or \
                 respace them."
            ),
        ));
    }
    faults
}

/// Faults that show only once the curve stands: it must rise, and agree with the latent heat.
fn curve_faults(given: &CustomFluid, fluid: &WorkingFluid) -> Vec<Fault> {
    let (low, high) = fluid.valid_range_k();
    let steps = (0..=20).map(|step| low + (high - low) * f64::from(step) / 20.0);
    if steps
        .map(|t| fluid.vapour_slope_pa_k(t))
        .any(|slope| !(slope > 0.0 && slope.is_finite()))
    {
        let detail = format!(
            "Expected a vapour pressure that rises from {} to {} °C, found one that does not: narrow the range or \
             correct the constants.",
            given.valid_from_c, given.valid_to_c
        );
        return vec![Fault::new("vapour_pressure", "not_rising", detail)];
    }
    let room = fluid.vapour_pressure_pa(CENTRE_K);
    if !(100.0..=1e6).contains(&room) {
        let detail = format!(
            "Expected 0.1 to 1000 kPa at 20 °C, found {:.4} kPa: check the constants and their units (log10, kPa, °C).",
            room / 1000.0
        );
        return vec![Fault::new("vapour_pressure", "out_of_range", detail)];
    }
    clapeyron_fault(given, fluid).into_iter().collect()
}

fn clapeyron_fault(given: &CustomFluid, fluid: &WorkingFluid) -> Option<Fault> {
    let ideal_density = fluid.vapour_pressure_pa(CENTRE_K) * fluid.molar_mass_kg_mol / (GAS_CONSTANT_J_MOLK * CENTRE_K);
    let implied = fluid.latent_per_vapour_volume_j_m3(CENTRE_K) / ideal_density / 1000.0;
    if (given.latent_kj_kg / implied - 1.0).abs() <= 0.15 {
        return None;
    }
    let detail = format!(
        "Expected the latent heat to match the slope of the vapour pressure within 15 %: the curve and the molar \
         mass imply {implied:.0} kJ/kg at 20 °C, found {}: correct the latent heat, the molar mass or the pressure \
         constants.",
        given.latent_kj_kg
    );
    Some(Fault::new("latent_kj_kg", "inconsistent", detail))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The n-pentane row's own values, rounded, to see them come back.
    fn pentane_like() -> CustomFluid {
        CustomFluid {
            name: "Test fluid".to_owned(),
            molar_mass_g_mol: 72.15,
            vapour_pressure: CustomVapourPressure::Points([(0.0, 24.46), (20.0, 56.57), (40.0, 115.7)]),
            density_kg_m3: 626.0,
            expansion_per_k: 0.0016,
            latent_kj_kg: 370.0,
            liquid_cp_j_kgk: 2294.0,
            surface_tension_mn_m: 16.0,
            valid_from_c: -10.0,
            valid_to_c: 60.0,
            max_temp_c: 55.0,
            flammable: true,
            toxic: false,
            note: String::new(),
        }
    }

    #[test]
    fn three_points_give_the_curve_back() {
        let fluid = WorkingFluid::custom(pentane_like()).expect("consistent constants");
        let row = crate::model::fluids::working_fluid("n_pentane").expect("a row of the table");
        assert!((fluid.vapour_pressure_pa(313.15) / 115_700.0 - 1.0).abs() < 1e-12);
        for t in [275.0, 285.0, 300.0, 310.0] {
            assert!(
                (fluid.vapour_pressure_pa(t) / row.vapour_pressure_pa(t) - 1.0).abs() < 2e-3,
                "{t}"
            );
            assert!(
                (fluid.vapour_slope_pa_k(t) / row.vapour_slope_pa_k(t) - 1.0).abs() < 5e-3,
                "{t}"
            );
        }
        assert!(fluid.hazards.iter().any(|hazard| hazard.code == "flammable_fluid"));
    }

    #[test]
    fn antoine_constants_are_read_in_kilopascal_and_celsius() {
        // n-pentane of [Poling2001] (log10 Pa 8.97786, 1064.84, -41.136 K) in our units; it prints 56563.9 Pa at 20 °C.
        let mut given = pentane_like();
        given.vapour_pressure = CustomVapourPressure::Antoine {
            a: 5.97786,
            b: 1064.84,
            c: 232.014,
        };
        let fluid = WorkingFluid::custom(given).expect("consistent constants");
        assert!((fluid.vapour_pressure_pa(293.15) / 56_563.9 - 1.0).abs() < 1e-4);
    }

    #[test]
    fn all_faults_come_at_once() {
        let mut given = pentane_like();
        given.name = " ".to_owned();
        given.density_kg_m3 = 0.626;
        given.latent_kj_kg = f64::NAN;
        given.max_temp_c = 90.0;
        let faults = WorkingFluid::custom(given).expect_err("four faults");
        let fields: Vec<_> = faults.iter().map(|fault| fault.field.as_str()).collect();
        assert_eq!(fields, ["density_kg_m3", "latent_kj_kg", "max_temp_c", "name"]);
        let codes: Vec<_> = faults.iter().map(|fault| fault.code).collect();
        assert_eq!(codes, ["below_minimum", "not_finite", "above_maximum", "missing"]);
    }

    #[test]
    fn crooked_pressure_points_are_refused() {
        let code = |points| {
            let given = CustomFluid {
                vapour_pressure: CustomVapourPressure::Points(points),
                ..pentane_like()
            };
            WorkingFluid::custom(given).expect_err("a fault")[0].code
        };
        assert_eq!(code([(20.0, 56.57), (0.0, 24.46), (40.0, 115.7)]), "not_rising");
        assert_eq!(code([(0.0, 24.46), (1.0, 25.4), (40.0, 115.7)]), "not_rising");
        assert_eq!(code([(0.0, 24.46), (20.0, f64::INFINITY), (40.0, 115.7)]), "not_finite");
        // Three points that bend over: the curve through them falls again inside the valid range.
        assert_eq!(code([(0.0, 24.46), (20.0, 110.0), (40.0, 115.7)]), "not_rising");
    }

    #[test]
    fn latent_heat_in_the_wrong_unit_is_refused() {
        let mut given = pentane_like();
        given.latent_kj_kg = 26.7 * 4.0;
        let faults = WorkingFluid::custom(given).expect_err("inconsistent");
        assert_eq!(faults[0].code, "inconsistent");
        assert!(
            faults[0].detail.contains("370") || faults[0].detail.contains("38"),
            "{}",
            faults[0].detail
        );
    }
}
