//! How a diagnostic looks. The only file that knows ariadne, which draws the
//! lines of the sheet with their labels; the words around them are ours.
//!
//! Ariadne is not given the sheet but an `Excerpt` of it: the lines that
//! have labels, each cut to a width a person can read and with nothing in it
//! that a terminal would obey. So a line of fifty megabytes costs no more than
//! a short one, and the byte offsets it is told are always on a character.

use super::{Diagnostic, Fix, Label, Severity};
use crate::output::look::{self, Look, Tone};
use crate::source::{Places, Source, Span};
use ariadne::{CharSet, Color, Config, IndexType, Report, ReportKind};
use std::ops::Range;

/// Diagnostics shown at most: who has more will not read them.
pub const MAX_SHOWN: usize = 100;

/// Characters of a sheet's line shown at most.
const MAX_LINE: usize = 160;

/// Characters shown before the first label of a line that is cut.
const LEAD: usize = 40;

/// Characters of a message, label or note shown at most: they may quote the
/// sheet.
const MAX_TEXT: usize = 600;

/// Columns from one tab stop to the next.
const TAB: usize = 4;

/// All diagnostics, errors and warnings in the order of the sheet, and a count
/// of those left out.
#[must_use]
pub fn render(diagnostics: &[(usize, Diagnostic)], sources: &[Source], look: &Look) -> String {
    let places: Vec<_> = sources.iter().map(|source| Places::new(&source.text)).collect();
    let mut text = String::new();
    for (index, diagnostic) in diagnostics.iter().take(MAX_SHOWN) {
        if !text.is_empty() {
            text.push('\n');
        }
        match (sources.get(*index), places.get(*index)) {
            (Some(source), Some(places)) => text.push_str(&one(diagnostic, source, places, look)),
            _ => text.push_str(&head(diagnostic, look)),
        }
    }
    let left = diagnostics.len().saturating_sub(MAX_SHOWN);
    if left > 0 {
        text.push_str(&format!("\n{left} more not shown\n"));
    }
    text
}

fn one(diagnostic: &Diagnostic, source: &Source, places: &Places, look: &Look) -> String {
    let mut text = head(diagnostic, look);
    text.push_str(&drawing(diagnostic, source, places, look));
    for note in &diagnostic.notes {
        text.push_str(&paragraph(&shown(note, look), look));
    }
    for fix in &diagnostic.fixes {
        text.push_str(&repair(fix, source, places, look));
    }
    text
}

/// `error unlike-sides: cannot add a length and a time`
fn head(diagnostic: &Diagnostic, look: &Look) -> String {
    let (word, tone) = match diagnostic.severity {
        Severity::Error => ("error", Tone::Bad),
        Severity::Warning => ("warning", Tone::Doubt),
    };
    let lead = look.paint(tone, &format!("{word} {}:", diagnostic.code));
    let message = look.paint(Tone::Strong, &shown(&diagnostic.message, look));
    format!("{lead} {message}\n")
}

fn paragraph(text: &str, look: &Look) -> String {
    let room = look.width.saturating_sub(2).max(20);
    let lines = text.lines().flat_map(|line| look::wrap(line, room));
    lines.map(|line| format!("  {line}\n")).collect()
}

/// A text of ours that may quote the sheet, made safe to print.
fn shown(text: &str, look: &Look) -> String {
    let mut safe = look::harmless(text);
    if let Some((at, _)) = safe.char_indices().nth(MAX_TEXT) {
        safe.truncate(at);
        safe.push_str(gap(look));
    }
    safe
}

fn gap(look: &Look) -> &'static str {
    if look.unicode { "…" } else { "..." }
}

// ---- the drawing ----

