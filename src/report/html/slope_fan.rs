//! The slope fan of a convergence plot: how far each quantity is expected to fall when h is halved, true to the
//! scales of the plot.

use super::convergence_plot::{BOTTOM, LEFT};
use super::curves::{Curve, height_at};
use super::scale::{Log, spread};
use super::svg::{Anchor, Canvas, INK2};
use crate::report::numbers::{Number, THIN};

/// Largest width and height of the slope fan.
const FAN: (f64, f64) = (60.0, 46.0);

/// Where the slope fan goes: its corner, the length of its leg, and whether that leg is a whole halving.
pub struct Fan {
    corner: (f64, f64),
    leg: f64,
    whole: bool,
}

fn expected(curves: &[Curve]) -> Vec<(f64, &'static str)> {
    let orders = curves
        .iter()
        .filter_map(|c| c.series.expected_order.map(|order| (order, c.colour)));
    orders
        .filter(|(order, _)| (0.1..=20.0).contains(order))
        .collect()
}

/// The fan in the lower left corner; none without expected orders.
pub fn place(curves: &[Curve], x: &Log, y: &Log) -> Option<Fan> {
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

/// True when no curve comes near the fan.
pub fn is_free(curves: &[Curve], fan: &Fan, x: &Log, y: &Log) -> bool {
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

/// One ray a quantity, its factor at the end.
pub fn draw(canvas: &mut Canvas, fan: &Fan, curves: &[Curve], x: &Log, y: &Log) {
    let mut rays: Vec<(f64, &str)> = Vec::new();
    for (order, colour) in expected(curves) {
        match rays.iter_mut().find(|ray| ray.0 == order) {
            // several quantities with the same slope: one ray in ink
            Some(ray) => ray.1 = INK2,
            None => rays.push((order, colour)),
        }
    }
    let slope = (y.px(0.5) - y.px(1.0)) / (x.px(0.5) - x.px(1.0));
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
