//! Rules of the house that code can keep.

use std::collections::BTreeSet;
use std::path::Path;
use zij_tests::repository;

/// Every Rust file of the repository with its path from the root.
fn sources() -> Vec<(String, String)> {
    let paths = repository::files("", "rs");
    let sources = paths
        .iter()
        .map(|path| (repository::relative(path), repository::read(path)));
    sources.collect()
}

/// What must not be written is spelled so here that this file has none of it.
fn word(parts: [&str; 2]) -> String {
    parts.concat()
}

#[track_caller]
fn none(offenders: &[String], rule: &str) {
    assert!(offenders.is_empty(), "{rule}:\n{}", offenders.join("\n"));
}

#[test]
fn every_file_says_first_what_it_is() {
    let sources = sources();
    assert!(sources.len() > 50, "{}", sources.len());
    let silent = sources.into_iter().filter(|(_, text)| !text.starts_with("//! "));
    none(
        &silent.map(|(path, _)| path).collect::<Vec<_>>(),
        "no //! on the first line",
    );
}

#[test]
fn no_file_is_longer_than_eight_hundred_lines() {
    let is_test = |path: &str| path.contains("/tests/") || path.ends_with("/tests.rs");
    let long = sources().into_iter().filter_map(|(path, text)| {
        let lines = text.lines().count();
        (lines > 800 && !is_test(&path)).then(|| format!("{path}: {lines}"))
    });
    none(&long.collect::<Vec<_>>(), "over 800 lines");
}

#[test]
fn nothing_is_left_to_do_or_printed_for_debugging() {
    let banned = [
        ["to", "do!("],
        ["unimple", "mented!("],
        ["db", "g!("],
        ["FIX", "ME"],
    ]
    .map(word);
    let prints = [["print", "ln!("], ["eprint", "ln!("], ["print", "!("]].map(word);
    let mut offenders = Vec::new();
    for (path, text) in sources() {
        for (number, line) in text.lines().enumerate() {
            let code = line.split("//").next().unwrap_or("");
            let printing = path.starts_with("lang/src/") || path.starts_with("stdlib/src/");
            let found = banned
                .iter()
                .chain(prints.iter().filter(|_| printing))
                .find(|word| code.contains(*word));
            if let Some(found) = found {
                offenders.push(format!("{path}:{}: {found}", number + 1));
            }
        }
    }
    none(&offenders, "left over");
}

#[test]
fn only_the_shells_touch_the_terminal_the_environment_and_the_clock() {
    let outside = [
        "std::env::",
        "std::time::",
        "SystemTime",
        "Instant::now",
        "IsTerminal",
        "stdin()",
        "stdout()",
        "stderr()",
    ];
    let shells = ["lang/src/cli", "lang/src/main.rs", "lang/src/repl"];
    let mut offenders = Vec::new();
    for (path, text) in sources() {
        let inside = path.starts_with("lang/src/") || path.starts_with("stdlib/src/");
        if !inside || shells.iter().any(|shell| path.starts_with(shell)) {
            continue;
        }
        let code: Vec<&str> = text
            .lines()
            .map(|line| line.split("//").next().unwrap_or(""))
            .collect();
        let found = outside
            .iter()
            .filter(|word| code.iter().any(|line| line.contains(**word)));
        offenders.extend(found.map(|word| format!("{path}: {word}")));
    }
    none(&offenders, "outside world met outside the shells");
}

