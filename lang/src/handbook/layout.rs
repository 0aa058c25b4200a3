//! How a page is set: heads, paragraphs, rows of a label and a text, sheets in
//! colour, and the ASCII form of it all.

use crate::output::look::{self, Look, Tone};
use crate::token::{self, Token, TokenKind};
use std::borrow::Cow;

/// Columns of the widest text: longer lines are hard to read.
const MAX_WIDTH: usize = 96;

/// What is set below a head stands this far in.
const INDENT: usize = 2;

/// Labels longer than this stand on a line of their own.
const MAX_LABEL: usize = 30;

/// A page that is being set.
pub(super) struct Setter<'a> {
    look: &'a Look,
    text: String,
}

impl<'a> Setter<'a> {
    pub(super) fn new(look: &'a Look) -> Setter<'a> {
        Setter {
            look,
            text: String::new(),
        }
    }

    /// The page.
    pub(super) fn finish(self) -> String {
        self.text
    }

    /// The text in characters that are shown.
    fn shown<'t>(&self, text: &'t str) -> Cow<'t, str> {
        if self.look.unicode || text.is_ascii() {
            Cow::Borrowed(text)
        } else {
            Cow::Owned(ascii(text))
        }
    }

    fn room(&self) -> usize {
        self.look.width.clamp(20, MAX_WIDTH)
    }

    /// A blank line, but none at the top.
    pub(super) fn gap(&mut self) {
        if !self.text.is_empty() {
            self.text.push('\n');
        }
    }

    /// What the page is about, and beside it what else that is.
    pub(super) fn head(&mut self, title: &str, aside: &str) {
        let (title, aside) = (&*self.shown(title), &*self.shown(aside));
        let strong = self.look.paint(Tone::Strong, title);
        let faint = self.look.paint(Tone::Faint, aside);
        if aside.is_empty() {
            for line in look::wrap(title, self.room()) {
                self.text
                    .push_str(&format!("{}\n", self.look.paint(Tone::Strong, &line)));
            }
        } else if look::width(title) + look::width(aside) + 3 <= self.room() {
            self.text.push_str(&format!("{strong}   {faint}\n"));
        } else {
            self.head(title, "");
            self.lines(aside, INDENT, Some(Tone::Faint));
        }
    }

    /// A paragraph below a head.
    pub(super) fn paragraph(&mut self, text: &str) {
        self.lines(text, INDENT, None);
    }

    fn lines(&mut self, text: &str, indent: usize, tone: Option<Tone>) {
        for line in look::wrap(&self.shown(text), self.room() - indent) {
            let line = match tone {
                Some(tone) => self.look.paint(tone, &line),
                None => line,
            };
            self.text.push_str(&format!("{:indent$}{line}\n", ""));
        }
    }

    /// Labels with their texts, those without a text left out.
    pub(super) fn rows<L: AsRef<str>, T: AsRef<str>>(&mut self, rows: &[(L, T)]) {
        let rows: Vec<_> = rows
            .iter()
            .map(|(label, text)| (self.shown(label.as_ref()), self.shown(text.as_ref())))
            .filter(|(_, text)| !text.is_empty())
            .collect();
        let fits = |width: &usize| *width <= MAX_LABEL.min(self.room() / 2);
        let widths = rows.iter().map(|(label, _)| look::width(label)).filter(fits);
        let column = widths.max().unwrap_or(0);
        for (label, text) in rows {
            self.row(&label, &text, column);
        }
    }

    fn row(&mut self, label: &str, text: &str, column: usize) {
        let start = INDENT + column + 2;
        let room = self.room().saturating_sub(start);
        let (start, lines) = if room < 16 || look::width(label) > column {
            self.text.push_str(&format!(
                "{:INDENT$}{}\n",
                "",
                self.look.paint(Tone::Faint, label)
            ));
            let start = start.min(3 * INDENT);
            (start, look::wrap(text, self.room() - start))
        } else {
            let label = self.look.paint(Tone::Faint, &look::pad(label, column));
            self.text.push_str(&format!("{:INDENT$}{label}  ", ""));
            let mut lines = look::wrap(text, room).into_iter();
            self.text
                .push_str(&format!("{}\n", lines.next().unwrap_or_default()));
            (start, lines.collect())
        };
        for line in lines {
            self.text.push_str(&format!("{:start$}{line}\n", ""));
        }
    }

    /// Lines of a sheet in their colours, as they stand.
    pub(super) fn sheet(&mut self, sheet: &str) {
        for line in self.shown(sheet).lines() {
            let line = painted(line, self.look);
            self.text.push_str(&format!("{:1$}{line}\n", "", 2 * INDENT));
        }
    }
}

/// A line of a sheet in its colours.
pub(super) fn painted(line: &str, look: &Look) -> String {
    let tokens = token::lex_all(line);
    let mut text = String::new();
    let mut at = 0;
    let mut in_bracket = false;
    for (place, token) in tokens.iter().enumerate() {
        let range = token.span.range();
        in_bracket = match token.kind {
            TokenKind::LeftBracket => true,
            TokenKind::RightBracket => false,
            _ => in_bracket,
        };
        let written = &line[range.clone()];
        text.push_str(&line[at..range.start]);
        match tone(*token, tokens.get(place + 1), in_bracket) {
            Some(tone) => text.push_str(&look.paint(tone, written)),
            None => text.push_str(written),
        }
        at = range.end;
    }
    text.push_str(&line[at..]);
    text
}

