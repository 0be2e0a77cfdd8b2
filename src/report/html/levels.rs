//! The numbers by level: errors, values, and the meshes they were taken on.

use crate::report::numbers::{NBSP, Number, THIN, grouped, row, with_uncertainty};
use crate::report::text::{escape, sentence};
use crate::verdict::outcome::{CaseOutcome, Kind, LevelOutcome, LevelValue, MeasureSeries};

/// All tables of a case; what does not exist is left out.
pub fn tables(case: &CaseOutcome, length_unit: &str) -> String {
    let (first, more): (Vec<&MeasureSeries>, Vec<&MeasureSeries>) = case
        .measures
        .iter()
        .partition(|series| comes_first(case, series));
    let mut out = errors(
        case,
        &first,
        "Errors by level; the small figure in front of a value is the order from the level before",
    );
    out += &meshes(&case.levels, length_unit);
    out += &reasons(&first);
    if more
        .iter()
        .any(|series| series.values.iter().any(|v| v.value.is_some()))
    {
        out += &format!(
            "<details class=\"more-measures\"><summary>{} more series: absolute errors, values, stresses at places \
             (all of them also stand in measures.csv)</summary>\n",
            more.len()
        );
        out += &errors(case, &more, "More errors by level");
        out += &values(case, &more);
        out += &reasons(&more);
        out += "</details>\n";
    }
    out
}

/// What a criterion judges, and the relative norms and totals, stand in view; the rest can be unfolded.
fn comes_first(case: &CaseOutcome, series: &MeasureSeries) -> bool {
    let judged = case.criteria.iter().any(|c| c.measure == series.measure);
    let place = ["inner-wall-s", "mid-wall-", "outer-wall-"]
        .iter()
        .any(|start| series.measure.starts_with(start));
    let repeated = series.measure.ends_with("-rms");
    series.kind == Kind::Relative && (judged || !(place || repeated))
}

fn of_kind<'a>(
    all: &'a [&'a MeasureSeries],
    kind: Kind,
) -> impl Iterator<Item = &'a MeasureSeries> {
    all.iter()
        .copied()
        .filter(move |series| series.kind == kind)
}

fn errors(case: &CaseOutcome, all: &[&MeasureSeries], caption: &str) -> String {
    let groups: Vec<_> = [
        (Kind::Relative, "Relative errors"),
        (Kind::Absolute, "Absolute errors"),
    ]
    .into_iter()
    .filter(|(kind, _)| of_kind(all, *kind).next().is_some())
    .collect();
    if groups.is_empty() {
        return String::new();
    }
    let mut out = open(
        case,
        caption,
        "<th scope=\"col\" class=\"r\">fitted order</th><th scope=\"col\" class=\"r\">expected</th>",
    );
    for (kind, title) in groups {
        let columns = case.levels.len() + 3;
        out += &format!(
            "<tbody><tr class=\"grp\"><th scope=\"rowgroup\" colspan=\"{columns}\">{title}</th></tr>\n"
        );
        for series in of_kind(all, kind) {
            let order = series
                .expected_order
                .map_or("—".to_string(), |order| Number::exact(order).html());
            out += &format!(
                "<tr>{}{}<td class=\"r\">{}</td><td class=\"r\">{order}</td></tr>\n",
                head(series),
                cells(case, series),
                fitted(series)
            );
        }
        out += "</tbody>";
    }
    out + "</table></div>\n"
}

fn values(case: &CaseOutcome, all: &[&MeasureSeries]) -> String {
    if of_kind(all, Kind::Value).next().is_none() {
        return String::new();
    }
    let mut out = open(
        case,
        "Values by level beside the exact ones",
        "<th scope=\"col\" class=\"r\">exact</th>",
    );
    out += "<tbody>\n";
    for series in of_kind(all, Kind::Value) {
        let exact = series.values.iter().rev().find_map(|value| value.exact);
        let exact = exact.map_or("—".to_string(), |exact| {
            Number::significant(exact, 8).html()
        });
        out += &format!(
            "<tr>{}{}<td class=\"r\">{exact}</td></tr>\n",
            head(series),
            long_cells(case, series)
        );
    }
    out + "</tbody></table></div>\n"
}

/// Caption and head row, with a column a level.
fn open(case: &CaseOutcome, caption: &str, last: &str) -> String {
    let level = |level: &LevelOutcome| {
        let h = level.h.map_or(String::new(), |h| {
            format!("h{NBSP}{} · ", Number::three(h).html())
        });
        let mesh = match level.missing {
            Some(_) => "not read".to_string(),
            None => format!("{h}{}{NBSP}el.", grouped(level.elements)),
        };
        format!(
            "<th scope=\"col\" class=\"r\">level {}<br/><small>{mesh}</small></th>",
            escape(&level.level)
        )
    };
    let columns: String = case.levels.iter().map(level).collect();
    format!(
        "<div class=\"scroll\"><table class=\"levels\"><caption>{caption}</caption><thead><tr>\
         <th scope=\"col\">Measure</th>{columns}{last}</tr></thead>"
    )
}

fn head(series: &MeasureSeries) -> String {
    let unit = match series.unit.as_str() {
        "1" | "" => String::new(),
        unit => format!(" ({})", escape(unit)),
    };
    let note = series.note.as_ref().map_or(String::new(), |note| {
        format!("<br/><small>{}</small>", escape(note))
    });
    format!(
        "<th scope=\"row\">{}{unit}{note}</th>",
        escape(&series.title)
    )
}

