//! Numbers that carry one derivative along, so that a formula is written once and yields both.

use std::ops::{Add, Mul};

/// What the polynomials of this folder need of a number.
pub(super) trait Real: Copy + Add<Output = Self> + Mul<Output = Self> {
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
    /// The variable itself, scaled: a value whose derivative is `slope`.
    pub fn variable(value: f64, slope: f64) -> Self {
        Self { value, slope }
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

impl Mul for Dual {
    type Output = Self;
    #[inline(always)]
    fn mul(self, o: Self) -> Self {
        Self { value: self.value * o.value, slope: self.slope * o.value + self.value * o.slope }
    }
}
