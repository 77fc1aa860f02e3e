//! `dipcast serve`

use std::net::{IpAddr, Ipv4Addr, Ipv6Addr, SocketAddr};
use std::path::PathBuf;
use std::time::Duration;

use clap::Args;
use dipcast::config::{Config, Overrides};
use dipcast::http::{router, server};
use dipcast::telemetry;
use tokio::net::TcpListener;

use super::demo;

#[derive(Args)]
pub(super) struct Serve {
    /// Address and port to listen on; default 127.0.0.1:8080.
    #[arg(long, value_name = "ADDR:PORT")]
    bind: Option<String>,
    /// Settings that differ from deploy/config.default.toml.
    #[arg(long, value_name = "FILE")]
    config: Option<PathBuf>,
    /// Serve everyone who can reach the port, without keys.
    #[arg(long)]
    allow_anonymous: bool,
    /// Run a demo prediction through the service's own API, show it, and keep serving.
    #[arg(long)]
    demo: bool,
}

pub(super) fn run(arguments: &Serve) -> Result<(), String> {
    let overrides = Overrides {
        file: arguments.config.clone(),
        bind: arguments.bind.clone(),
        allow_anonymous: arguments.allow_anonymous,
    };
    let config = Config::load(&overrides).map_err(|error| error.to_string())?;
    if arguments.demo && !config.access.key_sha256.is_empty() {
        return Err("--demo sends no key; start it without access.key_sha256".to_owned());
    }
    telemetry::start_logs(&config.log)?;
    let runtime = tokio::runtime::Runtime::new().map_err(|error| format!("the runtime could not start: {error}"))?;
    let served = runtime.block_on(serve(config, arguments.demo));
    // Runs that were cancelled leave by themselves; none may hold the process.
    runtime.shutdown_timeout(Duration::from_secs(1));
    served
}

async fn serve(config: Config, demo: bool) -> Result<(), String> {
    let stop = server::stop_signal().map_err(|error| format!("cannot hear the stop signals: {error}"))?;
    let bind = config.server.bind;
    let listener = TcpListener::bind(bind)
        .await
        .map_err(|error| format!("cannot listen on {bind}: {error}"))?;
    let address = reachable(listener.local_addr().map_err(|error| error.to_string())?);
    warn_if_open(&config);
    let (router, app) = router::build(config);
    app.weather().open_store().await.map_err(|error| error.to_string())?;
    tracing::info!("listening on http://{address}; the description is at http://{address}/docs/");
    let shown = tokio::spawn(async move {
        if demo {
            show(address).await
        }
    });
    server::serve(listener, router, app, stop).await;
    shown.abort();
    tracing::info!("stopped");
    Ok(())
}

/// The demo's failure is told; the service goes on.
async fn show(address: SocketAddr) {
    let printed = demo::run(address).await.and_then(|text| super::print(text.as_bytes()));
    if let Err(error) = printed {
        tracing::error!(error, "the demo failed");
    }
}

/// An address this machine can call: the unspecified one stands for loopback.
fn reachable(address: SocketAddr) -> SocketAddr {
    let ip = match address.ip() {
        IpAddr::V4(ip) if ip.is_unspecified() => IpAddr::V4(Ipv4Addr::LOCALHOST),
        IpAddr::V6(ip) if ip.is_unspecified() => IpAddr::V6(Ipv6Addr::LOCALHOST),
        ip => ip,
    };
    SocketAddr::new(ip, address.port())
}

/// Said loudly: whoever can reach the port can use it.
fn warn_if_open(config: &Config) {
    if config.access.key_sha256.is_empty() && !config.server.bind.ip().is_loopback() {
        tracing::warn!(
            "NO KEYS: everyone who can reach {} may use this service (allow_anonymous)",
            config.server.bind
        );
    }
}
