//! Files of the repository, as the tests find them.

use std::fs;
use std::path::{Path, PathBuf};

/// The folder of the workspace.
#[must_use]
pub fn root() -> PathBuf {
    let here = Path::new(env!("CARGO_MANIFEST_DIR"));
    here.parent().unwrap_or(here).to_owned()
}

/// All files below a folder of the repository with this extension, in order of
/// their names. Build products and hidden folders are left out.
#[must_use]
pub fn files(folder: &str, extension: &str) -> Vec<PathBuf> {
    let mut found = Vec::new();
    collect(&root().join(folder), extension, &mut found);
    found.sort();
    found
}

fn collect(folder: &Path, extension: &str, found: &mut Vec<PathBuf>) {
    let Ok(entries) = fs::read_dir(folder) else { return };
    for path in entries.flatten().map(|entry| entry.path()) {
        let name = path.file_name().unwrap_or_default().to_string_lossy();
        if path.is_dir() {
            if !name.starts_with('.') && name != "target" {
                collect(&path, extension, found);
            }
        } else if path.extension().is_some_and(|other| other == extension) {
            found.push(path);
        }
    }
}

/// The text of a file of the repository.
///
/// # Panics
/// If it cannot be read, which fails the test.
#[must_use]
pub fn read(path: &Path) -> String {
    match fs::read_to_string(path) {
        Ok(text) => text,
        Err(error) => panic!("{}: {error}", path.display()),
    }
}

/// A path as seen from the root of the repository.
#[must_use]
pub fn relative(path: &Path) -> String {
    let inside = path.strip_prefix(root()).unwrap_or(path);
    inside.display().to_string()
}
