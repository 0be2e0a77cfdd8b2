//! Quadrature rules with positive weights: tensor products of Gauss-Legendre rules on squares and cubes, the
//! same collapsed onto triangles and tetrahedra (conical product), and the few rules a suite may name.
//!
//! Conical product: (u, v, w) in the unit cube -> (u, v (1 - u), w (1 - u)(1 - v)), Jacobian (1 - u)^2 (1 - v),
//! whose factors cost one or one-half more points. Source: Stroud, Approximate Calculation of Multiple
//! Integrals (1971), section 2.4 (from memory). Named triangle and tetrahedron rules: Strang and Fix (1973),
//! table 4.1; Keast (1986) (from memory). All are checked against exact monomial integrals.

use super::shape::{Domain, Shape};

/// Points and weights on a reference element.
#[derive(Debug, Clone, PartialEq)]
pub struct Rule {
    /// Reference coordinates; the third is 0 in two dimensions.
    pub points: Vec<[f64; 3]>,
    /// Weights; they sum to the reference measure.
    pub weights: Vec<f64>,
    /// Exact for every polynomial of this total degree (of this degree per direction on squares and cubes).
    pub degree: usize,
}

/// A rule by name: name, what it is, and the order of its points.
pub const STANDARD_RULES: &[(&str, &str)] = &[
    ("gauss-1", "quads and hexes: the centre"),
    (
        "gauss-2",
        "quads and hexes: 2 per direction, first reference direction fastest",
    ),
    (
        "gauss-3",
        "quads and hexes: 3 per direction, first reference direction fastest",
    ),
    (
        "gauss-4",
        "quads and hexes: 4 per direction, first reference direction fastest",
    ),
    ("triangle-1", "triangles: the centroid"),
    (
        "triangle-3",
        "triangles: interior points (1/6, 1/6), (2/3, 1/6), (1/6, 2/3)",
    ),
    (
        "triangle-3-middles",
        "triangles: side middles (1/2, 0), (1/2, 1/2), (0, 1/2)",
    ),
    ("tetrahedron-1", "tetrahedra: the centroid"),
    (
        "tetrahedron-4",
        "tetrahedra: (a, a, a), (b, a, a), (a, b, a), (a, a, b) with a = (5 - sqrt 5) / 20, b = 1 - 3 a",
    ),
    (
        "wedge-6",
        "wedges: triangle-3 in the lower, then in the upper Gauss plane",
    ),
];

impl Rule {
    /// A rule exact for polynomials of `degree` on the shape's reference element; all weights positive.
    pub fn of_degree(shape: Shape, degree: usize) -> Rule {
        // n points are exact to degree 2 n - 1; `more` is the degree of the Jacobian in that direction
        let line = |more: usize| gauss_legendre((degree + more) / 2 + 1);
        match shape.domain() {
            Domain::Square => square(&line(0), degree),
            Domain::Cube => cube(&line(0), degree),
            Domain::Triangle => conical(&unit(&line(1)), &unit(&line(0)), degree),
            Domain::Tetrahedron => {
                tetrahedron(&unit(&line(2)), &unit(&line(1)), &unit(&line(0)), degree)
            }
            Domain::Wedge => extrude(
                &conical(&unit(&line(1)), &unit(&line(0)), degree),
                &line(0),
                degree,
            ),
        }
    }

    /// Number of points.
    pub fn len(&self) -> usize {
        self.points.len()
    }

    /// True if there are no points.
    pub fn is_empty(&self) -> bool {
        self.points.is_empty()
    }
}

/// The rule of that name on the shape, or `None` where there is none. See [`STANDARD_RULES`].
pub fn standard_rule(name: &str, shape: Shape) -> Option<Rule> {
    let (family, count) = name.split_once('-')?;
    match (family, count, shape.domain()) {
        ("gauss", n, domain) => {
            let n = ["1", "2", "3", "4"].iter().position(|&known| known == n)? + 1;
            match domain {
                Domain::Square => Some(square(&gauss_legendre(n), 2 * n - 1)),
                Domain::Cube => Some(cube(&gauss_legendre(n), 2 * n - 1)),
                _ => None,
            }
        }
        ("triangle", "1", Domain::Triangle) => Some(equal(shape, &[shape.centre()], 1)),
        ("triangle", "3", Domain::Triangle) => Some(triangle_3()),
        ("triangle", "3-middles", Domain::Triangle) => {
            let middles = [[0.5, 0.0, 0.0], [0.5, 0.5, 0.0], [0.0, 0.5, 0.0]];
            Some(equal(shape, &middles, 2))
        }
        ("tetrahedron", "1", Domain::Tetrahedron) => Some(equal(shape, &[shape.centre()], 1)),
        ("tetrahedron", "4", Domain::Tetrahedron) => {
            let a = (5.0 - 5.0_f64.sqrt()) / 20.0;
            let b = 1.0 - 3.0 * a;
            Some(equal(
                shape,
                &[[a, a, a], [b, a, a], [a, b, a], [a, a, b]],
                2,
            ))
        }
        ("wedge", "6", Domain::Wedge) => Some(extrude(&triangle_3(), &gauss_legendre(2), 2)),
        _ => None,
    }
}

