//! A case in words: what it means, for reports and briefs.

use super::plan::CasePlan;
use crate::exact::{Ends, Kinematics};
use crate::verdict::outcome::{Fact, ReferenceRecord, Sketch, TotalRecord};

fn fact(label: &str, text: String) -> Fact {
    Fact {
        label: label.to_string(),
        text,
    }
}

/// What the report prints beside a case.
pub fn facts(case: &CasePlan) -> Vec<Fact> {
    let mut facts = Vec::new();
    if let Some(element) = &case.element {
        facts.push(fact("Element", element.text.clone()));
    }
    facts.push(fact("Material", material(case)));
    facts.push(fact("Body", body(case)));
    facts.push(fact("Load", load(case)));
    facts.push(fact("Ends", ends(case)));
    facts.push(fact("Exact", exact(case)));
    facts
}

/// The solution and the digits it vouches for.
fn exact(case: &CasePlan) -> String {
    let bound = case.exact.bound();
    let worst = bound.displacement.max(bound.stress).max(bound.totals);
    let digits = (-worst.log10()).floor().clamp(0.0, 15.0);
    format!(
        "{}, good for {digits} digits by its own bound",
        case.problem
    )
}

/// Law and constants, with their units.
pub fn material(case: &CasePlan) -> String {
    let material = &case.parameters.material;
    let constants = material.parameters().into_iter().map(|p| {
        let unit = case.units.name_of(p.dimension);
        let unit = if unit == "1" {
            String::new()
        } else {
            format!(" {unit}")
        };
        format!("{} {}{unit}", p.name, p.value)
    });
    let constants: Vec<_> = constants.collect();
    let tail = match case.exact.kinematics() {
        Kinematics::Finite => ", incompressible",
        Kinematics::SmallStrain => ", small strain",
    };
    format!("{}, {}{tail}", material.name(), constants.join(", "))
}

/// Radii and modelled share.
pub fn body(case: &CasePlan) -> String {
    let unit = case.units.length.name;
    let p = &case.parameters;
    let share = if case.share == 1.0 {
        "whole section".to_string()
    } else {
        format!("{} of the section", share_text(case.share))
    };
    format!(
        "tube, inner radius {} {unit}, outer radius {} {unit}, {share}",
        p.inner_radius, p.outer_radius
    )
}

/// `1/4` where the share is one over a whole number.
pub fn share_text(share: f64) -> String {
    let parts = (1.0 / share).round();
    if (share * parts - 1.0).abs() < 1e-12 {
        format!("1/{parts}")
    } else {
        share.to_string()
    }
}

/// Pressures, and whether they follow the wall.
pub fn load(case: &CasePlan) -> String {
    let unit = case.units.stress.name;
    let p = &case.parameters;
    let follows = match case.exact.kinematics() {
        Kinematics::Finite => "follows the deformed wall",
        Kinematics::SmallStrain => "on the undeformed wall",
    };
    let walls = [("bore", p.inner_pressure), ("outer wall", p.outer_pressure)];
    let loaded: Vec<_> = walls
        .iter()
        .filter(|(_, pressure)| *pressure != 0.0)
        .map(|(wall, pressure)| format!("{pressure} {unit} on the {wall}"))
        .collect();
    if loaded.is_empty() {
        "no pressure".to_string()
    } else {
        format!("{}, {follows}", loaded.join(" and "))
    }
}

/// The end condition in words.
pub fn ends(case: &CasePlan) -> String {
    let force_unit = case.units.name_of(crate::mechanics::Dimension::Force);
    match case.parameters.ends {
        Ends::PlaneStrain => "held at their length (plane strain)".to_string(),
        Ends::GeneralizedPlaneStrain { axial_force: 0.0 } => {
            "free to move axially, staying plane; no net axial force (generalized plane strain)"
                .to_string()
        }
        Ends::GeneralizedPlaneStrain { axial_force } => format!(
            "free to move axially, staying plane; net axial force {axial_force} {force_unit} on the wall \
             (generalized plane strain)"
        ),
        Ends::Closed => "closed by rigid caps that the pressures push apart".to_string(),
        Ends::FixedStretch { axial_stretch } => {
            format!("held at the axial stretch {axial_stretch}")
        }
        Ends::PlaneStress => "free of axial stress at every point (plane stress)".to_string(),
    }
}

/// What the section sketch needs.
pub fn sketch(case: &CasePlan) -> Sketch {
    let p = &case.parameters;
    Sketch {
        inner_radius: p.inner_radius,
        outer_radius: p.outer_radius,
        inner_pressure: p.inner_pressure,
        outer_pressure: p.outer_pressure,
        share: case.share,
        ends: match p.ends {
            Ends::PlaneStrain => "ends held",
            Ends::GeneralizedPlaneStrain { axial_force: 0.0 } => "ends free",
            Ends::GeneralizedPlaneStrain { .. } => "axial force given",
            Ends::Closed => "ends closed",
            Ends::FixedStretch { .. } => "axial stretch given",
            Ends::PlaneStress => "plane stress",
        }
        .to_string(),
    }
}

/// The exact solution's own record.
pub fn reference(case: &CasePlan) -> ReferenceRecord {
    let bound = case.exact.bound();
    let totals = case.exact.totals().iter().map(|total| TotalRecord {
        name: total.name.to_string(),
        value: total.value.as_ref().ok().copied().filter(|v| v.is_finite()),
        unit: case.units.name_of(total.dimension),
        reason: total.value.as_ref().err().cloned(),
    });
    ReferenceRecord {
        solution: case.problem.clone(),
        method: case.exact.method(),
        displacement_bound: bound.displacement,
        stress_bound: bound.stress,
        totals_bound: bound.totals,
        totals: totals.collect(),
    }
}
