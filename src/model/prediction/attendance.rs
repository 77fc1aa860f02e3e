//! Who comes by, and when: an hour is split at every visit.

use super::forcing;
use super::machine::Machine;
use super::record::{HourRecord, Piece};
use super::request::{Attendance, AttendancePolicy};
use super::result::{Visit, VisitCause};
use crate::model::cycle::{DueCause, HourForcing};

/// Nobody comes by twice within this time [s], even where a felt dries in minutes.
pub(super) const SHORTEST_BETWEEN_VISITS_S: f64 = 900.0;
const HOUR_S: f64 = 3600.0;

/// A visit that is due.
#[derive(Debug, Clone, Copy, PartialEq)]
struct Due {
    since_s: f64,
    cause: DueCause,
}

/// The person: times are seconds since the start of the run.
#[derive(Debug, Clone)]
pub(super) struct Person {
    attendance: Attendance,
    start_unix_s: i64,
    /// Visits of the calendar still to come, the next one last.
    calendar_s: Vec<f64>,
    due: Option<Due>,
    planned_s: Option<f64>,
    last_visit_s: Option<f64>,
    is_to_look: bool,
    /// Visits made.
    pub(super) visits: Vec<Visit>,
}

impl Person {
    /// `calendar_unix_s` are the instants of a scheduled round, in order; empty for the other policies.
    pub(super) fn new(attendance: Attendance, start_unix_s: i64, calendar_unix_s: &[i64]) -> Self {
        let since_start = |unix_s: &i64| (unix_s - start_unix_s) as f64;
        let mut calendar_s: Vec<f64> = calendar_unix_s.iter().rev().map(since_start).collect();
        let planned_s = calendar_s.pop();
        Self {
            attendance,
            start_unix_s,
            calendar_s,
            due: None,
            planned_s,
            last_visit_s: None,
            is_to_look: true,
            visits: Vec::new(),
        }
    }

    /// Runs one hour of a machine, visits included. `pieces` gets the stretches it was split into.
    pub(super) fn run_hour(
        &mut self,
        machine: &mut impl Machine,
        hour: usize,
        forcing: &HourForcing,
        pieces: &mut Vec<Piece>,
    ) -> HourRecord {
        let base_s = hour as f64 * HOUR_S;
        let mut record = HourRecord::default();
        let mut at_s = 0.0;
        while at_s < HOUR_S {
            let now_s = base_s + at_s;
            self.look(now_s, machine);
            let visited = self.visit_if_time(machine, now_s, forcing, at_s);
            self.look(now_s, machine);
            let until_s = self.next_visit_s(now_s).map_or(HOUR_S, |s| (s - base_s).min(HOUR_S));
            let stretch = machine.stretch(forcing, at_s, until_s, self.due.is_none());
            let fell_due = self.due.is_none() && stretch.due.is_some();
            let waited_s = self.due.map_or(0.0, |_| stretch.end_s - at_s);
            self.notice(base_s + stretch.end_s, stretch.due);
            record.add(&stretch, waited_s);
            pieces.push(Piece::new(now_s, base_s + stretch.end_s, visited, &stretch));
            if stretch.end_s <= at_s && !fell_due {
                // A machine that neither moves nor says why would hang the run.
                break;
            }
            at_s = stretch.end_s;
        }
        record.cup_drop_m = machine.cup_drop_m();
        record.cup_temp_k = machine.cup_temp_k();
        record.air = machine.air_of_hour(forcing);
        record
    }

    /// A stretch tells only that a visit falls due; at the start and after a visit it may be due already.
    fn look(&mut self, now_s: f64, machine: &impl Machine) {
        if std::mem::take(&mut self.is_to_look) {
            self.notice(now_s, machine.due());
        }
    }

    /// Takes note that a visit is due, unless that is known.
    fn notice(&mut self, now_s: f64, due: Option<DueCause>) {
        let (Some(cause), None) = (due, self.due) else { return };
        self.due = Some(Due { since_s: now_s, cause });
        if self.attendance.policy == AttendancePolicy::WhenDue {
            let earliest_s = self.last_visit_s.map_or(now_s, |last| last + SHORTEST_BETWEEN_VISITS_S);
            self.planned_s = Some((now_s + HOUR_S * self.attendance.delay_hours).max(earliest_s));
        }
    }

