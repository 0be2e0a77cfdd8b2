//! Error against element size, both logarithmic: marks and lines per quantity, the band of the fitted line,
//! the limit at the level it is judged at, and a fan of the expected slopes.

use super::curves::{Curve, curves, height_at};
use super::scale::{Log, spread};
use super::slope_fan;
use super::svg::{Anchor, Canvas, GRID, HAIR, INK, INK2, INK3};
use crate::report::numbers::{Number, THIN, grouped, with_uncertainty};
use crate::report::text::{escape, shorten};
use crate::report::wording::name;
use crate::verdict::Verdict;
use crate::verdict::outcome::{CaseOutcome, Judged, LevelOutcome, OrderFit};

pub const LEFT: f64 = 44.0;
const RIGHT: f64 = 232.0;
const TOP: f64 = 44.0;
pub const BOTTOM: f64 = 264.0;

/// The panel, or nothing when no two levels of one quantity can be drawn.
pub fn panel(case: &CaseOutcome, length_unit: &str) -> String {
    let curves = curves(case);
    if !curves.iter().any(|curve| curve.points.len() > 1) {
        return String::new();
    }
    let hidden = curves
        .iter()
        .flat_map(|c| &c.series.values)
        .any(|v| v.value == Some(0.0));
    let mut caption = String::from("Marks: computed.");
    if curves.iter().any(|curve| band_of(curve).is_some()) {
        caption += " Shade: 95 % band of the fitted line.";
    }
    if curves
        .iter()
        .any(|curve| curve.series.expected_order.is_some_and(|p| p > 0.0))
    {
        caption += " Fan: expected fall when h is halved.";
    }
    if curves.iter().any(|curve| curve.limit.is_some()) {
        caption += " Bracket: limit at the level it is judged at.";
    }
    if hidden {
        caption += " An error of exactly 0 has no place on this axis.";
    }
    format!(
        "<figure class=\"panel\"><h4><span>{}</span></h4>{}<figcaption>{caption}</figcaption></figure>\n",
        escape(&title(case)),
        draw(case, &curves, length_unit)
    )
}

/// The message: what the order criteria say.
fn title(case: &CaseOutcome) -> String {
    let orders: Vec<_> = case
        .criteria
        .iter()
        .filter(|c| c.judged == Judged::Order)
        .collect();
    let open = orders
        .iter()
        .filter(|c| c.verdict != Verdict::Pass)
        .min_by_key(|c| c.verdict);
    match (orders.is_empty(), open) {
        (true, _) => "Errors against element size".to_string(),
        (false, None) => "The errors fall at the orders asked for".to_string(),
        (false, Some(criterion)) => format!("{}: {}", name(criterion), criterion.verdict.word()),
    }
}

/// The axes of one plot.
struct Frame {
    x: Log,
    y: Log,
    fan: Option<slope_fan::Fan>,
}

fn frame(curves: &[Curve]) -> Frame {
    let all = |pick: fn(&(f64, f64)) -> f64| {
        let marks = curves
            .iter()
            .flat_map(|curve| curve.points.iter().chain(&curve.limit));
        marks
            .map(pick)
            .map(f64::log10)
            .fold((f64::INFINITY, f64::NEG_INFINITY), |(a, b), v| {
                (a.min(v), b.max(v))
            })
    };
    let (h_low, h_high) = all(|p| p.0);
    let pad = (0.08 * (h_high - h_low)).max(0.02);
    // finer to the right
    let x = Log::new((h_low - pad, h_high + pad), (RIGHT, LEFT));
    let (low, high) = all(|p| p.1);
    let (mut low, high) = ((low - 0.1).floor().min(high - 0.9), high + 0.15);
    loop {
        let y = Log::new((low, high), (BOTTOM, TOP));
        let fan = slope_fan::place(curves, &x, &y);
        let free = fan
            .as_ref()
            .is_none_or(|fan| slope_fan::is_free(curves, fan, &x, &y));
        if free || high - low > 24.0 {
            return Frame { x, y, fan };
        }
        low -= 0.5;
    }
}

/// What the half width of the fitted line needs: scatter times t, mean and spread of ln h.
struct Band {
    fit: OrderFit,
    scatter: f64,
    mean: f64,
    spread: f64,
    count: f64,
}

/// The confidence band of a least-squares line: t s sqrt(1/n + (x - mean)^2 / Sxx), with s and t recovered from
/// the standard error of the slope (s / sqrt(Sxx)) and its half width (t times it).
fn band_of(curve: &Curve) -> Option<Band> {
    let fit = curve.series.fit?;
    let half_width = fit.half_width?;
    fit.standard_error?;
    let logs: Vec<f64> = curve.points.iter().map(|p| p.0.ln()).collect();
    if logs.len() != fit.levels as usize || logs.len() < 3 {
        return None;
    }
    let count = logs.len() as f64;
    let mean = logs.iter().sum::<f64>() / count;
    let spread = logs.iter().map(|x| (x - mean).powi(2)).sum::<f64>();
    Some(Band {
        fit,
        scatter: half_width * spread.sqrt(),
        mean,
        spread,
        count,
    })
}

