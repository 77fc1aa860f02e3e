//! The periodic cycle: the body temperature at the tip at which a cycle returns to itself.

use super::super::engine::Engine;
use super::super::sides::{HeadSide, body_gain_w};
use super::super::stall::{TipBalance, root, tip_balance, tip_driving_w};
use super::local::{Local, Start};
use super::march::{Cycle, Pace, march};

/// Relative closure asked of every averaged cycle: heat in against heat out.
const CLOSURE: f64 = 1e-9;

/// The periodic cycle, or the reason why there is none.
#[derive(Debug, Clone, Copy)]
#[expect(
    clippy::large_enum_variant,
    reason = "lives on the stack for a moment; a box would cost an allocation an hour"
)]
pub(super) enum Balance<'a> {
    /// It cycles.
    Cycling { local: Local<'a>, closed: Closed },
    /// It rests; the driving power at the tip is what is missing [W, negative].
    Resting { driving_w: f64, slope_w_k: f64 },
}

/// A cycle that returns to itself.
#[derive(Debug, Clone, Copy)]
pub(super) struct Closed {
    pub(super) cycle: Cycle,
    /// Body temperature at the tip [K].
    pub(super) body_k: f64,
    /// Slope of the power imbalance over what the two smooth curves alone would give.
    slope_share: f64,
}

impl Closed {
    /// Is so little power left at the tip that the static balance, which takes no curve for granted, has to be asked?
    fn is_close_to_stall(&self) -> bool {
        self.cycle.tip_driving_w < 0.05 * self.cycle.mean_driving_w()
    }
}

/// Solves the closure for a head in steady air, from the last cycle found if there is one.
pub(super) fn balance<'a>(head: &HeadSide<'a>, last: Option<Start>) -> Balance<'a> {
    let air_k = head.forcing.air.temp_k;
    if last.is_none() {
        // It did not cycle before: the static balance is asked first, since it is cheap and usually says no again.
        let engine = Engine::at(head.device, &head.felt, air_k);
        let rest = tip_balance(head, &engine);
        if rest.driving_w <= 0.0 {
            return resting(head, &engine, &rest);
        }
    }
    let mut start = last.unwrap_or_else(|| first_start(head));
    let mut refusals = 0;
    for _ in 0..8 {
        let centre_k = air_k + start.lag_k;
        let local = Local::around(head, centre_k, start);
        match close(&local, two_node_k(&local, centre_k, start), start) {
            Some(closed) if !start.is_guess && (closed.body_k - centre_k).abs() <= 1.3 * start.reach_k() => {
                if closed.is_close_to_stall() {
                    let rest = tip_balance(head, &local.engine);
                    if rest.driving_w <= 0.0 {
                        return resting(head, &local.engine, &rest);
                    }
                }
                return Balance::Cycling { local, closed };
            }
            Some(closed) => start = next_start(&local, &closed, air_k),
            None => {
                let rest = tip_balance(head, &local.engine);
                if rest.driving_w <= 0.0 || refusals == 2 {
                    return resting(head, &local.engine, &rest);
                }
                // A start from other air may be too far off; near the stall only the balance at rest is near enough.
                start = first_start(head);
                if refusals == 1 || last.is_none() {
                    start = Start {
                        lag_k: rest.body_k - air_k,
                        span_k: rest.x_k,
                        mean_difference_k: rest.x_k,
                        ..start
                    };
                }
                refusals += 1;
            }
        }
    }
    let local = Local::around(head, air_k + start.lag_k, start);
    resting(head, &local.engine, &tip_balance(head, &local.engine))
}

/// Where the next search may start after a cycle was found.
pub(super) fn next_start(local: &Local, closed: &Closed, air_k: f64) -> Start {
    let Closed {
        cycle,
        body_k,
        slope_share,
    } = *closed;
    let head_k = cycle.head_k_s / cycle.period_s;
    Start {
        span_k: local.holding_k(local.engine.device.tip_volume_m3, body_k),
        least_difference_k: body_k - cycle.after_dip.head_k,
        is_guess: false,
        felt_drop_k: head_k - local.surface_k.at(head_k),
        mean_difference_k: body_k - head_k,
        two_node_rest_w: local.gain_w.at(body_k) - local.heat_w.at(head_k),
        slope_share,
        lag_k: body_k - air_k,
    }
}

/// Body temperature at which G(T_b) less q(T_b - difference) is what the last cycle left: two Newton steps on smooth curves.
fn two_node_k(local: &Local, near_k: f64, start: Start) -> f64 {
    let mut body_k = near_k;
    for _ in 0..2 {
        let head_k = body_k - start.mean_difference_k;
        let surplus_w = local.gain_w.at(body_k) - local.heat_w.at(head_k) - start.two_node_rest_w;
        body_k -= surplus_w / (local.gain_w.slope(body_k) - local.heat_w.slope(head_k));
    }
    if (body_k - near_k).abs() < 5.0 { body_k } else { near_k }
}

/// A device that cannot tip, and how its missing power answers to a warmer body.
fn resting<'a>(head: &HeadSide, engine: &Engine, rest: &TipBalance) -> Balance<'a> {
    const WARMER_K: f64 = 0.2;
    let warmer_w = tip_driving_w(head, engine, rest.body_k + WARMER_K);
    Balance::Resting {
        driving_w: rest.driving_w.min(0.0),
        slope_w_k: (warmer_w - rest.driving_w) / WARMER_K,
    }
}

