//! Units of measurement: the catalogue and how a spelling is found in it.
//!
//! The units stand in four tables by origin. Prefixed units are not listed:
//! `find` looks a spelling up as it stands and, failing that, without its
//! first letter. So a unit that is listed wins over a prefix (`cd` is the
//! candela, `Pa` the pascal, `cpc` the comoving parsec).
//!
//! Suggestions for a spelling that is not a unit are in [`suggest`].

use crate::dimension::{Dimension, Generator, LENGTH};
use std::collections::HashMap;
use std::sync::OnceLock;

mod angle;
mod astronomy;
mod physics;
mod si;
pub mod suggest;
#[cfg(test)]
mod tests;

pub use suggest::{case_slip, near};

/// One unit.
#[derive(Clone, Copy, Debug)]
pub struct Unit {
    /// Its symbol, as printed.
    pub symbol: &'static str,
    /// Other spellings that are read.
    pub aliases: &'static [&'static str],
    /// Its name in words.
    pub name: &'static str,
    /// Its size in SI base units (radian, magnitude: 1).
    pub factor: f64,
    /// Its size to more digits than a double holds, in the form `3.0857e16`,
    /// where it is no short decimal number and takes prefixes; else `""`.
    pub digits: &'static str,
    /// Its dimension; `cMpc` has the comoving generator.
    pub dimension: Dimension,
    /// The frame is fixed by the unit itself (`cMpc`, `pMpc`), so a literal in
    /// it is not open.
    pub framed: bool,
    /// Which prefixes it takes.
    pub prefixes: Prefixes,
    /// What it is defined as.
    pub definition: &'static str,
    /// Standard or paper.
    pub source: &'static str,
}

/// Which prefixes a unit takes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Prefixes {
    /// None.
    None,
    /// All SI prefixes, quecto to quetta, without `da`.
    All,
    /// Only kilo and larger.
    Large,
    /// Only milli and smaller.
    Small,
}

/// An SI prefix.
#[derive(Clone, Copy, Debug)]
pub struct Prefix {
    /// Its symbol.
    pub symbol: &'static str,
    /// Its name.
    pub name: &'static str,
    /// The power of ten it stands for.
    pub power: i32,
}

/// A spelling found in the catalogue.
#[derive(Clone, Copy, Debug)]
pub struct Found {
    /// The unit, without its prefix.
    pub unit: &'static Unit,
    /// The size of the prefixed unit in SI.
    pub factor: f64,
}

/// The SI prefixes but `da`, which VOUnits advises against for its clashes
/// (`dadu`, `dam`). SI Brochure, 9th edition, table 7 with Resolution 3 of
/// the 27th CGPM (2022).
pub static PREFIXES: &[Prefix] = &[
    prefix("Q", "quetta", 30),
    prefix("R", "ronna", 27),
    prefix("Y", "yotta", 24),
    prefix("Z", "zetta", 21),
    prefix("E", "exa", 18),
    prefix("P", "peta", 15),
    prefix("T", "tera", 12),
    prefix("G", "giga", 9),
    prefix("M", "mega", 6),
    prefix("k", "kilo", 3),
    prefix("h", "hecto", 2),
    prefix("d", "deci", -1),
    prefix("c", "centi", -2),
    prefix("m", "milli", -3),
    prefix("μ", "micro", -6),
    prefix("n", "nano", -9),
    prefix("p", "pico", -12),
    prefix("f", "femto", -15),
    prefix("a", "atto", -18),
    prefix("z", "zepto", -21),
    prefix("y", "yocto", -24),
    prefix("r", "ronto", -27),
    prefix("q", "quecto", -30),
];

/// All units.
pub static UNITS: &[Unit] = &ALL;

/// What is counted rather than measured: spellings that FITS and VOUnits list
/// as units, but that a sheet brings in itself with `tally`.
static COUNTING: &[&str] = &[
    "adu",
    "ADU",
    "beam",
    "bin",
    "bit",
    "byte",
    "chan",
    "channel",
    "count",
    "counts",
    "ct",
    "ctr",
    "DN",
    "electron",
    "electrons",
    "event",
    "events",
    "frame",
    "galaxies",
    "galaxy",
    "object",
    "objects",
    "ph",
    "photon",
    "photons",
    "pix",
    "pixel",
    "pixels",
    "source",
    "sources",
    "star",
    "stars",
    "voxel",
];

/// The unit of this spelling, prefix included.
#[must_use]
pub fn find(spelling: &str) -> Option<Found> {
    let catalogue = catalogue();
    if let Some(&place) = catalogue.places.get(spelling) {
        let unit = &UNITS[usize::from(place)];
        return Some(Found {
            unit,
            factor: unit.factor,
        });
    }
    let (prefix, rest) = split_prefix(spelling)?;
    let place = usize::from(*catalogue.places.get(rest)?);
    let unit = &UNITS[place];
    unit.prefixes.allow(PREFIXES[prefix].power).then(|| Found {
        unit,
        factor: catalogue.prefixed(place, prefix),
    })
}

