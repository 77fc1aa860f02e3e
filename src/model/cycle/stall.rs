//! The static balance: where a device rests when it does not cycle, and the air in which it stops.

use super::engine::Engine;
use super::sides::{HeadFlow, HeadSide, body_gain_w};
use super::types::{Forcing, Tuning};
use crate::model::air::{Air, saturation_pressure_pa};
use crate::model::device::Device;
use crate::model::fluids::Liquid;

/// A resting body is found to this and better [K]: humidity at the stall turns on it by a hundredth of a point.
const CLOSE_BODY_K: f64 = 3e-3;

/// A device held just below the tip: the body in balance, the head asked whether it can still cool.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct TipBalance {
    /// Body temperature at which G = k x, x being the difference that holds the tip volume [K].
    pub(super) body_k: f64,
    /// That difference [K].
    pub(super) x_k: f64,
    /// q - k x with the head at that difference [W]: positive where the device can tip.
    pub(super) driving_w: f64,
}

/// The balance at the tip for a felt and a forcing.
pub(super) fn tip_balance(head: &HeadSide, engine: &Engine) -> TipBalance {
    let device = head.device;
    let air_k = head.forcing.air.temp_k;
    // The difference depends weakly on the body's temperature, and what it conducts is weak too: one correction settles both.
    let near_k = body_rest_k(
        head,
        device.conduction_w_k * engine.holding_k(device.tip_volume_m3, air_k),
        air_k,
    );
    let body_k = body_rest_k(
        head,
        device.conduction_w_k * engine.holding_k(device.tip_volume_m3, near_k),
        near_k,
    );
    let x_k = engine.holding_k(device.tip_volume_m3, body_k);
    let (flow, _) = head.at_node(body_k - x_k);
    TipBalance {
        body_k,
        x_k,
        driving_w: flow.heat_w - device.conduction_w_k * x_k,
    }
}

/// What is left to lift liquid just below the tip with the body at `body_k`: q - kx + (C_h/C_b)(G - kx) [W].
pub(super) fn tip_driving_w(head: &HeadSide, engine: &Engine, body_k: f64) -> f64 {
    let device = head.device;
    let x_k = engine.holding_k(device.tip_volume_m3, body_k);
    let conducted_w = device.conduction_w_k * x_k;
    let gained_w = body_gain_w(device, head.tuning, head.forcing, body_k);
    let ratio = engine.head_j_k(device.tip_volume_m3) / engine.body_j_k(device.tip_volume_m3);
    head.at_node(body_k - x_k).0.heat_w - conducted_w + ratio * (gained_w - conducted_w)
}

/// A device that does not cycle: q = k x and G = k x.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Rest {
    pub(super) head_k: f64,
    pub(super) body_k: f64,
    pub(super) surface_k: f64,
    pub(super) flow: HeadFlow,
}

/// Where head and body rest.
pub(super) fn rest(head: &HeadSide) -> Rest {
    let conduction = head.device.conduction_w_k;
    let resistance = head.device.head.felt_resistance_k_w;
    let air_k = head.forcing.air.temp_k;
    let (mut body_k, mut surface_k) = (air_k, air_k);
    // Head and body hang together by weak conduction only: a few alternations settle them.
    for _ in 0..12 {
        let miss = |k: f64| {
            let taken_w = head.at_surface(k).heat_w;
            taken_w - conduction * (body_k - k - resistance * taken_w)
        };
        surface_k = root(miss, surface_k, 0.03);
        let head_k = surface_k + resistance * head.at_surface(surface_k).heat_w;
        let next_k = body_rest_k(head, conduction * (body_k - head_k), body_k);
        let moved_k = (next_k - body_k).abs();
        body_k = next_k;
        if moved_k < CLOSE_BODY_K {
            break;
        }
    }
    let flow = head.at_surface(surface_k);
    Rest {
        head_k: surface_k + resistance * flow.heat_w,
        body_k,
        surface_k,
        flow,
    }
}

/// Body temperature at which the air's gain equals what is conducted away [K].
fn body_rest_k(head: &HeadSide, conducted_w: f64, near_k: f64) -> f64 {
    let miss = |k: f64| body_gain_w(head.device, head.tuning, head.forcing, k) - conducted_w;
    root_within(miss, near_k, -0.05, CLOSE_BODY_K)
}

/// Root of a smooth monotone function by the secant method from a guess and a guessed slope, to 1e-6 and better.
pub(super) fn root(f: impl Fn(f64) -> f64, guess: f64, slope: f64) -> f64 {
    root_within(f, guess, slope, 1e-6)
}

/// The same, stopping after a step below `close`: what is left is far smaller, since each step nearly squares it.
fn root_within(f: impl Fn(f64) -> f64, guess: f64, slope: f64, close: f64) -> f64 {
    let (mut older, mut f_older) = (guess, f(guess));
    if f_older == 0.0 {
        return guess;
    }
    let mut here = guess - (f_older / slope).clamp(-20.0, 20.0);
    for _ in 0..40 {
        let f_here = f(here);
        if f_here == 0.0 || f_here == f_older {
            break;
        }
        let step = (f_here * (here - older) / (f_here - f_older)).clamp(-20.0, 20.0);
        (older, f_older) = (here, f_here);
        here -= step;
        if step.abs() < close {
            break;
        }
    }
    here
}

/// Relative humidity, as a fraction over liquid, above which the device stops in settled air without lamp or sun.
///
/// Valid for `air_temp_k` 250-330 K; 0 where it would not run even in dry air.
pub fn stall_humidity(device: &Device, air_temp_k: f64, air_speed_m_s: f64, pressure_pa: f64) -> f64 {
    let tuning = Tuning::default();
    let felt = Liquid::from_abv(device.head.felt_capacity_kg, device.evaporant_abv_pct);
    let saturation_pa = saturation_pressure_pa(air_temp_k);
    let runs = |humidity: f64| {
        let air = Air {
            temp_k: air_temp_k,
            vapour_pressure_pa: humidity * saturation_pa,
            pressure_pa,
        };
        let forcing = Forcing::still(air, air_speed_m_s);
        let head = HeadSide {
            device,
            tuning: &tuning,
            forcing: &forcing,
            felt,
            wetness: 1.0,
            clean_share: 1.0,
            iced: false,
        };
        tip_balance(&head, &Engine::at(device, &felt, air_temp_k)).driving_w > 0.0
    };
    if !runs(0.0) {
        return 0.0;
    }
    if runs(1.0) {
        return 1.0;
    }
    let (mut low, mut high) = (0.0, 1.0);
    while high - low > 1e-6 {
        let middle = 0.5 * (low + high);
        if runs(middle) { low = middle } else { high = middle }
    }
    0.5 * (low + high)
}
