//! The program as a process: its statuses, its streams and its files.

use serde_json::Value;
use std::fs;
use std::io::{Read, Write};
use std::path::{Path, PathBuf};
use std::process::{Command, Output, Stdio};
use std::sync::OnceLock;
use tempfile::TempDir;
use zij_tests::repository;

/// The program, built once with the profile of these tests.
fn zij() -> Command {
    static PROGRAM: OnceLock<PathBuf> = OnceLock::new();
    let path = PROGRAM.get_or_init(|| {
        let build = escargot::CargoBuild::new()
            .manifest_path(repository::root().join("Cargo.toml"))
            .package("zij-lang")
            .bin("zij")
            .current_release();
        build.run().expect("the program builds").path().to_owned()
    });
    let mut command = Command::new(path);
    command
        .env("NO_COLOR", "1")
        .env_remove("COLUMNS")
        .stdin(Stdio::null());
    command
}

fn run(arguments: &[&str]) -> Output {
    zij().args(arguments).output().expect("the program starts")
}

fn status(output: &Output) -> i32 {
    output.status.code().expect("no signal ended it")
}

fn stdout(output: &Output) -> String {
    String::from_utf8(output.stdout.clone()).expect("output is UTF-8")
}

fn stderr(output: &Output) -> String {
    String::from_utf8(output.stderr.clone()).expect("messages are UTF-8")
}

/// What goes in through standard input.
fn piped(arguments: &[&str], input: &[u8]) -> Output {
    let mut child = zij()
        .args(arguments)
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .expect("the program starts");
    let mut stdin = child.stdin.take().expect("a pipe");
    let input = input.to_vec();
    let writer = std::thread::spawn(move || {
        // The program may refuse before it has read all.
        let _ = stdin.write_all(&input);
    });
    let output = child.wait_with_output().expect("the program ends");
    writer.join().expect("written");
    output
}

fn folder() -> TempDir {
    tempfile::tempdir().expect("a folder")
}

fn sheet(folder: &TempDir, text: &str) -> String {
    let path = folder.path().join("note.zij");
    fs::write(&path, text).expect("written");
    path.display().to_string()
}

fn names(folder: &Path) -> Vec<String> {
    let entries = fs::read_dir(folder).expect("a folder").flatten();
    let mut names: Vec<String> = entries
        .map(|entry| entry.file_name().to_string_lossy().into_owned())
        .collect();
    names.sort();
    names
}

/// Refused in one line, with this status and these words.
#[track_caller]
fn refused(output: &Output, words: &str) {
    let said = stderr(output);
    assert_eq!(status(output), 2, "{said}");
    assert_eq!(said.lines().count(), 1, "{said}");
    assert!(said.contains(words), "{said}");
    assert!(output.stdout.is_empty(), "{}", stdout(output));
}

fn keys(value: &Value) -> Vec<String> {
    let object = value.as_object().expect("an object");
    object.keys().cloned().collect()
}

fn json(output: &Output) -> Value {
    let text = stdout(output);
    serde_json::from_str(&text).unwrap_or_else(|error| panic!("{error}\n{text}\n{}", stderr(output)))
}

// Input that is no sheet.

#[test]
fn a_missing_file_is_a_reason_in_one_line() {
    refused(&run(&["no-such-sheet.zij"]), "no-such-sheet.zij");
}

#[test]
fn a_directory_is_no_sheet() {
    let folder = folder();
    refused(&run(&[&folder.path().display().to_string()]), "folder");
}

#[test]
fn a_binary_file_is_no_sheet() {
    let folder = folder();
    let path = folder.path().join("a.zij");
    fs::write(&path, b"\x7fELF\x02\x01\x01\0\0\0\0").expect("written");
    refused(&run(&[&path.display().to_string()]), "not text");
}

#[test]
fn text_in_another_encoding_is_named_with_its_place() {
    let folder = folder();
    let path = folder.path().join("a.zij");
    fs::write(&path, b"z = 1\nd = 3 \xC5\n").expect("written");
    refused(&run(&[&path.display().to_string()]), "line 2");
    refused(&piped(&["-"], b"\xFF\xFEz\0"), "UTF-");
}

