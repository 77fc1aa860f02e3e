//! The sealed side of the device: hydrostatics, heat stores and the laws that tie them, shared by both methods.
//!
//! x = body less head temperature, V = lifted volume, k = conduction, rho_v L = latent heat per volume of vapour.

use crate::model::device::Device;
use crate::model::fluids::Liquid;
use crate::model::transfer::GRAVITY_M_S2;

/// A difference no air can make [K].
const OUT_OF_REACH_K: f64 = 150.0;

/// Constants of the sealed side over a short stretch of time.
#[derive(Debug, Clone, Copy)]
pub(super) struct Engine<'a> {
    pub(super) device: &'a Device,
    /// Head glass, felt and what the felt holds [J/K].
    head_base_j_k: f64,
    /// Heat moved per volume of liquid lifted [J/m³]: dV of vapour space gone condenses dV/(v_v - v_l), each kilogram giving
    /// T p' (v_v - v_l), so T p' exactly (Clapeyron).
    pub(super) latent_j_m3: f64,
    /// Liquid density times gravity [Pa/m].
    pub(super) weight_pa_m: f64,
    tube_m3: f64,
}

impl<'a> Engine<'a> {
    /// With fluid properties at `body_k` and the felt as it is.
    pub(super) fn at(device: &'a Device, felt: &Liquid, body_k: f64) -> Self {
        let fluid = &device.fluid;
        Self {
            device,
            head_base_j_k: device.head.dry_capacity_j_k + felt.total_kg() * felt.heat_capacity_j_kgk(),
            latent_j_m3: body_k * fluid.vapour_slope_pa_k(body_k),
            weight_pa_m: fluid.liquid_density_kg_m3(body_k) * GRAVITY_M_S2,
            tube_m3: device.hydrostatics.tube_volume_m3(),
        }
    }

    /// Part of a lifted volume that stands in the head [m³].
    #[inline]
    pub(super) fn in_head_m3(&self, lifted_m3: f64) -> f64 {
        (lifted_m3 - self.tube_m3).max(0.0)
    }

    /// Lifted volume at which the meniscus enters the head [m³].
    pub(super) fn tube_m3(&self) -> f64 {
        self.tube_m3
    }

    /// Heat capacity of the head with a lifted volume [J/K].
    #[inline]
    pub(super) fn head_j_k(&self, lifted_m3: f64) -> f64 {
        self.head_base_j_k + self.device.liquid_heat_j_m3k * self.in_head_m3(lifted_m3)
    }

    /// Heat capacity of the body with a lifted volume [J/K].
    #[inline]
    pub(super) fn body_j_k(&self, lifted_m3: f64) -> f64 {
        self.device.body.full_capacity_j_k - self.device.liquid_heat_j_m3k * self.in_head_m3(lifted_m3)
    }

    /// Pressure difference that holds a lifted volume [Pa].
    #[inline]
    pub(super) fn holding_pa(&self, lifted_m3: f64) -> f64 {
        self.weight_pa_m * self.device.hydrostatics.lift_m(lifted_m3)
    }

    /// Temperature difference that holds a lifted volume with the body at `body_k` [K], from the vapour pressure curve
    /// itself; [`OUT_OF_REACH_K`] where the fluid has less pressure than the lift takes.
    pub(super) fn holding_k(&self, lifted_m3: f64, body_k: f64) -> f64 {
        let fluid = &self.device.fluid;
        let head_pa = fluid.vapour_pressure_pa(body_k) - self.holding_pa(lifted_m3);
        if head_pa <= 0.0 {
            return OUT_OF_REACH_K;
        }
        (body_k - fluid.saturation_temp_near_k(head_pa, body_k)).min(OUT_OF_REACH_K)
    }

    /// Lifted volume that a difference holds with the body at `body_k` [m³], 0 to the tip volume.
    pub(super) fn held_m3(&self, difference_k: f64, body_k: f64) -> f64 {
        let (mut low, mut high) = (0.0, self.device.tip_volume_m3);
        if self.holding_k(high, body_k) <= difference_k {
            return high;
        }
        for _ in 0..60 {
            let middle = 0.5 * (low + high);
            if self.holding_k(middle, body_k) < difference_k {
                low = middle
            } else {
                high = middle
            }
        }
        low
    }

