//! What one result set costs: reading, checking and measuring the finest demo mesh, and the whole demo suite.
//!
//! `cargo bench --bench measure`

use std::path::Path;
use truebore::exact::{Ends, ExactSolution, Parameters};
use truebore::materials;
use truebore::norms::displacement::displacement_norms;
use truebore::norms::model::Mesh;
use truebore::norms::points::point_norms;
use truebore::results::{Reading, ResultSet, sanity};
use truebore::run::check::{Silent, check};
use truebore::run::plan::{Plan, plan};

const SUITE: &str = "suites/dosing-pump-hose/suite.yaml";
const FINEST: &str = "suites/dosing-pump-hose/results/plane-strain-soft-16/level-4";

fn main() {
    divan::main();
}

fn demo() -> (String, Plan) {
    let text = std::fs::read_to_string(SUITE).expect("run from the repository");
    let suite = truebore::suite::read(&text, SUITE).expect("the demo suite is sound");
    let plan = plan(suite, SUITE).expect("the demo suite is sound");
    (text, plan)
}

fn hose() -> Box<dyn ExactSolution> {
    let material =
        materials::build("neo-Hookean", &[("mu".to_string(), 0.4)]).expect("a sound material");
    let parameters = Parameters {
        inner_radius: 8.0,
        outer_radius: 16.0,
        ends: Ends::PlaneStrain,
        material,
        inner_pressure: 0.03,
        outer_pressure: 0.0,
    };
    truebore::exact::build("pressurised-tube", &parameters).expect("a sound tube")
}

fn finest() -> ResultSet {
    ResultSet::open(Path::new(FINEST), FINEST, &Reading::default()).expect("a sound result set")
}

/// Suite text to a plan with 12 exact solutions.
#[divan::bench]
fn plan_demo(bencher: divan::Bencher) {
    bencher.bench(demo);
}

/// 561 nodes, 128 quad9, totals; points prepared.
#[divan::bench]
fn open_finest(bencher: divan::Bencher) {
    bencher.bench(finest);
}

#[divan::bench]
fn check_mesh(bencher: divan::Bencher) {
    let set = finest();
    bencher.bench(|| sanity::check_mesh(&set));
}

/// L2 and H1 over 128 quad9.
#[divan::bench]
fn displacement(bencher: divan::Bencher) {
    let (set, exact) = (finest(), hose());
    let nodes = set.nodes().expect("nodes");
    let mesh = Mesh {
        nodes,
        elements: set.elements().expect("elements"),
    };
    let moved = nodes.displacement.as_deref().expect("displacements");
    bencher.bench(|| displacement_norms(mesh, moved, exact.as_ref()));
}

/// Reading and judging 1152 integration points.
#[divan::bench]
fn points(bencher: divan::Bencher) {
    let (set, exact) = (finest(), hose());
    bencher.bench(|| {
        let source = set.points().expect("points");
        point_norms(source, exact.as_ref(), &[], &mut |_| {})
    });
}

/// 48 result sets, 12 cases.
#[divan::bench]
fn whole_demo(bencher: divan::Bencher) {
    let (text, plan) = demo();
    let folder = Path::new(SUITE).parent().expect("a folder");
    bencher.bench(|| check(&plan, text.as_bytes(), folder, &Silent));
}
