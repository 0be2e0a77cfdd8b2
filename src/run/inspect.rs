//! Reads everything a suite names and says what is there, odd or missing. Judges nothing.

use super::level::{self, LevelResult};
use super::plan::{CasePlan, Plan};
use crate::input::{Finding, Weight};
use std::fmt::Write;
use std::path::Path;

/// What was seen.
#[derive(Debug, Clone, PartialEq)]
pub struct Seen {
    pub text: String,
    /// True when something forbids judging.
    pub refused: bool,
}

/// Looks at every result set of the plan, or of one case.
pub fn inspect(plan: &Plan, only: Option<&str>, folder: &Path) -> Seen {
    let mut seen = Seen {
        text: String::new(),
        refused: false,
    };
    for case in plan
        .cases
        .iter()
        .filter(|case| only.is_none_or(|id| case.id == id))
    {
        let _ = writeln!(seen.text, "{}: {}", case.id, case.title);
        if case.levels.is_empty() {
            let _ = writeln!(seen.text, "  no result sets are named");
        }
        for plan in &case.levels {
            let _ = writeln!(seen.text, "  level {}: {}", plan.name, plan.folder);
            match level::measure(case, plan, folder) {
                Ok(result) => describe(case, &result, &mut seen.text),
                Err(findings) => {
                    seen.refused = true;
                    list(&findings, &mut seen.text);
                }
            }
        }
    }
    seen
}

fn describe(case: &CasePlan, result: &LevelResult, text: &mut String) {
    let o = &result.outcome;
    if let Some(why) = &o.missing {
        let _ = writeln!(text, "    {why}");
        return;
    }
    let length = case.units.length.name;
    let dimension = o.dimension.map_or(String::new(), |d| format!(" in {d}D"));
    let _ = writeln!(
        text,
        "    {} nodes, {} elements{dimension} ({}), {} integration points",
        o.nodes, o.elements, o.shapes, o.points
    );
    if let Some(step) = o.step {
        let _ = writeln!(text, "    load step {step}");
    }
    if let (Some(volume), Some(exact)) = (o.volume, o.exact_volume) {
        let h =
            o.h.map_or(String::new(), |h| format!(", element size {h:.4} {length}"));
        let _ = writeln!(
            text,
            "    meshed volume {volume:.6e}, of the exact body {exact:.6e} ({:+.1e}){h}; mid-side nodes on walls: {}",
            volume / exact - 1.0,
            o.walls
        );
    }
    let (there, missing): (Vec<_>, Vec<_>) = result
        .measures
        .measured
        .iter()
        .partition(|m| m.absolute.is_ok());
    let names: Vec<_> = there.iter().map(|m| m.measure.as_str()).collect();
    let _ = writeln!(text, "    can be measured: {}", names.join(", "));
    let mut reasons: Vec<(String, Vec<&str>)> = Vec::new();
    for measure in &missing {
        let why = measure.absolute.as_ref().err().cloned().unwrap_or_default();
        match reasons.iter_mut().find(|(known, _)| *known == why) {
            Some((_, names)) => names.push(&measure.measure),
            None => reasons.push((why, vec![&measure.measure])),
        }
    }
    for (why, names) in reasons {
        let _ = writeln!(text, "    cannot: {} ({why})", names.join(", "));
    }
    list(&result.findings, text);
}

fn list(findings: &[Finding], text: &mut String) {
    for finding in findings {
        let word = match finding.weight {
            Weight::Note => "note",
            Weight::Caution => "caution",
            Weight::Refused => "refused",
        };
        let said = finding.to_string().replace('\n', "\n    ");
        let _ = writeln!(text, "    {word}: {said}");
    }
}
