//! The house rules, read off the sources: floors, pure rooms, sizes, names.

#![allow(clippy::unwrap_used, clippy::expect_used, reason = "a test that cannot go on fails")]

use std::fs;
use std::path::{Path, PathBuf};

/// Rooms by floor, the lowest first. A room uses its own floor and those below.
const FLOORS: [&[&str]; 5] = [
    &["quantity", "bounds", "supply"],
    &["network", "solver", "figures"],
    &["worst_case", "policy", "design", "transient", "plot"],
    &["description", "app", "config", "clock", "telemetry"],
    &["api", "page"],
];
/// What a pure room does not name.
const IMPURE: [&str; 9] = [
    "tokio",
    "async ",
    "axum",
    "serde",
    "tracing::",
    "std::time",
    "rand::",
    "std::fs",
    "std::env",
];
/// Lines of a source file.
const LINES_MAXIMUM: usize = 700;
/// Lines of a function.
const FUNCTION_MAXIMUM: usize = 70;

fn sources(below: &str) -> Vec<(PathBuf, String)> {
    let mut out = Vec::new();
    let mut open = vec![Path::new(env!("CARGO_MANIFEST_DIR")).join(below)];
    while let Some(folder) = open.pop() {
        for entry in fs::read_dir(folder).unwrap() {
            let path = entry.unwrap().path();
            if path.is_dir() {
                open.push(path);
            } else if path.extension().is_some_and(|e| e == "rs") {
                let text = fs::read_to_string(&path).unwrap();
                out.push((path, text));
            }
        }
    }
    out.sort();
    assert!(!out.is_empty());
    out
}

fn room(path: &Path) -> String {
    let source = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
    let inside = path.strip_prefix(source).unwrap();
    inside
        .iter()
        .next()
        .unwrap()
        .to_str()
        .unwrap()
        .trim_end_matches(".rs")
        .to_owned()
}

fn floor(room: &str) -> Option<usize> {
    FLOORS.iter().position(|rooms| rooms.contains(&room))
}

fn is_test(path: &Path) -> bool {
    path.iter().any(|part| part == "tests" || part == "tests.rs")
}

#[test]
fn rooms_use_their_own_floor_and_those_below() {
    for (path, text) in sources("src") {
        let room = room(&path);
        let Some(own) = floor(&room) else {
            assert!(["lib", "main"].contains(&room.as_str()), "{room} has no floor");
            continue;
        };
        for line in text.lines().filter(|l| !l.trim_start().starts_with("//")) {
            for (at, _) in line.match_indices("crate::") {
                let used: String = line[at + 7..]
                    .chars()
                    .take_while(|c| c.is_ascii_alphanumeric() || *c == '_')
                    .collect();
                if let Some(other) = floor(&used) {
                    assert!(
                        other <= own,
                        "{}: {room} (floor {own}) uses {used} (floor {other})",
                        path.display()
                    );
                }
            }
        }
    }
}

#[test]
fn every_room_says_what_it_is_and_pure_ones_are() {
    let mut pure = 0;
    for (path, text) in sources("src") {
        let room = room(&path);
        if ["lib", "main"].contains(&room.as_str()) {
            continue;
        }
        let source = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
        let face = [source.join(&room).join("mod.rs"), source.join(format!("{room}.rs"))];
        let head = face.iter().find_map(|p| fs::read_to_string(p).ok()).unwrap();
        let first = head.lines().next().unwrap().to_owned();
        let kinds = ["//! PURE:", "//! IO:", "//! HTTP:"];
        assert!(
            kinds.iter().any(|k| first.starts_with(k)),
            "{room} begins with {first:?}"
        );
        if first.starts_with("//! PURE:") && !is_test(&path) {
            pure += 1;
            for (number, line) in text
                .lines()
                .enumerate()
                .filter(|(_, l)| !l.trim_start().starts_with("//"))
            {
                for word in IMPURE {
                    assert!(!line.contains(word), "{}:{} names {word}", path.display(), number + 1);
                }
            }
        }
    }
    assert!(pure > 30, "{pure} pure files");
}

#[test]
fn files_and_functions_keep_their_size() {
    for (path, text) in sources("src") {
        let lines: Vec<&str> = text.lines().collect();
        assert!(
            lines.len() <= LINES_MAXIMUM,
            "{} has {} lines",
            path.display(),
            lines.len()
        );
        let mut begun: Option<(usize, String)> = None;
        for (number, line) in lines.iter().enumerate() {
            let bare = line.trim_start();
            let indent = &line[..line.len() - bare.len()];
            let is_function = bare
                .split('(')
                .next()
                .is_some_and(|head| head.split_whitespace().any(|word| word == "fn"));
            if begun.is_none() && is_function && !bare.starts_with("//") && !bare.ends_with(';') {
                begun = Some((number, format!("{indent}}}")));
            }
            if let Some((from, end)) = &begun
                && line == end
            {
                let length = number - from + 1;
                assert!(
                    length <= FUNCTION_MAXIMUM,
                    "{}:{} is {length} lines long",
                    path.display(),
                    from + 1
                );
                begun = None;
            }
        }
    }
}

#[test]
fn only_the_clock_asks_for_time() {
    for (path, text) in sources("src") {
        let asks = ["Instant::now", "SystemTime::now", "rand::rng", "thread_rng"];
        if room(&path) != "clock" {
            for ask in asks {
                assert!(!text.contains(ask), "{} asks for {ask}", path.display());
            }
        }
    }
}

#[test]
fn nothing_may_panic_outside_tests() {
    for (path, text) in sources("src").iter().filter(|(path, _)| !is_test(path)) {
        let code = text.split("#[cfg(test)]\nmod tests {").next().unwrap();
        for (number, line) in code
            .lines()
            .enumerate()
            .filter(|(_, l)| !l.trim_start().starts_with("//"))
        {
            for word in [".unwrap()", ".expect(", "todo!", "unimplemented!", "panic!("] {
                assert!(!line.contains(word), "{}:{}: {word}", path.display(), number + 1);
            }
        }
    }
}

#[test]
fn every_bound_is_used() {
    let all: String = sources("src").into_iter().map(|(_, text)| text).collect();
    let bounds = fs::read_to_string(Path::new(env!("CARGO_MANIFEST_DIR")).join("src/bounds.rs")).unwrap();
    for line in bounds.lines().filter_map(|l| l.strip_prefix("pub const ")) {
        let name = line.split(':').next().unwrap();
        assert!(all.matches(name).count() > 1, "{name} is not used");
    }
}