/// Starts from the temperature at which head and body would balance with a typical difference between them.
fn first_start(head: &HeadSide) -> Start {
    let air_k = head.forcing.air.temp_k;
    let span_k = Engine::at(head.device, &head.felt, air_k).holding_k(head.device.tip_volume_m3, air_k);
    let taken_w = |k: f64| head.at_node(k - 0.7 * span_k).0.heat_w;
    let body_k = root(
        |k| body_gain_w(head.device, head.tuning, head.forcing, k) - taken_w(k),
        air_k,
        -0.1,
    );
    Start {
        span_k,
        least_difference_k: 0.15 * span_k,
        is_guess: true,
        felt_drop_k: head.device.head.felt_resistance_k_w * taken_w(body_k),
        mean_difference_k: 0.7 * span_k,
        two_node_rest_w: 0.0,
        slope_share: 1.0,
        lag_k: body_k - air_k,
    }
}

/// The warmest a body gets that loses no more than what is conducted where the difference is least [K]: a closure found
/// above it is an accident of the curves.
fn ceiling_k(local: &Local, guess_k: f64, start: Start) -> f64 {
    let conducted_w = local.engine.device.conduction_w_k * start.least_difference_k;
    let mut body_k = guess_k;
    for _ in 0..4 {
        body_k += (conducted_w - local.gain_w.at(body_k)) / local.gain_w.slope(body_k);
    }
    if (body_k - guess_k).abs() < 5.0 {
        body_k
    } else {
        guess_k + 5.0
    }
}

/// What the last two tries say of the slope over what the smooth curves give; the former share where they say nothing.
fn learned_share(former: f64, smooth: f64, older: Option<(f64, f64)>, newer: (f64, f64)) -> f64 {
    let Some((body_k, surplus_w)) = older else {
        return former;
    };
    let share = (newer.1 - surplus_w) / (newer.0 - body_k) / smooth;
    if share > 1e-3 && share < 1e3 { share } else { former }
}

/// Bracketed secant on the mean power imbalance. Too cold a body starves; above the ceiling the air gives it nothing more.
fn close(local: &Local, guess_k: f64, start: Start) -> Option<Closed> {
    let ceiling_k = ceiling_k(local, guess_k, start);
    let (mut low_k, mut high_k) = (f64::NEG_INFINITY, ceiling_k);
    let mut pace = Pace::Quick;
    let mut body_k = guess_k.min(high_k - 1e-3);
    let mut older: Option<(f64, f64)> = None;
    let mut slope_share = start.slope_share;
    for _ in 0..80 {
        let Ok(cycle) = march(local, body_k, pace) else {
            if pace == Pace::Quick {
                // Starved by what it took for granted, perhaps: the same again with nothing taken.
                (pace, low_k, high_k) = (Pace::Careful, f64::NEG_INFINITY, ceiling_k);
                (older, slope_share) = (None, 1.0);
                continue;
            }
            if low_k == f64::NEG_INFINITY && march(local, high_k, pace).is_err() || high_k - body_k < 1e-9 {
                return None;
            }
            (low_k, older) = (body_k, None);
            body_k = 0.5 * (low_k + high_k);
            continue;
        };
        let surplus_j = cycle.body_heat_j - cycle.head_heat_j;
        if surplus_j.abs() <= CLOSURE * (cycle.body_heat_j.abs() + cycle.head_heat_j.abs()) {
            return Some(Closed {
                cycle,
                body_k,
                slope_share,
            });
        }
        let surplus_w = surplus_j / cycle.period_s;
        if surplus_w > 0.0 {
            low_k = body_k
        } else {
            high_k = body_k
        }
        let smooth = local.gain_w.slope(body_k) - local.heat_w.slope(body_k - start.mean_difference_k);
        slope_share = learned_share(slope_share, smooth, older, (body_k, surplus_w));
        older = Some((body_k, surplus_w));
        let next_k = body_k - surplus_w / (slope_share * smooth);
        let inside = next_k > low_k && next_k < high_k;
        body_k = if inside {
            next_k
        } else {
            0.5 * (low_k.max(body_k - 3.0) + high_k)
        };
    }
    None
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::model::air::Air;
    use crate::model::cycle::{Forcing, State, Tuning};
    use crate::model::device::{check, examples};

    /// Heat in and heat out of every averaged cycle agree to 1e-9 of what passes.
    #[test]
    fn every_averaged_cycle_closes() {
        let mut closed_cycles = 0;
        for example in examples() {
            let device = check(&example.definition).expect("an example is sound").device;
            for (celsius, humidity) in [(10.0, 0.3), (22.0, 0.5), (22.0, 0.85), (30.0, 0.2), (35.0, 0.7)] {
                let air = Air::from_relative_humidity(celsius + 273.15, humidity, 101_325.0);
                let (forcing, tuning) = (Forcing::still(air, 0.1), Tuning::default());
                let felt = State::settled(&device, &tuning, &forcing).felt;
                let head = HeadSide {
                    device: &device,
                    tuning: &tuning,
                    forcing: &forcing,
                    felt,
                    wetness: 1.0,
                    clean_share: 1.0,
                    iced: false,
                };
                if let Balance::Cycling { closed, .. } = balance(&head, None) {
                    let (gained_j, taken_j) = (closed.cycle.body_heat_j, closed.cycle.head_heat_j);
                    assert!((gained_j - taken_j).abs() <= 1e-9 * (gained_j.abs() + taken_j.abs()));
                    closed_cycles += 1;
                }
            }
        }
        assert!(closed_cycles > 15, "{closed_cycles}");
    }
}