#[test]
fn each_outside_crate_with_a_shape_of_its_own_is_met_in_few_files() {
    let allowed = [
        (
            "ariadne",
            vec!["lang/src/diagnostic/render.rs", "lang/src/diagnostic/render/"],
        ),
        ("rustyline", vec!["lang/src/repl"]),
        ("clap", vec!["lang/src/cli/arguments.rs"]),
        ("logos", vec!["lang/src/token.rs", "lang/src/token/"]),
        ("chumsky", vec!["lang/src/parser.rs", "lang/src/parser/"]),
        ("uom", vec!["stdlib/src/"]),
    ];
    let mut offenders = Vec::new();
    for (path, text) in sources() {
        for (name, places) in &allowed {
            let used = text.lines().any(|line| {
                let code = line.split("//").next().unwrap_or("");
                code.contains(&format!("{name}::"))
            });
            if used
                && path.starts_with("lang/src") | path.starts_with("stdlib/src")
                && !places.iter().any(|place| path.starts_with(place))
            {
                offenders.push(format!("{path}: {name}"));
            }
        }
    }
    none(&offenders, "met where it has no place");
}

#[test]
fn the_one_arrow_points_from_language_to_library() {
    let library = sources()
        .into_iter()
        .filter(|(path, _)| path.starts_with("stdlib/"));
    let back = library.filter(|(_, text)| text.contains("zij_lang"));
    none(
        &back.map(|(path, _)| path).collect::<Vec<_>>(),
        "the library knows the language",
    );
}

/// The names of the crates a manifest asks for.
fn dependencies(manifest: &Path) -> BTreeSet<String> {
    let text = repository::read(manifest);
    let value: toml::Table = toml::from_str(&text).expect("a manifest is TOML");
    let sections = ["dependencies", "dev-dependencies", "build-dependencies"];
    let mut tables: Vec<&toml::Value> = sections.iter().filter_map(|name| value.get(*name)).collect();
    tables.extend(
        value
            .get("workspace")
            .and_then(|workspace| workspace.get("dependencies")),
    );
    let names = tables
        .iter()
        .filter_map(|table| table.as_table())
        .flat_map(|table| table.keys().cloned());
    names.collect()
}

#[test]
fn every_dependency_has_its_line_in_the_guide_for_developers() {
    let root = repository::root();
    let guide = root.join("DEVELOPERS.md");
    let guide = repository::read(&guide);
    let mut missing = Vec::new();
    for manifest in [
        "Cargo.toml",
        "lang/Cargo.toml",
        "stdlib/Cargo.toml",
        "tests/Cargo.toml",
        "tests/fuzz/Cargo.toml",
    ] {
        let path = root.join(manifest);
        if path.exists() {
            let names = dependencies(&path)
                .into_iter()
                .filter(|name| !name.starts_with("zij-"));
            missing.extend(
                names
                    .filter(|name| !guide.contains(&format!("`{name}`")))
                    .map(|name| format!("{manifest}: {name}")),
            );
        }
    }
    none(&missing, "no line in DEVELOPERS.md");
}

#[test]
fn every_dependency_of_the_workspace_is_used_by_a_member() {
    let root = repository::root();
    let members = ["lang", "stdlib", "tests"].map(|name| dependencies(&root.join(name).join("Cargo.toml")));
    let offered = dependencies(&root.join("Cargo.toml"));
    let idle = offered
        .into_iter()
        .filter(|name| !members.iter().any(|used| used.contains(name)));
    none(&idle.collect::<Vec<_>>(), "no member uses it");
}

#[test]
fn every_entry_has_a_source_and_an_example() {
    let mut poor = Vec::new();
    for entry in zij_stdlib::catalogue::entries() {
        for (what, text) in [
            ("about", entry.about),
            ("source", entry.source),
            ("example", entry.example),
        ] {
            if text.trim().is_empty() {
                poor.push(format!("{}: no {what}", entry.name));
            }
        }
    }
    none(&poor, "not described");
}

#[test]
fn no_spelling_of_the_library_means_two_things() {
    let mut seen = std::collections::BTreeMap::new();
    let mut twice = Vec::new();
    for entry in zij_stdlib::catalogue::entries() {
        // A value and a function of one name live side by side.
        for spelling in entry.spellings() {
            if let Some(other) = seen.insert((spelling, entry.is_function()), entry.name) {
                twice.push(format!("{spelling}: {other} and {}", entry.name));
            }
        }
    }
    none(&twice, "ambiguous");
}
