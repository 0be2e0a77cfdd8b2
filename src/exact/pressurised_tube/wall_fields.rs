//! The state at a point of the wall, in closed form but for one Chebyshev series.
//!
//! ```text
//! y = ln(B/R) = log1p((B-R)/R)    d = log1p(k (A/R)^2)
//! srr = -Po - int_0^y (Tt-Tr)/(1+k/s) dy
//!     = -Po - S_i - (y - y_i) M_i(y)      S_i to the outer end y_i of a piece, M_i the mean from there to y
//! stt = srr + (Tt-Tr)             szz = srr + (Tz-Tr)
//! u = R expm1((d-e)/2)            ln lt = (d-e)/2   ln lr = -(d+e)/2
//! ```
//! Pieces end at interfaces, at knots of a grading and at kinks of a law, and are halved where one series does not do.
//! srr has no jump anywhere; a radius between two layers belongs to the inner one, whose law gives stt and szz there.

use super::wall::{Segment, Wall, local};
use crate::exact::parameters::refuse;
use crate::exact::solution::{Refusal, State};
use crate::mechanics::{Point, SymTensor};
use crate::numerics::{Chebyshev, GaussRule, Piecewise};
use nalgebra::Vector3;

/// Chebyshev nodes a piece, and Gauss points of a node.
const NODES: usize = 20;
/// Wanted size of the last coefficients against the largest.
const TAIL: f64 = 2e-15;
/// Where fibres and ground cancel, round-off of their sum may exceed that tail; then so much more is allowed, and stated.
const LOOSER: [f64; 4] = [1.0, 8.0, 64.0, 512.0];
/// Halvings at most: near a lock a piece is as long as the distance to it.
const DEPTH: usize = 40;

/// One piece of the table of srr.
#[derive(Debug, Clone)]
struct Piece {
    /// y at the outer end, and -Po - srr there.
    start: f64,
    before: f64,
    /// y at the inner end.
    end: f64,
    /// M over the piece.
    mean: Chebyshev,
}

/// Everything a point needs.
#[derive(Debug, Clone)]
pub(super) struct Fields {
    pub(super) wall: Wall,
    pub(super) g: f64,
    pub(super) e: f64,
    outer_pressure: f64,
    /// expm1(e), the axial strain.
    axial_strain: f64,
    /// From the outer wall to the bore.
    pieces: Vec<Piece>,
    /// What the table of srr may miss beyond round-off, relative to its largest value.
    pub(super) unresolved: f64,
}

/// Radial, hoop and axial numbers at one radius.
#[derive(Debug, Clone, Copy)]
pub(super) struct Local {
    pub strains: [f64; 3],
    pub stress: SymTensor,
    pub pressure: f64,
    pub energy_density: f64,
}

impl Fields {
    /// At the solved `(g, e)`. Refuses when the wall's stress cannot be resolved to round-off.
    pub fn new(wall: Wall, g: f64, e: f64, outer_pressure: f64) -> Result<Self, Refusal> {
        let mut fields = Self {
            axial_strain: e.exp_m1(),
            wall,
            g,
            e,
            outer_pressure,
            pieces: Vec::new(),
            unresolved: 0.0,
        };
        let tables = LOOSER.into_iter().map(|f| (f, fields.table(f)));
        let found = tables.filter_map(|(f, table)| Some((f, table?))).next();
        let (looser, pieces) = found.ok_or_else(|| {
            let message = "the stress in the wall varies too steeply to be tabled to round-off";
            refuse("", message.to_string(), "choose a smaller load")
        })?;
        fields.pieces = pieces;
        fields.unresolved = TAIL * (looser - 1.0);
        Ok(fields)
    }

    /// d(-srr)/dy by a segment's law.
    fn gradient(&self, segment: &Segment, y: f64) -> f64 {
        let x = self.wall.span - y;
        let (d, stretch) = local((2.0 * x).exp_m1(), self.g);
        segment.at(x, d, self.e, self.wall.inner).hoop / stretch
    }

    fn table(&self, looser: f64) -> Option<Vec<Piece>> {
        let mut pieces = Vec::new();
        let mut before = 0.0;
        for segment in self.wall.segments.iter().rev() {
            let kinks = segment.kinks(self.g, self.e);
            let mut to = segment.to;
            for from in kinks.into_iter().rev().chain([segment.from]) {
                before = self.smooth(segment, (from, to), looser, before, &mut pieces)?;
                to = from;
            }
        }
        Some(pieces)
    }

