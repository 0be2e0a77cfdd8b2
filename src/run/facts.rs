//! A case in words: what it means, for reports and briefs.

use super::plan::CasePlan;
use crate::exact::{Body, Description};
use crate::materials::{Material, MaterialKind};
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
    let description = description(case);
    facts.push(fact("Load", description.load));
    if let Some(ends) = description.ends {
        facts.push(fact("Ends", ends));
    }
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

/// Laws and constants, with their units.
pub fn material(case: &CasePlan) -> String {
    let all: Vec<_> = case
        .given
        .materials()
        .into_iter()
        .map(|m| one_material(case, m))
        .collect();
    all.join("; ")
}

fn one_material(case: &CasePlan, material: &Material) -> String {
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
    let tail = match material.kind() {
        MaterialKind::Incompressible => ", incompressible",
        MaterialKind::Compressible => ", compressible",
        MaterialKind::LinearElastic => ", small strain",
        MaterialKind::ElasticPlastic => ", small strain, perfectly plastic",
    };
    format!("{}, {}{tail}", material.name(), constants.join(", "))
}

/// The body and its modelled share.
pub fn body(case: &CasePlan) -> String {
    let whole = match case.exact.body() {
        Body::Sphere { .. } => "sphere",
        _ => "section",
    };
    let share = match case.exact.body() {
        Body::Free { .. } => return description(case).body,
        _ if case.share == 1.0 => format!("whole {whole}"),
        _ => format!("{} of the {whole}", share_text(case.share)),
    };
    format!("{}, {share}", description(case).body)
}

/// The solution in words.
pub fn description(case: &CasePlan) -> Description {
    case.exact.description(&case.units)
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

/// What the section sketch needs, where there is a section to sketch.
pub fn sketch(case: &CasePlan) -> Option<Sketch> {
    let sketch = description(case).sketch?;
    Some(Sketch {
        inner_radius: sketch.inner_radius,
        outer_radius: sketch.outer_radius,
        inner_pressure: sketch.inner_pressure,
        outer_pressure: sketch.outer_pressure,
        share: case.share,
        ends: sketch.ends.to_string(),
    })
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
