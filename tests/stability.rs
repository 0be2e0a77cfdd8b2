//! A law that is not stable at the asked state is told by `check`, `brief` and `exact`, and the case is judged all the same.

mod common;

use assert_cmd::Command;

const SUITE: &str = r#"suite: soft
invented: true
units: { length: mm, stress: MPa }
materials:
  typed: { stated: { energy: "0.2*(I1-3) - 0.02*(I1-3)^2" } }
cases:
  - id: wall
    problem: { pressurised-tube: { inner-radius: 1, outer-radius: 2, ends: plane-strain, material: typed, inner-wall-stretch: [1.2, 3.0] } }
    results: "results/{inner-wall-stretch}/level-{level}"
    levels: [1]
    accept: [ { error: displacement-L2, at-most: 1 % } ]
"#;

fn truebore(folder: &std::path::Path, words: &[&str]) -> (String, String) {
    let run = Command::cargo_bin("truebore")
        .unwrap()
        .current_dir(folder)
        .args(words)
        .output()
        .unwrap();
    let text = |bytes| String::from_utf8(bytes).unwrap();
    (text(run.stdout), text(run.stderr))
}

// Red when the caution is lost on its way, or told of the sound case.
#[test]
fn an_unstable_law_is_told_everywhere() {
    let folder = tempfile::tempdir().unwrap();
    std::fs::write(folder.path().join("suite.yaml"), SUITE).unwrap();
    let outcome = common::judged(SUITE, folder.path());
    let told: Vec<_> = outcome
        .cases
        .iter()
        .map(|c| {
            c.findings
                .iter()
                .filter(|f| f.rule == "ordered-stresses")
                .count()
        })
        .collect();
    assert_eq!(told, [0, 1]);
    let id = &outcome.cases[1].id;
    let (brief, _) = truebore(folder.path(), &["brief", "suite.yaml"]);
    assert_eq!(
        brief.matches("the law is not stable there").count(),
        1,
        "{brief}"
    );
    assert!(
        brief
            .split(&format!("{id}: "))
            .nth(1)
            .unwrap()
            .contains("Caution"),
        "{brief}"
    );
    let (totals, caution) = truebore(
        folder.path(),
        &["exact", "suite.yaml", "--case", id, "--totals"],
    );
    assert!(totals.contains("inner_pressure"), "{totals}");
    assert!(
        caution.starts_with("caution: suite.yaml:7:") && caution.contains("rule: ordered-stresses"),
        "{caution}"
    );
    let (_, quiet) = truebore(
        folder.path(),
        &[
            "exact",
            "suite.yaml",
            "--case",
            &outcome.cases[0].id,
            "--totals",
        ],
    );
    assert_eq!(quiet, "");
    let (_, _) = truebore(folder.path(), &["check", "suite.yaml", "--out", "out"]);
    let page = std::fs::read_to_string(folder.path().join("out/report.html")).unwrap();
    assert!(page.contains("the law is not stable there"));
}
