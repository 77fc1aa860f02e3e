//! No number whatever makes the check panic, and what it lets through is fit to run.

use dipcast::model::device::*;
use proptest::prelude::*;

use super::example;

/// Mostly numbers near a sensible one, some far off, some that are no numbers.
fn number(sensible: f64) -> impl Strategy<Value = f64> {
    prop_oneof![
        80 => (0.8..1.25_f64).prop_map(move |factor| factor * sensible),
        1 => proptest::num::f64::ANY,
        1 => prop_oneof![Just(0.0), Just(-1.0), Just(f64::NAN), Just(f64::INFINITY), Just(1e-300), Just(1e300)],
    ]
}

fn maybe(sensible: f64) -> impl Strategy<Value = Option<f64>> {
    proptest::option::of(number(sensible))
}

fn balances() -> impl Strategy<Value = BalanceDefinition> {
    let given = (number(3.0), maybe(80.0)).prop_map(|(tip_volume_ml, dip_angle_deg)| BalanceDefinition::TipVolume {
        tip_volume_ml,
        dip_angle_deg,
    });
    let masses = (
        number(55.0),
        number(16.0),
        maybe(80.0),
        maybe(2.23),
        number(1.5),
        number(60.0),
    )
        .prop_map(
            |(pivot_height_mm, forward_moment_g_mm, dip_angle_deg, glass_density_g_cm3, mass_g, height_mm)| {
                BalanceDefinition::Masses {
                    pivot_height_mm,
                    forward_moment_g_mm,
                    dip_angle_deg,
                    glass_density_g_cm3,
                    extra: vec![ExtraMass { mass_g, height_mm }],
                }
            },
        );
    prop_oneof![given, masses]
}

fn definitions() -> impl Strategy<Value = Definition> {
    let glass = [25.0, 0.8, 5.0, 7.0, 110.0, 32.0, 0.8, 9.5].map(number);
    let felt = (
        [1.0, 0.5, 0.8].map(number),
        maybe(5.0),
        maybe(0.05),
        maybe(0.3),
        maybe(0.05),
        maybe(3.0),
    );
    let rest = (
        [65.0, 80.0, 11.0].map(number),
        [2.0, 1.0, 0.5, 0.002, 60.0, 5.0].map(maybe),
        balances(),
    );
    (glass, felt, rest, "[a-z_]{0,12}").prop_map(|(glass, felt, (cup, options, balance), name)| {
        let mut d = example("shelf-180");
        (d.head.outer_diameter_mm, d.head.wall_mm) = (glass[0], glass[1]);
        (d.tube.bore_mm, d.tube.outer_diameter_mm, d.tube.length_mm) = (glass[2], glass[3], glass[4]);
        (d.body.outer_diameter_mm, d.body.wall_mm, d.fluid.volume_ml) = (glass[5], glass[6], glass[7]);
        let ([thickness_mm, dry_mass_g, capacity_g], beak, uptake_g, critical_share, exchange_share, gap) = felt;
        d.head.felt = FeltDefinition {
            thickness_mm,
            dry_mass_g,
            capacity_g,
            uptake_g,
            critical_share,
            exchange_share,
            absorptance: None,
        };
        (d.head.beak_area_cm2, d.tube.end_gap_mm) = (beak, gap);
        let given = d.cup.as_mut().unwrap();
        (
            given.opening_diameter_mm,
            given.depth_mm,
            given.reach_mm,
            given.freeboard_mm,
        ) = (cup[0], cup[1], cup[2], options[5]);
        d.dip = DipDefinition {
            seconds: options[0],
            drain_fraction: options[1],
            vapour_reset: options[2],
        };
        (d.conduction_w_k, d.max_temperature_c) = (options[3], options[4]);
        d.balance = balance;
        if name.len() == 3 {
            d.fluid.name = name;
        }
        d
    })
}

proptest! {
    #![proptest_config(ProptestConfig { cases: crate::cases(3000), failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn anything_is_either_refused_in_words_or_fit_to_run(definition in definitions()) {
        match check(&definition) {
            Err(faults) => prop_assert!(!faults.is_empty() && faults.iter().all(|fault| !fault.detail.is_empty())),
            Ok(checked) => {
                let device = checked.device;
                let h = &device.hydrostatics;
                prop_assert!(device.tip_volume_m3 > 0.0 && device.tip_volume_m3 < h.last_volume_m3());
                prop_assert!(h.tube_volume_m3() > 0.0 && h.lift_m(device.tip_volume_m3) > 0.0);
                for value in [
                    device.head.wet_area_m2,
                    device.head.felt_resistance_k_w,
                    device.head.dry_capacity_j_k,
                    device.body.full_capacity_j_k,
                    device.body.tube_length_m,
                    checked.derived.head_time_constant_s,
                    checked.derived.body_time_constant_s,
                    checked.derived.rest_level_mm,
                ] {
                    prop_assert!(value.is_finite() && value > 0.0);
                }
            }
        }
    }
}

#[test]
fn some_of_the_random_devices_do_pass() {
    use proptest::strategy::ValueTree;
    use proptest::test_runner::TestRunner;
    let mut runner = TestRunner::deterministic();
    let passed = (0..3000)
        .filter(|_| check(&definitions().new_tree(&mut runner).unwrap().current()).is_ok())
        .count();
    assert!(
        passed > 10,
        "only {passed} of 3000: the property above would say little"
    );
}
