//! A drawing: plain SVG text, coordinates in pixels with one decimal.

use crate::report::text::escape;

pub const INK: &str = "#161A21";
pub const INK2: &str = "#4A5260";
pub const INK3: &str = "#676F7C";
pub const HAIR: &str = "#C3C8D0";
pub const GRID: &str = "#E4E7EC";
pub const BLUE: &str = "#1F4F99";
pub const BROWN: &str = "#8A4B08";

/// Where a text sits relative to its point.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Anchor {
    Start,
    Middle,
    End,
}

/// The shape of a computed value: one a quantity, so that grey printing keeps them apart.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Shape {
    Circle,
    Square,
    Triangle,
    Lozenge,
}

/// Grows as things are drawn on it.
#[derive(Debug, Default)]
pub struct Canvas {
    body: String,
}

/// A coordinate: one decimal, never "-0.0", never so far off that a viewer chokes on it.
pub fn at(value: f64) -> String {
    let value = if value.is_nan() {
        0.0
    } else {
        value.clamp(-9999.0, 9999.0)
    };
    let text = format!("{value:.1}");
    if text == "-0.0" {
        "0.0".to_string()
    } else {
        text
    }
}

impl Canvas {
    pub fn raw(&mut self, markup: &str) {
        self.body += markup;
    }

    pub fn line(&mut self, from: (f64, f64), to: (f64, f64), stroke: &str, width: f64) {
        let (x1, y1, x2, y2) = (at(from.0), at(from.1), at(to.0), at(to.1));
        self.body += &format!(
            "<line x1=\"{x1}\" y1=\"{y1}\" x2=\"{x2}\" y2=\"{y2}\" stroke=\"{stroke}\" stroke-width=\"{width}\"/>"
        );
    }

    /// Short strokes of one kind in a single path: `from` each point by `(dx, dy)`.
    pub fn ticks(&mut self, points: impl Iterator<Item = (f64, f64)>, by: (f64, f64)) {
        let path: String = points
            .map(|(x, y)| format!("M{} {}l{} {}", at(x), at(y), by.0, by.1))
            .collect();
        if !path.is_empty() {
            self.body += &format!("<path d=\"{path}\" stroke=\"{INK}\" stroke-width=\"0.6\"/>");
        }
    }

    pub fn polyline(&mut self, points: &[(f64, f64)], stroke: &str, width: f64) {
        if points.len() > 1 {
            self.body += &format!(
                "<polyline points=\"{}\" fill=\"none\" stroke=\"{stroke}\" stroke-width=\"{width}\" \
                 stroke-linejoin=\"round\"/>",
                join(points)
            );
        }
    }

    /// A tinted area.
    pub fn band(&mut self, points: &[(f64, f64)], fill: &str, opacity: f64) {
        let points = join(points);
        self.body +=
            &format!("<polygon points=\"{points}\" fill=\"{fill}\" fill-opacity=\"{opacity}\"/>");
    }

    /// Text is foreign unless it comes from `numbers`: it is escaped here.
    pub fn text(&mut self, at: (f64, f64), size: f64, fill: &str, anchor: Anchor, text: &str) {
        self.markup(at, size, fill, anchor, &escape(text));
    }

    /// Like [`Self::text`] for text that is markup already.
    pub fn markup(
        &mut self,
        (x, y): (f64, f64),
        size: f64,
        fill: &str,
        anchor: Anchor,
        text: &str,
    ) {
        self.styled((x, y), size, fill, anchor, "", text);
    }

    /// The name of a curve.
    pub fn name(&mut self, (x, y): (f64, f64), fill: &str, text: &str) {
        self.styled(
            (x, y),
            11.5,
            fill,
            Anchor::Start,
            " font-weight=\"600\"",
            &escape(text),
        );
    }

    fn styled(
        &mut self,
        (x, y): (f64, f64),
        size: f64,
        fill: &str,
        anchor: Anchor,
        style: &str,
        text: &str,
    ) {
        let anchor = match anchor {
            Anchor::Start => "",
            Anchor::Middle => " text-anchor=\"middle\"",
            Anchor::End => " text-anchor=\"end\"",
        };
        self.body += &format!(
            "<text x=\"{}\" y=\"{}\" font-size=\"{size}\" fill=\"{fill}\"{anchor}{style}>{text}</text>",
            at(x),
            at(y)
        );
    }

    /// A white-filled mark of half width `r`.
    pub fn mark(&mut self, shape: Shape, (x, y): (f64, f64), r: f64, stroke: &str) {
        let style = format!(
            "fill=\"#fff\" stroke=\"{stroke}\" stroke-width=\"1.4\" stroke-linejoin=\"round\""
        );
        let (side, x0, y0) = (at(1.8 * r), at(x), at(y));
        self.body += &match shape {
            Shape::Circle => format!("<circle cx=\"{x0}\" cy=\"{y0}\" r=\"{r}\" {style}/>"),
            Shape::Square => format!(
                "<rect x=\"{}\" y=\"{}\" width=\"{side}\" height=\"{side}\" {style}/>",
                at(x - 0.9 * r),
                at(y - 0.9 * r)
            ),
            Shape::Triangle => {
                let (half, height) = (1.18 * r, 2.0 * r);
                let (top, height, half, width) =
                    (at(y - 1.2 * r), at(height), at(half), at(2.0 * half));
                format!("<path d=\"M{x0} {top}l{half} {height}h-{width}z\" {style}/>")
            }
            Shape::Lozenge => {
                let (top, d) = (at(y - 1.3 * r), at(1.3 * r));
                format!("<path d=\"M{x0} {top}l{d} {d}l-{d} {d}l-{d} -{d}z\" {style}/>")
            }
        };
    }

    /// The finished drawing, with the label that stands for it when it cannot be seen.
    pub fn figure(self, class: &str, width: u32, height: u32, label: &str) -> String {
        format!(
            "<svg class=\"{class}\" width=\"{width}\" height=\"{height}\" viewBox=\"0 0 {width} {height}\" role=\"img\" \
             aria-label=\"{}\">{}</svg>",
            escape(label),
            self.body
        )
    }
}

fn join(points: &[(f64, f64)]) -> String {
    let points: Vec<_> = points
        .iter()
        .map(|(x, y)| format!("{},{}", at(*x), at(*y)))
        .collect();
    points.join(" ")
}
