//! The tables, step by step. A step that was released is never changed; the next one stands below it.

use std::borrow::Cow;

use sqlx::SqlSafeStr;
use sqlx::migrate::{Migration, MigrationType, Migrator};

/// Number, name and text of every step, in order.
const STEPS: [(i64, &str, &str); 1] = [(
    1,
    "fetched weather",
    include_str!("migrations/0001_fetched_weather.sql"),
)];

/// All steps; each is applied once and remembered in the database itself.
pub(super) fn migrator() -> Migrator {
    let steps = STEPS.map(|(version, name, sql)| {
        Migration::new(
            version,
            Cow::Borrowed(name),
            MigrationType::Simple,
            sql.into_sql_str(),
            false,
        )
    });
    Migrator::with_migrations(steps.to_vec())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_file_of_the_folder_is_a_step_in_order() {
        let folder = concat!(env!("CARGO_MANIFEST_DIR"), "/src/store/migrations");
        let mut files: Vec<String> = std::fs::read_dir(folder)
            .unwrap()
            .map(|entry| std::fs::read_to_string(entry.unwrap().path()).unwrap())
            .collect();
        let mut steps: Vec<String> = STEPS.iter().map(|(_, _, sql)| (*sql).to_owned()).collect();
        assert!(STEPS.windows(2).all(|pair| pair[0].0 < pair[1].0));
        files.sort();
        steps.sort();
        assert_eq!(files, steps);
    }
}
