//! Vapour pressure of each reading: from the dew point where it is there, else from relative humidity, else from the wet
//! bulb.

use super::readings::RawReadings;
use super::series::Sightings;
use crate::model::air::{saturation_pressure_pa, standard_pressure_pa, vapour_pressure_from_wet_bulb_pa};
use crate::model::notes::Assumption;

/// What the humidity of the readings came to.
pub(super) struct Humidity {
    /// Partial pressure of water vapour [Pa], NaN = unknown.
    pub vapour_pressure_pa: Vec<f64>,
    /// `dew_point`, `relative_humidity` or `wet_bulb`: which served the most readings.
    pub from: &'static str,
}

/// Relative humidity and dew point that disagree by more than this are flagged [fraction].
const DISAGREEMENT: f64 = 0.01;
/// A disagreement that rounding cannot explain [fraction]; half of all rows must show it to be flagged by itself.
const CONTRADICTION: f64 = 0.05;
/// A dew point above the temperature by more than this is flagged by itself [K].
const DEW_POINT_EXCESS_K: f64 = 0.5;

/// 0 °C [K].
const FREEZING_K: f64 = 273.15;

#[derive(Default)]
struct Seen {
    by_dew_point: usize,
    by_relative_humidity: usize,
    by_wet_bulb: Sightings,
    wet_bulb_above: Sightings,
    wet_bulb_below_freezing: bool,
    fallback: Sightings,
    disagreement: Sightings,
    contradiction: Sightings,
    below_freezing_by_relative_humidity: bool,
    dew_point_above: Sightings,
    clipped: Sightings,
}

/// Vapour pressure of each reading; flags contradictions, fallbacks and clipping at saturation.
///
/// A wet bulb is taken at the pressure read beside it, or the standard pressure [Pa] of the elevation [m].
pub(super) fn vapour_pressures(raw: &mut RawReadings, elevation_m: Option<f64>) -> Humidity {
    let mut seen = Seen::default();
    let standard_pa = standard_pressure_pa(elevation_m.unwrap_or(0.0));
    let value = |column: &Option<Vec<f64>>, at: usize| column.as_ref().map_or(f64::NAN, |values| values[at]);
    let vapour_pressure_pa = (0..raw.len())
        .map(|at| {
            let (dew_point_k, rh) = (value(&raw.dew_point_k, at), value(&raw.relative_humidity, at));
            let (temp_k, wet_bulb_k, row) = (raw.air_temp_k[at], value(&raw.wet_bulb_k, at), raw.row[at] as usize);
            if !(dew_point_k.is_nan() && rh.is_nan()) || wet_bulb_k.is_nan() {
                return seen.vapour_pressure(temp_k, dew_point_k, rh, row);
            }
            let read_pa = value(&raw.pressure_pa, at);
            let read_here = !read_pa.is_nan() && !raw.pressure_is_sea_level;
            seen.by_wet_bulb(temp_k, wet_bulb_k, if read_here { read_pa } else { standard_pa }, row)
        })
        .collect();
    let from = seen.mostly_from();
    seen.flag_into(raw);
    Humidity {
        vapour_pressure_pa,
        from,
    }
}

