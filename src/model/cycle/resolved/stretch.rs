//! A stretch of time, cycle by cycle.

use super::super::averaged::{self, Plant, head_side, why_not};
use super::super::engine::{Engine, Nodes};
use super::super::ledger::{DRIED_OUT_WETNESS, book_cup, book_felt, has_supply, is_due, wetness};
use super::super::stall::{rest, tip_balance, tip_driving_w};
use super::super::types::{Forcing, HourForcing, HourState, State, Stretch, TracePoint};
use super::climb::{Between, Event, Phase};

/// Longest step between two looks at felt, cup and air [s].
const LONGEST_S: f64 = 60.0;

/// Heat that went in and out and what was stored, to prove that none is lost [J].
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub(in crate::model::cycle) struct HeatBook {
    pub(in crate::model::cycle) gained_j: f64,
    pub(in crate::model::cycle) taken_j: f64,
    pub(in crate::model::cycle) stored_j: f64,
}

/// One run over part of an hour.
struct Run<'a> {
    plant: Plant<'a>,
    hour: &'a HourForcing,
    fineness: f64,
    heat: HeatBook,
    out: Stretch,
    trace: Option<Vec<TracePoint>>,
    /// Body temperature at which the fluid's density and latent heat are taken throughout [K]: changing them on the way
    /// would move the head's temperature without heat.
    properties_k: f64,
}

/// Carries a state from `from_s` to `to_s` of an hour, or to the second a visit falls due.
pub(in crate::model::cycle) fn advance(
    plant: Plant,
    state: &mut State,
    hour: &HourForcing,
    from_s: f64,
    to_s: f64,
    stop_when_due: bool,
) -> Stretch {
    run(plant, state, hour, [from_s, to_s], stop_when_due, 1.0).0
}

/// [`advance`] with a chosen fineness, handing back the heat book too.
pub(in crate::model::cycle) fn run(
    plant: Plant,
    state: &mut State,
    hour: &HourForcing,
    [from_s, to_s]: [f64; 2],
    stop_when_due: bool,
    fineness: f64,
) -> (Stretch, HeatBook) {
    let start_s = (from_s + state.ahead_s).min(to_s.max(from_s));
    let out = Stretch {
        end_s: start_s,
        ..Stretch::default()
    };
    let mut run = Run::start(plant, hour, state, out, fineness);
    state.ahead_s = (from_s + state.ahead_s - to_s).max(0.0);
    while run.out.end_s < to_s - 1e-9 {
        let was_due = is_due(plant.device, state);
        run.next(state, to_s);
        let due = is_due(plant.device, state);
        if stop_when_due && due.is_some() && was_due.is_none() {
            run.out.due = due;
            break;
        }
    }
    if run.out.end_s > to_s {
        state.ahead_s = run.out.end_s - to_s;
        run.out.end_s = to_s;
    }
    (run.out, run.heat)
}

impl<'a> Run<'a> {
    /// Takes the fluid's properties for the hour, and the volume that the temperatures at hand hold with them.
    fn start(plant: Plant<'a>, hour: &'a HourForcing, state: &mut State, out: Stretch, fineness: f64) -> Self {
        let properties_k = state.body_temp_k;
        let run = Run {
            plant,
            hour,
            fineness,
            heat: HeatBook::default(),
            out,
            trace: None,
            properties_k,
        };
        if state.lifted_m3 > 0.0 {
            let held_m3 = run
                .engine(state)
                .held_m3(state.body_temp_k - state.head_temp_k, state.body_temp_k);
            // Just short of the tip at most: it lets go when it gets there, not when it stands there.
            state.lifted_m3 = held_m3.min(plant.device.tip_volume_m3 * (1.0 - 1e-9));
        }
        run
    }

