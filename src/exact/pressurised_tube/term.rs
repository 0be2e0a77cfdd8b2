//! A number with its exact derivatives by the two unknowns, and the size of what it was summed from.

use std::ops::{Add, Mul, Sub};

/// A number with its derivatives by `g` and `e`, and the sum of the sizes of its terms.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub(super) struct Term {
    pub value: f64,
    pub by_g: f64,
    pub by_e: f64,
    /// Sum of |terms|, each times the digits its law loses: what round-off is measured against.
    pub size: f64,
}

impl Term {
    /// A number that depends on nothing.
    pub fn constant(value: f64) -> Self {
        Self {
            value,
            size: value.abs(),
            ..Self::default()
        }
    }

    /// `by_g dg + by_e de` about `value`, taken as exact.
    pub fn exact(value: f64, by_g: f64, by_e: f64) -> Self {
        Self {
            value,
            by_g,
            by_e,
            size: 0.0,
        }
    }

    /// Times a constant.
    pub fn times(self, factor: f64) -> Self {
        Self {
            value: self.value * factor,
            by_g: self.by_g * factor,
            by_e: self.by_e * factor,
            size: self.size * factor.abs(),
        }
    }

    fn mapped(self, value: f64, slope: f64) -> Self {
        Self {
            value,
            by_g: slope * self.by_g,
            by_e: slope * self.by_e,
            size: value.abs() + slope.abs() * self.size,
        }
    }

    /// e^x.
    pub fn exp(self) -> Self {
        let value = self.value.exp();
        self.mapped(value, value)
    }

    /// e^x - 1.
    pub fn exp_m1(self) -> Self {
        self.mapped(self.value.exp_m1(), self.value.exp())
    }
}

impl Add for Term {
    type Output = Self;
    fn add(self, other: Self) -> Self {
        Self {
            value: self.value + other.value,
            by_g: self.by_g + other.by_g,
            by_e: self.by_e + other.by_e,
            size: self.size + other.size,
        }
    }
}

impl Sub for Term {
    type Output = Self;
    fn sub(self, other: Self) -> Self {
        self + other.times(-1.0)
    }
}

impl Mul for Term {
    type Output = Self;
    fn mul(self, other: Self) -> Self {
        Self {
            value: self.value * other.value,
            by_g: self.by_g * other.value + self.value * other.by_g,
            by_e: self.by_e * other.value + self.value * other.by_e,
            size: self.size * other.value.abs() + self.value.abs() * other.size,
        }
    }
}
