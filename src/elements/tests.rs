//! One set of laws for all shapes.

use super::*;
use proptest::prelude::*;

/// Deterministic points strictly inside the reference element.
fn inside(shape: Shape) -> Vec<[f64; 3]> {
    Rule::of_degree(shape, 4).points
}

/// Exponents of all monomials of total degree up to `degree`.
fn monomials(dimension: usize, degree: i32) -> Vec<[i32; 3]> {
    let mut list = Vec::new();
    for a in 0..=degree {
        for b in 0..=degree - a {
            for c in 0..=(if dimension == 3 { degree - a - b } else { 0 }) {
                list.push([a, b, c]);
            }
        }
    }
    list
}

fn monomial(e: [i32; 3], x: [f64; 3]) -> f64 {
    x[0].powi(e[0]) * x[1].powi(e[1]) * x[2].powi(e[2])
}

fn factorial(n: i32) -> f64 {
    (1..=n).map(f64::from).product()
}

/// Integral of t^e over [-1, 1].
fn interval(e: i32) -> f64 {
    if e % 2 == 1 {
        0.0
    } else {
        2.0 / f64::from(e + 1)
    }
}

/// The exact integral of a monomial over the reference element (simplices: Dirichlet's formula).
fn exact_integral(shape: Shape, e: [i32; 3]) -> f64 {
    let [a, b, c] = e;
    let triangle = factorial(a) * factorial(b) / factorial(a + b + 2);
    match shape {
        Shape::Tri3 | Shape::Tri6 => triangle,
        Shape::Quad4 | Shape::Quad8 | Shape::Quad9 => interval(a) * interval(b),
        Shape::Tet4 | Shape::Tet10 => {
            factorial(a) * factorial(b) * factorial(c) / factorial(a + b + c + 3)
        }
        Shape::Hex8 | Shape::Hex20 | Shape::Hex27 => interval(a) * interval(b) * interval(c),
        Shape::Wedge6 | Shape::Wedge15 => triangle * interval(c),
    }
}

fn integral_error(shape: Shape, rule: &Rule, e: [i32; 3]) -> f64 {
    let sum: f64 = rule
        .points
        .iter()
        .zip(&rule.weights)
        .map(|(&x, w)| w * monomial(e, x))
        .sum();
    (sum - exact_integral(shape, e)).abs()
}

#[test]
fn names_and_counts_agree() {
    for shape in Shape::ALL {
        assert_eq!(Shape::from_name(shape.name()), Some(shape));
        let digits: String = shape.name().chars().filter(char::is_ascii_digit).collect();
        assert_eq!(digits.parse::<usize>().unwrap(), shape.node_count());
        assert_eq!(
            shape.node_count(),
            shape.corner_count() + shape.mid_nodes().len()
        );
        assert!(shape.node_count() <= MAX_NODES);
    }
    assert_eq!(Shape::from_name("Quad9"), None);
}

#[test]
fn a_function_is_one_at_its_node_and_zero_at_the_others() {
    for shape in Shape::ALL {
        let mut values = vec![0.0; shape.node_count()];
        for (i, &node) in shape.reference_nodes().iter().enumerate() {
            shape.values(node, &mut values);
            for (j, &value) in values.iter().enumerate() {
                let expected = f64::from(u8::from(i == j));
                assert!((value - expected).abs() < 1e-15, "{} {i} {j}", shape.name());
            }
        }
    }
}

