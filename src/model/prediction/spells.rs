//! Stall spells: when it stood still, why, and what got it going again.

use super::record::{Piece, stalled_s};
use super::result::{HealedBy, Spell, StallSpells};
use crate::model::cycle::HourState;

/// A stalled stretch, seconds since the start of the run.
#[derive(Debug, Clone, Copy)]
struct Stall {
    from_s: f64,
    to_s: f64,
    state_s: [f64; 7],
}

/// Stalls shorter than this are rounding, not standing still [s].
const SHORTEST_STALL_S: f64 = 1.0;

/// Finds the spells of a run from its pieces, in order and without gaps.
///
/// A piece says how long it stalled, not when. A mixed piece's stall is put next to the neighbour that stalled more, in
/// the middle between two that ran, and half at each end between two that stalled alike: good to within the piece, at
/// most an hour. Unknown time neither ends a spell nor counts in it.
pub(super) fn stall_spells(pieces: &[Piece], start_unix_s: i64, spell_minutes: f64) -> StallSpells {
    let visits_s: Vec<f64> = pieces.iter().filter(|p| p.visited).map(|p| p.from_s).collect();
    let end_s = pieces
        .iter()
        .rfind(|piece| !is_unknown(piece))
        .map_or(0.0, |piece| piece.to_s);
    let mut spells = StallSpells {
        spell_minutes,
        ..StallSpells::default()
    };
    for stall in bridged(pieces, spell_minutes * 60.0) {
        let lasts_to_the_end = end_s - stall.to_s < SHORTEST_STALL_S;
        let healed_by = if lasts_to_the_end {
            HealedBy::NotYet
        } else {
            healed_by(&stall, &visits_s)
        };
        list(&mut spells, &stall, healed_by, start_unix_s);
    }
    spells
}

fn is_unknown(piece: &Piece) -> bool {
    piece.state_s[HourState::Unknown as usize] >= piece.to_s - piece.from_s
}

/// Stalls with less than so many seconds of running between them count as one.
fn bridged(pieces: &[Piece], shortest_s: f64) -> Vec<Stall> {
    let mut joined: Vec<Stall> = Vec::new();
    for stall in placed(pieces) {
        let shortest_s = shortest_s.max(SHORTEST_STALL_S);
        match joined.last_mut() {
            Some(last) if ran_s(pieces, last.to_s, stall.from_s) < shortest_s => extend(last, &stall),
            _ => joined.push(stall),
        }
    }
    joined
}

/// Seconds between two stalls, unknown time apart.
fn ran_s(pieces: &[Piece], from_s: f64, to_s: f64) -> f64 {
    let first = pieces.partition_point(|piece| piece.to_s <= from_s);
    let between = pieces[first..].iter().take_while(|piece| piece.from_s < to_s);
    to_s - from_s
        - between
            .map(|piece| piece.state_s[HourState::Unknown as usize])
            .sum::<f64>()
}

fn extend(last: &mut Stall, next: &Stall) {
    last.to_s = next.to_s;
    for (sum, seconds) in last.state_s.iter_mut().zip(next.state_s) {
        *sum += seconds;
    }
}

/// Only a person wets a felt that has dried out; everything else passes by itself.
fn healed_by(stall: &Stall, visits_s: &[f64]) -> HealedBy {
    let was_dry = stall.state_s[HourState::Dry as usize] > 0.0;
    let visited = visits_s
        .iter()
        .any(|at_s| stall.from_s <= *at_s && *at_s <= stall.to_s + SHORTEST_STALL_S);
    if was_dry && visited {
        HealedBy::Person
    } else {
        HealedBy::Itself
    }
}

