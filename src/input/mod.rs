//! What was found in an input, where, and how to mend it. Imports nothing of ours; every room may use it.
//!
//! A [`Finding`] is both the error message of a broken file and the remark of a sanity check: the same
//! words, with a different [`Weight`].

use serde::{Deserialize, Serialize};
use std::fmt;

/// How much a finding matters.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Weight {
    /// Worth knowing; changes nothing.
    Note,
    /// The numbers stand, but read them with this in mind.
    Caution,
    /// No number can be trusted: nothing is judged on this input.
    Refused,
}

/// A place in an input. Files are named relative to the suite's folder, so that reports carry no paths.
#[derive(Debug, Clone, PartialEq, Eq, Default, Serialize, Deserialize)]
pub struct Place {
    pub file: String,
    /// 1-based line, when known.
    pub line: Option<u64>,
    /// 1-based column in the line (YAML), when known.
    pub column: Option<u64>,
    /// The field inside: a YAML path (`cases[0].levels`) or a CSV column name.
    pub field: String,
}

impl Place {
    pub fn file(file: impl Into<String>) -> Self {
        Self {
            file: file.into(),
            ..Self::default()
        }
    }

    pub fn line(mut self, line: u64) -> Self {
        self.line = Some(line);
        self
    }

    pub fn column(mut self, column: u64) -> Self {
        self.column = Some(column);
        self
    }

    pub fn field(mut self, field: impl Into<String>) -> Self {
        self.field = field.into();
        self
    }
}

impl fmt::Display for Place {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}", self.file)?;
        if let Some(line) = self.line {
            write!(f, ":{line}")?;
            if let Some(column) = self.column {
                write!(f, ":{column}")?;
            }
        }
        if !self.field.is_empty() {
            write!(f, ": {}", self.field)?;
        }
        Ok(())
    }
}

/// One thing found in an input.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Finding {
    pub weight: Weight,
    /// The rule, in kebab-case, e.g. `unique-node-ids`; tests and reports refer to it.
    pub rule: String,
    pub place: Place,
    /// What was found, a lower-case fragment without a full stop.
    pub found: String,
    /// What was expected instead; may be empty.
    pub expected: String,
    /// How to mend it; may be empty.
    pub hint: String,
}

impl Finding {
    pub fn new(weight: Weight, rule: &str, place: Place, found: impl Into<String>) -> Self {
        Self {
            weight,
            rule: rule.to_string(),
            place,
            found: found.into(),
            expected: String::new(),
            hint: String::new(),
        }
    }

    pub fn refused(rule: &str, place: Place, found: impl Into<String>) -> Self {
        Self::new(Weight::Refused, rule, place, found)
    }

    pub fn expected(mut self, expected: impl Into<String>) -> Self {
        self.expected = expected.into();
        self
    }

    pub fn hint(mut self, hint: impl Into<String>) -> Self {
        self.hint = hint.into();
        self
    }
}

impl fmt::Display for Finding {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}: {}", self.place, self.found)?;
        if !self.expected.is_empty() {
            write!(f, "\n  expected: {}", self.expected)?;
        }
        if !self.hint.is_empty() {
            write!(f, "\n  hint: {}", self.hint)?;
        }
        write!(f, "\n  rule: {}", self.rule)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_finding_names_place_expectation_and_mend() {
        let place = Place::file("nodes.csv").line(7).field("ux");
        let finding = Finding::refused("finite-number", place, "\"nan\" is not a finite number")
            .expected("a decimal number such as -1.5e-3")
            .hint("export this node again");
        assert_eq!(
            finding.to_string(),
            "nodes.csv:7: ux: \"nan\" is not a finite number\n  expected: a decimal number such as -1.5e-3\n  \
             hint: export this node again\n  rule: finite-number"
        );
    }
}
