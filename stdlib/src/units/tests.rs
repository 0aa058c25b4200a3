//! Tests of the catalogue of units.
//!
//! Published numbers are checked in the language too, in
//! `tests/published/units.toml`; here is what needs the tables themselves.

use super::suggest::{case_slip, near};
use super::{PREFIXES, Prefixes, UNITS, Unit, counting, find};
use crate::dimension::{ANGLE, ENERGY, Generator, LENGTH, MASS, NUMBER, SPEED, TIME};
use std::collections::BTreeMap;
use std::path::Path;

/// Spellings that a prefix would also give, and the unit they name. A unit
/// that is listed always wins (VOUnits 1.1, sec. 2.6).
const WINNERS: &[(&str, &str)] = &[
    ("Pa", "pascal"),
    ("cpc", "comoving parsec"),
    ("ppc", "proper parsec"),
];

fn factor(spelling: &str) -> f64 {
    find(spelling)
        .unwrap_or_else(|| panic!("no unit {spelling}"))
        .factor
}

fn assert_near(value: f64, expected: f64, relative: f64) {
    assert!(
        (value / expected - 1.0).abs() <= relative,
        "{value:e} is not {expected:e} within {relative:e}"
    );
}

/// Every spelling the tables can yield, with its meanings.
fn meanings() -> BTreeMap<String, Vec<&'static str>> {
    let mut all: BTreeMap<String, Vec<&'static str>> = BTreeMap::new();
    for unit in UNITS {
        for spelling in unit.spellings() {
            all.entry(spelling.to_owned()).or_default().push(unit.name);
            for prefix in PREFIXES.iter().filter(|prefix| unit.prefixes.allow(prefix.power)) {
                let written: &[&str] = if prefix.symbol == "μ" {
                    &["μ", "µ", "u"]
                } else {
                    &[prefix.symbol]
                };
                for symbol in written {
                    all.entry(format!("{symbol}{spelling}"))
                        .or_default()
                        .push(unit.name);
                }
            }
        }
    }
    all
}

#[test]
fn a_spelling_has_one_meaning_or_a_documented_winner() {
    for (spelling, names) in meanings() {
        let winner = WINNERS
            .iter()
            .find(|(known, _)| *known == spelling)
            .map(|(_, name)| *name);
        assert_eq!(names.len() > 1, winner.is_some(), "{spelling} means {names:?}");
        let found = find(&spelling).unwrap_or_else(|| panic!("{spelling} is not found"));
        assert_eq!(found.unit.name, winner.unwrap_or(names[0]), "{spelling}");
        assert!(found.factor.is_finite() && found.factor > 0.0, "{spelling}");
    }
}

#[test]
fn every_unit_says_what_it_is_and_by_whom() {
    for unit in UNITS {
        assert!(!unit.name.is_empty(), "{}", unit.symbol);
        assert!(!unit.definition.is_empty(), "{}", unit.symbol);
        assert!(!unit.source.is_empty(), "{}", unit.symbol);
        assert!(unit.factor.is_normal() && unit.factor > 0.0, "{}", unit.symbol);
    }
}

#[test]
fn unit_names_are_distinct() {
    let mut names: Vec<&str> = UNITS.iter().map(|unit| unit.name).collect();
    names.sort_unstable();
    names.dedup();
    assert_eq!(names.len(), UNITS.len());
}

#[test]
fn counting_units_are_no_units_here() {
    for spelling in super::COUNTING {
        assert!(find(spelling).is_none(), "{spelling}");
        assert!(counting(spelling), "{spelling}");
    }
    assert!(!counting("Mpc"));
}

/// Words that have a meaning of their own in a statement never name a unit,
/// but for `min`, which is a function only before a bracket, and `as`, which
/// stands only after a path.
#[test]
fn words_of_the_statements_are_no_units() {
    for word in [
        "at", "every", "in", "by", "via", "for", "points", "today", "steps", "log", "and", "or", "not", "if",
        "then", "else", "under", "where", "with", "is", "about", "within", "above", "below", "between",
        "only", "never", "hand",
    ] {
        assert!(find(word).is_none(), "{word}");
    }
}