fn drawing(diagnostic: &Diagnostic, source: &Source, places: &Places, look: &Look) -> String {
    let labels = labels(diagnostic, source);
    let spans: Vec<_> = labels.iter().map(|label| label.span).collect();
    let excerpt = Excerpt::new(source, places, &spans, look);
    let name = source.name.to_string();
    let colour = main_colour(diagnostic);
    let main = excerpt.spans[0].clone();
    let mut order: Vec<_> = (0..labels.len()).collect();
    order.sort_by_key(|index| excerpt.spans[*index].start);
    let mut report =
        Report::build(ReportKind::Custom("", colour), (name.clone(), main.clone())).with_config(config(look));
    for index in order {
        let colour = if index == 0 { colour } else { Color::Cyan };
        report.add_label(
            ariadne::Label::new((name.clone(), excerpt.spans[index].clone()))
                .with_message(shown(&labels[index].text, look))
                .with_color(colour),
        );
    }
    let mut bytes = Vec::new();
    let cache = ariadne::sources([(name.clone(), excerpt.text.clone())]);
    if report.finish().write(cache, &mut bytes).is_err() {
        return String::new();
    }
    let drawn = String::from_utf8_lossy(&bytes);
    // The first line is ariadne's own head, which is replaced by ours.
    let body = drawn.split_once('\n').map_or("", |(_, body)| body);
    let wrong = excerpt.place_of(main.start);
    let right = places.position(labels[0].span.start);
    let body = body.replacen(
        &format!("{name}:{}:{}", wrong.0, wrong.1),
        &format!("{}:{}:{}", look::harmless(&name), right.line, right.column),
        1,
    );
    own_colours(&body)
}

/// The main label first. An empty text would leave the place unmarked.
fn labels(diagnostic: &Diagnostic, source: &Source) -> Vec<Label> {
    let mut labels = vec![diagnostic.at.clone()];
    let others = diagnostic.others.iter();
    labels.extend(others.filter(|label| **label != diagnostic.at).cloned());
    if labels[0].text.is_empty() {
        labels[0].text = "here".into();
    }
    for label in &mut labels {
        label.span = first_line(within(label.span, &source.text), &source.text);
    }
    labels
}

/// The span inside the text, its ends on characters.
fn within(span: Span, text: &str) -> Span {
    let floor = |offset: u32| {
        let mut at = (offset as usize).min(text.len());
        while !text.is_char_boundary(at) {
            at -= 1;
        }
        at
    };
    let start = floor(span.start);
    Span::new(start, floor(span.end).max(start))
}

/// A span over several lines is marked on its first.
fn first_line(span: Span, text: &str) -> Span {
    let covered = &text[span.range()];
    let length = covered.find('\n').unwrap_or(covered.len());
    Span::new(span.start as usize, span.start as usize + length)
}

fn main_colour(diagnostic: &Diagnostic) -> Color {
    match diagnostic.severity {
        Severity::Error => Color::Red,
        Severity::Warning => Color::Yellow,
    }
}

fn config(look: &Look) -> Config {
    let characters = if look.unicode {
        CharSet::Unicode
    } else {
        CharSet::Ascii
    };
    Config::default()
        .with_index_type(IndexType::Byte)
        .with_char_set(characters)
        .with_color(look.colour)
        .with_tab_width(TAB)
}

/// The greys that ariadne draws with vanish on a light ground: the terminal's
/// own faint and plain text take their place.
fn own_colours(drawn: &str) -> String {
    drawn
        .replace("\x1b[38;5;249m", "\x1b[39m")
        .replace("\x1b[38;5;246m", "\x1b[2m")
        .replace("\x1b[38;5;240m", "\x1b[2m")
}

/// The labelled lines of a source, cut and disarmed, under as many empty lines
/// as make the line numbers right; and where the labels are in it.
struct Excerpt {
    text: String,
    spans: Vec<Range<usize>>,
}

impl Excerpt {
    fn new(source: &Source, places: &Places, labels: &[Span], look: &Look) -> Excerpt {
        let mut by_line: Vec<(usize, usize)> = labels
            .iter()
            .enumerate()
            .map(|(index, span)| (places.position(span.start).line, index))
            .collect();
        by_line.sort_unstable();
        let mut excerpt = Excerpt {
            text: String::new(),
            spans: vec![0..0; labels.len()],
        };
        let mut at = 1;
        for on_line in by_line.chunk_by(|(one, _), (other, _)| one == other) {
            let line = on_line[0].0;
            excerpt.text.push_str(&"\n".repeat(line - at));
            at = line;
            let indices: Vec<_> = on_line.iter().map(|(_, index)| *index).collect();
            excerpt.add_line(source, labels, &indices, look);
        }
        excerpt
    }

