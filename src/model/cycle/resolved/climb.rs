//! The equations between dips and the search for the moment something happens.

use super::super::averaged::{Plant, head_side};
use super::super::engine::{Engine, Nodes};
use super::super::sides::body_gain_w;
use super::super::types::{HourForcing, State};
use super::integrate::{Vector, dormand_prince};

/// Error allowed in a step: temperature [K] and share of the tip volume.
const TEMPERATURE_ERROR_K: f64 = 3e-9;
const VOLUME_ERROR_SHARE: f64 = 3e-9;

/// What holds between dips.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Phase {
    /// Liquid stands in the tube or head: hydrostatics ties both temperatures.
    Lifted,
    /// The head is not colder than the body: nothing is lifted, the temperatures are free.
    Level,
    /// In a dip: the volume is fixed, the temperatures are free.
    Dipping,
}

/// The device between two events.
pub(super) struct Between<'a> {
    pub(super) plant: Plant<'a>,
    pub(super) engine: Engine<'a>,
    pub(super) state: State,
    pub(super) hour: &'a HourForcing,
    pub(super) phase: Phase,
    /// The volume of a dip or a level phase [m³].
    pub(super) fixed_m3: f64,
    /// Factor on the allowed error: 1, or smaller to prove convergence.
    pub(super) fineness: f64,
    /// Head less felt surface where the flow was last asked for: the next search starts there [K].
    pub(super) felt_drop_k: std::cell::Cell<f64>,
}

/// Why a step ended.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Event {
    /// The asked time or the largest step was reached.
    Time,
    /// The volume reached the head or left it.
    Junction,
    /// It lets go.
    Tip,
    /// Nothing is lifted any more, or lifting begins.
    Ground,
}

