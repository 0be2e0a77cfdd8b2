//! The rules of judging: what a suite must say, and how a mesh must fit the body. Those of reading tables stand in
//! `results/rules.rs`; the catalogue prints both.

/// Rules of the suite file: name and meaning, in alphabetical order.
pub const SUITE: &[(&str, &str)] = &[
    ("cannot-read", "a file that is named can be opened and read"),
    ("cannot-write", "the folder of the reports can be written"),
    (
        "criterion",
        "a criterion names a measure, a level and a limit that there are",
    ),
    (
        "criterion-form",
        "a criterion says what it judges and one limit that can be missed",
    ),
    (
        "duplicate-case-id",
        "every case has its own id, also after lists are expanded",
    ),
    ("duplicate-level", "a level is listed once"),
    ("empty-list", "a list of values has at least one"),
    (
        "identifier",
        "what names a folder is made of letters, digits, '-', '_' and '.'",
    ),
    (
        "implausible-length",
        "a length lies between 1e-12 and 1e12 of the suite's unit",
    ),
    ("length", "a length is above zero"),
    ("levels", "levels come with result sets"),
    (
        "load-factor",
        "the share of the loads is a number other than zero",
    ),
    (
        "material-constants",
        "a law has the constants it needs, within their range",
    ),
    (
        "mesh-sizes",
        "declared mesh sizes fall as the meshes do, one a level",
    ),
    ("missing-key", "everything a case needs is there"),
    ("no-cases", "a suite has at least one case"),
    (
        "no-exact-solution",
        "the exact solution exists at these parameters and loads",
    ),
    (
        "node-tolerance",
        "a declared tolerance of nodes is at most a hundredth of the wall",
    ),
    ("not-utf8", "a suite is UTF-8 text"),
    (
        "off-the-body",
        "a point lies where the exact solution has a value",
    ),
    (
        "ordered-stresses",
        "an isotropic law is stable where the exact solution is: the greater of two principal stretches has the greater stress",
    ),
    (
        "results-folder",
        "every level has a folder of its own below the suite's",
    ),
    (
        "section-share",
        "the modelled share of the section is above 0 and at most 1",
    ),
    ("too-many-cases", "lists expand to 20000 cases at most"),
    ("unknown-key", "every key is one of those the block knows"),
    ("unknown-law", "a law is one of the catalogue"),
    ("unknown-material", "a material is one of the suite"),
    (
        "unknown-shape",
        "an element shape or pressure space is one of the catalogue",
    ),
    (
        "unknown-solution",
        "an exact solution is one of the catalogue",
    ),
    (
        "unknown-unit",
        "a unit is one of the catalogue, and measures what it stands at",
    ),
    (
        "unknown-word",
        "a word is one of those that can stand there",
    ),
    (
        "wrong-type",
        "a value is of the kind that is wanted: number, word, list, block",
    ),
    (
        "wrong-unit",
        "a number's unit measures what the number stands for",
    ),
    ("yaml-duplicate-key", "a key stands once in its block"),
    ("yaml-syntax", "the file is YAML"),
];

/// Rules of the mesh against the body: name and meaning, in alphabetical order.
pub const BODY: &[(&str, &str)] = &[
    ("axial-length", "a solid is as long as declared"),
    ("axial-origin", "a solid is held axially at Z = 0"),
    (
        "axial-stress",
        "a slice exports the axial stress, in which its end condition shows",
    ),
    (
        "declared-element",
        "the mesh is of the declared element, or no order could be expected",
    ),
    (
        "edge-of-body",
        "the outer sides of the mesh lie on the walls of the body or on its cuts",
    ),
    ("full-load", "the results are those of the case's load"),
    (
        "mixed-wall-sides",
        "mid-side nodes on a wall lie on it, all of them",
    ),
    (
        "model-of-body",
        "a plane, axisymmetric or solid model can stand for the body",
    ),
    (
        "node-on-body",
        "every node lies on the body; mid-side nodes may lie on the chord of their corners",
    ),
    (
        "outside-the-body",
        "quadrature points outside the exact body are counted, and the formula continued there",
    ),
    (
        "reach-of-mesh",
        "the mesh reaches as far as its declared share of the body does",
    ),
    ("sector-angle", "a sector spans its share of the turn"),
    (
        "share-of-body",
        "a quarter is a quarter: the mesh (or the weights) covers the declared share of the body",
    ),
    (
        "straight-wall-sides",
        "mid-side nodes on a wall lie on it, or an order of the displacement is lost",
    ),
    (
        "wall-reached",
        "sides of elements lie on the inner and on the outer wall",
    ),
];

#[cfg(test)]
mod tests {
    use super::*;
    use crate::results::rules::RULES;
    use std::path::Path;

    /// Every rule named in the sources of these rooms is listed, and every listed one is used.
    #[test]
    fn rules_in_the_sources_are_those_listed() {
        let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
        let mut text = String::new();
        for folder in ["suite", "run", "norms", "cli"] {
            for entry in std::fs::read_dir(root.join(folder)).unwrap() {
                let path = entry.unwrap().path();
                if path.file_name() != Some("rules.rs".as_ref()) {
                    text.push_str(&std::fs::read_to_string(path).unwrap());
                }
            }
        }
        for (rule, meaning) in SUITE.iter().chain(BODY) {
            assert!(
                text.contains(&format!("\"{rule}\"")),
                "{rule} is never used"
            );
            assert!(!meaning.is_empty());
        }
        for call in ["Finding::refused(", "Finding::new(", ".refuse("] {
            for after in text.split(call).skip(1) {
                // the first word in quotes that looks like a rule, before the call ends
                let quoted = after.split('"').nth(1).unwrap_or_default();
                let ruled = quoted.contains('-')
                    && quoted.chars().all(|c| c.is_ascii_lowercase() || c == '-');
                if ruled && after.find('"') < after.find(';') {
                    let known = SUITE
                        .iter()
                        .chain(BODY)
                        .chain(RULES)
                        .any(|(rule, _)| *rule == quoted);
                    assert!(known, "{quoted} is used and not listed");
                }
            }
        }
    }

    #[test]
    fn rules_are_sorted() {
        for list in [SUITE, BODY] {
            assert!(list.windows(2).all(|pair| pair[0].0 < pair[1].0));
        }
    }
}
