//! Laws of the tests that the wall must serve: one that locks, and one of fibres that act in tension only.

use super::*;
use crate::materials::{Differences, Formula, Hardening, Number, Parameter};

/// W = -(mu Jm/2) ln(1 - (I1-3)/Jm).
#[derive(Debug, Clone, Copy)]
pub struct Locking {
    pub mu: f64,
    pub jm: f64,
}

fn strain<D: Number>(d: D, e: D) -> (D, D, D) {
    let half = (d * 0.5).sinh();
    let z = e.exp_m1();
    let q2 = half * half * 4.0 / e.exp();
    let j = q2 + z * z * (e.exp() + 2.0) / e.exp();
    // I1 - 3, 2 z3/lz - q2, and e^(2er) expm1(2d)
    let reduced = (e * 3.0).exp_m1() * 2.0 / e.exp() - q2;
    (j, reduced, (-(d + e)).exp() * (d * 2.0).exp_m1())
}

impl Formula for Locking {
    const NAME: &'static str = "locking";
    const ENERGY: &'static str = "";

    fn differences<D: Number>(&self, d: D, e: D) -> Differences<D> {
        let (j, reduced, hoop) = strain(d, e);
        let gap = -j / self.jm + 1.0;
        let w = if gap.re() > 0.0 { 1.0 } else { f64::NAN };
        let twice = gap.recip() * (self.mu * w);
        let (hoop, reduced) = (hoop * twice, reduced * twice);
        Differences {
            hoop,
            axial: (hoop + reduced) * 0.5,
            reduced,
            energy: (-j / self.jm).ln_1p() * (-0.5 * self.mu * self.jm * w),
        }
    }

    fn energy<D: Number>(&self, [l1, l2, l3]: [D; 3]) -> D {
        let j = l1 * l1 + l2 * l2 + l3 * l3 - 3.0;
        (-j / self.jm + 1.0).ln() * (-0.5 * self.mu * self.jm)
    }

    fn hardening(&self, d: f64, e: f64) -> Hardening {
        let gap = self.jm - strain(d, e).0;
        Hardening {
            by_d: (2.0 * d.sinh() / e.exp() / gap).abs(),
            loss: (strain(d, e).0 / gap).abs(),
        }
    }

    fn shear_modulus(&self) -> f64 {
        self.mu
    }

    fn parameters(&self) -> Vec<Parameter> {
        Vec::new()
    }
}

/// W = mu/2 (I1-3) + k1/k2 (exp(k2 <I4-1>^2) - 1), fibres at `angle` from the hoop direction, both ways.
#[derive(Debug, Clone, Copy)]
pub struct Fibres {
    pub mu: f64,
    pub k1: f64,
    pub k2: f64,
    pub angle: f64,
}

impl Fibres {
    fn stretch<D: Number>(&self, d: D, e: D) -> D {
        let (s, c) = self.angle.sin_cos();
        (d - e).exp_m1() * (c * c) + (e * 2.0).exp_m1() * (s * s)
    }
}

impl Formula for Fibres {
    const NAME: &'static str = "fibres";
    const ENERGY: &'static str = "";
    const ISOTROPIC: bool = false;

    fn kinks(&self, e: f64) -> Vec<f64> {
        let tan = self.angle.tan();
        let ratio = -tan * tan * (2.0 * e).exp_m1();
        if ratio > -1.0 {
            vec![e + ratio.ln_1p()]
        } else {
            Vec::new()
        }
    }

    fn differences<D: Number>(&self, d: D, e: D) -> Differences<D> {
        let (s, c) = self.angle.sin_cos();
        let (j, reduced, hoop) = strain(d, e);
        let mut strained = self.stretch(d, e);
        if strained.re() <= 0.0 {
            strained = D::from(0.0);
        }
        let square = strained * strained * self.k2;
        let pull = strained * square.exp() * (4.0 * self.k1);
        let (along, up) = (
            pull * (d - e).exp() * (c * c),
            pull * (e * 2.0).exp() * (s * s),
        );
        let (plain, plain_reduced) = (hoop * self.mu, reduced * self.mu);
        Differences {
            hoop: plain + along,
            axial: (plain + plain_reduced) * 0.5 + up,
            reduced: plain_reduced + up * 2.0 - along,
            energy: j * (0.5 * self.mu) + square.exp_m1() * (self.k1 / self.k2),
        }
    }

    fn energy<D: Number>(&self, [l1, l2, l3]: [D; 3]) -> D {
        l1 * l2 * l3
    }

    fn hardening(&self, d: f64, e: f64) -> Hardening {
        let c = self.angle.cos();
        let strained = self.stretch(d, e).max(0.0);
        Hardening {
            by_d: 2.0 * self.k2 * strained * c * c * (d - e).exp(),
            loss: 2.0 * self.k2 * strained * strained,
        }
    }

    fn shear_modulus(&self) -> f64 {
        self.mu
    }

    fn parameters(&self) -> Vec<Parameter> {
        Vec::new()
    }
}

/// Arterial wall: stiff fibres in a soft ground.
pub fn fibres(angle: f64) -> Arc<dyn IncompressibleLaw> {
    Arc::new(Fibres {
        mu: 1.0,
        k1: 0.8,
        k2: 0.9,
        angle,
    })
}

pub fn soft(mu: f64) -> Arc<dyn IncompressibleLaw> {
    Arc::new(NeoHookean { mu })
}

pub fn locking(jm: f64) -> Arc<dyn IncompressibleLaw> {
    Arc::new(Locking { mu: 1.0, jm })
}

pub fn layer(outer_radius: f64, law: Arc<dyn IncompressibleLaw>) -> Layer {
    graded(outer_radius, law, Grading::None)
}

pub fn graded(outer_radius: f64, law: Arc<dyn IncompressibleLaw>, grading: Grading) -> Layer {
    Layer {
        outer_radius,
        law,
        grading,
    }
}

/// Bore of radius 1 under inner pressure.
pub fn problem(layers: Vec<Layer>, ends: Ends, pressure: f64) -> TubeProblem {
    TubeProblem {
        inner_radius: 1.0,
        layers,
        ends,
        drive: Drive::InnerPressure(pressure),
        outer_pressure: 0.0,
        dead: false,
    }
}
