//! Sound result sets, damaged in every way we could think of: the verdict must never be `pass`.
//!
//! Each attack names what must be said: `refused RULE` (exit status 2), or a verdict of the suite.
//! Red when any damage slips through, or when sound data in another order no longer passes.

#[path = "common/demo.rs"]
mod demo;

use demo::{Demo, Table};
use std::fs;

/// Name, damage, and what must be said.
type Attack = (&'static str, fn(&Demo), &'static str);

/// Runs all attacks of a table; every surprise is listed, not only the first.
fn run(attacks: &[Attack]) {
    let surprises: Vec<String> = std::thread::scope(|scope| {
        let half = attacks.len().div_ceil(2);
        let threads: Vec<_> = attacks
            .chunks(half)
            .map(|part| scope.spawn(move || part.iter().filter_map(surprise).collect::<Vec<_>>()))
            .collect();
        threads
            .into_iter()
            .flat_map(|thread| thread.join().unwrap())
            .collect()
    });
    assert!(surprises.is_empty(), "\n{}", surprises.join("\n"));
}

fn surprise((name, damage, expected): &Attack) -> Option<String> {
    let demo = Demo::new();
    damage(&demo);
    let judged = demo.check();
    let word = judged.word();
    let as_expected = match expected.strip_prefix("refused ") {
        Some(rule) => word == "refused" && judged.stderr.contains(&format!("rule: {rule}\n")),
        None => word == *expected,
    };
    let status = match word.as_str() {
        "pass" => 0,
        "refused" => 2,
        _ => 1,
    };
    if as_expected && judged.status == status {
        return None;
    }
    let said: String = judged.stderr.chars().take(600).collect();
    Some(format!(
        "{name}: {word} (exit {}), expected {expected}\n{said}",
        judged.status
    ))
}

fn last_row(table: &mut Table) -> &mut Vec<String> {
    table.rows.last_mut().unwrap()
}

fn set_last(table: &mut Table, column: &str, cell: &str) {
    let at = table.at(column);
    last_row(table)[at] = cell.to_string();
}

/// Turns rows round in a way that depends on the seed only.
fn shuffle(table: &mut Table, seed: u64) {
    let mut state = seed;
    for i in (1..table.rows.len()).rev() {
        state = state
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        table.rows.swap(i, (state >> 33) as usize % (i + 1));
    }
}

/// The coarse and the fine folder exchanged.
fn swap_levels(demo: &Demo) {
    let aside = demo.folder().join("aside");
    fs::rename(demo.level(1), &aside).unwrap();
    fs::rename(demo.level(2), demo.level(1)).unwrap();
    fs::rename(aside, demo.level(2)).unwrap();
}

fn copy_level(demo: &Demo, from: u32, to: u32) {
    for table in ["nodes", "elements", "points", "totals"] {
        fs::copy(demo.file(from, table), demo.file(to, table)).unwrap();
    }
}

#[test]
fn sound_data_pass_in_any_order() {
    run(&[
        ("untouched", |_| {}, "pass"),
        (
            "rows in another order",
            |demo| {
                for (seed, table) in ["nodes", "elements", "points", "totals"].iter().enumerate() {
                    demo.change_all(table, |t| shuffle(t, 7 + seed as u64));
                }
            },
            "pass",
        ),
        (
            "other node ids",
            |demo| {
                let new_id = |id: f64| 100_003.0 - 7.0 * id;
                demo.change_all("nodes", |t| t.map("node", new_id));
                demo.change_all("elements", |t| {
                    (1..=9).for_each(|i| t.map(&format!("n{i}"), new_id));
                });
            },
            "pass",
        ),
        (
            "other element ids",
            |demo| {
                demo.change_all("elements", |t| t.map("element", |id| 10.0 * id + 3.0));
                demo.change_all("points", |t| t.map("element", |id| 10.0 * id + 3.0));
            },
            "pass",
        ),
        (
            "only the last step",
            |demo| {
                for table in ["nodes", "points", "totals"] {
                    demo.change_all(table, |t| t.keep("step", |step| step == 5.0));
                }
            },
            "pass",
        ),
        (
            "another quarter",
            |demo| {
                // a quarter turn: x to y, y to -x
                demo.change_all("nodes", |t| {
                    t.swap_columns("X", "Y");
                    t.swap_columns("ux", "uy");
                    t.map("X", |v| -v);
                    t.map("ux", |v| -v);
                });
                demo.change_all("points", |t| {
                    t.swap_columns("X", "Y");
                    t.swap_columns("sxx", "syy");
                    t.map("X", |v| -v);
                    t.map("sxy", |v| -v);
                });
            },
            "pass",
        ),
        (
            "in cut files",
            |demo| {
                let whole = fs::read_to_string(demo.file(2, "points")).unwrap();
                let lines: Vec<&str> = whole.lines().skip(1).collect();
                let (header, rows) = lines.split_first().unwrap();
                let (first, second) = rows.split_at(100);
                for (i, part) in [first, second].iter().enumerate() {
                    let text = format!("{header}\n{}\n", part.join("\n"));
                    let name = format!("points.part-000{}.csv", i + 1);
                    fs::write(demo.level(2).join(name), text).unwrap();
                }
                fs::remove_file(demo.file(2, "points")).unwrap();
            },
            "pass",
        ),
    ]);
}

