//! Why the store could not do what it was asked.

use std::path::{Path, PathBuf};

use sqlx::migrate::MigrateError;

/// Why the store could not do what it was asked.
#[derive(Debug, thiserror::Error)]
pub enum StoreError {
    /// The file is there, but it is no sound database.
    #[error(
        "the store {} is damaged or no database of dipcast ({reason}); move it away, with its -wal and -shm, and start again: \
         a new one is made. Fetched weather is fetched anew",
        .file.display()
    )]
    Damaged {
        /// The file.
        file: PathBuf,
        /// What the database said.
        reason: String,
    },
    /// The file was written by a later version.
    #[error(
        "the store {} was written by a later version of dipcast ({reason}); run that version, or name another file in \
         store.file",
        .file.display()
    )]
    Later {
        /// The file.
        file: PathBuf,
        /// What does not fit.
        reason: String,
    },
    /// The place cannot be written.
    #[error("the store {} cannot be written ({reason})", .file.display())]
    NotWritable {
        /// The file.
        file: PathBuf,
        /// What the system said.
        reason: String,
    },
    /// Anything else the database said.
    #[error("the database: {0}")]
    Database(#[from] sqlx::Error),
}

/// Primary result codes of SQLite (its documentation, "Result and Error Codes").
const BUSY: u32 = 5;
const LOCKED: u32 = 6;
const READ_ONLY: u32 = 8;
const CORRUPT: u32 = 11;
const CANNOT_OPEN: u32 = 14;
const NOT_A_DATABASE: u32 = 26;

impl StoreError {
    /// Sorts what the database said while a file was opened.
    pub(super) fn opening(file: &Path, error: sqlx::Error) -> Self {
        let (file, reason) = (file.to_owned(), error.to_string());
        match primary_code(&error) {
            Some(CORRUPT | NOT_A_DATABASE) => Self::Damaged { file, reason },
            Some(READ_ONLY | CANNOT_OPEN) => Self::NotWritable { file, reason },
            _ => Self::Database(error),
        }
    }

    /// Sorts what went wrong while its tables were brought up to date.
    pub(super) fn migrating(file: &Path, error: MigrateError) -> Self {
        match error {
            MigrateError::Execute(error) | MigrateError::ExecuteMigration(error, _) => Self::opening(file, error),
            MigrateError::VersionMissing(_) => Self::Later {
                file: file.to_owned(),
                reason: error.to_string(),
            },
            other => Self::Damaged {
                file: file.to_owned(),
                reason: other.to_string(),
            },
        }
    }

    /// True if another process holds the file just now.
    pub(super) fn is_busy(&self) -> bool {
        matches!(self, Self::Database(error) if matches!(primary_code(error), Some(BUSY | LOCKED)))
    }
}

/// The low byte of an extended code is the primary one.
fn primary_code(error: &sqlx::Error) -> Option<u32> {
    let code = error.as_database_error()?.code()?;
    code.parse::<u32>().ok().map(|code| code & 0xff)
}
