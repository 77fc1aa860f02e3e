//! A stand-in for a weather service on 127.0.0.1 that can misbehave in every way a network allows.

use std::sync::atomic::{AtomicUsize, Ordering};
use std::sync::{Arc, Mutex};

use tokio::io::{AsyncReadExt, AsyncWriteExt};
use tokio::net::{TcpListener, TcpStream};

/// A question as it arrived.
#[derive(Debug, Clone)]
pub struct Seen {
    /// Path and query.
    pub target: String,
    /// The head, lower case names.
    pub head: String,
}

impl Seen {
    pub fn header(&self, name: &str) -> Option<String> {
        self.head.lines().find_map(|line| {
            let (found, value) = line.split_once(':')?;
            found.eq_ignore_ascii_case(name).then(|| value.trim().to_owned())
        })
    }

    /// A parameter of the query, as sent.
    pub fn parameter(&self, name: &str) -> Option<String> {
        let (_, query) = self.target.split_once('?')?;
        query.split('&').find_map(|pair| {
            let (found, value) = pair.split_once('=')?;
            (found == name).then(|| value.to_owned())
        })
    }
}

/// What is done with a question.
#[derive(Debug, Clone)]
pub enum Reply {
    /// Status, headers beside the length, body.
    Whole(u16, Vec<(&'static str, String)>, Vec<u8>),
    /// The same, but only so many bytes of the body come before the connection ends.
    Cut(Vec<u8>, usize),
    /// A head and half a body, then silence.
    Stalled(Vec<u8>),
    /// Not a byte.
    Silent,
    /// The connection is reset.
    Reset,
    /// A body without an end in sight: this many bytes, no length stated.
    Flood(usize),
}

impl Reply {
    pub fn json(body: impl Into<String>) -> Self {
        Self::Whole(
            200,
            vec![("Content-Type", "application/json".to_owned())],
            body.into().into_bytes(),
        )
    }

    pub fn status(status: u16, body: &str) -> Self {
        Self::Whole(
            status,
            vec![("Content-Type", "application/json".to_owned())],
            body.into(),
        )
    }

    /// With one more header.
    pub fn with(self, name: &'static str, value: &str) -> Self {
        match self {
            Self::Whole(status, mut headers, body) => {
                headers.retain(|(given, _)| *given != name);
                headers.push((name, value.to_owned()));
                Self::Whole(status, headers, body)
            }
            other => other,
        }
    }
}

/// What answers: the number of the question, from 0, and the question.
type Script = Box<dyn Fn(usize, &Seen) -> Reply + Send + Sync>;

pub struct StandIn {
    pub url: String,
    seen: Arc<Mutex<Vec<Seen>>>,
    at_once: Arc<AtOnce>,
}

/// How many questions are being answered, and the most there ever were.
#[derive(Default)]
struct AtOnce {
    now: AtomicUsize,
    most: AtomicUsize,
}

impl StandIn {
    pub async fn start(script: impl Fn(usize, &Seen) -> Reply + Send + Sync + 'static) -> Self {
        let listener = TcpListener::bind("127.0.0.1:0").await.unwrap();
        let url = format!("http://{}/weather", listener.local_addr().unwrap());
        let seen: Arc<Mutex<Vec<Seen>>> = Arc::default();
        let (noted, script) = (Arc::clone(&seen), Arc::new(Box::new(script) as Script));
        let at_once: Arc<AtOnce> = Arc::default();
        let counted = Arc::clone(&at_once);
        tokio::spawn(async move {
            while let Ok((stream, _)) = listener.accept().await {
                tokio::spawn(serve(
                    stream,
                    Arc::clone(&noted),
                    Arc::clone(&script),
                    Arc::clone(&counted),
                ));
            }
        });
        Self { url, seen, at_once }
    }

    /// These replies one after another, the last one again and again.
    pub async fn replying(replies: Vec<Reply>) -> Self {
        Self::start(move |number, _| replies[number.min(replies.len() - 1)].clone()).await
    }

    /// Most questions that were ever being answered at once.
    pub fn most_at_once(&self) -> usize {
        self.at_once.most.load(Ordering::SeqCst)
    }

    pub fn seen(&self) -> Vec<Seen> {
        self.seen.lock().unwrap().clone()
    }
}

async fn serve(mut stream: TcpStream, noted: Arc<Mutex<Vec<Seen>>>, script: Arc<Script>, at_once: Arc<AtOnce>) {
    let Some(seen) = head(&mut stream).await else { return };
    let number = {
        let mut noted = noted.lock().unwrap();
        noted.push(seen.clone());
        noted.len() - 1
    };
    let now = at_once.now.fetch_add(1, Ordering::SeqCst) + 1;
    at_once.most.fetch_max(now, Ordering::SeqCst);
    for _ in 0..100 {
        // Room for others to arrive meanwhile.
        tokio::task::yield_now().await;
    }
    let reply_to = script(number, &seen);
    at_once.now.fetch_sub(1, Ordering::SeqCst);
    // Whoever asked may have gone: that is no fault of the test.
    let _ = reply(stream, reply_to).await;
}

async fn head(stream: &mut TcpStream) -> Option<Seen> {
    let mut bytes = Vec::new();
    while !bytes.ends_with(b"\r\n\r\n") {
        bytes.push(stream.read_u8().await.ok()?);
    }
    let head = String::from_utf8(bytes).ok()?;
    let target = head.split(' ').nth(1)?.to_owned();
    Some(Seen { target, head })
}

async fn reply(mut stream: TcpStream, reply: Reply) -> std::io::Result<()> {
    let json = [("Content-Type", "application/json".to_owned())];
    match reply {
        Reply::Whole(status, headers, body) => {
            write_head(&mut stream, status, &headers, Some(body.len())).await?;
            stream.write_all(&body).await
        }
        Reply::Cut(body, bytes) => {
            write_head(&mut stream, 200, &json, Some(body.len())).await?;
            stream.write_all(&body[..bytes]).await
        }
        Reply::Stalled(body) => {
            write_head(&mut stream, 200, &json, Some(body.len())).await?;
            stream.write_all(&body[..body.len() / 2]).await?;
            silence(stream).await
        }
        Reply::Silent => silence(stream).await,
        Reply::Reset => stream.set_zero_linger(),
        Reply::Flood(bytes) => {
            write_head(&mut stream, 200, &json, None).await?;
            let piece = vec![b' '; 1 << 16];
            for _ in 0..bytes / piece.len() {
                stream.write_all(&piece).await?;
            }
            Ok(())
        }
    }
}

/// Until the other side goes away.
async fn silence(mut stream: TcpStream) -> std::io::Result<()> {
    let mut rest = Vec::new();
    stream.read_to_end(&mut rest).await.map(drop)
}

async fn write_head(
    stream: &mut TcpStream,
    status: u16,
    headers: &[(&'static str, String)],
    length: Option<usize>,
) -> std::io::Result<()> {
    let mut head = format!("HTTP/1.1 {status} Stand-in\r\nConnection: close\r\n");
    for (name, value) in headers {
        head.push_str(&format!("{name}: {value}\r\n"));
    }
    if let Some(length) = length {
        head.push_str(&format!("Content-Length: {length}\r\n"));
    }
    head.push_str("\r\n");
    stream.write_all(head.as_bytes()).await
}
