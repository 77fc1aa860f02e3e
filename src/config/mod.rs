//! Settings: the embedded defaults, then a file, then the environment, then the command line; all faults at once.
//!
//! `deploy/config.default.toml` is the documentation of every setting and is compiled in.

mod reader;
mod store;
mod weather;

use std::net::SocketAddr;
use std::path::{Path, PathBuf};
use std::time::Duration;

use figment::Figment;
use figment::providers::{Env, Format, Toml};
use reader::Reader;
pub use reader::{ConfigError, ConfigFault};
pub use store::Store;
pub use weather::{ApiKey, Budget, History, MetNorway, NasaPower, OpenMeteo, Weather};

/// The defaults, as text.
pub const DEFAULTS: &str = include_str!("../../deploy/config.default.toml");

/// All settings.
#[derive(Debug, Clone)]
pub struct Config {
    /// The listener.
    pub server: Server,
    /// Who may call.
    pub access: Access,
    /// Sizes.
    pub limits: Limits,
    /// How many predictions at once.
    pub runs: Runs,
    /// What lasts.
    pub store: Store,
    /// Weather by coordinates.
    pub weather: Weather,
    /// Logs.
    pub log: Log,
}

/// The listener.
#[derive(Debug, Clone)]
pub struct Server {
    /// Address to listen on.
    pub bind: SocketAddr,
    /// Serve without keys beyond loopback.
    pub allow_anonymous: bool,
    /// Connections held at once.
    pub max_connections: usize,
    /// For the first request head of a connection.
    pub first_byte_timeout: Duration,
    /// For each later request head.
    pub header_timeout: Duration,
    /// From request head to the start of the answer.
    pub request_timeout: Duration,
    /// For a client that takes no bytes.
    pub write_timeout: Duration,
    /// For running requests after the stop signal.
    pub drain: Duration,
}

/// Who may call.
#[derive(Debug, Clone)]
pub struct Access {
    /// SHA-256 of each key.
    pub key_sha256: Vec<[u8; 32]>,
    /// Web origins allowed to call from a browser.
    pub cors_origins: Vec<String>,
    /// Requests a minute and caller; 0 = no limit.
    pub requests_per_minute: u32,
}

/// Sizes.
#[derive(Debug, Clone)]
pub struct Limits {
    /// Largest request body [bytes].
    pub body_bytes: usize,
    /// All request bodies held at once [bytes].
    pub bodies_bytes: usize,
    /// Largest weather file after decompression [bytes].
    pub decompressed_bytes: usize,
}

/// How many predictions at once.
#[derive(Debug, Clone)]
pub struct Runs {
    /// Computed at once, at least 1.
    pub parallel: usize,
    /// Waiting for a place.
    pub waiting: usize,
}

/// Logs.
#[derive(Debug, Clone)]
pub struct Log {
    /// Filter directives.
    pub filter: String,
    /// One JSON object a line instead of text.
    pub json: bool,
}

/// What the command line changes.
#[derive(Debug, Clone, Default)]
pub struct Overrides {
    /// `--config FILE`.
    pub file: Option<PathBuf>,
    /// `--bind ADDR:PORT`.
    pub bind: Option<String>,
    /// `--allow-anonymous`.
    pub allow_anonymous: bool,
}

impl Config {
    /// Reads defaults, file, environment and command line, in this order.
    ///
    /// # Errors
    /// Every unknown or wrong setting at once, each with where it came from.
    pub fn load(overrides: &Overrides) -> Result<Self, ConfigError> {
        if let Some(file) = overrides.file.as_deref().filter(|file| !file.is_file()) {
            return Err(ConfigError::missing_file(file));
        }
        Self::from_figment(layers(overrides))
    }

    /// The embedded defaults alone.
    ///
    /// # Errors
    /// Never in a released build: a test loads them.
    pub fn defaults() -> Result<Self, ConfigError> {
        Self::from_figment(Figment::from(Toml::string(DEFAULTS)))
    }

    fn from_figment(figment: Figment) -> Result<Self, ConfigError> {
        let mut reader = Reader::new(figment)?;
        let config = Self {
            server: read_server(&mut reader),
            access: read_access(&mut reader),
            limits: read_limits(&mut reader),
            runs: read_runs(&mut reader),
            store: store::read(&mut reader),
            weather: weather::read(&mut reader),
            log: read_log(&mut reader),
        };
        check_exposure(&config, &mut reader);
        check_limits(&config.limits, &mut reader);
        reader.finish()?;
        Ok(config)
    }
}

fn layers(overrides: &Overrides) -> Figment {
    let mut figment = Figment::from(Toml::string(DEFAULTS));
    if let Some(file) = &overrides.file {
        figment = figment.merge(Toml::file(Path::new(file)));
    }
    figment = figment.merge(Env::prefixed("DIPCAST__").split("__"));
    if let Some(bind) = &overrides.bind {
        figment = figment.merge(("server.bind", bind.clone()));
    }
    if overrides.allow_anonymous {
        figment = figment.merge(("server.allow_anonymous", true));
    }
    figment
}

