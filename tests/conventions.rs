//! The exact solution, written in every dialect the exchange format allows: declared, all errors are at round-off;
//! not declared, the case does not pass wherever the dialect makes a difference.
//!
//! Red when a conversion (stress measure, frame, shear, sign or kind of p, angle, unit, step, share) is wrong or
//! missing in any table, or when a dialect is guessed.

mod common;

use common::mesh::{Mesh, Sector};
use common::perfect::{Coordinates, Dialect, Export, Layout, Tube, sector};
use common::{case, judge, series};
use truebore::elements::Shape;
use truebore::exact::Ends;
use truebore::input::Finding;
use truebore::mechanics::StressMeasure;
use truebore::run::{brief, plan::plan};
use truebore::verdict::Verdict;
use truebore::verdict::outcome::{Kind, Outcome};

/// What declared errors may be, relative. Measured: 4e-14 at worst.
const ROUND_OFF: f64 = 1e-12;

const MEASURES: [&str; 20] = [
    "stress-L2",
    "pressure-L2",
    "volume-ratio-L2",
    "energy-density-L2",
    "displacement-largest",
    "inner-wall-displacement",
    "mid-wall-displacement",
    "outer-wall-displacement",
    "inner-wall-srr",
    "inner-wall-stt",
    "inner-wall-szz",
    "mid-wall-srr",
    "mid-wall-stt",
    "mid-wall-szz",
    "outer-wall-srr",
    "outer-wall-stt",
    "outer-wall-szz",
    "strain-energy",
    "axial-stretch",
    "axial-force",
];

const ENDS: [Ends; 4] = [
    Ends::PlaneStrain,
    Ends::GeneralizedPlaneStrain { axial_force: 0.7 },
    Ends::Closed,
    Ends::FixedStretch {
        axial_stretch: 1.15,
    },
];

/// Every measure of errors at round-off is asked for.
fn suite(tube: &Tube, more: &str) -> String {
    let mut text = tube.suite(&format!("    levels: [1]\n{more}    accept:\n"));
    for measure in MEASURES {
        text += &format!("      - {{ error: {measure}, at-most: {ROUND_OFF:e} }}\n");
    }
    text
}

fn check(
    tube: &Tube,
    export: &Export,
    layout: Layout,
    more: &str,
) -> Result<Outcome, Vec<Finding>> {
    let folder = tempfile::tempdir().unwrap();
    export.write(&folder.path().join("level-1"), layout);
    judge(&suite(tube, more), folder.path())
}

/// Asserts that all errors are at round-off; returns the largest.
fn passes(what: &str, found: Result<Outcome, Vec<Finding>>) -> f64 {
    let outcome = found.unwrap_or_else(|findings| panic!("{what}: {}", findings[0]));
    let case = case(&outcome, "tube");
    let mut worst: f64 = 0.0;
    for measure in MEASURES {
        let value = &series(case, measure, Kind::Relative).unwrap().values[0];
        let error = value
            .value
            .unwrap_or_else(|| panic!("{what}: {measure}: {:?}", value.reason));
        assert!(error <= ROUND_OFF, "{what}: {measure} {error:e}");
        worst = worst.max(error);
    }
    let reasons: Vec<_> = case
        .criteria
        .iter()
        .filter(|c| c.verdict != Verdict::Pass)
        .collect();
    assert_eq!(outcome.verdict, Verdict::Pass, "{what}: {reasons:?}");
    worst
}

fn does_not_pass(what: &str, found: Result<Outcome, Vec<Finding>>) {
    if let Ok(outcome) = found {
        assert_ne!(
            outcome.verdict,
            Verdict::Pass,
            "{what} passes without being declared"
        );
    }
}

/// A dialect with the lines of a suite that declare it; without lines it declares itself by its column names.
struct Variant {
    name: &'static str,
    dialect: Dialect,
    declared: &'static str,
}