/// The entry of a level, wherever it stands in the series.
fn entry<'a>(series: &'a MeasureSeries, level: &LevelOutcome) -> Option<&'a LevelValue> {
    series
        .values
        .iter()
        .find(|value| value.level == level.level)
}

fn cells(case: &CaseOutcome, series: &MeasureSeries) -> String {
    let entries: Vec<_> = case
        .levels
        .iter()
        .map(|level| entry(series, level))
        .collect();
    let numbers = row(&entries
        .iter()
        .map(|e| e.and_then(|e| e.value))
        .collect::<Vec<_>>());
    let cell = |(entry, number): (&Option<&LevelValue>, Option<Number>)| {
        let order = entry
            .and_then(|e| e.observed_order)
            .filter(|_| number.is_some());
        let order = order.map_or(String::new(), |order| {
            format!("<small>{}</small> ", Number::fixed(order, 2).html())
        });
        let text = number.map_or("—".to_string(), |number| number.html());
        format!("<td class=\"r\">{order}{text}</td>")
    };
    entries.iter().zip(numbers).map(cell).collect()
}

/// Values are compared digit by digit: eight of them.
fn long_cells(case: &CaseOutcome, series: &MeasureSeries) -> String {
    let text = |level| {
        entry(series, level)
            .and_then(|e| e.value)
            .map(|v| Number::significant(v, 8).html())
    };
    let cell = |level| {
        format!(
            "<td class=\"r\">{}</td>",
            text(level).unwrap_or_else(|| "—".to_string())
        )
    };
    case.levels.iter().map(cell).collect()
}

fn fitted(series: &MeasureSeries) -> String {
    match series.fit {
        None => "—".to_string(),
        Some(fit) => match fit.half_width {
            Some(half_width) => {
                let (order, half_width) = with_uncertainty(fit.order, half_width, Some(2));
                format!("{}{THIN}±{THIN}{}", order.html(), half_width.html())
            }
            None => Number::fixed(fit.order, 2).html(),
        },
    }
}

/// Why there is no number where there is none, and where the finest number was found.
fn reasons(all: &[&MeasureSeries]) -> String {
    let mut out = String::new();
    for series in all {
        let title = escape(&series.title);
        for value in series.values.iter().filter(|value| value.value.is_none()) {
            let reason = sentence(value.reason.as_deref().unwrap_or("no reason given"));
            out += &format!(
                "<li>{title}, level {}: {}</li>\n",
                escape(&value.level),
                escape(&reason)
            );
        }
        let found = |value: &&LevelValue| value.value.is_some() && value.place.is_some();
        let finest = series.values.iter().rev().find(found);
        if let Some((level, place)) = finest.and_then(|v| Some((&v.level, v.place.as_ref()?))) {
            out += &format!(
                "<li>{title}, level {}: at {}.</li>\n",
                escape(level),
                escape(place)
            );
        }
    }
    match out.is_empty() {
        true => out,
        false => format!("<ul class=\"remarks small\">\n{out}</ul>\n"),
    }
}

fn meshes(levels: &[LevelOutcome], length_unit: &str) -> String {
    if levels.is_empty() {
        return String::new();
    }
    let mut out = format!(
        "<div class=\"scroll\"><table class=\"levels\"><caption>Meshes; volumes per unit length in a slice, h in {0}</caption>\
         <thead><tr><th scope=\"col\">Level</th><th scope=\"col\" class=\"r\">h</th><th scope=\"col\">Elements</th>\
         <th scope=\"col\" class=\"r\">Nodes</th><th scope=\"col\" class=\"r\">Points</th><th scope=\"col\">Walls</th>\
         <th scope=\"col\" class=\"r\">Volume</th><th scope=\"col\" class=\"r\">Exact volume</th>\
         <th scope=\"col\" class=\"r\">Outside the body</th></tr></thead><tbody>\n",
        escape(length_unit)
    );
    for level in levels {
        out += &mesh(level, length_unit);
    }
    out + "</tbody></table></div>\n"
}

fn mesh(level: &LevelOutcome, length_unit: &str) -> String {
    let step = level
        .step
        .map_or(String::new(), |step| format!(", load step {step}"));
    let name = format!(
        "<th scope=\"row\">{}{step}<br/><small><code>{}</code></small></th>",
        escape(&level.level),
        escape(&level.folder)
    );
    if let Some(reason) = &level.missing {
        return format!(
            "<tr>{name}<td colspan=\"8\">Not read. {}</td></tr>\n",
            escape(&sentence(reason))
        );
    }
    let number = |value: Option<f64>, digits| {
        value.map_or("—".to_string(), |v| Number::significant(v, digits).html())
    };
    let outside = match level.outside_points {
        0 => "none".to_string(),
        points => format!(
            "{} of {}, by {}{NBSP}{}",
            grouped(points),
            grouped(level.quadrature_points),
            Number::three(level.outside_distance).html(),
            escape(length_unit)
        ),
    };
    format!(
        "<tr>{name}<td class=\"r\">{}</td><td>{} {}</td><td class=\"r\">{}</td><td class=\"r\">{}</td><td>{}</td>\
         <td class=\"r\">{}</td><td class=\"r\">{}</td><td class=\"r\">{outside}</td></tr>\n",
        number(level.h, 3),
        grouped(level.elements),
        escape(&level.shapes),
        grouped(level.nodes),
        grouped(level.points),
        escape(&level.walls),
        number(level.volume, 7),
        number(level.exact_volume, 7)
    )
}
