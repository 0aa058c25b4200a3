//! Files: sheets and tables are read with limits and reasons, a sheet sees
//! nothing outside its own folder, and an output is written whole or not at
//! all.

use super::Failure;
use crate::session::Files;
use crate::source::Source;
use std::fs::{self, File};
use std::io::{self, Read, Write};
use std::path::{Component, Path, PathBuf};

/// A sheet is written by a person: more than this is some other file.
const MAX_SHEET_BYTES: u64 = 16 << 20;

/// A data table has to fit in memory several times over.
const MAX_TABLE_BYTES: u64 = 1 << 30;

/// The folder of a sheet: what it may read and write.
pub struct SheetFolder {
    folder: PathBuf,
}

impl SheetFolder {
    /// The folder in which this sheet lies.
    #[must_use]
    pub fn of(sheet: &Path) -> SheetFolder {
        let parent = sheet.parent().filter(|parent| !parent.as_os_str().is_empty());
        SheetFolder {
            folder: parent.unwrap_or(Path::new(".")).into(),
        }
    }

    /// The folder the process is in.
    #[must_use]
    pub fn current() -> SheetFolder {
        SheetFolder { folder: ".".into() }
    }

    /// Writes a file below the folder, whole or not at all.
    pub fn write(&self, path: &str, text: &str) -> Result<(), Failure> {
        let target = self.place(path).map_err(Failure::new)?;
        write_whole(&target, text).map_err(|error| cannot_write(path, &error))
    }

    /// Where a relative path leads, if that is below the folder. The file
    /// itself need not exist.
    fn place(&self, path: &str) -> Result<PathBuf, String> {
        let relative = Path::new(path);
        if relative.has_root() || relative.is_absolute() {
            return Err(format!("{path}: a sheet names files relative to its own folder"));
        }
        let Some(Component::Normal(name)) = relative.components().next_back() else {
            return Err(format!("{path}: not the name of a file"));
        };
        let folder = self.folder.canonicalize();
        let folder = folder.map_err(|error| format!("the folder of the sheet: {}", reason(&error)))?;
        let parent = relative.parent().unwrap_or(Path::new(""));
        let parent = folder.join(parent).canonicalize();
        let parent = parent.map_err(|error| format!("{path}: {}", reason(&error)))?;
        if !parent.starts_with(&folder) {
            return Err(outside(path));
        }
        Ok(parent.join(name))
    }
}

fn outside(path: &str) -> String {
    format!("{path}: outside the folder of the sheet, which is all a sheet can see")
}

impl Files for SheetFolder {
    fn read(&self, path: &str) -> Result<Vec<u8>, String> {
        let place = self.place(path)?;
        let real = place.canonicalize();
        let real = real.map_err(|error| format!("{path}: {}", reason(&error)))?;
        let folder = self.folder.canonicalize();
        if !folder.is_ok_and(|folder| real.starts_with(folder)) {
            return Err(outside(path));
        }
        let kind = fs::metadata(&real).map_err(|error| format!("{path}: {}", reason(&error)))?;
        if kind.is_dir() {
            return Err(format!("{path}: a folder, not a file"));
        }
        // A named pipe would wait for ever.
        if !kind.is_file() {
            return Err(format!("{path}: not a regular file"));
        }
        let file = File::open(&real).map_err(|error| format!("{path}: {}", reason(&error)))?;
        read_limited(file, MAX_TABLE_BYTES).map_err(|why| format!("{path}: {why}"))
    }
}

/// Reads a sheet, or standard input for `-`.
pub fn read_sheet(path: &Path) -> Result<Source, Failure> {
    if path == Path::new("-") {
        return read_standard_input();
    }
    let name = path.display().to_string();
    let fail = |why: String| Failure::new(format!("{name}: {why}"));
    let kind = fs::metadata(path).map_err(|error| fail(reason(&error)))?;
    if kind.is_dir() {
        return Err(fail("a folder, not a sheet".into()));
    }
    let file = File::open(path).map_err(|error| fail(reason(&error)))?;
    let bytes = read_limited(file, MAX_SHEET_BYTES).map_err(fail)?;
    let text = text(bytes).map_err(fail)?;
    Ok(Source::new(&name, &text))
}

/// All of standard input as a sheet.
pub fn read_standard_input() -> Result<Source, Failure> {
    let fail = |why: String| Failure::new(format!("standard input: {why}"));
    let bytes = read_limited(io::stdin().lock(), MAX_SHEET_BYTES).map_err(fail)?;
    let text = text(bytes).map_err(fail)?;
    Ok(Source::new("<stdin>", &text))
}

fn read_limited(stream: impl Read, limit: u64) -> Result<Vec<u8>, String> {
    let mut bytes = Vec::new();
    let read = stream.take(limit + 1).read_to_end(&mut bytes);
    read.map_err(|error| reason(&error))?;
    if bytes.len() as u64 > limit {
        return Err(format!(
            "more than {} MiB, which is the most that is read",
            limit >> 20
        ));
    }
    Ok(bytes)
}

