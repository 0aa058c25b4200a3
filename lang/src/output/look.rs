//! What the place of output can show, and how things are set on it: width,
//! colour, characters. Colours are the terminal's own sixteen, so they follow
//! the reader's palette on a light ground as well as on a dark one.

use unicode_width::{UnicodeWidthChar, UnicodeWidthStr};

/// What the place of output can show.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Look {
    /// Columns.
    pub width: usize,
    /// Whether escape sequences for colour are understood and wanted.
    pub colour: bool,
    /// Whether characters beyond ASCII are shown.
    pub unicode: bool,
}

/// What a piece of text is, for colouring.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Tone {
    /// What stands back: descriptions, units, the model.
    Faint,
    /// What stands out: heads.
    Strong,
    /// A claim that agrees.
    Good,
    /// An error, a claim that disagrees.
    Bad,
    /// A warning.
    Doubt,
    /// A name of a function.
    Function,
    /// A unit.
    Unit,
    /// A model or a parameter.
    Model,
    /// A statement word.
    Word,
    /// A number.
    Number,
    /// A string or a comment.
    Quote,
}

impl Look {
    /// What a file or a pipe takes: wide, without colour, in Unicode as sheets
    /// are.
    pub const PLAIN: Look = Look {
        width: 100,
        colour: false,
        unicode: true,
    };

    /// The text in its colour.
    #[must_use]
    pub fn paint(&self, tone: Tone, text: &str) -> String {
        if self.colour && !text.is_empty() {
            format!("\x1b[{}m{text}\x1b[0m", tone.code())
        } else {
            text.to_owned()
        }
    }

    /// The text cut to `columns`, marked where something is missing.
    /// Escape sequences pass whole.
    #[must_use]
    pub fn clip(&self, text: &str, columns: usize) -> String {
        if width(text) <= columns {
            return text.to_owned();
        }
        let mut clipped = String::new();
        let mut used = 0;
        let mut rest = text;
        while let Some(letter) = rest.chars().next() {
            if rest.starts_with("\x1b[") {
                let end = rest.find('m').map_or(rest.len(), |at| at + 1);
                clipped.push_str(&rest[..end]);
                rest = &rest[end..];
                continue;
            }
            let columns_of_letter = letter.width().unwrap_or(0);
            if used + columns_of_letter < columns {
                clipped.push(letter);
                used += columns_of_letter;
            } else if used < columns {
                clipped.push(if self.unicode { '…' } else { '.' });
                used = columns;
            }
            rest = &rest[letter.len_utf8()..];
        }
        clipped
    }
}

impl Tone {
    const fn code(self) -> &'static str {
        match self {
            Tone::Faint => "2",
            Tone::Strong => "1",
            Tone::Good | Tone::Number => "32",
            Tone::Bad => "1;31",
            Tone::Doubt => "33",
            Tone::Function => "34",
            Tone::Unit => "36",
            Tone::Model => "35",
            Tone::Word => "1;34",
            Tone::Quote => "33",
        }
    }
}

/// How many columns a text takes, escape sequences not counted.
#[must_use]
pub fn width(text: &str) -> usize {
    let mut columns = 0;
    let mut rest = text;
    while let Some(at) = rest.find("\x1b[") {
        columns += rest[..at].width();
        rest = rest[at..].split_once('m').map_or("", |(_, after)| after);
    }
    columns + rest.width()
}

/// The text and spaces up to `columns`.
#[must_use]
pub fn pad(text: &str, columns: usize) -> String {
    let missing = columns.saturating_sub(width(text));
    format!("{text}{}", " ".repeat(missing))
}

/// Lines of at most `columns`, broken at spaces but not at no-break spaces. A
/// word that is longer stands on a line of its own.
#[must_use]
pub fn wrap(text: &str, columns: usize) -> Vec<String> {
    let mut lines = Vec::new();
    let mut line = String::new();
    for word in text.split([' ', '\n']).filter(|word| !word.is_empty()) {
        if !line.is_empty() && width(&line) + 1 + width(word) > columns {
            lines.push(std::mem::take(&mut line));
        }
        if !line.is_empty() {
            line.push(' ');
        }
        line.push_str(word);
    }
    if !line.is_empty() || lines.is_empty() {
        lines.push(line);
    }
    lines
}

/// The text with control characters made harmless: a sheet must not be able to
/// send escape sequences to the reader's terminal through a message.
#[must_use]
pub fn harmless(text: &str) -> String {
    text.chars()
        .map(|letter| if is_harmful(letter) { '\u{fffd}' } else { letter })
        .collect()
}

/// Control characters other than line break and tab, and the marks that
/// reverse the order of text.
#[must_use]
pub fn is_harmful(letter: char) -> bool {
    let turns = matches!(letter, '\u{202a}'..='\u{202e}' | '\u{2066}'..='\u{2069}' | '\u{2028}' | '\u{2029}');
    turns || (letter.is_control() && letter != '\n' && letter != '\t')
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn width_ignores_colour_and_counts_columns() {
        assert_eq!(width("\x1b[1;31mΩm\x1b[0m = 3"), 6);
        assert_eq!(pad("\x1b[2mz\x1b[0m", 3), "\x1b[2mz\x1b[0m  ");
    }

    #[test]
    fn wrapped_lines_keep_to_the_width() {
        assert_eq!(wrap("one two three", 7), ["one two", "three"]);
        assert_eq!(
            wrap("incomprehensibilities of it", 5),
            ["incomprehensibilities", "of it"]
        );
        assert_eq!(wrap("", 5), [""]);
    }

    #[test]
    fn clipped_text_keeps_its_colours_and_says_that_it_is_cut() {
        assert_eq!(Look::PLAIN.clip("Ωm = 0.3", 8), "Ωm = 0.3");
        assert_eq!(Look::PLAIN.clip("Ωm = 0.3", 4), "Ωm …");
        assert_eq!(Look::PLAIN.clip("\x1b[2mabcdef\x1b[0m", 3), "\x1b[2mab…\x1b[0m");
        assert_eq!(Look::PLAIN.clip("abc", 0), "");
    }

    #[test]
    fn escape_sequences_in_a_sheet_are_disarmed() {
        assert_eq!(harmless("a\x1b[2Jb\u{202e}"), "a\u{fffd}[2Jb\u{fffd}");
    }
}
