//! `check`: the main job, from suite files to reports.

use super::Exit;
use super::args;
use super::exact::print;
use super::files;
use super::look::Look;
use crate::input::Finding;
use crate::report::{self, Format, terminal};
use crate::run::check::{Progress, check};
use crate::run::plan::{self, Plan};
use crate::verdict::Verdict;
use crate::verdict::outcome::Outcome;
use std::io::Write;
use std::path::{Path, PathBuf};

/// Reads and plans a suite.
///
/// # Errors
/// Every problem found.
pub fn plan_of(path: &Path) -> Result<Plan, Vec<Finding>> {
    read(path).map(|(plan, _)| plan)
}

/// The plan, and the text it was made from.
fn read(path: &Path) -> Result<(Plan, String), Vec<Finding>> {
    let text = files::read_suite(path).map_err(|finding| vec![finding])?;
    let plan = plan::read(&text, &path.display().to_string())?;
    Ok((plan, text))
}

/// Findings that are printed; the rest are counted.
const SHOWN: usize = 50;

/// Prints findings to stderr.
pub fn refuse(findings: &[Finding]) -> Exit {
    let mut text = String::new();
    for finding in findings.iter().take(SHOWN) {
        text.push_str(&format!("error: {finding}\n"));
    }
    if findings.len() > SHOWN {
        text.push_str(&format!("and {} more\n", findings.len() - SHOWN));
    }
    if findings.len() > 1 {
        text.push_str(&format!(
            "{} problems; nothing was judged and no report was changed\n",
            findings.len()
        ));
    }
    eprint(&text);
    Exit::CouldNotJudge
}

/// One message on stderr.
pub fn complain(message: &str) -> Exit {
    eprint(&format!("error: {message}\n"));
    Exit::CouldNotJudge
}

/// Writes to stderr; a closed pipe is no fault.
pub fn eprint(text: &str) {
    let mut err = std::io::stderr().lock();
    let _ = err.write_all(text.as_bytes());
    let _ = err.flush();
}

/// `truebore check`.
pub fn run(options: &args::Check, look: Look) -> Exit {
    if options.out.is_some() && options.suites.len() > 1 {
        return complain(
            "--out names the folder of one suite, and there are several\n  hint: check them one by one",
        );
    }
    let mut written = Vec::new();
    let exits = options
        .suites
        .iter()
        .map(|suite| run_one(suite, options, look, &mut written));
    exits.max().unwrap_or(Exit::CouldNotJudge)
}

/// `written` are the report folders of the suites before, with their suites.
fn run_one(
    path: &Path,
    options: &args::Check,
    look: Look,
    written: &mut Vec<(PathBuf, String)>,
) -> Exit {
    let (plan, text) = match read(path) {
        Ok(read) => read,
        Err(findings) => return refuse(&findings),
    };
    if plan.cases.iter().all(|case| case.levels.is_empty()) {
        return complain(&format!(
            "{}: no case names result sets\n  expected: `results:` and `levels:`\n  hint: `truebore brief` says what to export",
            plan.file
        ));
    }
    let out = options
        .out
        .clone()
        .unwrap_or_else(|| Path::new("reports").join(&plan.suite.id));
    if let Some((_, first)) = written.iter().find(|(folder, _)| *folder == out) {
        return complain(&format!(
            "{}: its reports would replace those of {first} in {}\n  hint: name each suite once, and give each its own `suite:`",
            plan.file,
            out.display()
        ));
    }
    written.push((out.clone(), plan.file.clone()));
    let folder = path.parent().map_or_else(PathBuf::new, Path::to_path_buf);
    let progress = Line { live: look.live };
    let outcome = match check(&plan, text.as_bytes(), &folder, &progress) {
        Ok(outcome) => outcome,
        Err(findings) => {
            progress.clear();
            return refuse(&findings);
        }
    };
    progress.clear();
    let (read, named) = result_sets(&outcome);
    eprint(&format!(
        "{read} of {named} result sets read and measured\n"
    ));
    if let Err(finding) = files::write_together(&out, &reports(&outcome)) {
        return refuse(&[finding]);
    }
    let said = if options.json {
        report::json::json(&outcome)
    } else {
        let look = terminal::Look {
            colour: look.colour,
            width: 80,
        };
        let table = terminal::terminal(&outcome, look);
        format!("{table}reports in {}\n", out.display())
    };
    print(&said, exit_of(&outcome))
}

/// How many result sets were there, of how many that are named.
fn result_sets(outcome: &Outcome) -> (usize, usize) {
    let levels = || outcome.cases.iter().flat_map(|case| &case.levels);
    (
        levels().filter(|level| level.missing.is_none()).count(),
        levels().count(),
    )
}

/// Every report that is a file, with its name.
fn reports(outcome: &Outcome) -> Vec<(&'static str, String)> {
    let formats = Format::ALL
        .into_iter()
        .filter(|format| *format != Format::Text);
    formats
        .map(|format| (format.file_name(), report::write(format, outcome)))
        .collect()
}

fn exit_of(outcome: &Outcome) -> Exit {
    if outcome.verdict == Verdict::Pass {
        Exit::AllPass
    } else {
        Exit::NotAllPass
    }
}

/// The progress line on stderr.
struct Line {
    live: bool,
}

impl Line {
    fn clear(&self) {
        if self.live {
            eprint("\r\x1b[K");
        }
    }
}

impl Progress for Line {
    fn step(&self, done: usize, all: usize, what: &str) {
        if self.live {
            eprint(&format!("\r\x1b[Kresult set {done} of {all}: {what}"));
        }
    }
}
