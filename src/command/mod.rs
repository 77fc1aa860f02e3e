//! One file per subcommand; each returns what to tell the user when it fails.

mod demo;
mod healthcheck;
mod inspect;
mod openapi;
mod predict;
mod serve;

use std::io::Write;

use clap::{Parser, Subcommand};

/// Predicts what an evaporation-driven tipping display does in given air.
#[derive(Parser)]
#[command(name = "dipcast", version, about)]
pub struct Cli {
    #[command(subcommand)]
    command: Command,
}

#[derive(Subcommand)]
enum Command {
    /// Start the HTTP service.
    Serve(serve::Serve),
    /// Predict without a server: request and readings from files.
    Predict(predict::Predict),
    /// Look at a weather file: how it is read, and what has to be asked.
    Inspect(inspect::Inspect),
    /// Print the API description.
    Openapi(openapi::OpenApi),
    /// Ask a running service whether it is ready; exit 0 if so.
    Healthcheck(healthcheck::Healthcheck),
}

/// Runs one subcommand.
pub fn run(cli: Cli) -> Result<(), String> {
    match cli.command {
        Command::Serve(serve) => serve::run(&serve),
        Command::Predict(predict) => predict::run(&predict),
        Command::Inspect(inspect) => inspect::run(&inspect),
        Command::Openapi(openapi) => openapi::run(&openapi),
        Command::Healthcheck(healthcheck) => healthcheck::run(&healthcheck),
    }
}

/// Writes to standard output; a closed pipe is no failure.
fn print(text: &[u8]) -> Result<(), String> {
    let mut out = std::io::stdout().lock();
    match out.write_all(text).and_then(|()| out.flush()) {
        Err(error) if error.kind() != std::io::ErrorKind::BrokenPipe => Err(format!("standard output: {error}")),
        _ => Ok(()),
    }
}

/// For calls to this machine: no proxy, and no certificates, which a bare system may not have.
fn local_client(timeout: std::time::Duration) -> Result<reqwest::Client, reqwest::Error> {
    reqwest::Client::builder()
        .no_proxy()
        .tls_certs_only([])
        .timeout(timeout)
        .build()
}
