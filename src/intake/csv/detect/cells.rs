//! Cells of a sample: cut out, and told apart by what they look like.

/// Cuts one line at a delimiter outside quotes; quotes and outer spaces are taken off.
pub(super) fn cut(line: &str, delimiter: char) -> Vec<String> {
    let mut cells = Vec::new();
    let mut cell = String::new();
    let mut quoted = false;
    let mut letters = line.chars().peekable();
    while let Some(letter) = letters.next() {
        match letter {
            '"' if quoted && letters.peek() == Some(&'"') => {
                cell.push('"');
                letters.next();
            }
            '"' => quoted = !quoted,
            other if other == delimiter && !quoted => cells.push(std::mem::take(&mut cell)),
            other => cell.push(other),
        }
    }
    cells.push(cell);
    cells
        .iter()
        .map(|cell| cell.trim_matches(|c: char| c.is_ascii_whitespace()).to_string())
        .collect()
}

/// What a cell looks like.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Look {
    Empty,
    Number,
    Time,
    Mark,
    Text,
}

const MARKS: [&str; 12] = [
    "nan", "na", "n/a", "null", "-", "--", "---", "m", "***", "#n/a", "none", "missing",
];

impl Look {
    pub(super) fn of(cell: &str) -> Self {
        if cell.is_empty() {
            Self::Empty
        } else if is_number(cell) {
            Self::Number
        } else if MARKS.contains(&cell.to_lowercase().as_str()) {
            Self::Mark
        } else if is_time(cell) {
            Self::Time
        } else {
            Self::Text
        }
    }

    /// A cell of a data row.
    pub(super) fn is_datum(self) -> bool {
        matches!(self, Self::Number | Self::Time)
    }
}

/// Digits with signs between them, whichever sign is the decimal one.
fn is_number(cell: &str) -> bool {
    let unsigned = cell.trim_start_matches(['-', '+']);
    let (mantissa, exponent) = unsigned.split_once(['e', 'E']).unwrap_or((unsigned, "0"));
    let exponent = exponent.trim_start_matches(['-', '+']);
    let digits = mantissa.chars().filter(char::is_ascii_digit).count();
    let rest = mantissa
        .chars()
        .all(|c| c.is_ascii_digit() || matches!(c, '.' | ',' | '\''));
    let points = mantissa.matches('.').count();
    let date = points == 2 && !mantissa.contains(',') && mantissa.split('.').skip(1).any(|group| group.len() != 3);
    digits > 0 && rest && !date && !exponent.is_empty() && exponent.chars().all(|c| c.is_ascii_digit())
}

/// Looks like a date, a time of day or both: begins with a digit or a month, and holds little but digits and their signs.
fn is_time(cell: &str) -> bool {
    let digits = cell.chars().filter(char::is_ascii_digit).count();
    let letters = cell.chars().filter(|c| c.is_alphabetic()).count();
    let signs = cell.chars().filter(|c| matches!(c, ':' | '-' | '/' | '.')).count();
    let known = |c: char| c.is_alphanumeric() || matches!(c, ':' | '-' | '/' | '.' | ' ' | ',' | '+');
    let months = [
        "jan", "feb", "mar", "apr", "may", "jun", "jul", "aug", "sep", "oct", "nov", "dec",
    ];
    let begins = cell.starts_with(|c: char| c.is_ascii_digit())
        || months.iter().any(|month| cell.to_lowercase().starts_with(month));
    begins && digits >= 2 && letters <= 9 && digits >= letters && (signs > 0 || letters >= 2) && cell.chars().all(known)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn cells_are_cut_outside_quotes() {
        assert_eq!(cut("a; \"b;\"\"c\" ;d", ';'), ["a", "b;\"c", "d"]);
        assert_eq!(cut("", ','), [""]);
    }

    #[test]
    fn cells_are_told_apart() {
        for number in ["1", "-1.5", "1.013,25", "1,013.25", "+3e-2", "1'013.2", ".5"] {
            assert_eq!(Look::of(number), Look::Number, "{number}");
        }
        for time in [
            "2026-01-31",
            "31.01.2026 13:00",
            "1/2/26 1:00 PM",
            "13:05",
            "3 Mar 2026 04:00",
            "2026-01-01T00:00:00Z",
        ] {
            assert_eq!(Look::of(time), Look::Time, "{time}");
        }
        for text in ["temp", "FM-15", "T1", "2m", "°C", "2026-01-01 00:00;20", "e5"] {
            assert_eq!(Look::of(text), Look::Text, "{text}");
        }
        assert_eq!((Look::of(""), Look::of("NaN")), (Look::Empty, Look::Mark));
    }
}
