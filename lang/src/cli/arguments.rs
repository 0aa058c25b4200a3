//! The command line as data. The only file that knows clap.

use crate::output::Format;
use clap::error::ErrorKind;
use clap::{Arg, ArgAction, ArgMatches, Command};
use std::ffi::OsString;
use std::path::PathBuf;

/// What is to be done.
#[derive(Debug, PartialEq)]
pub enum Task {
    /// Talk, or read entries from standard input.
    Prompt,
    /// Run a sheet; `-` is standard input.
    Sheet(PathBuf),
    /// Run the text of `-e`.
    Line(String),
    /// Check sheets and evaluate nothing.
    Check(Vec<PathBuf>),
    /// Judge the claims of sheets and show nothing else.
    Referee(Vec<PathBuf>),
    /// Show pages of the handbook.
    Help(Vec<String>),
    /// Something that is planned.
    NotYet(String),
}

/// Everything the command line says.
#[derive(Debug, PartialEq)]
pub struct Invocation {
    /// What is to be done.
    pub task: Task,
    /// The `NAME=VALUE` of every `--given`.
    pub givens: Vec<String>,
    /// The form of the output.
    pub format: Format,
    /// Where the output goes, if not to standard output.
    pub output: Option<PathBuf>,
}

/// Why there is no [`Invocation`].
#[derive(Debug, PartialEq)]
pub enum Refusal {
    /// A page was asked for (`--help`, `--version`).
    Shown(String),
    /// The command line is wrong: a reason.
    Wrong(String),
}

/// Commands that are planned and take any arguments.
const PLANNED: [(&str, &str); 2] = [
    ("paper", "what the paper needs: macros, tables, figures (not yet)"),
    ("tidy", "lay out a sheet in the one style (not yet)"),
];

/// Reads the arguments of a process, its name first.
pub fn read(arguments: impl IntoIterator<Item = OsString>) -> Result<Invocation, Refusal> {
    let matches = command().try_get_matches_from(arguments).map_err(refusal)?;
    invocation(&matches)
}

fn refusal(error: clap::Error) -> Refusal {
    let text = error.render().to_string();
    match error.kind() {
        ErrorKind::DisplayHelp | ErrorKind::DisplayVersion => Refusal::Shown(text),
        _ => {
            let first = text.lines().next().unwrap_or("").trim_start_matches("error: ");
            let tip = text.lines().find_map(|line| line.trim().strip_prefix("tip: "));
            let tip = tip.map(|tip| format!("; {tip}")).unwrap_or_default();
            Refusal::Wrong(format!("{first}{tip}; see zij --help"))
        }
    }
}

fn command() -> Command {
    let sheets = Arg::new("sheets")
        .value_name("SHEET")
        .num_args(1..)
        .required(true);
    let sheets = sheets.value_parser(clap::value_parser!(PathBuf));
    let check = Command::new("check")
        .about("check sheets and evaluate nothing")
        .arg(sheets.clone())
        .args(shared());
    let referee = Command::new("referee")
        .about("the claims alone: a verdict on each, and the slip that would explain a wrong one")
        .arg(sheets)
        .args(shared());
    let topic = Arg::new("topic").value_name("TOPIC").num_args(0..);
    let help = Command::new("help")
        .about("functions, units, constants, models, statements, errors: what they mean")
        .arg(topic.allow_hyphen_values(true).trailing_var_arg(true));
    let planned = PLANNED.map(|(name, about)| {
        let anything = Arg::new("anything").num_args(0..).allow_hyphen_values(true);
        Command::new(name)
            .about(about)
            .arg(anything.trailing_var_arg(true))
    });
    Command::new("zij")
        .version(env!("CARGO_PKG_VERSION"))
        .about("Computes with the distances, times and horizons of an expanding universe.")
        .override_usage("zij [OPTIONS] [SHEET]\n       zij [OPTIONS] -e EXPR\n       zij COMMAND …")
        .after_help("Without a sheet, zij asks for entries; `zij help` opens the handbook.")
        .disable_help_subcommand(true)
        .args_conflicts_with_subcommands(true)
        .subcommand_precedence_over_arg(true)
        .subcommand(check)
        .subcommand(referee)
        .subcommand(help)
        .subcommands(planned)
        .arg(
            Arg::new("sheet")
                .value_name("SHEET")
                .help("the sheet to run; - is standard input")
                .value_parser(clap::value_parser!(PathBuf)),
        )
        .arg(expression())
        .args(shared())
}

fn expression() -> Arg {
    Arg::new("expression")
        .short('e')
        .value_name("EXPR")
        .help("run this line; several make a sheet")
        .action(ArgAction::Append)
        .allow_hyphen_values(true)
        .conflicts_with("sheet")
}

