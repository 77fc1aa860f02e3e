//! What one hour brought, and the pieces it was split into.

use crate::model::air::saturation_pressure_pa;
use crate::model::cycle::{HourForcing, HourState, Stretch};
use crate::model::fluids::Liquid;

use super::result::{LossG, StallHours, Totals};

const HOUR_S: f64 = 3600.0;

/// One hour of one run.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub(super) struct HourRecord {
    pub(super) cycles: f64,
    pub(super) state_s: [f64; 7],
    pub(super) head_loss: Liquid,
    pub(super) cup_loss: Liquid,
    pub(super) body_temp_k_s: f64,
    pub(super) head_temp_k_s: f64,
    pub(super) fast_s: f64,
    pub(super) needs_person_s: f64,
    /// At the end of the hour.
    pub(super) cup_drop_m: f64,
    /// At the end of the hour.
    pub(super) cup_temp_k: Option<f64>,
    /// Mean over the hour.
    pub(super) air: HourAir,
}

/// The air at the device over an hour.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub(super) struct HourAir {
    pub(super) temp_k: f64,
    pub(super) vapour_pa: f64,
    pub(super) speed_m_s: f64,
    /// Dew on the glass of the case at the end of the hour [kg].
    pub(super) dew_kg: f64,
}

impl HourAir {
    /// Halfway between both ends of an hour.
    pub(super) fn of(hour: &HourForcing) -> Self {
        let middle = hour.at(0.5 * HOUR_S);
        Self {
            temp_k: middle.air.temp_k,
            vapour_pa: middle.air.vapour_pressure_pa,
            speed_m_s: middle.air_speed_m_s,
            dew_kg: 0.0,
        }
    }

    /// Relative humidity of the mean vapour at the mean temperature [%]; the curve is hollow, so a mean can lie a hair above.
    pub(super) fn relative_humidity_pct(&self) -> f64 {
        (100.0 * self.vapour_pa / saturation_pressure_pa(self.temp_k)).min(100.0)
    }
}

impl HourRecord {
    /// Adds a stretch in which somebody was waited for so many seconds.
    pub(super) fn add(&mut self, stretch: &Stretch, needs_person_s: f64) {
        self.cycles += stretch.cycles;
        for (sum, seconds) in self.state_s.iter_mut().zip(stretch.state_s) {
            *sum += seconds;
        }
        self.head_loss = self.head_loss.plus(stretch.head_loss);
        self.cup_loss = self.cup_loss.plus(stretch.cup_loss);
        self.body_temp_k_s += stretch.body_temp_k_s;
        self.head_temp_k_s += stretch.head_temp_k_s;
        self.fast_s += stretch.fast_s;
        self.needs_person_s += needs_person_s;
    }

    /// Seconds in one state.
    pub(super) fn seconds(&self, state: HourState) -> f64 {
        self.state_s[state as usize]
    }

    /// Seconds not running, unknown time apart.
    pub(super) fn stalled_s(&self) -> f64 {
        stalled_s(&self.state_s)
    }

    /// True where nothing of the hour is known.
    pub(super) fn is_unknown(&self) -> bool {
        self.seconds(HourState::Unknown) >= HOUR_S
    }

    /// Its figures; opening hours are added when it is laid into the calendar.
    pub(super) fn totals(&self) -> Totals {
        let hours = |state| self.seconds(state) / HOUR_S;
        Totals {
            hours: 1.0,
            cycles: self.cycles,
            stall_hours: StallHours {
                total: self.stalled_s() / HOUR_S,
                open: 0.0,
                humid: hours(HourState::Humid),
                dry: hours(HourState::Dry),
                frozen: hours(HourState::Frozen),
                warm_head: hours(HourState::WarmHead),
                overheated: hours(HourState::Overheated),
                unknown: hours(HourState::Unknown),
            },
            needs_person_hours: self.needs_person_s / HOUR_S,
            water_g: loss_g(self.head_loss.water_kg, self.cup_loss.water_kg),
            ethanol_g: loss_g(self.head_loss.ethanol_kg, self.cup_loss.ethanol_kg),
            ..Totals::default()
        }
    }
}

fn loss_g(head_kg: f64, cup_kg: f64) -> LossG {
    LossG {
        total: 1e3 * (head_kg + cup_kg),
        head: 1e3 * head_kg,
        cup: 1e3 * cup_kg,
    }
}

/// Seconds not running, unknown time apart.
pub(super) fn stalled_s(state_s: &[f64; 7]) -> f64 {
    let not_stalled = [HourState::Running, HourState::Unknown];
    let stalled = HourState::ALL.iter().filter(|state| !not_stalled.contains(state));
    stalled.map(|state| state_s[*state as usize]).sum()
}

/// A stretch between two visits or hour ends, for the stall spells; times are seconds since the start of the run.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Piece {
    pub(super) from_s: f64,
    pub(super) to_s: f64,
    /// It begins with a visit.
    pub(super) visited: bool,
    pub(super) state_s: [f64; 7],
}

impl Piece {
    pub(super) fn new(from_s: f64, to_s: f64, visited: bool, stretch: &Stretch) -> Self {
        Self {
            from_s,
            to_s,
            visited,
            state_s: stretch.state_s,
        }
    }
}
