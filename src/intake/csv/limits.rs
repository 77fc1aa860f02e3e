//! How much a file may hold.

/// Bounds on one file; each is checked while reading, so that nothing larger is ever held.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Limits {
    /// Most bytes after decompression.
    pub max_decompressed_bytes: u64,
    /// Most data rows.
    pub max_rows: usize,
    /// Most fields in a row.
    pub max_fields: usize,
    /// Most times a compressed file may grow.
    pub max_ratio: u64,
    /// Most bytes in one row.
    pub max_row_bytes: usize,
}

impl Default for Limits {
    /// Room for 38 years of ten-minute readings, in about 150 MB of memory; weather compresses 5 to 40 fold, never 300 fold.
    fn default() -> Self {
        Self {
            max_decompressed_bytes: 256 * 1024 * 1024,
            max_rows: 2_000_000,
            max_fields: 1_000,
            max_ratio: 300,
            max_row_bytes: 64 * 1024,
        }
    }
}
