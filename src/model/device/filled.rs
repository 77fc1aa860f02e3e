//! What a definition leaves out is filled here, and every filled value is said.

use super::definition::{BalanceDefinition, CupDefinition, Definition};
use crate::model::notes::Assumption;

/// Gap between the tube's lower end and the body's bottom [mm].
pub const DEFAULT_END_GAP_MM: f64 = 3.0;
/// Lean at which the beak meets the cup [°].
pub const DEFAULT_DIP_ANGLE_DEG: f64 = 80.0;
/// Share of the felt's capacity taken up in one dip at most: 0.05 g for a felt that holds 0.8 g.
pub const DEFAULT_UPTAKE_SHARE: f64 = 1.0 / 16.0;
/// Share of the felt's capacity below which its surface starts to dry.
pub const DEFAULT_CRITICAL_SHARE: f64 = 0.3;
/// Share of the felt's liquid exchanged with the cup in each dip.
pub const DEFAULT_EXCHANGE_SHARE: f64 = 0.05;
/// Heat conducted from body to head [W/K].
pub const DEFAULT_CONDUCTION_W_K: f64 = 0.002;
/// Evaporation lost for each mg/cm² of scale on the felt [%]; assumed until service records say better.
pub const DEFAULT_SCALE_EFFECT_PCT: f64 = 1.0;
/// Time from letting go to upright again [s].
pub const DEFAULT_DIP_SECONDS: f64 = 2.0;
/// Share of the head's liquid that drains in a dip.
pub const DEFAULT_DRAIN_FRACTION: f64 = 1.0;
/// Share of the temperature difference closed by vapour in a dip.
pub const DEFAULT_VAPOUR_RESET: f64 = 0.5;
/// Brim mark below the cup's rim [mm].
pub const DEFAULT_FREEBOARD_MM: f64 = 5.0;
/// Share of short-wave radiation clear glass with liquid in it absorbs.
pub const DEFAULT_ABSORPTANCE: f64 = 0.1;
/// Share of short-wave radiation a wet dyed felt absorbs: common practice, no source.
pub const DEFAULT_FELT_ABSORPTANCE: f64 = 0.7;
/// Density of borosilicate glass 3.3 [g/cm³] [ISO3585].
pub const DEFAULT_GLASS_DENSITY_G_CM3: f64 = 2.23;

/// The optional numbers of a definition, all there, still in its units.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Filled {
    pub(super) beak_area_cm2: f64,
    pub(super) uptake_g: f64,
    pub(super) critical_share: f64,
    pub(super) exchange_share: f64,
    pub(super) felt_absorptance: f64,
    pub(super) end_gap_mm: f64,
    pub(super) absorptance: f64,
    pub(super) dip_angle_deg: f64,
    pub(super) glass_density_g_cm3: f64,
    pub(super) dip_seconds: f64,
    pub(super) drain_fraction: f64,
    pub(super) vapour_reset: f64,
    pub(super) conduction_w_k: f64,
    pub(super) hardness_mg_l: f64,
    pub(super) scale_effect_pct: f64,
    pub(super) covered_fraction: f64,
    pub(super) freeboard_mm: f64,
    pub(super) shared_by: u32,
}

/// Takes given values, fills the missing ones and remembers which.
struct Filler(Vec<Assumption>);

impl Filler {
    fn number(&mut self, given: Option<f64>, default: f64, unit: &str, what: &str, effect: &str) -> f64 {
        given.unwrap_or_else(|| {
            let value = format!("{default} {unit}");
            self.0.push(Assumption::new(what, value.trim_end(), effect));
            default
        })
    }
}

impl Filled {
    /// Fills a definition; the assumptions come in the order of its fields.
    pub(super) fn from(definition: &Definition) -> (Self, Vec<Assumption>) {
        let mut filler = Filler(Vec::new());
        let felt = fill_felt(definition, &mut filler);
        let build = fill_build(definition, &mut filler);
        let cycle = fill_cycle(definition, &mut filler);
        let cup = fill_cup(definition.cup.as_ref(), &mut filler);
        let filled = Self {
            beak_area_cm2: felt[0],
            uptake_g: felt[1],
            critical_share: felt[2],
            exchange_share: felt[3],
            felt_absorptance: felt[4],
            end_gap_mm: build[0],
            absorptance: build[1],
            dip_angle_deg: build[2],
            glass_density_g_cm3: build[3],
            dip_seconds: cycle[0],
            drain_fraction: cycle[1],
            vapour_reset: cycle[2],
            conduction_w_k: cycle[3],
            hardness_mg_l: cycle[4],
            scale_effect_pct: cycle[5],
            covered_fraction: cup.0,
            freeboard_mm: cup.1,
            shared_by: cup.2,
        };
        (filled, filler.0)
    }
}

