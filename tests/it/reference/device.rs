//! Levels in the bulbs against cap volumes of a general reference library.

use std::f64::consts::PI;

use dipcast::model::device::{Definition, check, examples};

use super::table::{Row, rows};

const CAPS: &str = "reference/sphere_caps.csv";
const BODY_MM: f64 = 30.4;
const HEAD_MM: f64 = 23.4;

fn shelf() -> Definition {
    examples().swap_remove(0).definition
}

fn caps(diameter_mm: f64) -> Vec<Row> {
    rows(CAPS)
        .into_iter()
        .filter(|row| row.number("diameter_mm") == diameter_mm)
        .collect()
}

/// Cross-sections of the shelf device's tube [mm²]: clear bore of 5 mm, glass up to 7 mm.
const BORE_MM2: f64 = PI / 4.0 * 25.0;
const GLASS_MM2: f64 = PI / 4.0 * (49.0 - 25.0);

#[test]
fn the_level_at_rest_holds_the_librarys_volume() {
    let mut compared = 0;
    for row in caps(BODY_MM) {
        let height_mm = row.number("height_mm");
        let mut filled = shelf();
        // The tube's wall displaces liquid from its end, 3 mm above the bottom, upwards.
        filled.fluid.volume_ml = (row.number("volume_mm3") - GLASS_MM2 * (height_mm - 3.0)) * 1e-3;
        let Ok(checked) = check(&filled) else {
            continue;
        };
        assert!(
            (checked.derived.rest_level_mm - height_mm).abs() < 1e-6,
            "{} for {height_mm}",
            checked.derived.rest_level_mm
        );
        compared += 1;
    }
    assert!(compared >= 5, "only {compared} levels of the table make a sound device");
}

#[test]
fn the_lift_into_the_head_holds_the_librarys_volume() {
    let checked = check(&shelf()).unwrap();
    let (hydrostatics, derived) = (&checked.device.hydrostatics, &checked.derived);
    let body = |height_mm: f64| PI * height_mm * height_mm * (1.5 * BODY_MM - height_mm) / 3.0;
    let outside = |level_mm: f64| body(level_mm) - (BORE_MM2 + GLASS_MM2) * (level_mm - 3.0);
    let mouth = &caps(HEAD_MM)[0];
    for row in caps(HEAD_MM).iter().skip(1) {
        let height_mm = row.number("height_mm");
        let in_head_mm3 = row.number("volume_mm3") - mouth.number("volume_mm3");
        let lifted_mm3 = BORE_MM2 * (110.0 - derived.rest_level_mm) + in_head_mm3;
        if lifted_mm3 * 1e-9 > hydrostatics.last_volume_m3() {
            continue;
        }
        let level_mm = 110.0 + height_mm - mouth.number("height_mm") - 1e3 * hydrostatics.lift_m(lifted_mm3 * 1e-9);
        let left_mm3 = outside(derived.rest_level_mm) - outside(level_mm);
        assert!(
            (left_mm3 - lifted_mm3).abs() < 1e-3,
            "{height_mm} mm: {left_mm3} left the body for {lifted_mm3}"
        );
    }
}
