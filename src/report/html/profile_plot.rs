//! Stress through the wall: exact lines, computed marks, what is left between them, and the wall itself.

use super::scale::{Linear, Ticks, spread};
use super::svg::{Anchor, BLUE, BROWN, Canvas, GRID, HAIR, INK, INK2, INK3, Shape, at};
use crate::report::numbers::{NBSP, Number};
use crate::report::text::{escape, shorten};
use crate::verdict::outcome::{Profile, ProfileCurve};

const LEFT: f64 = 44.0;
const RIGHT: f64 = 240.0;
const TOP: f64 = 26.0;
const BOTTOM: f64 = 172.0;
/// The residual strip.
const STRIP: (f64, f64) = (192.0, 242.0);
/// The wall strip.
const WALL: (f64, f64) = (250.0, 259.0);
/// Marks a curve has at most; more would be a black band.
const MARKS: usize = 24;

/// The panel.
pub fn panel(profile: &Profile) -> String {
    let largest = largest(profile);
    let unit = escape(&profile.unit);
    let named = match largest {
        Some((name, radius, difference)) => format!(
            " Largest difference {}{NBSP}{unit}, {}, at R{NBSP}{}{NBSP}{}.",
            Number::three(difference.abs()).html(),
            escape(name),
            radius_text(profile, radius),
            escape(&profile.length_unit)
        ),
        None => String::new(),
    };
    let every = thinning(profile);
    let thinned = if every > 1 {
        format!(" One point in {every} is marked.")
    } else {
        String::new()
    };
    format!(
        "<figure class=\"panel\"><h4><span>{}</span></h4>{}<figcaption>Lines: exact. Marks: computed at integration points along one \
         radius, level {}.{named} Strip beneath: computed minus exact.{thinned}</figcaption></figure>\n",
        title(profile, largest),
        draw(profile, every),
        escape(&profile.level)
    )
}

/// As many digits as the wall needs: three of its thickness at least.
fn radius_text(profile: &Profile, radius: f64) -> String {
    let slenderness = profile.outer_radius / (profile.outer_radius - profile.inner_radius);
    let digits = 3.0 + slenderness.abs().log10().ceil();
    Number::significant(radius, digits.clamp(4.0, 12.0) as usize).html()
}

fn title(profile: &Profile, largest: Option<(&str, f64, f64)>) -> String {
    match largest {
        Some((_, _, difference)) => format!(
            "Stress through the wall, off by at most {}{NBSP}{}",
            Number::three(difference.abs()).html(),
            escape(&profile.unit)
        ),
        None => "Exact stress through the wall".to_string(),
    }
}

fn thinning(profile: &Profile) -> usize {
    let most = profile
        .curves
        .iter()
        .map(|curve| curve.computed.len())
        .max()
        .unwrap_or(0);
    most.div_ceil(MARKS).max(1)
}

/// Name, radius and difference of the worst point.
fn largest(profile: &Profile) -> Option<(&str, f64, f64)> {
    let points = profile
        .curves
        .iter()
        .flat_map(|c| c.computed.iter().map(|p| (c.name.as_str(), p.0, p.2)));
    points.max_by(|a, b| a.2.abs().total_cmp(&b.2.abs()))
}

/// Colour and shape of a component; by its name, so that it is the same in every case.
fn look(curve: &ProfileCurve) -> (&'static str, Shape) {
    match curve.name.as_str() {
        "hoop" => (BLUE, Shape::Circle),
        "radial" => (BROWN, Shape::Square),
        "axial" => (INK, Shape::Triangle),
        _ => (INK3, Shape::Lozenge),
    }
}

fn draw(profile: &Profile, every: usize) -> String {
    let x = Linear::new((profile.inner_radius, profile.outer_radius), (LEFT, RIGHT));
    let mut canvas = Canvas::default();
    stresses(&mut canvas, profile, &x, every);
    residuals(&mut canvas, profile, &x, every);
    wall(&mut canvas, profile, &x);
    canvas.figure("plot", 336, 304, &spoken(profile))
}

fn stresses(canvas: &mut Canvas, profile: &Profile, x: &Linear, every: usize) {
    let exact = profile
        .curves
        .iter()
        .flat_map(|c| c.exact.iter().map(|p| p.1));
    let computed = profile
        .curves
        .iter()
        .flat_map(|c| c.computed.iter().map(|p| p.1));
    let (low, high) = range(exact.chain(computed));
    let pad = 0.07 * (high - low);
    let y = Linear::new((low - pad, high + pad), (BOTTOM, TOP));
    let ticks = y.ticks(5);
    let size = high.abs().max(low.abs());
    let power = if (0.01..1e4).contains(&size) {
        0
    } else {
        size.log10().floor() as i32
    };
    value_axis(canvas, &y, &ticks, power);
    let unit = axis_unit(&profile.unit, power);
    canvas.markup(
        (4.0, 16.0),
        11.0,
        INK2,
        Anchor::Start,
        &format!("Cauchy stress ({unit})"),
    );
    for curve in &profile.curves {
        let line: Vec<_> = curve.exact.iter().map(|p| (x.px(p.0), y.px(p.1))).collect();
        canvas.polyline(&line, look(curve).0, 1.4);
    }
    for curve in &profile.curves {
        let (colour, shape) = look(curve);
        for point in curve.computed.iter().step_by(every) {
            canvas.mark(shape, (x.px(point.0), y.px(point.1)), 2.7, colour);
        }
    }
    names(canvas, profile, &y);
}

