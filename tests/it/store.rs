//! The store: what is kept, by whom, for how long, and what happens to a file that is not as it should be.

use std::path::Path;
use std::process::Command;

use dipcast::config;
use dipcast::store::{KeptWeather, Store, StoreError};

use crate::endpoints::asking;
use crate::endpoints::bodies::{JUNE, NOW, open_meteo};
use crate::endpoints::stand_in::{Reply, StandIn};

fn settings(file: &Path) -> config::Store {
    config::Store {
        file: Some(file.to_owned()),
        weather_bytes: 1 << 20,
    }
}

fn kept(question: &str, fetched_unix_s: i64, bytes: usize) -> KeptWeather {
    KeptWeather {
        question: question.to_owned(),
        source: "met_norway".to_owned(),
        fetched_unix_s,
        expires_unix_s: Some(fetched_unix_s + 1800),
        last_modified: Some("Sun, 01 Mar 2026 10:11:12 GMT".to_owned()),
        answer: noise(bytes),
    }
}

/// Bytes that do not pack.
fn noise(bytes: usize) -> Vec<u8> {
    let mut state = 1u64;
    let mut next = || {
        state = state
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        (state >> 56) as u8
    };
    (0..bytes).map(|_| next()).collect()
}

/// The contract, whatever is behind it.
async fn keeps_its_contract(store: &Store) {
    assert_eq!(store.weather("a", NOW).await.unwrap(), None);
    let first = kept("a", NOW, 1000);
    store.keep_weather(first.clone()).await.unwrap();
    assert_eq!(store.weather("a", NOW).await.unwrap(), Some(first));
    let newer = kept("a", NOW + 60, 10);
    store.keep_weather(newer.clone()).await.unwrap();
    assert_eq!(
        store.weather("a", NOW).await.unwrap(),
        Some(newer.clone()),
        "in place of the earlier one"
    );
    store.renew_weather("a", NOW + 90, None).await.unwrap();
    let renewed = KeptWeather {
        fetched_unix_s: NOW + 90,
        expires_unix_s: None,
        ..newer
    };
    assert_eq!(store.weather("a", NOW).await.unwrap(), Some(renewed));
    assert_eq!(store.newest_weather("met_norway").await.unwrap(), Some(NOW + 90));
    assert_eq!(store.newest_weather("nowhere").await.unwrap(), None);
}

#[tokio::test]
async fn file_and_memory_keep_the_same_contract() {
    let folder = tempfile::tempdir().unwrap();
    let in_file = Store::open(&settings(&folder.path().join("new/dipcast.db")))
        .await
        .unwrap();
    assert!(in_file.is_lasting());
    keeps_its_contract(&in_file).await;
    let nowhere = config::Store {
        file: None,
        weather_bytes: 1 << 20,
    };
    let in_memory = Store::open(&nowhere).await.unwrap();
    assert!(!in_memory.is_lasting());
    keeps_its_contract(&in_memory).await;
}

#[tokio::test]
async fn the_room_is_bounded_and_what_was_not_used_for_longest_goes() {
    let folder = tempfile::tempdir().unwrap();
    let store = Store::open(&settings(&folder.path().join("dipcast.db"))).await.unwrap();
    for (number, question) in ["a", "b", "c"].into_iter().enumerate() {
        store
            .keep_weather(kept(question, NOW + number as i64, 300_000))
            .await
            .unwrap();
    }
    // Reading notes the use.
    store.weather("a", NOW + 7200).await.unwrap().unwrap();
    store.keep_weather(kept("d", NOW + 7300, 300_000)).await.unwrap();
    let there = |question| {
        let store = store.clone();
        async move { store.weather(question, NOW + 7300).await.unwrap().is_some() }
    };
    assert_eq!(
        (there("a").await, there("b").await, there("c").await, there("d").await),
        (true, false, true, true)
    );
}

