//! What README shows works: its suite is read, briefed and tabled by the real binary, its links lead somewhere.

use assert_cmd::Command;
use std::path::Path;

fn readme() -> String {
    std::fs::read_to_string("README.md").unwrap()
}

/// The text of every fenced block of a language, in order.
fn blocks(text: &str, language: &str) -> Vec<String> {
    let mut found = Vec::new();
    let mut rest = text;
    while let Some(at) = rest.find(&format!("```{language}\n")) {
        let body = &rest[at + language.len() + 4..];
        let end = body.find("```").unwrap();
        found.push(body[..end].to_string());
        rest = &body[end + 3..];
    }
    found
}

fn truebore() -> Command {
    Command::cargo_bin("truebore").unwrap()
}

#[test]
fn the_suite_in_readme_is_read_briefed_and_tabled() {
    let folder = tempfile::tempdir().unwrap();
    let suite = folder.path().join("suite.yaml");
    std::fs::write(&suite, &blocks(&readme(), "yaml")[0]).unwrap();
    let brief = truebore().arg("brief").arg(&suite).assert().success();
    let brief = String::from_utf8(brief.get_output().stdout.clone()).unwrap();
    assert!(brief.contains("results/level-3"), "{brief}");
    let stations = truebore()
        .arg("exact")
        .arg(&suite)
        .args(["--case", "wall", "--stations", "21"])
        .assert()
        .success();
    let stations = String::from_utf8(stations.get_output().stdout.clone()).unwrap();
    assert_eq!(stations.lines().count(), 22);
    assert!(stations.starts_with("R,r,u_r,lambda_r,lambda_t,lambda_z,srr,stt,szz,p,J,W\n"));
    truebore()
        .arg("exact")
        .arg(&suite)
        .args(["--case", "wall", "--totals"])
        .assert()
        .success();
    // no result sets yet: judged, and not run
    truebore()
        .arg("check")
        .arg(&suite)
        .arg("--out")
        .arg(folder.path().join("out"))
        .assert()
        .code(1);
}

#[test]
fn the_declarations_in_readme_fit_into_the_suite() {
    let (suite, declarations) = (&blocks(&readme(), "yaml")[0], &blocks(&readme(), "yaml")[1]);
    let text = suite.replace(
        "    section: 1/4\n",
        &format!("    section: 1/4\n{declarations}"),
    );
    assert_ne!(&text, suite);
    let suite = truebore::suite::read(&text, "README.md").unwrap();
    assert_eq!(suite.cases[0].export.columns.len(), 5);
    truebore::run::plan::plan(suite, "README.md").unwrap();
}

#[test]
fn links_lead_to_files() {
    for page in ["README.md", "DEVELOPERS.md", "references/README.md"] {
        let text = std::fs::read_to_string(page).unwrap();
        let folder = Path::new(page).parent().unwrap();
        for link in text
            .split("](")
            .skip(1)
            .filter_map(|rest| rest.split(')').next())
        {
            if !link.contains("://") && !link.starts_with('#') {
                assert!(folder.join(link).exists(), "{page}: {link}");
            }
        }
    }
}
