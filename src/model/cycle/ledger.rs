//! The books of liquid: what felt and cup lose, what the beak brings, and when a person is needed.

use super::cup::{CupSide, drop_m};
use super::types::{DueCause, Forcing, State, Stretch, Tuning};
use crate::model::device::Device;
use crate::model::fluids::Liquid;

/// A felt wet over less than this share of its surface, and standing still, counts as dried out.
pub const DRIED_OUT_WETNESS: f64 = 0.1;

/// Share of the head's surface that is wet: 1 down to the critical store, then falling with it (constant-rate, then
/// falling-rate drying).
pub(super) fn wetness(device: &Device, felt: &Liquid) -> f64 {
    let critical_kg = device.head.critical_share * device.head.felt_capacity_kg;
    (felt.total_kg() / critical_kg).clamp(0.0, 1.0)
}

/// Scale takes evaporation from a felt down to this share of a clean one and no further.
const SCALED_SHARE_LEAST: f64 = 0.3;

/// Share of a clean felt's evaporation that scale leaves.
pub(super) fn clean_share(device: &Device, state: &State) -> f64 {
    let scale_kg_m2 = state.scale_kg / device.head.wet_area_m2;
    (1.0 - device.scale_effect_m2_kg * scale_kg_m2).max(SCALED_SHARE_LEAST)
}

/// How far the level has fallen below the brim mark [m]; 0 without a cup.
pub fn cup_drop_m(device: &Device, state: &State) -> f64 {
    match &device.cup {
        None => 0.0,
        Some(cup) => drop_m(cup, &state.cup, state.cup_temp_k).max(0.0),
    }
}

/// Why a person is needed now, if so: the level is out of the beak's reach, or the felt dried out.
pub fn is_due(device: &Device, state: &State) -> Option<DueCause> {
    match &device.cup {
        Some(cup) if cup_drop_m(device, state) >= cup.reach_m * (1.0 - 1e-9) => Some(DueCause::CupAtReach),
        _ if state.dried_out => Some(DueCause::FeltDry),
        _ => None,
    }
}

/// Fills the cup to the brim mark and wets the felt; returns what was poured.
///
/// Water is topped up. Ethanol-water is replaced whole, since its strength has drifted: the cup is emptied first.
pub fn refill(device: &Device, state: &mut State) -> Liquid {
    let abv = device.evaporant_abv_pct;
    let felt = Liquid::from_abv(device.head.felt_capacity_kg, abv);
    let cup = device.cup.as_ref().map(|cup| cup.full).unwrap_or_default();
    let poured = if abv > 0.0 {
        felt.plus(cup)
    } else {
        let missing_kg = felt.total_kg() - state.felt.total_kg() + cup.total_kg() - state.cup.total_kg();
        Liquid::from_abv(missing_kg.max(0.0), 0.0)
    };
    (state.felt, state.cup, state.dried_out) = (felt, cup, false);
    poured
}

/// Can the beak drink?
pub(super) fn has_supply(device: &Device, state: &State) -> bool {
    let in_reach = |c: &crate::model::device::Cup| cup_drop_m(device, state) < c.reach_m * (1.0 - 1e-9);
    !state.iced && state.cup.total_kg() > 0.0 && device.cup.as_ref().is_some_and(in_reach)
}

/// Books `cycles` dips and `loss` of the head over a piece of time.
pub(super) fn book_felt(
    device: &Device,
    state: &mut State,
    cycles: f64,
    loss: [f64; 2],
    supply: bool,
    out: &mut Stretch,
) {
    let sharers = device.cup.as_ref().map_or(1.0, |cup| cup.shared_by);
    let drinks = cycles > 0.0 && supply;
    // The dips are spread over the piece, so what they bring is there to be lost in it.
    if drinks {
        let wanted_kg = (device.head.felt_capacity_kg - state.felt.total_kg() + loss[0] + loss[1]).max(0.0);
        let taken_kg = wanted_kg
            .min(cycles * device.head.uptake_kg)
            .min(state.cup.total_kg() / sharers);
        let taken = state.cup.scaled(taken_kg);
        state.felt = state.felt.plus(taken);
        state.cup = less(state.cup, taken, sharers);
    }
    let before = state.felt;
    let lost = Liquid {
        water_kg: loss[0],
        ethanol_kg: loss[1],
    };
    state.felt = kept(before, lost, device.head.felt_capacity_kg);
    let water_kg = before.water_kg - state.felt.water_kg;
    out.head_loss.water_kg += water_kg;
    out.head_loss.ethanol_kg += before.ethanol_kg - state.felt.ethanol_kg;
    // A litre of water leaves its hardness behind as mg/L of scale.
    state.scale_kg += 1e-6 * device.hardness_mg_l * water_kg.max(0.0);
    if drinks && (state.felt.ethanol_kg > 0.0 || state.cup.ethanol_kg > 0.0) {
        exchange(device, state, cycles, sharers);
    }
}

