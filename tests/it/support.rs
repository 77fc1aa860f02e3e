//! What the tests of the service share: a router without a socket, a service on a real one, and short questions.

use axum::Router;
use axum::body::Body;
use axum::http::{HeaderMap, Request, StatusCode, header};
use dipcast::config::Config;
use dipcast::http::{router, server};
use serde_json::Value;
use tokio::net::TcpListener;
use tokio::sync::oneshot;
use tokio::task::JoinHandle;
use tower::ServiceExt;

/// The default settings, without the environment.
pub fn config() -> Config {
    Config::defaults().unwrap()
}

/// The whole service as one router.
pub fn service() -> Router {
    service_with(config())
}

pub fn service_with(config: Config) -> Router {
    router::build(config).0
}

/// An answer, read to its end.
pub struct Answer {
    pub status: StatusCode,
    pub headers: HeaderMap,
    pub body: Vec<u8>,
}

impl Answer {
    pub fn text(&self) -> String {
        String::from_utf8(self.body.clone()).unwrap()
    }

    pub fn json(&self) -> Value {
        serde_json::from_slice(&self.body).unwrap_or_else(|error| panic!("{error}: {}", self.text()))
    }

    pub fn header(&self, name: &str) -> &str {
        self.headers.get(name).map_or("", |value| value.to_str().unwrap())
    }

    /// The document of a problem, checked for its form.
    pub fn problem(&self) -> Value {
        assert_eq!(
            self.header("content-type"),
            "application/problem+json",
            "{}",
            self.text()
        );
        let document = self.json();
        assert_eq!(document["status"], self.status.as_u16());
        assert_eq!(document["instance"], self.header("x-request-id"));
        assert!(document["type"].as_str().unwrap().starts_with("/problems/"));
        document
    }

    /// The last part of the problem's type.
    pub fn code(&self) -> String {
        let problem = self.problem();
        problem["type"]
            .as_str()
            .unwrap()
            .trim_start_matches("/problems/")
            .to_owned()
    }

    /// Pointer and code of every fault.
    pub fn faults(&self) -> Vec<(String, String)> {
        let problem = self.problem();
        let faults = problem["errors"].as_array().cloned().unwrap_or_default();
        let text = |fault: &Value, name: &str| fault[name].as_str().unwrap_or_default().to_owned();
        faults
            .iter()
            .map(|fault| (text(fault, "pointer"), text(fault, "code")))
            .collect()
    }
}

pub async fn ask(router: &Router, request: Request<Body>) -> Answer {
    let response = router.clone().oneshot(request).await.unwrap();
    let (parts, body) = response.into_parts();
    let body = axum::body::to_bytes(body, usize::MAX).await.unwrap();
    Answer {
        status: parts.status,
        headers: parts.headers,
        body: body.to_vec(),
    }
}

pub async fn get(router: &Router, path: &str) -> Answer {
    ask(router, Request::get(path).body(Body::empty()).unwrap()).await
}

pub async fn post_json(router: &Router, path: &str, body: impl Into<Body>) -> Answer {
    let request = Request::post(path).header(header::CONTENT_TYPE, "application/json");
    ask(router, request.body(body.into()).unwrap()).await
}

/// The service on a socket of its own.
pub struct Running {
    pub address: std::net::SocketAddr,
    stop: Option<oneshot::Sender<()>>,
    pub served: JoinHandle<()>,
}

impl Running {
    pub async fn start(config: Config) -> Self {
        let listener = TcpListener::bind("127.0.0.1:0").await.unwrap();
        let address = listener.local_addr().unwrap();
        let (router, app) = router::build(config);
        let (stop, stopped) = oneshot::channel::<()>();
        let served = tokio::spawn(server::serve(listener, router, app, async {
            let _ = stopped.await;
        }));
        Self {
            address,
            stop: Some(stop),
            served,
        }
    }

    pub fn stop(&mut self) {
        if let Some(stop) = self.stop.take() {
            stop.send(()).unwrap();
        }
    }

    pub fn url(&self, path: &str) -> String {
        format!("http://{}{path}", self.address)
    }
}

/// A file of `openapi/examples/`.
pub fn example(name: &str) -> String {
    let path = format!("{}/openapi/examples/{name}", env!("CARGO_MANIFEST_DIR"));
    std::fs::read_to_string(&path).unwrap_or_else(|error| panic!("{path}: {error}"))
}

/// A good request to spoil: the shelf device and some hours of an ordinary room.
pub fn request(hours: usize) -> Value {
    let temperature: Vec<f64> = (0..hours).map(|hour| 21.0 + (hour % 24) as f64 * 0.1).collect();
    let humidity: Vec<f64> = (0..hours).map(|hour| 45.0 + (hour % 24) as f64 * 0.3).collect();
    serde_json::json!({
        "device_example": "shelf-180",
        "weather": {"kind": "inline", "start": "2026-01-01T00:00:00Z",
                    "air_temperature_c": temperature, "relative_humidity_pct": humidity},
        "options": {"bands": false}
    })
}

pub async fn predict(router: &Router, request: &Value) -> Answer {
    post_json(router, "/v1/predictions", request.to_string()).await
}

/// A form of named parts.
pub fn form(parts: &[(&str, &[u8])]) -> (String, Vec<u8>) {
    let boundary = "dipcast-test-boundary";
    let mut body = Vec::new();
    for (name, content) in parts {
        let head = format!("--{boundary}\r\nContent-Disposition: form-data; name=\"{name}\"; filename=\"x\"\r\n\r\n");
        body.extend_from_slice(head.as_bytes());
        body.extend_from_slice(content);
        body.extend_from_slice(b"\r\n");
    }
    body.extend_from_slice(format!("--{boundary}--\r\n").as_bytes());
    (format!("multipart/form-data; boundary={boundary}"), body)
}

pub async fn post_form(router: &Router, path: &str, parts: &[(&str, &[u8])]) -> Answer {
    let (content_type, body) = form(parts);
    let request = Request::post(path)
        .header(header::CONTENT_TYPE, content_type)
        .body(Body::from(body));
    ask(router, request.unwrap()).await
}

/// A request for a file, with a layout or without.
pub fn upload(layout: Value) -> Value {
    let mut upload = serde_json::json!({"device_example": "shelf-180", "weather": {"kind": "upload"},
                                        "options": {"bands": false, "include": ["hours"]}});
    if !layout.is_null() {
        upload["weather"]["layout"] = layout;
    }
    upload
}

/// Sends a file in the documented form.
pub async fn predict_file(router: &Router, file: &[u8]) -> Answer {
    let request = upload(Value::Null).to_string();
    post_form(
        router,
        "/v1/predictions",
        &[("request", request.as_bytes()), ("weather", file)],
    )
    .await
}