#[test]
fn cells_that_are_no_numbers() {
    run(&[
        (
            "nan displacement",
            |d| d.change(2, "nodes", |t| set_last(t, "ux", "nan")),
            "refused finite-number",
        ),
        (
            "infinite stress",
            |d| d.change(2, "points", |t| set_last(t, "szz", "-inf")),
            "refused finite-number",
        ),
        (
            "stress too large for a double",
            |d| d.change(2, "points", |t| set_last(t, "szz", "1e999")),
            "refused finite-number",
        ),
        (
            "empty displacement",
            |d| d.change(1, "nodes", |t| set_last(t, "uy", "")),
            "refused empty-cell",
        ),
        (
            "empty weight",
            |d| d.change(2, "points", |t| set_last(t, "weight", " ")),
            "refused empty-cell",
        ),
        (
            "nan total",
            |d| {
                d.change(2, "totals", |t| {
                    t.map("value", |v| if v > 0.12 && v < 0.13 { f64::NAN } else { v });
                })
            },
            "refused finite-number",
        ),
        (
            "stars of an overflowing format",
            |d| d.change(2, "points", |t| set_last(t, "p", "*******")),
            "refused number",
        ),
        (
            "Fortran exponents",
            |d| d.change(2, "points", |t| set_last(t, "p", "1.0-103")),
            "refused fortran-exponent",
        ),
        (
            "binary",
            |d| fs::write(d.file(2, "points"), [0u8, 255, 254, 10, 13, 34, 44]).unwrap(),
            "refused utf-8",
        ),
        (
            "an unclosed quote",
            |d| d.change(2, "points", |t| set_last(t, "p", "\"1.0")),
            "refused ragged-row",
        ),
        (
            "header only",
            |d| d.change(2, "points", |t| t.rows.clear()),
            "refused empty-table",
        ),
        (
            "an empty file",
            |d| fs::write(d.file(2, "nodes"), "").unwrap(),
            "refused empty-table",
        ),
    ]);
}

#[test]
fn levels_that_are_not_what_they_should_be() {
    run(&[
        (
            "finest level missing",
            |d| fs::remove_dir_all(d.level(2)).unwrap(),
            "not-run",
        ),
        (
            "coarsest level missing, errors only",
            |d| {
                fs::remove_dir_all(d.level(1)).unwrap();
                d.accept(&["{ error: displacement-L2, at-most: 3e-4 }"]);
            },
            "not-run",
        ),
        (
            "empty folder",
            |d| {
                for table in ["nodes", "elements", "points", "totals"] {
                    fs::remove_file(d.file(1, table)).unwrap();
                }
            },
            "not-run",
        ),
        ("finer level first", swap_levels, "fail"),
        (
            "finer level first, orders only",
            |d| {
                swap_levels(d);
                d.accept(&["{ order: displacement-L2, at-least: 0.1 }"]);
            },
            "inconclusive",
        ),
        (
            "the same mesh twice",
            |d| copy_level(d, 2, 1),
            "inconclusive",
        ),
        (
            "points of the other level",
            |d| {
                fs::copy(d.file(1, "points"), d.file(2, "points")).unwrap();
            },
            "refused point-inside-element",
        ),
        (
            "nodes of the other level",
            |d| {
                fs::copy(d.file(1, "nodes"), d.file(2, "nodes")).unwrap();
            },
            "refused unknown-node",
        ),
        (
            "totals of the other level",
            |d| {
                fs::copy(d.file(1, "totals"), d.file(2, "totals")).unwrap();
            },
            "fail",
        ),
        (
            "only orders, one level",
            |d| {
                d.accept(&["{ order: displacement-L2, within: 0.2 }"]);
                d.edit_suite("levels: [1, 2]", "levels: [2]");
            },
            "inconclusive",
        ),
        ("no criteria", |d| d.accept(&[]), "not-run"),
    ]);
}

