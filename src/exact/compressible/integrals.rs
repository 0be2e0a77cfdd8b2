//! Integrals over the wall, and what is prescribed, as numbers with their derivatives by all unknowns.
//!
//! ```text
//! F = (pi A^2/lz) int (2(szz-srr) - (stt-srr)) J s dX                             reduced axial force, closed ends
//! N = (pi A^2/lz) int [2 (szz-srr) J s - f (s-1+m)] dX - pi Po (A^2/lz)(s-1+m)(H)  by parts: nothing cancels at a large bore
//! ```
//! Dead loads are pressures per reference area: p0 = Pi (a/A) lz, q0 = Po (b/B) lz; closed ends then carry pi (p0 A^2 - q0 B^2).

use super::mesh::{Mesh, Shape};
use super::states::{Local, NodeState};
use nalgebra::DVector;
use std::f64::consts::PI;

/// Places of the four numbers behind the nodes.
pub(super) const BORE: usize = 0;
pub(super) const STRETCH: usize = 1;
pub(super) const INNER: usize = 2;
pub(super) const OUTER: usize = 3;
pub(super) const EXTRA: usize = 4;

/// What fixes the axial stretch.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Axial {
    /// e = ln lz is given.
    Fixed(f64),
    /// F = 0.
    Closed,
    /// N is given.
    Force(f64),
    /// N is that of dead pressures on the reference areas of rigid caps.
    DeadCaps,
}

/// What is prescribed at the bore.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Control {
    /// g, the logarithm of the enclosed volume's ratio.
    Swell(f64),
    /// The inner pressure, nominal for dead loads.
    Load(f64),
    /// 2 ln(a/A), 3 ln(a/A) in the sphere.
    Bore(f64),
    /// Pi = Po.
    Level,
}

/// Everything prescribed.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Conditions {
    pub axial: Axial,
    pub control: Control,
    /// Po, nominal for dead loads.
    pub outer: f64,
    pub dead: bool,
}

/// A number with its derivatives by all unknowns, and the size of its terms.
#[derive(Debug, Clone)]
pub(super) struct Row {
    pub value: f64,
    pub by: DVector<f64>,
    pub size: f64,
}

/// What the integrals of one set of states need again and again.
pub(super) struct Integrals<'a> {
    pub mesh: &'a Mesh,
    y: &'a DVector<f64>,
    pub states: &'a [NodeState],
    /// d(n s j)/dLam at each node.
    pub growth: DVector<f64>,
}

impl<'a> Integrals<'a> {
    pub fn new(mesh: &'a Mesh, y: &'a DVector<f64>, states: &'a [NodeState]) -> Self {
        let power = mesh.wall.shape.power();
        let growth = mesh.nodes.iter().zip(states);
        let growth =
            growth.map(|(node, s)| power * node.s * s.volume / mesh.law(node).volume_modulus());
        Self {
            mesh,
            y,
            states,
            growth: DVector::from_iterator(states.len(), growth),
        }
    }

    pub fn extra(&self, place: usize) -> f64 {
        self.y[self.mesh.len() + place]
    }

    /// `int h dX` over the wall, where h depends on kap, Lam and e of its node and, by the second list, on m.
    fn over_wall(&self, integrand: &[(Local, f64, f64)]) -> Row {
        let n = self.mesh.len();
        let (mut value, mut size) = (0.0, 0.0);
        let mut by = DVector::zeros(n + EXTRA);
        let mut by_sum = DVector::zeros(n);
        for (i, (h, by_m, terms)) in integrand.iter().enumerate() {
            let w = self.mesh.nodes[i].weight;
            value += w * h.value;
            size += w * terms.abs();
            by[i] = w * h.by_lam;
            by_sum[i] = w * (h.by_kap + by_m);
            by[n + BORE] += w * h.by_kap * self.extra(BORE).exp();
            by[n + STRETCH] += w * h.by_e;
        }
        let through = self
            .mesh
            .forward
            .tr_mul(&by_sum)
            .component_mul(&self.growth);
        for i in 0..n {
            by[i] += through[i];
        }
        Row { value, by, size }
    }

    /// int f dX.
    pub fn balance(&self) -> Row {
        let terms = self
            .states
            .iter()
            .map(|s| (s.push, 0.0, s.push.value * (1.0 + s.loss)));
        self.over_wall(&terms.collect::<Vec<_>>())
    }

    /// s - 1 + m at the outer wall: the section's (the shell's) deformed measure in units of the bore's.
    pub fn measure(&self) -> Row {
        let n = self.mesh.len();
        let power = self.mesh.wall.shape.power();
        let mut row = Row {
            value: self.mesh.wall.swell(self.mesh.wall.span()),
            by: DVector::zeros(n + EXTRA),
            size: 0.0,
        };
        for (i, (node, s)) in self.mesh.nodes.iter().zip(self.states).enumerate() {
            row.value += node.weight * power * node.s * s.change;
            row.by[i] = node.weight * self.growth[i];
        }
        row.size = row.value;
        row
    }

    /// F/(pi A^2/lz), the reduced axial force.
    fn reduced(&self) -> Row {
        let terms = self.states.iter().zip(&self.mesh.nodes).map(|(s, node)| {
            let modulus = self.mesh.law(node).volume_modulus();
            let (a, h) = (&s.axial, &s.hoop);
            let scale = s.volume * node.s;
            let value = 2.0 * a.value - h.value;
            let local = Local {
                value: scale * value,
                by_kap: scale * (2.0 * a.by_kap - h.by_kap),
                by_lam: scale * (2.0 * a.by_lam - h.by_lam + value / modulus),
                by_e: scale * (2.0 * a.by_e - h.by_e),
            };
            let size = scale * (2.0 * a.value.abs() + h.value.abs()) * (1.0 + s.loss);
            (local, 0.0, size)
        });
        self.over_wall(&terms.collect::<Vec<_>>())
    }

