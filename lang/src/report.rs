//! What running a sheet gave: plain data that the output formats, the prompt
//! and the tests read. Spellings and units are settled here; looks are not.

use crate::diagnostic::Diagnostic;
use crate::source::Source;

/// The outcome of a sheet or of one entry at the prompt.
#[derive(Clone, Debug, Default)]
pub struct Report {
    /// Every source that a diagnostic may point into; the sheet is the first.
    pub sources: Vec<Source>,
    /// The model assumed by the sheet.
    pub model: Option<ModelReport>,
    /// What was shown, in the order of the sheet.
    pub items: Vec<Item>,
    /// Errors and warnings, each with the index of its source.
    pub diagnostics: Vec<(usize, Diagnostic)>,
    /// Whether evaluation was reached.
    pub evaluated: bool,
    /// Whether a value could not be computed (exit status 3).
    pub faulted: bool,
}

/// One thing shown.
#[derive(Clone, Debug)]
pub enum Item {
    /// `result NAME = …`
    Result(Shown),
    /// A bare expression.
    Printed(Shown),
    /// `claim …`
    Claim(ClaimReport),
    /// `table …`
    Table(TableReport),
    /// `help …` and the like: lines of text.
    Text(String),
}

/// A value with everything needed to show it.
#[derive(Clone, Debug, Default)]
pub struct Shown {
    /// The name of a result; the source text of a printed expression.
    pub name: String,
    /// The numbers, in `unit`.
    pub value: Numbers,
    /// The unit as it is shown, `""` for a plain number.
    pub unit: String,
    /// The frame spelled in the unit or beside it.
    pub frame: Frame,
    /// The dimension in words: `a length`, `a speed`, `a number`.
    pub dimension: String,
    /// The description given in the sheet.
    pub about: Option<String>,
}

/// The numbers of a value.
#[derive(Clone, Debug, Default, PartialEq)]
pub enum Numbers {
    /// One number.
    Scalar(f64),
    /// A series.
    Series(Vec<f64>),
    /// A truth value.
    Truth(bool),
    /// A series of truth values.
    Truths(Vec<bool>),
    /// A time or a signal that never comes.
    Never,
    /// Not computed: a diagnostic says why.
    #[default]
    Missing,
}

/// The frame of a value.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Frame {
    /// No length in it, or agreed to be proper.
    #[default]
    Proper,
    /// Comoving.
    Comoving,
    /// A power of (1+z) that is neither (a mixed quantity).
    Mixed,
}

/// The model a sheet ran with.
#[derive(Clone, Debug, Default)]
pub struct ModelReport {
    /// As written: `planck2018`, `flat with H0 = 70 km/s/Mpc, Ωm = 0.3`.
    pub name: String,
    /// Whether the sheet left it out and the default was taken.
    pub by_default: bool,
    /// Whether anything in the sheet depended on it.
    pub used: bool,
    /// Name, value in `unit`, unit.
    pub parameters: Vec<(String, Numbers, String)>,
    /// Paper or standard.
    pub source: String,
    /// Sentences on what it leaves out (`no radiation`).
    pub notes: Vec<String>,
}

/// A claim and its verdict.
#[derive(Clone, Debug)]
pub struct ClaimReport {
    /// The label, `""` if left out.
    pub place: String,
    /// The text of the claim.
    pub source: String,
    /// The verdict; `None` if a value could not be computed.
    pub agrees: Option<bool>,
    /// What was quoted, as written.
    pub quoted: String,
    /// The quoted number in `unit`, where it is one.
    pub quoted_value: Option<f64>,
    /// The computed value in `unit`.
    pub computed: Numbers,
    /// The unit of the quoted number.
    pub unit: String,
    /// The half width of the agreement, in `unit`, where there is one.
    pub tolerance: Option<f64>,
    /// The slips that would explain a number that disagrees, the likeliest
    /// first.
    pub slips: Vec<SlipReport>,
    /// Whether slips were looked for.
    pub searched: bool,
}

/// A known mistake that gives the quoted digits.
#[derive(Clone, Debug, PartialEq)]
pub struct SlipReport {
    /// Its name in the catalogue; two with a plus between them for a pair.
    pub key: String,
    /// What the mistake gives, in the unit of the claim.
    pub gives: f64,
    /// What was done, as it stands after “would follow from”.
    pub about: String,
}

/// A table's columns, already in their units.
#[derive(Clone, Debug)]
pub struct TableReport {
    /// The file to write, relative to the sheet; `None` for the terminal.
    pub path: Option<String>,
    /// Head, unit, description and values of each column.
    pub columns: Vec<TableColumn>,
}

/// One column of a table.
#[derive(Clone, Debug)]
pub struct TableColumn {
    /// Its head.
    pub name: String,
    /// Its unit, `""` for numbers.
    pub unit: String,
    /// Its description.
    pub about: Option<String>,
    /// The values; NaN only where a diagnostic says why.
    pub values: Vec<f64>,
}

impl TableReport {
    /// How many rows it has.
    #[must_use]
    pub fn rows(&self) -> usize {
        let lengths = self.columns.iter().map(|column| column.values.len());
        lengths.max().unwrap_or(0)
    }

    /// The values of a row.
    pub fn row(&self, row: usize) -> impl Iterator<Item = f64> + '_ {
        let value = move |column: &TableColumn| column.values.get(row).copied();
        self.columns
            .iter()
            .map(move |column| value(column).unwrap_or(f64::NAN))
    }
}

impl Report {
    /// Whether any diagnostic is an error.
    #[must_use]
    pub fn has_errors(&self) -> bool {
        self.diagnostics
            .iter()
            .any(|(_, diagnostic)| diagnostic.is_error())
    }

    /// 0 all well, 1 a claim disagrees, 2 the sheet has an error and nothing
    /// ran, 3 a value could not be computed.
    #[must_use]
    pub fn exit_status(&self) -> u8 {
        let disagrees = |item: &Item| matches!(item, Item::Claim(claim) if claim.agrees == Some(false));
        let undecided = |item: &Item| matches!(item, Item::Claim(claim) if claim.agrees.is_none());
        if self.faulted || self.items.iter().any(undecided) {
            3
        } else if self.has_errors() {
            2
        } else if self.items.iter().any(disagrees) {
            1
        } else {
            0
        }
    }
}
