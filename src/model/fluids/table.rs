//! The table of working fluids.
//!
//! Each row's coefficients are our own fits over -20 to 80 °C to values printed by general reference libraries
//! ([Bell2014] for equations of state, [Bell2016] for the rest), which take them from the published work that `sources`
//! names; the largest misfit stands beside it. Default highest temperature of a body: 60 °C, or where the saturation
//! pressure reaches 2 bar, whichever is lower (a choice of ours, rounded down to a whole degree).

use std::borrow::Cow;

use super::hazards;
use super::working_fluid::VapourCurve::FourTerms;
use super::working_fluid::WorkingFluid;

const MINUS_20_C: f64 = 253.15;
const PLUS_80_C: f64 = 353.15;

/// All working fluids that have a row.
pub fn working_fluids() -> &'static [WorkingFluid] {
    &ROWS
}

/// The row with this name or title; letters and digits count, capitals and punctuation do not (`n-pentane` is
/// `n_pentane`).
pub fn working_fluid(name: &str) -> Option<&'static WorkingFluid> {
    ROWS.iter()
        .find(|row| same_letters(&row.name, name) || same_letters(&row.title, name))
}

fn same_letters(a: &str, b: &str) -> bool {
    let letters = |text: &str| {
        text.chars()
            .filter(|c| c.is_alphanumeric())
            .map(|c| c.to_ascii_lowercase())
            .collect::<Vec<_>>()
    };
    letters(a) == letters(b)
}

/// Place of ethanol among the rows; a test holds it there.
pub(super) const ETHANOL_ROW: usize = 5;

