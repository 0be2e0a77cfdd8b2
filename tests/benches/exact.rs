//! Set-up time and time per point of the exact tubes. Wanted: set-up below 5 ms (compressible: 50 ms), a point below 200 ns
//! (compressible: 300 ns, half of it in the law).

use divan::{Bencher, black_box};
use std::sync::Arc;
use truebore::exact::compressible::{CompressibleTube, CompressibleTubeProblem, Drive, Load};
use truebore::exact::{Ends, ExactSolution, Parameters, build};
use truebore::materials::{self, Compressible, MooneyRivlin, Volumetric, VolumetricForm};
use truebore::mechanics::Point;

fn main() {
    divan::main();
}

fn case(name: &str) -> (&'static str, Parameters) {
    let (law, values): (&str, &[(&str, f64)]) = match name {
        "lame" => ("linear-elastic", &[("E", 1.0), ("nu", 0.45)]),
        "plane-strain" => ("neo-Hookean", &[("mu", 0.4)]),
        _ => ("Mooney-Rivlin", &[("c10", 0.15), ("c01", 0.05)]),
    };
    let values: Vec<_> = values.iter().map(|(n, v)| (n.to_string(), *v)).collect();
    let ends = match name {
        "plane-strain" => Ends::PlaneStrain,
        "force" | "thick-force" => Ends::GeneralizedPlaneStrain { axial_force: 2.0 },
        _ => Ends::Closed,
    };
    let parameters = Parameters {
        inner_radius: 8.0,
        outer_radius: if name == "thick-force" { 800.0 } else { 12.0 },
        ends,
        material: materials::build(law, &values).expect("a material"),
        inner_pressure: 0.03,
        outer_pressure: 0.0,
    };
    (
        if name == "lame" {
            "lame-tube"
        } else {
            "pressurised-tube"
        },
        parameters,
    )
}

const CASES: [&str; 5] = ["lame", "plane-strain", "closed", "force", "thick-force"];

#[divan::bench(args = CASES)]
fn set_up(bencher: Bencher, name: &str) {
    let (solution, parameters) = case(name);
    bencher.bench(|| build(solution, black_box(&parameters)).expect("solved"));
}

/// A thousand points through the wall: divide by a thousand.
#[divan::bench(args = CASES)]
fn thousand_points(bencher: Bencher, name: &str) {
    let (solution, parameters) = case(name);
    let tube = build(solution, &parameters).expect("solved");
    let (a, b) = (parameters.inner_radius, parameters.outer_radius);
    let points: Vec<_> = (0..1000)
        .map(|i| {
            let share = (i * 619 % 1000) as f64 / 1000.0;
            Point::from_cylindrical(a + (b - a) * share, share, 0.0)
        })
        .collect();
    bencher.bench(|| {
        let states = points.iter().filter_map(|p| tube.at(black_box(*p)).ok());
        states.map(|s| s.stress.xx).sum::<f64>()
    });
}

fn compressible(name: &str) -> CompressibleTubeProblem {
    let law = |bulk| Compressible::Split {
        law: Arc::new(MooneyRivlin {
            c10: 0.15,
            c01: 0.05,
        }),
        volumetric: Volumetric {
            form: VolumetricForm::Quadratic,
            bulk,
        },
    };
    let layers = match name {
        "thick" => vec![(800.0, law(400.0))],
        "three-layers" => vec![(9.0, law(400.0)), (10.0, law(4.0)), (12.0, law(4e6))],
        _ => vec![(12.0, law(400.0))],
    };
    CompressibleTubeProblem {
        inner_radius: 8.0,
        layers,
        ends: Ends::Closed,
        drive: Drive::InnerPressure(0.03),
        outer_pressure: 0.0,
        load: Load::Follower,
    }
}

const COMPRESSIBLE: [&str; 3] = ["one-layer", "three-layers", "thick"];

#[divan::bench(args = COMPRESSIBLE)]
fn set_up_compressible(bencher: Bencher, name: &str) {
    let given = compressible(name);
    bencher.bench(|| CompressibleTube::solve(black_box(&given)).expect("solved"));
}

/// A thousand points through the wall: divide by a thousand.
#[divan::bench(args = COMPRESSIBLE)]
fn thousand_points_compressible(bencher: Bencher, name: &str) {
    let given = compressible(name);
    let tube = CompressibleTube::solve(&given).expect("solved");
    let outer = given.layers.last().map_or(0.0, |l| l.0);
    let points: Vec<_> = (0..1000)
        .map(|i| {
            let share = (i * 619 % 1000) as f64 / 1000.0;
            Point::from_cylindrical(8.0 + (outer - 8.0) * share, share, 0.0)
        })
        .collect();
    bencher.bench(|| {
        let states = points.iter().filter_map(|p| tube.at(black_box(*p)).ok());
        states.map(|s| s.stress.xx).sum::<f64>()
    });
}
