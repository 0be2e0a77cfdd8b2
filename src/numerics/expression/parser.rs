//! A Pratt parser that writes the program of an expression in postfix order as it reads.
//!
//! A subexpression is known by where its code begins; one of a single `Constant` is folded into what it meets.

use super::error::head;
use super::functions::{Function, whole_power};
use super::lexer::{Kind, Token, token};
use super::program::{Binary, Op};
use super::{DEEPEST, ExpressionError, LONGEST, Names};

/// The one name that is always known.
pub(super) const PI: &str = "pi";
const OPERAND: &str = "a number, a name or \"(\"";

/// Strength of a sign's hold on what follows: above that of a product, below that of a power.
const SIGN: u8 = 5;

/// The code of `text`, and which constants of `names` occur.
pub(super) fn parse(text: &str, names: Names) -> Result<(Vec<Op>, Vec<usize>), ExpressionError> {
    if text.len() > LONGEST {
        let found = format!("{} characters are more than {LONGEST}", text.len());
        return Err(ExpressionError::new(0, found));
    }
    let mut parser = Parser {
        text,
        names,
        token: token(text, 0)?,
        code: Vec::new(),
        constants: Vec::new(),
        depth: 0,
    };
    parser.expression(0)?;
    match parser.token.kind {
        Kind::End => {
            parser.constants.sort_unstable();
            parser.constants.dedup();
            Ok((parser.code, parser.constants))
        }
        _ => Err(parser.left_over()),
    }
}

struct Parser<'t> {
    text: &'t str,
    names: Names<'t>,
    /// The word to be read next.
    token: Token<'t>,
    code: Vec<Op>,
    constants: Vec<usize>,
    depth: usize,
}

/// An operator with its hold on the left and on the right.
fn operator(kind: Kind) -> Option<(Binary, u8, u8)> {
    match kind {
        Kind::Sign('+') => Some((Binary::Add, 1, 2)),
        Kind::Sign('-') => Some((Binary::Subtract, 1, 2)),
        Kind::Sign('*') => Some((Binary::Multiply, 3, 4)),
        Kind::Sign('/') => Some((Binary::Divide, 3, 4)),
        Kind::Sign('^') => Some((Binary::Power, 8, 7)),
        _ => None,
    }
}

