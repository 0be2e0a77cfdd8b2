//! The stretches at which a material locks that locks at a value of I1 - 3.

use super::invariants::Invariants;
use crate::numerics::find_root;

/// Largest stretch in three homogeneous states.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LockStretches {
    /// Tension along one direction, the two others free.
    pub uniaxial: f64,
    /// Equal tension along two directions, the third free.
    pub equibiaxial: f64,
    /// Tension along one direction, the second held, the third free.
    pub planar: f64,
}

impl LockStretches {
    /// At `limit` = the largest I1 - 3, positive and finite.
    pub fn at(limit: f64) -> Self {
        // l^2 and 2 l^2 are below I1 = 3 + limit, so these are beyond the lock
        let beyond = [0.5 * (3.0 + limit).ln(), -(0.5 * (3.0 + limit)).ln()];
        // both are uniaxial states of the third axis: in tension, and (equibiaxial) in compression
        let [uniaxial, equibiaxial] = beyond.map(|end| {
            let off = |e: f64| Invariants::at(0.0, e).i1 / limit - 1.0;
            find_root(0.0, end, off).unwrap_or(f64::NAN)
        });
        Self {
            uniaxial: uniaxial.exp(),
            equibiaxial: (-0.5 * equibiaxial).exp(),
            planar: 0.5 * (limit.sqrt() + (limit + 4.0).sqrt()),
        }
    }
}

impl std::fmt::Display for LockStretches {
    fn fmt(&self, f: &mut std::fmt::Formatter) -> std::fmt::Result {
        write!(
            f,
            "locking at a stretch of {:.6} (uniaxial), {:.6} (equibiaxial), {:.6} (planar)",
            self.uniaxial, self.equibiaxial, self.planar
        )
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    // Values recomputed from the closed forms (references/materials.md). Red when two states change places.
    #[test]
    fn lock_stretches_are_the_known_ones() {
        for (limit, digits, expected) in [
            (97.2, 5e-10, [10.0, 7.078121276, 9.959413554]),
            (2.3, 5e-7, [2.083258, 1.604546, 2.013278]),
        ] {
            let lock = LockStretches::at(limit);
            let got = [lock.uniaxial, lock.equibiaxial, lock.planar];
            for (got, expected) in got.into_iter().zip(expected) {
                assert!((got - expected).abs() < digits, "{got} {expected}");
            }
        }
        // a stiff material: I1 - 3 = 3 e^2 in uniaxial tension
        let lock = LockStretches::at(3e-12);
        assert!((lock.uniaxial - 1.0 - 1e-6).abs() < 1e-11, "{lock:?}");
    }
}
