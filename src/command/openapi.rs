//! `dipcast openapi`

use clap::{Args, ValueEnum};
use dipcast::http::{openapi, router};

#[derive(Args)]
pub(super) struct OpenApi {
    /// OpenAPI version to write it in.
    #[arg(long, value_enum, default_value_t)]
    version: Version,
}

#[derive(Debug, Clone, Copy, Default, ValueEnum)]
enum Version {
    #[default]
    #[value(name = "3.1")]
    Current,
    #[value(name = "3.0")]
    Twin,
}

pub(super) fn run(arguments: &OpenApi) -> Result<(), String> {
    let document = router::document();
    let text = match arguments.version {
        Version::Current => openapi::text(&document),
        Version::Twin => openapi::twin_text(&document).map_err(|faults| format!("{faults:?}"))?,
    };
    super::print(text.as_bytes())
}
