//! Reading a block of keys field by field, collecting every problem on the way.

use super::quantity::Quantity;
use super::tree::{Key, Node, Value};
use crate::input::{Finding, Place};

/// Collects the findings of one file.
#[derive(Debug)]
pub struct Reader {
    file: String,
    pub findings: Vec<Finding>,
}

impl Reader {
    pub fn new(file: &str) -> Self {
        Self {
            file: file.to_string(),
            findings: Vec::new(),
        }
    }

    /// The place of a node under its YAML path.
    pub fn place(&self, line: u64, column: u64, path: &str) -> Place {
        Place::file(&self.file)
            .line(line)
            .column(column)
            .field(path)
    }

    pub fn refuse(
        &mut self,
        rule: &str,
        node: &Node,
        path: &str,
        found: impl Into<String>,
    ) -> &mut Finding {
        let place = self.place(node.line, node.column, path);
        self.push(Finding::refused(rule, place, found))
    }

    /// Adds a finding and hands it back so that expectation and hint can be set.
    pub fn push(&mut self, finding: Finding) -> &mut Finding {
        self.findings.push(finding);
        let last = self.findings.len() - 1;
        &mut self.findings[last]
    }

    /// The text of a single value.
    pub fn text(&mut self, node: &Node, path: &str) -> Option<String> {
        match node.scalar() {
            Some(text) if !text.trim().is_empty() => Some(text.to_string()),
            _ => {
                let found = format!("found {}", node.kind());
                self.refuse("wrong-type", node, path, found).expected =
                    "a single word or text".into();
                None
            }
        }
    }

    /// A number with an optional unit.
    pub fn quantity(&mut self, node: &Node, path: &str) -> Option<Quantity> {
        let Some(text) = node.scalar() else {
            let found = format!("found {}", node.kind());
            self.refuse("wrong-type", node, path, found).expected =
                "a number, with its unit if it is not the suite's".into();
            return None;
        };
        match Quantity::parse(text) {
            Ok(quantity) => Some(quantity),
            Err(found) => {
                self.refuse("wrong-type", node, path, found).expected =
                    "a number, with its unit if it is not the suite's, e.g. 0.03 or 30 kPa".into();
                None
            }
        }
    }

    /// `true` or `false`.
    pub fn flag(&mut self, node: &Node, path: &str) -> Option<bool> {
        match node.scalar() {
            Some("true") => Some(true),
            Some("false") => Some(false),
            _ => {
                let found = format!("found {}", shown(node));
                self.refuse("wrong-type", node, path, found).expected = "true or false".into();
                None
            }
        }
    }

    /// The items of a list; a single value counts as a list of one.
    pub fn items<'a>(&mut self, node: &'a Node) -> Vec<&'a Node> {
        match &node.value {
            Value::List(items) => items.iter().collect(),
            Value::Empty => Vec::new(),
            _ => vec![node],
        }
    }

    /// A block of keys.
    pub fn block<'a>(&mut self, node: &'a Node, path: &str) -> Option<Block<'a>> {
        match &node.value {
            Value::Map(entries) => Some(Block::new(entries, path, node.line, node.column)),
            _ => {
                let found = format!("found {}", shown(node));
                self.refuse("wrong-type", node, path, found).expected = "a block of keys".into();
                None
            }
        }
    }

    /// A variant: a single word, or one key with its own block. Gives name, place and the block's node.
    pub fn variant<'a>(
        &mut self,
        node: &'a Node,
        path: &str,
    ) -> Option<(String, Option<&'a Node>)> {
        match &node.value {
            Value::Scalar(word) => Some((word.clone(), None)),
            Value::Map(entries) if entries.len() == 1 => {
                Some((entries[0].0.name.clone(), Some(&entries[0].1)))
            }
            Value::Map(entries) => {
                let names: Vec<_> = entries.iter().map(|(key, _)| key.name.as_str()).collect();
                let found = format!("found {} keys ({})", entries.len(), names.join(", "));
                self.refuse("wrong-type", node, path, found).expected =
                    "exactly one name, alone or with a block of its own".into();
                None
            }
            _ => {
                let found = format!("found {}", node.kind());
                self.refuse("wrong-type", node, path, found).expected =
                    "a name, or one name with its block".into();
                None
            }
        }
    }
}

