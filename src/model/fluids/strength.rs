//! What depends on the strength of an ethanol-water mixture: freezing point and flash point.

/// Ethanol mass fraction [%] and freezing point [°C] [Melinder2010], as [Bell2014] prints them; water set to 0 exactly.
const FREEZING: [(f64, f64); 13] = [
    (0.0, 0.0),
    (5.0, -2.03),
    (10.0, -4.38),
    (15.0, -7.39),
    (20.0, -11.12),
    (25.0, -15.45),
    (30.0, -20.14),
    (35.0, -24.92),
    (40.0, -29.53),
    (45.0, -33.78),
    (50.0, -37.61),
    (55.0, -41.18),
    (60.0, -44.91),
];

/// Strength [% ABV] and flash point [°C] [EngineeringToolbox2005]. The page calls the percentages mass fractions,
/// others print the same pairs for volume; read by volume they are the lower, so the more cautious, by 1 to 3 K.
const FLASH: [(f64, f64); 11] = [
    (5.0, 62.0),
    (10.0, 49.0),
    (20.0, 36.0),
    (30.0, 29.0),
    (40.0, 26.0),
    (50.0, 24.0),
    (60.0, 22.0),
    (70.0, 21.0),
    (80.0, 20.0),
    (90.0, 17.0),
    (96.0, 17.0),
];

/// Flash point of pure ethanol, closed cup [°C] [EngineeringToolbox2005].
const PURE_ETHANOL_FLASH_C: f64 = 13.0;

/// Temperature [K] at which ice begins to form in a mixture of this ethanol mass fraction [0-1] [Melinder2010].
///
/// Linear between rows 5 % apart. Above 60 % by mass the value of 60 % is kept (the true one is lower).
pub fn freezing_point_of_strength_k(mass_fraction: f64) -> f64 {
    273.15 + interpolate(&FREEZING, 100.0 * mass_fraction)
}

/// Flash point [°C] of an ethanol-water mixture by strength [% ABV]; none below 5 % [EngineeringToolbox2005].
///
/// ```
/// assert_eq!(dipcast::model::fluids::flash_point_c(40.0), Some(26.0));
/// assert_eq!(dipcast::model::fluids::flash_point_c(0.0), None);
/// ```
pub fn flash_point_c(abv_pct: f64) -> Option<f64> {
    match abv_pct {
        weak if weak.is_nan() || weak < FLASH[0].0 => None,
        strong if strong > 96.0 => {
            let share = ((strong - 96.0) / 4.0).min(1.0);
            Some(17.0 + share * (PURE_ETHANOL_FLASH_C - 17.0))
        }
        _ => Some(interpolate(&FLASH, abv_pct)),
    }
}

/// Linear between rows, level beyond the ends.
fn interpolate(rows: &[(f64, f64)], x: f64) -> f64 {
    let above = rows.partition_point(|row| row.0 < x);
    if above == 0 {
        return rows[0].1;
    }
    let Some(&(x1, y1)) = rows.get(above) else {
        return rows[rows.len() - 1].1;
    };
    let (x0, y0) = rows[above - 1];
    y0 + (y1 - y0) * (x - x0) / (x1 - x0)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn stronger_freezes_and_flashes_lower() {
        for step in 1..=60 {
            let w = f64::from(step) / 100.0;
            assert!(freezing_point_of_strength_k(w) < freezing_point_of_strength_k(w - 0.01));
        }
        assert_eq!(freezing_point_of_strength_k(0.0), 273.15);
        assert_eq!(freezing_point_of_strength_k(0.9), freezing_point_of_strength_k(0.6));
        for abv in 6..=100 {
            let abv = f64::from(abv);
            assert!(flash_point_c(abv).expect("strong enough") <= flash_point_c(abv - 1.0).expect("strong enough"));
        }
        assert_eq!(flash_point_c(100.0), Some(13.0));
        assert_eq!(flash_point_c(f64::NAN), None);
    }
}
