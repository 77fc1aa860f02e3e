//! Text into rows of cells. Rows without quotes are cut at the delimiters; the others go through the CSV library, with the
//! lines a quoted cell runs over put together first. One row is held at a time, and never a larger one than allowed.

use std::io::BufRead;

use csv_core::ReadRecordResult;

use super::limits::Limits;
use super::lines::{Lines, NoLine};
use crate::model::weather::WeatherFault;

/// Cells no limit may go beyond.
const MOST_FIELDS: usize = 65_536;

/// Lines allowed beyond two for each allowed row: blank lines, comments and quoted line ends are counted too.
const PREAMBLE_LINES: usize = 2000;

/// How a row is cut into cells.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Cut {
    /// At this byte, outside quotes.
    Delimiter(u8),
    /// By the place of the characters: start from 0, and width.
    Places(Vec<(usize, usize)>),
}

/// Rows of a file, one after another.
pub(super) struct Records<'a> {
    lines: Lines<'a>,
    cut: Cut,
    comment: Option<u8>,
    max_fields: usize,
    max_lines: usize,
    first_line: usize,
    unquoter: Unquoter,
    /// True: the cells lie in the unquoter's text, not in the line.
    unquoted: bool,
    /// Where each cell of the row lies.
    cells: Vec<(u32, u32)>,
}

impl<'a> Records<'a> {
    pub(super) fn new(source: Box<dyn BufRead + 'a>, cut: Cut, comment: Option<u8>, limits: &Limits) -> Self {
        let delimiter = match cut {
            Cut::Delimiter(byte) => byte,
            Cut::Places(_) => b',',
        };
        Self {
            lines: Lines::new(source, limits.max_row_bytes.min(u32::MAX as usize)),
            cut,
            comment,
            max_fields: limits.max_fields.min(MOST_FIELDS),
            max_lines: limits.max_rows.saturating_mul(2).saturating_add(PREAMBLE_LINES),
            first_line: 0,
            unquoter: Unquoter {
                parser: csv_core::ReaderBuilder::new().delimiter(delimiter).build(),
                plain: Vec::new(),
                ends: vec![0; limits.max_fields.min(MOST_FIELDS) + 1],
            },
            unquoted: false,
            cells: Vec::new(),
        }
    }

    /// Passes over one line, whatever it holds. False at the end of the file.
    pub(super) fn skip_line(&mut self) -> Result<bool, WeatherFault> {
        self.next_line()
    }

