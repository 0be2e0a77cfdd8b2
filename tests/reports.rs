//! Every report format on outcomes that hold all a report may meet.

mod fixture;

use fixture::HOSTILE;
use quick_xml::events::{BytesStart, Event};
use std::collections::{BTreeMap, BTreeSet};
use truebore::report::{self, Format, Look, json, junit, measures_csv, terminal};
use truebore::verdict::Verdict;
use truebore::verdict::outcome::Outcome;

/// An element of a page or a JUnit file.
struct Element {
    name: String,
    attributes: BTreeMap<String, String>,
}

impl Element {
    fn get(&self, key: &str) -> &str {
        self.attributes.get(key).map_or("", String::as_str)
    }

    fn number(&self, key: &str) -> usize {
        self.get(key).parse().unwrap()
    }
}

fn element(start: &BytesStart) -> Element {
    let pair = |a: quick_xml::events::attributes::Attribute| {
        let key = a.key.as_ref().to_string();
        let value = a.value.to_string();
        (
            key,
            quick_xml::escape::unescape(&value).unwrap().into_owned(),
        )
    };
    Element {
        name: start.name().as_ref().to_string(),
        attributes: start.attributes().map(|a| pair(a.unwrap())).collect(),
    }
}

/// All elements of a well-formed text; panics when tags do not balance or an attribute occurs twice.
fn elements(text: &str) -> Vec<Element> {
    let mut reader = quick_xml::Reader::from_str(text);
    let (mut found, mut depth) = (Vec::new(), 0usize);
    loop {
        match reader
            .read_event()
            .unwrap_or_else(|e| panic!("byte {}: {e}", reader.error_position()))
        {
            Event::Start(start) => {
                depth += 1;
                found.push(element(&start));
            }
            Event::Empty(start) => found.push(element(&start)),
            Event::End(_) => depth -= 1,
            Event::Eof => break,
            _ => {}
        }
    }
    assert_eq!(depth, 0, "unclosed tags");
    found
}

/// The outcomes every format must get through.
fn outcomes() -> Vec<Outcome> {
    let mut all = vec![
        fixture::outcome(),
        fixture::many(200),
        fixture::many(20),
        fixture::all_pass(),
        fixture::nothing(),
    ];
    for number in [
        0.0,
        -1.0,
        5e-324,
        1e-300,
        1e-9,
        1.0,
        12345.678,
        1e300,
        -1e300,
        f64::MAX,
    ] {
        all.push(with_every_number(&fixture::outcome(), number));
    }
    all
}

/// The outcome with every number that is not a count replaced.
fn with_every_number(outcome: &Outcome, number: f64) -> Outcome {
    fn replace(value: &mut serde_json::Value, number: f64) {
        match value {
            serde_json::Value::Number(n) if n.is_f64() => *value = number.into(),
            serde_json::Value::Array(items) => items.iter_mut().for_each(|v| replace(v, number)),
            serde_json::Value::Object(items) => items.values_mut().for_each(|v| replace(v, number)),
            _ => {}
        }
    }
    let mut value = serde_json::to_value(outcome).unwrap();
    replace(&mut value, number);
    serde_json::from_value(value).unwrap()
}

/// The surroundings of a word that stands alone.
fn around<'a>(text: &'a str, word: &str) -> Option<&'a str> {
    let alone = |at: &usize| {
        let (before, after) = (&text[..*at], &text[at + word.len()..]);
        !before.ends_with(char::is_alphanumeric) && !after.starts_with(char::is_alphanumeric)
    };
    let at = text.match_indices(word).map(|(at, _)| at).find(alone)?;
    let start = text[..at]
        .char_indices()
        .rev()
        .nth(80)
        .map_or(0, |(k, _)| k);
    Some(&text[start..at + word.len()])
}

#[test]
fn no_format_prints_what_is_not_a_number_or_claims_too_much() {
    for outcome in outcomes() {
        for format in Format::ALL {
            let text = report::write(format, &outcome);
            for word in ["NaN", "nan", "inf", "infinity", "None", "Some"] {
                assert_eq!(around(&text, word), None, "{}", format.name());
            }
            assert!(
                !text.to_lowercase().contains("validated"),
                "{}",
                format.name()
            );
            assert_eq!(
                text,
                report::write(format, &outcome),
                "the same outcome is the same text"
            );
        }
    }
}