fn list(spells: &mut StallSpells, stall: &Stall, healed_by: HealedBy, start_unix_s: i64) {
    let hours = stalled_s(&stall.state_s) / 3600.0;
    if hours * 60.0 < spells.spell_minutes {
        spells.short_count += 1;
        spells.short_hours += hours;
        return;
    }
    spells.longest_hours = spells.longest_hours.max(hours);
    spells.list.push(Spell {
        from_unix_s: start_unix_s + stall.from_s.floor() as i64,
        to_unix_s: start_unix_s + stall.to_s.ceil() as i64,
        hours,
        cause: longest_state(&stall.state_s),
        healed_by,
    });
}

fn longest_state(state_s: &[f64; 7]) -> HourState {
    let stalls = HourState::ALL
        .into_iter()
        .filter(|s| !matches!(s, HourState::Running | HourState::Unknown));
    let by_time = |a: &HourState, b: &HourState| state_s[*a as usize].total_cmp(&state_s[*b as usize]);
    stalls.max_by(by_time).unwrap_or(HourState::Humid)
}

/// The stalled stretches, each put where it belongs inside its piece.
fn placed(pieces: &[Piece]) -> impl Iterator<Item = Stall> + '_ {
    let share = |i: usize| {
        pieces.get(i).map_or(0.0, |piece| {
            stalled_s(&piece.state_s) / (piece.to_s - piece.from_s).max(1e-9)
        })
    };
    pieces.iter().enumerate().flat_map(move |(i, piece)| {
        // A visit breaks the link to what was before it.
        let before = if piece.visited {
            0.0
        } else {
            i.checked_sub(1).map_or(0.0, share)
        };
        let after = if pieces.get(i + 1).is_some_and(|next| next.visited) {
            0.0
        } else {
            share(i + 1)
        };
        place(piece, before, after)
    })
}

