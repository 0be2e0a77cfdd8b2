//! The YAML text as a tree in which every key and value knows its line and column.
//!
//! Reading into a tree first, and only then into typed fields, is what lets a suite report all its problems
//! at once, each at its own place. Scalars keep the characters as written: `1e-4` and `0.1 %` are printed
//! back to the reader as the suite has them.

use crate::input::{Finding, Place};
use serde::de::{self, Deserialize, Deserializer, MapAccess, SeqAccess, Visitor};
use serde_yaml::Spanned;
use std::fmt;

/// A value with its place.
#[derive(Debug, Clone, PartialEq)]
pub struct Node {
    pub value: Value,
    pub line: u64,
    pub column: u64,
}

/// What a node holds.
#[derive(Debug, Clone, PartialEq)]
pub enum Value {
    /// Nothing written after the key, `~` or `null`.
    Empty,
    /// A number, word or text, as written (quotes removed).
    Scalar(String),
    List(Vec<Node>),
    /// In file order.
    Map(Vec<(Key, Node)>),
}

/// A key with its place.
#[derive(Debug, Clone, PartialEq)]
pub struct Key {
    pub name: String,
    pub line: u64,
    pub column: u64,
}

impl Node {
    /// What kind of thing this is, for messages.
    pub fn kind(&self) -> &'static str {
        match &self.value {
            Value::Empty => "nothing",
            Value::Scalar(_) => "a single value",
            Value::List(_) => "a list",
            Value::Map(_) => "a block of keys",
        }
    }

    pub fn scalar(&self) -> Option<&str> {
        match &self.value {
            Value::Scalar(text) => Some(text),
            _ => None,
        }
    }
}

/// Deep nesting and huge files are refused by the parser; these limits are ours.
const MAX_NODES: usize = 4_000_000;
const MAX_DEPTH: usize = 32;

/// Reads YAML text. `file` is the name messages use.
///
/// # Errors
/// One finding: the parser stops at the first fault in the syntax.
pub fn parse(text: &str, file: &str) -> Result<Node, Finding> {
    if text.trim_start_matches('\u{feff}').trim().is_empty() {
        let place = Place::file(file).line(1);
        return Err(Finding::refused("yaml-syntax", place, "the file is empty")
            .expected("a suite: at least `suite:`, `units:`, `materials:` and `cases:`")
            .hint("README.md shows a complete suite"));
    }
    let options = serde_yaml::options! {
        strict_booleans: true,
        with_snippet: false,
        leading_zero_numbers_as_strings: true,
        underscored_numbers_as_strings: true,
        non_finite_float_policy: serde_yaml::NonFiniteFloatPolicy::PassThrough,
        budget: serde_yaml::budget! { max_nodes: MAX_NODES, max_events: 2 * MAX_NODES, max_depth: MAX_DEPTH },
    };
    let raw: Spanned<Raw> =
        serde_yaml::from_str_with_options(text, options).map_err(|e| syntax_finding(&e, file))?;
    Ok(node_of(raw, text))
}

fn syntax_finding(error: &serde_yaml::Error, file: &str) -> Finding {
    let mut place = Place::file(file);
    if let Some(location) = error.location().filter(|l| l.line() > 0) {
        place = place.line(location.line()).column(location.column());
    }
    let said = error.without_snippet().to_string();
    let (rule, found, hint) = in_plain_words(&said);
    Finding::refused(rule, place, found).hint(hint)
}

/// Rule, message and hint for what the parser says; the place is told elsewhere.
fn in_plain_words(said: &str) -> (&'static str, String, &'static str) {
    let first_line = said.lines().next().unwrap_or("unreadable");
    let what = first_line.split(" at line ").next().unwrap_or(first_line);
    if let Some(key) = what.strip_prefix("duplicate mapping key: ") {
        let key = key.split(", set ").next().unwrap_or(key);
        let found = format!("the key `{key}` stands twice in this block");
        return ("yaml-duplicate-key", found, "keep one of the two entries");
    }
    if what.contains("multiple YAML documents") {
        let found = "a second document begins here".to_string();
        return (
            "yaml-syntax",
            found,
            "a suite is one document: leave out the `---`",
        );
    }
    if what.contains("budget breached") {
        let found =
            "the file is too large, nested too deeply, or repeats itself through aliases too often"
                .to_string();
        return (
            "yaml-limits",
            found,
            "write the suite without deep nesting and with few aliases",
        );
    }
    if what.contains("unknown anchor") {
        let found = "there is no anchor of this name before this line".to_string();
        return ("yaml-syntax", found, "quote a text that begins with `*`");
    }
    let hint = if what.contains("tabs") {
        "indent with blanks, not with tabs"
    } else {
        "check indentation, quotes and brackets at and before this line"
    };
    ("yaml-syntax", what.to_string(), hint)
}

/// The tree as the parser hands it over, before the characters of scalars are looked up.
enum Raw {
    Empty,
    /// Text of a string; numbers and booleans are `None` and read from the source.
    Scalar(Option<String>),
    List(Vec<Spanned<Raw>>),
    Map(Vec<(Spanned<String>, Spanned<Raw>)>),
}

impl<'de> Deserialize<'de> for Raw {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        deserializer.deserialize_any(RawVisitor)
    }
}

struct RawVisitor;

impl<'de> Visitor<'de> for RawVisitor {
    type Value = Raw;

    fn expecting(&self, f: &mut fmt::Formatter) -> fmt::Result {
        f.write_str("a value, a list or a block of keys")
    }

    fn visit_bool<E: de::Error>(self, _: bool) -> Result<Raw, E> {
        Ok(Raw::Scalar(None))
    }

    fn visit_i64<E: de::Error>(self, _: i64) -> Result<Raw, E> {
        Ok(Raw::Scalar(None))
    }

