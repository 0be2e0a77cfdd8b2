//! Files: every access names its path, and a report is written whole or not at all.

use crate::input::{Finding, Place};
use std::fs;
use std::io::{Read, Write};
use std::path::{Path, PathBuf};

/// No suite is larger: 64 MiB.
const LARGEST_SUITE: u64 = 64 << 20;

/// Reads a suite.
///
/// # Errors
/// A finding naming the path.
pub fn read_suite(path: &Path) -> Result<String, Finding> {
    let place = || Place::file(path.display().to_string());
    let mut bytes = Vec::new();
    fs::File::open(path)
        .and_then(|file| file.take(LARGEST_SUITE + 1).read_to_end(&mut bytes))
        .map_err(|e| {
            Finding::refused("cannot-read", place(), format!("cannot be read: {e}"))
                .expected("a suite file, e.g. suite.yaml")
        })?;
    if bytes.len() as u64 > LARGEST_SUITE {
        return Err(
            Finding::refused("cannot-read", place(), "the file is larger than 64 MiB")
                .expected("a suite file, e.g. suite.yaml"),
        );
    }
    String::from_utf8(bytes).map_err(|e| {
        let before = &e.as_bytes()[..e.utf8_error().valid_up_to()];
        let line = 1 + before.iter().filter(|b| **b == b'\n').count() as u64;
        let place = Place::file(path.display().to_string()).line(line);
        Finding::refused("not-utf8", place, "the file is not UTF-8 text").hint("save it as UTF-8")
    })
}

/// Reads a file.
///
/// # Errors
/// A finding naming the path.
pub fn read_bytes(path: &Path) -> Result<Vec<u8>, Finding> {
    fs::read(path).map_err(|e| {
        let place = Place::file(path.display().to_string());
        Finding::refused("cannot-read", place, format!("cannot be read: {e}"))
    })
}

/// Writes all files of a folder, or none: first every one beside its place, then all renamed.
///
/// # Errors
/// A finding naming the path; what stood there before is untouched unless a rename itself fails.
pub fn write_together(folder: &Path, files: &[(&str, String)]) -> Result<(), Finding> {
    let failed = |path: &Path, what: &str, e: std::io::Error| {
        let place = Place::file(path.display().to_string());
        Finding::refused("cannot-write", place, format!("{what}: {e}"))
            .hint("choose another folder with --out")
    };
    fs::create_dir_all(folder).map_err(|e| failed(folder, "the folder cannot be made", e))?;
    for (name, _) in files {
        let place = folder.join(name);
        if place.is_dir() {
            let error = std::io::Error::from(std::io::ErrorKind::IsADirectory);
            return Err(failed(&place, "cannot be replaced", error));
        }
    }
    let mut written: Vec<(PathBuf, PathBuf)> = Vec::new();
    let remove = |written: &[(PathBuf, PathBuf)]| {
        for (beside, _) in written {
            let _ = fs::remove_file(beside);
        }
    };
    for (name, text) in files {
        let (beside, place) = (
            folder.join(format!(".{name}.{}.part", std::process::id())),
            folder.join(name),
        );
        let done = fs::File::create(&beside).and_then(|mut file| {
            file.write_all(text.as_bytes())?;
            file.sync_all()
        });
        written.push((beside.clone(), place));
        if let Err(e) = done {
            remove(&written);
            return Err(failed(&beside, "cannot be written", e));
        }
    }
    for (beside, place) in &written {
        if let Err(e) = fs::rename(beside, place) {
            remove(&written);
            return Err(failed(place, "cannot be replaced", e));
        }
    }
    Ok(())
}