#[test]
fn polynomials_up_to_the_degree_are_interpolated_and_no_more() {
    for shape in Shape::ALL {
        let mut values = vec![0.0; shape.node_count()];
        let mut gradients = vec![[0.0; 3]; shape.node_count()];
        for x in inside(shape) {
            shape.values(x, &mut values);
            shape.gradients(x, &mut gradients);
            let interpolate = |e: [i32; 3]| -> f64 {
                let nodes = shape.reference_nodes().iter();
                nodes
                    .zip(&values)
                    .map(|(&node, n)| n * monomial(e, node))
                    .sum()
            };
            for e in monomials(shape.dimension(), shape.degree() as i32) {
                assert!(
                    (interpolate(e) - monomial(e, x)).abs() < 1e-14,
                    "{} {e:?}",
                    shape.name()
                );
            }
            for j in 0..3 {
                assert!(gradients.iter().map(|g| g[j]).sum::<f64>().abs() < 1e-14);
            }
        }
        // the companion: one degree more is not reproduced everywhere
        let degree = shape.degree() as i32 + 1;
        let x = inside(shape)[1];
        shape.values(x, &mut values);
        let missed = monomials(shape.dimension(), degree).into_iter().any(|e| {
            let nodes = shape.reference_nodes().iter();
            let sum: f64 = nodes
                .zip(&values)
                .map(|(&node, n)| n * monomial(e, node))
                .sum();
            (sum - monomial(e, x)).abs() > 1e-3
        });
        assert!(missed, "{}", shape.name());
    }
}

#[test]
fn gradients_are_the_slopes_of_the_values() {
    let step = 1e-5;
    for shape in Shape::ALL {
        let n = shape.node_count();
        let (mut up, mut down, mut slopes) = (vec![0.0; n], vec![0.0; n], vec![[0.0; 3]; n]);
        for x in inside(shape) {
            shape.gradients(x, &mut slopes);
            for axis in 0..3 {
                let (mut above, mut below) = (x, x);
                above[axis] += step;
                below[axis] -= step;
                shape.values(above, &mut up);
                shape.values(below, &mut down);
                for i in 0..n {
                    let slope = (up[i] - down[i]) / (2.0 * step);
                    assert!(
                        (slope - slopes[i][axis]).abs() < 1e-9,
                        "{} {i} {axis}",
                        shape.name()
                    );
                }
            }
        }
    }
}

#[test]
fn rules_integrate_their_degree_and_have_positive_weights() {
    for shape in Shape::ALL {
        for degree in 0..=9 {
            let rule = Rule::of_degree(shape, degree);
            assert!(rule.weights.iter().all(|&w| w > 0.0));
            assert!(rule.points.iter().all(|&x| shape.contains(x, 0.0)));
            for e in monomials(shape.dimension(), degree as i32) {
                assert!(
                    integral_error(shape, &rule, e) < 4e-14,
                    "{} {degree} {e:?}",
                    shape.name()
                );
            }
        }
        // the companion: two points a direction cannot do degree 4
        let rule = Rule::of_degree(shape, 3);
        let missed = monomials(shape.dimension(), 6);
        assert!(
            missed
                .into_iter()
                .any(|e| integral_error(shape, &rule, e) > 1e-5)
        );
        let sum: f64 = Rule::of_degree(shape, 2).weights.iter().sum();
        assert!((sum - shape.reference_measure()).abs() < 1e-14);
    }
}

#[test]
fn tensor_rules_integrate_their_degree_in_each_direction() {
    let rule = Rule::of_degree(Shape::Hex27, 5);
    assert_eq!(rule.len(), 27);
    assert!(integral_error(Shape::Hex27, &rule, [4, 4, 4]) < 1e-15);
    assert!(integral_error(Shape::Hex27, &rule, [6, 0, 0]) > 1e-3);
}

#[test]
fn named_rules_integrate_what_they_promise_on_the_shapes_they_fit() {
    for &(name, _) in STANDARD_RULES {
        let mut fits = 0;
        for shape in Shape::ALL {
            let Some(rule) = standard_rule(name, shape) else {
                continue;
            };
            fits += 1;
            for e in monomials(shape.dimension(), rule.degree as i32) {
                assert!(integral_error(shape, &rule, e) < 4e-14, "{name} {e:?}");
            }
        }
        assert!(fits > 0, "{name}");
    }
    assert_eq!(standard_rule("gauss-2", Shape::Tri3), None);
    assert_eq!(standard_rule("gauss-0", Shape::Quad4), None);
    assert_eq!(standard_rule("gauss2", Shape::Quad4), None);
    let rule = standard_rule("gauss-2", Shape::Quad4).unwrap();
    let g = 1.0 / 3.0_f64.sqrt();
    let expected = [[-g, -g], [g, -g], [-g, g], [g, g]];
    for (point, expected) in rule.points.iter().zip(expected) {
        assert!((point[0] - expected[0]).abs() < 1e-15 && (point[1] - expected[1]).abs() < 1e-15);
    }
}

