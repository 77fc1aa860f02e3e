//! `GET /v1/evaporants`: what a felt can be wetted with.

use axum::Json;
use axum::extract::RawQuery;
use axum::http::HeaderMap;
use serde::Serialize;
use utoipa::ToSchema;

use super::notes::Caution;
use super::predictions::rounded;
use crate::http::error::Problem;
use crate::http::negotiate::{self, JsonFormatQuery};
use crate::service;
use crate::service::records::EvaporantRow;

/// All evaporants.
#[derive(Debug, Serialize, ToSchema)]
pub struct EvaporantList {
    /// One item an evaporant.
    pub items: Vec<EvaporantItem>,
}

/// An evaporant.
#[derive(Debug, Serialize, ToSchema)]
pub struct EvaporantItem {
    /// Name to send as `device.evaporant.name`.
    #[schema(examples("water"))]
    pub name: String,
    /// Name for people.
    pub title: String,
    /// Lowest strength [% by volume at 20 °C].
    pub strength_from_abv_pct: f64,
    /// Highest strength [% by volume at 20 °C].
    pub strength_to_abv_pct: f64,
    /// Coldest temperature the row holds for [°C].
    pub valid_from_c: f64,
    /// Hottest temperature the row holds for [°C].
    pub valid_to_c: f64,
    /// Where each number comes from.
    pub sources: Vec<String>,
    /// Hazards.
    pub cautions: Vec<Caution>,
}

/// The evaporants
///
/// What wets the felt and fills the cup, with sources, valid ranges and hazards.
#[utoipa::path(get, path = "/v1/evaporants", tag = "tables", params(JsonFormatQuery),
    responses((status = 200, description = "All evaporants.", body = EvaporantList)))]
pub async fn list_evaporants(headers: HeaderMap, RawQuery(query): RawQuery) -> Result<Json<EvaporantList>, Problem> {
    negotiate::json_only(&headers, query.as_deref())?;
    Ok(Json(EvaporantList::all()))
}

impl EvaporantList {
    /// The whole table.
    pub fn all() -> Self {
        Self {
            items: service::evaporants().iter().map(EvaporantItem::from).collect(),
        }
    }
}

impl From<&EvaporantRow> for EvaporantItem {
    fn from(row: &EvaporantRow) -> Self {
        Self {
            name: row.name.to_owned(),
            title: row.title.to_owned(),
            strength_from_abv_pct: row.abv_range_pct.0,
            strength_to_abv_pct: row.abv_range_pct.1,
            valid_from_c: rounded(row.valid_range_k.0 - 273.15),
            valid_to_c: rounded(row.valid_range_k.1 - 273.15),
            sources: row.sources.iter().map(|source| (*source).to_owned()).collect(),
            cautions: row.hazards.iter().map(Caution::from).collect(),
        }
    }
}
