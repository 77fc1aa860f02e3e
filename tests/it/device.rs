//! Devices: checked, refused, and how their liquid stands.

use dipcast::model::device::{check, examples};

#[test]
fn every_example_passes_the_check() {
    for example in examples() {
        if let Err(faults) = check(&example.definition) {
            panic!("{}: {faults:?}", example.name);
        }
    }
}
