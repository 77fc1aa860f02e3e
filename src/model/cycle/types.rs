//! What goes into a stretch of time and what comes out of it.

use crate::model::air::Air;
use crate::model::fluids::Liquid;

/// The two ways to the same answer.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Method {
    /// The periodic cycle in slowly changing air: fast.
    Averaged,
    /// Every cycle integrated event by event: the truth the other is judged by.
    Resolved,
}

/// What a device does at a moment; an hour may be split between states.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum HourState {
    /// Dipping.
    Running,
    /// The air cannot hold the temperature difference.
    Humid,
    /// The felt is dry and the cup out of reach.
    Dry,
    /// Felt or cup at or below the freezing point.
    Frozen,
    /// The head gains more heat than the body.
    WarmHead,
    /// The body is above the limit of fluid or device: no cycle is promised.
    Overheated,
    /// The weather is missing and was not filled.
    Unknown,
}

impl HourState {
    /// All states in the order of the arrays indexed by them.
    pub const ALL: [HourState; 7] = [
        HourState::Running,
        HourState::Humid,
        HourState::Dry,
        HourState::Frozen,
        HourState::WarmHead,
        HourState::Overheated,
        HourState::Unknown,
    ];
}

/// What surrounds the device at one instant.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Forcing {
    /// Air at the device.
    pub air: Air,
    /// Air speed at the device [m/s].
    pub air_speed_m_s: f64,
    /// Temperature of the surfaces it sees [K].
    pub surroundings_k: f64,
    /// Radiation from sun or lamp absorbed by the head [W].
    pub head_absorbed_w: f64,
    /// Radiation from sun or lamp absorbed by the body [W].
    pub body_absorbed_w: f64,
}

impl Forcing {
    /// Settled air without sun or lamp, surroundings at air temperature.
    pub fn still(air: Air, air_speed_m_s: f64) -> Self {
        Self {
            air,
            air_speed_m_s,
            surroundings_k: air.temp_k,
            head_absorbed_w: 0.0,
            body_absorbed_w: 0.0,
        }
    }

    /// On the straight line to another forcing, `share` of the way.
    pub fn towards(&self, to: &Forcing, share: f64) -> Self {
        let mix = |a: f64, b: f64| a + share * (b - a);
        let air = Air {
            temp_k: mix(self.air.temp_k, to.air.temp_k),
            vapour_pressure_pa: mix(self.air.vapour_pressure_pa, to.air.vapour_pressure_pa),
            pressure_pa: mix(self.air.pressure_pa, to.air.pressure_pa),
        };
        Self {
            air,
            air_speed_m_s: mix(self.air_speed_m_s, to.air_speed_m_s),
            surroundings_k: mix(self.surroundings_k, to.surroundings_k),
            head_absorbed_w: mix(self.head_absorbed_w, to.head_absorbed_w),
            body_absorbed_w: mix(self.body_absorbed_w, to.body_absorbed_w),
        }
    }
}

/// The forcing of one hour, linear in between.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct HourForcing {
    /// At second 0.
    pub start: Forcing,
    /// At second 3600.
    pub end: Forcing,
    /// False where the weather is missing.
    pub known: bool,
}

impl HourForcing {
    /// The forcing at a second of the hour.
    pub fn at(&self, second: f64) -> Forcing {
        self.start.towards(&self.end, second / 3600.0)
    }
}

/// Factors on uncertain coefficients, 1 in the nominal run; bands vary them.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Tuning {
    /// On every heat and mass transfer coefficient of head and body.
    pub transfer_factor: f64,
    /// On the cup's evaporation.
    pub cup_factor: f64,
}

impl Default for Tuning {
    fn default() -> Self {
        Self {
            transfer_factor: 1.0,
            cup_factor: 1.0,
        }
    }
}

/// All that one hour hands to the next.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct State {
    /// Head temperature, vapour side [K].
    pub head_temp_k: f64,
    /// Body temperature [K].
    pub body_temp_k: f64,
    /// Lifted volume [m³].
    pub lifted_m3: f64,
    /// Liquid in the felt.
    pub felt: Liquid,
    /// Liquid in the cup.
    pub cup: Liquid,
    /// Cup temperature [K].
    pub cup_temp_k: f64,
    /// The felt dried out while the device stood still: it waits for a person.
    pub dried_out: bool,
    /// Scale left on the felt by hard water [kg].
    pub scale_kg: f64,
    /// Felt or cup is frozen.
    pub iced: bool,
    /// What is left of the first climb from level rest, in cycles: no dip and no drink before that is done (averaged way).
    pub(super) first_climb: f64,
    /// How far a resolved dip ran past the end of the last stretch [s].
    pub(super) ahead_s: f64,
    /// The last periodic cycle found: where the next search starts.
    pub(super) start: Option<super::averaged::Start>,
    /// The averaged answer at the end of the last stretch, reused where the next begins the same way.
    pub(super) memo: Option<super::averaged::Memo>,
}

/// Why a person is needed.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum DueCause {
    /// The level has fallen out of the beak's reach.
    CupAtReach,
    /// The felt has dried out.
    FeltDry,
}

/// What a stretch of time brought.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Stretch {
    /// Second of the hour at which it ended; before the asked end only when a visit fell due.
    pub end_s: f64,
    /// Cycles, fractional.
    pub cycles: f64,
    /// Seconds in each state, in the order of [`HourState::ALL`].
    pub state_s: [f64; 7],
    /// Net loss of the felt to the air [kg].
    pub head_loss: Liquid,
    /// Net loss of the cup to the air [kg].
    pub cup_loss: Liquid,
    /// Time integral of body temperature [K s].
    pub body_temp_k_s: f64,
    /// Time integral of head temperature [K s].
    pub head_temp_k_s: f64,
    /// Seconds run with a period below 3 s, where neither method is trustworthy.
    pub fast_s: f64,
    /// The visit that fell due at the end, if any.
    pub due: Option<DueCause>,
}

impl Stretch {
    /// Adds what a later stretch of the same hour brought.
    pub fn absorb(&mut self, later: &Stretch) {
        self.end_s = later.end_s;
        self.cycles += later.cycles;
        self.fast_s += later.fast_s;
        self.body_temp_k_s += later.body_temp_k_s;
        self.head_temp_k_s += later.head_temp_k_s;
        self.head_loss = self.head_loss.plus(later.head_loss);
        self.cup_loss = self.cup_loss.plus(later.cup_loss);
        for (mine, theirs) in self.state_s.iter_mut().zip(&later.state_s) {
            *mine += theirs;
        }
        self.due = later.due;
    }
}

/// One point of a cycle seen close up.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct TracePoint {
    /// Time since the end of the last dip [s].
    pub time_s: f64,
    /// Lifted volume [m³].
    pub lifted_m3: f64,
    /// Head temperature [K].
    pub head_temp_k: f64,
    /// Body temperature [K].
    pub body_temp_k: f64,
}
