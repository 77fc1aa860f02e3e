//! One prediction from order to report.

use std::time::Instant;

use super::places::{Abandoned, Places};
use super::records::{
    Assumption, Caution, Definition, Derived, Fault, HourlySeries, Method, Place, Prediction, WeatherFault,
};
use super::{
    DeviceChoice, HourLimit, OrderFault, PlaceOutcome, PredictError, PredictionOrder, PredictionReport, StallPoint,
    WeatherSource, example, examples,
};
use crate::config::{Limits, Runs};
use crate::intake::csv;
use crate::model::cycle::stall_humidity;
use crate::model::device::{self, Device};
use crate::model::place::{PlacedAir, place_air};
use crate::model::prediction::{PredictionError, PredictionRequest, predict};
use crate::model::weather::{RawReadings, RegulariseOptions, regularise};

/// Most hours by the averaged method.
pub const AVERAGED_HOURS_MAX: usize = 200_000;
/// Most hours by the resolved method: three months.
pub const RESOLVED_HOURS_MAX: usize = 2_208;
/// Most hours times samples with bands: 200,000 hours with 32 samples.
pub const BAND_HOUR_SAMPLES_MAX: usize = 6_400_000;

/// Most places compared in one order.
pub const PLACES_MAX: usize = 16;

/// Air temperatures for which the stall humidity is told [°C].
const STALL_TEMPERATURES_C: [f64; 3] = [10.0, 20.0, 30.0];

/// Told the hour-samples done and to do; returns false to stop.
pub type Progress<'a> = &'a (dyn Fn(usize, usize) -> bool + Sync);

/// Runs predictions; cheap to clone.
#[derive(Debug, Clone)]
pub struct Predictions {
    places: Places,
    limits: Limits,
}

impl Predictions {
    /// As many at once as the settings say.
    pub fn new(runs: &Runs, limits: &Limits) -> Self {
        Self {
            places: Places::new(runs.parallel, runs.waiting),
            limits: limits.clone(),
        }
    }

    /// Runs one order on the blocking threads when a place is free, and `finish` on its report in the same place;
    /// dropping the future stops the run.
    ///
    /// # Errors
    /// See [`PredictError`].
    pub async fn run<T: Send + 'static>(
        &self,
        order: PredictionOrder,
        finish: impl FnOnce(PredictionReport) -> T + Send + 'static,
    ) -> Result<T, PredictError> {
        let limits = self.limits.clone();
        metrics::gauge!("predictions_waiting").set(self.places.waiting() as f64);
        self.places
            .run(move |abandoned| timed(&order, &limits, abandoned).map(finish))
            .await
    }

    /// Runs one order here and now, with progress; for the command line.
    ///
    /// # Errors
    /// See [`PredictError`].
    pub fn run_here(&self, order: &PredictionOrder, progress: Progress) -> Result<PredictionReport, PredictError> {
        carry_out(order, &self.limits, progress)
    }
}

fn timed(order: &PredictionOrder, limits: &Limits, abandoned: &Abandoned) -> Result<PredictionReport, PredictError> {
    let started = Instant::now();
    metrics::gauge!("predictions_running").increment(1.0);
    let report = carry_out(order, limits, &|_, _| !abandoned.is_set());
    metrics::gauge!("predictions_running").decrement(1.0);
    metrics::histogram!("prediction_duration_seconds").record(started.elapsed().as_secs_f64());
    report
}

fn carry_out(order: &PredictionOrder, limits: &Limits, progress: Progress) -> Result<PredictionReport, PredictError> {
    let (device, series) = (checked_device(&order.device), hourly(order, limits));
    let (device, series) = match (device, series) {
        (Ok(device), Ok(series)) => (device, series),
        (device, series) => {
            let faults = device.err().into_iter().chain(series.err()).flatten().collect();
            return Err(PredictError::Faults(faults));
        }
    };
    check_length(order, series.known.len())?;
    let airs = placed(order, &series)?;
    let outcomes = outcomes(order, &device, &series, airs, progress)?;
    Ok(PredictionReport {
        example: device.example,
        definition: device.definition,
        lamp_hours: order.options.lamp_hours.clone(),
        derived: device.derived,
        hours: series.known.len(),
        stamp: series.stamp,
        weather: series.report,
        provenance: order.weather.fetched().map(|fetched| fetched.provenance.clone()),
        outcomes,
        is_comparison: order.site.is_comparison,
    })
}

