//! CSV files of numbers that a suite names beside itself.

use crate::exact::given::TableData;
use crate::input::{Finding, Place};
use crate::suite::Reader;
use crate::suite::tree::Node;
use sha2::{Digest, Sha256};
use std::path::{Component, Path};

/// Largest file that is read.
const LARGEST: u64 = 16 << 20;

/// Where such a file can be.
const BESIDE: &str = "a CSV file beside the suite or in a folder below";

/// Reads the file under a key; every fault is reported.
pub fn read(node: &Node, path: &str, folder: &Path, reader: &mut Reader) -> Option<TableData> {
    let name = reader.text(node, path)?;
    let inside = |c: Component| matches!(c, Component::Normal(_) | Component::CurDir);
    if !Path::new(&name).components().all(inside) {
        let found = format!("\"{name}\" is not below the suite's folder");
        reader.refuse("cannot-read", node, path, found).expected = BESIDE.into();
        return None;
    }
    let bytes = std::fs::metadata(folder.join(&name)).and_then(|about| {
        if about.len() > LARGEST {
            return Err(std::io::Error::other("the file is larger than 16 MiB"));
        }
        std::fs::read(folder.join(&name))
    });
    let bytes = match bytes {
        Ok(bytes) => bytes,
        Err(e) => {
            let found = format!("\"{name}\" cannot be read: {e}");
            reader.refuse("cannot-read", node, path, found).expected = BESIDE.into();
            return None;
        }
    };
    match parse(&bytes, &name) {
        Ok(table) => Some(table),
        Err(finding) => {
            reader.push(finding);
            None
        }
    }
}

fn parse(bytes: &[u8], name: &str) -> Result<TableData, Finding> {
    let mut csv = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .trim(csv::Trim::All)
        .from_reader(bytes);
    let place = || Place::file(name);
    let syntax = |e: csv::Error| {
        let line = e.position().map_or(place(), |p| place().line(p.line()));
        Finding::refused("csv-syntax", line, e.to_string())
    };
    let headers = csv.headers().map_err(syntax)?.clone();
    let mut columns: Vec<(String, Vec<f64>)> = Vec::new();
    for header in &headers {
        if columns.iter().any(|(known, _)| known == header) {
            let found = format!("two columns are called `{header}`");
            return Err(Finding::refused("csv-syntax", place().line(1), found));
        }
        columns.push((header.to_string(), Vec::new()));
    }
    let mut rows = 0;
    for record in csv.records() {
        let record = record.map_err(syntax)?;
        let line = record.position().map_or(0, csv::Position::line);
        rows += 1;
        for ((header, numbers), cell) in columns.iter_mut().zip(&record) {
            match cell.parse::<f64>().ok().filter(|v| v.is_finite()) {
                Some(number) => numbers.push(number),
                None => {
                    let at = place().line(line).field(header.as_str());
                    let found = format!("\"{cell}\" is not a finite number");
                    return Err(Finding::refused("finite-number", at, found));
                }
            }
        }
    }
    Ok(TableData {
        file: name.to_string(),
        sha256: Sha256::digest(bytes)
            .iter()
            .map(|b| format!("{b:02x}"))
            .collect(),
        bytes: bytes.len() as u64,
        rows,
        columns,
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_are_read_and_anything_else_is_refused_at_its_line() {
        let table = parse(b"# source\np, a\n0, 8\n0.1, 8.5\n", "t.csv").unwrap();
        assert_eq!(table.column("a"), Some([8.0, 8.5].as_slice()));
        assert_eq!((table.rows, table.bytes), (2, 28));
        let refused = |text: &[u8]| parse(text, "t.csv").unwrap_err();
        assert_eq!(refused(b"p,a\n0,8\n1,nan\n").place.line, Some(3));
        assert_eq!(refused(b"p,p\n0,8\n").rule, "csv-syntax");
        assert_eq!(refused(b"p,a\n0\n").rule, "csv-syntax");
    }
}
