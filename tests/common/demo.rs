//! A throw-away copy of one shipped demo case, coarse levels only, to be damaged and judged by the real program.

use assert_cmd::Command;
use std::fs;
use std::path::{Path, PathBuf};
use tempfile::TempDir;

/// The shipped case that is copied.
pub const CASE: &str = "plane-strain-soft-12";

/// Criteria that the sound levels 1 and 2 meet, with little to spare.
pub const ACCEPT: &[&str] = &[
    "{ error: displacement-L2, at-most: 3e-4 }",
    "{ order: displacement-L2, within: 0.2 }",
    "{ error: displacement-H1, at-most: 1 % }",
    "{ error: stress-L2, at-most: 0.5 % }",
    "{ order: stress-L2, within: 0.2 }",
    "{ error: pressure-L2, at-most: 0.2 % }",
    "{ error: volume-ratio-L2, at-most: 0.1 % }",
    "{ error: energy-density-L2, at-most: 10 % }",
    "{ error: displacement-largest, at-most: 0.02 % }",
    "{ error: inner-wall-displacement, at-most: 0.02 % }",
    "{ error: strain-energy, at-most: 0.02 % }",
    "{ error: axial-stretch, at-most: 1e-6 }",
    "{ error: axial-force, at-most: 0.02 % }",
];

/// A suite file and its result sets in a folder that goes away with it.
pub struct Demo {
    dir: TempDir,
}

/// How a run ended.
pub struct Judged {
    pub status: i32,
    pub stdout: String,
    pub stderr: String,
}

impl Judged {
    /// The verdict of the suite, or `refused`.
    pub fn word(&self) -> String {
        if self.status == 2 {
            return "refused".to_string();
        }
        self.json()["verdict"].as_str().unwrap().to_string()
    }

    pub fn json(&self) -> serde_json::Value {
        serde_json::from_str(&self.stdout).unwrap_or_else(|e| panic!("{e}: {}", self.stdout))
    }

    /// Verdict of the criterion whose text begins so.
    pub fn criterion(&self, begin: &str) -> String {
        let json = self.json();
        let all = json["cases"][0]["criteria"].as_array().unwrap();
        let found = all
            .iter()
            .find(|c| c["text"].as_str().unwrap().starts_with(begin));
        found.unwrap()["verdict"].as_str().unwrap().to_string()
    }
}

impl Demo {
    /// The sound case with [`ACCEPT`].
    pub fn new() -> Self {
        let demo = Self {
            dir: TempDir::new().unwrap(),
        };
        let shipped = Path::new(env!("CARGO_MANIFEST_DIR"))
            .join("suites/dosing-pump-hose/results")
            .join(CASE);
        for level in [1, 2] {
            let (from, to) = (shipped.join(format!("level-{level}")), demo.level(level));
            fs::create_dir_all(&to).unwrap();
            for table in ["nodes", "elements", "points", "totals"] {
                let name = format!("{table}.csv");
                fs::copy(from.join(&name), to.join(&name)).unwrap();
            }
        }
        demo.accept(ACCEPT);
        demo
    }

    pub fn folder(&self) -> &Path {
        self.dir.path()
    }

    pub fn suite(&self) -> PathBuf {
        self.folder().join("suite.yaml")
    }

    /// Folder of a level.
    pub fn level(&self, level: u32) -> PathBuf {
        self.folder().join(format!("results/level-{level}"))
    }

    pub fn file(&self, level: u32, table: &str) -> PathBuf {
        self.level(level).join(format!("{table}.csv"))
    }

    /// Writes the suite with these criteria.
    pub fn accept(&self, criteria: &[&str]) {
        let mut text = String::from(
            "suite: attacked\nunits: { length: mm, stress: MPa }\nmaterials:\n  soft: { neo-Hookean: { mu: 0.40 } }\n\
             cases:\n  - id: wall\n    problem:\n      pressurised-tube:\n        inner-radius: 8\n        \
             outer-radius: 12\n        ends: plane-strain\n        material: soft\n        inner-pressure: 0.03\n    \
             element: { displacement: quad9, pressure: quad4 }\n    section: 1/4\n    \
             results: results/level-{level}\n    levels: [1, 2]\n    accept:",
        );
        if criteria.is_empty() {
            text.push_str(" []\n");
        }
        for line in criteria {
            text.push_str(&format!("\n      - {line}"));
        }
        text.push('\n');
        fs::write(self.suite(), text).unwrap();
    }