static ROWS: [WorkingFluid; 8] = [
    WorkingFluid {
        name: Cow::Borrowed("dichloromethane"),
        title: Cow::Borrowed("Dichloromethane"),
        cas: "75-09-2",
        molar_mass_kg_mol: 0.08493258,
        max_temp_k: 273.15 + 60.0,
        sources: &[
            "vapour pressure: Wagner equation of [VDI2010], fitted within 7e-5",
            "liquid density: [VDI2010], fitted within 2e-5",
            "latent heat: 28.82 kJ/mol at 25 °C [CRC2014] carried to other temperatures by Watson's rule, fitted \
             within 5e-5",
            "liquid specific heat: 101.2 J/(mol K) at 25 °C [CRC2014], taken constant",
            "surface tension: [Jasper1972], linear",
            "vapour compressibility: second virial coefficient of [Tsonopoulos1974] with the critical constants that \
             [Bell2016] prints, fitted within 2e-4",
        ],
        hazards: Cow::Borrowed(&hazards::DICHLOROMETHANE),
        valid_from_k: MINUS_20_C,
        valid_to_k: PLUS_80_C,
        vapour: FourTerms([102.519149055, -6202.55694137, -13.1567396341, 0.0141402972686]),
        density: [1326.761, -1.884772, -0.001670848, -5.113069e-06],
        latent: [342380.4, -605.2072, -0.8846422, -0.002570708],
        heat_capacity: [1191.533, 0.0, 0.0, 0.0],
        tension: [0.027842, -0.0001284, 0.0, 0.0],
        compressibility: [0.9829023, -0.0004766736, -4.377055e-06, -6.938524e-09],
    },
    WorkingFluid {
        name: Cow::Borrowed("diethyl_ether"),
        title: Cow::Borrowed("Diethyl ether"),
        cas: "60-29-7",
        molar_mass_kg_mol: 0.0741216,
        max_temp_k: 273.15 + 55.0,
        sources: &[
            "vapour pressure: Wagner equation of [VDI2010], fitted within 6e-5 (the equation of state starts at -3 \
             °C only)",
            "liquid density, latent heat, specific heat, vapour compressibility: equation of state of [Thol2014], \
             fitted within 5e-4; below -3 °C extrapolated by it",
            "surface tension: [Mulero2014], fitted within 1e-3",
        ],
        hazards: Cow::Borrowed(&hazards::DIETHYL_ETHER),
        valid_from_k: MINUS_20_C,
        valid_to_k: PLUS_80_C,
        vapour: FourTerms([101.029365277, -5947.42512099, -13.058978276, 0.0150976754221]),
        density: [713.5391, -1.138855, -0.001525363, -5.808902e-06],
        latent: [370522.9, -834.6104, -1.250005, -0.008739572],
        heat_capacity: [2316.949, 3.341431, 0.01103729, 0.0],
        tension: [0.01709664, -0.0001191234, 5.628274e-08, 0.0],
        compressibility: [0.9687757, -0.000916148, -6.647857e-06, -2.728096e-08],
    },
    WorkingFluid {
        name: Cow::Borrowed("n_pentane"),
        title: Cow::Borrowed("n-Pentane"),
        cas: "109-66-0",
        molar_mass_kg_mol: 0.07214878,
        max_temp_k: 273.15 + 57.0,
        sources: &[
            "vapour pressure, liquid density, latent heat, specific heat, vapour compressibility: equation of state \
             of [Thol2019], fitted within 4e-5, 6e-5, 7e-5, 5e-4, 6e-5",
            "surface tension: [Mulero2012], fitted within 1e-3",
        ],
        hazards: Cow::Borrowed(&hazards::N_PENTANE),
        valid_from_k: MINUS_20_C,
        valid_to_k: PLUS_80_C,
        vapour: FourTerms([99.8770816101, -5762.88118136, -13.0182407124, 0.0159545990082]),
        density: [626.1422, -0.9880388, -0.001053865, -5.681901e-06],
        latent: [370225.5, -755.8439, -1.310023, -0.008986057],
        heat_capacity: [2293.605, 4.451558, 0.01239924, 0.0],
        tension: [0.01600351, -0.000110557, 5.478163e-08, 0.0],
        compressibility: [0.9709819, -0.0008098, -7.55065e-06, -1.917027e-08],
    },
    WorkingFluid {
        name: Cow::Borrowed("isopentane"),
        title: Cow::Borrowed("Isopentane"),
        cas: "78-78-4",
        molar_mass_kg_mol: 0.07214878,
        max_temp_k: 273.15 + 49.0,
        sources: &[
            "vapour pressure, liquid density, latent heat, specific heat, vapour compressibility: equation of state \
             of [Lemmon2006], fitted within 3e-5, 7e-5, 1.1e-4, 1e-3, 3e-5",
            "surface tension: [Mulero2012], fitted within 8e-4",
        ],
        hazards: Cow::Borrowed(&hazards::ISOPENTANE),
        valid_from_k: MINUS_20_C,
        valid_to_k: PLUS_80_C,
        vapour: FourTerms([95.8919705569, -5454.89162564, -12.4332858747, 0.0156665230015]),
        density: [620.0363, -1.005105, -0.001206938, -6.822783e-06],
        latent: [349234.0, -746.5052, -1.477863, -0.009479108],
        heat_capacity: [2247.394, 5.161794, 0.01117847, 0.0],
        tension: [0.01498771, -0.0001082513, 7.189477e-08, 0.0],
        compressibility: [0.9637313, -0.0009369723, -8.061938e-06, -1.965609e-08],
    },
    WorkingFluid {
        name: Cow::Borrowed("acetone"),
        title: Cow::Borrowed("Acetone"),
        cas: "67-64-1",
        molar_mass_kg_mol: 0.05807914,
        max_temp_k: 273.15 + 60.0,
        sources: &[
            "vapour pressure, liquid density, latent heat, specific heat, vapour compressibility: equation of state \
             of [Lemmon2006], fitted within 7e-5, 2e-5, 3e-5, 2e-4, 3e-5",
            "surface tension: [Mulero2012], fitted within 3e-4",
        ],
        hazards: Cow::Borrowed(&hazards::ACETONE),
        valid_from_k: MINUS_20_C,
        valid_to_k: PLUS_80_C,
        vapour: FourTerms([100.775758633, -6415.40951092, -12.8283187854, 0.0139697920195]),
        density: [790.1973, -1.108855, -0.0007895395, -4.739298e-06],
        latent: [539226.1, -1000.603, -1.071318, -0.006671038],
        heat_capacity: [2131.056, 2.346987, 0.01056243, 0.0],
        tension: [0.02333432, -0.0001258545, 4.911577e-08, 0.0],
        compressibility: [0.9777115, -0.0006028295, -5.557322e-06, -1.58062e-08],
    },
    WorkingFluid {
        name: Cow::Borrowed("ethanol"),
        title: Cow::Borrowed("Ethanol"),
        cas: "64-17-5",
        molar_mass_kg_mol: 0.04606844,
        max_temp_k: 273.15 + 60.0,
        sources: &[
            "vapour pressure, liquid density, latent heat, specific heat, vapour compressibility: equation of state \
             of [Schroeder2014], fitted within 9e-5, 5e-5, 5e-5, 6e-4, 5e-5",
            "surface tension: [Mulero2012], fitted within 1e-4",
        ],
        hazards: Cow::Borrowed(&hazards::ETHANOL),
        valid_from_k: MINUS_20_C,
        valid_to_k: PLUS_80_C,
        vapour: FourTerms([58.3899566264, -6561.95950233, -4.81266677793, 4.15660770159e-05]),
        density: [789.3441, -0.8546965, -0.0004382407, -7.445486e-06],
        latent: [926021.5, -1052.203, -3.234315, -0.01945532],
        heat_capacity: [2396.775, 7.530444, 0.02813154, 0.0],
        tension: [0.02236724, -9.648012e-05, 0.0, 0.0],
        compressibility: [0.9954882, -0.0001947682, -3.381136e-06, -2.534628e-08],
    },
    WorkingFluid {
        name: Cow::Borrowed("r1233zd_e"),
        title: Cow::Borrowed("R-1233zd(E)"),
        cas: "102687-65-0",
        molar_mass_kg_mol: 0.1304962,
        max_temp_k: 273.15 + 37.0,
        sources: &[
            "vapour pressure, liquid density, latent heat, specific heat, vapour compressibility: equation of state \
             of [Akasaka2022], fitted within 3e-6, 2e-4, 3e-4, 3e-3, 4e-5",
            "surface tension: correlation of [Lemmon2018], fitted within 2e-3",
        ],
        hazards: Cow::Borrowed(&hazards::R1233ZD),
        valid_from_k: MINUS_20_C,
        valid_to_k: PLUS_80_C,
        vapour: FourTerms([115.09799075, -6016.37275961, -15.6670517401, 0.0205381244023]),
        density: [1274.951, -2.376861, -0.003493139, -2.110595e-05],
        latent: [193389.6, -488.9232, -1.056882, -0.008425297],
        heat_capacity: [1174.8, 2.106815, 0.006874886, 0.0],
        tension: [0.01521726, -0.0001324574, 1.337778e-07, 0.0],
        compressibility: [0.9564598, -0.001166191, -1.046807e-05, -2.815313e-08],
    },
    WorkingFluid {
        name: Cow::Borrowed("re347mcc"),
        title: Cow::Borrowed("RE347mcc (methoxy-heptafluoropropane)"),
        cas: "375-03-1",
        molar_mass_kg_mol: 0.2000548,
        max_temp_k: 273.15 + 54.0,
        sources: &[
            "vapour pressure, liquid density, latent heat, specific heat, surface tension: saturation fits of \
             [Lemmon2018] as [Bell2016] prints them, fitted within 3e-5, 2e-4, 3e-4, 1e-3, 2e-3",
            "vapour compressibility: second virial coefficient of [Tsonopoulos1974] with the critical constants that \
             [Bell2016] prints, fitted within 3e-4",
        ],
        hazards: Cow::Borrowed(&hazards::RE347MCC),
        valid_from_k: MINUS_20_C,
        valid_to_k: PLUS_80_C,
        vapour: FourTerms([159.278220825, -7720.95792804, -22.987234053, 0.0294137026585]),
        density: [1418.531, -2.719207, -0.003496363, -2.315314e-05],
        latent: [139546.4, -408.4689, -0.3587335, -0.006331852],
        heat_capacity: [1242.911, 0.8908432, 0.0126383, 0.0],
        tension: [0.01284612, -0.0001093115, 9.417929e-08, 0.0],
        compressibility: [0.9633154, -0.001003479, -8.441605e-06, -4.795232e-09],
    },
];

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn slope_and_saturation_temperature_follow_the_curve() {
        for fluid in working_fluids() {
            let mut t = 253.15;
            while t < 353.0 {
                let numeric = (fluid.vapour_pressure_pa(t + 1e-3) - fluid.vapour_pressure_pa(t - 1e-3)) / 2e-3;
                assert!(
                    (numeric / fluid.vapour_slope_pa_k(t) - 1.0).abs() < 1e-7,
                    "{} {t}",
                    fluid.name
                );
                let back = fluid.saturation_temp_k(fluid.vapour_pressure_pa(t));
                assert!((back / t - 1.0).abs() < 1e-12, "{} {t}", fluid.name);
                t += 3.1;
            }
            assert!(fluid.saturation_temp_k(0.0).is_nan() && fluid.saturation_temp_k(f64::NAN).is_nan());
        }
    }

    #[test]
    fn ethanol_stands_where_the_mixtures_look_for_it() {
        assert_eq!(working_fluids()[ETHANOL_ROW].name, "ethanol");
    }

    #[test]
    fn names_are_found_in_any_spelling() {
        for name in [
            "n-pentane",
            "n_pentane",
            "N-Pentane",
            "R-1233zd(E)",
            "r1233zd_e",
            "diethyl ether",
        ] {
            assert!(working_fluid(name).is_some(), "{name}");
        }
        assert!(working_fluid("pentan").is_none());
    }

    #[test]
    fn every_row_is_whole() {
        for fluid in working_fluids() {
            let (low, high) = fluid.valid_range_k();
            assert!(low < 273.15 && fluid.max_temp_k <= high);
            assert!(!fluid.sources.is_empty() && fluid.hazards.len() >= 3, "{}", fluid.name);
            assert!(
                fluid.vapour_pressure_pa(fluid.max_temp_k) <= 200_000.0,
                "{}",
                fluid.name
            );
        }
    }
}
