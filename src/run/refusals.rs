//! What is refused, said once: the same refusal of several cases, and what only follows from another problem.

use super::expand::Combination;
use crate::exact::Refusal;
use crate::input::Finding;
use crate::suite::Reader;
use crate::suite::tree::{Node, Value};

/// Cases that a message names.
const NAMED: usize = 5;

/// Refusals of exact solutions by the cases of one entry.
#[derive(Debug, Default)]
pub struct Refusals {
    list: Vec<Refused>,
}

#[derive(Debug)]
struct Refused {
    refusal: Refusal,
    path: String,
    line: u64,
    column: u64,
    /// What was chosen from the lists, one a case.
    cases: Vec<String>,
}

impl Refusals {
    /// Notes a refusal at the parameter it is about; the same one of several cases is kept once.
    pub fn note(&mut self, refusal: Refusal, problem: &Combination, path: &str) {
        let node = &problem.node;
        let (at, path) =
            parameter(node, path, refusal.parameter).unwrap_or((node, path.to_string()));
        let case = problem.labels.join("-");
        let same = self
            .list
            .iter_mut()
            .find(|r| (r.line, r.column) == (at.line, at.column) && r.refusal == refusal);
        match same {
            Some(same) => same.cases.push(case),
            None => self.list.push(Refused {
                refusal,
                path,
                line: at.line,
                column: at.column,
                cases: vec![case],
            }),
        }
    }

    /// Reports all; a refusal of every one of the `count` combinations need not say of which.
    pub fn report(self, entry: &str, count: usize, reader: &mut Reader) {
        for refused in self.list {
            let named: Vec<String> = refused
                .cases
                .iter()
                .take(NAMED)
                .map(|case| format!("{entry}-{case}"))
                .collect();
            let cases = match refused.cases.len() {
                all if all == count => String::new(),
                more if more > NAMED => {
                    format!(", in {} and {} more", named.join(", "), more - NAMED)
                }
                _ => format!(", in {}", named.join(", ")),
            };
            let place = reader.place(refused.line, refused.column, &refused.path);
            let found = format!("{}{cases}", refused.refusal.message);
            reader
                .push(Finding::refused("no-exact-solution", place, found))
                .hint = refused.refusal.hint;
        }
    }
}

/// The value of a key, at any depth, with its path.
fn parameter<'n>(node: &'n Node, path: &str, name: &str) -> Option<(&'n Node, String)> {
    let Value::Map(entries) = &node.value else {
        return None;
    };
    entries.iter().find_map(|(key, value)| {
        let path = format!("{path}.{}", key.name);
        if key.name == name {
            return Some((value, path));
        }
        parameter(value, &path, name)
    })
}

/// Whether a problem of meaning may only be there because something else could not be read.
pub fn follows(later: &Finding, earlier: &Finding) -> bool {
    let (field, first) = (later.place.field.as_str(), earlier.place.field.as_str());
    if first.starts_with("units") || field == first {
        return true;
    }
    if let Some(rest) = first.strip_prefix("materials") {
        let name = rest.split('.').nth(1).unwrap_or_default();
        return later.rule == "unknown-material"
            || field.starts_with(&format!("materials.{name}."));
    }
    let (Some((case, key)), Some((first_case, first_key))) =
        (field.split_once("]."), first.split_once("]."))
    else {
        return false;
    };
    if case != first_case {
        return false;
    }
    if first_key.starts_with("problem") || key.starts_with("problem") {
        return first_key.starts_with("problem") && key.starts_with("problem");
    }
    // levels, folders and expected orders rest on several keys of their case
    let rests_on_others = ["h[", "results", "levels"]
        .iter()
        .any(|k| key.starts_with(k))
        || key.ends_with(".level")
        || key.ends_with(".within");
    rests_on_others && !first_key.starts_with("accept")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::input::Place;

    #[test]
    fn only_what_may_follow_is_left_out() {
        let at = |field: &str| Finding::refused("rule", Place::file("s.yaml").field(field), "");
        let follows = |later: &str, earlier: &str| follows(&at(later), &at(earlier));
        assert!(follows("cases[0].section", "units.length"));
        assert!(follows("materials.soft.law", "materials.soft.law.mu"));
        assert!(!follows("materials.hard.law", "materials.soft.law.mu"));
        assert!(follows("cases[0].accept[0].level", "cases[0].levels[1]"));
        assert!(!follows("cases[0].accept[0].error", "cases[0].levels[1]"));
        assert!(!follows("cases[1].accept[0].level", "cases[0].levels[1]"));
        assert!(!follows("cases[0].problem.a.b", "cases[0].section"));
    }
}
