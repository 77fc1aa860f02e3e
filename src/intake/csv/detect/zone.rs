//! The zone of times without an offset: from the header, a column, or a line above the header. Never from the machine.

use super::table::Table;
use super::words::TimeWord;
use crate::model::weather::zone::{Zone, offset_name, parse_offset_s};

/// A zone and where it was found.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Found {
    pub zone: String,
    pub from: String,
}

/// Names of standard time with one meaning: common practice, no source. Names that also mean a zone with summer time
/// (CET, EET) or several places (CST, IST) are asked for.
const STANDARD_TIMES: [(&str, &str); 6] = [
    ("EST", "-05:00"),
    ("MST", "-07:00"),
    ("PST", "-08:00"),
    ("AKST", "-09:00"),
    ("MEZ", "+01:00"),
    ("JST", "+09:00"),
];

/// A zone written in a text: `UTC`, `GMT+1`, `UTC-05:00`, an IANA name, or a name of standard time.
pub(super) fn written(text: &str) -> Option<String> {
    offset_behind_utc(text).or_else(|| {
        let parts = text.split(|c: char| !(c.is_alphanumeric() || matches!(c, '/' | '_' | '-' | '+')));
        parts.filter(|part| !part.is_empty()).find_map(|part| {
            let standard = STANDARD_TIMES
                .iter()
                .find(|(name, _)| *name == part)
                .map(|(_, offset)| offset.to_string());
            let named = || part.contains('/').then(|| Zone::parse(part).ok()).flatten();
            standard.or_else(|| named().map(|zone| zone.name().to_string()))
        })
    })
}

/// `UTC` or `GMT` as a word, with what follows it.
fn offset_behind_utc(text: &str) -> Option<String> {
    let upper = text.to_uppercase();
    let at = ["UTC", "GMT"].iter().filter_map(|name| word_at(&upper, name)).min()?;
    let rest: String = upper[at + 3..].chars().filter(|c| *c != ' ').take(6).collect();
    let rest = rest.replace(['\u{2212}', '\u{2013}'], "-").replace('±', "+");
    let signed = rest.starts_with(['+', '-']);
    let body: String = rest
        .chars()
        .skip(1)
        .take_while(|c| c.is_ascii_digit() || *c == ':')
        .collect();
    if !signed || body.is_empty() {
        return Some("UTC".into());
    }
    let padded = if body.len() == 1 || body.find(':') == Some(1) {
        format!("0{body}")
    } else {
        body
    };
    let offset_s = parse_offset_s(format!("{}{padded}", &rest[..1]).as_bytes())?;
    Some(zone_name(offset_s))
}

fn word_at(text: &str, word: &str) -> Option<usize> {
    let at = text.find(word)?;
    let letter = |c: Option<char>| c.is_some_and(char::is_alphabetic);
    let inside = letter(text[..at].chars().next_back()) || letter(text[at + word.len()..].chars().next());
    (!inside).then_some(at)
}

fn zone_name(offset_s: i64) -> String {
    if offset_s == 0 {
        "UTC".into()
    } else {
        offset_name(offset_s)
    }
}

/// A number of hours east of UTC.
fn of_hours(text: &str) -> Option<String> {
    let hours: f64 = text.trim().trim_start_matches('+').parse().ok()?;
    let quarters = hours * 4.0;
    let sound = (-12.0..=14.0).contains(&hours) && quarters.fract() == 0.0;
    sound.then(|| zone_name((hours * 3600.0) as i64))
}

/// A cell that is a zone and nothing else.
fn of_cell(cell: &str) -> Option<String> {
    let cell = cell.trim();
    Zone::parse(cell)
        .ok()
        .map(|zone| zone.name().to_string())
        .or_else(|| written(cell))
        .or_else(|| of_hours(cell))
}

/// A column of zones that all rows of the sample share.
pub(super) fn in_column(table: &Table, words: &[Vec<TimeWord>]) -> Option<Found> {
    let at = words.iter().position(|words| words.contains(&TimeWord::Zone))?;
    let mut cells = table
        .rows
        .iter()
        .filter_map(|(_, row)| row.get(at))
        .filter(|cell| !cell.is_empty());
    let first = cells.next()?;
    let same = cells.all(|cell| cell == first);
    let from = || format!("column {:?}", table.names[at].first);
    same.then(|| of_cell(first))
        .flatten()
        .map(|zone| Found { zone, from: from() })
}

/// A zone in the lines above the header.
pub(super) fn in_preamble(table: &Table) -> Option<Found> {
    let lines: Vec<Vec<String>> = table
        .preamble
        .iter()
        .map(|line| super::cells::cut(line, table.delimiter))
        .collect();
    beside_its_name(&lines)
        .or_else(|| under_its_name(&lines))
        .or_else(|| in_station_line(&lines))
        .or_else(|| in_words(&table.preamble))
}

