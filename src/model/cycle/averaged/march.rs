//! One cycle marched from tip to tip in steady air, heat conserved to rounding in every step.

use super::super::engine::Nodes;
use super::local::Local;

/// Steps in the tube and in the head; the latter crowd towards both ends.
const TUBE_STEPS: usize = 2;
const HEAD_STEPS: usize = 4;

/// How the body temperature at the end of a step is found.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Pace {
    /// Taken as expected on the way to the tip: good to a quarter of a percent, and starved early near the stall.
    Quick,
    /// Solved for in every step: true to the stall, at forty times the price.
    Careful,
}

/// What one cycle brought.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub(super) struct Cycle {
    /// Duration, dip included [s].
    pub(super) period_s: f64,
    /// Heat the air took from the head [J].
    pub(super) head_heat_j: f64,
    /// Heat the body gained [J].
    pub(super) body_heat_j: f64,
    /// Water and ethanol lost by the head [kg].
    pub(super) loss_kg: [f64; 2],
    /// Time integral of the head temperature [K s].
    pub(super) head_k_s: f64,
    /// Where the dip leaves both temperatures and the liquid.
    pub(super) after_dip: Nodes,
    /// Driving power at the tip [W]; the stall is where it vanishes.
    pub(super) tip_driving_w: f64,
    /// Heat moved while climbing [J].
    pub(super) climb_heat_j: f64,
    /// Duration of the climb [s].
    climb_s: f64,
}

impl Cycle {
    /// Mean driving power while climbing [W].
    pub(super) fn mean_driving_w(&self) -> f64 {
        if self.climb_s > 0.0 {
            self.climb_heat_j / self.climb_s
        } else {
            f64::INFINITY
        }
    }
}

/// The air cannot carry the liquid to the tip from this body temperature; holds the driving power where it failed [W].
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Starved(pub(super) f64);

/// A point on the climb.
#[derive(Debug, Clone, Copy)]
struct Point {
    lifted_m3: f64,
    body_k: f64,
    x_k: f64,
    driving_w: f64,
}

/// Marches one cycle from the tip with the body at `body_k` to the next tip.
pub(super) fn march(local: &Local, body_k: f64, pace: Pace) -> Result<Cycle, Starved> {
    let mut cycle = Cycle::default();
    cycle.after_dip = through_the_dip(local, body_k, &mut cycle);
    climb(local, cycle.after_dip, body_k, pace, &mut cycle)?;
    Ok(cycle)
}

/// From the tip with the body at `body_k` to where hydrostatics leaves the liquid after the dip.
pub(super) fn through_the_dip(local: &Local, body_k: f64, cycle: &mut Cycle) -> Nodes {
    let tip_x_k = local.holding_k(local.engine.device.tip_volume_m3, body_k);
    let drained = local.engine.after_drain_and_reset(body_k - tip_x_k, body_k);
    let dipped = dip(local, drained, cycle);
    local
        .engine
        .re_rise(dipped, |lifted_m3, body_k| local.holding_k(lifted_m3, body_k))
}

/// The air side goes on during the dip: one midpoint step.
fn dip(local: &Local, from: Nodes, cycle: &mut Cycle) -> Nodes {
    let duration_s = local.engine.device.dip.duration_s;
    let (head_j_k, body_j_k) = (
        local.engine.head_j_k(from.lifted_m3),
        local.engine.body_j_k(from.lifted_m3),
    );
    let conduction = local.engine.device.conduction_w_k;
    let step = |at: Nodes, step_s: f64| {
        let (taken_w, gained_w) = (local.heat_w.at(at.head_k), local.gain_w.at(at.body_k));
        let conducted_w = conduction * (at.body_k - at.head_k);
        Nodes {
            head_k: from.head_k + (conducted_w - taken_w) * step_s / head_j_k,
            body_k: from.body_k + (gained_w - conducted_w) * step_s / body_j_k,
            lifted_m3: from.lifted_m3,
        }
    };
    let middle = step(from, 0.5 * duration_s);
    cycle.period_s += duration_s;
    cycle.head_heat_j += local.heat_w.at(middle.head_k) * duration_s;
    cycle.body_heat_j += local.gain_w.at(middle.body_k) * duration_s;
    add_losses(local, middle.head_k, duration_s, cycle);
    step(middle, duration_s)
}

