//! Checks that need the inside: heat books, convergence, closed forms.

use super::averaged::{Plant, head_side};
use super::engine::Engine;
use super::resolved::{run, trace};
use super::sides::{HeadSide, body_gain_w};
use super::stall::rest;
use super::*;
use crate::model::air::Air;
use crate::model::device::{check, examples};
use crate::model::transfer::{longwave_w_m2, sphere_film, vapour_fluxes_kg_m2s};

fn example(index: usize) -> Device {
    check(&examples()[index].definition)
        .expect("an example is sound")
        .device
}

fn room(celsius: f64, humidity_pct: f64, speed_m_s: f64) -> Forcing {
    Forcing::still(
        Air::from_relative_humidity(celsius + 273.15, humidity_pct / 100.0, 101_325.0),
        speed_m_s,
    )
}

/// An hour from one air to another, at a chosen fineness.
fn hour_of(device: &Device, start: Forcing, end: Forcing, fineness: f64) -> (Stretch, super::resolved::HeatBook) {
    let tuning = Tuning::default();
    let plant = Plant {
        device,
        tuning: &tuning,
    };
    let mut state = State::settled(device, &tuning, &start);
    let hour = HourForcing {
        start,
        end,
        known: true,
    };
    run(plant, &mut state, &hour, [0.0, 3600.0], false, fineness)
}

fn assert_closes(what: &str, book: &super::resolved::HeatBook) {
    let throughput_j = book.gained_j.abs() + book.taken_j.abs();
    let miss_j = book.gained_j - book.taken_j - book.stored_j;
    assert!(
        throughput_j > 1.0 && miss_j.abs() <= 1e-6 * throughput_j,
        "{what}: {:e}",
        miss_j / throughput_j
    );
}

#[test]
fn the_heat_book_of_a_resolved_hour_closes() {
    for index in 0..examples().len() {
        for reset in [0.0, 0.5, 1.0] {
            let device = example(index).with_vapour_reset(reset);
            for (celsius, humidity_pct, speed_m_s) in [
                (22.0, 30.0, 0.1),
                (15.0, 70.0, 0.0),
                (33.0, 50.0, 0.5),
                (22.0, 97.0, 0.1),
            ] {
                if reset != 0.5 && speed_m_s != 0.1 {
                    continue;
                }
                let (start, end) = (
                    room(celsius, humidity_pct, speed_m_s),
                    room(celsius + 1.5, humidity_pct - 5.0, speed_m_s),
                );
                let (_, book) = hour_of(&device, start, end, 1.0);
                assert_closes(
                    &format!("example {index}, r {reset}, {celsius} °C, {humidity_pct} %"),
                    &book,
                );
            }
        }
    }
}

#[test]
fn the_heat_book_closes_with_part_drained_and_with_a_lamp() {
    let mut device = example(0);
    device.dip.drain_fraction = 0.3;
    let mut lit = room(22.0, 50.0, 0.1);
    lit.body_absorbed_w = 1.0;
    assert_closes("a lamp, part drained", &hour_of(&device, lit, lit, 1.0).1);
}

/// An error allowance of a thirty-second halves the step of a fifth-order rule.
#[test]
fn half_the_step_gives_the_same_hour() {
    for index in [0, 2] {
        let air = room(22.0, 50.0, 0.1);
        let (plain, fine) = (
            hour_of(&example(index), air, air, 1.0).0,
            hour_of(&example(index), air, air, 1.0 / 32.0).0,
        );
        assert!((plain.head_loss.water_kg / fine.head_loss.water_kg - 1.0).abs() < 0.002);
        assert!(
            (plain.cycles - fine.cycles).abs() <= 0.002 * fine.cycles,
            "{} {}",
            plain.cycles,
            fine.cycles
        );
    }
}

/// Without conduction and cycles the head rests where evaporation equals convection and radiation: its own wet bulb,
/// found here by bisection from the transfer laws alone.
#[test]
fn a_resting_head_is_at_the_wet_bulb_of_its_sphere() {
    let mut device = example(0);
    device.conduction_w_k = 0.0;
    let (tuning, forcing) = (Tuning::default(), room(20.0, 50.0, 0.3));
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
    let balance_w_m2 = |surface_k: f64| {
        let vapours = [crate::model::air::saturation_pressure_pa(surface_k), 0.0];
        let film = sphere_film(device.head.wet_diameter_m, surface_k, vapours, &forcing.air, 0.3);
        let flux = vapour_fluxes_kg_m2s(&film, 0.5 * (surface_k + forcing.air.temp_k), vapours, &forcing.air)[0];
        flux * crate::model::air::latent_heat_vaporisation_j_kg(surface_k)
            - film.heat_w_m2k * (forcing.air.temp_k - surface_k)
            - longwave_w_m2(0.95, surface_k, forcing.surroundings_k)
    };
    let (mut low, mut high) = (forcing.air.temp_k - 15.0, forcing.air.temp_k);
    while high - low > 1e-6 {
        let middle = 0.5 * (low + high);
        if balance_w_m2(middle) < 0.0 {
            low = middle
        } else {
            high = middle
        }
    }
    assert!((rest(&head).head_k - low).abs() < 0.01, "{} {low}", rest(&head).head_k);
}

/// In a straight tube the difference grows evenly with the volume; with heat linear in the difference the time of the climb
/// is a logarithm: t = [(rho_v L)(1 + C_h/C_b) dV + C_h dx] ln(N1/N0) / (N1 - N0).
#[test]
fn the_climb_in_a_tube_takes_logarithmic_time() {
    let mut device = example(0);
    device.tip_volume_m3 = 0.95 * device.hydrostatics.tube_volume_m3();
    let (tuning, forcing) = (Tuning::default(), room(22.0, 50.0, 0.1));
    let plant = Plant {
        device: &device,
        tuning: &tuning,
    };
    let state = State::settled(&device, &tuning, &forcing);
    let points = trace(plant, &state, &forcing).expect("it runs");
    let (from, to) = (points[0], points[points.len() - 2]);
    let engine = Engine::at(&device, &state.felt, from.body_temp_k);
    let ratio = engine.head_j_k(0.0) / engine.body_j_k(0.0);
    let driving_w = |p: &TracePoint| {
        let conducted_w = device.conduction_w_k * (p.body_temp_k - p.head_temp_k);
        let taken_w = head_side(plant, &state, &forcing).at_node(p.head_temp_k).0.heat_w;
        taken_w - conducted_w + ratio * (body_gain_w(&device, &tuning, &forcing, p.body_temp_k) - conducted_w)
    };
    let difference_k = |p: &TracePoint| p.body_temp_k - p.head_temp_k;
    let heat_j = engine.latent_j_m3 * (1.0 + ratio) * (to.lifted_m3 - from.lifted_m3)
        + engine.head_j_k(0.0) * (difference_k(&to) - difference_k(&from));
    let (first_w, last_w) = (driving_w(&from), driving_w(&to));
    let closed_s = heat_j * (last_w / first_w).ln() / (last_w - first_w);
    let taken_s = to.time_s - from.time_s;
    assert!(
        (closed_s / taken_s - 1.0).abs() < 0.001,
        "{closed_s} s against {taken_s} s"
    );
}
