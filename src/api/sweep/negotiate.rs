//! Which representation the client wants (RFC 9110, section 12.5.1).

use axum::http::{HeaderMap, header};

/// A representation of the table.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Format {
    /// One JSON object.
    Json,
    /// CSV by RFC 4180.
    Csv,
    /// A JSON text a line.
    Lines,
}

/// The media types that exist.
pub(super) const LIST: &str = "application/json, text/csv, application/x-ndjson";

const KNOWN: [(Format, &str, &str); 3] = [
    (Format::Json, "application", "json"),
    (Format::Csv, "text", "csv"),
    (Format::Lines, "application", "x-ndjson"),
];

/// The best representation for the `Accept` header; JSON where there is none.
pub(super) fn format(headers: &HeaderMap) -> Option<Format> {
    let values: Vec<&str> = headers.get_all(header::ACCEPT).iter().filter_map(|v| v.to_str().ok()).collect();
    if values.is_empty() {
        return Some(Format::Json);
    }
    let ranges: Vec<(String, f64)> = values.iter().flat_map(|v| v.split(',')).filter_map(range).collect();
    let weight = |main: &str, sub: &str| {
        let of = |wanted: &str| ranges.iter().find(|(name, _)| name == wanted).map(|(_, q)| *q);
        of(&format!("{main}/{sub}")).or_else(|| of(&format!("{main}/*"))).or_else(|| of("*/*")).unwrap_or(0.0)
    };
    // The first of equals wins: JSON.
    KNOWN
        .iter()
        .map(|&(format, main, sub)| (format, weight(main, sub)))
        .filter(|(_, q)| *q > 0.0)
        .fold(None, |best: Option<(Format, f64)>, next| match best {
            Some(known) if known.1 >= next.1 => Some(known),
            _ => Some(next),
        })
        .map(|(format, _)| format)
}

/// One media range with its weight.
fn range(text: &str) -> Option<(String, f64)> {
    let mut parts = text.split(';').map(str::trim);
    let name = parts.next().filter(|name| !name.is_empty())?.to_ascii_lowercase();
    let weight = parts.find_map(|p| p.strip_prefix("q=")).map_or(Some(1.0), |q| q.trim().parse().ok())?;
    Some((name, weight))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn chosen(accept: &str) -> Option<Format> {
        let mut headers = HeaderMap::new();
        headers.insert(header::ACCEPT, accept.parse().unwrap());
        format(&headers)
    }

    #[test]
    fn the_heaviest_known_type_is_chosen() {
        assert_eq!(format(&HeaderMap::new()), Some(Format::Json));
        assert_eq!(chosen("*/*"), Some(Format::Json));
        assert_eq!(chosen("text/csv"), Some(Format::Csv));
        assert_eq!(chosen("text/*"), Some(Format::Csv));
        assert_eq!(chosen("application/x-ndjson, application/json;q=0.5"), Some(Format::Lines));
        assert_eq!(chosen("text/html, */*;q=0.1"), Some(Format::Json));
        assert_eq!(chosen("application/json;q=0, text/csv;q=0.2"), Some(Format::Csv));
        assert_eq!(chosen("image/png"), None);
    }
}
