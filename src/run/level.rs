//! One result set: read, checked, compared with the body, measured.

use super::checks;
use super::plan::{CasePlan, LevelPlan};
use super::stability;
use crate::input::{Finding, Place, Weight};
use crate::norms::body::{self, BodyReport, Declared, WallSides};
use crate::norms::model::Mesh;
use crate::norms::points::{PointNorms, point_norms};
use crate::norms::watched::watched;
use crate::norms::{Level, LevelMeasures};
use crate::results::sanity;
use crate::results::{
    AngleUnit, ColumnNames, Conventions, InputFile, PressureKind, PressureSign, Reading, ResultSet,
    Shear,
};
use crate::suite::model::ExportEntry;
use crate::verdict::outcome::LevelOutcome;
use std::path::Path;

/// What one level gives.
#[derive(Debug)]
pub struct LevelResult {
    pub outcome: LevelOutcome,
    /// True if a load factor says that the results are those of the case's load.
    pub load_confirmed: bool,
    /// Why the results are not those of the case's load.
    pub other_load: Option<String>,
    /// Element size of the mesh itself, whatever is declared.
    pub mesh_size: Option<f64>,
    pub measures: LevelMeasures,
    pub sides: WallSides,
    pub findings: Vec<Finding>,
    pub inputs: Vec<InputFile>,
}

/// How the files of a case are read.
pub fn reading(case: &CasePlan) -> Reading {
    let ExportEntry {
        units,
        columns,
        conventions,
        point_rule,
        step,
    } = &case.export;
    let mut names = ColumnNames::default();
    for (table, name, header) in columns {
        let map = match table.as_str() {
            "nodes" => &mut names.nodes,
            "elements" => &mut names.elements,
            "points" => &mut names.points,
            "totals" => &mut names.totals,
            _ => &mut names.all,
        };
        map.insert(name.clone(), header.value.clone());
    }
    let multiplier = conventions.pressure_is_multiplier == Some(true);
    let tension = conventions.tension_positive_pressure == Some(true);
    Reading {
        columns: names,
        conventions: Conventions {
            stress: conventions.stress.unwrap_or_default(),
            pressure: if multiplier {
                PressureKind::Multiplier
            } else {
                PressureKind::Mean
            },
            pressure_sign: if tension {
                PressureSign::TensionPositive
            } else {
                PressureSign::CompressionPositive
            },
            shear: if conventions.engineering_shear == Some(true) {
                Shear::Engineering
            } else {
                Shear::Tensor
            },
            angle: if conventions.degrees == Some(true) {
                AngleUnit::Degrees
            } else {
                AngleUnit::Radians
            },
            turning: case.exact.turns(),
        },
        units_from: units.unwrap_or(case.units),
        units_to: case.units,
        step: step.as_ref().map(|s| s.value),
        point_rule: point_rule.as_ref().map(|r| r.value.clone()),
    }
}

/// A level whose folder is not there.
fn absent(plan: &LevelPlan, why: String) -> LevelResult {
    LevelResult {
        outcome: LevelOutcome {
            level: plan.name.clone(),
            folder: plan.folder.clone(),
            missing: Some(why),
            step: None,
            h: plan.h,
            dimension: None,
            nodes: 0,
            elements: 0,
            points: 0,
            shapes: String::new(),
            volume: None,
            exact_volume: None,
            outside_points: 0,
            quadrature_points: 0,
            outside_distance: 0.0,
            walls: "none".to_string(),
        },
        load_confirmed: false,
        other_load: None,
        mesh_size: None,
        measures: LevelMeasures::default(),
        sides: WallSides::default(),
        findings: Vec::new(),
        inputs: Vec::new(),
    }
}

/// Reads and measures one level. A folder that is not there, or empty, is a level that was not run.
///
/// # Errors
/// Everything that forbids judging.
pub fn measure(
    case: &CasePlan,
    plan: &LevelPlan,
    suite_folder: &Path,
) -> Result<LevelResult, Vec<Finding>> {
    let folder = suite_folder.join(&plan.folder);
    match std::fs::read_dir(&folder) {
        Err(e) if e.kind() == std::io::ErrorKind::NotFound => {
            return Ok(absent(
                plan,
                format!("there is no result set in {}", plan.folder),
            ));
        }
        Err(e) => {
            let place = Place::file(plan.folder.clone());
            return Err(vec![Finding::refused(
                "readable-file",
                place,
                format!("the folder cannot be read: {e}"),
            )]);
        }
        Ok(mut entries) => {
            if entries.next().is_none() {
                return Ok(absent(plan, format!("the folder {} is empty", plan.folder)));
            }
        }
    }
    let set = ResultSet::open(&folder, &plan.folder, &reading(case))?;
    let mut findings = set.remarks().to_vec();
    findings.extend(sanity::check_mesh(&set)?);
    let (report, volume) = compare_with_body(case, plan, &set, &mut findings)?;
    let points = judge_points(case, &set, report.as_ref(), &mut findings)?;
    checks::check_shape(case, plan, &set)?;
    let stated = set.totals().is_some_and(|t| t.get("load_factor").is_some());
    let other_load = checks::check_load(case, plan, &set, &mut findings);
    let load_confirmed = stated && other_load.is_none();
    let measures = Level {
        set: &set,
        exact: case.exact.as_ref(),
        known: &case.known,
        body: report.as_ref(),
        points: points.as_ref(),
        share: case.share,
        units: &case.units,
    }
    .measure();
    checks::note_outside(case, plan, &measures, &mut findings);
    checks::note_axial_stress(case, &set, &mut findings);
    checks::note_axial_origin(case, plan, &set, &mut findings);
    stability::note_at_nodes(case, plan, &set, &mut findings);
    let sides = report.as_ref().map_or(WallSides::default(), |r| r.sides);
    let mesh_size = mesh_size(&set);
    let outcome = outcome(
        plan,
        &set,
        report.as_ref(),
        volume,
        points.as_ref(),
        &measures,
        mesh_size,
    );
    let inputs = set.inputs();
    Ok(LevelResult {
        outcome,
        load_confirmed,
        other_load,
        mesh_size,
        measures,
        sides,
        findings,
        inputs,
    })
}

