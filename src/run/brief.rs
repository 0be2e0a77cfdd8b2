//! What the analyst must model and export for a case to be judged.

use super::facts;
use super::plan::{CasePlan, Plan};
use super::stability;
use crate::elements::Shape;
use crate::exact::{Body, Kinematics};
use crate::materials::Material;
use crate::mechanics::StressMeasure;
use crate::norms::catalogue;
use crate::verdict::outcome::Judged;
use std::fmt::Write;

/// The brief of every case, or of one.
pub fn brief(plan: &Plan, only: Option<&str>) -> String {
    let mut text = format!("{} ({})\n", plan.suite.title, plan.suite.id);
    let units = &plan.suite.units;
    let _ = writeln!(
        text,
        "lengths in {}, stresses in {}",
        units.length.name, units.stress.name
    );
    for case in plan
        .cases
        .iter()
        .filter(|case| only.is_none_or(|id| case.id == id))
    {
        text.push('\n');
        text.push_str(&brief_case(case));
    }
    text
}

fn brief_case(case: &CasePlan) -> String {
    let mut lines = vec![
        ("Body", facts::body(case)),
        ("", cuts(case)),
        ("Material", facts::material(case)),
    ];
    for material in case.given.materials() {
        // layers of one law: its energy once
        let energy = ("", material.energy_text());
        if !lines.contains(&energy) {
            lines.push(energy);
        }
        lines.push(("", constants(case, material)));
    }
    let description = facts::description(case);
    lines.push(("Load", description.load));
    if let Some(ends) = description.ends {
        lines.push(("Ends", ends));
    }
    let notes = description.modelling.into_iter().enumerate();
    lines.extend(notes.map(|(i, note)| (if i == 0 { "Modelling" } else { "" }, note)));
    if let Some(caution) = stability::caution(case) {
        lines.push(("Caution", caution.found));
        lines.push(("", caution.hint));
    }
    if let Some(element) = &case.element {
        lines.push(("Element", element.text.clone()));
    }
    lines.extend(meshes(case));
    lines.push(("nodes.csv", nodes_header(case)));
    lines.push(("elements.csv", elements_header(case)));
    lines.push(("points.csv", points_header(case)));
    lines.push((
        "totals.csv",
        match totals(case) {
            none if none.is_empty() => "not needed".to_string(),
            wanted => format!("quantity,value  with {}", wanted.join(", ")),
        },
    ));
    let reading = super::level::reading(case);
    lines.push(("as declared", reading.conventions.describe()));
    let j = match case.exact.kinematics() {
        Kinematics::Finite => "det F",
        Kinematics::SmallStrain => "1 + tr(epsilon)",
    };
    let (length, stress) = (
        reading.units_from.length.name,
        reading.units_from.stress.name,
    );
    lines.push((
        "",
        format!("files in {length} and {stress}; W per reference volume; J = {j};"),
    ));
    let ring = if half_section(case) {
        " times 2 pi R"
    } else {
        ""
    };
    lines.push((
        "",
        format!(
            "weight = quadrature weight times det(dX/dxi){ring}; other conventions must be declared"
        ),
    ));
    lines.extend(criteria(case));
    let mut text = format!("{}: {}\n", case.id, case.title);
    for (label, line) in lines.iter().filter(|(_, line)| !line.is_empty()) {
        let _ = writeln!(text, "  {label:<13} {line}");
    }
    text
}

fn cuts(case: &CasePlan) -> String {
    if case.share == 1.0 {
        return String::new();
    }
    let round = matches!(case.exact.body(), Body::Tube { .. } | Body::Sphere { .. });
    if round && !case.exact.turns() {
        "no displacement normal to the cuts, no friction on them".to_string()
    } else {
        "on cuts that are no planes of symmetry: the exact displacements (`truebore exact --points`)"
            .to_string()
    }
}

/// The constants of small strain, by the names other codes ask for.
fn constants(case: &CasePlan, material: &Material) -> String {
    let unit = case.units.stress.name;
    let (mu, bulk) = (material.shear_modulus(), material.bulk_modulus());
    let mut text = format!(
        "small-strain constants: shear modulus {} {unit}, Young's modulus {} {unit}, Poisson's ratio {}",
        twelve(mu),
        twelve(material.young_modulus()),
        twelve(material.poisson_ratio())
    );
    if bulk.is_finite() {
        let _ = write!(
            text,
            ", bulk modulus K {} {unit}, Lame's lambda {} {unit}, 2/K {} 1/{unit}",
            twelve(bulk),
            twelve(bulk - mu / 1.5),
            twelve(2.0 / bulk)
        );
    }
    text
}

/// A derived constant without the noise of its last digits.
fn twelve(value: f64) -> f64 {
    format!("{value:.11e}").parse().unwrap_or(value)
}

fn meshes(case: &CasePlan) -> Vec<(&'static str, String)> {
    let Some(first) = case.levels.first() else {
        return vec![(
            "Meshes",
            "no result sets are declared yet: give `results:` and `levels:`".to_string(),
        )];
    };
    let count = case.levels.len();
    let mut lines = Vec::new();
    if count > 1 {
        let text = format!(
            "{count} levels, coarsest first, each with about half the element size of the one before"
        );
        lines.push(("Meshes", text));
        let family = "the same family of meshes throughout";
        let curved = case.exact.body().walls() != (None, None);
        lines.push((
            "",
            match curved {
                true => format!("{family}; mid-side nodes on the true walls"),
                false => family.to_string(),
            },
        ));
    } else {
        lines.push((
            "Mesh",
            "one level: errors can be judged, orders cannot".to_string(),
        ));
    }
    lines.push(("Folders", first.folder.clone()));
    lines.extend(
        case.levels[1..]
            .iter()
            .map(|level| ("", level.folder.clone())),
    );
    lines
}

