//! Takes settings out of the merged layers one by one and collects every fault on the way.

use std::fmt;
use std::ops::RangeInclusive;
use std::path::Path;
use std::str::FromStr;
use std::time::Duration;

use figment::Figment;
use serde_json::Value;

/// One wrong setting.
#[derive(Debug, Clone, PartialEq)]
pub struct ConfigFault {
    /// Dotted name, for example `server.bind`.
    pub setting: String,
    /// Where the value came from, for example a file name or the environment.
    pub origin: String,
    /// Expected, found and remedy.
    pub detail: String,
}

/// Everything wrong with the settings.
#[derive(Debug, Clone, PartialEq)]
pub struct ConfigError {
    /// All faults.
    pub faults: Vec<ConfigFault>,
}

impl ConfigError {
    pub(super) fn missing_file(file: &Path) -> Self {
        let detail = "the file given by --config does not exist or cannot be read".to_owned();
        let origin = file.display().to_string();
        Self {
            faults: vec![ConfigFault {
                setting: "--config".to_owned(),
                origin,
                detail,
            }],
        }
    }
}

impl fmt::Display for ConfigError {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        writeln!(out, "the settings are wrong in {} place(s):", self.faults.len())?;
        for fault in &self.faults {
            writeln!(out, "  {} (from {}): {}", fault.setting, fault.origin, fault.detail)?;
        }
        Ok(())
    }
}

impl std::error::Error for ConfigError {}

pub(super) struct Reader {
    figment: Figment,
    settings: Value,
    read: Vec<&'static str>,
    faults: Vec<ConfigFault>,
}

impl Reader {
    pub(super) fn new(figment: Figment) -> Result<Self, ConfigError> {
        let settings = figment.extract::<Value>().map_err(|error| ConfigError {
            faults: error.into_iter().map(unreadable).collect(),
        })?;
        Ok(Self {
            figment,
            settings,
            read: Vec::new(),
            faults: Vec::new(),
        })
    }

    pub(super) fn fault(&mut self, setting: &str, detail: String) {
        let origin = self.origin(setting);
        self.faults.push(ConfigFault {
            setting: setting.to_owned(),
            origin,
            detail,
        });
    }

    fn origin(&self, setting: &str) -> String {
        let Some(metadata) = self.figment.find_metadata(setting) else {
            return "nowhere".to_owned();
        };
        match (&metadata.source, metadata.name.as_ref()) {
            (Some(figment::Source::File(path)), _) => path.display().to_string(),
            (_, name) if name.starts_with("TOML") => "the defaults".to_owned(),
            (_, name) if name.contains("environment") => "the environment".to_owned(),
            _ => "the command line".to_owned(),
        }
    }

    fn take(&mut self, setting: &'static str) -> Value {
        self.read.push(setting);
        let pointer = format!("/{}", setting.replace('.', "/"));
        self.settings.pointer(&pointer).cloned().unwrap_or(Value::Null)
    }

    pub(super) fn whole(&mut self, setting: &'static str, range: RangeInclusive<u64>) -> u64 {
        let value = self.take(setting);
        match value.as_u64().filter(|number| range.contains(number)) {
            Some(number) => number,
            None => {
                let (low, high) = (range.start(), range.end());
                self.fault(
                    setting,
                    format!("expected a whole number from {low} to {high}, found {value}"),
                );
                *low
            }
        }
    }

    pub(super) fn seconds(&mut self, setting: &'static str, range: RangeInclusive<u64>) -> Duration {
        Duration::from_secs(self.whole(setting, range))
    }

    pub(super) fn flag(&mut self, setting: &'static str) -> bool {
        let value = self.take(setting);
        value.as_bool().unwrap_or_else(|| {
            self.fault(setting, format!("expected true or false, found {value}"));
            false
        })
    }

    pub(super) fn text(&mut self, setting: &'static str) -> String {
        let value = self.take(setting);
        value.as_str().map(str::to_owned).unwrap_or_else(|| {
            self.fault(setting, format!("expected a text in quotes, found {value}"));
            String::new()
        })
    }

    pub(super) fn parsed<T: FromStr>(&mut self, setting: &'static str, expected: &str) -> Option<T> {
        let value = self.take(setting);
        let parsed = value.as_str().and_then(|text| text.parse().ok());
        if parsed.is_none() {
            self.fault(setting, format!("expected {expected}, found {value}"));
        }
        parsed
    }

