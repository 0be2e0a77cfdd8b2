//! Broken result sets: each must be refused by its own rule, at its own place, and by nothing before it.

use std::path::{Path, PathBuf};
use truebore::input::{Finding, Weight};
use truebore::mechanics::stress_measure::StressMeasure;
use truebore::results::{Reading, ResultSet, sanity};

struct Case {
    folder: &'static str,
    rule: &'static str,
    file: &'static str,
    line: Option<u64>,
    field: &'static str,
    /// A word that the message must hold.
    says: &'static str,
    reading: fn(&mut Reading),
}

fn case(
    folder: &'static str,
    rule: &'static str,
    (file, line, field): (&'static str, u64, &'static str),
    says: &'static str,
) -> Case {
    let line = (line > 0).then_some(line);
    Case {
        folder,
        rule,
        file,
        line,
        field,
        says,
        reading: |_| {},
    }
}

fn with(case: Case, reading: fn(&mut Reading)) -> Case {
    Case { reading, ..case }
}

/// Cases where nothing is judged.
fn refused() -> Vec<Case> {
    vec![
        case(
            "nan-displacement",
            "finite-number",
            ("nodes.csv", 4, "ux"),
            "\"nan\"",
        ),
        case(
            "infinite-stress",
            "finite-number",
            ("points.csv", 3, "sxx"),
            "\"-Infinity\"",
        ),
        case(
            "overflow",
            "finite-number",
            ("points.csv", 9, "W"),
            "too large",
        ),
        case(
            "empty-needed-cell",
            "empty-cell",
            ("nodes.csv", 7, "uy"),
            "empty",
        ),
        case(
            "text-in-number",
            "number",
            ("nodes.csv", 2, "X"),
            "\"free\"",
        ),
        case(
            "fortran-exponent",
            "fortran-exponent",
            ("points.csv", 2, "syy"),
            "1.0D-3",
        ),
        case(
            "decimal-comma",
            "decimal-comma",
            ("nodes.csv", 3, "X"),
            "1,0",
        ),
        case("fractional-id", "integer", ("nodes.csv", 5, "node"), "4.0"),
        case(
            "huge-id",
            "integer-range",
            ("nodes.csv", 5, "node"),
            "18446744073709551616",
        ),
        case("ragged-row", "ragged-row", ("nodes.csv", 8, ""), "4 cells"),
        case(
            "comment-in-data",
            "ragged-row",
            ("points.csv", 5, ""),
            "1 cells",
        ),
        case(
            "unclosed-quote",
            "line-break-in-cell",
            ("elements.csv", 2, ""),
            "line break",
        ),
        case(
            "duplicate-node",
            "unique-node-ids",
            ("nodes.csv", 8, "node"),
            "case/nodes.csv:4",
        ),
        case(
            "duplicate-element",
            "unique-element-ids",
            ("elements.csv", 4, "element"),
            "case/elements.csv:3",
        ),
        case(
            "duplicate-point",
            "unique-points",
            ("points.csv", 10, "point"),
            "point 4 of element 1",
        ),
        case(
            "duplicate-total",
            "unique-quantities",
            ("totals.csv", 4, "quantity"),
            "case/totals.csv:2",
        ),
        case(
            "duplicate-column",
            "duplicate-column",
            ("nodes.csv", 1, "ux"),
            "columns 4 and 5",
        ),
        case(
            "missing-column",
            "missing-column",
            ("nodes.csv", 1, "Y"),
            "no column \"Y\"",
        ),
        case(
            "half-displacement",
            "missing-column",
            ("nodes.csv", 1, "uy"),
            "no column \"uy\"",
        ),
        case(
            "missing-weight-cell",
            "empty-cell",
            ("points.csv", 6, "weight"),
            "empty",
        ),
        case(
            "negative-weight",
            "positive-weight",
            ("points.csv", 6, "weight"),
            "-0.25",
        ),
        case(
            "negative-volume-ratio",
            "positive-volume-ratio",
            ("points.csv", 6, "J"),
            "-1",
        ),
        case(
            "unknown-node",
            "unknown-node",
            ("elements.csv", 3, "n3"),
            "no node 66",
        ),
        case(
            "unknown-element",
            "unknown-element",
            ("points.csv", 8, "element"),
            "no element 3",
        ),
        case(
            "unknown-shape",
            "shape-name",
            ("elements.csv", 3, "shape"),
            "QUAD4",
        ),
        case(
            "later-shape",
            "shape-name",
            ("elements.csv", 3, "shape"),
            "pyramid5",
        ),
        case(
            "missing-node",
            "shape-node-count",
            ("elements.csv", 3, "n4"),
            "node 4 is not given",
        ),
        case(
            "too-many-nodes",
            "shape-node-count",
            ("elements.csv", 3, "n5"),
            "one more",
        ),
        case(
            "repeated-node",
            "repeated-node",
            ("elements.csv", 2, "n4"),
            "also n3",
        ),
        case(
            "mixed-dimensions",
            "mixed-dimensions",
            ("elements.csv", 3, ""),
            "tet4",
        ),
        case(
            "clockwise",
            "positive-jacobian",
            ("elements.csv", 2, ""),
            "element 1 (quad4)",
        ),
        case(
            "overlapping",
            "manifold-sides",
            ("elements.csv", 5, ""),
            "elements",
        ),
        case(
            "point-outside",
            "point-inside-element",
            ("points.csv", 2, "X"),
            "outside element 1",
        ),
        case(
            "wrong-element",
            "unique-points",
            ("points.csv", 6, "point"),
            "point 1 of element 1",
        ),
        case(
            "point-number",
            "point-number-range",
            ("points.csv", 6, "point"),
            "4096",
        ),
        case(
            "element-gap",
            "element-without-points",
            ("elements.csv", 3, ""),
            "element 2",
        ),
        case(
            "bare-weights",
            "points-cover-mesh",
            ("points.csv", 0, "weight"),
            "4.000000000 times",
        ),
        case(
            "lost-point",
            "points-cover-mesh",
            ("points.csv", 0, "weight"),
            "0.875000000 times",
        ),
        case(
            "shifted-weights",
            "points-cover-element",
            ("elements.csv", 2, ""),
            "1.010000000 times",
        ),
        case("semicolons", "csv-syntax", ("nodes.csv", 1, ""), ";"),
        case("empty-file", "empty-table", ("totals.csv", 0, ""), "empty"),
        case(
            "header-only",
            "empty-table",
            ("points.csv", 0, ""),
            "no row",
        ),
        case("no-tables", "missing-table", ("", 0, ""), "no nodes.csv"),
        case(
            "elements-without-nodes",
            "missing-table",
            ("nodes.csv", 0, ""),
            "not nodes.csv",
        ),
        case(
            "both-plain-and-gz",
            "ambiguous-files",
            ("nodes.csv", 0, ""),
            "nodes.csv.gz",
        ),
        case(
            "whole-and-parts",
            "ambiguous-files",
            ("points.csv", 0, ""),
            "part-0001",
        ),
        case(
            "part-gap",
            "part-numbers",
            ("points.part-0001.csv", 0, ""),
            "part 3",
        ),
        case(
            "part-header",
            "same-header",
            ("points.part-0002.csv", 1, ""),
            "differ",
        ),
        case(
            "cut-gz",
            "readable-file",
            ("nodes.csv.gz", 0, ""),
            "cannot read",
        ),
        case(
            "not-gz",
            "readable-file",
            ("nodes.csv.gz", 0, ""),
            "cannot read",
        ),
        case("latin-1-header", "utf-8", ("nodes.csv", 1, ""), "UTF-8"),
        case(
            "step-not-there",
            "step-found",
            ("points.csv", 0, "step"),
            "no step 2",
        ),
        case(
            "step-beyond",
            "step-found",
            ("points.csv", 0, "step"),
            "go on to 3",
        ),
        case(
            "points-without-step",
            "ambiguous-step",
            ("points.csv", 0, "step"),
            "1, 2",
        ),
        case("bad-step", "integer", ("nodes.csv", 4, "step"), "\"end\""),
        with(
            case(
                "piola-without-gradient",
                "stress-conversion",
                ("points.csv", 1, ""),
                "F11",
            ),
            |r| r.conventions.stress = StressMeasure::FirstPiolaKirchhoff,
        ),
        with(
            case("sound", "stress-conversion", ("points.csv", 1, ""), "F11"),
            |r| r.conventions.stress = StressMeasure::SecondPiolaKirchhoff,
        ),
        with(
            case(
                "declared-header-missing",
                "mapped-column-found",
                ("", 0, "columns.ux"),
                "U1",
            ),
            |r| {
                r.columns.all.insert("ux".into(), "U1".into());
            },
        ),
        with(
            case(
                "sound",
                "unknown-canonical-name",
                ("", 0, "columns.Ux"),
                "\"Ux\"",
            ),
            |r| {
                r.columns.nodes.insert("Ux".into(), "ux".into());
            },
        ),
        with(
            case(
                "sound",
                "column-used-twice",
                ("nodes.csv", 1, "uy"),
                "ux and as uy",
            ),
            |r| {
                r.columns.nodes.insert("ux".into(), "uy".into());
            },
        ),
        with(
            case("sound", "step-found", ("nodes.csv", 0, "step"), "step 3"),
            |r| r.step = Some(3),
        ),
        case(
            "negative-radius",
            "positive-radius",
            ("nodes.csv", 2, "R"),
            "-0.5",
        ),
        case(
            "mixed-frames",
            "model-kind",
            ("points.csv", 1, ""),
            "planar",
        ),
        case("shell", "flat-mesh", ("nodes.csv", 4, "Z"), "0.5"),
        with(
            case(
                "unknown-rule",
                "standard-rule",
                ("points.csv", 0, ""),
                "simpson",
            ),
            |r| {
                r.point_rule = Some("simpson".into());
            },
        ),
        case(
            "unknown-rule",
            "missing-column",
            ("points.csv", 1, "X"),
            "no column \"X\"",
        ),
        with(
            case(
                "rule-point-zero",
                "point-number-range",
                ("points.csv", 2, "point"),
                "is 0",
            ),
            |r| {
                r.point_rule = Some("gauss-2".into());
            },
        ),
        with(
            case(
                "other-rule-order",
                "standard-rule",
                ("points.csv", 4, "point"),
                "the point is at",
            ),
            |r| {
                r.point_rule = Some("gauss-2".into());
            },
        ),
        case(
            "nameless-total",
            "empty-cell",
            ("totals.csv", 2, "quantity"),
            "no name",
        ),
    ]
}

