//! The device as attendance sees it: something that runs for a while, falls due and can be refilled.

use crate::model::air::{Air, ZERO_CELSIUS_K, saturation_pressure_pa};
use crate::model::cycle::{self, DueCause, Forcing, HourForcing, Method, State, Stretch, Tuning};
use crate::model::device::Device;
use crate::model::fluids::Liquid;

use super::cased::Cased;
use super::record::HourAir;
use super::request::InitialState;
use super::result::EndState;

/// What attendance needs of a device.
pub(super) trait Machine {
    /// Runs from one second of an hour to another, or to the second at which a visit falls due.
    fn stretch(&mut self, hour: &HourForcing, from_s: f64, to_s: f64, stop_when_due: bool) -> Stretch;
    /// Why a visit is due, if it is.
    fn due(&self) -> Option<DueCause>;
    /// Fills the cup and wets the felt; hands back what was filled in.
    fn refill(&mut self) -> Liquid;
    /// Whether a visit would freeze up at once.
    fn frozen_air(&self, forcing: &Forcing) -> bool;
    /// Fall of the cup's level below its brim mark [m]; 0 without a cup.
    fn cup_drop_m(&self) -> f64;
    /// Temperature of the cup [K]; none without a cup.
    fn cup_temp_k(&self) -> Option<f64>;
    /// The air the device met in the hour just run.
    fn air_of_hour(&mut self, hour: &HourForcing) -> HourAir {
        HourAir::of(hour)
    }
}

/// A device, how it is solved, the state it is in, and the case around it.
#[derive(Debug, Clone)]
pub(super) struct RunningDevice<'a> {
    pub(super) device: &'a Device,
    pub(super) tuning: Tuning,
    pub(super) method: Method,
    pub(super) state: State,
    pub(super) cased: Option<Cased>,
}

impl Machine for RunningDevice<'_> {
    fn stretch(&mut self, hour: &HourForcing, from_s: f64, to_s: f64, stop_when_due: bool) -> Stretch {
        if let (Some(cased), true) = (self.cased, hour.known) {
            return self.stretch_in_case(cased, hour, from_s, to_s, stop_when_due);
        }
        let (device, tuning, method) = (self.device, &self.tuning, self.method);
        cycle::run_stretch(
            device,
            tuning,
            method,
            &mut self.state,
            hour,
            from_s,
            to_s,
            stop_when_due,
        )
    }

    fn due(&self) -> Option<DueCause> {
        cycle::is_due(self.device, &self.state)
    }

    fn refill(&mut self) -> Liquid {
        cycle::refill(self.device, &mut self.state)
    }

    fn frozen_air(&self, forcing: &Forcing) -> bool {
        cycle::is_frozen_air(self.device, &self.state, forcing)
    }

    fn cup_drop_m(&self) -> f64 {
        self.device
            .cup
            .as_ref()
            .map_or(0.0, |_| cycle::cup_drop_m(self.device, &self.state))
    }

    fn cup_temp_k(&self) -> Option<f64> {
        self.device.cup.as_ref().map(|_| self.state.cup_temp_k)
    }

    fn air_of_hour(&mut self, hour: &HourForcing) -> HourAir {
        match &mut self.cased {
            Some(cased) => cased.take_hour(hour),
            None => HourAir::of(hour),
        }
    }
}

impl RunningDevice<'_> {
    /// The state in the units of a request.
    ///
    /// `air` is that around the case at the end.
    pub(super) fn end_state(&self, air: &HourAir) -> EndState {
        let (state, cup) = (&self.state, self.device.cup.as_ref());
        EndState {
            cup_drop_mm: cup.map(|_| 1e3 * self.cup_drop_m()),
            felt_liquid_g: 1e3 * state.felt.total_kg(),
            cup_strength_abv_pct: cup.map(|_| state.cup.abv_pct()),
            felt_strength_abv_pct: state.felt.abv_pct(),
            body_temp_c: state.body_temp_k - ZERO_CELSIUS_K,
            head_temp_c: state.head_temp_k - ZERO_CELSIUS_K,
            cup_temp_c: state.cup_temp_k - ZERO_CELSIUS_K,
            dried_out: state.dried_out,
            scale_mg: 1e6 * state.scale_kg,
            case_relative_humidity_pct: self
                .cased
                .map(|cased| 100.0 * cased.air.vapour_pa / saturation_pressure_pa(air.temp_k)),
        }
    }

    /// Puts what a request says of the start in place of the default state.
    pub(super) fn begin_with(&mut self, given: &InitialState, air: &Air) {
        let state = &mut self.state;
        let kelvin = |celsius: Option<f64>, default_k: f64| celsius.map_or(default_k, |c| c + ZERO_CELSIUS_K);
        state.body_temp_k = kelvin(given.body_temp_c, state.body_temp_k);
        state.head_temp_k = kelvin(given.head_temp_c, state.head_temp_k);
        state.cup_temp_k = kelvin(given.cup_temp_c, state.cup_temp_k);
        state.dried_out = given.dried_out.unwrap_or(state.dried_out);
        state.scale_kg = given.scale_mg.map_or(state.scale_kg, |mg| 1e-6 * mg);
        if let (Some(cased), Some(pct)) = (&mut self.cased, given.case_relative_humidity_pct) {
            cased.air.vapour_pa = 0.01 * pct * saturation_pressure_pa(air.temp_k);
        }
        let felt_kg = given.felt_liquid_g.map_or(state.felt.total_kg(), |g| 1e-3 * g);
        state.felt = liquid(felt_kg, given.felt_strength_abv_pct, self.device);
        if let Some(cup) = &self.device.cup {
            // The level counts from the full cup's mass, as cycle::cup_drop_m does.
            let one_kg = liquid(1.0, given.cup_strength_abv_pct, self.device);
            let missing_m3 = 1e-3 * given.cup_drop_mm.unwrap_or(0.0) * cup.area_m2;
            let left_kg = state.cup.total_kg() - missing_m3 * one_kg.density_kg_m3(state.cup_temp_k);
            state.cup = one_kg.scaled(left_kg.max(0.0));
        }
    }
}

fn liquid(total_kg: f64, abv_pct: Option<f64>, device: &Device) -> Liquid {
    Liquid::from_abv(total_kg, abv_pct.unwrap_or(device.evaporant_abv_pct))
}
