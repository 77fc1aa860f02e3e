//! Fetched weather: what a service answered to a question, until it expires or for good.

use std::io::{Read, Write};

use flate2::Compression;
use flate2::read::GzDecoder;
use flate2::write::GzEncoder;
use sqlx::Row;
use sqlx::sqlite::SqliteRow;

use super::{Store, StoreError};

/// An answer that is kept.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct KeptWeather {
    /// Source and question, without any key; the answer is found by it.
    pub question: String,
    /// Name of the source.
    pub source: String,
    /// When it was fetched or found unchanged, seconds since 1970.
    pub fetched_unix_s: i64,
    /// When it expires, seconds since 1970; none holds for good.
    pub expires_unix_s: Option<i64>,
    /// The service's own Last-Modified, to the letter.
    pub last_modified: Option<String>,
    /// The answer as it came.
    pub answer: Vec<u8>,
}

/// Beyond this a kept answer is not unpacked [bytes]: nothing larger is ever kept.
const LARGEST_ANSWER: u64 = 1 << 28;
/// When an answer was last used is noted no finer than this [s], so that reading rarely writes.
const USE_NOTED_S: i64 = 3600;

const FIND: &str = "SELECT question, source, fetched_unix_s, expires_unix_s, last_modified, used_unix_s, answer \
                    FROM fetched_weather WHERE question = $1";
const NOTE_USE: &str = "UPDATE fetched_weather SET used_unix_s = $1 WHERE question = $2";
const KEEP: &str = "INSERT INTO fetched_weather (question, source, fetched_unix_s, expires_unix_s, last_modified, \
                    used_unix_s, bytes, answer) VALUES ($1, $2, $3, $4, $5, $3, $6, $7) \
                    ON CONFLICT (question) DO UPDATE SET source = excluded.source, fetched_unix_s = excluded.fetched_unix_s, \
                    expires_unix_s = excluded.expires_unix_s, last_modified = excluded.last_modified, \
                    used_unix_s = excluded.used_unix_s, bytes = excluded.bytes, answer = excluded.answer";
const RENEW: &str =
    "UPDATE fetched_weather SET fetched_unix_s = $1, expires_unix_s = $2, used_unix_s = $1 WHERE question = $3";
const MAKE_ROOM: &str = "DELETE FROM fetched_weather WHERE question IN (SELECT question FROM (SELECT question, \
                         SUM(bytes) OVER (ORDER BY used_unix_s DESC, question) AS up_to_here FROM fetched_weather) AS ranked \
                         WHERE up_to_here > $1)";
const NEWEST: &str = "SELECT MAX(fetched_unix_s) FROM fetched_weather WHERE source = $1";

impl Store {
    /// The kept answer to a question, expired or not.
    ///
    /// # Errors
    /// A database that does not answer, or an answer that cannot be unpacked.
    pub async fn weather(&self, question: &str, now_unix_s: i64) -> Result<Option<KeptWeather>, StoreError> {
        let row = sqlx::query(FIND).bind(question).fetch_optional(&self.readers).await?;
        let Some(row) = row else { return Ok(None) };
        if now_unix_s - row.try_get::<i64, _>("used_unix_s")? > USE_NOTED_S {
            let noted = sqlx::query(NOTE_USE).bind(now_unix_s).bind(question);
            noted.execute(&self.writer).await?;
        }
        kept(row).await.map(Some)
    }

    /// Keeps an answer in place of an earlier one to the same question, and lets go of those not used for longest if the
    /// room is full.
    ///
    /// # Errors
    /// A database that does not answer, a full disk.
    pub async fn keep_weather(&self, kept: KeptWeather) -> Result<(), StoreError> {
        let packed = blocking(move || packed(kept)).await?;
        let (kept, answer) = packed?;
        let mut transaction = self.writer.begin_with("BEGIN IMMEDIATE").await?;
        sqlx::query(KEEP)
            .bind(&kept.question)
            .bind(&kept.source)
            .bind(kept.fetched_unix_s)
            .bind(kept.expires_unix_s)
            .bind(&kept.last_modified)
            .bind(answer.len() as i64)
            .bind(&answer)
            .execute(&mut *transaction)
            .await?;
        let room = i64::try_from(self.weather_bytes).unwrap_or(i64::MAX);
        sqlx::query(MAKE_ROOM).bind(room).execute(&mut *transaction).await?;
        Ok(transaction.commit().await?)
    }

    /// Notes that an answer was found unchanged.
    ///
    /// # Errors
    /// A database that does not answer.
    pub async fn renew_weather(
        &self,
        question: &str,
        fetched_unix_s: i64,
        expires_unix_s: Option<i64>,
    ) -> Result<(), StoreError> {
        let renewed = sqlx::query(RENEW)
            .bind(fetched_unix_s)
            .bind(expires_unix_s)
            .bind(question);
        renewed.execute(&self.writer).await?;
        Ok(())
    }

    /// When the newest kept answer of a source was fetched, seconds since 1970.
    ///
    /// # Errors
    /// A database that does not answer.
    pub async fn newest_weather(&self, source: &str) -> Result<Option<i64>, StoreError> {
        let row = sqlx::query(NEWEST).bind(source).fetch_one(&self.readers).await?;
        Ok(row.try_get(0)?)
    }
}

async fn kept(row: SqliteRow) -> Result<KeptWeather, StoreError> {
    let answer: Vec<u8> = row.try_get("answer")?;
    let answer = blocking(move || unpacked(&answer)).await?;
    Ok(KeptWeather {
        question: row.try_get("question")?,
        source: row.try_get("source")?,
        fetched_unix_s: row.try_get("fetched_unix_s")?,
        expires_unix_s: row.try_get("expires_unix_s")?,
        last_modified: row.try_get("last_modified")?,
        answer: answer.map_err(sqlx::Error::Io)?,
    })
}

async fn blocking<T: Send + 'static>(work: impl FnOnce() -> T + Send + 'static) -> Result<T, StoreError> {
    let done = tokio::task::spawn_blocking(work).await;
    done.map_err(|error| StoreError::Database(sqlx::Error::Io(std::io::Error::other(error))))
}

fn packed(kept: KeptWeather) -> Result<(KeptWeather, Vec<u8>), StoreError> {
    let mut encoder = GzEncoder::new(Vec::new(), Compression::default());
    encoder.write_all(&kept.answer).map_err(sqlx::Error::Io)?;
    let answer = encoder.finish().map_err(sqlx::Error::Io)?;
    Ok((kept, answer))
}

fn unpacked(answer: &[u8]) -> std::io::Result<Vec<u8>> {
    let mut plain = Vec::new();
    GzDecoder::new(answer).take(LARGEST_ANSWER).read_to_end(&mut plain)?;
    Ok(plain)
}