/// A node as messages show it: a single value in quotes, anything else by its kind.
pub(super) fn shown(node: &Node) -> String {
    match node.scalar() {
        Some(text) => format!("\"{text}\""),
        None => node.kind().to_string(),
    }
}

/// A block of keys being read; what is not taken is an unknown key.
#[derive(Debug)]
pub struct Block<'a> {
    pub path: String,
    line: u64,
    column: u64,
    entries: &'a [(Key, Node)],
    known: Vec<&'static str>,
}

impl<'a> Block<'a> {
    fn new(entries: &'a [(Key, Node)], path: &str, line: u64, column: u64) -> Self {
        Self {
            path: path.to_string(),
            line,
            column,
            entries,
            known: Vec::new(),
        }
    }

    /// The path of a key of this block.
    pub fn path_of(&self, key: &str) -> String {
        if self.path.is_empty() {
            key.to_string()
        } else {
            format!("{}.{key}", self.path)
        }
    }

    /// The value of an optional key.
    pub fn optional(&mut self, key: &'static str) -> Option<&'a Node> {
        self.known.push(key);
        self.entries
            .iter()
            .find(|(k, _)| k.name == key)
            .map(|(_, node)| node)
    }

    /// The value of a key that must be there.
    pub fn required(
        &mut self,
        key: &'static str,
        reader: &mut Reader,
        expected: &str,
    ) -> Option<&'a Node> {
        let found = self.optional(key);
        if found.is_none() {
            let place = reader.place(self.line, self.column, &self.path_of(key));
            reader
                .push(Finding::refused(
                    "missing-key",
                    place,
                    format!("`{key}:` is missing"),
                ))
                .expected = expected.to_string();
        }
        found
    }

    /// Reports every key that was not asked for.
    pub fn finish(self, reader: &mut Reader) {
        for (key, _) in self.entries {
            if self.known.contains(&key.name.as_str()) {
                continue;
            }
            let place = reader.place(key.line, key.column, &self.path_of(&key.name));
            let finding = reader.push(Finding::refused(
                "unknown-key",
                place,
                format!("unknown key `{}`", key.name),
            ));
            finding.expected = match self.known.as_slice() {
                [] => "no key at all here".to_string(),
                known => format!("one of: {}", known.join(", ")),
            };
            if let Some(near) = nearest(&key.name, self.known.iter().copied()) {
                finding.hint = format!("did you mean `{near}`?");
            }
        }
    }
}

/// The known word closest to a misspelt one, if it is close enough to be worth naming.
pub fn nearest<'w>(word: &str, known: impl IntoIterator<Item = &'w str>) -> Option<&'w str> {
    let word = word.to_lowercase();
    let scored = known
        .into_iter()
        .map(|k| (edit_distance(&word, &k.to_lowercase()), k));
    let limit = 1 + word.chars().count() / 4;
    scored
        .filter(|(distance, _)| *distance <= limit)
        .min_by_key(|(distance, _)| *distance)
        .map(|(_, k)| k)
}

/// Levenshtein distance in characters.
fn edit_distance(a: &str, b: &str) -> usize {
    let b: Vec<char> = b.chars().collect();
    let mut row: Vec<usize> = (0..=b.len()).collect();
    for (i, ca) in a.chars().enumerate() {
        let mut diagonal = row[0];
        row[0] = i + 1;
        for (j, cb) in b.iter().enumerate() {
            let change = diagonal + usize::from(ca != *cb);
            diagonal = row[j + 1];
            row[j + 1] = change.min(row[j] + 1).min(diagonal + 1);
        }
    }
    row[b.len()]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_near_word_is_suggested_and_a_far_one_is_not() {
        assert_eq!(
            nearest("outer_radius", ["inner-radius", "outer-radius"]),
            Some("outer-radius")
        );
        assert_eq!(
            nearest("Neo-hookean", ["neo-Hookean", "Mooney-Rivlin"]),
            Some("neo-Hookean")
        );
        assert_eq!(nearest("xyz", ["inner-radius", "ends"]), None);
        assert_eq!(edit_distance("kitten", "sitting"), 3);
    }
}
