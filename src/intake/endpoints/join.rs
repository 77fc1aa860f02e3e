//! Answers become one series of exactly the hours wanted.

use std::collections::HashMap;

use super::adapter::Parsed;
use super::report::{Nature, Stretch};
use super::span::{HOUR_S, HourSpan, hour_start};
use crate::model::notes::Assumption;
use crate::model::weather::{Label, RawReadings};

/// An understood answer with the hours it is taken for.
#[derive(Debug, Clone)]
pub struct Piece {
    /// The hours it is taken for.
    pub span: HourSpan,
    /// What kind of knowledge it is.
    pub nature: Nature,
    /// When it was fetched, seconds since 1970.
    pub fetched_unix_s: i64,
    /// True if it has expired.
    pub stale: bool,
    /// What it says.
    pub parsed: Parsed,
}

/// A column of readings.
type Column = fn(&RawReadings) -> Option<&Vec<f64>>;

/// One reading an hour from pieces in order of time; hours that no piece knows are NaN. Irradiance becomes the mean of the
/// hour that follows its label, so that the last hour keeps its own; seams are said.
pub fn join(pieces: &[Piece]) -> (RawReadings, Vec<Stretch>) {
    let readings = pieces.iter().map(Hourly::of).collect::<Vec<_>>();
    let all = |column: Column, shift_s: fn(&RawReadings) -> i64| {
        let known = pieces.iter().any(|piece| column(&piece.parsed.readings).is_some());
        known.then(|| {
            readings
                .iter()
                .flat_map(|hourly| hourly.column(column, shift_s))
                .collect::<Vec<f64>>()
        })
    };
    let (from_unix_s, hours) = (
        pieces.first().map_or(0, |piece| piece.span.from_unix_s),
        pieces.iter().map(|piece| piece.span.hours()).sum(),
    );
    let first = pieces.first().map(|piece| &piece.parsed.readings);
    let shortwave = all(|raw| raw.shortwave_w_m2.as_ref(), shortwave_shift_s);
    let mut joined = RawReadings {
        label: first.map_or(Label::Instant, |raw| raw.label),
        air_temp_k: all(|raw| Some(&raw.air_temp_k), |_| 0).unwrap_or_default(),
        relative_humidity: all(|raw| raw.relative_humidity.as_ref(), |_| 0),
        dew_point_k: all(|raw| raw.dew_point_k.as_ref(), |_| 0),
        pressure_pa: all(|raw| raw.pressure_pa.as_ref(), |_| 0),
        pressure_is_sea_level: first.is_some_and(|raw| raw.pressure_is_sea_level),
        wind_speed_m_s: all(|raw| raw.wind_speed_m_s.as_ref(), |_| 0),
        shortwave_label: shortwave.is_some().then_some(Label::MeanOfFollowingHour),
        shortwave_w_m2: shortwave,
        ..RawReadings::hourly(from_unix_s, hours)
    };
    hold_last_sunlight(&mut joined);
    let stretches = stretches(pieces, &joined);
    joined.assumptions.extend(seams(&stretches));
    (joined, stretches)
}

/// Readings of a piece by their time.
struct Hourly<'a> {
    raw: &'a RawReadings,
    span: HourSpan,
    at: HashMap<i64, usize>,
}

impl<'a> Hourly<'a> {
    fn of(piece: &'a Piece) -> Self {
        let raw = &piece.parsed.readings;
        Self {
            raw,
            span: piece.span,
            at: raw
                .time_unix_s
                .iter()
                .enumerate()
                .map(|(at, time)| (*time, at))
                .collect(),
        }
    }

    fn column(&self, column: Column, shift_s: fn(&RawReadings) -> i64) -> Vec<f64> {
        let (values, shift_s) = (column(self.raw), shift_s(self.raw));
        let value = |start: i64| Some(values?[*self.at.get(&(start + shift_s))?]);
        self.span
            .starts()
            .map(|start| value(start).unwrap_or(f64::NAN))
            .collect()
    }
}

/// From the start of an hour to the label of its irradiance [s].
fn shortwave_shift_s(raw: &RawReadings) -> i64 {
    match raw.shortwave_label.unwrap_or(raw.label) {
        Label::MeanOfPrecedingHour => HOUR_S,
        Label::Instant | Label::MeanOfFollowingHour => 0,
    }
}

/// The mean of the last hour is labelled by an hour that was not asked for.
fn hold_last_sunlight(joined: &mut RawReadings) {
    let Some([.., before, last]) = joined.shortwave_w_m2.as_deref_mut() else {
        return;
    };
    if last.is_nan() && !before.is_nan() {
        *last = *before;
        joined.assumptions.push(Assumption::new(
            "short-wave irradiance of the last hour",
            "as in the hour before",
            "only outdoor places, and only that hour",
        ));
    }
}

