//! How much air a case needs so that its device does not drown in its own vapour.

use super::request::PredictionRequest;
use super::result::CaseFigures;
use crate::model::air::{Air, saturation_pressure_pa};
use crate::model::cycle::{Forcing, HourForcing, Method, State, Tuning, run_stretch, stall_humidity};
use crate::model::device::Device;
use crate::model::place::{Case, PlacedAir};

const HOUR_S: f64 = 3600.0;
/// The air in which the source is taken: this little drier than where the device stops.
const JUST_RUNNING: f64 = 1e-4;

/// Figures of the case in the mean of the known hours; none without a case.
pub(super) fn case_figures(request: &PredictionRequest<'_>) -> Option<CaseFigures> {
    let case = request.air.case?;
    let (around, speed_m_s) = mean_air(request.air);
    let stall = stall_humidity(request.device, around.temp_k, speed_m_s, around.pressure_pa);
    let stall_pa = (stall - JUST_RUNNING) * saturation_pressure_pa(around.temp_k);
    let drier_pa = stall_pa - around.vapour_pressure_pa;
    let least = (drier_pa > 0.0).then(|| {
        let inside = Air {
            vapour_pressure_pa: stall_pa,
            ..around
        };
        let source_kg_s = source_kg_s(request.device, &case, &Forcing::still(inside, speed_m_s));
        HOUR_S * case.pressure_of_pa(source_kg_s, around.temp_k) / drier_pa
    });
    Some(CaseFigures {
        stall_relative_humidity_pct: 100.0 * stall,
        least_air_changes_per_hour: least,
    })
}

/// Mean air around the case and mean air speed in it, over the known hours.
fn mean_air(air: &PlacedAir) -> (Air, f64) {
    let series = &air.series;
    let known: Vec<usize> = (0..series.known.len()).filter(|hour| series.known[*hour]).collect();
    let mean = |values: &[f64]| known.iter().map(|hour| values[*hour]).sum::<f64>() / known.len().max(1) as f64;
    let around = Air {
        temp_k: mean(&series.temp_k),
        vapour_pressure_pa: mean(&series.vapour_pressure_pa),
        pressure_pa: mean(&series.pressure_pa),
    };
    (around, mean(&air.air_speed_m_s))
}

/// Vapour from all devices, cups and the rest in steady air [kg/s].
fn source_kg_s(device: &Device, case: &Case, forcing: &Forcing) -> f64 {
    let tuning = Tuning::default();
    let mut state = State::settled(device, &tuning, forcing);
    let hour = HourForcing {
        start: *forcing,
        end: *forcing,
        known: true,
    };
    let lost = run_stretch(device, &tuning, Method::Averaged, &mut state, &hour, 0.0, HOUR_S, false);
    let cups = case.devices / device.cup.as_ref().map_or(1.0, |cup| cup.shared_by);
    let lost_kg = case.devices * lost.head_loss.water_kg + cups * lost.cup_loss.water_kg;
    lost_kg / HOUR_S + case.other_vapour_kg_s
}
