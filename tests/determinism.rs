//! Same inputs, same bytes: whatever the number of threads, the run, or the order of rows in the files.
//!
//! Red when a sum, a list or a tie depends on the order in which threads or rows come by.

use flate2::read::MultiGzDecoder;
use std::io::Read;
use std::path::{Path, PathBuf};
use std::process::Command;

const REPORTS: [&str; 4] = ["outcome.json", "report.html", "junit.xml", "measures.csv"];

fn demo(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("suites")
        .join(name)
}

/// Runs `check` on a suite's folder and returns its reports.
fn check(folder: &Path, threads: usize) -> Vec<String> {
    let out = tempfile::tempdir().unwrap();
    let run = Command::new(assert_cmd::cargo::cargo_bin!("truebore"))
        .arg("check")
        .arg(folder.join("suite.yaml"))
        .args(["--threads", &threads.to_string(), "--out"])
        .arg(out.path())
        .output()
        .unwrap();
    // judged: 0 all pass, 1 not all
    let said = String::from_utf8_lossy(&run.stderr);
    assert!(matches!(run.status.code(), Some(0 | 1)), "{said}");
    let read = |name| std::fs::read_to_string(out.path().join(name)).unwrap();
    REPORTS.into_iter().map(read).collect()
}

#[test]
fn threads_and_repetition_change_no_byte() {
    for suite in ["dosing-pump-hose", "locking-element"] {
        let once = check(&demo(suite), 1);
        for threads in [1, 2, 8] {
            let again = check(&demo(suite), threads);
            for ((a, b), name) in once.iter().zip(&again).zip(REPORTS) {
                assert!(
                    a.len() > 1000 && a == b,
                    "{suite} {name} with {threads} threads"
                );
            }
        }
    }
}

/// Copies a result set with the data rows of every table backwards, unpacked.
fn reverse(from: &Path, to: &Path) {
    std::fs::create_dir_all(to).unwrap();
    for entry in std::fs::read_dir(from).unwrap() {
        let path = entry.unwrap().path();
        let target = to.join(path.file_name().unwrap());
        if path.is_dir() {
            reverse(&path, &target);
            continue;
        }
        let name = path.to_string_lossy();
        if !(name.ends_with(".csv") || name.ends_with(".csv.gz")) {
            std::fs::copy(&path, &target).unwrap();
            continue;
        }
        let file = std::fs::File::open(&path).unwrap();
        let mut text = String::new();
        if name.ends_with(".gz") {
            MultiGzDecoder::new(file).read_to_string(&mut text).unwrap();
        } else {
            (&file).read_to_string(&mut text).unwrap();
        }
        let comments = text
            .lines()
            .take_while(|line| line.starts_with('#'))
            .count();
        let mut lines: Vec<&str> = text.lines().collect();
        lines[comments + 1..].reverse();
        let plain = target.to_string_lossy().replace(".csv.gz", ".csv");
        std::fs::write(plain, lines.join("\n") + "\n").unwrap();
    }
}

/// Everything judged and measured; the inputs themselves differ.
fn judged(outcome: &str) -> serde_json::Value {
    let mut value: serde_json::Value = serde_json::from_str(outcome).unwrap();
    value["inputs"] = serde_json::Value::Null;
    value["suite"]["sha256"] = serde_json::Value::Null;
    value
}

/// The first place where two values differ, numbers by more than `within` of their size.
fn difference(
    a: &serde_json::Value,
    b: &serde_json::Value,
    within: f64,
    at: &str,
) -> Option<String> {
    use serde_json::Value::{Array, Number, Object};
    match (a, b) {
        (Number(x), Number(y)) => {
            let (x, y) = (x.as_f64().unwrap(), y.as_f64().unwrap());
            let far = (x - y).abs() > within * x.abs().max(y.abs());
            far.then(|| format!("{at}: {x:?} and {y:?}"))
        }
        (Array(x), Array(y)) if x.len() == y.len() => {
            let mut items = x.iter().zip(y).enumerate();
            items.find_map(|(i, (x, y))| difference(x, y, within, &format!("{at}[{i}]")))
        }
        (Object(x), Object(y)) if x.len() == y.len() => x.iter().find_map(|(key, x)| {
            let y = y.get(key).unwrap_or(&serde_json::Value::Null);
            difference(x, y, within, &format!("{at}.{key}"))
        }),
        _ => (a != b).then(|| format!("{at}: {a} and {b}")),
    }
}

#[test]
fn the_order_of_rows_changes_nothing() {
    for suite in ["dosing-pump-hose", "locking-element"] {
        let folder = tempfile::tempdir().unwrap();
        reverse(&demo(suite), folder.path());
        let (there, back) = (check(&demo(suite), 2), check(folder.path(), 2));
        assert_ne!(there[0], back[0], "the hashes of the inputs differ");
        let (there, back) = (judged(&there[0]), judged(&back[0]));
        assert_eq!(difference(&there, &back, 0.0, ""), None);
    }
}