#[test]
fn an_empty_sheet_is_refused() {
    let folder = folder();
    let output = run(&[&sheet(&folder, "\n \n")]);
    refused(&output, "empty");
    refused(&run(&["check", &sheet(&folder, "")]), "empty");
    refused(&run(&["-e", ""]), "empty");
}

#[test]
fn a_line_of_fifty_megabytes_is_refused() {
    let folder = folder();
    let path = sheet(&folder, &"1 + ".repeat(50 << 18));
    refused(&run(&[&path]), "MiB");
    refused(&piped(&["-"], "x".repeat(50 << 20).as_bytes()), "MiB");
}

#[test]
fn a_wrong_command_line_is_a_reason_in_one_line() {
    refused(&run(&["--such"]), "--such");
    refused(&run(&["--as", "parchment", "a.zij"]), "parchment");
    refused(&run(&["a.zij", "b.zij"]), "b.zij");
}

// Output that cannot be written.

#[test]
fn a_closed_pipe_ends_quietly() {
    let mut child = zij()
        .args(["--as", "csv", "-e", "0 .. 1 in 400000 steps"])
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .expect("the program starts");
    let mut first = [0_u8; 1];
    let mut pipe = child.stdout.take().expect("a pipe");
    let _ = pipe.read(&mut first);
    drop(pipe);
    let output = child.wait_with_output().expect("the program ends");
    let said = stderr(&output);
    assert!(said.lines().count() <= 1 && !said.contains("panic"), "{said}");
    assert_ne!(status(&output), 0);
}

#[test]
fn an_output_that_cannot_be_written_leaves_no_part_of_it() {
    let folder = folder();
    let path = sheet(&folder, "result d = 2 m\n");
    let nowhere = folder.path().join("none/out.txt").display().to_string();
    let output = run(&[&path, "-o", &nowhere]);
    assert_eq!(
        (status(&output), stderr(&output).lines().count()),
        (2, 1),
        "{}",
        stderr(&output)
    );
    let directory = folder.path().join("out");
    fs::create_dir(&directory).expect("a folder");
    let output = run(&[&path, "-o", &directory.display().to_string()]);
    assert_eq!(
        (status(&output), stderr(&output).lines().count()),
        (2, 1),
        "{}",
        stderr(&output)
    );
    assert_eq!(names(folder.path()), ["note.zij", "out"]);
    assert!(names(&directory).is_empty());
    if Path::new("/dev/full").exists() {
        let full = fs::OpenOptions::new()
            .write(true)
            .open("/dev/full")
            .expect("opened");
        let output = zij()
            .arg(&path)
            .stdout(full)
            .output()
            .expect("the program starts");
        assert_eq!(
            (status(&output), stderr(&output).lines().count()),
            (2, 1),
            "{}",
            stderr(&output)
        );
    }
}

#[test]
fn a_sheet_with_an_error_writes_no_file() {
    let folder = folder();
    let path = sheet(
        &folder,
        "table \"rows.csv\" x = 0 .. 1 in 4 steps: x\nresult d = 2 m + 1 s\n",
    );
    let kept = folder.path().join("kept.txt");
    fs::write(&kept, "old").expect("written");
    let output = run(&[&path, "-o", &kept.display().to_string()]);
    assert_eq!(status(&output), 2);
    assert_eq!(names(folder.path()), ["kept.txt", "note.zij"]);
    assert_eq!(fs::read_to_string(&kept).ok().as_deref(), Some("old"));
}

#[test]
fn a_table_is_written_beside_its_sheet() {
    let folder = folder();
    let path = sheet(&folder, "table \"rows.csv\" x = 0 .. 1 in 4 steps: x, 2 m * x\n");
    let output = run(&[&path]);
    assert_eq!(status(&output), 0, "{}", stderr(&output));
    let text = fs::read_to_string(folder.path().join("rows.csv")).expect("a table");
    assert_eq!(text.lines().count(), 6, "{text}");
    assert!(
        text.lines().next().is_some_and(|head| head.contains("[m]")),
        "{text}"
    );
}

