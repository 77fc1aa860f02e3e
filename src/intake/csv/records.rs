//! Text into rows of cells. Rows without quotes are cut at the delimiters; the others go through the CSV library, with the
//! lines a quoted cell runs over put together first. One row is held at a time, and never a larger one than allowed.

use std::io::{BufRead, Read};

use csv_core::ReadRecordResult;

use super::limits::Limits;
use super::source::fault_of;
use crate::model::weather::WeatherFault;

/// Cells no limit may go beyond.
const MOST_FIELDS: usize = 65_536;

/// Lines allowed beyond two for each allowed row: blank lines, comments and quoted line ends are counted too.
const PREAMBLE_LINES: usize = 2000;

/// Rows of a file, one after another.
pub(super) struct Records<'a> {
    source: Box<dyn BufRead + 'a>,
    delimiter: u8,
    comment: Option<u8>,
    max_row_bytes: usize,
    max_fields: usize,
    max_lines: usize,
    lines: usize,
    first_line: usize,
    text: Vec<u8>,
    unquoter: Unquoter,
    /// Where each cell of the row lies in `text`.
    cells: Vec<(u32, u32)>,
}

impl<'a> Records<'a> {
    pub(super) fn new(source: Box<dyn BufRead + 'a>, delimiter: u8, comment: Option<u8>, limits: &Limits) -> Self {
        Self {
            source,
            delimiter,
            comment,
            max_row_bytes: limits.max_row_bytes.min(u32::MAX as usize),
            max_fields: limits.max_fields.min(MOST_FIELDS),
            max_lines: limits.max_rows.saturating_mul(2).saturating_add(PREAMBLE_LINES),
            lines: 0,
            first_line: 0,
            text: Vec::new(),
            unquoter: Unquoter {
                parser: csv_core::ReaderBuilder::new().delimiter(delimiter).build(),
                plain: Vec::new(),
                ends: vec![0; limits.max_fields.min(MOST_FIELDS) + 1],
            },
            cells: Vec::new(),
        }
    }

    /// Passes over one line, whatever it holds. False at the end of the file.
    pub(super) fn skip_line(&mut self) -> Result<bool, WeatherFault> {
        self.text.clear();
        self.append_line()
    }

    /// Moves to the next row that is neither blank nor a comment. False at the end of the file.
    pub(super) fn advance(&mut self) -> Result<bool, WeatherFault> {
        loop {
            self.text.clear();
            self.first_line = self.lines + 1;
            if !self.append_line()? {
                return Ok(false);
            }
            if self.comment.is_some() && self.text.first() == self.comment.as_ref() || self.text.trim_ascii().is_empty()
            {
                continue;
            }
            if memchr::memchr(b'"', &self.text).is_some() {
                self.cut_quoted()?;
            } else {
                self.cut_plain()?;
            }
            return Ok(true);
        }
    }

    /// Line number of the row (of its first line), from 1.
    pub(super) fn row(&self) -> usize {
        self.first_line
    }

    /// Number of cells in the row.
    pub(super) fn len(&self) -> usize {
        self.cells.len()
    }

    /// A cell of the row, without spaces around it; `None` past its end.
    pub(super) fn cell(&self, at: usize) -> Option<&[u8]> {
        let (start, end) = *self.cells.get(at)?;
        Some(trimmed(&self.text[start as usize..end as usize]))
    }

    /// Appends one line without its end. False at the end of the file.
    fn append_line(&mut self) -> Result<bool, WeatherFault> {
        let room = (self.max_row_bytes - self.text.len().min(self.max_row_bytes)) as u64 + 2;
        let mut limited = (&mut self.source).take(room);
        let read = limited
            .read_until(b'\n', &mut self.text)
            .map_err(|error| fault_of(&error))?;
        if read == 0 {
            return Ok(false);
        }
        self.lines += 1;
        if self.lines > self.max_lines {
            let detail = format!(
                "expected at most {} lines, blank ones and comments included; the file has more",
                self.max_lines
            );
            return Err(WeatherFault::whole("too_many_rows", detail));
        }
        if self.text.last() == Some(&b'\n') {
            self.text.pop();
            if self.text.last() == Some(&b'\r') {
                self.text.pop();
            }
        }
        if self.text.len() > self.max_row_bytes {
            return Err(self.too_long());
        }
        Ok(true)
    }

    fn too_long(&self) -> WeatherFault {
        let detail = if memchr::memchr(b'"', &self.text).is_some() {
            format!(
                "the row is longer than {} bytes: is a quote opened here and never closed?",
                self.max_row_bytes
            )
        } else {
            format!(
                "the row is longer than {} bytes: are the line ends missing?",
                self.max_row_bytes
            )
        };
        WeatherFault::row(self.first_line.max(1), None, "row_too_long", detail)
    }

    fn cut_plain(&mut self) -> Result<(), WeatherFault> {
        self.cells.clear();
        let mut start = 0;
        for end in memchr::memchr_iter(self.delimiter, &self.text) {
            self.cells.push((start, end as u32));
            start = end as u32 + 1;
        }
        self.cells.push((start, self.text.len() as u32));
        self.check_width()
    }

    fn cut_quoted(&mut self) -> Result<(), WeatherFault> {
        let quotes = |text: &[u8]| memchr::memchr_iter(b'"', text).count();
        while quotes(&self.text) % 2 == 1 {
            self.text.push(b'\n');
            if !self.append_line()? {
                let detail = "a quote is opened in this row and never closed";
                return Err(WeatherFault::row(self.first_line, None, "open_quote", detail));
            }
        }
        self.unquote()?;
        self.check_width()
    }

