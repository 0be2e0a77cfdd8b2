//! The demo's suite with random damage, and random tables of points: refused or read, never a panic, never a hang.
//!
//! Seeded, so that a red run can be repeated: the message names the seed and the text.

use std::panic::{AssertUnwindSafe, catch_unwind};
use std::time::{Duration, Instant};
use truebore::run::{
    brief, plan,
    point_table::{self, Wanted},
    tables,
};

/// A small generator of our own: the same numbers on every machine.
struct Dice(u64);

impl Dice {
    fn new(seed: u64) -> Self {
        let mut dice = Self(seed.wrapping_mul(0x9e37_79b9_7f4a_7c15) | 1);
        dice.roll(2);
        dice
    }

    /// A number below `sides`.
    fn roll(&mut self, sides: usize) -> usize {
        self.0 ^= self.0 << 13;
        self.0 ^= self.0 >> 7;
        self.0 ^= self.0 << 17;
        (self.0 >> 11) as usize % sides.max(1)
    }

    fn pick<'a, T>(&mut self, list: &'a [T]) -> &'a T {
        &list[self.roll(list.len())]
    }
}

const NUMBERS: &[&str] = &[
    "0",
    "-0",
    "-1",
    "1",
    "8",
    "12",
    "8.0000000001",
    "1e-308",
    "5e-324",
    "1e308",
    "1e300",
    "-1e300",
    "1e-9",
    "1e9",
    "0.5",
    "0.4999999999999999",
    "1/3",
    "0/7",
    "4294967295/1",
    "100 %",
    "1e-30 %",
    "30 kPa",
    "1 GPa",
    "1 um",
    "2 N",
    ".inf",
    ".nan",
    "0x10",
    "1_000",
    "007",
    "1e",
    "--1",
    "",
    "~",
    "[]",
    "{}",
    "[1, 2]",
    "{ a: 1 }",
    "*a",
    "&a 1",
    "!!str 1",
];

const WORDS: &[&str] = &[
    "closed",
    "plane-strain",
    "plane-stress",
    "generalized-plane-strain",
    "fixed-stretch",
    "lame-tube",
    "pressurised-tube",
    "soft",
    "filled",
    "neo-Hookean",
    "Mooney-Rivlin",
    "linear-elastic",
    "quad4",
    "hex27",
    "constant",
    "stress-L2",
    "axial-force",
    "strain-energy",
    "order",
    "error",
    "value",
    "at-most",
    "at-least",
    "within",
    "level",
    "{ fixed-stretch: { axial-stretch: 1e-3 } }",
    "{ fixed-stretch: { axial-stretch: 1e6 } }",
    "{ generalized-plane-strain: { axial-force: -1e9 } }",
    "{id}",
    "{",
    "}",
    "..",
    "'",
    "\"",
    "\t",
    "#",
    "---",
    "? ",
    "|",
    ">",
    "\u{feff}",
    "\u{0}",
    "\u{85}",
    "ä",
    "%",
];

fn mutated(text: &str, dice: &mut Dice) -> String {
    let mut text = text.to_string();
    for _ in 0..=dice.roll(4) {
        text = match dice.roll(7) {
            0 => lines(&text, dice, |lines, a, _| {
                lines.remove(a);
            }),
            1 => lines(&text, dice, |lines, a, b| lines.swap(a, b)),
            2 => lines(&text, dice, |lines, a, b| lines.insert(b, lines[a])),
            3 => {
                let (at, end) = span(&text, dice);
                format!("{}{}", &text[..at], &text[end..])
            }
            4 => {
                let (at, _) = span(&text, dice);
                format!("{}{}{}", &text[..at], dice.pick(WORDS), &text[at..])
            }
            5 => replaced(&text, dice, |c| c.is_ascii_digit() || c == '.', NUMBERS),
            _ => replaced(
                &text,
                dice,
                |c| c.is_ascii_alphanumeric() || c == '-',
                WORDS,
            ),
        };
    }
    text
}

fn lines(text: &str, dice: &mut Dice, change: impl Fn(&mut Vec<&str>, usize, usize)) -> String {
    let mut lines: Vec<&str> = text.lines().collect();
    if !lines.is_empty() {
        let (a, b) = (dice.roll(lines.len()), dice.roll(lines.len()));
        change(&mut lines, a, b);
    }
    lines.join("\n") + "\n"
}

/// A short piece of the text, between characters.
fn span(text: &str, dice: &mut Dice) -> (usize, usize) {
    let places: Vec<usize> = text.char_indices().map(|(at, _)| at).collect();
    let Some(last) = places.len().checked_sub(1) else {
        return (0, 0);
    };
    let at = dice.roll(places.len());
    (places[at], places[(at + dice.roll(12)).min(last)])
}

/// One word of these characters replaced.
fn replaced(text: &str, dice: &mut Dice, of: impl Fn(char) -> bool, by: &[&str]) -> String {
    let mut words = Vec::new();
    let mut start = None;
    for (at, c) in text.char_indices().chain([(text.len(), '\n')]) {
        match (of(c), start) {
            (true, None) => start = Some(at),
            (false, Some(begin)) => {
                words.push((begin, at));
                start = None;
            }
            _ => {}
        }
    }
    if words.is_empty() {
        return text.to_string();
    }
    let (begin, end) = *dice.pick(&words);
    format!("{}{}{}", &text[..begin], dice.pick(by), &text[end..])
}