#[test]
fn meshes_with_holes_and_repetitions() {
    run(&[
        (
            "half the elements removed",
            |d| {
                d.change(2, "elements", |t| t.keep("element", |id| id <= 4.0));
                d.change(2, "points", |t| t.keep("element", |id| id <= 4.0));
            },
            "refused share-of-body",
        ),
        (
            "one half of the elements twice, the other not at all",
            |d| {
                d.change(2, "elements", |t| {
                    t.keep("element", |id| id <= 4.0);
                    let mut again = t.rows.clone();
                    for row in &mut again {
                        row[0] = (row[0].parse::<u32>().unwrap() + 4).to_string();
                    }
                    t.rows.extend(again);
                });
                d.change(2, "points", |t| {
                    t.keep("element", |id| id <= 4.0);
                    let mut again = t.rows.clone();
                    for row in &mut again {
                        row[0] = (row[0].parse::<u32>().unwrap() + 4).to_string();
                    }
                    t.rows.extend(again);
                });
            },
            "refused boundary-exists",
        ),
        (
            "points of half the elements removed",
            |d| d.change(2, "points", |t| t.keep("element", |id| id > 4.0)),
            "refused element-without-points",
        ),
        (
            "points of half the elements removed, the rest counts twice",
            |d| {
                d.change(2, "points", |t| {
                    t.keep("element", |id| id > 4.0);
                    t.map("weight", |w| 2.0 * w);
                })
            },
            "refused element-without-points",
        ),
        (
            "one point of each element missing",
            |d| d.change(2, "points", |t| t.keep("point", |p| p != 5.0)),
            "refused points-cover-mesh",
        ),
        (
            "duplicated node rows",
            |d| {
                d.change(2, "nodes", |t| t.rows.push(t.rows.last().unwrap().clone()));
            },
            "refused unique-node-ids",
        ),
        (
            "duplicated element rows",
            |d| {
                d.change(2, "elements", |t| {
                    t.rows.push(t.rows.last().unwrap().clone());
                });
            },
            "refused unique-element-ids",
        ),
        (
            "duplicated point rows",
            |d| {
                d.change(2, "points", |t| t.rows.extend(t.rows.clone()));
            },
            "refused unique-points",
        ),
        (
            "a node far away that no element uses",
            |d| {
                d.change(2, "nodes", |t| {
                    let mut far = t.rows.last().unwrap().clone();
                    far[0] = "9999".into();
                    far[1] = "1e6".into();
                    t.rows.push(far);
                });
            },
            "refused node-on-body",
        ),
        (
            "clockwise elements",
            |d| {
                d.change(2, "elements", |t| {
                    t.swap_columns("n2", "n4");
                    t.swap_columns("n5", "n8");
                    t.swap_columns("n6", "n7");
                });
            },
            "refused positive-jacobian",
        ),
        (
            "mid-side nodes in the wrong order",
            |d| d.change(2, "elements", |t| t.swap_columns("n5", "n6")),
            "refused positive-jacobian",
        ),
        (
            "another element than declared",
            |d| {
                d.edit_suite("displacement: quad9", "displacement: quad8");
            },
            "refused declared-element",
        ),
        (
            "both a plain and a cut table",
            |d| {
                fs::copy(d.file(2, "points"), d.level(2).join("points.part-0001.csv")).unwrap();
            },
            "refused ambiguous-files",
        ),
    ]);
}

