//! Finding or making the file.

use std::path::Path;
use std::time::Duration;

use backon::{ExponentialBuilder, Retryable};
use sqlx::SqlitePool;
use sqlx::sqlite::{SqliteConnectOptions, SqliteJournalMode, SqlitePoolOptions, SqliteSynchronous};

use super::migrations::migrator;
use super::{Store, StoreError};
use crate::config;

/// How long a statement waits for another process's lock.
const BUSY_TIMEOUT: Duration = Duration::from_secs(10);
/// Reading connections beside the writing one.
const READERS: u32 = 4;
/// Most that is kept in memory where nothing lasts [bytes].
const MEMORY_BYTES: u64 = 64 << 20;

impl Store {
    /// Opens the configured file, makes it if it is not there, and brings its tables up to date; several processes may do
    /// so at once. Without a file, or where the place cannot be written, the store lives in memory: the latter is said
    /// loudly in the log.
    ///
    /// # Errors
    /// A file that is damaged or of a later version, or a database that does not answer.
    pub async fn open(config: &config::Store) -> Result<Self, StoreError> {
        let Some(file) = &config.file else {
            return Self::in_memory(config.weather_bytes).await;
        };
        match Self::in_file(file, config.weather_bytes).await {
            Err(error @ StoreError::NotWritable { .. }) => {
                tracing::warn!(
                    "NOTHING IS KEPT: {error}. Fetched weather is forgotten when this process ends; name a writable place in \
                     store.file, or an empty one to say that this is meant"
                );
                Self::in_memory(config.weather_bytes).await
            }
            opened => opened,
        }
    }

    async fn in_file(file: &Path, weather_bytes: u64) -> Result<Self, StoreError> {
        if let Some(folder) = file.parent() {
            // If this fails, opening the file says why.
            let _ = tokio::fs::create_dir_all(folder).await;
        }
        let patient = ExponentialBuilder::default()
            .with_jitter()
            .with_min_delay(Duration::from_millis(5))
            .with_max_delay(Duration::from_millis(500))
            .with_max_times(40);
        // Changing to write-ahead logging does not wait for another process that does the same; we do.
        let writer = (|| writer(file)).retry(patient).when(StoreError::is_busy).await?;
        let readers = SqlitePoolOptions::new().max_connections(READERS);
        let readers = readers.connect_lazy_with(options(file).read_only(true));
        Ok(Self {
            writer,
            readers,
            weather_bytes,
            lasting: true,
        })
    }

    async fn in_memory(weather_bytes: u64) -> Result<Self, StoreError> {
        // The database is the connection's own: it must be the only one and never end.
        let pool = SqlitePoolOptions::new()
            .max_connections(1)
            .idle_timeout(None)
            .max_lifetime(None);
        let pool = pool.connect_with(SqliteConnectOptions::new().in_memory(true)).await?;
        bring_up_to_date(Path::new("in memory"), &pool).await?;
        Ok(Self {
            writer: pool.clone(),
            readers: pool,
            weather_bytes: weather_bytes.min(MEMORY_BYTES),
            lasting: false,
        })
    }
}

fn options(file: &Path) -> SqliteConnectOptions {
    SqliteConnectOptions::new()
        .filename(file)
        .busy_timeout(BUSY_TIMEOUT)
        .foreign_keys(true)
}

async fn writer(file: &Path) -> Result<SqlitePool, StoreError> {
    let options = options(file)
        .create_if_missing(true)
        .journal_mode(SqliteJournalMode::Wal)
        .synchronous(SqliteSynchronous::Normal);
    let pool = SqlitePoolOptions::new().max_connections(1).connect_with(options).await;
    let pool = pool.map_err(|error| StoreError::opening(file, error))?;
    bring_up_to_date(file, &pool).await?;
    Ok(pool)
}

/// All steps in one transaction that holds the write lock from its beginning: of two processes the second finds them done.
async fn bring_up_to_date(file: &Path, pool: &SqlitePool) -> Result<(), StoreError> {
    let opening = |error| StoreError::opening(file, error);
    let mut transaction = pool.begin_with("BEGIN IMMEDIATE").await.map_err(opening)?;
    let migrated = migrator().run_direct(None, &mut *transaction, false).await;
    migrated.map_err(|error| StoreError::migrating(file, error))?;
    transaction.commit().await.map_err(opening)
}