fn range(values: impl Iterator<Item = f64>) -> (f64, f64) {
    values
        .filter(|v| v.is_finite())
        .fold((f64::INFINITY, f64::NEG_INFINITY), |(a, b), v| {
            (a.min(v), b.max(v))
        })
}

/// The unit, with the power of ten that the labels leave out.
fn axis_unit(unit: &str, power: i32) -> String {
    match power {
        0 => escape(unit),
        _ => format!(
            "10<tspan dy=\"-4\" font-size=\"8.5\">{}</tspan><tspan dy=\"4\">{NBSP}{}</tspan>",
            power.to_string().replace('-', "\u{2212}"),
            escape(unit)
        ),
    }
}

fn value_axis(canvas: &mut Canvas, y: &Linear, ticks: &Ticks, power: i32) {
    let decimals = ticks.decimals(power);
    for value in &ticks.major {
        let height = y.px(*value);
        let zero =
            value.abs() < 1e-12 * (1.0 + ticks.major.iter().fold(0.0, |m: f64, v| m.max(v.abs())));
        canvas.line(
            (LEFT, height),
            (RIGHT, height),
            if zero { HAIR } else { GRID },
            0.75,
        );
        canvas.line((LEFT - 5.0, height), (LEFT, height), INK, 0.75);
        let label = if zero {
            Number::fixed(0.0, 0)
        } else {
            Number::fixed(value / 10f64.powi(power), decimals)
        };
        canvas.markup(
            (LEFT - 8.0, height + 4.0),
            11.0,
            INK2,
            Anchor::End,
            &label.svg(),
        );
    }
    canvas.ticks(ticks.minor.iter().map(|v| (LEFT, y.px(*v))), (-3.0, 0.0));
    canvas.line((LEFT, TOP), (LEFT, BOTTOM), INK, 0.75);
}

fn names(canvas: &mut Canvas, profile: &Profile, y: &Linear) {
    let curves: Vec<_> = profile
        .curves
        .iter()
        .filter(|curve| !curve.exact.is_empty())
        .collect();
    let ends: Vec<f64> = curves
        .iter()
        .filter_map(|c| c.exact.last())
        .map(|p| y.px(p.1))
        .collect();
    let heights = spread(&ends, 14.0, (TOP, BOTTOM));
    for (curve, (end, height)) in curves.iter().zip(ends.iter().zip(&heights)) {
        canvas.line((RIGHT + 2.0, *end), (RIGHT + 8.0, *height), HAIR, 0.75);
        canvas.name(
            (RIGHT + 11.0, height + 4.0),
            look(curve).0,
            &shorten(&curve.name, 12),
        );
    }
}

/// Computed minus exact on its own scale; the quantities stand side by side.
fn residuals(canvas: &mut Canvas, profile: &Profile, x: &Linear, every: usize) {
    let most = largest(profile).map_or(0.0, |point| point.2.abs());
    let limit = if most > 0.0 { most } else { 1.0 };
    let y = Linear::new((-1.2 * limit, 1.2 * limit), (STRIP.1, STRIP.0));
    let (height, width) = (STRIP.1 - STRIP.0, RIGHT - LEFT);
    canvas.raw(&format!(
        "<rect x=\"{LEFT}\" y=\"{}\" width=\"{width}\" height=\"{height}\" fill=\"#F4F5F7\"/>",
        STRIP.0
    ));
    let zero = y.px(0.0);
    canvas.line((LEFT, zero), (RIGHT, zero), INK, 0.9);
    canvas.line((LEFT, STRIP.0), (LEFT, STRIP.1), INK, 0.75);
    canvas.text((LEFT - 8.0, zero + 4.0), 11.0, INK2, Anchor::End, "0");
    if most > 0.0 {
        let tick = round_below(most);
        for value in [tick, -tick] {
            canvas.line((LEFT - 5.0, y.px(value)), (LEFT, y.px(value)), INK, 0.75);
        }
        canvas.markup(
            (LEFT - 8.0, y.px(tick) + 3.0),
            10.0,
            INK2,
            Anchor::End,
            &Number::exact(tick).svg(),
        );
    }
    let middle = (profile.curves.len() as f64 - 1.0) / 2.0;
    for (k, curve) in profile.curves.iter().enumerate() {
        let (colour, shape) = look(curve);
        let worst = curve.computed.iter().map(|p| p.2.abs()).fold(0.0, f64::max);
        for (_, point) in curve
            .computed
            .iter()
            .enumerate()
            .filter(|(n, p)| n % every == 0 || p.2.abs() == worst)
        {
            let place = (x.px(point.0) + 3.2 * (k as f64 - middle), y.px(point.2));
            canvas.line((place.0, zero), place, colour, 0.8);
            canvas.mark(shape, place, 2.2, colour);
        }
    }
    canvas.text(
        (RIGHT + 11.0, zero - 2.0),
        10.5,
        INK,
        Anchor::Start,
        "computed",
    );
    canvas.text(
        (RIGHT + 11.0, zero + 10.0),
        10.5,
        INK2,
        Anchor::Start,
        "minus exact",
    );
}

