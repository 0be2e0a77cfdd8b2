//! Compressible tubes, layered tubes and spheres against many-digit states by shooting in displacement form, a program that
//! shares no formula with the solutions (tests/oracles/library/compressible-tube and -sphere).
//!
//! Errors are relative: displacements to the largest of the case, stresses to the largest stress, J, W and stretches to
//! themselves, totals too (the force to the largest stress times the section). Each test prints the digits of every
//! case (`--nocapture`). Cases of laws the catalogue does not have are left out, and their number is held.

use serde_json::Value;
use std::collections::BTreeMap;
use std::f64::consts::PI;
use std::path::Path;
use truebore::exact::compressible::{
    CompressibleSphere, CompressibleSphereProblem, CompressibleTube, CompressibleTubeProblem,
    Drive, Load,
};
use truebore::exact::{Ends, ErrorBound, ExactSolution, State, Total};
use truebore::materials::{self, Compressible, Constant, Material, Volumetric, VolumetricForm};
use truebore::mechanics::Point;

/// Quantity, reference point if it has one, value.
type Rows = Vec<(String, Option<Point>, f64)>;

fn folder(name: &str) -> std::path::PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("tests/oracles/library")
        .join(name)
}

fn suite(name: &str) -> Value {
    let text = std::fs::read_to_string(folder(name).join("suite.yaml")).unwrap();
    serde_yaml::from_str(&text).unwrap()
}

fn values(name: &str) -> BTreeMap<String, Rows> {
    let mut reader = csv::Reader::from_path(folder(name).join("values.csv")).unwrap();
    let mut all: BTreeMap<String, Rows> = BTreeMap::new();
    for row in reader.records() {
        let row = row.unwrap();
        let number = |i: usize| row[i].parse::<f64>().ok();
        let point = number(2).map(|x| Point::new(x, number(3).unwrap(), number(4).unwrap()));
        let rows = all.entry(row[0].to_string()).or_default();
        rows.push((row[1].to_string(), point, number(5).unwrap()));
    }
    all
}

/// The first key of a block and what stands below it.
fn only(value: &Value) -> (&str, &Value) {
    let (name, inner) = value.as_object().unwrap().iter().next().unwrap();
    (name, inner)
}

fn number(block: &Value, name: &str) -> Option<f64> {
    block.get(name).and_then(Value::as_f64)
}

fn constant(value: &Value) -> Constant {
    match value {
        Value::Array(list) => Constant::List(list.iter().map(|v| v.as_f64().unwrap()).collect()),
        other => Constant::Number(other.as_f64().unwrap()),
    }
}

/// `None` when the catalogue does not have the law.
fn law(suite: &Value, name: &Value) -> Option<Compressible> {
    let (law, constants) = only(&suite["materials"][name.as_str().unwrap()]);
    materials::find(law)?;
    let constants = constants.as_object().unwrap();
    let given: Vec<_> = constants
        .iter()
        .filter(|(name, _)| *name != "volumetric")
        .map(|(name, value)| (name.clone(), constant(value)))
        .collect();
    let mut material = materials::build(law, &given).unwrap();
    if let Some(volumetric) = constants.get("volumetric") {
        let (form, bulk) = only(volumetric);
        let volumetric = Volumetric {
            form: VolumetricForm::from_name(form).unwrap(),
            bulk: number(bulk, "K").unwrap(),
        };
        material = material.with_volumetric(volumetric).unwrap();
    }
    match material {
        Material::Compressible(law) => Some(law),
        other => panic!("{other:?}"),
    }
}

fn layers(suite: &Value, block: &Value) -> Option<(f64, Vec<(f64, Compressible)>)> {
    let Some(radii) = block.get("radii") else {
        let law = law(suite, &block["material"])?;
        let outer = number(block, "outer-radius").unwrap();
        return Some((number(block, "inner-radius").unwrap(), vec![(outer, law)]));
    };
    let radii: Vec<f64> = radii
        .as_array()
        .unwrap()
        .iter()
        .map(|r| r.as_f64().unwrap())
        .collect();
    let laws: Option<Vec<_>> = block["materials"]
        .as_array()
        .unwrap()
        .iter()
        .map(|m| law(suite, m))
        .collect();
    Some((radii[0], radii[1..].iter().copied().zip(laws?).collect()))
}

fn ends(block: &Value) -> Ends {
    match &block["ends"] {
        Value::String(word) if word == "plane-strain" => Ends::PlaneStrain,
        Value::String(word) if word == "closed" => Ends::Closed,
        other => match only(other) {
            ("fixed-stretch", inner) => Ends::FixedStretch {
                axial_stretch: number(inner, "axial-stretch").unwrap(),
            },
            ("generalized-plane-strain", inner) => Ends::GeneralizedPlaneStrain {
                axial_force: number(inner, "axial-force").unwrap(),
            },
            (word, _) => panic!("{word}"),
        },
    }
}

fn drive(block: &Value) -> Drive {
    if let Some(stretch) = number(block, "inner-wall-stretch") {
        return Drive::InnerWallStretch(stretch);
    }
    if let Some(volume) = number(block, "enclosed-volume") {
        return Drive::EnclosedVolume(volume);
    }
    Drive::InnerPressure(number(block, "inner-pressure").unwrap_or(0.0))
}

