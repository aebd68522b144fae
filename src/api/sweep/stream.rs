//! The table as a stream: never more of it in memory than a few blocks.

use super::{Format, SweepColumn};
use crate::app::{AppError, Rows};
use axum::body::Body;
use axum::http::header;
use axum::response::{IntoResponse, Response};
use bytes::Bytes;
use futures_util::stream::{self, StreamExt};
use std::io::Write as _;
use tokio::sync::mpsc;
use tokio_stream::wrappers::ReceiverStream;

/// The answer: its head, its rows block by block, its end. A sweep that is lost half way ends the connection, so that nobody takes
/// a part for the whole.
pub(super) fn response(
    format: Format,
    columns: Vec<SweepColumn>,
    points: u64,
    rows: mpsc::Receiver<Result<Rows, AppError>>,
) -> Response {
    let kind = match format {
        Format::Json => "application/json",
        Format::Csv => "text/csv; charset=utf-8; header=present",
        Format::Lines => "application/x-ndjson",
    };
    let width = columns.len();
    let head = head(format, &columns);
    let mut state = Written {
        format,
        width,
        first: true,
        unsolved: 0,
    };
    let blocks = ReceiverStream::new(rows).map(Some).chain(stream::once(async { None }));
    let body = blocks.map(move |block| match block {
        Some(Ok(rows)) => Ok(Bytes::from(state.rows(&rows))),
        Some(Err(error)) => Err(std::io::Error::other(error.to_string())),
        None => Ok(Bytes::from(state.end(points))),
    });
    let whole = stream::once(async move { Ok(Bytes::from(head)) }).chain(body);
    ([(header::CONTENT_TYPE, kind)], Body::from_stream(whole)).into_response()
}

fn head(format: Format, columns: &[SweepColumn]) -> Vec<u8> {
    match format {
        Format::Json => {
            let mut text = b"{\"columns\":".to_vec();
            text.extend(serde_json::to_vec(columns).unwrap_or_default());
            text.extend(b",\"rows\":[");
            text
        }
        Format::Lines => {
            let mut text = b"{\"columns\":".to_vec();
            text.extend(serde_json::to_vec(columns).unwrap_or_default());
            text.extend(b"}\n");
            text
        }
        Format::Csv => {
            let mut writer = csv::WriterBuilder::new()
                .terminator(csv::Terminator::CRLF)
                .from_writer(Vec::new());
            let header = columns.iter().map(|c| format!("{} [{}]", c.pointer, c.unit));
            // Writing to memory does not fail.
            let _ = writer.write_record(header);
            writer.into_inner().unwrap_or_default()
        }
    }
}

/// What has been written so far.
struct Written {
    format: Format,
    width: usize,
    first: bool,
    unsolved: u64,
}

impl Written {
    fn rows(&mut self, rows: &Rows) -> Vec<u8> {
        let mut text = Vec::with_capacity(rows.rows.len() * self.width * 20);
        for row in &rows.rows {
            self.unsolved += u64::from(row.is_none());
            match self.format {
                Format::Csv => self.csv(row.as_deref(), &mut text),
                Format::Json | Format::Lines => self.json(row.as_deref(), &mut text),
            }
        }
        text
    }

    fn json(&mut self, row: Option<&[f64]>, text: &mut Vec<u8>) {
        if self.format == Format::Json && !std::mem::take(&mut self.first) {
            text.push(b',');
        }
        text.push(b'[');
        for index in 0..self.width {
            if index > 0 {
                text.push(b',');
            }
            match row {
                None => text.extend(b"null"),
                // Writing to memory does not fail.
                Some(row) => {
                    let _ = serde_json::to_writer(&mut *text, &row[index]);
                }
            }
        }
        text.push(b']');
        if self.format == Format::Lines {
            text.push(b'\n');
        }
    }

    fn csv(&self, row: Option<&[f64]>, text: &mut Vec<u8>) {
        for index in 0..self.width {
            if index > 0 {
                text.push(b',');
            }
            if let Some(row) = row {
                let _ = serde_json::to_writer(&mut *text, &row[index]);
            }
        }
        text.extend(b"\r\n");
    }

    fn end(&self, points: u64) -> Vec<u8> {
        let mut text = Vec::new();
        let unsolved = self.unsolved;
        let _ = match self.format {
            Format::Json => write!(text, "],\"points\":{points},\"unsolved\":{unsolved}}}"),
            Format::Lines => writeln!(text, "{{\"points\":{points},\"unsolved\":{unsolved}}}"),
            Format::Csv => Ok(()),
        };
        text
    }
}