    /// N of the header.
    pub fn force(&self) -> Row {
        let n = self.mesh.len();
        let terms = self.states.iter().zip(&self.mesh.nodes).map(|(s, node)| {
            let modulus = self.mesh.law(node).volume_modulus();
            let (a, f) = (&s.axial, &s.push);
            let scale = 2.0 * s.volume * node.s;
            let arm = node.swell + s.grown;
            let local = Local {
                value: scale * a.value - f.value * arm,
                by_kap: scale * a.by_kap - f.by_kap * arm,
                by_lam: scale * (a.by_lam + a.value / modulus) - f.by_lam * arm,
                by_e: scale * a.by_e - f.by_e * arm,
            };
            let size = (scale * a.value.abs() + (f.value * arm).abs()) * (1.0 + s.loss);
            (local, -f.value, size)
        });
        let mut row = self.over_wall(&terms.collect::<Vec<_>>());
        let (measure, outer) = (self.measure(), self.extra(OUTER));
        row.value -= outer * measure.value;
        row.size += (outer * measure.value).abs();
        row.by -= &measure.by * outer;
        row.by[n + OUTER] -= measure.value;
        let inner = self.mesh.wall.inner;
        let factor = PI * inner * inner * (-self.extra(STRETCH)).exp();
        let by_e = -row.value;
        row.by[n + STRETCH] += by_e;
        Row {
            value: factor * row.value,
            by: row.by * factor,
            size: factor * row.size,
        }
    }

    /// The inner load: Pi, or for dead loads Pi (a/A) lz.
    pub fn load(&self, dead: bool) -> Row {
        let n = self.mesh.len();
        let pressure = self.extra(INNER);
        let factor = if dead {
            (0.5 * (self.extra(BORE) + self.extra(STRETCH))).exp()
        } else {
            1.0
        };
        let mut by = DVector::zeros(n + EXTRA);
        by[n + INNER] = factor;
        if dead {
            by[n + BORE] = 0.5 * factor * pressure;
            by[n + STRETCH] = 0.5 * factor * pressure;
        }
        let value = factor * pressure;
        Row {
            value,
            by,
            size: value.abs(),
        }
    }

    /// The outer load: Po, or for dead loads Po (b/B) lz.
    pub fn outer_load(&self, dead: bool) -> Row {
        let n = self.mesh.len();
        let pressure = self.extra(OUTER);
        let mut by = DVector::zeros(n + EXTRA);
        by[n + OUTER] = 1.0;
        let mut value = pressure;
        if dead {
            // (b/B)^2 lz = (measure + e^g)/S
            let measure = self.measure();
            let (bore, stretch) = (self.extra(BORE).exp(), self.extra(STRETCH).exp());
            let outer = 1.0 + self.mesh.wall.swell(self.mesh.wall.span());
            let square = (measure.value + bore) / outer;
            let factor = (square * stretch).sqrt();
            by = measure.by * (0.5 * pressure * factor / (square * outer));
            by[n + BORE] += 0.5 * pressure * factor * bore / (square * outer);
            by[n + STRETCH] += 0.5 * pressure * factor;
            by[n + OUTER] += factor;
            value *= factor;
        }
        Row {
            value,
            by,
            size: value.abs(),
        }
    }

    /// A row that picks one unknown.
    fn unknown(&self, place: usize) -> Row {
        let n = self.mesh.len();
        let mut by = DVector::zeros(n + EXTRA);
        by[n + place] = 1.0;
        Row {
            value: self.extra(place),
            by,
            size: 0.0,
        }
    }

    /// The axial equation and its scale.
    pub fn axial(&self, given: &Conditions) -> (Row, f64) {
        let wall = &self.mesh.wall;
        let area = PI * (wall.outer - wall.inner) * (wall.outer + wall.inner);
        match given.axial {
            Axial::Fixed(e) => (self.unknown(STRETCH).less(e), 1.0),
            Axial::Closed => {
                let section = wall.swell(wall.span());
                (self.reduced(), wall.modulus() * section)
            }
            Axial::Force(force) => (self.force().less(force), wall.modulus() * area),
            Axial::DeadCaps => {
                let mut row = self.force();
                let load = self.load(true);
                let (inner, outer) = (PI * wall.inner * wall.inner, PI * wall.outer * wall.outer);
                row.value -= inner * load.value - outer * given.outer;
                row.size += inner * load.size + outer * given.outer.abs();
                row.by -= load.by * inner;
                (row, wall.modulus() * area)
            }
        }
    }

    pub fn control(&self, given: &Conditions) -> (Row, f64) {
        let n = self.mesh.len();
        let scale = self.mesh.wall.pressure_scale();
        match given.control {
            Control::Swell(g) => (self.unknown(BORE).less(g), 1.0),
            Control::Load(load) => (self.load(given.dead).less(load), scale),
            Control::Bore(place) => {
                // g - e in the tube, g in the sphere
                let mut row = self.unknown(BORE);
                if self.mesh.wall.shape == Shape::Tube {
                    row.value -= self.extra(STRETCH);
                    row.by[n + STRETCH] = -1.0;
                }
                (row.less(place), 1.0)
            }
            Control::Level => {
                let mut row = self.unknown(INNER);
                row.by[n + OUTER] = -1.0;
                (row.less(self.extra(OUTER)), scale)
            }
        }
    }
}

impl Row {
    pub fn less(mut self, given: f64) -> Self {
        self.value -= given;
        self.size += given.abs();
        self
    }
}
