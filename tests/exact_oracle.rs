//! The exact tubes against many-digit values made by programs that share no formula with them
//! (tests/oracles/tube/README.md): at least 12 digits in every quantity of every case.
//!
//! Errors are relative: displacements to the larger wall displacement of the case, stresses to the largest stress
//! of the case, forces to the largest of its parts. Each test prints its worst case (`--nocapture`).
//! Red when any formula changes by one part in 1e12 in any case, or a branch or a limit is missed.

use std::collections::BTreeMap;
use std::f64::consts::PI;
use std::path::Path;
use truebore::exact::{Ends, ExactSolution, Limit, Parameters, PressurisedTube, build};
use truebore::materials::{self, Material};
use truebore::mechanics::Point;

type Row = BTreeMap<String, String>;

fn rows(file: &str) -> Vec<Row> {
    let path = Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("tests/oracles/tube")
        .join(file);
    let mut reader = csv::Reader::from_path(path).unwrap();
    let rows: Vec<Row> = reader.deserialize().map(|r| r.unwrap()).collect();
    assert!(rows.len() > 50, "{file} is complete");
    rows
}

fn number(row: &Row, column: &str) -> f64 {
    row[column]
        .parse()
        .unwrap_or_else(|_| panic!("{column} of {row:?}"))
}

fn filled(row: &Row, column: &str) -> Option<f64> {
    row.get(column)
        .filter(|text| !text.is_empty())
        .map(|_| number(row, column))
}

fn material(row: &Row) -> Material {
    let columns = ["mu", "c10", "c01", "E", "nu"];
    let values: Vec<_> = columns
        .iter()
        .filter_map(|c| Some((c.to_string(), filled(row, c)?)))
        .collect();
    let name = row.get("material").map_or("linear-elastic", String::as_str);
    materials::build(name, &values).unwrap()
}

fn parameters(row: &Row, inner_pressure: f64) -> Parameters {
    let ends = match row["ends"].as_str() {
        "plane-strain" => Ends::PlaneStrain,
        "closed" => Ends::Closed,
        "plane-stress" => Ends::PlaneStress,
        "fixed-stretch" => Ends::FixedStretch {
            axial_stretch: number(row, "given"),
        },
        "generalized-plane-strain" => Ends::GeneralizedPlaneStrain {
            axial_force: number(row, "given"),
        },
        other => panic!("{other}"),
    };
    Parameters {
        inner_radius: number(row, "A"),
        outer_radius: number(row, "B"),
        ends,
        material: material(row),
        inner_pressure,
        outer_pressure: number(row, "Po"),
    }
}

fn total(tube: &dyn ExactSolution, name: &str) -> f64 {
    let found = tube.totals().iter().find(|t| t.name == name).unwrap();
    found.value.clone().unwrap()
}

