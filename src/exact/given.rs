//! What a suite gives to an exact solution, by name; and what a solution says it can be given.

use super::Ends;
use super::solution::Refusal;
use crate::materials::Material;
use crate::mechanics::Dimension;

/// One given value, in the suite's units.
#[derive(Debug, Clone, PartialEq)]
pub enum Value {
    Number(f64),
    Numbers(Vec<f64>),
    /// A word of a list, or an expression.
    Text(String),
    Ends(Ends),
    Material(Material),
    Materials(Vec<Material>),
    /// A name with a block of its own.
    Variant(String, Given),
    /// A block of its own.
    Block(Given),
    /// The numbers of a CSV file.
    Table(TableData),
}

/// The numbers of a CSV file that a case names.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct TableData {
    /// As the suite names it.
    pub file: String,
    /// Lower-case hexadecimal SHA-256 of its bytes.
    pub sha256: String,
    pub bytes: u64,
    pub rows: usize,
    /// Header and numbers of each column.
    pub columns: Vec<(String, Vec<f64>)>,
}

impl TableData {
    /// The numbers under a header.
    pub fn column(&self, name: &str) -> Option<&[f64]> {
        let found = self.columns.iter().find(|(header, _)| header == name);
        found.map(|(_, numbers)| numbers.as_slice())
    }
}

/// Everything that was given, in file order.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Given {
    list: Vec<(String, Value)>,
}

/// What a parameter has to be.
#[derive(Debug, Clone, Copy)]
pub enum Form {
    Number(Dimension),
    /// A list that stays a list: it makes no further cases.
    Numbers(Dimension),
    /// One of these words.
    Word(&'static [&'static str]),
    /// An expression in coordinates and named constants.
    Expression,
    /// A free text: a name or a source.
    Name,
    /// A CSV file beside the suite, all numbers.
    Table,
    /// Named numbers, as many as wanted.
    Named,
    /// One of these end conditions.
    Ends(&'static [&'static str]),
    /// The name of a material of the suite.
    Material,
    /// A list of such names.
    Materials,
    /// One of these names with the block of its own.
    Variant(&'static [VariantEntry]),
    /// A block of these keys.
    Block(&'static [ParameterEntry]),
}

/// One of several names with its block.
#[derive(Debug, Clone, Copy)]
pub struct VariantEntry {
    pub name: &'static str,
    pub parameters: &'static [ParameterEntry],
    pub meaning: &'static str,
}

/// One parameter of a solution.
#[derive(Debug, Clone, Copy)]
pub struct ParameterEntry {
    /// As a suite writes it.
    pub name: &'static str,
    pub form: Form,
    pub required: bool,
    /// What is taken when it is not given, as text.
    pub default: &'static str,
    /// Whether a case's `load-factor:` scales it.
    pub load: bool,
    pub meaning: &'static str,
}

impl ParameterEntry {
    /// A parameter that must be given.
    pub const fn required(name: &'static str, form: Form, meaning: &'static str) -> Self {
        Self {
            name,
            form,
            required: true,
            default: "",
            load: false,
            meaning,
        }
    }

    /// A parameter with a default, or that another one may stand in for.
    pub const fn optional(
        name: &'static str,
        form: Form,
        default: &'static str,
        meaning: &'static str,
    ) -> Self {
        Self {
            name,
            form,
            required: false,
            default,
            load: false,
            meaning,
        }
    }

    /// The same, scaled by a case's load factor.
    pub const fn load(self) -> Self {
        Self { load: true, ..self }
    }

    /// Names of it and of all keys below it whose lists stay lists.
    pub fn list_names(&self) -> Vec<&'static str> {
        match self.form {
            Form::Numbers(_) | Form::Materials => vec![self.name],
            Form::Variant(entries) => entries
                .iter()
                .flat_map(|e| e.parameters)
                .flat_map(Self::list_names)
                .collect(),
            Form::Block(entries) => entries.iter().flat_map(Self::list_names).collect(),
            _ => Vec::new(),
        }
    }
}

impl Given {
    /// Adds a value.
    pub fn with(mut self, name: &str, value: Value) -> Self {
        self.list.push((name.to_string(), value));
        self
    }

    /// Adds a number.
    pub fn number(self, name: &str, value: f64) -> Self {
        self.with(name, Value::Number(value))
    }

    pub fn get(&self, name: &str) -> Option<&Value> {
        self.list.iter().find(|(n, _)| n == name).map(|(_, v)| v)
    }

    /// All values, in file order.
    pub fn iter(&self) -> impl Iterator<Item = (&str, &Value)> {
        self.list.iter().map(|(name, value)| (name.as_str(), value))
    }

