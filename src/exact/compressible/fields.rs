//! The state at a point of the wall, from tables of Lam, m and srr.
//!
//! Each panel holds the three as Chebyshev series in X = ln(R/A); kinematics and stress differences follow from them by the
//! law itself. Around the wall the same equations are continued over a short distance from each surface.

use super::integrals::{BORE, OUTER, STRETCH};
use super::mesh::{Mesh, Shape, Wall};
use super::path::Station;
use super::states::Place;
use super::system::states;
use crate::exact::parameters::refuse;
use crate::exact::solution::Refusal;
use crate::materials::Compressible;
use crate::mechanics::SymTensor;
use crate::numerics::{Chebyshev, Collocation};
use std::sync::Arc;

/// Chebyshev nodes a panel.
const NODES: usize = 20;
/// How far the formulas are continued around the wall, in X.
const AROUND: f64 = 0.25;
/// Sweeps of the continuation at most; each gains a factor of its width over the sweep's number.
const SWEEPS: usize = 60;

/// Series of one panel.
#[derive(Debug, Clone)]
struct Piece {
    from: f64,
    to: f64,
    layer: usize,
    lam: Chebyshev,
    grown: Chebyshev,
    radial: Chebyshev,
}

/// Everything a point needs.
#[derive(Debug, Clone)]
pub(super) struct Fields {
    wall: Arc<Wall>,
    pieces: Vec<Piece>,
    g: f64,
    e: f64,
}

/// Radial, hoop and third numbers at one radius.
#[derive(Debug, Clone, Copy)]
pub(super) struct AtRadius {
    pub strains: [f64; 3],
    pub stress: SymTensor,
    pub pressure: f64,
    pub volume_ratio: f64,
    pub energy_density: f64,
}

impl Fields {
    /// `None` where a state is not finite.
    pub fn new(station: &Station) -> Option<Self> {
        let (mesh, y) = (&station.mesh, &station.y);
        let n = mesh.len();
        let states = states(mesh, y)?;
        let grown: Vec<f64> = states.iter().map(|s| s.grown).collect();
        let push = nalgebra::DVector::from_iterator(n, states.iter().map(|s| s.push.value));
        let behind = &mesh.backward * push;
        let radial: Vec<f64> = behind.iter().map(|b| -y[n + OUTER] - b).collect();
        let lam = &y.as_slice()[..n];
        let piece = |p: usize| {
            let panel = &mesh.panels[p];
            let series = |values: &[f64]| {
                let part = mesh.part(values, p);
                Chebyshev::fit(panel.from, panel.to, NODES, |x| mesh.rule.value(part, panel.local(x)))
            };
            Piece {
                from: panel.from,
                to: panel.to,
                layer: panel.layer,
                lam: series(lam),
                grown: series(&grown),
                radial: series(&radial),
            }
        };
        let mut fields = Self {
            wall: mesh.wall.clone(),
            pieces: (0..mesh.panels.len()).map(piece).collect(),
            g: y[n + BORE],
            e: y[n + STRETCH],
        };
        fields.continue_around(mesh);
        Some(fields)
    }

    /// Pieces on both sides of the wall, as wide as they can be made.
    fn continue_around(&mut self, mesh: &Mesh) {
        let widths = [AROUND, 0.2 * AROUND, 0.04 * AROUND];
        let continued = |side: &Side| widths.iter().find_map(|w| self.continued(side, *w, &mesh.rule));
        let sides = [Side::of(self.pieces.first(), true), Side::of(self.pieces.last(), false)];
        let [before, after] = sides.map(|side| side.and_then(|s| continued(&s)));
        if let Some(piece) = before {
            self.pieces.insert(0, piece);
        }
        self.pieces.extend(after);
    }

    /// The equations integrated from a surface outwards (or into the bore) over `width`, by sweeps: m and srr from the last
    /// Lam, then Lam from the law.
    fn continued(&self, side: &Side, width: f64, rule: &Collocation) -> Option<Piece> {
        let (from, to) = if side.inward { (side.x - width, side.x) } else { (side.x, side.x + width) };
        let n = rule.len();
        let law = &self.wall.layers[side.layer].law;
        let half = 0.5 * width;
        let power = self.wall.shape.power();
        let xs: Vec<f64> = rule.pairs().iter().map(|(t, _)| 0.5 * (from + to) + half * t).collect();
        let places = |lam: &[f64], grown: &[f64]| -> Vec<Place> {
            let place = |i: usize| self.place(self.wall.swell(xs[i]), lam[i], grown[i]);
            (0..n).map(place).collect()
        };
        let integral = |values: &[f64], i: usize| -> f64 {
            let weight = |j: usize| if side.inward { -rule.backward(i, j) } else { rule.forward(i, j) };
            half * (0..n).map(|j| weight(j) * values[j]).sum::<f64>()
        };
        let (mut lam, mut grown) = (vec![side.lam; n], vec![side.grown; n]);
        let mut radial = vec![side.radial; n];
        let mut last = f64::INFINITY;
        for _ in 0..SWEEPS {
            let here = places(&lam, &grown);
            let states: Option<Vec<_>> = here.iter().map(|p| p.state(self.wall.shape, law)).collect();
            let states = states?;
            let growth: Vec<f64> = here.iter().zip(&states).map(|(p, s)| power * p.s * s.change).collect();
            let push: Vec<f64> = states.iter().map(|s| s.push.value).collect();
            let (mut change, mut size) = (0.0_f64, 0.0_f64);
            for i in 0..n {
                grown[i] = side.grown + integral(&growth, i);
                radial[i] = side.radial + integral(&push, i);
                let step = (states[i].radial.value - radial[i]) / states[i].radial.by_lam;
                lam[i] -= step;
                change = change.max(step.abs());
                size = size.max(lam[i].abs()).max(radial[i].abs());
            }
            if !change.is_finite() {
                return None;
            }
            let settled = change <= 1e-13 * size && change >= 0.5 * last;
            if change <= 2e-16 * size || settled {
                let series = |values: &[f64]| {
                    Chebyshev::fit(from, to, NODES, |x| rule.value(values, ((x - from) - (to - x)) / width))
                };
                return Some(Piece {
                    from,
                    to,
                    layer: side.layer,
                    lam: series(&lam),
                    grown: series(&grown),
                    radial: series(&radial),
                });
            }
            last = change;
        }
        None
    }

