//! PURE: how is it shown? SVG plots of waveforms.
//!
//! Drawn with a plotting crate at ten times the size, since it rounds to whole units, under a view box of the right size.
//! Axes carry numerical values (`U/V`, `t/ms`: NIST SP 811, 7.1); lines differ in colour (Okabe and Ito's palette, those of it
//! that stand out from white), in dash, and by a label.

#[cfg(test)]
mod tests;

use crate::figures::Waveforms;
use plotters::prelude::*;

/// Size in view-box units.
const SIZE: (u32, u32) = (720, 640);
/// Drawn this much larger.
const SCALE: u32 = 10;
/// Okabe-Ito colours of at least 3:1 on white.
const PALETTE: [RGBColor; 4] = [
    RGBColor(0, 114, 178),
    RGBColor(213, 94, 0),
    RGBColor(0, 158, 115),
    RGBColor(204, 121, 167),
];
/// Most lines of one panel.
const LINES_MAXIMUM: usize = 4;
/// Two lines this near, relative to the larger, are drawn once.
const SAME: f64 = 1e-6;

/// A plot could not be drawn.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[error("the plot could not be drawn: {reason}")]
pub struct PlotError {
    /// What the plotting crate said.
    pub reason: String,
}

struct Line<'a> {
    label: String,
    values: &'a [f64],
}

struct Panel<'a> {
    axis: &'static str,
    lines: Vec<Line<'a>>,
}

/// One cycle of rail voltages, diode currents and line current, one above the other.
///
/// # Errors
/// [`PlotError`] where the plotting crate fails.
pub fn waveforms(name: &str, waves: &Waveforms) -> Result<String, PlotError> {
    let panels = [
        Panel {
            axis: "U/V",
            lines: distinct("rail", &waves.rails),
        },
        Panel {
            axis: "I/A",
            lines: distinct("D", &waves.diodes),
        },
        Panel {
            axis: "I/A",
            lines: vec![Line {
                label: "line".to_owned(),
                values: &waves.line_current,
            }],
        },
    ];
    let mut svg = String::new();
    draw(&mut svg, &panels, &waves.time).map_err(|reason| PlotError { reason })?;
    Ok(framed(&svg, name, &description(waves)))
}

/// Lines that differ, labelled by those that share them.
fn distinct<'a>(prefix: &str, all: &'a [Vec<f64>]) -> Vec<Line<'a>> {
    let mut lines: Vec<Line<'a>> = Vec::new();
    for (index, values) in all.iter().enumerate() {
        let name = if prefix == "rail" {
            format!("rail {index}")
        } else {
            format!("{prefix}{}", index + 1)
        };
        let size = values.iter().fold(0.0_f64, |m, v| m.max(v.abs()));
        let same = |line: &Line<'_>| {
            line.values
                .iter()
                .zip(values)
                .all(|(a, b)| (a - b).abs() <= SAME * size)
        };
        match lines.iter().position(same) {
            Some(known) => lines[known].label = format!("{}, {name}", lines[known].label),
            None if lines.len() < LINES_MAXIMUM => lines.push(Line { label: name, values }),
            None => {}
        }
    }
    lines
}