    /// A number, if there is one of this name.
    pub fn optional(&self, name: &str) -> Option<f64> {
        match self.get(name) {
            Some(Value::Number(value)) => Some(*value),
            _ => None,
        }
    }

    /// A number that must be there and finite.
    pub fn finite(&self, name: &'static str) -> Result<f64, Refusal> {
        let Some(value) = self.optional(name) else {
            return Err(refuse(name, format!("{name} is missing"), ""));
        };
        if !value.is_finite() {
            let message = format!("{name} = {value} is not a finite number");
            return Err(refuse(name, message, ""));
        }
        Ok(value)
    }

    /// A number that must be there, finite and above zero.
    pub fn positive(&self, name: &'static str) -> Result<f64, Refusal> {
        let value = self.finite(name)?;
        if value <= 0.0 {
            let message = format!("{name} = {value} must be positive");
            return Err(refuse(name, message, ""));
        }
        Ok(value)
    }

    /// A number, or `default` where none is given; finite.
    pub fn finite_or(&self, name: &'static str, default: f64) -> Result<f64, Refusal> {
        match self.get(name) {
            None => Ok(default),
            Some(_) => self.finite(name),
        }
    }

    /// A list of finite numbers.
    pub fn numbers(&self, name: &'static str) -> Result<&[f64], Refusal> {
        match self.get(name) {
            Some(Value::Numbers(values)) => match values.iter().find(|v| !v.is_finite()) {
                None => Ok(values),
                Some(odd) => {
                    let message = format!("{name} holds {odd}, which is not a finite number");
                    Err(refuse(name, message, ""))
                }
            },
            _ => Err(refuse(name, format!("{name} is missing"), "")),
        }
    }

    /// A word or an expression.
    pub fn text(&self, name: &str) -> Option<&str> {
        match self.get(name) {
            Some(Value::Text(text)) => Some(text),
            _ => None,
        }
    }

    /// The end condition.
    pub fn ends(&self) -> Result<Ends, Refusal> {
        match self.get("ends") {
            Some(Value::Ends(ends)) => Ok(*ends),
            _ => Err(refuse("ends", "ends is missing".to_string(), "")),
        }
    }

    /// The material under `material`.
    pub fn material(&self) -> Result<&Material, Refusal> {
        match self.get("material") {
            Some(Value::Material(material)) => Ok(material),
            _ => Err(refuse("material", "material is missing".to_string(), "")),
        }
    }

    /// The materials under `materials`.
    pub fn material_list(&self) -> Result<&[Material], Refusal> {
        match self.get("materials") {
            Some(Value::Materials(materials)) => Ok(materials),
            _ => Err(refuse("materials", "materials is missing".to_string(), "")),
        }
    }

    /// The numbers of a file.
    pub fn table(&self, name: &str) -> Option<&TableData> {
        match self.get(name) {
            Some(Value::Table(table)) => Some(table),
            _ => None,
        }
    }

    /// A name with its block.
    pub fn variant(&self, name: &str) -> Option<(&str, &Given)> {
        match self.get(name) {
            Some(Value::Variant(word, block)) => Some((word, block)),
            _ => None,
        }
    }

    /// A block of its own.
    pub fn block(&self, name: &str) -> Option<&Given> {
        match self.get(name) {
            Some(Value::Block(block)) => Some(block),
            _ => None,
        }
    }

    /// Every material in it, in file order.
    pub fn materials(&self) -> Vec<&Material> {
        self.list
            .iter()
            .flat_map(|(_, value)| match value {
                Value::Material(m) => std::slice::from_ref(m).iter(),
                Value::Materials(list) => list.iter(),
                _ => [].iter(),
            })
            .collect()
    }

    /// The same with every load of `entries` times `factor`; end forces are loads, a given stretch is not.
    pub fn scaled(&self, entries: &[ParameterEntry], factor: f64) -> Self {
        let is_load = |name: &str| entries.iter().any(|e| e.name == name && e.load);
        let list = self.list.iter().map(|(name, value)| {
            let value = match value {
                Value::Number(x) if is_load(name) => Value::Number(factor * x),
                Value::Ends(Ends::GeneralizedPlaneStrain { axial_force }) => {
                    Value::Ends(Ends::GeneralizedPlaneStrain {
                        axial_force: factor * axial_force,
                    })
                }
                other => other.clone(),
            };
            (name.clone(), value)
        });
        Self {
            list: list.collect(),
        }
    }
}

/// A refusal in one line.
pub(super) fn refuse(parameter: &'static str, message: String, hint: impl Into<String>) -> Refusal {
    Refusal {
        message,
        parameter,
        hint: hint.into(),
    }
}
