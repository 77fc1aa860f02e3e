//! What the device would do in one instant's air if that air stayed.

use super::super::engine::{Engine, Nodes};
use super::super::ledger::{clean_share, wetness};
use super::super::sides::HeadSide;
use super::super::stall::{Rest, rest, tip_balance};
use super::super::types::{Forcing, HourState, State, Tuning};
use super::closed::{Balance, Closed, balance, next_start};
use super::march::{Cycle, through_the_dip};
use crate::model::device::Device;
use crate::model::fluids::Liquid;

/// The device with its uncertain factors.
#[derive(Debug, Clone, Copy)]
pub(in crate::model::cycle) struct Plant<'a> {
    pub(in crate::model::cycle) device: &'a Device,
    pub(in crate::model::cycle) tuning: &'a Tuning,
}

/// The settled answer to one instant's air.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(in crate::model::cycle) struct Response {
    /// Running, or why not.
    pub(in crate::model::cycle) state: HourState,
    /// Cycles per second.
    pub(in crate::model::cycle) rate_1_s: f64,
    /// Water and ethanol leaving the head [kg/s].
    pub(in crate::model::cycle) loss_kg_s: [f64; 2],
    /// Settled mean body temperature [K].
    pub(in crate::model::cycle) body_k: f64,
    /// Settled mean head temperature [K].
    pub(in crate::model::cycle) head_k: f64,
    /// Both temperatures and the liquid right after a dip, or at rest: what a [`State`] holds between stretches.
    pub(in crate::model::cycle) between: Nodes,
    /// Driving power at the tip [W]; it runs where this is positive.
    pub(in crate::model::cycle) driving_w: f64,
    /// How the driving power answers to a body warmer than settled [W/K].
    pub(in crate::model::cycle) driving_slope_w_k: f64,
    /// How the rate answers to a body warmer than settled, relative [1/K].
    pub(in crate::model::cycle) rate_slope_1_k: f64,
    /// How the loss answers to a body warmer than settled, relative [1/K].
    pub(in crate::model::cycle) loss_slope_1_k: f64,
    /// Time constant with which the body settles [s].
    pub(in crate::model::cycle) settling_s: f64,
    /// Felt surface at or below its freezing point.
    pub(in crate::model::cycle) freezes: bool,
}

impl Response {
    pub(in crate::model::cycle) fn running(&self) -> bool {
        self.state == HourState::Running
    }
}

/// The last answer and what it was given for.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(in crate::model::cycle) struct Memo {
    forcing: Forcing,
    felt: Liquid,
    iced: bool,
    response: Response,
}

/// The answer for the state's felt in this forcing; remembers it in the state.
pub(super) fn respond(plant: Plant, state: &mut State, forcing: &Forcing) -> Response {
    if let Some(memo) = state.memo
        && memo.forcing == *forcing
        && same_felt(plant.device, &memo.felt, &state.felt)
        && memo.iced == state.iced
    {
        return memo.response;
    }
    let head = head_side(plant, state, forcing);
    let response = if state.iced {
        standing(&head, HourState::Frozen)
    } else {
        unfrozen(&head, state)
    };
    state.memo = Some(Memo {
        forcing: *forcing,
        felt: state.felt,
        iced: state.iced,
        response,
    });
    response
}

/// Nodes of a settled device right after a dip; at rest where it does not cycle.
pub(in crate::model::cycle) fn settled_nodes(plant: Plant, state: &State, forcing: &Forcing) -> Nodes {
    let head = head_side(plant, state, forcing);
    if let Balance::Cycling { local, closed } = balance(&head, None) {
        return through_the_dip(&local, closed.body_k, &mut Cycle::default());
    }
    let Rest { head_k, body_k, .. } = rest(&head);
    let engine = Engine::at(plant.device, &state.felt, body_k);
    Nodes {
        head_k,
        body_k,
        // Below the tip, so that a device that can tip does.
        lifted_m3: engine
            .held_m3(body_k - head_k, body_k)
            .min(0.999 * plant.device.tip_volume_m3),
    }
}

/// Felts that give the same answer: equally wet, equally strong, and about as heavy. The weight matters only through the
/// head's heat store, a few parts in ten thousand of the period here.
fn same_felt(device: &Device, a: &Liquid, b: &Liquid) -> bool {
    let heavy = (a.total_kg() - b.total_kg()).abs() <= 0.02 * device.head.felt_capacity_kg;
    let strong = (a.ethanol_mass_fraction() - b.ethanol_mass_fraction()).abs() <= 1e-4;
    heavy && strong && wetness(device, a) == wetness(device, b)
}

/// The head as `state` has it.
pub(in crate::model::cycle) fn head_side<'a>(plant: Plant<'a>, state: &State, forcing: &'a Forcing) -> HeadSide<'a> {
    HeadSide {
        device: plant.device,
        tuning: plant.tuning,
        forcing,
        felt: state.felt,
        wetness: wetness(plant.device, &state.felt),
        clean_share: clean_share(plant.device, state),
        iced: state.iced,
    }
}