/// `known-units.csv` of VOUnits 1.1 (IVOA), where it is at hand. Each unit
/// that the VOUnits syntax knows is read here, or counted, or left out with a
/// reason.
#[test]
fn units_of_vounits_are_read() {
    let refused = |unit: &str| match unit {
        // Not a unit of its own, but a ratio to something solar left unsaid.
        "#Sun" => true,
        // A logarithm, which no factor expresses.
        "dB" => true,
        // An alias of `byte`, which is counted.
        "B" => true,
        _ => false,
    };
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("../../shared/data/vounits_known-units.csv");
    let Ok(text) = std::fs::read_to_string(&path) else {
        return;
    };
    let rows = text
        .lines()
        .filter(|line| !line.trim_start_matches('"').starts_with("# "));
    let mut read = 0;
    for row in rows {
        let cells: Vec<&str> = row.split(',').collect();
        let [unit, .., vounits] = cells.as_slice() else {
            continue;
        };
        if !vounits.starts_with('1') || refused(unit) {
            continue;
        }
        assert!(find(unit).is_some() || counting(unit), "{unit}");
        read += 1;
    }
    assert!(read > 60, "only {read} units in {}", path.display());
}

#[test]
fn written_out_digits_are_the_size() {
    for unit in UNITS.iter().filter(|unit| !unit.digits.is_empty()) {
        assert_eq!(unit.digits.parse(), Ok(unit.factor), "{}", unit.symbol);
        assert!(unit.digits.contains('e'), "{}", unit.symbol);
    }
}

/// The spellings that the trade and the two standards give one unit.
#[test]
fn spellings_of_one_unit_agree() {
    for spellings in [
        ["Msun", "M_sun", "solMass", "M_⊙", "M⊙", "M_☉"].as_slice(),
        &["Lsun", "L_sun", "solLum", "L_⊙"],
        &["Rsun", "R_sun", "solRad", "R_⊙"],
        &["Angstrom", "angstrom", "Å", "\u{212b}"],
        &["um", "μm", "µm", "micron"],
        &["uas", "μas", "µas", "uarcsec", "μarcsec"],
        &["mas", "marcsec"],
        &["yr", "a"],
        &["ly", "lyr"],
        &["Gly", "Glyr"],
        &["au", "AU"],
        &["u", "amu", "Da"],
        &["Ohm", "ohm", "Ω", "\u{2126}"],
        &["deg", "°"],
        &["%", "percent"],
    ] {
        for spelling in spellings {
            assert_eq!(factor(spelling), factor(spellings[0]), "{spelling}");
        }
    }
}

#[test]
fn decimal_prefixes_are_rounded_once() {
    for (spelling, size) in [
        ("kg", 1.0),
        ("mg", 1e-6),
        ("ng", 1e-12),
        ("km", 1e3),
        ("nm", 1e-9),
        ("fm", 1e-15),
        ("Ym", 1e24),
        ("qs", 1e-30),
        ("QHz", 1e30),
        ("mJy", 1e-29),
        ("MeV", 1.602176634e-13),
        ("meV", 1.602176634e-22),
        ("μG", 1e-10),
        ("hPa", 100.0),
        ("dm", 0.1),
        ("Myr", 3.15576e13),
        ("Gyr", 3.15576e16),
        ("Gly", 9.4607304725808e24),
        ("mbarn", 1e-31),
        ("MDa", 1.66053906892e-21),
        ("mmag", 1e-3),
    ] {
        assert_eq!(factor(spelling), size, "{spelling}");
    }
}

/// 648000/π au to 25 digits: 30856775814913672.78913938 m (IAU 2015 B2).
#[test]
fn multiples_of_the_parsec_are_the_nearest_doubles() {
    assert_eq!(factor("pc"), 30_856_775_814_913_672.789_139_38);
    assert_eq!(factor("kpc"), 30_856_775_814_913_672_789.139_38);
    assert_eq!(factor("Mpc"), 30_856_775_814_913_672_789_139.38);
    assert_eq!(factor("Gpc"), 30_856_775_814_913_672_789_139_380.0);
    for prefix in ["", "k", "M", "G"] {
        let plain = factor(&format!("{prefix}pc"));
        assert_eq!(factor(&format!("c{prefix}pc")), plain);
        assert_eq!(factor(&format!("p{prefix}pc")), plain);
        let plain = factor(&format!("{prefix}ly"));
        assert_eq!(factor(&format!("c{prefix}ly")), plain);
        assert_eq!(factor(&format!("p{prefix}ly")), plain);
    }
}

