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
