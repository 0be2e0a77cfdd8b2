//! The state at a point of the wall, in closed form but for one Chebyshev series.
//!
//! ```text
//! del = log1p(c (B-R)(B+R)/R^2),  c = k A^2/(B^2 + k A^2)        d = d(B) + del
//! srr = -Po - del G(del)          G = mean over [0, del] of (Tt-Tr)/(2 expm1(d))
//! stt = srr + (Tt-Tr)             szz = srr + (Tz-Tr)
//! u = R expm1((d-e)/2)            ln lt = (d-e)/2   ln lr = -(d+e)/2
//! ```
//! From d srr/dX = (Tt-Tr)/(1+k/s) and dX/(1+k/s) = -dd/(2 expm1(d)): in the variable d the integrand has no
//! kinematics left, and it stays smooth for any wall (numerics.md 2).

use super::equations::Wall;
use crate::exact::parameters::refuse;
use crate::exact::solution::{Refusal, State};
use crate::mechanics::{Point, SymTensor};
use crate::numerics::{Chebyshev, GaussRule, Piecewise};
use nalgebra::Vector3;

/// Chebyshev nodes a piece, and Gauss points of a node.
const NODES: usize = 20;
/// Wanted size of the last coefficients against the largest.
const TAIL: f64 = 2e-15;
/// Halvings at most: near a lock a piece is as long as the distance to it.
const DEPTH: usize = 30;

/// Everything a point needs.
#[derive(Debug, Clone)]
pub(super) struct Fields {
    wall: Wall,
    g: f64,
    e: f64,
    outer_pressure: f64,
    /// d at the outer wall.
    outer_difference: f64,
    /// c of the header.
    share: f64,
    /// expm1(e), the axial strain.
    axial_strain: f64,
    /// G in del, over the wall.
    mean: Piecewise,
}

/// Radial, hoop and axial numbers at one radius.
#[derive(Debug, Clone, Copy)]
pub(super) struct Local {
    pub strains: [f64; 3],
    pub stress: SymTensor,
    pub pressure: f64,
    pub energy_density: f64,
}

/// (Tt-Tr)/(2 expm1(d)), with its limit at d = 0.
fn slope(wall: &Wall, d: f64, e: f64) -> f64 {
    if d == 0.0 {
        0.5 * wall.law.with_slopes(0.0, e).hoop.by_d
    } else {
        0.5 * wall.law.at(d, e).hoop / d.exp_m1()
    }
}

impl Fields {
    /// At the solved `(g, e)`. Refuses when the wall's stress cannot be resolved to round-off.
    pub fn new(wall: Wall, g: f64, e: f64, outer_pressure: f64) -> Result<Self, Refusal> {
        let outer_difference = wall.outer_difference(g);
        let square = wall.inner * wall.inner;
        let mut fields = Self {
            share: g.exp_m1() * square / (wall.area_factor() + square * g.exp()),
            axial_strain: e.exp_m1(),
            wall,
            g,
            e,
            outer_pressure,
            outer_difference,
            mean: Piecewise::new(Vec::new()),
        };
        let range = fields.place(fields.wall.inner).unwrap_or(0.0);
        if range != 0.0 {
            fields.mean = fields.fit(range).ok_or_else(|| {
                let message = "the stress in the wall varies too steeply to be tabled to round-off";
                refuse("", message.to_string(), "choose a smaller load")
            })?;
        }
        Ok(fields)
    }

    /// G over `0..range` in pieces that hold it to round-off.
    fn fit(&self, range: f64) -> Option<Piecewise> {
        let mut at = |del: f64| slope(&self.wall, self.outer_difference + del, self.e);
        // a stiffening law's own round-off cannot be resolved
        let tail = TAIL + 2.0 * f64::EPSILON * self.wall.law.hardening(self.g, self.e).loss;
        let breaks = Piecewise::breaks((0.0, range), NODES, tail, DEPTH, &mut at)?;
        let rule = GaussRule::of(NODES);
        let mut before = 0.0;
        let mut pieces = Vec::with_capacity(breaks.len() - 1);
        for ends in breaks.windows(2) {
            let piece = Chebyshev::fit(ends[0], ends[1], NODES, |del| {
                (before + rule.integrate(ends[0], del, at)) / del
            });
            pieces.push(piece);
            before += rule.integrate(ends[0], ends[1], at);
        }
        Some(Piecewise::new(pieces))
    }

    /// del at reference radius `radius`, or `None` where the formula has no continuation.
    fn place(&self, radius: f64) -> Option<f64> {
        let outer = self.wall.outer;
        let x = self.share * ((outer - radius) * (outer + radius) / (radius * radius));
        let del = if x > -0.5 {
            x.ln_1p()
        } else {
            // near the closing of the bore: (1 + k/s) of both places, neither by subtraction
            let inner = self.wall.inner;
            let square = inner * inner * self.g.exp();
            let here = (radius - inner) * (radius + inner) + square;
            let there = self.wall.area_factor() + square;
            ((here / there) * (outer * outer / (radius * radius))).ln()
        };
        del.is_finite().then_some(del)
    }

    /// G, from the table inside the wall, by direct quadrature outside.
    fn mean(&self, del: f64) -> f64 {
        if del == 0.0 {
            return slope(&self.wall, self.outer_difference, self.e);
        }
        if let Some(value) = self.mean.value(del) {
            return value;
        }
        let at = |del: f64| slope(&self.wall, self.outer_difference + del, self.e);
        // from the nearer end of the wall, in steps short enough for the rule
        let (from, known) = match self.mean.pieces().last().map(|p| p.interval().1) {
            Some(end) if del.abs() > end.abs() && (del > 0.0) == (end > 0.0) => {
                (end, end * self.mean.value(end).unwrap_or(f64::NAN))
            }
            _ => (0.0, 0.0),
        };
        let steps = ((del - from).abs() / 0.5).ceil().clamp(1.0, 100.0);
        let width = (del - from) / steps;
        let rule = GaussRule::of(NODES);
        let beyond: f64 = (0..steps as usize)
            .map(|i| rule.integrate(from + width * i as f64, from + width * (i as f64 + 1.0), at))
            .sum();
        (known + beyond) / del
    }

    /// The state at a reference radius, in the axes of the tube.
    pub fn at_radius(&self, radius: f64) -> Result<Local, Refusal> {
        let no_value = || {
            let message = format!("the tube's formulas have no value at reference radius {radius}");
            let (a, b) = (self.wall.inner, self.wall.outer);
            refuse("", message, format!("the wall is {a} <= R <= {b}"))
        };
        if !(radius > 0.0 && radius.is_finite()) {
            return Err(no_value());
        }
        let del = self.place(radius).ok_or_else(no_value)?;
        let d = self.outer_difference + del;
        let law = self.wall.law.at(d, self.e);
        let srr = if del == 0.0 {
            -self.outer_pressure
        } else {
            -self.outer_pressure - del * self.mean(del)
        };
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
