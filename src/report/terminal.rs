//! The outcome for the terminal: passes first, then what is not passed in full, failures last.
//!
//! The four lanes of the report (fail, inconclusive, not run, pass) are drawn as four characters: a mark in
//! one of them and dots in the others. The word is always beside it; colour, when asked for, repeats it.

use super::margin::{Margin, attention, tightest};
use super::numbers::{NBSP, Number, THIN};
use super::text::{clean, count, sentence, wrap};
use super::wording::{self, PLAIN};
use crate::verdict::Verdict;
use crate::verdict::outcome::{CaseOutcome, CriterionOutcome, Outcome};
use comfy_table::{
    Cell, CellAlignment, ColumnConstraint, ContentArrangement, LineStyle, Row, Table, TableStyle,
    Width,
};

/// How the text is to look; decided once, by the caller.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Look {
    pub colour: bool,
    /// Columns of the terminal; less than 60 is taken as 60.
    pub width: usize,
}

impl Default for Look {
    fn default() -> Self {
        Self {
            colour: false,
            width: 80,
        }
    }
}

/// Where details start: right of lanes and verdict.
const INDENT: usize = 19;

/// The whole text, ending with the verdict and a line break.
pub fn terminal(outcome: &Outcome, look: Look) -> String {
    let look = Look {
        width: look.width.clamp(60, 200),
        ..look
    };
    let mut out = heading(outcome, look);
    if !outcome.cases.is_empty() {
        out += &table(outcome, look);
    }
    for verdict in [Verdict::NotRun, Verdict::Inconclusive, Verdict::Fail] {
        for (k, case) in outcome
            .cases
            .iter()
            .enumerate()
            .filter(|(_, case)| case.verdict == verdict)
        {
            out += "\n";
            out += &details(k + 1, case, look);
        }
    }
    out += "\n";
    for (statement, consequence) in wording::cautions(outcome) {
        out += &paragraph(&format!("{statement} {consequence}"), "- ", look);
    }
    out += "\n";
    out += &ending(outcome, look);
    out.replace([THIN, NBSP], " ")
}

fn heading(outcome: &Outcome, look: Look) -> String {
    let suite = &outcome.suite;
    let mut out = paragraph(
        &format!("{} ({})", clean(&suite.title), clean(&suite.id)),
        "",
        look,
    );
    if let Some(subject) = &suite.subject {
        out += &paragraph(&clean(subject), "Subject: ", look);
    }
    if suite.invented {
        out += &paragraph(wording::INVENTED, "", look);
    }
    out + "\n"
}

/// A paragraph within the width; later lines are indented like the text of the first.
fn paragraph(text: &str, lead: &str, look: Look) -> String {
    let hang = lead.chars().count();
    let mut out = String::new();
    for (k, line) in wrap(text, look.width - hang).iter().enumerate() {
        let lead = if k == 0 {
            lead.to_string()
        } else {
            " ".repeat(hang)
        };
        out += &format!("{}\n", format!("{lead}{line}").trim_end());
    }
    out
}

/// `·◆··`: the mark of a verdict in its lane.
fn lanes(verdict: Verdict) -> String {
    let mark = match verdict {
        Verdict::Fail => '■',
        Verdict::Inconclusive => '◆',
        Verdict::NotRun => '○',
        Verdict::Pass => '●',
    };
    Verdict::ALL
        .iter()
        .map(|lane| if *lane == verdict { mark } else { '·' })
        .collect()
}

/// One row a case, passes first.
fn table(outcome: &Outcome, look: Look) -> String {
    const RULE: TableStyle = TableStyle::new()
        .header_separator(LineStyle::none().fill('─').junction('─'))
        .bottom_border(LineStyle::none().fill('─').junction('─'));
    let mut table = Table::new();
    table
        .load_style(RULE)
        .set_content_arrangement(ContentArrangement::Dynamic);
    table.force_no_tty().set_width(look.width as u16);
    table.set_header([
        "",
        "Verdict",
        "No.",
        "Case",
        "Tightest criterion",
        "Value is limit",
    ]);
    let mut cases: Vec<_> = outcome.cases.iter().enumerate().collect();
    cases.sort_by_key(|(_, case)| std::cmp::Reverse(case.verdict));
    for (k, case) in cases {
        table.add_row(row(k + 1, case, case_width(look)));
    }
    let fixed = |width| ColumnConstraint::Absolute(Width::Fixed(width));
    let number = 2 + outcome.cases.len().to_string().len().max(3) as u16;
    let case = case_width(look) as u16 + 2;
    let tightest = (look.width as u16)
        .saturating_sub(5 + 14 + number + case + 12 + BETWEEN)
        .max(7);
    for (k, width) in [
        (0, 5),
        (1, 14),
        (2, number),
        (3, case),
        (4, tightest),
        (5, 12),
    ] {
        if let Some(column) = table.column_mut(k) {
            column.set_constraint(fixed(width));
        }
    }
    for k in [2, 5] {
        if let Some(column) = table.column_mut(k) {
            column.set_cell_alignment(CellAlignment::Right);
        }
    }
    if let Some(column) = table.column_mut(0) {
        column.set_padding((0, 1));
    }
    // painted here, not by the table: its styling looks at the environment
    let paint_row = |line: &str| {
        let verdict = Verdict::ALL
            .into_iter()
            .find(|verdict| line.starts_with(&lanes(*verdict)));
        let lead: String = line.chars().take(INDENT).collect();
        verdict.map_or(line.to_string(), |verdict| {
            paint(line, &lead, verdict, look)
        })
    };
    table
        .trim_fmt()
        .lines()
        .map(|line| paint_row(line) + "\n")
        .collect()
}

