//! One table, row by row, over all its parts; with its line numbers and its distrust.

use super::files::{InputFile, Opened, Part, Parts, TableName};
use super::header::Header;
use super::log::Log;
use super::number::{Problem, integer, number};
use crate::input::{Finding, Place, Weight};
use csv::ByteRecord;
use std::io::{BufRead, BufReader, Cursor, Read};

/// A table whose header was read and accepted.
#[derive(Debug)]
pub(crate) struct Table {
    pub name: TableName,
    pub parts: Parts,
    pub header: Header,
}

/// One row.
pub(crate) struct Row<'a> {
    record: &'a ByteRecord,
    header: &'a Header,
    file: &'a str,
    pub part: usize,
    pub line: u64,
}

impl Row<'_> {
    /// The cell, without blanks around it.
    pub fn text(&self, column: usize) -> &[u8] {
        self.record.get(column).unwrap_or_default().trim_ascii()
    }

    pub fn number(&self, column: usize, log: &mut Log) -> Option<f64> {
        match number(self.record.get(column).unwrap_or_default()) {
            Ok(value) => Some(value),
            Err(problem) => {
                log.add(self.finding(column, problem));
                None
            }
        }
    }

    pub fn integer(&self, column: usize, log: &mut Log) -> Option<i64> {
        match integer(self.record.get(column).unwrap_or_default()) {
            Ok(value) => Some(value),
            Err(problem) => {
                log.add(self.finding(column, problem));
                None
            }
        }
    }

    /// The row, and a column of it, as findings name it.
    pub fn place(&self, column: usize) -> Place {
        self.line_place().field(self.header.name_of(column))
    }

    pub fn line_place(&self) -> Place {
        Place::file(self.file).line(self.line)
    }

    fn finding(&self, column: usize, problem: Problem) -> Finding {
        Finding::refused(problem.rule, self.place(column), problem.found)
            .expected(problem.expected)
            .hint(problem.hint)
    }
}

/// What a visitor wants next.
#[derive(Clone, Copy, PartialEq, Eq)]
pub(crate) enum Next {
    More,
    Stop,
}

impl Table {
    /// Reads the headers of all parts; `None` when there is no such table or the log says why not.
    pub fn open(
        name: TableName,
        parts: Parts,
        columns: &super::ColumnNames,
        log: &mut Log,
    ) -> Option<Self> {
        let mut header: Option<Header> = None;
        for part in &parts {
            let Some((names, line)) = read_header(part, log) else {
                continue;
            };
            match &header {
                None => header = Header::new(name, &part.shown, line, names, columns, log),
                Some(first) if first.names() != names => {
                    let what = format!(
                        "columns {} differ from those of {}",
                        names.join(","),
                        first.file
                    );
                    let place = Place::file(&part.shown).line(line);
                    let finding = Finding::refused("same-header", place, what);
                    log.add(finding.expected(first.names().join(",")));
                }
                Some(_) => {}
            }
        }
        let header = header?;
        Some(Self {
            name,
            parts,
            header,
        })
    }

    /// The name of the first file, for findings about the whole table.
    pub fn shown(&self) -> &str {
        &self.header.file
    }

    /// Names of the parts, for [`super::ids::Origin`].
    pub fn files(&self) -> Vec<String> {
        self.parts.iter().map(|p| p.shown.clone()).collect()
    }

    /// Visits every row of every part; rows with the wrong number of cells go to the log instead. Returns what
    /// was read, complete unless the visitor stopped or a file could not be read.
    pub fn scan(
        &self,
        log: &mut Log,
        visit: &mut dyn FnMut(&Row, &mut Log) -> Next,
    ) -> Vec<InputFile> {
        let mut inputs = Vec::new();
        for (index, part) in self.parts.iter().enumerate() {
            match self.scan_part(index, part, log, visit) {
                Ok(Some(input)) => inputs.push(input),
                Ok(None) => return inputs,
                Err(error) => log.add(unreadable(part, &error)),
            }
        }
        if inputs.len() == self.parts.len() && inputs.iter().all(|i| i.rows == 0) {
            let place = Place::file(self.shown());
            log.add(Finding::refused(
                "empty-table",
                place,
                "there is a header, but no row",
            ));
        }
        inputs
    }

