//! Findings of one table as they come up: the first few are kept, the rest are counted.

use crate::input::{Finding, Place, Weight};

/// Findings of each weight listed for one table before they are only counted.
pub const LISTED: usize = 20;

/// Collects findings of one table.
#[derive(Debug, Default)]
pub(crate) struct Log {
    findings: Vec<Finding>,
    refused: u64,
    remarks: u64,
}

impl Log {
    pub fn new() -> Self {
        Self::default()
    }

    pub fn add(&mut self, finding: Finding) {
        let count = if finding.weight == Weight::Refused {
            &mut self.refused
        } else {
            &mut self.remarks
        };
        *count += 1;
        if *count <= LISTED as u64 {
            self.findings.push(finding);
        }
    }

    pub fn extend(&mut self, findings: Vec<Finding>) {
        findings.into_iter().for_each(|f| self.add(f));
    }

    /// True once a finding was added that forbids judging.
    pub fn is_refused(&self) -> bool {
        self.refused > 0
    }

    /// The remarks, or all findings when one forbids judging. `file` is named by the line that counts the rest.
    pub fn finish(mut self, file: &str) -> Result<Vec<Finding>, Vec<Finding>> {
        for (count, weight) in [
            (self.refused, Weight::Refused),
            (self.remarks, Weight::Note),
        ] {
            if let Some(more) = count.checked_sub(LISTED as u64).filter(|&more| more > 0) {
                let found = format!("and {more} more");
                self.findings.push(Finding::new(
                    weight,
                    "too-many-findings",
                    Place::file(file),
                    found,
                ));
            }
        }
        if self.refused > 0 {
            Err(self.findings)
        } else {
            Ok(self.findings)
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_first_findings_are_listed_and_the_rest_counted() {
        let mut log = Log::new();
        assert!(!log.is_refused());
        for line in 1..=4337 {
            log.add(Finding::refused(
                "number",
                Place::file("a.csv").line(line),
                "bad",
            ));
        }
        log.add(Finding::new(
            Weight::Note,
            "unread-column",
            Place::file("a.csv"),
            "extra",
        ));
        let all = log.finish("a.csv").unwrap_err();
        assert_eq!(all.len(), LISTED + 2);
        assert_eq!(all.last().unwrap().found, "and 4317 more");
        assert_eq!(all[19].place.line, Some(20));
    }

    #[test]
    fn remarks_alone_forbid_nothing() {
        let mut log = Log::new();
        log.add(Finding::new(
            Weight::Caution,
            "unused-node",
            Place::file("a.csv"),
            "x",
        ));
        assert_eq!(log.finish("a.csv").unwrap().len(), 1);
    }
}
