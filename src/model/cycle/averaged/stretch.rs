//! A stretch of time cut into pieces over which the answer changes little.

use super::super::engine::Nodes;
use super::super::ledger::{DRIED_OUT_WETNESS, book_cup, book_felt, cup_drop_m, has_supply, is_due, wetness};
use super::super::types::{Forcing, HourForcing, HourState, State, Stretch};
use super::respond::{Plant, Response, respond};

/// No piece is cut shorter than this [s].
const SHORTEST_S: f64 = 240.0;
/// A rate that changes by more than this share over a piece asks for a shorter piece.
const RATE_CHANGE: f64 = 0.25;
/// With fewer cycles than this in a piece their change is not worth a shorter one.
const FEW_CYCLES: f64 = 2.0;
/// A felt that dries or fills is followed in pieces no longer than this [s].
const FELT_S: f64 = 110.0;
/// A mixed evaporant's strength drifts: pieces no longer than this [s]. The felt trades its liquid for the cup's within
/// minutes; with 240 s the strength stays 10 % and the rate 2.6 % too high, with 60 s 0.7 %.
const MIXED_S: f64 = 60.0;
/// Ice in air that may melt it is looked at this often [s].
const THAW_S: f64 = 300.0;

/// Carries a state from `from_s` to `to_s` of an hour, or to the second a visit falls due.
pub(in crate::model::cycle) fn advance(
    plant: Plant,
    state: &mut State,
    hour: &HourForcing,
    from_s: f64,
    to_s: f64,
    stop_when_due: bool,
) -> Stretch {
    let mut out = Stretch {
        end_s: from_s,
        ..Stretch::default()
    };
    let mut last_s = f64::INFINITY;
    while out.end_s < to_s - 1e-6 {
        let was_due = is_due(plant.device, state);
        let mut piece = next_piece(plant, state, hour, out.end_s, to_s.min(out.end_s + 2.0 * last_s));
        last_s = piece.duration_s;
        let before = (*state, out);
        piece.book(plant, state, hour, &mut out);
        if piece.supply && state.cup.total_kg() > 0.0 && is_out_of_reach(plant.device, state) {
            piece.cut_at_reach(plant, &before.0, state);
            (*state, out) = before;
            piece.end = respond(plant, state, &hour.at(out.end_s + piece.duration_s));
            piece.book(plant, state, hour, &mut out);
        }
        let due = is_due(plant.device, state);
        if stop_when_due && due.is_some() && was_due.is_none() {
            out.due = due;
            break;
        }
    }
    out
}

/// A piece of time between two answers.
struct Piece {
    from_s: f64,
    duration_s: f64,
    start: Response,
    end: Response,
    supply: bool,
}

fn next_piece(plant: Plant, state: &mut State, hour: &HourForcing, from_s: f64, to_s: f64) -> Piece {
    let start = settle_ice(plant, state, &hour.at(from_s));
    let supply = has_supply(plant.device, state);
    let mut duration_s = longest_s(plant, state, &start, supply).min(to_s - from_s);
    if state.iced && hour.at(to_s).air.temp_k > state.felt.freezing_point_k().min(state.cup.freezing_point_k()) - 1.0 {
        duration_s = duration_s.min(THAW_S);
    }
    loop {
        let end = respond(plant, state, &hour.at(from_s + duration_s));
        if duration_s <= SHORTEST_S || alike(&start, &end, duration_s) {
            return Piece {
                from_s,
                duration_s,
                start,
                end,
                supply,
            };
        }
        duration_s *= 0.5;
    }
}

fn alike(a: &Response, b: &Response, duration_s: f64) -> bool {
    let faster_1_s = a.rate_1_s.max(b.rate_1_s);
    let few = faster_1_s * duration_s < FEW_CYCLES;
    let steady = (a.rate_1_s - b.rate_1_s).abs() <= RATE_CHANGE * faster_1_s;
    a.state == b.state && a.freezes == b.freezes && (few || steady)
}

