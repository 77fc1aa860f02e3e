//! Hours become totals, spells, visits, bands and cautions.
//!
//! Reading order: [`PredictionRequest`] (what goes in) and [`Prediction`] (what comes out); `check`, `schedule`,
//! `calendar` and `forcing` prepare; `machine` and `cased` stand for the device; `attendance` runs an hour and splits it at visits; `run` runs all hours; `ledger`,
//! `spells`, `figures` and `samples` make the figures; `assumptions` and `cautions` say what goes with them.

mod assumptions;
mod attendance;
mod calendar;
mod case_figures;
mod cased;
mod cautions;
mod check;
mod columns;
mod figures;
mod forcing;
mod ledger;
mod machine;
mod observed;
mod record;
mod request;
mod result;
mod run;
mod samples;
mod schedule;
mod spells;
mod sun;
#[cfg(test)]
mod testing;
mod trace;

pub use check::MAX_SAMPLES;
pub use request::*;
pub use result::*;

use std::sync::atomic::AtomicUsize;

use rayon::prelude::*;

use calendar::{Calendar, HOUR_S};
use check::Checked;
use ledger::{Ledger, Ledgers};
use run::{Common, NominalRun, Progress};
use schedule::{Intervals, Overlaps, Span};

use crate::model::weather::HourlySeries;

/// Grows with every change that moves a figure.
const MODEL_REVISION: u32 = 1;

/// Runs the hours of a request, with bands if asked for.
///
/// `progress` is told the hour-samples done and to do, about every 200 hours (each hour by the resolved method) and after each sample, from any thread;
/// when it returns false the run stops with [`PredictionError::Cancelled`].
/// The answer is the same for any number of threads.
///
/// # Errors
/// [`PredictionError::Faults`] names everything wrong with the request at once.
pub fn predict(
    request: &PredictionRequest<'_>,
    progress: &(dyn Fn(usize, usize) -> bool + Sync),
) -> Result<Prediction, PredictionError> {
    let checked = check::check(request).map_err(PredictionError::Faults)?;
    let common = prepare(request, &checked, progress);
    let nominal = common.nominal()?;
    let samples = if request.options.bands {
        request.options.samples
    } else {
        0
    };
    let run_samples = (0..samples).into_par_iter().map(|index| common.sample(index));
    let samples: Vec<Ledger> = run_samples.collect::<Result<_, _>>()?;
    Ok(assemble(request, &checked, &common, &nominal, &samples))
}

fn prepare<'a>(
    request: &'a PredictionRequest<'a>,
    checked: &Checked,
    progress: &'a (dyn Fn(usize, usize) -> bool + Sync),
) -> Common<'a> {
    let (series, options) = (&request.air.series, &request.options);
    let range = range_of(series);
    let hours = series.known.len();
    let open = checked
        .open
        .as_ref()
        .map(|open| schedule::spans(open, &checked.zone, range));
    let lit = checked.lit.as_ref().map(|lit| lit_share(lit, checked, range));
    Common {
        device: request.device,
        options,
        case: request.air.case,
        surroundings: forcing::Surroundings::new(request.air, request.device, lit),
        calendar: Calendar::new(&checked.zone, series.start_unix_s, hours, open.as_deref()),
        scheduled_unix_s: scheduled(options, checked, range),
        start_unix_s: series.start_unix_s,
        progress: Progress {
            tell: progress,
            done: AtomicUsize::new(0),
            to_do: hours * (1 + if options.bands { options.samples } else { 0 }),
        },
    }
}

fn range_of(series: &HourlySeries) -> Span {
    Span {
        from_unix_s: series.start_unix_s,
        to_unix_s: series.start_unix_s + series.known.len() as i64 * HOUR_S,
    }
}

fn lit_share(lit: &Intervals, checked: &Checked, range: Span) -> Vec<f64> {
    let spans = schedule::spans(lit, &checked.zone, range);
    let mut overlaps = Overlaps::new(&spans);
    let starts = (range.from_unix_s..range.to_unix_s).step_by(HOUR_S as usize);
    starts
        .map(|from| overlaps.seconds(from, from + HOUR_S) as f64 / HOUR_S as f64)
        .collect()
}

/// The instants of a scheduled round: each so many days at the clock time of the start; none on a day that the calendar
/// leaves out.
fn scheduled(options: &Options, checked: &Checked, range: Span) -> Vec<i64> {
    if options.attendance.policy != AttendancePolicy::Every {
        return Vec::new();
    }
    let start_wall_s = checked.zone.wall_clock_s(range.from_unix_s);
    let step_s = i64::from(options.attendance.days) * 86_400;
    let visits = (1..).filter_map(|n| schedule::instant_of_existing_day(&checked.zone, start_wall_s + n * step_s));
    visits.take_while(|unix_s| *unix_s < range.to_unix_s).collect()
}

fn assemble(
    request: &PredictionRequest<'_>,
    checked: &Checked,
    common: &Common<'_>,
    nominal: &NominalRun<'_>,
    samples: &[Ledger],
) -> Prediction {
    let (options, range) = (&request.options, range_of(&request.air.series));
    let ledgers = Ledgers {
        calendar: &common.calendar,
        nominal: &nominal.ledger,
        samples,
    };
    let summary = ledgers.summary(range.from_unix_s, range.to_unix_s);
    let (records, visits) = (&nominal.records, &nominal.person.visits);
    let observed = observed::observe(request.device, &common.surroundings, records, visits, range.from_unix_s);
    let air = observed::air_summary(records, request.air.case.is_some());
    Prediction {
        stall_spells: spells::stall_spells(&nominal.pieces, range.from_unix_s, options.spell_minutes),
        months: options.keep_months.then(|| ledgers.months()),
        days: options.keep_days.then(|| ledgers.days()),
        hours_of_day: nominal.ledger.hours_of_day.clone(),
        hours: options
            .keep_hours
            .then(|| columns::columns(records, &common.calendar, request.air)),
        air,
        case: case_figures::case_figures(request),
        cycle_trace: options
            .cycle_trace
            .then(|| trace::cycle_trace(common, records))
            .flatten(),
        end_state: nominal
            .machine
            .end_state(&records.last().map(|record| record.air).unwrap_or_default()),
        time_zone: checked.zone.name().to_string(),
        assumptions: assumptions::assumptions(request),
        cautions: cautions::cautions(request.device, &observed, &summary.totals, &air),
        model: model_info(options, samples.len()),
        visits: visits.clone(),
        summary,
    }
}

fn model_info(options: &Options, samples: usize) -> ModelInfo {
    ModelInfo {
        version: format!("{} model {MODEL_REVISION}", env!("CARGO_PKG_VERSION")),
        method: options.method,
        seed: options.seed,
        samples,
    }
}
