//! What is wrong with a text that is no expression, and where.

/// Longest piece of the text that a message repeats, in characters.
const EXCERPT: usize = 30;

/// The first thing that is wrong.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
#[error("{found}{}", if .expected.is_empty() { String::new() } else { format!(", expected {}", .expected) })]
pub struct ExpressionError {
    /// Byte in the text where it begins; its length when the text ends too early.
    pub position: usize,
    /// What stands there, as a fragment.
    pub found: String,
    /// What should stand there; may be empty.
    pub expected: String,
    /// How to mend it; may be empty.
    pub hint: String,
}

impl ExpressionError {
    pub(super) fn new(position: usize, found: impl Into<String>) -> Self {
        Self {
            position,
            found: found.into(),
            expected: String::new(),
            hint: String::new(),
        }
    }

    pub(super) fn expected(mut self, expected: impl Into<String>) -> Self {
        self.expected = expected.into();
        self
    }

    pub(super) fn hint(mut self, hint: impl Into<String>) -> Self {
        self.hint = hint.into();
        self
    }

    /// The message with its place in `text`, for one line: `unknown name "I3" at character 14, after "0.2*(I1-3) + "`.
    pub fn in_text(&self, text: &str) -> String {
        let before = text.get(..self.position).unwrap_or(text);
        let place = if before.trim().is_empty() {
            "at the start".to_string()
        } else {
            let number = before.chars().count() + 1;
            format!("at character {number}, after \"{}\"", tail(before))
        };
        let expected = match self.expected.as_str() {
            "" => String::new(),
            expected => format!("; expected {expected}"),
        };
        format!("{} {place}{expected}", self.found)
    }
}

/// The end of a text, on one line.
fn tail(text: &str) -> String {
    let count = text.chars().count();
    let mark = if count > EXCERPT { "..." } else { "" };
    let kept = text.chars().skip(count.saturating_sub(EXCERPT));
    let line: String = kept.map(plain).collect();
    format!("{mark}{line}")
}

/// The beginning of a piece of text, on one line.
pub(super) fn head(text: &str) -> String {
    let line: String = text.chars().take(EXCERPT).map(plain).collect();
    let mark = if text.chars().count() > EXCERPT {
        "..."
    } else {
        ""
    };
    format!("{line}{mark}")
}

/// What cannot be printed on one line is a blank.
fn plain(c: char) -> char {
    if c.is_control() || c.is_whitespace() {
        ' '
    } else {
        c
    }
}
