//! The table in a sample: which delimiter, where its header is, and where its data begin.

use super::Hints;
use super::cells::{Look, cut};
use super::meaning::is_unit;
use super::sample::Sample;
use super::signs::Signs;
use crate::intake::csv::layout::Dialect;
use crate::model::weather::WeatherFault;

/// Delimiters that are tried, in the order in which a draw is decided.
const DELIMITERS: [char; 4] = [',', ';', '\t', '|'];
/// Columns at most: more than any weather has.
const MOST_COLUMNS: usize = 1000;
/// Rows of the header at most: names, sub-names, units.
const HEADER_ROWS: usize = 3;

/// A sample cut into a header and rows.
pub(super) struct Table {
    pub delimiter: char,
    /// Lines before the header.
    pub preamble: Vec<String>,
    /// Line of the names, from 0; none where there are no names.
    pub header: Option<usize>,
    /// Rows of the header.
    pub header_rows: usize,
    /// What each column is called: the first header row, and what the others add.
    pub names: Vec<Name>,
    /// Line of the first data row, from 0.
    pub first: usize,
    /// The data rows of the sample with their line, from 1.
    pub rows: Vec<(usize, Vec<String>)>,
    /// What a comment line begins with, where there are any among the data.
    pub comment: Option<char>,
    pub signs: Signs,
}

/// What a column is called.
#[derive(Debug, Clone, Default)]
pub(super) struct Name {
    /// In the first header row.
    pub first: String,
    /// In further header rows that hold no units.
    pub more: String,
    /// In a row of units.
    pub unit: String,
}

impl Table {
    pub(super) fn find(sample: &Sample, hints: &Hints) -> Result<Self, WeatherFault> {
        let wanted = hints.delimiter.as_deref().map(|given| match given {
            "tab" | "\\t" => '\t',
            other => other.chars().next().unwrap_or(','),
        });
        let tried: Vec<char> = wanted.map_or(DELIMITERS.to_vec(), |one| vec![one]);
        let grids = tried
            .into_iter()
            .filter_map(|delimiter| Grid::cut(&sample.lines, delimiter));
        let best = grids.reduce(|best, grid| if grid.score > best.score { grid } else { best });
        let grid = best.ok_or_else(|| no_table(&sample.lines))?;
        Ok(grid.table(&sample.lines, hints))
    }

    /// The dialect by which the whole file is read.
    pub(super) fn dialect(&self, encoding: &str) -> Dialect {
        Dialect {
            encoding: encoding.into(),
            delimiter: if self.delimiter == '\t' {
                "tab".into()
            } else {
                self.delimiter.to_string()
            },
            decimal: self.signs.decimal.to_string(),
            thousands: self.signs.thousands.map(|sign| sign.to_string()),
            header_rows: self.header_rows,
            skip_rows: self.header.unwrap_or(self.first),
            comment: self.comment.map(|mark| mark.to_string()),
            fixed_width: Vec::new(),
        }
    }
}

fn no_table(lines: &[String]) -> WeatherFault {
    let seen: String = lines
        .iter()
        .find(|line| !line.trim().is_empty())
        .map_or(String::new(), |line| line.chars().take(60).collect());
    let detail = format!(
        "expected rows of cells with numbers, cut by a comma, semicolon, tab or |; found none (the file begins with {seen:?}). \
         Send the file as CSV, or a layout with dialect.fixed_width for columns without delimiters"
    );
    WeatherFault::whole("no_table", detail)
}

/// The lines cut at one delimiter.
struct Grid {
    delimiter: char,
    rows: Vec<Vec<String>>,
    width: usize,
    score: f64,
}

impl Grid {
    /// `None` when this delimiter makes no table.
    fn cut(lines: &[String], delimiter: char) -> Option<Self> {
        let rows: Vec<Vec<String>> = lines.iter().map(|line| cut(line, delimiter)).collect();
        let width = usual_width(&rows)?;
        let fits: Vec<&Vec<String>> = rows.iter().filter(|row| row.len() == width).collect();
        let looks = || fits.iter().flat_map(|row| row.iter().map(|cell| Look::of(cell)));
        let filled = looks().filter(|look| *look != Look::Empty).count();
        let data = looks().filter(|look| look.is_datum()).count();
        let lines = rows
            .iter()
            .filter(|row| row.iter().any(|cell| !cell.is_empty()))
            .count();
        let score = fits.len() as f64 / lines.max(1) as f64 * data as f64 / filled.max(1) as f64;
        let grid = Self {
            delimiter,
            rows,
            width,
            score,
        };
        (data > 0 && grid.first_data().is_some()).then_some(grid)
    }

    /// A row of readings: as wide as the others, at least a third of its cells numbers or times.
    fn is_data(&self, at: usize) -> bool {
        let row = &self.rows[at];
        let looks: Vec<Look> = row
            .iter()
            .map(|cell| Look::of(cell))
            .filter(|look| *look != Look::Empty)
            .collect();
        let data = looks.iter().filter(|look| look.is_datum()).count();
        row.len() == self.width && data >= 2 && data * 3 >= looks.len()
    }

    /// The first data row that is followed by others.
    fn first_data(&self) -> Option<usize> {
        let follows = |at: &usize| {
            let next: Vec<usize> = (*at..self.rows.len())
                .filter(|at| !is_blank(&self.rows[*at]))
                .take(4)
                .collect();
            next.iter().filter(|at| self.is_data(**at)).count() * 4 >= next.len() * 3
        };
        (0..self.rows.len()).filter(|at| self.is_data(*at)).find(follows)
    }

