//! What travels through the service unchanged: defined below, named here, so that callers need no room but this one.

pub use crate::intake::csv::{
    Ambiguous, Candidate, Clock, ColumnFinding, ColumnHint, ColumnHints, ColumnMapping, Columns, Confidence, Detection,
    Dialect, FixedColumn, Hints, LabelName, Layout, LongForm, Nonexistent, OWN_HEADER, Question, Role, RowFilter,
    TimeLayout,
};
pub use crate::intake::endpoints::{BudgetLeft, Coordinates, Facts, FetchedWeather, Nature, Provenance, Stretch};
pub use crate::model::cycle::{HourState, Method, TracePoint};
pub use crate::model::device::{
    ALL_BOUNDS, BalanceDefinition, BodyDefinition, Bound, CupDefinition, Definition, Derived, DipDefinition,
    EXTRA_MASSES_MAX, EvaporantDefinition, Example, ExtraMass, FeltDefinition, FluidDefinition, HeadDefinition,
    LampDefinition, LampTarget, NAME_MAX_CHARACTERS, TubeDefinition,
};
pub use crate::model::fluids::{CustomFluid, CustomVapourPressure, EvaporantRow, Hazard, WorkingFluid};
pub use crate::model::notes::{Assumption, Caution, Fault, Severity};
pub use crate::model::place::{
    AtDevice, CaseDefinition, MoistureRule, Outdoors, PLACE_BOUNDS, Place, PlaceBound, Room, Spot,
};
pub use crate::model::prediction::{
    AirSummary, Attendance, AttendancePolicy, Band, BandRange, BandRanges, Bands, ClockInterval, ClockSchedule,
    CycleTrace, EndState, HealedBy, HourColumns, InitialState, LossG, ModelInfo, Options, Period, Prediction,
    ScheduleException, Spell, StallHours, StallSpells, Totals, Visit, VisitCause,
};
pub use crate::model::weather::{Flag, HourlySeries, Label, RawReadings, SeriesReport, Stamp, WeatherFault};
