//! Every law a suite can name, its parameters and their admissible range, and how it is built from numbers.

use super::{Constant, ConstantForm, Constants, Material, MaterialKind};
use crate::mechanics::Dimension;

/// All laws, in the order they are listed. To add one, add its `ENTRY`.
const ENTRIES: &[Entry] = &[
    super::neo_hookean::ENTRY,
    super::mooney_rivlin::ENTRY,
    super::yeoh::ENTRY,
    super::polynomial::ENTRY,
    super::ogden::ENTRY,
    super::ogden::ENTRY_MODULI,
    super::gent::ENTRY,
    super::arruda_boyce::ENTRY,
    super::arruda_boyce_series::ENTRY,
    super::demiray::ENTRY,
    super::two_fibre::ENTRY,
    super::stated::ENTRY,
    super::compressible::ENTRY,
    super::linear_elastic::ENTRY,
    super::elastic_plastic::ENTRY,
];

/// One law as a reader of the catalogue sees it.
#[derive(Debug, Clone, Copy)]
pub struct Entry {
    /// As a suite writes it.
    pub name: &'static str,
    pub kind: MaterialKind,
    pub parameters: &'static [ParameterEntry],
    /// Constants whose names follow a pattern, any number of them.
    pub family: Option<Family>,
    /// The strain energy.
    pub formula: &'static str,
    /// What the symbols of the formula mean, and the constants other books use.
    pub convention: &'static str,
    pub source: &'static str,
    /// From finite values; checks the range.
    pub(super) build: fn(&Constants) -> Result<Material, Problem>,
}

/// One constant of a law.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ParameterEntry {
    pub name: &'static str,
    pub form: ConstantForm,
    pub dimension: Dimension,
    pub required: bool,
    pub meaning: &'static str,
    /// Admissible values, as text.
    pub range: &'static str,
}

impl ParameterEntry {
    /// A number that must be given.
    pub const fn number(
        name: &'static str,
        dimension: Dimension,
        meaning: &'static str,
        range: &'static str,
    ) -> Self {
        Self {
            name,
            form: ConstantForm::Number,
            dimension,
            required: true,
            meaning,
            range,
        }
    }

    /// The same in another form.
    pub const fn of(self, form: ConstantForm) -> Self {
        Self { form, ..self }
    }

    /// The same, not required.
    pub const fn optional(self) -> Self {
        Self {
            required: false,
            ..self
        }
    }
}

/// Constants whose names follow a pattern: `c10`, `c01`, `c22`.
#[derive(Debug, Clone, Copy)]
pub struct Family {
    /// The pattern as text: `cIJ`.
    pub pattern: &'static str,
    pub fits: fn(&str) -> bool,
    pub dimension: Dimension,
    pub meaning: &'static str,
}

impl Entry {
    /// Form and dimension of the constant of this name, or `None` when the law has none such.
    pub fn constant(&self, name: &str) -> Option<(ConstantForm, Dimension)> {
        let own = self.parameters.iter().find(|p| p.name == name);
        let family = || self.family.filter(|f| (f.fits)(name));
        own.map(|p| (p.form, p.dimension))
            .or_else(|| family().map(|f| (ConstantForm::Number, f.dimension)))
    }

    /// Names of its constants, for messages.
    pub fn constant_names(&self) -> String {
        let own = self.parameters.iter().map(|p| p.name);
        list(own.chain(self.family.map(|f| f.pattern)))
    }
}

/// Why a material cannot be built.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
#[error("{message}")]
pub struct Problem {
    /// A lower-case fragment with the numbers.
    pub message: String,
    /// The parameter as the suite writes it, or empty when it is about the law's name.
    pub parameter: String,
    /// How to mend it; may be empty.
    pub hint: String,
}

impl Problem {
    /// A value outside the admissible range.
    pub(super) fn out_of_range(name: &str, value: f64, range: &str, nearest: &str) -> Self {
        Self {
            message: format!("{name} = {value} is outside {range}"),
            parameter: name.to_string(),
            hint: format!("nearest admissible value: {nearest}"),
        }
    }

    /// Adds why the range is as it is.
    pub(super) fn because(mut self, reason: &str) -> Self {
        self.message = format!("{}: {reason}", self.message);
        self
    }
}

/// All laws.
pub fn entries() -> &'static [Entry] {
    ENTRIES
}

/// The law of this name.
pub fn find(name: &str) -> Option<&'static Entry> {
    ENTRIES.iter().find(|e| e.name == name)
}

/// Names of the laws of a kind.
pub fn names_of(kind: MaterialKind) -> Vec<&'static str> {
    let of_it = ENTRIES.iter().filter(|e| e.kind == kind);
    of_it.map(|e| e.name).collect()
}

/// A material from its law's name and `(constant, value)` pairs in any order. Stresses in one unit.
///
/// # Errors
/// What is missing, twice, unknown, of the wrong form, not finite or out of range.
pub fn build<C: Clone + Into<Constant>>(
    name: &str,
    values: &[(String, C)],
) -> Result<Material, Problem> {
    let entry = find(name).ok_or_else(|| Problem {
        message: format!("unknown material law `{name}`"),
        parameter: String::new(),
        hint: format!("known laws: {}", list(ENTRIES.iter().map(|e| e.name))),
    })?;
    let mut given = Constants::default();
    for (name, value) in values {
        given.list.push((name.clone(), value.clone().into()));
    }
    check_form(entry, &given)?;
    (entry.build)(&given)
}

