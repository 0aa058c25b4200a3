//! The prompt: entries typed, pasted or piped, each answered at once.
//!
//! ```text
//!   terminal --line--> editor --+
//!   dumb terminal -----> plain --+--entry--> session --> answer, diagnostics
//!   pipe -------------------------+
//! ```
//!
//! What is read is cut into entries (`entry`): a command of the prompt, alone
//! on its line, or text in the language. A pasted block is one sheet; a pipe is
//! answered statement by statement. Only `editor` knows rustyline.

mod editor;
mod entry;
mod history;
mod keep;
mod plain;

use crate::cli::{self, Failure, SheetFolder, error_look, output_look};
use crate::diagnostic::render;
use crate::handbook;
use crate::output::look::{self, Tone};
use crate::output::text;
use crate::report::Report;
use crate::session::Session;
use crate::source::Source;
use editor::Editor;
use entry::{Command, Entry};
use keep::Exchange;
use plain::Plain;
use std::cell::RefCell;
use std::io::IsTerminal;
use std::rc::Rc;

/// The session, shared with what completes and colours the line.
type Shared = Rc<RefCell<Session>>;

/// What came from the keyboard.
enum Line {
    /// Text, possibly of several lines.
    Text(String),
    /// Nothing: the line was cleared.
    Cleared,
    /// The end of the input.
    Ended,
}

/// Answers entries until there are no more. Returns the exit status: that of
/// the worst entry of a pipe, 0 for a person.
pub fn talk(session: Session) -> Result<u8, Failure> {
    let mut prompt = Prompt {
        session: Rc::new(RefCell::new(session)),
        exchange: Exchange::default(),
        count: 0,
        worst: 0,
    };
    if std::io::stdin().is_terminal() && std::io::stdout().is_terminal() {
        prompt.converse()?;
        return Ok(0);
    }
    let source = cli::read_standard_input()?;
    for entry in entry::each(&source.text) {
        if prompt.answer(&entry)? == Next::Leave {
            break;
        }
    }
    Ok(prompt.worst)
}

#[derive(Clone, Copy, PartialEq, Eq)]
enum Next {
    Go,
    Leave,
}

/// The state of the prompt.
struct Prompt {
    session: Shared,
    exchange: Exchange,
    /// Entries so far; messages call them by number.
    count: usize,
    worst: u8,
}

impl Prompt {
    /// Talks to a person.
    fn converse(&mut self) -> Result<(), Failure> {
        let look = output_look();
        cli::print(&greeting(&look))?;
        let mut keyboard = Keyboard::new(&self.session);
        loop {
            let text = match keyboard.line(&self.prompt())? {
                Line::Text(text) => text,
                Line::Cleared => continue,
                Line::Ended => return Ok(()),
            };
            keyboard.remember(&text);
            for entry in entry::block(&text) {
                if self.answer(&entry)? == Next::Leave {
                    return Ok(());
                }
            }
        }
    }

    /// The model and a therefore sign.
    fn prompt(&self) -> String {
        let look = output_look();
        let sign = if look.unicode { "∴" } else { ":." };
        let model = self.session.borrow().model_name();
        let model = look::harmless(&model);
        let model = if look.unicode {
            model
        } else {
            model.replace('…', "...")
        };
        format!("{} {sign} ", look.clip(&model, look.width / 2))
    }

    fn answer(&mut self, entry: &Entry) -> Result<Next, Failure> {
        match entry {
            Entry::Text(text) => self.enter(text)?,
            Entry::Command(Command::Leave) => return Ok(Next::Leave),
            Entry::Command(Command::Names) => self.names()?,
            Entry::Command(Command::Strike(name)) => self.strike(name)?,
            Entry::Command(Command::Keep(path)) => self.keep(path)?,
            Entry::Command(Command::Help(topic)) => self.help(topic)?,
            Entry::Command(Command::Misused(word, reason)) => {
                if self.is_bound(word) {
                    self.enter(word)?;
                } else {
                    self.refuse(reason);
                }
            }
        }
        Ok(Next::Go)
    }

    fn is_bound(&self, name: &str) -> bool {
        let names = self.session.borrow().names();
        names.iter().any(|(own, ..)| bare(own) == name)
    }

    /// Text in the language.
    fn enter(&mut self, text: &str) -> Result<(), Failure> {
        self.count += 1;
        let source = Source::new(&format!("entry {}", self.count), text);
        let report = self.session.borrow_mut().enter(&source);
        self.show(&report)?;
        if !report.has_errors() {
            self.exchange.add(text);
        }
        Ok(())
    }

