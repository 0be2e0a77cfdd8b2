//! Every exact solution against many-digit values made by a second route (tests/oracles/library/NAME/generate.py).
//!
//! The cases are read as a user's suite is, so that names, units and defaults are checked with the numbers. An error is
//! relative to the largest number of its kind in the case (displacement, stress, body force), a total to itself. A folder
//! may hold `digits.csv` (`case,kind,digits,why`) where fewer than [`DIGITS`] digits can be had, and why.

use std::collections::BTreeMap;
use std::path::Path;
use truebore::exact::{ExactSolution, Kinematics, State};
use truebore::mechanics::Point;
use truebore::run::plan::{self, CasePlan};
use truebore::run::point_table::nominal_traction;

/// What is demanded where nothing else is said.
const DIGITS: f64 = 12.0;

/// One value of the oracle.
struct Row {
    quantity: String,
    point: Option<Point>,
    value: f64,
}

fn rows(folder: &Path) -> BTreeMap<String, Vec<Row>> {
    let mut reader = csv::Reader::from_path(folder.join("values.csv")).unwrap();
    let mut cases: BTreeMap<String, Vec<Row>> = BTreeMap::new();
    for record in reader.records() {
        let record = record.unwrap();
        let number = |i: usize| record[i].parse::<f64>().unwrap();
        let point = (!record[2].is_empty()).then(|| Point::new(number(2), number(3), number(4)));
        cases.entry(record[0].to_string()).or_default().push(Row {
            quantity: record[1].to_string(),
            point,
            value: number(5),
        });
    }
    cases
}

/// (case or `*`, kind or `*`) to the digits that can be had.
fn demanded(folder: &Path) -> BTreeMap<(String, String), f64> {
    let Ok(mut reader) = csv::Reader::from_path(folder.join("digits.csv")) else {
        return BTreeMap::new();
    };
    let rows = reader.records().map(|record| {
        let record = record.unwrap();
        assert!(!record[3].is_empty(), "a reason for fewer digits");
        let key = (record[0].to_string(), record[1].to_string());
        (key, record[2].parse().unwrap())
    });
    rows.collect()
}

fn kind(quantity: &str) -> &'static str {
    match quantity {
        "ux" | "uy" | "uz" | "u_r" => "displacement",
        "sxx" | "syy" | "szz" | "sxy" | "syz" | "szx" | "srr" | "stt" | "srt" | "stz" | "szr"
        | "srz" | "p" => "stress",
        "bx" | "by" | "bz" => "body-force",
        "lambda_r" | "lambda_t" | "lambda_z" => "stretch",
        "J" => "J",
        "W" => "W",
        traction if traction.contains('@') => "stress",
        _ => "total",
    }
}

/// Nominal traction P N, as `exact --loads` tables it.
fn traction(exact: &dyn ExactSolution, state: &State, normal: &str) -> [f64; 3] {
    let n = normal.split(' ').map(|c| c.parse::<f64>().unwrap());
    let n = nalgebra::Vector3::from_iterator(n);
    nominal_traction(state, exact.kinematics(), n).unwrap()
}

fn computed(exact: &dyn ExactSolution, row: &Row) -> Result<f64, String> {
    let Some(point) = row.point else {
        let name = row.quantity.as_str();
        let total = exact.totals().iter().find(|t| t.name == name);
        return total.ok_or(format!("no total {name}"))?.value.clone();
    };
    let state = exact.at(point).map_err(|r| r.to_string())?;
    let (u, s, t) = (state.displacement, state.stress, state.local_stress);
    let radial = |x: Point| {
        if exact.body().frame() == truebore::exact::Frame::Spherical {
            x.distance(&Point::new(0.0, 0.0, 0.0))
        } else {
            x.radius()
        }
    };
    let (small, large) = (
        radial(point),
        radial(Point::new(point.x + u[0], point.y + u[1], point.z + u[2])),
    );
    if let Some((component, normal)) = row.quantity.split_once('@') {
        let all = traction(exact, &state, normal);
        return Ok(all[["tx", "ty", "tz"]
            .iter()
            .position(|c| *c == component)
            .unwrap()]);
    }
    let body_force = || exact.body_force(point).map_err(|r| r.to_string());
    Ok(match row.quantity.as_str() {
        "ux" => u[0],
        "uy" => u[1],
        "uz" => u[2],
        // at small strain the component along the radius, which is not how far the radius grows
        "u_r" if exact.kinematics() == Kinematics::SmallStrain => {
            let three = exact.body().frame() == truebore::exact::Frame::Spherical;
            let z = if three { point.z * u[2] } else { 0.0 };
            let along = point.x * u[0] + point.y * u[1] + z;
            if along == 0.0 { 0.0 } else { along / small }
        }
        "u_r" => {
            let three = exact.body().frame() == truebore::exact::Frame::Spherical;
            let x = [point.x, point.y, if three { point.z } else { 0.0 }];
            let v = [u[0], u[1], if three { u[2] } else { 0.0 }];
            if exact.kinematics() == Kinematics::SmallStrain || small == 0.0 {
                let along: f64 = (0..3).map(|i| x[i] * v[i]).sum();
                if small == 0.0 { 0.0 } else { along / small }
            } else {
                let growth: f64 = (0..3).map(|i| (2.0 * x[i] + v[i]) * v[i]).sum();
                growth / (small + large)
            }
        }
        "sxx" => s.xx,
        "syy" => s.yy,
        "szz" => s.zz,
        "sxy" => s.xy,
        "syz" => s.yz,
        "szx" => s.zx,
        "srr" => t.xx,
        "stt" => t.yy,
        "srt" => t.xy,
        "stz" => t.yz,
        "szr" | "srz" => t.zx,
        "p" => state.pressure,
        "J" => state.volume_ratio,
        "W" => state.energy_density,
        "lambda_r" => state.stretches[0],
        "lambda_t" => state.stretches[1],
        "lambda_z" => state.stretches[2],
        "bx" => body_force()?[0],
        "by" => body_force()?[1],
        "bz" => body_force()?[2],
        other => return Err(format!("unknown quantity {other}")),
    })
}