/// The air of every place, or everything wrong with any of them.
fn placed(order: &PredictionOrder, series: &HourlySeries) -> Result<Vec<PlacedAir>, PredictError> {
    let site = &order.site;
    let (mut airs, mut faults) = (Vec::new(), Vec::new());
    for (number, named) in site.places.iter().enumerate() {
        match place_air(series, &named.place, &site.path(number)) {
            Ok(air) => airs.push(air),
            Err(wrong) => faults.extend(wrong.into_iter().map(OrderFault::Options)),
        }
    }
    if faults.is_empty() {
        Ok(airs)
    } else {
        Err(PredictError::Faults(faults))
    }
}

fn outcomes(
    order: &PredictionOrder,
    known: &Known,
    series: &HourlySeries,
    airs: Vec<PlacedAir>,
    progress: Progress,
) -> Result<Vec<PlaceOutcome>, PredictError> {
    let count = airs.len();
    let one = |(number, air): (usize, PlacedAir)| {
        // Every place has the same hours and samples to do.
        let told = |done: usize, to_do: usize| progress(number * to_do + done, count * to_do);
        let prediction = predicted(order, number, &known.device, &air, &told)?;
        Ok(outcome(order, number, known, series, air, prediction))
    };
    airs.into_iter().enumerate().map(one).collect()
}

/// A sound device with the name of the example, if it is one.
pub(super) struct Known {
    example: Option<String>,
    definition: Definition,
    device: Device,
    derived: Derived,
    assumptions: Vec<Assumption>,
    cautions: Vec<Caution>,
}

pub(super) fn checked_device(choice: &DeviceChoice) -> Result<Known, Vec<OrderFault>> {
    let (example, definition) = match choice {
        DeviceChoice::Own(definition) => (None, definition.as_ref().clone()),
        DeviceChoice::Example(name) => (Some(name.clone()), example_definition(name)?),
    };
    let checked =
        device::check(&definition).map_err(|faults| faults.into_iter().map(OrderFault::Device).collect::<Vec<_>>())?;
    Ok(Known {
        example,
        definition,
        device: checked.device,
        derived: checked.derived,
        assumptions: checked.assumptions,
        cautions: checked.cautions,
    })
}

fn example_definition(name: &str) -> Result<Definition, Vec<OrderFault>> {
    let found = example(name).map(|example| example.definition);
    found.ok_or_else(|| {
        let names: Vec<&str> = examples().iter().map(|example| example.name).collect();
        let detail = format!("expected one of {}; found {name:?}", names.join(", "));
        vec![OrderFault::Example(Fault::new("", "unknown_example", detail))]
    })
}

fn hourly(order: &PredictionOrder, limits: &Limits) -> Result<HourlySeries, Vec<OrderFault>> {
    let in_weather = |faults: Vec<WeatherFault>| faults.into_iter().map(OrderFault::Weather).collect::<Vec<_>>();
    let readings = readings(&order.weather, limits).map_err(in_weather)?;
    let (defaults, checks) = (RegulariseOptions::default(), order.weather_checks);
    let fetched = order.weather.fetched();
    let gap_hours = fetched
        .and_then(|fetched| fetched.gap_hours)
        .unwrap_or(defaults.max_gap_hours);
    let options = RegulariseOptions {
        elevation_m: order
            .site
            .elevation_m
            .or(fetched.and_then(|fetched| fetched.elevation_m)),
        max_gap_hours: checks.max_gap_hours.unwrap_or(gap_hours),
        max_unknown_share: checks.max_unknown_share.unwrap_or(defaults.max_unknown_share),
        accept_suspicious: checks.accept_suspicious,
        ..defaults
    };
    let told = |faults: Vec<WeatherFault>| match fetched {
        Some(_) => faults.into_iter().map(of_fetched).collect(),
        None => faults,
    };
    regularise(readings, &options).map_err(|faults| in_weather(told(faults)))
}

/// A fault of readings the caller never saw: told in words, without rows and columns of a file.
fn of_fetched(fault: WeatherFault) -> WeatherFault {
    WeatherFault::whole(fault.code, format!("of the fetched weather: {fault}"))
}

