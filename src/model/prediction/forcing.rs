//! The air of a series becomes the forcing of each hour.

use crate::model::air::{Air, saturation_pressure_pa};
use crate::model::cycle::{Forcing, HourForcing};
use crate::model::device::{Device, LampDefinition, LampTarget};
use crate::model::place::PlacedAir;
use crate::model::weather::Stamp;

use super::sun::Sun;

/// The air at one end of an hour, with its saturation pressure kept for the samples.
#[derive(Debug, Clone, Copy, PartialEq)]
struct Edge {
    air: Air,
    saturation_pa: f64,
    speed_m_s: f64,
}

/// What surrounds the device in all hours; samples shift it.
#[derive(Debug, Clone)]
pub(super) struct Surroundings {
    edges: Vec<[Edge; 2]>,
    known: Vec<bool>,
    lit_share: Option<Vec<f64>>,
    lamp: Option<LampDefinition>,
    sun: Option<Sun>,
}

/// How a sample's air differs from the series.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct AirShift {
    /// Added to relative humidity [0-1], held within 0 and saturation.
    pub(super) humidity: f64,
    /// Factor on air speed.
    pub(super) speed_factor: f64,
}

impl AirShift {
    /// The series as it is.
    pub(super) const NONE: AirShift = AirShift {
        humidity: 0.0,
        speed_factor: 1.0,
    };
}

impl Surroundings {
    /// Lays out the hours. `lit_share` is the share of each hour in which the lamp is lit; none means always.
    ///
    /// An instant value holds at the start of its hour and runs straight to the next. A mean value gives each end of its
    /// hour the mean of the two hours that meet there, so an hour's own mean comes out as a quarter of each neighbour and
    /// half of itself; over a run nothing is lost. Next to an unknown hour, and at both ends, the known value is held.
    /// The series has at least one hour.
    pub(super) fn new(air: &PlacedAir, device: &Device, lit_share: Option<Vec<f64>>) -> Self {
        let first_known = air.series.known.iter().position(|known| *known);
        let mut held = edge(sample_of(air, first_known.unwrap_or(0)));
        Self {
            edges: (0..air.series.known.len())
                .map(|hour| edges_of(air, hour, &mut held))
                .collect(),
            known: air.series.known.clone(),
            lit_share,
            lamp: device.lamp.clone(),
            sun: Sun::on(device, air),
        }
    }

    /// Number of hours.
    pub(super) fn hours(&self) -> usize {
        self.known.len()
    }

    /// The forcing of one hour. A lamp lit for part of an hour gives its mean power all through it.
    pub(super) fn hour(&self, hour: usize, shift: AirShift) -> HourForcing {
        let lamp_w = self.lamp_w(hour);
        let sun_w = self.sun.as_ref().map_or([(0.0, 0.0); 2], |sun| sun.absorbed_w(hour));
        let forcing = |end: usize| {
            let edge = self.edges[hour][end];
            let air = shifted(edge, shift.humidity);
            Forcing {
                air,
                air_speed_m_s: edge.speed_m_s * shift.speed_factor,
                surroundings_k: air.temp_k,
                head_absorbed_w: lamp_w.0 + sun_w[end].0,
                body_absorbed_w: lamp_w.1 + sun_w[end].1,
            }
        };
        HourForcing {
            start: forcing(0),
            end: forcing(1),
            known: self.known[hour],
        }
    }

    fn lamp_w(&self, hour: usize) -> (f64, f64) {
        let Some(lamp) = &self.lamp else { return (0.0, 0.0) };
        let mean_w = lamp.absorbed_w * self.lit_share.as_ref().map_or(1.0, |share| share[hour]);
        match lamp.on {
            LampTarget::Head => (mean_w, 0.0),
            LampTarget::Body => (0.0, mean_w),
        }
    }
}

/// The forcing at a second of an hour.
pub(super) fn at(hour: &HourForcing, second: f64) -> Forcing {
    let share = second / 3600.0;
    let mix = |a: f64, b: f64| a + (b - a) * share;
    let (a, b) = (&hour.start, &hour.end);
    Forcing {
        air: mean_air(&a.air, &b.air, share),
        air_speed_m_s: mix(a.air_speed_m_s, b.air_speed_m_s),
        surroundings_k: mix(a.surroundings_k, b.surroundings_k),
        head_absorbed_w: mix(a.head_absorbed_w, b.head_absorbed_w),
        body_absorbed_w: mix(a.body_absorbed_w, b.body_absorbed_w),
    }
}

fn shifted(edge: Edge, humidity: f64) -> Air {
    let wanted_pa = edge.air.vapour_pressure_pa + humidity * edge.saturation_pa;
    Air {
        vapour_pressure_pa: wanted_pa.clamp(0.0, edge.saturation_pa.max(0.0)),
        ..edge.air
    }
}

/// `held` is the last known edge, or the first to come: an unknown hour holds it.
fn edges_of(air: &PlacedAir, hour: usize, held: &mut Edge) -> [Edge; 2] {
    if !air.series.known[hour] {
        return [*held; 2];
    }
    let own = sample_of(air, hour);
    let neighbour = |i: usize| {
        let known = air.series.known.get(i).is_some_and(|known| *known);
        known.then(|| sample_of(air, i))
    };
    let before = hour.checked_sub(1).and_then(neighbour).unwrap_or(own);
    let after = neighbour(hour + 1).unwrap_or(own);
    let both = match air.series.stamp {
        Stamp::Instant => [own, after],
        Stamp::MeanOfHour => [halfway(before, own), halfway(own, after)],
    };
    let edges = both.map(edge);
    *held = edges[1];
    edges
}