fn band_outline(frame: &Frame, curve: &Curve, band: Band) -> Vec<(f64, f64)> {
    let (first, last) = match (curve.points.first(), curve.points.last()) {
        (Some(first), Some(last)) => (first.0.ln(), last.0.ln()),
        _ => return Vec::new(),
    };
    let side = |sign: f64| {
        let band = &band;
        (0..=24).map(move |k| {
            let x = first + (last - first) * f64::from(k) / 24.0;
            let half =
                band.scatter * (1.0 / band.count + (x - band.mean).powi(2) / band.spread).sqrt();
            let y = band.fit.log_constant + band.fit.order * x + sign * half;
            let pixel = frame
                .y
                .px_log(y / std::f64::consts::LN_10)
                .clamp(TOP, BOTTOM);
            (frame.x.px(x.exp()), pixel)
        })
    };
    let mut lower: Vec<_> = side(-1.0).collect();
    lower.reverse();
    side(1.0).chain(lower).collect()
}

fn draw(case: &CaseOutcome, curves: &[Curve], length_unit: &str) -> String {
    let frame = frame(curves);
    let mut canvas = Canvas::default();
    value_axis(&mut canvas, &frame);
    size_axis(&mut canvas, &frame, &case.levels, curves, length_unit);
    for curve in curves {
        if let Some(band) = band_of(curve) {
            let opacity = if curves.len() > 3 { 0.08 } else { 0.13 };
            canvas.band(&band_outline(&frame, curve, band), curve.colour, opacity);
        }
        let pixels: Vec<_> = pixels(&frame, curve);
        canvas.polyline(&pixels, curve.colour, 1.4);
    }
    for curve in curves {
        for pixel in pixels(&frame, curve) {
            canvas.mark(curve.shape, pixel, 3.4, curve.colour);
        }
    }
    limits(&mut canvas, &frame, curves);
    if let Some(fan) = &frame.fan {
        slope_fan::draw(&mut canvas, fan, curves, &frame.x, &frame.y);
    }
    labels(&mut canvas, &frame, curves);
    canvas.figure("plot", 336, 304, &spoken(curves))
}

fn pixels(frame: &Frame, curve: &Curve) -> Vec<(f64, f64)> {
    curve
        .points
        .iter()
        .map(|p| (frame.x.px(p.0), frame.y.px(p.1)))
        .collect()
}

fn value_axis(canvas: &mut Canvas, frame: &Frame) {
    let decades = frame.y.decades();
    let every = decades.len().div_ceil(7).max(1) as i32;
    for decade in decades {
        let y = frame.y.px_log(f64::from(decade));
        canvas.line((LEFT, y), (RIGHT, y), GRID, 0.75);
        canvas.line((LEFT - 5.0, y), (LEFT, y), INK, 0.75);
        if decade.rem_euclid(every) == 0 {
            canvas.markup(
                (LEFT - 8.0, y + 4.0),
                11.0,
                INK2,
                Anchor::End,
                &raised(decade),
            );
        }
    }
    if every == 1 {
        canvas.ticks(frame.y.minor().into_iter().map(|y| (LEFT, y)), (-3.0, 0.0));
    }
    canvas.line((LEFT, TOP), (LEFT, BOTTOM), INK, 0.75);
    canvas.text((4.0, 18.0), 11.0, INK2, Anchor::Start, "relative error");
}

fn raised(decade: i32) -> String {
    match decade {
        0 => "1".to_string(),
        1 => "10".to_string(),
        n if n < 0 => format!("10<tspan dy=\"-4\" font-size=\"9\">\u{2212}{}</tspan>", -n),
        n => format!("10<tspan dy=\"-4\" font-size=\"9\">{n}</tspan>"),
    }
}