fn variants() -> Vec<Variant> {
    let usual = Dialect::default();
    let variant = |name, declared, dialect| Variant {
        name,
        dialect,
        declared,
    };
    let units = |per_mm, per_mpa| Dialect {
        per_mm,
        per_mpa,
        ..usual
    };
    // handbook factors, not those of the product: 1 psi = 6894.757293168361 Pa, 1 kgf/cm2 = 98066.5 Pa
    let psi = 1e6 / 6894.757293168361;
    vec![
        variant("exchange format", "", usual),
        variant(
            "first Piola-Kirchhoff",
            "    conventions: { stress: first-piola-kirchhoff }\n",
            Dialect {
                stress: StressMeasure::FirstPiolaKirchhoff,
                gradient: true,
                ..usual
            },
        ),
        variant(
            "second Piola-Kirchhoff",
            "    conventions: { stress: second-piola-kirchhoff }\n",
            Dialect {
                stress: StressMeasure::SecondPiolaKirchhoff,
                gradient: true,
                ..usual
            },
        ),
        variant(
            "J from F",
            "",
            Dialect {
                gradient: true,
                volume_ratio: false,
                ..usual
            },
        ),
        variant(
            "cylindrical components",
            "",
            Dialect {
                cylindrical: true,
                ..usual
            },
        ),
        variant(
            "angles in radians",
            "",
            Dialect {
                coordinates: Coordinates::Radians,
                ..usual
            },
        ),
        variant(
            "angles in degrees",
            "    conventions: { angles: degrees }\n",
            Dialect {
                coordinates: Coordinates::Degrees,
                ..usual
            },
        ),
        variant(
            "current coordinates",
            "",
            Dialect {
                current: true,
                ..usual
            },
        ),
        variant(
            "engineering shear",
            "    conventions: { shear: engineering }\n",
            Dialect {
                engineering_shear: true,
                ..usual
            },
        ),
        variant(
            "p positive in tension",
            "    conventions: { pressure-positive: tension }\n",
            Dialect {
                tension_positive: true,
                ..usual
            },
        ),
        variant(
            "p is a multiplier",
            "    conventions: { pressure: multiplier }\n",
            Dialect {
                multiplier: true,
                ..usual
            },
        ),
        variant(
            "m and Pa",
            "    units: { length: m, stress: Pa }\n",
            units(1e-3, 1e6),
        ),
        variant(
            "in and psi",
            "    units: { length: in, stress: psi }\n",
            units(1.0 / 25.4, psi),
        ),
        variant(
            "mm and kPa",
            "    units: { length: mm, stress: kPa }\n",
            units(1.0, 1e3),
        ),
        variant(
            "cm and kgf/cm2",
            "    units: { length: cm, stress: kgf/cm2 }\n",
            units(0.1, 1e6 / 98066.5),
        ),
        variant(
            "many at once",
            "    conventions: { angles: degrees, shear: engineering, pressure-positive: tension, stress: kirchhoff }\n    \
             units: { length: m, stress: kPa }\n",
            Dialect {
                cylindrical: true,
                coordinates: Coordinates::Degrees,
                engineering_shear: true,
                tension_positive: true,
                stress: StressMeasure::Kirchhoff,
                ..units(1e-3, 1e3)
            },
        ),
    ]
}

fn every_variant(shape: Shape) {
    let mut worst: f64 = 0.0;
    for ends in ENDS {
        let tube = Tube::rubber(ends);
        let mesh = Mesh::of(sector(&tube, shape));
        for variant in variants() {
            let what = format!("{} {} {}", shape.name(), ends.name(), variant.name);
            let export = Export::of(&tube, &mesh, variant.dialect);
            let share = "    section: 1/4\n";
            let declared = format!("{share}{}", variant.declared);
            worst = worst.max(passes(
                &what,
                check(&tube, &export, Layout::Plain, &declared),
            ));
            if !variant.declared.is_empty() {
                does_not_pass(&what, check(&tube, &export, Layout::Plain, share));
            }
        }
    }
    println!("{}: worst {worst:.1e}", shape.name());
}

#[test]
fn every_dialect_of_a_slice_reads_as_exact() {
    every_variant(Shape::Quad9);
}

#[test]
fn every_dialect_of_a_solid_reads_as_exact() {
    every_variant(Shape::Hex20);
}

#[test]
fn every_shape_reads_as_exact() {
    let tube = Tube::rubber(Ends::Closed);
    for shape in Shape::ALL {
        let export = Export::of(&tube, &Mesh::of(sector(&tube, shape)), Dialect::default());
        // straight sides leave the body, where points of linear shapes are still exact
        let worst = passes(
            shape.name(),
            check(&tube, &export, Layout::Plain, "    section: 1/4\n"),
        );
        println!("{:8} {worst:.1e}", shape.name());
    }
}

