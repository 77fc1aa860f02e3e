//! How sources are asked: which questions, how often, by how many at once, and what happens when they do not answer.

use std::sync::Arc;
use std::sync::atomic::{AtomicI64, Ordering};
use std::time::Duration;

use dipcast::config::Config;
use dipcast::service::{Clock, SourceState, Weather};

use super::asking::{config, fetched, june, order, weather};
use super::bodies::{JUNE, NOW, TODAY, met_norway, open_meteo};
use super::stand_in::{Reply, Seen, StandIn};

pub const DAY: i64 = 86_400;

/// Answers as Open-Meteo would: the days asked for, or a week back and sixteen days ahead.
fn as_open_meteo(seen: &Seen) -> Reply {
    let day = |name| {
        let date: chrono::NaiveDate = seen.parameter(name)?.parse().ok()?;
        Some(date.and_time(chrono::NaiveTime::MIN).and_utc().timestamp())
    };
    let (from, to) = match (day("start_date"), day("end_date")) {
        (Some(first), Some(last)) => (first, last + DAY),
        _ => (TODAY - 7 * DAY, TODAY + 16 * DAY),
    };
    Reply::json(open_meteo(from, ((to - from) / 3600) as usize).to_string())
}

pub async fn open_meteo_stand_in() -> StandIn {
    StandIn::start(|_, seen| as_open_meteo(seen)).await
}

/// A service whose clock the test moves.
fn weather_with_clock(config: &Config) -> (Weather, Arc<AtomicI64>) {
    let now = Arc::new(AtomicI64::new(NOW));
    let clock = Arc::clone(&now);
    (
        Weather::new(config, Clock::of(move || clock.load(Ordering::Relaxed))),
        now,
    )
}

#[tokio::test]
async fn the_same_weather_is_asked_for_once_however_many_wait() {
    let stand_in = open_meteo_stand_in().await;
    let weather = weather(&config(&stand_in.url));
    let waiting = (0..20).map(|_| fetched(&weather, june("open_meteo")));
    let came = futures::future::join_all(waiting).await;
    assert!(came.iter().all(Result::is_ok));
    assert_eq!(stand_in.seen().len(), 1);
    fetched(&weather, june("open_meteo")).await.unwrap();
    assert_eq!(stand_in.seen().len(), 1, "kept by now");
}

#[tokio::test]
async fn an_answer_nobody_waits_for_any_more_is_kept() {
    let stand_in = open_meteo_stand_in().await;
    let weather = weather(&config(&stand_in.url));
    let impatient = fetched(&weather, june("open_meteo"));
    // Dropped at its first chance, before an answer can have come.
    assert!(tokio::time::timeout(Duration::ZERO, impatient).await.is_err());
    fetched(&weather, june("open_meteo")).await.unwrap();
    assert_eq!(stand_in.seen().len(), 1);
}

#[tokio::test]
async fn the_budget_is_kept_and_told() {
    let stand_in = open_meteo_stand_in().await;
    let mut config = config(&stand_in.url);
    config.weather.open_meteo.budget.per_minute = 2;
    config.weather.open_meteo.budget.per_day = 100;
    let weather = weather(&config);
    for days_later in 0..2 {
        fetched(&weather, order("open_meteo", JUNE + days_later * DAY, 24))
            .await
            .unwrap();
    }
    let spent = fetched(&weather, order("open_meteo", JUNE + 9 * DAY, 24))
        .await
        .unwrap_err();
    assert!(spent.detail.contains("used up"), "{spent}");
    assert!((55..=60).contains(&spent.retry_after_s.unwrap()), "{spent:?}");
    assert_eq!(stand_in.seen().len(), 2);
    let left = weather.sources().await[1].budget_left.unwrap();
    assert_eq!((left.minute, left.day), (0.0, 98.0));
}

#[tokio::test]
async fn tries_count_against_the_budget() {
    let stand_in = StandIn::replying(vec![Reply::status(503, "")]).await;
    let mut config = config(&stand_in.url);
    config.weather.open_meteo.budget.per_minute = 2;
    let trouble = fetched(&weather(&config), june("open_meteo")).await.unwrap_err();
    assert!(trouble.detail.contains("used up"), "{trouble}");
    assert_eq!(
        stand_in.seen().len(),
        2,
        "three tries were allowed, two calls were left"
    );
}

#[tokio::test]
async fn a_failing_source_is_left_in_peace_and_tried_again_later() {
    let stand_in = StandIn::start(|number, seen| {
        if number < 4 {
            Reply::status(500, "")
        } else {
            as_open_meteo(seen)
        }
    })
    .await;
    let mut config = config(&stand_in.url);
    config.weather.tries = 1;
    config.weather.failures_before_rest = 4;
    config.weather.rest = Duration::from_millis(400);
    let weather = weather(&config);
    for _ in 0..4 {
        fetched(&weather, june("open_meteo")).await.unwrap_err();
    }
    let resting = fetched(&weather, june("open_meteo")).await.unwrap_err();
    assert!(
        resting.detail.contains("left in peace") && resting.retry_after_s == Some(1),
        "{resting:?}"
    );
    assert_eq!(stand_in.seen().len(), 4);
    let report = weather.sources().await.remove(1);
    assert!(matches!(report.state, SourceState::Resting(_)) && report.past.last_failure.is_some());
    // No sleep: the source is asked until its rest is over, which the stand-in sees as one more question.
    while fetched(&weather, june("open_meteo")).await.is_err() {
        tokio::task::yield_now().await;
    }
    assert_eq!(stand_in.seen().len(), 5);
    assert_eq!(weather.sources().await[1].state, SourceState::Ready);
}