/// Each dip swaps a share of the felt's liquid for the cup's.
fn exchange(device: &Device, state: &mut State, cycles: f64, sharers: f64) {
    let share = -(cycles * (-device.head.exchange_share).ln_1p()).exp_m1();
    let (felt_kg, cup_kg) = (state.felt.total_kg(), state.cup.total_kg() / sharers);
    if felt_kg <= 0.0 || cup_kg <= 0.0 {
        return;
    }
    // Swapped until both would be mixed at most: a cup smaller than the felt cannot overshoot.
    let swapped_kg = share * felt_kg * cup_kg / (felt_kg + cup_kg);
    let (out, back) = (state.felt.scaled(swapped_kg), state.cup.scaled(swapped_kg));
    state.felt = less(state.felt, out, 1.0).plus(back);
    state.cup = less(state.cup, back, sharers).plus(out.scaled(out.total_kg() * sharers));
}

/// Books the cup's own loss over a piece of time and carries its temperature.
pub(super) fn book_cup(
    device: &Device,
    tuning: &Tuning,
    forcing: &Forcing,
    state: &mut State,
    duration_s: f64,
    out: &mut Stretch,
) {
    let Some(cup) = &device.cup else { return };
    if state.cup.total_kg() <= 0.0 || duration_s <= 0.0 {
        return;
    }
    let side = CupSide::of(cup, tuning, forcing, state);
    let (temp_k, rate) = side.carry(state.cup_temp_k, duration_s);
    let before = state.cup;
    state.cup = less(
        state.cup,
        Liquid {
            water_kg: rate[0] * duration_s,
            ethanol_kg: rate[1] * duration_s,
        },
        1.0,
    );
    state.cup_temp_k = temp_k;
    out.cup_loss.water_kg += before.water_kg - state.cup.water_kg;
    out.cup_loss.ethanol_kg += before.ethanol_kg - state.cup.ethanol_kg;
}

/// What is left of `from`, never below zero.
fn less(from: Liquid, taken: Liquid, times: f64) -> Liquid {
    Liquid {
        water_kg: (from.water_kg - times * taken.water_kg).max(0.0),
        ethanol_kg: (from.ethanol_kg - times * taken.ethanol_kg).max(0.0),
    }
}

/// The felt after a loss (or dew, when negative): never below empty, and dew beyond the capacity drips off.
fn kept(felt: Liquid, lost: Liquid, capacity_kg: f64) -> Liquid {
    let left = less(felt, lost, 1.0);
    if left.total_kg() > capacity_kg {
        left.scaled(capacity_kg)
    } else {
        left
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_hour_loses_more_than_a_felt_holds() {
        let device = hard_water_device();
        let forcing = Forcing::still(Air::from_relative_humidity(305.15, 0.2, 101_325.0), 0.3);
        let mut state = State::settled(&device, &Tuning::default(), &forcing);
        let before = state;
        let mut out = Stretch::default();
        // The felt holds 0.8 g, and the dips of the hour bring what it loses.
        book_felt(&device, &mut state, 300.0, [0.95e-3, 0.0], true, &mut out);
        assert!((out.head_loss.water_kg - 0.95e-3).abs() < 1e-15);
        assert!((before.cup.total_kg() - state.cup.total_kg() - 0.95e-3).abs() < 1e-12);
        assert!((state.felt.total_kg() - before.felt.total_kg()).abs() < 1e-15);
    }
    use crate::model::air::Air;
    use crate::model::device::{check, examples};

    fn hard_water_device() -> Device {
        let mut definition = examples().swap_remove(0).definition;
        definition.evaporant.hardness_mg_l = Some(180.0);
        check(&definition).expect("the shelf example is sound").device
    }

    #[test]
    fn a_year_of_hard_water_leaves_half_a_gram() {
        let device = hard_water_device();
        let forcing = Forcing::still(Air::from_relative_humidity(295.15, 0.5, 101_325.0), 0.1);
        let mut state = State::settled(&device, &Tuning::default(), &forcing);
        for _ in 0..8760 {
            let hourly = [0.35e-3, 0.0];
            book_felt(&device, &mut state, 100.0, hourly, true, &mut Stretch::default());
            state.cup = device.cup.as_ref().expect("the shelf example has a cup").full;
        }
        // 0.35 g/h over 8760 h is 3.066 L; at 180 mg/L that leaves 551.9 mg.
        assert!((1e6 * state.scale_kg - 551.9).abs() < 0.1);
        // 551.9 mg on 27.9 cm² is 19.8 mg/cm², a percent each.
        assert!((clean_share(&device, &state) - 0.802).abs() < 0.001);
        state.scale_kg = 1.0;
        assert_eq!(clean_share(&device, &state), SCALED_SHARE_LEAST);
    }
}
