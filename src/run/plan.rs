//! What a suite means: every case with its exact solution, levels and criteria. Nothing is read from results here.

use super::criteria;
pub(super) use super::declared::refuse;
use super::declared::{length, load_factor, share, sizes, too_coarse};
use super::expand::{self, Combination};
use super::exports;
use super::folders::{levels, own_folder};
use super::known;
use super::materials::Materials;
use super::pairing::{self, Element};
use super::parameters::{self, Context};
use super::refusals::{self, Refusals};
use crate::exact::{ExactSolution, Given, KnownValue, catalogue};
use crate::input::Finding;
use crate::mechanics::UnitSystem;
use crate::suite::Reader;
use crate::suite::model::{CaseEntry, ExportEntry, Suite};
use crate::verdict::judge::Criterion;
use crate::verdict::outcome::InputRecord;
use std::collections::{BTreeMap, BTreeSet};
use std::sync::Arc;

/// A case may expand to this many.
const MAX_CASES: usize = 20_000;

/// A suite, looked up and expanded.
#[derive(Debug)]
pub struct Plan {
    pub suite: Suite,
    /// The suite's file name, as messages and reports use it.
    pub file: String,
    pub cases: Vec<CasePlan>,
}

/// One case to judge.
#[derive(Debug, Clone)]
pub struct CasePlan {
    pub id: String,
    pub title: String,
    /// Where the case stands in the suite.
    pub place: crate::input::Place,
    /// Catalogue name of the solution.
    pub problem: String,
    /// What the solution was given, at the load factor.
    pub given: Given,
    pub exact: Arc<dyn ExactSolution>,
    /// Published or tabulated values the results are held to.
    pub known: Vec<KnownValue>,
    /// Files besides the result sets that the reference rests on.
    pub tables: Vec<InputRecord>,
    pub element: Option<Element>,
    /// Modelled share of the section.
    pub share: f64,
    /// Declared axial length, for solids.
    pub axial_length: Option<f64>,
    /// Declared geometric tolerance of nodes.
    pub node_tolerance: Option<f64>,
    /// Share of the stated loads at which the results are judged; already in `given`.
    pub load_factor: f64,
    /// Coarsest first.
    pub levels: Vec<LevelPlan>,
    pub criteria: Vec<Criterion>,
    pub stated_orders: Vec<(String, f64)>,
    pub export: ExportEntry,
    pub units: UnitSystem,
}

/// One mesh of a case.
#[derive(Debug, Clone, PartialEq)]
pub struct LevelPlan {
    pub name: String,
    /// Relative to the suite's folder, `/` separated.
    pub folder: String,
    pub h: Option<f64>,
}

/// Looks everything up.
///
/// # Errors
/// Every problem of the suite at once, in file order.
pub fn plan(suite: Suite, file: &str) -> Result<Plan, Vec<Finding>> {
    let mut reader = Reader::new(file);
    let materials = Materials::build(&suite, &mut reader);
    let mut cases: Vec<CasePlan> = Vec::new();
    for entry in &suite.cases {
        plan_case(&suite, file, entry, &materials, &mut cases, &mut reader);
    }
    if reader.findings.is_empty() {
        return Ok(Plan {
            file: file.to_string(),
            cases,
            suite,
        });
    }
    reader
        .findings
        .sort_by_key(|f| (f.place.line, f.place.column));
    // the same fault found in several combinations is said once
    let mut said = BTreeSet::new();
    reader.findings.retain(|f| said.insert(f.to_string()));
    Err(reader.findings)
}

/// From the text of a suite to its plan.
///
/// # Errors
/// Every problem at once, of form and of meaning, in file order; what only follows from another problem is left out.
pub fn read(text: &str, file: &str) -> Result<Plan, Vec<Finding>> {
    let (suite, mut findings) = crate::suite::read_all(text, file);
    let Some(suite) = suite else {
        return Err(findings);
    };
    match plan(suite, file) {
        Ok(plan) if findings.is_empty() => Ok(plan),
        Ok(_) => Err(findings),
        Err(more) => {
            let own: Vec<Finding> = more
                .into_iter()
                .filter(|f| !findings.iter().any(|earlier| refusals::follows(f, earlier)))
                .collect();
            findings.extend(own);
            findings.sort_by_key(|f| (f.place.line, f.place.column));
            Err(findings)
        }
    }
}

