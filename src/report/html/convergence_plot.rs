//! Error against element size, both logarithmic: marks and lines per quantity, the band of the fitted line,
//! the limit at the level it is judged at, and a fan of the expected slopes.

use super::scale::{Log, spread};
use super::svg::{Anchor, BLUE, BROWN, Canvas, GRID, HAIR, INK, INK2, INK3, Shape};
use crate::report::numbers::{Number, THIN, grouped, with_uncertainty};
use crate::report::text::{escape, shorten};
use crate::report::wording::name;
use crate::verdict::Verdict;
use crate::verdict::outcome::{
    Bound, CaseOutcome, CriterionOutcome, Judged, Kind, LevelOutcome, MeasureSeries, OrderFit,
};

const LEFT: f64 = 44.0;
const RIGHT: f64 = 232.0;
const TOP: f64 = 44.0;
const BOTTOM: f64 = 264.0;
/// Largest width and height of the slope fan.
const FAN: (f64, f64) = (60.0, 46.0);

/// Series drawn when they are there; judged ones are added up to four.
const USUAL: [&str; 4] = [
    "displacement-L2",
    "stress-L2",
    "strain-energy-error",
    "pressure-L2",
];

/// One quantity: what is drawn of a series.
struct Curve<'a> {
    series: &'a MeasureSeries,
    colour: &'static str,
    shape: Shape,
    /// (h, error), coarsest first; only what a logarithm can show.
    points: Vec<(f64, f64)>,
    /// (h, limit) of the error criterion on it.
    limit: Option<(f64, f64)>,
}

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

fn curves(case: &CaseOutcome) -> Vec<Curve<'_>> {
    let looks = [
        (BLUE, Shape::Circle),
        (BROWN, Shape::Square),
        (INK, Shape::Triangle),
        (INK3, Shape::Lozenge),
    ];
    let judged = case
        .criteria
        .iter()
        .filter(|c| c.judged != Judged::Value)
        .map(|c| c.measure.as_str());
    let mut out: Vec<Curve> = Vec::new();
    for measure in USUAL.into_iter().chain(judged) {
        let series = case
            .measures
            .iter()
            .find(|s| s.kind == Kind::Relative && s.measure == measure);
        let known = out.iter().any(|curve| curve.series.measure == measure);
        if let Some(series) = series.filter(|_| !known)
            && let Some(&(colour, shape)) = looks.get(out.len())
        {
            let points = points(case, series);
            let limit = limit(case, series);
            out.push(Curve {
                series,
                colour,
                shape,
                points,
                limit,
            });
        }
    }
    // a curve without a single mark would be a label without a curve
    out.retain(|curve| !curve.points.is_empty());
    out
}

fn points(case: &CaseOutcome, series: &MeasureSeries) -> Vec<(f64, f64)> {
    let pair = |value: &crate::verdict::outcome::LevelValue| {
        let h = case
            .levels
            .iter()
            .find(|level| level.level == value.level)?
            .h?;
        value.value.filter(|v| *v > 0.0 && h > 0.0).map(|v| (h, v))
    };
    series.values.iter().filter_map(pair).collect()
}

fn limit(case: &CaseOutcome, series: &MeasureSeries) -> Option<(f64, f64)> {
    let judged = |c: &&CriterionOutcome| {
        c.judged == Judged::Error
            && c.bound == Bound::AtMost
            && c.measure == series.measure
            && c.limit > 0.0
    };
    let criterion = case.criteria.iter().find(judged)?;
    let level = case
        .levels
        .iter()
        .find(|level| Some(&level.level) == criterion.level.as_ref())?;
    Some((level.h.filter(|h| *h > 0.0)?, criterion.limit))
}

/// The axes of one plot.
struct Frame {
    x: Log,
    y: Log,
    fan: Option<Fan>,
}

/// Where the slope fan goes: its corner, the length of its leg, and whether that leg is a whole halving.
struct Fan {
    corner: (f64, f64),
    leg: f64,
    whole: bool,
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
        let fan = fan(curves, &x, &y);
        let free = fan
            .as_ref()
            .is_none_or(|fan| corner_is_free(curves, fan, &x, &y));
        if free || high - low > 24.0 {
            return Frame { x, y, fan };
        }
        low -= 0.5;
    }
}

fn expected(curves: &[Curve]) -> Vec<(f64, &'static str)> {
    let orders = curves
        .iter()
        .filter_map(|c| c.series.expected_order.map(|order| (order, c.colour)));
    orders
        .filter(|(order, _)| (0.1..=20.0).contains(order))
        .collect()
}

