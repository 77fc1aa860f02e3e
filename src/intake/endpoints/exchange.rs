//! One try: a question goes out over HTTP, an answer or a reason comes back.

use std::error::Error;
use std::time::Duration;

use bytes::{Bytes, BytesMut};
use reqwest::header::{ACCEPT, CONTENT_TYPE, HeaderMap, IF_MODIFIED_SINCE};
use reqwest::redirect::Policy;
use reqwest::{Client, Response, StatusCode, Url};

use super::adapter::Question;
use super::answer::reason;
use super::error::FetchError;
use super::headers;

/// Of an error's body no more than this is read for its reason [bytes].
const REASON_BYTES: usize = 4096;
const CONNECT_TIMEOUT: Duration = Duration::from_secs(10);

/// What came back.
#[derive(Debug)]
pub(super) enum Came {
    /// An answer.
    Answer {
        body: Bytes,
        expires_unix_s: Option<i64>,
        last_modified: Option<String>,
        deprecated: bool,
    },
    /// The earlier answer still holds.
    NotModified { expires_unix_s: Option<i64> },
}

/// The one client of a source. It follows no redirects and sends one User-Agent.
pub(super) fn client(url: &str, contact: &str) -> Result<Client, FetchError> {
    let version = env!("CARGO_PKG_VERSION");
    let agent = match contact {
        "" => format!("dipcast/{version}"),
        contact => format!("dipcast/{version} ({contact})"),
    };
    let mut builder = Client::builder()
        .user_agent(agent)
        .redirect(Policy::none())
        .connect_timeout(CONNECT_TIMEOUT);
    let address = Url::parse(url).map_err(|error| FetchError::NotSetUp(error.to_string()))?;
    if address.scheme() == "http" {
        // A bare system may have no certificates, and none are needed.
        builder = builder.tls_certs_only([]);
    }
    if address
        .host_str()
        .is_some_and(|host| host == "localhost" || host.starts_with("127."))
    {
        builder = builder.no_proxy();
    }
    builder.build().map_err(|error| FetchError::NotSetUp(told(error)))
}

/// Asks once.
pub(super) async fn ask(
    client: &Client,
    question: &Question,
    earlier: Option<&str>,
    most_bytes: usize,
    now_unix_s: i64,
) -> Result<Came, FetchError> {
    let parameters = question.parameters.iter().chain(&question.key);
    let url =
        Url::parse_with_params(&question.url, parameters).map_err(|error| FetchError::NotSetUp(error.to_string()))?;
    let mut request = client.get(url).header(ACCEPT, "application/json, application/geo+json");
    if let Some(last_modified) = earlier {
        request = request.header(IF_MODIFIED_SINCE, last_modified);
    }
    let response = request
        .send()
        .await
        .map_err(|error| FetchError::Unreachable(told(error)))?;
    let headers = response.headers().clone();
    match response.status() {
        StatusCode::OK | StatusCode::NON_AUTHORITATIVE_INFORMATION => {
            taken(response, &headers, most_bytes, now_unix_s).await
        }
        StatusCode::NOT_MODIFIED if earlier.is_some() => Ok(Came::NotModified {
            expires_unix_s: headers::expires_unix_s(&headers, now_unix_s),
        }),
        _ => Err(refusal(response, &headers, now_unix_s).await),
    }
}

async fn taken(
    response: Response,
    headers: &HeaderMap,
    most_bytes: usize,
    now_unix_s: i64,
) -> Result<Came, FetchError> {
    check_type(headers)?;
    if response
        .content_length()
        .is_some_and(|length| length > most_bytes as u64)
    {
        return Err(FetchError::TooLarge(most_bytes));
    }
    Ok(Came::Answer {
        deprecated: response.status() == StatusCode::NON_AUTHORITATIVE_INFORMATION,
        expires_unix_s: headers::expires_unix_s(headers, now_unix_s),
        last_modified: headers::last_modified(headers),
        body: body(response, most_bytes).await?,
    })
}

fn check_type(headers: &HeaderMap) -> Result<(), FetchError> {
    let stated = headers
        .get(CONTENT_TYPE)
        .and_then(|stated| stated.to_str().ok())
        .unwrap_or("nothing stated");
    let kind: Option<mime::Mime> = stated.parse().ok();
    let is_json = kind
        .as_ref()
        .is_some_and(|kind| kind.subtype() == mime::JSON || kind.suffix().is_some_and(|suffix| suffix == mime::JSON));
    if is_json {
        return Ok(());
    }
    let told = kind.map_or_else(|| super::answer::quoted(stated), |kind| kind.essence_str().to_owned());
    Err(FetchError::NotJson(told))
}

/// Reads a body as it comes, unpacked, and no more of it than is allowed.
async fn body(mut response: Response, most_bytes: usize) -> Result<Bytes, FetchError> {
    let mut body = BytesMut::new();
    while let Some(piece) = response
        .chunk()
        .await
        .map_err(|error| FetchError::Unreachable(told(error)))?
    {
        if body.len() + piece.len() > most_bytes {
            return Err(FetchError::TooLarge(most_bytes));
        }
        body.extend_from_slice(&piece);
    }
    Ok(body.freeze())
}

async fn refusal(response: Response, headers: &HeaderMap, now_unix_s: i64) -> FetchError {
    let status = response.status();
    let number = status.as_u16();
    let wait = headers::retry_after(headers, now_unix_s);
    match number {
        300..=399 => FetchError::Redirected(number),
        401 | 403 => FetchError::Forbidden(number),
        408 | 500..=599 => FetchError::OutOfOrder { status: number, wait },
        429 => {
            let told = words(response).await.unwrap_or_else(|| "no reason given".to_owned());
            let wait = wait.unwrap_or_else(|| headers::wait_in_words(&told, now_unix_s));
            FetchError::TooMany { told, wait }
        }
        _ => FetchError::Refused {
            status: number,
            told: words(response).await,
        },
    }
}

/// The reason in the body of an error.
async fn words(mut response: Response) -> Option<String> {
    let mut start = Vec::new();
    while let Ok(Some(piece)) = response.chunk().await {
        start.extend_from_slice(&piece);
        if start.len() > REASON_BYTES {
            return None;
        }
    }
    reason(&start)
}

/// An error of the client with its causes, but never with the address: that may hold a key.
fn told(error: reqwest::Error) -> String {
    let error = error.without_url();
    let mut words = error.to_string();
    let mut cause = error.source();
    while let Some(inner) = cause {
        words.push_str(": ");
        words.push_str(&inner.to_string());
        cause = inner.source();
    }
    words
}
