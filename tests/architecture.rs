//! The rules of the house, read off the sources: who may import whom, who may print, what may panic, how long a
//! file may be.
//!
//! Red when a folder imports what the table does not allow it, and so on; each message names file and line.

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

/// Folder, and what of ours it may use besides itself and `input`.
const IMPORTS: [(&str, &[&str]); 16] = [
    ("input", &[]),
    ("mechanics", &[]),
    ("numerics", &[]),
    ("materials", &["mechanics", "numerics"]),
    ("elements", &["mechanics", "numerics"]),
    ("exact", &["mechanics", "numerics", "materials"]),
    ("results", &["mechanics", "elements"]),
    ("suite", &["mechanics"]),
    (
        "norms",
        &["mechanics", "numerics", "elements", "results", "exact"],
    ),
    ("convergence", &["numerics"]),
    (
        "diagnosis",
        &[
            "exact",
            "materials",
            "norms",
            "results",
            "convergence",
            "mechanics",
        ],
    ),
    (
        "verdict",
        &["mechanics", "norms", "convergence", "diagnosis"],
    ),
    ("report", &["mechanics", "verdict"]),
    ("history", &["mechanics", "verdict"]),
    (
        "run",
        &[
            "mechanics",
            "numerics",
            "materials",
            "elements",
            "exact",
            "results",
            "suite",
            "norms",
            "convergence",
            "diagnosis",
            "verdict",
        ],
    ),
    (
        "cli",
        &["run", "suite", "exact", "verdict", "report", "history"],
    ),
];

/// Files that are longer than the rule allows, and how long they may be until they are cut: never longer than now, by
/// more than the few lines of a mend.
const LONG: [(&str, usize); 4] = [
    ("elements/tests.rs", 410),
    ("results/set.rs", 410),
    ("results/tests.rs", 460),
    ("run/plan.rs", 430),
];

const MOST_LINES: usize = 400;

/// One source file.
struct Source {
    /// Below `src`, `/` separated.
    name: String,
    lines: Vec<String>,
    /// Lines outside of tests: those before the first `#[cfg(test)]` of a module, none of a `tests.rs`.
    code: usize,
}

impl Source {
    fn folder(&self) -> &str {
        self.name.split_once('/').map_or("", |(folder, _)| folder)
    }

    /// Code lines without comments and string contents, with their numbers.
    fn plain(&self) -> impl Iterator<Item = (usize, String)> {
        let lines = self.lines[..self.code].iter().enumerate();
        lines.map(|(i, line)| (i + 1, without_text(line)))
    }
}

/// A line without its comment and without what stands between quotes.
fn without_text(line: &str) -> String {
    let (mut out, mut quoted, mut escaped) = (String::new(), false, false);
    let characters: Vec<char> = line.chars().collect();
    for (i, &c) in characters.iter().enumerate() {
        if quoted {
            quoted = escaped || c != '"';
            escaped = c == '\\' && !escaped;
        } else if c == '"' && !(i > 0 && characters[i - 1] == '\'') {
            quoted = true;
        } else if c == '/' && characters.get(i + 1) == Some(&'/') {
            break;
        } else {
            out.push(c);
        }
    }
    out
}

fn sources() -> Vec<Source> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
    let mut paths = Vec::new();
    walk(&root, &mut paths);
    paths.sort();
    let sources: Vec<Source> = paths.iter().map(|path| read(&root, path)).collect();
    assert!(sources.len() > 80, "the sources are found");
    sources
}

fn walk(folder: &Path, found: &mut Vec<PathBuf>) {
    for entry in std::fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() {
            walk(&path, found);
        } else if path.extension().is_some_and(|e| e == "rs") {
            found.push(path);
        }
    }
}

fn read(root: &Path, path: &Path) -> Source {
    let text = std::fs::read_to_string(path).unwrap();
    let lines: Vec<String> = text.lines().map(str::to_string).collect();
    let name = path
        .strip_prefix(root)
        .unwrap()
        .to_string_lossy()
        .replace('\\', "/");
    let tests = lines.iter().position(|line| line.trim() == "#[cfg(test)]");
    let code =
        if name.ends_with("/tests.rs") || name.ends_with("_tests.rs") || name.contains("/tests/") {
            0
        } else {
            tests.unwrap_or(lines.len())
        };
    Source { name, lines, code }
}

fn none(offences: &[String]) {
    assert!(offences.is_empty(), "\n{}\n", offences.join("\n"));
}

/// First words of every path that begins with `crate::`, braces resolved: `use crate::{a::B, c}` gives a and c.
fn imported(line: &str) -> Vec<String> {
    let mut found = Vec::new();
    for (at, _) in line.match_indices("crate::") {
        let rest = &line[at + "crate::".len()..];
        let word = |text: &str| {
            let end = text
                .find(|c: char| !(c.is_alphanumeric() || c == '_'))
                .unwrap_or(text.len());
            text[..end].to_string()
        };
        let Some(group) = rest.strip_prefix('{') else {
            found.push(word(rest));
            continue;
        };
        let mut depth = 0;
        let mut start = true;
        for (i, c) in group.char_indices() {
            match c {
                '{' => depth += 1,
                '}' => depth -= 1,
                ',' if depth == 0 => start = true,
                c if start && !c.is_whitespace() => {
                    found.push(word(&group[i..]));
                    start = false;
                }
                _ => {}
            }
            if depth < 0 {
                break;
            }
        }
    }
    found
}

