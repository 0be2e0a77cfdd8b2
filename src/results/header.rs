//! Columns by the names of the exchange format, or by the names a suite declares for them.

use super::conventions::ColumnNames;
use super::files::TableName;
use super::log::Log;
use crate::input::{Finding, Place, Weight};
use std::collections::BTreeMap;

const POSITION: &[&str] = &["X", "Y", "Z", "R", "Theta"];
const STRESS: &[&str] = &[
    "sxx", "syy", "szz", "sxy", "syz", "szx", "srr", "stt", "srt", "stz", "szr", "P11", "P12",
    "P13", "P21", "P22", "P23", "P31", "P32", "P33",
];
const STATE: &[&str] = &[
    "p", "J", "F11", "F12", "F13", "F21", "F22", "F23", "F31", "F32", "F33", "step",
];

/// Names of the exchange format in a table (`nodes`, `elements`, `points`, `totals`), or in any for an empty name.
pub fn column_names(table: &str) -> Vec<String> {
    let tables = TableName::ALL
        .into_iter()
        .filter(|t| table.is_empty() || t.name() == table);
    tables.flat_map(canonical_names).collect()
}

/// Every name of the exchange format in a table.
pub(crate) fn canonical_names(table: TableName) -> Vec<String> {
    let (own, shared): (Vec<String>, &[&[&str]]) = match table {
        TableName::Nodes => (
            words(&["node", "ux", "uy", "uz", "ur", "ut", "x", "y", "z"]),
            &[POSITION, STRESS, STATE],
        ),
        TableName::Elements => {
            let mut names = words(&["element", "shape", "region"]);
            names.extend((1..=crate::elements::MAX_NODES).map(|n| format!("n{n}")));
            (names, &[])
        }
        TableName::Points => (
            words(&["element", "point", "weight", "W"]),
            &[POSITION, STRESS, STATE],
        ),
        TableName::Totals => (words(&["quantity", "value", "step"]), &[]),
    };
    let shared = shared.iter().flat_map(|names| words(names));
    own.into_iter().chain(shared).collect()
}

fn words(names: &[&str]) -> Vec<String> {
    names.iter().map(|n| n.to_string()).collect()
}

/// The header of a table.
#[derive(Debug, Clone)]
pub(crate) struct Header {
    pub table: TableName,
    /// The first part, as reports name it.
    pub file: String,
    pub line: u64,
    names: Vec<String>,
    mapping: BTreeMap<String, String>,
    /// For each column the name it is read as.
    used: Vec<Option<String>>,
}

impl Header {
    pub fn new(
        table: TableName,
        file: &str,
        line: u64,
        names: Vec<String>,
        columns: &ColumnNames,
        log: &mut Log,
    ) -> Option<Self> {
        let place = Place::file(file).line(line);
        let mut twice = false;
        for (i, name) in names.iter().enumerate() {
            if !name.is_empty() && names[..i].contains(name) {
                let first = names.iter().position(|n| n == name).unwrap_or(0) + 1;
                let what = format!("columns {first} and {} are both named \"{name}\"", i + 1);
                log.add(Finding::refused(
                    "duplicate-column",
                    place.clone().field(name),
                    what,
                ));
                twice = true;
            }
        }
        if twice {
            return None;
        }
        let mut mapping = columns.all.clone();
        mapping.extend(own_names(columns, table).clone());
        let used = vec![None; names.len()];
        Some(Self {
            table,
            file: file.to_string(),
            line,
            names,
            mapping,
            used,
        })
    }

    pub fn names(&self) -> &[String] {
        &self.names
    }

    /// The name of a column as the file has it.
    pub fn name_of(&self, column: usize) -> &str {
        self.names.get(column).map_or("", String::as_str)
    }

    /// The header that stands for a name of the exchange format.
    pub fn header_for<'a>(&'a self, canonical: &'a str) -> &'a str {
        self.mapping
            .get(canonical)
            .map_or(canonical, String::as_str)
    }

    /// The column, without claiming it.
    pub fn peek(&self, canonical: &str) -> Option<usize> {
        let wanted = self.header_for(canonical);
        self.names.iter().position(|name| name == wanted)
    }