#[tokio::test]
async fn a_forecast_is_kept_until_it_expires_and_then_asked_conditionally() {
    let stand_in = StandIn::start(|number, seen| match (number, seen.header("if-modified-since")) {
        (0, None) => Reply::json(met_norway(NOW - 1200, 60, 0).to_string())
            .with("Expires", "Sun, 01 Mar 2026 10:50:00 GMT")
            .with("Date", "Sun, 01 Mar 2026 10:20:00 GMT")
            .with("Last-Modified", "Sun, 01 Mar 2026 10:11:12 GMT"),
        (1, Some(earlier)) if earlier == "Sun, 01 Mar 2026 10:11:12 GMT" => Reply::Whole(
            304,
            vec![
                ("Expires", "Sun, 01 Mar 2026 11:20:00 GMT".to_owned()),
                ("Date", "Sun, 01 Mar 2026 10:50:00 GMT".to_owned()),
            ],
            Vec::new(),
        ),
        (_, earlier) => panic!("question {number} with {earlier:?}"),
    });
    let stand_in = stand_in.await;
    let (weather, now) = weather_with_clock(&config(&stand_in.url));
    let wanted = || order("met_norway", NOW - 1200 + 3600, 24);
    let first = fetched(&weather, wanted()).await.unwrap();
    now.store(NOW + 29 * 60, Ordering::Relaxed);
    fetched(&weather, wanted()).await.unwrap();
    assert_eq!(stand_in.seen().len(), 1, "not before it expires");
    now.store(NOW + 30 * 60, Ordering::Relaxed);
    let renewed = fetched(&weather, wanted()).await.unwrap();
    assert_eq!(stand_in.seen().len(), 2);
    assert_eq!(renewed.readings.air_temp_k, first.readings.air_temp_k);
    assert_eq!(renewed.provenance.stretches[0].fetched_unix_s, Some(NOW + 30 * 60));
    now.store(NOW + 59 * 60, Ordering::Relaxed);
    fetched(&weather, wanted()).await.unwrap();
    assert_eq!(stand_in.seen().len(), 2, "as the 304 said");
}

#[tokio::test]
async fn an_expired_answer_serves_marked_as_stale_while_the_source_is_down() {
    let stand_in = StandIn::start(|number, seen| {
        if number == 0 {
            as_open_meteo(seen)
        } else {
            Reply::status(503, "")
        }
    })
    .await;
    let (weather, now) = weather_with_clock(&config(&stand_in.url));
    let wanted = || order("open_meteo", TODAY + DAY, 48);
    let fresh = fetched(&weather, wanted()).await.unwrap();
    assert!(!fresh.provenance.is_stale());
    now.store(NOW + 2 * 3600, Ordering::Relaxed);
    let stale = fetched(&weather, wanted()).await.unwrap();
    assert!(stale.provenance.is_stale());
    assert_eq!(stale.readings.air_temp_k, fresh.readings.air_temp_k);
    let said = stale
        .readings
        .assumptions
        .iter()
        .find(|said| said.what.contains("expired"))
        .unwrap();
    assert!(
        said.value.contains("2026-03-01T10:20:00Z") && said.value.contains("status 503"),
        "{said:?}"
    );
}

#[tokio::test]
async fn settled_history_holds_for_good_and_young_or_holey_history_a_day() {
    let stand_in = StandIn::start(|number, seen| {
        let mut reply = as_open_meteo(seen);
        if let (Reply::Whole(_, _, body), 2) = (&mut reply, number) {
            let mut holey: serde_json::Value = serde_json::from_slice(body).unwrap();
            holey["hourly"]["temperature_2m"][3] = serde_json::Value::Null;
            *body = holey.to_string().into_bytes();
        }
        reply
    });
    let stand_in = stand_in.await;
    let (weather, now) = weather_with_clock(&config(&stand_in.url));
    let (old, young, holey) = (JUNE, TODAY - 20 * DAY, JUNE + 30 * DAY);
    for from in [old, young, holey] {
        fetched(&weather, order("open_meteo", from, 24)).await.unwrap();
    }
    now.store(NOW + DAY + 1, Ordering::Relaxed);
    for (from, asked) in [(old, 3), (young, 4), (holey, 5)] {
        fetched(&weather, order("open_meteo", from, 24)).await.unwrap();
        assert_eq!(stand_in.seen().len(), asked);
    }
    now.store(NOW + 3000 * DAY, Ordering::Relaxed);
    fetched(&weather, order("open_meteo", old, 24)).await.unwrap();
    assert_eq!(stand_in.seen().len(), 5);
}

#[tokio::test]
async fn what_came_before_a_failure_is_not_asked_for_again() {
    let stand_in = StandIn::start(|number, seen| {
        if number == 1 {
            Reply::status(400, "")
        } else {
            as_open_meteo(seen)
        }
    })
    .await;
    let weather = weather(&config(&stand_in.url));
    // 2024-12-31 and 2025-01-01: two years, two questions.
    let wanted = || order("open_meteo", 1_735_603_200, 48);
    fetched(&weather, wanted()).await.unwrap_err();
    let came = fetched(&weather, wanted()).await.unwrap();
    assert_eq!((came.readings.len(), stand_in.seen().len()), (48, 3));
}

#[tokio::test]
async fn one_question_at_a_time_where_the_source_wants_it_so() {
    let stand_in = open_meteo_stand_in().await;
    let weather = weather(&config(&stand_in.url));
    let many = (0..8).map(|day| fetched(&weather, order("open_meteo", JUNE + day * DAY, 24)));
    let came = futures::future::join_all(many).await;
    assert!(came.iter().all(Result::is_ok));
    assert_eq!((stand_in.seen().len(), stand_in.most_at_once()), (8, 1));
}
