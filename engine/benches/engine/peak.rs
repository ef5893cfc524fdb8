//! How many fused multiply-adds the processor can start: the yardstick that does not depend on how anything is written.

use std::hint::black_box;

use pulp::{Arch, Simd, WithSimd};

/// So many instructions, in twelve chains that don't wait for one another.
pub(crate) struct Peak(pub(crate) u64);

impl WithSimd for Peak {
    type Output = f64;

    #[inline(always)]
    fn with_simd<S: Simd>(self, simd: S) -> f64 {
        let factor = simd.splat_f64s(black_box(0.999_999));
        let term = simd.splat_f64s(black_box(1e-9));
        let mut sums = [simd.splat_f64s(1.0); 12];
        for _ in 0..self.0 / 12 {
            for sum in &mut sums {
                *sum = simd.mul_add_e_f64s(*sum, factor, term);
            }
        }
        let mut whole = sums[0];
        for sum in &sums[1..] {
            whole = simd.add_f64s(whole, *sum);
        }
        simd.reduce_sum_f64s(whole)
    }
}

/// Runs it with AVX2 or with the widest instructions.
pub(crate) fn run(avx2: bool, instructions: u64) {
    #[cfg(target_arch = "x86_64")]
    if avx2 && let Some(simd) = pulp::x86::V3::try_new() {
        black_box(Simd::vectorize(simd, Peak(instructions)));
        return;
    }
    let _ = avx2;
    black_box(Arch::new().dispatch(Peak(instructions)));
}
