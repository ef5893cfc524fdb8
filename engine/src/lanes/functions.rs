//! Sine and cosine of half-turns, and powers of two.

use std::f64::consts::LN_2;

use pulp::{Simd, bytemuck};

use super::Lanes;

/// P and Q of tan πr = r Q(r²)/P(r²) for |r| ≤ ½, to 9e-16 in the angle, with P² + r²Q² between 1 and 1.18.
/// `tests/reference/lanes.py` finds these and the next, and how exact they are.
const COSINE: [f64; 5] =
    [1.0, -4.607759808702022, 2.506397376032464, -0.30264905661510644, 0.004865966870669156];
const SINE: [f64; 4] = [3.1415926535897913, -4.140278804423619, 1.0535457198156384, -0.054858467918728476];
/// (2^f − 1)/f for |f| ≤ ½.
const GROWTH: [f64; 11] = [
    LN_2,
    0.24022650695910155,
    0.055504108664819925,
    0.009618129107588334,
    0.0013333558146789918,
    0.00015403530462516503,
    1.5252733489986638e-05,
    1.3215433088524859e-06,
    1.0178198023450395e-07,
    7.074105815840354e-09,
    4.4352823572582856e-10,
];
/// Up to this many bits the series of (2^f − 1)/f, whose terms are (ln 2)ⁿ/n!, needs seven terms only.
pub(crate) const FEW_BITS: f64 = 0.04;
const WEAK_GROWTH: [f64; 7] = [
    LN_2,
    0.24022650695910072,
    0.05550410866482158,
    0.009618129107628477,
    0.0013333558146428443,
    0.0001540353039338161,
    1.525273380405984e-05,
];
/// Added to a number below 2⁵¹ in size and taken off again it leaves the nearest whole one.
const WHOLE: f64 = 6_755_399_441_055_744.0;

/// A polynomial, its coefficients from the constant on.
#[inline(always)]
fn polynomial<S: Simd, const N: usize>(coefficients: &[f64; N], x: Lanes<S>) -> Lanes<S> {
    let mut sum = x.of(coefficients[N - 1]);
    let mut at = N - 1;
    while at > 0 {
        at -= 1;
        sum = sum.mul_add(x, x.of(coefficients[at]));
    }
    sum
}

#[inline(always)]
fn rounded<S: Simd>(x: Lanes<S>) -> Lanes<S> {
    (x + x.of(WHOLE)) - x.of(WHOLE)
}

/// The sine and the cosine of `turns` half-turns up to one factor, and the whole half-turns taken off.
///
/// The factor is positive, up to the square root of 1.18, where the whole half-turns are even, and negative where they are odd.
/// A reflectance depends on ratios alone: neither the factor's size nor its sign is ever needed for it.
#[inline(always)]
pub(crate) fn half_turn<S: Simd>(turns: Lanes<S>) -> (Lanes<S>, Lanes<S>, Lanes<S>) {
    let whole = rounded(turns);
    let rest = turns - whole;
    let square = rest * rest;
    (rest * polynomial(&SINE, square), polynomial(&COSINE, square), whole)
}

/// 2^−t and 1 − 2^−t, each to its own last digits, for t ≥ 0.
#[inline(always)]
pub(crate) fn decay<S: Simd>(bits: Lanes<S>) -> (Lanes<S>, Lanes<S>) {
    let exponent = -(bits.min(bits.of(1020.0)));
    let whole = rounded(exponent);
    let rest = exponent - whole;
    let scale = power_of_two(whole);
    let growth = rest * polynomial(&GROWTH, rest) * scale;
    (scale + growth, (scale.of(1.0) - scale) - growth)
}

/// The same for t up to [`FEW_BITS`], where fewer terms are as exact.
#[inline(always)]
pub(crate) fn weak_decay<S: Simd>(bits: Lanes<S>) -> (Lanes<S>, Lanes<S>) {
    let rest = -bits;
    let growth = rest * polynomial(&WEAK_GROWTH, rest);
    (rest.of(1.0) + growth, -growth)
}

/// 2^n for whole n from −1022 to 1023.
#[inline(always)]
pub(crate) fn power_of_two<S: Simd>(whole: Lanes<S>) -> Lanes<S> {
    // A number of 2⁵² and more has its whole part in its lowest bits; n + 1023 is the exponent's field.
    let mut shifted = (whole + whole.of(4_503_599_627_370_496.0 + 1023.0)).values;
    let bits: &mut [u64] = bytemuck::cast_slice_mut(std::slice::from_mut(&mut shifted));
    for bits in bits {
        *bits <<= 52;
    }
    Lanes { values: shifted, ..whole }
}

#[cfg(test)]
mod tests {
    use super::*;
    use pulp::{Arch, WithSimd};
    use std::f64::consts::PI;

    /// Applies to each of 64 values what a kernel would.
    struct Each<'a> {
        from: &'a [f64],
        to: [&'a mut [f64]; 5],
    }

    impl WithSimd for Each<'_> {
        type Output = ();
        #[inline(always)]
        fn with_simd<S: Simd>(self, simd: S) {
            let Each { from, to: [sine, cosine, whole, decayed, lost] } = self;
            for at in 0..from.len() / Lanes::<S>::COUNT {
                let x = Lanes::load(simd, from, at);
                let (s, c, n) = half_turn(x);
                s.store(sine, at);
                c.store(cosine, at);
                n.store(whole, at);
                let (e, l) = decay(x.abs());
                let (weak, weakly) = weak_decay(x.abs());
                let bound = x.of(FEW_BITS);
                let l = x.abs().where_less(bound, weakly, l);
                let e = x.abs().where_less(bound, weak, e);
                e.store(decayed, at);
                l.store(lost, at);
            }
        }
    }

    #[test]
    fn sine_cosine_and_decay_are_the_librarys() {
        for scale in [1e-12, 1e-3, 0.04, 0.4, 1.0, 30.0, 2000.0] {
            let from: Vec<f64> = (0..64).map(|at| scale * (f64::from(at) - 31.3) / 31.0).collect();
            let mut to = vec![vec![0.0; 64]; 5];
            let [a, b, c, d, e] = &mut to[..] else { unreachable!() };
            Arch::new().dispatch(Each { from: &from, to: [a, b, c, d, e] });
            for (at, x) in from.iter().enumerate() {
                let sign = if to[2][at] % 2.0 == 0.0 { 1.0 } else { -1.0 };
                let size = to[0][at].hypot(to[1][at]);
                assert!((1.0 - 1e-12..1.18_f64.sqrt()).contains(&size), "{x} {size}");
                // The library's own argument is rounded when it is multiplied by π.
                let (sine, cosine) = (PI * (x - to[2][at])).sin_cos();
                assert!((to[0][at] / size - sine).abs() < 1e-15, "{x}");
                assert!((to[1][at] / size - cosine).abs() < 1e-15, "{x}");
                assert!((sign * sine - (PI * x).sin()).abs() < 1e-12);
                let decayed = (-x.abs()).exp2();
                assert!((to[3][at] - decayed).abs() <= 1e-15 * decayed + 1e-300, "{x} {decayed}");
                let lost = -(-x.abs() * LN_2).exp_m1();
                assert!((to[4][at] - lost).abs() <= 1e-15 * lost, "{x} {lost} {}", to[4][at]);
            }
        }
    }
}
