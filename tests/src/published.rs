//! Published values: rows of TOML, each a sheet that ends on a number, what it
//! has to be, and who says so.
//!
//! ```toml
//! [[value]]
//! name   = "parsec in metres"
//! sheet  = "1 pc [m]"
//! expect = "3.0856775814913673e16"
//! rel    = 1e-15
//! source = "IAU 2015 Resolution B2, note 4: 648000/π au"
//! ```
//!
//! `rel` is a part of the expected value, `abs` an amount in the unit shown;
//! a row has one of them or both, and then either will do. `remark` is for
//! readers. A row without a source fails.
//!
//! `missing = "sound_horizon"` names what the library does not have yet. Such a
//! row must be refused for that name and no other reason, so the mark has to go
//! when the name comes.

use crate::{repository, subject};
use serde::Deserialize;
use std::fmt::Write;
use std::path::Path;
use zij_lang::diagnostic::Diagnostic;

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Table {
    value: Vec<Row>,
}

/// One row.
#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Row {
    name: String,
    sheet: String,
    expect: String,
    rel: Option<f64>,
    abs: Option<f64>,
    source: String,
    missing: Option<String>,
    #[serde(default)]
    #[allow(dead_code, reason = "for readers of the file")]
    remark: String,
}

/// Computes every row of every file of `tests/published`.
///
/// # Panics
/// If any row is off, has no source or no tolerance, or there is none.
pub fn check_published() {
    let paths = repository::files("tests/published", "toml");
    assert!(!paths.is_empty(), "no published values");
    let mut failures = String::new();
    let mut failed = 0;
    let mut rows = 0;
    for path in &paths {
        for row in &read(path).value {
            rows += 1;
            if let Err(why) = row.verdict() {
                failed += 1;
                let _ = write!(failures, "\n{}: {}: {why}", repository::relative(path), row.name);
            }
        }
    }
    assert!(failed == 0, "{failed} of {rows} values are off{failures}");
}

fn read(path: &Path) -> Table {
    match toml::from_str(&repository::read(path)) {
        Ok(table) => table,
        Err(error) => panic!("{}: {error}", repository::relative(path)),
    }
}

impl Row {
    fn verdict(&self) -> Result<(), String> {
        if self.source.trim().is_empty() {
            return Err("no source".into());
        }
        if self.rel.is_none() && self.abs.is_none() {
            return Err("no tolerance".into());
        }
        let expected: f64 = self
            .expect
            .parse()
            .map_err(|error| format!("{}: {error}", self.expect))?;
        let report = subject::run(&self.sheet);
        if let Some(name) = &self.missing {
            let lacks = |one: &Diagnostic| one.is_error() && one.message.ends_with(&format!(" {name}"));
            let refused = subject::own_diagnostics(&report).iter().any(lacks);
            let why = || format!("`{name}` is marked missing, yet\n{}", subject::said(&report));
            return if refused { Ok(()) } else { Err(why()) };
        }
        let Some(computed) = subject::last_number(&report) else {
            return Err(format!("no number\n{}", subject::said(&report)));
        };
        let error = (computed - expected).abs();
        let allowed = (self.rel.unwrap_or(0.0) * expected.abs()).max(self.abs.unwrap_or(0.0));
        if error <= allowed && !report.has_errors() {
            return Ok(());
        }
        let relative = error / expected.abs();
        Err(format!(
            "{computed:e} for {expected:e}: {error:e} off, {relative:e} of it"
        ))
    }
}