    fn table(self, lines: &[String], hints: &Hints) -> Table {
        let first = self.first_data().unwrap_or(0);
        let mut header = self.header_above(first);
        let mut names = names(&self.rows, &header, self.width);
        header.sort_unstable();
        units_above(&self.rows[..header.first().copied().unwrap_or(first)], &mut names);
        let named = header.first().copied();
        let comment_in_header = named.is_some_and(|at| comment_of(&lines[at]).is_some());
        let comment = lines[first..]
            .iter()
            .find_map(|line| comment_of(line))
            .filter(|_| !comment_in_header);
        let rows: Vec<(usize, Vec<String>)> = self
            .rows
            .iter()
            .enumerate()
            .skip(first)
            .filter(|(at, row)| !is_blank(row) && (comment.is_none() || comment_of(&lines[*at]) != comment))
            .map(|(at, row)| (at + 1, row.clone()))
            .collect();
        Table {
            delimiter: self.delimiter,
            preamble: lines[..named.unwrap_or(first)].to_vec(),
            header: named,
            header_rows: header.len(),
            names,
            first,
            signs: Signs::of(&rows, self.delimiter, hints),
            rows,
            comment,
        }
    }

    /// The rows of the header, from below: as wide as the data, without numbers.
    fn header_above(&self, first: usize) -> Vec<usize> {
        let mut header = Vec::new();
        for at in (0..first).rev().filter(|at| !is_blank(&self.rows[*at])) {
            if !self.is_header(at) || header.len() == HEADER_ROWS {
                break;
            }
            // Lines between the rows of a header are not passed over when the file is read.
            if header
                .last()
                .is_some_and(|below: &usize| (at + 1..*below).any(|between| !is_blank(&self.rows[between])))
            {
                break;
            }
            header.push(at);
        }
        // A line of words above the names is a preamble, unless the row below holds units or the names repeat.
        while header.len() > 1 && !self.adds_to_names(&header) {
            header.pop();
        }
        header
    }

    fn is_header(&self, at: usize) -> bool {
        let row = &self.rows[at];
        let filled = row.iter().filter(|cell| !cell.is_empty()).count();
        let numbers = row.iter().filter(|cell| Look::of(cell).is_datum()).count();
        row.len() == self.width && numbers == 0 && filled >= 2
    }

    /// Whether the topmost of these rows names columns: the row below it holds units, or names that repeat.
    fn adds_to_names(&self, header: &[usize]) -> bool {
        let below = &self.rows[header[header.len() - 2]];
        let filled: Vec<&String> = below.iter().filter(|cell| !cell.is_empty()).collect();
        let mut distinct = filled.clone();
        distinct.sort();
        distinct.dedup();
        is_unit_row(below) || distinct.len() < filled.len()
    }
}

fn is_blank(row: &[String]) -> bool {
    row.iter().all(String::is_empty)
}

fn comment_of(line: &str) -> Option<char> {
    line.chars().next().filter(|mark| matches!(mark, '#' | '%' | '!'))
}

/// At least half of its words are units.
fn is_unit_row(row: &[String]) -> bool {
    let filled: Vec<&String> = row.iter().filter(|cell| !cell.is_empty()).collect();
    let units = filled.iter().filter(|cell| is_unit(cell)).count();
    units > 0 && units * 2 >= filled.len()
}

/// The width that most rows of the second half have; at least two cells.
fn usual_width(rows: &[Vec<String>]) -> Option<usize> {
    let mut counts = std::collections::BTreeMap::<usize, usize>::new();
    for row in rows[rows.len() / 2..]
        .iter()
        .chain(rows.iter().rev().take(3))
        .filter(|row| !is_blank(row))
    {
        *counts.entry(row.len()).or_default() += 1;
    }
    counts
        .into_iter()
        .max_by_key(|(_, count)| *count)
        .map(|(width, _)| width)
        .filter(|width| (2..=MOST_COLUMNS).contains(width))
}

/// Units in a line of values under a line of names, as typical years have them: `Pressure Units` over `mbar`.
fn units_above(preamble: &[Vec<String>], names: &mut [Name]) {
    for pair in preamble.windows(2) {
        for name in names
            .iter_mut()
            .filter(|name| name.unit.is_empty() && !name.first.is_empty())
        {
            let called = |cell: &String| *cell == name.first || *cell == format!("{} Units", name.first);
            let value = pair[0].iter().position(called).and_then(|at| pair[1].get(at));
            if let Some(unit) = value.filter(|cell| is_unit(cell)) {
                name.unit.clone_from(unit);
            }
        }
    }
}

fn names(rows: &[Vec<String>], header: &[usize], width: usize) -> Vec<Name> {
    let mut names = vec![Name::default(); width];
    for (place, at) in header.iter().rev().enumerate() {
        let row = &rows[*at];
        let units = place > 0 && is_unit_row(row);
        let mut last = String::new();
        for (name, cell) in names.iter_mut().zip(row) {
            match (place, units) {
                (0, _) => name.first.clone_from(cell),
                (_, true) => name.unit.clone_from(cell),
                (_, false) => name.more = format!("{} {cell}", name.more).trim().to_string(),
            }
            if place == 0 && header.len() > 1 {
                // Merged cells of a sheet: the name stands over the first of its columns.
                if cell.is_empty() {
                    name.more.clone_from(&last);
                } else {
                    last.clone_from(cell);
                }
            }
        }
    }
    names
}