#[test]
fn a_sheet_reads_and_writes_nothing_outside_its_folder() {
    let folder = folder();
    fs::create_dir(folder.path().join("sheets")).expect("a folder");
    fs::write(folder.path().join("secret.csv"), "a\n1\n").expect("written");
    let path = folder.path().join("sheets/note.zij");
    for text in [
        "read \"../secret.csv\" as s\ns.a\n",
        "include \"../secret.csv\"\n",
        "table \"../out.csv\" x = 0 .. 1 in 4 steps: x\n",
        "table \"/tmp/zij-out.csv\" x = 0 .. 1 in 4 steps: x\n",
    ] {
        fs::write(&path, text).expect("written");
        let output = run(&[&path.display().to_string()]);
        assert_eq!(status(&output), 2, "{text}{}", stderr(&output));
        assert_eq!(names(folder.path()), ["secret.csv", "sheets"]);
    }
}

// Statuses.

#[test]
fn statuses_tell_how_a_sheet_ended() {
    let folder = folder();
    for (text, expected) in [
        ("claim \"a\": 1 km is 1000 m within 1%\n", 0),
        ("1 + 1\n", 0),
        ("claim \"a\": 1 km is 1001 m\n", 1),
        ("x = 1 km + 1 s\n", 2),
        ("x = (1 km\n", 2),
        ("D_C(-2)\n", 3),
        ("log10(-1)\n", 3),
        ("root(x^2 = -1, x = 0 .. 1)\n", 3),
        ("1/0\n", 3),
        // What cannot be computed outweighs a claim that disagrees.
        ("claim: 1 km is 1001 m\nlog10(-1)\n", 3),
    ] {
        let path = sheet(&folder, text);
        let output = run(&[&path]);
        assert_eq!(
            status(&output),
            expected,
            "{text}{}{}",
            stdout(&output),
            stderr(&output)
        );
        let quiet = stderr(&output).is_empty();
        assert_eq!(quiet, expected < 2, "{text}{}", stderr(&output));
    }
}

#[test]
fn a_claim_without_a_verdict_is_no_success() {
    let folder = folder();
    for claim in [
        "{1, 2, 3} is {1, 2, 3} within 1%",
        "1 is {1, 2} within 10%",
        "{1, 2} is 1",
    ] {
        let output = run(&[&sheet(&folder, &format!("claim: {claim}\n"))]);
        assert_ne!(status(&output), 0, "{claim}: {}", stdout(&output));
    }
}

#[test]
fn check_evaluates_nothing() {
    let folder = folder();
    let path = sheet(
        &folder,
        "claim: 1 km is 1001 m\ntable \"rows.csv\" x = 0 .. 1 in 4 steps: x\nlog10(-1)\n",
    );
    let output = run(&["check", &path]);
    assert_eq!(status(&output), 0, "{}", stderr(&output));
    assert_eq!(names(folder.path()), ["note.zij"]);
    let wrong = folder.path().join("wrong.zij").display().to_string();
    fs::write(&wrong, "x = 1 m + 1 s\n").expect("written");
    let output = run(&["check", &path, &wrong, "missing.zij"]);
    assert_eq!(status(&output), 2);
    assert!(stderr(&output).contains("unlike-sides") && stderr(&output).contains("missing.zij"));
}

// Input and output in their several forms.

#[test]
fn one_line_and_standard_input_are_sheets_too() {
    let output = run(&["-e", "2 km [m]"]);
    assert_eq!(status(&output), 0, "{}", stderr(&output));
    assert!(stdout(&output).contains("2000"), "{}", stdout(&output));
    let output = piped(&["-"], b"2 km [m]\n");
    assert!(stdout(&output).contains("2000"), "{}", stdout(&output));
    let output = piped(&["-"], "Ωm = 0.5\r\nΩm\r\n".as_bytes());
    assert_eq!(status(&output), 0, "{}", stderr(&output));
}

