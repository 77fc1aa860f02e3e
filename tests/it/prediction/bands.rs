//! Bands: repeatable, ordered, and as wide as what is varied.

use super::air::*;
use dipcast::model::prediction::*;

fn banded(samples: usize, seed: u64) -> Options {
    Options {
        bands: true,
        samples,
        seed,
        ..Options::default()
    }
}

fn on_threads(count: usize, options: Options) -> Prediction {
    let pool = rayon::ThreadPoolBuilder::new().num_threads(count).build().unwrap();
    pool.install(|| run(&shelf(), &shed(24 * 14), options)).unwrap()
}

fn all_bands(found: &Prediction) -> Vec<Bands> {
    let periods = [found.months.as_ref(), found.days.as_ref()]
        .into_iter()
        .flatten()
        .flatten();
    std::iter::once(&found.summary)
        .chain(periods)
        .map(|period| period.bands.unwrap())
        .collect()
}

#[test]
fn the_same_seed_gives_the_same_answer_on_any_number_of_threads() {
    let one = on_threads(1, banded(6, 42));
    assert_eq!(format!("{one:?}"), format!("{:?}", on_threads(2, banded(6, 42))));
    assert_eq!(format!("{one:?}"), format!("{:?}", on_threads(5, banded(6, 42))));
    assert_ne!(all_bands(&one), all_bands(&on_threads(2, banded(6, 43))));
}

#[test]
fn bands_do_not_move_the_nominal_run() {
    let with = run(&shelf(), &shed(24 * 14), banded(4, 1)).unwrap();
    let without = run(&shelf(), &shed(24 * 14), plain()).unwrap();
    assert_eq!(with.summary.totals, without.summary.totals);
    assert_eq!(with.summary.bands.unwrap().central, without.summary.totals);
    assert_eq!((with.visits, with.hours), (without.visits, without.hours));
    assert!(without.summary.bands.is_none() && without.model.samples == 0 && with.model.samples == 4);
}

#[test]
fn low_is_never_above_high() {
    let figures: [fn(&Totals) -> f64; 8] = [
        |t| t.cycles,
        |t| t.stall_hours.total,
        |t| t.stall_hours.humid,
        |t| t.stall_hours.frozen,
        |t| t.needs_person_hours,
        |t| t.water_g.total,
        |t| t.water_g.cup,
        |t| t.visits,
    ];
    for bands in all_bands(&on_threads(2, banded(8, 3))) {
        for figure in figures {
            let band = bands.of(figure);
            assert!(band.low <= band.high, "{band:?}");
        }
    }
}

fn fixed(value: f64) -> BandRange {
    BandRange {
        low: value,
        high: value,
    }
}

/// Nothing varied: every range is the nominal value.
fn nothing_varied() -> BandRanges {
    BandRanges {
        humidity_points: fixed(0.0),
        air_speed_factor: fixed(1.0),
        transfer_factor: fixed(1.0),
        cup_factor: fixed(1.0),
        tip_volume_factor: fixed(1.0),
        vapour_reset: fixed(shelf().dip.vapour_reset),
    }
}

fn in_a_room(ranges: BandRanges) -> Bands {
    let options = Options {
        ranges,
        ..banded(16, 1)
    };
    run(&shelf(), &steady(48, 22.0, 50.0), options)
        .unwrap()
        .summary
        .bands
        .unwrap()
}

#[test]
fn nothing_varied_leaves_no_width() {
    let cycles = in_a_room(nothing_varied()).of(|t| t.cycles);
    assert!((cycles.high / cycles.low - 1.0).abs() < 1e-9, "{cycles:?}");
    assert!((cycles.central / cycles.low - 1.0).abs() < 1e-9, "{cycles:?}");
}

/// Each input moves what it should: the cup's factor the cup alone and in proportion; drier air, more.
#[test]
fn each_range_moves_its_own_figures() {
    let cup = in_a_room(BandRanges {
        cup_factor: BandRange { low: 0.8, high: 1.2 },
        ..nothing_varied()
    });
    let (cup_g, head_g) = (cup.of(|t| t.water_g.cup), cup.of(|t| t.water_g.head));
    assert!((head_g.high / head_g.low - 1.0).abs() < 1e-6, "{head_g:?}");
    // The outer layer is in series with the gap and the cup cools itself, so less than 1.2 / 0.8 comes through.
    assert!((1.2..1.5).contains(&(cup_g.high / cup_g.low)), "{cup_g:?}");
    let reset = in_a_room(BandRanges {
        vapour_reset: BandRange { low: 0.2, high: 0.8 },
        ..nothing_varied()
    });
    let (cycles, water) = (reset.of(|t| t.cycles), reset.of(|t| t.water_g.head));
    assert!(
        cycles.high / cycles.low > 1.3 && water.high / water.low < 1.1,
        "{cycles:?} {water:?}"
    );
    let humidity = in_a_room(BandRanges {
        humidity_points: BandRange { low: -3.0, high: 3.0 },
        ..nothing_varied()
    });
    let cycles = humidity.of(|t| t.cycles);
    // About 2 % of period per point near 45-50 % humidity: six points from low to high.
    assert!((1.08..1.25).contains(&(cycles.high / cycles.low)), "{cycles:?}");
}

#[test]
fn fog_stays_fog_in_every_sample_that_is_not_drier() {
    let options = Options {
        ranges: BandRanges {
            humidity_points: BandRange { low: 0.0, high: 5.0 },
            ..BandRanges::default()
        },
        ..banded(8, 1)
    };
    let found = run(&shelf(), &steady(24, 15.0, 100.0), options).unwrap();
    let bands = found.summary.bands.unwrap();
    assert_eq!(bands.of(|t| t.cycles).high, 0.0);
    assert!((bands.of(|t| t.stall_hours.humid).low - 24.0).abs() < 1e-9);
}
