//! What a run takes for granted, said in its answer.

use super::attendance::SHORTEST_BETWEEN_VISITS_S;
use super::request::{AttendancePolicy, BandRange, Options, PredictionRequest};
use crate::model::notes::Assumption;
use crate::model::weather::Stamp;

/// The assumptions of a run; those of device and weather are said by their rooms.
pub(super) fn assumptions(request: &PredictionRequest<'_>) -> Vec<Assumption> {
    let options = &request.options;
    let mut all = vec![surroundings(), hours(request), attendance(options), calendar()];
    if options.initial_state.is_none() {
        all.push(start());
    }
    if options.time_zone.is_none() {
        all.push(Assumption::new(
            "time zone",
            "UTC",
            "where days, months and clock times are cut",
        ));
    }
    if options.opening_hours.is_none() {
        all.push(Assumption::new(
            "opening hours",
            "every hour is open",
            "cycles_open_hours and open stall hours",
        ));
    }
    all.extend(lamp(request));
    all.extend(shared_cup(request));
    all.extend(unknown_hours(request));
    if options.bands {
        all.push(band_ranges(options));
    }
    all
}

fn surroundings() -> Assumption {
    Assumption::new(
        "temperature of the surfaces around the device",
        "that of the air",
        "long-wave exchange of head and body: colder walls slow it, warmer walls speed it",
    )
}

fn hours(request: &PredictionRequest<'_>) -> Assumption {
    let (value, effect) = match request.air.series.stamp {
        Stamp::Instant => (
            "straight from each reading to the next; the last is held",
            "how an hour is split between states",
        ),
        Stamp::MeanOfHour => (
            "straight between the means of neighbouring hours",
            "each hour's own mean is smoothed: half itself, a quarter of each neighbour; nothing is lost over the run",
        ),
    };
    Assumption::new("air within an hour", value, effect)
}

fn attendance(options: &Options) -> Assumption {
    let attendance = &options.attendance;
    let minutes = SHORTEST_BETWEEN_VISITS_S / 60.0;
    let value = match attendance.policy {
        AttendancePolicy::WhenDue => format!(
            "a visit {} h after it falls due, never within {minutes} min of the last; in freezing air at the first full hour above freezing",
            attendance.delay_hours
        ),
        AttendancePolicy::Every => format!(
            "every {} days at the clock time of the start; in freezing air at the first full hour above freezing",
            attendance.days
        ),
        AttendancePolicy::Never => "nobody comes".into(),
    };
    Assumption::new(
        "visits",
        value,
        "each visit fills the cup, wets the felt and resets the strength",
    )
}

fn calendar() -> Assumption {
    Assumption::new(
        "events within an hour",
        "spread evenly over it",
        "hours that a day, a clock hour or an opening time cuts through",
    )
}

fn start() -> Assumption {
    Assumption::new(
        "state at the start",
        "cup full to the brim mark, felt wet, temperatures settled",
        "the first hours, and when the first visit falls due",
    )
}

fn lamp(request: &PredictionRequest<'_>) -> Option<Assumption> {
    request.device.lamp.as_ref()?;
    let value = match request.options.lamp_hours {
        None => "lit all the time",
        Some(_) => "lit in its hours; an hour lit in part gets the mean power",
    };
    Some(Assumption::new(
        "lamp",
        value,
        "cycles, and stalls with a warm head or an overheated body",
    ))
}

fn shared_cup(request: &PredictionRequest<'_>) -> Option<Assumption> {
    let sharers = request.device.cup.as_ref()?.shared_by;
    (sharers > 1.0).then(|| {
        Assumption::new(
            "devices on one cup",
            format!("{sharers} alike"),
            "cycles, stalls and the head's water are one device's; the cup's water and visits are the whole cup's",
        )
    })
}

fn unknown_hours(request: &PredictionRequest<'_>) -> Option<Assumption> {
    let unknown = request.air.series.known.iter().filter(|known| !**known).count();
    (unknown > 0).then(|| {
        Assumption::new(
            "hours without weather",
            format!("{unknown} h in which nothing is counted and the device is left as it was"),
            "cycles, stall hours and water leave them out: the totals are that much too low",
        )
    })
}

fn band_ranges(options: &Options) -> Assumption {
    let ranges = &options.ranges;
    let text = |range: BandRange| format!("{} to {}", range.low, range.high);
    Assumption::new(
        "5th to 95th percentiles behind the bands",
        format!(
            "humidity {} points, air speed x {}, heat and mass transfer x {}, cup x {}, tip volume x {}, vapour reset {}",
            text(ranges.humidity_points),
            text(ranges.air_speed_factor),
            text(ranges.transfer_factor),
            text(ranges.cup_factor),
            text(ranges.tip_volume_factor),
            text(ranges.vapour_reset),
        ),
        format!(
            "low and high of every figure, from {} samples and the nominal run; no measured device counts stand behind the defaults",
            options.samples
        ),
    )
}
