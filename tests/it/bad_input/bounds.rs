//! The bounds of the schema and those of the rooms behind it are the same: at the bound both say yes, beyond it both no.

use dipcast::config::Config;
use dipcast::http::router;
use dipcast::service::records::{
    AtDevice, AttendancePolicy, BalanceDefinition, CaseDefinition, EvaporantDefinition, ExtraMass, LampDefinition,
    LampTarget, MoistureRule, Options, Outdoors, Place, RawReadings, Room,
};
use dipcast::service::{
    DeviceChoice, OrderFault, PredictError, PredictionOrder, Predictions, Site, WeatherChecks, WeatherSource, example,
};
use serde_json::Value;

fn order() -> PredictionOrder {
    let hours = RawReadings::hourly(1_767_225_600, 2);
    let readings = RawReadings {
        air_temp_k: vec![295.0; 2],
        relative_humidity: Some(vec![0.5; 2]),
        ..hours
    };
    PredictionOrder {
        device: DeviceChoice::Example("shelf-180".to_owned()),
        site: Site::default(),
        weather: WeatherSource::Readings(Box::new(readings)),
        weather_checks: WeatherChecks::default(),
        options: Options {
            bands: true,
            samples: 1,
            ..Options::default()
        },
    }
}

/// What the rooms behind the wire say of an order; none if they take it.
fn fault(order: &PredictionOrder) -> Option<OrderFault> {
    let config = Config::defaults().unwrap();
    match Predictions::new(&config.runs, &config.limits).run_here(order, &|_, _| true) {
        Err(PredictError::Faults(faults)) => faults.into_iter().next(),
        Err(other) => panic!("{other}"),
        Ok(_) => None,
    }
}

/// The order's place as one of a kind, made so if it is not.
macro_rules! of_kind {
    ($name:ident, $kind:ident, $record:ty, $fresh:expr) => {
        fn $name(order: &mut PredictionOrder) -> &mut $record {
            let place = &mut order.site.places[0].place;
            if !matches!(place, Place::$kind(_)) {
                *place = Place::$kind($fresh);
            }
            match place {
                Place::$kind(record) => record,
                other => panic!("{other:?}"),
            }
        }
    };
}

of_kind!(at_device, AtDevice, AtDevice, AtDevice::default());
of_kind!(outdoors, Outdoors, Outdoors, Outdoors::default());
of_kind!(room, Room, Room, Room::default());
of_kind!(
    case,
    Case,
    CaseDefinition,
    CaseDefinition {
        inside: Box::default(),
        volume_l: 50.0,
        air_changes_per_hour: 1.0,
        devices: None,
        other_vapour_g_per_h: None,
        warmer_by_k: None,
        air_speed_m_s: None,
    }
);

type Set = fn(&mut PredictionOrder, f64);

/// Schema, field, and how to set it in an order.
const FIELDS: [(&str, &str, Set); 27] = [
    ("PlaceAtDevice", "elevation_m", |order, value| {
        order.site.elevation_m = Some(value)
    }),
    ("PlaceAtDevice", "air_speed_m_s", |order, value| {
        at_device(order).air_speed_m_s = Some(value)
    }),
    ("PlaceAtDevice", "shortwave_exposure", |order, value| {
        at_device(order).shortwave_exposure = Some(value)
    }),
    ("PlaceOutdoors", "shelter_factor", |order, value| {
        outdoors(order).shelter_factor = Some(value)
    }),
    ("PlaceOutdoors", "air_speed_m_s", |order, value| {
        outdoors(order).air_speed_m_s = Some(value)
    }),
    ("PlaceOutdoors", "shortwave_exposure", |order, value| {
        outdoors(order).shortwave_exposure = Some(value)
    }),
    ("PlaceRoom", "heated_to_c", |order, value| {
        room(order).heated_to_c = Some(value)
    }),
    ("PlaceRoom", "cooled_to_c", |order, value| {
        room(order).heated_to_c = Some(-10.0);
        room(order).cooled_to_c = Some(value)
    }),
    ("PlaceRoom", "memory_hours", |order, value| {
        room(order).memory_hours = Some(value)
    }),
    ("PlaceRoom", "buffering_hours", |order, value| {
        room(order).buffering_hours = Some(value)
    }),
    ("PlaceRoom", "humidified_to_pct", |order, value| {
        room(order).humidified_to_pct = Some(value)
    }),
    ("PlaceRoom", "dehumidified_to_pct", |order, value| {
        room(order).dehumidified_to_pct = Some(value)
    }),
    ("PlaceRoom", "air_speed_m_s", |order, value| {
        room(order).air_speed_m_s = Some(value)
    }),
    ("PlaceRoom", "shortwave_exposure", |order, value| {
        room(order).shortwave_exposure = Some(value)
    }),
    ("MoistureGivenExcess", "excess_g_m3", |order, value| {
        room(order).moisture = Some(MoistureRule::GivenExcess { excess_g_m3: value })
    }),
    ("PlaceCase", "volume_l", |order, value| case(order).volume_l = value),
    ("PlaceCase", "air_changes_per_hour", |order, value| {
        case(order).air_changes_per_hour = value
    }),
    ("PlaceCase", "devices", |order, value| {
        case(order).devices = Some(value as u32)
    }),
    ("PlaceCase", "other_vapour_g_per_h", |order, value| {
        case(order).other_vapour_g_per_h = Some(value)
    }),
    ("PlaceCase", "warmer_by_k", |order, value| {
        case(order).warmer_by_k = Some(value)
    }),
    ("PlaceCase", "air_speed_m_s", |order, value| {
        case(order).air_speed_m_s = Some(value)
    }),
    ("InlineWeather", "max_gap_hours", |order, value| {
        order.weather_checks.max_gap_hours = Some(value as usize)
    }),
    ("InlineWeather", "max_unknown_share", |order, value| {
        order.weather_checks.max_unknown_share = Some(value)
    }),
    ("PredictionOptions", "samples", |order, value| {
        order.options.samples = value as usize
    }),
    ("PredictionOptions", "spell_minutes", |order, value| {
        order.options.spell_minutes = value
    }),
    ("Attendance", "delay_hours", |order, value| {
        order.options.attendance.delay_hours = value
    }),
    ("Attendance", "days", |order, value| {
        order.options.attendance.policy = AttendancePolicy::Every;
        order.options.attendance.days = value as u32;
    }),
];

