//! Which representation the client wants (RFC 9110, section 12.5.1).

use axum::http::{HeaderMap, header};

/// A representation: what the program calls it, its type and subtype.
pub(super) type Known<T> = (T, &'static str, &'static str);

/// The best of the known representations for the `Accept` header; the first where there is none.
pub(super) fn choose<T: Copy>(headers: &HeaderMap, known: &[Known<T>]) -> Option<T> {
    let values: Vec<&str> = headers
        .get_all(header::ACCEPT)
        .iter()
        .filter_map(|v| v.to_str().ok())
        .collect();
    if values.is_empty() {
        return known.first().map(|k| k.0);
    }
    let ranges: Vec<(String, f64)> = values.iter().flat_map(|v| v.split(',')).filter_map(range).collect();
    let weight = |main: &str, sub: &str| {
        let of = |wanted: &str| ranges.iter().find(|(name, _)| name == wanted).map(|(_, q)| *q);
        of(&format!("{main}/{sub}"))
            .or_else(|| of(&format!("{main}/*")))
            .or_else(|| of("*/*"))
            .unwrap_or(0.0)
    };
    // The first of equals wins.
    known
        .iter()
        .map(|&(format, main, sub)| (format, weight(main, sub)))
        .filter(|(_, q)| *q > 0.0)
        .fold(None, |best: Option<(T, f64)>, next| match best {
            Some(known) if known.1 >= next.1 => Some(known),
            _ => Some(next),
        })
        .map(|(format, _)| format)
}

/// One media range with its weight.
fn range(text: &str) -> Option<(String, f64)> {
    let mut parts = text.split(';').map(str::trim);
    let name = parts.next().filter(|name| !name.is_empty())?.to_ascii_lowercase();
    let weight = parts
        .find_map(|p| p.strip_prefix("q="))
        .map_or(Some(1.0), |q| q.trim().parse().ok())?;
    Some((name, weight))
}

#[cfg(test)]
mod tests {
    use super::*;

    const KNOWN: [Known<u8>; 3] = [
        (0, "application", "json"),
        (1, "text", "csv"),
        (2, "application", "x-ndjson"),
    ];

    fn chosen(accept: &str) -> Option<u8> {
        let mut headers = HeaderMap::new();
        headers.insert(header::ACCEPT, accept.parse().unwrap());
        choose(&headers, &KNOWN)
    }

    #[test]
    fn the_heaviest_known_type_is_chosen() {
        assert_eq!(choose(&HeaderMap::new(), &KNOWN), Some(0));
        assert_eq!(chosen("*/*"), Some(0));
        assert_eq!(chosen("text/csv"), Some(1));
        assert_eq!(chosen("text/*"), Some(1));
        assert_eq!(chosen("application/x-ndjson, application/json;q=0.5"), Some(2));
        assert_eq!(chosen("text/html, */*;q=0.1"), Some(0));
        assert_eq!(chosen("application/json;q=0, text/csv;q=0.2"), Some(1));
        assert_eq!(chosen("image/png"), None);
    }
}