/// Beak area, uptake, critical share, exchange share, absorptance.
fn fill_felt(definition: &Definition, filler: &mut Filler) -> [f64; 5] {
    let felt = &definition.head.felt;
    let beak = "water and rate: a felted beak adds wet area beside the sphere";
    let uptake = "how fast a dried felt is wet again; the rate only if a cycle evaporates more than this";
    let critical = "how early a felt that is not refilled slows down; nothing while it drinks";
    let exchange = "with spirit: how fast the felt's strength follows the cup's; nothing with water";
    [
        filler.number(definition.head.beak_area_cm2, 0.0, "cm2", "wet area of the beak", beak),
        filler.number(
            felt.uptake_g,
            DEFAULT_UPTAKE_SHARE * felt.capacity_g,
            "g",
            "most liquid the felt takes up in one dip (a sixteenth of its capacity, many times what a cycle evaporates)",
            uptake,
        ),
        filler.number(
            felt.critical_share,
            DEFAULT_CRITICAL_SHARE,
            "",
            "share of the felt's capacity below which its surface starts to dry",
            critical,
        ),
        filler.number(
            felt.exchange_share,
            DEFAULT_EXCHANGE_SHARE,
            "",
            "share of the felt's liquid exchanged with the cup in each dip",
            exchange,
        ),
        filler.number(
            felt.absorptance,
            DEFAULT_FELT_ABSORPTANCE,
            "",
            "share of short-wave radiation the felt absorbs (wet and dyed)",
            "sun on the head, which slows it; nothing where no short-wave radiation reaches the device",
        ),
    ]
}

/// End gap, absorptance, dip angle, glass density.
fn fill_build(definition: &Definition, filler: &mut Filler) -> [f64; 4] {
    let (angle, glass_density) = match &definition.balance {
        BalanceDefinition::TipVolume { dip_angle_deg, .. } => (*dip_angle_deg, Some(DEFAULT_GLASS_DENSITY_G_CM3)),
        BalanceDefinition::Masses {
            dip_angle_deg,
            glass_density_g_cm3,
            ..
        } => (*dip_angle_deg, *glass_density_g_cm3),
    };
    let gap = "the level at which the body runs out of liquid, and whether the end lies free in a dip";
    let sun = "heat of the sun in the body; nothing where no short-wave radiation reaches the device";
    let end = "whether the tube's end lies free in a dip, so that vapour can pass";
    [
        filler.number(
            definition.tube.end_gap_mm,
            DEFAULT_END_GAP_MM,
            "mm",
            "gap between the tube's lower end and the body's inner bottom",
            gap,
        ),
        filler.number(
            definition.body.absorptance,
            DEFAULT_ABSORPTANCE,
            "",
            "share of short-wave radiation the body absorbs (clear glass)",
            sun,
        ),
        filler.number(
            angle,
            DEFAULT_DIP_ANGLE_DEG,
            "deg",
            "lean from upright at which the beak meets the cup",
            end,
        ),
        filler.number(
            glass_density,
            DEFAULT_GLASS_DENSITY_G_CM3,
            "g/cm3",
            "density of the glass (borosilicate 3.3)",
            "the masses, and with them the tip volume",
        ),
    ]
}

/// Dip seconds, drain fraction, vapour reset, conduction, hardness, effect of scale.
fn fill_cycle(definition: &Definition, filler: &mut Filler) -> [f64; 6] {
    let dip = &definition.dip;
    let reset = "the period by up to a factor of two, hardly the water; calibrate the heat per cycle on one timed run";
    let conduction = "the stall humidity and slow cycles a little; glass and liquid alone conduct about 0.0003 in a shelf device, the rest stands \
                      for vapour that passes between dips";
    [
        filler.number(
            dip.seconds,
            DEFAULT_DIP_SECONDS,
            "s",
            "time from letting go to upright again",
            "the period by less than a percent",
        ),
        filler.number(
            dip.drain_fraction,
            DEFAULT_DRAIN_FRACTION,
            "",
            "share of the head's liquid that drains in a dip",
            "the period: liquid left behind makes the next rise shorter",
        ),
        filler.number(
            dip.vapour_reset,
            DEFAULT_VAPOUR_RESET,
            "",
            "share of the temperature difference closed by vapour in a dip",
            reset,
        ),
        filler.number(
            definition.conduction_w_k,
            DEFAULT_CONDUCTION_W_K,
            "W/K",
            "heat conducted from body to head",
            conduction,
        ),
        filler.number(
            definition.evaporant.hardness_mg_l,
            0.0,
            "mg/L",
            "hardness of the water",
            "scale in the felt, which slows it over months; none is counted",
        ),
        filler.number(
            definition.evaporant.scale_effect_pct,
            DEFAULT_SCALE_EFFECT_PCT,
            "%",
            "evaporation lost for each mg/cm2 of scale on the felt, down to 30 % of a clean felt",
            "how fast hard water slows the device; nothing with soft water",
        ),
    ]
}

/// Covered fraction, freeboard, number of devices at the cup.
fn fill_cup(cup: Option<&CupDefinition>, filler: &mut Filler) -> (f64, f64, u32) {
    let Some(cup) = cup else {
        return (0.0, 0.0, 1);
    };
    let covered = filler.number(
        cup.covered_fraction,
        0.0,
        "",
        "share of the cup's opening that is covered",
        "the cup's own loss",
    );
    let freeboard = filler.number(
        cup.freeboard_mm,
        DEFAULT_FREEBOARD_MM,
        "mm",
        "brim mark below the cup's rim",
        "the cup's own loss: air above the liquid slows it",
    );
    let shared = filler.number(
        cup.shared_by.map(f64::from),
        1.0,
        "device",
        "devices that drink from the cup",
        "days between refills",
    );
    (covered, freeboard, cup.shared_by.unwrap_or(shared as u32))
}
