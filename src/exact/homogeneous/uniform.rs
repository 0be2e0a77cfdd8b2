//! Uniform states: the free stretches and the stresses of a prescribed deformation, for every kind of material.
//!
//! Axes X, Y, Z stand for the radial, hoop and axial direction of the laws: `d = ln(ly/lx)`, `e = ln lz`.

use crate::exact::demands::rounded;
use crate::exact::given::refuse;
use crate::exact::solution::Refusal;
use crate::exact::tube_shear::local_shear::simple_shear;
use crate::materials::{Compressible, IncompressibleLaw, LinearElastic, VolumeSlope};
use crate::mechanics::SymTensor;
use nalgebra::{Matrix3, Vector3};

/// What is prescribed.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Mode {
    /// Stretch along X; Y and Z free.
    Uniaxial(f64),
    /// The same stretch along X and Y; Z free.
    Equibiaxial(f64),
    /// Stretch along X; Z held, Y free.
    Planar(f64),
    /// x = X + shear Y.
    Shear(f64),
    Triaxial([f64; 3]),
}

/// A uniform state.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Uniform {
    /// F - I.
    pub gradient: Matrix3<f64>,
    pub stretches: [f64; 3],
    pub stress: SymTensor,
    pub energy: f64,
    pub volume_ratio: f64,
    /// Bound on the relative error of stress and displacement.
    pub error: f64,
}

const ROUND_OFF: f64 = 16.0 * f64::EPSILON;

/// ln of a stretch: stretch - 1 is exact near 1.
fn log(stretch: f64) -> f64 {
    (stretch - 1.0).ln_1p()
}

/// From logarithms of the stretches; where a stretch was given its own strain is kept.
fn stretched(logs: [f64; 3], mode: Mode, stress: [f64; 3], energy: f64) -> Uniform {
    let mut strain = logs.map(f64::exp_m1);
    match mode {
        Mode::Uniaxial(l) | Mode::Planar(l) => strain[0] = l - 1.0,
        Mode::Equibiaxial(l) => (strain[0], strain[1]) = (l - 1.0, l - 1.0),
        Mode::Triaxial(l) => strain = l.map(|l| l - 1.0),
        Mode::Shear(_) => {}
    }
    Uniform {
        gradient: Matrix3::from_diagonal(&Vector3::from(strain)),
        stretches: strain.map(|e| 1.0 + e),
        stress: SymTensor::diagonal(stress[0], stress[1], stress[2]),
        energy,
        volume_ratio: 1.0,
        error: ROUND_OFF,
    }
}

fn sheared(amount: f64, stress: SymTensor, energy: f64) -> Uniform {
    let mut gradient = Matrix3::zeros();
    gradient[(0, 1)] = amount;
    let half = (0.5 * amount).asinh();
    Uniform {
        gradient,
        stretches: [half.exp(), (-half).exp(), 1.0],
        stress,
        energy,
        volume_ratio: 1.0,
        error: ROUND_OFF,
    }
}

/// An incompressible material: the free direction, and where there is none Z, carries no stress.
pub(super) fn incompressible(law: &dyn IncompressibleLaw, mode: Mode) -> Result<Uniform, Refusal> {
    if let Mode::Shear(amount) = mode {
        let local = simple_shear(law, amount);
        let stress = SymTensor {
            xy: local.shear,
            ..SymTensor::diagonal(local.along - local.third, -local.third, 0.0)
        };
        let loss = law.hardening(2.0 * local.log, 0.0).loss;
        return Ok(Uniform {
            error: ROUND_OFF * (1.0 + loss),
            ..sheared(amount, stress, local.energy)
        });
    }
    let logs = match mode {
        Mode::Uniaxial(l) => [log(l), -0.5 * log(l), -0.5 * log(l)],
        Mode::Equibiaxial(l) => [log(l), log(l), -2.0 * log(l)],
        Mode::Planar(l) => [log(l), -log(l), 0.0],
        Mode::Triaxial(l) => preserved(l)?,
        Mode::Shear(_) => [0.0; 3],
    };
    // the stretched axis in the place of the axial one where two others are equal: differences of equal numbers are zero then
    let (d, e) = match mode {
        Mode::Uniaxial(_) => (0.0, logs[0]),
        Mode::Equibiaxial(_) => (0.0, logs[2]),
        Mode::Planar(_) => (2.0 * logs[0], 0.0),
        _ => (logs[1] - logs[0], logs[2]),
    };
    let found = law.at(d, e);
    let stress = match mode {
        Mode::Uniaxial(_) => [found.axial, 0.0, 0.0],
        Mode::Equibiaxial(_) => [-found.axial, -found.axial, 0.0],
        Mode::Planar(_) => [found.hoop, 0.0, found.axial],
        _ => [-found.axial, found.hoop - found.axial, 0.0],
    };
    let loss = law.hardening(d, e).loss;
    Ok(Uniform {
        error: ROUND_OFF * (1.0 + loss),
        ..stretched(logs, mode, stress, found.energy)
    })
}

