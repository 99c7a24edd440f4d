//! Where in the file does something stand? Lines and columns for an SVG file, and its problems.

use std::str::from_utf8;

use roxmltree::{Attribute, Node};

use crate::input::{Place, Problem, Refusal};

/// The text of the file and the places at which its lines start.
pub(super) struct Source<'a> {
    file: &'a str,
    pub(super) text: &'a str,
    lines: Vec<usize>,
}

/// Longest line of which the excerpt keeps what follows the marked place, in characters.
const AFTER: usize = 200;

impl<'a> Source<'a> {
    /// The text behind the bytes.
    ///
    /// # Errors
    /// When they are compressed or no UTF-8.
    pub(super) fn new(bytes: &'a [u8], file: &'a str) -> Result<Self, Refusal> {
        let bytes = bytes.strip_prefix(b"\xef\xbb\xbf").unwrap_or(bytes);
        let help = "save the drawing again as plain SVG in UTF-8";
        if bytes.starts_with(b"\x1f\x8b") {
            let found = "the drawing is compressed (gzip)";
            return Err(vec![Problem::error(Place::file(file), found, "plain SVG text", help)]);
        }
        if bytes.iter().all(u8::is_ascii_whitespace) {
            let help = "export the drawing again";
            return Err(vec![Problem::error(Place::file(file), "the file is empty", "an SVG drawing", help)]);
        }
        match from_utf8(bytes) {
            Ok(text) => {
                let ends = text.bytes().enumerate().filter(|(_, b)| *b == b'\n').map(|(i, _)| i + 1);
                Ok(Self { file, text, lines: std::iter::once(0).chain(ends).collect() })
            }
            Err(error) => {
                let before = bytes.get(..error.valid_up_to()).unwrap_or_default();
                let line = 1 + before.iter().filter(|b| **b == b'\n').count();
                let place = Place { line: Some(line), ..Place::file(file) };
                let found = "the drawing is not UTF-8 text: a byte makes no character";
                Err(vec![Problem::error(place, found, "SVG text in UTF-8", help)])
            }
        }
    }

    /// Line of a byte of the text, from 1.
    pub(super) fn line(&self, byte: usize) -> usize {
        self.lines.partition_point(|start| *start <= byte).max(1)
    }

    /// Place of `length` characters from a byte of the text on.
    pub(super) fn place(&self, byte: usize, length: usize) -> Place {
        let line = self.line(byte);
        let start = self.lines.get(line - 1).copied().unwrap_or(0);
        let rest = self.text.get(start..).unwrap_or_default();
        let rest = rest.lines().next().unwrap_or_default();
        let column = 1 + rest.char_indices().take_while(|(i, _)| start + i < byte).count();
        let excerpt: String = rest.chars().take(column + AFTER).collect();
        Place::line(self.file, line, excerpt).at(column, length)
    }

    /// Place of a line and column as the XML parser counts them.
    pub(super) fn place_of_position(&self, row: u32, column: u32) -> Place {
        let row = usize::try_from(row).unwrap_or(1).clamp(1, self.lines.len().max(1));
        let start = self.lines.get(row - 1).copied().unwrap_or(0);
        let column = usize::try_from(column).unwrap_or(1).max(1);
        let rest = self.text.get(start..).unwrap_or_default().lines().next().unwrap_or_default();
        let excerpt: String = rest.chars().take(column.saturating_add(AFTER)).collect();
        let column = column.min(excerpt.chars().count() + 1);
        Place::line(self.file, row, excerpt).at(column, 1)
    }

    /// The whole file.
    pub(super) fn whole(&self) -> Place {
        Place::file(self.file)
    }

    /// Place of an element: its tag.
    pub(super) fn element(&self, node: Node<'_, '_>) -> Place {
        self.place(node.range().start, node.tag_name().name().chars().count() + 1)
    }

    /// Place of an attribute, or of the character at `position` (from 1) of its value where the value
    /// stands in the file as it is read (no entities in it).
    pub(super) fn attribute(&self, attribute: &Attribute<'_, '_>, position: Option<usize>) -> Place {
        let range = attribute.range_value();
        let written = self.text.get(range.clone()).unwrap_or_default();
        match position {
            Some(position) if written.len() == attribute.value().len() => {
                let offset = written.char_indices().nth(position.saturating_sub(1)).map(|(i, _)| i);
                self.place(range.start + offset.unwrap_or(written.len()), 1)
            }
            _ => self.place(attribute.range().start, attribute.name().chars().count()),
        }
    }
}

/// Position in characters that an error of the attribute grammar carries.
pub(super) const fn position_of(error: &svgtypes::Error) -> Option<usize> {
    match error {
        svgtypes::Error::UnexpectedData(p)
        | svgtypes::Error::InvalidChar(_, p)
        | svgtypes::Error::InvalidString(_, p)
        | svgtypes::Error::InvalidNumber(p) => Some(*p),
        svgtypes::Error::UnexpectedEndOfStream
        | svgtypes::Error::InvalidValue
        | svgtypes::Error::InvalidIdent => None,
    }
}

/// What is wrong, in words, of a value that ends early or holds what cannot be read.
pub(super) fn wording(error: &svgtypes::Error, what: &str) -> String {
    match error {
        svgtypes::Error::UnexpectedEndOfStream => format!("{what} ends too early"),
        svgtypes::Error::InvalidNumber(_) => {
            format!("{what} holds something that is no finite number")
        }
        _ => format!("{what} cannot be read at this place"),
    }
}
