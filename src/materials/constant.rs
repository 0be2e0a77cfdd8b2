//! The constants of a law: one number, several, a text, or several named numbers.

use crate::mechanics::Dimension;

/// The value of one constant.
#[derive(Debug, Clone, PartialEq)]
pub enum Constant {
    Number(f64),
    /// One number a term: `mu: [...]`.
    List(Vec<f64>),
    /// An expression.
    Text(String),
    /// Numbers that an expression calls by these names.
    Named(Vec<(String, f64)>),
}

/// What a constant has to be.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum ConstantForm {
    Number,
    List,
    Text,
    Named,
}

impl Constant {
    pub fn form(&self) -> ConstantForm {
        match self {
            Self::Number(_) => ConstantForm::Number,
            Self::List(_) => ConstantForm::List,
            Self::Text(_) => ConstantForm::Text,
            Self::Named(_) => ConstantForm::Named,
        }
    }

    /// Every number in it.
    pub(super) fn numbers(&self) -> Vec<f64> {
        match self {
            Self::Number(value) => vec![*value],
            Self::List(values) => values.clone(),
            Self::Text(_) => Vec::new(),
            Self::Named(pairs) => pairs.iter().map(|(_, value)| *value).collect(),
        }
    }
}

impl ConstantForm {
    /// For messages.
    pub fn words(self) -> &'static str {
        match self {
            Self::Number => "a number",
            Self::List => "a list of numbers",
            Self::Text => "a text",
            Self::Named => "a block of named numbers",
        }
    }
}

impl From<f64> for Constant {
    fn from(value: f64) -> Self {
        Self::Number(value)
    }
}

impl From<Vec<f64>> for Constant {
    fn from(values: Vec<f64>) -> Self {
        Self::List(values)
    }
}

impl From<&str> for Constant {
    fn from(text: &str) -> Self {
        Self::Text(text.to_string())
    }
}

impl std::fmt::Display for Constant {
    fn fmt(&self, f: &mut std::fmt::Formatter) -> std::fmt::Result {
        match self {
            Self::Number(value) => write!(f, "{value}"),
            Self::List(values) => {
                let words: Vec<_> = values.iter().map(f64::to_string).collect();
                write!(f, "[{}]", words.join(", "))
            }
            Self::Text(text) => write!(f, "\"{text}\""),
            Self::Named(pairs) => {
                let words: Vec<_> = pairs.iter().map(|(n, v)| format!("{n} {v}")).collect();
                write!(f, "{{ {} }}", words.join(", "))
            }
        }
    }
}

/// One constant of a law with its value.
#[derive(Debug, Clone, PartialEq)]
pub struct Parameter {
    pub name: String,
    pub value: Constant,
    pub dimension: Dimension,
}

impl Parameter {
    pub fn new(name: impl Into<String>, value: impl Into<Constant>, dimension: Dimension) -> Self {
        Self {
            name: name.into(),
            value: value.into(),
            dimension,
        }
    }

    /// A single number.
    pub(super) fn number(name: &str, value: f64, dimension: Dimension) -> Self {
        Self::new(name, value, dimension)
    }
}

/// The constants a law is built from, checked for form: every one that the law needs is there.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Constants {
    pub(super) list: Vec<(String, Constant)>,
}

impl Constants {
    pub fn get(&self, name: &str) -> Option<&Constant> {
        self.list.iter().find(|(n, _)| n == name).map(|(_, c)| c)
    }

    /// A number; NaN when there is none.
    pub fn number(&self, name: &str) -> f64 {
        match self.get(name) {
            Some(Constant::Number(value)) => *value,
            _ => f64::NAN,
        }
    }

    /// A list of numbers; empty when there is none.
    pub fn numbers(&self, name: &str) -> &[f64] {
        match self.get(name) {
            Some(Constant::List(values)) => values,
            _ => &[],
        }
    }

    /// A text; empty when there is none.
    pub fn text(&self, name: &str) -> &str {
        match self.get(name) {
            Some(Constant::Text(text)) => text,
            _ => "",
        }
    }

    /// Named numbers; empty when there are none.
    pub fn named(&self, name: &str) -> &[(String, f64)] {
        match self.get(name) {
            Some(Constant::Named(pairs)) => pairs,
            _ => &[],
        }
    }

    /// All constants, in the order they were given.
    pub fn iter(&self) -> impl Iterator<Item = &(String, Constant)> {
        self.list.iter()
    }
}