    /// Moves to the next row that is neither blank nor a comment. False at the end of the file.
    pub(super) fn advance(&mut self) -> Result<bool, WeatherFault> {
        loop {
            if !self.next_line()? {
                return Ok(false);
            }
            let line = self.lines.row();
            if self.comment.is_some() && line.first() == self.comment.as_ref() || line.trim_ascii().is_empty() {
                continue;
            }
            self.cut_row()?;
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
        let text = if self.unquoted {
            &self.unquoter.plain
        } else {
            self.lines.row()
        };
        Some(trimmed(&text[start as usize..end as usize]))
    }

    fn next_line(&mut self) -> Result<bool, WeatherFault> {
        self.first_line = self.lines.count + 1;
        match self.lines.advance() {
            Ok(()) => self.check_lines().map(|()| true),
            Err(NoLine::End) => Ok(false),
            Err(other) => Err(self.stopped(other)),
        }
    }

    fn check_lines(&self) -> Result<(), WeatherFault> {
        if self.lines.count <= self.max_lines {
            return Ok(());
        }
        let detail = format!(
            "expected at most {} lines, blank ones and comments included; the file has more",
            self.max_lines
        );
        Err(WeatherFault::whole("too_many_rows", detail))
    }

    fn stopped(&self, why: NoLine) -> WeatherFault {
        let most = "the row is longer than allowed";
        match why {
            NoLine::Broken(fault) => fault,
            NoLine::TooLong if memchr::memchr(b'"', self.lines.row()).is_some() => self.fault(
                "row_too_long",
                format!(
                    "{most} ({} bytes): is a quote opened here and never closed?",
                    self.lines.longest()
                ),
            ),
            NoLine::TooLong => self.fault(
                "row_too_long",
                format!("{most} ({} bytes): are the line ends missing?", self.lines.longest()),
            ),
            NoLine::End => self.fault("open_quote", "a quote is opened in this row and never closed".into()),
        }
    }

    fn fault(&self, code: &'static str, detail: String) -> WeatherFault {
        WeatherFault::row(self.first_line.max(1), None, code, detail)
    }

    fn cut_row(&mut self) -> Result<(), WeatherFault> {
        self.cells.clear();
        self.unquoted = false;
        match &self.cut {
            Cut::Places(places) => at_places(self.lines.row(), places, &mut self.cells),
            Cut::Delimiter(delimiter) => {
                if !at_delimiters(self.lines.row(), *delimiter, &mut self.cells) {
                    self.cut_quoted()?;
                }
            }
        }
        if self.cells.len() <= self.max_fields {
            return Ok(());
        }
        Err(self.too_wide())
    }

    fn cut_quoted(&mut self) -> Result<(), WeatherFault> {
        let quotes = |text: &[u8]| memchr::memchr_iter(b'"', text).count();
        while quotes(self.lines.row()) % 2 == 1 {
            match self.lines.extend() {
                Ok(()) => self.check_lines()?,
                Err(why) => return Err(self.stopped(why)),
            }
        }
        self.unquote()
    }

    /// Cuts the text at the delimiters outside quotes and takes the quotes off.
    fn unquote(&mut self) -> Result<(), WeatherFault> {
        let Unquoter { parser, plain, ends } = &mut self.unquoter;
        let text = self.lines.row();
        plain.resize(text.len(), 0);
        parser.reset();
        let (first, read, written, cells) = parser.read_record(text, plain, ends);
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
        self.unquoted = true;
        match second {
            ReadRecordResult::Record if read == text.len() => Ok(()),
            ReadRecordResult::OutputEndsFull => Err(self.too_wide()),
            _ => {
                let detail =
                    "a quote stands inside a cell that does not begin with one; double it inside quotes, or remove it";
                Err(self.fault("stray_quote", detail.into()))
            }
        }
    }

    fn too_wide(&self) -> WeatherFault {
        let detail = format!(
            "expected at most {} cells; found {} or more",
            self.max_fields,
            self.cells.len()
        );
        self.fault("too_many_cells", detail)
    }
}

/// Cuts a row without quotes; false as soon as there is one.
fn at_delimiters(row: &[u8], delimiter: u8, cells: &mut Vec<(u32, u32)>) -> bool {
    let mut start = 0;
    for at in memchr::memchr2_iter(delimiter, b'"', row) {
        if row[at] == b'"' {
            return false;
        }
        cells.push((start, at as u32));
        start = at as u32 + 1;
    }
    cells.push((start, row.len() as u32));
    true
}

/// Cuts a row by the place of its characters; cells that begin behind its end are not there.
fn at_places(row: &[u8], places: &[(usize, usize)], cells: &mut Vec<(u32, u32)>) {
    let begins = |byte: &u8| byte & 0xc0 != 0x80;
    let wide = !row.is_ascii();
    let byte_of = |character: usize| match wide {
        false => character.min(row.len()),
        true => (0..row.len())
            .filter(|at| begins(&row[*at]))
            .nth(character)
            .unwrap_or(row.len()),
    };
    for (start, width) in places {
        let (from, to) = (byte_of(*start), byte_of(start.saturating_add(*width)));
        if from < row.len() {
            cells.push((from as u32, to as u32));
        }
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
        let mut records = Records::new(Box::new(text), Cut::Delimiter(b','), Some(b'#'), limits);
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