/// The logarithms of stretches whose product is one.
fn preserved(l: [f64; 3]) -> Result<[f64; 3], Refusal> {
    let logs = l.map(log);
    let change = logs[0] + logs[1] + logs[2];
    if change.abs() > 1e-12 {
        let z = (-logs[0] - logs[1]).exp();
        let message = format!(
            "stretches {}, {}, {} have the product {}, but the material preserves its volume",
            l[0],
            l[1],
            l[2],
            rounded(change.exp(), 15)
        );
        return Err(refuse(
            "stretches",
            message,
            format!("nearest admissible value: [{}, {}, {z}]", l[0], l[1]),
        ));
    }
    Ok([logs[0], logs[1], -logs[0] - logs[1]])
}

/// A material with a finite bulk modulus: free directions carry no stress.
pub(super) fn compressible(law: &Compressible, mode: Mode) -> Result<Uniform, Refusal> {
    if let Mode::Shear(amount) = mode {
        let half = (0.5 * amount).asinh();
        let s = law.at(2.0 * half, 0.0, 0.0);
        // the law's radial axis is the shorter principal one
        let shear = s.hoop / (2.0 * 1.0_f64.hypot(0.5 * amount));
        let (middle, lean) = (s.radial + 0.5 * s.hoop, 0.5 * shear * amount);
        let stress = SymTensor {
            xy: shear,
            ..SymTensor::diagonal(middle + lean, middle - lean, s.radial + s.axial)
        };
        return Ok(sheared(amount, stress, s.energy));
    }
    if let Mode::Triaxial(l) = mode {
        let logs = l.map(log);
        let change = logs[0] + logs[1] + logs[2];
        let s = law.at(logs[1] - logs[0], logs[2], law.volume_modulus() * change);
        let stress = [s.radial, s.radial + s.hoop, s.radial + s.axial];
        return Ok(Uniform {
            volume_ratio: change.exp(),
            ..stretched(logs, mode, stress, s.energy)
        });
    }
    let free = Free { law, mode };
    let lam = free.solve()?;
    let (logs, change) = free.logs(free.prescribed(), lam);
    let s = law.at(logs[1] - logs[0], logs[2], lam);
    let stress = match mode {
        Mode::Uniaxial(_) => [s.radial, 0.0, 0.0],
        Mode::Equibiaxial(_) => [s.radial, s.radial, 0.0],
        _ => [s.radial, 0.0, s.radial + s.axial],
    };
    Ok(Uniform {
        volume_ratio: change.exp(),
        ..stretched(logs, mode, stress, s.energy)
    })
}

/// The free direction of a compressible material, by the unknown Lam = modulus ln J.
struct Free<'a> {
    law: &'a Compressible,
    mode: Mode,
}

