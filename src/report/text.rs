//! Foreign text made safe: an outcome carries names, reasons and file names that others wrote.

/// The text without control characters, for terminals and as the first step of [`escape`].
///
/// A line break or tab becomes a blank. The direction overrides of Unicode go too: they could make `fail`
/// read as something else.
pub fn clean(text: &str) -> String {
    text.chars()
        .filter_map(|c| match c {
            '\n' | '\r' | '\t' => Some(' '),
            '\u{FFFE}' | '\u{FFFF}' | '\u{202A}'..='\u{202E}' | '\u{2066}'..='\u{2069}' => None,
            c if c.is_control() => None,
            c => Some(c),
        })
        .collect()
}

/// The text for element content and quoted attributes of XML and HTML.
pub fn escape(text: &str) -> String {
    let mut out = String::with_capacity(text.len() + 8);
    for c in clean(text).chars() {
        match c {
            '&' => out.push_str("&amp;"),
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '"' => out.push_str("&quot;"),
            '\'' => out.push_str("&#39;"),
            c => out.push(c),
        }
    }
    out
}

/// The text with its first letter as a capital and a full stop at the end.
pub fn sentence(text: &str) -> String {
    let text = text.trim();
    let mut chars = text.chars();
    let is_name = text
        .split_whitespace()
        .next()
        .is_some_and(|word| word.contains(['/', '.', '_']));
    let mut out: String = match chars.next() {
        Some(first) if is_name => std::iter::once(first).chain(chars).collect(),
        Some(first) => first.to_uppercase().chain(chars).collect(),
        None => return String::new(),
    };
    if !out.ends_with(['.', '!', '?', ':']) {
        out.push('.');
    }
    out
}

/// At most `length` characters, the last an ellipsis when something is cut off.
pub fn shorten(text: &str, length: usize) -> String {
    if text.chars().count() <= length {
        return text.to_string();
    }
    let kept: String = text.chars().take(length.saturating_sub(1)).collect();
    format!("{}…", kept.trim_end())
}

/// "1 case", "2 cases".
pub fn count(number: usize, one: &str, many: &str) -> String {
    match number {
        1 => format!("1 {one}"),
        _ => format!("{number} {many}"),
    }
}

/// The text in lines of at most `width` characters; a longer word is broken.
pub fn wrap(text: &str, width: usize) -> Vec<String> {
    let width = width.max(8);
    let mut lines = vec![String::new()];
    let mut used = 0;
    for word in text.split(' ').filter(|word| !word.is_empty()) {
        let mut rest: Vec<char> = word.chars().collect();
        if used > 0 && used + 1 + rest.len() > width {
            lines.push(String::new());
            used = 0;
        }
        while rest.len() > width {
            let head: String = rest.drain(..width).collect();
            if let Some(line) = lines.last_mut() {
                line.push_str(&head);
            }
            lines.push(String::new());
        }
        if let Some(line) = lines.last_mut() {
            if used > 0 {
                line.push(' ');
                used += 1;
            }
            used += rest.len();
            line.extend(rest);
        }
    }
    lines
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn nothing_foreign_survives_unescaped() {
        assert_eq!(
            escape("a<b>&\"c'\u{1}\u{1b}[31m"),
            "a&lt;b&gt;&amp;&quot;c&#39;[31m"
        );
        assert_eq!(clean("fail\u{202E}\nssap"), "fail ssap");
    }

    #[test]
    fn fragments_become_sentences() {
        assert_eq!(sentence("the folder is empty"), "The folder is empty.");
        assert_eq!(sentence("  "), "");
    }

    #[test]
    fn lines_keep_to_the_width() {
        assert_eq!(wrap("one two three four", 9), ["one two", "three", "four"]);
        assert_eq!(wrap("abcdefghijkl", 8), ["abcdefgh", "ijkl"]);
        assert_eq!(shorten("abcdef", 4), "abc…");
    }
}