fn plan_case(
    suite: &Suite,
    file: &str,
    entry: &CaseEntry,
    materials: &Materials,
    cases: &mut Vec<CasePlan>,
    reader: &mut Reader,
) {
    let solution = catalogue::find(&entry.problem.value);
    let lists = solution.map_or_else(Vec::new, |s| s.list_names());
    let Some((problems, elements)) = combinations(entry, &lists, reader) else {
        return;
    };
    exports::check_columns(&entry.export, reader);
    let stated = criteria::stated_orders(entry, reader);
    let element_path = entry.element.as_ref().map_or("", |e| e.path.as_str());
    // once without regard to the problem, so that its faults hide none of the criteria's
    let first = elements.first().and_then(Option::as_ref);
    let element = first.and_then(|c| pairing::read(&c.node, element_path, reader));
    criteria::resolve(entry, element.as_ref(), &stated, &suite.units, reader);
    let Some(solution) = parameters::solution_entry(&entry.problem, reader) else {
        return;
    };
    let share = share(entry, reader);
    let axial_length = entry
        .axial_length
        .as_ref()
        .and_then(|q| length(q, suite, reader));
    let node_tolerance = entry
        .node_tolerance
        .as_ref()
        .and_then(|q| length(q, suite, reader));
    let load_factor = load_factor(entry, reader);
    let h = sizes(entry, suite, reader);
    let mut folders = BTreeMap::new();
    let mut refused = Refusals::default();
    let context = Context {
        materials,
        units: &suite.units,
        folder: std::path::Path::new(file)
            .parent()
            .unwrap_or_else(|| std::path::Path::new("")),
    };
    'all: for problem in &problems {
        let path = &entry.parameters.path;
        let Some(given) =
            parameters::read(&problem.node, path, solution.parameters, context, reader)
        else {
            continue;
        };
        let given = given.scaled(solution.parameters, load_factor);
        let exact: Arc<dyn ExactSolution> = match catalogue::build(solution.name, &given) {
            Ok(exact) => Arc::from(exact),
            Err(refusal) => {
                refused.note(refusal, problem, path);
                continue;
            }
        };
        let known = known::of_case(
            entry,
            solution.name,
            &given,
            exact.as_ref(),
            context,
            reader,
        );
        too_coarse(entry, node_tolerance, &exact.body(), reader);
        for element_choice in &elements {
            let element = element_choice
                .as_ref()
                .and_then(|c| pairing::read(&c.node, element_path, reader));
            let no_labels = Vec::new();
            let labels = element_choice.as_ref().map_or(&no_labels, |c| &c.labels);
            let id = [
                std::slice::from_ref(&entry.id.value),
                &problem.labels,
                labels,
            ]
            .concat()
            .join("-");
            let Some(levels) = levels(
                entry,
                &id,
                &problem.node,
                element_choice.as_ref(),
                &h,
                reader,
            ) else {
                break 'all;
            };
            let criteria =
                criteria::resolve(entry, element.as_ref(), &stated, &suite.units, reader);
            if !unique_id(&id, entry, cases, reader) {
                break 'all;
            }
            for level in &levels {
                if let Some(other) = folders.insert(level.folder.clone(), id.clone()) {
                    own_folder(entry, &other, &id, &level.folder, reader);
                    break 'all;
                }
            }
            cases.push(CasePlan {
                title: title(entry, &id, problem, labels),
                id,
                place: reader.place(entry.id.line, entry.id.column, &entry.id.path),
                problem: solution.name.to_string(),
                given: given.clone(),
                exact: Arc::clone(&exact),
                known: known.clone(),
                tables: known::tables(&given),
                element,
                share: share.unwrap_or(1.0),
                axial_length,
                node_tolerance,
                load_factor,
                levels,
                criteria,
                stated_orders: stated.clone(),
                export: entry.export.clone(),
                units: suite.units,
            });
        }
    }
    refused.report(&entry.id.value, problems.len(), reader);
}

type Choices = (Vec<Combination>, Vec<Option<Combination>>);

/// All combinations of the problem and of the element.
fn combinations(entry: &CaseEntry, lists: &[&str], reader: &mut Reader) -> Option<Choices> {
    let element = entry.element.as_ref();
    for node in [Some(&entry.parameters), element].into_iter().flatten() {
        if let Some(list) = expand::empty_list(&node.value) {
            let finding = reader.refuse(
                "empty-list",
                list,
                &node.path,
                "the list is empty, so that it makes no case",
            );
            finding.expected = "at least one value".into();
            return None;
        }
    }
    let count = expand::count(&entry.parameters.value, lists)
        .saturating_mul(element.map_or(1, |e| expand::count(&e.value, &[])));
    if count > MAX_CASES {
        let node = &entry.parameters;
        let found = format!("the lists make {count} cases");
        reader
            .refuse("too-many-cases", &node.value, &node.path, found)
            .expected = format!("at most {MAX_CASES}");
        return None;
    }
    let elements = match element {
        None => vec![None],
        Some(e) => expand::expand(&e.value, &[])
            .into_iter()
            .map(Some)
            .collect(),
    };
    Some((expand::expand(&entry.parameters.value, lists), elements))
}

fn unique_id(id: &str, entry: &CaseEntry, cases: &[CasePlan], reader: &mut Reader) -> bool {
    let taken = cases.iter().any(|case| case.id == id);
    if taken {
        let found = format!("two cases would be called \"{id}\"");
        refuse(
            &entry.id,
            "duplicate-case-id",
            found,
            "ids that differ after lists are expanded",
            reader,
        );
    }
    !taken
}

/// What was chosen comes first: it tells the cases of a family apart.
fn title(entry: &CaseEntry, id: &str, problem: &Combination, element: &[String]) -> String {
    match &entry.title {
        None => id.to_string(),
        Some(title) => {
            let labels = [problem.labels.as_slice(), element].concat();
            if labels.is_empty() {
                title.clone()
            } else {
                format!("{}: {title}", labels.join(", "))
            }
        }
    }
}
