//! Shape functions and their gradients.
//!
//! Each formula is written once, for numbers and for jets (a value with its three derivatives), so that a
//! gradient cannot disagree with its function.
//! Source: Zienkiewicz, Taylor and Zhu, The Finite Element Method (6th ed., 2005), sections 4.3 to 4.12
//! (Lagrange and serendipity families, triangles, tetrahedra, prisms; from memory, checked by the tests).

use super::shape::{Domain, Shape};
use std::ops::{Add, Mul, Sub};

trait Scalar: Copy + Add<Output = Self> + Sub<Output = Self> + Mul<Output = Self> {
    fn constant(value: f64) -> Self;
}

impl Scalar for f64 {
    fn constant(value: f64) -> Self {
        value
    }
}

/// A value with its derivatives along the three reference directions.
#[derive(Clone, Copy)]
struct Jet {
    value: f64,
    slope: [f64; 3],
}

impl Jet {
    fn variable(value: f64, axis: usize) -> Self {
        let mut slope = [0.0; 3];
        slope[axis] = 1.0;
        Self { value, slope }
    }

    fn combine(self, a: f64, other: Self, b: f64, value: f64) -> Self {
        Self {
            value,
            slope: std::array::from_fn(|i| a * self.slope[i] + b * other.slope[i]),
        }
    }
}

impl Add for Jet {
    type Output = Self;
    fn add(self, other: Self) -> Self {
        self.combine(1.0, other, 1.0, self.value + other.value)
    }
}

impl Sub for Jet {
    type Output = Self;
    fn sub(self, other: Self) -> Self {
        self.combine(1.0, other, -1.0, self.value - other.value)
    }
}

impl Mul for Jet {
    type Output = Self;
    fn mul(self, other: Self) -> Self {
        self.combine(other.value, other, self.value, self.value * other.value)
    }
}

impl Scalar for Jet {
    fn constant(value: f64) -> Self {
        Self {
            value,
            slope: [0.0; 3],
        }
    }
}

impl Shape {
    /// Shape functions at `xi`, one a node; `out` holds at least `node_count` numbers.
    pub fn values(self, xi: [f64; 3], out: &mut [f64]) {
        evaluate(self, xi, &mut |node, value: f64| out[node] = value);
    }

    /// `out[i][j]` = dN_i / dxi_j; the third derivative is 0 in two dimensions.
    pub fn gradients(self, xi: [f64; 3], out: &mut [[f64; 3]]) {
        let jets = std::array::from_fn(|axis| Jet::variable(xi[axis], axis));
        evaluate(self, jets, &mut |node, jet: Jet| out[node] = jet.slope);
    }
}

fn evaluate<T: Scalar>(shape: Shape, xi: [T; 3], put: &mut impl FnMut(usize, T)) {
    match shape.domain() {
        Domain::Triangle | Domain::Tetrahedron => simplex(shape, xi, put),
        Domain::Wedge => wedge(shape, xi, put),
        Domain::Square | Domain::Cube => match shape {
            Shape::Quad8 | Shape::Hex20 => serendipity(shape, xi, put),
            _ => lagrange(shape, xi, put),
        },
    }
}

fn c<T: Scalar>(value: f64) -> T {
    T::constant(value)
}

/// Barycentric coordinates; the last is unused for a triangle.
fn barycentric<T: Scalar>(dimension: usize, xi: [T; 3]) -> [T; 4] {
    let [a, b, d] = xi;
    if dimension == 2 {
        [c::<T>(1.0) - a - b, a, b, c(0.0)]
    } else {
        [c::<T>(1.0) - a - b - d, a, b, d]
    }
}

/// Triangles and tetrahedra: N = L, or N = L (2 L - 1) and 4 L_i L_j.
fn simplex<T: Scalar>(shape: Shape, xi: [T; 3], put: &mut impl FnMut(usize, T)) {
    let l = barycentric(shape.dimension(), xi);
    for (i, &li) in l.iter().enumerate().take(shape.corner_count()) {
        if shape.degree() == 1 {
            put(i, li);
        } else {
            put(i, li * (c::<T>(2.0) * li - c(1.0)));
        }
    }
    for &(node, corners) in shape.mid_nodes() {
        put(node, c::<T>(4.0) * l[corners[0]] * l[corners[1]]);
    }
}

/// Linear and full quadratic tensor products.
fn lagrange<T: Scalar>(shape: Shape, xi: [T; 3], put: &mut impl FnMut(usize, T)) {
    let quadratic = shape.degree() == 2;
    for (node, at) in shape.reference_nodes().iter().enumerate() {
        let mut product = c(1.0);
        for axis in 0..shape.dimension() {
            product = product * line(quadratic, at[axis], xi[axis]);
        }
        put(node, product);
    }
}

/// The function of the node at `at` (-1, 0 or 1) on the interval.
fn line<T: Scalar>(quadratic: bool, at: f64, t: T) -> T {
    let one = c::<T>(1.0);
    if !quadratic {
        c::<T>(0.5) * (one + c::<T>(at) * t)
    } else if at == 0.0 {
        one - t * t
    } else {
        c::<T>(0.5) * t * (t + c(at))
    }
}

/// Quad8 and hex20. Corner: 2^-d prod(1 + t_k) (sum t_k - d + 1) with t_k = xi_k * node_k; edge: (1 - xi^2)
/// along it times the linear functions across.
fn serendipity<T: Scalar>(shape: Shape, xi: [T; 3], put: &mut impl FnMut(usize, T)) {
    let dimension = shape.dimension();
    for (node, at) in shape.reference_nodes().iter().enumerate() {
        let mut product = c::<T>(1.0);
        let mut sum = c::<T>(1.0 - dimension as f64);
        for axis in 0..dimension {
            if at[axis] == 0.0 {
                product = product * (c::<T>(1.0) - xi[axis] * xi[axis]);
            } else {
                product = product * line(false, at[axis], xi[axis]);
                sum = sum + c::<T>(at[axis]) * xi[axis];
            }
        }
        if node < shape.corner_count() {
            product = product * sum;
        }
        put(node, product);
    }
}

/// Wedge6: L times linear. Wedge15 (serendipity): corner 1/2 L ((2 L - 1)(1 + t) - (1 - zeta^2)), triangle
/// edge 2 L_i L_j (1 + t), upright edge L (1 - zeta^2), with t = zeta * zeta_node.
fn wedge<T: Scalar>(shape: Shape, xi: [T; 3], put: &mut impl FnMut(usize, T)) {
    let l = barycentric(2, xi);
    let (one, zeta) = (c::<T>(1.0), xi[2]);
    let bubble = one - zeta * zeta;
    let side = |node: usize| one + c::<T>(shape.reference_nodes()[node][2]) * zeta;
    for corner in 0..shape.corner_count() {
        let li = l[corner % 3];
        let half = c::<T>(0.5) * li;
        if shape.degree() == 1 {
            put(corner, half * side(corner));
        } else {
            put(
                corner,
                half * ((c::<T>(2.0) * li - one) * side(corner) - bubble),
            );
        }
    }
    for &(node, corners) in shape.mid_nodes() {
        let (i, j) = (corners[0] % 3, corners[1] % 3);
        if i == j {
            put(node, l[i] * bubble);
        } else {
            put(node, c::<T>(2.0) * l[i] * l[j] * side(node));
        }
    }
}
