//! Orders of convergence of nodal interpolants of the exact solution, in every shape, through the whole chain from
//! files to observed orders: displacement in L2 as theory says for an interpolant (k + 1), its gradient k.
//!
//! Red when an order is computed from a wrong mesh size, when quadrature hides the error, when a shape function or
//! its map has a lower degree than it should, or when straight wall sides go unnoticed.

mod common;

use common::mesh::{Mesh, Sector};
use common::perfect::{Dialect, Export, Layout, Tube};
use common::{case, finest, judged, series};
use truebore::elements::Shape;
use truebore::exact::Ends;
use truebore::verdict::outcome::{Kind, Outcome};

/// Observed orders may be off by this.
const WITHIN: f64 = 0.15;

fn tube() -> Tube {
    Tube {
        inner: 1.0,
        outer: 2.0,
        ..Tube::rubber(Ends::FixedStretch { axial_stretch: 1.1 })
    }
}

fn exported(sector: Sector) -> Export {
    let mut export = Export::of(&tube(), &Mesh::of(sector), Dialect::default());
    export.tables.remove("points");
    export
}

/// Interpolants on three meshes, each with twice the cells in every direction.
fn refine(coarsest: Sector, share: &str, export: impl Fn(Sector) -> Export) -> Outcome {
    let folder = tempfile::tempdir().unwrap();
    for level in 0..3 {
        let sector = Sector {
            cells: coarsest.cells.map(|n| n << level),
            ..coarsest
        };
        export(sector).write(
            &folder.path().join(format!("level-{}", level + 1)),
            Layout::Plain,
        );
    }
    let suite = tube().suite(&format!(
        "    levels: [1, 2, 3]\n{share}    accept: [{{ error: displacement-L2, at-most: 1 }}]\n"
    ));
    judged(&suite, folder.path())
}

/// The last pair's order of a measure.
fn order(outcome: &Outcome, measure: &str) -> f64 {
    let series = series(case(outcome, "tube"), measure, Kind::Relative).unwrap();
    series.values.last().unwrap().observed_order.unwrap()
}

fn check(name: &str, outcome: &Outcome, l2: f64, h1: f64) {
    let found = (
        order(outcome, "displacement-L2"),
        order(outcome, "displacement-H1"),
    );
    println!(
        "{name:20} L2 {:.3} ({l2})   H1 {:.3} ({h1})",
        found.0, found.1
    );
    assert!((found.0 - l2).abs() < WITHIN, "{name}: L2 {found:?}");
    assert!((found.1 - h1).abs() < WITHIN, "{name}: H1 {found:?}");
}

fn has_finding(outcome: &Outcome, rule: &str) -> bool {
    case(outcome, "tube")
        .findings
        .iter()
        .any(|f| f.rule == rule)
}

#[test]
fn every_shape_shows_its_order() {
    for shape in Shape::ALL {
        let cells = if shape.dimension() == 2 {
            [3, 4, 1]
        } else {
            [2, 3, 1]
        };
        let sector = Sector {
            cells,
            length: 0.4,
            ..Sector::quarter(shape, 1.0, 2.0, 2)
        };
        let outcome = refine(sector, "    section: 1/4\n", exported);
        let k = shape.degree() as f64;
        check(shape.name(), &outcome, k + 1.0, k);
        assert!(!has_finding(&outcome, "straight-wall-sides"));
    }
}

/// Displacements of an analysis with curved sides on a mesh whose middle nodes were put on the chords. (An interpolant
/// taken on the straight mesh itself would keep its order: measured 3.02. It is the solution, or here the export, that
/// loses it.) The gradient loses its order too, since the chords differ from the circles element by element.
#[test]
fn straight_sides_lose_an_order_and_are_named() {
    for shape in [Shape::Tri6, Shape::Quad8, Shape::Quad9] {
        let curved = Sector {
            cells: [3, 4, 1],
            ..Sector::quarter(shape, 1.0, 2.0, 2)
        };
        let straighten = |sector: Sector| {
            let mut export = exported(sector);
            let straight = exported(Sector {
                straight: true,
                ..sector
            });
            export
                .table("nodes")
                .take_columns(&["X", "Y"], &straight.tables["nodes"]);
            export
        };
        let outcome = refine(curved, "    section: 1/4\n", straighten);
        check(&format!("{} straight", shape.name()), &outcome, 2.0, 1.0);
        assert!(has_finding(&outcome, "straight-wall-sides"));
    }
}

#[test]
fn an_axisymmetric_mesh_shows_its_order() {
    for shape in [
        Shape::Tri3,
        Shape::Quad4,
        Shape::Tri6,
        Shape::Quad8,
        Shape::Quad9,
    ] {
        let sector = Sector {
            axisymmetric: true,
            cells: [3, 1, 2],
            length: 0.7,
            ..Sector::quarter(shape, 1.0, 2.0, 2)
        };
        let outcome = refine(sector, "", exported);
        let k = shape.degree() as f64;
        check(&format!("{} in R, Z", shape.name()), &outcome, k + 1.0, k);
        for level in &case(&outcome, "tube").levels {
            // the meshed half plane is 1 by 0.7
            let h = (0.7 / level.elements as f64).sqrt();
            assert!((level.h.unwrap() - h).abs() < 1e-12, "{level:?}");
        }
    }
}

/// A wall under the same pressure on both sides, linear-elastic: u = c R, which every shape interpolates exactly. A
/// constant radial error d then has the norms d sqrt(V) and, through its hoop strain d / R alone,
/// d sqrt(2 pi L ln(B/A)).
#[test]
fn norms_of_an_axisymmetric_mesh_are_those_of_the_turn() {
    let tube = Tube {
        inner: 1.0,
        outer: 2.0,
        inner_pressure: 0.01,
        outer_pressure: 0.01,
        ends: Ends::PlaneStrain,
        ..Tube::linear()
    };
    let (d, length) = (1e-3, 0.7);
    for shape in [Shape::Tri3, Shape::Quad4, Shape::Tri6, Shape::Quad9] {
        let sector = Sector {
            axisymmetric: true,
            cells: [4, 1, 2],
            length,
            ..Sector::quarter(shape, 1.0, 2.0, 2)
        };
        let mut export = Export::of(&tube, &Mesh::of(sector), Dialect::default());
        export.table("nodes").shift("ur", d);
        let folder = tempfile::tempdir().unwrap();
        export.write(&folder.path().join("level-1"), Layout::Plain);
        let suite =
            tube.suite("    levels: [1]\n    accept: [{ error: displacement-L2, at-most: 1 }]\n");
        let outcome = judged(&suite, folder.path());
        let error = |measure| finest(case(&outcome, "tube"), measure, Kind::Absolute);
        let turn = 2.0 * std::f64::consts::PI * length;
        let (l2, h1) = (d * (turn * 1.5).sqrt(), d * (turn * 2.0_f64.ln()).sqrt());
        assert!(
            (error("displacement-L2") / l2 - 1.0).abs() < 1e-11,
            "{}",
            shape.name()
        );
        assert!(
            (error("displacement-H1") / h1 - 1.0).abs() < 1e-11,
            "{}",
            shape.name()
        );
    }
}
