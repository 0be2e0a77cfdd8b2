//! What a suite declares of its files, checked before any file is read.

use crate::input::Finding;
use crate::results::column_names;
use crate::suite::model::ExportEntry;
use crate::suite::{Reader, nearest};

/// Names under `columns:` are those of the exchange format.
pub fn check_columns(export: &ExportEntry, reader: &mut Reader) {
    for (table, name, header) in &export.columns {
        let known = column_names(table);
        if known.contains(name) {
            continue;
        }
        let place = reader.place(header.line, header.column, &header.path);
        let found = format!("\"{name}\" is no name of the exchange format");
        let finding = reader.push(Finding::refused("unknown-canonical-name", place, found));
        finding.expected =
            "the exchange format's name on the left, your header on the right".to_string();
        finding.hint = match nearest(name, known.iter().map(String::as_str)) {
            Some(near) => format!("did you mean `{near}`?"),
            None => "`truebore catalogue columns` lists all names".to_string(),
        };
    }
}