/// Conversions printed in standards and handbooks, each to its own digits.
#[test]
fn sizes_agree_with_published_ones() {
    for (spelling, published, relative) in [
        // IAU 2012 B2 and 2015 B2, B3.
        ("au", 149_597_870_700.0, 0.0),
        ("Rsun", 6.957e8, 0.0),
        ("Lsun", 3.828e26, 0.0),
        ("Rearth", 6.3781e6, 0.0),
        ("Rjup", 7.1492e7, 0.0),
        // Prša et al. 2016, AJ 152, 41, with the G of CODATA 2014: 6.67408e-11.
        ("Msun", 1.988_475e30, 4e-5),
        ("Mearth", 5.9722e24, 4e-5),
        ("Mjup", 1.898_187e27, 4e-5),
        // SI Brochure, 9th edition, table 8.
        ("eV", 1.602_176_634e-19, 0.0),
        ("Da", 1.660_539_066_60e-27, 2e-9),
        // IAU Style Manual: ly = 9.4607e15 m; the product of two exact numbers.
        ("ly", 299_792_458.0 * 31_557_600.0, 0.0),
        // CODATA 2022: 13.605693122990(15) eV; half its last digit is 4e-14 of it.
        ("Ry", 13.605_693_122_990 * 1.602_176_634e-19, 4.4e-14),
        // CIAAW, CODATA: 1 D = 3.33564e-30 C m.
        ("D", 3.335_64e-30, 1e-6),
        // Allen's Astrophysical Quantities, 4th edition: 206264.806 arcsec.
        ("arcsec", 1.0 / 206_264.806_247, 1e-12),
    ] {
        assert_near(factor(spelling), published, relative);
    }
}

#[test]
fn angles_are_the_nearest_doubles() {
    assert_eq!(factor("deg"), std::f64::consts::PI / 180.0);
    assert_near(factor("arcmin") * 60.0, factor("deg"), 2.3e-16);
    assert_near(factor("mas") * 1e3, factor("arcsec"), 2.3e-16);
    assert_eq!(
        find("sr").map(|found| found.unit.dimension),
        Some(ANGLE.times(ANGLE))
    );
}

#[test]
fn little_h_is_its_own_generator_and_the_hour_is_not_h() {
    let h = find("h").expect("little h").unit;
    assert_eq!(h.dimension, NUMBER.with(Generator::LittleH, 1));
    assert!(!h.framed && h.factor == 1.0);
    assert_eq!(factor("hr"), 3600.0);
}

#[test]
fn frames_are_fixed_by_comoving_and_proper_lengths_only() {
    for unit in UNITS {
        let first = unit.symbol.as_bytes()[0];
        let lettered = unit.framed && (first == b'c' || first == b'p') && unit.names_length();
        assert_eq!(unit.framed, lettered, "{}", unit.symbol);
        let comoving = unit.dimension.exponent(Generator::Comoving);
        assert_eq!(
            *comoving.numer(),
            i32::from(unit.framed && first == b'c'),
            "{}",
            unit.symbol
        );
    }
    assert_eq!(
        find("cMpc").map(|found| found.unit.dimension),
        Some(LENGTH.comoving())
    );
    assert_eq!(find("pMpc").map(|found| found.unit.dimension), Some(LENGTH));
}

#[test]
fn lengths_are_told_from_other_units() {
    let names_length = |spelling: &str| find(spelling).is_some_and(|found| found.unit.names_length());
    for spelling in [
        "Mpc", "km", "cm", "ly", "au", "Rsun", "Angstrom", "micron", "cMpc", "pkpc",
    ] {
        assert!(names_length(spelling), "{spelling}");
    }
    for spelling in ["Msun", "erg", "W", "c", "barn", "s", "Jy", "h", "arcsec"] {
        assert!(!names_length(spelling), "{spelling}");
    }
}

#[test]
fn dimensions_of_some_units() {
    let dimension = |spelling: &str| find(spelling).map(|found| found.unit.dimension);
    assert_eq!(dimension("c"), Some(SPEED));
    assert_eq!(dimension("Gyr"), Some(TIME));
    assert_eq!(dimension("M_⊙"), Some(MASS));
    assert_eq!(dimension("keV"), Some(ENERGY));
    assert_eq!(dimension("dex"), Some(NUMBER));
    assert_eq!(dimension("erg"), dimension("J"));
    assert_eq!(dimension("G"), dimension("T"));
}

#[test]
fn prefixes_stay_with_the_units_that_take_them() {
    for spelling in [
        "kmin", "khr", "myr", "mly", "Marcsec", "kdeg", "kMsun", "GM_sun", "kcMpc", "kkm", "kau", "kc",
        "Gerg", "mh", "dayr", "dam", "das", "hdeg", "khPa", "k", "M", "μ", "u%", "k%", "",
    ] {
        assert!(find(spelling).is_none(), "{spelling}");
    }
}