/// What an error of this row is relative to.
fn scale(row: &Row, rows: &[Row], exact: &dyn ExactSolution) -> f64 {
    let largest = |of: &str| {
        let same = rows.iter().filter(|r| kind(&r.quantity) == of);
        same.fold(0.0_f64, |m, r| m.max(r.value.abs()))
    };
    match kind(&row.quantity) {
        whole @ ("displacement" | "stress" | "body-force" | "W") => largest(whole),
        _ if row.quantity == "axial_force" => {
            // the balance of stresses on the section
            let area = exact.body().section_area().unwrap_or(0.0);
            row.value.abs().max(largest("stress") * area)
        }
        _ => row.value.abs(),
    }
}

fn bound_of(exact: &dyn ExactSolution, kind: &str) -> f64 {
    let bound = exact.bound();
    match kind {
        "displacement" | "stretch" => bound.displacement,
        "stress" | "body-force" | "W" => bound.stress,
        _ => bound.totals,
    }
}

/// Worst error by kind, worst share of the stated bound, and what is wrong.
#[derive(Default)]
struct Tally {
    rows: usize,
    worst: BTreeMap<&'static str, (f64, String)>,
    bound: (f64, String),
    faults: Vec<String>,
}

fn check_case(
    case: &CasePlan,
    rows: &[Row],
    demanded: &BTreeMap<(String, String), f64>,
    tally: &mut Tally,
) {
    let exact = case.exact.as_ref();
    for row in rows {
        tally.rows += 1;
        let what = format!("{} {} {:?}", case.id, row.quantity, row.point);
        let value = match computed(exact, row) {
            Ok(value) => value,
            Err(why) => {
                tally.faults.push(format!("{what}: {why}"));
                continue;
            }
        };
        let (off, scale) = ((value - row.value).abs(), scale(row, rows, exact));
        let error = if scale > 0.0 { off / scale } else { off };
        let kind = kind(&row.quantity);
        let digits = ["*", case.id.as_str()]
            .iter()
            .flat_map(|id| {
                ["*", kind, row.quantity.as_str()].map(|k| (id.to_string(), k.to_string()))
            })
            .filter_map(|key| demanded.get(&key))
            .fold(DIGITS, |m, d| m.min(*d));
        if error.is_nan() || error > 10f64.powf(-digits) {
            tally.faults.push(format!(
                "{what}: {value:e}, not {:e} (off by {error:.1e}, {digits} digits demanded)",
                row.value
            ));
        }
        let share = error / bound_of(exact, kind).max(f64::EPSILON);
        if share > tally.bound.0 {
            tally.bound = (share, what.clone());
        }
        let worst = tally.worst.entry(kind).or_insert((-1.0, String::new()));
        if error > worst.0 {
            *worst = (error, what);
        }
    }
}

// Red when any formula, sign, branch, unit or name of any solution is wrong.
#[test]
fn every_solution_agrees_with_its_oracle() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/oracles/library");
    let only = std::env::var("TRUEBORE_ORACLE").unwrap_or_default();
    let mut folders: Vec<_> = std::fs::read_dir(root)
        .unwrap()
        .map(|entry| entry.unwrap().path())
        .filter(|path| path.join("values.csv").exists())
        .filter(|path| path.to_string_lossy().contains(&only))
        .collect();
    folders.sort();
    let mut faults = Vec::new();
    let mut all = 0;
    for folder in folders {
        let name = folder.file_name().unwrap().to_string_lossy().to_string();
        let text = std::fs::read_to_string(folder.join("suite.yaml")).unwrap();
        let plan = match plan::read(&text, "suite.yaml") {
            Ok(plan) => plan,
            Err(findings) => {
                faults.extend(findings.iter().take(5).map(|f| format!("{name}: {f}")));
                continue;
            }
        };
        let demanded = demanded(&folder);
        let mut tally = Tally::default();
        for (id, rows) in rows(&folder) {
            match plan.cases.iter().find(|case| case.id == id) {
                Some(case) => check_case(case, &rows, &demanded, &mut tally),
                None => tally.faults.push(format!("no case {id} in the suite")),
            }
        }
        all += tally.rows;
        println!("{name}: {} values", tally.rows);
        for (kind, (error, what)) in &tally.worst {
            println!(
                "  {kind:<13} {:5.1} digits   {what}",
                -error.max(1e-17).log10()
            );
        }
        println!(
            "  {:.2} of the stated bound   {}",
            tally.bound.0, tally.bound.1
        );
        if tally.bound.0 > 1.0 {
            tally.faults.push(format!(
                "beyond the stated bound, {:.2} of it: {}",
                tally.bound.0, tally.bound.1
            ));
        }
        let count = tally.faults.len();
        faults.extend(tally.faults.iter().take(8).map(|f| format!("{name}: {f}")));
        if count > 8 {
            faults.push(format!("{name}: {} more", count - 8));
        }
    }
    println!("{all} values");
    assert!(faults.is_empty(), "\n{}", faults.join("\n"));
    assert!(!only.is_empty() || all >= 300, "{all} values");
}
