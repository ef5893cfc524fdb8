//! How well a share is known from a number of parts.

use statrs::distribution::{Beta, ContinuousCDF};

/// The interval that holds the true share with 95 % confidence, by C. J. Clopper, E. S. Pearson, Biometrika 26, 404–413 (1934):
/// for parts drawn independently, so that it errs on the wide side for the even points that are used here.
pub(crate) fn clopper_pearson(passed: u32, parts: u32) -> (f64, f64) {
    let (k, n) = (f64::from(passed), f64::from(parts));
    let quantile =
        |a: f64, b: f64, share: f64| Beta::new(a, b).map_or(f64::NAN, |beta| beta.inverse_cdf(share));
    let low = if passed == 0 { 0.0 } else { quantile(k, n - k + 1.0, 0.025) };
    let high = if passed == parts { 1.0 } else { quantile(k + 1.0, n - k, 0.975) };
    (low, high)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_interval_is_that_of_the_literature() {
        // By scipy.stats.binomtest(k, n).proportion_ci(method="exact").
        for (k, n, low, high) in [
            (0, 20, 0.0, 0.168_433_470_983_085_03),
            (20, 20, 0.831_566_529_016_914_9, 1.0),
            (1900, 2000, 0.939_518_277_9, 0.959_135_732_3),
            (81, 263, 0.252_736_745_6, 0.367_621_922_6),
        ] {
            let (found_low, found_high) = clopper_pearson(k, n);
            assert!(
                (found_low - low).abs() < 1e-7 && (found_high - high).abs() < 1e-7,
                "{k}/{n}: {found_low} {found_high}"
            );
        }
    }
}
