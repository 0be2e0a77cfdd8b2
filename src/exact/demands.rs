//! What several solutions demand of what they are given, and how they hand over their totals.

use super::given::{Given, refuse};
use super::solution::{Extent, Refusal, Total};
use crate::materials::{IncompressibleLaw, Material};
use crate::mechanics::Dimension;
use std::sync::Arc;

/// Beyond this ratio of the radii there is no wall any more.
const MOST_RATIO: f64 = 1e6;

/// Inner and outer radius, `0 < inner < outer`.
pub(super) fn radii(given: &Given) -> Result<(f64, f64), Refusal> {
    let (inner, outer) = (
        given.positive("inner-radius")?,
        given.positive("outer-radius")?,
    );
    ordered(inner, outer)?;
    Ok((inner, outer))
}

/// Inner and outer radius, `0 <= inner < outer`; nothing given inside is a solid body.
pub(super) fn radii_or_solid(given: &Given) -> Result<(f64, f64), Refusal> {
    match given.optional("inner-radius") {
        None => Ok((0.0, given.positive("outer-radius")?)),
        Some(0.0) => Ok((0.0, given.positive("outer-radius")?)),
        Some(_) => radii(given),
    }
}

fn ordered(inner: f64, outer: f64) -> Result<(), Refusal> {
    if outer <= inner {
        let message = format!("outer-radius = {outer} must be larger than inner-radius = {inner}");
        return Err(refuse("outer-radius", message, ""));
    }
    let ratio = outer / inner;
    if ratio > MOST_RATIO || !ratio.is_finite() {
        let message = format!("outer-radius is {ratio:.3e} times inner-radius");
        let hint = format!("at most {MOST_RATIO:e} times; checked up to 100 times");
        return Err(refuse("outer-radius", message, hint));
    }
    Ok(())
}

/// The law of an incompressible material without preferred directions; `solution` and `why` go into the refusal.
pub(super) fn isotropic_law(
    given: &Given,
    solution: &str,
    why: &str,
) -> Result<Arc<dyn IncompressibleLaw>, Refusal> {
    let material = given.material()?;
    let Material::Incompressible(law) = material else {
        let message = format!("a {solution} cannot be made of {}", material.in_words());
        return Err(refuse("material", message, "use an incompressible law"));
    };
    isotropic(law.isotropic(), law.name(), solution, why)?;
    Ok(law.clone())
}

/// Refuses a law with preferred directions.
pub(super) fn isotropic(is_so: bool, law: &str, solution: &str, why: &str) -> Result<(), Refusal> {
    if is_so {
        return Ok(());
    }
    let message = format!("a {solution} cannot be made of {law}: {why}");
    let hint = "use a law that is the same in all directions";
    Err(refuse("material", message, hint))
}

/// A total.
pub(super) fn total(name: &'static str, value: f64, dimension: Dimension, extent: Extent) -> Total {
    Total {
        name,
        value: Ok(value),
        dimension,
        extent,
    }
}

/// The totals, when all of them are numbers.
pub(super) fn finite(totals: Vec<Total>) -> Result<Vec<Total>, Refusal> {
    let odd = |t: &Total| matches!(t.value, Ok(v) if !v.is_finite());
    match totals.iter().find(|t| odd(t)) {
        None => Ok(totals),
        Some(t) => {
            let message = format!("{} exceeds the range of a double", t.name);
            Err(refuse("", message, "choose other units or a smaller load"))
        }
    }
}

/// `x` to a number of significant digits, for messages.
pub(super) fn rounded(x: f64, digits: usize) -> f64 {
    format!("{x:.*e}", digits.saturating_sub(1))
        .parse()
        .unwrap_or(x)
}

/// The number next to `outside` towards `inside` at which `holds` is still true, to a part in 1e12 of their distance.
pub(super) fn last_where(inside: f64, outside: f64, mut holds: impl FnMut(f64) -> bool) -> f64 {
    let (mut good, mut bad) = (inside, outside);
    for _ in 0..60 {
        let middle = 0.5 * (good + bad);
        if holds(middle) {
            good = middle;
        } else {
            bad = middle;
        }
    }
    good
}
