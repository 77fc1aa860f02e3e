//! What stands at the top of the repository, and that a room's files are reached.

use super::source::{self, assert_none};

const TOP_LEVEL: [&str; 9] = [
    "Cargo.lock",
    "Cargo.toml",
    "DEVELOPERS.md",
    "Dockerfile",
    "README.md",
    "deploy",
    "openapi",
    "src",
    "tests",
];

#[test]
fn the_top_level_is_the_agreed_one() {
    let complaints: Vec<String> = std::fs::read_dir(source::repository())
        .unwrap()
        .map(|entry| entry.unwrap().file_name().to_string_lossy().into_owned())
        .filter(|name| !name.starts_with('.') && name != "target" && !TOP_LEVEL.contains(&name.as_str()))
        .collect();
    assert_none("not agreed at the top level:", &complaints);
    for name in TOP_LEVEL {
        assert!(
            source::repository().join(name).exists(),
            "{name} is missing at the top level"
        );
    }
}

#[test]
fn scripts_are_executable() {
    use std::os::unix::fs::PermissionsExt;
    for script in [".ci/run", "tests/run.sh"] {
        let mode = std::fs::metadata(source::repository().join(script))
            .unwrap()
            .permissions()
            .mode();
        assert!(mode & 0o100 != 0, "{script} is not executable");
    }
}

#[test]
fn lints_stay_strict() {
    let manifest = source::read("Cargo.toml");
    for lint in [
        "unsafe_code = \"forbid\"",
        "missing_docs = ",
        "unwrap_used = ",
        "todo = ",
    ] {
        assert!(manifest.contains(lint), "Cargo.toml lost {lint}");
    }
}