fn names_zone(cell: &str) -> bool {
    let words = super::meaning::words(cell).join(" ");
    [
        "time zone",
        "timezone",
        "zeitzone",
        "fuseau horaire",
        "tidssone",
        "tijdzone",
        "zona horaria",
        "fuso orario",
        "utc offset",
        "gmt offset",
        "tz",
    ]
    .contains(&words.as_str())
}

/// `Time zone,UTC+1` or `Time zone: -5`.
fn beside_its_name(lines: &[Vec<String>]) -> Option<Found> {
    let pair = |name: &str, value: &str| {
        let name = name.trim_start_matches(['#', ' ', '!', '%']);
        names_zone(name).then(|| of_cell(value)).flatten().map(|zone| Found {
            zone,
            from: format!("the line {name:?} above the header"),
        })
    };
    lines
        .iter()
        .flat_map(|line| line.windows(2))
        .find_map(|cells| pair(&cells[0], &cells[1]))
        .or_else(|| {
            let whole = lines.iter().flatten();
            whole
                .filter_map(|cell| cell.split_once([':', '=']))
                .find_map(|(name, value)| pair(name, value))
        })
}

/// A line of names above a line of values, as typical years have them.
fn under_its_name(lines: &[Vec<String>]) -> Option<Found> {
    lines.windows(2).find_map(|pair| {
        let at = pair[0].iter().position(|cell| names_zone(cell))?;
        let zone = of_cell(pair[1].get(at)?)?;
        Some(Found {
            zone,
            from: format!("{:?} above the header", pair[0][at]),
        })
    })
}

/// The line of a typical year: station, name, state, hours east of UTC, latitude, longitude, elevation.
fn in_station_line(lines: &[Vec<String>]) -> Option<Found> {
    lines.iter().find_map(|line| {
        let number = |at: usize| line.get(at)?.parse::<f64>().ok();
        let (hours, latitude, longitude) = (number(3)?, number(4)?, number(5)?);
        let sound = line.len() >= 7 && number(6).is_some() && latitude.abs() <= 90.0 && longitude.abs() <= 180.0;
        let near = (hours * 15.0 - longitude).abs() <= 45.0;
        let zone = of_hours(&line[3]).filter(|_| sound && near)?;
        Some(Found {
            zone,
            from: "the station line above the header".into(),
        })
    })
}

/// A line of words that speaks of the times' zone.
fn in_words(lines: &[String]) -> Option<Found> {
    let speaks = |line: &&String| {
        let words = super::meaning::words(line);
        let has = |list: &[&str]| words.iter().any(|word| list.contains(&word.as_str()));
        has(&[
            "times",
            "time",
            "zeiten",
            "zeit",
            "zone",
            "timezone",
            "zeitzone",
            "clock",
            "timestamps",
            "heures",
            "horas",
            "tider",
            "tijden",
            "orari",
        ])
    };
    let zone = |line: &String| {
        written(line).map(|zone| Found {
            zone,
            from: format!("the line {:?} above the header", line.trim()),
        })
    };
    lines.iter().filter(speaks).find_map(zone)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn zones_as_they_are_written() {
        for (text, zone) in [
            ("Date Time, GMT-05:00", "-05:00"),
            ("Zeit (UTC+1)", "+01:00"),
            ("time_utc", "UTC"),
            ("Time [UTC]", "UTC"),
            ("Uhrzeit MEZ", "+01:00"),
            ("time (Europe/Oslo)", "Europe/Oslo"),
            ("UTC+05:30", "+05:30"),
            ("GMT +0", "UTC"),
        ] {
            assert_eq!(written(text).as_deref(), Some(zone), "{text}");
        }
        for none in ["Time", "local time", "CET", "outcome", "date/time"] {
            assert_eq!(written(none), None, "{none}");
        }
    }

    #[test]
    fn zones_above_the_header() {
        let cut = |lines: &[&str]| {
            lines
                .iter()
                .map(|line| super::super::cells::cut(line, ','))
                .collect::<Vec<_>>()
        };
        assert_eq!(
            beside_its_name(&cut(&["Site,Skerry", "Time zone,UTC+1"])).unwrap().zone,
            "+01:00"
        );
        assert_eq!(
            beside_its_name(&cut(&["# Zeitzone: Europe/Oslo"])).unwrap().zone,
            "Europe/Oslo"
        );
        assert_eq!(
            under_its_name(&cut(&["Source,Time Zone,Elevation", "x,-8,561"]))
                .unwrap()
                .zone,
            "-08:00"
        );
        assert_eq!(
            in_station_line(&cut(&["1,\"SKERRY\",AK,-9.0,55.3,-160.5,7"]))
                .unwrap()
                .zone,
            "-09:00"
        );
        assert_eq!(in_words(&["All times in UTC".into()]).unwrap().zone, "UTC");
        assert_eq!(in_words(&["Report made for UTC Ltd".into()]), None);
    }
}
