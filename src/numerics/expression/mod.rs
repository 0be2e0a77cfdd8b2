//! Arithmetic typed by a user: read once into a flat program, evaluated over doubles or dual numbers, so that derivatives of
//! any order are exact and none is typed.
//!
//! ```text
//! sum      = product { ("+" | "-") product }
//! product  = signed { ("*" | "/") signed }
//! signed   = { "+" | "-" } power
//! power    = operand [ "^" signed-power ]            2^3^2 = 2^(3^2), -x^2 = -(x^2), 2^-3
//! operand  = number | name | function "(" sum ")" | "(" sum ")"
//! ```
//! A text of any kind is either an expression or an error with its place: nesting and length are limited, so that no text
//! can exhaust the stack. Where a function has no value (`ln(-1)`), value *and* derivatives are NaN.

mod error;
mod functions;
mod lexer;
mod parser;
mod program;
#[cfg(test)]
mod tests;

pub use error::ExpressionError;
pub use functions::Function;

use num_dual::DualNum;
use program::Program;

/// Longest text that is read, in bytes.
pub const LONGEST: usize = 10_000;
/// Deepest nesting of parentheses, signs and powers.
pub const DEEPEST: usize = 100;

/// What the names of an expression mean.
#[derive(Debug, Clone, Copy, Default)]
pub struct Names<'n> {
    /// Variables, in the order of the values given to [`Expression::evaluate`].
    pub variables: &'n [&'n str],
    /// Values of other names.
    pub constants: &'n [(String, f64)],
    /// Differences that the caller knows better than by subtraction.
    pub differences: &'n [Difference],
}

/// `variable - less` is read as the value of index `value`, known without the cancellation.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Difference {
    /// Index in [`Names::variables`].
    pub variable: usize,
    pub less: f64,
    /// Index in the values given to [`Expression::evaluate`]; may lie beyond the variables that have a name.
    pub value: usize,
}

/// An expression that has been read.
#[derive(Debug, Clone, PartialEq)]
pub struct Expression {
    text: String,
    program: Program,
    /// Indices in [`Names::constants`], ascending.
    constants: Vec<usize>,
}

impl Expression {
    /// Reads `text`.
    ///
    /// # Errors
    /// The first thing that is wrong, with its place.
    pub fn parse(text: &str, names: Names) -> Result<Self, ExpressionError> {
        let (code, constants) = parser::parse(text, names)?;
        Ok(Self {
            text: text.to_string(),
            program: Program::new(code),
            constants,
        })
    }

    /// As it was typed.
    pub fn text(&self) -> &str {
        &self.text
    }

    /// The value at `values`; NaN when a variable that occurs has none.
    pub fn evaluate<D: DualNum<Primitive = f64> + Copy>(&self, values: &[D]) -> D {
        self.program.run(values)
    }

    /// Whether the value of this index occurs.
    pub fn uses(&self, value: usize) -> bool {
        self.program.uses(value)
    }

    /// Indices of the given constants that occur, ascending.
    pub fn constants(&self) -> &[usize] {
        &self.constants
    }

    /// How many times `pos` stands in it.
    pub fn switches(&self) -> usize {
        self.program.switches.len()
    }

    /// The argument of the `switch`-th `pos`: the expression has a kink where it changes sign.
    pub fn switch(&self, switch: usize, values: &[f64]) -> f64 {
        self.program.switch(switch, values)
    }
}

/// Why a constant cannot have this name, or `None`.
pub fn unusable(name: &str, variables: &[&str]) -> Option<String> {
    let mut letters = name.bytes();
    let first = letters
        .next()
        .is_some_and(|b| b.is_ascii_alphabetic() || b == b'_');
    if !first || !letters.all(|b| b.is_ascii_alphanumeric() || b == b'_') {
        return Some("a name is a letter, then letters, digits or _".to_string());
    }
    if variables.contains(&name) {
        return Some("a variable has this name".to_string());
    }
    if Function::from_name(name).is_some() {
        return Some("a function has this name".to_string());
    }
    (name == parser::PI).then(|| "this name is 3.14159...".to_string())
}