/// A forecast's hours before its making are recent days, not forecast.
fn stretches(pieces: &[Piece], joined: &RawReadings) -> Vec<Stretch> {
    let mut all = Vec::new();
    for piece in pieces {
        let made_unix_s = hour_start(piece.fetched_unix_s);
        let whole = [(piece.span, piece.nature)];
        let past = HourSpan {
            to_unix_s: made_unix_s,
            ..piece.span
        };
        let ahead = HourSpan {
            from_unix_s: made_unix_s,
            ..piece.span
        };
        let parts: Vec<(HourSpan, Nature)> = match piece.nature {
            Nature::Forecast => [(past, Nature::RecentDays), (ahead, Nature::Forecast)]
                .into_iter()
                .filter_map(|(part, nature)| Some((part.common(&piece.span)?, nature)))
                .collect(),
            _ => whole.to_vec(),
        };
        all.extend(parts.into_iter().map(|(span, nature)| Stretch {
            span,
            nature,
            fetched_unix_s: Some(piece.fetched_unix_s),
            stale: piece.stale,
            hours_missing: missing(joined, &span),
        }));
    }
    all
}

fn missing(joined: &RawReadings, span: &HourSpan) -> usize {
    let known = |column: &Option<Vec<f64>>, at: usize| column.as_ref().is_some_and(|values| !values[at].is_nan());
    let complete = |at: &usize| {
        !joined.air_temp_k[*at].is_nan() && (known(&joined.relative_humidity, *at) || known(&joined.dew_point_k, *at))
    };
    let start = joined.time_unix_s.first().copied().unwrap_or_default();
    let at = |unix_s: i64| ((unix_s - start) / HOUR_S) as usize;
    (at(span.from_unix_s)..at(span.to_unix_s))
        .filter(|at| !complete(at))
        .count()
}

fn seams(stretches: &[Stretch]) -> impl Iterator<Item = Assumption> {
    stretches
        .windows(2)
        .filter(|pair| pair[0].nature != pair[1].nature)
        .map(|pair| {
            let at = chrono::DateTime::from_timestamp(pair[1].span.from_unix_s, 0).unwrap_or_default();
            let value = format!(
                "{} before {}, {} from then on",
                pair[0].nature.words(),
                at.format("%Y-%m-%dT%H:00Z"),
                pair[1].nature.words()
            );
            Assumption::new(
                "seam in the weather",
                value,
                "a step between two kinds of knowledge, in the hours around it",
            )
        })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::intake::endpoints::{Coordinates, Served};

    fn piece(from: i64, to: i64, nature: Nature, first_reading: i64, temps: &[f64]) -> Piece {
        let at = Coordinates::new(1.0, 2.0).unwrap();
        Piece {
            span: HourSpan {
                from_unix_s: from * HOUR_S,
                to_unix_s: to * HOUR_S,
            },
            nature,
            fetched_unix_s: 4 * HOUR_S + 60,
            stale: false,
            parsed: Parsed {
                served: Served { at, elevation_m: None },
                readings: RawReadings {
                    air_temp_k: temps.to_vec(),
                    relative_humidity: Some(vec![0.5; temps.len()]),
                    shortwave_w_m2: Some(temps.iter().map(|t| t * 10.0).collect()),
                    shortwave_label: Some(Label::MeanOfPrecedingHour),
                    ..RawReadings::hourly(first_reading * HOUR_S, temps.len())
                },
            },
        }
    }

    #[test]
    fn pieces_are_cut_and_hours_nobody_knows_are_missing() {
        let pieces = [
            piece(1, 3, Nature::Reanalysis, 0, &[280.0, 281.0, 282.0, 283.0]),
            piece(3, 7, Nature::Forecast, 3, &[290.0, 291.0, 292.0]),
        ];
        let (joined, stretches) = join(&pieces);
        assert_eq!(joined.time_unix_s.first(), Some(&HOUR_S));
        assert_eq!(joined.air_temp_k[..5], [281.0, 282.0, 290.0, 291.0, 292.0]);
        assert!(joined.air_temp_k[5].is_nan());
        let natures: Vec<Nature> = stretches.iter().map(|stretch| stretch.nature).collect();
        assert_eq!(natures, [Nature::Reanalysis, Nature::RecentDays, Nature::Forecast]);
        assert_eq!(stretches[2].hours_missing, 1);
        assert_eq!(joined.assumptions.len(), 2, "two seams: {:?}", joined.assumptions);
        assert!(
            joined.assumptions[0].value.contains("1970-01-01T03:00Z"),
            "{:?}",
            joined.assumptions
        );
    }

    /// Labelled by the hour's end, the irradiance of hour 1 stands beside the temperature of hour 2.
    #[test]
    fn irradiance_of_the_preceding_hour_moves_to_its_own() {
        let (joined, _) = join(&[piece(0, 3, Nature::Reanalysis, 0, &[1.0, 2.0, 3.0])]);
        assert_eq!(
            joined.shortwave_w_m2.as_deref(),
            Some(&[20.0, 30.0, 30.0][..]),
            "the last is held"
        );
        assert_eq!(joined.shortwave_label, Some(Label::MeanOfFollowingHour));
        assert!(joined.assumptions[0].what.contains("last hour"));
        let (with_more, _) = join(&[piece(0, 3, Nature::Reanalysis, 0, &[1.0, 2.0, 3.0, 4.0])]);
        assert_eq!(with_more.shortwave_w_m2.as_deref(), Some(&[20.0, 30.0, 40.0][..]));
        assert!(with_more.assumptions.is_empty());
    }
}