#[test]
fn there_are_the_si_prefixes_without_deca() {
    assert_eq!(PREFIXES.len(), 23);
    assert!(Prefixes::All.allow(30) && Prefixes::All.allow(-30));
    assert!(Prefixes::Large.allow(3) && !Prefixes::Large.allow(2));
    assert!(Prefixes::Small.allow(-3) && !Prefixes::Small.allow(-2));
    assert!(PREFIXES.windows(2).all(|pair| pair[0].power > pair[1].power));
}

#[test]
fn slips_of_case_find_the_unit_that_was_meant() {
    for (written, meant) in [
        ("gyr", "Gyr"),
        ("msun", "Msun"),
        ("ev", "eV"),
        ("Kpc", "kpc"),
        ("KM", "km"),
        ("MPc", "Mpc"),
        ("MPC", "Mpc"),
        ("gpc", "Gpc"),
        ("Ghz", "GHz"),
        ("jy", "Jy"),
        ("mjy", "mJy"),
        ("Kev", "keV"),
        ("cmpc", "cMpc"),
        ("gly", "Gly"),
    ] {
        assert!(find(written).is_none(), "{written}");
        assert_eq!(
            near(written).first().map(String::as_str),
            Some(meant),
            "{written}"
        );
    }
}

#[test]
fn names_in_words_find_their_unit() {
    for (written, meant) in [
        ("hour", "hr"),
        ("hours", "hr"),
        ("sec", "s"),
        ("seconds", "s"),
        ("years", "yr"),
        ("days", "d"),
        ("parsec", "pc"),
        ("megaparsecs", "Mpc"),
        ("kilometre", "km"),
        ("kilometers", "km"),
        ("lightyears", "ly"),
        ("light-year", "ly"),
        ("degrees", "deg"),
        ("arcseconds", "arcsec"),
        ("Kelvin", "K"),
        ("jansky", "Jy"),
        ("microjansky", "μJy"),
    ] {
        assert_eq!(near(written), [meant], "{written}");
    }
}

#[test]
fn close_spellings_are_proposed_and_far_ones_are_not() {
    assert!(near("arcsecc").contains(&"arcsec".to_owned()));
    assert!(near("Angstrm").contains(&"Angstrom".to_owned()));
    assert!(near("Mcp").contains(&"Mpc".to_owned()));
    assert!(near("acrmin").contains(&"arcmin".to_owned()));
    for word in ["furlong", "xq", "galaxy", "", "wavelength", "Ωm"] {
        assert_eq!(near(word), Vec::<String>::new(), "{word}");
    }
}

#[test]
fn every_suggestion_is_a_unit() {
    for written in [
        "gyr", "Mpcs", "arcs", "msun", "kp", "ergs", "solmass", "lum", "GHZ", "μjy", "secs", "meters",
    ] {
        for proposed in near(written) {
            assert!(find(&proposed).is_some(), "{written}: {proposed}");
        }
    }
    for (_, symbol) in super::suggest::OTHER_NAMES {
        let base = symbol.split('^').next().unwrap_or_default();
        assert!(find(base).is_some(), "{symbol}");
    }
    for common in super::suggest::COMMON {
        assert!(find(common).is_some(), "{common}");
    }
}

#[test]
fn legal_units_that_are_slips_of_case_are_told() {
    assert_eq!(case_slip("mpc"), Some("Mpc"));
    assert_eq!(case_slip("EV"), Some("eV"));
    assert_eq!(case_slip("peV"), Some("PeV"));
    for fine in [
        "Mpc", "kpc", "ms", "Ms", "mJy", "MJy", "S", "H", "mK", "MK", "Mm", "mHz", "a", "A", "gyr", "xyz",
    ] {
        assert_eq!(case_slip(fine), None, "{fine}");
    }
}

#[test]
fn common_spellings_are_never_called_a_slip() {
    for unit in UNITS {
        assert!(
            unit.spellings().all(|spelling| case_slip(spelling).is_none()),
            "{}",
            unit.symbol
        );
    }
}

/// Prefixed sizes are kept once computed: asking again, from anywhere, gives
/// the same double, and the unit without prefix.
#[test]
fn finding_twice_gives_the_same() {
    for spelling in ["Mpc", "GHz", "μJy"] {
        assert_eq!(factor(spelling), factor(spelling));
    }
    assert_eq!(find("Mpc").map(|found| found.unit.symbol), Some("pc"));
    assert_eq!(UNITS.iter().filter(|unit: &&Unit| unit.symbol == "pc").count(), 1);
}
