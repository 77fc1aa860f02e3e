//! The air side and the vapour pressure curve as smooth local curves, so that one cycle costs tens of operations.

use super::super::engine::Engine;
use super::super::parabola::Parabola;
use super::super::sides::{HeadSide, body_gain_w};

/// Everything one cycle meets in steady air, near one body temperature.
#[derive(Debug, Clone, Copy)]
pub(super) struct Local<'a> {
    pub(super) engine: Engine<'a>,
    /// Heat the air takes from the head against head temperature [W].
    pub(super) heat_w: Parabola,
    /// Water and ethanol leaving the head against head temperature [kg/s].
    pub(super) loss_kg_s: [Parabola; 2],
    /// Heat the body gains against body temperature [W].
    pub(super) gain_w: Parabola,
    /// Felt surface temperature against head temperature [K].
    pub(super) surface_k: Parabola,
    centre_k: f64,
    slope_pa_k: [f64; 3],
}

impl<'a> Local<'a> {
    /// Around a body temperature at the tip. `start` says how large the difference and the felt's own drop about are.
    pub(super) fn around(head: &HeadSide<'a>, body_k: f64, start: Start) -> Self {
        let device = head.device;
        // Only as wide as the head's own way in a cycle: still air's coefficient has a cusp near the air temperature, where
        // cooling and added vapour sink and lift the air equally, and a wide curve would catch it from afar.
        let reach_k = start.reach_k() + 0.5 * (start.span_k - start.least_difference_k);
        let middle_k = body_k - 0.5 * (start.span_k + start.least_difference_k) - start.felt_drop_k;
        let surfaces_k = [middle_k - reach_k, middle_k, middle_k + reach_k];
        let flows = surfaces_k.map(|surface_k| head.at_surface(surface_k));
        let resistance = device.head.felt_resistance_k_w;
        let nodes_k = [0, 1, 2].map(|i| surfaces_k[i] + resistance * flows[i].heat_w);
        let species = |s: usize| Parabola::through(nodes_k, flows.map(|flow| flow.loss_kg_s[s]));
        let bodies_k = [body_k - start.reach_k(), body_k, body_k + start.reach_k()];
        let gains_w = bodies_k.map(|k| body_gain_w(device, head.tuning, head.forcing, k));
        Self {
            engine: Engine::at(device, &head.felt, body_k),
            heat_w: Parabola::through(nodes_k, flows.map(|flow| flow.heat_w)),
            loss_kg_s: [species(0), species(1)],
            gain_w: Parabola::through(bodies_k, gains_w),
            surface_k: Parabola::through(nodes_k, surfaces_k),
            centre_k: body_k,
            slope_pa_k: derivatives(device, body_k),
        }
    }

    /// Difference that holds a lifted volume with the body at `body_k` [K]: the vapour pressure curve to third order,
    /// turned round as a series (exact to 1e-6 of a difference of 3 K).
    #[inline]
    pub(super) fn holding_k(&self, lifted_m3: f64, body_k: f64) -> f64 {
        let [first, second, third] = self.slope_pa_k;
        let off_k = body_k - self.centre_k;
        let slope = first + off_k * (second + 0.5 * off_k * third);
        let linear_k = self.engine.holding_pa(lifted_m3) / slope;
        let b = 0.5 * linear_k * (second + off_k * third) / slope;
        let c = linear_k * linear_k * third / (6.0 * slope);
        linear_k * (1.0 + b + (2.0 * b * b - c) + 5.0 * b * (b * b - c))
    }

    /// Driving power with the given nodes: what is left to lift liquid, q - kx + (C_h/C_b)(G - kx) [W].
    #[inline]
    pub(super) fn driving_w(&self, lifted_m3: f64, x_k: f64, body_k: f64) -> f64 {
        let conducted_w = self.engine.device.conduction_w_k * x_k;
        let ratio = self.engine.head_j_k(lifted_m3) / self.engine.body_j_k(lifted_m3);
        self.heat_w.at(body_k - x_k) - conducted_w + ratio * (self.gain_w.at(body_k) - conducted_w)
    }
}

/// What a local model starts from.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(in crate::model::cycle) struct Start {
    /// Difference between body and head at the tip [K].
    pub(super) span_k: f64,
    /// Body at the tip less head right after the dip, when it is warmest [K].
    pub(super) least_difference_k: f64,
    /// Nothing of this comes from a cycle yet.
    pub(super) is_guess: bool,
    /// Difference between head and felt surface [K].
    pub(super) felt_drop_k: f64,
    /// Mean difference between body at the tip and head over a cycle [K].
    pub(super) mean_difference_k: f64,
    /// What G(T_b) - q(T_b - mean difference) left in the last cycle [W].
    pub(super) two_node_rest_w: f64,
    /// Slope of the power imbalance over what the two smooth curves alone would give.
    pub(super) slope_share: f64,
    /// Body at the tip less air [K].
    pub(super) lag_k: f64,
}

impl Start {
    /// How far from its centre a local model reaches [K]: less near the stall, where body and head come close to the
    /// air and natural convection changes its direction.
    pub(super) fn reach_k(&self) -> f64 {
        (0.4 * self.lag_k.abs()).clamp(0.05, 0.9)
    }
}

/// First three derivatives of the vapour pressure curve: the first is the fluid's own, the others by central differences.
fn derivatives(device: &crate::model::device::Device, temp_k: f64) -> [f64; 3] {
    let slope = |k: f64| device.fluid.vapour_slope_pa_k(k);
    let (below, here, above) = (slope(temp_k - 1.0), slope(temp_k), slope(temp_k + 1.0));
    [here, 0.5 * (above - below), above - 2.0 * here + below]
}
