//! `GET /v1/example-devices`: devices in full, ready to send back.

use axum::Json;
use axum::extract::RawQuery;
use axum::http::HeaderMap;
use serde::Serialize;
use utoipa::ToSchema;

use super::device::Device;
use crate::http::error::Problem;
use crate::http::negotiate::{self, JsonFormatQuery};
use crate::service;
use crate::service::records::Example;

/// All example devices.
#[derive(Debug, Serialize, ToSchema)]
pub struct ExampleDeviceList {
    /// One item a device.
    pub items: Vec<ExampleDevice>,
}

/// An example device.
#[derive(Debug, Serialize, ToSchema)]
pub struct ExampleDevice {
    /// Name to send as `device_example`.
    #[schema(examples("shelf-180"))]
    pub name: String,
    /// Name for people.
    pub title: String,
    /// What it shows.
    pub note: String,
    /// The device in full, ready to send back as `device`.
    pub device: Device,
}

/// Example devices
///
/// Devices of our own design, in full: send one back as it is, or change it first.
#[utoipa::path(get, path = "/v1/example-devices", tag = "tables", params(JsonFormatQuery),
    responses((status = 200, description = "All example devices.", body = ExampleDeviceList)))]
pub async fn list_example_devices(
    headers: HeaderMap,
    RawQuery(query): RawQuery,
) -> Result<Json<ExampleDeviceList>, Problem> {
    negotiate::json_only(&headers, query.as_deref())?;
    Ok(Json(ExampleDeviceList::all()))
}

impl ExampleDeviceList {
    /// The whole table.
    pub fn all() -> Self {
        Self {
            items: service::examples().into_iter().map(ExampleDevice::from).collect(),
        }
    }
}

impl From<Example> for ExampleDevice {
    fn from(example: Example) -> Self {
        Self {
            name: example.name.to_owned(),
            title: example.title.to_owned(),
            note: example.note.to_owned(),
            device: example.definition.into(),
        }
    }
}
