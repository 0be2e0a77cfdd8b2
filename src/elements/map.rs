//! From the reference element to the element and back.
//!
//! Coordinates of a two-dimensional element lie in its plane: `[X, Y, _]`, or `[R, Z, _]` in an axisymmetric
//! model; the third is ignored. Its Jacobian has a 1 in the last place, so that determinant and inverse are
//! those of the 2x2 part.

use super::{MAX_NODES, Shape};

/// `m[i][j]` = dX_i / dxi_j.
pub type Jacobian = [[f64; 3]; 3];

/// The point whose shape functions are `values`: sum of N_i X_i. Also interpolates any nodal vector.
pub fn position(values: &[f64], coords: &[[f64; 3]]) -> [f64; 3] {
    let mut sum = [0.0; 3];
    for (n, x) in values.iter().zip(coords) {
        for axis in 0..3 {
            sum[axis] += n * x[axis];
        }
    }
    sum
}

/// dX/dxi from the gradients of the shape functions; `dimension` is that of the shape.
pub fn jacobian(dimension: usize, gradients: &[[f64; 3]], coords: &[[f64; 3]]) -> Jacobian {
    let mut m = [[0.0; 3]; 3];
    for (g, x) in gradients.iter().zip(coords) {
        for i in 0..dimension {
            for j in 0..dimension {
                m[i][j] += x[i] * g[j];
            }
        }
    }
    if dimension == 2 {
        m[2][2] = 1.0;
    }
    m
}

/// The determinant: reference area or volume per unit of the reference element.
pub fn determinant(m: &Jacobian) -> f64 {
    m[0][0] * (m[1][1] * m[2][2] - m[1][2] * m[2][1])
        - m[0][1] * (m[1][0] * m[2][2] - m[1][2] * m[2][0])
        + m[0][2] * (m[1][0] * m[2][1] - m[1][1] * m[2][0])
}

/// The inverse `dxi_i / dX_j`, or `None` where the determinant is zero or not finite.
pub fn inverse(m: &Jacobian) -> Option<Jacobian> {
    let det = determinant(m);
    if det == 0.0 || !det.is_finite() {
        return None;
    }
    let minor = |i: usize, j: usize| {
        let (a, b, c, d) = ((i + 1) % 3, (i + 2) % 3, (j + 1) % 3, (j + 2) % 3);
        m[a][c] * m[b][d] - m[a][d] * m[b][c]
    };
    // cyclic minors carry their sign; the inverse is the transpose of the cofactors over the determinant
    let inverse: Jacobian = std::array::from_fn(|i| std::array::from_fn(|j| minor(j, i) / det));
    let finite = inverse.iter().flatten().all(|v| v.is_finite());
    finite.then_some(inverse)
}

/// Gradients with respect to the coordinates: `out[i][j]` = dN_i / dX_j. Returns the determinant of dX/dxi,
/// or `None` where it is zero or not finite. In two dimensions the third derivative is 0.
pub fn physical_gradients(
    dimension: usize,
    gradients: &[[f64; 3]],
    coords: &[[f64; 3]],
    out: &mut [[f64; 3]],
) -> Option<f64> {
    let m = jacobian(dimension, gradients, coords);
    let back = inverse(&m)?;
    for (g, target) in gradients.iter().zip(out) {
        *target =
            std::array::from_fn(|j| g[0] * back[0][j] + g[1] * back[1][j] + g[2] * back[2][j]);
    }
    Some(determinant(&m))
}

/// Newton steps before giving up.
const MAX_STEPS: usize = 50;
/// Halvings of one step before giving up.
const MAX_HALVINGS: usize = 20;

/// The reference coordinates of `point`, by Newton's method with halved steps from the centre, or `None` when
/// it did not converge (residual above 1e-12 of the element's extent). The answer may lie outside the
/// reference element: ask [`Shape::contains`].
pub fn inverse_map(shape: Shape, coords: &[[f64; 3]], point: [f64; 3]) -> Option<[f64; 3]> {
    let dimension = shape.dimension();
    let nodes = shape.node_count();
    if coords.len() < nodes {
        return None;
    }
    let extent = extent(dimension, &coords[..nodes]);
    let mut values = [0.0; MAX_NODES];
    let mut gradients = [[0.0; 3]; MAX_NODES];
    let mut residual = |xi: [f64; 3]| -> ([f64; 3], f64) {
        shape.values(xi, &mut values);
        let at = position(&values[..nodes], coords);
        let mut gap = [0.0; 3];
        for axis in 0..dimension {
            gap[axis] = point[axis] - at[axis];
        }
        (gap, norm(gap))
    };
    let mut xi = shape.centre();
    let (mut gap, mut size) = residual(xi);
    for _ in 0..MAX_STEPS {
        if size <= 4.0 * f64::EPSILON * extent {
            break;
        }
        shape.gradients(xi, &mut gradients);
        let back = inverse(&jacobian(dimension, &gradients[..nodes], coords))?;
        let mut step: [f64; 3] = std::array::from_fn(|i| {
            back[i][0] * gap[0] + back[i][1] * gap[1] + back[i][2] * gap[2]
        });
        let mut better = false;
        for _ in 0..MAX_HALVINGS {
            let trial = [xi[0] + step[0], xi[1] + step[1], xi[2] + step[2]];
            let (trial_gap, trial_size) = residual(trial);
            if trial_size < size {
                (xi, gap, size, better) = (trial, trial_gap, trial_size, true);
                break;
            }
            step = step.map(|s| 0.5 * s);
        }
        if !better {
            break;
        }
    }
    (size <= 1e-12 * extent).then_some(xi)
}

/// The diagonal of the smallest box around the coordinates.
fn extent(dimension: usize, coords: &[[f64; 3]]) -> f64 {
    let mut sides = [0.0; 3];
    for (axis, side) in sides.iter_mut().enumerate().take(dimension) {
        let low = coords.iter().fold(f64::INFINITY, |m, x| m.min(x[axis]));
        let high = coords.iter().fold(f64::NEG_INFINITY, |m, x| m.max(x[axis]));
        *side = high - low;
    }
    norm(sides)
}

fn norm(v: [f64; 3]) -> f64 {
    (v[0] * v[0] + v[1] * v[1] + v[2] * v[2]).sqrt()
}
