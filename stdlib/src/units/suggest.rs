//! What a spelling that is not a unit, or hardly one, was meant to be.
//!
//! Only used for messages, so it may be slow: it runs through every spelling.

use super::{PREFIXES, UNITS, Unit, find};

/// The spellings that papers use, in no case a slip of another. Prefixed
/// units outside this list are legal, but are not proposed unless nothing but
/// the case differs.
pub(super) static COMMON: &[&str] = &[
    "Mpc", "kpc", "Gpc", "pc", "km", "m", "cm", "mm", "nm", "um", "μm", "ly", "kly", "Mly", "Gly", "au",
    "Rsun", "yr", "kyr", "Myr", "Gyr", "s", "ms", "us", "μs", "ns", "ks", "Ms", "min", "hr", "d", "kg", "g",
    "mg", "Msun", "Mearth", "Mjup", "Lsun", "K", "mK", "uK", "μK", "nK", "MK", "kK", "eV", "meV", "keV",
    "MeV", "GeV", "TeV", "PeV", "EeV", "J", "kJ", "MJ", "erg", "W", "mW", "kW", "MW", "Hz", "mHz", "nHz",
    "kHz", "MHz", "GHz", "THz", "Jy", "mJy", "uJy", "μJy", "nJy", "kJy", "MJy", "N", "Pa", "kPa", "MPa",
    "hPa", "GPa", "V", "kV", "mV", "MV", "T", "mT", "nT", "G", "mG", "uG", "μG", "nG", "kG", "MG", "A", "mA",
    "mol", "deg", "arcmin", "arcsec", "mas", "uas", "μas", "rad", "mrad", "sr", "mag", "mmag", "dex",
    "Angstrom", "micron", "barn", "cMpc", "ckpc", "cGpc", "pMpc", "pkpc", "cGly", "Mm",
];

/// Names of units that their catalogue entry does not have, each with the
/// spelling that is meant.
pub(super) static OTHER_NAMES: &[(&str, &str)] = &[
    ("sec", "s"),
    ("secs", "s"),
    ("hrs", "hr"),
    ("yrs", "yr"),
    ("year", "yr"),
    ("years", "yr"),
    ("century", "cy"),
    ("meter", "m"),
    ("meters", "m"),
    ("kilometer", "km"),
    ("kilometers", "km"),
    ("centimeter", "cm"),
    ("centimeters", "cm"),
    ("ang", "Angstrom"),
    ("AA", "Angstrom"),
    ("as", "arcsec"),
    ("asec", "arcsec"),
    ("amin", "arcmin"),
    ("sqdeg", "deg^2"),
    ("ster", "sr"),
    ("mags", "mag"),
    ("gauss", "G"),
    ("cc", "cm^3"),
    ("sun", "Msun"),
    ("MSol", "Msun"),
    ("LSol", "Lsun"),
    ("lightyear", "ly"),
    ("lightyears", "ly"),
    ("light_year", "ly"),
    ("light_years", "ly"),
];

/// How many suggestions [`near`] gives at most.
const MOST: usize = 3;

/// Spellings of units that this one was probably meant to be, likeliest
/// first; none if nothing is near.
#[must_use]
pub fn near(spelling: &str) -> Vec<String> {
    if let Some(symbol) = named(spelling) {
        return vec![symbol];
    }
    let mut found = other_case(spelling);
    if found.is_empty() {
        found = close(spelling);
    }
    found.truncate(MOST);
    found
}

/// For a spelling that is a unit but hardly the one meant: what differs from
/// it in case alone and is common (`mpc` is a milliparsec, and meant `Mpc`).
#[must_use]
pub fn case_slip(spelling: &str) -> Option<&'static str> {
    if COMMON.contains(&spelling) || is_listed(spelling) || find(spelling).is_none() {
        return None;
    }
    COMMON
        .iter()
        .copied()
        .find(|common| same_letters(common, spelling))
}

/// The symbol of a unit written out in words, singular or plural, with or
/// without a prefix.
fn named(spelling: &str) -> Option<String> {
    let lower = spelling.to_lowercase();
    if let Some((_, symbol)) = OTHER_NAMES
        .iter()
        .find(|(name, _)| *name == spelling || *name == lower)
    {
        return Some((*symbol).to_owned());
    }
    let singular = lower.strip_suffix('s').unwrap_or(&lower);
    let symbol_of = |word: &str, power: i32| {
        let called = |unit: &&Unit| unit.name == word && (power == 0 || unit.prefixes.allow(power));
        UNITS.iter().find(called).map(|unit| unit.symbol)
    };
    [lower.as_str(), singular].iter().find_map(|word| {
        let bare = symbol_of(word, 0).map(str::to_owned);
        bare.or_else(|| {
            PREFIXES.iter().find_map(|prefix| {
                let rest = word.strip_prefix(prefix.name)?;
                Some(format!("{}{}", prefix.symbol, symbol_of(rest, prefix.power)?))
            })
        })
    })
}

/// Spellings that differ in case alone, common ones first.
fn other_case(spelling: &str) -> Vec<String> {
    let mut found: Vec<String> = Vec::new();
    let mut add = |candidate: &str| {
        if same_letters(candidate, spelling) && found.iter().all(|known| known != candidate) {
            found.push(candidate.to_owned());
        }
    };
    COMMON.iter().for_each(|common| add(common));
    for unit in UNITS {
        unit.spellings().for_each(&mut add);
        for prefix in PREFIXES.iter().filter(|prefix| unit.prefixes.allow(prefix.power)) {
            add(&format!("{}{}", prefix.symbol, unit.symbol));
        }
    }
    found
}

/// Spellings a letter or two away: one for short words, two for long ones,
/// none for those so short that everything is near.
fn close(spelling: &str) -> Vec<String> {
    let most = match spelling.chars().count() {
        0..=2 => return Vec::new(),
        3..=4 => 1,
        _ => 2,
    };
    let listed = UNITS.iter().flat_map(Unit::spellings);
    let mut found: Vec<(usize, &str)> = Vec::new();
    for candidate in COMMON.iter().copied().chain(listed) {
        let distance = strsim::osa_distance(spelling, candidate);
        let known = found.iter().any(|(_, other)| *other == candidate);
        if distance <= most && candidate.chars().count() > 1 && !known {
            found.push((distance, candidate));
        }
    }
    found.sort_by_key(|(distance, _)| *distance);
    found
        .into_iter()
        .map(|(_, candidate)| candidate.to_owned())
        .collect()
}

fn is_listed(spelling: &str) -> bool {
    UNITS
        .iter()
        .any(|unit| unit.spellings().any(|known| known == spelling))
}

fn same_letters(one: &str, other: &str) -> bool {
    one != other && one.to_lowercase() == other.to_lowercase()
}