/// The worst error of each quantity over all cases.
#[derive(Default)]
struct Worst(BTreeMap<&'static str, (f64, String)>);

impl Worst {
    fn see(&mut self, what: &'static str, case: &str, error: f64) {
        assert!(error.is_finite(), "{what} of {case}: {error}");
        let worst = self.0.entry(what).or_insert((-1.0, String::new()));
        if error > worst.0 {
            *worst = (error, case.to_string());
        }
    }

    fn judge(&self, allowed: f64) {
        for (what, (error, case)) in &self.0 {
            println!(
                "{what:16} {error:9.2e} = {:4.1} digits  {case}",
                -error.max(1e-17).log10()
            );
        }
        for (what, (error, case)) in &self.0 {
            assert!(*error <= allowed, "{what} of {case}: {error:e}");
        }
    }
}

/// Distance from `exact` in units of `scale`; exact where both are zero.
fn error(got: f64, exact: f64, scale: f64) -> f64 {
    if got == exact {
        0.0
    } else {
        (got - exact).abs() / scale
    }
}

fn compare(name: &str, states: &str, points: &str) -> (Worst, Worst, f64) {
    let (mut easy, mut hard) = (Worst::default(), Worst::default());
    let mut bound_ratio = 0.0_f64;
    let mut stations: BTreeMap<String, Vec<Row>> = BTreeMap::new();
    for row in rows(points) {
        stations.entry(row["id"].clone()).or_default().push(row);
    }
    for row in rows(states) {
        let id = row["id"].as_str();
        let given = parameters(&row, number(&row, "Pi"));
        let tube = build(name, &given).unwrap_or_else(|refusal| panic!("{id}: {refusal}"));
        // close to a limit the load's own last digit moves the state: numerics.md, conditioning
        let worst = if tube.bound().displacement.max(tube.bound().stress) > 1e-12
            || id.contains("0.9999")
        {
            &mut hard
        } else {
            &mut easy
        };
        let stations = &stations[id];
        let largest = |columns: &[&str]| {
            let all = stations
                .iter()
                .flat_map(|s| columns.iter().map(move |c| number(s, c).abs()));
            all.fold(0.0_f64, f64::max)
        };
        let stress = largest(&["srr", "stt", "szz"]);
        let displacement = largest(&["u_r"]);
        let energy = largest(&["W"]);
        let mut errors: Vec<(&'static str, f64)> = Vec::new();
        let small = name == "lame-tube";
        let (a, area) = (given.inner_radius, tube.body().section_area().unwrap());
        let u_a = tube.at(Point::new(a, 0.0, 1.0)).unwrap().displacement;
        errors.push(("u_a", error(u_a.x, number(&row, "u_a"), displacement)));
        if small {
            let strain = number(&row, "axial_strain");
            errors.push((
                "axial strain",
                error(u_a.z, strain, strain.abs().max(displacement / a)),
            ));
        } else {
            errors.push((
                "a",
                error(
                    total(&*tube, "inner_radius"),
                    number(&row, "a"),
                    number(&row, "a"),
                ),
            ));
            errors.push((
                "b",
                error(
                    total(&*tube, "outer_radius"),
                    number(&row, "b"),
                    number(&row, "b"),
                ),
            ));
            errors.push((
                "lz",
                error(
                    total(&*tube, "axial_stretch"),
                    number(&row, "lz"),
                    number(&row, "lz"),
                ),
            ));
        }
        let force = number(&row, "axial_force");
        let parts = stress
            * area.max(if small {
                0.0
            } else {
                PI * number(&row, "b").powi(2)
            });
        errors.push((
            "axial force",
            error(total(&*tube, "axial_force"), force, force.abs().max(parts)),
        ));
        let stored = number(&row, "strain_energy");
        errors.push((
            "strain energy",
            error(total(&*tube, "strain_energy"), stored, stored),
        ));
        for (i, station) in stations.iter().enumerate() {
            let angle = 0.3 + i as f64;
            let radius = number(station, "R");
            let on_axis = tube.at(Point::new(radius, 0.0, 0.0)).unwrap();
            errors.push((
                "u_r",
                error(on_axis.displacement.x, number(station, "u_r"), displacement),
            ));
            errors.push((
                "srr",
                error(on_axis.local_stress.xx, number(station, "srr"), stress),
            ));
            errors.push((
                "stt",
                error(on_axis.local_stress.yy, number(station, "stt"), stress),
            ));
            errors.push((
                "szz",
                error(on_axis.local_stress.zz, number(station, "szz"), stress),
            ));
            errors.push(("p", error(on_axis.pressure, number(station, "p"), stress)));
            errors.push((
                "W",
                error(on_axis.energy_density, number(station, "W"), energy),
            ));
            if !small {
                let [lr, lt, _] = on_axis.stretches;
                errors.push(("lambda_r", error(lr, number(station, "lambda_r"), lr)));
                errors.push(("lambda_t", error(lt, number(station, "lambda_t"), lt)));
                let turned = Point::from_cylindrical(radius, angle, 0.0);
                let state = tube.at(turned).unwrap();
                let f = state.deformation();
                errors.push((
                    "det F",
                    error(f.determinant(), 1.0, f.abs().max().powi(3).max(1.0)),
                ));
                let back = state.stress.cartesian_to_cylindrical(turned.direction());
                // the turned point's radius is rounded: a thin wall loses its own digits there
                let steep = given.outer_radius / (given.outer_radius - a);
                errors.push((
                    "turned stt",
                    error(back.yy, number(station, "stt"), stress * steep),
                ));
            }
        }
        for (what, e) in errors {
            worst.see(what, id, e);
            if ["u_a", "u_r"].contains(&what) {
                bound_ratio = bound_ratio.max(e / tube.bound().displacement);
            }
            if ["srr", "stt", "szz", "p"].contains(&what) {
                bound_ratio = bound_ratio.max(e / tube.bound().stress);
            }
            if ["a", "b", "lz", "axial force", "strain energy"].contains(&what) {
                bound_ratio = bound_ratio.max(e / tube.bound().totals);
            }
        }
    }
    (easy, hard, bound_ratio)
}

#[test]
fn pressurised_tube_states() {
    let (easy, hard, bound_ratio) =
        compare("pressurised-tube", "tube_states.csv", "tube_points.csv");
    println!("actual error against stated bound: at most {bound_ratio:.2}");
    // 12 digits are promised; measured 14.3, and 13.5 within 1e-4 of a limit
    easy.judge(2e-14);
    println!("near a limit:");
    hard.judge(1e-13);
    assert!(bound_ratio <= 1.0);
}

#[test]
fn lame_tube_states() {
    let (easy, hard, bound_ratio) = compare("lame-tube", "lame_states.csv", "lame_points.csv");
    println!("actual error against stated bound: at most {bound_ratio:.2}");
    // measured 14.8 digits
    easy.judge(5e-15);
    assert!(hard.0.is_empty() && bound_ratio <= 1.0);
}

#[test]
fn limits_of_the_inner_pressure() {
    let mut worst = Worst::default();
    for row in rows("tube_limits.csv") {
        let id = format!("{} {}", row["id"], row["ends"]);
        let outer = number(&row, "Po");
        let tube =
            PressurisedTube::new(&parameters(&row, outer)).unwrap_or_else(|r| panic!("{id}: {r}"));
        match (row["kind"].as_str(), *tube.limit()) {
            (
                "maximum",
                Limit::Maximum {
                    inner_pressure,
                    inner_radius,
                    axial_stretch,
                },
            ) => {
                worst.see(
                    "P max",
                    &id,
                    error(inner_pressure, number(&row, "Pi"), number(&row, "Pi")),
                );
                worst.see(
                    "a",
                    &id,
                    error(inner_radius, number(&row, "a"), number(&row, "a")),
                );
                worst.see(
                    "lz",
                    &id,
                    error(axial_stretch, number(&row, "lz"), number(&row, "lz")),
                );
            }
            ("asymptote", Limit::Asymptote { inner_pressure }) => {
                worst.see(
                    "P asymptote",
                    &id,
                    error(inner_pressure, number(&row, "Pi"), number(&row, "Pi")),
                );
            }
            ("none", Limit::None { .. }) => {}
            (kind, found) => panic!("{id} is {kind}, found {found:?}"),
        }
        let Some(limit) = filled(&row, "Pi") else {
            continue;
        };
        let above = outer + (limit - outer) * (1.0 + 1e-9);
        let refusal = PressurisedTube::new(&parameters(&row, above)).expect_err(&id);
        assert_eq!(refusal.parameter, "inner-pressure");
        assert!(
            refusal.message.contains(&format!("{limit:.9}")[..7]),
            "{id}: {refusal}"
        );
        let below = outer + (limit - outer) * (1.0 - 1e-6);
        let close =
            PressurisedTube::new(&parameters(&row, below)).unwrap_or_else(|r| panic!("{id}: {r}"));
        assert!(close.bound().displacement > 1e-14, "{id}");
    }
    // where a maximum is flat its place is known less well than its height: limit-108, at 11 times the bore
    let mut places = Worst::default();
    for what in ["a", "lz"] {
        let (error, case) = worst.0.remove(what).expect("seen");
        places.see(what, &case, error);
    }
    places.judge(1e-11);
    worst.judge(1e-13);
}
