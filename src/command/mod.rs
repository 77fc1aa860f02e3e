//! One file per subcommand; each returns what to tell the user when it fails.

mod healthcheck;
mod openapi;
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
    /// Print the API description (OpenAPI 3.1).
    Openapi,
    /// Ask a running service whether it is ready; exit 0 if so.
    Healthcheck(healthcheck::Healthcheck),
}

/// Runs one subcommand.
pub fn run(cli: Cli) -> Result<(), String> {
    match cli.command {
        Command::Serve(serve) => serve::run(&serve),
        Command::Openapi => openapi::run(),
        Command::Healthcheck(healthcheck) => healthcheck::run(&healthcheck),
    }
}

/// Writes to standard output; a closed pipe is no failure.
fn print(text: &str) -> Result<(), String> {
    let mut out = std::io::stdout().lock();
    match out.write_all(text.as_bytes()).and_then(|()| out.flush()) {
        Err(error) if error.kind() != std::io::ErrorKind::BrokenPipe => Err(format!("standard output: {error}")),
        _ => Ok(()),
    }
}
