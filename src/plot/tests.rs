//! What a plot must say, and what it must not let through.

use super::*;

fn waves() -> Waveforms {
    let time: Vec<f64> = (0..=100).map(|k| f64::from(k) * 2e-4).collect();
    let wave = |f: &dyn Fn(f64) -> f64| time.iter().map(|t| f(314.159 * t)).collect::<Vec<f64>>();
    Waveforms {
        rails: vec![wave(&|x| 20.0 + (2.0 * x).sin())],
        diodes: vec![
            wave(&|x| x.sin().max(0.0)),
            wave(&|x| (-x.sin()).max(0.0)),
            wave(&|x| (-x.sin()).max(0.0)),
            wave(&|x| x.sin().max(0.0)),
        ],
        line_current: wave(&f64::sin),
        time,
    }
}

#[test]
fn equal_lines_are_drawn_once_and_named_together() {
    let svg = waveforms("Two pairs", &waves()).unwrap();
    assert!(svg.contains("D1, D4") && svg.contains("D2, D3"));
    assert!(
        svg.contains("Diode currents reach 1.0000 A."),
        "the description tells the finding"
    );
    assert_eq!(svg.matches("<svg").count(), 1);
}

#[test]
fn names_are_text_and_not_markup() {
    let svg = waveforms("<script>alert(\"&\")</script>", &waves()).unwrap();
    assert!(!svg.contains("<script") && svg.contains("&lt;script&gt;"));
}

#[test]
fn a_flat_signal_is_drawn_too() {
    let mut flat = waves();
    flat.rails = vec![vec![0.0; flat.time.len()]];
    flat.line_current = vec![0.0; flat.time.len()];
    assert!(waveforms("flat", &flat).unwrap().ends_with("</svg>\n"));
}

/// WCAG 2.2, 1.4.11: lines stand out from white by 3:1 (relative luminance by its definition).
#[test]
fn every_colour_stands_out_from_white() {
    let channel = |value: u8| {
        let c = f64::from(value) / 255.0;
        if c <= 0.040_45 {
            c / 12.92
        } else {
            ((c + 0.055) / 1.055).powf(2.4)
        }
    };
    for RGBColor(r, g, b) in PALETTE {
        let luminance = 0.2126 * channel(r) + 0.7152 * channel(g) + 0.0722 * channel(b);
        let contrast = 1.05 / (luminance + 0.05);
        assert!(contrast >= 3.0, "{r} {g} {b}: {contrast}");
    }
}
