//! What a user says about a device, in the units of a drawing. `None` means "not given": the check fills it and says so.

/// A device as drawn. Lengths in mm, areas in cm², masses in g, volumes in mL.
#[derive(Debug, Clone, PartialEq)]
pub struct Definition {
    /// Free name, 1-80 characters.
    pub name: String,
    /// The upper bulb with the felt.
    pub head: HeadDefinition,
    /// The tube between the bulbs.
    pub tube: TubeDefinition,
    /// The lower bulb.
    pub body: BodyDefinition,
    /// What is sealed inside.
    pub fluid: FluidDefinition,
    /// When it tips.
    pub balance: BalanceDefinition,
    /// What happens in a dip.
    pub dip: DipDefinition,
    /// Heat conducted from body to head by glass and liquid [W/K].
    pub conduction_w_k: Option<f64>,
    /// What the felt is wetted with.
    pub evaporant: EvaporantDefinition,
    /// A lamp that shines on one end, if any.
    pub lamp: Option<LampDefinition>,
    /// The cup it drinks from; `None` for a device that is wetted by hand.
    pub cup: Option<CupDefinition>,
    /// Highest temperature the maker allows [°C]; the fluid's own limit if not given.
    pub max_temperature_c: Option<f64>,
}

/// The head bulb.
#[derive(Debug, Clone, PartialEq)]
pub struct HeadDefinition {
    /// Outer diameter of the glass [mm].
    pub outer_diameter_mm: f64,
    /// Wall thickness [mm].
    pub wall_mm: f64,
    /// Wet area of the beak, outside the sphere [cm²].
    pub beak_area_cm2: Option<f64>,
    /// The felt cover.
    pub felt: FeltDefinition,
}

/// The felt on the head.
#[derive(Debug, Clone, PartialEq)]
pub struct FeltDefinition {
    /// Thickness when wet [mm].
    pub thickness_mm: f64,
    /// Mass when dry [g].
    pub dry_mass_g: f64,
    /// Liquid it holds when full [g of water].
    pub capacity_g: f64,
    /// Most liquid taken up in one dip [g].
    pub uptake_g: Option<f64>,
    /// Share of the capacity below which the surface starts to dry (0-1).
    pub critical_share: Option<f64>,
    /// Share of the felt's liquid exchanged with the cup in each dip (0-1).
    pub exchange_share: Option<f64>,
    /// Share of short-wave radiation the wet felt absorbs (0-1).
    pub absorptance: Option<f64>,
}

/// The tube.
#[derive(Debug, Clone, PartialEq)]
pub struct TubeDefinition {
    /// Inner diameter [mm].
    pub bore_mm: f64,
    /// Outer diameter [mm].
    pub outer_diameter_mm: f64,
    /// From the body's inner bottom to the head's bottom [mm].
    pub length_mm: f64,
    /// Gap between the tube's lower end and the body's inner bottom [mm].
    pub end_gap_mm: Option<f64>,
}

/// The body bulb.
#[derive(Debug, Clone, PartialEq)]
pub struct BodyDefinition {
    /// Outer diameter of the glass [mm].
    pub outer_diameter_mm: f64,
    /// Wall thickness [mm].
    pub wall_mm: f64,
    /// Share of short-wave radiation the body absorbs (0-1).
    pub absorptance: Option<f64>,
}

/// The working fluid.
#[derive(Debug, Clone, PartialEq)]
pub struct FluidDefinition {
    /// A name of the fluid table, or `custom`.
    pub name: String,
    /// Volume at 20 °C [mL].
    pub volume_ml: f64,
    /// The constants of a `custom` fluid.
    pub custom: Option<crate::model::fluids::CustomFluid>,
}

/// When the device lets go.
#[derive(Debug, Clone, PartialEq)]
pub enum BalanceDefinition {
    /// The lifted volume at which it tips was measured or is wanted.
    TipVolume {
        /// Lifted volume at the tip [mL].
        tip_volume_ml: f64,
        /// Angle from upright at which the beak meets the cup [°].
        dip_angle_deg: Option<f64>,
    },
    /// It follows from the masses about the pivot.
    Masses {
        /// Pivot above the body's inner bottom [mm].
        pivot_height_mm: f64,
        /// Sum of mass times forward offset of everything but the liquid [g mm].
        forward_moment_g_mm: f64,
        /// Angle from upright at which the beak meets the cup [°].
        dip_angle_deg: Option<f64>,
        /// Density of the glass [g/cm³].
        glass_density_g_cm3: Option<f64>,
        /// Beak, crossbar, hat, ballast: anything not glass, felt or liquid.
        extra: Vec<ExtraMass>,
    },
}

/// A mass that is neither glass, felt nor liquid.
#[derive(Debug, Clone, PartialEq)]
pub struct ExtraMass {
    /// Mass [g].
    pub mass_g: f64,
    /// Height above the body's inner bottom [mm].
    pub height_mm: f64,
}

/// What happens in a dip.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct DipDefinition {
    /// Time from letting go to upright again [s].
    pub seconds: Option<f64>,
    /// Share of the head's liquid that drains in a dip (0-1).
    pub drain_fraction: Option<f64>,
    /// Share of the temperature difference closed by vapour in a dip (0-1).
    pub vapour_reset: Option<f64>,
}

/// What the felt is wetted with.
#[derive(Debug, Clone, PartialEq)]
pub struct EvaporantDefinition {
    /// `water` or `ethanol_water`.
    pub name: String,
    /// Strength of `ethanol_water` [% by volume at 20 °C].
    pub strength_abv_pct: Option<f64>,
    /// Hardness of the water [mg/L as CaCO3], for scale.
    pub hardness_mg_l: Option<f64>,
    /// Evaporation lost for each mg/cm² of scale on the felt [%].
    pub scale_effect_pct: Option<f64>,
}

/// The end a lamp shines on.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum LampTarget {
    /// The lower bulb.
    Body,
    /// The felted bulb.
    Head,
}

/// A lamp on one end.
#[derive(Debug, Clone, PartialEq)]
pub struct LampDefinition {
    /// The end it shines on.
    pub on: LampTarget,
    /// Power absorbed there while lit [W].
    pub absorbed_w: f64,
}

/// The cup.
#[derive(Debug, Clone, PartialEq)]
pub struct CupDefinition {
    /// Diameter of the opening [mm].
    pub opening_diameter_mm: f64,
    /// Depth from rim to bottom [mm].
    pub depth_mm: f64,
    /// How far the level may fall from the brim mark before the beak misses it [mm].
    pub reach_mm: f64,
    /// Share of the opening that is covered (0-1).
    pub covered_fraction: Option<f64>,
    /// Brim mark below the rim [mm].
    pub freeboard_mm: Option<f64>,
    /// Devices of this kind that drink from this cup.
    pub shared_by: Option<u32>,
}
