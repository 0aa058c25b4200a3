//! The prompt in a terminal: keys go in through a pseudo-terminal, and what is
//! looked at is the screen that a person would see.

#![cfg(unix)]

use portable_pty::{Child, CommandBuilder, MasterPty, PtySize, native_pty_system};
use std::fs;
use std::io::{Read, Write};
use std::num::NonZero;
use std::path::{Path, PathBuf};
use std::sync::{Arc, Mutex, OnceLock};
use std::time::{Duration, Instant};
use tempfile::TempDir;
use zij_tests::repository;

/// A busy machine is slow; a broken prompt never answers.
const PATIENCE: Duration = Duration::from_secs(30);

const ENTER: &str = "\r";
const ALT_ENTER: &str = "\x1b\r";
const TAB: &str = "\t";
const UP: &str = "\x1b[A";
const CTRL_C: &str = "\x03";
const CTRL_D: &str = "\x04";
const CTRL_U: &str = "\x15";

/// The program, built once with the profile of these tests.
fn program() -> &'static Path {
    static PROGRAM: OnceLock<PathBuf> = OnceLock::new();
    PROGRAM.get_or_init(|| {
        let build = escargot::CargoBuild::new()
            .manifest_path(repository::root().join("Cargo.toml"))
            .package("zij-lang")
            .bin("zij")
            .current_release();
        build.run().expect("the program builds").path().to_owned()
    })
}

/// A terminal with the prompt in it.
struct Terminal {
    keys: Box<dyn Write + Send>,
    screen: Arc<Mutex<vt100::Parser>>,
    child: Box<dyn Child + Send + Sync>,
    // Closing it would hang up on the program.
    _master: Box<dyn MasterPty + Send>,
    home: TempDir,
}

impl Terminal {
    /// A terminal of a usual size, with a home of its own.
    fn new() -> Terminal {
        Terminal::open(80, &[], TempDir::new().expect("a folder"))
    }

    fn open(columns: u16, environment: &[(&str, &str)], home: TempDir) -> Terminal {
        let rows = NonZero::new(40).expect("some rows");
        let width = NonZero::new(columns).expect("some columns");
        let size = PtySize {
            rows: rows.get(),
            cols: columns,
            pixel_width: 0,
            pixel_height: 0,
        };
        let pair = native_pty_system().openpty(size).expect("a pseudo-terminal");
        let mut command = CommandBuilder::new(program());
        command.env_clear();
        command.cwd(home.path());
        command.env("HOME", home.path());
        command.env("TERM", "xterm-256color");
        command.env("LC_ALL", "C.UTF-8");
        for (name, value) in environment {
            command.env(name, value);
        }
        let child = pair.slave.spawn_command(command).expect("the program starts");
        drop(pair.slave);
        let screen = Arc::new(Mutex::new(vt100::Parser::new(rows, width, 0)));
        let mut output = pair.master.try_clone_reader().expect("its output");
        let seen = screen.clone();
        std::thread::spawn(move || {
            let mut bytes = [0; 4096];
            while let Ok(count @ 1..) = output.read(&mut bytes) {
                seen.lock().expect("the screen").process(&bytes[..count]);
            }
        });
        let keys = pair.master.take_writer().expect("its keyboard");
        Terminal {
            keys,
            screen,
            child,
            _master: pair.master,
            home,
        }
    }

    fn press(&mut self, keys: &str) {
        self.keys.write_all(keys.as_bytes()).expect("keys are taken");
        self.keys.flush().expect("keys are taken");
    }

    /// Types an entry and waits until the prompt has it.
    fn enter(&mut self, entry: &str) {
        self.press(entry);
        self.press(ENTER);
    }

    fn text(&self) -> String {
        let screen = self.screen.lock().expect("the screen");
        let columns = screen.screen().size().1.get();
        let rows = screen.screen().rows(0, columns);
        let rows: Vec<_> = rows.map(|row| row.trim_end().to_owned()).collect();
        rows.join("\n").trim_end().to_owned()
    }

    /// Waits until something is true of the screen.
    #[track_caller]
    fn wait(&self, what: &str, is_so: impl Fn(&str) -> bool) {
        let start = Instant::now();
        while !is_so(&self.text()) {
            assert!(
                start.elapsed() < PATIENCE,
                "{what}: not on the screen\n{}",
                self.text()
            );
            std::thread::sleep(Duration::from_millis(10));
        }
    }