/// The only material whose volume changes: Kirchhoff stress differs from Cauchy stress.
#[test]
fn kirchhoff_stress_of_a_compressible_wall() {
    let tube = Tube::linear();
    let declared = "    section: 1/4\n    conventions: { stress: kirchhoff }\n";
    for shape in [Shape::Quad9, Shape::Hex20] {
        let dialect = Dialect {
            stress: StressMeasure::Kirchhoff,
            ..Dialect::default()
        };
        let export = Export::of(&tube, &Mesh::of(sector(&tube, shape)), dialect);
        passes("kirchhoff", check(&tube, &export, Layout::Plain, declared));
        does_not_pass(
            "kirchhoff",
            check(&tube, &export, Layout::Plain, "    section: 1/4\n"),
        );
        // nor is it guessed where J is not there
        let dialect = Dialect {
            volume_ratio: false,
            ..dialect
        };
        let export = Export::of(&tube, &Mesh::of(sector(&tube, shape)), dialect);
        does_not_pass(
            "kirchhoff without J",
            check(&tube, &export, Layout::Plain, declared),
        );
    }
}

#[test]
fn an_axisymmetric_model_reads_as_exact() {
    for ends in ENDS {
        let tube = Tube::rubber(ends);
        for shape in [
            Shape::Tri3,
            Shape::Tri6,
            Shape::Quad4,
            Shape::Quad8,
            Shape::Quad9,
        ] {
            let half = Sector {
                axisymmetric: true,
                cells: [3, 1, 2],
                length: 5.0,
                ..sector(&tube, shape)
            };
            let mesh = Mesh::of(half);
            for (declared, dialect) in [
                ("", Dialect::default()),
                (
                    "    conventions: { stress: second-piola-kirchhoff, pressure-positive: tension }\n    units: { length: in, stress: kPa }\n",
                    Dialect {
                        stress: StressMeasure::SecondPiolaKirchhoff,
                        gradient: true,
                        tension_positive: true,
                        per_mm: 1.0 / 25.4,
                        per_mpa: 1e3,
                        ..Dialect::default()
                    },
                ),
                (
                    "    conventions: { stress: first-piola-kirchhoff }\n",
                    Dialect {
                        stress: StressMeasure::FirstPiolaKirchhoff,
                        gradient: true,
                        ..Dialect::default()
                    },
                ),
            ] {
                let export = Export::of(&tube, &mesh, dialect);
                let what = format!("axisymmetric {} {} {declared}", shape.name(), ends.name());
                passes(&what, check(&tube, &export, Layout::Plain, declared));
                if !declared.is_empty() {
                    does_not_pass(&what, check(&tube, &export, Layout::Plain, ""));
                }
            }
        }
    }
}

fn plain(shape: Shape) -> (Tube, Export) {
    let tube = Tube::rubber(Ends::Closed);
    let export = Export::of(&tube, &Mesh::of(sector(&tube, shape)), Dialect::default());
    (tube, export)
}

const QUARTER: &str = "    section: 1/4\n";

#[test]
fn layout_and_order_of_rows_do_not_matter() {
    for shape in [Shape::Quad9, Shape::Wedge15] {
        let (tube, export) = plain(shape);
        let reference = check(&tube, &export, Layout::Plain, QUARTER).unwrap();
        for layout in [Layout::Plain, Layout::Windows, Layout::Gz, Layout::Parts] {
            for export in [export.clone(), export.clone().reversed()] {
                let outcome = check(&tube, &export, layout, QUARTER).unwrap();
                passes(&format!("{layout:?}"), Ok(outcome.clone()));
                // all but the last bits of sums over points, whose order is that of the file
                for (a, b) in case(&outcome, "tube")
                    .measures
                    .iter()
                    .zip(&case(&reference, "tube").measures)
                {
                    assert_eq!(a.measure, b.measure);
                    let (a, b) = (a.values[0].value.unwrap(), b.values[0].value.unwrap());
                    assert!((a - b).abs() <= 1e-14 * a.abs().max(1.0));
                }
            }
        }
    }
}

#[test]
fn a_solver_s_own_names_are_mapped_not_guessed() {
    let (tube, mut export) = plain(Shape::Quad9);
    for (table, from, to) in [
        ("nodes", "ux", "U1"),
        ("nodes", "uy", "U2"),
        ("nodes", "node", "Node Label"),
        ("points", "sxx", "S11"),
        ("points", "syy", "S22"),
        ("points", "szz", "S33"),
        ("points", "sxy", "S12"),
        ("points", "weight", "IVOL"),
        ("points", "W", "SENER"),
        ("totals", "value", "Y"),
    ] {
        export.table(table).rename(from, to);
    }
    let columns = "    columns: { ux: U1, uy: U2, node: Node Label, sxx: S11, syy: S22, szz: S33, sxy: S12, weight: IVOL, \
                   points: { W: SENER }, totals: { value: Y } }\n";
    passes(
        "own names",
        check(
            &tube,
            &export,
            Layout::Plain,
            &format!("{QUARTER}{columns}"),
        ),
    );
    does_not_pass("own names", check(&tube, &export, Layout::Plain, QUARTER));
}