#[test]
fn sides_are_closed_face_outwards_and_hold_their_middles() {
    for shape in Shape::ALL {
        let nodes = shape.reference_nodes();
        let centre = shape.centre();
        let linear = Shape::ALL
            .into_iter()
            .find(|s| s.domain() == shape.domain())
            .unwrap();
        assert_eq!(linear.sides().len(), shape.sides().len());
        for (side, corners) in shape.sides().iter().zip(linear.sides()) {
            let count = corners.len();
            assert_eq!(&side[..count], *corners, "{}", shape.name());
            for &(mid, of) in shape.mid_nodes() {
                let within = of.iter().all(|c| corners.contains(c));
                assert_eq!(side.contains(&mid), within, "{} {mid}", shape.name());
            }
            let edge = |a: usize, b: usize| -> [f64; 3] {
                std::array::from_fn(|i| nodes[side[b]][i] - nodes[side[a]][i])
            };
            let normal = if shape.dimension() == 2 {
                let e = edge(0, 1);
                [e[1], -e[0], 0.0]
            } else {
                let (e, f) = (edge(0, 1), edge(0, count - 1));
                [
                    e[1] * f[2] - e[2] * f[1],
                    e[2] * f[0] - e[0] * f[2],
                    e[0] * f[1] - e[1] * f[0],
                ]
            };
            let outward: f64 = (0..3)
                .map(|i| normal[i] * (nodes[side[0]][i] - centre[i]))
                .sum();
            assert!(outward > 0.1, "{} {side:?}", shape.name());
        }
    }
}

#[test]
fn contains_knows_the_walls_and_refuses_nan() {
    for shape in Shape::ALL {
        assert!(shape.contains(shape.centre(), 0.0));
        for &node in shape.reference_nodes() {
            let out: [f64; 3] = std::array::from_fn(|i| {
                let c = shape.centre()[i];
                c + (node[i] - c) * 1.01
            });
            assert!(shape.contains(node, 0.0));
            assert_eq!(
                shape.contains(out, 1e-6),
                node == shape.centre(),
                "{}",
                shape.name()
            );
            assert!(shape.contains(out, 0.05));
        }
        assert!(!shape.contains([f64::NAN, 0.1, 0.1], 1e-6));
    }
}

/// The shape's nodes after a smooth distortion of the reference element.
fn distorted(shape: Shape, a: &[f64]) -> Vec<[f64; 3]> {
    let bend = |&[x, y, z]: &[f64; 3]| {
        let third = if shape.dimension() == 3 {
            z * 1.5 + a[4] * x * y + a[5] * x
        } else {
            7.0
        };
        [
            3.0 + 2.0 * x + a[0] * y + a[1] * x * y,
            y + a[2] * x * x + a[3] * x * z,
            third,
        ]
    };
    shape.reference_nodes().iter().map(bend).collect()
}

