//! A service on a free port of loopback, and a client that shows every byte of what comes back.

use mainstay::api::{self, AppState};
use mainstay::app::App;
use mainstay::config::Limits;
use mainstay::telemetry;
use std::io::{Read, Write};
use std::net::{SocketAddr, TcpStream};
use std::sync::Arc;
use std::sync::atomic::AtomicBool;
use std::thread::JoinHandle;
use std::time::Duration;
use tokio::sync::oneshot;

/// No answer of a test takes longer.
const PATIENCE: Duration = Duration::from_secs(60);

/// A supply that solves at once.
pub(crate) const SUPPLY: &str = r#"{"line": {"voltage": "24 V", "frequency": "50 Hz", "resistance": "0.5 ohm"},
    "outputs": [{"rectifier": {"circuit": "bridge", "diode": {"threshold_voltage": "0.8 V", "slope_resistance": "20 mohm"}},
    "rails": [{"filter": [{"capacitor": {"capacitance": "4700 uF", "esr": "40 mohm"}}], "load": {"kind": "current", "current": "1 A"}}]}]}"#;

/// A running service; dropped, it drains and ends.
pub(crate) struct Service {
    pub(crate) address: SocketAddr,
    end: Option<oneshot::Sender<()>>,
    thread: Option<JoinHandle<()>>,
}

impl Service {
    /// Starts a service with the usual bounds.
    pub(crate) fn start() -> Self {
        Self::within(Limits::default())
    }

    /// Starts a service within `limits`.
    pub(crate) fn within(limits: Limits) -> Self {
        let listener = std::net::TcpListener::bind("127.0.0.1:0").unwrap();
        listener.set_nonblocking(true).unwrap();
        let address = listener.local_addr().unwrap();
        let (end, ended) = oneshot::channel();
        let state = AppState {
            app: Arc::new(App::new(limits).unwrap()),
            metrics: telemetry::metrics().unwrap(),
            draining: Arc::new(AtomicBool::new(false)),
        };
        let thread = std::thread::spawn(move || {
            let runtime = tokio::runtime::Builder::new_multi_thread()
                .worker_threads(2)
                .enable_all()
                .build()
                .unwrap();
            runtime.block_on(async {
                let listener = tokio::net::TcpListener::from_std(listener).unwrap();
                let router = api::service(state.clone());
                let shutdown = async {
                    let _ = ended.await;
                };
                api::serve::serve(listener, router, state, shutdown).await;
            });
            runtime.shutdown_background();
        });
        Self {
            address,
            end: Some(end),
            thread: Some(thread),
        }
    }

    /// Opens a connection.
    pub(crate) fn connect(&self) -> TcpStream {
        let stream = TcpStream::connect(self.address).unwrap();
        stream.set_read_timeout(Some(PATIENCE)).unwrap();
        stream
    }

    /// Sends a request as it stands; the connection is closed after the answer.
    pub(crate) fn raw(&self, request: &[u8]) -> Answer {
        let mut stream = self.connect();
        stream.write_all(request).unwrap();
        let mut bytes = Vec::new();
        stream.read_to_end(&mut bytes).unwrap();
        Answer::parse(&bytes)
    }

    /// Sends a request with header lines (each ending in CRLF) and a body.
    pub(crate) fn send(&self, method: &str, path: &str, headers: &str, body: &[u8]) -> Answer {
        let length = body.len();
        let mut request = format!(
            "{method} {path} HTTP/1.1\r\nHost: mainstay\r\nConnection: close\r\nContent-Length: {length}\r\n{headers}\r\n"
        )
        .into_bytes();
        request.extend_from_slice(body);
        self.raw(&request)
    }

    /// Asks for an address.
    pub(crate) fn get(&self, path: &str) -> Answer {
        self.send("GET", path, "", b"")
    }

    /// Posts JSON.
    pub(crate) fn post(&self, path: &str, json: &str) -> Answer {
        self.send("POST", path, "Content-Type: application/json\r\n", json.as_bytes())
    }

    /// Tells the service to end.
    pub(crate) fn terminate(&mut self) {
        if let Some(end) = self.end.take() {
            let _ = end.send(());
        }
    }

    /// Waits until it has ended.
    pub(crate) fn join(&mut self) {
        if let Some(thread) = self.thread.take() {
            let _ = thread.join();
        }
    }
}

impl Drop for Service {
    fn drop(&mut self) {
        self.terminate();
        self.join();
    }
}

/// What came back.
#[derive(Debug)]
pub(crate) struct Answer {
    pub(crate) status: u16,
    headers: Vec<(String, String)>,
    pub(crate) body: Vec<u8>,
}

impl Answer {
    pub(crate) fn parse(bytes: &[u8]) -> Self {
        let split = bytes
            .windows(4)
            .position(|w| w == b"\r\n\r\n")
            .expect("an answer has a header");
        let head = std::str::from_utf8(&bytes[..split]).unwrap();
        let mut lines = head.split("\r\n");
        let status = lines.next().unwrap().split(' ').nth(1).unwrap().parse().unwrap();
        let headers: Vec<(String, String)> = lines
            .map(|line| line.split_once(':').unwrap())
            .map(|(name, value)| (name.to_ascii_lowercase(), value.trim().to_owned()))
            .collect();
        let mut body = bytes[split + 4..].to_vec();
        if headers.iter().any(|(n, v)| n == "transfer-encoding" && v == "chunked") {
            body = joined(&body);
        }
        Self { status, headers, body }
    }

    /// The one header of that name; more than one is a failure.
    pub(crate) fn header(&self, name: &str) -> Option<&str> {
        let mut values = self.headers.iter().filter(|(n, _)| n == name).map(|(_, v)| v.as_str());
        let value = values.next();
        assert!(values.next().is_none(), "{name} is given twice: {:?}", self.headers);
        value
    }

    pub(crate) fn text(&self) -> &str {
        std::str::from_utf8(&self.body).unwrap()
    }

    pub(crate) fn json(&self) -> serde_json::Value {
        serde_json::from_slice(&self.body).unwrap_or_else(|e| panic!("{e}: {}", self.text()))
    }

    /// Checks that this is a whole problem of a kind, and gives it.
    pub(crate) fn problem(&self, status: u16, kind: &str) -> serde_json::Value {
        assert_eq!(self.status, status, "{}", self.text());
        assert_eq!(self.header("content-type"), Some("application/problem+json"));
        let problem = self.json();
        assert_eq!(problem["type"], format!("/problems/{kind}"));
        assert_eq!(problem["status"], status);
        for key in ["title", "detail", "instance"] {
            assert!(
                problem[key].as_str().is_some_and(|text| !text.is_empty()),
                "{key}: {problem}"
            );
        }
        problem
    }
}

/// A chunked body's bytes (RFC 9112, section 7.1).
fn joined(mut rest: &[u8]) -> Vec<u8> {
    let mut body = Vec::new();
    loop {
        let end = rest.windows(2).position(|w| w == b"\r\n").expect("a chunk has a size");
        let size = usize::from_str_radix(std::str::from_utf8(&rest[..end]).unwrap(), 16).unwrap();
        rest = &rest[end + 2..];
        if size == 0 {
            return body;
        }
        body.extend_from_slice(&rest[..size]);
        rest = &rest[size + 2..];
    }
}