    /// The column that holds `canonical`, which is read from now on.
    pub fn find(&mut self, canonical: &str, log: &mut Log) -> Option<usize> {
        let column = self.peek(canonical)?;
        match &self.used[column] {
            Some(other) if other != canonical => {
                let what = format!("the column is read as {other} and as {canonical}");
                let place = Place::file(&self.file)
                    .line(self.line)
                    .field(&self.names[column]);
                log.add(
                    Finding::refused("column-used-twice", place, what)
                        .hint("correct `columns:` in the suite"),
                );
            }
            _ => self.used[column] = Some(canonical.to_string()),
        }
        Some(column)
    }

    /// As [`Self::find`], with a finding when it is not there.
    pub fn require(&mut self, canonical: &str, log: &mut Log) -> Option<usize> {
        let column = self.find(canonical, log);
        if column.is_none() {
            log.add(self.missing(canonical));
        }
        column
    }

    /// The finding for a column that is not there.
    pub fn missing(&self, canonical: &str) -> Finding {
        let wanted = self.header_for(canonical);
        let place = Place::file(&self.file).line(self.line).field(wanted);
        let what = format!("there is no column \"{wanted}\"");
        Finding::refused("missing-column", place, what)
            .expected(format!("columns found: {}", self.names.join(", ")))
            .hint(self.hint(canonical))
    }

    /// Why a quantity is not available, in one line.
    pub fn missing_reason(&self, canonical: &str) -> String {
        let wanted = self.header_for(canonical);
        let mut reason = format!("{} has no column \"{wanted}\"", self.file);
        if let Some(close) = self.close_to(canonical) {
            reason += &format!(" (did you mean \"{close}\"?)");
        }
        reason
    }

    fn hint(&self, canonical: &str) -> String {
        match self.close_to(canonical) {
            Some(close) => format!(
                "if \"{close}\" is it, write `columns: {{ {canonical}: {close} }}` in the suite"
            ),
            None => format!(
                "export it, or name its header in the suite: `columns: {{ {canonical}: HEADER }}`"
            ),
        }
    }

    /// A header that looks like `canonical` and is no name of the exchange format itself.
    fn close_to(&self, canonical: &str) -> Option<&str> {
        let known = canonical_names(self.table);
        let plain = |name: &str| -> String {
            let letters = name.chars().filter(|c| c.is_ascii_alphanumeric());
            letters.map(|c| c.to_ascii_lowercase()).collect()
        };
        let wanted = plain(canonical);
        let strangers = || {
            self.names
                .iter()
                .filter(|n| !n.is_empty() && !known.contains(n))
        };
        let same = strangers().find(|n| plain(n) == wanted);
        let near =
            || strangers().find(|n| wanted.len() >= 4 && edit_distance(&plain(n), &wanted) <= 2);
        same.or_else(near).map(String::as_str)
    }

    /// A note on the columns that were not read.
    pub fn note_unread(&self, log: &mut Log) {
        let unread: Vec<&str> = (self.names.iter().zip(&self.used))
            .filter(|(name, used)| used.is_none() && !name.is_empty())
            .map(|(name, _)| name.as_str())
            .collect();
        if !unread.is_empty() {
            let what = format!("not read: {}", unread.join(", "));
            let place = Place::file(&self.file).line(self.line);
            log.add(Finding::new(Weight::Note, "unread-column", place, what));
        }
    }
}

fn own_names(columns: &ColumnNames, table: TableName) -> &BTreeMap<String, String> {
    match table {
        TableName::Nodes => &columns.nodes,
        TableName::Elements => &columns.elements,
        TableName::Points => &columns.points,
        TableName::Totals => &columns.totals,
    }
}

