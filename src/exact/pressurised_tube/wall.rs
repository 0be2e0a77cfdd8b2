//! The wall in its reference state: where its layers are, and how an integral over it is cut into panels.

use super::grading::Factor;
use super::problem::TubeProblem;
use crate::materials::{Differences, Hardening, IncompressibleLaw};
use std::sync::Arc;

/// Widest panel in X: the integrands are analytic up to |Im X| = pi/2, so that 16 points miss 1e-25 of them.
const PANEL: f64 = 1.0;

/// Width of a panel in units of the law's own length.
const GRADE: f64 = 2.0;

/// Width of a panel in units of the grading's own length: e^6 over 16 points misses 1e-19.
const GRADING: f64 = 6.0;

/// More panels of a smooth part than any law needs: 60/GRADE and the plain ones.
const MOST_PANELS: usize = 400;

/// A part of the wall with one law and one smooth grading.
#[derive(Debug, Clone)]
pub(super) struct Segment {
    /// Ends in X = ln(R/A).
    pub from: f64,
    pub to: f64,
    /// Ends as reference radii.
    pub inner: f64,
    pub outer: f64,
    pub law: Arc<dyn IncompressibleLaw>,
    pub factor: Factor,
}

/// The wall in its reference state, with its laws.
#[derive(Debug, Clone)]
pub(super) struct Wall {
    pub inner: f64,
    pub outer: f64,
    /// H = ln(B/A).
    pub span: f64,
    pub segments: Vec<Segment>,
}

/// A panel in X and the segment it lies in.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Panel {
    pub from: f64,
    pub to: f64,
    pub segment: usize,
}

/// `d = ln(lt/lr)` and `1 + k/s` at a place where s = (R/A)^2, from `swell = s - 1` and `g`.
pub(super) fn local(swell: f64, g: f64) -> (f64, f64) {
    let (s, k) = (1.0 + swell, g.exp_m1());
    let x = k / s;
    if x > -0.5 {
        (x.ln_1p(), 1.0 + x)
    } else {
        // near the closing of the bore 1 + k/s must not be formed by subtraction
        let stretch = (swell + g.exp()) / s;
        (stretch.ln(), stretch)
    }
}

impl Segment {
    /// The law with the grading at X; `bore` is A.
    pub fn at(&self, x: f64, d: f64, e: f64, bore: f64) -> Differences<f64> {
        let law = self.law.at(d, e);
        if self.factor == Factor::One {
            return law;
        }
        let f = self.factor.at(x, bore);
        Differences {
            hoop: f * law.hoop,
            axial: f * law.axial,
            reduced: f * law.reduced,
            energy: f * law.energy,
        }
    }

    /// Where the law's kinks lie inside, in ascending X: `s = k/expm1(d*)`.
    pub fn kinks(&self, g: f64, e: f64) -> Vec<f64> {
        let k = g.exp_m1();
        let places = self.law.kinks(e).into_iter().map(|d| {
            let s = k / d.exp_m1();
            0.5 * s.ln()
        });
        // closer to an end than this a panel would be round-off
        let margin = 1e-13 * (self.to - self.from);
        let mut inside: Vec<f64> = places
            .filter(|x| *x > self.from + margin && *x < self.to - margin)
            .collect();
        inside.sort_by(f64::total_cmp);
        inside
    }

    /// How fast the law stiffens along X.
    fn pace(&self, x: f64, g: f64, e: f64) -> f64 {
        let swell = (2.0 * x).exp_m1();
        let (d, stretch) = local(swell, g);
        let hardening = self.law.hardening(d, e).by_d;
        if hardening == 0.0 {
            return 0.0;
        }
        hardening * 2.0 * (g.exp_m1() / (1.0 + swell)).abs() / stretch
    }

    pub fn hardening(&self, x: f64, g: f64, e: f64) -> Hardening {
        let (d, _) = local((2.0 * x).exp_m1(), g);
        self.law.hardening(d, e)
    }
}

