//! The decimal sign of a file, and the sign between groups of three digits.

use super::Hints;
use super::cells::Look;

/// The signs in the numbers of a file.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Signs {
    pub decimal: char,
    pub thousands: Option<char>,
    /// A row and cell of which it cannot be told whether the sign is a decimal one; only where no cell decides.
    pub unsure: Option<(usize, String)>,
}

/// How often each sign was seen to be what.
#[derive(Default)]
struct Seen {
    decimal: [usize; 2],
    thousands: [usize; 2],
    unsure: [Option<(usize, String)>; 2],
    apostrophe: bool,
}

const SIGNS: [char; 2] = ['.', ','];

impl Signs {
    pub(super) fn of(rows: &[(usize, Vec<String>)], delimiter: char, hints: &Hints) -> Self {
        let mut seen = Seen::default();
        for (row, cells) in rows {
            for cell in cells.iter().filter(|cell| Look::of(cell) == Look::Number) {
                seen.add(*row, cell);
            }
        }
        let given = hints
            .decimal
            .as_deref()
            .and_then(|sign| SIGNS.iter().position(|s| s.to_string() == sign));
        seen.decide(delimiter, given)
    }
}

impl Seen {
    fn add(&mut self, row: usize, cell: &str) {
        self.apostrophe |= cell.contains('\'');
        let count = |sign: char| cell.matches(sign).count();
        match (count('.'), count(',')) {
            (0, 0) => {}
            (0, 1) => self.one(1, row, cell),
            (1, 0) => self.one(0, row, cell),
            (0, _) => self.thousands[1] += 1,
            (_, 0) => self.thousands[0] += 1,
            _ => {
                let last = usize::from(cell.rfind(',') > cell.rfind('.'));
                self.decimal[last] += 1;
                self.thousands[1 - last] += 1;
            }
        }
    }

    /// A cell with one sign: a group of three digits behind it leaves open what it is, unless the number would be none.
    fn one(&mut self, sign: usize, row: usize, cell: &str) {
        let unsigned = cell.trim_start_matches(['-', '+']);
        let (whole, rest) = unsigned.split_once(SIGNS[sign]).unwrap_or((unsigned, ""));
        let joined: f64 = format!("{whole}{rest}").parse().unwrap_or(0.0);
        // Grouped, it would have to be a pressure [hPa, Pa] or an irradiance: no other reading is that large.
        let grouped = matches!(whole.len(), 1..=3) && !whole.starts_with('0') && rest.len() == 3;
        let possible = (1000.0..=1600.0).contains(&joined) || (30_000.0..=110_000.0).contains(&joined);
        if grouped && possible {
            self.unsure[sign].get_or_insert_with(|| (row, cell.to_string()));
        } else {
            self.decimal[sign] += 1;
        }
    }

    fn decide(self, delimiter: char, given: Option<usize>) -> Signs {
        let sure = match self.decimal {
            _ if given.is_some() => given,
            [0, 0] if delimiter == ',' => Some(0),
            [0, 0] if self.thousands[0] > 0 => Some(1),
            [0, 0] if self.thousands[1] > 0 => Some(0),
            [0, 0] => None,
            [points, commas] => Some(usize::from(commas > points)),
        };
        let unsure = self.unsure.iter().flatten().next().cloned();
        let decimal = sure.unwrap_or(0);
        let other = 1 - decimal;
        let grouped = self.thousands[other] > 0 || self.unsure[other].is_some();
        Signs {
            decimal: SIGNS[decimal],
            thousands: if grouped {
                Some(SIGNS[other])
            } else {
                self.apostrophe.then_some('\'')
            },
            unsure: unsure.filter(|_| sure.is_none()),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn signs(cells: &[&str], delimiter: char) -> (char, Option<char>, bool) {
        let rows = vec![(2, cells.iter().map(|cell| cell.to_string()).collect())];
        let signs = Signs::of(&rows, delimiter, &Hints::default());
        (signs.decimal, signs.thousands, signs.unsure.is_some())
    }

    #[test]
    fn signs_are_told_by_the_cells_that_can_be_only_one_thing() {
        assert_eq!(signs(&["20,5", "1013"], ';'), (',', None, false));
        assert_eq!(signs(&["20,5", "1.013,2"], ';'), (',', Some('.'), false));
        assert_eq!(signs(&["20,5", "1.013"], ';'), (',', Some('.'), false));
        assert_eq!(signs(&["20.5", "1,013.2"], ','), ('.', Some(','), false));
        assert_eq!(signs(&["20.125", "45.503"], ';'), ('.', None, false));
        assert_eq!(signs(&["1'013.2"], ';'), ('.', Some('\''), false));
        assert_eq!(signs(&["0.125"], ';'), ('.', None, false));
    }

    #[test]
    fn a_lone_group_of_three_is_not_decided() {
        assert_eq!(signs(&["20", "1,013"], ';'), ('.', Some(','), true));
        assert!(signs(&["20", "1.013"], ';').2);
        assert_eq!(signs(&["20", "1.013"], ','), ('.', None, false), "commas are taken");
    }
}