#[test]
fn options_place_and_weather_checks() {
    let document = serde_json::to_value(router::document()).unwrap();
    for (schema, field, set) in FIELDS {
        let described = &document["components"]["schemas"][schema]["properties"][field];
        let mut bounds = vec![("maximum", 1.0)];
        // Counts cannot go below nought by their type.
        if described["minimum"]
            .as_f64()
            .is_some_and(|minimum| minimum != 0.0 || described["type"][0] == "number")
        {
            bounds.push(("minimum", -1.0));
        }
        for (word, outwards) in bounds {
            let bound = described[word]
                .as_f64()
                .unwrap_or_else(|| panic!("{schema}.{field} has no {word}"));
            let (mut at, mut beyond) = (order(), order());
            set(&mut at, bound);
            set(&mut beyond, bound + outwards);
            assert_eq!(fault(&at), None, "{schema}.{field} at its {word}");
            assert!(fault(&beyond).is_some(), "{schema}.{field} beyond its {word}");
        }
    }
}

/// A device whose every field is set, so that each can be pushed over its bound.
fn full_device() -> Value {
    let mut definition = example("shelf-180").unwrap().definition;
    definition.balance = BalanceDefinition::Masses {
        pivot_height_mm: 90.0,
        forward_moment_g_mm: 50.0,
        dip_angle_deg: Some(80.0),
        glass_density_g_cm3: Some(2.23),
        extra: vec![ExtraMass {
            mass_g: 1.0,
            height_mm: 100.0,
        }],
    };
    definition.lamp = Some(LampDefinition {
        on: LampTarget::Body,
        absorbed_w: 1.0,
    });
    definition.evaporant = EvaporantDefinition {
        name: "ethanol_water".to_owned(),
        strength_abv_pct: Some(20.0),
        hardness_mg_l: Some(100.0),
        scale_effect_pct: Some(1.0),
    };
    serde_json::to_value(dipcast::http::v1::device::Device::from(definition)).unwrap()
}

#[tokio::test]
async fn every_number_of_a_device() {
    use dipcast::service::records::ALL_BOUNDS;
    let router = crate::support::service();
    for bound in ALL_BOUNDS {
        for (beyond, code) in [
            (bound.minimum - 0.5, "below_minimum"),
            (bound.maximum + 1.0, "above_maximum"),
        ] {
            let mut asked = crate::support::request(2);
            asked.as_object_mut().unwrap().remove("device_example");
            asked["device"] = full_device();
            if bound.field == "balance/tip_volume_ml" {
                asked["device"]["balance"] = serde_json::json!({"kind": "tip_volume", "tip_volume_ml": 3.0});
            }
            let pointer = format!("/device/{}", bound.field.replace('*', "0"));
            let (parent, name) = pointer.rsplit_once('/').unwrap();
            let whole = bound.field == "cup/shared_by";
            asked.pointer_mut(parent).unwrap()[name] = if whole {
                (beyond.floor() as i64).into()
            } else {
                beyond.into()
            };
            let answer = crate::support::predict(&router, &asked).await;
            let found = answer.faults();
            assert!(
                found.contains(&(pointer.clone(), code.to_owned())),
                "{pointer} {beyond}: {found:?}"
            );
        }
    }
}