impl Wall {
    /// From a checked problem.
    pub fn new(problem: &TubeProblem) -> Self {
        let bore = problem.inner_radius;
        let place = |radius: f64| ((radius - bore) / bore).ln_1p();
        let mut segments: Vec<Segment> = Vec::new();
        let mut from = bore;
        for layer in &problem.layers {
            for (to, factor) in layer.grading.parts(from, layer.outer_radius, bore) {
                segments.push(Segment {
                    from: place(from),
                    to: place(to),
                    inner: from,
                    outer: to,
                    law: layer.law.clone(),
                    factor,
                });
                from = to;
            }
        }
        let outer = problem.outer_radius();
        Self {
            inner: bore,
            outer,
            span: place(outer),
            segments,
        }
    }

    /// (B-A)(B+A).
    pub fn area_factor(&self) -> f64 {
        (self.outer - self.inner) * (self.outer + self.inner)
    }

    /// Whether every layer is isotropic: then the unloaded wall is unsheared, Tt = Tr wherever d = 0.
    pub fn isotropic(&self) -> bool {
        self.segments.iter().all(|s| s.law.isotropic())
    }

    /// (B/A)^2 - 1.
    fn outer_swell(&self) -> f64 {
        self.area_factor() / (self.inner * self.inner)
    }

    /// `d` at the outer wall.
    pub fn outer_difference(&self, g: f64) -> f64 {
        local(self.outer_swell(), g).0
    }

    /// d(d)/dg at the outer wall.
    pub fn outer_difference_slope(&self, g: f64) -> f64 {
        g.exp() / (self.outer_swell() + g.exp())
    }

    /// Deformed inner and outer radius.
    pub fn radii(&self, g: f64, e: f64) -> (f64, f64) {
        let outer = self.outer_difference(g);
        (
            self.inner * (0.5 * (g - e)).exp(),
            self.outer * (0.5 * (outer - e)).exp(),
        )
    }

    /// The segment of a reference radius: a radius between two segments belongs to the inner one, a radius off the
    /// wall to the nearest.
    pub fn segment(&self, radius: f64) -> &Segment {
        let last = self.segments.len() - 1;
        let after = self.segments[..last].iter().position(|s| radius <= s.outer);
        &self.segments[after.unwrap_or(last)]
    }

    /// The panels of the whole wall, broken at interfaces, at knots and at kinks.
    pub fn panels(&self, g: f64, e: f64) -> Vec<Panel> {
        let mut panels = Vec::new();
        for (i, segment) in self.segments.iter().enumerate() {
            let mut from = segment.from;
            for to in segment.kinks(g, e).into_iter().chain([segment.to]) {
                self.fill(&mut panels, i, (from, to), g, e);
                from = to;
            }
        }
        panels
    }

    /// Panels of a smooth part. Near a lock their widths go in proportion to the distance from it: the ratio 2 leaves 3.7^-32
    /// of a pole. Once the stiffness fell by e^60 the rest of the part counts for nothing. For k < 0 the integrand has a pole
    /// at X = ln(-k)/2 just inside the bore, and the panels grow with the distance from it.
    fn fill(
        &self,
        panels: &mut Vec<Panel>,
        index: usize,
        (start, end): (f64, f64),
        g: f64,
        e: f64,
    ) {
        let segment = &self.segments[index];
        let pole = if g < 0.0 {
            0.5 * (-g.exp()).ln_1p()
        } else {
            f64::NEG_INFINITY
        };
        let (mut from, mut fall) = (start, 0.0);
        let mut left = segment.pace(from, g, e);
        for count in 0.. {
            let mut width = PANEL.min(1.5 * (from - pole));
            let mut right = 0.0;
            if count < MOST_PANELS && fall < 60.0 && left.is_finite() {
                width = width.min(GRADE / left);
                right = segment.pace((from + width).min(end), g, e);
                if right > left && right.is_finite() {
                    // fibres of a squeezed wall are stiffest outside
                    width = width.min(GRADE / right);
                    right = segment.pace((from + width).min(end), g, e);
                    fall = 0.0;
                }
            }
            let grading = segment
                .factor
                .pace(from, self.inner)
                .max(segment.factor.pace((from + width).min(end), self.inner));
            width = width.min(GRADING / grading);
            let to = if from + 1.1 * width >= end {
                end
            } else {
                from + width
            };
            panels.push(Panel {
                from,
                to,
                segment: index,
            });
            if to >= end || count > 4 * MOST_PANELS {
                break;
            }
            fall += left * (to - from);
            (from, left) = (to, right);
        }
    }
}
