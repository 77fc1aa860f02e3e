//! `dipcast openapi`

use dipcast::http::{openapi, router};

pub(super) fn run() -> Result<(), String> {
    super::print(openapi::text(&router::document()).as_bytes())
}
