//! The arguments of every command.

use super::look::Color;
use clap::{Args, Parser, Subcommand};
use std::path::PathBuf;

/// Judges finite-element results of pressurised, large-strain parts against exact solutions.
///
/// Exit status: 0 all criteria pass; 1 judged, and not all pass; 2 could not judge.
#[derive(Debug, Parser)]
#[command(name = "truebore", version, max_term_width = 100)]
pub struct Arguments {
    #[command(subcommand)]
    pub command: Command,
    /// Colour on the terminal (NO_COLOR is honoured)
    #[arg(long, global = true, value_enum, default_value_t = Color::Auto)]
    pub color: Color,
    /// Threads to use; the result does not depend on it
    #[arg(long, global = true, value_name = "N", value_parser = parse_threads)]
    pub threads: Option<usize>,
}

fn parse_threads(text: &str) -> Result<usize, String> {
    match text.parse() {
        Ok(n @ 1..=1024) => Ok(n),
        _ => Err("a whole number from 1 to 1024".to_string()),
    }
}

#[derive(Debug, Subcommand)]
pub enum Command {
    /// Compute, read, measure, judge, report
    Check(Check),
    /// Say what to model and export for each case
    Brief(Brief),
    /// Table an exact solution as CSV
    Exact(Exact),
    /// Read the result sets and say what is there, odd or missing; judge nothing
    Inspect(Inspect),
    /// List exact solutions, materials, elements, measures, units and rules
    Catalogue(Catalogue),
}

#[derive(Debug, Args)]
pub struct Check {
    /// Suite files
    #[arg(required = true, value_name = "SUITE")]
    pub suites: Vec<PathBuf>,
    /// Folder for the reports of one suite [default: reports/<suite id>]
    #[arg(long, value_name = "DIR")]
    pub out: Option<PathBuf>,
    /// Print the outcome as JSON instead of the table
    #[arg(long)]
    pub json: bool,
}

#[derive(Debug, Args)]
pub struct Brief {
    #[arg(value_name = "SUITE")]
    pub suite: PathBuf,
    /// Only this case
    #[arg(long, value_name = "ID")]
    pub case: Option<String>,
    /// Also write CSV files with empty tables and the right headers into this folder
    #[arg(long, value_name = "DIR")]
    pub headers: Option<PathBuf>,
}

#[derive(Debug, Args)]
pub struct Exact {
    #[arg(value_name = "SUITE")]
    pub suite: PathBuf,
    /// The case, as `check` and `brief` name it
    #[arg(long, value_name = "ID")]
    pub case: String,
    #[command(flatten)]
    pub what: ExactTable,
}

#[derive(Debug, Args)]
#[group(required = true, multiple = false)]
pub struct ExactTable {
    /// N stations along the solution's own line: from the inner to the outer wall
    #[arg(long, value_name = "N", value_parser = parse_stations)]
    pub stations: Option<usize>,
    /// At the X,Y[,Z] of a CSV file
    #[arg(long, value_name = "FILE")]
    pub points: Option<PathBuf>,
    /// Body force at the X,Y[,Z] of a CSV file; with NX,NY[,NZ] also the traction on that face, both per reference measure
    #[arg(long, value_name = "FILE")]
    pub loads: Option<PathBuf>,
    /// Numbers of the whole part
    #[arg(long)]
    pub totals: bool,
}

fn parse_stations(text: &str) -> Result<usize, String> {
    match text.parse() {
        Ok(n @ 1..=1_000_000) => Ok(n),
        _ => Err("a whole number from 1 to 1000000".to_string()),
    }
}

#[derive(Debug, Args)]
pub struct Inspect {
    #[arg(value_name = "SUITE")]
    pub suite: PathBuf,
    /// Only this case
    #[arg(long, value_name = "ID")]
    pub case: Option<String>,
}

#[derive(Debug, Args)]
pub struct Catalogue {
    /// An entry, e.g. pressurised-tube, neo-Hookean, quad9, stress-L2
    pub name: Option<String>,
}
