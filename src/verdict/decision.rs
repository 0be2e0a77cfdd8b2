//! The four verdicts and how they combine. Only `pass` is green.

use serde::{Deserialize, Serialize};

/// What can be said of a criterion, a case or a suite.
///
/// The order is that of the lanes in reports: what needs work first.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Verdict {
    Fail,
    Inconclusive,
    NotRun,
    Pass,
}

impl Verdict {
    pub const ALL: [Verdict; 4] = [Self::Fail, Self::Inconclusive, Self::NotRun, Self::Pass];

    /// The closed list of words.
    pub fn word(self) -> &'static str {
        match self {
            Self::Fail => "fail",
            Self::Inconclusive => "inconclusive",
            Self::NotRun => "not run",
            Self::Pass => "pass",
        }
    }

    /// The worst of several, in lane order. Nothing judged is never a pass.
    pub fn worst(verdicts: impl IntoIterator<Item = Verdict>) -> Verdict {
        verdicts.into_iter().min().unwrap_or(Self::NotRun)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn only_all_passes_pass() {
        use Verdict::*;
        assert_eq!(Verdict::worst([]), NotRun);
        assert_eq!(Verdict::worst([Pass, Pass]), Pass);
        assert_eq!(Verdict::worst([Pass, NotRun]), NotRun);
        assert_eq!(Verdict::worst([NotRun, Inconclusive, Pass]), Inconclusive);
        assert_eq!(Verdict::worst([Inconclusive, Fail, Pass]), Fail);
    }
}