/// 2 and/or 3: from the declared element, else both.
fn dimensions(case: &CasePlan) -> Vec<usize> {
    case.element
        .as_ref()
        .map_or(vec![2, 3], |e| vec![e.displacement.dimension()])
}

/// Whether the model is asked for in three dimensions.
fn solid(case: &CasePlan) -> bool {
    dimensions(case).contains(&3)
}

/// Whether a model in two dimensions can only be a half section in R and Z.
fn half_section(case: &CasePlan) -> bool {
    !solid(case) && matches!(case.exact.body(), Body::Sphere { .. })
}

/// Names of the exchange format as the case's own headers.
fn declared(case: &CasePlan, table: &str, names: &[&str]) -> String {
    let header = |name: &&str| {
        let columns = &case.export.columns;
        let find = |of: &str| columns.iter().find(|(t, n, _)| t == of && n == name);
        find(table)
            .or_else(|| find(""))
            .map_or(name.to_string(), |(_, _, header)| header.value.clone())
    };
    names.iter().map(header).collect::<Vec<_>>().join(",")
}

/// Header of nodes.csv.
pub fn nodes_header(case: &CasePlan) -> String {
    let mut names = if solid(case) {
        vec!["node", "X", "Y", "Z", "ux", "uy", "uz"]
    } else if half_section(case) {
        vec!["node", "R", "Z", "ur", "uz"]
    } else {
        vec!["node", "X", "Y", "ux", "uy"]
    };
    if case.criteria.iter().any(|c| c.measure.ends_with("-nodal")) {
        names.extend(stress_columns(case));
    }
    declared(case, "nodes", &names)
}

/// Header of elements.csv.
pub fn elements_header(case: &CasePlan) -> String {
    let nodes = case
        .element
        .as_ref()
        .map_or(Shape::Hex27.node_count(), |e| e.displacement.node_count());
    let columns: Vec<_> = (1..=nodes).map(|i| format!("n{i}")).collect();
    let names: Vec<&str> = ["element", "shape"]
        .into_iter()
        .chain(columns.iter().map(String::as_str))
        .collect();
    declared(case, "elements", &names)
}

/// Header of points.csv.
pub fn points_header(case: &CasePlan) -> String {
    let place = if half_section(case) {
        ["R", "Z"]
    } else {
        ["X", "Y"]
    };
    let mut names = [["element", "point"], place].concat();
    if solid(case) {
        names.push("Z");
    }
    names.push("weight");
    names.extend(stress_columns(case));
    // J may already stand with the stress that it converts
    names.extend(
        ["p", "J", "W"]
            .into_iter()
            .filter(|name| !names.contains(name))
            .collect::<Vec<_>>(),
    );
    declared(case, "points", &names)
}

/// The columns of the declared stress measure, with the deformation gradient where it is needed to convert.
fn stress_columns(case: &CasePlan) -> Vec<&'static str> {
    let cauchy: &[&str] = if solid(case) {
        &["sxx", "syy", "szz", "sxy", "syz", "szx"]
    } else if half_section(case) {
        &["srr", "stt", "szz", "szr"]
    } else {
        &["sxx", "syy", "szz", "sxy"]
    };
    let (piola, gradient): (&[&str], &[&str]) = if solid(case) {
        (
            &[
                "P11", "P12", "P13", "P21", "P22", "P23", "P31", "P32", "P33",
            ],
            &[
                "F11", "F12", "F13", "F21", "F22", "F23", "F31", "F32", "F33",
            ],
        )
    } else if half_section(case) {
        (
            &["P11", "P13", "P22", "P31", "P33"],
            &["F11", "F13", "F22", "F31", "F33"],
        )
    } else {
        (
            &["P11", "P12", "P21", "P22", "P33"],
            &["F11", "F12", "F21", "F22", "F33"],
        )
    };
    match super::level::reading(case).conventions.stress {
        StressMeasure::Cauchy => cauchy.to_vec(),
        StressMeasure::Kirchhoff => [cauchy, &["J"]].concat(),
        StressMeasure::FirstPiolaKirchhoff => [piola, gradient].concat(),
        StressMeasure::SecondPiolaKirchhoff => [cauchy, gradient].concat(),
    }
}

/// Totals a criterion needs, and those worth having.
pub fn totals(case: &CasePlan) -> Vec<&'static str> {
    let mut wanted = facts::description(case).totals;
    for criterion in &case.criteria {
        if criterion.measure == "axial-stretch" && !wanted.contains(&"axial_stretch") {
            wanted.insert(1, "axial_stretch");
        }
    }
    wanted
}

fn criteria(case: &CasePlan) -> Vec<(&'static str, String)> {
    if case.criteria.is_empty() {
        return vec![(
            "Judged by",
            "no criteria: the case can never pass".to_string(),
        )];
    }
    let text = |c: &crate::verdict::judge::Criterion| {
        let theory = match (c.judged, c.theory) {
            (Judged::Order, Some(theory)) => format!(" (theory: {theory})"),
            _ => String::new(),
        };
        let needs = catalogue::find(&c.measure).map_or("", |m| m.needs);
        format!("{}{theory}   [{needs}]", c.text)
    };
    let mut lines: Vec<_> = case.criteria.iter().map(|c| ("", text(c))).collect();
    lines[0].0 = "Judged by";
    lines
}