fn fan(curves: &[Curve], x: &Log, y: &Log) -> Option<Fan> {
    let steepest = expected(curves)
        .iter()
        .map(|(order, _)| *order)
        .fold(0.0, f64::max);
    if steepest == 0.0 {
        return None;
    }
    let halving = x.px(0.5) - x.px(1.0);
    let drop = steepest * (y.px(0.5) - y.px(1.0));
    let share = (FAN.0 / halving).min(FAN.1 / drop).min(1.0);
    Some(Fan {
        corner: (LEFT + 14.0, BOTTOM - 14.0 - share * drop),
        leg: share * halving,
        whole: share == 1.0,
    })
}

fn corner_is_free(curves: &[Curve], fan: &Fan, x: &Log, y: &Log) -> bool {
    let ends = (fan.corner.0 - 12.0, fan.corner.0 + fan.leg + 40.0);
    let roof = fan.corner.1 - 18.0;
    let below = |curve: &Curve| {
        let pixels: Vec<_> = curve
            .points
            .iter()
            .map(|p| (x.px(p.0), y.px(p.1)))
            .collect();
        let line = (0..=12).map(|k| ends.0 + (ends.1 - ends.0) * f64::from(k) / 12.0);
        line.filter_map(|px| height_at(&pixels, px))
            .any(|py| py > roof)
            || pixels.iter().any(|p| p.0 < ends.1 && p.1 > roof)
    };
    !curves.iter().any(below)
}

/// Height of a polyline at `px`, if it goes that far.
fn height_at(pixels: &[(f64, f64)], px: f64) -> Option<f64> {
    let pair = pixels
        .windows(2)
        .find(|pair| (pair[0].0..=pair[1].0).contains(&px))?;
    let share = (px - pair[0].0) / (pair[1].0 - pair[0].0);
    Some(pair[0].1 + share * (pair[1].1 - pair[0].1))
}

fn draw(case: &CaseOutcome, curves: &[Curve], length_unit: &str) -> String {
    let frame = frame(curves);
    let mut canvas = Canvas::default();
    value_axis(&mut canvas, &frame);
    size_axis(&mut canvas, &frame, &case.levels, curves, length_unit);
    for curve in curves {
        if let Some(band) = band_of(curve) {
            canvas.band(&band_outline(&frame, curve, band), curve.colour);
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
    draw_fan(&mut canvas, &frame, curves);
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

fn draw_fan(canvas: &mut Canvas, frame: &Frame, curves: &[Curve]) {
    let Some(fan) = &frame.fan else { return };
    let mut rays: Vec<(f64, &str)> = Vec::new();
    for (order, colour) in expected(curves) {
        match rays.iter_mut().find(|ray| ray.0 == order) {
            // several quantities with the same slope: one ray in ink
            Some(ray) => ray.1 = INK2,
            None => rays.push((order, colour)),
        }
    }
    let slope = (frame.y.px(0.5) - frame.y.px(1.0)) / (frame.x.px(0.5) - frame.x.px(1.0));
    let (x0, y0) = fan.corner;
    let x1 = x0 + fan.leg;
    let ends: Vec<f64> = rays
        .iter()
        .map(|ray| y0 + ray.0 * slope * fan.leg)
        .collect();
    let heights = spread(&ends, 11.5, (y0, BOTTOM - 6.0));
    for ((order, colour), (end, height)) in rays.iter().zip(ends.iter().zip(&heights)) {
        canvas.line((x0, y0), (x1, *end), colour, 1.2);
        canvas.line((x1, *end), (x1 + 5.0, *height), colour, 0.6);
        let factor = 2f64.powf(*order);
        let whole = (factor - factor.round()).abs() < 1e-9;
        let factor = if whole {
            Number::fixed(factor, 0)
        } else {
            Number::ratio(factor)
        };
        canvas.markup(
            (x1 + 7.0, height + 4.0),
            10.5,
            colour,
            Anchor::Start,
            &format!("÷{THIN}{}", factor.svg()),
        );
    }
    let lowest = ends.iter().copied().fold(y0, f64::max);
    canvas.polyline(&[(x0, y0), (x1, y0), (x1, lowest)], INK2, 0.75);
    let (word, anchor, x) = match fan.whole {
        true => ("h ÷ 2", Anchor::Middle, (x0 + x1) / 2.0),
        false => ("per h ÷ 2", Anchor::Start, x0),
    };
    canvas.text(
        (x, y0 - 4.0),
        10.5,
        INK2,
        anchor,
        &word.replace(" ÷ ", &format!("{THIN}÷{THIN}")),
    );
}

/// Names at the right ends of the curves instead of a legend, with the fitted order.
fn labels(canvas: &mut Canvas, frame: &Frame, curves: &[Curve]) {
    let ends: Vec<(f64, f64)> = curves
        .iter()
        .filter_map(|curve| pixels(frame, curve).last().copied())
        .collect();
    let wanted: Vec<f64> = ends.iter().map(|end| end.1).collect();
    let heights = spread(&wanted, 31.0, (TOP + 6.0, BOTTOM - 14.0));
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
