//! One run over all hours: the nominal one keeps everything, a sample only its ledger.

use std::sync::atomic::{AtomicUsize, Ordering};

use super::attendance::Person;
use super::calendar::Calendar;
use super::cased::Cased;
use super::forcing::{self, AirShift, Surroundings};
use super::ledger::Ledger;
use super::machine::RunningDevice;
use super::record::{HourRecord, Piece};
use super::request::{Options, PredictionError};
use super::samples::Sample;
use crate::model::cycle::{Method, State, Tuning};
use crate::model::device::Device;
use crate::model::place::Case;

/// Hours between two reports of progress: some ten milliseconds either way, so that a run stops soon after it is left.
fn report_hours(method: Method) -> usize {
    match method {
        Method::Averaged => 200,
        Method::Resolved => 1,
    }
}

/// What all runs of a prediction share.
pub(super) struct Common<'a> {
    pub(super) device: &'a Device,
    pub(super) options: &'a Options,
    pub(super) surroundings: Surroundings,
    pub(super) case: Option<Case>,
    pub(super) calendar: Calendar,
    pub(super) scheduled_unix_s: Vec<i64>,
    pub(super) start_unix_s: i64,
    pub(super) progress: Progress<'a>,
}

/// Counts hour-samples over all threads.
pub(super) struct Progress<'a> {
    pub(super) tell: &'a (dyn Fn(usize, usize) -> bool + Sync),
    pub(super) done: AtomicUsize,
    pub(super) to_do: usize,
}

impl Progress<'_> {
    fn add(&self, hours: usize) -> Result<(), PredictionError> {
        let done = self.done.fetch_add(hours, Ordering::Relaxed) + hours;
        if (self.tell)(done, self.to_do) {
            Ok(())
        } else {
            Err(PredictionError::Cancelled)
        }
    }
}

/// The nominal run with all it left behind.
pub(super) struct NominalRun<'a> {
    pub(super) records: Vec<HourRecord>,
    pub(super) pieces: Vec<Piece>,
    pub(super) person: Person,
    pub(super) ledger: Ledger,
    pub(super) machine: RunningDevice<'a>,
}

impl<'a> Common<'a> {
    /// Runs the device as given in the air as given.
    pub(super) fn nominal(&self) -> Result<NominalRun<'a>, PredictionError> {
        let mut machine = self.machine(self.device, Tuning::default(), AirShift::NONE);
        let mut person = self.person();
        let mut ledger = Ledger::new(&self.calendar);
        let mut records = Vec::with_capacity(self.surroundings.hours());
        let mut pieces = Vec::with_capacity(self.surroundings.hours());
        self.run(
            &mut machine,
            &mut person,
            AirShift::NONE,
            &mut pieces,
            &mut |hour, record, _| {
                ledger.add(&self.calendar, hour, record);
                records.push(*record);
            },
        )?;
        ledger.add_visits(&self.calendar, &person.visits);
        Ok(NominalRun {
            records,
            pieces,
            person,
            ledger,
            machine,
        })
    }

    /// Runs one sample of the bands.
    pub(super) fn sample(&self, index: usize) -> Result<Ledger, PredictionError> {
        let sample = Sample::draw(&self.options.ranges, index, self.options.seed);
        let device = sample.device(self.device);
        let mut machine = self.machine(&device, sample.tuning, sample.air);
        let mut person = self.person();
        let mut ledger = Ledger::new(&self.calendar);
        self.run(
            &mut machine,
            &mut person,
            sample.air,
            &mut Vec::new(),
            &mut |hour, record, pieces| {
                ledger.add(&self.calendar, hour, record);
                pieces.clear();
            },
        )?;
        ledger.add_visits(&self.calendar, &person.visits);
        Ok(ledger)
    }

    fn run(
        &self,
        machine: &mut RunningDevice<'_>,
        person: &mut Person,
        air: AirShift,
        pieces: &mut Vec<Piece>,
        keep: &mut dyn FnMut(usize, &HourRecord, &mut Vec<Piece>),
    ) -> Result<(), PredictionError> {
        let (hours, report_hours) = (self.surroundings.hours(), report_hours(self.options.method));
        for hour in 0..hours {
            let record = person.run_hour(machine, hour, &self.surroundings.hour(hour, air), pieces);
            keep(hour, &record, pieces);
            if (hour + 1) % report_hours == 0 {
                self.progress.add(report_hours)?;
            }
        }
        self.progress.add(hours % report_hours)
    }

    fn machine<'d>(&self, device: &'d Device, tuning: Tuning, air: AirShift) -> RunningDevice<'d> {
        let first = forcing::at(&self.surroundings.hour(0, air), 0.0);
        let mut machine = RunningDevice {
            device,
            tuning,
            method: self.options.method,
            state: State::settled(device, &tuning, &first),
            cased: self.case.map(|case| Cased::new(case, first.air.vapour_pressure_pa)),
        };
        if let Some(initial) = &self.options.initial_state {
            machine.begin_with(initial, &first.air);
        }
        machine
    }

    fn person(&self) -> Person {
        Person::new(self.options.attendance, self.start_unix_s, &self.scheduled_unix_s)
    }
}
