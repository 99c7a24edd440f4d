//! Is this text at all, and where do its lines end? LF, CR LF and CR alone end a line; a byte order
//! mark before the first is skipped. Bytes that are no UTF-8 are kept for messages and block texts as
//! Latin-1, the code of older controls; outside comments the lexer refuses them.

use std::borrow::Cow;

use super::faults::Line;

/// Why a file is no program text.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum NoText {
    /// No byte, or blanks only.
    Empty,
    /// 16-bit characters.
    Wide,
    /// Data of another kind.
    Binary,
}

/// The text after a byte order mark and before a DOS end-of-text byte (0x1A).
///
/// # Errors
/// When the bytes are no text.
pub(super) fn screen(bytes: &[u8]) -> Result<&[u8], NoText> {
    if bytes.starts_with(&[0xFF, 0xFE]) || bytes.starts_with(&[0xFE, 0xFF]) {
        return Err(NoText::Wide);
    }
    let text = bytes.strip_prefix(&[0xEF, 0xBB, 0xBF]).unwrap_or(bytes);
    if text.contains(&0) || mostly_control(text) {
        return Err(NoText::Binary);
    }
    let end = text.iter().rposition(|b| !(b.is_ascii_whitespace() || *b == 0x1A));
    end.and_then(|end| text.get(..=end)).ok_or(NoText::Empty)
}

/// Are more than one in twenty of the first bytes control codes that no text has?
fn mostly_control(text: &[u8]) -> bool {
    let head = text.get(..text.len().min(1 << 16)).unwrap_or(text);
    let odd = head.iter().filter(|b| b.is_ascii_control() && !matches!(b, 9..=13 | 0x1A)).count();
    odd * 20 > head.len()
}

/// A line as characters: UTF-8, or Latin-1 where it is none.
pub(super) fn decode(line: &[u8]) -> Cow<'_, str> {
    match std::str::from_utf8(line) {
        Ok(text) => Cow::Borrowed(text),
        Err(_) => line.iter().map(|&b| char::from(b)).collect(),
    }
}

/// The lines of `text`, numbered from 1.
pub(super) fn lines(text: &[u8]) -> impl Iterator<Item = Line<'_>> {
    let mut rest = Some(text);
    (1..).map_while(move |number| {
        let text = rest?;
        let Some(end) = text.iter().position(|b| matches!(b, b'\n' | b'\r')) else {
            rest = None;
            return Some(Line { number, text });
        };
        let (line, tail) = text.split_at_checked(end)?;
        let tail = tail.strip_prefix(b"\r\n").or_else(|| tail.get(1..)).unwrap_or_default();
        rest = Some(tail);
        Some(Line { number, text: line })
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn split(text: &[u8]) -> Vec<&[u8]> {
        lines(text).map(|l| l.text).collect()
    }

    #[test]
    fn every_kind_of_line_end_ends_one_line() {
        assert_eq!(split(b"a\nb\r\nc\rd"), [b"a", b"b", b"c", b"d"]);
        assert_eq!(split(b"a\n\nb"), [&b"a"[..], b"", b"b"]);
        assert_eq!(split(b"a\r\rb"), [&b"a"[..], b"", b"b"]);
        assert_eq!(lines(b"a\r\nb").map(|l| l.number).collect::<Vec<_>>(), [1, 2]);
    }

    #[test]
    fn byte_order_mark_and_dos_end_are_no_text_of_the_program() {
        assert_eq!(screen(b"\xEF\xBB\xBFG0\r\n\x1A"), Ok(&b"G0"[..]));
        assert_eq!(screen(b"\xFF\xFEG\0"), Err(NoText::Wide));
    }

    #[test]
    fn empty_and_binary_bytes_are_told_apart() {
        assert_eq!(screen(b""), Err(NoText::Empty));
        assert_eq!(screen(b" \r\n\t"), Err(NoText::Empty));
        assert_eq!(screen(b"PK\x03\x04\0\0"), Err(NoText::Binary));
        assert_eq!(screen(b"\x01\x02\x03abc"), Err(NoText::Binary));
        assert!(screen("(Fräser 6 mm)".as_bytes()).is_ok());
    }

    #[test]
    fn latin_1_is_read_where_it_is_no_utf_8() {
        assert_eq!(decode(b"(Fr\xE4ser)"), "(Fräser)");
        assert_eq!(decode("(Fräser)".as_bytes()), "(Fräser)");
    }
}