    fn visit_u64<E: de::Error>(self, _: u64) -> Result<Raw, E> {
        Ok(Raw::Scalar(None))
    }

    fn visit_i128<E: de::Error>(self, _: i128) -> Result<Raw, E> {
        Ok(Raw::Scalar(None))
    }

    fn visit_u128<E: de::Error>(self, _: u128) -> Result<Raw, E> {
        Ok(Raw::Scalar(None))
    }

    fn visit_f64<E: de::Error>(self, _: f64) -> Result<Raw, E> {
        Ok(Raw::Scalar(None))
    }

    fn visit_str<E: de::Error>(self, text: &str) -> Result<Raw, E> {
        Ok(Raw::Scalar(Some(text.to_string())))
    }

    fn visit_unit<E: de::Error>(self) -> Result<Raw, E> {
        Ok(Raw::Empty)
    }

    fn visit_none<E: de::Error>(self) -> Result<Raw, E> {
        Ok(Raw::Empty)
    }

    fn visit_some<D: Deserializer<'de>>(self, deserializer: D) -> Result<Raw, D::Error> {
        Raw::deserialize(deserializer)
    }

    fn visit_newtype_struct<D: Deserializer<'de>>(self, deserializer: D) -> Result<Raw, D::Error> {
        Raw::deserialize(deserializer)
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut items: A) -> Result<Raw, A::Error> {
        let mut list = Vec::new();
        while let Some(item) = items.next_element()? {
            list.push(item);
        }
        Ok(Raw::List(list))
    }

    fn visit_map<A: MapAccess<'de>>(self, mut entries: A) -> Result<Raw, A::Error> {
        let mut map = Vec::new();
        while let Some(entry) = entries.next_entry()? {
            map.push(entry);
        }
        Ok(Raw::Map(map))
    }
}

fn node_of(raw: Spanned<Raw>, source: &str) -> Node {
    let value = match raw.value {
        Raw::Empty => Value::Empty,
        Raw::Scalar(Some(text)) => Value::Scalar(text),
        Raw::Scalar(None) => Value::Scalar(written(&raw.defined, source)),
        Raw::List(items) => Value::List(
            items
                .into_iter()
                .map(|item| node_of(item, source))
                .collect(),
        ),
        Raw::Map(entries) => Value::Map(
            entries
                .into_iter()
                .map(|(key, value)| (key_of(key), node_of(value, source)))
                .collect(),
        ),
    };
    Node {
        value,
        line: raw.referenced.line(),
        column: raw.referenced.column(),
    }
}

fn key_of(key: Spanned<String>) -> Key {
    Key {
        name: key.value,
        line: key.referenced.line(),
        column: key.referenced.column(),
    }
}

/// The characters of a plain scalar, from its span in the source.
fn written(location: &serde_yaml::Location, source: &str) -> String {
    let span = location.span();
    let text = match (span.byte_offset(), span.byte_len()) {
        (Some(start), Some(length)) => source.get(start as usize..(start + length) as usize),
        _ => None,
    };
    text.unwrap_or_default().trim().to_string()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn map(node: &Node) -> &[(Key, Node)] {
        match &node.value {
            Value::Map(entries) => entries,
            other => panic!("{other:?}"),
        }
    }

    #[test]
    fn scalars_keep_their_characters_and_places() {
        let text =
            "a: 1e-4\nb: [0.10, 30 kPa, 'x y', 0.1 %, 1/4, 017, no, 1_000, .inf]\nc:\n  d: ~\n";
        let tree = parse(text, "s.yaml").unwrap();
        let entries = map(&tree);
        assert_eq!(entries[0].1.scalar(), Some("1e-4"));
        assert_eq!((entries[0].1.line, entries[0].1.column), (1, 4));
        let Value::List(items) = &entries[1].1.value else {
            panic!()
        };
        let words: Vec<_> = items.iter().map(|i| i.scalar().unwrap()).collect();
        assert_eq!(
            words,
            [
                "0.10", "30 kPa", "x y", "0.1 %", "1/4", "017", "no", "1_000", ".inf"
            ]
        );
        assert_eq!((items[1].line, items[1].column), (2, 11));
        assert_eq!(map(&entries[2].1)[0].1.value, Value::Empty);
        assert_eq!(
            (map(&entries[2].1)[0].0.line, map(&entries[2].1)[0].0.column),
            (4, 3)
        );
    }

    #[test]
    fn an_alias_is_read_where_it_is_defined() {
        let tree = parse("a: &n 2.50\nb: *n\n", "s.yaml").unwrap();
        assert_eq!(map(&tree)[1].1.scalar(), Some("2.50"));
    }

    #[test]
    fn byte_order_mark_and_crlf_keep_lines() {
        let tree = parse("\u{feff}a: 1\r\nb: 2.0\r\n", "s.yaml").unwrap();
        assert_eq!(map(&tree)[1].1.scalar(), Some("2.0"));
        assert_eq!(map(&tree)[1].1.line, 2);
    }

    #[test]
    fn syntax_faults_have_a_line() {
        for (text, rule, line) in [
            ("a: 1\na: 2\n", "yaml-duplicate-key", 2),
            ("a: [1, 2\nb: 3\n", "yaml-syntax", 2),
            ("a: 'x\n", "yaml-syntax", 1),
        ] {
            let finding = parse(text, "s.yaml").unwrap_err();
            assert_eq!(finding.rule, rule, "{finding}");
            assert_eq!(finding.place.line, Some(line), "{finding}");
        }
        assert!(parse(" \n", "s.yaml").is_err());
        assert!(parse(&"[".repeat(100_000), "s.yaml").is_err());
    }
}
