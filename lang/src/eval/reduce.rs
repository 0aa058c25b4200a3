//! Functions of a whole series: order and rounding do not depend on threads.

use super::error::FaultKind;
use crate::program::Reduction;

/// A sum that keeps what each addition rounds away (Neumaier 1974), so that a
/// million terms lose no more than a few.
#[derive(Clone, Copy, Default)]
pub(super) struct Sum {
    sum: f64,
    lost: f64,
}

impl Sum {
    /// Adds a term.
    #[inline]
    pub fn add(&mut self, term: f64) {
        let sum = self.sum + term;
        self.lost += if self.sum.abs() >= term.abs() {
            (self.sum - sum) + term
        } else {
            (term - sum) + self.sum
        };
        self.sum = sum;
    }

    /// The sum so far; an infinity if it overflowed.
    pub fn total(self) -> f64 {
        if self.sum.is_finite() {
            self.sum + self.lost
        } else {
            f64::INFINITY
        }
    }
}

/// The sum of a series.
pub(super) fn sum(series: impl IntoIterator<Item = f64>) -> f64 {
    let mut sum = Sum::default();
    for term in series {
        sum.add(term);
    }
    sum.total()
}

/// A function of a series of finite numbers; `fraction` is for the quantile.
pub(super) fn reduce(reduction: Reduction, series: &[f64], fraction: f64) -> Result<f64, FaultKind> {
    let count = series.len();
    let least = match reduction {
        Reduction::Sum | Reduction::Count | Reduction::CountTrue => 0,
        Reduction::Std => 2,
        Reduction::Mean | Reduction::Median | Reduction::Min | Reduction::Max | Reduction::Quantile => 1,
    };
    if count < least {
        return Err(FaultKind::TooFew(reduction, count));
    }
    let value = match reduction {
        Reduction::Sum => sum(series.iter().copied()),
        Reduction::Mean => mean(series),
        Reduction::Median => quantile(series, 0.5),
        Reduction::Std => deviation(series),
        Reduction::Count => count as f64,
        Reduction::CountTrue => series.iter().filter(|truth| **truth != 0.0).count() as f64,
        Reduction::Min => series.iter().copied().fold(f64::INFINITY, f64::min),
        Reduction::Max => series.iter().copied().fold(f64::NEG_INFINITY, f64::max),
        Reduction::Quantile if (0.0..=1.0).contains(&fraction) => quantile(series, fraction),
        Reduction::Quantile => return Err(FaultKind::NotAFraction(fraction)),
    };
    if value.is_finite() {
        Ok(value)
    } else {
        Err(FaultKind::Overflow)
    }
}

fn mean(series: &[f64]) -> f64 {
    sum(series.iter().copied()) / series.len() as f64
}

/// The sample standard deviation; scaled, so that squares do not overflow.
fn deviation(series: &[f64]) -> f64 {
    let mean = mean(series);
    let scale = series.iter().map(|x| (x - mean).abs()).fold(0.0, f64::max);
    if scale == 0.0 {
        return 0.0;
    }
    let squares = sum(series.iter().map(|x| ((x - mean) / scale) * ((x - mean) / scale)));
    scale * (squares / (series.len() - 1) as f64).sqrt()
}

/// Linear between order statistics, the first at 0 and the last at 1.
fn quantile(series: &[f64], fraction: f64) -> f64 {
    let mut sorted = series.to_vec();
    let place = fraction * (sorted.len() - 1) as f64;
    let below = place.floor() as usize;
    let (_, low, above) = sorted.select_nth_unstable_by(below, f64::total_cmp);
    let low = *low;
    let weight = place - below as f64;
    if weight == 0.0 {
        return low;
    }
    let high = above.iter().copied().fold(f64::INFINITY, f64::min);
    low * (1.0 - weight) + high * weight
}

#[cfg(test)]
mod tests {
    use super::*;

    fn of(reduction: Reduction, series: &[f64]) -> f64 {
        reduce(reduction, series, 0.5).expect("a value")
    }

    #[test]
    fn a_sum_keeps_small_terms() {
        // Neumaier 1974: naive summation gives 0.
        assert_eq!(of(Reduction::Sum, &[1.0, 1e100, 1.0, -1e100]), 2.0);
        let tenths = vec![0.1; 1_000_000];
        assert!((of(Reduction::Sum, &tenths) - 100_000.0).abs() < 1e-10);
        assert_eq!(of(Reduction::Sum, &[]), 0.0);
    }

    #[test]
    fn statistics_of_a_small_sample() {
        // NIST/SEMATECH e-Handbook, StRD data set NumAcc1: mean 10000002, standard deviation 1.
        let numacc1 = [10_000_001.0, 10_000_003.0, 10_000_002.0];
        assert_eq!(of(Reduction::Mean, &numacc1), 10_000_002.0);
        assert_eq!(of(Reduction::Std, &numacc1), 1.0);
        assert_eq!(of(Reduction::Median, &numacc1), 10_000_002.0);
        assert_eq!(of(Reduction::Min, &numacc1), 10_000_001.0);
        assert_eq!(of(Reduction::Max, &numacc1), 10_000_003.0);
        assert_eq!(of(Reduction::Count, &numacc1), 3.0);
        assert_eq!(of(Reduction::CountTrue, &[1.0, 0.0, 1.0]), 2.0);
    }

    #[test]
    fn deviation_on_an_offset() {
        // NIST StRD NumAcc4: 10000000.2, then 10000000.1 and 10000000.3 in turn
        // 500 times each; standard deviation 0.1 exactly. The data themselves
        // are rounded to 2e-9, hence the tolerance.
        let mut numacc4 = vec![10_000_000.2];
        for _ in 0..500 {
            numacc4.extend([10_000_000.1, 10_000_000.3]);
        }
        assert!((of(Reduction::Std, &numacc4) - 0.1).abs() < 1e-8);
        let mean = of(Reduction::Mean, &numacc4);
        assert!((mean - 10_000_000.2).abs() < 2e-9);
    }

    #[test]
    fn quantiles_are_linear_between_order_statistics() {
        // Hyndman & Fan 1996, definition 7: position (n − 1) p.
        let series = [4.0, 1.0, 3.0, 2.0];
        let quantile = |p| reduce(Reduction::Quantile, &series, p).expect("a value");
        assert_eq!(quantile(0.0), 1.0);
        assert_eq!(quantile(1.0), 4.0);
        assert_eq!(quantile(0.5), 2.5);
        assert_eq!(quantile(0.25), 1.75);
        assert_eq!(
            reduce(Reduction::Quantile, &series, 1.5),
            Err(FaultKind::NotAFraction(1.5))
        );
    }

    #[test]
    fn too_few_elements_and_overflow_are_faults() {
        for reduction in [Reduction::Mean, Reduction::Median, Reduction::Min, Reduction::Max] {
            assert_eq!(reduce(reduction, &[], 0.5), Err(FaultKind::TooFew(reduction, 0)));
        }
        assert_eq!(
            reduce(Reduction::Std, &[1.0], 0.5),
            Err(FaultKind::TooFew(Reduction::Std, 1))
        );
        assert_eq!(
            reduce(Reduction::Sum, &[1e308, 1e308], 0.5),
            Err(FaultKind::Overflow)
        );
    }
}
