//! Devices: checked, refused, and how their liquid stands.

mod balance;
mod derived;
mod extremes;
mod geometry;
mod refusals;

use dipcast::model::device::{Checked, Definition, check, examples};

/// One of our own examples.
fn example(name: &str) -> Definition {
    let found = examples().into_iter().find(|example| example.name == name);
    found.expect("an example of this name").definition
}

fn sound(definition: &Definition) -> Checked {
    check(definition).unwrap_or_else(|faults| panic!("{}: {faults:#?}", definition.name))
}

#[test]
fn every_example_passes_the_check() {
    for example in examples() {
        let checked = sound(&example.definition);
        assert!(!example.title.is_empty() && !example.note.is_empty());
        assert!(
            !checked.cautions.is_empty(),
            "{} has a working fluid with hazards",
            example.name
        );
    }
}

#[test]
fn the_examples_are_as_tall_as_their_names_say() {
    for (name, tall_mm) in [("window-220", 220.0), ("foyer-900", 900.0)] {
        let drawn = example(name);
        let glass_mm = drawn.body.wall_mm + drawn.tube.length_mm + drawn.head.outer_diameter_mm - drawn.head.wall_mm;
        assert!((glass_mm - tall_mm).abs() < 2.0, "{name} is {glass_mm} mm tall");
    }
}

#[test]
fn a_tall_device_stalls_earlier_because_its_lift_takes_more_kelvin() {
    use dipcast::model::cycle::stall_humidity;
    let [shelf, foyer] = ["shelf-180", "foyer-900"].map(|name| sound(&example(name)));
    let stall = |checked: &Checked| stall_humidity(&checked.device, 295.15, 0.1, 101_325.0);
    assert!(foyer.derived.lift_at_tip_k.unwrap() > 3.0 * shelf.derived.lift_at_tip_k.unwrap());
    assert!(stall(&foyer) < stall(&shelf) - 0.1);
}
