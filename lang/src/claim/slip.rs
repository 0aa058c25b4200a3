//! Which known slip turns the computed value into the quoted one.
//!
//! Each slip of the library's catalogue that can befall a claim is made in
//! the claim's own expression: calls and models are replaced in its program
//! (`rewrite`), or its value is multiplied. All mistakes of all disagreeing
//! claims run as one program, so they share models and tables.
//!
//! A slip fits when its value agrees with the quoted digits by the claim's
//! own allowance. Fits are weighed against chance. Let `w` be the weight of a
//! slip among all that were tried (they sum to one), and let the quoted number,
//! if it comes from somewhere else, lie anywhere within a factor
//! `ANYWHERE` with even chance in its logarithm. Then the odds for the slip are
//!
//! ```text
//!            w
//!   ---------------------      window: relative width of what the digits allow
//!   window / ln ANYWHERE
//! ```
//!
//! and a slip is shown if they reach [`CONVINCING`]. So the more slips there
//! are to try, the less each of them counts; and two digits prove little, where
//! five leave no doubt.

mod attempt;
mod digits;
mod rewrite;

use super::Allowance;
use crate::eval::Evaluator;
use crate::program::{NodeId, Program};
use crate::report::SlipReport;
use attempt::{Attempt, attempts};
use std::sync::Arc;
use zij_stdlib::dimension::Dimension;

/// Slips shown for one claim at most.
const SHOWN: usize = 3;
/// A wrong number from nowhere lies within this factor of anything.
const ANYWHERE: f64 = 100.0;
/// The odds at which a slip is worth telling.
const CONVINCING: f64 = 4.0;
/// A slip whose odds are this much smaller than the best is left out.
const OUTSHONE: f64 = 200.0;
/// Slips of at least this weight, in parts of a thousand, are plain enough to
/// be made two at a time.
const PLAIN: f64 = 8.0;
/// What share of all wrong numbers has two slips in it.
const TWICE: f64 = 0.1;
/// Values closer than this are the same number.
const SAME: f64 = 1e-10;

/// A claim that disagrees.
pub struct Suspect {
    /// The node of what is computed.
    pub node: NodeId,
    /// The size of the unit it is judged in.
    pub factor: f64,
    /// Its dimension.
    pub dimension: Dimension,
    /// The functions written in the language that it rests on.
    pub functions: Vec<String>,
    /// The computed value, in that unit.
    pub computed: f64,
    /// The quoted value, in that unit.
    pub quoted: f64,
    /// The quoted digits: plain ASCII, without sign and unit.
    pub text: Arc<str>,
    /// What the claim allows.
    pub allowance: Allowance,
    /// What the digits allow, where that is less.
    pub digits: Allowance,
    /// Whether the digits stand alone, without an uncertainty.
    pub exact: bool,
}

/// A named value that a claim may rest on.
pub struct Named {
    /// Its name.
    pub name: String,
    /// Its node.
    pub node: NodeId,
    /// The size of its unit.
    pub factor: f64,
}

/// What is searched: a program that has been evaluated.
pub struct Scene<'a, 'p> {
    /// The program.
    pub program: &'a Program,
    /// Its values.
    pub evaluator: &'a mut Evaluator<'p>,
    /// The values of names in it.
    pub named: &'a [Named],
    /// The node of the model assumed.
    pub model: NodeId,
}

/// A mistake that gives the quoted number.
struct Fit {
    key: String,
    about: String,
    gives: f64,
    odds: f64,
}

/// The convincing slips of each claim, the best first.
pub fn search(scene: &mut Scene<'_, '_>, suspects: &[Suspect]) -> Vec<Vec<SlipReport>> {
    let mut scratch = scene.program.clone();
    let tried: Vec<Vec<Attempt>> = suspects
        .iter()
        .map(|suspect| attempts(scene, &mut scratch, suspect))
        .collect();
    let mut evaluator = Evaluator::new(&scratch);
    let mut value = |node: NodeId| evaluator.value(node).ok()?.scalar();
    suspects
        .iter()
        .zip(tried)
        .map(|(suspect, tried)| {
            let all: Vec<(Attempt, f64)> = tried
                .into_iter()
                .filter_map(|attempt| {
                    let gives = attempt.value(suspect, &mut value)?;
                    (gives.is_finite() && !is_same(gives, suspect.computed)).then_some((attempt, gives))
                })
                .collect();
            rank(fits(suspect, &all))
        })
        .collect()
}

