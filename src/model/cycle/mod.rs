//! One stretch of time of one device: felt, cup, resolved and averaged cycle.
//!
//! Two ways lead to the same answer and share only the formulas: [`Method::Averaged`] takes the periodic cycle in slowly
//! changing air, [`Method::Resolved`] integrates every cycle event by event. The tests hold one against the other.
//!
//! # How far the two ways agree
//!
//! Period of the averaged less that of the resolved cycle, in percent, for the shelf example with half of the difference
//! closed in a dip. A dash: it stands still, or stalls within two points of humidity.
//!
//! | air | 20 % RH | 40 % | 60 % | 80 % | 90 % |
//! |---|---|---|---|---|---|
//! | 15 °C, 0 m/s | +0.16 | +0.14 | +0.15 | +0.12 | - |
//! | 15 °C, 0.1 m/s | +0.19 | +0.21 | +0.24 | +0.24 | - |
//! | 15 °C, 0.5 m/s | +0.17 | +0.20 | +0.23 | +0.25 | - |
//! | 25 °C, 0 m/s | +0.18 | +0.18 | +0.14 | +0.09 | -0.06 |
//! | 25 °C, 0.1 m/s | +0.18 | +0.20 | +0.23 | +0.26 | +0.20 |
//! | 25 °C, 0.5 m/s | +0.15 | +0.18 | +0.21 | +0.26 | +0.22 |
//! | 35 °C, 0 m/s | +0.17 | +0.18 | +0.17 | +0.02 | -0.14 |
//! | 35 °C, 0.1 m/s | +0.16 | +0.18 | +0.21 | +0.23 | +0.19 |
//! | 35 °C, 0.5 m/s | +0.12 | +0.15 | +0.19 | +0.23 | +0.21 |
//!
//! Over the same air, root mean square at half closed, and worst with nothing, half or all closed: shelf 0.19; 0.23, 0.26,
//! 0.94. Window 0.20; 0.39, 1.04, 1.24. Foyer 0.37; 1.09, 1.52, 0.98. The larger ones stand in still air, where the head
//! passes the temperature at which cooling sinks and vapour lifts the air equally and the coefficient has a cusp.

mod averaged;
#[cfg(test)]
mod checks;
mod cup;
mod engine;
mod ledger;
mod parabola;
mod resolved;
mod sides;
mod stall;
mod types;

pub use ledger::{DRIED_OUT_WETNESS, cup_drop_m, is_due, refill};
pub use stall::stall_humidity;
pub use types::*;

use crate::model::device::Device;
use crate::model::fluids::Liquid;
use averaged::Plant;

impl State {
    /// Cup full to the brim mark, felt wet, temperatures settled in the given air, a dip just over.
    pub fn settled(device: &Device, tuning: &Tuning, forcing: &Forcing) -> State {
        let abv = device.evaporant_abv_pct;
        let cup = device.cup.as_ref().map(|cup| cup.full).unwrap_or_default();
        let mut state = State {
            head_temp_k: forcing.air.temp_k,
            body_temp_k: forcing.air.temp_k,
            lifted_m3: 0.0,
            felt: Liquid::from_abv(device.head.felt_capacity_kg, abv),
            cup,
            cup_temp_k: forcing.air.temp_k,
            dried_out: false,
            scale_kg: 0.0,
            iced: false,
            first_climb: 0.0,
            ahead_s: 0.0,
            start: None,
            memo: None,
        };
        if let Some(cup) = &device.cup {
            state.cup_temp_k = cup::CupSide::of(cup, tuning, forcing, &state).settled_k();
        }
        let nodes = averaged::settled_nodes(Plant { device, tuning }, &state, forcing);
        (state.head_temp_k, state.body_temp_k, state.lifted_m3) = (nodes.head_k, nodes.body_k, nodes.lifted_m3);
        state
    }
}

/// Carries `state` from second `from_s` to second `to_s` (0-3600) of an hour with the given forcing.
///
/// With `stop_when_due` it returns early at the second a visit falls due ([`Stretch::due`]); otherwise it goes on: cycles
/// count until the felt is dry. While the weather is unknown nothing changes but the clock.
#[expect(
    clippy::too_many_arguments,
    reason = "who, how, from where, in what, how long: each is its own thing"
)]
pub fn run_stretch(
    device: &Device,
    tuning: &Tuning,
    method: Method,
    state: &mut State,
    hour: &HourForcing,
    from_s: f64,
    to_s: f64,
    stop_when_due: bool,
) -> Stretch {
    let plant = Plant { device, tuning };
    if !hour.known {
        return unknown(state, from_s, to_s);
    }
    match method {
        Method::Averaged => averaged::advance(plant, state, hour, from_s, to_s, stop_when_due),
        Method::Resolved => resolved::advance(plant, state, hour, from_s, to_s, stop_when_due),
    }
}

fn unknown(state: &State, from_s: f64, to_s: f64) -> Stretch {
    let duration_s = to_s - from_s;
    let mut out = Stretch {
        end_s: to_s,
        ..Stretch::default()
    };
    out.state_s[HourState::Unknown as usize] = duration_s;
    out.body_temp_k_s = state.body_temp_k * duration_s;
    out.head_temp_k_s = state.head_temp_k * duration_s;
    out
}

/// Would a visit be in vain because what it fills would freeze?
pub fn is_frozen_air(device: &Device, _state: &State, forcing: &Forcing) -> bool {
    forcing.air.temp_k <= Liquid::from_abv(1.0, device.evaporant_abv_pct).freezing_point_k()
}

/// One cycle close up in steady air, from the end of a dip to the end of the next; `None` when the device stands still.
pub fn cycle_trace(device: &Device, tuning: &Tuning, state: &State, forcing: &Forcing) -> Option<Vec<TracePoint>> {
    resolved::trace(Plant { device, tuning }, state, forcing)
}