fn readings(source: &WeatherSource, limits: &Limits) -> Result<RawReadings, Vec<WeatherFault>> {
    match source {
        WeatherSource::Readings(readings) => Ok(readings.as_ref().clone()),
        WeatherSource::Csv { file, layout, hints } => {
            let limits = csv::Limits {
                max_decompressed_bytes: limits.decompressed_bytes as u64,
                ..csv::Limits::default()
            };
            match layout {
                Some(layout) => csv::read(file, Some(layout), &limits),
                None => csv::read_with_hints(file, hints, &limits),
            }
        }
        WeatherSource::Fetched(fetched) => Ok(fetched.readings.clone()),
        WeatherSource::Endpoint(endpoint) => {
            let detail = format!("the weather of {} was not fetched before the run", endpoint.source);
            Err(vec![WeatherFault::whole("not_fetched", detail)])
        }
    }
}

pub(super) fn check_length(order: &PredictionOrder, hours: usize) -> Result<(), PredictError> {
    let options = &order.options;
    let by_method = match options.method {
        Method::Averaged => HourLimit::Averaged,
        Method::Resolved => HourLimit::Resolved,
    };
    let hours = hours.saturating_mul(order.site.places.len());
    let samples = if options.bands { options.samples } else { 0 };
    for (limit, found) in [(by_method, hours), (HourLimit::Bands, hours.saturating_mul(samples))] {
        if found > limit.most() {
            return Err(PredictError::TooMany { limit, found });
        }
    }
    Ok(())
}

fn predicted(
    order: &PredictionOrder,
    place: usize,
    device: &Device,
    air: &PlacedAir,
    progress: Progress,
) -> Result<Prediction, PredictError> {
    let request = PredictionRequest {
        device,
        air,
        options: order.options.clone(),
    };
    // The model knows one place; the order may have several.
    let in_order = |mut fault: Fault| {
        if let Some(rest) = fault.field.strip_prefix("place/") {
            fault.field = format!("{}/{rest}", order.site.path(place));
        }
        OrderFault::Options(fault)
    };
    predict(&request, progress).map_err(|error| match error {
        PredictionError::Cancelled => PredictError::Stopped,
        PredictionError::Faults(faults) => PredictError::Faults(faults.into_iter().map(in_order).collect()),
    })
}

fn outcome(
    order: &PredictionOrder,
    place: usize,
    known: &Known,
    series: &HourlySeries,
    air: PlacedAir,
    prediction: Prediction,
) -> PlaceOutcome {
    let assumptions = [
        &known.assumptions,
        &fetched_at_device(order, place),
        &series.assumptions,
        &air.assumptions,
        &prediction.assumptions,
    ];
    PlaceOutcome {
        place: order.site.places[place].clone(),
        stall_points: stall_points(&known.device, &air),
        assumptions: assumptions.into_iter().flatten().cloned().collect(),
        cautions: cautions(&known.cautions, &prediction.cautions),
        moisture_rule: air.moisture_rule,
        prediction,
    }
}

/// A weather service knows the air outdoors; taken as the air at a device it has to be said.
fn fetched_at_device(order: &PredictionOrder, place: usize) -> Vec<Assumption> {
    let at_device = matches!(order.site.places[place].place, Place::AtDevice(_));
    let said = Assumption::new(
        "place",
        "the fetched weather is the air at the device",
        "everything: it is the air outdoors; give `place` (outdoors, room, case) if the device does not stand in it",
    );
    (at_device && order.weather.fetched().is_some())
        .then_some(said)
        .into_iter()
        .collect()
}

/// Both lists in one, nothing twice, the most urgent first.
fn cautions(of_device: &[Caution], of_run: &[Caution]) -> Vec<Caution> {
    let mut all = of_device.to_vec();
    let repeated = |new: &Caution, had: &[Caution]| had.iter().any(|old| old.code == new.code && old.text == new.text);
    for caution in of_run {
        if !repeated(caution, &all) {
            all.push(caution.clone());
        }
    }
    all.sort_by_key(|caution| std::cmp::Reverse(caution.severity));
    all
}

fn stall_points(device: &Device, air: &PlacedAir) -> Vec<StallPoint> {
    let speed_m_s = air.mean_air_speed_m_s();
    let pressures = &air.series.pressure_pa;
    let pressure_pa = pressures.iter().sum::<f64>() / pressures.len() as f64;
    let at = |celsius: f64| StallPoint {
        air_temperature_c: celsius,
        relative_humidity_pct: 100.0 * stall_humidity(device, celsius + 273.15, speed_m_s, pressure_pa),
    };
    STALL_TEMPERATURES_C.map(at).to_vec()
}
