//! The command line: serve | predict | openapi | healthcheck.

mod command;

use std::process::ExitCode;

use clap::Parser;

fn main() -> ExitCode {
    match command::run(command::Cli::parse()) {
        Ok(()) => ExitCode::SUCCESS,
        Err(message) => {
            eprintln!("dipcast: {message}");
            ExitCode::FAILURE
        }
    }
}
