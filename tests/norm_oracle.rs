//! Norms of known errors on small meshes of a quarter ring, against values made with an FE library and with a
//! second program of its own (tests/oracles/norms/README.md).
//!
//! Red when a shape function, a map, a node order, a quadrature rule, a weight or the double count of shears is
//! wrong, or when the exact field is interpolated from nodes instead of evaluated. Prints the worst agreement of
//! each mesh (`--nocapture`).

mod common;

use common::{case, finest, judged, repository};
use truebore::verdict::outcome::{CaseOutcome, Kind, Outcome};

const MESHES: [&str; 9] = [
    "tri3",
    "tri6-curved",
    "quad4",
    "quad8-straight",
    "quad9-curved",
    "hex8",
    "hex20-straight",
    "hex27-curved",
    "tet10-curved",
];

/// Agreement asked for, relative. Measured: 7e-10 in three dimensions (tet10 and hex8, gradient norm), 3e-11 in two;
/// norms over integration points, largest displacement and volume 3e-14.
const AGREEMENT: f64 = 1e-9;

/// What the wrong variants must differ by; the closest, the relative stress norm with each shear once, does by 1.6e-4.
const APART: f64 = 1e-4;

struct Row {
    mesh: String,
    measure: String,
    kind: String,
    value: f64,
}

fn rows() -> Vec<Row> {
    let path = repository("tests/oracles/norms/norm_values.csv");
    let mut reader = csv::Reader::from_path(path).unwrap();
    let rows: Vec<Row> = reader
        .records()
        .map(|record| {
            let record = record.unwrap();
            Row {
                mesh: record[0].to_string(),
                measure: record[1].to_string(),
                kind: record[2].to_string(),
                value: record[3].parse().unwrap(),
            }
        })
        .collect();
    assert_eq!(rows.len(), 172, "the oracle is complete");
    rows
}

fn measured() -> Outcome {
    let mut suite = String::from(
        "suite: oracle\nunits: { length: m, stress: Pa }\nmaterials: { rubber: { neo-Hookean: { mu: 1 } } }\n\
         accept: [{ error: displacement-L2, at-most: 1 }]\ncases:\n",
    );
    for mesh in MESHES {
        suite.push_str(&format!(
            "  - id: {mesh}\n    problem: {{ pressurised-tube: {{ inner-radius: 1, outer-radius: 2, ends: plane-strain, \
             material: rubber, inner-pressure: 0.428228409096502 }} }}\n    section: 1/4\n    results: {mesh}\n"
        ));
    }
    judged(&suite, &repository("tests/oracles/norms"))
}

/// Our number for a row of the oracle; `None` for those that no report carries.
fn ours(case: &CaseOutcome, measure: &str, kind: &str) -> Option<f64> {
    let kind = if kind.ends_with("relative") {
        Kind::Relative
    } else {
        Kind::Absolute
    };
    match measure {
        "volume" => case.levels[0].volume,
        "volume-of-points" => None,
        _ => Some(finest(case, measure, kind)),
    }
}

fn apart(a: f64, b: f64) -> f64 {
    ((a - b) / b).abs()
}

#[test]
fn norms_agree_with_an_fe_library() {
    let outcome = measured();
    let mut compared = 0;
    let mut worst_of_all: f64 = 0.0;
    for mesh in MESHES {
        let mut worst = (0.0, String::new());
        for row in rows()
            .iter()
            .filter(|row| row.mesh == mesh && !row.kind.starts_with("wrong"))
        {
            let Some(number) = ours(case(&outcome, mesh), &row.measure, &row.kind) else {
                continue;
            };
            compared += 1;
            let gap = apart(number, row.value);
            println!("{mesh:15} {:22} {:9} {gap:.1e}", row.measure, row.kind);
            if gap >= worst.0 {
                worst = (gap, format!("{} {}", row.measure, row.kind));
            }
        }
        println!("{mesh:15} worst {:.1e} {}", worst.0, worst.1);
        worst_of_all = worst_of_all.max(worst.0);
    }
    assert!(worst_of_all < AGREEMENT, "{worst_of_all:e}");
    assert_eq!(compared, 9 * 15);
}

/// The test above would notice each of the usual faults: our numbers are not those of the faulty programs.
#[test]
fn norms_disagree_with_faulty_programs() {
    let outcome = measured();
    let rows = rows();
    let wrong: Vec<_> = rows
        .iter()
        .filter(|row| row.kind.starts_with("wrong"))
        .collect();
    assert_eq!(wrong.len(), 28);
    for row in wrong {
        let number = ours(case(&outcome, &row.mesh), &row.measure, &row.kind).unwrap();
        let gap = apart(number, row.value);
        assert!(
            gap > APART,
            "{} {} {}: {gap:e}",
            row.mesh,
            row.measure,
            row.kind
        );
    }
}
