//! Values, places of errors, hostile texts, derivatives.

use super::*;
use nalgebra::{Const, SVector};
use num_dual::{Derivative, Dual2, Dual64, DualSVec64, DualVec};
use proptest::prelude::*;

fn names() -> Names<'static> {
    Names {
        variables: &["x", "y", "E"],
        ..Names::default()
    }
}

fn value(text: &str, values: &[f64]) -> f64 {
    let read = Expression::parse(text, names()).unwrap_or_else(|e| panic!("{}", e.in_text(text)));
    read.evaluate(values)
}

// Red when a hold, the side an operator leans to or a fold is wrong.
#[test]
fn values_are_those_of_arithmetic() {
    let (x, y, e) = (1.7_f64, -0.3_f64, 2.5_f64);
    for (text, expected) in [
        ("1e-3 + 1.5E+2 + .5 + 2.", 152.501),
        ("x - y - E", x - y - e),
        ("x/y/E", x / y / e),
        ("x - y*E", x - y * e),
        ("-x^2", -(x * x)),
        ("(-x)^2", x * x),
        ("(-2)^3 + (-2)^2", -4.0),
        ("2^-3", 0.125),
        ("2^3^2", 512.0),
        ("x^y^E", x.powf(f64::NAN)),
        ("x^E", x.powf(e)),
        ("x^-2", 1.0 / (x * x)),
        ("x^2.5", x.powf(2.5)),
        ("2^x*3", 2.0_f64.powf(x) * 3.0),
        ("--x - -+-y", x - y),
        ("3 - x", 3.0 - x),
        ("3/x", 3.0 / x),
        ("3*x/4 + 1", 3.0 * x / 4.0 + 1.0),
        ("exp(-x)*ln(E) + log10(x)", (-x).exp() * e.ln() + x.log10()),
        (
            "expm1(x) - log1p(x) + sqrt(x)",
            x.exp_m1() - x.ln_1p() + x.sqrt(),
        ),
        ("sin(x)+cos(x)+tan(y)", x.sin() + x.cos() + y.tan()),
        ("asin(y)+acos(y)+atan(x)", y.asin() + y.acos() + x.atan()),
        ("sinh(x)+cosh(x)+tanh(x)", x.sinh() + x.cosh() + x.tanh()),
        ("tanh(1000*x) + tanh(-1000*x)", 0.0),
        ("pos(x) + pos(y)", x),
        ("2*pi", std::f64::consts::TAU),
        (" ( (x) )\n* 2 ", 2.0 * x),
        ("1+(2+(3+(4+(5+(6+(7+(8+(9+x))))))))", 45.0 + x),
        ("x+(y*(x+(y*(x+(y*(x+(y*(x+y*E))))))))", {
            (0..4).fold(x + y * e, |inner, _| x + y * inner)
        }),
    ] {
        let found = value(text, &[x, y, e]);
        let same = (found - expected).abs() <= 4e-16 * expected.abs();
        assert!(
            same || (found.is_nan() && expected.is_nan()),
            "{text}: {found} {expected}"
        );
    }
}

#[test]
fn names_are_the_callers() {
    let constants = [("mu".to_string(), 0.4), ("N".to_string(), 8.0)];
    let difference = Difference {
        variable: 0,
        less: 3.0,
        value: 1,
    };
    let names = Names {
        variables: &["I1"],
        constants: &constants,
        differences: &[difference],
    };
    let read = |text| Expression::parse(text, names).unwrap();
    // the difference is taken as given: 1e-20 would be lost in I1
    for (text, expected) in [
        ("mu/2*(I1 - 3)", 0.2e-20),
        ("mu/2*(I1 - 6/2)", 0.2e-20),
        ("(3 - I1)", -1e-20),
        ("-3 + I1", 1e-20),
        ("I1 - 3.0 - 0", 1e-20),
        ("(I1 - 3)^2", 1e-40),
        ("I1 - 2", 1.0),
    ] {
        let found: f64 = read(text).evaluate(&[3.0, 1e-20]);
        assert!((found / expected - 1.0).abs() < 1e-15, "{text}: {found}");
    }
    let one = read("mu*(I1 - 3)");
    assert!(!one.uses(0) && one.uses(1));
    assert_eq!(one.constants(), [0]);
    assert!(read("mu*I1*N^2 - mu").constants() == [0, 1]);
    assert_eq!(
        read("I1").evaluate::<f64>(&[]).to_bits(),
        f64::NAN.to_bits()
    );
    assert_eq!(unusable("c10", &["I1"]), None);
    for (name, says) in [
        ("I1", "variable"),
        ("exp", "function"),
        ("pi", "3.14"),
        ("1a", "letter"),
        ("", "letter"),
        ("k-1", "letter"),
    ] {
        assert!(unusable(name, &["I1"]).unwrap().contains(says), "{name}");
    }
}

