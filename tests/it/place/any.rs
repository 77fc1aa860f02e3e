//! Any sound place in any weather: air stays air, nothing panics, and both ways of solving agree in a case.

use dipcast::model::air::saturation_pressure_pa;
use dipcast::model::cycle::Method;
use dipcast::model::place::*;
use dipcast::model::prediction::{Options, PredictionRequest, predict};
use proptest::prelude::*;

use crate::prediction::air::{hours, in_moving_air, placed, plain, shelf, steady};

fn rule() -> impl Strategy<Value = MoistureRule> {
    prop_oneof![
        Just(MoistureRule::None),
        Just(MoistureRule::FieldSurvey),
        (1..=5u8).prop_map(|class| MoistureRule::Iso13788 { class }),
        (-10.0..30.0).prop_map(|excess_g_m3| MoistureRule::GivenExcess { excess_g_m3 }),
    ]
}

fn room() -> impl Strategy<Value = Place> {
    let limits = (proptest::option::of(0.0..50.0), proptest::option::of(50.0..100.0));
    (rule(), 0.0..25.0, 0.0..15.0, 0.0..100.0, limits).prop_map(|(rule, heated_c, band_k, lag_h, limits)| {
        Place::Room(Room {
            moisture: Some(rule),
            heated_to_c: Some(heated_c),
            cooled_to_c: Some(heated_c + band_k + 5.0),
            memory_hours: Some(lag_h),
            buffering_hours: Some(lag_h),
            humidified_to_pct: limits.0,
            dehumidified_to_pct: limits.1,
            ..Room::default()
        })
    })
}

fn case(inside: Place, volume_l: f64, air_changes_per_hour: f64, devices: u32, warmer_by_k: f64) -> Place {
    Place::Case(CaseDefinition {
        inside: Box::new(inside),
        volume_l,
        air_changes_per_hour,
        devices: Some(devices),
        other_vapour_g_per_h: Some(0.1),
        warmer_by_k: Some(warmer_by_k),
        air_speed_m_s: None,
    })
}

fn place() -> impl Strategy<Value = Place> {
    let open = prop_oneof![
        room(),
        Just(Place::Outdoors(Outdoors::default())),
        Just(in_moving_air(0.2))
    ]
    .boxed();
    let cased = (open.clone(), 0.5..500.0, 0.0..30.0, 1..5u32, -5.0..20.0)
        .prop_map(|(inside, volume_l, changes, devices, warmer_k)| case(inside, volume_l, changes, devices, warmer_k));
    prop_oneof![open, cased]
}

proptest! {
    #![proptest_config(ProptestConfig { cases: crate::cases(40), failure_persistence: None, ..ProptestConfig::default() })]
    #[test]
    fn air_stays_air(place in place(), weather in proptest::collection::vec((-30.0..45.0f64, 1.0..100.0f64), 12..40)) {
        prop_assert!(faults(&place, "place").is_empty(), "{:?}", faults(&place, "place"));
        let weather = hours(weather);
        let air = placed(&weather, &place);
        for hour in 0..weather.known.len() {
            let saturation_pa = saturation_pressure_pa(air.series.temp_k[hour]);
            let vapour_pa = air.series.vapour_pressure_pa[hour];
            prop_assert!(vapour_pa >= 0.0);
            // Around a case the air may be too moist for the temperature inside it: the run takes off what is too much.
            prop_assert!(air.case.is_some() || vapour_pa <= saturation_pa * (1.0 + 1e-9), "{} {}", vapour_pa, saturation_pa);
        }
        let device = shelf();
        let request = PredictionRequest { device: &device, air: &air, options: plain() };
        let found = predict(&request, &|_, _| true).unwrap();
        let columns = found.hours.unwrap();
        for pct in columns.air_relative_humidity_pct.iter().flatten() {
            prop_assert!((0.0..=100.0).contains(pct), "{}", pct);
        }
        prop_assert!(columns.cycles.iter().all(|cycles| cycles.is_finite() && *cycles >= 0.0));
    }
}

#[test]
fn both_ways_of_solving_agree_in_a_case() {
    let device = shelf();
    let air = placed(&steady(8, 22.0, 50.0), &case(in_moving_air(0.1), 20.0, 2.0, 1, 0.0));
    let cycles = |method| {
        let options = Options { method, ..plain() };
        let request = PredictionRequest {
            device: &device,
            air: &air,
            options,
        };
        predict(&request, &|_, _| true).unwrap().summary.totals.cycles
    };
    let (averaged, resolved) = (cycles(Method::Averaged), cycles(Method::Resolved));
    assert!((averaged / resolved - 1.0).abs() < 0.02, "{averaged} {resolved}");
}