    /// Adds the line on which these labels are.
    fn add_line(&mut self, source: &Source, labels: &[Span], indices: &[usize], look: &Look) {
        let first = indices
            .iter()
            .map(|index| labels[*index].start)
            .min()
            .unwrap_or(0) as usize;
        let text = &source.text;
        let line_start = text[..first].rfind('\n').map_or(0, |at| at + 1);
        let cut_start = back(text, line_start, first, LEAD);
        let line_start = if first - line_start <= MAX_LINE / 2 {
            line_start
        } else {
            cut_start
        };
        let rest = &text[line_start..];
        let line_end = line_start + rest.find('\n').unwrap_or(rest.len());
        let cut_end = forward(text, line_start, line_end, MAX_LINE);
        let mut place = |offset: usize, new: usize| {
            for index in indices {
                let (span, label) = (&mut self.spans[*index], labels[*index]);
                if label.start as usize >= offset {
                    span.start = new;
                }
                if label.end as usize >= offset {
                    span.end = new;
                }
            }
        };
        let out = &mut self.text;
        if line_start > 0 && !text[..line_start].ends_with('\n') {
            out.push_str(gap(look));
        }
        place(line_start, out.len());
        for (at, letter) in text[line_start..cut_end].char_indices() {
            place(line_start + at, out.len());
            let letter = if letter == '\r' { ' ' } else { letter };
            out.push(if look::is_harmful(letter) {
                '\u{fffd}'
            } else {
                letter
            });
        }
        place(cut_end, out.len());
        if cut_end < line_end {
            out.push_str(gap(look));
        } else {
            // Room for a mark at the end of the line.
            out.push(' ');
        }
    }

    /// The line and column that ariadne will show for a byte.
    fn place_of(&self, offset: usize) -> (usize, usize) {
        let position = Source::new("", &self.text).position(offset as u32);
        (position.line, position.column)
    }
}

/// The offset `count` characters before `from`, not before `limit`.
fn back(text: &str, limit: usize, from: usize, count: usize) -> usize {
    let before = text[limit..from].char_indices().rev().take(count).last();
    before.map_or(from, |(at, _)| limit + at)
}

/// The offset `count` characters after `from`, not after `limit`.
fn forward(text: &str, from: usize, limit: usize, count: usize) -> usize {
    text[from..limit]
        .char_indices()
        .nth(count)
        .map_or(limit, |(at, _)| from + at)
}

// ---- repairs ----

/// `to mend: …` and the line as it would then read.
fn repair(fix: &Fix, source: &Source, places: &Places, look: &Look) -> String {
    let title = shown(&fix.title, look);
    let lead = look.paint(Tone::Good, "to mend:");
    let mut text = format!("  {lead} {title}\n");
    let Some((span, _)) = fix.edits.first() else {
        return text;
    };
    let number = places.position(span.start).line;
    if let Some(line) = mended_line(fix, &source.text, look) {
        text.push_str(&format!(
            "  {}{line}\n",
            look.paint(Tone::Faint, &format!("{number:>6} | "))
        ));
    }
    text
}