// Byte where the fault begins, the message, the hint.
#[test]
fn errors_say_where_what_and_what_instead() {
    for (text, position, says, hint) in [
        (
            "",
            0,
            "the text ends at the start; expected a number, a name",
            "",
        ),
        (
            "x + ",
            4,
            "the text ends at character 5, after \"x + \"; expected a number",
            "",
        ),
        (
            "x + z",
            4,
            "unknown name \"z\" at character 5, after \"x + \"; expected one of x, y, E, pi",
            "did you mean `x`?",
        ),
        (
            "2 x",
            2,
            "found \"x\" at character 3, after \"2 \"; expected an operator or the end",
            "multiplication is written `*`",
        ),
        ("2x", 1, "found \"x\"", "multiplication"),
        ("x(y)", 0, "\"x\" is no function", "multiplication"),
        (
            "(x + y",
            6,
            "the text ends at character 7, after \"(x + y\"; expected an operator, or \")\" for the \"(\" at character 1",
            "",
        ),
        (
            "x + y)",
            5,
            "found \")\" at character 6, after \"x + y\"; expected the end, or an operator: no \"(\" is open",
            "",
        ),
        (
            "exp x",
            3,
            "found \"x\" after \"exp\" at character 4, after \"exp\"; expected \"(\": exp is a function",
            "",
        ),
        (
            "Exp(x)",
            0,
            "unknown function \"Exp\"",
            "did you mean `exp`?",
        ),
        (
            "log(x)",
            0,
            "unknown function \"log\"",
            "`ln` is the natural logarithm",
        ),
        ("abs(x)", 0, "unknown function \"abs\"", "`pos(x)`"),
        ("max(x, 0)", 0, "unknown function \"max\"", "pos"),
        ("x ** 2", 2, "found \"**\"", "x^y"),
        ("0,5*x", 1, "found ','", "decimal mark is a point"),
        ("1.2.3", 0, "\"1.2.\" has two decimal points", ""),
        ("1e999", 0, "\"1e999\" is beyond the range of a double", ""),
        ("2e-999 ", 0, "beyond the range", ""),
        ("x + .", 4, "found \".\"", ""),
        (
            "W = x",
            2,
            "found '=' at character 3",
            "right-hand side alone",
        ),
        ("[x]", 0, "found '['", "round parentheses"),
        ("x·y", 1, "found '·'", "`*`"),
        ("1/0 + x", 1, "this part of constants is inf", ""),
        ("x*ln(-1)", 2, "this part of constants is NaN", ""),
        ("x + *y", 4, "found \"*\" at character 5", ""),
        ("()", 1, "found \")\" at character 2", ""),
        ("ä", 0, "found 'ä'", ""),
    ] {
        let error = Expression::parse(text, names()).expect_err(text);
        assert_eq!(error.position, position, "{text}: {}", error.in_text(text));
        let message = error.in_text(text);
        assert!(message.contains(says), "{text}: {message}");
        assert!(error.hint.contains(hint), "{text}: {}", error.hint);
    }
}