#[test]
fn folders_import_only_what_the_table_allows() {
    let table: BTreeMap<&str, &[&str]> = IMPORTS.into_iter().collect();
    let mut offences = Vec::new();
    let mut used = 0;
    for source in sources() {
        let folder = source.folder().to_string();
        if folder.is_empty() {
            continue; // lib.rs and main.rs
        }
        let Some(allowed) = table.get(folder.as_str()) else {
            offences.push(format!(
                "src/{}: there is no folder {folder} in the design",
                source.name
            ));
            continue;
        };
        // a grouped import may run over several lines: read the code as one line, but remember where
        let code: Vec<(usize, String)> = source.plain().collect();
        let text: Vec<&str> = code.iter().map(|(_, line)| line.trim()).collect();
        for name in imported(&text.join(" ")) {
            used += 1;
            let ours = table.contains_key(name.as_str());
            let fine = name == folder
                || name == "input" && folder != "input"
                || allowed.contains(&name.as_str());
            if ours && !fine {
                let path = format!("crate::{name}");
                let line = code
                    .iter()
                    .find(|(_, l)| l.contains(&path))
                    .map_or(0, |(n, _)| *n);
                offences.push(format!(
                    "src/{}:{line}: {folder} may not use {name}",
                    source.name
                ));
            }
            if !ours {
                offences.push(format!(
                    "src/{}: crate::{name} is no folder of the design",
                    source.name
                ));
            }
        }
    }
    assert!(used > 100, "imports are found: {used}");
    none(&offences);
}

#[test]
fn imports_are_read_in_every_form() {
    assert_eq!(imported("use crate::exact::Body;"), ["exact"]);
    assert_eq!(
        imported("use crate::{exact::{Body, Ends}, norms, report::Format as F};"),
        ["exact", "norms", "report"]
    );
    assert_eq!(
        imported("let x: crate::exact::Body = crate::norms::f(1);"),
        ["exact", "norms"]
    );
    assert_eq!(
        without_text("f(\"crate::a // b\", 'x'); // crate::c"),
        "f(, 'x'); "
    );
}

#[test]
fn only_cli_prints_and_ends_the_process() {
    let words = [
        "println!",
        "print!(",
        "eprintln!",
        "eprint!(",
        "dbg!",
        "process::exit",
        "process::abort",
        "stdout()",
        "stderr()",
    ];
    let mut offences = Vec::new();
    for source in sources() {
        if ["cli", ""].contains(&source.folder()) {
            continue;
        }
        for (line, text) in source.plain() {
            for word in words.iter().filter(|word| text.contains(**word)) {
                offences.push(format!("src/{}:{line}: {word} outside of cli", source.name));
            }
        }
    }
    none(&offences);
}

#[test]
fn only_cli_and_run_touch_the_clock_and_the_environment() {
    let mut offences = Vec::new();
    for source in sources() {
        if source.folder() == "cli" {
            continue;
        }
        for (line, text) in source.plain() {
            for word in [
                "SystemTime",
                "Instant::now",
                "env::var",
                "thread_rng",
                "HashMap",
                "HashSet",
            ] {
                if text.contains(word) {
                    offences.push(format!(
                        "src/{}:{line}: {word}: not the same bytes every time",
                        source.name
                    ));
                }
            }
        }
    }
    none(&offences);
}

#[test]
fn nothing_unwraps_outside_of_tests() {
    let mut offences = Vec::new();
    for source in sources() {
        for (line, text) in source.plain() {
            for word in [
                ".unwrap()",
                ".expect(",
                "panic!(",
                "unreachable!(",
                "todo!(",
                "unimplemented!(",
            ] {
                if text.contains(word) {
                    offences.push(format!("src/{}:{line}: {word}", source.name));
                }
            }
        }
    }
    none(&offences);
}

#[test]
fn files_are_short_and_say_what_they_are_for() {
    let mut offences = Vec::new();
    for source in sources() {
        if !source
            .lines
            .first()
            .is_some_and(|line| line.starts_with("//!"))
        {
            offences.push(format!(
                "src/{}:1: the file does not begin with //!",
                source.name
            ));
        }
        let allowed = LONG
            .iter()
            .find(|(name, _)| *name == source.name)
            .map_or(MOST_LINES, |(_, lines)| *lines);
        if source.lines.len() > allowed {
            offences.push(format!(
                "src/{}: {} lines, at most {allowed} are allowed",
                source.name,
                source.lines.len()
            ));
        }
    }
    none(&offences);
}
