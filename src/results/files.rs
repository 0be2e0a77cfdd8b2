//! The files of a result set: finding them, opening them, hashing the bytes that were read.

use super::log::Log;
use crate::input::{Finding, Place, Weight};
use flate2::read::MultiGzDecoder;
use sha2::{Digest, Sha256};
use std::fs::File;
use std::io::{BufRead, BufReader, Read};
use std::path::{Path, PathBuf};

/// The four tables.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum TableName {
    Nodes,
    Elements,
    Points,
    Totals,
}

impl TableName {
    pub const ALL: [TableName; 4] = [Self::Nodes, Self::Elements, Self::Points, Self::Totals];

    /// `nodes`, without an ending.
    pub fn name(self) -> &'static str {
        match self {
            Self::Nodes => "nodes",
            Self::Elements => "elements",
            Self::Points => "points",
            Self::Totals => "totals",
        }
    }
}

/// A file that was read completely.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct InputFile {
    /// As reports name it, with the folder.
    pub name: String,
    /// SHA-256 of the file as it lies on the disk, in lower-case hexadecimal digits.
    pub sha256: String,
    pub bytes: u64,
    /// Rows without the header; all steps.
    pub rows: u64,
}

/// One file of a table.
#[derive(Debug, Clone)]
pub(crate) struct Part {
    pub path: PathBuf,
    pub shown: String,
    gz: bool,
}

/// The files of one table, in name order; empty when there are none.
pub(crate) type Parts = Vec<Part>;

/// The name of a file in the folder as reports show it.
pub(crate) fn shown_in(shown: &str, file: &str) -> String {
    if shown.is_empty() {
        file.to_string()
    } else {
        format!("{}/{file}", shown.trim_end_matches('/'))
    }
}

/// Finds the parts of each table, in the order of [`TableName::ALL`].
pub(crate) fn discover(folder: &Path, shown: &str, log: &mut Log) -> [Parts; 4] {
    let mut found: [Parts; 4] = Default::default();
    let mut names = match list(folder) {
        Ok(names) => names,
        Err(error) => {
            let what = format!("cannot list the folder: {error}");
            let hint = "a result set is a folder of CSV files";
            log.add(Finding::refused("readable-file", Place::file(shown), what).hint(hint));
            return found;
        }
    };
    names.sort();
    for name in names {
        let Some(stem) = name.strip_suffix(".csv").or(name.strip_suffix(".csv.gz")) else {
            continue;
        };
        let (base, part) = stem
            .split_once(".part-")
            .map_or((stem, None), |(b, p)| (b, Some(p)));
        let table = TableName::ALL.iter().position(|t| t.name() == base);
        let numbered = part.is_none_or(|p| !p.is_empty() && p.bytes().all(|b| b.is_ascii_digit()));
        match table.filter(|_| numbered) {
            Some(table) => found[table].push(Part {
                path: folder.join(&name),
                shown: shown_in(shown, &name),
                gz: name.ends_with(".gz"),
            }),
            None => log.add(
                Finding::new(
                    Weight::Note,
                    "unread-file",
                    Place::file(shown_in(shown, &name)),
                    "this file is not read",
                )
                .expected(
                    "nodes, elements, points or totals, ending .csv, .csv.gz or .part-0001.csv",
                ),
            ),
        }
    }
    for parts in &found {
        check_parts(parts, log);
    }
    found
}

fn list(folder: &Path) -> std::io::Result<Vec<String>> {
    let mut names = Vec::new();
    for entry in std::fs::read_dir(folder)? {
        let entry = entry?;
        if !entry.path().is_dir() {
            names.push(entry.file_name().to_string_lossy().into_owned());
        }
    }
    Ok(names)
}

/// Refuses a table that is there twice, and gaps in the part numbers.
fn check_parts(parts: &Parts, log: &mut Log) {
    let number = |part: &Part| -> Option<u64> {
        let (_, rest) = part.shown.rsplit_once(".part-")?;
        rest.split('.').next()?.parse().ok()
    };
    let numbers: Vec<Option<u64>> = parts.iter().map(number).collect();
    let whole = numbers.iter().filter(|n| n.is_none()).count();
    let mut sorted: Vec<u64> = numbers.iter().flatten().copied().collect();
    sorted.sort_unstable();
    let twice = sorted.windows(2).any(|w| w[0] == w[1]);
    if let Some(first) = parts.first()
        && (twice || whole > 1 || (whole == 1 && !sorted.is_empty()))
    {
        let names: Vec<&str> = parts.iter().map(|p| p.shown.as_str()).collect();
        let what = format!("{} hold the same table", names.join(", "));
        let hint = "remove what is left over from an earlier export";
        log.add(Finding::refused("ambiguous-files", Place::file(&first.shown), what).hint(hint));
    } else if let Some(gap) = sorted.windows(2).find(|w| w[1] != w[0] + 1) {
        let what = format!("part {} is followed by part {}", gap[0], gap[1]);
        let place = Place::file(parts.first().map_or("", |p| &p.shown));
        log.add(
            Finding::refused("part-numbers", place, what).hint("export again: a part is missing"),
        );
    }
}

/// Counts and hashes what is read from a file.
struct Hashing {
    file: File,
    hash: Sha256,
    bytes: u64,
}

impl Read for Hashing {
    fn read(&mut self, buffer: &mut [u8]) -> std::io::Result<usize> {
        let count = self.file.read(buffer)?;
        self.hash.update(&buffer[..count]);
        self.bytes += count as u64;
        Ok(count)
    }
}

