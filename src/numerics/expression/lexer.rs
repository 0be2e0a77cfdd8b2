//! From characters to numbers, names and signs.

use super::ExpressionError;
use super::error::head;

/// One word of an expression.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Kind<'t> {
    Number(f64),
    Name(&'t str),
    /// One of `+ - * / ^ ( )`.
    Sign(char),
    End,
}

/// A word and where it stands.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Token<'t> {
    pub kind: Kind<'t>,
    pub start: usize,
    pub end: usize,
}

/// The first word at or after byte `from`.
pub(super) fn token(text: &str, from: usize) -> Result<Token<'_>, ExpressionError> {
    let rest = text.get(from..).unwrap_or_default();
    let start = text.len() - rest.trim_start().len();
    let rest = &text[start..];
    let Some(first) = rest.chars().next() else {
        return Ok(Token {
            kind: Kind::End,
            start,
            end: start,
        });
    };
    let (kind, length) = match first {
        '0'..='9' | '.' => number(rest, start)?,
        'a'..='z' | 'A'..='Z' | '_' => {
            let length = span(rest, |b| b.is_ascii_alphanumeric() || b == b'_');
            (Kind::Name(&rest[..length]), length)
        }
        '+' | '-' | '*' | '/' | '^' | '(' | ')' => (Kind::Sign(first), 1),
        _ => return Err(stray(first, start)),
    };
    if rest.starts_with("**") {
        let error = ExpressionError::new(start, "found \"**\"");
        return Err(error.hint("powers are written `x^y`"));
    }
    Ok(Token {
        kind,
        start,
        end: start + length,
    })
}

/// How many leading bytes are `of_it`.
fn span(text: &str, of_it: impl Fn(u8) -> bool) -> usize {
    text.bytes().take_while(|b| of_it(*b)).count()
}

/// A number at the beginning of `rest`, and its length.
fn number(rest: &str, start: usize) -> Result<(Kind<'_>, usize), ExpressionError> {
    let digits = |from: usize| from + span(&rest[from..], |b| b.is_ascii_digit());
    let mut end = digits(0);
    if rest[end..].starts_with('.') {
        end = digits(end + 1);
    }
    let mantissa = &rest[..end];
    if rest[end..].starts_with(['e', 'E']) {
        let sign = usize::from(rest[end + 1..].starts_with(['+', '-']));
        let last = digits(end + 1 + sign);
        if last > end + 1 + sign {
            end = last;
        }
    }
    let word = &rest[..end];
    let problem = |found: String| ExpressionError::new(start, found);
    let value: f64 = word
        .parse()
        .map_err(|_| problem(format!("found \"{}\"", head(word))).expected("a number"))?;
    if rest[end..].starts_with('.') {
        let found = format!("\"{}\" has two decimal points", head(&rest[..=end]));
        return Err(problem(found));
    }
    let vanished = value == 0.0 && mantissa.bytes().any(|b| matches!(b, b'1'..=b'9'));
    if !value.is_finite() || vanished {
        let found = format!("\"{}\" is beyond the range of a double", head(word));
        return Err(problem(found));
    }
    Ok((Kind::Number(value), end))
}

/// A character that has no meaning here.
fn stray(c: char, at: usize) -> ExpressionError {
    let error = ExpressionError::new(at, format!("found {c:?}"))
        .expected("a number, a name or one of + - * / ^ ( )");
    match c {
        ',' | ';' => {
            error.hint("the decimal mark is a point, and every function takes one argument")
        }
        '[' | ']' | '{' | '}' => error.hint("only round parentheses group"),
        '=' | '<' | '>' => {
            error.hint("write the right-hand side alone; nothing is assigned or compared")
        }
        '²' | '³' => error.hint("powers are written `x^y`"),
        '·' | '×' | '∙' | '⋅' => error.hint("multiplication is written `*`"),
        '−' | '–' => error.hint("this is a dash; the minus sign is `-`"),
        '÷' | ':' => error.hint("division is written `/`"),
        'α'..='ω' | 'Α'..='Ω' => error.hint(
            "names are of letters a to z, digits and _, e.g. lambda; the circle's number is pi",
        ),
        _ => error,
    }
}