#[test]
fn the_page_is_well_formed_and_links_to_itself_only() {
    for outcome in outcomes() {
        let page = report::write(Format::Html, &outcome);
        assert!(!page.contains("http"), "nothing is fetched");
        assert!(!page.contains("<script"), "no script");
        let found = elements(&page);
        let ids: Vec<&str> = found
            .iter()
            .map(|e| e.get("id"))
            .filter(|id| !id.is_empty())
            .collect();
        let unique: BTreeSet<&str> = ids.iter().copied().collect();
        assert_eq!(ids.len(), unique.len(), "every id once");
        for element in &found {
            for reference in ["href", "aria-labelledby", "for"].map(|key| element.get(key)) {
                let target = reference.trim_start_matches('#');
                assert!(
                    target.is_empty() || unique.contains(target),
                    "{reference} leads nowhere"
                );
            }
        }
        assert_eq!(found.iter().filter(|e| e.name == "h1").count(), 1);
        for element in found.iter().filter(|e| e.name == "th") {
            assert!(
                !element.get("scope").is_empty(),
                "every head cell says what it heads"
            );
        }
        for element in found.iter().filter(|e| e.get("role") == "img") {
            assert!(
                element.get("aria-label").len() > 20,
                "every drawing can be read out"
            );
        }
    }
}

#[test]
fn foreign_text_never_becomes_markup() {
    let outcome = fixture::outcome();
    for format in [Format::Html, Format::Junit] {
        let text = report::write(format, &outcome);
        assert!(!text.contains("odd<") && !text.contains("<b>,") && !text.contains('\u{1}'));
        assert!(
            text.contains("odd&lt;&amp;&quot;&#39;&gt;id"),
            "{}",
            format.name()
        );
    }
    assert!(!report::write(Format::Text, &outcome).contains('\u{1}'));
    let csv = report::write(Format::MeasuresCsv, &outcome);
    let mut reader = csv::Reader::from_reader(csv.as_bytes());
    let cases: BTreeSet<String> = reader
        .records()
        .map(|r| r.unwrap()[0].to_string())
        .collect();
    assert!(
        cases.contains(&HOSTILE.replace('\u{1}', "")),
        "quoted, not mangled"
    );
}

#[test]
fn the_page_shows_only_what_there_is() {
    let page = report::write(Format::Html, &fixture::all_pass());
    assert!(page.contains("Qualified within the stated range."));
    assert!(page.contains("Both cases pass."));
    assert!(!page.contains("Do this first"), "nothing to do");
    assert!(!page.contains("Found in suite and result sets"));
    let page = report::write(Format::Html, &fixture::nothing());
    assert!(page.contains("Not decided.") && page.contains("No case was judged."));
    assert!(!page.contains("id=\"cases\""));
    let mut real = fixture::all_pass();
    assert!(report::write(Format::Html, &real).contains("Invented scenario"));
    real.suite.invented = false;
    assert!(!report::write(Format::Html, &real).contains("Invented scenario"));
    assert!(!report::write(Format::Text, &real).contains("Invented scenario"));
}

#[test]
fn junit_counts_what_it_contains_and_passes_only_a_pass() {
    for outcome in outcomes() {
        let text = junit::junit(&outcome);
        let found = elements(&text);
        let of = |name: &str| found.iter().filter(|e| e.name == name).count();
        let total = found.iter().find(|e| e.name == "testsuites").unwrap();
        let suites: Vec<_> = found.iter().filter(|e| e.name == "testsuite").collect();
        for (key, count) in [
            ("tests", of("testcase")),
            ("failures", of("failure")),
            ("errors", of("error")),
        ] {
            assert_eq!(total.number(key), count, "{key}");
            assert_eq!(
                suites.iter().map(|s| s.number(key)).sum::<usize>(),
                count,
                "{key}"
            );
        }
        assert_eq!(suites.len(), outcome.cases.len());
        for (suite, case) in suites.iter().zip(&outcome.cases) {
            let green =
                suite.number("failures") + suite.number("errors") == 0 && suite.number("tests") > 0;
            assert_eq!(green, case.verdict == Verdict::Pass, "{}", case.id);
        }
    }
}

#[test]
fn json_is_read_back_to_the_bit_and_refuses_other_formats() {
    for outcome in outcomes() {
        assert_eq!(json::read(&json::json(&outcome)), Ok(outcome));
    }
    let mut other = fixture::nothing();
    other.format += 1;
    let refusal = json::read(&json::json(&other)).unwrap_err();
    assert!(refusal.contains("outcome of format 2"), "{refusal}");
    assert!(json::read("{}").unwrap_err().contains("no `format`"));
    assert!(json::read("").unwrap_err().contains("not an outcome"));
}

