//! What comes back.

use super::NamedPlace;
use super::records::{
    Assumption, Caution, ClockSchedule, Definition, Derived, Prediction, Provenance, SeriesReport, Stamp,
};

/// A prediction with all that went into it.
#[derive(Debug, Clone)]
pub struct PredictionReport {
    /// Name of the example, if one was taken.
    pub example: Option<String>,
    /// The device as given.
    pub definition: Definition,
    /// When its lamp is lit; none is always.
    pub lamp_hours: Option<ClockSchedule>,
    /// Figures that follow from it.
    pub derived: Derived,
    /// Hours in the series.
    pub hours: usize,
    /// What each hourly value stands for.
    pub stamp: Stamp,
    /// What was read, filled and flagged.
    pub weather: SeriesReport,
    /// Where the readings came from, if they were fetched.
    pub provenance: Option<Provenance>,
    /// Place by place, in the order they were asked for; at least one.
    pub outcomes: Vec<PlaceOutcome>,
    /// Several places were asked for.
    pub is_comparison: bool,
}

/// What comes out in one place.
#[derive(Debug, Clone)]
pub struct PlaceOutcome {
    /// The place as given.
    pub place: NamedPlace,
    /// The moisture rule taken, if the air went through a room.
    pub moisture_rule: Option<String>,
    /// Humidity at which the device stops there, at several air temperatures.
    pub stall_points: Vec<StallPoint>,
    /// The prediction itself.
    pub prediction: Prediction,
    /// Everything assumed: device, weather, place, run.
    pub assumptions: Vec<Assumption>,
    /// Everything to look out for, the most urgent first.
    pub cautions: Vec<Caution>,
}

/// Where the device stops in settled air, without lamp or sun.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StallPoint {
    /// Air temperature [°C].
    pub air_temperature_c: f64,
    /// Relative humidity above which it stands still [%]; 0 where it would not run even in dry air.
    pub relative_humidity_pct: f64,
}
