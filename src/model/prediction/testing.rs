//! What the unit tests of this room share.

use super::machine::Machine;
use crate::model::air::Air;
use crate::model::cycle::{DueCause, Forcing, HourForcing, HourState, Stretch};
use crate::model::fluids::Liquid;
use crate::model::place::{AtDevice, Place, PlacedAir, place_air};
use crate::model::weather::{HourlySeries, SeriesReport, Stamp};

/// 2026-01-01T00:00:00Z.
pub(super) const START_UNIX_S: i64 = 1_767_225_600;

/// Hours from [`START_UNIX_S`] at given temperatures [K] and one relative humidity [0-1], at 1013.25 hPa.
pub(super) fn series(temps_k: &[f64], rh_fraction: f64) -> HourlySeries {
    let air = |temp_k: &f64| Air::from_relative_humidity(*temp_k, rh_fraction, 101_325.0);
    HourlySeries {
        start_unix_s: START_UNIX_S,
        stamp: Stamp::Instant,
        temp_k: temps_k.to_vec(),
        vapour_pressure_pa: temps_k.iter().map(|t| air(t).vapour_pressure_pa).collect(),
        pressure_pa: vec![101_325.0; temps_k.len()],
        wind_speed_m_s: None,
        shortwave_w_m2: None,
        shortwave_stamp: Stamp::Instant,
        known: vec![true; temps_k.len()],
        report: SeriesReport::default(),
        assumptions: Vec::new(),
    }
}

/// The same, placed where it was read.
pub(super) fn placed(series: &HourlySeries) -> PlacedAir {
    let at_device = AtDevice {
        air_speed_m_s: Some(0.1),
        shortwave_exposure: None,
    };
    place_air(series, &Place::AtDevice(at_device), "place").expect("a sound place")
}

/// A device as simple as can be: it drinks 1 g an hour in any air, falls due when `store_g` are gone, and then runs on
/// for as long as its felt lasts.
#[derive(Debug, Clone)]
pub(super) struct ToyMachine {
    pub(super) store_g: f64,
    pub(super) felt_g: f64,
    pub(super) gone_g: f64,
}

const CYCLES_PER_G: f64 = 100.0;

impl Machine for ToyMachine {
    fn stretch(&mut self, hour: &HourForcing, from_s: f64, to_s: f64, stop_when_due: bool) -> Stretch {
        let mut stretch = Stretch {
            end_s: to_s,
            ..Stretch::default()
        };
        if !hour.known {
            stretch.state_s[HourState::Unknown as usize] = to_s - from_s;
            return stretch;
        }
        let until_g = |level_g: f64| from_s + 3600.0 * (level_g - self.gone_g).max(0.0);
        let (due_s, dry_s) = (until_g(self.store_g), until_g(self.store_g + self.felt_g));
        // As the cycle room does it: only falling due is told, not being due.
        if stop_when_due && self.due().is_none() && due_s <= to_s {
            stretch.end_s = due_s;
            stretch.due = Some(DueCause::CupAtReach);
        }
        let ran_s = dry_s.min(stretch.end_s) - from_s;
        stretch.state_s[HourState::Running as usize] = ran_s;
        stretch.state_s[HourState::Dry as usize] = stretch.end_s - from_s - ran_s;
        stretch.cycles = CYCLES_PER_G * ran_s / 3600.0;
        stretch.head_loss = Liquid::water(1e-3 * ran_s / 3600.0);
        self.gone_g += ran_s / 3600.0;
        stretch
    }

    fn due(&self) -> Option<DueCause> {
        (self.gone_g >= self.store_g).then_some(DueCause::CupAtReach)
    }

    fn refill(&mut self) -> Liquid {
        Liquid::water(1e-3 * std::mem::take(&mut self.gone_g))
    }

    fn frozen_air(&self, forcing: &Forcing) -> bool {
        forcing.air.temp_k <= 273.15
    }

    fn cup_drop_m(&self) -> f64 {
        1e-3 * self.gone_g.min(self.store_g)
    }

    fn cup_temp_k(&self) -> Option<f64> {
        None
    }
}
