//! The program of an expression: operations in postfix order on a stack of numbers.

use super::functions::{Function, power, whole_power};
use num_dual::DualNum;
use std::ops::Range;

/// Deepest stack that is kept off the heap.
const SMALL: usize = 8;

/// An operator between two numbers.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Binary {
    Add,
    Subtract,
    Multiply,
    Divide,
    Power,
}

impl Binary {
    pub fn of<D: DualNum<Primitive = f64> + Copy>(self, a: D, b: D) -> D {
        match self {
            Self::Add => a + b,
            Self::Subtract => a - b,
            Self::Multiply => a * b,
            Self::Divide => a / b,
            Self::Power => raise(a, b),
        }
    }
}

/// One step: it takes its operands from the stack and leaves its result there.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Op {
    Constant(f64),
    /// The value of this index.
    Value(usize),
    Join(Binary),
    Negate,
    Shift(f64),
    Scale(f64),
    Ratio(f64),
    WholePower(i32),
    ConstantPower(f64),
    /// The same of `pos(...)`, which is zero with all its derivatives where the argument is not positive.
    PowerOfPos(f64),
    Call(Function),
}

/// a^b by exp(b ln a), mended to the last bit of `powf`; NaN for a < 0.
fn raise<D: DualNum<Primitive = f64> + Copy>(a: D, b: D) -> D {
    let raised = (Function::Ln.of(a) * b).exp();
    let mend = a.re().powf(b.re()) / raised.re();
    if mend.is_finite() {
        raised * mend
    } else {
        raised
    }
}

#[derive(Debug, Clone, PartialEq)]
pub(super) struct Program {
    code: Vec<Op>,
    /// Deepest stack.
    depth: usize,
    /// The code of the argument of every `pos`.
    pub switches: Vec<Range<usize>>,
}

impl Program {
    /// `code` leaves one number on the stack.
    pub fn new(code: Vec<Op>) -> Self {
        // where the code of each number on the stack begins
        let mut starts: Vec<usize> = Vec::new();
        let (mut depth, mut switches) = (0, Vec::new());
        for (at, op) in code.iter().enumerate() {
            match op {
                Op::Constant(_) | Op::Value(_) => starts.push(at),
                Op::Join(_) => {
                    starts.pop();
                }
                Op::Call(Function::Pos) => {
                    switches.extend(starts.last().map(|&start| start..at));
                }
                _ => {}
            }
            depth = depth.max(starts.len());
        }
        Self {
            code,
            depth,
            switches,
        }
    }

    pub fn uses(&self, value: usize) -> bool {
        self.code.contains(&Op::Value(value))
    }

    pub fn run<D: DualNum<Primitive = f64> + Copy>(&self, values: &[D]) -> D {
        self.run_part(0..self.code.len(), values)
    }

    /// The argument of a `pos`; NaN when there is none such.
    pub fn switch(&self, switch: usize, values: &[f64]) -> f64 {
        let part = self.switches.get(switch);
        part.map_or(f64::NAN, |part| self.run_part(part.clone(), values))
    }

    fn run_part<D: DualNum<Primitive = f64> + Copy>(&self, part: Range<usize>, values: &[D]) -> D {
        if self.depth <= SMALL {
            let mut stack = [D::from(0.0); SMALL];
            run(&self.code[part], values, &mut stack)
        } else {
            let mut stack = vec![D::from(0.0); self.depth];
            run(&self.code[part], values, &mut stack)
        }
    }
}

/// Runs `code` on a stack that is deep enough for it.
fn run<D: DualNum<Primitive = f64> + Copy>(code: &[Op], values: &[D], stack: &mut [D]) -> D {
    let mut count = 0;
    for op in code {
        match *op {
            Op::Constant(value) => {
                stack[count] = D::from(value);
                count += 1;
            }
            Op::Value(index) => {
                let value = values.get(index).copied();
                stack[count] = value.unwrap_or_else(|| D::from(f64::NAN));
                count += 1;
            }
            Op::Join(binary) => {
                count -= 1;
                stack[count - 1] = binary.of(stack[count - 1], stack[count]);
            }
            one => stack[count - 1] = alone(one, stack[count - 1]),
        }
    }
    stack[0]
}

/// An operation on the number on top.
fn alone<D: DualNum<Primitive = f64> + Copy>(op: Op, x: D) -> D {
    match op {
        Op::Negate => -x,
        Op::Shift(by) => x + by,
        Op::Scale(by) => x * by,
        Op::Ratio(by) => x / by,
        Op::WholePower(n) => whole_power(x, n),
        Op::ConstantPower(c) => power(x, c),
        Op::PowerOfPos(c) if c > 0.0 && x.re() == 0.0 => D::from(0.0),
        Op::PowerOfPos(c) => power(x, c),
        Op::Call(function) => function.of(x),
        Op::Constant(_) | Op::Value(_) | Op::Join(_) => x,
    }
}
