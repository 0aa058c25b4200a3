//! The outward forms of a [`Report`]: text for people, JSON, CSV and Markdown
//! for other programs. Nothing here touches a terminal or a file: a form is a
//! string, and what the terminal can show is told by a [`Look`].

pub mod csv;
pub mod json;
pub mod look;
pub mod markdown;
pub mod number;
pub mod referee;
pub mod text;

pub use look::{Look, Tone};

use crate::report::{Frame, Report, Shown};

/// An outward form.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Format {
    /// Aligned text for reading.
    Text,
    /// One JSON object.
    Json,
    /// Comma-separated values.
    Csv,
    /// Markdown with pipe tables.
    Markdown,
}

/// The report in this form, with a line break at its end unless it is empty.
#[must_use]
pub fn render(report: &Report, format: Format, look: &Look) -> String {
    match format {
        Format::Text => text::render(report, look),
        Format::Json => json::render(report),
        Format::Csv => csv::render(report),
        Format::Markdown => markdown::render(report),
    }
}

/// The word that has to stand beside a unit that does not spell its frame.
#[must_use]
pub fn frame_word(shown: &Shown) -> Option<&'static str> {
    let word = match shown.frame {
        Frame::Proper => return None,
        Frame::Comoving => "comoving",
        Frame::Mixed => "mixed frame",
    };
    (!spells_frame(&shown.unit)).then_some(word)
}

/// The frame as the machine-readable forms name it.
#[must_use]
pub fn frame_key(frame: Frame) -> &'static str {
    match frame {
        Frame::Proper => "proper",
        Frame::Comoving => "comoving",
        Frame::Mixed => "mixed",
    }
}

/// Whether a unit such as `cMpc` or `km/s/pMpc` names its frame itself.
fn spells_frame(unit: &str) -> bool {
    unit.split(|letter: char| !letter.is_alphabetic())
        .filter_map(zij_stdlib::units::find)
        .any(|found| found.unit.framed)
}

/// Runs of white space as one space: a statement over several lines becomes
/// one.
#[must_use]
pub fn one_line(text: &str) -> String {
    text.split_whitespace().collect::<Vec<_>>().join(" ")
}
