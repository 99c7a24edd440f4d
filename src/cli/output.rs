//! Writes results whole or not at all. Everything is rendered before anything is written; each file is
//! written beside its place and moved there only when all of them, and standard output, are through.

use std::fs;
use std::io::{ErrorKind, Write};
use std::path::{Path, PathBuf};

use anstream::{AutoStream, ColorChoice};
use tempfile::NamedTempFile;

use super::args::ColorWhen;
use super::draft::Named;
use super::pending::Pending;
use crate::input::{Place, Problem, Refusal};
use crate::report::text::DEFAULT_WIDTH;

/// Bytes and where they go.
#[derive(Clone, Debug)]
pub struct Rendered {
    /// The place.
    pub to: Named,
    /// The content.
    pub bytes: Vec<u8>,
}

/// A file that waits to be moved to its place.
enum Waiting {
    /// Written beside it.
    Beside { pending: Pending, file: NamedTempFile, place: PathBuf },
    /// A device or a pipe: nothing to replace, it is written to as it is.
    Through { place: PathBuf, bytes: Vec<u8> },
}

/// Writes `text` to standard output and every file to its place. A closed pipe is no error: who reads
/// has seen enough.
///
/// # Errors
/// When an output cannot be written; then none of the files was changed, unless moving a later one failed.
pub fn write(text: &[u8], files: Vec<Rendered>) -> Result<(), Refusal> {
    let mut standard = text.to_vec();
    let mut waiting = Vec::new();
    for file in files {
        if file.to.is_standard() {
            standard.extend_from_slice(&file.bytes);
        } else {
            waiting.push((prepare(&file).map_err(|e| vec![unwritable(&file.to, &e)])?, file.to));
        }
    }
    to_standard_output(&standard)?;
    for (file, to) in waiting {
        finish(file).map_err(|e| vec![unwritable(&to, &e)])?;
    }
    Ok(())
}

/// Writes to standard output; a closed pipe is no error.
///
/// # Errors
/// When standard output cannot be written, as on a full disk.
pub fn to_standard_output(bytes: &[u8]) -> Result<(), Refusal> {
    let mut out = std::io::stdout().lock();
    match out.write_all(bytes).and_then(|()| out.flush()) {
        Err(e) if e.kind() != ErrorKind::BrokenPipe => Err(vec![Problem::error(
            Place::file("standard output"),
            format!("it cannot be written: {e}"),
            "",
            "check where the output is sent to",
        )]),
        _ => Ok(()),
    }
}

/// Widest text on a terminal: longer lines are hard to read.
const WIDEST: u16 = 100;

/// Width of the text on standard output: a terminal's up to 100, else that of the classic terminal.
pub fn width() -> usize {
    fitted(terminal_size::terminal_size_of(std::io::stdout()).map(|size| size.0.0))
}

/// `None`: no terminal. A terminal that does not know its width says 0.
fn fitted(terminal: Option<u16>) -> usize {
    terminal.filter(|&w| w > 0).map_or(DEFAULT_WIDTH, |w| usize::from(w.min(WIDEST)))
}

/// Colour on a terminal only, unless the user or the environment (NO_COLOR, CLICOLOR, TERM) says otherwise.
pub fn colored(when: ColorWhen) -> bool {
    match when {
        ColorWhen::Always => true,
        ColorWhen::Never => false,
        ColorWhen::Auto => AutoStream::choice(&std::io::stdout()) != ColorChoice::Never,
    }
}

/// Says problems on standard error. What cannot be said there cannot be said at all.
pub fn complain(problems: &[Problem]) {
    let mut out = std::io::stderr().lock();
    // In a file or a script's log one sentence is one line.
    let width = terminal_size::terminal_size_of(&out).map(|size| fitted(Some(size.0.0)));
    for problem in problems {
        let text = problem.to_string();
        let _ = match width {
            Some(width) => writeln!(out, "{}", wrapped(&text, width)),
            None => writeln!(out, "{text}"),
        };
    }
}

/// Breaks lines at blanks so that none is wider than `width`, what is broken off indented by four.
/// Lines of a file (they follow `  | `) stay whole, for a mark stands under them.
fn wrapped(text: &str, width: usize) -> String {
    let mut lines = Vec::new();
    for line in text.lines() {
        let mut rest = line;
        let mut indent = "";
        while !line.starts_with("  | ") && indent.len() + rest.chars().count() > width {
            let most =
                rest.char_indices().nth(width.saturating_sub(indent.len())).map_or(rest.len(), |c| c.0);
            let first_word = rest.len() - rest.trim_start().len();
            let blank = |(at, c): &(usize, char)| *c == ' ' && *at <= most && *at > first_word;
            let Some((at, _)) = rest.char_indices().rfind(blank) else { break };
            let (head, tail) = rest.split_at(at);
            lines.push(format!("{indent}{head}"));
            (rest, indent) = (tail.trim_start(), "    ");
        }
        lines.push(format!("{indent}{rest}"));
    }
    lines.join("\n")
}