fn place(piece: &Piece, before: f64, after: f64) -> Vec<Stall> {
    let stalled = stalled_s(&piece.state_s);
    let (from_s, to_s) = (piece.from_s, piece.to_s);
    let free_s = (to_s - from_s - stalled).max(0.0);
    let stall = |from_s: f64, to_s: f64, share: f64| Stall {
        from_s,
        to_s,
        state_s: piece.state_s.map(|seconds| seconds * share),
    };
    if stalled <= 0.0 {
        Vec::new()
    } else if free_s < SHORTEST_STALL_S {
        vec![stall(from_s, to_s, 1.0)]
    } else if before > after {
        vec![stall(from_s, from_s + stalled, 1.0)]
    } else if after > before {
        vec![stall(to_s - stalled, to_s, 1.0)]
    } else if before > 0.0 {
        vec![
            stall(from_s, from_s + stalled / 2.0, 0.5),
            stall(to_s - stalled / 2.0, to_s, 0.5),
        ]
    } else {
        vec![stall(from_s + free_s / 2.0, to_s - free_s / 2.0, 1.0)]
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const START: i64 = 1_000_000;

    /// Hours given as (running, humid, dry, unknown) minutes.
    fn hours(minutes: &[[f64; 4]]) -> Vec<Piece> {
        let piece = |(hour, m): (usize, &[f64; 4])| Piece {
            from_s: hour as f64 * 3600.0,
            to_s: (hour + 1) as f64 * 3600.0,
            visited: false,
            state_s: [m[0], m[1], m[2], 0.0, 0.0, 0.0, m[3]].map(|minutes| minutes * 60.0),
        };
        minutes.iter().enumerate().map(piece).collect()
    }

    const RUNS: [f64; 4] = [60.0, 0.0, 0.0, 0.0];
    const HUMID: [f64; 4] = [0.0, 60.0, 0.0, 0.0];
    const DRY: [f64; 4] = [0.0, 0.0, 60.0, 0.0];
    const UNKNOWN: [f64; 4] = [0.0, 0.0, 0.0, 60.0];

    fn minutes(spell: &Spell) -> (i64, i64) {
        ((spell.from_unix_s - START) / 60, (spell.to_unix_s - START) / 60)
    }

    #[test]
    fn a_night_is_one_spell_with_its_ends_in_the_mixed_hours() {
        let found = stall_spells(
            &hours(&[RUNS, [40.0, 20.0, 0.0, 0.0], HUMID, [50.0, 10.0, 0.0, 0.0], RUNS]),
            START,
            30.0,
        );
        assert_eq!(found.list.len(), 1);
        let spell = found.list[0];
        assert_eq!(minutes(&spell), (100, 190));
        assert_eq!(
            (spell.hours, spell.cause, spell.healed_by),
            (1.5, HourState::Humid, HealedBy::Itself)
        );
        assert_eq!(found.longest_hours, 1.5);
    }

    #[test]
    fn short_breaks_are_bridged_and_short_spells_only_counted() {
        let night = [
            RUNS,
            HUMID,
            [20.0, 40.0, 0.0, 0.0],
            HUMID,
            RUNS,
            [50.0, 10.0, 0.0, 0.0],
            RUNS,
        ];
        let found = stall_spells(&hours(&night), START, 30.0);
        assert_eq!(found.list.len(), 1);
        assert_eq!(minutes(&found.list[0]), (60, 240));
        assert!((found.list[0].hours - 160.0 / 60.0).abs() < 1e-9);
        assert_eq!(found.short_count, 1);
        assert!((found.short_hours - 10.0 / 60.0).abs() < 1e-9);
        let all = stall_spells(&hours(&night), START, 0.0);
        assert_eq!((all.list.len(), all.short_count), (3, 0));
        assert_eq!(minutes(&all.list[2]), (325, 335));
    }

    #[test]
    fn a_visit_ends_a_dry_spell_and_the_end_of_the_run_none() {
        let mut pieces = hours(&[RUNS, DRY, RUNS, DRY]);
        pieces[2].visited = true;
        let found = stall_spells(&pieces, START, 30.0);
        let healed: Vec<HealedBy> = found.list.iter().map(|spell| spell.healed_by).collect();
        assert_eq!(healed, [HealedBy::Person, HealedBy::NotYet]);
    }

    #[test]
    fn a_visit_does_not_cure_damp_air() {
        let mut pieces = hours(&[RUNS, HUMID, HUMID, RUNS]);
        pieces[2].visited = true;
        let found = stall_spells(&pieces, START, 30.0);
        assert_eq!(found.list.len(), 1);
        assert_eq!(
            (minutes(&found.list[0]), found.list[0].healed_by),
            ((60, 180), HealedBy::Itself)
        );
    }

    #[test]
    fn unknown_hours_neither_end_nor_lengthen_a_spell() {
        let found = stall_spells(
            &hours(&[RUNS, HUMID, UNKNOWN, HUMID, RUNS, UNKNOWN, RUNS, HUMID, UNKNOWN]),
            START,
            30.0,
        );
        assert_eq!(found.list.len(), 2);
        assert_eq!((minutes(&found.list[0]), found.list[0].hours), ((60, 240), 2.0));
        assert_eq!(
            (minutes(&found.list[1]), found.list[1].healed_by),
            ((420, 480), HealedBy::NotYet)
        );
    }

    #[test]
    fn spells_hold_all_stalled_time() {
        let run = [
            RUNS,
            HUMID,
            [15.0, 45.0, 0.0, 0.0],
            DRY,
            [59.0, 1.0, 0.0, 0.0],
            HUMID,
            RUNS,
            [30.0, 10.0, 20.0, 0.0],
        ];
        for spell_minutes in [0.0, 5.0, 60.0] {
            let found = stall_spells(&hours(&run), START, spell_minutes);
            let all: f64 = found.list.iter().map(|spell| spell.hours).sum::<f64>() + found.short_hours;
            assert!(
                (all - (60.0 + 45.0 + 60.0 + 1.0 + 60.0 + 30.0) / 60.0).abs() < 1e-9,
                "{spell_minutes}"
            );
        }
    }
}