#[test]
fn the_wrong_body() {
    run(&[
        (
            "nodes in current coordinates",
            |d| {
                d.change_all("nodes", |t| {
                    for row in 0..t.rows.len() {
                        for (x, u) in [("X", "ux"), ("Y", "uy")] {
                            let moved = t.number(row, x) + t.number(row, u);
                            let at = t.at(x);
                            t.rows[row][at] = moved.to_string();
                        }
                    }
                });
            },
            "refused node-on-body",
        ),
        (
            "nodes in metres",
            |d| {
                d.change_all("nodes", |t| {
                    ["X", "Y", "ux", "uy"]
                        .into_iter()
                        .for_each(|c| t.map(c, |v| v * 1e-3));
                });
                d.change_all("points", |t| {
                    ["X", "Y"].into_iter().for_each(|c| t.map(c, |v| v * 1e-3));
                    t.map("weight", |v| v * 1e-6);
                });
            },
            "refused node-on-body",
        ),
        (
            "one per cent too large",
            |d| {
                d.change_all("nodes", |t| {
                    ["X", "Y"].into_iter().for_each(|c| t.map(c, |v| v * 1.01));
                });
                d.change_all("points", |t| {
                    ["X", "Y"].into_iter().for_each(|c| t.map(c, |v| v * 1.01));
                    t.map("weight", |v| v * 1.0201);
                });
            },
            "refused node-on-body",
        ),
        (
            "a quarter declared a half",
            |d| d.edit_suite("section: 1/4", "section: 1/2"),
            "refused share-of-body",
        ),
        (
            "a quarter declared 24 %",
            |d| d.edit_suite("section: 1/4", "section: 24 %"),
            "refused share-of-body",
        ),
        (
            "a quarter declared whole",
            |d| d.edit_suite("    section: 1/4\n", ""),
            "refused share-of-body",
        ),
        (
            "another outer radius",
            |d| d.edit_suite("outer-radius: 12", "outer-radius: 12.01"),
            "refused wall-reached",
        ),
        (
            "another pressure",
            |d| d.edit_suite("inner-pressure: 0.03", "inner-pressure: 0.0301"),
            "fail",
        ),
        (
            "another modulus",
            |d| d.edit_suite("mu: 0.40", "mu: 0.401"),
            "fail",
        ),
        (
            "free ends instead of held ones",
            |d| d.edit_suite("ends: plane-strain", "ends: generalized-plane-strain"),
            "fail",
        ),
    ]);
}

#[test]
fn weights_that_do_not_fit_the_mesh() {
    run(&[
        (
            "halved",
            |d| d.change_all("points", |t| t.map("weight", |w| w / 2.0)),
            "refused points-cover-mesh",
        ),
        (
            "doubled",
            |d| d.change_all("points", |t| t.map("weight", |w| w * 2.0)),
            "refused points-cover-mesh",
        ),
        (
            "just over one thousandth off",
            |d| d.change_all("points", |t| t.map("weight", |w| w * 1.001_01)),
            "refused points-cover-mesh",
        ),
        (
            "zero",
            |d| d.change(2, "points", |t| t.map("weight", |_| 0.0)),
            "refused positive-weight",
        ),
        (
            "one negative",
            |d| d.change(2, "points", |t| set_last(t, "weight", "-1.5")),
            "refused positive-weight",
        ),
        (
            "exchanged between elements",
            |d| {
                d.change(2, "points", |t| {
                    let (a, b) = (0, t.rows.len() - 1);
                    let at = t.at("weight");
                    let swap = t.rows[a][at].clone();
                    t.rows[a][at] = t.rows[b][at].clone();
                    t.rows[b][at] = swap;
                    t.rows[a][at] = (t.number(a, "weight") * 1.5).to_string();
                })
            },
            "refused points-cover-mesh",
        ),
    ]);
}

