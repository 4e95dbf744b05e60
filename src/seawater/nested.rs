//! Polynomials as nested multiplication, over plain numbers and over numbers that carry a derivative.

use std::ops::{Add, Mul};

/// What a polynomial needs of the number it is a function of.
pub(super) trait Real:
    Copy + Add<Output = Self> + Mul<Output = Self> + Add<f64, Output = Self> + Mul<f64, Output = Self>
{
    /// The constant `c`.
    fn constant(c: f64) -> Self;
}

impl Real for f64 {
    #[inline(always)]
    fn constant(c: f64) -> Self {
        c
    }
}

/// A value and its derivative with respect to one variable.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Dual {
    /// The value.
    pub value: f64,
    /// Its derivative.
    pub slope: f64,
}

impl Dual {
    /// The variable itself.
    #[inline(always)]
    pub fn variable(value: f64) -> Self {
        Self { value, slope: 1.0 }
    }
}

impl Real for Dual {
    #[inline(always)]
    fn constant(c: f64) -> Self {
        Self { value: c, slope: 0.0 }
    }
}

impl Add for Dual {
    type Output = Self;
    #[inline(always)]
    fn add(self, o: Self) -> Self {
        Self { value: self.value + o.value, slope: self.slope + o.slope }
    }
}

impl Add<f64> for Dual {
    type Output = Self;
    #[inline(always)]
    fn add(self, c: f64) -> Self {
        Self { value: self.value + c, slope: self.slope }
    }
}

impl Mul for Dual {
    type Output = Self;
    #[inline(always)]
    fn mul(self, o: Self) -> Self {
        Self { value: self.value * o.value, slope: self.slope * o.value + self.value * o.slope }
    }
}

impl Mul<f64> for Dual {
    type Output = Self;
    #[inline(always)]
    fn mul(self, c: f64) -> Self {
        Self { value: self.value * c, slope: self.slope * c }
    }
}

/// `sum c_n x^n`.
#[inline(always)]
pub(super) fn nested<T: Real, const N: usize>(x: T, coefficients: &[f64; N]) -> T {
    let mut sum = T::constant(coefficients[N - 1]);
    for n in (0..N - 1).rev() {
        sum = sum * x + coefficients[n];
    }
    sum
}

/// `sum c_n x^n` with coefficients that are functions of something else.
#[inline(always)]
pub(super) fn nested_in<T: Real, const N: usize>(x: f64, coefficients: [T; N]) -> T {
    let mut sum = coefficients[N - 1];
    for n in (0..N - 1).rev() {
        sum = sum * x + coefficients[n];
    }
    sum
}

/// `sum n c_n x^(n-1)`, the derivative of [`nested_in`] with respect to `x`.
#[inline(always)]
pub(super) fn nested_slope<const N: usize>(x: f64, coefficients: [f64; N]) -> f64 {
    let mut sum = 0.0;
    for n in (1..N).rev() {
        sum = sum * x + n as f64 * coefficients[n];
    }
    sum
}
