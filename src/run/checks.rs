//! What a result set must show before it may be judged, and what is noted beside the numbers.

use super::level::LevelResult;
use super::plan::{CasePlan, LevelPlan};
use crate::input::{Finding, Place, Weight};
use crate::norms::LevelMeasures;
use crate::norms::points::PointNorms;
use crate::results::{ModelKind, ResultSet};

/// How far weights without a mesh may be from the exact body's share.
const COVER: f64 = 1e-3;

/// Without a mesh the weights are held against the exact body itself: half of the points must not pass for all.
pub(super) fn covers_without_mesh(
    case: &CasePlan,
    set: &ResultSet,
    norms: &PointNorms,
) -> Result<(), Vec<Finding>> {
    let Some(points) = set
        .points()
        .filter(|points| points.channels().weight.is_available())
    else {
        // without weights there is no norm at all, and each says so
        return Ok(());
    };
    if !case.exact.has_fields() {
        return Ok(());
    }
    let place = Place::file(points.file());
    let body = case.exact.body();
    let Some(area) = body.section_area() else {
        let found = "there is no mesh, and the body is what the mesh covers";
        let finding = Finding::refused("share-of-body", place, found);
        return Err(vec![finding.hint("export nodes.csv and elements.csv")]);
    };
    let length = match (set.kind(), case.axial_length) {
        (ModelKind::Planar, _) => 1.0,
        _ if !body.is_prism() => 1.0,
        (_, Some(length)) => length,
        (_, None) => {
            let found = "there is no mesh, and the axial length is not declared";
            let finding = Finding::refused("share-of-body", place, found);
            return Err(vec![finding.hint(
                "export nodes.csv and elements.csv, or give `axial-length:`",
            )]);
        }
    };
    let exact = case.share * area * length;
    let found = norms.weight.value();
    if (found / exact - 1.0).abs() <= COVER {
        return Ok(());
    }
    Err(vec![
        Finding::refused(
            "share-of-body",
            place,
            format!("the weights add up to {found:.6e}"),
        )
        .expected(format!(
            "{exact:.6e}, the declared share of the exact body, to within {COVER}"
        ))
        .hint("export nodes.csv and elements.csv if the sides of the mesh are straight"),
    ])
}

/// The mesh is of the declared element, or the orders expected of it mean nothing.
pub(super) fn check_shape(
    case: &CasePlan,
    plan: &LevelPlan,
    set: &ResultSet,
) -> Result<(), Vec<Finding>> {
    let (Some(element), Some(elements)) = (&case.element, set.elements()) else {
        return Ok(());
    };
    let other = elements
        .shapes_used()
        .into_iter()
        .find(|shape| *shape != element.displacement);
    let Some(other) = other else { return Ok(()) };
    let index = elements
        .shapes
        .iter()
        .position(|s| *s == other)
        .unwrap_or(0);
    let found = format!("element {} is a {}", elements.ids[index], other.name());
    Err(vec![
        Finding::refused("declared-element", elements.place(index), found)
            .expected(format!(
                "{}, as `element:` of case {} declares",
                element.displacement.name(),
                case.id
            ))
            .hint(format!(
                "mend `element:` or the result set in {}",
                plan.folder
            )),
    ])
}

/// A result set at another load is compared with the wrong state: it is measured, but it can never pass. The reason.
pub(super) fn check_load(
    case: &CasePlan,
    plan: &LevelPlan,
    set: &ResultSet,
    findings: &mut Vec<Finding>,
) -> Option<String> {
    let Some(factor) = set.totals().and_then(|t| t.get("load_factor")) else {
        if let Some(step) = set.step().filter(|_| set.steps().len() > 1) {
            let found = format!(
                "step {step} of {} is judged, and no load_factor says that it is the case's load",
                set.steps().len()
            );
            let place = Place::file(plan.folder.clone());
            let finding = Finding::new(Weight::Caution, "full-load", place, found);
            findings.push(
                finding.hint("export load_factor in totals.csv, or name the step with `step:`"),
            );
        }
        return None;
    };
    if (factor.value - case.load_factor).abs() <= 1e-9 * case.load_factor.abs() {
        return None;
    }
    let found = format!("the load factor is {} in {}", factor.value, plan.folder);
    findings.push(
        Finding::new(
            Weight::Caution,
            "full-load",
            factor.place.clone(),
            found.clone(),
        )
        .expected(format!(
            "{}, at which case {} is judged",
            case.load_factor, case.id
        ))
        .hint("export that load step, name it with `step:`, or declare `load-factor:` in the case"),
    );
    Some(format!(
        "{found}, and the case is judged at {}",
        case.load_factor
    ))
}

