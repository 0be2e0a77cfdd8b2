//! Set-up time of every exact solution, and time for a thousand of its points (divide by a thousand). Wanted: set-up below 5 ms
//! (compressible 50 ms), a point below 200 ns.

use divan::{Bencher, black_box};
use std::sync::Arc;
use truebore::exact::{Body, ExactSolution, Given, build};
use truebore::mechanics::Point;
use truebore::run::plan;

fn main() {
    divan::main();
}

const MATERIALS: &str = "
  neo: { neo-Hookean: { mu: 0.4 } }
  mooney: { Mooney-Rivlin: { c10: 0.15, c01: 0.05 } }
  ogden: { Ogden: { mu: [0.63, 0.0012, -0.01], alpha: [1.3, 5, -2] } }
  gent: { Gent: { mu: 0.4, Jm: 8 } }
  chain: { Arruda-Boyce: { mu: 0.3, N: 8 } }
  fibred: { two-fibre: { mu: 0.4, k1: 0.5, k2: 0.8, beta: 36 deg } }
  typed: { stated: { energy: \"0.2*(I1-3) + 0.01*(I2-3)^2\" } }
  soft: { Mooney-Rivlin: { c10: 0.15, c01: 0.05, volumetric: { quadratic: { K: 400 } } } }
  softer: { neo-Hookean: { mu: 0.4, volumetric: { log-squared: { K: 4 } } } }
  stiff: { Ogden: { mu: [0.63, 0.0012, -0.01], alpha: [1.3, 5, -2], volumetric: { quadratic: { K: 4e6 } } } }
  coupled: { compressible-neo-Hookean: { mu: 0.4, lambda: 4 } }
  steel: { linear-elastic: { E: 200, nu: 0.3 } }
  plastic: { elastic-perfectly-plastic: { E: 200, nu: 0.3, yield-stress: 0.24 } }
";

/// (name, problem) by the suite.
type Case = (&'static str, &'static str);

fn find(cases: &[Case], name: &str) -> (String, Given) {
    let problem = cases.iter().find(|(n, _)| *n == name).expect("listed").1;
    let text = format!(
        "suite: bench\nunits: {{ length: mm, stress: MPa }}\nmaterials: {MATERIALS}\ncases: [ {{ id: c, problem: {{ {problem} }} }} ]\n"
    );
    let plan = plan::read(&text, "bench.yaml").unwrap_or_else(|f| panic!("{name}: {}", f[0]));
    (plan.cases[0].problem.clone(), plan.cases[0].given.clone())
}

fn set_up_of(bencher: Bencher, cases: &[Case], name: &str) {
    let (problem, given) = find(cases, name);
    bencher.bench(|| build(&problem, black_box(given.clone())).expect("solved"));
}

/// A thousand points of the body, in no order.
fn points_in(exact: &dyn ExactSolution) -> Vec<Point> {
    let body = exact.body();
    let share = |i: usize, prime: usize| ((i * prime % 1000) as f64 + 0.5) / 1000.0;
    let place = |i: usize| {
        let (s, t) = (share(i, 619), share(i, 387));
        match body {
            Body::Block { lower, upper } => Point::new(
                lower[0] + (upper[0] - lower[0]) * s,
                lower[1] + (upper[1] - lower[1]) * t,
                0.0,
            ),
            Body::Ellipse { a, b } => Point::new(0.7 * a * s, 0.7 * b * t, 0.0),
            Body::Sphere { inner, outer } => {
                let flat = Point::from_cylindrical(inner + (outer - inner) * s, t, 0.0);
                Point::new(0.8 * flat.x, 0.8 * flat.y, 0.6 * flat.radius())
            }
            Body::Free { hole } => {
                Point::from_cylindrical(hole * (1.0 + 4.0 * s) + 0.1 + s, 6.0 * t, 0.3 * t)
            }
            Body::Tube { inner, outer } => {
                Point::from_cylindrical(inner + (outer - inner) * s, 6.0 * t, t)
            }
            Body::Sector {
                inner,
                outer,
                angle,
            } => Point::from_cylindrical(inner + (outer - inner) * s, angle * (t - 0.5), t),
        }
    };
    (0..1000).map(place).collect()
}

fn points_of(bencher: Bencher, cases: &[Case], name: &str) {
    let (problem, given) = find(cases, name);
    let exact: Arc<dyn ExactSolution> = Arc::from(build(&problem, given).expect("solved"));
    let points = points_in(exact.as_ref());
    for point in &points {
        exact.at(*point).expect("a state");
    }
    bencher.bench(|| {
        let states = points.iter().filter_map(|p| exact.at(black_box(*p)).ok());
        states.map(|s| s.stress.xx).sum::<f64>()
    });
}

/// One set-up and one point bench for each case of a kind.
macro_rules! kind {
    ($kind:ident, [$(($name:literal, $problem:literal)),+ $(,)?]) => {
        mod $kind {
            use super::{Bencher, Case};

            const CASES: &[Case] = &[$(($name, $problem)),+];
            const NAMES: &[&str] = &[$($name),+];

            #[divan::bench(args = NAMES)]
            fn set_up(bencher: Bencher, name: &str) {
                super::set_up_of(bencher, CASES, name);
            }

            #[divan::bench(args = NAMES)]
            fn thousand_points(bencher: Bencher, name: &str) {
                super::points_of(bencher, CASES, name);
            }
        }
    };
}

kind!(
    tube,
    [
        (
            "neo, plane strain",
            "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: plane-strain, material: neo, inner-pressure: 0.05 }"
        ),
        (
            "Mooney, closed",
            "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: mooney, inner-pressure: 0.05 }"
        ),
        (
            "Mooney, force",
            "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: { generalized-plane-strain: { axial-force: 2 } }, material: mooney, inner-pressure: 0.05 }"
        ),
        (
            "Mooney, B/A 100",
            "pressurised-tube: { inner-radius: 8, outer-radius: 800, ends: closed, material: mooney, inner-pressure: 0.05 }"
        ),
        (
            "Mooney, dead",
            "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: mooney, inner-pressure: 0.05, load: dead }"
        ),
        (
            "Mooney, bore",
            "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: mooney, inner-wall-stretch: 1.3 }"
        ),
        (
            "Ogden",
            "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: ogden, inner-pressure: 0.05 }"
        ),
        (
            "Gent",
            "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: gent, inner-pressure: 0.1 }"
        ),
        (
            "Arruda-Boyce",
            "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: chain, inner-pressure: 0.05 }"
        ),
        (
            "two-fibre",
            "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: fibred, inner-pressure: 0.08 }"
        ),
        (
            "typed",
            "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: typed, inner-pressure: 0.05 }"
        ),
        (
            "three layers",
            "layered-tube: { radii: [8, 9, 10, 12], materials: [neo, mooney, ogden], ends: closed, inner-pressure: 0.05 }"
        ),
        (
            "graded",
            "graded-tube: { inner-radius: 8, outer-radius: 12, material: mooney, grading: { power: 1.5 }, ends: closed, inner-pressure: 0.05 }"
        ),
    ]
);

kind!(
    compressible,
    [
        (
            "tube",
            "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: soft, inner-pressure: 0.03 }"
        ),
        (
            "tube, K/mu 10",
            "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: softer, inner-pressure: 0.03 }"
        ),
        (
            "tube, K/mu 1e7",
            "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: stiff, inner-pressure: 0.03 }"
        ),
        (
            "tube, coupled",
            "pressurised-tube: { inner-radius: 8, outer-radius: 12, ends: plane-strain, material: coupled, inner-pressure: 0.03 }"
        ),
        (
            "tube, B/A 100",
            "pressurised-tube: { inner-radius: 8, outer-radius: 800, ends: closed, material: soft, inner-pressure: 0.03 }"
        ),
        (
            "three layers",
            "layered-tube: { radii: [8, 9, 10, 12], materials: [soft, softer, stiff], ends: closed, inner-pressure: 0.03 }"
        ),
        (
            "sphere",
            "pressurised-sphere: { inner-radius: 8, outer-radius: 12, material: soft, inner-pressure: 0.03 }"
        ),
    ]
);

kind!(
    sphere,
    [
        (
            "neo",
            "pressurised-sphere: { inner-radius: 8, outer-radius: 12, material: neo, inner-pressure: 0.1 }"
        ),
        (
            "Ogden",
            "pressurised-sphere: { inner-radius: 8, outer-radius: 12, material: ogden, inner-pressure: 0.1 }"
        ),
        (
            "Gent, branch 2",
            "pressurised-sphere: { inner-radius: 8, outer-radius: 8.8, material: gent, inner-pressure: 0.03, branch: 2 }"
        ),
        (
            "Arruda-Boyce",
            "pressurised-sphere: { inner-radius: 8, outer-radius: 12, material: chain, inner-pressure: 0.1 }"
        ),
        (
            "neo, B/A 100",
            "pressurised-sphere: { inner-radius: 8, outer-radius: 800, material: neo, inner-pressure: 0.3 }"
        ),
    ]
);

kind!(
    sheared_and_bent,
    [
        (
            "torsion, solid",
            "torsion-extension: { outer-radius: 12, axial-stretch: 1.1, twist: 0.05, material: mooney }"
        ),
        (
            "torsion, hollow, Ogden",
            "torsion-extension: { inner-radius: 8, outer-radius: 12, axial-force: 0, twist: 0.05, material: ogden }"
        ),
        (
            "azimuthal shear, neo",
            "azimuthal-shear: { inner-radius: 8, outer-radius: 12, material: neo, rotation: 0.2 }"
        ),
        (
            "azimuthal shear, Ogden",
            "azimuthal-shear: { inner-radius: 8, outer-radius: 12, material: ogden, rotation: 0.2 }"
        ),
        (
            "axial shear, neo",
            "axial-shear: { inner-radius: 8, outer-radius: 12, material: neo, displacement: 1.5 }"
        ),
        (
            "axial shear, Gent",
            "axial-shear: { inner-radius: 8, outer-radius: 12, material: gent, displacement: 1.5 }"
        ),
        (
            "bent block",
            "bent-block: { thickness: 4, length: 20, angle: 1.2, material: mooney }"
        ),
        (
            "straightened sector",
            "straightened-sector: { inner-radius: 8, outer-radius: 12, angle: 1.2, material: mooney }"
        ),
    ]
);

kind!(
    field,
    [
        (
            "homogeneous",
            "homogeneous: { uniaxial: { stretch: 1.5 }, material: ogden }"
        ),
        (
            "homogeneous, soft",
            "homogeneous: { uniaxial: { stretch: 1.5 }, material: soft }"
        ),
        (
            "stated, compressible",
            "stated-field: { displacement: { x: \"0.1*X*Y + 0.3*Y^2\", y: \"0.05*X^2 - 0.1*Z*Y\", z: \"0.1*sin(X)*Z\" }, material: coupled }"
        ),
        (
            "stated, incompressible",
            "stated-field: { displacement: { x: \"0.3*Y^2 + 0.1*sin(Z)\", y: \"0.2*Z^2\" }, pressure: \"0.1 + 0.3*X*Y\", material: mooney }"
        ),
        (
            "stated, split",
            "stated-field: { displacement: { x: \"0.1*X*Y\", y: \"0.05*X^2\" }, material: soft }"
        ),
    ]
);

kind!(
    small_strain,
    [
        (
            "Lame tube",
            "lame-tube: { inner-radius: 8, outer-radius: 12, ends: closed, material: steel, inner-pressure: 0.05 }"
        ),
        (
            "Lame sphere",
            "lame-sphere: { inner-radius: 8, outer-radius: 12, material: steel, inner-pressure: 0.05 }"
        ),
        (
            "shrink fit",
            "shrink-fit-tube: { radii: [8, 10, 12], radial-interference: 0.01, materials: [steel, steel], ends: plane-stress }"
        ),
        (
            "heated tube",
            "heated-tube: { inner-radius: 8, outer-radius: 12, material: steel, expansion: 1e-5, inner-temperature: 80, outer-temperature: 0, ends: plane-strain }"
        ),
        (
            "rotating disk",
            "rotating-disk: { inner-radius: 8, outer-radius: 12, material: steel, density-speed-squared: 1e-4 }"
        ),
        (
            "rotating cylinder",
            "rotating-cylinder: { inner-radius: 8, outer-radius: 12, material: steel, density-speed-squared: 1e-4, ends: plane-strain }"
        ),
        (
            "hole",
            "plate-with-hole: { hole-radius: 8, tension: 0.1, material: steel, state: plane-stress }"
        ),
        (
            "cantilever",
            "cantilever-strip: { length: 48, depth: 12, end-load: 0.3, material: steel, state: plane-stress, root: slope-of-axis }"
        ),
        (
            "pure bending",
            "pure-bending: { length: 48, depth: 12, moment: 3, material: steel, state: plane-stress }"
        ),
        (
            "bar torsion",
            "bar-torsion: { semi-axes: [12, 8], twist: 0.01, material: steel }"
        ),
        (
            "elastic-plastic tube",
            "elastic-plastic-tube: { inner-radius: 8, outer-radius: 12, material: plastic, inner-pressure: 0.08, stage: loaded }"
        ),
        (
            "elastic-plastic tube, unloaded",
            "elastic-plastic-tube: { inner-radius: 8, outer-radius: 12, material: plastic, inner-pressure: 0.08, stage: unloaded }"
        ),
    ]
);