/// Runs it, and names the seed when it panics or takes too long.
fn survives(seed: u64, text: &str, run: impl FnOnce()) {
    let begun = Instant::now();
    let ended = catch_unwind(AssertUnwindSafe(run));
    assert!(ended.is_ok(), "seed {seed} panics:\n{text}");
    let took = begun.elapsed();
    assert!(
        took < Duration::from_secs(10),
        "seed {seed} takes {took:?}:\n{text}"
    );
}

const LAME: &str = include_str!("../suites/locking-element/suite.yaml");
const HOSE: &str = include_str!("../suites/dosing-pump-hose/suite.yaml");

#[test]
fn a_damaged_suite_is_read_or_refused() {
    let (mut planned, mut refused) = (0, 0);
    for seed in 0..240 {
        let dice = &mut Dice::new(seed);
        let text = mutated(if seed % 3 == 0 { LAME } else { HOSE }, dice);
        survives(seed, &text, || match plan::read(&text, "suite.yaml") {
            Ok(plan) => {
                planned += 1;
                let first = plan.cases.first().map(|case| case.id.as_str());
                assert!(!brief::brief(&plan, first).is_empty());
                for case in plan.cases.iter().take(2) {
                    let _ = tables::stations(case, 3);
                    assert!(!tables::totals(case).is_empty());
                }
            }
            Err(findings) => {
                refused += 1;
                assert!(!findings.is_empty());
                for finding in &findings {
                    assert_eq!(finding.place.file, "suite.yaml");
                    assert!(!finding.found.is_empty(), "{finding}");
                }
            }
        });
    }
    assert!(
        planned > 20 && refused > 60,
        "{planned} read, {refused} refused"
    );
}

/// Only numbers are changed, so that more suites reach the exact solutions.
#[test]
fn extreme_numbers_are_solved_or_refused() {
    for seed in 1000..1160 {
        let dice = &mut Dice::new(seed);
        let mut text = HOSE.replace("[10, 12, 16] ", "12 ").to_string();
        if seed % 4 == 0 {
            text = LAME.to_string();
        }
        for _ in 0..=dice.roll(2) {
            let (head, problem) = text.split_at(text.find("materials:").unwrap());
            let (problem, tail) = problem.split_at(problem.find("    element:").unwrap());
            let changed = replaced(
                problem,
                dice,
                |c| c.is_ascii_digit() || c == '.',
                &NUMBERS[..26],
            );
            text = format!("{head}{changed}{tail}");
        }
        survives(seed, &text, || {
            if let Ok(plan) = plan::read(&text, "suite.yaml") {
                for case in plan.cases.iter().take(2) {
                    if let Ok(csv) = tables::stations(case, 3) {
                        assert!(!csv.contains("NaN") && !csv.contains("inf"), "{csv}");
                    }
                }
            }
        });
    }
}

#[test]
fn a_random_table_of_points_is_answered_or_refused() {
    let plan = plan::read(HOSE, "suite.yaml").unwrap();
    let exact = &plan.cases[0].exact;
    let good = "# remark\nX,Y,Z,name\n8,0,0,a\n9,1,0,b\n10,0,1,\"c, d\"\n7.071,7.071,0,e\n";
    let cells = [
        "nan", "-inf", "1e999", "1e300", "5e-324", "", "\"", "\"\"", "X", ",", "\r\n", "\n\n", "8",
        "-9.5", ";", "\u{feff}",
    ];
    let mut answered = 0;
    for seed in 0..300 {
        let dice = &mut Dice::new(seed);
        let mut text = good.to_string();
        for _ in 0..dice.roll(4) {
            text = match dice.roll(3) {
                0 => replaced(
                    &text,
                    dice,
                    |c| c.is_ascii_alphanumeric() || c == '.',
                    &cells,
                ),
                1 => lines(&text, dice, |lines, a, b| lines.swap(a, b)),
                _ => {
                    let (at, end) = span(&text, dice);
                    format!("{}{}{}", &text[..at], dice.pick(&cells), &text[end..])
                }
            };
        }
        let mut bytes = text.clone().into_bytes();
        if seed % 5 == 0 {
            let at = dice.roll(bytes.len());
            bytes[at] = dice.roll(256) as u8;
        }
        survives(seed, &text, || {
            match point_table::at_points(exact.as_ref(), Wanted::Fields, &bytes, "points.csv") {
                Ok(table) => {
                    answered += 1;
                    assert!(table.outside_distance.is_finite());
                    let mut rows = csv::Reader::from_reader(table.csv.as_bytes());
                    let columns = rows.headers().unwrap().len();
                    for row in rows.records() {
                        let row = row.unwrap();
                        assert_eq!(row.len(), columns);
                        let last = row.get(columns - 1).unwrap();
                        assert!(last.parse::<f64>().unwrap().is_finite(), "{last}");
                    }
                }
                Err(findings) => assert!((1..=24).contains(&findings.len())),
            }
        });
    }
    assert!(answered > 60, "{answered}");
}