impl<'t> Parser<'t> {
    fn advance(&mut self) -> Result<Token<'t>, ExpressionError> {
        let read = self.token;
        self.token = token(self.text, read.end)?;
        Ok(read)
    }

    /// Reads operators that hold at least as strongly as `least`; where the code of it begins.
    fn expression(&mut self, least: u8) -> Result<usize, ExpressionError> {
        self.depth += 1;
        if self.depth > DEEPEST {
            let found = format!("nested deeper than {DEEPEST} times");
            return Err(ExpressionError::new(self.token.start, found));
        }
        let first = self.operand()?;
        while let Some((binary, left, right)) = operator(self.token.kind) {
            if left < least {
                break;
            }
            let sign = self.advance()?;
            let second = self.expression(right)?;
            self.join(binary, first, second);
            self.finite(first, sign.start)?;
        }
        self.depth -= 1;
        Ok(first)
    }

    fn operand(&mut self) -> Result<usize, ExpressionError> {
        let start = self.code.len();
        match self.token.kind {
            Kind::Number(value) => {
                self.advance()?;
                self.code.push(Op::Constant(value));
            }
            Kind::Name(name) => self.named(name)?,
            Kind::Sign('(') => self.parenthesis()?,
            Kind::Sign(sign @ ('+' | '-')) => {
                self.advance()?;
                self.expression(SIGN)?;
                if sign == '-' {
                    self.negate(start);
                }
            }
            _ => {
                let found = self.found();
                return Err(ExpressionError::new(self.token.start, found).expected(OPERAND));
            }
        }
        Ok(start)
    }

    /// `( ... )`.
    fn parenthesis(&mut self) -> Result<(), ExpressionError> {
        let open = self.advance()?;
        self.expression(0)?;
        if self.token.kind == Kind::Sign(')') {
            self.advance()?;
            return Ok(());
        }
        let opened = self.text[..open.start].chars().count() + 1;
        let found = self.found();
        let error = ExpressionError::new(self.token.start, found);
        let expected = format!("an operator, or \")\" for the \"(\" at character {opened}");
        Err(match self.token.kind {
            Kind::Number(_) | Kind::Name(_) | Kind::Sign('(') => {
                error.expected(expected).hint(PRODUCT)
            }
            _ => error.expected(expected),
        })
    }

    /// A variable, a constant or a function with its argument.
    fn named(&mut self, name: &'t str) -> Result<(), ExpressionError> {
        let word = self.advance()?;
        let called = self.token.kind == Kind::Sign('(');
        if let Some(function) = Function::from_name(name) {
            if !called {
                let error =
                    ExpressionError::new(word.end, format!("{} after \"{name}\"", self.found()));
                return Err(error.expected(format!("\"(\": {name} is a function")));
            }
            let start = self.code.len();
            self.parenthesis()?;
            self.call(function, start);
            return self.finite(start, word.start);
        }
        let variable = self.names.variables.iter().position(|v| *v == name);
        let constant = self.names.constants.iter().position(|(c, _)| c == name);
        match (variable, constant) {
            (Some(index), _) => self.code.push(Op::Value(index)),
            (None, Some(index)) => {
                self.constants.push(index);
                self.code.push(Op::Constant(self.names.constants[index].1));
            }
            (None, None) if name == PI => self.code.push(Op::Constant(std::f64::consts::PI)),
            (None, None) => return Err(self.unknown(name, word.start, called)),
        }
        if called {
            let found = format!("\"{}\" is no function, and \"(\" follows it", head(name));
            return Err(ExpressionError::new(word.start, found).hint(PRODUCT));
        }
        Ok(())
    }

    /// A name that means nothing.
    fn unknown(&self, name: &str, at: usize, called: bool) -> ExpressionError {
        let what = if called { "function" } else { "name" };
        let found = format!("unknown {what} \"{}\"", head(name));
        let variables = self.names.variables.iter().copied();
        let constants = self.names.constants.iter().map(|(name, _)| name.as_str());
        let values = variables.chain(constants).chain([PI]);
        let known: Vec<&str> = if called {
            Function::names().collect()
        } else {
            values.collect()
        };
        let hint = match (Function::instead_of(name), nearest(name, &known)) {
            (Some(instead), _) => instead.to_string(),
            (None, Some(near)) => format!("did you mean `{near}`?"),
            (None, None) => String::new(),
        };
        ExpressionError::new(at, found)
            .expected(format!("one of {}", known.join(", ")))
            .hint(hint)
    }

    /// What stands where the expression should have ended.
    fn left_over(&self) -> ExpressionError {
        let error = ExpressionError::new(self.token.start, self.found());
        match self.token.kind {
            Kind::Sign(_) if self.token.kind == Kind::Sign(')') => {
                error.expected("the end, or an operator: no \"(\" is open")
            }
            _ => error.expected("an operator or the end").hint(PRODUCT),
        }
    }

    /// The next word, for messages.
    fn found(&self) -> String {
        match self.token.kind {
            Kind::End => "the text ends".to_string(),
            _ => format!(
                "found \"{}\"",
                head(&self.text[self.token.start..self.token.end])
            ),
        }
    }

    /// The constant that the code from `start` on is, if it is one.
    fn constant(&self, start: usize, end: usize) -> Option<f64> {
        match self.code[start..end] {
            [Op::Constant(value)] => Some(value),
            _ => None,
        }
    }

    /// Refuses a constant part without a value: 1/0, ln(-1).
    fn finite(&self, start: usize, at: usize) -> Result<(), ExpressionError> {
        match self.constant(start, self.code.len()) {
            Some(value) if !value.is_finite() => {
                let found = format!("this part of constants is {value}");
                Err(ExpressionError::new(at, found))
            }
            _ => Ok(()),
        }
    }

    fn negate(&mut self, start: usize) {
        match self.constant(start, self.code.len()) {
            Some(value) => self.code[start] = Op::Constant(-value),
            None => self.code.push(Op::Negate),
        }
    }

    fn call(&mut self, function: Function, start: usize) {
        match self.constant(start, self.code.len()) {
            Some(value) => self.code[start] = Op::Constant(function.of(value)),
            None => self.code.push(Op::Call(function)),
        }
    }

    /// Adds a constant to the code from `start` on; a difference that is known better is taken as it is.
    fn shift(&mut self, start: usize, by: f64) {
        if let [Op::Value(variable)] = self.code[start..] {
            let mut known = self.names.differences.iter();
            if let Some(d) = known.find(|d| d.variable == variable && d.less == -by) {
                self.code[start] = Op::Value(d.value);
                return;
            }
        }
        self.code.push(Op::Shift(by));
    }

    /// Joins the code of two operands, which begin at `first` and `second`.
    fn join(&mut self, binary: Binary, first: usize, second: usize) {
        let left = self.constant(first, second);
        let right = self.constant(second, self.code.len());
        match (left, right) {
            (Some(a), Some(b)) => {
                self.code.truncate(first);
                let whole = binary == Binary::Power && is_whole(b);
                let value = if whole {
                    whole_power(a, b as i32)
                } else {
                    binary.of(a, b)
                };
                self.code.push(Op::Constant(value));
            }
            (None, Some(b)) => {
                self.code.pop();
                match binary {
                    Binary::Add => self.shift(first, b),
                    Binary::Subtract => self.shift(first, -b),
                    Binary::Multiply => self.code.push(Op::Scale(b)),
                    Binary::Divide => self.code.push(Op::Ratio(b)),
                    Binary::Power => self.power(b),
                }
            }
            (Some(_), None) if matches!(binary, Binary::Divide | Binary::Power) => {
                self.code.push(Op::Join(binary));
            }
            (Some(a), None) => {
                self.code.remove(first);
                match binary {
                    Binary::Add => self.shift(first, a),
                    Binary::Multiply => self.code.push(Op::Scale(a)),
                    // a - x = -(x - a), to the last bit
                    _ => {
                        self.shift(first, -a);
                        self.code.push(Op::Negate);
                    }
                }
            }
            (None, None) => self.code.push(Op::Join(binary)),
        }
    }

    /// Raises what was read last to a constant power.
    fn power(&mut self, exponent: f64) {
        let of_pos = self.code.last() == Some(&Op::Call(Function::Pos));
        self.code.push(match (is_whole(exponent), of_pos) {
            (true, _) => Op::WholePower(exponent as i32),
            (false, true) => Op::PowerOfPos(exponent),
            (false, false) => Op::ConstantPower(exponent),
        });
    }
}