fn shared() -> [Arg; 3] {
    let given = Arg::new("given")
        .long("given")
        .value_name("NAME=VALUE")
        .help("replace the value of a given of the sheet")
        .action(ArgAction::Append);
    let form = Arg::new("as")
        .long("as")
        .value_name("FORM")
        .help("the form of the output: text, json, csv, markdown")
        .default_value("text");
    let output = Arg::new("output")
        .short('o')
        .value_name("FILE")
        .help("write the output to a file, whole or not at all")
        .value_parser(clap::value_parser!(PathBuf));
    [given, form, output]
}

fn invocation(matches: &ArgMatches) -> Result<Invocation, Refusal> {
    let (task, options) = match matches.subcommand() {
        Some(("check", inner)) => (Task::Check(all(inner, "sheets")), Some(inner)),
        Some(("referee", inner)) => (Task::Referee(all(inner, "sheets")), Some(inner)),
        Some(("help", inner)) => (Task::Help(all(inner, "topic")), None),
        Some((planned, _)) => (Task::NotYet(planned.into()), None),
        None => (plain_task(matches), Some(matches)),
    };
    let Some(options) = options else {
        return Ok(Invocation {
            task,
            givens: Vec::new(),
            format: Format::Text,
            output: None,
        });
    };
    Ok(Invocation {
        task,
        givens: all(options, "given"),
        format: format(options)?,
        output: options.get_one("output").cloned(),
    })
}

fn plain_task(matches: &ArgMatches) -> Task {
    let lines: Vec<String> = all(matches, "expression");
    match matches.get_one::<PathBuf>("sheet") {
        Some(path) => Task::Sheet(path.clone()),
        None if lines.is_empty() => Task::Prompt,
        None => Task::Line(lines.join("\n")),
    }
}

fn all<T: Clone + Send + Sync + 'static>(matches: &ArgMatches, name: &str) -> Vec<T> {
    matches.get_many(name).into_iter().flatten().cloned().collect()
}

fn format(matches: &ArgMatches) -> Result<Format, Refusal> {
    let word = matches.get_one::<String>("as").map_or("text", String::as_str);
    match word {
        "text" => Ok(Format::Text),
        "json" => Ok(Format::Json),
        "csv" => Ok(Format::Csv),
        "markdown" => Ok(Format::Markdown),
        "latex" => Err(Refusal::Wrong("--as latex: not yet".into())),
        other => Err(Refusal::Wrong(format!(
            "--as {other}: the forms are text, json, csv and markdown"
        ))),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn parse(line: &str) -> Result<Invocation, Refusal> {
        let words = std::iter::once("zij").chain(line.split_whitespace());
        read(words.map(OsString::from))
    }

    fn task(line: &str) -> Task {
        parse(line).expect("a good command line").task
    }

    #[test]
    fn each_command_is_understood() {
        assert_eq!(task(""), Task::Prompt);
        assert_eq!(task("a.zij"), Task::Sheet("a.zij".into()));
        assert_eq!(task("-"), Task::Sheet("-".into()));
        assert_eq!(task("-e -1"), Task::Line("-1".into()));
        assert_eq!(task("-e z=1 -e D_L(z)"), Task::Line("z=1\nD_L(z)".into()));
        assert_eq!(task("check a b"), Task::Check(vec!["a".into(), "b".into()]));
        assert_eq!(task("referee a b"), Task::Referee(vec!["a".into(), "b".into()]));
        assert_eq!(task("help D_L"), Task::Help(vec!["D_L".into()]));
        assert_eq!(task("help"), Task::Help(vec![]));
        assert_eq!(task("tidy --write x"), Task::NotYet("tidy".into()));
    }

    #[test]
    fn options_stand_before_or_after_the_sheet() {
        let one = parse("--given z=-0.5 a.zij --as json -o out.json").expect("good");
        assert_eq!(one.givens, ["z=-0.5"]);
        assert_eq!(one.format, Format::Json);
        assert_eq!(one.output, Some("out.json".into()));
        assert_eq!(parse("check a --as json").expect("good").format, Format::Json);
    }

    #[test]
    fn wrong_command_lines_are_refused_in_one_line() {
        for line in [
            "a b",
            "--as xml a",
            "--as latex a",
            "check",
            "referee",
            "--such",
            "-e 1 a.zij",
            "--given",
        ] {
            match parse(line) {
                Err(Refusal::Wrong(reason)) => assert_eq!(reason.lines().count(), 1, "{reason}"),
                other => panic!("{line}: {other:?}"),
            }
        }
    }

    #[test]
    fn asking_for_the_page_is_no_error() {
        assert!(matches!(parse("--help"), Err(Refusal::Shown(page)) if page.contains("-e EXPR")));
        assert!(matches!(parse("--version"), Err(Refusal::Shown(_))));
    }
}
