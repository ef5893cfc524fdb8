//! Real numbers that powers are reckoned in: plain ones, and ones that carry a derivative.

use std::ops::{Add, Div, Mul, Sub};

/// A real quantity.
pub(crate) trait Real:
    Copy + Add<Output = Self> + Sub<Output = Self> + Mul<Output = Self> + Div<Output = Self>
{
    /// A constant.
    fn of(value: f64) -> Self;
    /// The plain value.
    fn value(self) -> f64;
    /// The natural logarithm.
    fn ln(self) -> Self;
    /// Zero for a value below it.
    fn at_least_zero(self) -> Self;
    /// Whether it is a number throughout.
    fn is_number(self) -> bool;
    /// The product with a constant.
    fn scaled(self, factor: f64) -> Self {
        self * Self::of(factor)
    }
}

impl Real for f64 {
    fn of(value: f64) -> f64 {
        value
    }

    fn value(self) -> f64 {
        self
    }

    fn ln(self) -> f64 {
        f64::ln(self)
    }

    fn at_least_zero(self) -> f64 {
        self.max(0.0)
    }

    fn is_number(self) -> bool {
        self.is_finite()
    }
}

/// A value with its derivative in one variable.
#[cfg(test)]
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Slope {
    pub(crate) value: f64,
    pub(crate) slope: f64,
}

#[cfg(test)]
impl Add for Slope {
    type Output = Slope;
    fn add(self, other: Slope) -> Slope {
        Slope { value: self.value + other.value, slope: self.slope + other.slope }
    }
}

#[cfg(test)]
impl Sub for Slope {
    type Output = Slope;
    fn sub(self, other: Slope) -> Slope {
        Slope { value: self.value - other.value, slope: self.slope - other.slope }
    }
}

#[cfg(test)]
impl Mul for Slope {
    type Output = Slope;
    fn mul(self, other: Slope) -> Slope {
        let slope = self.slope * other.value + self.value * other.slope;
        Slope { value: self.value * other.value, slope }
    }
}

#[cfg(test)]
impl Div for Slope {
    type Output = Slope;
    fn div(self, other: Slope) -> Slope {
        let value = self.value / other.value;
        Slope { value, slope: (self.slope - value * other.slope) / other.value }
    }
}

#[cfg(test)]
impl Real for Slope {
    fn of(value: f64) -> Slope {
        Slope { value, slope: 0.0 }
    }

    fn value(self) -> f64 {
        self.value
    }

    fn ln(self) -> Slope {
        Slope { value: self.value.ln(), slope: self.slope / self.value }
    }

    fn at_least_zero(self) -> Slope {
        if self.value < 0.0 { Slope::of(0.0) } else { self }
    }

    fn is_number(self) -> bool {
        self.value.is_finite() && self.slope.is_finite()
    }
}
