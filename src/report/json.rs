//! The outcome as JSON, to be read again by history and audit.

use crate::verdict::outcome::{FORMAT, Outcome};
use serde::Deserialize;

/// The whole record, indented, every number with the digits that read back to the same double.
pub fn json(outcome: &Outcome) -> String {
    match serde_json::to_string_pretty(outcome) {
        Ok(text) => text + "\n",
        // plain records of text and numbers always serialise; if that ever changes, `read` must refuse the file
        Err(error) => format!("{{ \"unwritten\": {:?} }}\n", error.to_string()),
    }
}

/// Reads what [`json`] wrote, refusing a record of another format.
pub fn read(text: &str) -> Result<Outcome, String> {
    #[derive(Deserialize)]
    struct Head {
        format: Option<u32>,
    }
    let head: Head =
        serde_json::from_str(text).map_err(|error| format!("not an outcome: {error}"))?;
    match head.format {
        Some(FORMAT) => {
            serde_json::from_str(text).map_err(|error| format!("damaged outcome: {error}"))
        }
        Some(other) => Err(format!(
            "outcome of format {other}; this program reads format {FORMAT}"
        )),
        None => Err(format!(
            "not an outcome: no `format`; this program reads format {FORMAT}"
        )),
    }
}