    #[track_caller]
    fn sees(&self, text: &str) {
        self.wait(text, |screen| screen.contains(text));
    }

    /// Waits for an empty prompt on the last line.
    #[track_caller]
    fn is_ready(&self) {
        self.wait("an empty prompt", |screen| {
            let last = screen.lines().last().unwrap_or("");
            last.ends_with('∴') || last.ends_with(":.")
        });
    }

    /// Clears the line and waits for the next prompt: what is typed before it
    /// is there goes with the line.
    #[track_caller]
    fn interrupt(&mut self) {
        let prompts = |screen: &str| screen.matches('∴').count();
        self.wait("a prompt", |screen| {
            screen.lines().last().is_some_and(|line| line.contains('∴'))
        });
        let before = prompts(&self.text());
        self.press(CTRL_C);
        self.wait("another prompt", |screen| prompts(screen) > before);
    }

    /// Waits for the end, and its status.
    #[track_caller]
    fn status(&mut self) -> u32 {
        let start = Instant::now();
        loop {
            if let Some(status) = self.child.try_wait().expect("a status") {
                return status.exit_code();
            }
            assert!(start.elapsed() < PATIENCE, "it does not end\n{}", self.text());
            std::thread::sleep(Duration::from_millis(10));
        }
    }

    #[track_caller]
    fn leave(mut self) -> TempDir {
        // Between two prompts the terminal itself would take the key.
        self.is_ready();
        self.press(CTRL_D);
        assert_eq!(self.status(), 0);
        self.home
    }
}

#[test]
fn the_prompt_names_the_model_and_answers() {
    let mut terminal = Terminal::new();
    terminal.sees("planck2018 ∴");
    terminal.enter("3 Mpc + 500 kpc");
    terminal.sees("= 3.5 Mpc   a length");
    terminal.enter("assume wmap9");
    terminal.sees("wmap9 ∴");
    terminal.enter("that * 2");
    terminal.sees("= 7 Mpc");
    terminal.enter("leave");
    assert_eq!(terminal.status(), 0);
}

#[test]
fn a_remark_tells_the_dimension_before_enter() {
    let mut terminal = Terminal::new();
    terminal.is_ready();
    terminal.press("D_C(1)");
    terminal.sees("planck2018 ∴ D_C(1)   a length (comoving)");
    terminal.press(" + D_A(1)");
    terminal.sees("D_C(1) + D_A(1)   cannot add a length (comoving) and a length (pr…");
    terminal.press(CTRL_U);
    terminal.is_ready();
    terminal.press("D_");
    terminal.sees("planck2018 ∴ D_");
    assert!(!terminal.text().contains("no value"), "half a name is no mistake");
    terminal.press(CTRL_U);
    terminal.leave();
}

#[test]
fn tab_completes_with_kind_and_meaning() {
    let mut terminal = Terminal::new();
    terminal.is_ready();
    terminal.press("light_travel_d");
    terminal.press(TAB);
    terminal.sees("∴ light_travel_distance(");
    terminal.press(CTRL_U);
    terminal.press("D_");
    terminal.press(TAB);
    terminal.sees("D_C      function");
    terminal.sees("Comoving distance");
    terminal.press(CTRL_U);
    terminal.press("3 kp");
    terminal.press(TAB);
    terminal.sees("∴ 3 kpc");
    terminal.press(CTRL_U);
    terminal.press("na");
    terminal.press(TAB);
    terminal.sees("∴ names");
    terminal.press(ENTER);
    terminal.sees("no names yet");
    terminal.leave();
}

#[test]
fn an_entry_goes_on_over_several_lines() {
    let mut terminal = Terminal::new();
    terminal.is_ready();
    terminal.enter("x = (1 +");
    terminal.enter("2) *");
    terminal.enter("3");
    terminal.is_ready();
    terminal.enter("x");
    terminal.sees("= 9");
    // An empty line ends what would go on for ever.
    terminal.enter("y = (1 +");
    terminal.press(ENTER);
    terminal.sees("unclosed-bracket");
    terminal.is_ready();
    // A line may be begun where none is needed.
    terminal.press("u = 1");
    terminal.press(ALT_ENTER);
    terminal.enter("v = u + 41");
    terminal.is_ready();
    terminal.enter("v");
    terminal.sees("= 42");
    terminal.leave();
}