    /// Cuts the text at the delimiters outside quotes and takes the quotes off.
    fn unquote(&mut self) -> Result<(), WeatherFault> {
        let Unquoter { parser, plain, ends } = &mut self.unquoter;
        plain.resize(self.text.len(), 0);
        parser.reset();
        let (first, read, written, cells) = parser.read_record(&self.text, plain, ends);
        // The end of the text ends the last cell. A row that ends before has a line end outside its quotes.
        let (second, _, _, last) = match first {
            ReadRecordResult::InputEmpty => parser.read_record(&[], &mut plain[written..], &mut ends[cells..]),
            other => (other, 0, 0, 0),
        };
        self.cells.clear();
        let mut start = 0;
        for end in &ends[..cells + last] {
            self.cells.push((start, *end as u32));
            start = *end as u32;
        }
        let whole = read == self.text.len();
        std::mem::swap(&mut self.text, plain);
        match second {
            ReadRecordResult::Record if whole => Ok(()),
            ReadRecordResult::OutputEndsFull => Err(self.too_wide()),
            _ => {
                let detail =
                    "a quote stands inside a cell that does not begin with one; double it inside quotes, or remove it";
                Err(WeatherFault::row(self.first_line, None, "stray_quote", detail))
            }
        }
    }

    fn check_width(&self) -> Result<(), WeatherFault> {
        if self.cells.len() <= self.max_fields {
            return Ok(());
        }
        Err(self.too_wide())
    }

    fn too_wide(&self) -> WeatherFault {
        let detail = format!(
            "expected at most {} cells; found {} or more",
            self.max_fields,
            self.cells.len()
        );
        WeatherFault::row(self.first_line, None, "too_many_cells", detail)
    }
}

/// The CSV library's parser and its room, for rows with quotes.
struct Unquoter {
    parser: csv_core::Reader,
    plain: Vec<u8>,
    ends: Vec<usize>,
}

/// Cells are mostly without spaces: look before searching.
fn trimmed(cell: &[u8]) -> &[u8] {
    let spaced = |byte: Option<&u8>| byte.is_some_and(|b| *b <= b' ');
    if spaced(cell.first()) || spaced(cell.last()) {
        cell.trim_ascii()
    } else {
        cell
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn all(text: &[u8], limits: &Limits) -> Result<Vec<(usize, Vec<String>)>, WeatherFault> {
        let mut records = Records::new(Box::new(text), b',', Some(b'#'), limits);
        let mut rows = Vec::new();
        while records.advance()? {
            let cells = (0..records.len()).map(|at| String::from_utf8_lossy(records.cell(at).unwrap()).into_owned());
            rows.push((records.row(), cells.collect()));
        }
        Ok(rows)
    }

    fn row(number: usize, cells: &[&str]) -> (usize, Vec<String>) {
        (number, cells.iter().map(|cell| cell.to_string()).collect())
    }

    #[test]
    fn rows_keep_their_line_numbers() {
        let text = b"a,b\r\n\r\n# note, \"odd\n1, 2 \n\"x,\"\"y\nz\",3\n,\nlast,row";
        let expected = [
            row(1, &["a", "b"]),
            row(4, &["1", "2"]),
            row(5, &["x,\"y\nz", "3"]),
            row(7, &["", ""]),
            row(8, &["last", "row"]),
        ];
        assert_eq!(all(text, &Limits::default()).unwrap(), expected);
    }

    #[test]
    fn long_rows_wide_rows_and_open_quotes_are_refused() {
        let limits = Limits {
            max_row_bytes: 20,
            max_fields: 3,
            ..Limits::default()
        };
        let code = |text: &[u8]| all(text, &limits).unwrap_err().code;
        assert_eq!(code(b"a\n123456789012345678901\n"), "row_too_long");
        assert_eq!(code(&[b'x'; 1000]), "row_too_long");
        assert_eq!(code(b"\"a\nb\nc\nd\ne\nf\ng\nh\ni\nj\nk\nl\n"), "row_too_long");
        assert_eq!(code(b"1,2,3,4"), "too_many_cells");
        assert_eq!(code(b"a,\"b"), "open_quote");
        assert_eq!(code(b"a\"x,b\nc\"\n"), "stray_quote");
        assert_eq!(all(b"12345678901234567890\r\n", &limits).unwrap().len(), 1);
    }

    proptest! {
        /// Without quotes, cutting at the delimiters is what the CSV library does.
        #[test]
        fn plain_rows_are_cut_as_the_library_cuts_them(text in "[a-z0-9.;\t-]{1,5}(,[a-z0-9.;\t-]{0,5}){0,5}(\r?\n[a-z0-9.-]{1,5}(,[a-z0-9.-]{0,5}){0,5}){0,3}") {
            let ours: Vec<Vec<String>> = all(text.as_bytes(), &Limits::default()).unwrap().into_iter().map(|(_, cells)| cells).collect();
            let mut reader = csv::ReaderBuilder::new().has_headers(false).flexible(true).trim(csv::Trim::All).from_reader(text.as_bytes());
            let theirs: Vec<Vec<String>> = reader.records().map(|r| r.unwrap().iter().map(str::to_string).collect()).collect();
            prop_assume!(!text.lines().any(|line| line.trim().is_empty()));
            prop_assert_eq!(ours, theirs);
        }
    }
}