    pub(super) fn choice(&mut self, setting: &'static str, choices: &[&'static str]) -> Option<&'static str> {
        let value = self.take(setting);
        let chosen = choices.iter().find(|choice| value.as_str() == Some(choice)).copied();
        if chosen.is_none() {
            self.fault(
                setting,
                format!("expected one of {}, found {value}", choices.join(", ")),
            );
        }
        chosen
    }

    fn texts(&mut self, setting: &'static str) -> Vec<String> {
        let value = self.take(setting);
        let texts = value
            .as_array()
            .and_then(|items| items.iter().map(|item| item.as_str().map(str::to_owned)).collect());
        texts.unwrap_or_else(|| {
            self.fault(
                setting,
                format!("expected a list of texts, such as [\"...\"], found {value}"),
            );
            Vec::new()
        })
    }

    pub(super) fn key_hashes(&mut self, setting: &'static str) -> Vec<[u8; 32]> {
        let texts = self.texts(setting);
        texts
            .iter()
            .enumerate()
            .filter_map(|(index, text)| self.key_hash(setting, index, text))
            .collect()
    }

    fn key_hash(&mut self, setting: &str, index: usize, text: &str) -> Option<[u8; 32]> {
        let hash = bytes_of_hex(text);
        if hash.is_none() {
            // The text itself is not repeated: someone may have pasted the key instead of its hash.
            self.fault(
                setting,
                format!("entry {} is not a SHA-256 of 64 hexadecimal digits", index + 1),
            );
        }
        hash
    }

    pub(super) fn origins(&mut self, setting: &'static str) -> Vec<String> {
        let origins = self.texts(setting);
        for origin in origins.iter().filter(|origin| !is_origin(origin)) {
            let detail =
                format!("expected an origin such as https://planner.example (no path, no *), found {origin:?}");
            self.fault(setting, detail);
        }
        origins
    }

    pub(super) fn finish(mut self) -> Result<(), ConfigError> {
        self.refuse_unknown();
        if self.faults.is_empty() {
            Ok(())
        } else {
            Err(ConfigError { faults: self.faults })
        }
    }

    fn refuse_unknown(&mut self) {
        let mut found = Vec::new();
        leaves(&self.settings, String::new(), &mut found);
        let read = std::mem::take(&mut self.read);
        for setting in found.iter().filter(|setting| !read.contains(&setting.as_str())) {
            let nearest = read.iter().max_by(|a, b| {
                let near = |known: &str| strsim::jaro_winkler(setting, known);
                near(a).total_cmp(&near(b))
            });
            let nearest = nearest.copied().unwrap_or_default();
            self.fault(setting, format!("there is no such setting; did you mean {nearest}?"));
        }
    }
}

fn unreadable(error: figment::Error) -> ConfigFault {
    let origin = error
        .metadata
        .as_ref()
        .map_or_else(|| "the settings".to_owned(), |metadata| metadata.name.to_string());
    ConfigFault {
        setting: error.path.join("."),
        origin,
        detail: error.kind.to_string(),
    }
}

fn leaves(value: &Value, name: String, found: &mut Vec<String>) {
    match value {
        Value::Object(members) => {
            for (key, member) in members {
                let name = if name.is_empty() {
                    key.clone()
                } else {
                    format!("{name}.{key}")
                };
                leaves(member, name, found);
            }
        }
        _ => found.push(name),
    }
}

fn bytes_of_hex(text: &str) -> Option<[u8; 32]> {
    let digits: Vec<u8> = text
        .chars()
        .map(|digit| digit.to_digit(16).map(|value| value as u8))
        .collect::<Option<_>>()?;
    let bytes: Vec<u8> = digits
        .chunks(2)
        .map(|pair| pair.iter().fold(0, |byte, digit| byte * 16 + digit))
        .collect();
    if digits.len() == 64 {
        bytes.try_into().ok()
    } else {
        None
    }
}

fn is_origin(text: &str) -> bool {
    let host = text.strip_prefix("https://").or_else(|| text.strip_prefix("http://"));
    host.is_some_and(|host| !host.is_empty() && !host.contains(['/', '*', ' ', '?', '#', '@']))
}
