//! The section to scale: a quarter of it, with radii, pressures and the modelled share.

use super::svg::{Anchor, Canvas, INK, INK2, at};
use crate::report::numbers::{NBSP, Number};
use crate::report::text::escape;
use crate::verdict::outcome::Sketch;

const CENTRE: (f64, f64) = (20.0, 122.0);
const OUTER: f64 = 92.0;

/// The drawing and its words.
pub fn sketch(sketch: &Sketch, length_unit: &str, stress_unit: &str) -> String {
    let mut canvas = Canvas::default();
    let inner = OUTER * (sketch.inner_radius / sketch.outer_radius).clamp(0.0, 1.0);
    section(&mut canvas, inner, sketch.share);
    if sketch.inner_pressure != 0.0 {
        arrows(&mut canvas, inner, Side::Bore, sketch.inner_pressure > 0.0);
    }
    if sketch.outer_pressure != 0.0 {
        arrows(
            &mut canvas,
            OUTER,
            Side::Outside,
            sketch.outer_pressure > 0.0,
        );
    }
    pressures(&mut canvas, sketch, inner, stress_unit);
    radii(&mut canvas, sketch, inner, length_unit);
    let figure = canvas.figure(
        "section",
        152,
        152,
        &spoken(sketch, length_unit, stress_unit),
    );
    format!(
        "<div class=\"sk\">{figure}<p>{}<br/>{}</p></div>",
        escape(&sketch.ends),
        escape(&share(sketch.share))
    )
}

/// A quarter of the section; of a smaller share only that is hatched.
fn section(canvas: &mut Canvas, inner: f64, share: f64) {
    let (x, y) = CENTRE;
    let angle = (360.0 * share).min(90.0);
    if angle < 90.0 {
        canvas.raw(&sector(inner, 90.0, "none", INK2, 0.6));
    }
    canvas.raw(&sector(inner, angle, "url(#sec)", INK, 1.5));
    for (x2, y2, x1, y1) in [(8.0, y, 128.0, y), (x, 134.0, x, 16.0)] {
        canvas.raw(&format!(
            "<line x1=\"{x1}\" y1=\"{y1}\" x2=\"{x2}\" y2=\"{y2}\" stroke=\"{INK2}\" stroke-width=\"0.75\" \
             stroke-dasharray=\"9 2.5 2 2.5\"/>"
        ));
    }
}

/// The wall from the horizontal up to an angle in degrees.
fn sector(inner: f64, angle: f64, fill: &str, stroke: &str, width: f64) -> String {
    let (x, y) = CENTRE;
    let (sine, cosine) = angle.to_radians().sin_cos();
    let (r, t) = (at(inner), at(OUTER));
    format!(
        "<path d=\"M{} {y}A{r} {r} 0 0 0 {} {}L{} {}A{t} {t} 0 0 1 {} {y}Z\" fill=\"{fill}\" stroke=\"{stroke}\" \
         stroke-width=\"{width}\"/>",
        at(x + inner),
        at(x + inner * cosine),
        at(y - inner * sine),
        at(x + OUTER * cosine),
        at(y - OUTER * sine),
        at(x + OUTER)
    )
}

#[derive(Clone, Copy, PartialEq, Eq)]
enum Side {
    Bore,
    Outside,
}

/// Arrows on a wall, pushing on it, or pulling when the pressure is negative.
fn arrows(canvas: &mut Canvas, radius: f64, side: Side, pushing: bool) {
    let (near, far) = match side {
        Side::Bore => ((radius - 2.0).max(2.0), (radius - 18.0).max(1.0)),
        Side::Outside => (radius + 2.5, radius + 17.0),
    };
    let (tip, tail) = if pushing { (near, far) } else { (far, near) };
    let angles: &[f64] = match (side, radius) {
        (Side::Bore, r) if r < 24.0 => &[45.0],
        (Side::Bore, r) if r < 55.0 => &[45.0, 72.0],
        _ => &[40.0, 59.0, 78.0],
    };
    for angle in angles {
        let (sine, cosine) = angle.to_radians().sin_cos();
        let place = |r: f64| (CENTRE.0 + r * cosine, CENTRE.1 - r * sine);
        let outward = if tip > tail { -angle } else { 180.0 - angle };
        let back = if tip > tail { tip - 5.0 } else { tip + 5.0 };
        canvas.line(place(tail), place(back), INK, 1.1);
        let (x, y) = place(tip);
        canvas.raw(&format!(
            "<path d=\"M0 0L-6.5 -2.7V2.7Z\" fill=\"{INK}\" transform=\"translate({} {}) rotate({outward})\"/>",
            at(x),
            at(y)
        ));
    }
}