proptest! {
    #[test]
    fn the_inverse_map_undoes_the_map(
        a in proptest::collection::vec(-0.2..0.2f64, 6),
        pick in 0usize..1000,
    ) {
        for shape in Shape::ALL {
            let coords = distorted(shape, &a);
            let points = inside(shape);
            let xi = points[pick % points.len()];
            let table = ShapeTable::new(shape, Rule { points: vec![xi], weights: vec![1.0], degree: 0 });
            let x = map::position(table.values(0), &coords);
            let back = map::inverse_map(shape, &coords, x).expect("converges");
            for axis in 0..shape.dimension() {
                prop_assert!((back[axis] - xi[axis]).abs() < 1e-11, "{} {:?} {:?}", shape.name(), xi, back);
            }
        }
    }

    #[test]
    fn a_linear_field_has_its_own_gradient_on_distorted_elements(
        a in proptest::collection::vec(-0.2..0.2f64, 6),
    ) {
        for shape in Shape::ALL {
            let coords = distorted(shape, &a);
            let dimension = shape.dimension();
            let table = ShapeTable::of_degree(shape, 3);
            let mut physical = vec![[0.0; 3]; shape.node_count()];
            for q in 0..table.len() {
                let det = map::physical_gradients(dimension, table.gradients(q), &coords, &mut physical);
                prop_assert!(det.expect("regular") > 0.0);
                for j in 0..dimension {
                    let slope: f64 = coords
                        .iter()
                        .zip(&physical)
                        .map(|(x, g)| (5.0 * x[0] - 3.0 * x[1] + if dimension == 3 { x[2] } else { 0.0 }) * g[j])
                        .sum();
                    prop_assert!((slope - [5.0, -3.0, 1.0][j]).abs() < 1e-12);
                }
            }
        }
    }
}

#[test]
fn a_folded_element_has_no_inverse_and_a_far_point_is_outside() {
    let flat = vec![[0.0; 3]; 4];
    assert_eq!(map::inverse_map(Shape::Quad4, &flat, [1.0, 1.0, 0.0]), None);
    let square = [
        [0.0, 0.0, 0.0],
        [2.0, 0.0, 0.0],
        [2.0, 2.0, 0.0],
        [0.0, 2.0, 0.0],
    ];
    let xi = map::inverse_map(Shape::Quad4, &square, [4.0, 1.0, 0.0]).unwrap();
    assert!((xi[0] - 3.0).abs() < 1e-14 && !Shape::Quad4.contains(xi, 1e-6));
}

#[test]
fn the_volume_of_a_curved_element_is_right() {
    // quad9 on the quarter ring 1 <= R <= 2: pi/4 times 3, up to the error of a parabola for an arc
    let arc = |radius: f64, angle: f64| [radius * angle.cos(), radius * angle.sin(), 0.0];
    let coords: Vec<[f64; 3]> = Shape::Quad9
        .reference_nodes()
        .iter()
        .map(|x| arc(1.5 + 0.5 * x[0], std::f64::consts::FRAC_PI_4 * (1.0 + x[1])))
        .collect();
    let table = ShapeTable::of_degree(Shape::Quad9, 4);
    let area: f64 = (0..table.len())
        .map(|q| {
            table.rule.weights[q] * map::determinant(&map::jacobian(2, table.gradients(q), &coords))
        })
        .sum();
    let exact = 0.75 * std::f64::consts::PI;
    assert!((area - exact).abs() < 0.03 * exact && (area - exact).abs() > 1e-6 * exact);
}

#[test]
fn node_order_is_that_of_vtk() {
    let mut seen = 0;
    for row in include_str!("../../tests/oracles/elements/vtk-nodes.csv")
        .lines()
        .skip(1)
    {
        let cells: Vec<&str> = row.split(',').collect();
        let shape = Shape::from_name(cells[0]).unwrap();
        let node: usize = cells[1].parse().unwrap();
        let ours = shape.reference_nodes()[node];
        let tensor = |axis: usize| match shape.domain() {
            shape::Domain::Square => axis < 2,
            shape::Domain::Cube => true,
            shape::Domain::Wedge => axis == 2,
            shape::Domain::Triangle | shape::Domain::Tetrahedron => false,
        };
        for axis in 0..3 {
            let vtk: f64 = cells[2 + axis].parse().unwrap();
            let expected = if tensor(axis) { 2.0 * vtk - 1.0 } else { vtk };
            assert_eq!(ours[axis], expected, "{row}");
        }
        seen += 1;
    }
    let all: usize = Shape::ALL.iter().map(|s| s.node_count()).sum();
    assert_eq!(seen, all);
}
