//! The periodic cycle: the body temperature at the tip at which a cycle returns to itself.

use super::super::engine::Engine;
use super::super::sides::{HeadSide, body_gain_w};
use super::super::stall::{root, tip_balance};
use super::local::Local;
use super::march::{Cycle, march};

/// Relative closure asked of every averaged cycle: heat in against heat out.
const CLOSURE: f64 = 1e-9;
/// A local model is trusted this far from its centre [K].
const TRUSTED_K: f64 = 1.2;

/// The periodic cycle, or the reason why there is none.
#[derive(Debug, Clone, Copy)]
#[expect(
    clippy::large_enum_variant,
    reason = "lives on the stack for a moment; a box would cost an allocation an hour"
)]
pub(super) enum Balance<'a> {
    /// It cycles.
    Cycling {
        local: Local<'a>,
        cycle: Cycle,
        body_k: f64,
    },
    /// It rests; the driving power at the tip is what is missing [W, negative].
    Resting { driving_w: f64, slope_w_k: f64 },
}

/// Solves the closure for a head in steady air. `near_k` is a body temperature to start from, if one is known.
pub(super) fn balance<'a>(head: &HeadSide<'a>, near_k: Option<f64>) -> Balance<'a> {
    let device = head.device;
    let mut centre_k = near_k.unwrap_or_else(|| first_guess_k(head));
    let mut refused = false;
    for _ in 0..8 {
        let span_k = Engine::at(device, &head.felt, centre_k).holding_k(device.tip_volume_m3, centre_k);
        let local = Local::around(head, centre_k, span_k);
        let ceiling_k = root(
            |k| local.gain_w.at(k) - device.conduction_w_k * span_k,
            centre_k,
            local.gain_w.slope(centre_k),
        );
        match close(&local, centre_k, ceiling_k.clamp(centre_k - 3.0, centre_k + 3.0)) {
            Some((cycle, body_k)) if (body_k - centre_k).abs() <= TRUSTED_K => {
                return Balance::Cycling { local, cycle, body_k };
            }
            Some((_, body_k)) => centre_k = body_k,
            None => {
                let rest = tip_balance(head, &local.engine);
                if rest.driving_w <= 0.0 || refused {
                    return resting(&local, rest.driving_w.min(0.0), rest.body_k, rest.x_k);
                }
                (centre_k, refused) = (rest.body_k, true);
            }
        }
    }
    let local = Local::around(head, centre_k, 1.0);
    let rest = tip_balance(head, &local.engine);
    resting(&local, rest.driving_w.min(0.0), rest.body_k, rest.x_k)
}

fn resting<'a>(local: &Local, driving_w: f64, body_k: f64, x_k: f64) -> Balance<'a> {
    let tip_m3 = local.engine.device.tip_volume_m3;
    let ratio = local.engine.head_j_k(tip_m3) / local.engine.body_j_k(tip_m3);
    let slope_w_k = local.heat_w.slope(body_k - x_k) + ratio * local.gain_w.slope(body_k);
    Balance::Resting { driving_w, slope_w_k }
}

/// Body temperature at which head and body would balance with a typical difference between them.
fn first_guess_k(head: &HeadSide) -> f64 {
    let air_k = head.forcing.air.temp_k;
    let x_k = Engine::at(head.device, &head.felt, air_k).holding_k(head.device.tip_volume_m3, air_k);
    let miss = |k: f64| body_gain_w(head.device, head.tuning, head.forcing, k) - head.at_node(k - 0.7 * x_k).0.heat_w;
    root(miss, air_k, -0.1)
}

/// Bracketed secant on the mean power imbalance. Too cold a body starves; above the ceiling the air gives it nothing more.
fn close(local: &Local, guess_k: f64, ceiling_k: f64) -> Option<(Cycle, f64)> {
    let (mut low_k, mut high_k) = (f64::NEG_INFINITY, ceiling_k.max(guess_k) + 0.2);
    let mut body_k = guess_k;
    let mut older: Option<(f64, f64)> = None;
    for _ in 0..80 {
        let Ok(cycle) = march(local, body_k) else {
            if low_k == f64::NEG_INFINITY && march(local, high_k).is_err() || high_k - body_k < 1e-9 {
                return None;
            }
            (low_k, older) = (body_k, None);
            body_k = 0.5 * (low_k + high_k);
            continue;
        };
        let surplus_j = cycle.body_heat_j - cycle.head_heat_j;
        if surplus_j.abs() <= CLOSURE * (cycle.body_heat_j.abs() + cycle.head_heat_j.abs()) {
            return Some((cycle, body_k));
        }
        let surplus_w = surplus_j / cycle.period_s;
        if surplus_w > 0.0 {
            low_k = body_k
        } else {
            high_k = body_k
        }
        let slope = older
            .map(|(k, w)| (surplus_w - w) / (body_k - k))
            .filter(|slope| *slope < 0.0)
            .unwrap_or_else(|| local.gain_w.slope(body_k) - local.heat_w.slope(body_k));
        older = Some((body_k, surplus_w));
        let next_k = body_k - surplus_w / slope;
        let inside = next_k > low_k && next_k < high_k;
        body_k = if inside {
            next_k
        } else {
            0.5 * (low_k.max(body_k - 3.0) + high_k)
        };
    }
    None
}