    /// Pieces of a smooth part `from..to` in X; what is integrated up to its inner end.
    fn smooth(
        &self,
        segment: &Segment,
        (from, to): (f64, f64),
        looser: f64,
        mut before: f64,
        pieces: &mut Vec<Piece>,
    ) -> Option<f64> {
        let mut at = |y: f64| self.gradient(segment, y);
        // a stiffening law's own round-off cannot be resolved
        let loss = |x: f64| segment.hardening(x, self.g, self.e).loss;
        let tail = looser * TAIL + 2.0 * f64::EPSILON * loss(from).max(loss(to));
        let ends = (self.wall.span - to, self.wall.span - from);
        let breaks = Piecewise::breaks(ends, NODES, tail, DEPTH, &mut at)?;
        let rule = GaussRule::of(NODES);
        for ends in breaks.windows(2) {
            let (start, end) = (ends[0], ends[1]);
            let mean = Chebyshev::fit(start, end, NODES, |y| {
                rule.integrate(start, y, at) / (y - start)
            });
            pieces.push(Piece {
                start,
                before,
                end,
                mean,
            });
            before += rule.integrate(start, end, at);
        }
        Some(before)
    }

    /// -Po - srr at y, from the table inside the wall, by direct quadrature outside.
    fn drop(&self, segment: &Segment, y: f64) -> f64 {
        let index = self.pieces.partition_point(|p| p.end < y);
        let (from, known) = match self.pieces.get(index) {
            Some(piece) if y >= piece.start => {
                return piece.before + (y - piece.start) * piece.mean.value(y);
            }
            Some(_) => (0.0, 0.0),
            None => self.pieces.last().map_or((0.0, 0.0), |p| {
                (p.end, p.before + (p.end - p.start) * p.mean.value(p.end))
            }),
        };
        // from the nearer end of the wall, in steps short enough for the rule
        let steps = ((y - from).abs() / 0.5).ceil().clamp(1.0, 100.0);
        let width = (y - from) / steps;
        let rule = GaussRule::of(NODES);
        let beyond = (0..steps as usize).map(|i| {
            let left = from + width * i as f64;
            rule.integrate(left, left + width, |y| self.gradient(segment, y))
        });
        known + beyond.sum::<f64>()
    }

    /// The state at a reference radius, in the axes of the tube.
    pub fn at_radius(&self, radius: f64) -> Result<Local, Refusal> {
        self.in_segment(self.wall.segment(radius), radius)
    }

    /// The state at a reference radius by the law of one segment: at an interface either side can be asked for.
    pub fn in_segment(&self, segment: &Segment, radius: f64) -> Result<Local, Refusal> {
        let (inner, outer) = (self.wall.inner, self.wall.outer);
        let no_value = || {
            let message = format!("the tube's formulas have no value at reference radius {radius}");
            refuse("", message, format!("the wall is {inner} <= R <= {outer}"))
        };
        if !(radius > 0.0 && radius.is_finite()) {
            return Err(no_value());
        }
        let swell = (radius - inner) * (radius + inner) / (inner * inner);
        let (d, _) = local(swell, self.g);
        let y = ((outer - radius) / radius).ln_1p();
        let x = self.wall.span - y;
        let law = segment.at(x, d, self.e, inner);
        if !(law.hoop.is_finite() && law.axial.is_finite()) {
            return Err(no_value());
        }
        let srr = -self.outer_pressure - self.drop(segment, y);
        let stt = srr + law.hoop;
        let szz = srr + law.axial;
        if !(stt.is_finite() && szz.is_finite()) {
            return Err(no_value());
        }
        Ok(Local {
            strains: [
                (-0.5 * (d + self.e)).exp_m1(),
                (0.5 * (d - self.e)).exp_m1(),
                self.axial_strain,
            ],
            stress: SymTensor::diagonal(srr, stt, szz),
            pressure: -(srr + (law.hoop + law.axial) / 3.0),
            energy_density: law.energy,
        })
    }

    /// The state at a reference point.
    pub fn at(&self, point: Point) -> Result<State, Refusal> {
        let local = self.at_radius(point.radius())?;
        let [radial, hoop, axial] = local.strains;
        let direction = point.direction();
        let gradient = SymTensor::diagonal(radial, hoop, axial).cylindrical_to_cartesian(direction);
        if !point.z.is_finite() {
            return Err(refuse(
                "",
                format!("Z = {} is not a finite number", point.z),
                "",
            ));
        }
        Ok(State {
            displacement: Vector3::new(point.x * hoop, point.y * hoop, point.z * axial),
            displacement_gradient: gradient.to_matrix(),
            stretches: [1.0 + radial, 1.0 + hoop, 1.0 + axial],
            stress: local.stress.cylindrical_to_cartesian(direction),
            local_stress: local.stress,
            pressure: local.pressure,
            volume_ratio: 1.0,
            energy_density: local.energy_density,
        })
    }
}
