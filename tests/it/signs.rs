//! Which way the device answers, over random air: what physics says about the sign alone, without a number. Random cases;
//! `PROPTEST_CASES` asks for more.

use std::sync::LazyLock;

use dipcast::model::air::Air;
use dipcast::model::cycle::*;
use dipcast::model::device::{Device, check, examples};
use proptest::prelude::*;

static DEVICES: LazyLock<Vec<Device>> = LazyLock::new(|| {
    let each = examples().into_iter();
    each.map(|example| check(&example.definition).expect("the examples pass").device)
        .collect()
});

/// Air in which people and goods are kept: °C, % RH, m/s.
#[derive(Debug, Clone, Copy)]
struct Room {
    celsius: f64,
    humidity_pct: f64,
    speed_m_s: f64,
}

impl Room {
    fn forcing(self) -> Forcing {
        let air = Air::from_relative_humidity(self.celsius + 273.15, self.humidity_pct / 100.0, 101_325.0);
        Forcing::still(air, self.speed_m_s)
    }
}

fn room() -> impl Strategy<Value = Room> {
    (6.0..34.0, 10.0..92.0, 0.05..0.8).prop_map(|(celsius, humidity_pct, speed_m_s)| Room {
        celsius,
        humidity_pct,
        speed_m_s,
    })
}

/// An example device by its number, which is all that a failure need print.
fn device() -> impl Strategy<Value = usize> {
    0..DEVICES.len()
}

/// Cycles of an hour, after an hour in the same air.
fn cycles(device: usize, forcing: &Forcing) -> f64 {
    let hour = HourForcing {
        start: *forcing,
        end: *forcing,
        known: true,
    };
    let mut state = State::settled(&DEVICES[device], &Tuning::default(), forcing);
    let mut run = |from_s: f64, to_s: f64| {
        let (tuning, method) = (Tuning::default(), Method::Averaged);
        run_stretch(
            &DEVICES[device],
            &tuning,
            method,
            &mut state,
            &hour,
            from_s,
            to_s,
            false,
        )
        .cycles
    };
    run(0.0, 3600.0);
    run(0.0, 3600.0)
}

/// Fails unless the second is more; two devices that stand still are alike.
fn rises(less: f64, more: f64) -> Result<(), TestCaseError> {
    prop_assert!(more > less || less == 0.0, "{less} to {more}");
    Ok(())
}

proptest! {
    #![proptest_config(ProptestConfig { cases: crate::cases(60), failure_persistence: None, ..ProptestConfig::default() })]

    /// At one relative humidity warmer air is further from its wet bulb, and the fluid's pressure rises more for each kelvin.
    #[test]
    fn warmer_air_of_the_same_humidity_makes_it_quicker(device in device(), room in room(), by_k in 0.5..4.0) {
        let warmer = Room { celsius: room.celsius + by_k, ..room };
        rises(cycles(device, &room.forcing()), cycles(device, &warmer.forcing()))?;
    }

    #[test]
    fn moister_air_makes_it_slower(device in device(), room in room(), by_pct in 1.0..8.0) {
        let moister = Room { humidity_pct: room.humidity_pct + by_pct, ..room };
        rises(cycles(device, &moister.forcing()), cycles(device, &room.forcing()))?;
    }

    /// Moving air carries vapour from the head and heat to the body.
    #[test]
    fn moving_air_makes_it_quicker(device in device(), room in room(), factor in 1.1..2.5) {
        let moving = Room { speed_m_s: room.speed_m_s * factor, ..room };
        rises(cycles(device, &room.forcing()), cycles(device, &moving.forcing()))?;
    }

    /// Heat on the body helps, heat on the head hurts. Little of it: much more overheats the body.
    #[test]
    fn heat_below_helps_and_heat_above_hurts(device in device(), room in room(), watts in 0.01..0.1) {
        let dark = room.forcing();
        let below = Forcing { body_absorbed_w: watts, ..dark };
        let above = Forcing { head_absorbed_w: watts, ..dark };
        rises(cycles(device, &dark), cycles(device, &below))?;
        rises(cycles(device, &above), cycles(device, &dark))?;
    }

    /// Running in settled air without lamp or sun: the head is never warmer than the body, and both are colder than the air,
    /// which feeds the body through all of the cycle.
    #[test]
    fn head_below_body_below_air(device in device(), room in room()) {
        let (device, forcing) = (&DEVICES[device], room.forcing());
        let state = State::settled(device, &Tuning::default(), &forcing);
        let Some(trace) = cycle_trace(device, &Tuning::default(), &state, &forcing) else { return Ok(()) };
        for point in &trace {
            prop_assert!(point.head_temp_k <= point.body_temp_k, "{point:?}");
            prop_assert!(point.body_temp_k < forcing.air.temp_k, "{point:?} in {} K", forcing.air.temp_k);
        }
        // The averaged way says the same of its hour.
        let hour = HourForcing { start: forcing, end: forcing, known: true };
        let mut state = state;
        let out = run_stretch(device, &Tuning::default(), Method::Averaged, &mut state, &hour, 0.0, 3600.0, false);
        if out.state_s[HourState::Running as usize] == 3600.0 {
            prop_assert!(out.head_temp_k_s <= out.body_temp_k_s, "{out:?}");
            prop_assert!(out.body_temp_k_s < 3600.0 * forcing.air.temp_k, "{out:?}");
        }
    }
}

/// The properties say something only if most of their rooms let the device run.
#[test]
fn most_of_the_rooms_let_it_run() {
    let rooms = [(6.0, 50.0), (20.0, 30.0), (20.0, 70.0), (34.0, 60.0)];
    for (celsius, humidity_pct) in rooms {
        let room = Room {
            celsius,
            humidity_pct,
            speed_m_s: 0.2,
        };
        let running = (0..DEVICES.len())
            .filter(|device| cycles(*device, &room.forcing()) > 0.0)
            .count();
        assert!(running > 0, "{room:?}");
    }
}