#[test]
fn fields_that_are_not_the_solution() {
    run(&[
        (
            "no displacement",
            |d| {
                d.change_all("nodes", |t| {
                    ["ux", "uy"].into_iter().for_each(|c| t.set(c, "0"));
                })
            },
            "fail",
        ),
        (
            "displacement of the other sign",
            |d| {
                d.change_all("nodes", |t| {
                    ["ux", "uy"].into_iter().for_each(|c| t.map(c, |v| -v));
                })
            },
            "fail",
        ),
        (
            "a rigid shift",
            |d| d.change_all("nodes", |t| t.map("ux", |v| v + 1e-3)),
            "fail",
        ),
        (
            "one node astray",
            |d| d.change(2, "nodes", |t| set_last(t, "ux", "1.5")),
            "fail",
        ),
        (
            "ux and uy exchanged",
            |d| d.change_all("nodes", |t| t.swap_columns("ux", "uy")),
            "fail",
        ),
        (
            "no stress",
            |d| {
                d.change_all("points", |t| {
                    ["sxx", "syy", "szz", "sxy"]
                        .into_iter()
                        .for_each(|c| t.set(c, "0"));
                })
            },
            "fail",
        ),
        (
            "stress in kPa",
            |d| {
                d.change_all("points", |t| {
                    ["sxx", "syy", "szz", "sxy", "p", "W"]
                        .into_iter()
                        .for_each(|c| t.map(c, |v| v * 1e3));
                })
            },
            "fail",
        ),
        (
            "sxx and syy exchanged",
            |d| d.change_all("points", |t| t.swap_columns("sxx", "syy")),
            "fail",
        ),
        (
            "sxy of the other sign",
            |d| d.change_all("points", |t| t.map("sxy", |v| -v)),
            "fail",
        ),
        (
            "engineering shear",
            |d| d.change_all("points", |t| t.map("sxy", |v| 2.0 * v)),
            "fail",
        ),
        (
            "no axial stress",
            |d| d.change_all("points", |t| t.set("szz", "0")),
            "fail",
        ),
        (
            "only shear exported",
            |d| {
                d.change_all("points", |t| {
                    ["sxx", "syy", "szz"]
                        .into_iter()
                        .for_each(|c| t.drop_column(c));
                })
            },
            "not-run",
        ),
        (
            "p of the other sign",
            |d| d.change_all("points", |t| t.map("p", |v| -v)),
            "fail",
        ),
        (
            "p shifted as a multiplier is",
            |d| d.change_all("points", |t| t.map("p", |v| v + 0.4)),
            "fail",
        ),
        (
            "J of zero",
            |d| d.change_all("points", |t| t.set("J", "0")),
            "refused positive-volume-ratio",
        ),
        (
            "W doubled",
            |d| d.change_all("points", |t| t.map("W", |v| 2.0 * v)),
            "fail",
        ),
        (
            "points at the bore",
            |d| {
                d.change_all("points", |t| {
                    ["X", "Y"].into_iter().for_each(|c| t.map(c, |v| v * 0.97));
                })
            },
            "refused point-inside-element",
        ),
        (
            "nodes without displacement",
            |d| d.change_all("nodes", |t| t.drop_column("uy")),
            "refused missing-column",
        ),
    ]);
}

#[test]
fn totals_and_steps() {
    let energy = |t: &mut Table, factor: f64| {
        let (name, value) = (t.at("quantity"), t.at("value"));
        for row in t.rows.iter_mut().filter(|row| row[name] == "strain_energy") {
            row[value] = (row[value].parse::<f64>().unwrap() * factor).to_string();
        }
    };
    let demo = Demo::new();
    demo.change_all("totals", |t| energy(t, 4.0));
    let judged = demo.check();
    assert_eq!(judged.word(), "fail", "energy of the whole section");
    assert_eq!(judged.criterion("error strain-energy"), "fail");
    assert_eq!(judged.criterion("error displacement-L2"), "pass");
    run(&[
        (
            "no totals",
            |d| fs::remove_file(d.file(2, "totals")).unwrap(),
            "not-run",
        ),
        (
            "no axial force",
            |d| {
                d.change(2, "totals", |t| {
                    t.rows.retain(|row| row[0] != "axial_force");
                })
            },
            "not-run",
        ),
        (
            "stopped at 80 % of the load",
            |d| {
                for table in ["nodes", "points", "totals"] {
                    d.change_all(table, |t| t.keep("step", |step| step < 5.0));
                }
            },
            "fail",
        ),
        (
            "points one step behind",
            |d| d.change_all("points", |t| t.keep("step", |step| step < 5.0)),
            "refused step-found",
        ),
        (
            "nodes one step behind",
            |d| d.change_all("nodes", |t| t.keep("step", |step| step < 5.0)),
            "refused step-found",
        ),
        (
            "totals one step behind",
            |d| d.change_all("totals", |t| t.keep("step", |step| step < 5.0)),
            "refused step-found",
        ),
        (
            "steps named the wrong way round",
            |d| {
                for table in ["nodes", "points", "totals"] {
                    d.change_all(table, |t| t.map("step", |step| 6.0 - step));
                }
            },
            "fail",
        ),
        (
            "a step that is not there",
            |d| d.edit_suite("    levels:", "    step: 6\n    levels:"),
            "refused step-found",
        ),
        (
            "a step before the last",
            |d| d.edit_suite("    levels:", "    step: 4\n    levels:"),
            "fail",
        ),
    ]);
}

