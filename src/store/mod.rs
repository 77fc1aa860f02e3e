//! What lasts: one contract, an embedded database behind it.
//!
//! Reading order: [`Store::open`] finds or makes the file and brings its tables up to date, [`KeptWeather`] is what is kept
//! so far, [`StoreError`] says why not. Callers know records, never SQL; every write takes the write lock at its
//! beginning (`BEGIN IMMEDIATE`) and goes through the one connection that writes, so several processes may share a file.
//! The SQL keeps to what PostgreSQL understands too (`$1`, TEXT, BIGINT, BYTEA, ON CONFLICT, RETURNING).

mod error;
mod migrations;
mod open;
mod weather;

pub use error::StoreError;
pub use weather::KeptWeather;

use sqlx::SqlitePool;

/// The open store; cheap to clone.
#[derive(Debug, Clone)]
pub struct Store {
    /// One connection, the only one that writes.
    writer: SqlitePool,
    /// For reading beside it; in memory the same one.
    readers: SqlitePool,
    /// Fetched weather kept at most [bytes].
    weather_bytes: u64,
    lasting: bool,
}

impl Store {
    /// False if what is kept ends with the process.
    pub fn is_lasting(&self) -> bool {
        self.lasting
    }

    /// Closes its connections; what was written is on the disk.
    pub async fn close(&self) {
        self.readers.close().await;
        self.writer.close().await;
    }
}
