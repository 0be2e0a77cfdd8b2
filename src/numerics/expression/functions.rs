//! Functions an expression can call. No `abs`, `min`, `max`: their derivative is not one number where they turn; `pos` is
//! there for terms that act in tension only, and its turns can be asked for.

use num_dual::DualNum;

/// A function of one number.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Function {
    Exp,
    Expm1,
    Ln,
    Log10,
    Log1p,
    Sqrt,
    Sin,
    Cos,
    Tan,
    Asin,
    Acos,
    Atan,
    Sinh,
    Cosh,
    Tanh,
    /// x where x > 0, else 0, derivatives included.
    Pos,
}

const ALL: [(&str, Function); 16] = [
    ("exp", Function::Exp),
    ("expm1", Function::Expm1),
    ("ln", Function::Ln),
    ("log10", Function::Log10),
    ("log1p", Function::Log1p),
    ("sqrt", Function::Sqrt),
    ("sin", Function::Sin),
    ("cos", Function::Cos),
    ("tan", Function::Tan),
    ("asin", Function::Asin),
    ("acos", Function::Acos),
    ("atan", Function::Atan),
    ("sinh", Function::Sinh),
    ("cosh", Function::Cosh),
    ("tanh", Function::Tanh),
    ("pos", Function::Pos),
];

/// Functions of other languages, and what to write here.
const FOREIGN: [(&str, &str); 8] = [
    (
        "log",
        "`ln` is the natural logarithm, `log10` that to base 10",
    ),
    (
        "lg",
        "`ln` is the natural logarithm, `log10` that to base 10",
    ),
    (
        "abs",
        "there is no `abs`, it has no derivative at 0; for a term in tension only write `pos(x)`, x where x > 0 else 0",
    ),
    (
        "max",
        "there is no `max`; `pos(x)` is x where x > 0, else 0",
    ),
    (
        "min",
        "there is no `min`; `pos(x)` is x where x > 0, else 0",
    ),
    ("pow", "powers are written `x^y`"),
    ("arctan", "write `atan`"),
    ("ramp", "`pos(x)` is x where x > 0, else 0"),
];

impl Function {
    pub fn from_name(name: &str) -> Option<Self> {
        ALL.iter().find(|(n, _)| *n == name).map(|(_, f)| *f)
    }

    /// Every name, in the order of the page.
    pub fn names() -> impl Iterator<Item = &'static str> {
        ALL.iter().map(|(name, _)| *name)
    }

    /// What to write instead of a function that other languages have.
    pub(super) fn instead_of(name: &str) -> Option<&'static str> {
        let lower = name.to_lowercase();
        let found = FOREIGN.iter().find(|(foreign, _)| *foreign == lower);
        found.map(|(_, hint)| *hint)
    }

    /// The value at `x`.
    pub fn of<D: DualNum<Primitive = f64> + Copy>(self, x: D) -> D {
        match self {
            Self::Exp => x.exp(),
            Self::Expm1 => x.exp_m1(),
            Self::Ln => above(x, 0.0).ln(),
            Self::Log10 => above(x, 0.0).log10(),
            Self::Log1p => above(x, -1.0).ln_1p(),
            Self::Sqrt => x.sqrt(),
            Self::Sin => x.sin(),
            Self::Cos => x.cos(),
            Self::Tan => x.tan(),
            Self::Asin => x.asin(),
            Self::Acos => x.acos(),
            Self::Atan => x.atan(),
            Self::Sinh => x.sinh(),
            Self::Cosh => x.cosh(),
            // sinh/cosh is inf/inf far out, where the slope is below 1e-300
            Self::Tanh if x.re().abs() > 350.0 => D::from(x.re().signum()),
            Self::Tanh => x.tanh(),
            // a NaN is kept
            Self::Pos if x.re() <= 0.0 => D::from(0.0),
            Self::Pos => x,
        }
    }
}

/// `x`, or NaN in all its parts where it is below `least`: a logarithm's derivative is finite there, and would be taken.
fn above<D: DualNum<Primitive = f64> + Copy>(x: D, least: f64) -> D {
    if x.re() < least { x * f64::NAN } else { x }
}

/// x^n by squaring: right at x = 0 and for any n, where a chain rule through x^(n-3) is not.
pub(super) fn whole_power<D: DualNum<Primitive = f64> + Copy>(x: D, n: i32) -> D {
    let (mut square, mut left) = (x, n.unsigned_abs());
    let mut power: Option<D> = None;
    while left > 0 {
        if left % 2 == 1 {
            power = Some(power.map_or(square, |p| p * square));
        }
        left /= 2;
        if left > 0 {
            square = square * square;
        }
    }
    let power = power.unwrap_or_else(|| D::from(1.0));
    if n < 0 { power.recip() } else { power }
}

/// x^c for a constant c that is no whole number.
pub(super) fn power<D: DualNum<Primitive = f64> + Copy>(x: D, c: f64) -> D {
    // the chain rule is inf*0 at 0; derivatives that exist there are zero
    if x.re() == 0.0 && c > D::NDERIV as f64 {
        return D::from(0.0);
    }
    x.powf(c)
}