    /// Heat stored in head and body [J], the reference being 0 K.
    pub(super) fn stored_j(&self, lifted_m3: f64, head_k: f64, body_k: f64) -> f64 {
        self.head_j_k(lifted_m3) * head_k + self.body_j_k(lifted_m3) * body_k
    }

    /// Temperatures and volume right after letting go: liquid drains and mixes, vapour closes a share of the difference.
    pub(super) fn after_drain_and_reset(&self, head_k: f64, body_k: f64) -> Nodes {
        let (dip, tip_m3) = (&self.device.dip, self.device.tip_volume_m3);
        let left_m3 = (1.0 - dip.drain_fraction) * self.in_head_m3(tip_m3);
        let drained_j_k = self.device.liquid_heat_j_m3k * (self.in_head_m3(tip_m3) - self.in_head_m3(left_m3));
        let before_j_k = self.body_j_k(tip_m3);
        let mixed_k = (before_j_k * body_k + drained_j_k * head_k) / (before_j_k + drained_j_k);
        let (head_j_k, body_j_k) = (self.head_j_k(left_m3), self.body_j_k(left_m3));
        let moved_j = dip.vapour_reset * (mixed_k - head_k) * head_j_k * body_j_k / (head_j_k + body_j_k);
        Nodes {
            head_k: head_k + moved_j / head_j_k,
            body_k: mixed_k - moved_j / body_j_k,
            lifted_m3: left_m3,
        }
    }

    /// Lets hydrostatics decide where the liquid stands after a dip, heat conserved: the still colder head pulls part of it up.
    /// `holding_k` maps a volume and a body temperature to the difference that holds it.
    pub(super) fn re_rise(&self, from: Nodes, holding_k: impl Fn(f64, f64) -> f64) -> Nodes {
        let at = |lifted_m3: f64| self.displaced(from, lifted_m3);
        let surplus_k = |nodes: &Nodes| nodes.body_k - nodes.head_k - holding_k(nodes.lifted_m3, nodes.body_k);
        let (mut low, mut high) = (at(0.0), at(self.device.tip_volume_m3));
        let (mut at_low, mut at_high) = (surplus_k(&low), surplus_k(&high));
        if at_low <= 0.0 {
            return low;
        }
        if at_high >= 0.0 {
            return high;
        }
        let mut side = 0;
        // Illinois variant of regula falsi: the end that stays twice counts half.
        for _ in 0..60 {
            let middle = at(low.lifted_m3 + (high.lifted_m3 - low.lifted_m3) * at_low / (at_low - at_high));
            let here = surplus_k(&middle);
            if here.abs() < 1e-11 {
                return middle;
            }
            if here > 0.0 {
                at_high *= if side == 1 { 0.5 } else { 1.0 };
                (low, at_low, side) = (middle, here, 1);
            } else {
                at_low *= if side == -1 { 0.5 } else { 1.0 };
                (high, at_high, side) = (middle, here, -1);
            }
        }
        low
    }

    /// The nodes after liquid moved from one lifted volume to another at once: vapour condenses where liquid arrives
    /// and evaporates where it leaves; liquid that enters or leaves the head carries the heat of where it came from.
    fn displaced(&self, from: Nodes, to_m3: f64) -> Nodes {
        let latent_j = self.latent_j_m3 * (to_m3 - from.lifted_m3);
        let entered_j_k = self.device.liquid_heat_j_m3k * (self.in_head_m3(to_m3) - self.in_head_m3(from.lifted_m3));
        let carried_j = entered_j_k * if entered_j_k > 0.0 { from.body_k } else { from.head_k };
        Nodes {
            head_k: (self.head_j_k(from.lifted_m3) * from.head_k + carried_j + latent_j) / self.head_j_k(to_m3),
            body_k: (self.body_j_k(from.lifted_m3) * from.body_k - carried_j - latent_j) / self.body_j_k(to_m3),
            lifted_m3: to_m3,
        }
    }
}

/// The two temperatures and the lifted volume.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub(super) struct Nodes {
    pub(super) head_k: f64,
    pub(super) body_k: f64,
    pub(super) lifted_m3: f64,
}