/// The largest of 1, 2, 5 times a power of ten that is not above `value`.
fn round_below(value: f64) -> f64 {
    let power = value.log10().floor() as i32;
    let factor = [5.0, 2.0, 1.0]
        .into_iter()
        .find(|m| m * 10f64.powi(power) <= value)
        .unwrap_or(1.0);
    // parsed, not multiplied: 2e-4 and not 0.00019999999999999998
    format!("{factor}e{power}").parse().unwrap_or(value)
}

fn wall(canvas: &mut Canvas, profile: &Profile, x: &Linear) {
    let (width, height) = (RIGHT - LEFT, WALL.1 - WALL.0);
    canvas.raw(&format!(
        "<rect x=\"{LEFT}\" y=\"{}\" width=\"{width}\" height=\"{height}\" fill=\"url(#sec)\" stroke=\"{INK}\" \
         stroke-width=\".75\"/>",
        WALL.0
    ));
    for border in &profile.element_borders {
        canvas.line((x.px(*border), WALL.0), (x.px(*border), WALL.1), INK, 0.75);
    }
    canvas.text(
        (RIGHT + 11.0, WALL.1),
        10.0,
        INK3,
        Anchor::Start,
        "wall, elements",
    );
    let ticks = x.ticks(4);
    let decimals = ticks.decimals(0);
    let widest = ticks
        .major
        .iter()
        .map(|v| format!("{v:.*}", decimals).len())
        .max()
        .unwrap_or(0);
    let values = match widest {
        0..=6 => ticks.major,
        // a thin wall needs many decimals: its two ends only
        _ => vec![profile.inner_radius, profile.outer_radius],
    };
    for value in values {
        let place = x.px(value);
        canvas.line((place, WALL.1), (place, WALL.1 + 5.0), INK, 0.75);
        let label = match widest > 6 {
            true => end_label(value),
            false => Number::fixed(value, decimals),
        };
        canvas.markup(
            (place, WALL.1 + 17.0),
            11.0,
            INK2,
            Anchor::Middle,
            &label.svg(),
        );
    }
    canvas.text((LEFT, WALL.1 + 33.0), 11.0, INK2, Anchor::Start, "bore");
    canvas.text((RIGHT, WALL.1 + 33.0), 11.0, INK2, Anchor::End, "outside");
    let name = format!("radius R ({})", profile.length_unit);
    canvas.text(
        ((LEFT + RIGHT) / 2.0, WALL.1 + 33.0),
        10.5,
        INK2,
        Anchor::Middle,
        &name,
    );
}

/// A radius as it was given, unless that is too long for its place.
fn end_label(radius: f64) -> Number {
    let exact = Number::exact(radius);
    match exact.ascii().len() {
        0..=8 => exact,
        _ => Number::significant(radius, 7),
    }
}

fn spoken(profile: &Profile) -> String {
    let one = |curve: &ProfileCurve| {
        let (first, last) = (curve.exact.first()?.1, curve.exact.last()?.1);
        let worst = curve.computed.iter().map(|p| p.2.abs()).fold(0.0, f64::max);
        let text = |v: f64| Number::three(v).ascii();
        Some(format!(
            "{} from {} to {}, off by at most {}",
            curve.name,
            text(first),
            text(last),
            text(worst)
        ))
    };
    let parts: Vec<_> = profile.curves.iter().filter_map(one).collect();
    let borders = profile.element_borders.len().saturating_sub(1);
    let elements = at(borders as f64).trim_end_matches(".0").to_string();
    format!(
        "Cauchy stress in {} through the wall at level {}, from bore to outside, {elements} elements: {}.",
        profile.unit,
        profile.level,
        parts.join("; ")
    )
}