#[tokio::test]
async fn many_may_open_a_new_file_at_once() {
    let folder = tempfile::tempdir().unwrap();
    let settings = settings(&folder.path().join("dipcast.db"));
    let opened = futures::future::join_all((0..12).map(|_| Store::open(&settings))).await;
    let stores: Vec<Store> = opened.into_iter().map(Result::unwrap).collect();
    let keeping = stores
        .iter()
        .enumerate()
        .map(|(number, store)| store.keep_weather(kept(&format!("q{number}"), NOW, 100)));
    futures::future::join_all(keeping)
        .await
        .into_iter()
        .for_each(Result::unwrap);
    for number in 0..12 {
        assert!(
            stores[0].weather(&format!("q{number}"), NOW).await.unwrap().is_some(),
            "{number}"
        );
    }
}

#[tokio::test]
async fn kept_weather_survives_a_restart() {
    let folder = tempfile::tempdir().unwrap();
    let stand_in = StandIn::replying(vec![Reply::json(open_meteo(JUNE, 48).to_string())]).await;
    let mut config = asking::config(&stand_in.url);
    config.store.file = Some(folder.path().join("dipcast.db"));
    let first = asking::fetched(&asking::weather(&config), asking::june("open_meteo"))
        .await
        .unwrap();
    // Another process, another address of the source, no answer from it.
    let mut later = asking::config("http://127.0.0.1:9/weather");
    later.store.file.clone_from(&config.store.file);
    let restarted = asking::weather(&later);
    let second = asking::fetched(&restarted, asking::june("open_meteo")).await.unwrap();
    assert_eq!(first.readings.air_temp_k, second.readings.air_temp_k);
    assert_eq!(stand_in.seen().len(), 1);
    assert_eq!(
        restarted.sources().await[1].past.last_success_unix_s,
        Some(NOW),
        "known from the store"
    );
}

#[tokio::test]
async fn two_services_share_a_file() {
    let folder = tempfile::tempdir().unwrap();
    let stand_in = StandIn::replying(vec![Reply::json(open_meteo(JUNE, 48).to_string())]).await;
    let mut config = asking::config(&stand_in.url);
    config.store.file = Some(folder.path().join("dipcast.db"));
    let (one, other) = (asking::weather(&config), asking::weather(&config));
    let both = tokio::join!(
        asking::fetched(&one, asking::june("open_meteo")),
        asking::fetched(&other, asking::june("open_meteo"))
    );
    assert!(both.0.is_ok() && both.1.is_ok());
    let asked = stand_in.seen().len();
    asking::fetched(&one, asking::june("open_meteo")).await.unwrap();
    asking::fetched(&other, asking::june("open_meteo")).await.unwrap();
    assert_eq!(stand_in.seen().len(), asked, "each found what the other kept");
}

#[tokio::test]
async fn a_damaged_file_is_named_with_the_remedy_and_stops_the_start() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("dipcast.db");
    std::fs::write(&file, noise(8192)).unwrap();
    let error = Store::open(&settings(&file)).await.unwrap_err();
    assert!(matches!(error, StoreError::Damaged { .. }), "{error:?}");
    assert!(error.to_string().contains("move it away"), "{error}");
    let started = Command::new(env!("CARGO_BIN_EXE_dipcast"))
        .args(["serve", "--bind", "127.0.0.1:0"])
        .env("DIPCAST__STORE__FILE", &file)
        .output()
        .unwrap();
    let told = String::from_utf8_lossy(&started.stderr).into_owned();
    assert!(
        !started.status.success() && told.contains("move it away") && !told.contains("panicked"),
        "{told}"
    );
}