#[test]
fn a_pasted_block_is_one_sheet() {
    let mut terminal = Terminal::new();
    terminal.is_ready();
    let block =
        "given z = 1.5 \"redshift\"\nresult twice = 2 * z\n    \"doubled\"\nclaim: twice is 3.0\nnames\n";
    terminal.press(&format!("\x1b[200~{block}\x1b[201~"));
    terminal.sees("claim: twice is 3.0");
    terminal.press(ENTER);
    terminal.sees("twice = 3  doubled");
    terminal.sees("agrees     twice is 3.0");
    terminal.sees("z      a number");
    terminal.leave();
}

#[test]
fn ctrl_c_clears_the_line_and_nothing_else() {
    let mut terminal = Terminal::new();
    terminal.is_ready();
    terminal.enter("x = 7");
    terminal.is_ready();
    terminal.press("x = 8 + (");
    terminal.sees("x = 8 + (");
    terminal.press(CTRL_C);
    terminal.is_ready();
    terminal.enter("x");
    terminal.sees("= 7");
    terminal.leave();
}

#[test]
fn history_is_kept_between_runs() {
    let mut first = Terminal::new();
    first.is_ready();
    first.enter("1 + 41");
    first.sees("= 42");
    let home = first.leave();
    assert!(home.path().join(".local/state/zij/history").is_file());
    let mut second = Terminal::open(80, &[], home);
    second.is_ready();
    second.press(UP);
    second.sees("∴ 1 + 41");
    second.press(ENTER);
    second.sees("= 42");
    second.leave();
}

#[test]
fn a_history_that_cannot_be_kept_is_no_trouble() {
    let home = TempDir::new().expect("a folder");
    fs::write(home.path().join("file"), "").expect("a file");
    let state = home.path().join("file/state");
    let state = state.to_str().expect("a path").to_owned();
    let mut terminal = Terminal::open(80, &[("XDG_STATE_HOME", &state)], home);
    terminal.is_ready();
    terminal.enter("1 + 41");
    terminal.sees("= 42");
    terminal.leave();
}

#[test]
fn a_damaged_history_is_left_alone() {
    let home = TempDir::new().expect("a folder");
    let folder = home.path().join(".local/state/zij");
    fs::create_dir_all(&folder).expect("a folder");
    fs::write(folder.join("history"), b"#V2\n1 + 1\n\xFF\xFE\n").expect("a file");
    let mut terminal = Terminal::open(80, &[], home);
    terminal.is_ready();
    terminal.enter("1 + 41");
    terminal.sees("= 42");
    terminal.leave();
}

#[test]
fn the_exchange_is_kept_as_a_sheet_that_runs() {
    let mut terminal = Terminal::new();
    terminal.is_ready();
    for entry in ["z = 1", "1 + nothing", "2 * z", "that + 1", "z = 3", "z + 0.5"] {
        terminal.enter(entry);
    }
    terminal.sees("= 3.5");
    terminal.enter("keep \"note.zij\"");
    terminal.sees("kept:");
    let path = terminal.home.path().join("note.zij");
    let sheet = fs::read_to_string(&path).expect("a sheet");
    let run = std::process::Command::new(program())
        .arg(&path)
        .output()
        .expect("it runs");
    assert_eq!(run.status.code(), Some(0), "{sheet}");
    assert!(String::from_utf8_lossy(&run.stdout).contains("3.5"), "{sheet}");
    terminal.enter("z + 1");
    terminal.sees("= 4");
    terminal.enter("keep \"note.zij\"");
    terminal.sees("kept again");
    fs::write(&path, "mine").expect("a file");
    terminal.enter("keep \"note.zij\"");
    terminal.sees("is there already");
    assert_eq!(fs::read_to_string(&path).expect("a file"), "mine");
    terminal.enter("keep \"none/note.zij\"");
    terminal.sees("cannot write");
    terminal.leave();
}

#[test]
fn names_are_listed_and_struck() {
    let mut terminal = Terminal::new();
    terminal.is_ready();
    terminal.enter("d = 3 Mpc");
    terminal.enter("f(x) = 2 * x");
    terminal.enter("names");
    terminal.sees("d  a length");
    terminal.sees("f  a function");
    terminal.enter("strike d");
    terminal.sees("d is struck");
    terminal.enter("d");
    terminal.sees("unknown-name");
    terminal.enter("strike d");
    terminal.sees("no name d to strike");
    terminal.enter("quit");
    terminal.sees("leave ends the conversation");
    terminal.leave();
}

