//! Numbers in cells, read strictly: what is not plainly a finite decimal number is refused with its reason.

/// Why a cell cannot be read.
#[derive(Debug, PartialEq)]
pub(crate) struct Problem {
    pub rule: &'static str,
    pub found: String,
    pub expected: &'static str,
    pub hint: &'static str,
}

const DECIMAL: &str = "a decimal number such as -1.5e-3";
const WHOLE: &str = "a whole number such as 17";

fn problem(
    rule: &'static str,
    cell: &[u8],
    what: &str,
    expected: &'static str,
    hint: &'static str,
) -> Problem {
    Problem {
        rule,
        found: format!("{} {what}", quoted(cell)),
        expected,
        hint,
    }
}

/// The cell as messages show it: quoted, cut after 40 characters, controls escaped.
pub(crate) fn quoted(cell: &[u8]) -> String {
    let text = String::from_utf8_lossy(cell);
    let mut shown: String = text
        .chars()
        .take(40)
        .flat_map(char::escape_default)
        .collect();
    if text.chars().count() > 40 {
        shown += "...";
    }
    format!("\"{shown}\"")
}

/// A finite decimal number. Blanks around it are ignored.
pub(crate) fn number(cell: &[u8]) -> Result<f64, Problem> {
    let cell = cell.trim_ascii();
    let plain = |b: &u8| matches!(b, b'0'..=b'9' | b'+' | b'-' | b'.' | b'e' | b'E');
    if cell.iter().all(plain) {
        let parsed = std::str::from_utf8(cell)
            .ok()
            .and_then(|t| t.parse::<f64>().ok());
        match parsed {
            Some(value) if value.is_finite() => return Ok(value),
            Some(_) => {
                let what = "is too large for a double";
                return Err(problem("finite-number", cell, what, DECIMAL, ""));
            }
            None => {}
        }
    }
    Err(refuse(cell))
}

/// The reason why `cell` is no number.
fn refuse(cell: &[u8]) -> Problem {
    let lower = cell.to_ascii_lowercase();
    let bare = lower
        .strip_prefix(b"-")
        .or(lower.strip_prefix(b"+"))
        .unwrap_or(&lower);
    if cell.is_empty() {
        return Problem {
            rule: "empty-cell",
            found: "the cell is empty".to_string(),
            expected: DECIMAL,
            hint: "a missing number is not zero: export it, or leave the whole column out",
        };
    }
    let not_finite = [
        "nan", "inf", "infinity", "1.#inf", "1.#ind", "1.#qnan", "nan(ind)", "null", "na",
    ];
    if not_finite.iter().any(|word| word.as_bytes() == bare) {
        let hint = "find out why the solver could not compute it";
        return problem(
            "finite-number",
            cell,
            "is not a finite number",
            DECIMAL,
            hint,
        );
    }
    if is_fortran(bare) {
        let hint = "write exponents with e or E, as in 1.0e-3";
        return problem(
            "fortran-exponent",
            cell,
            "has a Fortran exponent",
            DECIMAL,
            hint,
        );
    }
    if bare.contains(&b',')
        && bare
            .iter()
            .all(|b| b.is_ascii_digit() || b",.e+-".contains(b))
    {
        let hint = "write 1.5, not 1,5, and no thousands separators";
        return problem("decimal-comma", cell, "has a comma in it", DECIMAL, hint);
    }
    problem("number", cell, "is not a number", DECIMAL, "")
}

/// `1.0d-3`, or `1.0-103` with the letter left out.
fn is_fortran(bare: &[u8]) -> bool {
    let Some(at) = bare.iter().position(|b| b"d+-".contains(b)) else {
        return false;
    };
    let (mantissa, mut exponent) = bare.split_at(at);
    if exponent.first() == Some(&b'd') {
        exponent = &exponent[1..];
    }
    let exponent = exponent
        .strip_prefix(b"-")
        .or(exponent.strip_prefix(b"+"))
        .unwrap_or(exponent);
    let digits = |b: &u8| b.is_ascii_digit();
    !mantissa.is_empty()
        && mantissa.iter().all(|b| digits(b) || *b == b'.')
        && !exponent.is_empty()
        && exponent.iter().all(digits)
}