/// What a suite says of its files is believed, so it must show when it is not so.
#[test]
fn declarations_that_do_not_fit_the_files() {
    fn declare(demo: &Demo, line: &str) {
        demo.edit_suite("    levels:", &format!("    {line}\n    levels:"));
    }
    run(&[
        (
            "what holds anyway",
            |d| {
                declare(
                    d,
                    "conventions: { stress: cauchy, pressure: mean, pressure-positive: compression }",
                )
            },
            "pass",
        ),
        (
            "kPa",
            |d| declare(d, "units: { length: mm, stress: kPa }"),
            "fail",
        ),
        (
            "metres",
            |d| declare(d, "units: { length: m, stress: MPa }"),
            "refused node-on-body",
        ),
        (
            "tension positive",
            |d| declare(d, "conventions: { pressure-positive: tension }"),
            "fail",
        ),
        (
            "p is the multiplier, so that p is taken from the stress",
            |d| declare(d, "conventions: { pressure: multiplier }"),
            "pass",
        ),
        (
            "p is the multiplier, and the stress lacks a component",
            |d| {
                declare(d, "conventions: { pressure: multiplier }");
                d.change_all("points", |t| t.drop_column("szz"));
            },
            "not-run",
        ),
        (
            "Kirchhoff stress, which is the same here",
            |d| declare(d, "conventions: { stress: kirchhoff }"),
            "pass",
        ),
        (
            "second Piola-Kirchhoff stress, no deformation gradient",
            |d| declare(d, "conventions: { stress: second-piola-kirchhoff }"),
            "refused stress-conversion",
        ),
        (
            "first Piola-Kirchhoff stress, no deformation gradient",
            |d| declare(d, "conventions: { stress: first-piola-kirchhoff }"),
            "not-run",
        ),
        (
            "engineering shear",
            |d| declare(d, "conventions: { shear: engineering }"),
            "fail",
        ),
        (
            "columns exchanged",
            |d| declare(d, "columns: { sxx: syy, syy: sxx }"),
            "fail",
        ),
        (
            "one column for two",
            |d| declare(d, "columns: { ux: uy }"),
            "refused column-used-twice",
        ),
        (
            "a column that is not there",
            |d| declare(d, "columns: { ux: U1 }"),
            "refused mapped-column-found",
        ),
        (
            "a name that is none",
            |d| declare(d, "columns: { Ux: U1 }"),
            "refused unknown-canonical-name",
        ),
        (
            "a table that is none",
            |d| declare(d, "columns: { node: { ux: U1 } }"),
            "refused wrong-type",
        ),
        (
            "a rule that is none",
            |d| declare(d, "point-rule: gauss-17"),
            "refused standard-rule",
        ),
        (
            "weights not exported",
            |d| d.change_all("points", |t| t.drop_column("weight")),
            "not-run",
        ),
        (
            "coordinates of points not exported",
            |d| {
                d.change_all("points", |t| {
                    ["X", "Y"].into_iter().for_each(|c| t.drop_column(c));
                })
            },
            "refused missing-column",
        ),
        (
            "element of points not exported",
            |d| d.change_all("points", |t| t.drop_column("element")),
            "refused missing-column",
        ),
        (
            "no displacement at mid-side nodes",
            |d| {
                d.change_all("nodes", |t| {
                    for row in 0..t.rows.len() {
                        if t.number(row, "node") > 15.0 {
                            let at = t.at("ux");
                            t.rows[row][at] = "0".into();
                        }
                    }
                })
            },
            "fail",
        ),
        (
            "a cut-off compressed file",
            |d| {
                let half = [0x1f, 0x8b, 8, 0, 0, 0, 0, 0, 0, 3, 1, 2, 3];
                fs::write(d.level(2).join("points.csv.gz"), half).unwrap();
                fs::remove_file(d.file(2, "points")).unwrap();
            },
            "refused readable-file",
        ),
        (
            "an element other than a mesh can hold",
            |d| d.change(2, "points", |t| set_last(t, "element", "99")),
            "refused unknown-element",
        ),
        (
            "points numbered alike",
            |d| d.change(2, "points", |t| t.set("point", "1")),
            "refused unique-points",
        ),
        (
            "steps that are no whole numbers",
            |d| d.change(2, "points", |t| t.set("step", "5.5")),
            "refused integer",
        ),
    ]);
}