#[test]
fn a_given_is_overridden_within_its_dimension() {
    let folder = folder();
    let path = sheet(
        &folder,
        "given d [km] = 3 km \"how far\"\ngiven z = 1\nresult e = 2 * d * z\n",
    );
    let value = |arguments: &[&str]| {
        let output = run(&[&[path.as_str(), "--as", "json"], arguments].concat());
        assert_eq!(status(&output), 0, "{}{}", stdout(&output), stderr(&output));
        json(&output)["results"][0]["value"].as_f64()
    };
    assert_eq!(value(&[]), Some(6.0));
    assert_eq!(value(&["--given", "d=5000 m"]), Some(10.0));
    assert_eq!(value(&["--given", "d=5 km", "--given", "z=2"]), Some(20.0));
    for wrong in ["d=5 s", "d=5", "e=5 km", "y=1", "d", "d=", "d=(1", "z=1\nx=2"] {
        let output = run(&[&path, "--given", wrong]);
        assert_eq!(
            status(&output),
            2,
            "{wrong}: {}{}",
            stdout(&output),
            stderr(&output)
        );
        assert!(
            stdout(&output).is_empty() && !stderr(&output).is_empty(),
            "{wrong}"
        );
    }
}

#[test]
fn the_form_of_the_output_is_chosen() {
    let folder = folder();
    let path = sheet(&folder, "result d = 2 km \"how far\"\n");
    let text = run(&[&path]);
    assert!(stdout(&text).contains("how far"), "{}", stdout(&text));
    assert_eq!(stdout(&run(&[&path, "--as", "text"])), stdout(&text));
    let csv = stdout(&run(&[&path, "--as", "csv"]));
    assert!(csv.lines().any(|line| line.starts_with("d,,2")), "{csv}");
    let markdown = stdout(&run(&[&path, "--as", "markdown"]));
    assert!(markdown.contains('|'), "{markdown}");
    let out = folder.path().join("out.json").display().to_string();
    let written = run(&[&path, "--as", "json", "-o", &out]);
    assert!(written.stdout.is_empty(), "{}", stdout(&written));
    assert_eq!(
        fs::read_to_string(&out).expect("written"),
        stdout(&run(&[&path, "--as", "json"]))
    );
}

#[test]
fn json_has_the_keys_of_the_language_page() {
    let folder = folder();
    let text = "\
model flat70 = flat with H0 = 70 km/s/Mpc, Ωm = 0.3
assume flat70
given z = 3
result d = D_C(z) [cMpc] \"how far\"
result s = {1, 2} km
z + 1
claim \"sec. 1\": 1 km is 1001 m
table x = 0 .. 1 in 2 steps: x, 2 m * x
unused = 2
";
    let path = sheet(&folder, text);
    let value = json(&run(&[&path, "--as", "json"]));
    assert_eq!(
        keys(&value),
        [
            "zij", "sheet", "model", "results", "printed", "claims", "tables", "warnings", "errors"
        ]
    );
    assert_eq!(keys(&value["model"]), ["name", "parameters"]);
    let shown = [
        "name",
        "value",
        "unit",
        "uncertainty",
        "dimension",
        "frame",
        "about",
    ];
    assert_eq!(keys(&value["results"][0]), shown);
    assert_eq!(value["results"][0]["unit"], "cMpc");
    assert_eq!(value["results"][0]["frame"], "comoving");
    assert_eq!(value["results"][0]["about"], "how far");
    assert_eq!(value["results"][1]["value"], serde_json::json!([1.0, 2.0]));
    assert_eq!(value["printed"][0]["source"], "z + 1");
    assert_eq!(value["printed"][0]["value"], 4.0);
    let claim = [
        "where",
        "source",
        "verdict",
        "quoted",
        "computed",
        "unit",
        "tolerance",
        "slips",
    ];
    assert_eq!(keys(&value["claims"][0]), claim);
    assert_eq!(value["claims"][0]["where"], "sec. 1");
    assert_eq!(value["claims"][0]["verdict"], "disagrees");
    assert_eq!(keys(&value["tables"][0]), ["columns", "rows"]);
    assert_eq!(keys(&value["tables"][0]["columns"][1]), ["name", "unit"]);
    assert_eq!(value["tables"][0]["rows"][2], serde_json::json!([1.0, 2.0]));
    assert_eq!(value["warnings"][0]["code"], "unused-value");
    assert_eq!(value["errors"], serde_json::json!([]));
}