/// The number a state gives under the name of the oracle; points of local axes lie anywhere around the axis.
fn of_state(name: &str, state: &State, point: Point) -> f64 {
    let place = nalgebra::Vector3::new(point.x, point.y, point.z);
    match name {
        "ux" => state.displacement.x,
        "uy" => state.displacement.y,
        "uz" => state.displacement.z,
        "u_r" if place.z == 0.0 => state.displacement.dot(&place) / place.norm(),
        "sxx" => state.stress.xx,
        "syy" => state.stress.yy,
        "szz" => state.stress.zz,
        "sxy" => state.stress.xy,
        "syz" => state.stress.yz,
        "szx" => state.stress.zx,
        "srr" => state.local_stress.xx,
        "stt" => state.local_stress.yy,
        "p" => state.pressure,
        "J" => state.volume_ratio,
        "W" => state.energy_density,
        "lambda_r" => state.stretches[0],
        "lambda_t" => state.stretches[1],
        other => panic!("{other}"),
    }
}

/// Worst relative errors of a case: displacement, stress, J, W and stretches, totals.
fn errors(rows: &Rows, totals: &[Total], section: f64, at: impl Fn(Point) -> State) -> [f64; 4] {
    let kind = |name: &str| match name {
        "ux" | "uy" | "uz" | "u_r" => 0,
        "p" => 1,
        _ if name.starts_with('s') && name.len() == 3 => 1,
        _ => 2,
    };
    let mut size = [0.0_f64; 2];
    for (name, point, value) in rows {
        if point.is_some() && kind(name) < 2 {
            size[kind(name)] = size[kind(name)].max(value.abs());
        }
    }
    let mut worst = [0.0_f64; 4];
    for (name, point, value) in rows {
        let (kind, error) = match point {
            Some(point) => {
                let got = of_state(name, &at(*point), *point);
                let kind = kind(name);
                let scale = if kind < 2 { size[kind] } else { value.abs() };
                (kind, (got - value).abs() / scale)
            }
            None => {
                let found = totals.iter().find(|t| t.name == name).unwrap();
                let got = found.value.clone().unwrap();
                let scale = if name == "axial_force" {
                    size[1] * section
                } else {
                    value.abs()
                };
                (3, (got - value).abs() / scale)
            }
        };
        assert!(!error.is_nan(), "{name} {point:?}");
        worst[kind] = worst[kind].max(error);
    }
    worst
}

/// Prints a case and holds it to its own stated bound and to the digits wanted.
fn judge(id: &str, worst: [f64; 4], bound: ErrorBound) {
    let digits = worst.map(|e| -e.max(1e-16).log10());
    println!(
        "{id:32} digits u {:.1} stress {:.1} J, W, stretch {:.1} totals {:.1}",
        digits[0], digits[1], digits[2], digits[3]
    );
    assert!(digits.iter().all(|d| *d >= 12.0), "{id}: {worst:?}");
    // sizes are those of the points, not of the whole wall: hence the factor
    let stated = [
        bound.displacement,
        bound.stress,
        bound.stress.max(bound.displacement),
        bound.totals,
    ];
    for (error, stated) in worst.iter().zip(stated) {
        assert!(*error <= 4.0 * stated, "{id}: {worst:?} {stated:?}");
    }
}

#[test]
fn tubes() {
    let (suite, values) = (suite("compressible-tube"), values("compressible-tube"));
    let mut compared = 0;
    for case in suite["cases"].as_array().unwrap() {
        let id = case["id"].as_str().unwrap();
        let (_, block) = only(&case["problem"]);
        let Some((inner_radius, layers)) = layers(&suite, block) else {
            println!("{id}: a law the catalogue does not have");
            continue;
        };
        let outer = layers.last().unwrap().0;
        let given = CompressibleTubeProblem {
            inner_radius,
            layers,
            ends: ends(block),
            drive: drive(block),
            outer_pressure: number(block, "outer-pressure").unwrap_or(0.0),
            load: match block.get("load") {
                Some(_) => Load::Dead,
                None => Load::Follower,
            },
        };
        let tube = CompressibleTube::solve(&given).unwrap();
        let section = PI * (outer - inner_radius) * (outer + inner_radius);
        let worst = errors(&values[id], tube.totals(), section, |point| {
            tube.at(point).unwrap()
        });
        judge(id, worst, tube.bound());
        compared += 1;
    }
    assert!(compared >= 18, "{compared}");
}

#[test]
fn spheres() {
    let (suite, values) = (suite("compressible-sphere"), values("compressible-sphere"));
    let mut compared = 0;
    for case in suite["cases"].as_array().unwrap() {
        let id = case["id"].as_str().unwrap();
        let (_, block) = only(&case["problem"]);
        let Some((inner_radius, layers)) = layers(&suite, block) else {
            println!("{id}: a law the catalogue does not have");
            continue;
        };
        let given = CompressibleSphereProblem {
            inner_radius,
            layers,
            drive: drive(block),
            outer_pressure: number(block, "outer-pressure").unwrap_or(0.0),
        };
        let ball = CompressibleSphere::solve(&given).unwrap();
        let worst = errors(&values[id], ball.totals(), 1.0, |point| {
            ball.at(point).unwrap()
        });
        judge(id, worst, ball.bound());
        compared += 1;
    }
    assert!(compared >= 9, "{compared}");
}
