//! A real house with the weather beside it: what each moisture rule makes of the weather, against what was measured inside.
//!
//! L. Candanedo, Appliances energy prediction, UCI Machine Learning Repository 374, CC BY 4.0: a low-energy house in Belgium,
//! January to May 2016, living room (T1, RH_1) and the nearest airport's weather (T_out, RH_out), hourly means.

use dipcast::intake::csv::{Limits, read};
use dipcast::model::place::{MoistureRule, Place, Room, place_air};
use dipcast::model::weather::{HourlySeries, RegulariseOptions, regularise};

use crate::intake_csv::layout;

fn series(layout_name: &str) -> HourlySeries {
    let bytes = std::fs::read(crate::data("belgian_house_2016.csv")).unwrap();
    let raw = read(&bytes, Some(&layout(layout_name)), &Limits::default()).unwrap();
    regularise(raw, &RegulariseOptions::default()).unwrap()
}

/// Mean and root-mean-square of predicted less measured vapour pressure [Pa] over all hours.
fn error_pa(rule: MoistureRule) -> (f64, f64) {
    let (outdoors, measured) = (series("belgian_station"), series("belgian_room"));
    assert_eq!(
        (outdoors.start_unix_s, outdoors.known.len()),
        (measured.start_unix_s, measured.known.len())
    );
    let room = Room {
        moisture: Some(rule),
        ..Room::default()
    };
    let predicted = place_air(&outdoors, &Place::Room(room), "place").unwrap().series;
    let hours = (0..measured.known.len()).filter(|hour| measured.known[*hour] && predicted.known[*hour]);
    let off: Vec<f64> = hours
        .map(|hour| predicted.vapour_pressure_pa[hour] - measured.vapour_pressure_pa[hour])
        .collect();
    assert!(off.len() > 3200, "{}", off.len());
    let mean = |values: &mut dyn Iterator<Item = f64>| values.sum::<f64>() / off.len() as f64;
    let bias = mean(&mut off.iter().copied());
    (bias, mean(&mut off.iter().map(|value| value * value)).sqrt())
}

#[test]
fn every_rule_against_the_measured_room() {
    let rules = [
        MoistureRule::None,
        MoistureRule::GivenExcess { excess_g_m3: 2.0 },
        MoistureRule::Iso13788 { class: 1 },
        MoistureRule::Iso13788 { class: 2 },
        MoistureRule::Iso13788 { class: 3 },
        MoistureRule::FieldSurvey,
    ];
    let errors = rules.map(error_pa);
    for (rule, (bias, rms)) in rules.iter().zip(errors) {
        println!("{rule:?}: {bias:+.0} Pa, rms {rms:.0} Pa");
    }
}
