//! Arithmetic on the figures of a stretch of time.

use super::result::{Bands, LossG, StallHours, Totals};

const COUNT: usize = 20;

impl Totals {
    /// Adds a share of an hour's figures; `open_share` is the part of an hour that is open in it, its events being
    /// spread evenly inside the hour.
    pub(super) fn add_hour(&mut self, hour: &Totals, share: f64, open_share: f64) {
        let mut part = scaled(hour, share);
        part.cycles_open_hours = hour.cycles * open_share;
        part.open_hours = hour.hours * open_share;
        part.stall_hours.open = hour.stall_hours.total * open_share;
        self.add(&part);
    }

    /// Adds another stretch.
    pub(super) fn add(&mut self, other: &Totals) {
        let (mut sum, other) = (figures(self), figures(other));
        for (a, b) in sum.iter_mut().zip(other) {
            *a += b;
        }
        *self = from_figures(sum);
    }
}

fn scaled(totals: &Totals, share: f64) -> Totals {
    from_figures(figures(totals).map(|figure| figure * share))
}

/// 5th and 95th percentiles of each figure over the samples together with the nominal run.
pub(super) fn bands(nominal: &Totals, samples: &[&Totals]) -> Bands {
    let all: Vec<[f64; COUNT]> = samples.iter().copied().chain([nominal]).map(figures).collect();
    let (mut low, mut high) = ([0.0; COUNT], [0.0; COUNT]);
    for i in 0..COUNT {
        let mut values: Vec<f64> = all.iter().map(|figures| figures[i]).collect();
        values.sort_by(f64::total_cmp);
        low[i] = percentile(&values, 0.05);
        high[i] = percentile(&values, 0.95);
    }
    Bands {
        low: from_figures(low),
        central: *nominal,
        high: from_figures(high),
    }
}

/// Percentile of sorted values, linear between ranks (rank = share x (n - 1)); expects at least one value.
fn percentile(sorted: &[f64], share: f64) -> f64 {
    let rank = share * (sorted.len() - 1) as f64;
    let below = rank.floor() as usize;
    let above = (below + 1).min(sorted.len() - 1);
    // This form never steps outside its two neighbours, so low stays at or below high.
    let between = rank - below as f64;
    (sorted[below] * (1.0 - between) + sorted[above] * between).clamp(sorted[below], sorted[above])
}

#[rustfmt::skip]
fn figures(t: &Totals) -> [f64; COUNT] {
    let (s, w, e) = (&t.stall_hours, &t.water_g, &t.ethanol_g);
    [
        t.hours, t.cycles, t.cycles_open_hours, t.open_hours, t.needs_person_hours, t.visits,
        s.total, s.open, s.humid, s.dry, s.frozen, s.warm_head, s.overheated, s.unknown,
        w.total, w.head, w.cup, e.total, e.head, e.cup,
    ]
}

#[rustfmt::skip]
fn from_figures(f: [f64; COUNT]) -> Totals {
    let [
        hours, cycles, cycles_open_hours, open_hours, needs_person_hours, visits,
        total, open, humid, dry, frozen, warm_head, overheated, unknown,
        water, water_head, water_cup, ethanol, ethanol_head, ethanol_cup,
    ] = f;
    Totals {
        hours, cycles, cycles_open_hours, open_hours, needs_person_hours, visits,
        stall_hours: StallHours { total, open, humid, dry, frozen, warm_head, overheated, unknown },
        water_g: LossG { total: water, head: water_head, cup: water_cup },
        ethanol_g: LossG { total: ethanol, head: ethanol_head, cup: ethanol_cup },
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn with_cycles(cycles: f64) -> Totals {
        Totals {
            cycles,
            ..Totals::default()
        }
    }

    /// Linear between ranks: the 5th percentile of 0..=20 is 1 and the 95th is 19, by the definition itself.
    #[test]
    fn percentiles_lie_between_ranks() {
        let samples: Vec<Totals> = (1..=20).map(|n| with_cycles(f64::from(n))).collect();
        let found = bands(&with_cycles(0.0), &samples.iter().collect::<Vec<_>>());
        assert!((found.low.cycles - 1.0).abs() < 1e-12 && (found.high.cycles - 19.0).abs() < 1e-12);
        assert_eq!(found.central.cycles, 0.0);
    }

    #[test]
    fn equal_values_give_no_width() {
        let value = 0.1 + 0.2;
        let found = bands(&with_cycles(value), &[&with_cycles(value)]);
        assert_eq!((found.low.cycles, found.high.cycles), (value, value));
    }

    #[test]
    fn figures_survive_the_round() {
        let numbers: [f64; COUNT] = std::array::from_fn(|i| i as f64 + 0.5);
        assert_eq!(figures(&from_figures(numbers)), numbers);
    }

    #[test]
    fn a_part_of_an_hour_is_spread_evenly() {
        let mut hour = with_cycles(100.0);
        hour.hours = 1.0;
        hour.stall_hours.total = 0.4;
        let mut sum = Totals::default();
        sum.add_hour(&hour, 0.5, 0.25);
        assert_eq!((sum.hours, sum.cycles, sum.cycles_open_hours), (0.5, 50.0, 25.0));
        assert_eq!((sum.open_hours, sum.stall_hours.open), (0.25, 0.1));
    }
}