// Red when nesting or length is not limited: the stack of a thread of 256 KiB would be used up.
#[test]
fn hostile_texts_exhaust_nothing() {
    let hostile = |open: &str, close: &str, n: usize| open.repeat(n) + "x" + &close.repeat(n);
    let read = move || {
        for (open, close) in [
            ("(", ")"),
            ("-", ""),
            ("2^", ""),
            ("exp(", ")"),
            ("1+(", ")"),
            ("-(", ")^2"),
        ] {
            let error = Expression::parse(&hostile(open, close, 1500), names()).expect_err(open);
            assert!(
                error.found.contains("nested deeper than 100"),
                "{}",
                error.found
            );
            let fine = Expression::parse(&hostile(open, close, 40), names()).expect("40 levels");
            assert!(
                !fine
                    .evaluate(&[Dual2::from_re(DualSVec64::<3>::from(0.01))])
                    .re
                    .re
                    .is_nan()
            );
        }
        let long = "x+".repeat(4999) + "x";
        let sum = Expression::parse(&long, names()).expect("no nesting");
        assert_eq!(sum.evaluate(&[1.0]), 5000.0);
        let error = Expression::parse(&"x+".repeat(5001), names()).expect_err("too long");
        assert!(error.found.contains("more than 10000"));
        let error = Expression::parse(&"q".repeat(9000), names()).expect_err("one word");
        assert!(error.in_text("").len() < 200);
    };
    let thread = std::thread::Builder::new()
        .stack_size(1 << 18)
        .spawn(read)
        .unwrap();
    thread.join().unwrap();
}

#[test]
fn a_tension_only_term_has_a_switch_and_a_flat_side() {
    let read = Expression::parse("x + pos(y - 1)^1.5 + pos(x*y)", names()).unwrap();
    assert_eq!(read.switches(), 2);
    assert_eq!(read.switch(0, &[1.0, 3.5]), 2.5);
    assert_eq!(read.switch(1, &[2.0, 3.0]), 6.0);
    assert!(read.switch(2, &[2.0, 3.0]).is_nan());
    let at = |y: f64| read.evaluate(&[Dual2::from(-1.0), Dual2::<f64>::from(y).derivative()]);
    for y in [0.5, 1.0] {
        assert_eq!((at(y).re, at(y).v1, at(y).v2), (-1.0, 0.0, 0.0));
    }
    assert!((at(5.0).v2 - 0.75 / 2.0).abs() < 1e-15);
}

// Where a function has no value its derivative has none: ln(x)' = 1/x is finite at x < 0.
#[test]
fn outside_of_a_function_the_derivative_is_nan_too() {
    for text in [
        "ln(x)",
        "log10(x)",
        "log1p(x-1)",
        "sqrt(x)",
        "x^0.5",
        "asin(1-x)",
        "acos(1-x)",
        "(x)^E",
        "pos(ln(x))",
    ] {
        let read = Expression::parse(text, names()).unwrap();
        let at = read.evaluate(&[
            Dual64::from(-1.0).derivative(),
            Dual64::from(0.0),
            Dual64::from(2.5),
        ]);
        assert!(at.re.is_nan() && at.eps.is_nan(), "{text}: {at}");
    }
}

// Against hand derivatives; x^n at 0 is where chain rules through x^(n-3) fail.
#[test]
fn powers_have_their_derivatives_at_zero() {
    for (text, first, second) in [
        ("x^3", 0.0, 0.0),
        ("x^2", 0.0, 2.0),
        ("x^1", 1.0, 0.0),
        ("x^0", 0.0, 0.0),
        ("x^2.5", 0.0, 0.0),
        ("(x+2)^-1", -0.25, 0.25),
        ("(x+1)^100000", 1e5, 99999.0 * 1e5),
    ] {
        let read = Expression::parse(text, names()).unwrap();
        let at = read.evaluate(&[Dual2::<f64>::from(0.0).derivative()]);
        assert!((at.v1 - first).abs() <= 1e-14 * first.abs(), "{text}: {at}");
        assert!(
            (at.v2 - second).abs() <= 1e-14 * second.abs(),
            "{text}: {at}"
        );
    }
}

type Inner = DualSVec64<3>;
type Nested = DualVec<Inner, Const<3>>;

