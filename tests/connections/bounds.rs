//! What a peer can hold is bounded: silence, half a request, an answer not taken, places, the time to drain.

use super::client::{Answer, SUPPLY, Service};
use mainstay::config::Limits;
use std::io::{Read, Write};
use std::net::{Shutdown, TcpStream};
use std::time::{Duration, Instant};

fn short() -> Limits {
    Limits {
        header_seconds_maximum: 1,
        body_seconds_maximum: 1,
        stall_seconds_maximum: 1,
        drain_seconds_maximum: 2,
        ..Limits::default()
    }
}

/// Reads until the service closes; the bytes, and the seconds until then.
fn until_closed(stream: &mut TcpStream) -> (Vec<u8>, f64) {
    let begun = Instant::now();
    let mut bytes = Vec::new();
    // A reset is a close, too.
    let _ = stream.read_to_end(&mut bytes);
    (bytes, begun.elapsed().as_secs_f64())
}

#[test]
fn silence_and_half_a_header_end_a_connection() {
    let service = Service::within(short());
    for sent in ["", "GET /livez HTTP/1.1\r\nHost: mainst"] {
        let mut stream = service.connect();
        stream.write_all(sent.as_bytes()).unwrap();
        let (bytes, seconds) = until_closed(&mut stream);
        assert!((0.5..4.0).contains(&seconds), "closed after {seconds} s");
        assert!(
            bytes.is_empty() || bytes.starts_with(b"HTTP/1.1 408"),
            "{}",
            String::from_utf8_lossy(&bytes)
        );
    }
}

#[test]
fn a_header_that_drips_ends_a_connection() {
    let service = Service::within(short());
    let mut stream = service.connect();
    stream.write_all(b"GET /livez HTTP/1.1\r\nHost: mainstay\r\n").unwrap();
    let begun = Instant::now();
    while begun.elapsed() < Duration::from_secs(10) && stream.write_all(b"X-More: 1\r\n").is_ok() {
        std::thread::sleep(Duration::from_millis(100));
    }
    let seconds = begun.elapsed().as_secs_f64();
    assert!(seconds < 4.0, "still taken after {seconds} s");
}

#[test]
fn a_body_that_drips_is_answered_with_408() {
    let service = Service::within(short());
    let mut stream = service.connect();
    let head =
        "POST /v1/sweep HTTP/1.1\r\nHost: mainstay\r\nContent-Type: application/json\r\nContent-Length: 1000\r\n\r\n{";
    stream.write_all(head.as_bytes()).unwrap();
    let mut other = stream.try_clone().unwrap();
    let drip = std::thread::spawn(move || {
        let begun = Instant::now();
        while begun.elapsed() < Duration::from_secs(10) && other.write_all(b" ").is_ok() {
            std::thread::sleep(Duration::from_millis(100));
        }
    });
    let mut bytes = vec![0; 4096];
    let begun = Instant::now();
    let read = stream.read(&mut bytes).unwrap();
    let seconds = begun.elapsed().as_secs_f64();
    Answer::parse(&bytes[..read]).problem(408, "request-timeout");
    assert!((0.5..4.0).contains(&seconds), "answered after {seconds} s");
    let _ = stream.shutdown(Shutdown::Both);
    drip.join().unwrap();
}

/// Starts a sweep of millions of rows and takes none of them.
fn endless(service: &Service) -> TcpStream {
    let body = format!(
        "{{\"supply\": {SUPPLY}, \"axes\": [{{\"pointer\": \"/line/voltage\", \"from\": \"20 V\", \"to\": \"24 V\", \"points\": 3000}}, \
         {{\"pointer\": \"/line/frequency\", \"from\": \"49 Hz\", \"to\": \"51 Hz\", \"points\": 3000}}], \
         \"columns\": [\"/outputs/0/rails/0/voltage/valley\"]}}"
    );
    let mut stream = service.connect();
    let request = format!(
        "POST /v1/sweep HTTP/1.1\r\nHost: mainstay\r\nAccept: text/csv\r\nContent-Type: application/json\r\nContent-Length: {}\r\n\r\n{body}",
        body.len()
    );
    stream.write_all(request.as_bytes()).unwrap();
    let mut first = [0; 15];
    stream.read_exact(&mut first).unwrap();
    assert_eq!(&first, b"HTTP/1.1 200 OK");
    stream
}

#[test]
fn an_end_is_heard_while_every_place_is_taken() {
    let mut service = Service::within(Limits {
        connections_maximum: 1,
        stall_seconds_maximum: 600,
        drain_seconds_maximum: 1,
        ..Limits::default()
    });
    let _held = endless(&service);
    let begun = Instant::now();
    service.terminate();
    service.join();
    let seconds = begun.elapsed().as_secs_f64();
    assert!(seconds < 5.0, "ended after {seconds} s");
}

#[test]
fn requests_in_hand_are_finished_before_the_end() {
    let mut service = Service::within(short());
    let body = format!("{{\"supply\": {SUPPLY}}}");
    let (first, rest) = body.split_at(body.len() / 2);
    let mut stream = service.connect();
    let head = format!(
        "POST /v1/operating-point HTTP/1.1\r\nHost: mainstay\r\nContent-Type: application/json\r\nContent-Length: {}\r\n\r\n{first}",
        body.len()
    );
    stream.write_all(head.as_bytes()).unwrap();
    std::thread::sleep(Duration::from_millis(200));
    service.terminate();
    std::thread::sleep(Duration::from_millis(200));
    assert!(
        TcpStream::connect(service.address).is_err(),
        "a service that drains takes no new connection"
    );
    stream.write_all(rest.as_bytes()).unwrap();
    let (bytes, _) = until_closed(&mut stream);
    let answer = Answer::parse(&bytes);
    assert_eq!(answer.status, 200, "{}", answer.text());
    service.join();
}

#[test]
fn half_a_header_does_not_hold_the_end_up() {
    let mut service = Service::within(Limits {
        header_seconds_maximum: 600,
        drain_seconds_maximum: 1,
        ..Limits::default()
    });
    let mut stream = service.connect();
    stream.write_all(b"GET /livez HTTP/1.1\r\nHost: ma").unwrap();
    std::thread::sleep(Duration::from_millis(200));
    let begun = Instant::now();
    service.terminate();
    service.join();
    let seconds = begun.elapsed().as_secs_f64();
    assert!(seconds < 4.0, "ended after {seconds} s");
}

#[test]
fn a_client_that_takes_nothing_loses_its_place() {
    let service = Service::within(Limits {
        connections_maximum: 1,
        ..short()
    });
    // More than the buffers of both sides hold: each answer has some megabytes.
    let body = format!("{{\"supply\": {SUPPLY}, \"waveforms\": {{\"points\": 20000}}}}");
    let request = format!(
        "POST /v1/operating-point HTTP/1.1\r\nHost: mainstay\r\nContent-Type: application/json\r\nContent-Length: {}\r\n\r\n{body}",
        body.len()
    );
    let mut held = service.connect();
    for _ in 0..12 {
        held.write_all(request.as_bytes()).unwrap();
    }
    let begun = Instant::now();
    assert_eq!(service.get("/livez").status, 200);
    let seconds = begun.elapsed().as_secs_f64();
    assert!(
        (0.5..30.0).contains(&seconds),
        "another client was served after {seconds} s"
    );
    drop(held);
}
