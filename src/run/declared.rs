//! What a case declares in numbers: modelled share, lengths, mesh sizes, load factor, each within its range.

use crate::exact::Body;
use crate::input::Finding;
use crate::mechanics::{Dimension, UnitSystem};
use crate::suite::model::{CaseEntry, Suite};
use crate::suite::{Placed, Quantity, Reader};

/// The declared share of the section, above 0 and at most 1.
pub(super) fn share(entry: &CaseEntry, reader: &mut Reader) -> Option<f64> {
    let declared = entry.section.as_ref()?;
    let share = match declared.value.within(Dimension::None, &UnitSystem::si()) {
        Ok(share) if share > 0.0 && share <= 1.0 => return Some(share),
        Ok(_) => format!("\"{}\" is no share of a section", declared.value.text),
        Err(found) => found,
    };
    refuse(
        declared,
        "section-share",
        share,
        "a share above 0 and at most 1, e.g. 1/4 for a quarter",
        reader,
    );
    None
}

/// A declared tolerance of nodes must not hide a wrong wall: at most a hundredth of it.
pub(super) fn too_coarse(
    entry: &CaseEntry,
    tolerance: Option<f64>,
    body: &Body,
    reader: &mut Reader,
) {
    let most = 0.01 * body.thickness();
    if let (Some(declared), Some(tolerance)) = (&entry.node_tolerance, tolerance)
        && tolerance > most
        && most > 0.0
    {
        let found = format!(
            "\"{}\" is more than a hundredth of a wall",
            declared.value.text
        );
        refuse(
            declared,
            "node-tolerance",
            found,
            "at most a hundredth of the thinnest wall",
            reader,
        );
    }
}

/// The declared share of the loads, finite and not zero.
pub(super) fn load_factor(entry: &CaseEntry, reader: &mut Reader) -> f64 {
    let Some(declared) = &entry.load_factor else {
        return 1.0;
    };
    let found = match declared.value.within(Dimension::None, &UnitSystem::si()) {
        Ok(factor) if factor != 0.0 => return factor,
        Ok(_) => "at the load factor 0 there is nothing to judge".to_string(),
        Err(found) => found,
    };
    refuse(
        declared,
        "load-factor",
        found,
        "a share of the case's loads, e.g. 0.6",
        reader,
    );
    1.0
}

pub(super) fn length(
    declared: &Placed<Quantity>,
    suite: &Suite,
    reader: &mut Reader,
) -> Option<f64> {
    match declared.value.within(Dimension::Length, &suite.units) {
        Ok(length) if length > 0.0 => Some(length),
        Ok(_) => {
            refuse(
                declared,
                "length",
                format!("\"{}\" is not positive", declared.value.text),
                "a length above zero",
                reader,
            );
            None
        }
        Err(found) => {
            refuse(declared, "wrong-unit", found, "a length", reader);
            None
        }
    }
}

/// Given mesh sizes, one for each level, falling.
pub(super) fn sizes(entry: &CaseEntry, suite: &Suite, reader: &mut Reader) -> Vec<f64> {
    let sizes: Vec<f64> = entry
        .h
        .iter()
        .filter_map(|q| length(q, suite, reader))
        .collect();
    let Some(first) = entry.h.first() else {
        return sizes;
    };
    if sizes.len() == entry.h.len() && sizes.len() != entry.levels.len() {
        let found = format!(
            "{} mesh sizes for {} levels",
            sizes.len(),
            entry.levels.len()
        );
        refuse(
            first,
            "mesh-sizes",
            found,
            "one size for each level",
            reader,
        );
    } else if sizes.windows(2).any(|pair| pair[1] >= pair[0]) {
        refuse(
            first,
            "mesh-sizes",
            "the mesh sizes do not fall from level to level".into(),
            "coarsest level first",
            reader,
        );
    }
    sizes
}

/// A problem at a value of the suite.
pub(super) fn refuse<T>(
    at: &Placed<T>,
    rule: &str,
    found: String,
    expected: &str,
    reader: &mut Reader,
) {
    let place = reader.place(at.line, at.column, &at.path);
    reader.push(Finding::refused(rule, place, found).expected(expected));
}