    fn place(&self, swell: f64, lam: f64, grown: f64) -> Place {
        Place {
            s: 1.0 + swell,
            swell,
            grown,
            g: self.g,
            e: self.e,
            lam,
        }
    }

    /// The state at a reference radius, in the axes of the wall; at an interface, of the inner layer unless one is named.
    pub fn at_radius(&self, radius: f64, layer: Option<usize>) -> Result<AtRadius, Refusal> {
        let no_value = || {
            let message = format!("the formulas of the wall have no value at reference radius {radius}");
            let (a, b) = (self.wall.inner, self.wall.outer);
            refuse("", message, format!("the wall is {a} <= R <= {b}"))
        };
        if !(radius > 0.0 && radius.is_finite()) {
            return Err(no_value());
        }
        let u = (radius - self.wall.inner) / self.wall.inner;
        let x = u.ln_1p();
        let piece = self.piece(x, layer).ok_or_else(no_value)?;
        let swell = match self.wall.shape {
            Shape::Tube => u * (2.0 + u),
            Shape::Sphere => u * (3.0 + u * (3.0 + u)),
        };
        let place = self.place(swell, piece.lam.value(x), piece.grown.value(x));
        let found = self.evaluated(&place, piece.radial.value(x), &self.wall.layers[piece.layer].law);
        found.ok_or_else(no_value)
    }

    /// The piece that holds `x`. A named layer may be asked a little beyond its ends: its last piece goes on.
    fn piece(&self, x: f64, layer: Option<usize>) -> Option<&Piece> {
        let Some(layer) = layer else {
            let first = self.pieces.first()?;
            return self.pieces.iter().find(|p| x <= p.to).filter(|_| x >= first.from);
        };
        let of_layer = self.pieces.iter().filter(|p| p.layer == layer);
        let nearest = |p: &&Piece| (x - p.to).max(p.from - x).max(0.0);
        let found = of_layer.min_by(|a, b| nearest(a).total_cmp(&nearest(b)))?;
        (nearest(&found) <= 0.1 * (found.to - found.from)).then_some(found)
    }

    fn evaluated(&self, place: &Place, srr: f64, law: &Compressible) -> Option<AtRadius> {
        let shape = self.wall.shape;
        let motion = place.motion(shape, law.volume_modulus());
        let state = law.at(motion.d, motion.e, place.lam);
        let third = match shape {
            Shape::Tube => srr + state.axial,
            Shape::Sphere => srr + state.hoop,
        };
        let stress = SymTensor::diagonal(srr, srr + state.hoop, third);
        let logs = match shape {
            Shape::Tube => {
                let hoop = 0.5 * (motion.log_q - motion.e);
                [motion.log_volume - hoop - motion.e, hoop, motion.e]
            }
            Shape::Sphere => [motion.log_volume - 2.0 * motion.e, motion.e, motion.e],
        };
        let strains = logs.map(f64::exp_m1);
        let finite = stress.is_finite() && strains.iter().all(|s| s.is_finite());
        finite.then_some(AtRadius {
            strains,
            stress,
            pressure: -(srr + (state.hoop + third - srr) / 3.0),
            volume_ratio: motion.log_volume.exp(),
            energy_density: state.energy,
        })
    }
}

/// Where a continuation starts: a surface of the wall.
struct Side {
    x: f64,
    inward: bool,
    layer: usize,
    lam: f64,
    grown: f64,
    radial: f64,
}

impl Side {
    fn of(piece: Option<&Piece>, inward: bool) -> Option<Self> {
        let piece = piece?;
        let x = if inward { piece.from } else { piece.to };
        Some(Self {
            x,
            inward,
            layer: piece.layer,
            lam: piece.lam.value(x),
            grown: piece.grown.value(x),
            radial: piece.radial.value(x),
        })
    }
}