/// Cases that are judged, with a caution.
fn cautions() -> Vec<Case> {
    vec![
        case(
            "wrong-pressure-sign",
            "mean-pressure",
            ("points.csv", 2, "p"),
            "differs",
        ),
        case(
            "unused-node",
            "unused-node",
            ("nodes.csv", 8, ""),
            "node 99",
        ),
        case(
            "coincident-node",
            "coincident-nodes",
            ("nodes.csv", 8, ""),
            "5 and 7",
        ),
    ]
}

fn folder(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("tests/data/broken-csv")
        .join(name)
}

/// Everything that is found, reading included.
fn findings(name: &str, change: fn(&mut Reading)) -> Vec<Finding> {
    let mut reading = Reading::default();
    change(&mut reading);
    let set = match ResultSet::open(&folder(name), "case", &reading) {
        Ok(set) => set,
        Err(findings) => return findings,
    };
    let mut all = set.remarks().to_vec();
    all.extend(sanity::check_mesh(&set).unwrap_or_else(|e| e));
    match sanity::check_points(&set) {
        Ok(coverage) => all.extend(coverage.into_iter().flat_map(|c| c.remarks)),
        Err(findings) => all.extend(findings),
    }
    all
}

fn check(case: &Case, weight: Weight) {
    let all = findings(case.folder, case.reading);
    let first = all
        .iter()
        .filter(|f| f.weight >= Weight::Caution)
        .max_by_key(|f| {
            // the first of the heaviest: max_by_key keeps the last of equals
            (
                f.weight,
                std::cmp::Reverse(all.iter().position(|g| std::ptr::eq(*f, g))),
            )
        });
    let first = first.unwrap_or_else(|| panic!("{}: nothing was found", case.folder));
    let file = if case.file.is_empty() {
        "case".to_string()
    } else {
        format!("case/{}", case.file)
    };
    let got = (
        first.weight,
        first.rule.as_str(),
        first.place.file.as_str(),
        first.place.line,
        first.place.field.as_str(),
    );
    assert_eq!(
        got,
        (weight, case.rule, file.as_str(), case.line, case.field),
        "{}: {first}",
        case.folder
    );
    assert!(first.found.contains(case.says), "{}: {first}", case.folder);
    assert!(
        truebore::results::rules::meaning(&first.rule).is_some(),
        "{} is not listed",
        first.rule
    );
}

#[test]
fn every_broken_set_is_refused_by_its_rule_at_its_place() {
    refused().iter().for_each(|c| check(c, Weight::Refused));
}

#[test]
fn doubtful_sets_are_read_with_a_caution() {
    cautions().iter().for_each(|c| check(c, Weight::Caution));
}

#[test]
fn the_sound_set_has_no_findings_at_all() {
    assert_eq!(findings("sound", |_| {}), []);
}

#[test]
fn every_folder_is_tested() {
    let cases: Vec<&str> = refused()
        .iter()
        .chain(&cautions())
        .map(|c| c.folder)
        .collect();
    for entry in std::fs::read_dir(folder("")).expect("the data is there") {
        let entry = entry.expect("readable");
        let name = entry.file_name().to_string_lossy().into_owned();
        assert!(
            !entry.path().is_dir() || cases.contains(&name.as_str()),
            "{name} is not tested"
        );
    }
}