    fn engine(&self, state: &State) -> Engine<'a> {
        Engine::at(self.plant.device, &state.felt, self.properties_k)
    }

    /// One step, or one piece of standing still.
    fn next(&mut self, state: &mut State, to_s: f64) {
        let forcing = self.hour.at(self.out.end_s);
        let device = self.plant.device;
        let cup_frozen =
            device.cup.is_some() && state.cup.total_kg() > 0.0 && state.cup_temp_k <= state.cup.freezing_point_k();
        let head = head_side(self.plant, state, &forcing);
        let surface_k = if state.iced {
            rest(&head).surface_k
        } else {
            head.at_node(state.head_temp_k).1
        };
        let felt_frozen = state.felt.total_kg() > 0.0 && surface_k <= state.felt.freezing_point_k();
        if state.iced != (cup_frozen || felt_frozen) {
            state.iced = !state.iced;
            self.settle(state);
        }
        if state.iced || state.body_temp_k > device.max_temp_k {
            return self.stand(state, to_s);
        }
        self.move_on(state, to_s);
    }

    /// No cycle is possible or promised: the averaged way carries felt, cup and temperatures.
    fn stand(&mut self, state: &mut State, to_s: f64) {
        let until_s = (self.out.end_s + LONGEST_S).min(to_s);
        let piece = averaged::advance(self.plant, state, self.hour, self.out.end_s, until_s, true);
        self.out.absorb(&piece);
        self.settle(state);
    }

    /// Puts the volume where hydrostatics wants it for the temperatures at hand.
    fn settle(&self, state: &mut State) {
        let engine = self.engine(state);
        let from = Nodes {
            head_k: state.head_temp_k,
            body_k: state.body_temp_k,
            lifted_m3: 0.0,
        };
        let nodes = engine.re_rise(from, |volume_m3, body_k| engine.holding_k(volume_m3, body_k));
        (state.head_temp_k, state.body_temp_k, state.lifted_m3) = (nodes.head_k, nodes.body_k, nodes.lifted_m3);
    }

    fn move_on(&mut self, state: &mut State, to_s: f64) {
        if state.lifted_m3 <= 0.0 && state.body_temp_k - state.head_temp_k > 1e-9 {
            self.settle(state);
        }
        let nodes = Nodes {
            head_k: state.head_temp_k,
            body_k: state.body_temp_k,
            lifted_m3: state.lifted_m3,
        };
        let mut between = self.between(state, Phase::Lifted, 0.0);
        if nodes.lifted_m3 <= 0.0 && !between.rises(self.out.end_s, &nodes) {
            between.phase = Phase::Level;
        }
        let mut second = self.out.end_s;
        let until_s = (second + LONGEST_S).min(to_s);
        let mut y = between.pack(&nodes);
        let mut step_s: f64 = 0.5;
        let mut event = Event::Time;
        while second < until_s - 1e-9 && event == Event::Time {
            let (taken_s, next, what, grown_s) = between.step(second, &y, step_s.min(until_s - second));
            (second, y, event, step_s) = (second + taken_s, next, what, grown_s);
            self.note(second, &between.unpack(&y));
        }
        self.close_step(state, &between, &nodes, &y, second);
        if event == Event::Tip {
            self.dip(state);
        }
    }

    fn between(&self, state: &State, phase: Phase, fixed_m3: f64) -> Between<'a> {
        Between {
            plant: self.plant,
            engine: self.engine(state),
            state: *state,
            hour: self.hour,
            phase,
            fixed_m3,
            fineness: self.fineness,
            felt_drop_k: std::cell::Cell::new(0.0),
        }
    }

    /// Books what a phase brought.
    fn close_step(&mut self, state: &mut State, between: &Between, from: &Nodes, y: &[f64; 6], second: f64) {
        let to = between.unpack(y);
        let duration_s = second - self.out.end_s;
        let stored = |n: &Nodes| between.engine.stored_j(n.lifted_m3, n.head_k, n.body_k);
        let stored_j = stored(&to) - stored(from);
        let what = self.what_state(state, between, &to);
        self.heat.taken_j += y[2];
        self.heat.gained_j += y[3];
        self.heat.stored_j += stored_j;
        let middle = self.hour.at(0.5 * (self.out.end_s + second));
        let out = &mut self.out;
        out.state_s[what as usize] += duration_s;
        out.body_temp_k_s += 0.5 * (from.body_k + to.body_k) * duration_s;
        out.head_temp_k_s += 0.5 * (from.head_k + to.head_k) * duration_s;
        out.end_s = second;
        (state.head_temp_k, state.body_temp_k, state.lifted_m3) = (to.head_k, to.body_k, to.lifted_m3);
        book_felt(self.plant.device, state, 0.0, [y[4], y[5]], false, out);
        book_cup(self.plant.device, self.plant.tuning, &middle, state, duration_s, out);
        if what != HourState::Running && wetness(self.plant.device, &state.felt) <= DRIED_OUT_WETNESS {
            state.dried_out = true;
        }
    }

    /// Running while the air can carry the liquid to the tip from the body's present temperature.
    fn what_state(&self, state: &State, between: &Between, at: &Nodes) -> HourState {
        if between.phase == Phase::Dipping {
            return HourState::Running;
        }
        let forcing: Forcing = self.hour.at(self.out.end_s);
        let head = head_side(self.plant, state, &forcing);
        let driving_w = tip_driving_w(&head, &between.engine, at.body_k);
        // A body still warming up to the air will get there: the balance with a settled body decides too.
        if driving_w > 0.0 || tip_balance(&head, &between.engine).driving_w > 0.0 {
            HourState::Running
        } else {
            why_not(&head, at.body_k)
        }
    }

    /// Lets go: drain, reset, the time of the dip, drinking, and the rise that follows at once.
    fn dip(&mut self, state: &mut State) {
        let device = self.plant.device;
        let engine = self.engine(state);
        let drained = engine.after_drain_and_reset(state.head_temp_k, state.body_temp_k);
        let stored_before = engine.stored_j(device.tip_volume_m3, state.head_temp_k, state.body_temp_k);
        self.heat.stored_j += engine.stored_j(drained.lifted_m3, drained.head_k, drained.body_k) - stored_before;
        (state.head_temp_k, state.body_temp_k, state.lifted_m3) = (drained.head_k, drained.body_k, drained.lifted_m3);
        let between = self.between(state, Phase::Dipping, drained.lifted_m3);
        let (mut second, end_s) = (self.out.end_s, self.out.end_s + device.dip.duration_s);
        let mut y = between.pack(&drained);
        while second < end_s - 1e-9 {
            let (taken_s, next, _, _) = between.step(second, &y, end_s - second);
            (second, y) = (second + taken_s, next);
        }
        let engine = between.engine;
        self.close_step(state, &between, &drained, &y, second);
        let from = Nodes {
            head_k: state.head_temp_k,
            body_k: state.body_temp_k,
            lifted_m3: drained.lifted_m3,
        };
        let risen = engine.re_rise(from, |volume_m3, body_k| engine.holding_k(volume_m3, body_k));
        self.heat.stored_j += engine.stored_j(risen.lifted_m3, risen.head_k, risen.body_k)
            - engine.stored_j(from.lifted_m3, from.head_k, from.body_k);
        (state.head_temp_k, state.body_temp_k, state.lifted_m3) = (risen.head_k, risen.body_k, risen.lifted_m3);
        let supply = has_supply(device, state);
        book_felt(device, state, 1.0, [0.0, 0.0], supply, &mut self.out);
        self.out.cycles += 1.0;
        self.note(second, &risen);
    }

    fn note(&mut self, second: f64, nodes: &Nodes) {
        if let Some(trace) = &mut self.trace {
            let Nodes {
                head_k,
                body_k,
                lifted_m3,
            } = *nodes;
            trace.push(TracePoint {
                time_s: second,
                lifted_m3,
                head_temp_k: head_k,
                body_temp_k: body_k,
            });
        }
    }
}

