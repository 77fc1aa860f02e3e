//! Numbers in cells: plain decimals the quick way, the rest through the standard library.

/// Every power of ten that a double holds exactly.
const POWERS: [f64; 23] = [
    1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20,
    1e21, 1e22,
];
/// Up to this many digits a whole number is exact in a double.
const EXACT_DIGITS: usize = 15;

/// Reads a decimal number such as `-12.5` or `1.2e3`, with the given decimal sign; `None` for anything else, `inf`
/// and `nan` included. The result is the nearest double, as the standard library gives it.
pub(super) fn decimal(cell: &[u8], sign: u8) -> Option<f64> {
    plain(cell, sign).or_else(|| general(cell, sign))
}

/// A sign, digits, a decimal sign, digits; 15 of them at most. Both parts are exact, so one division rounds correctly.
fn plain(cell: &[u8], sign: u8) -> Option<f64> {
    let (negative, unsigned) = match cell {
        [b'-', rest @ ..] => (true, rest),
        [b'+', rest @ ..] => (false, rest),
        rest => (false, rest),
    };
    let (mut whole, mut count, mut behind) = (0u64, 0, None);
    for byte in unsigned {
        match byte {
            b'0'..=b'9' => {
                whole = whole.wrapping_mul(10).wrapping_add(u64::from(byte - b'0'));
                count += 1;
            }
            other if *other == sign && behind.is_none() => behind = Some(count),
            _ => return None,
        }
    }
    if count == 0 || count > EXACT_DIGITS {
        return None;
    }
    let value = whole as f64 / POWERS[behind.map_or(0, |before| count - before)];
    Some(if negative { -value } else { value })
}

#[cold]
fn general(cell: &[u8], sign: u8) -> Option<f64> {
    let text = std::str::from_utf8(cell).ok()?;
    let allowed = |c: char| c.is_ascii_digit() || matches!(c, '+' | '-' | 'e' | 'E') || c == char::from(sign);
    if !text.chars().all(allowed) {
        return None;
    }
    let value: f64 = if sign == b'.' {
        text.parse()
    } else {
        text.replace(char::from(sign), ".").parse()
    }
    .ok()?;
    value.is_finite().then_some(value)
}

/// A number with a sign between its groups of three digits before the decimal sign: `1.013,25`. Without groups it is a
/// plain number; groups of another length are none.
pub(super) fn grouped(cell: &[u8], sign: u8, thousands: u8) -> Option<f64> {
    if !cell.contains(&thousands) {
        return decimal(cell, sign);
    }
    let unsigned = cell
        .strip_prefix(b"-")
        .or_else(|| cell.strip_prefix(b"+"))
        .unwrap_or(cell);
    let whole = unsigned.split(|b| *b == sign).next().unwrap_or_default();
    let mut groups = whole.split(|b| *b == thousands);
    let first = groups.next().unwrap_or_default();
    let sound = (1..=3).contains(&first.len()) && groups.all(|group| group.len() == 3);
    let joined: Vec<u8> = cell.iter().copied().filter(|b| *b != thousands).collect();
    sound.then(|| decimal(&joined, sign))?
}

/// Digits and nothing else, as a whole number.
pub(super) fn digits(text: &[u8]) -> Option<i64> {
    let step = |n: i64, b: &u8| b.is_ascii_digit().then(|| n * 10 + i64::from(b - b'0'));
    (1..=18).contains(&text.len()).then(|| text.iter().try_fold(0, step))?
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn numbers_and_what_is_none() {
        for (cell, value) in [
            ("0", 0.0),
            ("-12.5", -12.5),
            ("+3", 3.0),
            (".5", 0.5),
            ("7.", 7.0),
            ("1.2e3", 1200.0),
        ] {
            assert_eq!(decimal(cell.as_bytes(), b'.'), Some(value), "{cell}");
        }
        for bad in [
            "", "-", ".", "1.2.3", "1,5", "nan", "inf", "infinity", "0x10", "1e999", "12 ", "1_000", "5s", "٣",
        ] {
            assert_eq!(decimal(bad.as_bytes(), b'.'), None, "{bad}");
        }
        assert_eq!(decimal(b"-1,25", b','), Some(-1.25));
        assert_eq!(decimal(b"1.25", b','), None);
        assert_eq!(decimal(b"1,2e1", b','), Some(12.0));
        assert_eq!(
            (digits(b"0042"), digits(b""), digits(b"-1"), digits(&[b'9'; 19])),
            (Some(42), None, None, None)
        );
    }

    #[test]
    fn groups_of_three_are_joined_and_others_refused() {
        let read = |cell: &str| grouped(cell.as_bytes(), b',', b'.');
        assert_eq!(
            (read("1.013,25"), read("-1.000.000"), read("5,5")),
            (Some(1013.25), Some(-1e6), Some(5.5))
        );
        assert_eq!(
            (read("1.01"), read("1013.250"), read("1.013.2"), read(".500")),
            (None, None, None, None)
        );
    }

    proptest! {
        /// The quick way is judged by the standard library, bit by bit.
        #[test]
        fn the_quick_way_is_the_nearest_double(text in "[-+]?[0-9]{0,17}(\\.[0-9]{0,17})?") {
            prop_assert_eq!(decimal(text.as_bytes(), b'.'), text.parse::<f64>().ok());
        }
    }
}
