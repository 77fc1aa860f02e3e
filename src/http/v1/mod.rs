//! Version 1 of the resources: one file each, with handler, request, response and conversions.

/// A struct of the wire with the very fields of a record, and the way to it and back.
macro_rules! mirror {
    ($(#[$meta:meta])* $name:ident = $record:ident { $($(#[$field_meta:meta])* $field:ident: $kind:ty,)* }) => {
        $(#[$meta])*
        #[derive(Debug, Clone, serde::Serialize, serde::Deserialize, utoipa::ToSchema)]
        #[serde(deny_unknown_fields)]
        pub struct $name {
            $($(#[$field_meta])* pub $field: $kind,)*
        }

        impl From<$name> for $record {
            fn from(wire: $name) -> Self {
                Self { $($field: wire.$field),* }
            }
        }

        impl From<$record> for $name {
            fn from(record: $record) -> Self {
                Self { $($field: record.$field),* }
            }
        }
    };
}

/// The one value of the field that tells the alternatives of a union apart.
macro_rules! tag {
    ($name:ident, $variant:ident, $text:tt) => {
        #[doc = concat!("Tag `", $text, "`.")]
        #[derive(Debug, Clone, Copy, serde::Serialize, serde::Deserialize, utoipa::ToSchema)]
        pub enum $name {
            #[doc = concat!("`", $text, "`")]
            #[serde(rename = $text)]
            $variant,
        }
    };
}

/// A device as sent and as shown.
pub mod device;
/// `GET /v1/evaporants`
pub mod evaporants;
/// `GET /v1/example-devices`
pub mod example_devices;
/// `GET /v1/fluids`
pub mod fluids;
/// What a sender can say about a CSV file.
pub mod hints;
/// `POST /v1/weather/inspections`
pub mod inspections;
/// What a CSV file's columns mean.
pub mod layout;
/// Named rules for a room's own vapour.
pub mod moisture;
/// Assumptions and cautions.
pub mod notes;
/// The options of a prediction.
pub mod options;
/// Where a device stands.
pub mod place;
/// `POST /v1/predictions`
pub mod predictions;
/// Where fetched weather came from.
pub mod provenance;
/// Clock times of a week.
pub mod schedule;
/// The readings of a prediction.
pub mod weather;
/// Weather by coordinates.
pub mod weather_endpoint;
/// `GET /v1/weather-sources`
pub mod weather_sources;