/// The bytes as text, without a byte-order mark.
fn text(bytes: Vec<u8>) -> Result<String, String> {
    if bytes.starts_with(&[0xFF, 0xFE]) || bytes.starts_with(&[0xFE, 0xFF]) {
        return Err("UTF-16 text; a sheet is UTF-8".into());
    }
    if let Some(at) = bytes.iter().position(|byte| *byte == 0) {
        return Err(format!("not text: {} is zero", byte_place(&bytes, at)));
    }
    let text = String::from_utf8(bytes).map_err(|error| {
        let at = error.utf8_error().valid_up_to();
        let bytes = error.as_bytes();
        format!("not UTF-8 text: {} is 0x{:02X}", byte_place(bytes, at), bytes[at])
    })?;
    Ok(match text.strip_prefix('\u{feff}') {
        Some(rest) => rest.into(),
        None => text,
    })
}

fn byte_place(bytes: &[u8], at: usize) -> String {
    let before = &bytes[..at];
    let line = before.iter().filter(|byte| **byte == b'\n').count() + 1;
    let start = before
        .iter()
        .rposition(|byte| *byte == b'\n')
        .map_or(0, |at| at + 1);
    format!("line {line}, byte {}", at - start + 1)
}

/// Writes the output of a command to the file named on the command line.
pub fn write_output(path: &Path, text: &str) -> Result<(), Failure> {
    let name = path.display().to_string();
    let written = match fs::metadata(path) {
        Ok(kind) if kind.is_dir() => {
            return Err(Failure::new(format!("cannot write {name}: it is a folder")));
        }
        // A device or a pipe has to stay what it is.
        Ok(kind) if !kind.is_file() => write_through(path, text),
        // The file that a link leads to is replaced, not the link.
        Ok(_) => path.canonicalize().and_then(|real| write_whole(&real, text)),
        Err(_) => write_whole(path, text),
    };
    written.map_err(|error| cannot_write(&name, &error))
}

/// Writes a file that does not exist yet, whole or not at all. `Ok(false)`
/// where there is one already, which is left as it is.
pub fn write_new(path: &Path, text: &str) -> Result<bool, Failure> {
    let name = path.display().to_string();
    match place_new(path, text) {
        Ok(()) => Ok(true),
        Err(error) if error.kind() == io::ErrorKind::AlreadyExists => Ok(false),
        Err(error) => Err(cannot_write(&name, &error)),
    }
}

/// A link to a part file written before is made in one step and never
/// replaces anything; where the file system knows no links, the file is.
fn place_new(target: &Path, text: &str) -> io::Result<()> {
    if target.symlink_metadata().is_ok() {
        return Err(io::ErrorKind::AlreadyExists.into());
    }
    let part = Part(part_name(target)?);
    let mut file = File::options().write(true).create_new(true).open(&part.0)?;
    file.write_all(text.as_bytes())?;
    file.sync_all()?;
    drop(file);
    match fs::hard_link(&part.0, target) {
        Err(error) if error.kind() != io::ErrorKind::AlreadyExists => fs::rename(&part.0, target),
        linked => linked,
    }
}

fn cannot_write(name: &str, error: &io::Error) -> Failure {
    Failure::new(format!("cannot write {name}: {}", reason(error)))
}

fn write_through(path: &Path, text: &str) -> io::Result<()> {
    let mut file = File::options().write(true).open(path)?;
    file.write_all(text.as_bytes())
}

/// Writes a part file beside the target and renames it: a reader sees the old
/// file or the new one, and a failure leaves the old one.
pub fn write_whole(target: &Path, text: &str) -> io::Result<()> {
    let part = Part(part_name(target)?);
    let mut file = File::options().write(true).create_new(true).open(&part.0)?;
    file.write_all(text.as_bytes())?;
    if let Ok(old) = fs::metadata(target) {
        file.set_permissions(old.permissions())?;
    }
    file.sync_all()?;
    drop(file);
    fs::rename(&part.0, target)
}

fn part_name(target: &Path) -> io::Result<PathBuf> {
    let mut name = std::ffi::OsString::from(".");
    name.push(target.file_name().ok_or(io::ErrorKind::InvalidInput)?);
    name.push(format!(".{}.part", std::process::id()));
    Ok(target.with_file_name(name))
}

/// A file that is removed when it goes out of sight. After a rename there is
/// nothing left to remove.
struct Part(PathBuf);

impl Drop for Part {
    fn drop(&mut self) {
        let _ = fs::remove_file(&self.0);
    }
}