/// A whole number; blanks around it are ignored.
pub(crate) fn integer(cell: &[u8]) -> Result<i64, Problem> {
    let cell = cell.trim_ascii();
    let digits = cell
        .strip_prefix(b"-")
        .or(cell.strip_prefix(b"+"))
        .unwrap_or(cell);
    if !digits.is_empty() && digits.iter().all(u8::is_ascii_digit) {
        let parsed = std::str::from_utf8(cell)
            .ok()
            .and_then(|t| t.parse::<i64>().ok());
        return parsed
            .ok_or_else(|| problem("integer-range", cell, "does not fit in 64 bits", WHOLE, ""));
    }
    if cell.is_empty() {
        return Err(Problem {
            rule: "empty-cell",
            found: "the cell is empty".to_string(),
            expected: WHOLE,
            hint: "",
        });
    }
    let hint = match number(cell) {
        Ok(_) => "write identifiers without a decimal point or exponent",
        Err(_) => "",
    };
    Err(problem(
        "integer",
        cell,
        "is not a whole number",
        WHOLE,
        hint,
    ))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn rule(cell: &str) -> &'static str {
        match number(cell.as_bytes()) {
            Ok(_) => "accepted",
            Err(problem) => problem.rule,
        }
    }

    #[test]
    fn numbers_are_read_to_the_last_bit() {
        for (text, value) in [
            ("0.1", 0.1),
            (" -1.5e-3\t", -1.5e-3),
            ("+7", 7.0),
            (".5", 0.5),
            ("5.", 5.0),
            ("1E5", 1e5),
            ("1e-400", 0.0),
            ("0.30000000000000004", 0.1 + 0.2),
        ] {
            assert_eq!(number(text.as_bytes()), Ok(value), "{text}");
        }
    }

    #[test]
    fn everything_else_is_refused_with_its_own_rule() {
        for (cell, expected) in [
            ("nan", "finite-number"),
            ("-NaN", "finite-number"),
            ("inf", "finite-number"),
            ("Infinity", "finite-number"),
            ("1e400", "finite-number"),
            ("", "empty-cell"),
            ("  ", "empty-cell"),
            ("1.0D-3", "fortran-exponent"),
            ("-1.0d+03", "fortran-exponent"),
            ("1.0-103", "fortran-exponent"),
            ("1,5", "decimal-comma"),
            ("1.000,5", "decimal-comma"),
            ("0x10", "number"),
            ("1 000", "number"),
            ("--1", "number"),
            ("e5", "number"),
            ("1e", "number"),
            ("free", "number"),
            ("1_000", "number"),
            ("\u{0661}", "number"),
        ] {
            assert_eq!(rule(cell), expected, "{cell}");
        }
    }

    #[test]
    fn whole_numbers_are_whole_and_fit() {
        assert_eq!(integer(b" -3 "), Ok(-3));
        assert_eq!(integer(b"9223372036854775807"), Ok(i64::MAX));
        let rule = |cell: &[u8]| integer(cell).unwrap_err().rule;
        assert_eq!(rule(b"9223372036854775808"), "integer-range");
        assert_eq!(rule(b"1.0"), "integer");
        assert_eq!(rule(b"1e3"), "integer");
        assert_eq!(rule(b""), "empty-cell");
        assert_eq!(rule(b"-"), "integer");
        assert!(integer(b"2.0").unwrap_err().hint.contains("decimal point"));
    }

    #[test]
    fn long_and_strange_cells_are_shown_safely() {
        assert_eq!(quoted(b"a\nb"), "\"a\\nb\"");
        assert_eq!(quoted(&[b'x'; 100]).len(), 45);
        assert!(quoted(&[0xff]).starts_with('"'));
    }
}
