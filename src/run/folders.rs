//! The folders of the result sets of a case: one for each level, and none shared by mistake.

use super::expand::{self, Combination};
use super::plan::{LevelPlan, refuse};
use super::template;
use crate::input::Finding;
use crate::suite::Reader;
use crate::suite::model::CaseEntry;
use crate::suite::tree::{Node, Value};

/// The folders of all levels, filled in.
pub fn levels(
    entry: &CaseEntry,
    id: &str,
    problem: &Node,
    element: Option<&Combination>,
    h: &[f64],
    reader: &mut Reader,
) -> Option<Vec<LevelPlan>> {
    let Some(results) = &entry.results else {
        if let Some(level) = entry.levels.first() {
            refuse(
                level,
                "levels",
                "levels without result sets".into(),
                "`results:` with the folder of a level",
                reader,
            );
        }
        return Some(Vec::new());
    };
    let mut values = vec![("id".to_string(), id.to_string())];
    values.extend(chosen(problem));
    values.extend(element.map(|c| chosen(&c.node)).unwrap_or_default());
    let names: Vec<String> = match entry.levels.as_slice() {
        [] => vec!["1".to_string()],
        levels => levels.iter().map(|l| l.value.clone()).collect(),
    };
    let mut planned: Vec<LevelPlan> = Vec::new();
    for (i, name) in names.iter().enumerate() {
        let mut values = values.clone();
        values.push(("level".to_string(), name.clone()));
        let folder = template::fill(&results.value, &values);
        let folder = folder.and_then(|f| template::below_the_suite(&f).map(|()| f));
        match folder {
            Ok(folder) => {
                if let Some(first) = planned.iter().find(|p| p.folder == folder) {
                    let found = format!(
                        "levels {} and {name} have the same folder \"{folder}\"",
                        first.name
                    );
                    let expected = "a folder for each level, e.g. with {level}";
                    refuse(results, "results-folder", found, expected, reader);
                    return None;
                }
                planned.push(LevelPlan {
                    name: name.clone(),
                    folder,
                    h: h.get(i).copied(),
                });
            }
            Err(found) => {
                refuse(
                    results,
                    "results-folder",
                    found,
                    "a folder below the suite's own",
                    reader,
                );
                return None;
            }
        }
    }
    Some(planned)
}

/// The values a folder name may use: every parameter of the block.
fn chosen(node: &Node) -> Vec<(String, String)> {
    match &node.value {
        Value::Map(entries) => entries
            .iter()
            .map(|(key, value)| (key.name.clone(), expand::label(value)))
            .collect(),
        _ => Vec::new(),
    }
}

/// Lists make several cases, and all would be judged on one result set: a `{name}` is missing.
pub fn own_folder(entry: &CaseEntry, other: &str, id: &str, folder: &str, reader: &mut Reader) {
    let Some(results) = &entry.results else {
        return;
    };
    let place = reader.place(results.line, results.column, &results.path);
    let found = format!("cases {other} and {id} have the same folder \"{folder}\"");
    reader.push(
        Finding::refused("results-folder", place, found)
            .expected("a folder for each case the lists make")
            .hint("name every parameter that has a list, e.g. results/{material}-{outer-radius}/level-{level}, or {id}"),
    );
}