/// Why the system refused, in words without its numbers.
pub fn reason(error: &io::Error) -> String {
    match error.kind() {
        io::ErrorKind::NotFound => "no such file".into(),
        io::ErrorKind::PermissionDenied => "not permitted".into(),
        io::ErrorKind::StorageFull => "the disk is full".into(),
        io::ErrorKind::ReadOnlyFilesystem => "the disk is read-only".into(),
        _ => {
            let text = error.to_string();
            let text = text.split(" (os error").next().unwrap_or("");
            text.to_lowercase()
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A new folder that is removed at the end of the test.
    struct Scratch(PathBuf);

    impl Scratch {
        fn new(name: &str) -> Scratch {
            let path = std::env::temp_dir().join(format!("zij-{name}-{}", std::process::id()));
            fs::create_dir_all(path.join("sheets/data")).expect("a scratch folder");
            fs::write(path.join("secret"), "x").expect("a file");
            fs::write(path.join("sheets/data/a.csv"), "z\n1\n").expect("a file");
            Scratch(path)
        }

        fn folder(&self) -> SheetFolder {
            SheetFolder::of(&self.0.join("sheets/s.zij"))
        }
    }

    impl Drop for Scratch {
        fn drop(&mut self) {
            let _ = fs::remove_dir_all(&self.0);
        }
    }

    #[test]
    fn a_sheet_reads_below_its_folder_only() {
        let scratch = Scratch::new("confined");
        let folder = scratch.folder();
        assert_eq!(folder.read("data/a.csv"), Ok(b"z\n1\n".to_vec()));
        assert_eq!(folder.read("data/../data/a.csv"), Ok(b"z\n1\n".to_vec()));
        for path in [
            "../secret",
            "data/../../secret",
            "/etc/passwd",
            "..",
            "",
            "data",
            "none",
        ] {
            let refused = folder.read(path).expect_err(path);
            assert_eq!(refused.lines().count(), 1, "{refused}");
        }
    }

    #[cfg(unix)]
    #[test]
    fn a_link_does_not_lead_out() {
        let scratch = Scratch::new("linked");
        let link = scratch.0.join("sheets/link");
        std::os::unix::fs::symlink("../secret", link).expect("a link");
        std::os::unix::fs::symlink("..", scratch.0.join("sheets/up")).expect("a link");
        let folder = scratch.folder();
        assert!(folder.read("link").is_err_and(|why| why.contains("outside")));
        assert!(folder.read("up/secret").is_err_and(|why| why.contains("outside")));
        assert!(folder.write("up/new", "x").is_err());
        assert!(!scratch.0.join("new").exists());
    }

    #[test]
    fn what_is_written_is_whole_and_leaves_no_part() {
        let scratch = Scratch::new("whole");
        let folder = scratch.folder();
        folder.write("out.csv", "a").expect("written");
        folder.write("out.csv", "b").expect("written again");
        let names = || {
            let entries = fs::read_dir(scratch.0.join("sheets")).expect("a folder");
            let names = entries.flatten().map(|entry| entry.file_name().into_string());
            let mut names: Vec<_> = names.flatten().collect();
            names.sort();
            names
        };
        assert_eq!(names(), ["data", "out.csv"]);
        assert!(folder.write("data", "x").is_err());
        assert!(folder.write("none/x", "x").is_err());
        assert_eq!(names(), ["data", "out.csv"]);
        let text = fs::read_to_string(scratch.0.join("sheets/out.csv"));
        assert_eq!(text.ok().as_deref(), Some("b"));
    }

    #[test]
    fn a_new_file_never_takes_the_place_of_another() {
        let scratch = Scratch::new("new");
        let path = scratch.0.join("sheets/note.zij");
        assert_eq!(write_new(&path, "a").ok(), Some(true));
        assert_eq!(write_new(&path, "b").ok(), Some(false));
        assert_eq!(fs::read_to_string(&path).ok().as_deref(), Some("a"));
        assert!(write_new(&scratch.0.join("none/note.zij"), "a").is_err());
        assert_eq!(write_new(&scratch.0.join("sheets"), "a").ok(), Some(false));
        let names = fs::read_dir(scratch.0.join("sheets")).expect("a folder");
        assert_eq!(names.flatten().count(), 2);
    }

    #[test]
    fn bytes_that_are_no_text_are_named_with_their_place() {
        let place = |bytes: &[u8]| text(bytes.to_vec()).expect_err("not text");
        assert_eq!(place(b"ab\nc\xFFd"), "not UTF-8 text: line 2, byte 2 is 0xFF");
        assert_eq!(place(b"\x7fELF\0"), "not text: line 1, byte 5 is zero");
        assert!(place(b"\xFF\xFEa\0").contains("UTF-16"));
        assert_eq!(text(b"\xEF\xBB\xBFz".to_vec()).as_deref(), Ok("z"));
    }

    #[test]
    fn too_long_a_file_is_refused() {
        assert!(read_limited(&b"12345"[..], 4).is_err());
        assert_eq!(read_limited(&b"1234"[..], 4), Ok(b"1234".to_vec()));
    }
}
