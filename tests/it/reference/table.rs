//! Reads a reference table: lines that begin with `#` are its source, then a header, then numbers.

use std::collections::BTreeMap;

/// One row: column name to text.
pub struct Row(BTreeMap<String, String>);

impl Row {
    /// The number in a column; a missing column or an unreadable number fails the test.
    pub fn number(&self, column: &str) -> f64 {
        self.maybe(column)
            .unwrap_or_else(|| panic!("no number in column {column}"))
    }

    /// The number in a column, if the cell is filled.
    pub fn maybe(&self, column: &str) -> Option<f64> {
        let cell = self.text(column);
        (!cell.is_empty()).then(|| cell.parse().unwrap_or_else(|_| panic!("{column}: {cell}")))
    }

    /// The text in a column.
    pub fn text(&self, column: &str) -> &str {
        self.0.get(column).unwrap_or_else(|| panic!("no column {column}"))
    }
}

/// All rows of a file below `tests/`, at least one.
pub fn rows(file: &str) -> Vec<Row> {
    let path = std::path::Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("tests")
        .join(file);
    let text = std::fs::read_to_string(&path).unwrap();
    assert!(text.starts_with("# "), "{file} says where it comes from");
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .from_reader(text.as_bytes());
    let header = reader.headers().unwrap().clone();
    let named = |record: csv::StringRecord| {
        Row(header
            .iter()
            .map(str::to_owned)
            .zip(record.iter().map(str::to_owned))
            .collect())
    };
    let rows: Vec<Row> = reader.records().map(|record| named(record.unwrap())).collect();
    assert!(!rows.is_empty(), "{file} holds rows");
    rows
}

/// Fails unless `found` lies within a share of `expected`.
#[track_caller]
pub fn near(what: &str, found: f64, expected: f64, share: f64) {
    let off = found / expected - 1.0;
    assert!(
        off.abs() <= share,
        "{what}: found {found}, expected {expected}, off by {off:.2e}, allowed {share:.1e}"
    );
}

/// Fails unless `found` lies within an amount of `expected`.
#[track_caller]
pub fn close(what: &str, found: f64, expected: f64, amount: f64) {
    let off = found - expected;
    assert!(
        off.abs() <= amount,
        "{what}: found {found}, expected {expected}, off by {off:.4}, allowed {amount}"
    );
}
