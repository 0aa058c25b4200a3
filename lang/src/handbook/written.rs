//! The functions of the library that are written in the language itself: their
//! pages come with them, their signatures stand in their text.

use crate::ast::StatementKind;
use crate::output::one_line;
use crate::parser;
use std::collections::HashMap;
use zij_stdlib::prelude::{CHAPTERS, Written};

/// How a function is written.
pub(super) struct Form {
    /// `proper_size(theta [rad], z) [kpc]`, without the name.
    pub head: String,
    /// All of it, on one line.
    pub whole: String,
}

/// The forms of all functions by name.
pub(super) fn forms() -> HashMap<String, Form> {
    let mut forms = HashMap::new();
    for chapter in CHAPTERS {
        for statement in parser::parse(chapter.text).statements {
            let (StatementKind::Function(definition, _) | StatementKind::Value(definition)) = &statement.kind
            else {
                continue;
            };
            let text = |start: u32, end: u32| {
                let written = chapter.text.get(start as usize..end as usize).unwrap_or("");
                one_line(written)
            };
            let head = text(definition.name.span.end, definition.value.span.start);
            let form = Form {
                head: head.trim_end_matches(['=', ' ']).into(),
                whole: text(statement.span.start, statement.span.end),
            };
            forms.insert(definition.name.node.to_string(), form);
        }
    }
    forms
}

/// The spellings of a function, the one to show first.
pub(super) fn spellings(page: &Written) -> Vec<&'static str> {
    if page.symbol.is_empty() {
        vec![page.name]
    } else {
        vec![page.symbol, page.name]
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use zij_stdlib::prelude::written;

    #[test]
    fn every_written_function_has_a_form() {
        let forms = forms();
        for page in written() {
            let form = forms.get(page.name).unwrap_or_else(|| panic!("{}", page.name));
            assert!(form.whole.starts_with(page.name) && form.whole.contains(&form.head));
        }
    }

    #[test]
    fn the_chapters_read_without_a_complaint() {
        for chapter in CHAPTERS {
            assert_eq!(parser::parse(chapter.text).diagnostics, [], "{}", chapter.name);
        }
    }
}