impl Free<'_> {
    fn prescribed(&self) -> f64 {
        match self.mode {
            Mode::Uniaxial(l) | Mode::Equibiaxial(l) | Mode::Planar(l) => log(l),
            _ => 0.0,
        }
    }

    /// Logarithms of the stretches and of J at a prescribed logarithm.
    fn logs(&self, given: f64, lam: f64) -> ([f64; 3], f64) {
        let change = lam / self.law.volume_modulus();
        let logs = match self.mode {
            Mode::Uniaxial(_) => [given, 0.5 * (change - given), 0.5 * (change - given)],
            Mode::Equibiaxial(_) => [given, given, change - 2.0 * given],
            _ => [given, change - given, 0.0],
        };
        (logs, change)
    }

    /// Stress of the free direction and its slope by Lam.
    fn traction(&self, given: f64, lam: f64) -> (f64, f64) {
        let (logs, _) = self.logs(given, lam);
        let s = self.law.with_slopes(logs[1] - logs[0], logs[2], lam);
        let soft = 1.0 / self.law.volume_modulus();
        let (other, d_by, e_by) = match self.mode {
            Mode::Uniaxial(_) => (s.hoop, 0.5 * soft, 0.5 * soft),
            Mode::Equibiaxial(_) => (s.axial, 0.0, soft),
            _ => (s.hoop, soft, 0.0),
        };
        let along = |s: VolumeSlope| s.by_lam + s.by_d * d_by + s.by_e * e_by;
        (s.radial.value + other.value, along(s.radial) + along(other))
    }

    /// Lam in steps of the prescribed stretch, each by Newton's method.
    fn solve(&self) -> Result<f64, Refusal> {
        let target = self.prescribed();
        let steps = (target.abs() / 0.05).ceil().max(1.0);
        let (mut lam, mut done) = (0.0, 0.0);
        for i in 1..=steps as usize {
            let given = target * (i as f64 / steps);
            lam = self.newton(given, lam).ok_or_else(|| {
                let message = format!(
                    "no state with free sides was found beyond a stretch of {}",
                    rounded(f64::exp(done), 6)
                );
                refuse("stretch", message, "choose a stretch nearer to 1")
            })?;
            done = given;
        }
        Ok(lam)
    }

    fn newton(&self, given: f64, guess: f64) -> Option<f64> {
        let (mut lam, mut last) = (guess, f64::INFINITY);
        for _ in 0..50 {
            let (traction, slope) = self.traction(given, lam);
            let step = traction / slope;
            if !step.is_finite() || slope <= 0.0 {
                return None;
            }
            // the steps shrink quadratically, then stop shrinking in round-off
            let small = step.abs() <= 1e-9 * (lam.abs() + self.law.shear_modulus());
            if step == 0.0 || (small && step.abs() >= 0.25 * last) {
                return Some(lam);
            }
            (lam, last) = (lam - step, step.abs());
        }
        None
    }
}

/// Hooke's law with strain = stretch - 1 and shear strain = shear/2.
pub(super) fn linear(law: &LinearElastic, mode: Mode) -> Result<Uniform, Refusal> {
    let (e, nu) = (law.e, law.nu);
    let (strain, stress) = match mode {
        Mode::Shear(amount) => {
            let shear = law.shear_modulus() * amount;
            let stress = SymTensor {
                xy: shear,
                ..SymTensor::default()
            };
            return Ok(Uniform {
                stretches: [1.0; 3],
                ..sheared(amount, stress, 0.5 * shear * amount)
            });
        }
        Mode::Uniaxial(l) => {
            let x = l - 1.0;
            ([x, -nu * x, -nu * x], [e * x, 0.0, 0.0])
        }
        Mode::Equibiaxial(l) => {
            let (x, s) = (l - 1.0, e * (l - 1.0) / (1.0 - nu));
            ([x, x, -2.0 * nu / (1.0 - nu) * x], [s, s, 0.0])
        }
        Mode::Planar(l) => {
            let (x, s) = (l - 1.0, e * (l - 1.0) / ((1.0 - nu) * (1.0 + nu)));
            ([x, -nu / (1.0 - nu) * x, 0.0], [s, 0.0, nu * s])
        }
        Mode::Triaxial(l) => hooke(law, l.map(|l| l - 1.0))?,
    };
    let trace = if law.compressibility() == 0.0 {
        0.0
    } else {
        strain.iter().sum()
    };
    Ok(Uniform {
        gradient: Matrix3::from_diagonal(&Vector3::from(strain)),
        stretches: strain.map(|x| 1.0 + x),
        stress: SymTensor::diagonal(stress[0], stress[1], stress[2]),
        energy: (0..3).map(|i| 0.5 * strain[i] * stress[i]).sum(),
        volume_ratio: 1.0 + trace,
        error: ROUND_OFF,
    })
}

/// Stresses of three strains; at nu = 0.5 the pressure is free, and szz = 0 fixes it.
fn hooke(law: &LinearElastic, strain: [f64; 3]) -> Result<([f64; 3], [f64; 3]), Refusal> {
    let two_mu = 2.0 * law.shear_modulus();
    let trace: f64 = strain.iter().sum();
    if law.compressibility() > 0.0 {
        let spread = law.nu / law.compressibility() * trace;
        return Ok((strain, strain.map(|x| two_mu * (x + spread))));
    }
    let largest = strain.iter().fold(0.0_f64, |m, x| m.max(x.abs()));
    if trace.abs() > 1e-12 * largest {
        let message =
            format!("stretches change the volume by {trace:e}, but nu = 0.5 preserves it");
        let hint = format!(
            "nearest admissible value: [{}, {}, {}]",
            1.0 + strain[0],
            1.0 + strain[1],
            1.0 - strain[0] - strain[1]
        );
        return Err(refuse("stretches", message, hint));
    }
    Ok((strain, strain.map(|x| two_mu * (x - strain[2]))))
}