#[tokio::test]
async fn a_file_damaged_inside_costs_only_what_was_kept() {
    let folder = tempfile::tempdir().unwrap();
    let stand_in = StandIn::replying(vec![Reply::json(open_meteo(JUNE, 48).to_string())]).await;
    let mut config = asking::config(&stand_in.url);
    let file = folder.path().join("dipcast.db");
    config.store.file = Some(file.clone());
    asking::fetched(&asking::weather(&config), asking::june("open_meteo"))
        .await
        .unwrap();
    let store = Store::open(&config.store).await.unwrap();
    store.close().await;
    let mut bytes = std::fs::read(&file).unwrap();
    let from = bytes.len().min(8192);
    bytes[from..].fill(0xa5);
    std::fs::write(&file, &bytes).unwrap();
    let _ = std::fs::remove_file(folder.path().join("dipcast.db-wal"));
    let _ = std::fs::remove_file(folder.path().join("dipcast.db-shm"));
    let came = asking::fetched(&asking::weather(&config), asking::june("open_meteo")).await;
    assert!(came.is_ok(), "{came:?}");
    assert_eq!(stand_in.seen().len(), 2, "fetched anew");
}

#[tokio::test]
async fn a_file_of_a_later_version_is_left_alone() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("dipcast.db");
    Store::open(&settings(&file)).await.unwrap().close().await;
    let options = sqlx::sqlite::SqliteConnectOptions::new().filename(&file);
    let pool = sqlx::SqlitePool::connect_with(options).await.unwrap();
    let step = "INSERT INTO _sqlx_migrations (version, description, success, checksum, execution_time) VALUES (9999, 'later', TRUE, x'00', 0)";
    sqlx::query(step).execute(&pool).await.unwrap();
    pool.close().await;
    let error = Store::open(&settings(&file)).await.unwrap_err();
    assert!(matches!(error, StoreError::Later { .. }), "{error:?}");
}

#[tokio::test]
async fn without_a_writable_place_it_goes_on_without_keeping() {
    let folder = tempfile::tempdir().unwrap();
    let in_the_way = folder.path().join("a-file");
    std::fs::write(&in_the_way, "x").unwrap();
    let stand_in = StandIn::replying(vec![Reply::json(open_meteo(JUNE, 48).to_string())]).await;
    let mut config = asking::config(&stand_in.url);
    config.store.file = Some(in_the_way.join("dipcast.db"));
    let store = Store::open(&config.store).await.unwrap();
    assert!(!store.is_lasting());
    let weather = asking::weather(&config);
    for _ in 0..2 {
        asking::fetched(&weather, asking::june("open_meteo")).await.unwrap();
    }
    assert_eq!(stand_in.seen().len(), 1, "not even forgotten while the process lives");
}

#[tokio::test]
async fn the_command_line_asks_keeps_and_finds_again() {
    let folder = tempfile::tempdir().unwrap();
    let stand_in = StandIn::replying(vec![Reply::json(open_meteo(JUNE, 48).to_string())]).await;
    let request = folder.path().join("request.json");
    let asked = serde_json::json!({
        "device_example": "shelf-180", "options": {"bands": false},
        "weather": {"kind": "endpoint", "source": "open_meteo", "latitude": 50, "longitude": 8,
                    "from": "2025-06-01", "to": "2025-06-03"}});
    std::fs::write(&request, asked.to_string()).unwrap();
    let run = |url: String, folder: std::path::PathBuf| {
        move || {
            Command::new(env!("CARGO_BIN_EXE_dipcast"))
                .current_dir(&folder)
                .args(["predict", "--request", "request.json"])
                .env("DIPCAST__WEATHER__OPEN_METEO__ENABLED", "true")
                .env("DIPCAST__WEATHER__OPEN_METEO__ARCHIVE_URL", url)
                .output()
                .unwrap()
        }
    };
    let first = tokio::task::spawn_blocking(run(stand_in.url.clone(), folder.path().to_owned()))
        .await
        .unwrap();
    assert!(first.status.success(), "{}", String::from_utf8_lossy(&first.stderr));
    assert!(folder.path().join("dipcast.db").is_file());
    let second = tokio::task::spawn_blocking(run("http://127.0.0.1:9/".to_owned(), folder.path().to_owned()))
        .await
        .unwrap();
    assert_eq!(
        String::from_utf8_lossy(&first.stdout),
        String::from_utf8_lossy(&second.stdout)
    );
    assert_eq!(stand_in.seen().len(), 1);
}
