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
    "lame-sphere",
    "layered-tube",
    "homogeneous",
    "uniaxial",
    "exponential",
    "published",
    "{ power: 1e300 }",
    "{ table: { R: [1], factor: [] } }",
    "[1, 2, 3, 4]",
    "../curve.csv",
    "sin(X",
    "X^0.5",
    "1/X",
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

/// One case of every solution, so that every form of parameter is damaged too.
const LIBRARY: &str = r#"suite: library
units: { length: mm, stress: MPa }
materials:
  steel: { linear-elastic: { E: 210000, nu: 0.3 } }
  soft: { neo-Hookean: { mu: 0.4 } }
  split: { neo-Hookean: { mu: 0.4, volumetric: { quadratic: { K: 4 } } } }
  yielding: { elastic-perfectly-plastic: { E: 210000, nu: 0.3, yield-stress: 240 } }
cases:
  - { id: a, problem: { layered-tube: { radii: [5, 7, 10], materials: [soft, split], ends: closed, inner-pressure: 0.05 } } }
  - { id: b, problem: { graded-tube: { inner-radius: 5, outer-radius: 10, material: soft, grading: { table: { R: [5, 7, 10], factor: [1, 2, 1] } }, ends: plane-strain, inner-pressure: 0.1 } } }
  - { id: c, problem: { graded-tube: { inner-radius: 5, outer-radius: 10, material: soft, grading: { power: 1.5 }, ends: closed, inner-pressure: 0.1 } } }
  - { id: d, problem: { lame-sphere: { inner-radius: 10, outer-radius: 15, material: steel, inner-pressure: 80 } }, section: 1/8 }
  - { id: e, problem: { pressurised-sphere: { inner-radius: 10, outer-radius: 15, material: soft, inner-pressure: 0.1, branch: 1 } } }
  - { id: f, problem: { shrink-fit-tube: { radii: [20, 30, 45], radial-interference: 0.02, materials: [steel, steel], ends: plane-strain } } }
  - { id: g, problem: { heated-tube: { inner-radius: 10, outer-radius: 20, material: steel, expansion: 1.2e-5, inner-temperature: 150, outer-temperature: 20, ends: plane-strain } } }
  - { id: h, problem: { rotating-disk: { outer-radius: 200, material: steel, density-speed-squared: 0.0045 } } }
  - { id: i, problem: { plate-with-hole: { hole-radius: 10, tension: 100, material: steel, state: plane-stress } } }
  - { id: j, problem: { cantilever-strip: { length: 48, depth: 12, end-load: 40, material: steel, state: plane-stress, root: slope-of-axis } } }
  - { id: k, problem: { pure-bending: { length: 40, depth: 10, moment: 1500, material: steel, state: plane-strain } } }
  - { id: l, problem: { bar-torsion: { semi-axes: [12, 7], twist: 0.0005, material: steel } } }
  - { id: m, problem: { elastic-plastic-tube: { inner-radius: 10, outer-radius: 20, material: yielding, inner-pressure: 140, stage: unloaded } } }
  - { id: n, problem: { stated-field: { displacement: { x: "0.05*X + c*sin(X)*Y", y: "-0.03*Y^2", z: "0" }, constants: { c: 0.1 }, material: split } } }
  - { id: o, problem: { homogeneous: { uniaxial: { stretch: 1.5 }, material: soft } } }
  - { id: p, problem: { torsion-extension: { outer-radius: 5, axial-stretch: 1.3, twist: 0.05, material: soft } } }
  - { id: q, problem: { azimuthal-shear: { inner-radius: 5, outer-radius: 10, material: soft, rotation: 0.3 } } }
  - { id: r, problem: { bent-block: { thickness: 2, length: 20, angle: 1.5, material: soft } } }
  - { id: s, problem: { published: { value: cook-linear } } }
  - { id: t, problem: { tabulated: { table: curve.csv, over: p, quantity: a, source: bench } } }
  - { id: u, problem: { pressurised-tube: { inner-radius: 1, outer-radius: 2, ends: closed, material: soft, inner-pressure: 0.04 } }, reference: exact }
"#;

/// Three cases of the library at a time, so that many suites still can be planned.
fn some_of_the_library(seed: u64) -> String {
    let (head, cases) = LIBRARY.split_at(LIBRARY.find("cases:").unwrap());
    let cases: Vec<&str> = cases.lines().skip(1).collect();
    let picked = (0..3).map(|i| cases[(seed as usize * 5 + i * 7) % cases.len()]);
    format!("{head}cases:\n{}\n", picked.collect::<Vec<_>>().join("\n"))
}

#[test]
fn a_damaged_library_is_read_or_refused() {
    let (mut planned, mut refused) = (0, 0);
    for seed in 2000..2240 {
        let dice = &mut Dice::new(seed);
        let text = match seed % 3 {
            0 => mutated(&some_of_the_library(seed), dice),
            _ => {
                let whole = some_of_the_library(seed);
                let (head, cases) = whole.split_at(whole.find("cases:").unwrap());
                let number = |c: char| c.is_ascii_digit() || c == '.';
                format!("{head}{}", replaced(cases, dice, number, &NUMBERS[..26]))
            }
        };
        survives(seed, &text, || match plan::read(&text, "suite.yaml") {
            Ok(plan) => {
                planned += 1;
                assert!(!brief::brief(&plan, None).is_empty());
                for case in &plan.cases {
                    if let Ok(csv) = tables::stations(case, 3) {
                        assert!(!csv.contains("NaN") && !csv.contains("inf"), "{csv}");
                    }
                    let totals = tables::totals(case);
                    assert!(
                        !totals.contains("NaN") && !totals.contains("inf,"),
                        "{totals}"
                    );
                }
            }
            Err(findings) => {
                refused += 1;
                assert!(findings.iter().all(|f| !f.found.is_empty()));
            }
        });
    }
    assert!(
        planned > 20 && refused > 60,
        "{planned} read, {refused} refused"
    );
}

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
