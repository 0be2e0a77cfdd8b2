//! What a node of the wall is in: kinematics from the unknowns, stresses from the law, and their derivatives.
//!
//! ```text
//! Lam = modulus ln J         j = J - 1 = expm1(Lam/modulus)         m(X) = int_0^X n s j dX
//! kap = k + m, k = expm1(g)  q = 1 + kap/s      tube: lt^2 lz = q   sphere: lt^3 = q
//! d = ln(lt/lr) = ln q - Lam/modulus            sphere: e = ln lt = ln(q)/3
//! f = (n-1) (stt-srr) J/q                       equilibrium: d srr/dX = f
//! ```

use super::mesh::Shape;
use crate::materials::{Compressible, VolumeSlope};

/// A number at a node with its derivatives by kap, Lam and e of that node.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct Local {
    pub value: f64,
    pub by_kap: f64,
    pub by_lam: f64,
    pub by_e: f64,
}

/// k of the header, and 1 + k: both from g, so that neither is a difference.
#[derive(Debug, Clone, Copy)]
pub(super) struct Bore {
    pub k: f64,
    pub square: f64,
}

impl Bore {
    pub fn of(g: f64) -> Self {
        Self {
            k: g.exp_m1(),
            square: g.exp(),
        }
    }
}

/// Where a node is: reference place and unknowns.
#[derive(Debug, Clone, Copy)]
pub(super) struct Place {
    pub s: f64,
    /// s - 1.
    pub swell: f64,
    /// m of the header.
    pub grown: f64,
    pub bore: Bore,
    pub e: f64,
    pub lam: f64,
}

/// Kinematics without stresses.
#[derive(Debug, Clone, Copy)]
pub(super) struct Motion {
    /// ln J.
    pub log_volume: f64,
    /// q and ln q.
    pub q: f64,
    pub log_q: f64,
    pub d: f64,
    /// ln lz of the tube, ln lt of the sphere.
    pub e: f64,
}

/// Everything at a node.
#[derive(Debug, Clone, Copy)]
pub(super) struct NodeState {
    pub volume: f64,
    pub change: f64,
    pub grown: f64,
    pub radial: Local,
    pub hoop: Local,
    pub axial: Local,
    /// d srr/dX.
    pub push: Local,
    pub energy: f64,
    /// d ln q/dkap.
    pub stretch_by_kap: f64,
    /// Factor by which round-off of the strain is magnified in the stress.
    pub loss: f64,
}

impl Place {
    /// q, by the form that does not cancel: near the closing of the bore kap is close to -s.
    fn q(&self) -> (f64, f64) {
        let share = (self.bore.k + self.grown) / self.s;
        if share > -0.5 {
            (1.0 + share, share.ln_1p())
        } else {
            let q = (self.swell + self.grown + self.bore.square) / self.s;
            (q, q.ln())
        }
    }

    /// q and q - 1, in the same forms.
    pub fn excess(&self) -> (f64, f64) {
        let share = (self.bore.k + self.grown) / self.s;
        if share > -0.5 {
            (1.0 + share, share)
        } else {
            let q = (self.swell + self.grown + self.bore.square) / self.s;
            (q, q - 1.0)
        }
    }

    /// NaN where the material would have turned inside out.
    pub fn motion(&self, shape: Shape, modulus: f64) -> Motion {
        let (q, log_q) = self.q();
        let log_volume = self.lam / modulus;
        Motion {
            log_volume,
            q,
            log_q,
            d: log_q - log_volume,
            e: match shape {
                Shape::Tube => self.e,
                Shape::Sphere => log_q / 3.0,
            },
        }
    }

    /// `None` where a number is not finite: inside out, beyond a lock, out of range.
    pub fn state(&self, shape: Shape, law: &Compressible) -> Option<NodeState> {
        let modulus = law.volume_modulus();
        let motion = self.motion(shape, modulus);
        let found = law.with_slopes(motion.d, motion.e, self.lam);
        let d_by_kap = 1.0 / (self.s * motion.q);
        let chain = |x: VolumeSlope| {
            let by_lam = x.by_lam - x.by_d / modulus;
            let (by_kap, by_e) = match shape {
                Shape::Tube => (x.by_d * d_by_kap, x.by_e),
                Shape::Sphere => ((x.by_d + x.by_e / 3.0) * d_by_kap, 0.0),
            };
            Local {
                value: x.value,
                by_kap,
                by_lam,
                by_e,
            }
        };
        let (volume, change) = (motion.log_volume.exp(), motion.log_volume.exp_m1());
        let hoop = chain(found.hoop);
        let factor = (shape.power() - 1.0) * volume / motion.q;
        let push = Local {
            value: factor * hoop.value,
            by_kap: factor * (hoop.by_kap - hoop.value * d_by_kap),
            by_lam: factor * (hoop.by_lam + hoop.value / modulus),
            by_e: factor * hoop.by_e,
        };
        let state = NodeState {
            volume,
            change,
            grown: self.grown,
            radial: chain(found.radial),
            hoop,
            axial: chain(found.axial),
            push,
            energy: found.energy.value,
            stretch_by_kap: d_by_kap,
            loss: loss(law, motion.d, motion.e - motion.log_volume / 3.0),
        };
        state.is_finite().then_some(state)
    }
}

/// What the law of the shape says of its stiffening.
pub(super) fn loss(law: &Compressible, d: f64, e: f64) -> f64 {
    match law {
        Compressible::Split { law, .. } => law.hardening(d, e).loss,
        Compressible::Coupled(_) => 0.0,
    }
}

impl NodeState {
    fn is_finite(&self) -> bool {
        let numbers = |x: &Local| {
            x.value.is_finite()
                && x.by_kap.is_finite()
                && x.by_lam.is_finite()
                && x.by_e.is_finite()
        };
        [self.radial, self.hoop, self.axial, self.push]
            .iter()
            .all(numbers)
            && self.volume.is_finite()
    }

    /// What round-off of a stress is measured against.
    pub fn size(&self) -> f64 {
        let sum = self.radial.value.abs() + self.hoop.value.abs() + self.axial.value.abs();
        sum * (1.0 + self.loss)
    }
}
