//! What every number of a definition may be: the one place; the wire format's schema repeats it and a test compares.
//!
//! The limits are ours: wide enough for anything that could still be built of glass, narrow enough to catch a wrong unit.

/// Least and greatest value of one number of a definition.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Bound {
    /// Slash path of the field; `*` stands for any index.
    pub field: &'static str,
    /// Unit in words of the field; empty for shares and counts.
    pub unit: &'static str,
    /// Least value allowed.
    pub minimum: f64,
    /// Greatest value allowed.
    pub maximum: f64,
}

macro_rules! bounds {
    ($($name:ident $field:literal $unit:literal $minimum:literal $maximum:literal)*) => {
        $(
            #[doc = concat!("`", $field, "` lies in ", $minimum, " to ", $maximum, " ", $unit, ".")]
            pub const $name: Bound = Bound { field: $field, unit: $unit, minimum: $minimum, maximum: $maximum };
        )*
        /// Every bound.
        pub const ALL_BOUNDS: &[Bound] = &[$($name),*];
    };
}

bounds! {
    HEAD_OUTER_DIAMETER_MM "head/outer_diameter_mm" "mm" 8.0 300.0
    HEAD_WALL_MM "head/wall_mm" "mm" 0.2 10.0
    BEAK_AREA_CM2 "head/beak_area_cm2" "cm2" 0.0 500.0
    FELT_THICKNESS_MM "head/felt/thickness_mm" "mm" 0.1 10.0
    FELT_DRY_MASS_G "head/felt/dry_mass_g" "g" 0.01 500.0
    FELT_CAPACITY_G "head/felt/capacity_g" "g" 0.01 1000.0
    FELT_UPTAKE_G "head/felt/uptake_g" "g" 0.0 1000.0
    FELT_CRITICAL_SHARE "head/felt/critical_share" "" 0.0 1.0
    FELT_EXCHANGE_SHARE "head/felt/exchange_share" "" 0.0 1.0
    FELT_ABSORPTANCE "head/felt/absorptance" "" 0.0 1.0
    TUBE_BORE_MM "tube/bore_mm" "mm" 0.5 50.0
    TUBE_OUTER_DIAMETER_MM "tube/outer_diameter_mm" "mm" 1.0 60.0
    TUBE_LENGTH_MM "tube/length_mm" "mm" 20.0 3000.0
    TUBE_END_GAP_MM "tube/end_gap_mm" "mm" 0.5 50.0
    BODY_OUTER_DIAMETER_MM "body/outer_diameter_mm" "mm" 10.0 400.0
    BODY_WALL_MM "body/wall_mm" "mm" 0.2 10.0
    BODY_ABSORPTANCE "body/absorptance" "" 0.0 1.0
    FLUID_VOLUME_ML "fluid/volume_ml" "mL" 0.5 20000.0
    TIP_VOLUME_ML "balance/tip_volume_ml" "mL" 0.01 10000.0
    DIP_ANGLE_DEG "balance/dip_angle_deg" "deg" 30.0 90.0
    PIVOT_HEIGHT_MM "balance/pivot_height_mm" "mm" 1.0 3000.0
    FORWARD_MOMENT_G_MM "balance/forward_moment_g_mm" "g mm" 0.01 1000000.0
    GLASS_DENSITY_G_CM3 "balance/glass_density_g_cm3" "g/cm3" 2.0 4.0
    EXTRA_MASS_G "balance/extra/*/mass_g" "g" 0.0 5000.0
    EXTRA_HEIGHT_MM "balance/extra/*/height_mm" "mm" -500.0 4000.0
    DIP_SECONDS "dip/seconds" "s" 0.0 60.0
    DRAIN_FRACTION "dip/drain_fraction" "" 0.0 1.0
    VAPOUR_RESET "dip/vapour_reset" "" 0.0 1.0
    CONDUCTION_W_K "conduction_w_k" "W/K" 0.0 1.0
    STRENGTH_ABV_PCT "evaporant/strength_abv_pct" "% by volume" 0.0 96.0
    HARDNESS_MG_L "evaporant/hardness_mg_l" "mg/L" 0.0 2000.0
    SCALE_EFFECT_PCT "evaporant/scale_effect_pct" "%" 0.0 20.0
    LAMP_ABSORBED_W "lamp/absorbed_w" "W" 0.0 1000.0
    CUP_OPENING_DIAMETER_MM "cup/opening_diameter_mm" "mm" 5.0 2000.0
    CUP_DEPTH_MM "cup/depth_mm" "mm" 2.0 1000.0
    CUP_REACH_MM "cup/reach_mm" "mm" 0.1 500.0
    CUP_COVERED_FRACTION "cup/covered_fraction" "" 0.0 1.0
    CUP_FREEBOARD_MM "cup/freeboard_mm" "mm" 0.0 500.0
    CUP_SHARED_BY "cup/shared_by" "" 1.0 100.0
    MAX_TEMPERATURE_C "max_temperature_c" "deg C" 10.0 150.0
}

/// Most characters of a device's name.
pub const NAME_MAX_CHARACTERS: usize = 80;
/// Most extra masses.
pub const EXTRA_MASSES_MAX: usize = 32;