/// Attacks on what is declared, or left out, beside sound numbers.
#[test]
fn what_is_declared_or_left_out_lets_nothing_through() {
    run(&[
        (
            "a coarse level that is nonsense",
            |d| {
                d.change(1, "nodes", |t| {
                    for c in ["ux", "uy"] {
                        t.map(c, |v| 3.0 * v);
                    }
                });
                d.change(1, "points", |t| t.map("sxx", |v| v + 0.2));
            },
            "inconclusive",
        ),
        (
            "mesh sizes that are not the mesh's",
            |d| {
                d.accept(&["{ order: stress-L2, at-least: 4 }"]);
                d.edit_suite("    accept:", "    h: [2, 1.9]\n    accept:");
            },
            "refused mesh-sizes",
        ),
        (
            "errors small, but the load is not quite there",
            |d| {
                d.change_all("totals", |t| {
                    let (name, value) = (t.at("quantity"), t.at("value"));
                    for row in t.rows.iter_mut().filter(|r| r[name] == "load_factor") {
                        if row[value] == "1" {
                            row[value] = "0.999".into();
                        }
                    }
                })
            },
            "not-run",
        ),
        (
            "half of a result set of points alone",
            |d| {
                for level in [1, 2] {
                    fs::remove_file(d.file(level, "nodes")).unwrap();
                    fs::remove_file(d.file(level, "elements")).unwrap();
                }
                d.change_all("points", |t| {
                    let at = t.at("Y");
                    t.rows.retain(|row| row[at].parse::<f64>().unwrap() < 4.0);
                });
                d.accept(&["{ error: stress-L2, at-most: 0.5 % }"]);
            },
            "refused share-of-body",
        ),
        (
            "another last step at one level, and no load factor to vouch for it",
            |d| {
                d.change_all("totals", |t| {
                    let name = t.at("quantity");
                    t.rows.retain(|row| row[name] != "load_factor");
                });
                for table in ["nodes", "points", "totals"] {
                    d.change(2, table, |t| t.map("step", |step| step + 1.0));
                }
            },
            "not-run",
        ),
        (
            "the same quarter meshed twice and declared a half",
            |d| {
                let twice = |t: &mut Table, columns: &[&str]| {
                    let at: Vec<usize> = columns.iter().map(|c| t.at(c)).collect();
                    for mut row in t.rows.clone() {
                        for &i in &at {
                            row[i] = (row[i].parse::<i64>().unwrap() + 10_000).to_string();
                        }
                        t.rows.push(row);
                    }
                };
                let element = [
                    "element", "n1", "n2", "n3", "n4", "n5", "n6", "n7", "n8", "n9",
                ];
                d.change_all("nodes", |t| twice(t, &["node"]));
                d.change_all("elements", |t| twice(t, &element));
                d.change_all("points", |t| twice(t, &["element"]));
                d.edit_suite("section: 1/4", "section: 1/2");
            },
            "refused sector-angle",
        ),
        (
            "a declared load factor that the results are not at",
            |d| d.edit_suite("    levels:", "    load-factor: 0.5\n    levels:"),
            "fail",
        ),
    ]);
}
