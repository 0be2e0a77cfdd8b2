//! Symmetric second-order tensors (stress) in a Cartesian or a cylindrical frame.

use nalgebra::Matrix3;

/// A symmetric tensor. In a cylindrical frame read `xx yy zz xy yz zx` as `rr tt zz rt tz zr`.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct SymTensor {
    pub xx: f64,
    pub yy: f64,
    pub zz: f64,
    pub xy: f64,
    pub yz: f64,
    pub zx: f64,
}

impl SymTensor {
    pub const fn diagonal(xx: f64, yy: f64, zz: f64) -> Self {
        Self {
            xx,
            yy,
            zz,
            xy: 0.0,
            yz: 0.0,
            zx: 0.0,
        }
    }

    /// Components in the order `xx yy zz xy yz zx`.
    pub const fn to_array(self) -> [f64; 6] {
        [self.xx, self.yy, self.zz, self.xy, self.yz, self.zx]
    }

    pub const fn from_array(c: [f64; 6]) -> Self {
        Self {
            xx: c[0],
            yy: c[1],
            zz: c[2],
            xy: c[3],
            yz: c[4],
            zx: c[5],
        }
    }

    /// Sum of the normal components.
    pub fn trace(&self) -> f64 {
        self.xx + self.yy + self.zz
    }

    /// The components of a tensor given in the cylindrical frame whose radial axis points along
    /// `(cos, sin)`, in the Cartesian frame.
    pub fn cylindrical_to_cartesian(&self, (c, s): (f64, f64)) -> Self {
        Self {
            xx: self.xx * c * c + self.yy * s * s - 2.0 * self.xy * s * c,
            yy: self.xx * s * s + self.yy * c * c + 2.0 * self.xy * s * c,
            zz: self.zz,
            xy: (self.xx - self.yy) * s * c + self.xy * (c * c - s * s),
            yz: self.zx * s + self.yz * c,
            zx: self.zx * c - self.yz * s,
        }
    }

    /// The inverse of [`Self::cylindrical_to_cartesian`].
    pub fn cartesian_to_cylindrical(&self, (c, s): (f64, f64)) -> Self {
        self.cylindrical_to_cartesian((c, -s))
    }

    pub fn to_matrix(self) -> Matrix3<f64> {
        Matrix3::new(
            self.xx, self.xy, self.zx, self.xy, self.yy, self.yz, self.zx, self.yz, self.zz,
        )
    }

    /// The symmetric part of a matrix.
    pub fn symmetric_part(m: &Matrix3<f64>) -> Self {
        Self {
            xx: m[(0, 0)],
            yy: m[(1, 1)],
            zz: m[(2, 2)],
            xy: 0.5 * (m[(0, 1)] + m[(1, 0)]),
            yz: 0.5 * (m[(1, 2)] + m[(2, 1)]),
            zx: 0.5 * (m[(2, 0)] + m[(0, 2)]),
        }
    }

    pub fn is_finite(&self) -> bool {
        self.to_array().iter().all(|c| c.is_finite())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn rotation_agrees_with_the_matrix_product_and_undoes_itself() {
        let t = SymTensor::from_array([1.0, -2.0, 0.5, 0.7, -0.3, 0.9]);
        let angle: f64 = 0.83;
        let (c, s) = (angle.cos(), angle.sin());
        // columns: radial, hoop and axial unit vectors
        let q = Matrix3::new(c, -s, 0.0, s, c, 0.0, 0.0, 0.0, 1.0);
        let expected = q * t.to_matrix() * q.transpose();
        let got = t.cylindrical_to_cartesian((c, s));
        assert!((got.to_matrix() - expected).abs().max() < 1e-15);
        let back = got.cartesian_to_cylindrical((c, s));
        assert!((back.to_matrix() - t.to_matrix()).abs().max() < 1e-15);
    }
}
