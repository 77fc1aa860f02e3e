//! Moist air against IAPWS, psychrolib, CoolProp, WMO-No. 8 and a weather station.

use dipcast::model::air::{self, Air};

use super::table::{close, near, rows};

const ATMOSPHERE_PA: f64 = 101_325.0;

fn kelvin(temp_c: f64) -> f64 {
    temp_c + 273.15
}

#[test]
fn saturation_at_300_kelvin_is_the_verification_value_of_iapws_if97() {
    // IAPWS R7-97, table 35: 0.353658941e-2 MPa. Hyland-Wexler agrees with it within 0.03 %.
    near("300 K", air::saturation_pressure_pa(300.0), 3536.58941, 3e-4);
}

#[test]
fn saturation_follows_the_printed_tables() {
    for row in rows("reference/water.csv") {
        let found = air::saturation_pressure_pa(kelvin(row.number("T_C")));
        // Seven printed digits of the same equation; the triple point stands as 0.01 °C.
        near(
            "Hyland-Wexler",
            found,
            row.number("psat_HylandWexler_psychrolib_Pa"),
            1e-9,
        );
        near("IAPWS-95", found, row.number("psat_IAPWS95_Pa"), 3e-4);
        near("IF97", found, row.number("psat_IF97_Pa"), 3e-4);
    }
}

#[test]
fn supercooled_water_and_ice_follow_their_tables() {
    // Murphy & Koop 2005, table C1, liquid and ice (remembered, not looked up).
    near("liquid 240 K", air::saturation_pressure_pa(240.0), 37.667, 1e-4);
    near("ice 240 K", air::saturation_pressure_ice_pa(240.0), 27.272, 1e-4);
    near("ice 273.15 K", air::saturation_pressure_ice_pa(273.15), 611.154, 1e-5);
    for row in rows("reference/ice.csv") {
        let found = air::saturation_pressure_ice_pa(kelvin(row.number("T_C")));
        near("ice", found, row.number("psat_ice_Pa"), 1e-3);
    }
}

#[test]
fn supercooled_water_agrees_with_the_formula_of_weather_services() {
    // WMO-No. 8, annex 4.B: 6.112 hPa exp(17.62 t / (243.12 + t)), -45 to 60 °C. It is a coarser formula: 0.6 % at -30
    // °C.
    for t in [-30.0, -20.0, -10.0, -5.0, -1.0, 0.0, 20.0, 40.0] {
        let printed = 611.2 * (17.62_f64 * t / (243.12 + t)).exp();
        near("WMO", air::saturation_pressure_pa(kelvin(t)), printed, 7e-3);
    }
}

#[test]
fn nothing_jumps_at_zero_celsius() {
    for step in [1e-9, 1e-6] {
        let (below, above) = (kelvin(0.0) - step, kelvin(0.0) + step);
        near(
            "pressure",
            air::saturation_pressure_pa(below),
            air::saturation_pressure_pa(above),
            2e-5,
        );
        let (cold, warm) = (
            Air::from_relative_humidity(below, 0.6, 9e4),
            Air::from_relative_humidity(above, 0.6, 9e4),
        );
        close("wet bulb", air::wet_bulb_k(&cold), air::wet_bulb_k(&warm), 1e-3);
    }
}

#[test]
fn latent_heats_follow_the_printed_tables() {
    for row in rows("reference/water.csv") {
        let found = air::latent_heat_vaporisation_j_kg(kelvin(row.number("T_C")));
        near("IAPWS-95", found, row.number("hfg_J_per_kg"), 5e-4);
    }
    // Heats at the triple point: 2834.4 kJ/kg of sublimation less 333.4 of melting (IAPWS R14-08 gives the melting
    // heat).
    near("sublimation", air::latent_heat_sublimation_j_kg(273.16), 2834.4e3, 5e-4);
    // The slope of the saturation curves must carry the same heats (Clapeyron, ideal vapour), also below 0 °C.
    for t in [243.15, 258.15, 272.15, 283.15] {
        let gas = air::GAS_CONSTANT_J_MOLK / air::MOLAR_MASS_WATER_KG_MOL;
        let implied = gas * t * t * air::saturation_slope_pa_k(t) / air::saturation_pressure_pa(t);
        near("Clapeyron", air::latent_heat_vaporisation_j_kg(t), implied, 2e-3);
    }
}

#[test]
fn humidity_measures_follow_psychrolib() {
    for row in rows("reference/moist_air.csv") {
        let pressure = row.number("P_Pa");
        let air = Air::from_relative_humidity(kelvin(row.number("T_C")), row.number("RH_pct") / 100.0, pressure);
        near(
            "ratio",
            air::humidity_ratio(air.vapour_pressure_pa, pressure),
            row.number("humidity_ratio"),
            1e-4,
        );
        near("density", air.density_kg_m3(), row.number("density_kg_m3"), 1e-4);
        let dew_c = row.number("dew_point_C");
        if dew_c >= 0.0 {
            close(
                "dew point",
                air::dew_point_k(air.vapour_pressure_pa),
                kelvin(dew_c),
                0.002,
            );
        } else {
            // The library's dew points below 0 °C are over ice.
            near(
                "frost point",
                air::saturation_pressure_ice_pa(kelvin(dew_c)),
                air.vapour_pressure_pa,
                1e-3,
            );
        }
    }
}

