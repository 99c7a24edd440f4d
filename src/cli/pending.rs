//! Which files wait, half written, to be moved to their place? When the user stops the program they
//! are taken away again: Ctrl-C leaves nothing behind.

use std::path::{Path, PathBuf};
use std::sync::{Mutex, MutexGuard, Once, PoisonError};

/// Exit status after an interrupt from the keyboard, as shells give it: 128 and the signal's number, 2.
const INTERRUPTED: i32 = 130;

static WAITING: Mutex<Vec<PathBuf>> = Mutex::new(Vec::new());

static WATCHED: Once = Once::new();

/// The list; while it is held nothing is taken away.
fn waiting() -> MutexGuard<'static, Vec<PathBuf>> {
    WAITING.lock().unwrap_or_else(PoisonError::into_inner)
}

/// A file that is taken away when the program is stopped, until this is dropped.
#[derive(Debug)]
pub struct Pending(PathBuf);

impl Pending {
    /// From now on the file at `path` waits.
    pub fn new(path: &Path) -> Self {
        WATCHED.call_once(|| {
            // Where no handler can be set the file stays, under a name of its own: no harm done.
            let _ = ctrlc::set_handler(|| {
                let files = waiting();
                for file in files.iter() {
                    let _ = std::fs::remove_file(file);
                }
                std::process::exit(INTERRUPTED);
            });
        });
        waiting().push(path.to_path_buf());
        Self(path.to_path_buf())
    }

    /// Does `work`, which ends the waiting, without being stopped halfway.
    pub fn settle<T>(self, work: impl FnOnce() -> T) -> T {
        let mut files = waiting();
        let done = work();
        files.retain(|file| *file != self.0);
        drop(files);
        done
    }
}

impl Drop for Pending {
    fn drop(&mut self) {
        waiting().retain(|file| *file != self.0);
    }
}