    fn show(&mut self, report: &Report) -> Result<(), Failure> {
        if report.evaluated {
            cli::print(&text::render_entry(report, &output_look()))?;
        }
        let told = render::render(&report.diagnostics, &report.sources, &error_look());
        cli::complain(&told);
        self.worst = self.worst.max(report.exit_status());
        if let Err(failure) = cli::write_tables(report, &SheetFolder::current()) {
            self.refuse(&failure.to_string());
        }
        Ok(())
    }

    /// What has been bound, with dimensions.
    fn names(&self) -> Result<(), Failure> {
        let mut names = self.session.borrow().names();
        names.retain(|(name, ..)| name != "that");
        if names.is_empty() {
            return cli::print("no names yet: a line like z = 1.1 binds one\n");
        }
        cli::print(&name_lines(&names, &output_look()))
    }

    fn strike(&mut self, name: &str) -> Result<(), Failure> {
        let struck = self.session.borrow_mut().strike(name);
        match struck {
            Ok(()) => {
                self.exchange.strike(name);
                cli::print(&format!("{name} is struck\n"))
            }
            Err(reason) => {
                self.refuse(&reason);
                Ok(())
            }
        }
    }

    fn keep(&mut self, path: &str) -> Result<(), Failure> {
        let model = self.session.borrow().model_name();
        match self.exchange.keep(path, &model) {
            Ok(told) => cli::print(&format!("{told}\n")),
            Err(reason) => {
                self.refuse(&reason);
                Ok(())
            }
        }
    }

    /// A name of one's own, or a page of the handbook.
    fn help(&mut self, topic: &[String]) -> Result<(), Failure> {
        let look = output_look();
        let own = self.session.borrow().names();
        if let [name] = topic
            && let Some(own) = own.iter().find(|(own, ..)| bare(own) == name)
        {
            return cli::print(&name_lines(std::slice::from_ref(own), &look));
        }
        match handbook::page(topic, &look) {
            Ok(page) => cli::print(&page),
            Err(reason) => {
                self.refuse(&reason);
                Ok(())
            }
        }
    }

    /// Says why something was not done.
    fn refuse(&mut self, reason: &str) {
        let look = error_look();
        let reason = look::harmless(reason);
        cli::complain(&format!("{} {reason}\n", look.paint(Tone::Bad, "error:")));
        self.worst = self.worst.max(cli::STATUS_UNUSABLE);
    }
}

fn greeting(look: &look::Look) -> String {
    let version = env!("CARGO_PKG_VERSION");
    let text = format!("zij {version}; help opens the handbook, leave ends");
    let lines = look::wrap(&text, look.width);
    let faint = lines.iter().map(|line| look.paint(Tone::Faint, line) + "\n");
    faint.collect()
}

/// The name alone, of a signature too.
fn bare(name: &str) -> &str {
    name.split(['(', ' ']).next().unwrap_or(name)
}

/// A name, what it is, and how it was bound.
fn name_lines(names: &[(String, String, String)], look: &look::Look) -> String {
    let widest = |part: fn(&(String, String, String)) -> &str| {
        names
            .iter()
            .map(|name| look::width(part(name)))
            .max()
            .unwrap_or(0)
    };
    let name_width = widest(|(name, ..)| bare(name)).min(24);
    let dimension_width = widest(|(_, dimension, _)| dimension).min(28);
    let mut text = String::new();
    for (name, dimension, source) in names {
        let name = look::pad(bare(name), name_width);
        let dimension = look.paint(Tone::Faint, &look::pad(dimension, dimension_width));
        let source = crate::output::one_line(&look::harmless(source));
        let line = format!("{name}  {dimension}  {source}");
        text.push_str(look.clip(&line, look.width).trim_end());
        text.push('\n');
    }
    text
}

/// Where lines come from.
enum Keyboard {
    /// A terminal that can move its cursor.
    Editor(Box<Editor>),
    /// One that cannot.
    Plain(Plain),
}

impl Keyboard {
    fn new(session: &Shared) -> Keyboard {
        let dumb = std::env::var("TERM").is_ok_and(|term| matches!(&*term, "dumb" | ""));
        let editor = if dumb { None } else { Editor::new(session) };
        match editor {
            Some(editor) => Keyboard::Editor(Box::new(editor)),
            None => Keyboard::Plain(Plain),
        }
    }

    fn line(&mut self, prompt: &str) -> Result<Line, Failure> {
        match self {
            Keyboard::Editor(editor) => editor.line(prompt),
            Keyboard::Plain(plain) => plain.line(prompt),
        }
    }

    fn remember(&mut self, text: &str) {
        match self {
            Keyboard::Editor(editor) => editor.remember(text),
            Keyboard::Plain(_) => {}
        }
    }
}
