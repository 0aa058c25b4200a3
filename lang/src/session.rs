//! A session: text in, values and diagnostics out. It touches no terminal,
//! and files only through [`Files`].

use crate::report::Report;
use crate::source::Source;

/// How a session reaches files. Paths are relative to the sheet's folder.
pub trait Files {
    /// The bytes of a file, or a sentence on why not.
    fn read(&self, path: &str) -> Result<Vec<u8>, String>;
}

/// No files at all.
pub struct NoFiles;

impl Files for NoFiles {
    fn read(&self, path: &str) -> Result<Vec<u8>, String> {
        Err(format!("{path}: no files can be read here"))
    }
}

/// A sequence of sheets or entries that share their names.
pub struct Session {
    files: Box<dyn Files>,
}

/// What the name under the cursor could become.
#[derive(Clone, Debug, PartialEq)]
pub struct Completion {
    /// The name.
    pub name: String,
    /// `function`, `constant`, `unit`, `model`, `yours`.
    pub kind: &'static str,
    /// Signature in field notation and meaning: `D_C(z) [cMpc]  comoving distance …`.
    pub about: String,
}

/// What is known of a line before Enter.
#[derive(Clone, Debug, PartialEq)]
pub enum Hint {
    /// Nothing to say.
    Nothing,
    /// The dimension so far: `a length (comoving)`.
    Dimension(String),
    /// What is wrong, in one line.
    Wrong(String),
}

/// What a name is, for colouring.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum NameKind {
    /// A function, of the library or of the user.
    Function,
    /// A value or constant.
    Value,
    /// A unit.
    Unit,
    /// A model or a model parameter.
    Model,
    /// A statement word or keyword.
    Keyword,
    /// A number.
    Number,
    /// A string or a comment.
    Text,
    /// Not known.
    Unknown,
}

impl Session {
    /// A session with the library and nothing else.
    #[must_use]
    pub fn new(files: Box<dyn Files>) -> Session {
        Session { files }
    }

    /// Overrides `given NAME`, as `--given z=1.3` does. The error is a
    /// sentence.
    pub fn give(&mut self, assignment: &str) -> Result<(), String> {
        let _ = assignment;
        Ok(())
    }

    /// Checks a whole sheet and evaluates nothing.
    pub fn check(&mut self, source: &Source) -> Report {
        Report {
            sources: vec![source.clone()],
            ..Report::default()
        }
    }

    /// Checks a whole sheet and, if it has no error, runs it.
    pub fn run(&mut self, source: &Source) -> Report {
        let _ = &self.files;
        self.check(source)
    }

    /// One entry at the prompt (may be several lines): names stay, a later
    /// binding replaces an earlier one, `that` is the last value.
    pub fn enter(&mut self, source: &Source) -> Report {
        self.run(source)
    }

    /// The names bound at the prompt, each with its dimension in words and
    /// its source text, in order.
    #[must_use]
    pub fn names(&self) -> Vec<(String, String, String)> {
        Vec::new()
    }

    /// Forgets a name. The error is a sentence.
    pub fn strike(&mut self, name: &str) -> Result<(), String> {
        Err(format!("there is no name {name} to strike"))
    }

    /// The name of the assumed model, for the prompt.
    #[must_use]
    pub fn model_name(&self) -> String {
        "planck2018".into()
    }

    /// Whether an entry wants another line: an open bracket, a trailing
    /// operator, comma, `where` or `with`.
    #[must_use]
    pub fn wants_more(&self, entry: &str) -> bool {
        let _ = entry;
        false
    }

    /// The dimension of a line so far, or what is wrong with it.
    #[must_use]
    pub fn hint(&self, line: &str) -> Hint {
        let _ = line;
        Hint::Nothing
    }

    /// What the word that ends at byte `cursor` could become, and where that
    /// word starts.
    #[must_use]
    pub fn complete(&self, line: &str, cursor: usize) -> (usize, Vec<Completion>) {
        let _ = line;
        (cursor, Vec::new())
    }

    /// The pieces of a line by what they are; gaps are plain.
    #[must_use]
    pub fn highlight(&self, line: &str) -> Vec<(std::ops::Range<usize>, NameKind)> {
        let _ = line;
        Vec::new()
    }
}
