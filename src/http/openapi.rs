//! The API's description: what stands above the operations, and the answers every operation can give.

mod answers;
mod bounds;
mod defaults;
mod examples;
mod twin;

use utoipa::Modify;
use utoipa::openapi::security::{ApiKey, ApiKeyValue, HttpAuthScheme, HttpBuilder, SecurityScheme};
use utoipa::openapi::{Components, OpenApi};

pub use twin::{TWIN_VERSION, TwinFault, twin};

/// Version of the contract; it moves with `openapi/CHANGELOG.md`, not with the crate.
pub const API_VERSION: &str = "1.0.0";

#[derive(utoipa::OpenApi)]
#[openapi(
    info(
        title = "dipcast",
        version = "1.0.0",
        description = "Predicts cycles, stall hours and water of evaporation-driven tipping displays from hourly air readings.\n\n\
            Field names carry their unit. Times are RFC 3339 instants in UTC; `time` is the start of an hour and `to` is exclusive. \
            Every error is a problem document (RFC 9457) that lists all faults at once; unknown fields are refused. \
            Inside version 1 things are only added.",
        license(name = "MIT OR Apache-2.0", identifier = "MIT OR Apache-2.0"),
    ),
    servers((url = "/", description = "This service.")),
    tags(
        (name = "predictions", description = "A device and an hourly series in; cycles, stall hours and water out."),
        (name = "weather", description = "Weather files: how they are read, and what has to be asked."),
        (name = "tables", description = "What stands behind the model: fluids, evaporants, example devices."),
        (name = "service", description = "Health, metrics and pages."),
    ),
    security((), ("bearer" = []), ("api_key" = [])),
    modifiers(&Keys),
    components(schemas(super::error::ProblemDocument, super::v1::predictions::HourRow)),
)]
struct Head;

struct Keys;

impl Modify for Keys {
    fn modify(&self, document: &mut OpenApi) {
        let components = document.components.get_or_insert_with(Components::new);
        let text = "A key, where the operator has configured keys.";
        let bearer = HttpBuilder::new()
            .scheme(HttpAuthScheme::Bearer)
            .description(Some(text))
            .build();
        components.add_security_scheme("bearer", SecurityScheme::Http(bearer));
        let header = ApiKeyValue::with_description("X-Api-Key", text);
        components.add_security_scheme("api_key", SecurityScheme::ApiKey(ApiKey::Header(header)));
    }
}

/// Title, licence, servers, keys: everything but the operations.
pub fn head() -> OpenApi {
    <Head as utoipa::OpenApi>::openapi()
}

/// Adds to the collected operations the answers all of them can give.
pub fn complete(mut document: OpenApi) -> OpenApi {
    let components = document.components.get_or_insert_default();
    bounds::add(components);
    defaults::drop_nulls(components);
    answers::add(&mut document);
    examples::add(&mut document);
    document
}

/// The document as text, as it stands in `openapi/v1.json`.
pub fn text(document: &OpenApi) -> String {
    let mut text = serde_json::to_string_pretty(document).expect("the API description is plain data");
    text.push('\n');
    text
}

/// The 3.0.3 twin as text, as it stands in `openapi/v1-3.0.json`.
///
/// # Errors
/// What 3.0 cannot say; a test keeps that from happening to our own document.
pub fn twin_text(document: &OpenApi) -> Result<String, Vec<TwinFault>> {
    let value = serde_json::to_value(document).expect("the API description is plain data");
    let mut text = serde_json::to_string_pretty(&twin(&value)?).expect("what was JSON is JSON");
    text.push('\n');
    Ok(text)
}