/// The first edited line after all its edits, cut like the lines above.
fn mended_line(fix: &Fix, text: &str, look: &Look) -> Option<String> {
    let (first, _) = fix.edits.first()?;
    let first = within(*first, text);
    let start = text[..first.start as usize].rfind('\n').map_or(0, |at| at + 1);
    let from = back(text, start, first.start as usize, MAX_LINE / 2);
    let mut line = String::new();
    let mut at = from;
    for (span, replacement) in &fix.edits {
        let span = within(*span, text);
        let between = text.get(at..span.start as usize)?;
        if between.contains('\n') {
            break;
        }
        line.push_str(between);
        line.push_str(replacement);
        at = span.end as usize;
    }
    let rest = &text[at..];
    let end = at + rest.find('\n').unwrap_or(rest.len());
    let stop = forward(text, at, end, MAX_LINE / 2);
    line.push_str(&text[at..stop]);
    let line = look::harmless(line.lines().next().unwrap_or("").trim_end());
    let before = if from > start { gap(look) } else { "" };
    let after = if stop < end { gap(look) } else { "" };
    Some(format!("{before}{line}{after}"))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn drawn(text: &str, diagnostic: Diagnostic) -> String {
        render(&[(0, diagnostic)], &[Source::new("s.zij", text)], &Look::PLAIN)
    }

    fn error(start: usize, end: usize) -> Diagnostic {
        Diagnostic::error("unlike-sides", "cannot add", Span::new(start, end), "a time")
    }

    #[test]
    fn message_label_line_and_place_are_there() {
        let text = "# Ω\nd = 30 Mpc\nt = d + 5 s\n";
        let at = text.find("5 s").expect("it is there");
        let shown = drawn(text, error(at, at + 3).and(Span::new(at - 4, at - 3), "a length"));
        assert!(shown.starts_with("error unlike-sides: cannot add\n"), "{shown}");
        for part in ["s.zij:3:9", "t = d + 5 s", "a time", "a length"] {
            assert!(shown.contains(part), "no {part} in\n{shown}");
        }
        assert!(!shown.contains("30 Mpc"), "{shown}");
    }

    #[test]
    fn places_at_the_end_and_in_nothing_are_drawn() {
        for (text, start, end) in [
            ("", 0, 0),
            ("a", 1, 1),
            ("a\n", 2, 2),
            ("a\r\nb", 9, 12),
            ("Ω", 1, 1),
        ] {
            let shown = drawn(text, error(start, end));
            assert!(shown.contains("a time"), "{text:?}\n{shown}");
        }
    }

    #[test]
    fn a_very_long_line_is_cut_around_its_label() {
        let text = format!("{}bad{}", "x ".repeat(500_000), " y".repeat(500_000));
        let shown = drawn(&text, error(1_000_000, 1_000_003));
        assert!(shown.len() < 3000, "{} bytes", shown.len());
        assert!(shown.contains("s.zij:1:1000001"), "{shown}");
        assert!(shown.contains("bad y"), "{shown}");
    }

    #[test]
    fn control_characters_do_not_reach_the_terminal() {
        let shown = drawn("a = \x1b[2J b", error(4, 5));
        assert!(!shown.contains('\x1b'), "{shown:?}");
    }

    #[test]
    fn without_unicode_all_is_ascii() {
        let look = Look {
            unicode: false,
            ..Look::PLAIN
        };
        let source = Source::new("s.zij", "a + b");
        let shown = render(&[(0, error(0, 1))], &[source], &look);
        assert!(shown.is_ascii(), "{shown}");
    }

    #[test]
    fn a_repair_shows_the_mended_line() {
        let text = "a = 1\nb = a + 5 s  # x\n";
        let at = text.find(" s").expect("it is there");
        let shown = drawn(
            text,
            error(at, at + 2).fix("drop the unit", Span::new(at, at + 2), ""),
        );
        assert!(shown.contains("to mend: drop the unit"), "{shown}");
        assert!(shown.contains("2 | b = a + 5  # x"), "{shown}");
    }

    #[test]
    fn only_so_many_are_shown() {
        let all: Vec<_> = (0..MAX_SHOWN + 7).map(|_| (0, error(0, 1))).collect();
        let shown = render(&all, &[Source::new("s", "a")], &Look::PLAIN);
        assert!(shown.ends_with("\n7 more not shown\n"), "{shown}");
    }

    #[test]
    fn a_span_over_lines_is_marked_on_the_first() {
        let shown = drawn("f(1,\n2,\n3", error(1, 9));
        assert!(shown.contains("f(1,") && !shown.contains("2,"), "{shown}");
    }

    #[test]
    fn colour_is_used_only_when_wanted() {
        let look = Look {
            colour: true,
            ..Look::PLAIN
        };
        let source = Source::new("s.zij", "a + b");
        let shown = render(&[(0, error(0, 1))], std::slice::from_ref(&source), &look);
        assert!(shown.contains("\x1b["));
        let shown = render(&[(0, error(0, 1))], &[source], &Look::PLAIN);
        assert!(!shown.contains("\x1b["));
    }
}