fn read_server(reader: &mut Reader) -> Server {
    Server {
        bind: reader
            .parsed("server.bind", "an address with a port, such as 127.0.0.1:8080")
            .unwrap_or(([127, 0, 0, 1], 0).into()),
        allow_anonymous: reader.flag("server.allow_anonymous"),
        max_connections: reader.whole("server.max_connections", 1..=100_000) as usize,
        first_byte_timeout: reader.seconds("server.first_byte_timeout_s", 1..=300),
        header_timeout: reader.seconds("server.header_timeout_s", 1..=300),
        request_timeout: reader.seconds("server.request_timeout_s", 1..=3600),
        write_timeout: reader.seconds("server.write_timeout_s", 1..=3600),
        drain: reader.seconds("server.drain_s", 1..=60),
    }
}

fn read_access(reader: &mut Reader) -> Access {
    Access {
        key_sha256: reader.key_hashes("access.key_sha256"),
        cors_origins: reader.origins("access.cors_origins"),
        requests_per_minute: reader.whole("access.requests_per_minute", 0..=1_000_000) as u32,
    }
}

fn read_limits(reader: &mut Reader) -> Limits {
    Limits {
        body_bytes: reader.whole("limits.body_bytes", 1024..=1 << 30) as usize,
        bodies_bytes: reader.whole("limits.bodies_bytes", 1024..=1 << 40) as usize,
        decompressed_bytes: reader.whole("limits.decompressed_bytes", 1024..=1 << 32) as usize,
    }
}

fn read_runs(reader: &mut Reader) -> Runs {
    let cores = std::thread::available_parallelism().map_or(1, usize::from);
    let parallel = reader.whole("runs.parallel", 0..=1024) as usize;
    Runs {
        parallel: if parallel == 0 { cores } else { parallel },
        waiting: reader.whole("runs.waiting", 0..=100_000) as usize,
    }
}

fn read_log(reader: &mut Reader) -> Log {
    let filter = reader.text("log.filter");
    check_filter(&filter, reader);
    Log {
        filter,
        json: reader.choice("log.format", &["text", "json"]) == Some("json"),
    }
}

fn check_exposure(config: &Config, reader: &mut Reader) {
    let server = &config.server;
    let open = config.access.key_sha256.is_empty() && !server.allow_anonymous;
    if open && !server.bind.ip().is_loopback() {
        reader.fault(
            "server.bind",
            format!(
                "{} can be reached from other machines, but no key is configured; set access.key_sha256, \
                 or say --allow-anonymous (server.allow_anonymous) to serve everyone",
                server.bind
            ),
        );
    }
}

fn check_limits(limits: &Limits, reader: &mut Reader) {
    if limits.bodies_bytes < limits.body_bytes {
        let detail = format!(
            "expected at least limits.body_bytes, {}; found {}",
            limits.body_bytes, limits.bodies_bytes
        );
        reader.fault("limits.bodies_bytes", detail);
    }
}

fn check_filter(filter: &str, reader: &mut Reader) {
    if let Err(error) = filter.parse::<tracing_subscriber::EnvFilter>() {
        reader.fault(
            "log.filter",
            format!("expected a level or a filter, found {filter:?}: {error}"),
        );
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn load(file: &str) -> Result<Config, ConfigError> {
        Config::from_figment(Figment::from(Toml::string(DEFAULTS)).merge(Toml::string(file)))
    }

    fn faults(file: &str) -> Vec<String> {
        let error = load(file).expect_err("should be refused");
        error
            .faults
            .iter()
            .map(|fault| format!("{}: {}", fault.setting, fault.detail))
            .collect()
    }

    #[test]
    fn the_embedded_defaults_load() {
        let config = Config::defaults().unwrap();
        assert_eq!(config.server.bind, ([127, 0, 0, 1], 8080).into());
        assert!(config.runs.parallel >= 1, "0 stands for the number of cores");
    }

    #[test]
    fn every_fault_is_told_at_once() {
        let found = faults("[server]\nbind = 8080\ndrain_s = 0\nhedder_timeout_s = 3\n[log]\nformat = \"xml\"\n");
        assert_eq!(found.len(), 4, "{found:#?}");
        assert!(
            found
                .iter()
                .any(|fault| fault.contains("did you mean server.header_timeout_s?")),
            "{found:#?}"
        );
    }

    #[test]
    fn beyond_loopback_needs_keys_or_a_word() {
        let open = "[server]\nbind = \"0.0.0.0:80\"\n";
        assert!(faults(open)[0].contains("--allow-anonymous"));
        assert!(load(&format!("{open}allow_anonymous = true\n")).is_ok());
        let hash = "0f".repeat(32);
        let config = load(&format!("{open}[access]\nkey_sha256 = [\"{hash}\"]\n")).unwrap();
        assert_eq!(config.access.key_sha256, vec![[0x0f; 32]]);
    }

    #[test]
    fn a_key_pasted_in_place_of_its_hash_is_not_repeated() {
        let found = faults("[access]\nkey_sha256 = [\"dck_secret\"]\n");
        assert!(
            !found[0].contains("secret") && found[0].contains("64 hexadecimal digits"),
            "{found:?}"
        );
    }

    #[test]
    fn origins_carry_no_path_and_no_star() {
        assert_eq!(
            faults("[access]\ncors_origins = [\"*\", \"https://a.example/x\", \"https://a.example\"]\n").len(),
            2
        );
    }

    #[test]
    fn a_missing_file_is_named() {
        let overrides = Overrides {
            file: Some("no-such-file.toml".into()),
            ..Overrides::default()
        };
        let error = Config::load(&overrides).unwrap_err();
        assert!(error.to_string().contains("no-such-file.toml"), "{error}");
    }
}