#[test]
fn the_step_that_is_judged_is_the_last_or_the_one_named() {
    let (tube, full) = plain(Shape::Quad8);
    let half = Tube {
        inner_pressure: 0.5 * tube.inner_pressure,
        ..tube.clone()
    };
    let half = Export::of(
        &half,
        &Mesh::of(sector(&tube, Shape::Quad8)),
        Dialect::default(),
    );
    let rising = Export::history(&[half.clone(), full.clone()]);
    passes("last step", check(&tube, &rising, Layout::Plain, QUARTER));
    let first = format!("{QUARTER}    step: 1\n");
    does_not_pass("first step", check(&tube, &rising, Layout::Plain, &first));
    // unloaded again: the peak has to be named
    let falling = Export::history(&[full, half]);
    does_not_pass("unloaded", check(&tube, &falling, Layout::Plain, QUARTER));
    passes("peak", check(&tube, &falling, Layout::Plain, &first));
    passes(
        "peak",
        check(&tube, &falling.reversed(), Layout::Parts, &first),
    );
}

#[test]
fn any_share_of_the_section_reads_as_exact_and_no_other_is_accepted() {
    let tube = Tube::rubber(Ends::PlaneStrain);
    let shares = [
        (1.0, "1"),
        (0.5, "1/2"),
        (0.25, "1/4"),
        (1.0 / 6.0, "1/6"),
        (0.125, "1/8"),
    ];
    for (share, text) in shares {
        for shape in [Shape::Quad9, Shape::Hex27] {
            let part = Sector {
                share,
                cells: [2, (16.0 * share) as usize, 1],
                ..sector(&tube, shape)
            };
            let export = Export::of(&tube, &Mesh::of(part), Dialect::default());
            for (_, declared) in shares {
                let found = check(
                    &tube,
                    &export,
                    Layout::Plain,
                    &format!("    section: {declared}\n"),
                );
                if declared == text {
                    passes(&format!("{} {text}", shape.name()), found);
                } else {
                    let findings = found.unwrap_err();
                    assert_eq!(findings[0].rule, "share-of-body", "{declared} for {text}");
                }
            }
        }
    }
}

#[test]
fn the_axial_length_is_measured_and_checked() {
    let tube = Tube::rubber(Ends::Closed);
    for length in [0.3, 2.0, 25.0] {
        let part = Sector {
            length,
            ..sector(&tube, Shape::Hex8)
        };
        let export = Export::of(&tube, &Mesh::of(part), Dialect::default());
        let declared = |l: f64| format!("{QUARTER}    axial-length: {l} mm\n");
        passes("length", check(&tube, &export, Layout::Plain, QUARTER));
        passes(
            "length",
            check(&tube, &export, Layout::Plain, &declared(length)),
        );
        let findings = check(&tube, &export, Layout::Plain, &declared(1.01 * length)).unwrap_err();
        assert_eq!(findings[0].rule, "axial-length");
    }
}

/// What `brief` asks for, and nothing else, is enough to be judged.
#[test]
fn an_export_by_the_brief_passes() {
    for (shape, element) in [(Shape::Quad9, "quad9"), (Shape::Hex20, "hex20")] {
        let (tube, mut export) = plain(shape);
        let more = format!("{QUARTER}    element: {element}\n");
        let text = suite(&tube, &more);
        let plan = plan(truebore::suite::read(&text, "s.yaml").unwrap(), "s.yaml").unwrap();
        let asked = &plan.cases[0];
        for (name, header) in [
            ("nodes", brief::nodes_header(asked)),
            ("elements", brief::elements_header(asked)),
            ("points", brief::points_header(asked)),
        ] {
            let names: Vec<&str> = header.split(',').collect();
            let table = export.table(name);
            *table = table.only(&names);
        }
        let totals = brief::totals(asked);
        export
            .table("totals")
            .rows
            .retain(|row| totals.contains(&row[0].as_str()));
        passes(element, check(&tube, &export, Layout::Plain, &more));
    }
}

/// Without any one of the columns that `points.csv` needs, nothing passes silently.
#[test]
fn no_needed_column_can_be_left_out() {
    let (tube, export) = plain(Shape::Quad9);
    let all = export.tables["points"].header.clone();
    for column in all {
        let mut less = export.clone();
        *less.table("points") = less.table("points").without(&column);
        let found = check(&tube, &less, Layout::Plain, QUARTER);
        // p follows from the normal stresses
        if column == "p" {
            passes("p from the trace", found);
        } else {
            does_not_pass(&format!("without {column}"), found);
        }
    }
}