/// The branch a library took is told by the sign of what it printed; 0.05 K on each.
fn assert_wet_bulb(air: &Air, printed_c: f64, what: &str) {
    let found = if printed_c >= 0.0 {
        air::wet_bulb_k(air)
    } else {
        air::wet_bulb_ice_k(air)
    };
    close(what, found, kelvin(printed_c), 0.05);
}

#[test]
fn wet_bulbs_follow_two_libraries_over_the_whole_grid() {
    let mut apart = Vec::new();
    for row in rows("reference/wetbulb_grid.csv") {
        let [hpa, temp_c, rh] = ["P_hPa", "T_C", "RH_pct"].map(|column| row.number(column));
        let [psychrolib, coolprop] = ["Tw_psychrolib_C", "Tw_coolprop_C"].map(|column| row.number(column));
        // Below 0 °C both libraries count relative humidity over ice.
        let saturation = if temp_c < 0.0 {
            air::saturation_pressure_ice_pa
        } else {
            air::saturation_pressure_pa
        };
        let temp_k = kelvin(temp_c);
        let air = Air {
            temp_k,
            vapour_pressure_pa: saturation(temp_k) * rh / 100.0,
            pressure_pa: hpa * 100.0,
        };
        let name = format!("{temp_c} °C, {rh} %, {hpa} hPa");
        assert_wet_bulb(&air, psychrolib, &format!("psychrolib at {name}"));
        assert_wet_bulb(&air, coolprop, &format!("CoolProp at {name}"));
        if (psychrolib - coolprop).abs() > 0.05 {
            apart.push(name);
        }
    }
    // In these two rows the libraries take different branches at 0 °C, 0.7 K apart; both branches are ours as well.
    assert_eq!(apart, ["10 °C, 1 %, 1013.25 hPa", "10 °C, 10 %, 850 hPa"]);
}

#[test]
fn wet_bulbs_follow_a_weather_station() {
    let mut differences = Vec::new();
    for row in rows("data/lincoln_ne_2023_wet_bulb.csv") {
        let vapour = air::saturation_pressure_pa(kelvin(row.number("dew_point_c")));
        let air = Air {
            temp_k: kelvin(row.number("dry_bulb_c")),
            vapour_pressure_pa: vapour,
            pressure_pa: row.number("station_pressure_hpa") * 100.0,
        };
        differences.push(air::wet_bulb_k(&air) - kelvin(row.number("wet_bulb_c")));
    }
    let mean = differences.iter().sum::<f64>() / differences.len() as f64;
    let worst = differences
        .iter()
        .fold(0.0_f64, |worst, difference| worst.max(difference.abs()));
    println!(
        "station wet bulbs: {} rows, mean {mean:.3} K, worst {worst:.3} K",
        differences.len()
    );
    assert!(mean.abs() < 0.05 && worst < 0.3, "mean {mean}, worst {worst}");
}

#[test]
fn pressure_falls_with_height_as_in_the_standard_atmosphere() {
    // ICAO Doc 7488/3, geopotential height (remembered, not looked up).
    for (metre, pascal) in [
        (0.0, 101_325.0),
        (1000.0, 89_874.6),
        (5000.0, 54_019.9),
        (11_000.0, 22_632.0),
    ] {
        near("standard pressure", air::standard_pressure_pa(metre), pascal, 1e-5);
    }
}

#[test]
fn dry_air_follows_a_general_library() {
    for row in rows("reference/dry_air.csv") {
        let t = kelvin(row.number("T_C"));
        near(
            "viscosity",
            air::dynamic_viscosity_pa_s(t),
            row.number("viscosity_Pa_s"),
            0.01,
        );
        near(
            "conductivity",
            air::thermal_conductivity_w_mk(t),
            row.number("conductivity_W_mK"),
            0.01,
        );
        near(
            "specific heat",
            air::specific_heat_j_kgk(),
            row.number("specific_heat_J_kgK"),
            3e-3,
        );
    }
}

#[test]
fn vapours_diffuse_as_handbooks_say() {
    // Incropera & DeWitt, table A.8, at 298 K: water 0.26e-4, ethanol (ethyl alcohol) 0.12e-4 m2/s (remembered, not
    // looked up); two digits are printed.
    near(
        "water",
        air::diffusivity_water_m2_s(298.0, ATMOSPHERE_PA),
        0.26e-4,
        0.04,
    );
    near(
        "ethanol",
        air::diffusivity_ethanol_m2_s(298.0, ATMOSPHERE_PA),
        0.12e-4,
        0.04,
    );
    // Perry, 8th ed., table 2-324: ethyl alcohol in air at 0 °C and 1 atm, 0.102 cm2/s.
    near(
        "ethanol",
        air::diffusivity_ethanol_m2_s(273.15, ATMOSPHERE_PA),
        0.102e-4,
        1e-9,
    );
    near(
        "pressure",
        air::diffusivity_water_m2_s(298.0, 5e4),
        2.0265 * air::diffusivity_water_m2_s(298.0, ATMOSPHERE_PA),
        1e-9,
    );
}
