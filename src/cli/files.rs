//! Reads input files whole, and says what to do when one cannot be read.

use std::fs::File;
use std::io::{ErrorKind, Read};
use std::path::Path;

use super::draft::Named;
use super::table::nearest;
use crate::input::{Place, Problem, Refusal};

/// Greatest input, bytes: a program of ten million blocks, well below what memory holds. A larger file
/// was most likely named by mistake.
const GREATEST: u64 = 1 << 29;

/// The content of a file, or of standard input.
///
/// # Errors
/// When it is missing, cannot be read or is too large.
pub fn read(file: &Named) -> Result<Vec<u8>, Refusal> {
    let mut bytes = Vec::new();
    let read = if file.is_standard() {
        std::io::stdin().lock().take(GREATEST + 1).read_to_end(&mut bytes)
    } else {
        if file.path.is_dir() {
            return Err(vec![Problem::error(
                Place::file(file.shown()),
                "this is a folder",
                "a file",
                "name the file in it",
            )]);
        }
        File::open(&file.path).and_then(|f| f.take(GREATEST + 1).read_to_end(&mut bytes))
    };
    match read {
        Ok(_) if bytes.len() as u64 > GREATEST => Err(vec![Problem::error(
            Place::file(file.shown()),
            format!("the file is larger than {} megabytes", GREATEST >> 20),
            "a drawing or a program",
            "give the file meant, or cut the program into parts and judge each",
        )]),
        Ok(_) => Ok(bytes),
        Err(e) => Err(vec![unreadable(file, &e)]),
    }
}

fn unreadable(file: &Named, error: &std::io::Error) -> Problem {
    let place = Place::file(file.shown());
    if error.kind() != ErrorKind::NotFound {
        let found = format!("the file cannot be read: {error}");
        return Problem::error(place, found, "", "check the file and the rights to it");
    }
    let folder = match file.path.parent() {
        Some(p) if !p.as_os_str().is_empty() => p,
        _ => Path::new("."),
    };
    if !folder.is_dir() {
        let found = format!("there is no folder {}", folder.display());
        return Problem::error(place, found, "", "check the path");
    }
    let wanted = file.path.file_name().map(|n| n.to_string_lossy().into_owned()).unwrap_or_default();
    let mut there: Vec<String> = std::fs::read_dir(folder)
        .map(|entries| entries.flatten().map(|e| e.file_name().to_string_lossy().into_owned()).collect())
        .unwrap_or_default();
    there.sort_unstable();
    let help = match nearest(&wanted, there.iter().map(String::as_str)) {
        Some(name) => format!("did you mean {}?", folder.join(name).display()),
        None => format!("check the name; the folder searched is {}", folder.display()),
    };
    Problem::error(place, "there is no such file", "", help)
}