/// The three coordinates, each with its own first and second derivatives.
fn nested(at: [f64; 3]) -> [Nested; 3] {
    let mut all = [Nested::from(0.0); 3];
    for (i, x) in all.iter_mut().enumerate() {
        let inner = DualSVec64::<3>::from_re(at[i]).derivative(i);
        let mut eps = SVector::<Inner, 3>::from_element(Inner::from(0.0));
        eps[i] = Inner::from(1.0);
        *x = Nested::new(inner, Derivative::some(eps));
    }
    all
}

// A displacement field needs F and its gradient: d2u/dXidXj over nested duals, against hand formulas.
#[test]
fn second_derivatives_over_nested_duals() {
    let (x, y, e) = (0.7_f64, -1.3_f64, 1.9_f64);
    let found = Expression::parse("x^2*sin(y) + exp(x*E)/y + x^E", names())
        .unwrap()
        .evaluate(&nested([x, y, e]));
    let grow = (x * e).exp();
    let power = x.powf(e);
    let first = [
        2.0 * x * y.sin() + e * grow / y + e * power / x,
        x * x * y.cos() - grow / (y * y),
        x * grow / y + power * x.ln(),
    ];
    let xy = 2.0 * x * y.cos() - e * grow / (y * y);
    let xe = (1.0 + x * e) * grow / y + power / x * (1.0 + e * x.ln());
    let ye = -x * grow / (y * y);
    let xx = 2.0 * y.sin() + e * e * grow / y + e * (e - 1.0) * power / (x * x);
    let yy = -x * x * y.sin() + 2.0 * grow / y.powi(3);
    let ee = x * x * grow / y + power * x.ln().powi(2);
    let second = [[xx, xy, xe], [xy, yy, ye], [xe, ye, ee]];
    let outer = found.eps.unwrap_generic(Const::<3>, Const::<1>);
    for i in 0..3 {
        assert!((outer[i].re / first[i] - 1.0).abs() < 3e-15, "{i}");
        let inner = outer[i].eps.unwrap_generic(Const::<3>, Const::<1>);
        for j in 0..3 {
            assert!(
                (inner[j] / second[i][j] - 1.0).abs() < 5e-15,
                "{i}{j}: {} {}",
                inner[j],
                second[i][j]
            );
        }
    }
}

/// Equal to a few digits, or both beyond the range.
fn same(a: f64, b: f64) -> bool {
    a == b
        || (a - b).abs() <= 1e-9 * (1.0 + a.abs().max(b.abs()))
        || a.is_infinite()
        || b.is_infinite()
}

proptest! {
    // Red on any panic; a text that is read gives a number, a text that is not an error within it.
    #[test]
    fn any_text_is_an_expression_or_an_error(text in "[-+*/^() .0-9eExyp(os)ln,pi\u{e4}]{0,60}|\\PC{0,40}") {
        match Expression::parse(&text, names()) {
            Ok(read) => {
                let plain: f64 = read.evaluate(&[0.3, -1.2, 2.0]);
                let dual = read.evaluate(&[Dual64::from(0.3).derivative(), Dual64::from(-1.2), Dual64::from(2.0)]);
                prop_assert!(plain.is_nan() || dual.re.is_nan() || same(plain, dual.re), "{text}: {plain} {dual}");
            }
            Err(error) => {
                prop_assert!(error.position <= text.len());
                prop_assert!(text.is_char_boundary(error.position) || error.position == 0);
                prop_assert!(!error.in_text(&text).is_empty() && !error.in_text(&text).contains('\n'));
            }
        }
    }

    // Texts made of sound parts, so that the evaluator is reached.
    #[test]
    fn sound_texts_are_read(parts in proptest::collection::vec(("(x|y|E|pi|2|\\.5|1e-3|ln\\(x\\)|pos\\(y\\)|\\(x-3\\)|-x)", "[-+*/^]"), 1..40)) {
        let mut text = String::new();
        for (operand, operator) in &parts {
            text = text + operand + operator;
        }
        text += "x";
        match Expression::parse(&text, names()) {
            Ok(read) => { read.evaluate(&[Dual64::from(1.3), Dual64::from(0.8).derivative(), Dual64::from(0.9)]); }
            Err(error) => prop_assert!(error.found.contains("constants"), "{text}: {error}"),
        }
    }
}