#[test]
fn csv_numbers_read_back_to_the_bit() {
    let outcome = fixture::outcome();
    let text = measures_csv::measures_csv(&outcome);
    let mut reader = csv::Reader::from_reader(text.as_bytes());
    let mut rows = reader.records().map(|row| row.unwrap());
    for case in &outcome.cases {
        for series in &case.measures {
            for value in &series.values {
                let row = rows.next().unwrap();
                let read = |k: usize| row[k].parse::<f64>().ok();
                assert_eq!(read(5), value.value, "missing stays empty");
                assert_eq!(read(7), value.exact);
                assert_eq!(read(8), value.observed_order);
                assert_eq!(read(9), series.expected_order);
            }
        }
    }
    assert!(rows.next().is_none());
}

/// The text without colour codes.
fn bare(text: &str) -> String {
    let mut parts = text.split('\u{1b}');
    let first = parts.next().unwrap_or_default().to_string();
    parts.fold(first, |out, part| out + part.split_once('m').unwrap().1)
}

#[test]
fn the_terminal_text_keeps_its_width_and_says_without_colour_what_it_says_with() {
    for outcome in outcomes() {
        for width in [60, 80, 120] {
            let plain = terminal::terminal(
                &outcome,
                Look {
                    colour: false,
                    width,
                },
            );
            assert!(!plain.contains('\u{1b}'));
            for line in plain.lines() {
                assert!(line.chars().count() <= width, "{width}: {line}");
                assert_eq!(line, line.trim_end());
            }
            let coloured = terminal::terminal(
                &outcome,
                Look {
                    colour: true,
                    width,
                },
            );
            assert_eq!(bare(&coloured), plain);
        }
    }
}

#[test]
fn the_terminal_text_ends_with_failures_and_verdict() {
    let text = report::write(Format::Text, &fixture::outcome());
    let place = |part: &str| text.find(part).unwrap_or_else(|| panic!("{part}"));
    assert!(place("pass ") < place("\n··○· not run"));
    assert!(place("\n··○· not run") < place("\n·◆·· inconclusive  3"));
    assert!(place("\n·◆·· inconclusive  3") < place("\n■··· fail          4"));
    assert!(
        text.trim_end()
            .ends_with("Not qualified. 1 of 6 cases fails.")
    );
}

#[test]
fn margins_are_said_in_words_that_are_true_of_the_value() {
    let text = report::write(Format::Text, &fixture::outcome());
    let text = text.split_whitespace().collect::<Vec<_>>().join(" ");
    // 0.6 where 1.5 is the least: below it, not "times 2.5"
    assert!(
        text.contains("value 0.600, limit ≥ 1.5, ÷ 2.5 below"),
        "{text}"
    );
    // (0.52 - 0.013) / 0.001: a fail is counted from the near end of its interval
    assert!(text.contains("limit 0.001 mm, × 510"), "{text}");
    assert!(text.contains("limit ≥ 2 − 0.2, spans it"), "{text}");
    let page = report::write(Format::Html, &fixture::all_pass());
    // order 2.97 ± 0.04 where 3 is expected within 0.2: (0.03 + 0.04) / 0.2 = 1 / 2.9
    assert!(page.contains("its shortfall is the allowed 0.2 divided by 2.9"));
    assert!(page.contains(">above theory<") && page.contains(">zero<"));
}

#[test]
fn every_format_is_found_by_its_name() {
    for format in Format::ALL {
        assert_eq!(Format::find(format.name()), Some(format));
    }
    assert_eq!(Format::find("pdf"), None);
}

#[test]
fn snapshots() {
    let outcome = fixture::outcome();
    insta::assert_snapshot!("text", report::write(Format::Text, &outcome));
    insta::assert_snapshot!("junit", report::write(Format::Junit, &outcome));
    insta::assert_snapshot!("csv", report::write(Format::MeasuresCsv, &outcome));
    let small = fixture::small();
    insta::assert_snapshot!("json", report::write(Format::Json, &small));
    // the style is a file of its own; one element a line, so that a change is a readable difference
    let page = report::write(Format::Html, &small);
    let body = page.split_once("<body>").unwrap().1;
    insta::assert_snapshot!("html", body.replace("><", ">\n<"));
}

/// Every format of every fixture can be written; with `TRUEBORE_LOOK=DIR` into DIR, for looking at in a browser.
#[test]
fn all_formats_of_all_fixtures_are_written() {
    let scratch = tempfile::tempdir().unwrap();
    let folder = std::env::var_os("TRUEBORE_LOOK").map_or(scratch.path().to_path_buf(), Into::into);
    let named = [
        ("all", fixture::outcome()),
        ("many", fixture::many(200)),
        ("pass", fixture::all_pass()),
    ];
    for (name, outcome) in named {
        std::fs::create_dir_all(folder.join(name)).unwrap();
        for format in Format::ALL {
            let text = report::write(format, &outcome);
            assert!(text.ends_with('\n'), "{}", format.name());
            std::fs::write(folder.join(name).join(format.file_name()), text).unwrap();
        }
    }
}
