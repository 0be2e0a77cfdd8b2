//! Meshes and integration points with one thing wrong.

use super::sanity::Coverage;
use super::tests::folder;
use super::*;
use crate::elements::{Shape, ShapeTable, map};
use crate::input::Finding;
use std::fmt::Write;

/// A result set whose files live as long as it does.
struct Kept {
    set: ResultSet,
    _dir: tempfile::TempDir,
}

impl std::ops::Deref for Kept {
    type Target = ResultSet;
    fn deref(&self) -> &ResultSet {
        &self.set
    }
}

fn set(files: &[(&str, &str)]) -> Kept {
    let raw: Vec<(&str, &[u8])> = files.iter().map(|(n, t)| (*n, t.as_bytes())).collect();
    let dir = folder(&raw);
    let set = ResultSet::open(dir.path(), "r", &Reading::default()).unwrap();
    Kept { set, _dir: dir }
}

/// A mesh of one element of a shape, its reference element moved to positive radii.
fn single(shape: Shape, axisymmetric: bool) -> (String, String) {
    let (x, y) = if axisymmetric { ("R", "Z") } else { ("X", "Y") };
    let solid = shape.dimension() == 3;
    let mut nodes = format!("node,{x},{y}{}\n", if solid { ",Z" } else { "" });
    let mut elements = "element,shape".to_string();
    let mut row = format!("5,{}", shape.name());
    for (i, [a, b, c]) in shape.reference_nodes().iter().enumerate() {
        let third = if solid {
            format!(",{c}")
        } else {
            String::new()
        };
        writeln!(nodes, "{},{},{b}{third}", i + 1, a + 3.0).unwrap();
        write!(elements, ",n{}", i + 1).unwrap();
        write!(row, ",{}", i + 1).unwrap();
    }
    (nodes, format!("{elements}\n{row}\n"))
}

/// points.csv of a single element; `weight` gets quadrature weight and radius.
fn points_of(shape: Shape, axisymmetric: bool, weight: fn(f64, f64) -> f64) -> String {
    let table = ShapeTable::of_degree(shape, 3);
    let coords: Vec<[f64; 3]> = shape
        .reference_nodes()
        .iter()
        .map(|&[a, b, c]| [a + 3.0, b, c])
        .collect();
    let (x, y) = if axisymmetric { ("R", "Z") } else { ("X", "Y") };
    let solid = shape.dimension() == 3;
    let mut text = format!(
        "element,point,{x},{y}{},weight\n",
        if solid { ",Z" } else { "" }
    );
    for q in 0..table.len() {
        let [a, b, c] = map::position(table.values(q), &coords);
        let third = if solid {
            format!(",{c}")
        } else {
            String::new()
        };
        writeln!(
            text,
            "5,{},{a},{b}{third},{}",
            q + 1,
            weight(table.rule.weights[q], a)
        )
        .unwrap();
    }
    text
}

fn cover(
    shape: Shape,
    axisymmetric: bool,
    weight: fn(f64, f64) -> f64,
) -> Result<Coverage, Vec<Finding>> {
    let (nodes, elements) = single(shape, axisymmetric);
    let points = points_of(shape, axisymmetric, weight);
    let files = [
        ("nodes.csv", nodes.as_str()),
        ("elements.csv", &elements),
        ("points.csv", &points),
    ];
    sanity::check_points(&set(&files)).map(Option::unwrap)
}

#[test]
fn every_shape_is_read_measured_and_covered() {
    for shape in Shape::ALL {
        let (nodes, elements) = single(shape, false);
        let set = set(&[("nodes.csv", &nodes), ("elements.csv", &elements)]);
        let (mesh, nodes) = (set.elements().unwrap(), set.nodes().unwrap());
        let volume = sanity::mesh_volume(mesh, nodes);
        assert!(
            (volume - shape.reference_measure()).abs() < 1e-13,
            "{}",
            shape.name()
        );
        let sides = sanity::boundary_sides(mesh);
        assert_eq!(sides.len(), shape.sides().len());
        assert_eq!(
            sanity::side_nodes(mesh, sides[1]).len(),
            shape.sides()[1].len()
        );
        assert_eq!(sanity::check_mesh(&set), Ok(Vec::new()), "{}", shape.name());
        let coverage = cover(shape, false, |w, _| w).unwrap();
        assert_eq!(coverage.remarks, []);
        assert!((coverage.ratio.unwrap() - 1.0).abs() < 1e-13);
    }
}

