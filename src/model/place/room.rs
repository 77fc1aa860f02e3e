//! The air of a room, from the weather outside.

use super::definition::Room;
use super::moisture::{MoistureRule, excess_kg_m3, vapour_pressure_excess_pa};
use crate::model::air::{ZERO_CELSIUS_K, saturation_pressure_pa};
use crate::model::weather::HourlySeries;

/// Heated to at least this where nothing is said [°C].
pub const DEFAULT_HEATED_TO_C: f64 = 20.0;
/// How long a building remembers the temperature outside where nothing is said [h]: a day.
pub const DEFAULT_MEMORY_H: f64 = 24.0;
/// The rule taken where none is given: the standard's class of offices and shops. In the one measured house it was held
/// against it lies 125 Pa too high on average, class 1 46 Pa too low, the field survey 226 Pa too high.
pub(super) const DEFAULT_RULE: MoistureRule = MoistureRule::Iso13788 { class: 2 };

impl Room {
    /// The rule taken.
    pub(super) fn rule(&self) -> MoistureRule {
        self.moisture.unwrap_or(DEFAULT_RULE)
    }

    /// Temperature of the room [K] when the building remembers this temperature outside [K].
    fn temp_k(&self, remembered_k: f64) -> f64 {
        let heated_k = self.heated_to_c.unwrap_or(DEFAULT_HEATED_TO_C) + ZERO_CELSIUS_K;
        let cooled_k = self.cooled_to_c.map_or(f64::INFINITY, |c| c + ZERO_CELSIUS_K);
        remembered_k.max(heated_k).min(cooled_k.max(heated_k))
    }

    /// A vapour pressure [Pa] at a temperature [K] after humidifier and dehumidifier.
    fn held_pa(&self, vapour_pa: f64, temp_k: f64) -> f64 {
        let saturation_pa = saturation_pressure_pa(temp_k);
        let share = |pct: Option<f64>, default: f64| pct.unwrap_or(default) / 100.0;
        let least_pa = saturation_pa * share(self.humidified_to_pct, 0.0);
        let most_pa = saturation_pa * share(self.dehumidified_to_pct, 100.0);
        vapour_pa.min(most_pa).max(least_pa.min(most_pa))
    }
}

/// Vapour pressure of a room [Pa] before buffering, humidifier and dehumidifier, from the temperature outside [K], the
/// vapour pressure there [Pa] and the temperature of the room [K].
///
/// Ventilation carries the vapour pressure in; the room's own vapour comes on top.
pub fn room_vapour_pa(room: &Room, outdoor_temp_k: f64, outdoor_vapour_pa: f64, room_temp_k: f64) -> f64 {
    let excess_kg_m3 = excess_kg_m3(room.rule(), outdoor_temp_k);
    (outdoor_vapour_pa + vapour_pressure_excess_pa(excess_kg_m3, room_temp_k)).max(0.0)
}

/// Turns the weather outside into the air of a room, in place. Unknown hours stay unknown and change nothing.
pub(super) fn move_indoors(series: &mut HourlySeries, room: &Room) {
    let mut remembered = Lag::of_hours(room.memory_hours.unwrap_or(DEFAULT_MEMORY_H));
    let mut buffered = Lag::of_hours(room.buffering_hours.unwrap_or(0.0));
    for hour in (0..series.known.len()).filter(|hour| series.known[*hour]) {
        let outdoor_k = remembered.follow(series.temp_k[hour]);
        let temp_k = room.temp_k(outdoor_k);
        let wanted_pa = room_vapour_pa(room, outdoor_k, series.vapour_pressure_pa[hour], temp_k);
        series.temp_k[hour] = temp_k;
        series.vapour_pressure_pa[hour] = room.held_pa(buffered.follow(wanted_pa), temp_k);
    }
}

/// A first-order lag over hours; the first value is taken as it is.
struct Lag {
    share: f64,
    value: Option<f64>,
}

impl Lag {
    fn of_hours(time_constant_h: f64) -> Self {
        let share = if time_constant_h > 0.0 {
            -(-1.0 / time_constant_h).exp_m1()
        } else {
            1.0
        };
        Self { share, value: None }
    }

    fn follow(&mut self, target: f64) -> f64 {
        let value = self.value.map_or(target, |value| value + self.share * (target - value));
        self.value = Some(value);
        value
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_lag_closes_two_thirds_of_a_step_in_its_time() {
        let mut lag = Lag::of_hours(24.0);
        assert_eq!(lag.follow(0.0), 0.0);
        let after = (0..24).map(|_| lag.follow(1.0)).last().unwrap();
        assert!((after - (1.0 - (-1.0f64).exp())).abs() < 1e-12);
        let mut none = Lag::of_hours(0.0);
        assert_eq!((none.follow(3.0), none.follow(5.0)), (3.0, 5.0));
    }

    #[test]
    fn the_temperature_stays_in_its_band() {
        let room = Room {
            heated_to_c: Some(19.0),
            cooled_to_c: Some(25.0),
            ..Room::default()
        };
        for (outside_c, inside_c) in [(-5.0, 19.0), (22.0, 22.0), (33.0, 25.0)] {
            assert!((room.temp_k(outside_c + 273.15) - inside_c - 273.15).abs() < 1e-9);
        }
    }

    #[test]
    fn humidifier_and_dehumidifier_hold_their_limits() {
        let room = Room {
            humidified_to_pct: Some(40.0),
            dehumidified_to_pct: Some(60.0),
            ..Room::default()
        };
        let saturation_pa = saturation_pressure_pa(294.15);
        for (rh, held) in [(0.2, 0.4), (0.5, 0.5), (0.9, 0.6), (1.4, 0.6)] {
            assert!((room.held_pa(rh * saturation_pa, 294.15) / saturation_pa - held).abs() < 1e-12);
        }
        assert_eq!(Room::default().held_pa(2.0 * saturation_pa, 294.15), saturation_pa);
    }
}
