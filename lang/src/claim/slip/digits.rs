//! Digits miscopied: swapped, one of them wrong, cut off.

use super::Suspect;
use zij_stdlib::slips::{Copying, Mistake, slips};

/// A way of copying that gives the quoted number, or does not.
pub(super) struct Copy {
    pub key: &'static str,
    pub about: String,
    /// Its weight; zero if it does not fit.
    pub weight: f64,
    /// The weight of all copies of its kind.
    pub group: f64,
}

/// One row for each kind of copying, with the weight of those that fit.
pub(super) fn fits(suspect: &Suspect) -> Vec<Copy> {
    let copyings = slips().filter_map(|slip| {
        let Mistake::Digits(copying) = slip.mistake else {
            return None;
        };
        Some((slip, copying))
    });
    copyings
        .map(|(slip, copying)| {
            let (tried, fitting) = match copying {
                Copying::Transposed => count(suspect, transposed(&suspect.text)),
                Copying::OneWrong => count(suspect, one_wrong(&suspect.text)),
                Copying::Truncated => (1, usize::from(is_truncated(suspect))),
            };
            Copy {
                key: slip.key,
                about: slip.about.into(),
                weight: slip.weight * fitting.min(1) as f64 / tried.max(1) as f64,
                group: slip.weight,
            }
        })
        .collect()
}

/// How many other numbers there are, and how many of them agree.
fn count(suspect: &Suspect, others: Vec<String>) -> (usize, usize) {
    let written: f64 = suspect.text.parse().unwrap_or(f64::NAN);
    let agrees = |text: &String| {
        let meant: f64 = text.parse().unwrap_or(f64::NAN);
        let quoted = suspect.quoted * meant / written;
        suspect.digits.admits(quoted, suspect.computed)
    };
    (others.len(), others.iter().filter(|text| agrees(text)).count())
}

/// The digits of the number, without those of its power of ten.
fn digits(text: &str) -> Vec<usize> {
    let end = text.find(['e', 'E']).unwrap_or(text.len());
    let all = text[..end].bytes().enumerate();
    all.filter(|(_, byte)| byte.is_ascii_digit())
        .map(|(place, _)| place)
        .collect()
}

fn transposed(text: &str) -> Vec<String> {
    let swap = |pair: &[usize]| {
        let mut bytes = text.as_bytes().to_vec();
        bytes.swap(pair[0], pair[1]);
        (bytes != text.as_bytes()).then(|| String::from_utf8_lossy(&bytes).into_owned())
    };
    digits(text).windows(2).filter_map(swap).collect()
}

fn one_wrong(text: &str) -> Vec<String> {
    let mut others = Vec::new();
    for place in digits(text) {
        for digit in b'0'..=b'9' {
            let mut bytes = text.as_bytes().to_vec();
            if bytes[place] != digit {
                bytes[place] = digit;
                others.push(String::from_utf8_lossy(&bytes).into_owned());
            }
        }
    }
    others
}

/// Whether the quoted number is the computed one without its further digits.
fn is_truncated(suspect: &Suspect) -> bool {
    let unit = 2.0 * suspect.digits.width();
    let beyond = (suspect.computed - suspect.quoted) * suspect.quoted.signum();
    suspect.exact && 0.0 < beyond && beyond < unit
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn neighbours_are_swapped_and_powers_of_ten_left_alone() {
        assert_eq!(transposed("46.5e12"), ["64.5e12", "45.6e12"]);
        assert!(transposed("44").is_empty());
    }

    #[test]
    fn each_digit_may_be_any_other() {
        let others = one_wrong("4.2e1");
        assert_eq!(others.len(), 18);
        assert!(others.contains(&"4.7e1".into()) && others.contains(&"9.2e1".into()));
    }
}
