//! The line editor: history, completion, colours and the hint behind the line.
//! The only file that knows rustyline.

use super::{Line, Shared, entry, history};
use crate::cli::{self, Failure, output_look};
use crate::output::look::{self, Look, Tone};
use crate::session::{Completion, Hint, NameKind};
use rustyline::completion::{Completer, Pair};
use rustyline::error::ReadlineError;
use rustyline::highlight::{CmdKind, Highlighter};
use rustyline::hint::Hinter;
use rustyline::history::{FileHistory, History};
use rustyline::validate::{ValidationContext, ValidationResult, Validator};
use rustyline::{
    Cmd, ColorMode, CompletionType, ConditionalEventHandler, Config, Context, Event, EventContext,
    EventHandler, GraphemeClusterMode, KeyCode, KeyEvent, Modifiers, RepeatCount,
};
use std::borrow::Cow;
use std::path::PathBuf;

/// Longer lines are neither coloured nor hinted at: they were pasted, and the
/// editor asks again at every key.
const MAX_LIVE: usize = 8192;

/// The least room in which a hint says something.
const LEAST_HINT: usize = 12;

/// More candidates than this are shown only when asked for.
const MAX_CANDIDATES: usize = 100;

/// A terminal on which the line can be edited.
pub(super) struct Editor {
    editor: rustyline::Editor<Assistant, FileHistory>,
    history: Option<PathBuf>,
}

impl Editor {
    /// `None` where there is no such terminal.
    pub(super) fn new(session: &Shared) -> Option<Editor> {
        let mut editor = rustyline::Editor::with_config(config()?).ok()?;
        editor.set_helper(Some(Assistant {
            session: session.clone(),
            prompt: String::new(),
            look: output_look(),
        }));
        let going_on = EventHandler::Conditional(Box::new(GoingOn));
        editor.bind_sequence(KeyEvent(KeyCode::Enter, Modifiers::NONE), going_on);
        let new_line = Cmd::Insert(1, "\n".into());
        editor.bind_sequence(KeyEvent(KeyCode::Enter, Modifiers::ALT), new_line);
        let history = history::file();
        if let Some(path) = &history {
            // A history that cannot be read is none; it is not worth a word.
            let _ = editor.load_history(path);
        }
        Some(Editor { editor, history })
    }

    /// The next entry.
    pub(super) fn line(&mut self, prompt: &str) -> Result<Line, Failure> {
        let look = output_look();
        if let Some(assistant) = self.editor.helper_mut() {
            assistant.look = look;
            assistant.prompt = prompt.into();
        }
        let styled = (prompt.to_owned(), styled(prompt, &look));
        match self.editor.readline(&styled) {
            Ok(text) => Ok(Line::Text(text)),
            Err(ReadlineError::Interrupted | ReadlineError::Signal(_)) => Ok(Line::Cleared),
            Err(ReadlineError::Eof) => Ok(Line::Ended),
            Err(ReadlineError::Io(error)) if error.kind() == std::io::ErrorKind::InvalidData => {
                cli::complain("that key is not UTF-8 text, so the line was dropped\n");
                Ok(Line::Cleared)
            }
            Err(ReadlineError::Io(error)) => {
                Err(Failure::new(format!("the keyboard: {}", cli::reason(&error))))
            }
            Err(error) => Err(Failure::new(format!("the keyboard: {error}"))),
        }
    }

    /// Adds an entry to the history, at once: a conversation may end anyhow.
    pub(super) fn remember(&mut self, text: &str) {
        let text = text.trim();
        if text.is_empty() {
            return;
        }
        let added = self.editor.history_mut().add(text);
        if let (Ok(true), Some(path)) = (added, &self.history) {
            let _ = self.editor.append_history(path);
        }
    }
}

fn config() -> Option<Config> {
    let colours = if output_look().colour {
        ColorMode::Enabled
    } else {
        ColorMode::Disabled
    };
    let builder = Config::builder()
        .max_history_size(history::MAX_LINES)
        .and_then(|builder| builder.history_ignore_dups(true))
        .ok()?;
    Some(
        builder
            .auto_add_history(false)
            .completion_type(CompletionType::List)
            .completion_show_all_if_ambiguous(true)
            .completion_prompt_limit(MAX_CANDIDATES)
            .color_mode(colours)
            .bell_style(rustyline::config::BellStyle::None)
            // The other modes do not survive a line of 65536 columns.
            .grapheme_cluster_mode(GraphemeClusterMode::WcWidth)
            .build(),
    )
}

/// The prompt in colour: the model, and its sign standing back.
fn styled(prompt: &str, look: &Look) -> String {
    let (model, sign) = prompt.trim_end().rsplit_once(' ').unwrap_or(("", prompt));
    format!(
        "{} {} ",
        look.paint(Tone::Model, model),
        look.paint(Tone::Faint, sign)
    )
}