    /// The next planned visit after now; one that waits for a thaw is looked at again at the next full hour.
    fn next_visit_s(&self, now_s: f64) -> Option<f64> {
        self.planned_s.filter(|planned| *planned > now_s)
    }

    fn visit_if_time(&mut self, machine: &mut impl Machine, now_s: f64, hour: &HourForcing, at_s: f64) -> bool {
        let is_time = self.planned_s.is_some_and(|planned| planned <= now_s);
        if !is_time || machine.frozen_air(&forcing::at(hour, at_s)) {
            return false;
        }
        let filled = machine.refill();
        self.visits.push(Visit {
            at_unix_s: self.start_unix_s + now_s.floor() as i64,
            cause: self.cause(),
            due_since_unix_s: self.due.map(|due| self.start_unix_s + due.since_s.floor() as i64),
            water_g: 1e3 * filled.water_kg,
            ethanol_g: 1e3 * filled.ethanol_kg,
        });
        self.due = None;
        self.last_visit_s = Some(now_s);
        self.is_to_look = true;
        self.calendar_s.retain(|planned| *planned > now_s);
        self.planned_s = self.calendar_s.pop();
        true
    }

    fn cause(&self) -> VisitCause {
        match (self.attendance.policy, self.due) {
            (AttendancePolicy::WhenDue, Some(due)) => due.cause.into(),
            _ => VisitCause::Scheduled,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::super::forcing::{AirShift, laid};
    use super::super::testing::{START_UNIX_S, ToyMachine, series};
    use super::*;
    use crate::model::cycle::HourState;

    struct Run {
        records: Vec<HourRecord>,
        pieces: Vec<Piece>,
        visits: Vec<Visit>,
    }

    /// Runs a toy that drinks 1 g/h from a store, with half an hour's worth more in its felt.
    fn run(attendance: Attendance, calendar_h: &[i64], store_g: f64, temps_k: &[f64]) -> Run {
        let surroundings = laid(&series(temps_k, 0.5));
        let calendar: Vec<i64> = calendar_h.iter().map(|h| START_UNIX_S + h * 3600).collect();
        let mut person = Person::new(attendance, START_UNIX_S, &calendar);
        let mut machine = ToyMachine {
            store_g,
            felt_g: 0.5,
            gone_g: 0.0,
        };
        let mut pieces = Vec::new();
        let hours = 0..temps_k.len();
        let one = |hour| {
            person.run_hour(
                &mut machine,
                hour,
                &surroundings.hour(hour, AirShift::NONE),
                &mut pieces,
            )
        };
        let records = hours.map(one).collect();
        Run {
            records,
            pieces,
            visits: person.visits,
        }
    }

    fn attendance(policy: AttendancePolicy, delay_hours: f64) -> Attendance {
        Attendance {
            policy,
            days: 1,
            delay_hours,
        }
    }

    fn sum(run: &Run, figure: impl Fn(&HourRecord) -> f64) -> f64 {
        run.records.iter().map(figure).sum()
    }

    fn visit_hours(run: &Run) -> Vec<f64> {
        run.visits
            .iter()
            .map(|v| (v.at_unix_s - START_UNIX_S) as f64 / 3600.0)
            .collect()
    }

    const MILD: [f64; 12] = [293.15; 12];

    #[test]
    fn at_once_means_at_the_second_it_falls_due() {
        let run = run(attendance(AttendancePolicy::WhenDue, 0.0), &[], 2.5, &MILD);
        assert_eq!(visit_hours(&run), [2.5, 5.0, 7.5, 10.0]);
        assert!(
            run.visits
                .iter()
                .all(|v| v.cause == VisitCause::CupAtReach && (v.water_g - 2.5).abs() < 1e-9)
        );
        assert_eq!(sum(&run, |r| r.needs_person_s), 0.0);
        assert_eq!(sum(&run, |r| r.seconds(HourState::Running)), 12.0 * 3600.0);
    }

    #[test]
    fn a_delay_is_waited_for_and_the_felt_runs_dry_meanwhile() {
        let run = run(attendance(AttendancePolicy::WhenDue, 2.0), &[], 2.5, &MILD);
        assert_eq!(visit_hours(&run), [4.5, 9.0]);
        assert_eq!(run.visits[0].due_since_unix_s, Some(START_UNIX_S + 9000));
        // Due at 2.5 h, 7 h and 11.5 h: 2 h, 2 h and the half hour to the end.
        assert!((sum(&run, |r| r.needs_person_s) - 4.5 * 3600.0).abs() < 1e-6);
        assert!((sum(&run, |r| r.seconds(HourState::Dry)) - 3.0 * 3600.0).abs() < 1e-6);
    }

    #[test]
    fn a_round_comes_by_whether_or_not_it_is_due() {
        let run = run(attendance(AttendancePolicy::Every, 0.0), &[2, 8], 2.5, &MILD);
        assert_eq!(visit_hours(&run), [2.0, 8.0]);
        assert!(run.visits.iter().all(|v| v.cause == VisitCause::Scheduled));
        assert_eq!(run.visits[0].due_since_unix_s, None);
        // Filled at 2 h, due at 4.5 h, dry from 5 h: waits for the round at 8 h.
        assert!((sum(&run, |r| r.needs_person_s) - (3.5 + 1.5) * 3600.0).abs() < 1e-6);
        assert!((sum(&run, |r| r.seconds(HourState::Dry)) - (3.0 + 1.0) * 3600.0).abs() < 1e-6);
    }

    #[test]
    fn with_nobody_it_runs_to_the_last_drop_and_stays_dry() {
        let run = run(attendance(AttendancePolicy::Never, 0.0), &[], 2.5, &MILD);
        assert!(run.visits.is_empty());
        assert!((sum(&run, |r| r.cycles) - 300.0).abs() < 1e-9);
        assert!(
            run.records[4..]
                .iter()
                .all(|r| r.cycles == 0.0 && r.seconds(HourState::Dry) == 3600.0)
        );
        assert!((sum(&run, |r| r.needs_person_s) - 9.5 * 3600.0).abs() < 1e-6);
    }

    #[test]
    fn a_visit_waits_for_the_thaw() {
        let mut temps = [268.15; 12];
        temps[6..].fill(278.15);
        let run = run(attendance(AttendancePolicy::WhenDue, 0.0), &[], 2.5, &temps);
        // The air passes 0 °C during the sixth hour; the next full hour is the seventh.
        assert_eq!(visit_hours(&run)[0], 6.0);
        assert!(run.records[3].needs_person_s == 3600.0);
    }

    #[test]
    fn a_store_that_lasts_minutes_does_not_hang_the_run() {
        for store_g in [0.0, 1e-6] {
            let run = run(attendance(AttendancePolicy::WhenDue, 0.0), &[], store_g, &MILD[..2]);
            let gaps: Vec<i64> = run.visits.windows(2).map(|w| w[1].at_unix_s - w[0].at_unix_s).collect();
            assert!(
                gaps.iter().all(|gap| *gap as f64 >= SHORTEST_BETWEEN_VISITS_S - 1.0),
                "{gaps:?}"
            );
            assert_eq!(run.visits.len(), 8);
        }
    }

    #[test]
    fn hours_are_full_and_water_balances() {
        for policy in [
            AttendancePolicy::WhenDue,
            AttendancePolicy::Every,
            AttendancePolicy::Never,
        ] {
            let run = run(attendance(policy, 0.7), &[3, 9], 1.3, &MILD);
            for record in &run.records {
                assert!((record.state_s.iter().sum::<f64>() - 3600.0).abs() < 1e-6);
            }
            let filled_g: f64 = run.visits.iter().map(|v| v.water_g).sum();
            let lost_g = sum(&run, |r| 1e3 * r.head_loss.water_kg);
            let still_gone_g = lost_g - filled_g;
            assert!(
                (-1e-9..=1.8 + 1e-9).contains(&still_gone_g),
                "{policy:?}: {still_gone_g}"
            );
            assert!(run.pieces.windows(2).all(|w| w[0].to_s == w[1].from_s));
        }
    }
}