    /// Replaces words of the suite, which must be there.
    pub fn edit_suite(&self, from: &str, to: &str) {
        let text = fs::read_to_string(self.suite()).unwrap();
        assert!(text.contains(from), "{from} is not in the suite");
        fs::write(self.suite(), text.replace(from, to)).unwrap();
    }

    /// Changes a table of a level.
    pub fn change(&self, level: u32, table: &str, change: impl FnOnce(&mut Table)) {
        let path = self.file(level, table);
        let mut read = Table::parse(&fs::read_to_string(&path).unwrap());
        change(&mut read);
        fs::write(path, read.text()).unwrap();
    }

    /// Changes a table of both levels in the same way.
    pub fn change_all(&self, table: &str, change: impl Fn(&mut Table)) {
        for level in [1, 2] {
            self.change(level, table, &change);
        }
    }

    /// Judges the suite with the real program.
    pub fn check(&self) -> Judged {
        let out = self.folder().join("report");
        let output = Command::cargo_bin("truebore")
            .unwrap()
            .arg("check")
            .arg(self.suite())
            .arg("--out")
            .arg(out)
            .args(["--json", "--threads", "1"])
            .output()
            .unwrap();
        Judged {
            status: output
                .status
                .code()
                .expect("ended by itself, not by a signal"),
            stdout: String::from_utf8(output.stdout).unwrap(),
            stderr: String::from_utf8(output.stderr).unwrap(),
        }
    }
}

/// A CSV table in memory.
pub struct Table {
    pub header: Vec<String>,
    pub rows: Vec<Vec<String>>,
}

impl Table {
    fn parse(text: &str) -> Self {
        let mut lines = text.lines().filter(|line| !line.starts_with('#'));
        let cells = |line: &str| line.split(',').map(str::to_string).collect();
        Self {
            header: cells(lines.next().unwrap()),
            rows: lines.map(cells).collect(),
        }
    }

    fn text(&self) -> String {
        let lines = std::iter::once(&self.header).chain(&self.rows);
        lines.map(|cells| cells.join(",") + "\n").collect()
    }

    /// Index of a column.
    pub fn at(&self, column: &str) -> usize {
        let found = self.header.iter().position(|name| name == column);
        found.unwrap_or_else(|| panic!("no column {column}"))
    }

    /// The number of a row.
    pub fn number(&self, row: usize, column: &str) -> f64 {
        self.rows[row][self.at(column)].parse().unwrap()
    }

    /// Changes every number of a column.
    pub fn map(&mut self, column: &str, change: impl Fn(f64) -> f64) {
        let at = self.at(column);
        for row in &mut self.rows {
            row[at] = change(row[at].parse::<f64>().unwrap()).to_string();
        }
    }

    /// Sets every cell of a column.
    pub fn set(&mut self, column: &str, cell: &str) {
        let at = self.at(column);
        self.rows.iter_mut().for_each(|row| row[at] = cell.into());
    }

    pub fn drop_column(&mut self, column: &str) {
        let at = self.at(column);
        self.header.remove(at);
        for row in &mut self.rows {
            row.remove(at);
        }
    }

    /// Keeps the rows whose number in a column satisfies a condition.
    pub fn keep(&mut self, column: &str, condition: impl Fn(f64) -> bool) {
        let at = self.at(column);
        self.rows
            .retain(|row| condition(row[at].parse::<f64>().unwrap()));
    }

    /// Exchanges the names of two columns.
    pub fn swap_columns(&mut self, a: &str, b: &str) {
        let (a, b) = (self.at(a), self.at(b));
        self.header.swap(a, b);
    }
}