impl Seen {
    fn mostly_from(&self) -> &'static str {
        let others = self.by_relative_humidity.max(self.by_wet_bulb.count());
        if self.by_dew_point >= others.max(1) {
            "dew_point"
        } else if self.by_relative_humidity >= self.by_wet_bulb.count() {
            "relative_humidity"
        } else {
            "wet_bulb"
        }
    }

    fn by_wet_bulb(&mut self, temp_k: f64, wet_bulb_k: f64, pressure_pa: f64, row: usize) -> f64 {
        self.by_wet_bulb.add(row);
        self.wet_bulb_below_freezing |= wet_bulb_k < FREEZING_K;
        if wet_bulb_k > temp_k + DEW_POINT_EXCESS_K {
            self.wet_bulb_above.add(row);
        }
        vapour_pressure_from_wet_bulb_pa(temp_k, wet_bulb_k, pressure_pa)
    }

    fn vapour_pressure(&mut self, temp_k: f64, dew_point_k: f64, rh: f64, row: usize) -> f64 {
        match (dew_point_k.is_nan(), rh.is_nan()) {
            (false, _) => self.by_dew_point(temp_k, dew_point_k, rh, row),
            (true, false) => self.by_relative_humidity(temp_k, rh, row),
            (true, true) => f64::NAN,
        }
    }

    fn by_dew_point(&mut self, temp_k: f64, dew_point_k: f64, rh: f64, row: usize) -> f64 {
        self.by_dew_point += 1;
        if dew_point_k > temp_k {
            let kind = if dew_point_k > temp_k + DEW_POINT_EXCESS_K {
                &mut self.dew_point_above
            } else {
                &mut self.clipped
            };
            kind.add(row);
            return saturation_pressure_pa(temp_k);
        }
        let vapour_pa = saturation_pressure_pa(dew_point_k);
        // With a missing temperature or humidity the comparison is NaN, and not a disagreement.
        let apart = if rh.is_nan() {
            rh
        } else {
            (vapour_pa / saturation_pressure_pa(temp_k) - rh).abs()
        };
        if apart > DISAGREEMENT {
            self.disagreement.add(row);
        }
        if apart > CONTRADICTION {
            self.contradiction.add(row);
        }
        vapour_pa
    }

    fn by_relative_humidity(&mut self, temp_k: f64, rh: f64, row: usize) -> f64 {
        self.by_relative_humidity += 1;
        self.fallback.add(row);
        self.below_freezing_by_relative_humidity |= temp_k < FREEZING_K;
        if rh > 1.0 {
            self.clipped.add(row);
        }
        rh.min(1.0) * saturation_pressure_pa(temp_k)
    }

    fn flag_into(self, raw: &mut RawReadings) {
        if self.below_freezing_by_relative_humidity {
            let what = "relative humidity below 0 °C";
            let effect = "if the instrument means it over ice, the air is drier: by 1 % of the humidity for each degree of frost";
            raw.assumptions.push(Assumption::new(
                what,
                "over liquid water, as WMO-No. 8 defines it",
                effect,
            ));
        }
        if self.wet_bulb_below_freezing {
            let effect = "if the wick was frozen, the air is drier: by up to 0.8 K of wet bulb";
            raw.assumptions.push(Assumption::new(
                "wet bulb below 0 °C",
                "over liquid water (a wick that has not frozen)",
                effect,
            ));
        }
        let flags = &mut raw.flags;
        if raw.dew_point_k.is_some() || raw.relative_humidity.is_some() {
            let detail = "rows with neither dew point nor relative humidity, in which the wet bulb was used";
            self.by_wet_bulb.flag_into(flags, "humidity_from_wet_bulb", detail);
        }
        let detail =
            "rows with a wet bulb more than 0.5 K above the temperature, which cannot be; taken as saturated air";
        self.wet_bulb_above
            .flag_into(flags, "wet_bulb_above_temperature", detail);
        if self.contradiction.count() * 2 > self.by_dew_point {
            let detail = "more than half of the rows have a relative humidity and a dew point that differ by more than 5 points \
                          of humidity: temperature or dew point in another unit, or humidity over ice? The dew point was used";
            self.contradiction.flag_into(flags, "humidity_contradicts", detail);
        }
        if raw.dew_point_k.is_some() {
            let detail = "rows without a dew point, in which the relative humidity was used";
            self.fallback
                .flag_into(flags, "humidity_from_relative_humidity", detail);
        }
        let detail = "rows in which relative humidity and dew point differ by more than 1 point of humidity; the dew point was \
                      used, since relative humidity is often rounded to whole percent";
        self.disagreement.flag_into(flags, "humidity_disagrees", detail);
        let detail =
            "rows with a dew point more than 0.5 K above the temperature, which cannot be; taken as saturated air";
        self.dew_point_above
            .flag_into(flags, "dew_point_above_temperature", detail);
        let detail = "rows slightly above saturation (relative humidity 100 to 105 %, or dew point up to 0.5 K above the \
                      temperature); taken as saturated air";
        self.clipped.flag_into(flags, "humidity_clipped", detail);
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn raw(temp_c: f64, dew_c: f64, rh: f64) -> RawReadings {
        RawReadings {
            air_temp_k: vec![temp_c + 273.15],
            dew_point_k: Some(vec![dew_c + 273.15]),
            relative_humidity: Some(vec![rh]),
            ..RawReadings::hourly(0, 1)
        }
    }

    fn codes(raw: &RawReadings) -> Vec<&'static str> {
        raw.flags.iter().map(|flag| flag.code).collect()
    }

    #[test]
    fn the_dew_point_wins_and_a_contradiction_is_flagged() {
        let mut sent = raw(20.0, 10.0, 0.55);
        let humidity = vapour_pressures(&mut sent, None);
        assert_eq!(humidity.vapour_pressure_pa[0], saturation_pressure_pa(283.15));
        assert_eq!((humidity.from, codes(&sent)), ("dew_point", vec!["humidity_disagrees"]));
    }

    #[test]
    fn a_missing_dew_point_falls_back_row_by_row() {
        let mut sent = raw(20.0, f64::NAN, 0.60);
        let humidity = vapour_pressures(&mut sent, None);
        assert_eq!(humidity.vapour_pressure_pa[0], 0.6 * saturation_pressure_pa(293.15));
        assert_eq!(
            (humidity.from, codes(&sent)),
            ("relative_humidity", vec!["humidity_from_relative_humidity"])
        );
    }

    #[test]
    fn nothing_stays_above_saturation_and_that_is_said() {
        for (dew_c, code) in [(20.3, "humidity_clipped"), (21.0, "dew_point_above_temperature")] {
            let mut sent = raw(20.0, dew_c, f64::NAN);
            assert_eq!(
                vapour_pressures(&mut sent, None).vapour_pressure_pa[0],
                saturation_pressure_pa(293.15)
            );
            assert_eq!(codes(&sent), [code]);
        }
        let mut sent = raw(20.0, f64::NAN, 1.04);
        assert_eq!(
            vapour_pressures(&mut sent, None).vapour_pressure_pa[0],
            saturation_pressure_pa(293.15)
        );
        assert!(codes(&sent).contains(&"humidity_clipped"));
    }

    #[test]
    fn fahrenheit_sent_as_celsius_in_winter_shows_as_contradiction() {
        // 30 °F and 20 °F are -1.1 and -6.7 °C: 66 %; read as °C they would make 55 %.
        let mut sent = raw(30.0, 20.0, 0.66);
        vapour_pressures(&mut sent, None);
        assert!(codes(&sent).contains(&"humidity_contradicts"));
    }

    #[test]
    fn humidity_over_liquid_below_freezing_is_said() {
        let mut sent = raw(-5.0, f64::NAN, 0.8);
        vapour_pressures(&mut sent, None);
        assert!(sent.assumptions[0].value.contains("over liquid water"));
    }

    /// 20 °C with a wet bulb of 13.8 °C at 1013.25 hPa is 50 % (psychrometric table, remembered to a point of humidity).
    #[test]
    fn the_wet_bulb_serves_where_nothing_else_is_there() {
        let mut sent = RawReadings {
            wet_bulb_k: Some(vec![286.95]),
            ..raw(20.0, f64::NAN, f64::NAN)
        };
        let humidity = vapour_pressures(&mut sent, None);
        let rh = humidity.vapour_pressure_pa[0] / saturation_pressure_pa(293.15);
        assert!((rh - 0.5).abs() < 0.01, "{rh}");
        assert_eq!(
            (humidity.from, codes(&sent)),
            ("wet_bulb", vec!["humidity_from_wet_bulb"])
        );
        sent.relative_humidity = Some(vec![0.6]);
        assert_eq!(vapour_pressures(&mut sent, None).from, "relative_humidity");
    }

    #[test]
    fn a_wet_bulb_above_the_temperature_is_flagged_and_thin_air_is_wetter() {
        let at = |pressure_pa: f64, wet_c: f64| {
            let mut sent = RawReadings {
                pressure_pa: Some(vec![pressure_pa]),
                wet_bulb_k: Some(vec![wet_c + 273.15]),
                dew_point_k: None,
                relative_humidity: None,
                ..raw(20.0, 0.0, 0.0)
            };
            (vapour_pressures(&mut sent, None).vapour_pressure_pa[0], codes(&sent))
        };
        assert!(at(80_000.0, 14.0).0 > at(101_325.0, 14.0).0);
        assert_eq!(
            at(101_325.0, 21.0),
            (saturation_pressure_pa(293.15), vec!["wet_bulb_above_temperature"])
        );
    }

    #[test]
    fn missing_stays_missing() {
        assert!(vapour_pressures(&mut raw(20.0, f64::NAN, f64::NAN), None).vapour_pressure_pa[0].is_nan());
        assert!(vapour_pressures(&mut raw(f64::NAN, f64::NAN, 0.5), None).vapour_pressure_pa[0].is_nan());
    }
}