#[test]
fn pages_of_the_handbook_are_shown() {
    let mut terminal = Terminal::new();
    terminal.is_ready();
    terminal.enter("help D_C");
    terminal.sees("D_C(z) [cMpc]   comoving_distance");
    terminal.enter("z = 3");
    terminal.enter("help z");
    terminal.sees("z  a number  z = 3");
    terminal.enter("help qqzzq");
    terminal.sees("the handbook has nothing on qqzzq");
    terminal.leave();
}

#[test]
fn colours_follow_what_a_name_is_unless_they_are_not_wanted() {
    let colours = |environment: &[(&str, &str)]| {
        let mut terminal = Terminal::open(80, environment, TempDir::new().expect("a folder"));
        terminal.is_ready();
        terminal.press("D_C(3) [Gpc]");
        terminal.sees("D_C(3) [Gpc]   ");
        let coloured = {
            let parser = terminal.screen.lock().expect("the screen");
            let screen = parser.screen();
            let row = screen.cursor_position().0;
            let cells = (0..80).filter_map(|column| screen.cell(row, column));
            cells
                .filter(|cell| cell.fgcolor() != vt100::Color::Default)
                .count()
        };
        terminal.press(CTRL_U);
        terminal.leave();
        coloured
    };
    assert!(colours(&[]) >= "planck2018".len() + "D_C".len() + "3".len() + "Gpc".len());
    assert_eq!(colours(&[("NO_COLOR", "1")]), 0);
}

#[test]
fn a_narrow_terminal_cuts_remarks_and_breaks_nothing() {
    let mut terminal = Terminal::open(24, &[], TempDir::new().expect("a folder"));
    terminal.is_ready();
    terminal.press("1 Mpc + 2 s + 3 kpc + 4 Gpc");
    terminal.sees("4 Gpc");
    terminal.press(ENTER);
    terminal.sees("unlike-sides");
    terminal.is_ready();
    terminal.enter("D_C(1)");
    terminal.sees("(comoving)");
    terminal.leave();
}

#[test]
fn an_ascii_terminal_gets_ascii() {
    let mut terminal = Terminal::open(80, &[("LC_ALL", "C")], TempDir::new().expect("a folder"));
    terminal.sees("planck2018 :.");
    terminal.enter("1 Mpc + 2 s");
    terminal.sees("unlike-sides");
    terminal.enter("help D_C");
    terminal.sees("integral");
    assert!(terminal.text().is_ascii(), "{}", terminal.text());
    terminal.leave();
}

#[test]
fn a_dumb_terminal_is_answered_line_by_line() {
    let mut terminal = Terminal::open(80, &[("TERM", "dumb")], TempDir::new().expect("a folder"));
    terminal.sees("planck2018 :.");
    terminal.press("1 +\n");
    terminal.press("41\n");
    terminal.sees("= 42");
    terminal.press("(2 +\n");
    terminal.press(CTRL_D);
    terminal.sees("unclosed-bracket");
    terminal.press(CTRL_D);
    assert_eq!(terminal.status(), 0);
}

#[test]
fn no_key_and_no_byte_brings_it_down() {
    let mut terminal = Terminal::new();
    terminal.is_ready();
    // Control keys but those that end a line, the input or the process.
    let harmless = (1..32_u8).filter(|byte| !matches!(byte, 3 | 4 | 10 | 13 | 17..=19 | 22 | 26..=28));
    for byte in harmless {
        terminal.press(&char::from(byte).to_string());
    }
    terminal.interrupt();
    for sequence in [
        "\x1b[9999~",
        "\x1b[200~\x1b[201~",
        "\x1bOP",
        "\x1b[1;5C",
        "é∞Ω🌌\u{200d}\u{202e}",
    ] {
        terminal.press(sequence);
        terminal.interrupt();
    }
    terminal.keys.write_all(b"\xFF\xC0x").expect("bytes are taken");
    terminal.sees("not UTF-8");
    terminal.interrupt();
    terminal.enter("1 + 41");
    terminal.sees("= 42");
    terminal.leave();
}
