//! `dipcast healthcheck`: for container engines and supervisors.

use std::time::Duration;

use clap::Args;

#[derive(Args)]
pub(super) struct Healthcheck {
    /// Base address of the service on this machine, plain http.
    #[arg(long, default_value = "http://127.0.0.1:8080", env = "DIPCAST_HEALTHCHECK_URL")]
    url: String,
}

pub(super) fn run(arguments: &Healthcheck) -> Result<(), String> {
    let url = format!("{}/readyz", arguments.url.trim_end_matches('/'));
    let runtime = tokio::runtime::Builder::new_current_thread()
        .enable_all()
        .build()
        .map_err(|error| error.to_string())?;
    let answered = runtime.block_on(async {
        let client = super::local_client(Duration::from_secs(3))?;
        client.get(&url).send().await?.error_for_status()
    });
    answered
        .map(drop)
        .map_err(|error| format!("{url} is not ready: {error}"))
}
