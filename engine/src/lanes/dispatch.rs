//! Which vector instructions are used.

use std::sync::atomic::{AtomicU8, Ordering};

use pulp::{Arch, WithSimd};

static MOST: AtomicU8 = AtomicU8::new(0);

/// The vector instructions that kernels may use at most. On every processor the results agree to 1e-12; their last digits need
/// not.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Vectors {
    /// The widest that the processor has.
    Widest,
    /// No wider than AVX2, where the processor has it.
    Avx2,
    /// None.
    Scalar,
}

impl Vectors {
    /// Makes the whole process use no wider ones from now on: to measure them, and to compare what processors make of a stack.
    pub fn set(self) {
        MOST.store(self as u8, Ordering::Relaxed);
    }
}

/// Runs a kernel.
pub(crate) fn dispatch<Kernel: WithSimd>(kernel: Kernel) -> Kernel::Output {
    match MOST.load(Ordering::Relaxed) {
        0 => Arch::new().dispatch(kernel),
        #[cfg(target_arch = "x86_64")]
        1 => match pulp::x86::V3::try_new() {
            Some(avx2) => pulp::Simd::vectorize(avx2, kernel),
            None => pulp::Simd::vectorize(pulp::Scalar::new(), kernel),
        },
        _ => pulp::Simd::vectorize(pulp::Scalar::new(), kernel),
    }
}
