//! `[store]`: what lasts.

use std::path::PathBuf;

use super::reader::Reader;

/// What lasts.
#[derive(Debug, Clone)]
pub struct Store {
    /// File of the embedded database; none keeps nothing beyond the process.
    pub file: Option<PathBuf>,
    /// Fetched weather kept at most [bytes].
    pub weather_bytes: u64,
}

pub(super) fn read(reader: &mut Reader) -> Store {
    let file = reader.text("store.file");
    Store {
        file: (!file.is_empty()).then(|| PathBuf::from(file)),
        weather_bytes: reader.whole("store.weather_mib", 1..=1 << 20) << 20,
    }
}
