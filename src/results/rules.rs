//! Every rule that reading a result set can break: one table, printed by the catalogue.

/// Name and meaning of each rule, in alphabetical order.
pub const RULES: &[(&str, &str)] = &[
    (
        "ambiguous-files",
        "a table is either one file or a set of parts, plain or compressed, never two of these",
    ),
    (
        "ambiguous-step",
        "a table without a step column cannot be told apart by steps",
    ),
    (
        "boundary-exists",
        "a mesh has sides that belong to one element only",
    ),
    (
        "coincident-nodes",
        "two nodes at the same place are a crack, unless meant",
    ),
    ("column-used-twice", "a column stands for one quantity only"),
    (
        "csv-syntax",
        "a table is comma-separated text as RFC 4180 describes it",
    ),
    ("decimal-comma", "the decimal mark is a point"),
    ("duplicate-column", "a header names each column once"),
    (
        "element-without-points",
        "every element has integration points where points.csv is given",
    ),
    ("empty-cell", "a needed cell holds something"),
    ("empty-table", "a table has a header and at least one row"),
    ("file-changed", "a file stays the same while it is read"),
    ("finite-number", "numbers are finite"),
    (
        "flat-mesh",
        "elements of two dimensions lie in a plane of constant Z",
    ),
    ("fortran-exponent", "an exponent is written with e or E"),
    (
        "integer",
        "identifiers, point numbers and steps are whole numbers",
    ),
    ("integer-range", "whole numbers fit in 64 bits"),
    (
        "line-break-in-cell",
        "no cell holds a line break; an unclosed quote swallows rows",
    ),
    ("manifold-sides", "a side belongs to one or two elements"),
    (
        "mapped-column-found",
        "every header named under `columns:` exists",
    ),
    (
        "matching-sides",
        "two elements that share the corners of a side share its middle nodes",
    ),
    (
        "mean-pressure",
        "where p and all normal stresses are given, p is -tr(sigma)/3",
    ),
    ("missing-column", "a needed column is there"),
    ("missing-table", "a needed table is there"),
    (
        "mixed-dimensions",
        "elements of one mesh have one dimension",
    ),
    (
        "model-kind",
        "all tables speak of the same kind of model: planar, solid or axisymmetric",
    ),
    (
        "no-final-newline",
        "a last line without a line break may have been cut off",
    ),
    ("number", "a numeric cell holds a number"),
    (
        "part-numbers",
        "the numbers of part files follow each other without a gap",
    ),
    (
        "point-inside-element",
        "an integration point lies inside its element",
    ),
    (
        "point-number-range",
        "point numbers lie in the stated range",
    ),
    (
        "points-cover-element",
        "the weights of an element's integration points add up to its volume",
    ),
    (
        "points-cover-mesh",
        "the weights of the integration points add up to the meshed volume",
    ),
    (
        "positive-jacobian",
        "the map of an element keeps its orientation at every quadrature point",
    ),
    ("positive-radius", "a radius is not negative"),
    ("positive-volume-ratio", "J = det F is positive"),
    ("positive-weight", "integration weights are positive"),
    (
        "pressure-from-trace",
        "p of a mixed method is replaced by -tr(sigma)/3",
    ),
    ("ragged-row", "every row has as many cells as the header"),
    (
        "readable-file",
        "a file can be opened, read and decompressed to its end",
    ),
    ("repeated-node", "an element names each node once"),
    ("same-header", "every part repeats the same header"),
    (
        "shape-name",
        "an element shape is one of the exchange format",
    ),
    (
        "shape-node-count",
        "an element has as many nodes as its shape, and no more",
    ),
    (
        "standard-rule",
        "the rule named for the integration points exists for every shape of the mesh",
    ),
    (
        "step-found",
        "the step to be judged is in every table that has steps",
    ),
    (
        "stress-conversion",
        "a stress measure is converted only with everything the conversion needs",
    ),
    (
        "too-many-findings",
        "only the first findings of a file are listed",
    ),
    ("unique-element-ids", "an element is listed once"),
    ("unique-node-ids", "a node is listed once a step"),
    (
        "unique-points",
        "a point of an element is listed once a step",
    ),
    ("unique-quantities", "a total is listed once a step"),
    (
        "unknown-canonical-name",
        "`columns:` maps names of the exchange format",
    ),
    ("unknown-element", "an element that is referred to exists"),
    ("unknown-node", "a node that is referred to exists"),
    (
        "unread-column",
        "a column that is not part of the exchange format is not read",
    ),
    (
        "unread-file",
        "a file that is not part of the exchange format is not read",
    ),
    ("unused-node", "every node belongs to an element"),
    ("utf-8", "text is UTF-8"),
    ("volume-ratio", "where J and F are given, J is det F"),
];

/// The meaning of a rule, if there is such a rule.
pub fn meaning(rule: &str) -> Option<&'static str> {
    RULES
        .iter()
        .find(|(name, _)| *name == rule)
        .map(|(_, meaning)| *meaning)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn rules_are_kebab_case_and_unique() {
        for (i, (name, meaning)) in RULES.iter().enumerate() {
            assert!(
                name.chars()
                    .all(|c| c.is_ascii_lowercase() || c == '-' || c.is_ascii_digit()),
                "{name}"
            );
            assert!(!meaning.is_empty());
            assert!(
                RULES[i + 1..].iter().all(|(other, _)| other != name),
                "{name}"
            );
        }
    }

    #[test]
    fn rules_are_in_alphabetical_order() {
        assert!(RULES.is_sorted_by_key(|(name, _)| name));
    }

    #[test]
    fn every_rule_is_used_and_every_used_rule_is_listed() {
        let mut text = String::new();
        for entry in std::fs::read_dir(concat!(env!("CARGO_MANIFEST_DIR"), "/src/results")).unwrap()
        {
            let path = entry.unwrap().path();
            if path.file_name().is_some_and(|n| n != "rules.rs") && path.is_file() {
                text += &std::fs::read_to_string(path).unwrap();
            }
        }
        for (name, _) in RULES {
            assert!(
                text.contains(&format!("\"{name}\"")),
                "{name} is listed, but not used"
            );
        }
        for constructor in [
            "refused(\n",
            "refused(",
            "problem(",
            "Weight::Caution,",
            "Weight::Note,",
        ] {
            for rest in text.split(constructor).skip(1) {
                let rest = rest.trim_start();
                if let Some(rule) = rest.strip_prefix('"').and_then(|r| r.split('"').next()) {
                    assert!(meaning(rule).is_some(), "{rule} is used, but not listed");
                }
            }
        }
    }
}
