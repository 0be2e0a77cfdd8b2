//! Filling in the folder of a result set: `results/{ends}-{outer-radius}/level-{level}`.

use crate::suite::nearest;

/// Fills every `{name}`.
///
/// # Errors
/// A fragment: an unknown name (with what is known), or a brace without its partner.
pub fn fill(template: &str, values: &[(String, String)]) -> Result<String, String> {
    let mut filled = String::new();
    let mut rest = template;
    while let Some(at) = rest.find(['{', '}']) {
        filled.push_str(&rest[..at]);
        if rest[at..].starts_with('}') {
            return Err(format!("\"{template}\" has a '}}' without its '{{'"));
        }
        let name = rest[at + 1..].split('}').next().unwrap_or_default();
        let end = 1 + name.len();
        if at + end == rest.len() || name.contains('{') {
            return Err(format!("\"{template}\" has a '{{' without its '}}'"));
        }
        let Some((_, value)) = values.iter().find(|(known, _)| known == name) else {
            let known: Vec<_> = values
                .iter()
                .map(|(known, _)| format!("{{{known}}}"))
                .collect();
            let near = nearest(name, values.iter().map(|(known, _)| known.as_str()));
            let near = near.map_or(String::new(), |n| format!(", did you mean {{{n}}}?"));
            return Err(format!(
                "\"{{{name}}}\" is unknown here{near} (known: {})",
                known.join(", ")
            ));
        };
        filled.push_str(value);
        rest = &rest[at + end + 1..];
    }
    filled.push_str(rest);
    Ok(filled)
}

/// Refuses a folder that is not below the suite's own: a dossier must be able to carry everything it rests on.
///
/// # Errors
/// A fragment saying what is wrong.
pub fn below_the_suite(folder: &str) -> Result<(), String> {
    let drive = folder.as_bytes().get(1) == Some(&b':');
    if folder.trim().is_empty() {
        return Err("the folder is empty".to_string());
    }
    if folder.starts_with(['/', '\\', '~']) || drive {
        return Err(format!(
            "\"{folder}\" is not relative to the suite's folder"
        ));
    }
    if folder.split(['/', '\\']).any(|part| part == "..") {
        return Err(format!("\"{folder}\" leaves the suite's folder"));
    }
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_are_filled_and_faults_said() {
        let values = [
            ("ends".to_string(), "closed".to_string()),
            ("level".to_string(), "2".to_string()),
        ];
        assert_eq!(
            fill("r/{ends}/l-{level}", &values),
            Ok("r/closed/l-2".to_string())
        );
        assert!(fill("r/{end}", &values).unwrap_err().contains("{ends}"));
        assert!(fill("r/{ends", &values).is_err());
        assert!(
            fill("r/{ends/{level}", &values)
                .unwrap_err()
                .contains("without")
        );
        assert!(fill("r/{", &values).is_err());
        assert!(fill("r/ends}", &values).is_err());
    }

    #[test]
    fn folders_stay_below_the_suite() {
        assert!(below_the_suite("results/a..b").is_ok());
        for bad in ["../x", "a/../../x", "/x", "\\x", "C:/x", "~/x", ""] {
            assert!(below_the_suite(bad).is_err(), "{bad}");
        }
    }
}