/// Enter at the end of an entry that goes on: a new, indented line.
struct GoingOn;

impl ConditionalEventHandler for GoingOn {
    fn handle(&self, _: &Event, _: RepeatCount, _: bool, context: &EventContext) -> Option<Cmd> {
        let at_end = context.pos() == context.line().len();
        let goes_on = at_end && entry::goes_on(context.line());
        goes_on.then(|| Cmd::Insert(1, format!("\n{}", entry::INDENT)))
    }
}

/// What helps while a line is typed.
struct Assistant {
    session: Shared,
    prompt: String,
    look: Look,
}

impl rustyline::Helper for Assistant {}

impl Validator for Assistant {
    fn validate(&self, context: &mut ValidationContext<'_>) -> rustyline::Result<ValidationResult> {
        Ok(if entry::goes_on(context.input()) {
            ValidationResult::Incomplete
        } else {
            ValidationResult::Valid(None)
        })
    }
}

// ---- colours ----

impl Highlighter for Assistant {
    fn highlight<'l>(&self, line: &'l str, _: usize) -> Cow<'l, str> {
        if line.len() > MAX_LIVE {
            return Cow::Borrowed(line);
        }
        let session = self.session.borrow();
        let pieces = session.highlight(line);
        Cow::Owned(painted(line, &pieces, &self.look))
    }

    fn highlight_hint<'h>(&self, hint: &'h str) -> Cow<'h, str> {
        Cow::Owned(self.look.paint(Tone::Faint, hint))
    }

    fn highlight_candidate<'c>(&self, candidate: &'c str, _: CompletionType) -> Cow<'c, str> {
        match candidate.split_once("  ") {
            Some((name, rest)) => Cow::Owned(format!("{name}  {}", self.look.paint(Tone::Faint, rest))),
            None => Cow::Borrowed(candidate),
        }
    }

    fn highlight_char(&self, line: &str, _: usize, kind: CmdKind) -> bool {
        // A key may change what an earlier word is; moving changes nothing.
        kind != CmdKind::MoveCursor && line.len() <= MAX_LIVE
    }
}

fn painted(line: &str, pieces: &[(std::ops::Range<usize>, NameKind)], look: &Look) -> String {
    let mut text = String::with_capacity(line.len() * 2);
    let mut at = 0;
    for (range, kind) in pieces {
        let (Some(before), Some(piece)) = (line.get(at..range.start), line.get(range.clone())) else {
            continue;
        };
        text.push_str(before);
        match tone(*kind) {
            Some(tone) => text.push_str(&look.paint(tone, piece)),
            None => text.push_str(piece),
        }
        at = range.end;
    }
    text.push_str(line.get(at..).unwrap_or(""));
    text
}

const fn tone(kind: NameKind) -> Option<Tone> {
    match kind {
        NameKind::Function => Some(Tone::Function),
        NameKind::Unit => Some(Tone::Unit),
        NameKind::Model => Some(Tone::Model),
        NameKind::Keyword => Some(Tone::Word),
        NameKind::Number => Some(Tone::Number),
        NameKind::Text => Some(Tone::Quote),
        NameKind::Value | NameKind::Unknown => None,
    }
}

// ---- the hint ----

/// Shown behind the line, and never taken into it.
struct Remark(String);

impl rustyline::hint::Hint for Remark {
    fn display(&self) -> &str {
        &self.0
    }

    fn completion(&self) -> Option<&str> {
        None
    }
}

impl Assistant {
    /// Whether the line ends in the beginning of a name.
    fn is_unfinished(&self, line: &str) -> bool {
        let (start, found) = self.session.borrow().complete(line, line.len());
        let word = line.get(start..).unwrap_or("");
        !word.is_empty() && !found.is_empty() && found.iter().all(|one| one.name != word)
    }
}

impl Hinter for Assistant {
    type Hint = Remark;

    fn hint(&self, line: &str, position: usize, _: &Context<'_>) -> Option<Remark> {
        if position < line.len() || line.trim().is_empty() || line.len() > MAX_LIVE {
            return None;
        }
        if entry::has_command(line) {
            return None;
        }
        let remark = match self.session.borrow().hint(line) {
            Hint::Nothing => return None,
            Hint::Dimension(words) => words,
            // Half a name is no mistake yet.
            Hint::Wrong(_) if self.is_unfinished(line) => return None,
            Hint::Wrong(words) => words,
        };
        // What is typed and what is remarked must differ without colour too.
        let mark = if self.look.colour { "   " } else { "   # " };
        let last = line.rsplit('\n').next().unwrap_or("");
        let before = if line.contains('\n') { "" } else { &self.prompt };
        let used = look::width(before) + look::width(last) + mark.len();
        let room = self.look.width.checked_sub(used % self.look.width + 1)?;
        let remark = crate::output::one_line(&look::harmless(&remark));
        (room >= LEAST_HINT).then(|| Remark(format!("{mark}{}", self.look.clip(&remark, room))))
    }
}