fn pressures(canvas: &mut Canvas, sketch: &Sketch, inner: f64, unit: &str) {
    let text = |pressure: f64| format!("{}{NBSP}{}", Number::exact(pressure).html(), unit);
    let write = |canvas: &mut Canvas, place, anchor, pressure: f64| {
        let halo = "<g paint-order=\"stroke\" stroke=\"#fff\" stroke-width=\"4\" stroke-linejoin=\"round\">";
        canvas.raw(halo);
        canvas.text(
            place,
            10.5,
            INK,
            anchor,
            &text(pressure).replace("<sup>", "^").replace("</sup>", ""),
        );
        canvas.raw("</g>");
    };
    if sketch.inner_pressure != 0.0 && inner > 0.0 {
        write(
            canvas,
            (CENTRE.0 + 5.0, CENTRE.1 - 6.0),
            Anchor::Start,
            sketch.inner_pressure,
        );
    }
    if sketch.outer_pressure != 0.0 {
        write(canvas, (150.0, 22.0), Anchor::End, sketch.outer_pressure);
    }
}

fn radii(canvas: &mut Canvas, sketch: &Sketch, inner: f64, unit: &str) {
    let (x1, x2) = (CENTRE.0 + inner, CENTRE.0 + OUTER);
    let outer = format!(
        "{}{NBSP}{}",
        Number::exact(sketch.outer_radius).html(),
        escape(unit)
    );
    let first = Number::exact(sketch.inner_radius).html();
    for x in [x1, x2] {
        canvas.raw(&format!(
            "<line x1=\"{0}\" y1=\"125\" x2=\"{0}\" y2=\"136\" stroke=\"{INK2}\" stroke-width=\"0.6\"/>",
            at(x)
        ));
    }
    if inner == 0.0 {
        canvas.markup((x2, 147.0), 10.5, INK2, Anchor::Middle, &outer);
    } else if x2 - x1 > 26.0 {
        canvas.markup((x1, 147.0), 10.5, INK2, Anchor::Middle, &first);
        canvas.markup((x2, 147.0), 10.5, INK2, Anchor::Middle, &outer);
    } else {
        canvas.markup(
            (150.0, 147.0),
            10.5,
            INK2,
            Anchor::End,
            &format!("{first} / {outer}"),
        );
    }
}

fn share(share: f64) -> String {
    let parts = 1.0 / share;
    if share >= 1.0 {
        "whole section modelled".to_string()
    } else if (parts - parts.round()).abs() < 1e-9 {
        format!("1/{} of the section modelled", parts.round())
    } else {
        format!(
            "{} % of the section modelled",
            Number::three(100.0 * share).ascii()
        )
    }
}

fn spoken(sketch: &Sketch, length_unit: &str, stress_unit: &str) -> String {
    let text = |v: f64| Number::exact(v).ascii();
    let mut out = format!(
        "Quarter of the section, inner radius {} {length_unit}, outer radius {} {length_unit}",
        text(sketch.inner_radius),
        text(sketch.outer_radius)
    );
    for (pressure, place) in [
        (sketch.inner_pressure, "on the bore"),
        (sketch.outer_pressure, "outside"),
    ] {
        if pressure != 0.0 {
            out += &format!(", {} {stress_unit} {place}", text(pressure));
        }
    }
    format!("{out}; {}.", sketch.ends)
}
