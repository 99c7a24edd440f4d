//! One thing that is wrong or noteworthy in an input, with its place: what was found, what was
//! expected, what to do.

use std::fmt;

/// How bad a problem is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Severity {
    /// Read on, but say so.
    Warning,
    /// The input cannot be judged.
    Error,
}

/// Where in an input.
#[derive(Clone, Debug, PartialEq, Eq, Default)]
pub struct Place {
    /// File as the user named it.
    pub file: String,
    /// Line, from 1, where the format has lines.
    pub line: Option<usize>,
    /// Column of the first character, from 1, counted in characters.
    pub column: Option<usize>,
    /// The line as written (shortened by the renderer).
    pub excerpt: Option<String>,
    /// Number of characters marked from `column` on.
    pub length: usize,
}

impl Place {
    /// A place known only as a file.
    #[must_use]
    pub fn file(file: impl Into<String>) -> Self {
        Self { file: file.into(), ..Self::default() }
    }

    /// A line of a file, with its text.
    #[must_use]
    pub fn line(file: impl Into<String>, line: usize, text: impl Into<String>) -> Self {
        Self { file: file.into(), line: Some(line), excerpt: Some(text.into()), ..Self::default() }
    }

    /// The same place narrowed to `length` characters from `column` (from 1).
    #[must_use]
    pub fn at(mut self, column: usize, length: usize) -> Self {
        self.column = Some(column);
        self.length = length;
        self
    }
}

/// A placed problem. `help` is never empty: it says what to do next.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Problem {
    /// Error or warning.
    pub severity: Severity,
    /// Where.
    pub place: Place,
    /// What was found, in one sentence without a full stop.
    pub found: String,
    /// What was expected instead; empty where `found` says it.
    pub expected: String,
    /// What to do.
    pub help: String,
}

impl Problem {
    /// An error: the input cannot be judged.
    #[must_use]
    pub fn error(
        place: Place,
        found: impl Into<String>,
        expected: impl Into<String>,
        help: impl Into<String>,
    ) -> Self {
        Self {
            severity: Severity::Error,
            place,
            found: found.into(),
            expected: expected.into(),
            help: help.into(),
        }
    }

    /// A warning: read on, but say so.
    #[must_use]
    pub fn warning(
        place: Place,
        found: impl Into<String>,
        expected: impl Into<String>,
        help: impl Into<String>,
    ) -> Self {
        Self {
            severity: Severity::Warning,
            place,
            found: found.into(),
            expected: expected.into(),
            help: help.into(),
        }
    }
}

/// Longest excerpt shown, in characters: a terminal's width less the margin.
const EXCERPT: usize = 72;

impl fmt::Display for Problem {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let word = match self.severity {
            Severity::Warning => "warning",
            Severity::Error => "error",
        };
        writeln!(f, "{word}: {}", self.found)?;
        let place = &self.place;
        write!(f, "  at {}", place.file)?;
        if let Some(line) = place.line {
            write!(f, ", line {line}")?;
        }
        if let Some(column) = place.column {
            write!(f, ", column {column}")?;
        }
        writeln!(f)?;
        if let Some(text) = &place.excerpt {
            write_excerpt(f, text, place)?;
        }
        if !self.expected.is_empty() {
            writeln!(f, "  expected: {}", self.expected)?;
        }
        write!(f, "  to do: {}", self.help)
    }
}

/// The line, cut to a window round the marked place, with carets under it.
fn write_excerpt(f: &mut fmt::Formatter<'_>, text: &str, place: &Place) -> fmt::Result {
    let shown: Vec<char> = text.chars().map(|c| if c.is_control() { ' ' } else { c }).collect();
    let column = place.column.unwrap_or(1).clamp(1, shown.len() + 1) - 1;
    let from = if column + place.length.min(EXCERPT / 2) > EXCERPT { column - EXCERPT / 2 } else { 0 };
    let window: String = shown.iter().skip(from).take(EXCERPT).collect();
    writeln!(f, "  | {}", window.trim_end())?;
    if place.column.is_some() {
        let marks = place.length.clamp(1, EXCERPT.saturating_sub(column - from).max(1));
        writeln!(f, "  | {}{}", " ".repeat(column - from), "^".repeat(marks))?;
    }
    Ok(())
}