/// The answer now, after freezing or thawing if it is time to.
fn settle_ice(plant: Plant, state: &mut State, forcing: &Forcing) -> Response {
    let cup_frozen =
        plant.device.cup.is_some() && state.cup.total_kg() > 0.0 && state.cup_temp_k <= state.cup.freezing_point_k();
    let answer = respond(plant, state, forcing);
    if state.iced == (answer.freezes || cup_frozen) {
        return answer;
    }
    state.iced = !state.iced;
    respond(plant, state, forcing)
}

/// How long the felt may be taken as it is [s].
fn longest_s(plant: Plant, state: &State, answer: &Response, supply: bool) -> f64 {
    let head = &plant.device.head;
    let mixed = state.felt.ethanol_kg > 0.0 || state.cup.ethanol_kg > 0.0;
    let base_s = if mixed { MIXED_S } else { f64::INFINITY };
    let loss_kg_s = (answer.loss_kg_s[0] + answer.loss_kg_s[1]).abs().max(1e-12);
    let critical_kg = head.critical_share * head.felt_capacity_kg;
    let above_kg = (state.felt.total_kg() - critical_kg).max(0.0);
    if supply && answer.running() && answer.rate_1_s * head.uptake_kg > loss_kg_s {
        let filling_kg = head.felt_capacity_kg - state.felt.total_kg();
        let filling_s = if filling_kg > 0.05 * head.felt_capacity_kg {
            FELT_S
        } else {
            f64::INFINITY
        };
        return base_s.min(filling_s);
    }
    base_s.min((above_kg.max(0.04 * head.felt_capacity_kg) / loss_kg_s).max(FELT_S))
}

/// A piece that passes the reach by less than this is not cut again [m].
const REACH_SLACK_M: f64 = 1e-7;

fn is_out_of_reach(device: &crate::model::device::Device, state: &State) -> bool {
    device
        .cup
        .as_ref()
        .is_some_and(|cup| cup_drop_m(device, state) > cup.reach_m + REACH_SLACK_M)
}

impl Piece {
    /// Ends the piece where the level falls out of the beak's reach, the level falling evenly between two states.
    fn cut_at_reach(&mut self, plant: Plant, before: &State, after: &State) {
        let Some(cup) = &plant.device.cup else { return };
        let (from_m, to_m) = (cup_drop_m(plant.device, before), cup_drop_m(plant.device, after));
        let share = ((cup.reach_m - from_m) / (to_m - from_m)).clamp(0.0, 1.0);
        self.duration_s = (self.duration_s * share).max(0.01);
    }

    fn book(&self, plant: Plant, state: &mut State, hour: &HourForcing, out: &mut Stretch) {
        let duration_s = self.duration_s;
        let settling_s = 0.5 * (self.start.settling_s + self.end.settling_s);
        let drift_k_s = (self.end.body_k - self.start.body_k) / duration_s;
        let first_off_k = state.body_temp_k - self.start.between.body_k;
        let transient_k = first_off_k + settling_s * drift_k_s;
        let gone = -(-duration_s / settling_s).exp_m1();
        let last_off_k = transient_k * (1.0 - gone) - settling_s * drift_k_s;
        let mean_off_k = transient_k * gone * settling_s / duration_s - settling_s * drift_k_s;

        let runs = self.running_shares(first_off_k, last_off_k);
        let run_s = (runs[0] + runs[1]) * duration_s;
        let climbs = duration_s * self.cycles_per_second(runs, mean_off_k);
        let cycles = (climbs - state.first_climb).max(0.0);
        state.first_climb -= climbs - cycles;
        out.cycles += cycles;
        out.state_s[HourState::Running as usize] += run_s;
        self.book_standing(duration_s - run_s, runs, out);
        let shared = [0, 1].map(|s| duration_s * self.loss_kg_s(s, runs, mean_off_k));
        book_felt(plant.device, state, cycles, shared, self.supply, out);
        let middle = hour.at(self.from_s + 0.5 * duration_s);
        book_cup(plant.device, plant.tuning, &middle, state, duration_s, out);

        let mean_body_k = 0.5 * (self.start.body_k + self.end.body_k) + mean_off_k;
        let mean_head_k = 0.5 * (self.start.head_k + self.end.head_k) + mean_off_k * runs[0].max(runs[1]).min(1.0);
        out.body_temp_k_s += mean_body_k * duration_s;
        out.head_temp_k_s += mean_head_k * duration_s;
        out.fast_s += if cycles > run_s / 3.0 { run_s } else { 0.0 };
        out.end_s += duration_s;
        let Nodes {
            head_k,
            body_k,
            lifted_m3,
        } = self.end.between;
        state.body_temp_k = body_k + last_off_k;
        state.head_temp_k = head_k + last_off_k;
        state.lifted_m3 = lifted_m3;
        // In humid air the liquid hangs below the tip; whatever else stops a device lets it sink.
        if runs[1] == 0.0 && !self.end.running() && self.end.state != HourState::Humid {
            state.first_climb = 1.0;
        }
        if runs[1] == 0.0 && wetness(plant.device, &state.felt) <= DRIED_OUT_WETNESS {
            state.dried_out = true;
        }
    }

