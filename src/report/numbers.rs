//! Numbers for people: three significant digits, plain from 0.001 to 9999, else a power of ten.
//!
//! Rounding happens here and nowhere else. Machine formats (JSON, CSV) write every digit and do not use this.

/// Narrow no-break space: groups of three digits, and around the signs of arithmetic.
pub const THIN: char = '\u{202F}';
/// No-break space before a unit.
pub const NBSP: char = '\u{A0}';
const MINUS: char = '\u{2212}';

/// A rounded number, ready to be written in any of three ways.
#[derive(Debug, Clone, PartialEq)]
pub struct Number {
    /// Sign, digits and point in ASCII.
    digits: String,
    exponent: Option<i32>,
}

impl Number {
    /// Three significant digits.
    pub fn three(value: f64) -> Self {
        Self::significant(value, 3)
    }

    /// So many significant digits, plain from 0.001 to 9999.
    pub fn significant(value: f64, digits: usize) -> Self {
        let number = Self::power(value, digits);
        match number.exponent {
            Some(exponent) if (-3..=3).contains(&exponent) => {
                Self::plain_from(&number.digits, exponent)
            }
            _ => number,
        }
    }

    /// So many significant digits and a power of ten, whatever the size.
    pub fn power(value: f64, digits: usize) -> Self {
        if value == 0.0 {
            return Self::bare("0");
        }
        let text = format!("{value:.*e}", digits.max(1) - 1);
        match text.split_once('e') {
            Some((digits, exponent)) => Self {
                digits: digits.to_string(),
                exponent: exponent.parse().ok(),
            },
            // not a number or infinite: the outcome carries none, and no report prints one
            None => Self::bare("no number"),
        }
    }

    /// A fixed count of decimals.
    pub fn fixed(value: f64, decimals: usize) -> Self {
        if !value.is_finite() || value.abs() >= 1e6 {
            return Self::three(value);
        }
        let text = format!("{value:.decimals$}");
        let zero = text.chars().all(|c| matches!(c, '-' | '0' | '.'));
        Self::bare(if zero {
            text.trim_start_matches('-')
        } else {
            &text
        })
    }

    /// The shortest digits that read back to the same number: for radii, loads and limits.
    pub fn exact(value: f64) -> Self {
        let text = format!("{value:e}");
        let Some((digits, exponent)) = text.split_once('e') else {
            return Self::bare("no number");
        };
        match exponent.parse() {
            Ok(0) => Self::bare(digits),
            Ok(exponent) if (-4..=5).contains(&exponent) => Self::plain_from(digits, exponent),
            Ok(exponent) => Self {
                digits: digits.to_string(),
                exponent: Some(exponent),
            },
            Err(_) => Self::bare(&text),
        }
    }

    /// A margin: two digits below 1000, three below 2, more when it would read as 1.
    pub fn ratio(value: f64) -> Self {
        if (1.0..2.0).contains(&value) {
            let decimals =
                (2..=9).find(|d| format!("{value:.d$}").trim_end_matches(['0', '.']) != "1");
            return Self::fixed(value, decimals.unwrap_or(9));
        }
        let number = Self::power(value, 2);
        match number.exponent {
            Some(exponent) if (0..=2).contains(&exponent) => {
                Self::plain_from(&number.digits, exponent)
            }
            _ => number,
        }
    }

    /// Digits and power as somebody wrote them; `1` in front of a power is left out.
    pub fn written(digits: &str, exponent: i32) -> Self {
        Self {
            digits: digits.to_string(),
            exponent: Some(exponent),
        }
    }

    fn bare(digits: &str) -> Self {
        Self {
            digits: digits.to_string(),
            exponent: None,
        }
    }

    /// The same digits with the point moved.
    fn plain_from(digits: &str, exponent: i32) -> Self {
        let (sign, digits) = match digits.strip_prefix('-') {
            Some(rest) => ("-", rest),
            None => ("", digits),
        };
        let figures: String = digits.chars().filter(char::is_ascii_digit).collect();
        let text = if exponent < 0 {
            format!(
                "0.{}{figures}",
                "0".repeat(exponent.unsigned_abs() as usize - 1)
            )
        } else {
            let whole = exponent as usize + 1;
            let padded = format!("{figures:0<whole$}");
            let (whole, rest) = padded.split_at(whole);
            match rest {
                "" => whole.to_string(),
                rest => format!("{whole}.{rest}"),
            }
        };
        Self::bare(&format!("{sign}{text}"))
    }

    /// For terminals and messages: `4.29e-7`.
    pub fn ascii(&self) -> String {
        match self.exponent {
            Some(exponent) => format!("{}e{exponent}", self.digits),
            None => self.digits.clone(),
        }
    }

    /// For HTML: real minus, thin spaces, a raised exponent.
    pub fn html(&self) -> String {
        match self.exponent {
            Some(exponent) if self.digits == "1" => power_of_ten(exponent),
            Some(exponent) => format!(
                "{}{THIN}×{THIN}{}",
                typeset(&self.digits),
                power_of_ten(exponent)
            ),
            None => typeset(&self.digits),
        }
    }

    /// For text inside SVG, where `<sup>` does not exist.
    pub fn svg(&self) -> String {
        match self.exponent {
            Some(exponent) => {
                let exponent = typeset(&exponent.to_string());
                format!(
                    "{}×10<tspan dy=\"-4\" font-size=\"8.5\">{exponent}</tspan>",
                    typeset(&self.digits)
                )
            }
            None => typeset(&self.digits),
        }
    }
}