/// A file being read: plain text out, hash and size at the end. CRLF comes out as LF, and the last line always
/// ends with a line break, so that line numbers can be counted.
pub(crate) struct Opened {
    source: Source,
    chunk: Vec<u8>,
    /// The part of the chunk that was not handed out yet.
    ready: std::ops::Range<usize>,
    /// A carriage return whose follower is not known yet.
    pending: bool,
    last: Option<u8>,
    completed: bool,
}

enum Source {
    Plain(BufReader<Hashing>),
    Gz(Box<MultiGzDecoder<BufReader<Hashing>>>),
}

impl Opened {
    pub fn open(part: &Part) -> std::io::Result<Self> {
        let hashing = Hashing {
            file: File::open(&part.path)?,
            hash: Sha256::new(),
            bytes: 0,
        };
        let raw = BufReader::with_capacity(1 << 16, hashing);
        let source = if part.gz {
            Source::Gz(Box::new(MultiGzDecoder::new(raw)))
        } else {
            Source::Plain(raw)
        };
        Ok(Self {
            source,
            chunk: vec![0; 1 << 16],
            ready: 0..0,
            pending: false,
            last: None,
            completed: false,
        })
    }

    /// Hash and size of the whole file: reads what is left of it.
    pub fn finish(self) -> std::io::Result<(String, u64)> {
        let mut raw = match self.source {
            Source::Plain(raw) => raw,
            Source::Gz(gz) => gz.into_inner(),
        };
        loop {
            let count = raw.fill_buf()?.len();
            if count == 0 {
                break;
            }
            raw.consume(count);
        }
        let Hashing { hash, bytes, .. } = raw.into_inner();
        let hex = hash.finalize().iter().map(|b| format!("{b:02x}")).collect();
        Ok((hex, bytes))
    }

    /// False when the text ended without a line break.
    pub fn ended_with_newline(&self) -> bool {
        !self.completed
    }

    /// Reads the next chunk; an empty one is the end.
    fn refill(&mut self) -> std::io::Result<()> {
        // the first byte is kept free for a pending carriage return
        let count = match &mut self.source {
            Source::Plain(raw) => raw.read(&mut self.chunk[1..])?,
            Source::Gz(gz) => gz.read(&mut self.chunk[1..])?,
        };
        let mut end = 0;
        let mut put = |chunk: &mut Vec<u8>, byte: u8| {
            chunk[end] = byte;
            end += 1;
        };
        if std::mem::take(&mut self.pending) && (count == 0 || self.chunk[1] != b'\n') {
            put(&mut self.chunk, b'\r');
        }
        if self.chunk[1..=count].contains(&b'\r') {
            for at in 1..=count {
                let byte = self.chunk[at];
                if byte == b'\r' && at == count {
                    self.pending = true;
                } else if byte != b'\r' || self.chunk[at + 1] != b'\n' {
                    put(&mut self.chunk, byte);
                }
            }
        } else {
            self.chunk.copy_within(1..=count, end);
            end += count;
        }
        if end > 0 {
            self.last = Some(self.chunk[end - 1]);
        } else if count == 0 && !self.completed && self.last.is_some_and(|b| b != b'\n') {
            self.chunk[0] = b'\n';
            self.completed = true;
            end = 1;
        }
        self.ready = 0..end;
        if end == 0 && count > 0 {
            return self.refill();
        }
        Ok(())
    }
}

impl Read for Opened {
    fn read(&mut self, buffer: &mut [u8]) -> std::io::Result<usize> {
        if self.ready.is_empty() {
            self.refill()?;
        }
        let count = buffer.len().min(self.ready.len());
        let from = self.ready.start;
        buffer[..count].copy_from_slice(&self.chunk[from..from + count]);
        self.ready.start += count;
        Ok(count)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn text_of(data: &[u8]) -> (Vec<u8>, bool) {
        let dir = tempfile::tempdir().unwrap();
        let path = dir.path().join("nodes.csv");
        std::fs::write(&path, data).unwrap();
        let part = Part {
            path,
            shown: String::new(),
            gz: false,
        };
        let mut opened = Opened::open(&part).unwrap();
        let mut text = Vec::new();
        opened.read_to_end(&mut text).unwrap();
        (text, opened.ended_with_newline())
    }

    #[test]
    fn line_ends_become_line_feeds_across_chunks() {
        let mut data = vec![b'x'; (1 << 16) - 2];
        data.extend(b"\r\ny\rz");
        let (text, ended) = text_of(&data);
        assert!(!ended);
        assert!(text.ends_with(b"x\ny\rz\n"));
        assert_eq!(text.len(), data.len());
        assert_eq!(text_of(b""), (Vec::new(), true));
        assert_eq!(text_of(b"a\r"), (b"a\r\n".to_vec(), false));
        assert_eq!(text_of(b"\r\n"), (b"\n".to_vec(), true));
    }

    proptest! {
        #[test]
        fn only_carriage_returns_before_line_feeds_are_lost(
            piece in proptest::collection::vec(prop_oneof![Just(b'\r'), Just(b'\n'), Just(b'a')], 1..40),
            lead in 65500usize..65540,
        ) {
            let mut data = vec![b'x'; lead];
            data.extend(&piece);
            let mut expected = String::from_utf8(data.clone()).unwrap().replace("\r\n", "\n");
            let complete = expected.ends_with('\n');
            if !complete {
                expected.push('\n');
            }
            prop_assert_eq!(text_of(&data), (expected.into_bytes(), complete));
        }
    }
}