fn size_axis(
    canvas: &mut Canvas,
    frame: &Frame,
    levels: &[LevelOutcome],
    curves: &[Curve],
    unit: &str,
) {
    canvas.ticks(frame.x.minor().into_iter().map(|x| (x, BOTTOM)), (0.0, 3.0));
    canvas.line((LEFT, BOTTOM), (RIGHT, BOTTOM), INK, 0.75);
    let used = |h: f64| {
        curves
            .iter()
            .any(|curve| curve.points.iter().any(|p| p.0 == h))
    };
    let mut last = f64::NEG_INFINITY;
    for level in levels {
        let Some(h) = level.h.filter(|h| used(*h)) else {
            continue;
        };
        let x = frame.x.px(h);
        canvas.line((x, BOTTOM), (x, BOTTOM + 5.0), INK, 0.75);
        canvas.line((x, TOP - 4.0), (x, TOP), INK3, 0.75);
        // labels that would run into the one before are left out; the level table has them all
        if x - last > 32.0 {
            canvas.markup(
                (x, BOTTOM + 17.0),
                11.0,
                INK2,
                Anchor::Middle,
                &Number::three(h).svg(),
            );
            canvas.text(
                (x, TOP - 7.0),
                10.0,
                INK3,
                Anchor::Middle,
                &grouped(level.elements),
            );
            last = x;
        }
    }
    canvas.text(
        (RIGHT + 10.0, TOP - 7.0),
        10.0,
        INK3,
        Anchor::Start,
        "elements",
    );
    let axis = format!("element size h ({unit}), finer to the right");
    canvas.text(
        ((LEFT + RIGHT) / 2.0, BOTTOM + 33.0),
        11.0,
        INK2,
        Anchor::Middle,
        &axis,
    );
}

/// A bracket at each limit; the word where no curve crosses it.
fn limits(canvas: &mut Canvas, frame: &Frame, curves: &[Curve]) {
    let lines: Vec<_> = curves.iter().map(|curve| pixels(frame, curve)).collect();
    let taken = |x: f64, y: f64| {
        let crossed = |line: &Vec<(f64, f64)>| {
            height_at(line, x).is_some_and(|height| (height - y).abs() < 9.0)
        };
        lines.iter().any(crossed)
    };
    for curve in curves {
        let Some((h, limit)) = curve.limit else {
            continue;
        };
        let (x, y) = (frame.x.px(h), frame.y.px(limit));
        canvas.polyline(
            &[
                (x - 8.0, y - 5.0),
                (x - 8.0, y),
                (x + 8.0, y),
                (x + 8.0, y - 5.0),
            ],
            curve.colour,
            1.4,
        );
        if ![12.0, 20.0, 30.0].iter().any(|d| taken(x - d, y - 2.0)) {
            canvas.text(
                (x - 11.0, y + 2.0),
                10.0,
                curve.colour,
                Anchor::End,
                "limit",
            );
        } else if ![-8.0, 0.0, 8.0].iter().any(|d| taken(x + d, y - 12.0)) {
            canvas.text((x, y - 8.0), 10.0, curve.colour, Anchor::Middle, "limit");
        }
    }
}

/// Names at the right ends of the curves instead of a legend, with the fitted order.
fn labels(canvas: &mut Canvas, frame: &Frame, curves: &[Curve]) {
    let ends: Vec<(f64, f64)> = curves
        .iter()
        .filter_map(|curve| pixels(frame, curve).last().copied())
        .collect();
    let wanted: Vec<f64> = ends.iter().map(|end| end.1).collect();
    let heights = spread(&wanted, 31.0, (TOP + 10.0, BOTTOM - 14.0));
    for (curve, (end, height)) in curves.iter().zip(ends.iter().zip(&heights)) {
        let start = (end.0 + 6.0, end.1);
        if (height - end.1).abs() > 2.0 {
            canvas.polyline(
                &[start, (RIGHT + 2.0, end.1), (RIGHT + 8.0, *height)],
                HAIR,
                0.75,
            );
        } else {
            canvas.line(start, (RIGHT + 7.0, end.1), HAIR, 0.75);
        }
        canvas.name(
            (RIGHT + 10.0, height + 1.0),
            curve.colour,
            &shorten(&curve.series.label, 15),
        );
        if let Some(order) = curve.series.fit.map(order_text) {
            canvas.text(
                (RIGHT + 10.0, height + 14.0),
                10.5,
                INK2,
                Anchor::Start,
                &order,
            );
        }
    }
}

/// "order 3.02 ± 0.04".
fn order_text(fit: OrderFit) -> String {
    match fit.half_width {
        Some(half_width) => {
            let (order, half_width) = with_uncertainty(fit.order, half_width, Some(2));
            format!("order {}{THIN}±{THIN}{}", order.html(), half_width.html())
        }
        None => format!("order {}", Number::fixed(fit.order, 2).html()),
    }
}

/// The plot in one sentence a quantity.
fn spoken(curves: &[Curve]) -> String {
    let one = |curve: &Curve| {
        let ends = (curve.points.first()?, curve.points.last()?);
        let order = curve
            .series
            .fit
            .map_or(String::new(), |fit| format!(", {}", order_text(fit)));
        let (first, last) = (
            Number::three(ends.0.1).ascii(),
            Number::three(ends.1.1).ascii(),
        );
        Some(format!(
            "{} from {first} to {last}{order}",
            curve.series.label
        ))
    };
    let parts: Vec<_> = curves.iter().filter_map(one).collect();
    format!(
        "Relative errors against element size, logarithmic: {}. Numbers in the table below.",
        parts.join("; ")
    )
}