/// All singles and pairs that give the quoted number.
fn fits(suspect: &Suspect, all: &[(Attempt, f64)]) -> Vec<Fit> {
    let total: f64 = all.iter().map(|(attempt, _)| attempt.weight).sum();
    let copied = digits::fits(suspect);
    let total = total + copied.iter().map(|copy| copy.group).sum::<f64>();
    let mut fits = Vec::new();
    for (attempt, gives) in all {
        if let Some(window) = window(suspect, *gives) {
            fits.push(Fit {
                key: attempt.key.into(),
                about: attempt.about.clone(),
                gives: *gives,
                odds: odds(attempt.weight / total * (1.0 - TWICE), window),
            });
        }
    }
    for copy in copied.into_iter().filter(|copy| copy.weight > 0.0) {
        fits.push(Fit {
            key: copy.key.into(),
            about: copy.about,
            gives: suspect.quoted,
            odds: odds(
                copy.weight / total * (1.0 - TWICE),
                relative(suspect.digits, suspect.quoted),
            ),
        });
    }
    fits.extend(pairs(suspect, all));
    fits
}

/// Two plain slips at once: one of any kind, then one that multiplies.
fn pairs(suspect: &Suspect, all: &[(Attempt, f64)]) -> Vec<Fit> {
    let plain = || all.iter().filter(|(attempt, _)| attempt.weight >= PLAIN);
    let pair = |(first, _): &(Attempt, f64), (second, _): &(Attempt, f64)| first.goes_with(second);
    let mut total = 0.0;
    let mut fits = Vec::new();
    for (place, first) in plain().enumerate() {
        for second in plain().skip(place + 1) {
            let (first, second) = if second.0.factor.is_some() {
                (first, second)
            } else {
                (second, first)
            };
            let Some(factor) = second.0.factor.filter(|_| pair(first, second)) else {
                continue;
            };
            let weight = first.0.weight * second.0.weight;
            total += weight;
            let gives = first.1 * factor;
            if is_same(gives, suspect.computed) {
                continue;
            }
            if let Some(window) = window(suspect, gives) {
                fits.push(Fit {
                    key: format!("{} + {}", first.0.key, second.0.key),
                    about: format!("{}, and {}", first.0.about, second.0.about),
                    gives,
                    odds: odds(weight * TWICE, window),
                });
            }
        }
    }
    for fit in &mut fits {
        fit.odds /= total;
    }
    fits
}

/// How narrow the agreement is, if there is one: by the digits, or else by
/// what the claim allows.
fn window(suspect: &Suspect, gives: f64) -> Option<f64> {
    [suspect.digits, suspect.allowance]
        .into_iter()
        .find(|allowance| allowance.admits(suspect.quoted, gives))
        .map(|allowance| relative(allowance, suspect.quoted))
}

fn relative(allowance: Allowance, quoted: f64) -> f64 {
    ((allowance.below + allowance.above) / quoted.abs()).max(f64::EPSILON)
}

fn odds(weight: f64, window: f64) -> f64 {
    weight * libm::log(ANYWHERE) / window
}

/// The convincing ones, the best first; of those that share a name or a
/// number, the best alone.
fn rank(mut fits: Vec<Fit>) -> Vec<SlipReport> {
    fits.retain(|fit| fit.odds >= CONVINCING);
    fits.sort_by(|a, b| b.odds.total_cmp(&a.odds));
    let best = fits.first().map_or(0.0, |fit| fit.odds);
    let mut kept: Vec<Fit> = Vec::new();
    for fit in fits {
        let told = |other: &Fit| other.key == fit.key || is_same(other.gives, fit.gives);
        if kept.len() < SHOWN && fit.odds * OUTSHONE >= best && !kept.iter().any(told) {
            kept.push(fit);
        }
    }
    let report = |fit: Fit| SlipReport {
        key: fit.key,
        gives: fit.gives,
        about: fit.about,
    };
    kept.into_iter().map(report).collect()
}

fn is_same(a: f64, b: f64) -> bool {
    (a - b).abs() <= SAME * a.abs().max(b.abs())
}
