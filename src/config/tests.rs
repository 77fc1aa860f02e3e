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