fn prepare(file: &Rendered) -> std::io::Result<Waiting> {
    // A link stays a link: what it points to is replaced.
    let place = fs::canonicalize(&file.to.path).unwrap_or_else(|_| file.to.path.clone());
    let there = fs::metadata(&place).ok();
    if let Some(there) = &there {
        if there.is_dir() {
            return Err(std::io::Error::new(ErrorKind::IsADirectory, "there is a folder of that name"));
        }
        if !there.is_file() {
            return Ok(Waiting::Through { place, bytes: file.bytes.clone() });
        }
        if there.permissions().readonly() {
            return Err(std::io::Error::new(ErrorKind::PermissionDenied, "the file is write-protected"));
        }
    }
    let folder = match place.parent() {
        Some(p) if !p.as_os_str().is_empty() => p,
        _ => Path::new("."),
    };
    let mut temporary = new_beside(folder)?;
    let pending = Pending::new(temporary.path());
    if let Some(there) = there {
        temporary.as_file().set_permissions(there.permissions())?;
    }
    temporary.write_all(&file.bytes)?;
    temporary.as_file().sync_all()?;
    Ok(Waiting::Beside { pending, file: temporary, place })
}

/// A new file in `folder` with the rights which the user's own files get.
fn new_beside(folder: &Path) -> std::io::Result<NamedTempFile> {
    let mut builder = tempfile::Builder::new();
    builder.prefix(".sweptedge-");
    #[cfg(unix)]
    {
        use std::os::unix::fs::PermissionsExt;
        builder.permissions(fs::Permissions::from_mode(0o666)).tempfile_in(folder)
    }
    #[cfg(not(unix))]
    {
        builder.tempfile_in(folder)
    }
}

fn finish(file: Waiting) -> std::io::Result<()> {
    match file {
        Waiting::Beside { pending, file, place } => {
            pending.settle(|| file.persist(place).map(drop).map_err(|e| e.error))
        }
        Waiting::Through { place, bytes } => {
            let mut device = fs::OpenOptions::new().write(true).open(place)?;
            match device.write_all(&bytes) {
                Err(e) if e.kind() != ErrorKind::BrokenPipe => Err(e),
                _ => Ok(()),
            }
        }
    }
}

fn unwritable(to: &Named, error: &std::io::Error) -> Problem {
    let (why, help) = match error.kind() {
        ErrorKind::NotFound => {
            ("its folder does not exist", "make the folder first, or name one that exists")
        }
        ErrorKind::NotADirectory => ("its folder is a file", "name a folder that exists"),
        ErrorKind::IsADirectory => ("there is a folder of that name", "name a file in it"),
        ErrorKind::PermissionDenied | ErrorKind::ReadOnlyFilesystem => (
            "it is write-protected",
            "name a place where you may write, or close the program that holds the file",
        ),
        ErrorKind::StorageFull => ("the disk is full", "make room, or name a place on another disk"),
        _ => ("the system refuses", "name another file"),
    };
    let said = match error.raw_os_error() {
        Some(_) if why == "the system refuses" => format!("{why} ({error})"),
        _ => why.to_owned(),
    };
    Problem::error(Place::file(&to.name), format!("the output cannot be written: {said}"), "", help)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn text_fills_a_terminal_up_to_100_and_80_elsewhere() {
        let widths = [None, Some(0), Some(60), Some(100), Some(250)].map(fitted);
        assert_eq!(widths, [80, 80, 60, 100, 100]);
    }

    #[test]
    fn a_long_sentence_is_broken_at_blanks_and_a_line_of_the_file_is_not() {
        let text = "error: one two three four\n  | G1 X1 Y2 and so on for long\n  to do: unbreakableword";
        let expected =
            "error: one two\n    three four\n  | G1 X1 Y2 and so on for long\n  to do:\n    unbreakableword";
        assert_eq!(wrapped(text, 15), expected);
        assert_eq!(wrapped("", 15), "");
        // Letters of several bytes at the edge.
        assert_eq!(
            wrapped("\u{e4}\u{e4}\u{e4}\u{e4} \u{f6}\u{f6}", 5),
            "\u{e4}\u{e4}\u{e4}\u{e4}\n    \u{f6}\u{f6}"
        );
    }
}
