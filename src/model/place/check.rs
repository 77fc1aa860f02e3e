//! What a place may be: every fault at once.

use super::definition::{AtDevice, CaseDefinition, Outdoors, Place, Room};
use super::moisture::MoistureRule;
use super::room::DEFAULT_HEATED_TO_C;
use crate::model::notes::Fault;

/// Least and greatest value of one number of a place; the wire format's schema repeats it and a test compares.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PlaceBound {
    /// Name of the field.
    pub field: &'static str,
    /// Least value allowed.
    pub minimum: f64,
    /// Greatest value allowed.
    pub maximum: f64,
}

const fn bound(field: &'static str, minimum: f64, maximum: f64) -> PlaceBound {
    PlaceBound {
        field,
        minimum,
        maximum,
    }
}

/// Every bound; a name means the same in every kind of place.
pub const PLACE_BOUNDS: [PlaceBound; 14] = [
    bound("air_speed_m_s", 0.0, 20.0),
    bound("shortwave_exposure", 0.0, 1.0),
    bound("shelter_factor", 0.0, 1.0),
    bound("heated_to_c", -10.0, 40.0),
    bound("cooled_to_c", 5.0, 45.0),
    bound("memory_hours", 0.0, 720.0),
    bound("buffering_hours", 0.0, 720.0),
    bound("humidified_to_pct", 0.0, 100.0),
    bound("dehumidified_to_pct", 0.0, 100.0),
    bound("excess_g_m3", -10.0, 30.0),
    bound("volume_l", 0.5, 100_000.0),
    bound("air_changes_per_hour", 0.0, 1000.0),
    bound("other_vapour_g_per_h", 0.0, 10_000.0),
    bound("warmer_by_k", -5.0, 30.0),
];
/// Most devices in one case.
pub(super) const DEVICES_MAX: u32 = 100;

/// Everything wrong with a place; `path` is where it stands in the request.
pub fn faults(place: &Place, path: &str) -> Vec<Fault> {
    let mut check = Check {
        path: path.to_string(),
        faults: Vec::new(),
    };
    check.place(place);
    check.faults
}

struct Check {
    path: String,
    faults: Vec<Fault>,
}

impl Check {
    fn place(&mut self, place: &Place) {
        match place {
            Place::AtDevice(AtDevice {
                air_speed_m_s,
                shortwave_exposure,
            }) => self.numbers(&[
                ("air_speed_m_s", *air_speed_m_s),
                ("shortwave_exposure", *shortwave_exposure),
            ]),
            Place::Outdoors(Outdoors {
                shelter_factor,
                air_speed_m_s,
                shortwave_exposure,
            }) => self.numbers(&[
                ("shelter_factor", *shelter_factor),
                ("air_speed_m_s", *air_speed_m_s),
                ("shortwave_exposure", *shortwave_exposure),
            ]),
            Place::Room(room) => self.room(room),
            Place::Case(case) => self.case(case),
        }
    }

    fn room(&mut self, room: &Room) {
        self.numbers(&[
            ("heated_to_c", room.heated_to_c),
            ("cooled_to_c", room.cooled_to_c),
            ("memory_hours", room.memory_hours),
            ("buffering_hours", room.buffering_hours),
            ("humidified_to_pct", room.humidified_to_pct),
            ("dehumidified_to_pct", room.dehumidified_to_pct),
            ("air_speed_m_s", room.air_speed_m_s),
            ("shortwave_exposure", room.shortwave_exposure),
        ]);
        let heated_c = room.heated_to_c.unwrap_or(DEFAULT_HEATED_TO_C);
        self.ordered("cooled_to_c", Some(heated_c), room.cooled_to_c, "heated_to_c");
        self.ordered(
            "dehumidified_to_pct",
            room.humidified_to_pct,
            room.dehumidified_to_pct,
            "humidified_to_pct",
        );
        match room.moisture {
            Some(MoistureRule::GivenExcess { excess_g_m3 }) => {
                self.within("moisture/excess_g_m3", "excess_g_m3", excess_g_m3);
            }
            Some(MoistureRule::Iso13788 { class }) if !(1..=5).contains(&class) => {
                self.push(
                    "moisture/class",
                    "unknown_class",
                    format!("expected 1 to 5; found {class}"),
                );
            }
            _ => (),
        }
    }