    /// Shares of the piece run from its start and up to its end. A piece that only changes over is split where the
    /// driving power, linear in between, passes zero.
    fn running_shares(&self, first_off_k: f64, last_off_k: f64) -> [f64; 2] {
        let drive = |r: &Response, off_k: f64| r.driving_w + r.driving_slope_w_k * off_k;
        let (first_w, last_w) = (drive(&self.start, first_off_k), drive(&self.end, last_off_k));
        let first_runs = self.start.running() && first_w > 0.0;
        let last_runs = self.end.running() && last_w > 0.0;
        match (first_runs, last_runs) {
            (true, true) => [0.5, 0.5],
            (false, false) => [0.0, 0.0],
            (true, false) => [split(first_w, last_w), 0.0],
            (false, true) => [0.0, split(last_w, first_w)],
        }
    }

    fn cycles_per_second(&self, runs: [f64; 2], mean_off_k: f64) -> f64 {
        let answer = |r: &Response| r.rate_1_s * (1.0 + r.rate_slope_1_k * mean_off_k).clamp(0.2, 3.0);
        // Where only one end runs, the rate falls to nothing on the way: half of it on average.
        let fading = if runs[0] > 0.0 && runs[1] > 0.0 { 1.0 } else { 0.5 };
        fading * (runs[0] * answer(&self.start) + runs[1] * answer(&self.end))
    }

    fn loss_kg_s(&self, species: usize, runs: [f64; 2], mean_off_k: f64) -> f64 {
        let (first, last) = match runs {
            [a, b] if a > 0.0 && b == 0.0 => (a, 1.0 - a),
            [a, b] if b > 0.0 && a == 0.0 => (1.0 - b, b),
            _ => (0.5, 0.5),
        };
        let answer = |r: &Response| r.loss_kg_s[species] * (1.0 + r.loss_slope_1_k * mean_off_k).clamp(0.2, 3.0);
        first * answer(&self.start) + last * answer(&self.end)
    }

    fn book_standing(&self, standing_s: f64, runs: [f64; 2], out: &mut Stretch) {
        if standing_s <= 0.0 {
            return;
        }
        let cause = |r: &Response| if r.running() { HourState::Humid } else { r.state };
        let (first, last) = match runs {
            [a, b] if a > 0.0 && b == 0.0 => (0.0, 1.0),
            [a, b] if b > 0.0 && a == 0.0 => (1.0, 0.0),
            _ => (0.5, 0.5),
        };
        out.state_s[cause(&self.start) as usize] += first * standing_s;
        out.state_s[cause(&self.end) as usize] += last * standing_s;
    }
}

fn split(running_w: f64, standing_w: f64) -> f64 {
    let standing_w = standing_w.min(0.0);
    if running_w > standing_w {
        running_w / (running_w - standing_w)
    } else {
        0.5
    }
}