/// One settled cycle close up in steady air, from the end of a dip to the end of the next; `None` when it stands still.
pub(in crate::model::cycle) fn trace(plant: Plant, state: &State, forcing: &Forcing) -> Option<Vec<TracePoint>> {
    let hour = HourForcing {
        start: *forcing,
        end: *forcing,
        known: true,
    };
    let mut state = *state;
    state.ahead_s = 0.0;
    let out = Stretch::default();
    let mut run = Run::start(plant, &hour, &mut state, out, 1.0);
    let mut last_dip_s = 0.0;
    let mut dips = 0.0;
    while run.out.end_s < 4.0 * 3600.0 {
        run.next(&mut state, 4.0 * 3600.0);
        if run.out.cycles <= dips {
            continue;
        }
        dips = run.out.cycles;
        if let Some(points) = run.trace.take() {
            return Some(
                points
                    .into_iter()
                    .map(|p| TracePoint {
                        time_s: p.time_s - last_dip_s,
                        ..p
                    })
                    .collect(),
            );
        }
        last_dip_s = run.out.end_s;
        if dips >= 3.0 {
            run.trace = Some(Vec::new());
            let nodes = Nodes {
                head_k: state.head_temp_k,
                body_k: state.body_temp_k,
                lifted_m3: state.lifted_m3,
            };
            run.note(run.out.end_s, &nodes);
        }
    }
    None
}