// ---- completion ----

impl Completer for Assistant {
    type Candidate = Pair;

    fn complete(
        &self,
        line: &str,
        position: usize,
        _: &Context<'_>,
    ) -> rustyline::Result<(usize, Vec<Pair>)> {
        let session = self.session.borrow();
        if let Some((start, names)) = struck(line, position, &session.names()) {
            return Ok((start, pairs(&names, false, &self.look)));
        }
        let (start, mut found) = session.complete(line, position);
        let word = line.get(start..position).unwrap_or("");
        if word.is_empty() {
            return Ok((position, Vec::new()));
        }
        if line.get(..start).is_some_and(|before| before.trim().is_empty()) {
            found.extend(commands(word));
        }
        let called = line.get(position..).is_some_and(|rest| rest.starts_with('('));
        Ok((start, pairs(&found, !called, &self.look)))
    }
}

/// The names that may follow `strike`.
fn struck(
    line: &str,
    position: usize,
    names: &[(String, String, String)],
) -> Option<(usize, Vec<Completion>)> {
    let word = line.get(..position)?.strip_prefix("strike ")?;
    let found = names
        .iter()
        .filter(|(name, ..)| name.starts_with(word) && name != "that");
    let completion = |(name, dimension, _): &(String, String, String)| Completion {
        name: super::bare(name).into(),
        kind: "yours",
        about: dimension.clone(),
    };
    Some((position - word.len(), found.map(completion).collect()))
}

fn commands(word: &str) -> impl Iterator<Item = Completion> + '_ {
    let all = [
        ("leave", "end the conversation"),
        ("names", "what has been bound so far"),
        ("strike", "forget a name: strike NAME"),
        ("keep", "save the exchange as a sheet: keep \"note.zij\""),
    ];
    let fits = move |(name, _): &(&str, &str)| name.starts_with(word);
    all.into_iter().filter(fits).map(|(name, about)| Completion {
        name: name.into(),
        kind: "command",
        about: about.into(),
    })
}

/// Candidates as they are shown, one a line: name, kind, meaning.
fn pairs(found: &[Completion], call: bool, look: &Look) -> Vec<Pair> {
    let widest = |part: fn(&Completion) -> &str| found.iter().map(|one| look::width(part(one))).max();
    let name_width = widest(|one| &one.name).unwrap_or(0).min(24);
    let kind_width = widest(|one| one.kind).unwrap_or(0);
    let pair = |one: &Completion| {
        let name = look::pad(&one.name, name_width);
        let kind = look::pad(one.kind, kind_width);
        let about = crate::output::one_line(&look::harmless(&one.about));
        // The editor sets candidates in columns where they are short.
        let line = look::pad(&format!("{name}  {kind}  {about}"), look.width / 2 + 1);
        let bracket = if call && one.kind == "function" { "(" } else { "" };
        Pair {
            display: look.clip(&line, look.width.saturating_sub(3)),
            replacement: format!("{}{bracket}", one.name),
        }
    };
    found.iter().map(pair).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    const COLOUR: Look = Look {
        width: 60,
        colour: true,
        unicode: true,
    };

    #[test]
    fn colours_change_no_character() {
        let line = "D_C(3) [Gpc]";
        let pieces = [
            (0..3, NameKind::Function),
            (4..5, NameKind::Number),
            (8..11, NameKind::Unit),
        ];
        let text = painted(line, &pieces, &COLOUR);
        assert_eq!(look::width(&text), line.len());
        assert!(text.starts_with("\x1b[34mD_C\x1b[0m("), "{text:?}");
        let plain = Look {
            colour: false,
            ..COLOUR
        };
        assert_eq!(painted(line, &pieces, &plain), line);
    }

    #[test]
    fn pieces_that_are_no_part_of_the_line_are_passed_over() {
        let pieces = [(1..2, NameKind::Number), (0..9, NameKind::Unit)];
        assert_eq!(painted("Ωm", &pieces, &COLOUR), "Ωm");
    }

    #[test]
    fn candidates_fit_on_a_line_and_functions_open_their_bracket() {
        let found = [Completion {
            name: "D_C".into(),
            kind: "function",
            about: "D_C(z) [cMpc]  comoving distance along the line of sight to redshift z".into(),
        }];
        let pairs = pairs(&found, true, &COLOUR);
        assert_eq!(pairs[0].replacement, "D_C(");
        assert!(look::width(&pairs[0].display) < COLOUR.width);
    }
}