    fn case(&mut self, case: &CaseDefinition) {
        self.numbers(&[
            ("volume_l", Some(case.volume_l)),
            ("air_changes_per_hour", Some(case.air_changes_per_hour)),
            ("other_vapour_g_per_h", case.other_vapour_g_per_h),
            ("warmer_by_k", case.warmer_by_k),
            ("air_speed_m_s", case.air_speed_m_s),
        ]);
        if let Some(devices) = case.devices.filter(|devices| !(1..=DEVICES_MAX).contains(devices)) {
            self.push(
                "devices",
                "out_of_range",
                format!("expected 1 to {DEVICES_MAX}; found {devices}"),
            );
        }
        if matches!(*case.inside, Place::Case(_)) {
            let detail = "a case stands in a room, outdoors or in air that was read; a case in a case is not computed: give the \
                          inner one, with the air changes of both in series";
            self.push("inside/kind", "case_in_case", detail);
            return;
        }
        let path = self.path.clone();
        self.path.push_str("/inside");
        self.place(&case.inside);
        self.path = path;
    }

    fn numbers(&mut self, given: &[(&str, Option<f64>)]) {
        for (name, value) in given {
            if let Some(value) = value {
                self.within(name, name, *value);
            }
        }
    }

    fn within(&mut self, field: &str, name: &str, value: f64) {
        let Some(bound) = PLACE_BOUNDS.iter().find(|bound| bound.field == name) else {
            return;
        };
        let code = match value {
            value if !value.is_finite() => "not_a_number",
            value if value < bound.minimum => "below_minimum",
            value if value > bound.maximum => "above_maximum",
            _ => return,
        };
        let detail = format!("expected {} to {}; found {value}", bound.minimum, bound.maximum);
        self.push(field, code, detail);
    }

    fn ordered(&mut self, field: &str, low: Option<f64>, high: Option<f64>, low_name: &str) {
        if let (Some(low), Some(high)) = (low, high)
            && high < low
        {
            let detail = format!("expected at least {low_name}, which is {low}; found {high}");
            self.push(field, "below_other_limit", detail);
        }
    }

    fn push(&mut self, field: &str, code: &'static str, detail: impl Into<String>) {
        self.faults
            .push(Fault::new(format!("{}/{field}", self.path), code, detail));
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_fault_is_named_where_it_stands() {
        let room = Room {
            heated_to_c: Some(50.0),
            cooled_to_c: Some(18.0),
            humidified_to_pct: Some(60.0),
            dehumidified_to_pct: Some(40.0),
            moisture: Some(MoistureRule::Iso13788 { class: 7 }),
            ..Room::default()
        };
        let case = CaseDefinition {
            inside: Box::new(Place::Room(room)),
            volume_l: f64::NAN,
            air_changes_per_hour: -1.0,
            devices: Some(0),
            other_vapour_g_per_h: None,
            warmer_by_k: Some(90.0),
            air_speed_m_s: None,
        };
        let found = faults(&Place::Case(case), "places/1");
        let fields: Vec<&str> = found.iter().map(|fault| fault.field.as_str()).collect();
        assert_eq!(
            fields,
            [
                "places/1/volume_l",
                "places/1/air_changes_per_hour",
                "places/1/warmer_by_k",
                "places/1/devices",
                "places/1/inside/heated_to_c",
                "places/1/inside/cooled_to_c",
                "places/1/inside/dehumidified_to_pct",
                "places/1/inside/moisture/class",
            ]
        );
    }

    #[test]
    fn a_case_in_a_case_is_refused_and_defaults_are_sound() {
        let case = |inside| CaseDefinition {
            inside: Box::new(inside),
            volume_l: 20.0,
            air_changes_per_hour: 1.0,
            devices: None,
            other_vapour_g_per_h: None,
            warmer_by_k: None,
            air_speed_m_s: None,
        };
        let inner = Place::Case(case(Place::default()));
        assert!(faults(&inner, "place").is_empty());
        assert_eq!(faults(&Place::Case(case(inner)), "place")[0].code, "case_in_case");
        assert!(faults(&Place::Room(Room::default()), "place").is_empty());
        assert!(faults(&Place::Outdoors(Outdoors::default()), "place").is_empty());
    }
}
