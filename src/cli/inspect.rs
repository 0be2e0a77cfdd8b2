//! `inspect`: what is there, odd or missing; judges nothing.

use super::args;
use super::exact::{case_of, print};
use super::{Exit, check};
use crate::run::inspect;
use std::path::{Path, PathBuf};

/// `truebore inspect`. Ends with 2 when a result set could not be judged as it is.
pub fn run(options: &args::Inspect) -> Exit {
    let plan = match check::plan_of(&options.suite) {
        Ok(plan) => plan,
        Err(findings) => return check::refuse(&findings),
    };
    if let Some(id) = &options.case
        && let Err(message) = case_of(&plan, id)
    {
        return check::complain(&message);
    }
    let folder = options
        .suite
        .parent()
        .map_or_else(PathBuf::new, Path::to_path_buf);
    let seen = inspect::inspect(&plan, options.case.as_deref(), &folder);
    let exit = if seen.refused {
        Exit::CouldNotJudge
    } else {
        Exit::AllPass
    };
    print(&seen.text, exit)
}