/// Two saturated airs mix to a little more than saturation: what is too much is taken off here.
fn edge((air, speed_m_s): (Air, f64)) -> Edge {
    let saturation_pa = saturation_pressure_pa(air.temp_k);
    Edge {
        air: Air {
            vapour_pressure_pa: air.vapour_pressure_pa.min(saturation_pa),
            ..air
        },
        saturation_pa,
        speed_m_s,
    }
}

/// Air and its speed at the time of an hour.
fn sample_of(air: &PlacedAir, hour: usize) -> (Air, f64) {
    let series = &air.series;
    let sample = Air {
        temp_k: series.temp_k[hour],
        vapour_pressure_pa: series.vapour_pressure_pa[hour],
        pressure_pa: series.pressure_pa[hour],
    };
    (sample, air.air_speed_m_s[hour])
}

fn halfway(a: (Air, f64), b: (Air, f64)) -> (Air, f64) {
    (mean_air(&a.0, &b.0, 0.5), 0.5 * (a.1 + b.1))
}

fn mean_air(a: &Air, b: &Air, share: f64) -> Air {
    let mix = |a: f64, b: f64| a + (b - a) * share;
    Air {
        temp_k: mix(a.temp_k, b.temp_k),
        vapour_pressure_pa: mix(a.vapour_pressure_pa, b.vapour_pressure_pa),
        pressure_pa: mix(a.pressure_pa, b.pressure_pa),
    }
}

/// A series laid out at a device without a lamp, for tests.
#[cfg(test)]
pub(super) fn laid(series: &crate::model::weather::HourlySeries) -> Surroundings {
    let shelf = crate::model::device::examples().swap_remove(0).definition;
    let device = crate::model::device::check(&shelf)
        .expect("the shelf example is sound")
        .device;
    Surroundings::new(&super::testing::placed(series), &device, None)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::model::device::{check, examples};
    use crate::model::prediction::testing::{placed, series};

    fn device(lamp: Option<LampDefinition>) -> Device {
        let mut definition = examples().swap_remove(0).definition;
        definition.lamp = lamp;
        check(&definition).expect("the shelf example is sound").device
    }

    fn surroundings(temps: &[f64], known: &[bool], stamp: Stamp) -> Surroundings {
        let mut series = series(temps, 0.5);
        series.known = known.to_vec();
        series.stamp = stamp;
        laid(&series)
    }

    fn ends(surroundings: &Surroundings, hour: usize) -> (f64, f64) {
        let hour = surroundings.hour(hour, AirShift::NONE);
        (hour.start.air.temp_k, hour.end.air.temp_k)
    }

    #[test]
    fn instants_run_to_the_next_and_the_last_is_held() {
        let s = surroundings(&[290.0, 292.0, 291.0], &[true; 3], Stamp::Instant);
        assert_eq!((ends(&s, 0), ends(&s, 1)), ((290.0, 292.0), (292.0, 291.0)));
        assert_eq!(ends(&s, 2), (291.0, 291.0));
    }

    #[test]
    fn means_meet_halfway() {
        let s = surroundings(&[290.0, 292.0, 296.0], &[true; 3], Stamp::MeanOfHour);
        assert_eq!(
            (ends(&s, 0), ends(&s, 1), ends(&s, 2)),
            ((290.0, 291.0), (291.0, 294.0), (294.0, 296.0))
        );
    }

    #[test]
    fn next_to_an_unknown_hour_the_known_value_is_held() {
        let s = surroundings(
            &[290.0, f64::NAN, 296.0, 298.0],
            &[true, false, true, true],
            Stamp::Instant,
        );
        assert_eq!(
            (ends(&s, 0), ends(&s, 1), ends(&s, 2)),
            ((290.0, 290.0), (290.0, 290.0), (296.0, 298.0))
        );
        assert!(!s.hour(1, AirShift::NONE).known);
        let s = surroundings(&[f64::NAN, 296.0], &[false, true], Stamp::MeanOfHour);
        assert_eq!(ends(&s, 0), (296.0, 296.0));
    }

    #[test]
    fn a_sample_stays_between_dry_and_saturated() {
        let s = laid(&series(&[293.15, 303.15], 1.0));
        for humidity in [0.03, -0.03, -2.0] {
            let hour = s.hour(
                0,
                AirShift {
                    humidity,
                    speed_factor: 2.0,
                },
            );
            let expected = (1.0 + humidity).clamp(0.0, 1.0);
            assert!(
                (hour.start.air.relative_humidity() - expected).abs() < 1e-12,
                "{humidity}"
            );
            assert_eq!(hour.start.air_speed_m_s, 0.2);
        }
    }

    #[test]
    fn mixed_saturated_air_is_not_above_saturation() {
        let mut foggy = series(&[283.15, 293.15], 1.0);
        foggy.stamp = Stamp::MeanOfHour;
        let hour = laid(&foggy).hour(0, AirShift::NONE);
        assert!(hour.end.air.relative_humidity() <= 1.0);
    }

    #[test]
    fn a_lamp_lit_for_part_of_an_hour_gives_its_mean_power() {
        let lamp = |on| Some(LampDefinition { on, absorbed_w: 2.0 });
        let two = series(&[293.15, 293.15], 0.5);
        let two = placed(&two);
        let s = Surroundings::new(&two, &device(lamp(LampTarget::Body)), Some(vec![0.25, 0.0]));
        assert_eq!(s.hour(0, AirShift::NONE).start.body_absorbed_w, 0.5);
        assert_eq!(s.hour(1, AirShift::NONE).start.body_absorbed_w, 0.0);
        let s = Surroundings::new(&two, &device(lamp(LampTarget::Head)), None);
        let hour = s.hour(1, AirShift::NONE);
        assert_eq!((hour.start.head_absorbed_w, hour.start.body_absorbed_w), (2.0, 0.0));
    }
}
