//! Difference forms of the first two invariants, for laws of I1 and I2.
//!
//! With `x = expm1(d)` and `z = expm1(e)` (numerics.md 1, derived there):
//! ```text
//! q2 = (lt - lr)^2 = x^2/((1+x) lz)        z3 = lz^3 - 1 = z (z^2 + 3 z + 3)
//! I1 - 3 = q2 + z^2 (lz + 2)/lz            I2 - 3 = lz^2 q2 + z^2 (2 lz + 1)/lz^2     sums of positives
//! Tt - Tr = 2 (W1 + lz^2 W2) (lt^2 - lr^2)         lt^2 - lr^2 = (x + x/(1+x))/lz
//! Tz - Tr = 2 (W1 + lt^2 W2) (lz^2 - lr^2)         lz^2 - lr^2 = lr^2 expm1(3e + d),  lt^2 = (1+x)/lz
//! 2Tz - Tt - Tr = 2 W1 (2 z3/lz - q2) + 2 W2 (2 z3/lz^2 + lz^2 q2)
//! ```

use super::incompressible::{Differences, Hardening, Number};

/// Invariants at one state, none by subtracting nearly equal numbers.
#[derive(Debug, Clone, Copy)]
pub(super) struct Invariants<D> {
    /// I1 - 3.
    pub i1: D,
    /// I2 - 3.
    pub i2: D,
    lz: D,
    lz2: D,
    q2: D,
    hoop: D,
    axial: D,
    lt2: D,
    z3: D,
}

impl<D: Number> Invariants<D> {
    /// At `d = ln(lt/lr)`, `e = ln lz`.
    pub fn at(d: D, e: D) -> Self {
        let (x, z) = (d.exp_m1(), e.exp_m1());
        let lz = z + 1.0;
        let lz2 = lz * lz;
        let down = x / (x + 1.0);
        let q2 = x * down / lz;
        let z2 = z * z;
        let z3 = z * (z2 + z * 3.0 + 3.0);
        Self {
            i1: q2 + z2 * (lz + 2.0) / lz,
            i2: lz2 * q2 + z2 * (lz * 2.0 + 1.0) / lz2,
            lz,
            lz2,
            q2,
            hoop: (x + down) / lz,
            axial: (e * 3.0 + d).exp_m1() / ((x + 1.0) * lz),
            lt2: (x + 1.0) / lz,
            z3,
        }
    }

    /// Tt - Tr for dW/dI1 and dW/dI2.
    pub fn hoop(&self, w1: D, w2: D) -> D {
        (w1 + self.lz2 * w2) * self.hoop * 2.0
    }

    /// Tz - Tr for dW/dI1 and dW/dI2.
    pub fn axial(&self, w1: D, w2: D) -> D {
        (w1 + self.lt2 * w2) * self.axial * 2.0
    }

    /// 2Tz - Tt - Tr for dW/dI1 and dW/dI2.
    pub fn reduced(&self, w1: D, w2: D) -> D {
        let first = self.z3 * 2.0 / self.lz - self.q2;
        let second = self.z3 * 2.0 / self.lz2 + self.lz2 * self.q2;
        (w1 * first + w2 * second) * 2.0
    }

    /// All three and W.
    pub fn of_both(&self, w1: D, w2: D, energy: D) -> Differences<D> {
        Differences {
            hoop: self.hoop(w1, w2),
            axial: self.axial(w1, w2),
            reduced: self.reduced(w1, w2),
            energy,
        }
    }

    /// All three and W for a law of I1 alone.
    pub fn of_first(&self, w1: D, energy: D) -> Differences<D> {
        self.of_both(w1, D::from(0.0), energy)
    }
}

impl Invariants<f64> {
    /// How fast a law of I1 alone stiffens, from `by_i1` = d ln(dW/dI1)/dI1.
    pub fn hardening(&self, d: f64, by_i1: f64) -> Hardening {
        Hardening {
            by_d: (by_i1 * 2.0 * d.sinh() / self.lz).abs(),
            loss: (by_i1 * self.i1).abs(),
        }
    }
}