/// Every constant is one of the law's, once, of its form and finite, and none is missing.
fn check_form(entry: &Entry, given: &Constants) -> Result<(), Problem> {
    let problem = |parameter: &str, what: String| Problem {
        message: what,
        parameter: parameter.to_string(),
        hint: format!("parameters of {}: {}", entry.name, entry.constant_names()),
    };
    for (i, (name, value)) in given.iter().enumerate() {
        let Some((form, _)) = entry.constant(name) else {
            let what = format!("{} has no parameter `{name}`", entry.name);
            return Err(problem(name, what));
        };
        if given.list[..i].iter().any(|(earlier, _)| earlier == name) {
            return Err(problem(name, format!("{name} is given twice")));
        }
        if value.form() != form {
            let what = format!("{name} = {value} is not {}", form.words());
            return Err(problem(name, what));
        }
        if let Some(odd) = value.numbers().iter().find(|v| !v.is_finite()) {
            let what = format!("{name} = {odd} is not a finite number");
            return Err(problem(name, what));
        }
    }
    let missing = entry
        .parameters
        .iter()
        .find(|p| p.required && given.get(p.name).is_none());
    match missing {
        Some(p) => Err(problem(
            p.name,
            format!("{} needs {} ({})", entry.name, p.name, p.meaning),
        )),
        None => Ok(()),
    }
}

fn list<'a>(names: impl Iterator<Item = &'a str>) -> String {
    names.collect::<Vec<_>>().join(", ")
}

#[cfg(test)]
mod tests {
    use super::*;

    fn check(name: &str, values: &[(&str, f64)]) -> Result<Material, Problem> {
        let values: Vec<_> = values.iter().map(|(n, v)| (n.to_string(), *v)).collect();
        build(name, &values)
    }

    #[test]
    fn parameters_may_come_in_any_order() {
        let material = check("Mooney-Rivlin", &[("c01", 0.05), ("c10", 0.15)]).unwrap();
        assert_eq!(material.name(), "Mooney-Rivlin");
        assert!((material.shear_modulus() - 0.4).abs() < 1e-16);
        let given: Vec<_> = material
            .parameters()
            .iter()
            .map(|p| (p.name.clone(), p.value.clone()))
            .collect();
        let expected =
            [("c10", 0.15), ("c01", 0.05)].map(|(n, v)| (n.to_string(), Constant::Number(v)));
        assert_eq!(given, expected);
    }

    // Red when a range check is turned round or dropped.
    #[test]
    fn what_is_no_material_is_refused_by_parameter() {
        for (name, values, parameter, says) in [
            ("neo-Hookean", vec![], "mu", "needs mu"),
            ("neo-Hookean", vec![("mu", 0.0)], "mu", "outside mu > 0"),
            (
                "neo-Hookean",
                vec![("mu", f64::NAN)],
                "mu",
                "not a finite number",
            ),
            (
                "neo-Hookean",
                vec![("mu", 1.0), ("G", 1.0)],
                "G",
                "no parameter `G`",
            ),
            ("neo-Hookean", vec![("mu", 1.0), ("mu", 2.0)], "mu", "twice"),
            ("Mooney-Rivlin", vec![("c10", 0.1)], "c01", "needs c01"),
            (
                "Mooney-Rivlin",
                vec![("c10", 0.1), ("c01", -0.01)],
                "c01",
                "outside c01 >= 0",
            ),
            (
                "Mooney-Rivlin",
                vec![("c10", 0.0), ("c01", 0.0)],
                "c10",
                "no stiffness",
            ),
            (
                "linear-elastic",
                vec![("E", -1.0), ("nu", 0.3)],
                "E",
                "outside E > 0",
            ),
            (
                "linear-elastic",
                vec![("E", 1.0), ("nu", 0.51)],
                "nu",
                "outside -1 < nu <= 0.5",
            ),
            (
                "linear-elastic",
                vec![("E", 1.0), ("nu", -1.0)],
                "nu",
                "outside",
            ),
            ("neo-hookean", vec![("mu", 1.0)], "", "unknown material law"),
        ] {
            let problem = check(name, &values).expect_err(says);
            assert_eq!(problem.parameter, parameter, "{problem}");
            assert!(problem.message.contains(says), "{problem}");
            assert!(!problem.hint.is_empty(), "{problem}");
        }
        assert!(check("linear-elastic", &[("E", 1.0), ("nu", 0.5)]).is_ok());
        assert!(check("Mooney-Rivlin", &[("c10", 0.0), ("c01", 0.1)]).is_ok());
    }

    #[test]
    fn every_entry_is_complete_and_found_by_its_name() {
        for entry in entries() {
            assert_eq!(find(entry.name).map(|e| e.name), Some(entry.name));
            assert!(
                !entry.formula.is_empty()
                    && !entry.source.is_empty()
                    && !entry.convention.is_empty()
            );
            assert!(!entry.parameters.is_empty() || entry.family.is_some());
        }
        assert_eq!(names_of(MaterialKind::LinearElastic), ["linear-elastic"]);
    }
}
