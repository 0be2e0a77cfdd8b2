//! Everything a suite can name, as text: solutions, materials, elements, measures, units, rules.

use super::{format_pages, rules};
use crate::elements::{STANDARD_RULES, Shape};
use crate::exact;
use crate::exact::given::{Form, ParameterEntry};
use crate::materials::{self, ConstantForm};
use crate::mechanics::Dimension;
use crate::mechanics::units::Unit;
use crate::norms::catalogue::{MEASURES, Measure};
use crate::results::rules::RULES;
use crate::suite::nearest;
use std::fmt::Write;

/// The whole list, or one entry in full.
///
/// # Errors
/// An unknown name, with the nearest one there is.
pub fn text(name: Option<&str>) -> Result<String, String> {
    let Some(name) = name else {
        return Ok(everything());
    };
    match name {
        "columns" => return Ok(format_pages::COLUMNS.to_string()),
        "suite" => return Ok(format_pages::SUITE.to_string()),
        "expressions" => return Ok(format_pages::EXPRESSIONS.to_string()),
        _ => {}
    }
    if let Some(entry) = exact::find(name) {
        return Ok(solution(entry));
    }
    if let Some(entry) = materials::find(name) {
        return Ok(material(entry));
    }
    if let Some(shape) = Shape::from_name(name) {
        return Ok(element(shape));
    }
    if let Some(found) = MEASURES.iter().find(|m| m.name == name) {
        return Ok(measure(found));
    }
    if let Some((rule, meaning)) = all_rules().find(|(rule, _)| *rule == name) {
        return Ok(format!("{rule}\n  {meaning}\n"));
    }
    let mut message = format!("there is no entry \"{name}\"");
    if let Some(near) = nearest(name, names()) {
        let _ = write!(message, "\n  hint: did you mean \"{near}\"?");
    }
    message.push_str("\n  expected: an exact solution, material, element, measure or rule (`truebore catalogue` lists all)");
    Err(message)
}

fn names() -> impl Iterator<Item = &'static str> {
    let solutions = exact::entries().iter().map(|e| e.name);
    let materials = materials::entries().iter().map(|e| e.name);
    let shapes = Shape::ALL.into_iter().map(Shape::name);
    let measures = MEASURES.iter().map(|m| m.name);
    ["columns", "suite", "expressions"]
        .into_iter()
        .chain(solutions)
        .chain(materials)
        .chain(shapes)
        .chain(measures)
        .chain(all_rules().map(|(rule, _)| *rule))
}

fn all_rules() -> impl Iterator<Item = &'static (&'static str, &'static str)> {
    rules::SUITE.iter().chain(RULES).chain(rules::BODY)
}

fn everything() -> String {
    let mut text = String::from("exact solutions\n");
    for entry in exact::entries() {
        let _ = writeln!(text, "  {:<18} {}", entry.name, entry.title);
    }
    text.push_str("\nmaterials\n");
    for entry in materials::entries() {
        let _ = writeln!(
            text,
            "  {:<19} {{ {} }}   {}",
            entry.name,
            entry.constant_names(),
            entry.formula
        );
    }
    text.push_str("\nelements\n  ");
    text.push_str(&Shape::ALL.map(Shape::name).join(" "));
    text.push_str("\n\nmeasures\n");
    for entry in MEASURES {
        let _ = writeln!(text, "  {:<28} {}", entry.name, entry.title);
    }
    text.push_str("\nunits\n");
    for (label, dimension) in [
        ("length", Dimension::Length),
        ("stress", Dimension::Stress),
        ("force", Dimension::Force),
        ("energy", Dimension::Energy),
        ("angle", Dimension::Angle),
    ] {
        let _ = writeln!(
            text,
            "  {label:<10} {}",
            Unit::names_of(dimension).join(" ")
        );
    }
    text.push_str("\nintegration rules a suite may name\n");
    for (name, meaning) in STANDARD_RULES {
        let _ = writeln!(text, "  {name:<14} {meaning}");
    }
    for (title, list) in [
        ("the suite", rules::SUITE),
        ("reading", RULES),
        ("mesh and body", rules::BODY),
    ] {
        let _ = writeln!(text, "\nrules of {title}");
        for (rule, meaning) in list {
            let _ = writeln!(text, "  {rule:<24} {meaning}");
        }
    }
    text.push_str("\npages\n  columns            columns of the tables\n  suite              keys of a suite\n");
    text.push_str("  expressions        what a typed energy is written of\n");
    text.push_str("\n`truebore catalogue NAME` tells more\n");
    text
}