/// Checks that every declared header exists, and stands for a name of the exchange format.
pub(crate) fn check_mapping(
    columns: &ColumnNames,
    headers: &[&Header],
    shown: &str,
    log: &mut Log,
) {
    let mut check = |names: &BTreeMap<String, String>, tables: &[TableName]| {
        for (canonical, header) in names {
            let place = Place::file(shown).field(format!("columns.{canonical}"));
            if !tables
                .iter()
                .any(|&t| canonical_names(t).contains(canonical))
            {
                let what = format!("\"{canonical}\" is no name of the exchange format");
                log.add(Finding::refused("unknown-canonical-name", place, what));
                continue;
            }
            let found = headers.iter().any(|h| {
                tables.contains(&h.table)
                    && h.header_for(canonical) == header
                    && h.peek(canonical).is_some()
            });
            let overridden = tables.len() > 1
                && tables
                    .iter()
                    .any(|&t| own_names(columns, t).contains_key(canonical));
            // a table that is missing may be the one the column stands in; what needs it will say so
            let could_be_missing = tables.iter().any(|t| {
                canonical_names(*t).contains(canonical) && !headers.iter().any(|h| h.table == *t)
            });
            if !found && !overridden && !could_be_missing {
                let what = format!("no table has the column \"{header}\" declared for {canonical}");
                log.add(Finding::refused("mapped-column-found", place, what));
            }
        }
    };
    check(&columns.all, &TableName::ALL);
    for table in TableName::ALL {
        check(own_names(columns, table), &[table]);
    }
}

/// Levenshtein distance of two short ASCII words.
fn edit_distance(a: &str, b: &str) -> usize {
    let (a, b) = (a.as_bytes(), b.as_bytes());
    let mut row: Vec<usize> = (0..=b.len()).collect();
    for (i, x) in a.iter().enumerate() {
        let mut diagonal = row[0];
        row[0] = i + 1;
        for (j, y) in b.iter().enumerate() {
            let substituted = diagonal + usize::from(x != y);
            diagonal = row[j + 1];
            row[j + 1] = substituted.min(diagonal + 1).min(row[j] + 1);
        }
    }
    row[b.len()]
}

#[cfg(test)]
mod tests {
    use super::*;

    fn header(names: &[&str], columns: &ColumnNames) -> Header {
        let mut log = Log::new();
        let header = Header::new(
            TableName::Nodes,
            "n.csv",
            1,
            words(names),
            columns,
            &mut log,
        );
        assert!(!log.is_refused());
        header.unwrap()
    }

    #[test]
    fn a_close_header_is_suggested_but_never_another_known_name() {
        let h = header(
            &["node", "x", "Y", "U_X", "uy", "TETHA"],
            &ColumnNames::default(),
        );
        assert_eq!(h.close_to("ux"), Some("U_X"));
        assert_eq!(h.close_to("X"), None);
        assert_eq!(h.close_to("Theta"), Some("TETHA"));
        assert!(h.missing("ux").hint.contains("columns: { ux: U_X }"));
        assert!(h.missing_reason("uz").contains("no column \"uz\""));
    }

    #[test]
    fn a_column_read_as_two_quantities_is_refused() {
        let mut columns = ColumnNames::default();
        columns.all.insert("ux".into(), "uy".into());
        let mut h = header(&["node", "uy"], &columns);
        let mut log = Log::new();
        assert_eq!(h.find("ux", &mut log), Some(1));
        assert!(!log.is_refused());
        h.find("uy", &mut log);
        assert_eq!(log.finish("").unwrap_err()[0].rule, "column-used-twice");
    }

    #[test]
    fn declared_headers_must_exist_and_stand_for_known_names() {
        let mut columns = ColumnNames::default();
        columns.all.insert("ux".into(), "U1".into());
        columns.nodes.insert("banana".into(), "node".into());
        columns.nodes.insert("uy".into(), "U2".into());
        // points.csv is not there: its columns are not looked for
        columns.points.insert("p".into(), "press".into());
        let h = header(&["node", "U1"], &columns);
        let mut log = Log::new();
        check_mapping(&columns, &[&h], "case", &mut log);
        let rules: Vec<String> = log
            .finish("")
            .unwrap_err()
            .into_iter()
            .map(|f| f.rule)
            .collect();
        assert_eq!(rules, ["unknown-canonical-name", "mapped-column-found"]);
    }

    #[test]
    fn edit_distance_counts_changes() {
        assert_eq!(edit_distance("weight", "wieght"), 2);
        assert_eq!(edit_distance("", "abc"), 3);
        assert_eq!(edit_distance("same", "same"), 0);
    }
}