/// Whether this is a counting unit of the trade (`photon`, `pix`), which a
/// sheet declares with `tally`.
#[must_use]
pub fn counting(spelling: &str) -> bool {
    COUNTING.contains(&spelling)
}

impl Unit {
    /// Whether the unit names a length, so that the frame of a literal in it
    /// is open unless the unit is `framed`.
    #[must_use]
    pub fn names_length(&self) -> bool {
        self.dimension.with(Generator::Comoving, 0) == LENGTH
    }

    /// Every spelling without a prefix.
    pub fn spellings(&self) -> impl Iterator<Item = &'static str> + '_ {
        std::iter::once(self.symbol).chain(self.aliases.iter().copied())
    }

    // The tables below are written with these, one sentence for each unit.
    const fn new(symbol: &'static str, name: &'static str, factor: f64, dimension: Dimension) -> Unit {
        Unit {
            symbol,
            aliases: &[],
            name,
            factor,
            digits: "",
            dimension,
            framed: false,
            prefixes: Prefixes::None,
            definition: "",
            source: "",
        }
    }

    const fn also(mut self, aliases: &'static [&'static str]) -> Unit {
        self.aliases = aliases;
        self
    }

    const fn digits(mut self, digits: &'static str) -> Unit {
        self.digits = digits;
        self
    }

    const fn framed(mut self) -> Unit {
        self.framed = true;
        self
    }

    const fn with(mut self, prefixes: Prefixes) -> Unit {
        self.prefixes = prefixes;
        self
    }

    const fn is(mut self, definition: &'static str, source: &'static str) -> Unit {
        self.definition = definition;
        self.source = source;
        self
    }
}

impl Prefixes {
    /// Whether a prefix of this power of ten is among them.
    #[must_use]
    pub const fn allow(self, power: i32) -> bool {
        match self {
            Prefixes::None => false,
            Prefixes::All => true,
            Prefixes::Large => power >= 3,
            Prefixes::Small => power <= -3,
        }
    }
}

const fn prefix(symbol: &'static str, name: &'static str, power: i32) -> Prefix {
    Prefix { symbol, name, power }
}

const TABLES: [&[Unit]; 4] = [si::UNITS, astronomy::UNITS, physics::UNITS, angle::UNITS];

const COUNT: usize = TABLES[0].len() + TABLES[1].len() + TABLES[2].len() + TABLES[3].len();

static ALL: [Unit; COUNT] = {
    let mut all = [TABLES[0][0]; COUNT];
    let (mut table, mut place) = (0, 0);
    while table < TABLES.len() {
        let mut row = 0;
        while row < TABLES[table].len() {
            all[place] = TABLES[table][row];
            place += 1;
            row += 1;
        }
        table += 1;
    }
    all
};

/// The index over the spellings without prefix, and the prefixed sizes met so
/// far.
struct Catalogue {
    places: HashMap<&'static str, u16>,
    prefixed: Vec<OnceLock<f64>>,
}

impl Catalogue {
    fn prefixed(&self, place: usize, prefix: usize) -> f64 {
        let cell = &self.prefixed[place * PREFIXES.len() + prefix];
        *cell.get_or_init(|| shifted(&UNITS[place], PREFIXES[prefix].power))
    }
}

fn catalogue() -> &'static Catalogue {
    static CATALOGUE: OnceLock<Catalogue> = OnceLock::new();
    CATALOGUE.get_or_init(|| {
        let mut places = HashMap::with_capacity(4 * COUNT);
        for (place, unit) in (0..).zip(UNITS) {
            places.extend(unit.spellings().map(|spelling| (spelling, place)));
        }
        let prefixed = vec![OnceLock::new(); COUNT * PREFIXES.len()];
        Catalogue { places, prefixed }
    })
}

/// The index of the prefix a spelling starts with, and what follows it. The
/// micro sign U+00B5 and `u` stand for `μ`.
fn split_prefix(spelling: &str) -> Option<(usize, &str)> {
    let letter = spelling.chars().next()?;
    let rest = &spelling[letter.len_utf8()..];
    let letter = if matches!(letter, 'u' | 'µ') {
        'μ'
    } else {
        letter
    };
    let prefix = PREFIXES
        .iter()
        .position(|prefix| prefix.symbol.starts_with(letter))?;
    Some((prefix, rest))
}

/// The unit × 10^`power`, by moving the decimal point of its decimal form. So
/// it is rounded once: 1 mg is exactly the double `1e-6`, which 1e-3/1e3 is not
/// bound to be.
fn shifted(unit: &Unit, power: i32) -> f64 {
    let shortest = format!("{:e}", unit.factor);
    let written = if unit.digits.is_empty() {
        &shortest
    } else {
        unit.digits
    };
    let moved = written.split_once('e').and_then(|(digits, exponent)| {
        let exponent: i32 = exponent.parse().ok()?;
        format!("{digits}e{}", exponent + power).parse().ok()
    });
    moved.expect("the scientific form of a number reads back with another exponent")
}
