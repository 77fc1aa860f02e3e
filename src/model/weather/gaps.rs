//! Missing hours: short runs are interpolated, long ones stay.

/// Fills runs of up to `max_gap_hours` NaN between two known hours, on the straight line between them. Runs at either end
/// stay. Returns which hours were filled.
pub(super) fn fill(values: &mut [f64], max_gap_hours: usize) -> Vec<bool> {
    let mut filled = vec![false; values.len()];
    let mut last_known: Option<usize> = None;
    for hour in 0..values.len() {
        if values[hour].is_nan() {
            continue;
        }
        if let Some(before) = last_known.filter(|before| hour - before > 1 && hour - before - 1 <= max_gap_hours) {
            bridge(values, before, hour);
            filled[before + 1..hour].fill(true);
        }
        last_known = Some(hour);
    }
    filled
}

/// Fills every NaN: on the line between two known hours, level beyond the ends. Returns how many were filled; leaves a
/// column without any known hour alone.
pub(super) fn fill_all(values: &mut [f64]) -> usize {
    let missing = values.iter().filter(|v| v.is_nan()).count();
    fill(values, usize::MAX);
    let Some(first) = values.iter().position(|v| !v.is_nan()) else {
        return 0;
    };
    let head = values[first];
    values[..first].fill(head);
    for hour in first + 1..values.len() {
        if values[hour].is_nan() {
            values[hour] = values[hour - 1];
        }
    }
    missing
}

fn bridge(values: &mut [f64], before: usize, after: usize) {
    let (from, to) = (values[before], values[after]);
    let span = (after - before) as f64;
    for (step, value) in values[before + 1..after].iter_mut().enumerate() {
        *value = from + (to - from) * (step + 1) as f64 / span;
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    const N: f64 = f64::NAN;

    #[test]
    fn short_gaps_are_filled_on_a_line_and_long_ones_stay() {
        let mut values = [N, 1.0, N, N, N, 5.0, N, N, N, N, 6.0, N];
        let filled = fill(&mut values, 3);
        assert_eq!(values[1..6], [1.0, 2.0, 3.0, 4.0, 5.0]);
        assert!(values[0].is_nan() && values[6..10].iter().all(|v| v.is_nan()) && values[11].is_nan());
        assert_eq!(filled.iter().filter(|f| **f).count(), 3);
    }

    #[test]
    fn no_gap_is_filled_when_none_may_be() {
        let mut values = [1.0, N, 3.0];
        assert!(fill(&mut values, 0).iter().all(|f| !f));
        assert!(values[1].is_nan());
    }

    #[test]
    fn everything_is_filled_when_asked_for() {
        let mut values = [N, 2.0, N, 4.0, N, N];
        assert_eq!(fill_all(&mut values), 4);
        assert_eq!(values, [2.0, 2.0, 3.0, 4.0, 4.0, 4.0]);
        let mut none = [N, N];
        assert_eq!(fill_all(&mut none), 0);
        assert!(none[0].is_nan());
        assert_eq!(fill_all(&mut []), 0);
    }
}