/// Whether an exponent is a whole number to multiply by.
fn is_whole(exponent: f64) -> bool {
    exponent.trunc() == exponent && exponent.abs() <= f64::from(i32::MAX)
}

const PRODUCT: &str = "multiplication is written `*`";

/// The known name nearest to `name`, if it is near.
fn nearest<'w>(name: &str, known: &[&'w str]) -> Option<&'w str> {
    let limit = 1 + name.len() / 4;
    // a name of a hostile length is near to none
    let scored = known
        .iter()
        .filter(|k| k.len() <= name.len() + limit && name.len() <= k.len() + limit)
        .map(|k| (distance(name, k), *k));
    scored
        .filter(|(d, _)| *d <= limit)
        .min_by_key(|(d, _)| *d)
        .map(|(_, k)| k)
}

/// Letters to change, case aside.
fn distance(a: &str, b: &str) -> usize {
    let mut row: Vec<usize> = (0..=b.len()).collect();
    for (i, ca) in a.bytes().enumerate() {
        let mut diagonal = row[0];
        row[0] = i + 1;
        for (j, cb) in b.bytes().enumerate() {
            let change = diagonal + usize::from(!ca.eq_ignore_ascii_case(&cb));
            diagonal = row[j + 1];
            row[j + 1] = change.min(row[j] + 1).min(diagonal + 1);
        }
    }
    row[b.len()]
}