fn unfrozen(head: &HeadSide, state: &mut State) -> Response {
    match balance(head, state.start) {
        Balance::Cycling { local, closed } => {
            state.start = Some(next_start(&local, &closed, head.forcing.air.temp_k));
            let Closed {
                cycle, body_k: tip_k, ..
            } = closed;
            let body_k = 0.5 * (tip_k + cycle.after_dip.body_k);
            let head_k = cycle.head_k_s / cycle.period_s;
            let tip_m3 = head.device.tip_volume_m3;
            let ratio = local.engine.head_j_k(tip_m3) / local.engine.body_j_k(tip_m3);
            let (taken, gained) = (local.heat_w.slope(head_k), local.gain_w.slope(tip_k));
            let driving_slope_w_k = taken + ratio * gained;
            let loss_w_k = local.loss_kg_s[0].slope(head_k) + local.loss_kg_s[1].slope(head_k);
            let loss_kg_s = cycle.loss_kg.map(|kg| kg / cycle.period_s);
            let total = loss_kg_s[0] + loss_kg_s[1];
            let stored_j_k = local.engine.head_j_k(0.0) + local.engine.body_j_k(0.0);
            let hot = tip_k > head.device.max_temp_k;
            Response {
                state: if hot { HourState::Overheated } else { HourState::Running },
                rate_1_s: if hot { 0.0 } else { 1.0 / cycle.period_s },
                loss_kg_s,
                body_k,
                head_k,
                between: cycle.after_dip,
                driving_w: cycle.tip_driving_w,
                driving_slope_w_k,
                rate_slope_1_k: driving_slope_w_k / cycle.mean_driving_w(),
                loss_slope_1_k: if total > 0.0 { loss_w_k / total } else { 0.0 },
                settling_s: stored_j_k / (taken - gained).max(1e-6),
                freezes: local.surface_k.at(head_k) <= head.felt.freezing_point_k() && head.felt.total_kg() > 0.0,
            }
        }
        Balance::Resting { driving_w, slope_w_k } => {
            state.start = None;
            let standing = standing(head, HourState::Humid);
            let state = if standing.body_k > head.device.max_temp_k {
                HourState::Overheated
            } else {
                why_not(head, standing.body_k)
            };
            Response {
                state,
                driving_w,
                driving_slope_w_k: slope_w_k,
                ..standing
            }
        }
    }
}

/// A device that does not cycle.
fn standing(head: &HeadSide, state: HourState) -> Response {
    let Rest {
        head_k,
        body_k,
        surface_k,
        flow,
    } = rest(head);
    let device = head.device;
    let gain = |k: f64| super::super::sides::body_gain_w(device, head.tuning, head.forcing, k);
    let gain_slope_w_k = (gain(body_k + 0.5) - gain(body_k - 0.5)).min(-1e-6);
    Response {
        state,
        rate_1_s: 0.0,
        loss_kg_s: flow.loss_kg_s,
        body_k,
        head_k,
        // What is lifted follows from the temperatures when the device is next asked to move.
        between: Nodes {
            head_k,
            body_k,
            lifted_m3: 0.0,
        },
        driving_w: -1.0,
        driving_slope_w_k: 0.0,
        rate_slope_1_k: 0.0,
        loss_slope_1_k: 0.0,
        settling_s: device.body.full_capacity_j_k / (device.conduction_w_k - gain_slope_w_k),
        freezes: surface_k <= head.felt.freezing_point_k() && head.felt.total_kg() > 0.0,
    }
}

/// What keeps a device from cycling: asked by taking one hindrance away at a time.
pub(in crate::model::cycle) fn why_not(head: &HeadSide, body_k: f64) -> HourState {
    let engine = Engine::at(head.device, &head.felt, body_k);
    let would_run = |head: HeadSide| tip_balance(&head, &engine).driving_w > 0.0;
    if head.wetness < 1.0 {
        let capacity_kg = head.device.head.felt_capacity_kg;
        let felt = if head.felt.total_kg() > 0.0 {
            head.felt.scaled(capacity_kg)
        } else {
            Liquid::from_abv(capacity_kg, head.device.evaporant_abv_pct)
        };
        if head.wetness <= super::super::ledger::DRIED_OUT_WETNESS
            || would_run(HeadSide {
                felt,
                wetness: 1.0,
                ..*head
            })
        {
            return HourState::Dry;
        }
    }
    if head.forcing.head_absorbed_w > 0.0 {
        let shaded = Forcing {
            head_absorbed_w: 0.0,
            ..*head.forcing
        };
        if would_run(HeadSide {
            forcing: &shaded,
            ..*head
        }) {
            return HourState::WarmHead;
        }
    }
    HourState::Humid
}
