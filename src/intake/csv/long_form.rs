//! Files with one value a row: each value holds until the next one of its name, and is looked at every ten minutes.

use crate::model::weather::WeatherFault;

/// How often the values are looked at [s]: finer than the hours they are averaged to.
const EVERY_S: i64 = 600;
/// Longest time a value holds, where the layout does not say [h]: a logger that notes changes is silent in steady air, but
/// not for days.
pub(super) const HOLD_HOURS: f64 = 24.0;

/// One value of one column.
struct Noted {
    unix_s: i64,
    column: usize,
    value: f64,
    row: u32,
}

/// Values as they are noted, in any order.
#[derive(Default)]
pub(super) struct Notes(Vec<Noted>);

/// Values looked at every ten minutes.
#[derive(Default)]
pub(super) struct Looked {
    pub time_unix_s: Vec<i64>,
    pub row: Vec<u32>,
    pub values: Vec<Vec<f64>>,
}

impl Notes {
    pub(super) fn add(&mut self, unix_s: i64, column: usize, value: f64, row: usize) {
        let row = u32::try_from(row).unwrap_or(u32::MAX);
        self.0.push(Noted {
            unix_s,
            column,
            value,
            row,
        });
    }

    /// The values at every tenth minute from the first note to the last; moments at which none holds are left out.
    pub(super) fn looked_at(
        mut self,
        columns: usize,
        hold_hours: Option<f64>,
        most: usize,
    ) -> Result<Looked, WeatherFault> {
        self.0.sort_by_key(|noted| noted.unix_s);
        let mut looked = Looked {
            values: vec![Vec::new(); columns],
            ..Looked::default()
        };
        let (Some(first), Some(last)) = (self.0.first(), self.0.last()) else {
            return Ok(looked);
        };
        let start_s = first.unix_s.div_euclid(EVERY_S) * EVERY_S
            + if first.unix_s.rem_euclid(EVERY_S) > 0 {
                EVERY_S
            } else {
                0
            };
        let end_s = last.unix_s;
        let steps = (end_s - start_s) / EVERY_S;
        if usize::try_from(steps).is_ok_and(|steps| steps > most) {
            return Err(too_long(last.row, steps));
        }
        let hold_s = (hold_hours.unwrap_or(HOLD_HOURS) * 3600.0) as i64;
        let mut held: Vec<Option<(i64, f64)>> = vec![None; columns];
        let mut next = self.0.iter().peekable();
        let mut row = first.row;
        for at in (0..=steps.max(0)).map(|step| start_s + step * EVERY_S) {
            while let Some(noted) = next.next_if(|noted| noted.unix_s <= at) {
                held[noted.column] = Some((noted.unix_s, noted.value));
                row = noted.row;
            }
            let value = |held: &Option<(i64, f64)>| {
                held.filter(|(since, _)| at - since <= hold_s)
                    .map_or(f64::NAN, |(_, value)| value)
            };
            if held.iter().any(|held| !value(held).is_nan()) {
                looked.time_unix_s.push(at);
                looked.row.push(row);
                looked
                    .values
                    .iter_mut()
                    .zip(&held)
                    .for_each(|(column, held)| column.push(value(held)));
            }
        }
        Ok(looked)
    }
}

fn too_long(row: u32, steps: i64) -> WeatherFault {
    let detail = format!(
        "the values span {} days; is the time of this row wrong?",
        steps * EVERY_S / 86_400
    );
    WeatherFault::row(row as usize, None, "too_many_rows", detail)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_value_holds_until_the_next_and_not_for_ever() {
        let mut notes = Notes::default();
        notes.add(1200, 0, 5.0, 3);
        notes.add(0, 0, 1.0, 1);
        notes.add(590, 1, 50.0, 2);
        notes.add(6000, 1, f64::NAN, 4);
        let looked = notes.looked_at(2, Some(1.0), 1000).unwrap();
        assert_eq!(looked.time_unix_s[..4], [0, 600, 1200, 1800]);
        assert_eq!(looked.values[0][..4], [1.0, 1.0, 5.0, 5.0]);
        assert!(looked.values[1][0].is_nan());
        assert_eq!((looked.values[1][1], looked.row[2]), (50.0, 3));
        assert_eq!(
            looked.time_unix_s.last(),
            Some(&4800),
            "an hour after 1200, and nothing holds from 4200 + 600 on"
        );
    }

    #[test]
    fn a_wrong_year_does_not_fill_the_memory() {
        let mut notes = Notes::default();
        notes.add(0, 0, 1.0, 1);
        notes.add(600 * 1_000_000, 0, 1.0, 7);
        let fault = notes.looked_at(1, None, 1000).err().unwrap();
        assert_eq!((fault.row, fault.code), (Some(7), "too_many_rows"));
        assert_eq!(Notes::default().looked_at(1, None, 10).unwrap().time_unix_s.len(), 0);
    }
}