/// From the nodes after a dip to the tip, where the body is expected at `tip_body_k`.
fn climb(local: &Local, from: Nodes, tip_body_k: f64, pace: Pace, cycle: &mut Cycle) -> Result<(), Starved> {
    let (tube_m3, tip_m3) = (local.engine.tube_m3(), local.engine.device.tip_volume_m3);
    let start_x_k = from.body_k - from.head_k;
    let mut here = point(local, from.lifted_m3, from.body_k, start_x_k)?;
    let mut panel = |here: Point, to_m3: f64| {
        let step = match pace {
            Pace::Quick => step(local, here, to_m3, expected_k(here, to_m3, [tip_m3, tip_body_k]))?,
            Pace::Careful => fitting_step(local, here, to_m3)?,
        };
        book(local, here, &step, cycle);
        Ok(Point {
            body_k: step.body_k,
            ..step.there
        })
    };
    if from.lifted_m3 < tube_m3.min(tip_m3) {
        let (start_m3, width_m3) = (from.lifted_m3, tube_m3.min(tip_m3) - from.lifted_m3);
        for i in 1..=TUBE_STEPS {
            here = panel(here, start_m3 + width_m3 * i as f64 / TUBE_STEPS as f64)?;
        }
    }
    if here.lifted_m3 < tip_m3 {
        let (start_m3, width_m3) = (here.lifted_m3, tip_m3 - here.lifted_m3);
        for i in 1..=HEAD_STEPS {
            here = panel(here, start_m3 + width_m3 * crowded(i))?;
        }
    }
    cycle.tip_driving_w = here.driving_w;
    Ok(())
}

/// Share of the way after step `i`, steps crowding towards both ends (Chebyshev points).
fn crowded(i: usize) -> f64 {
    const SHARES: [f64; HEAD_STEPS + 1] = [0.0, 0.1464466094067262, 0.4999999999999999, 0.8535533905932737, 1.0];
    SHARES[i]
}

fn point(local: &Local, lifted_m3: f64, body_k: f64, x_k: f64) -> Result<Point, Starved> {
    let driving_w = local.driving_w(lifted_m3, x_k, body_k);
    if driving_w > 0.0 {
        Ok(Point {
            lifted_m3,
            body_k,
            x_k,
            driving_w,
        })
    } else {
        Err(Starved(driving_w))
    }
}

/// One step of the climb.
struct Step {
    there: Point,
    duration_s: f64,
    /// Heat moved from body to head [J].
    heat_j: f64,
    conducted_w: f64,
    gained_w: f64,
    /// Body temperature that the heat leaves at the end [K].
    body_k: f64,
}

/// A step with the body at `body_k` at its end. Between the ends the driving power is taken linear in the heat moved,
/// which makes the time a logarithm: exact for a straight tube and heat linear in temperature, and well behaved up to the
/// stall.
fn step(local: &Local, here: Point, to_m3: f64, body_k: f64) -> Result<Step, Starved> {
    let engine = &local.engine;
    let middle_m3 = 0.5 * (here.lifted_m3 + to_m3);
    let (head_j_k, body_j_k) = (engine.head_j_k(middle_m3), engine.body_j_k(middle_m3));
    let (ratio, risen_m3) = (head_j_k / body_j_k, to_m3 - here.lifted_m3);
    let entered_j_k = engine.head_j_k(to_m3) - engine.head_j_k(here.lifted_m3);
    let there = point(local, to_m3, body_k, local.holding_k(to_m3, body_k))?;
    let mean_x_k = 0.5 * (here.x_k + there.x_k);
    let heat_j =
        engine.latent_j_m3 * (1.0 + ratio) * risen_m3 + entered_j_k * mean_x_k + head_j_k * (there.x_k - here.x_k);
    let duration_s = heat_j / log_mean(here.driving_w, there.driving_w);
    let conducted_w = engine.device.conduction_w_k * mean_x_k;
    let gained_w = local.gain_w.at(0.5 * (here.body_k + body_k));
    let warmed_j = (gained_w - conducted_w) * duration_s - engine.latent_j_m3 * risen_m3;
    Ok(Step {
        there,
        duration_s,
        heat_j,
        conducted_w,
        gained_w,
        body_k: here.body_k + warmed_j / body_j_k,
    })
}

