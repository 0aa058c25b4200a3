//! Diagnostics: what is wrong, where, and what would mend it. Plain data;
//! only `render` knows how they look.

use crate::source::Span;

pub mod render;

/// A message about a sheet.
#[derive(Clone, Debug, PartialEq)]
pub struct Diagnostic {
    /// Stable kebab-case key, also of its `help` page.
    pub code: &'static str,
    /// Error or warning.
    pub severity: Severity,
    /// One line that stands alone; lower case, no full stop.
    pub message: String,
    /// The narrowest span that is wrong.
    pub at: Label,
    /// Other places that matter.
    pub others: Vec<Label>,
    /// Further sentences.
    pub notes: Vec<String>,
    /// Edits that would mend it.
    pub fixes: Vec<Fix>,
}

/// How bad it is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Severity {
    /// Nothing is evaluated.
    Error,
    /// The sheet runs.
    Warning,
}

/// A place with a few words.
#[derive(Clone, Debug, PartialEq)]
pub struct Label {
    /// The place.
    pub span: Span,
    /// Shorter than the message; may be empty.
    pub text: String,
}

/// A repair: edits of the text.
#[derive(Clone, Debug, PartialEq)]
pub struct Fix {
    /// What it does, as an imperative.
    pub title: String,
    /// Replacements, in order of place, not overlapping.
    pub edits: Vec<(Span, String)>,
}

impl Diagnostic {
    /// An error with its main place.
    #[must_use]
    pub fn error(
        code: &'static str,
        message: impl Into<String>,
        span: Span,
        label: impl Into<String>,
    ) -> Diagnostic {
        Diagnostic {
            code,
            severity: Severity::Error,
            message: message.into(),
            at: Label {
                span,
                text: label.into(),
            },
            others: Vec::new(),
            notes: Vec::new(),
            fixes: Vec::new(),
        }
    }

    /// A warning with its main place.
    #[must_use]
    pub fn warning(
        code: &'static str,
        message: impl Into<String>,
        span: Span,
        label: impl Into<String>,
    ) -> Diagnostic {
        Diagnostic {
            severity: Severity::Warning,
            ..Diagnostic::error(code, message, span, label)
        }
    }

    /// With another place.
    #[must_use]
    pub fn and(mut self, span: Span, text: impl Into<String>) -> Diagnostic {
        self.others.push(Label {
            span,
            text: text.into(),
        });
        self
    }

    /// With a further sentence.
    #[must_use]
    pub fn note(mut self, text: impl Into<String>) -> Diagnostic {
        self.notes.push(text.into());
        self
    }

    /// With a repair that replaces one span.
    #[must_use]
    pub fn fix(mut self, title: impl Into<String>, span: Span, text: impl Into<String>) -> Diagnostic {
        self.fixes.push(Fix {
            title: title.into(),
            edits: vec![(span, text.into())],
        });
        self
    }

    /// Whether it stops evaluation.
    #[must_use]
    pub fn is_error(&self) -> bool {
        self.severity == Severity::Error
    }
}
