//! The state at a point of the wall, from tables of Lam, m and srr.
//!
//! Each panel holds the three as Chebyshev series in X = ln(R/A); kinematics and stress differences follow from them by the
//! law itself. What the law says of a solved wall is tabled again (`table`), so that a point does not ask it. Around the wall
//! the same equations are continued over a short distance from each surface.

use super::integrals::{BORE, OUTER, STRETCH};
use super::mesh::{Mesh, Shape, Wall};
use super::path::Station;
use super::states::{Bore, Place, loss};
use super::system::states;
use super::table::{LANES, Table};
use crate::exact::parameters::refuse;
use crate::exact::solution::Refusal;
use crate::materials::Compressible;
use crate::mechanics::SymTensor;
use crate::numerics::{Chebyshev, Collocation};
use std::sync::Arc;

/// Chebyshev nodes a panel.
const NODES: usize = 20;
/// Last coefficients that are left out, against the largest: all of them together stay below round-off.
const SILENT: f64 = 1.5e-17;
/// How far the formulas are continued around the wall, in X.
const AROUND: f64 = 0.25;
/// Wanted size of its last coefficients against the largest value.
const AROUND_TAIL: f64 = 1e-13;
/// Sweeps of the continuation at most; each gains a factor of its width over the sweep's number.
const SWEEPS: usize = 60;

/// Lam, m and srr over one panel, in one Chebyshev recurrence: three are as fast as one.
#[derive(Debug, Clone)]
struct Piece {
    from: f64,
    to: f64,
    layer: usize,
    /// The first halved, so that it is added like the others.
    coefficients: Vec<[f64; 3]>,
    /// What a point needs, where it could be tabled.
    table: Option<Table>,
}

impl Piece {
    fn new((from, to): (f64, f64), layer: usize, value: impl Fn(usize, f64) -> f64) -> Self {
        let series = [0, 1, 2].map(|which| Chebyshev::fit(from, to, NODES, |x| value(which, x)));
        let term = |j: usize| {
            let half = if j == 0 { 0.5 } else { 1.0 };
            series.each_ref().map(|s| half * s.coefficients()[j])
        };
        let mut coefficients: Vec<[f64; 3]> = (0..NODES).map(term).collect();
        let largest =
            [0, 1, 2].map(|i| coefficients.iter().fold(0.0_f64, |m, c| m.max(c[i].abs())));
        let silent = |c: &[f64; 3]| (0..3).all(|i| c[i].abs() <= SILENT * largest[i]);
        while coefficients.len() > 1 && coefficients.last().is_some_and(silent) {
            coefficients.pop();
        }
        Self {
            from,
            to,
            layer,
            coefficients,
            table: None,
        }
    }

    /// Lam, m and srr at `x`, by Clenshaw's recurrence.
    fn at(&self, x: f64) -> [f64; 3] {
        let t = ((x - self.from) - (self.to - x)) / (self.to - self.from);
        let twice = 2.0 * t;
        let (mut b1, mut b2) = ([0.0; 3], [0.0; 3]);
        for c in self.coefficients.iter().skip(1).rev() {
            let next = [0, 1, 2].map(|i| twice * b1[i] + (c[i] - b2[i]));
            (b1, b2) = (next, b1);
        }
        [0, 1, 2].map(|i| self.coefficients[0][i] + (t * b1[i] - b2[i]))
    }
}