fn draw(svg: &mut String, panels: &[Panel<'_>], time: &[f64]) -> Result<(), String> {
    let size = (SIZE.0 * SCALE, SIZE.1 * SCALE);
    let root = SVGBackend::with_string(svg, size).into_drawing_area();
    root.fill(&WHITE).map_err(|e| e.to_string())?;
    for (panel, area) in panels.iter().zip(root.split_evenly((panels.len(), 1))) {
        draw_panel(panel, &area, time)?;
    }
    root.present().map_err(|e| e.to_string())
}

fn draw_panel(
    panel: &Panel<'_>,
    area: &DrawingArea<SVGBackend<'_>, plotters::coord::Shift>,
    time: &[f64],
) -> Result<(), String> {
    let unit = SCALE;
    let font = ("sans-serif", 12 * unit);
    let end = time.last().copied().unwrap_or(1.0) * 1e3;
    let (low, high) = limits(panel);
    let mut chart = ChartBuilder::on(area)
        .margin(8 * unit)
        .margin_right(16 * unit)
        .x_label_area_size(34 * unit)
        .y_label_area_size(58 * unit)
        .build_cartesian_2d(0.0..end, low..high)
        .map_err(|e| e.to_string())?;
    chart
        .configure_mesh()
        .x_desc("t/ms")
        .y_desc(panel.axis)
        .label_style(font)
        .axis_desc_style(font)
        .x_labels(11)
        .y_labels(6)
        .x_label_formatter(&|v| format!("{}", (v * 1e6).round() / 1e6))
        .y_label_formatter(&|v| format!("{}", (v * 1e6).round() / 1e6))
        .bold_line_style(RGBColor(190, 190, 190).stroke_width(unit / 2))
        .light_line_style(WHITE)
        .axis_style(BLACK.stroke_width(unit))
        .draw()
        .map_err(|e| e.to_string())?;
    for (index, line) in panel.lines.iter().enumerate() {
        let style = PALETTE[index % PALETTE.len()].stroke_width(2 * unit);
        let points: Vec<(f64, f64)> = time.iter().map(|t| t * 1e3).zip(line.values.iter().copied()).collect();
        let drawn = if index == 0 {
            chart.draw_series(LineSeries::new(points, style))
        } else {
            let (dash, gap) = ([80, 30, 160][(index - 1) % 3], 40 + 20 * index as u32);
            chart.draw_series(DashedLineSeries::new(points, dash, gap, style))
        };
        drawn
            .map_err(|e| e.to_string())?
            .label(&line.label)
            .legend(move |(x, y)| PathElement::new(vec![(x, y), (x + 20 * unit as i32, y)], style));
    }
    chart
        .configure_series_labels()
        .position(SeriesLabelPosition::UpperRight)
        .label_font(font)
        .legend_area_size(26 * unit)
        .margin(4 * unit)
        .background_style(WHITE)
        .border_style(RGBColor(190, 190, 190))
        .draw()
        .map_err(|e| e.to_string())
}

/// Limits of a panel: its lines with a little air; currents with zero.
fn limits(panel: &Panel<'_>) -> (f64, f64) {
    let values = || panel.lines.iter().flat_map(|line| line.values.iter().copied());
    let (mut low, mut high) = (
        values().fold(f64::INFINITY, f64::min),
        values().fold(f64::NEG_INFINITY, f64::max),
    );
    if panel.axis == "I/A" {
        (low, high) = (low.min(0.0), high.max(0.0));
    }
    if !(low.is_finite() && high.is_finite()) {
        return (0.0, 1.0);
    }
    let air = 0.08 * (high - low).max(1e-9 * high.abs()).max(1e-12);
    (low - air, high + air)
}

fn description(waves: &Waveforms) -> String {
    let extremes = |values: &[f64]| {
        let low = values.iter().copied().fold(f64::INFINITY, f64::min);
        let high = values.iter().copied().fold(f64::NEG_INFINITY, f64::max);
        (low, high)
    };
    let rails = waves.rails.iter().enumerate().map(|(index, values)| {
        let (low, high) = extremes(values);
        format!("Rail {index} lies between {low:.4} V and {high:.4} V.")
    });
    let peak = waves.diodes.iter().map(|values| extremes(values).1).fold(0.0, f64::max);
    let (low, high) = extremes(&waves.line_current);
    let mut text: Vec<String> = rails.collect();
    text.push(format!("Diode currents reach {peak:.4} A."));
    text.push(format!("The line current lies between {low:.4} A and {high:.4} A."));
    text.join(" ")
}

/// The drawing under a view box, with a title and a description that assistive technology reads.
fn framed(svg: &str, name: &str, description: &str) -> String {
    let inner = svg.find('>').map_or(svg, |at| &svg[at + 1..]);
    let (width, height) = (SIZE.0 * SCALE, SIZE.1 * SCALE);
    format!(
        "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 {width} {height}\" role=\"img\" aria-labelledby=\"plot-title plot-description\">\
         <title id=\"plot-title\">{}</title><desc id=\"plot-description\">{}</desc>{inner}",
        escaped(name),
        escaped(description)
    )
}

fn escaped(text: &str) -> String {
    text.chars().fold(String::with_capacity(text.len()), |mut out, c| {
        match c {
            '&' => out.push_str("&amp;"),
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '"' => out.push_str("&quot;"),
            c if c.is_control() => {}
            c => out.push(c),
        }
        out
    })
}