/// `10<sup>−4</sup>`; 1 and 10 are written out.
pub fn power_of_ten(exponent: i32) -> String {
    match exponent {
        0 => "1".to_string(),
        1 => "10".to_string(),
        _ => format!("10<sup>{}</sup>", typeset(&exponent.to_string())),
    }
}

/// A whole number in groups of three.
pub fn grouped(number: u64) -> String {
    typeset(&number.to_string())
}

/// ASCII digits with a real minus and thin spaces between groups of three on both sides of the point.
fn typeset(digits: &str) -> String {
    let (sign, digits) = match digits.strip_prefix('-') {
        Some(rest) => (Some(MINUS), rest),
        None => (None, digits),
    };
    let (whole, rest) = match digits.split_once('.') {
        Some((whole, rest)) => (whole, Some(rest)),
        None => (digits, None),
    };
    let mut out: String = sign.into_iter().collect();
    let length = whole.len();
    for (k, c) in whole.chars().enumerate() {
        if k > 0 && (length - k).is_multiple_of(3) {
            out.push(THIN);
        }
        out.push(c);
    }
    if let Some(rest) = rest {
        out.push('.');
        for (k, c) in rest.chars().enumerate() {
            if k > 0 && k.is_multiple_of(3) && rest.len() > 4 {
                out.push(THIN);
            }
            out.push(c);
        }
    }
    out
}

/// The numbers of one table row: all with powers of ten as soon as one is below 0.001.
pub fn row(values: &[Option<f64>]) -> Vec<Option<Number>> {
    let small = |v: f64| v != 0.0 && v.abs() < 1e-3;
    let powers = values.iter().flatten().any(|&v| small(v));
    let write = |v: f64| {
        if powers {
            Number::power(v, 3)
        } else {
            Number::three(v)
        }
    };
    values.iter().map(|value| value.map(write)).collect()
}

/// A value and its half width with the same decimals: two digits of the half width; `decimals` at least,
/// when given (orders have two).
pub fn with_uncertainty(value: f64, half_width: f64, decimals: Option<usize>) -> (Number, Number) {
    let needed =
        |digits: f64| (digits - half_width.abs().log10().floor()).clamp(0.0, 12.0) as usize;
    match decimals {
        // one digit of the half width must be seen, or it would read as none
        Some(least) => {
            let count = if half_width < 0.005 {
                needed(0.0).max(least).min(6)
            } else {
                least
            };
            (
                Number::fixed(value, count),
                Number::fixed(half_width, count),
            )
        }
        None if (1e-3..1e4).contains(&value.abs()) => {
            let count = needed(1.0).min(6);
            (
                Number::fixed(value, count),
                Number::fixed(half_width, count),
            )
        }
        None => (Number::three(value), Number::significant(half_width, 2)),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn three_digits_plain_in_the_middle_and_powers_outside() {
        let text = |v| Number::three(v).ascii();
        assert_eq!(text(0.0541), "0.0541");
        assert_eq!(text(0.001), "0.00100");
        assert_eq!(text(9994.0), "9990");
        assert_eq!(text(9999.6), "1.00e4");
        assert_eq!(text(4.294e-7), "4.29e-7");
        assert_eq!(text(-12.0), "-12.0");
        assert_eq!(text(0.0), "0");
        assert_eq!(text(-0.0), "0");
    }

    #[test]
    fn html_has_a_real_minus_and_thin_spaces() {
        assert_eq!(
            Number::three(-4.294e-7).html(),
            "−4.29\u{202f}×\u{202f}10<sup>−7</sup>"
        );
        assert_eq!(Number::exact(100000.0).html(), "100\u{202f}000");
        assert_eq!(
            Number::significant(0.96904134910, 11).html(),
            "0.969\u{202f}041\u{202f}349\u{202f}10"
        );
        assert_eq!(grouped(4036), "4\u{202f}036");
    }

    #[test]
    fn exact_numbers_keep_their_digits() {
        for (value, text) in [
            (8.0, "8"),
            (0.044, "0.044"),
            (12.5, "12.5"),
            (1e9, "1e9"),
            (1e-4, "0.0001"),
        ] {
            assert_eq!(Number::exact(value).ascii(), text);
        }
    }

    #[test]
    fn a_ratio_beyond_one_never_reads_as_one() {
        let text = |v| Number::ratio(v).ascii();
        assert_eq!(text(54.3), "54");
        assert_eq!(text(233.0), "230");
        assert_eq!(text(3.24), "3.2");
        assert_eq!(text(1.4), "1.40");
        assert_eq!(text(1.00042), "1.0004");
        assert_eq!(text(68_000.0), "6.8e4");
    }

    #[test]
    fn a_row_with_one_small_number_is_written_in_powers() {
        let texts: Vec<_> = row(&[Some(0.0688), None, Some(4.5e-4)])
            .into_iter()
            .map(|n| n.map(|n| n.ascii()))
            .collect();
        assert_eq!(
            texts,
            [Some("6.88e-2".into()), None, Some("4.50e-4".into())]
        );
    }

    #[test]
    fn a_small_half_width_is_not_rounded_away() {
        let text = |v, u| {
            let (v, u) = with_uncertainty(v, u, Some(2));
            format!("{} ± {}", v.ascii(), u.ascii())
        };
        assert_eq!(text(3.0212, 0.0391), "3.02 ± 0.04");
        assert_eq!(text(3.0212, 0.0004), "3.0212 ± 0.0004");
    }
}