#[test]
fn wrong_weights_are_refused_with_the_likely_reason() {
    assert!(
        cover(Shape::Quad8, true, |w, r| w
            * r
            * 2.0
            * std::f64::consts::PI)
        .is_ok()
    );
    for (weight, says) in [
        (
            (|w, r| w * r) as fn(f64, f64) -> f64,
            "the factor 2 pi is missing",
        ),
        (|w, _| w * 0.999, "a weight is quadrature weight"),
        (|w, r| w * r * std::f64::consts::PI / 2.0, "1/4 of the mesh"),
        (
            |w, r| w * r * std::f64::consts::PI * 6.0,
            "3 times the mesh",
        ),
    ] {
        let found = cover(Shape::Quad8, true, weight).unwrap_err();
        assert_eq!(found[0].rule, "points-cover-mesh");
        assert!(found[0].hint.contains(says), "{}", found[0]);
    }
    // the reference element has the section's size, so that bare weights are also those without 2 pi R
    let found = cover(Shape::Quad8, true, |w, _| w).unwrap_err();
    assert!(found[0].hint.contains("bare quadrature weights"));
}

#[test]
fn small_differences_of_weights_are_cautions_and_smaller_ones_are_none() {
    let remarks = |weight| cover(Shape::Hex8, false, weight).unwrap().remarks;
    assert_eq!(remarks(|w, _| w * (1.0 + 1e-7)), []);
    let rules: Vec<String> = remarks(|w, _| w * (1.0 + 1e-5))
        .into_iter()
        .map(|f| f.rule)
        .collect();
    assert_eq!(rules, ["points-cover-mesh", "points-cover-element"]);
}

#[test]
fn an_inverted_element_is_named_whatever_its_shape() {
    for shape in Shape::ALL {
        let (nodes, elements) = single(shape, false);
        // a mirror image: the first coordinate changes its sign
        let mirrored: String = nodes
            .lines()
            .map(|line| {
                let mut cells: Vec<String> = line.split(',').map(String::from).collect();
                if cells[0] != "node" {
                    cells[1] = format!("-{}", cells[1]);
                }
                cells.join(",") + "\n"
            })
            .collect();
        let set = set(&[("nodes.csv", &mirrored), ("elements.csv", &elements)]);
        let found = sanity::check_mesh(&set).unwrap_err();
        assert_eq!(
            (found[0].rule.as_str(), found[0].place.line),
            ("positive-jacobian", Some(2))
        );
        assert!(found[0].found.contains("element 5"));
    }
}

#[test]
fn neighbours_with_other_middle_nodes_are_a_caution() {
    // a quad8 beside a quad4: the middle node of the common side has no partner
    let nodes = "node,X,Y\n1,0,0\n2,2,0\n3,2,2\n4,0,2\n5,1,0\n6,2,1\n7,1,2\n8,0,1\n9,4,0\n10,4,2\n";
    let elements =
        "element,shape,n1,n2,n3,n4,n5,n6,n7,n8\n1,quad8,1,2,3,4,5,6,7,8\n2,quad4,2,9,10,3,,,,\n";
    let set = set(&[("nodes.csv", nodes), ("elements.csv", elements)]);
    let remarks = sanity::check_mesh(&set).unwrap();
    assert_eq!(remarks[0].rule, "matching-sides");
    assert_eq!(sanity::boundary_sides(set.elements().unwrap()).len(), 6);
}

#[test]
fn a_volume_ratio_that_is_not_that_of_f_is_a_caution() {
    let text =
        |j: &str| format!("element,point,X,Y,J,F11,F12,F21,F22,F33\n1,1,0,0,{j},1.2,0,0,1,1\n");
    let rules = |j: &str| -> Vec<String> {
        let set = set(&[("points.csv", &text(j))]);
        let pass = set
            .points()
            .unwrap()
            .for_each_block(9, &mut |_| Ok(()))
            .unwrap();
        pass.remarks.into_iter().map(|f| f.rule).collect()
    };
    assert_eq!(rules("1.2"), ["missing-table"]);
    assert_eq!(rules("1.0"), ["missing-table", "volume-ratio"]);
}