impl Between<'_> {
    /// The controlled states for the nodes of this phase.
    pub(super) fn pack(&self, nodes: &Nodes) -> Vector {
        let second = if self.phase == Phase::Lifted {
            nodes.lifted_m3
        } else {
            nodes.head_k
        };
        [nodes.body_k, second, 0.0, 0.0, 0.0, 0.0]
    }

    /// The nodes behind the controlled states.
    pub(super) fn unpack(&self, y: &Vector) -> Nodes {
        if self.phase == Phase::Lifted {
            let lifted_m3 = y[1].clamp(0.0, self.plant.device.tip_volume_m3);
            Nodes {
                head_k: y[0] - self.engine.holding_k(lifted_m3, y[0]),
                body_k: y[0],
                lifted_m3,
            }
        } else {
            Nodes {
                head_k: y[1],
                body_k: y[0],
                lifted_m3: self.fixed_m3,
            }
        }
    }

    /// Does liquid begin to rise from level rest?
    pub(super) fn rises(&self, second: f64, nodes: &Nodes) -> bool {
        nodes.body_k >= nodes.head_k - 1e-9 && self.slope(second, &[nodes.body_k, 0.0, 0.0, 0.0, 0.0, 0.0])[1] > 0.0
    }

    fn slope(&self, second: f64, y: &Vector) -> Vector {
        let nodes = self.unpack(y);
        let forcing = self.hour.at(second);
        let near_k = nodes.head_k - self.felt_drop_k.get();
        let (flow, surface_k) = head_side(self.plant, &self.state, &forcing).at_node_near(nodes.head_k, near_k);
        self.felt_drop_k.set(nodes.head_k - surface_k);
        let gain_w = body_gain_w(self.plant.device, self.plant.tuning, &forcing, nodes.body_k);
        let conducted_w = self.plant.device.conduction_w_k * (nodes.body_k - nodes.head_k);
        let (to_body_w, from_head_w) = (gain_w - conducted_w, flow.heat_w - conducted_w);
        let [first, other] = if self.phase == Phase::Lifted {
            self.lifted_slope(&nodes, to_body_w, from_head_w)
        } else {
            let volume_m3 = nodes.lifted_m3;
            [
                to_body_w / self.engine.body_j_k(volume_m3),
                -from_head_w / self.engine.head_j_k(volume_m3),
            ]
        };
        [first, other, flow.heat_w, gain_w, flow.loss_kg_s[0], flow.loss_kg_s[1]]
    }

    /// Rates of body temperature and lifted volume, from the heat balances of both nodes and hydrostatics between them.
    fn lifted_slope(&self, nodes: &Nodes, to_body_w: f64, from_head_w: f64) -> [f64; 2] {
        let (device, engine) = (self.plant.device, &self.engine);
        let volume_m3 = nodes.lifted_m3;
        let (head_j_k, body_j_k) = (engine.head_j_k(volume_m3), engine.body_j_k(volume_m3));
        let body_pa_k = device.fluid.vapour_slope_pa_k(nodes.body_k);
        let head_pa_k = device.fluid.vapour_slope_pa_k(nodes.head_k);
        let pull = body_pa_k * to_body_w / body_j_k + head_pa_k * from_head_w / head_j_k;
        let in_head = volume_m3 > engine.tube_m3() || (volume_m3 == engine.tube_m3() && pull > 0.0);
        let carried_j_m3 = device.liquid_heat_j_m3k * (nodes.body_k - nodes.head_k);
        let (entering, leaving) = match (in_head, pull > 0.0) {
            (true, true) => (carried_j_m3, 0.0),
            (true, false) => (0.0, carried_j_m3),
            _ => (0.0, 0.0),
        };
        let stiffness = engine.weight_pa_m * device.hydrostatics.lift_slope_1_m2(volume_m3)
            + body_pa_k * (engine.latent_j_m3 - leaving) / body_j_k
            + head_pa_k * (engine.latent_j_m3 + entering) / head_j_k;
        let rising_m3_s = pull / stiffness;
        [
            (to_body_w - (engine.latent_j_m3 - leaving) * rising_m3_s) / body_j_k,
            rising_m3_s,
        ]
    }

    /// Largest step [s] tried from `step_s` that keeps the error, the state after it, and what ended it.
    pub(super) fn step(&self, second: f64, from: &Vector, step_s: f64) -> (f64, Vector, Event, f64) {
        let slope = |t: f64, y: &Vector| self.slope(t, y);
        let mut step_s = step_s;
        loop {
            let (to, error) = dormand_prince(&slope, second, from, step_s);
            let scale = if self.phase == Phase::Lifted {
                VOLUME_ERROR_SHARE * self.plant.device.tip_volume_m3
            } else {
                TEMPERATURE_ERROR_K
            };
            let size = (error[0].abs() / TEMPERATURE_ERROR_K).max(error[1].abs() / scale) / self.fineness;
            if size > 1.0 && step_s > 1e-4 {
                step_s *= (0.9 * size.powf(-0.2)).clamp(0.1, 0.8);
                continue;
            }
            let grown_s = step_s * (0.9 * size.max(1e-8).powf(-0.2)).clamp(0.3, 4.0);
            let Some((level, event)) = self.crossed(from, &to) else {
                return (step_s, to, Event::Time, grown_s);
            };
            let (cut_s, mut at) = self.locate(second, from, step_s, level);
            if self.phase == Phase::Lifted {
                at[1] = level;
            }
            return (cut_s, at, event, grown_s.max(0.5));
        }
    }

    /// What is watched: the lifted volume, or how much colder the head is than the body.
    fn watched(&self, y: &Vector) -> f64 {
        if self.phase == Phase::Lifted { y[1] } else { y[0] - y[1] }
    }

    /// The first level crossed between two states.
    fn crossed(&self, from: &Vector, to: &Vector) -> Option<(f64, Event)> {
        let (a, b) = (self.watched(from), self.watched(to));
        let levels: &[(f64, Event)] = match self.phase {
            Phase::Dipping => &[],
            Phase::Level => &[(0.0, Event::Ground)],
            Phase::Lifted => &[
                (self.engine.tube_m3(), Event::Junction),
                (self.plant.device.tip_volume_m3, Event::Tip),
                (0.0, Event::Ground),
            ],
        };
        let between = |level: f64| (a < level && b >= level) || (a > level && b <= level);
        levels
            .iter()
            .copied()
            .filter(|(level, _)| between(*level))
            .min_by(|x, y| (x.0 - a).abs().total_cmp(&(y.0 - a).abs()))
    }

    /// The step after which the watched value is at `level`.
    fn locate(&self, second: f64, from: &Vector, step_s: f64, level: f64) -> (f64, Vector) {
        let slope = |t: f64, y: &Vector| self.slope(t, y);
        let scale = if self.phase == Phase::Lifted {
            self.plant.device.tip_volume_m3
        } else {
            1.0
        };
        let (mut short_s, mut long_s) = (0.0, step_s);
        let mut at_short = self.watched(from) - level;
        let mut reached = dormand_prince(&slope, second, from, step_s).0;
        let mut at_long = self.watched(&reached) - level;
        let mut side = 0;
        for _ in 0..50 {
            if at_long.abs() < 1e-10 * scale || long_s - short_s < 1e-9 {
                break;
            }
            // Illinois variant of regula falsi: the end that stays twice counts half.
            let try_s = short_s + (long_s - short_s) * at_short / (at_short - at_long);
            let state = dormand_prince(&slope, second, from, try_s).0;
            let here = self.watched(&state) - level;
            if here == 0.0 || (here > 0.0) == (at_long > 0.0) {
                at_short *= if side == 1 { 0.5 } else { 1.0 };
                (long_s, at_long, reached, side) = (try_s, here, state, 1);
            } else {
                at_long *= if side == -1 { 0.5 } else { 1.0 };
                (short_s, at_short, side) = (try_s, here, -1);
            }
        }
        (long_s, reached)
    }
}
