//! Lists in a case make one case for each combination, the first list varying slowest. A parameter that is a list by
//! itself (radii of layers) makes cases by a list of lists only.

use crate::suite::tree::{Key, Node, Value};

/// One combination: the block without lists, and what was chosen where a list stood.
#[derive(Debug, Clone, PartialEq)]
pub struct Combination {
    pub node: Node,
    /// The chosen items in words, in file order; empty when there was no list.
    pub labels: Vec<String>,
}

/// Every combination of the lists inside `node`, in file order. `lists` are the keys whose value is a list anyway.
pub fn expand(node: &Node, lists: &[&str]) -> Vec<Combination> {
    match &node.value {
        Value::List(items) => items
            .iter()
            .flat_map(|item| choices_of(item, lists))
            .collect(),
        Value::Map(entries) => product(node, entries, lists),
        _ => vec![whole(node)],
    }
}

/// No choice at all.
fn whole(node: &Node) -> Combination {
    Combination {
        node: node.clone(),
        labels: Vec::new(),
    }
}

/// Whether the list under `key` is one value.
fn is_value(key: &Key, node: &Node, lists: &[&str]) -> bool {
    let nested = |items: &[Node]| items.iter().any(|i| matches!(i.value, Value::List(_)));
    lists.contains(&key.name.as_str())
        && !matches!(&node.value, Value::List(items) if nested(items))
}

/// The choices under a key. Of a list of lists each inner list is one value.
fn under(key: &Key, node: &Node, lists: &[&str]) -> Vec<Combination> {
    if is_value(key, node, lists) {
        return vec![whole(node)];
    }
    match &node.value {
        Value::List(items) if lists.contains(&key.name.as_str()) => items
            .iter()
            .map(|item| Combination {
                node: item.clone(),
                labels: vec![label(item)],
            })
            .collect(),
        _ => expand(node, lists),
    }
}

/// How many combinations there are, without making them; saturates.
pub fn count(node: &Node, lists: &[&str]) -> usize {
    let add = |all: usize, more: usize| all.saturating_add(more);
    match &node.value {
        Value::List(items) => items.iter().map(|i| count(i, lists)).fold(0, add),
        Value::Map(entries) => entries
            .iter()
            .map(|(key, node)| match &node.value {
                _ if is_value(key, node, lists) => 1,
                Value::List(items) if lists.contains(&key.name.as_str()) => items.len(),
                _ => count(node, lists),
            })
            .fold(1, usize::saturating_mul),
        _ => 1,
    }
}

/// The first empty list inside, which would make no case at all.
pub fn empty_list(node: &Node) -> Option<&Node> {
    match &node.value {
        Value::List(items) if items.is_empty() => Some(node),
        Value::List(items) => items.iter().find_map(empty_list),
        Value::Map(entries) => entries.iter().find_map(|(_, n)| empty_list(n)),
        _ => None,
    }
}

/// One item of a list, with its own lists expanded; its label says the whole choice.
fn choices_of(item: &Node, lists: &[&str]) -> Vec<Combination> {
    let inner = expand(item, lists).into_iter();
    inner
        .map(|c| Combination {
            labels: vec![label(&c.node)],
            node: c.node,
        })
        .collect()
}

/// The entries chosen so far, and their labels.
type Partial = (Vec<(Key, Node)>, Vec<String>);

fn product(node: &Node, entries: &[(Key, Node)], lists: &[&str]) -> Vec<Combination> {
    let mut partial: Vec<Partial> = vec![(Vec::new(), Vec::new())];
    for (key, value) in entries {
        let choices = under(key, value, lists);
        let mut next = Vec::with_capacity(partial.len() * choices.len());
        for (map, labels) in &partial {
            for choice in &choices {
                let mut map = map.clone();
                map.push((key.clone(), choice.node.clone()));
                next.push((map, [labels.as_slice(), &choice.labels].concat()));
            }
        }
        partial = next;
    }
    let combine = |(map, labels)| Combination {
        node: Node {
            value: Value::Map(map),
            ..node.clone()
        },
        labels,
    };
    partial.into_iter().map(combine).collect()
}

/// A value as part of an id or a folder name: `plane-strain`, `10`, `fixed-stretch-1.2`, `30kPa`.
pub fn label(node: &Node) -> String {
    match &node.value {
        Value::Empty => "none".to_string(),
        Value::Scalar(text) => sanitized(text),
        Value::List(items) => items.iter().map(label).collect::<Vec<_>>().join("-"),
        Value::Map(entries) => {
            let parts = entries.iter().flat_map(|(key, value)| match &value.value {
                Value::Map(inner) => {
                    let values = inner.iter().map(|(_, v)| label(v));
                    std::iter::once(sanitized(&key.name))
                        .chain(values)
                        .collect()
                }
                _ => vec![sanitized(&key.name), label(value)],
            });
            parts.collect::<Vec<_>>().join("-")
        }
    }
}

fn sanitized(text: &str) -> String {
    let kept = text.chars().filter(|c| !c.is_whitespace());
    kept.map(|c| {
        if c.is_ascii_alphanumeric() || "-_.+".contains(c) {
            c
        } else {
            '_'
        }
    })
    .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::suite::tree::parse;

    fn labels(text: &str) -> Vec<String> {
        let node = parse(text, "s.yaml").unwrap();
        let all = expand(&node, &["radii"]);
        assert_eq!(count(&node, &["radii"]), all.len());
        all.iter().map(|c| c.labels.join("-")).collect()
    }

    #[test]
    fn the_first_list_varies_slowest() {
        assert_eq!(
            labels(
                "outer: [10, 12]\nends: [plane-strain, { fixed-stretch: { axial-stretch: [1.1, 1.2] } }]\nmu: 1\n"
            ),
            [
                "10-plane-strain",
                "10-fixed-stretch-1.1",
                "10-fixed-stretch-1.2",
                "12-plane-strain",
                "12-fixed-stretch-1.1",
                "12-fixed-stretch-1.2"
            ]
        );
        assert_eq!(labels("a: 1\nb: 30 kPa\n"), [""]);
        assert_eq!(labels("b: [30 kPa, 1/4]\n"), ["30kPa", "1_4"]);
        assert_eq!(labels("radii: [8, 9]\nb: [1, 2]\n"), ["1", "2"]);
        assert_eq!(labels("radii: [[8, 9], [8, 10, 12]]\n"), ["8-9", "8-10-12"]);
    }

    #[test]
    fn an_empty_list_is_found() {
        let node = parse("a: 1\nb: { c: [] }\n", "s.yaml").unwrap();
        assert_eq!(empty_list(&node).map(|n| n.line), Some(2));
        assert_eq!(count(&node, &[]), 0);
    }
}
