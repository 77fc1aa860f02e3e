//! Units that follow from the values themselves, and marks that cannot be readings.

use super::survey::Values;
use crate::model::weather::{Quantity, Unit};

/// The only unit the values can be in; `None` where several would do.
pub(super) fn from_values(quantity: Quantity, values: &Values) -> Option<Unit> {
    if values.count == 0 {
        return None;
    }
    match quantity {
        Quantity::AirTemperature | Quantity::DewPoint | Quantity::WetBulb => {
            (values.low > 170.0 && values.high < 340.0).then_some(Unit::Kelvin)
        }
        Quantity::RelativeHumidity if values.high > 1.5 => Some(Unit::Percent),
        Quantity::RelativeHumidity if values.high <= 1.05 && values.high > 0.05 => Some(Unit::Fraction),
        Quantity::StationPressure | Quantity::SeaLevelPressure => pressure(values),
        _ => None,
    }
}

/// What barometers at inhabited places read in each unit; 500 to 815 may be hPa on a mountain or mmHg below it.
fn pressure(values: &Values) -> Option<Unit> {
    let ranges = [
        (Unit::Hectopascal, 815.0, 1100.0),
        (Unit::InchHg, 18.0, 32.5),
        (Unit::Kilopascal, 50.0, 110.0),
        (Unit::Pascal, 50_000.0, 110_000.0),
    ];
    let fits = |(_, low, high): &&(Unit, f64, f64)| values.low >= *low && values.high <= *high;
    ranges.iter().find(fits).map(|(unit, _, _)| *unit)
}

/// The marks in a column that no instrument would write as a reading.
pub(super) fn missing_marks(quantity: Quantity, unit: Unit, values: &Values) -> Vec<(String, usize)> {
    let (low, high) = possible(quantity);
    let slope_and_intercept = unit.si_line();
    let si = |number: f64| number * slope_and_intercept.0 + slope_and_intercept.1;
    let mark = |(text, (number, count)): (&String, &(f64, usize))| {
        (!(low..=high).contains(&si(*number))).then(|| (text.clone(), *count))
    };
    values.marks.iter().filter_map(mark).collect()
}

/// What can be read at the ground, in SI, with room to spare.
fn possible(quantity: Quantity) -> (f64, f64) {
    match quantity {
        Quantity::AirTemperature | Quantity::DewPoint | Quantity::WetBulb => (180.0, 340.0),
        Quantity::RelativeHumidity => (-0.05, 1.1),
        Quantity::StationPressure | Quantity::SeaLevelPressure => (30_000.0, 110_000.0),
        Quantity::WindSpeed => (0.0, 115.0),
        Quantity::Shortwave => (-50.0, 1600.0),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn values(low: f64, high: f64) -> Values {
        Values {
            count: 10,
            low,
            high,
            ..Values::default()
        }
    }

    #[test]
    fn units_that_leave_no_choice() {
        assert_eq!(
            from_values(Quantity::RelativeHumidity, &values(20.0, 97.0)),
            Some(Unit::Percent)
        );
        assert_eq!(
            from_values(Quantity::RelativeHumidity, &values(0.2, 0.97)),
            Some(Unit::Fraction)
        );
        assert_eq!(
            from_values(Quantity::AirTemperature, &values(260.0, 300.0)),
            Some(Unit::Kelvin)
        );
        assert_eq!(from_values(Quantity::AirTemperature, &values(10.0, 30.0)), None);
        assert_eq!(
            from_values(Quantity::StationPressure, &values(28.9, 30.5)),
            Some(Unit::InchHg)
        );
        assert_eq!(
            from_values(Quantity::StationPressure, &values(98.0, 102.0)),
            Some(Unit::Kilopascal)
        );
        assert_eq!(from_values(Quantity::StationPressure, &values(730.0, 760.0)), None);
        assert_eq!(from_values(Quantity::WindSpeed, &values(0.0, 10.0)), None);
    }

    #[test]
    fn a_mark_counts_only_where_it_cannot_be_a_reading() {
        let mut seen = values(900.0, 1010.0);
        seen.marks.insert("999.9".into(), (999.9, 3));
        seen.marks.insert("-999".into(), (-999.0, 2));
        let marks = |quantity, unit| missing_marks(quantity, unit, &seen).len();
        assert_eq!(marks(Quantity::StationPressure, Unit::Hectopascal), 1);
        assert_eq!(marks(Quantity::AirTemperature, Unit::Celsius), 2);
    }
}