    fn scan_part(
        &self,
        index: usize,
        part: &Part,
        log: &mut Log,
        visit: &mut dyn FnMut(&Row, &mut Log) -> Next,
    ) -> std::io::Result<Option<InputFile>> {
        let mut opened = Opened::open(part)?;
        let mut rows = 0;
        {
            let (text, skipped) = after_comments(&mut opened)?;
            let mut reader = csv_reader(text);
            let mut record = ByteRecord::new();
            let mut expected = None;
            loop {
                let before = reader.position().line();
                if !reader.read_byte_record(&mut record).map_err(into_io)? {
                    break;
                }
                // every line ends with a line break: the record lies on the line before the reader's; only where
                // a quote was not closed this may be the end of the file
                let after = reader.position().line();
                let breaks = if after > before + 1 {
                    let bytes = record.as_slice();
                    bytes.iter().filter(|&&b| b == b'\n').count() as u64
                } else {
                    0
                };
                let from = if breaks > 0 {
                    before
                } else {
                    after.saturating_sub(1).max(1)
                };
                let line = skipped + from;
                let Some(width) = expected else {
                    expected = Some(record.len());
                    continue;
                };
                rows += 1;
                let row = Row {
                    record: &record,
                    header: &self.header,
                    file: &part.shown,
                    part: index,
                    line,
                };
                if breaks > 0 {
                    let what = "a cell holds a line break";
                    let hint = "close the quotation mark";
                    log.add(
                        Finding::refused("line-break-in-cell", row.line_place(), what).hint(hint),
                    );
                } else if record.len() != width {
                    let what = format!("{} cells", record.len());
                    let finding = Finding::refused("ragged-row", row.line_place(), what);
                    log.add(finding.expected(format!("{width} cells, as in the header")));
                } else if visit(&row, log) == Next::Stop {
                    return Ok(None);
                }
            }
        }
        if !opened.ended_with_newline() {
            let what = "the last line has no line break";
            let hint = "make sure that the file was not cut off";
            log.add(
                Finding::new(
                    Weight::Note,
                    "no-final-newline",
                    Place::file(&part.shown),
                    what,
                )
                .hint(hint),
            );
        }
        let (sha256, bytes) = opened.finish()?;
        Ok(Some(InputFile {
            name: part.shown.clone(),
            sha256,
            bytes,
            rows,
        }))
    }
}

fn csv_reader<R: Read>(text: R) -> csv::Reader<R> {
    csv::ReaderBuilder::new()
        .has_headers(false)
        .flexible(true)
        .buffer_capacity(1 << 16)
        .from_reader(text)
}

fn into_io(error: csv::Error) -> std::io::Error {
    match error.into_kind() {
        csv::ErrorKind::Io(error) => error,
        other => std::io::Error::other(format!("{other:?}")),
    }
}

fn unreadable(part: &Part, error: &std::io::Error) -> Finding {
    let what = format!("cannot read the file: {error}");
    Finding::refused("readable-file", Place::file(&part.shown), what)
}

/// The text behind a byte-order mark and `#` lines, with the number of lines skipped.
fn after_comments<R: Read>(mut source: R) -> std::io::Result<(impl Read, u64)> {
    let mut start = Vec::new();
    source.by_ref().take(3).read_to_end(&mut start)?;
    if start == b"\xef\xbb\xbf" {
        start.clear();
    }
    let mut text = BufReader::with_capacity(1 << 16, Cursor::new(start).chain(source));
    let mut skipped = 0;
    let mut line = Vec::new();
    loop {
        match text.fill_buf()?.first() {
            Some(b'#') => {
                line.clear();
                text.read_until(b'\n', &mut line)?;
                skipped += 1;
            }
            Some(b'\n') => {
                text.consume(1);
                skipped += 1;
            }
            _ => return Ok((text, skipped)),
        }
    }
}

/// Names of the columns, trimmed, and the line of the header.
fn read_header(part: &Part, log: &mut Log) -> Option<(Vec<String>, u64)> {
    let read = || -> std::io::Result<(ByteRecord, u64)> {
        let (text, skipped) = after_comments(Opened::open(part)?)?;
        let mut record = ByteRecord::new();
        let mut reader = csv_reader(text);
        reader.read_byte_record(&mut record).map_err(into_io)?;
        let line = skipped + reader.position().line().saturating_sub(1);
        Ok((record, line))
    };
    let (record, line) = match read() {
        Ok(header) => header,
        Err(error) => {
            log.add(unreadable(part, &error));
            return None;
        }
    };
    let place = Place::file(&part.shown);
    if record.is_empty() {
        log.add(Finding::refused("empty-table", place, "the file is empty"));
        return None;
    }
    let place = place.line(line);
    let mut names = Vec::with_capacity(record.len());
    for cell in &record {
        match std::str::from_utf8(cell) {
            Ok(name) => names.push(name.trim().to_string()),
            Err(_) => {
                let hint = "save the file as UTF-8";
                log.add(
                    Finding::refused("utf-8", place, "the header is not UTF-8 text").hint(hint),
                );
                return None;
            }
        }
    }
    if names.len() == 1 && names[0].contains([';', '\t']) {
        let what = format!("the header is \"{}\"", names[0]);
        let finding = Finding::refused("csv-syntax", place, what);
        log.add(
            finding
                .expected("columns separated by commas")
                .hint("export with commas"),
        );
        return None;
    }
    Some((names, line))
}