/// Everything a point needs.
#[derive(Debug, Clone)]
pub(super) struct Fields {
    wall: Arc<Wall>,
    pieces: Vec<Piece>,
    /// Inside the bore and outside of the outer wall.
    around: [Option<Piece>; 2],
    bore: Bore,
    e: f64,
    /// expm1(e), the axial strain of the tube.
    axial_strain: f64,
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
        let values = [&y.as_slice()[..n], &grown, &radial];
        let piece = |p: usize| {
            let panel = &mesh.panels[p];
            let value =
                |which: usize, x: f64| mesh.rule.value(mesh.part(values[which], p), panel.local(x));
            Piece::new((panel.from, panel.to), panel.layer, value)
        };
        let mut fields = Self {
            wall: mesh.wall.clone(),
            pieces: (0..mesh.panels.len()).map(piece).collect(),
            around: [None, None],
            bore: Bore::of(y[n + BORE]),
            e: y[n + STRETCH],
            axial_strain: y[n + STRETCH].exp_m1(),
        };
        fields.continue_around(mesh);
        Some(fields)
    }

    /// With tables of what the law says, for fast points.
    pub fn tabled(mut self) -> Self {
        let table = |piece: &Piece| {
            let law = &self.wall.layers[piece.layer].law;
            Table::new((piece.from, piece.to), |x| {
                self.lanes(piece.at(x), self.wall.swell(x), law)
            })
        };
        let tables: Vec<_> = self.pieces.iter().map(table).collect();
        for (piece, table) in self.pieces.iter_mut().zip(tables) {
            piece.table = table;
        }
        self
    }

    /// What is tabled, from Lam, m and srr by the law; and by how much the law magnifies round-off.
    fn lanes(&self, piece: [f64; 3], swell: f64, law: &Compressible) -> ([f64; LANES], f64) {
        let [lam, grown, radial] = piece;
        let place = self.place(swell, lam, grown);
        let motion = place.motion(self.wall.shape, law.volume_modulus());
        let state = law.at(motion.d, motion.e, lam);
        let change = motion.log_volume.exp_m1();
        let loss = loss(law, motion.d, motion.e - motion.log_volume / 3.0);
        let lanes = [grown, change, radial, state.hoop, state.axial, state.energy];
        (lanes, loss)
    }

    /// Pieces on both sides of the wall, as wide as they can be made: near a closing bore that is not far.
    fn continue_around(&mut self, mesh: &Mesh) {
        let continued = |side: &Side| {
            let mut widths = (0..6).map(|i| AROUND * 0.4_f64.powi(i));
            widths.find_map(|w| self.continued(side, w, &mesh.rule))
        };
        let sides = [
            Side::of(self.pieces.first(), true),
            Side::of(self.pieces.last(), false),
        ];
        self.around = sides.map(|side| side.and_then(|s| continued(&s)));
    }

    /// The equations integrated from a surface outwards (or into the bore) over `width`, by sweeps: m and srr from the last
    /// Lam, then Lam from the law.
    fn continued(&self, side: &Side, width: f64, rule: &Collocation) -> Option<Piece> {
        let (from, to) = if side.inward {
            (side.x - width, side.x)
        } else {
            (side.x, side.x + width)
        };
        let n = rule.len();
        let law = &self.wall.layers[side.layer].law;
        let half = 0.5 * width;
        let power = self.wall.shape.power();
        let xs: Vec<f64> = rule
            .pairs()
            .iter()
            .map(|(t, _)| 0.5 * (from + to) + half * t)
            .collect();
        let places = |lam: &[f64], grown: &[f64]| -> Vec<Place> {
            let place = |i: usize| self.place(self.wall.swell(xs[i]), lam[i], grown[i]);
            (0..n).map(place).collect()
        };
        let integral = |values: &[f64], i: usize| -> f64 {
            let weight = |j: usize| {
                if side.inward {
                    -rule.backward(i, j)
                } else {
                    rule.forward(i, j)
                }
            };
            half * (0..n).map(|j| weight(j) * values[j]).sum::<f64>()
        };
        let (mut lam, mut grown) = (vec![side.lam; n], vec![side.grown; n]);
        let mut radial = vec![side.radial; n];
        let mut last = f64::INFINITY;
        for _ in 0..SWEEPS {
            let here = places(&lam, &grown);
            let states: Option<Vec<_>> =
                here.iter().map(|p| p.state(self.wall.shape, law)).collect();
            let states = states?;
            let growth: Vec<f64> = here
                .iter()
                .zip(&states)
                .map(|(p, s)| power * p.s * s.change)
                .collect();
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
                let resolved = [&lam, &radial]
                    .iter()
                    .all(|v| rule.tail(v) <= AROUND_TAIL * size);
                if !resolved {
                    return None;
                }
                let values = [&lam, &grown, &radial];
                let value = |which: usize, x: f64| {
                    rule.value(values[which], ((x - from) - (to - x)) / width)
                };
                return Some(Piece::new((from, to), side.layer, value));
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
            bore: self.bore,
            e: self.e,
            lam,
        }
    }

    /// The state at a reference radius, in the axes of the wall; at an interface, of the inner layer unless one is named.
    pub fn at_radius(&self, radius: f64, layer: Option<usize>) -> Result<AtRadius, Refusal> {
        let no_value = || {
            let message =
                format!("the formulas of the wall have no value at reference radius {radius}");
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
        if let Some(lanes) = piece.table.as_ref().and_then(|table| table.at(x)) {
            return self.looked_up(swell, lanes).ok_or_else(no_value);
        }
        let [lam, grown, radial] = piece.at(x);
        let place = self.place(swell, lam, grown);
        let found = self.evaluated(&place, radial, &self.wall.layers[piece.layer].law);
        found.ok_or_else(no_value)
    }

    /// The piece that holds `x`; the wall's own where round-off decides. A named layer may be asked a little beyond its
    /// ends: its last piece goes on.
    fn piece(&self, x: f64, layer: Option<usize>) -> Option<&Piece> {
        let nearest = |p: &&Piece| (x - p.to).max(p.from - x).max(0.0);
        let close = |p: &&Piece, share: f64| nearest(p) <= share * (p.to - p.from);
        if let Some(layer) = layer {
            let of_layer = self.pieces.iter().filter(|p| p.layer == layer);
            let found = of_layer.min_by(|a, b| nearest(a).total_cmp(&nearest(b)));
            return found.filter(|p| close(p, 0.1));
        }
        let within = self.pieces.iter().find(|p| x <= p.to && x >= p.from);
        let ends = || {
            [self.pieces.first(), self.pieces.last()]
                .into_iter()
                .flatten()
                .find(|p| close(p, 1e-10))
        };
        let around = || {
            self.around
                .iter()
                .flatten()
                .find(|p| x <= p.to && x >= p.from)
        };
        within.or_else(ends).or_else(around)
    }

    /// The state from the tables: q is (lt^2 lz), lt^3 in the sphere, and lr = J/(lt lz).
    fn looked_up(&self, swell: f64, lanes: [f64; LANES]) -> Option<AtRadius> {
        let [grown, change, srr, hoop_stress, axial_stress, energy] = lanes;
        let (q, excess) = self.place(swell, 0.0, grown).excess();
        let (stress, strains) = match self.wall.shape {
            Shape::Tube => {
                let axial = self.axial_strain;
                let stretch = 1.0 + axial;
                let lt = (q / stretch).sqrt();
                let hoop = (excess - axial) / (stretch * (1.0 + lt));
                let radial = (change - (hoop + axial + hoop * axial)) / (lt * stretch);
                let third = srr + axial_stress;
                let stress = SymTensor::diagonal(srr, srr + hoop_stress, third);
                (stress, [radial, hoop, axial])
            }
            Shape::Sphere => {
                let lt = q.cbrt();
                let hoop = excess / (1.0 + lt + lt * lt);
                let radial = (change - hoop * (2.0 + hoop)) / (lt * lt);
                let stt = srr + hoop_stress;
                (SymTensor::diagonal(srr, stt, stt), [radial, hoop, hoop])
            }
        };
        let finite = stress.is_finite() && strains.iter().all(|s| s.is_finite());
        finite.then_some(AtRadius {
            strains,
            stress,
            pressure: -(srr + (hoop_stress + stress.zz - srr) / 3.0),
            volume_ratio: 1.0 + change,
            energy_density: energy,
        })
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
        let strains = match shape {
            Shape::Tube => {
                let hoop = 0.5 * (motion.log_q - motion.e);
                let radial = motion.log_volume - hoop - motion.e;
                [radial.exp_m1(), hoop.exp_m1(), self.axial_strain]
            }
            Shape::Sphere => {
                let hoop = motion.e.exp_m1();
                [(motion.log_volume - 2.0 * motion.e).exp_m1(), hoop, hoop]
            }
        };
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
        let [lam, grown, radial] = piece.at(x);
        Some(Self {
            x,
            inward,
            layer: piece.layer,
            lam,
            grown,
            radial,
        })
    }
}