fn triangle_3() -> Rule {
    let (a, b) = (1.0 / 6.0, 2.0 / 3.0);
    equal(Shape::Tri3, &[[a, a, 0.0], [b, a, 0.0], [a, b, 0.0]], 2)
}

fn equal(shape: Shape, points: &[[f64; 3]], degree: usize) -> Rule {
    let weight = shape.reference_measure() / points.len() as f64;
    Rule {
        points: points.to_vec(),
        weights: vec![weight; points.len()],
        degree,
    }
}

type Line = Vec<(f64, f64)>;

/// Gauss-Legendre points, ascending, and weights on [-1, 1]: Newton on the three-term recurrence, from the
/// classical starting values cos(pi (i + 3/4) / (n + 1/2)).
fn gauss_legendre(n: usize) -> Line {
    let mut points = vec![(0.0, 0.0); n];
    for i in 0..n.div_ceil(2) {
        let mut x = (std::f64::consts::PI * (i as f64 + 0.75) / (n as f64 + 0.5)).cos();
        if 2 * i + 1 == n {
            x = 0.0;
        }
        for _ in 0..8 {
            let (value, slope) = legendre(n, x);
            x -= value / slope;
        }
        let (_, slope) = legendre(n, x);
        let weight = 2.0 / ((1.0 - x * x) * slope * slope);
        points[i] = (-x, weight);
        points[n - 1 - i] = (x, weight);
    }
    points
}

/// The Legendre polynomial of degree `n` and its derivative.
fn legendre(n: usize, x: f64) -> (f64, f64) {
    let (mut before, mut now) = (1.0, x);
    for k in 2..=n {
        let k = k as f64;
        (before, now) = (now, ((2.0 * k - 1.0) * x * now - (k - 1.0) * before) / k);
    }
    (now, n as f64 * (before - x * now) / (1.0 - x * x))
}

/// The same rule on [0, 1].
fn unit(line: &Line) -> Line {
    let half = |&(x, w): &(f64, f64)| (0.5 * (x + 1.0), 0.5 * w);
    line.iter().map(half).collect()
}

fn square(line: &Line, degree: usize) -> Rule {
    let mut rule = empty(degree);
    for &(y, wy) in line {
        for &(x, wx) in line {
            rule.points.push([x, y, 0.0]);
            rule.weights.push(wx * wy);
        }
    }
    rule
}

fn cube(line: &Line, degree: usize) -> Rule {
    extrude(&square(line, degree), line, degree)
}

/// A flat rule repeated in each plane of `line`, the flat points fastest.
fn extrude(flat: &Rule, line: &Line, degree: usize) -> Rule {
    let mut rule = empty(degree);
    for &(z, wz) in line {
        for (point, weight) in flat.points.iter().zip(&flat.weights) {
            rule.points.push([point[0], point[1], z]);
            rule.weights.push(weight * wz);
        }
    }
    rule
}

fn conical(u: &Line, v: &Line, degree: usize) -> Rule {
    let mut rule = empty(degree);
    for &(u, wu) in u {
        for &(v, wv) in v {
            rule.points.push([u, v * (1.0 - u), 0.0]);
            rule.weights.push(wu * wv * (1.0 - u));
        }
    }
    rule
}

fn tetrahedron(u: &Line, v: &Line, w: &Line, degree: usize) -> Rule {
    let mut rule = empty(degree);
    for &(u, wu) in u {
        for &(v, wv) in v {
            for &(w, ww) in w {
                let (a, b) = (1.0 - u, 1.0 - v);
                rule.points.push([u, v * a, w * a * b]);
                rule.weights.push(wu * wv * ww * a * a * b);
            }
        }
    }
    rule
}

fn empty(degree: usize) -> Rule {
    Rule {
        points: Vec::new(),
        weights: Vec::new(),
        degree,
    }
}
