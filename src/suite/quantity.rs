//! A number as a suite writes it: `0.03`, `30 kPa`, `0.1 %`, `1/4`.

use super::block::nearest;
use crate::mechanics::units::{UNITS, Unit};
use crate::mechanics::{Dimension, UnitSystem};

/// A finite number with the unit written behind it, if any.
#[derive(Debug, Clone, PartialEq)]
pub struct Quantity {
    pub number: f64,
    pub unit: Option<Unit>,
    /// The characters of the suite.
    pub text: String,
}

impl Quantity {
    /// Reads a quantity.
    ///
    /// # Errors
    /// A fragment saying what is wrong with the text.
    pub fn parse(text: &str) -> Result<Self, String> {
        let text = text.trim();
        let (number_text, unit_text) = split(text);
        let number =
            parse_number(number_text).ok_or_else(|| match number_text.replace(',', ".") {
                pointed if pointed != number_text && parse_number(&pointed).is_some() => {
                    format!("\"{text}\" has a comma in the number, the decimal mark is a point")
                }
                _ => format!("\"{text}\" is not a number with an optional unit"),
            })?;
        if !number.is_finite() {
            return Err(format!("\"{text}\" is not a finite number"));
        }
        let unit = match unit_text {
            "" => None,
            name => Some(Unit::find(name).ok_or_else(|| unknown_unit(name))?),
        };
        Ok(Self {
            number,
            unit,
            text: text.to_string(),
        })
    }

    /// The number in the units of the suite; a bare number already is.
    ///
    /// # Errors
    /// When the unit measures something else than `dimension`.
    pub fn within(&self, dimension: Dimension, suite: &UnitSystem) -> Result<f64, String> {
        let Some(unit) = self.unit else {
            return Ok(self.number);
        };
        let target = match dimension {
            Dimension::Length => suite.length,
            Dimension::Stress | Dimension::EnergyDensity => suite.stress,
            Dimension::Angle => named("rad")?,
            Dimension::None => named("1")?,
            Dimension::Force | Dimension::Energy if unit.dimension == dimension => {
                // base units N and J are those of a system in m and Pa
                let base = named(if dimension == Dimension::Force {
                    "N"
                } else {
                    "J"
                })?;
                let factor = UnitSystem::si().factor_to(suite, dimension);
                return Ok(unit.convert(self.number, &base) * factor);
            }
            Dimension::Force | Dimension::Energy => {
                let possible = Unit::names_of(dimension).join(", ");
                return Err(format!(
                    "\"{}\" has the wrong kind of unit; possible here: {possible}",
                    self.text
                ));
            }
            other => {
                let wanted = suite.name_of(other);
                return Err(format!(
                    "\"{}\": give this as a bare number in {wanted}",
                    self.text
                ));
            }
        };
        if unit.dimension != target.dimension {
            let wanted = Unit::names_of(target.dimension).join(", ");
            return Err(format!(
                "\"{}\" has the wrong kind of unit; possible here: {wanted}",
                self.text
            ));
        }
        Ok(unit.convert(self.number, &target))
    }

    /// What the written unit measures; a bare number and a percentage are pure numbers.
    pub fn dimension(&self) -> Dimension {
        self.unit.map_or(Dimension::None, |unit| unit.dimension)
    }
}

fn unknown_unit(name: &str) -> String {
    match nearest(name, UNITS.iter().map(|unit| unit.name)) {
        Some(near) => format!("unknown unit \"{name}\", did you mean {near}?"),
        None => format!("unknown unit \"{name}\""),
    }
}

fn named(name: &str) -> Result<Unit, String> {
    Unit::find(name).ok_or_else(|| format!("unit {name} is missing from the table"))
}

/// Splits `30 kPa` and `0.1%` behind the number.
fn split(text: &str) -> (&str, &str) {
    if let Some(at) = text.find(char::is_whitespace) {
        let (number, unit) = text.split_at(at);
        return (number, unit.trim());
    }
    match text.strip_suffix('%') {
        Some(number) => (number, "%"),
        None => (text, ""),
    }
}

/// A decimal number or a fraction of two whole numbers.
fn parse_number(text: &str) -> Option<f64> {
    // words that the standard parser takes for numbers are not numbers here
    if text
        .chars()
        .any(|c| c.is_ascii_alphabetic() && !matches!(c, 'e' | 'E'))
    {
        return None;
    }
    match text.split_once('/') {
        None => text.parse().ok(),
        Some((top, bottom)) => {
            let (top, bottom): (u32, u32) = (top.trim().parse().ok()?, bottom.trim().parse().ok()?);
            (bottom != 0).then(|| f64::from(top) / f64::from(bottom))
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_units_percent_and_fractions() {
        let suite = UnitSystem::of("mm", "MPa").unwrap();
        let read = |text: &str, d| Quantity::parse(text).unwrap().within(d, &suite);
        assert_eq!(read("30 kPa", Dimension::Stress), Ok(0.03));
        assert_eq!(read("0.03", Dimension::Stress), Ok(0.03));
        assert_eq!(read("0.1 %", Dimension::None), Ok(0.001));
        assert_eq!(read("0.1%", Dimension::None), Ok(0.001));
        assert_eq!(read("1/4", Dimension::None), Ok(0.25));
        assert_eq!(read("1 in", Dimension::Length), Ok(25.4));
        assert_eq!(read("2 N", Dimension::Force), Ok(2.0));
        assert_eq!(read("2 J", Dimension::Energy), Ok(2000.0));
        assert!(read("1 in", Dimension::Stress).unwrap_err().contains("kPa"));
    }

    #[test]
    fn what_is_not_a_number_is_refused() {
        for text in [
            "",
            "nan",
            "inf",
            "-inf",
            "1e400",
            "1/0",
            "ten",
            "3 furlong",
            "1,5",
            "0x10",
            "1_0",
        ] {
            assert!(Quantity::parse(text).is_err(), "{text}");
        }
    }
}