/// The step whose end fits its own body temperature. A warmer body drives harder and has less time to warm up, so there
/// is one at most; where even the warmest is starved there is none.
fn fitting_step(local: &Local, here: Point, to_m3: f64) -> Result<Step, Starved> {
    let (mut low_k, mut high_k) = (here.body_k - 1.0, here.body_k + 4.0);
    // Starved counts as far too cold; beside that the Illinois variant of regula falsi.
    let (mut over_low_k, mut over_high_k, mut side) = (1.0, -1.0, 0);
    for _ in 0..60 {
        let middle_k = low_k + (high_k - low_k) * over_low_k / (over_low_k - over_high_k);
        let over_k = step(local, here, to_m3, middle_k).map_or(1.0, |step| (step.body_k - middle_k).min(1.0));
        if over_k > 0.0 {
            over_high_k *= if side == 1 { 0.5 } else { 1.0 };
            (low_k, over_low_k, side) = (middle_k, over_k, 1);
        } else {
            over_low_k *= if side == -1 { 0.5 } else { 1.0 };
            (high_k, over_high_k, side) = (middle_k, over_k, -1);
        }
        if over_k.abs() < 1e-12 || high_k - low_k < 3e-13 {
            break;
        }
    }
    let found = step(local, here, to_m3, high_k)?;
    if (found.body_k - high_k).abs() < 1e-3 {
        Ok(found)
    } else {
        Err(Starved(0.0))
    }
}

/// Body temperature on the straight line over volume to the one at the tip [K].
fn expected_k(here: Point, to_m3: f64, [tip_m3, tip_body_k]: [f64; 2]) -> f64 {
    here.body_k + (tip_body_k - here.body_k) * (to_m3 - here.lifted_m3) / (tip_m3 - here.lifted_m3)
}

/// Books a step.
fn book(local: &Local, here: Point, step: &Step, cycle: &mut Cycle) {
    let Step {
        there,
        duration_s,
        heat_j,
        conducted_w,
        gained_w,
        ..
    } = *step;
    let middle_m3 = 0.5 * (here.lifted_m3 + there.lifted_m3);
    let ratio = local.engine.head_j_k(middle_m3) / local.engine.body_j_k(middle_m3);
    let taken_j = heat_j + duration_s * (conducted_w - ratio * (gained_w - conducted_w));
    cycle.period_s += duration_s;
    cycle.climb_s += duration_s;
    cycle.climb_heat_j += heat_j;
    cycle.head_heat_j += taken_j;
    cycle.body_heat_j += gained_w * duration_s;
    let middle_k = 0.5 * (here.body_k - here.x_k + there.body_k - there.x_k);
    let settled_k = middle_k + (taken_j / duration_s - local.heat_w.at(middle_k)) / local.heat_w.slope(middle_k);
    add_losses(
        local,
        if settled_k.is_finite() { settled_k } else { middle_k },
        duration_s,
        cycle,
    );
}

fn add_losses(local: &Local, head_k: f64, duration_s: f64, cycle: &mut Cycle) {
    for (lost_kg, rate) in cycle.loss_kg.iter_mut().zip(&local.loss_kg_s) {
        *lost_kg += rate.at(head_k) * duration_s;
    }
    cycle.head_k_s += head_k * duration_s;
}

/// Logarithmic mean of two positive numbers; the series is exact to 2e-8 where it is used.
fn log_mean(a: f64, b: f64) -> f64 {
    let z = (b - a) / (b + a);
    if z.abs() > 0.2 {
        return (b - a) / (b / a).ln();
    }
    let z2 = z * z;
    0.5 * (a + b) / (1.0 + z2 * (1.0 / 3.0 + z2 * (0.2 + z2 * (1.0 / 7.0 + z2 / 9.0))))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn logarithmic_means() {
        // (e - 1) / ln e, and continuity where the series hands over.
        assert!((log_mean(1.0, std::f64::consts::E) - (std::f64::consts::E - 1.0)).abs() < 1e-12);
        let (inside, outside) = (log_mean(1.0, 1.4999), log_mean(1.0, 1.5001));
        // The slope there is 1/ln b - (b - 1)/(b ln^2 b) = 0.4387 at b = 1.5, by hand.
        assert!((outside - inside - 0.0002 * 0.4387).abs() < 1e-7);
        assert!((inside - 0.4999 / 1.4999_f64.ln()).abs() < 3e-8);
        assert_eq!(log_mean(2.0, 2.0), 2.0);
    }
}