#[test]
fn the_referee_judges_the_claims_of_all_sheets_and_nothing_else() {
    let folder = folder();
    let right = sheet(&folder, "claim \"abstract\": 2 + 2 is 4\n");
    let path = folder.path().join("wrong.zij");
    let text = "table \"t.csv\" x = 0 .. 2 every 1: x\n\
                claim \"sec. 1\": D_C(1.2) under planck2018 is 5012 Mpc\nclaim: 1 < 2\n";
    std::fs::write(&path, text).expect("written");
    let wrong = path.to_str().expect("a path").to_owned();

    assert_eq!(status(&run(&["referee", &right])), 0);
    let output = run(&["referee", &right, &wrong]);
    assert_eq!(status(&output), 1);
    assert!(
        stdout(&output).contains("3 claims: 2 agree, 1 disagrees"),
        "{}",
        stdout(&output)
    );
    assert!(!folder.path().join("t.csv").exists(), "no table is written");

    let value = json(&run(&["referee", "--as", "json", &right, &wrong]));
    assert_eq!(keys(&value), ["zij", "sheets", "totals"]);
    let sheet = ["sheet", "model", "claims", "warnings", "errors"];
    assert_eq!(keys(&value["sheets"][1]), sheet);
    let totals = ["claims", "agree", "disagree", "undecided", "explained"];
    assert_eq!(keys(&value["totals"]), totals);
    let markdown = run(&["referee", "--as", "markdown", &wrong]);
    assert!(stdout(&markdown).contains("**disagrees**"));
    assert_eq!(stderr(&markdown), "");
}

#[test]
fn the_referee_goes_on_past_what_it_cannot_read() {
    let folder = folder();
    let right = sheet(&folder, "claim: 2 + 2 is 4\n");
    let missing = folder.path().join("missing.zij");
    let output = run(&["referee", missing.to_str().expect("a path"), &right]);
    assert_eq!(status(&output), 2);
    assert!(stdout(&output).contains("1 claim: 1 agrees"));
    refused(&run(&["referee", &right, "--as", "csv"]), "json");
}

#[test]
fn json_of_a_wrong_sheet_has_its_errors_and_no_values() {
    let folder = folder();
    let path = sheet(&folder, "result Ω = 2 km\nresult d = Ω + 1 s\n");
    let output = run(&[&path, "--as", "json"]);
    assert_eq!(status(&output), 2);
    let value = json(&output);
    let error = &value["errors"][0];
    let keys: Vec<_> = error
        .as_object()
        .map(|object| object.keys().cloned().collect())
        .unwrap_or_default();
    assert_eq!(
        keys,
        [
            "code",
            "message",
            "line",
            "column",
            "end_line",
            "end_column",
            "notes",
            "fixes"
        ]
    );
    assert_eq!(error["code"], "unlike-sides");
    assert_eq!(
        (error["line"].as_u64(), error["end_line"].as_u64()),
        (Some(2), Some(2))
    );
    assert_eq!(value["results"], serde_json::json!([]));
}

#[test]
fn a_number_in_json_reads_back_the_same() {
    let output = run(&["--as", "json", "-e", "result x = 1/3\nresult y = 0.1 + 0.2"]);
    let value = json(&output);
    assert_eq!(value["results"][0]["value"].as_f64(), Some(1.0 / 3.0));
    assert_eq!(value["results"][1]["value"].as_f64(), Some(0.1 + 0.2));
}