fn tone(token: Token, next: Option<&Token>, in_bracket: bool) -> Option<Tone> {
    let kind = token.kind;
    let called =
        next.is_some_and(|next| next.kind == TokenKind::LeftParenthesis && next.span.start == token.span.end);
    match kind {
        TokenKind::Comment | TokenKind::String => Some(Tone::Quote),
        TokenKind::Number | TokenKind::Concise | TokenKind::Infinity => Some(Tone::Number),
        TokenKind::Word if called => Some(Tone::Function),
        TokenKind::Word if in_bracket => Some(Tone::Unit),
        kind if kind.is_reserved() => Some(Tone::Word),
        _ => None,
    }
}

/// The text in ASCII, for a terminal that shows nothing else: letters by their
/// names, signs by what stands for them.
pub(super) fn ascii(text: &str) -> String {
    let mut plain = String::with_capacity(text.len());
    for letter in text.chars() {
        if letter.is_ascii() {
            plain.push(letter);
        } else {
            plain.push_str(stand_in(letter));
        }
    }
    plain
}

fn stand_in(letter: char) -> &'static str {
    match letter {
        'Ω' => "Omega_",
        'Λ' => "Lambda",
        'Σ' | '∑' => "Sum",
        'Γ' => "Gamma",
        'Δ' => "Delta",
        'Φ' => "Phi",
        'Ψ' => "Psi",
        'α' => "alpha",
        'β' => "beta",
        'γ' => "gamma",
        'δ' => "delta",
        'ε' => "epsilon",
        'η' => "eta",
        'θ' | 'ϑ' => "theta",
        'κ' => "kappa",
        'λ' => "lambda",
        'μ' | 'µ' => "mu",
        'ν' => "nu",
        'ξ' => "xi",
        'π' => "pi",
        'ρ' => "rho",
        'σ' => "sigma",
        'τ' => "tau",
        'φ' | 'ϕ' => "phi",
        'χ' => "chi",
        'ψ' => "psi",
        'ω' => "omega",
        'ħ' => "hbar",
        'Å' => "Angstrom",
        '⊙' | '☉' => "sun",
        '⊕' => "earth",
        '−' | '–' | '—' | '‑' => "-",
        '×' | '·' | '⋅' => "*",
        '÷' => "/",
        '±' => "+-",
        '≤' => "<=",
        '≥' => ">=",
        '≠' => "!=",
        '≈' | '∼' | '≃' => "~",
        '∞' => "infinity",
        '√' => "sqrt",
        '∫' => "integral ",
        '∂' => "d",
        '′' | '’' | '‘' => "'",
        '″' | '“' | '”' => "\"",
        '°' => " deg",
        '…' => "...",
        '∴' => ":.",
        '→' => "->",
        '⁰' => "^0",
        '¹' => "^1",
        '²' => "^2",
        '³' => "^3",
        '⁴' => "^4",
        '⁵' => "^5",
        '⁶' => "^6",
        '⁷' => "^7",
        '⁸' => "^8",
        '⁹' => "^9",
        '⁻' => "^-",
        '⁺' => "^+",
        'ᶻ' => "^z",
        '½' => "1/2",
        '₀' => "0",
        '₁' => "1",
        '₂' => "2",
        '₃' => "3",
        '₄' => "4",
        '₅' => "5",
        '₆' => "6",
        '₇' => "7",
        '₈' => "8",
        '₉' => "9",
        '\u{a0}' | '\u{2009}' | '\u{202f}' => " ",
        'á' | 'à' | 'ä' | 'å' => "a",
        'é' | 'è' | 'ë' => "e",
        'í' | 'ï' => "i",
        'ó' | 'ö' | 'ø' => "o",
        'ú' | 'ü' => "u",
        'ñ' => "n",
        'ç' => "c",
        _ => "?",
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn rows_align_and_wrap_below_themselves() {
        let look = Look {
            width: 30,
            ..Look::PLAIN
        };
        let mut setter = Setter::new(&look);
        setter.rows(&[
            ("z", "redshift, more than minus one"),
            ("formula", "x"),
            ("none", ""),
        ]);
        assert_eq!(
            setter.finish(),
            "  z        redshift, more than\n           minus one\n  formula  x\n"
        );
    }

    #[test]
    fn a_page_without_unicode_has_none() {
        let look = Look {
            unicode: false,
            ..Look::PLAIN
        };
        let mut setter = Setter::new(&look);
        setter.head("D_C(z)", "(c/H0) ∫₀ᶻ dz′/E(z′) — “Ωm”");
        assert!(setter.finish().is_ascii());
    }

    #[test]
    fn colours_change_no_character_of_a_sheet() {
        let look = Look {
            colour: true,
            ..Look::PLAIN
        };
        let line = "claim \"a\": D_C(3) [Gpc] is 6.4 Gpc   # Ω";
        assert_eq!(look::width(&painted(line, &look)), look::width(line));
        assert_eq!(painted(line, &Look::PLAIN), line);
    }
}