fn solution(entry: &exact::Entry) -> String {
    let mut text = format!("{}\n  {}\n\nparameters\n", entry.name, entry.title);
    parameters(&mut text, entry.parameters, 2);
    text.push('\n');
    if !entry.ends().is_empty() {
        let _ = writeln!(text, "ends       {}", entry.ends().join(", "));
    }
    let _ = writeln!(text, "materials  {}", entry.materials().join(", "));
    let _ = writeln!(text, "range      {}", entry.range);
    for (label, lines) in [("sources", entry.sources), ("checks", entry.checks)] {
        let _ = writeln!(text, "\n{label}");
        for line in lines {
            let _ = writeln!(text, "  {line}");
        }
    }
    text
}

/// The keys of a block, those below them further in.
fn parameters(text: &mut String, entries: &[ParameterEntry], indent: usize) {
    for p in entries {
        let need = match (p.required, p.default) {
            (true, _) => "required".to_string(),
            (false, "") => "optional".to_string(),
            (false, default) => format!("default {default}"),
        };
        let width = 18_usize.saturating_sub(indent);
        let _ = writeln!(
            text,
            "{:indent$}{:<width$} {need:<10} {}",
            "", p.name, p.meaning
        );
        match p.form {
            Form::Word(words) => {
                let _ = writeln!(text, "{:indent$}  one of: {}", "", words.join(", "));
            }
            Form::Block(below) => parameters(text, below, indent + 2),
            Form::Variant(variants) => {
                for variant in variants {
                    let _ = writeln!(
                        text,
                        "{:indent$}  {}: {}",
                        "", variant.name, variant.meaning
                    );
                    parameters(text, variant.parameters, indent + 4);
                }
            }
            _ => {}
        }
    }
}

fn material(entry: &materials::Entry) -> String {
    let mut text = format!(
        "{}\n  {}\n  {}\n\nconstants\n",
        entry.name, entry.formula, entry.convention
    );
    for p in entry.parameters {
        let form = match p.form {
            ConstantForm::Number => String::new(),
            form => format!(", {}", form.words()),
        };
        let _ = writeln!(text, "  {:<8} {}{form} ({})", p.name, p.meaning, p.range);
    }
    if let Some(family) = entry.family {
        let _ = writeln!(text, "  {:<8} {}", family.pattern, family.meaning);
    }
    if entry.kind == materials::MaterialKind::Incompressible {
        text.push_str("  volumetric   optional: a finite bulk modulus by one of\n");
        for form in materials::VolumetricForm::ALL {
            let _ = writeln!(
                text,
                "    {{ {}: {{ K }} }}   {}",
                form.name(),
                form.energy_text()
            );
        }
    }
    let _ = writeln!(text, "\nsource  {}", entry.source);
    text
}

fn element(shape: Shape) -> String {
    let mut text = format!(
        "{}: {} nodes, {} dimensions, complete polynomials of degree {}\n\nnodes in order, in the reference element\n",
        shape.name(),
        shape.node_count(),
        shape.dimension(),
        shape.degree()
    );
    for (i, node) in shape.reference_nodes().iter().enumerate() {
        let coordinates = node[..shape.dimension()].iter().map(|c| format!("{c:.4}"));
        let _ = writeln!(
            text,
            "  n{:<3} {}",
            i + 1,
            coordinates.collect::<Vec<_>>().join("  ")
        );
    }
    text
}

fn measure(entry: &Measure) -> String {
    format!(
        "{}\n  {}: {}\n  needs: {}\n",
        entry.name, entry.title, entry.meaning, entry.needs
    )
}
