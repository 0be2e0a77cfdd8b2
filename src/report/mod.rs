//! Writers: outcome in, text out; one file per format.
//!
//! A writer decides nothing, recomputes no verdict, opens no file and reads no clock: the same outcome is the
//! same text, everywhere. To add a format, write one file with one function `outcome -> String` and give it
//! an arm in [`Format`].

pub mod html;
pub mod json;
pub mod junit;
pub mod measures_csv;
pub mod terminal;

mod margin;
mod numbers;
mod text;
mod wording;

pub use terminal::Look;

use crate::verdict::outcome::Outcome;

/// Everything an outcome can be written as.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Format {
    /// The terminal's text, 80 columns, without colour.
    Text,
    /// The report: one self-contained page.
    Html,
    /// The outcome itself, readable again by [`json::read`].
    Json,
    /// For continuous integration.
    Junit,
    /// Every number, for spreadsheets and plotting programs.
    MeasuresCsv,
}

impl Format {
    pub const ALL: [Format; 5] = [
        Self::Text,
        Self::Html,
        Self::Json,
        Self::Junit,
        Self::MeasuresCsv,
    ];

    /// The word a user chooses the format by.
    pub fn name(self) -> &'static str {
        match self {
            Self::Text => "text",
            Self::Html => "html",
            Self::Json => "json",
            Self::Junit => "junit",
            Self::MeasuresCsv => "csv",
        }
    }

    /// What a file in this format is called.
    pub fn file_name(self) -> &'static str {
        match self {
            Self::Text => "report.txt",
            Self::Html => "report.html",
            Self::Json => "outcome.json",
            Self::Junit => "junit.xml",
            Self::MeasuresCsv => "measures.csv",
        }
    }

    /// The format with this name.
    pub fn find(name: &str) -> Option<Format> {
        Self::ALL.into_iter().find(|format| format.name() == name)
    }
}

/// The outcome in this format.
pub fn write(format: Format, outcome: &Outcome) -> String {
    match format {
        Format::Text => terminal::terminal(outcome, Look::default()),
        Format::Html => html::html(outcome),
        Format::Json => json::json(outcome),
        Format::Junit => junit::junit(outcome),
        Format::MeasuresCsv => measures_csv::measures_csv(outcome),
    }
}