/// In a solid the exact displacement is counted from Z = 0, and a model held elsewhere differs by a rigid shift or turn.
pub(super) fn note_axial_origin(
    case: &CasePlan,
    plan: &LevelPlan,
    set: &ResultSet,
    findings: &mut Vec<Finding>,
) {
    let Some(nodes) = set.nodes().filter(|_| set.kind() != ModelKind::Planar) else {
        return;
    };
    let nearest = nodes
        .positions
        .iter()
        .map(|p| p[2].abs())
        .fold(f64::INFINITY, f64::min);
    let body = case.exact.body();
    let at = |z: f64| {
        let middle = body.middle();
        let point = crate::mechanics::Point::new(middle.x, middle.y, z);
        case.exact.at(point).ok().map(|state| state.displacement)
    };
    // where nothing changes along Z there is nothing to be shifted
    let moves = at(0.0) != at(body.thickness());
    if nearest > 1e-6 * body.thickness() && body.is_prism() && moves {
        let place = Place::file(plan.folder.clone());
        let found = "no node lies at Z = 0, from where the exact displacement is counted";
        findings.push(
            Finding::new(Weight::Caution, "axial-origin", place, found)
                .hint("put the face that stays in place at Z = 0, or shift Z and uz on export"),
        );
    }
}

/// A slice without szz is judged on what there is, and that is said where it can be seen.
pub(super) fn note_axial_stress(case: &CasePlan, set: &ResultSet, findings: &mut Vec<Finding>) {
    let Some(points) = set.points() else { return };
    let channels = points.channels();
    let lacks = set.kind() == ModelKind::Planar
        && channels.stress.is_available()
        && !channels.components.has(2);
    let middle = case.exact.at(case.exact.body().middle());
    if lacks && middle.is_ok_and(|state| state.stress.zz != 0.0) {
        let place = Place::file(points.file()).field("szz");
        findings.push(
            Finding::new(
                Weight::Caution,
                "axial-stress",
                place,
                "the axial stress is not exported, so that no norm of stress holds the code to it",
            )
            .expected("a column szz")
            .hint("export it: it is what the end condition shows in"),
        );
    }
}

/// How many quadrature points leave the exact body, and how far.
pub(super) fn note_outside(
    case: &CasePlan,
    plan: &LevelPlan,
    measures: &LevelMeasures,
    findings: &mut Vec<Finding>,
) {
    if measures.outside == 0 {
        return;
    }
    findings.push(Finding::new(
        Weight::Note,
        "outside-the-body",
        Place::file(plan.folder.clone()),
        format!(
            "{} of {} quadrature points lie outside the exact body, by {:.2e} {} at most: the exact solution's formula is continued there",
            measures.outside, measures.quadrature_points, measures.outside_distance, case.units.length.name
        ),
    ));
}

/// How far a declared ratio of mesh sizes may be from that of the meshes.
const SIZE_RATIO: f64 = 0.2;

/// Declared mesh sizes must fall as the meshes themselves do, or any order could be had by declaring it.
pub(super) fn declared_sizes(case: &CasePlan, levels: &[LevelResult]) -> Option<Finding> {
    for (pair, declared) in levels.windows(2).zip(case.levels.windows(2)) {
        let (Some(h1), Some(h2)) = (declared[0].h, declared[1].h) else {
            continue;
        };
        let (Some(m1), Some(m2)) = (pair[0].mesh_size, pair[1].mesh_size) else {
            continue;
        };
        let (ratio, own) = (h1 / h2, m1 / m2);
        if (ratio / own - 1.0).abs() > SIZE_RATIO {
            let found = format!(
                "`h:` falls by {ratio:.3} from level {} to {}, the mesh itself by {own:.3}",
                declared[0].name, declared[1].name
            );
            let finding = Finding::refused("mesh-sizes", case.place.clone(), found);
            return Some(
                finding.hint("leave `h:` out: (volume / elements)^(1/dimension) is used then"),
            );
        }
    }
    None
}
