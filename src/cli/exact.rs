//! `exact` and `brief`: what a suite asks for, without any result set.

use super::args;
use super::files;
use super::{Exit, check};
use crate::run::plan::{CasePlan, Plan};
use crate::run::point_table::{Wanted, at_points};
use crate::run::{brief as briefs, stability, tables};
use crate::suite::nearest;
use std::io::Write;

/// Prints text to stdout and ends with `exit`. A closed pipe is no fault, a full disk is.
pub fn print(text: &str, exit: Exit) -> Exit {
    let mut out = std::io::stdout().lock();
    match out.write_all(text.as_bytes()).and_then(|()| out.flush()) {
        Err(e) if e.kind() != std::io::ErrorKind::BrokenPipe => {
            check::complain(&format!("the output cannot be written: {e}"))
        }
        _ => exit,
    }
}

/// `truebore exact`.
pub fn run(options: &args::Exact) -> Exit {
    let plan = match check::plan_of(&options.suite) {
        Ok(plan) => plan,
        Err(findings) => return check::refuse(&findings),
    };
    let case = match case_of(&plan, &options.case) {
        Ok(case) => case,
        Err(message) => return check::complain(&message),
    };
    if let Some(caution) = stability::caution(case) {
        check::eprint(&format!("caution: {caution}\n"));
    }
    if let Some(count) = options.what.stations {
        return match tables::stations(case, count) {
            Ok(csv) => done(&csv),
            Err(message) => check::complain(&format!("{}: {message}", case.id)),
        };
    }
    for (file, wanted) in [
        (&options.what.points, Wanted::Fields),
        (&options.what.loads, Wanted::Loads),
    ] {
        if let Some(path) = file {
            return points(case, path, wanted);
        }
    }
    done(&tables::totals(case))
}

fn points(case: &CasePlan, path: &std::path::Path, wanted: Wanted) -> Exit {
    let bytes = match files::read_bytes(path) {
        Ok(bytes) => bytes,
        Err(finding) => return check::refuse(&[finding]),
    };
    match at_points(
        case.exact.as_ref(),
        wanted,
        &bytes,
        &path.display().to_string(),
    ) {
        Ok(table) => {
            if table.outside > 0 {
                check::eprint(&format!(
                    "note: {} points lie outside the body, by {:.3e} {} at most; the formula is continued there\n",
                    table.outside, table.outside_distance, case.units.length.name
                ));
            }
            done(&table.csv)
        }
        Err(findings) => check::refuse(&findings),
    }
}

fn done(text: &str) -> Exit {
    print(text, Exit::AllPass)
}

/// The case of that id.
pub fn case_of<'p>(plan: &'p Plan, id: &str) -> Result<&'p CasePlan, String> {
    plan.cases
        .iter()
        .find(|case| case.id == id)
        .ok_or_else(|| unknown_case(plan, id))
}

fn unknown_case(plan: &Plan, id: &str) -> String {
    let ids = || plan.cases.iter().map(|case| case.id.as_str());
    let mut message = format!("{}: there is no case \"{id}\"", plan.file);
    if let Some(near) = nearest(id, ids()) {
        message.push_str(&format!("\n  hint: did you mean \"{near}\"?"));
    }
    let shown: Vec<_> = ids().take(20).collect();
    message.push_str(&format!("\n  expected: one of {}", shown.join(", ")));
    if plan.cases.len() > shown.len() {
        message.push_str(&format!(
            " and {} more (`truebore brief` lists all)",
            plan.cases.len() - shown.len()
        ));
    }
    message
}

/// Empty tables with the headers of a case.
fn headers(case: &CasePlan) -> [(&'static str, String); 4] {
    [
        ("nodes.csv", briefs::nodes_header(case) + "\n"),
        ("elements.csv", briefs::elements_header(case) + "\n"),
        ("points.csv", briefs::points_header(case) + "\n"),
        ("totals.csv", "quantity,value\n".to_string()),
    ]
}

/// `truebore brief`.
pub fn brief(options: &args::Brief) -> Exit {
    let plan = match check::plan_of(&options.suite) {
        Ok(plan) => plan,
        Err(findings) => return check::refuse(&findings),
    };
    if let Some(id) = &options.case
        && let Err(message) = case_of(&plan, id)
    {
        return check::complain(&message);
    }
    if let Some(folder) = &options.headers {
        let cases = || {
            let asked = |id: &str| options.case.as_ref().is_none_or(|only| id == only);
            plan.cases.iter().filter(move |case| asked(&case.id))
        };
        // an empty table never replaces one that may hold results
        for case in cases() {
            let taken = |(name, _): &(&str, String)| folder.join(&case.id).join(name).exists();
            if let Some((name, _)) = headers(case).iter().find(|file| taken(file)) {
                let path = folder.join(&case.id).join(name);
                return check::complain(&format!(
                    "{}: there is such a file already, and nothing was written\n  hint: choose another folder with --headers",
                    path.display()
                ));
            }
        }
        for case in cases() {
            if let Err(finding) = files::write_together(&folder.join(&case.id), &headers(case)) {
                return check::refuse(&[finding]);
            }
        }
    }
    done(&briefs::brief(&plan, options.case.as_deref()))
}