fn split(found: Vec<Finding>, findings: &mut Vec<Finding>) -> Result<(), Vec<Finding>> {
    if found.iter().any(|f| f.weight == Weight::Refused) {
        return Err(found);
    }
    findings.extend(found);
    Ok(())
}

type BodyAndVolume = (Option<BodyReport>, Option<f64>);

fn compare_with_body(
    case: &CasePlan,
    plan: &LevelPlan,
    set: &ResultSet,
    findings: &mut Vec<Finding>,
) -> Result<BodyAndVolume, Vec<Finding>> {
    let (Some(nodes), Some(elements)) = (set.nodes(), set.elements()) else {
        return Ok((None, None));
    };
    let volume = sanity::mesh_volume(elements, nodes);
    if !case.exact.has_fields() {
        // a single number says nothing of the body
        return Ok((None, Some(volume)));
    }
    let interfaces = case.exact.interfaces();
    let declared = Declared {
        interfaces: &interfaces,
        share: case.share,
        axial_length: case.axial_length,
        node_tolerance: case.node_tolerance,
    };
    let boundary = sanity::boundary_sides(elements);
    let mesh = Mesh { nodes, elements };
    let mut report = body::compare(
        mesh,
        &case.exact.body(),
        declared,
        volume,
        &boundary,
        &plan.folder,
    );
    split(std::mem::take(&mut report.findings), findings)?;
    Ok((Some(report), Some(volume)))
}

fn judge_points(
    case: &CasePlan,
    set: &ResultSet,
    report: Option<&BodyReport>,
    findings: &mut Vec<Finding>,
) -> Result<Option<PointNorms>, Vec<Finding>> {
    let Some(source) = set.points() else {
        return Ok(None);
    };
    let needed = match (set.nodes(), set.elements(), report) {
        (Some(nodes), Some(elements), Some(report)) => {
            watched(Mesh { nodes, elements }, report, case.exact.as_ref())
        }
        _ => Vec::new(),
    };
    let mut cover = sanity::CoverCheck::new(set);
    let (norms, pass) = point_norms(source, case.exact.as_ref(), &needed, &mut |block| {
        if let Some(cover) = &mut cover {
            cover.visit(block);
        }
    })?;
    match cover {
        Some(cover) => findings.extend(cover.finish(pass)?.remarks),
        None => {
            findings.extend(pass.remarks);
            checks::covers_without_mesh(case, set, &norms)?;
        }
    }
    Ok(Some(norms))
}

/// (own measure / elements)^(1/dimension): of an axisymmetric mesh the area of its half section counts.
fn mesh_size(set: &ResultSet) -> Option<f64> {
    let (nodes, elements) = (set.nodes()?, set.elements()?);
    let each = Mesh { nodes, elements }.own_measure() / elements.len() as f64;
    let size = each.powf(1.0 / elements.dimension() as f64);
    (size.is_finite() && size > 0.0).then_some(size)
}

fn outcome(
    plan: &LevelPlan,
    set: &ResultSet,
    report: Option<&BodyReport>,
    volume: Option<f64>,
    points: Option<&PointNorms>,
    measures: &LevelMeasures,
    mesh_size: Option<f64>,
) -> LevelOutcome {
    let elements = set.elements();
    let count = elements.map_or(0, |e| e.len());
    let dimension = elements.map(|e| e.dimension());
    let shapes = elements.map_or_else(Vec::new, |e| e.shapes_used());
    LevelOutcome {
        level: plan.name.clone(),
        folder: plan.folder.clone(),
        missing: None,
        step: set.step(),
        h: plan.h.or(mesh_size),
        dimension: dimension.map(|d| d as u32),
        nodes: set.nodes().map_or(0, |n| n.len() as u64),
        elements: count as u64,
        points: points.map_or(0, |p| p.points),
        shapes: shapes
            .iter()
            .map(|s| s.name())
            .collect::<Vec<_>>()
            .join(", "),
        volume: volume.filter(|v| v.is_finite()),
        exact_volume: report.map(|r| r.exact_volume).filter(|v| v.is_finite()),
        outside_points: measures.outside,
        quadrature_points: measures.quadrature_points,
        outside_distance: measures.outside_distance,
        walls: report.map_or("none", |r| r.sides.word()).to_string(),
    }
}
