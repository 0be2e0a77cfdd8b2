//! What the analyst must model and export for a case to be judged.

use super::facts;
use super::plan::{CasePlan, Plan};
use crate::elements::Shape;
use crate::exact::{Ends, Kinematics};
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
        ("", case.parameters.material.energy_text().to_string()),
        ("", constants(case)),
        ("Load", load(case)),
        ("Ends", facts::ends(case)),
        ("", ends(case)),
    ];
    if let Some(element) = &case.element {
        lines.push(("Element", element.text.clone()));
    }
    lines.extend(meshes(case));
    lines.push(("nodes.csv", nodes_header(case)));
    lines.push(("elements.csv", elements_header(case)));
    lines.push(("points.csv", points_header(case)));
    lines.push((
        "totals.csv",
        format!("quantity,value  with {}", totals(case).join(", ")),
    ));
    lines.push((
        "",
        "Cauchy stress, tension positive; p = -tr(sigma)/3; W per reference volume; J = det F;"
            .to_string(),
    ));
    lines.push((
        "",
        "weight = quadrature weight times det(dX/dxi); other conventions must be declared"
            .to_string(),
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
    "no displacement normal to the two radial cuts, no friction on them".to_string()
}

fn constants(case: &CasePlan) -> String {
    let m = &case.parameters.material;
    let unit = case.units.stress.name;
    format!(
        "small-strain constants: shear modulus {} {unit}, Young's modulus {} {unit}, Poisson's ratio {}",
        m.shear_modulus(),
        m.young_modulus(),
        m.poisson_ratio()
    )
}

fn load(case: &CasePlan) -> String {
    let tail = match case.exact.kinematics() {
        Kinematics::Finite => {
            "; normal to the deformed surface, per deformed area (a follower load)"
        }
        Kinematics::SmallStrain => "; small-strain kinematics",
    };
    format!("{}{tail}", facts::load(case))
}

fn ends(case: &CasePlan) -> String {
    match case.parameters.ends {
        Ends::PlaneStrain => "slice: plane strain; solid: no axial displacement at both end faces",
        Ends::GeneralizedPlaneStrain { .. } => {
            "slice: one axial stretch for the whole wall as an unknown; solid: end faces stay plane and parallel, \
             one face with no axial displacement"
        }
        Ends::Closed => {
            "the net axial force on the wall is inner pressure x pi a^2 - outer pressure x pi b^2 with the deformed \
             radii a, b; end faces stay plane and parallel"
        }
        Ends::FixedStretch { .. } => "slice: this axial stretch everywhere; solid: end faces moved apart by it",
        Ends::PlaneStress => "slice: plane stress; solid: end faces free",
    }
    .to_string()
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
        lines.push((
            "",
            "the same family of meshes throughout; mid-side nodes on the true circles".to_string(),
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

/// Header of nodes.csv.
pub fn nodes_header(case: &CasePlan) -> String {
    let solid = dimensions(case).contains(&3);
    let header = if solid {
        "node,X,Y,Z,ux,uy,uz"
    } else {
        "node,X,Y,ux,uy"
    };
    let nodal = case.criteria.iter().any(|c| c.measure.ends_with("-nodal"));
    match (nodal, solid) {
        (false, _) => header.to_string(),
        (true, false) => format!("{header},sxx,syy,szz,sxy"),
        (true, true) => format!("{header},sxx,syy,szz,sxy,syz,szx"),
    }
}

/// Header of elements.csv.
pub fn elements_header(case: &CasePlan) -> String {
    let nodes = case
        .element
        .as_ref()
        .map_or(Shape::Hex27.node_count(), |e| e.displacement.node_count());
    let columns: Vec<_> = (1..=nodes).map(|i| format!("n{i}")).collect();
    format!("element,shape,{}", columns.join(","))
}

/// Header of points.csv.
pub fn points_header(case: &CasePlan) -> String {
    if dimensions(case).contains(&3) {
        "element,point,X,Y,Z,weight,sxx,syy,szz,sxy,syz,szx,p,J,W".to_string()
    } else {
        "element,point,X,Y,weight,sxx,syy,szz,sxy,p,J,W".to_string()
    }
}

/// Totals a criterion needs, and those worth having.
pub fn totals(case: &CasePlan) -> Vec<&'static str> {
    let mut wanted = vec!["strain_energy", "axial_force", "load_factor"];
    if !matches!(
        case.parameters.ends,
        Ends::PlaneStrain | Ends::FixedStretch { .. }
    ) {
        wanted.insert(1, "axial_stretch");
    }
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
