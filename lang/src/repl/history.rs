//! Where the lines of earlier conversations are kept.

use std::ffi::OsString;
use std::fs::DirBuilder;
use std::path::PathBuf;

/// Lines remembered.
pub(super) const MAX_LINES: usize = 10_000;

/// The file of the history, in the user's state directory (XDG Base Directory
/// Specification 0.8: a path that is not absolute is ignored). Its folder is
/// made where it does not exist; `None` where that cannot be.
pub(super) fn file() -> Option<PathBuf> {
    let folder = folder(std::env::var_os("XDG_STATE_HOME"), std::env::var_os("HOME"))?;
    let mut builder = DirBuilder::new();
    builder.recursive(true);
    #[cfg(unix)]
    std::os::unix::fs::DirBuilderExt::mode(&mut builder, 0o700);
    builder.create(&folder).ok()?;
    Some(folder.join("history"))
}

fn folder(state: Option<OsString>, home: Option<OsString>) -> Option<PathBuf> {
    let absolute = |path: OsString| Some(PathBuf::from(path)).filter(|path| path.is_absolute());
    let state = state.and_then(absolute);
    let usual = || home.and_then(absolute).map(|home| home.join(".local/state"));
    state.or_else(usual).map(|folder| folder.join("zij"))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_state_directory_is_asked_first_and_relative_paths_are_ignored() {
        let folder = |state: &str, home: &str| folder(Some(state.into()), Some(home.into()));
        assert_eq!(folder("/s", "/h"), Some("/s/zij".into()));
        assert_eq!(folder("s", "/h"), Some("/h/.local/state/zij".into()));
        assert_eq!(folder("", "/h"), Some("/h/.local/state/zij".into()));
        assert_eq!(folder("", ""), None);
    }
}
