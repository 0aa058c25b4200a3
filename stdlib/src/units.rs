//! Units of measurement: the catalogue and how a spelling is found in it.

use crate::dimension::Dimension;

/// One unit.
pub struct Unit {
    /// Its symbol, as printed.
    pub symbol: &'static str,
    /// Other spellings that are read.
    pub aliases: &'static [&'static str],
    /// Its name in words.
    pub name: &'static str,
    /// Its size in SI base units (radian, magnitude: 1).
    pub factor: f64,
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

/// A spelling found in the catalogue.
#[derive(Clone, Copy)]
pub struct Found {
    /// The unit, without its prefix.
    pub unit: &'static Unit,
    /// The size of the prefixed unit in SI.
    pub factor: f64,
}

/// All units.
pub static UNITS: &[Unit] = &[];

/// The unit of this spelling, prefix included.
#[must_use]
pub fn find(spelling: &str) -> Option<Found> {
    let _ = spelling;
    None
}
