//! The limit of a slowly converging sequence: Wynn's ε algorithm.

/// Terms that must still shrink, or the sum has no limit.
const LOOKED_AT: usize = 6;

/// A limit and how sure it is.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Limit {
    pub value: f64,
    pub error: f64,
}

/// Estimates compared; those before them are of too little of the sequence.
const LATEST: usize = 12;

/// The limit of a sequence of partial sums.
///
/// Every second column of the ε table is a sequence of ever better estimates;
/// of the latest, the one that agrees best with the two before it is taken.
/// The algorithm also gives a value to sequences that run away, so an estimate
/// further from the last sum than its terms can carry it is none.
pub(super) fn limit(sums: &[f64]) -> Limit {
    let last = sums.last().copied().unwrap_or(0.0);
    let mut best = Limit {
        value: last,
        error: f64::INFINITY,
    };
    let mut diagonal: Vec<f64> = Vec::new();
    let mut estimates: Vec<f64> = Vec::new();
    let reach = 4.0 * left_over(sums);
    for sum in sums {
        diagonal = next_diagonal(&diagonal, *sum);
        let even = (diagonal.len() - 1) / 2 * 2;
        estimates.push(diagonal[even]);
    }
    let latest = &estimates[estimates.len().saturating_sub(LATEST)..];
    for three in latest.windows(3) {
        let error = (three[2] - three[1]).abs() + (three[2] - three[0]).abs();
        if error < best.error && (three[2] - last).abs() <= reach {
            best = Limit {
                value: three[2],
                error,
            };
        }
    }
    best
}

/// What the terms of a sum still have to add if they go on shrinking as they
/// do.
fn left_over(sums: &[f64]) -> f64 {
    let [.., a, b, c] = sums else {
        return 0.0;
    };
    let (before, term) = ((b - a).abs(), (c - b).abs());
    let ratio = (term / before).min(0.99);
    if ratio.is_finite() {
        term / (1.0 - ratio)
    } else {
        term
    }
}

/// The next ascending diagonal of the ε table, from the one before.
fn next_diagonal(before: &[f64], sum: f64) -> Vec<f64> {
    let mut diagonal = vec![sum];
    let mut two_before = 0.0;
    for (k, left) in before.iter().enumerate() {
        let difference = diagonal[k] - left;
        if difference == 0.0 {
            // Converged: the rest of the table has nothing to say.
            break;
        }
        diagonal.push(two_before + 1.0 / difference);
        two_before = *left;
    }
    diagonal
}

/// Whether the terms of a sum do not shrink.
pub(super) fn grows(terms: &[f64]) -> bool {
    let last = &terms[terms.len().saturating_sub(LOOKED_AT)..];
    let shrinks = |pair: &[f64]| pair[1].abs() < 0.985 * pair[0].abs() || pair[1] == 0.0;
    last.len() == LOOKED_AT && !last.windows(2).any(shrinks)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn slow_series_have_their_limits() {
        // ln 2 = 1 − 1/2 + 1/3 − …: Wynn 1956 sums it from a dozen terms.
        let mut sum = 0.0;
        let sums: Vec<f64> = (1..=16)
            .map(|n| {
                sum += if n % 2 == 1 { 1.0 } else { -1.0 } / f64::from(n);
                sum
            })
            .collect();
        let found = limit(&sums);
        assert!((found.value - std::f64::consts::LN_2).abs() < 1e-11);
        assert!(found.error < 1e-9);
    }

    #[test]
    fn a_sum_that_grows_has_none() {
        assert!(grows(&[1.0; 20]));
        assert!(grows(&[1.0, 1.4, 2.0, 2.8, 4.0, 5.6, 8.0]));
        assert!(!grows(&[1.0, 0.5, 0.25, 0.125, 0.1, 0.01, 0.001]));
    }
}