fn row(number: usize, case: &CaseOutcome, width: usize) -> Row {
    let tightest = tightest(case);
    let title = tightest.map_or("none judged".to_string(), |criterion| {
        clean(&wording::name(criterion))
    });
    let margin = tightest.map_or("—".to_string(), |criterion| {
        Margin::of(criterion).cell(Number::ascii)
    });
    Row::from([
        Cell::new(lanes(case.verdict)),
        Cell::new(case.verdict.word()),
        Cell::new(number),
        Cell::new(folded(&clean(&case.id), width)),
        Cell::new(title),
        Cell::new(margin.replace([THIN, NBSP], " ")),
    ])
}

/// What the table itself puts between its six columns.
const BETWEEN: u16 = 5;

/// Columns of a case's id in the table: 22 on the usual 80.
fn case_width(look: Look) -> usize {
    look.width.saturating_sub(58).clamp(10, 42)
}

/// An id over several lines, broken behind its hyphens where possible.
fn folded(id: &str, width: usize) -> String {
    let mut lines: Vec<String> = vec![String::new()];
    for part in id.split_inclusive('-') {
        let last = lines.len() - 1;
        if !lines[last].is_empty() && lines[last].chars().count() + part.chars().count() > width {
            lines.push(part.to_string());
        } else {
            lines[last].push_str(part);
        }
    }
    lines.join("\n")
}

/// A case that is not passed: every criterion that is not met, with its numbers and its reason.
fn details(number: usize, case: &CaseOutcome, look: Look) -> String {
    let head = format!("{} {:<12}  ", lanes(case.verdict), case.verdict.word());
    let title = format!("{number} {}  {}", clean(&case.id), clean(&case.title));
    let mut out = paragraph(&title, &head, look);
    out = paint(&out, &head, case.verdict, look);
    if let Some(reason) = &case.reason {
        out += &paragraph(&sentence(&clean(reason)), &" ".repeat(INDENT), look);
    }
    let mut open: Vec<_> = case
        .criteria
        .iter()
        .filter(|c| c.verdict != Verdict::Pass)
        .collect();
    open.sort_by(|a, b| attention(a, b));
    for criterion in open {
        out += &criterion_lines(criterion, look);
    }
    for finding in case
        .findings
        .iter()
        .filter(|f| f.weight == crate::input::Weight::Refused)
    {
        for line in finding.to_string().lines() {
            out += &paragraph(&clean(line), &" ".repeat(INDENT), look);
        }
    }
    out
}

fn criterion_lines(criterion: &CriterionOutcome, look: Look) -> String {
    let lead = format!("     {:<14}", criterion.verdict.word());
    let value = match wording::value(criterion, PLAIN) {
        Some(value) => format!("value {value}, limit {}", wording::limit(criterion, PLAIN)),
        None => format!("no value, limit {}", wording::limit(criterion, PLAIN)),
    };
    let margin = Margin::of(criterion);
    let margin = match margin.is_none() {
        true => String::new(),
        false => format!(", {}", margin.cell(Number::ascii)),
    };
    let level = criterion
        .level
        .as_deref()
        .map_or(String::new(), |level| format!(", level {}", clean(level)));
    let mut out = paragraph(
        &format!(
            "{}{level}: {value}{margin}",
            clean(&wording::name(criterion))
        ),
        &lead,
        look,
    );
    for text in std::iter::once(&criterion.reason).chain(&criterion.note) {
        out += &paragraph(&sentence(&clean(text)), &" ".repeat(INDENT), look);
    }
    paint(&out, &lead, criterion.verdict, look)
}

/// Colours the lead of the text, when colour is asked for.
fn paint(text: &str, lead: &str, verdict: Verdict, look: Look) -> String {
    let code = match verdict {
        Verdict::Fail => "31",
        Verdict::Inconclusive => "35",
        Verdict::Pass => "32",
        Verdict::NotRun => return text.to_string(),
    };
    match text.strip_prefix(lead) {
        Some(rest) if look.colour => format!("\u{1b}[{code}m{lead}\u{1b}[0m{rest}"),
        _ => text.to_string(),
    }
}

fn ending(outcome: &Outcome, look: Look) -> String {
    let counts: Vec<_> = Verdict::ALL
        .iter()
        .map(|v| format!("{} {}", outcome.counts.get(*v), v.word()))
        .collect();
    let total = count(outcome.counts.total(), "case", "cases");
    let mut out = paragraph(&format!("{} ({total})", counts.join(", ")), "", look);
    let (verdict, numbers) = wording::verdict_sentence(outcome);
    out += &paragraph(&wording::summary(outcome, PLAIN), "", look);
    out + &paint(
        &format!("{verdict} {numbers}\n"),
        verdict,
        outcome.verdict,
        look,
    )
}
