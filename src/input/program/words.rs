//! One block as words: letters with their numbers, comments left out (NISTIR 6556, 3.3). Blanks and
//! tabs count nowhere outside comments, small letters are capitals, order does not matter, and no
//! letter but G and M may come twice.
//!
//! The words of a block live in a table that is used again for the next one, so reading a word asks
//! for no memory. What the words mean is not known here.

use super::faults::{Fault, Span};
use super::number::{NumberError, number};
use super::unread;

/// Most G or M words in one block; NISTIR 6556 has 14 groups of G codes.
const MOST_CODES: usize = 24;

/// A G or M word.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default)]
pub(super) struct Code {
    /// Ten times its number: 541 for G54.1.
    pub tenths: u16,
    /// Where it stands.
    pub span: Span,
}

/// The G words or the M words of a block.
#[derive(Clone, Copy, Debug, Default)]
pub(super) struct Codes {
    list: [Code; MOST_CODES],
    count: usize,
}

impl Codes {
    /// In order of writing.
    pub fn all(&self) -> &[Code] {
        self.list.get(..self.count).unwrap_or_default()
    }
}

/// What a line holds besides words.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Content {
    /// Words, or nothing.
    Words,
    /// A tape mark `%`.
    TapeMark,
}

/// The words of one block.
#[derive(Clone, Debug, Default)]
pub(super) struct Words {
    seen: u32,
    values: [f64; 26],
    spans: [Span; 26],
    /// Its G words.
    pub g: Codes,
    /// Its M words.
    pub m: Codes,
    /// Marked `/` for block delete.
    pub deleted: Option<Span>,
    /// The first number with a blank between two digits.
    pub parted: Option<Span>,
}

/// The bit of a capital letter in [`Words::seen`].
pub(super) const fn bit(letter: u8) -> u32 {
    1_u32.wrapping_shl(letter.wrapping_sub(b'A') as u32)
}

/// The bits of several capital letters.
pub(super) const fn bits(letters: &[u8]) -> u32 {
    let mut rest = letters;
    let mut all = 0;
    while let [first, tail @ ..] = rest {
        all |= bit(*first);
        rest = tail;
    }
    all
}

impl Words {
    /// Value of the word with this capital letter, if the block has it. Not for G and M.
    pub fn get(&self, letter: u8) -> Option<f64> {
        (self.seen & bit(letter) != 0).then(|| self.value(letter))
    }

    fn value(&self, letter: u8) -> f64 {
        self.values.get(usize::from(letter.wrapping_sub(b'A'))).copied().unwrap_or(0.0)
    }

    /// Where that word stands; the start of the line if nowhere.
    pub fn span(&self, letter: u8) -> Span {
        self.spans.get(usize::from(letter.wrapping_sub(b'A'))).copied().unwrap_or_default()
    }

    /// Has it any of the letters of this mask, made by [`bits`]?
    pub const fn any(&self, mask: u32) -> bool {
        self.seen & mask != 0
    }

    /// The first letter of this mask that the block has.
    pub fn first(&self, mask: u32) -> Option<u8> {
        if !self.any(mask) {
            return None;
        }
        (b'A'..=b'Z').find(|&l| self.seen & mask & bit(l) != 0)
    }

    /// Has it no word but N?
    pub const fn is_empty(&self) -> bool {
        self.seen & !bit(b'N') == 0 && self.g.count == 0 && self.m.count == 0
    }

    /// From its first to its last marked word, for faults of the whole block. Slow: for messages only.
    pub fn extent(&self) -> Span {
        let letters = (b'A'..=b'Z').filter(|&l| self.seen & bit(l) != 0).map(|l| self.span(l));
        let codes = self.g.all().iter().chain(self.m.all()).map(|c| c.span);
        letters
            .chain(codes)
            .fold(None, |all: Option<Span>, s| {
                Some(all.map_or(s, |a| Span { at: a.at.min(s.at), end: a.end.max(s.end) }))
            })
            .unwrap_or_default()
    }

    /// Reads the words of `line` in place of those held.
    ///
    /// # Errors
    /// The first thing in it that is no word, comment, block delete or tape mark.
    pub fn read(&mut self, line: &[u8]) -> Result<Content, Fault> {
        self.seen = 0;
        self.g.count = 0;
        self.m.count = 0;
        self.deleted = None;
        self.parted = None;
        let mut at = 0;
        while let Some(&byte) = line.get(at) {
            at = match byte {
                b' ' | b'\t' | 0x0B | 0x0C => at + 1,
                b'A'..=b'Z' | b'a'..=b'z' => self.word(line, at)?,
                b'(' => comment_end(line, at)?,
                b';' => break,
                b'/' if self.is_empty() && self.deleted.is_none() => self.block_delete(line, at),
                b'%' if self.is_empty() => return tape_mark(line, at),
                _ => return Err(unread::character(line, at)),
            };
        }
        Ok(Content::Words)
    }

    /// Notes `/` and skips the number of its switch (`/2`).
    fn block_delete(&mut self, line: &[u8], at: usize) -> usize {
        let switch = line.get(at + 1).is_some_and(u8::is_ascii_digit);
        let end = at + 1 + usize::from(switch);
        self.deleted = Some(Span::new(at, end));
        end
    }

    /// Takes the word at `at` and gives the byte after it.
    fn word(&mut self, line: &[u8], at: usize) -> Result<usize, Fault> {
        let Some(letter) = line.get(at).map(u8::to_ascii_uppercase) else { return Ok(at + 1) };
        let read = match number(line, at + 1) {
            Ok(read) => read,
            Err(error) => return Err(no_number(line, at, letter, error)),
        };
        let end = read.end;
        if let Some(b'e' | b'E' | b'o' | b'O') = line.get(end) {
            unread::run_on(line, at, end)?;
        }
        let span = Span::new(at, end);
        if read.parted && self.parted.is_none() {
            self.parted = Some(span);
        }
        match letter {
            b'G' => push(&mut self.g, letter, read.value, span)?,
            b'M' => push(&mut self.m, letter, read.value, span)?,
            b'O' if !self.is_empty() => return Err(unread::late_o(span)),
            _ if self.seen & bit(letter) != 0 => return Err(twice(letter, span)),
            _ => {
                self.seen |= bit(letter);
                let index = usize::from(letter.wrapping_sub(b'A'));
                if let (Some(v), Some(s)) = (self.values.get_mut(index), self.spans.get_mut(index)) {
                    *v = read.value;
                    *s = span;
                }
            }
        }
        Ok(end)
    }
}

/// Adds a G or M word.
fn push(codes: &mut Codes, letter: u8, value: f64, span: Span) -> Result<(), Fault> {
    let scaled = value * 10.0;
    let whole = scaled.round();
    // NISTIR 6556, 3.3.2.1: ten times a G code, and an M code, must be within 0.0001 of an integer.
    let unit = if letter == b'M' { 10.0 } else { 1.0 };
    let off = ((scaled / unit) - (scaled / unit).round()).abs();
    if !(0.0..10_000.0).contains(&whole) || off > 1e-4 {
        return Err(unread::odd_code(letter, span));
    }
    let Some(slot) = codes.list.get_mut(codes.count) else {
        return Err(Fault::new(
            span,
            format!("more than {MOST_CODES} {} words in one block", char::from(letter)),
            "",
            "write the codes in several blocks",
        ));
    };
    #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "checked above")]
    let tenths = whole as u16;
    *slot = Code { tenths, span };
    codes.count += 1;
    Ok(())
}

/// The byte after the comment that starts at `at`. Comments do not nest (NISTIR 6556, 3.3.4).
fn comment_end(line: &[u8], at: usize) -> Result<usize, Fault> {
    let rest = line.get(at + 1..).unwrap_or_default();
    let Some(length) = rest.iter().position(|&b| b == b')') else {
        return Err(unread::open_comment(line, at));
    };
    let end = at + 1 + length + 1;
    let nested = rest.get(..length).is_some_and(|inside| inside.contains(&b'('));
    let tail = line.get(end..).unwrap_or_default();
    let stray = tail.iter().find(|&&b| matches!(b, b'(' | b')' | b';')) == Some(&b')');
    if nested && stray { Err(unread::nested_comment(line, at)) } else { Ok(end) }
}

/// A tape mark; a program number (`%100`, `%O100`: common practice, no single source) or a comment may
/// follow it.
fn tape_mark(line: &[u8], at: usize) -> Result<Content, Fault> {
    let rest = line.get(at + 1..).unwrap_or_default().trim_ascii();
    let number = rest.strip_prefix(b"O").unwrap_or(rest);
    let comment = matches!(number.first(), Some(b'(' | b';'));
    if comment || number.iter().all(u8::is_ascii_digit) {
        Ok(Content::TapeMark)
    } else {
        Err(unread::words_after_mark(line, at))
    }
}

fn twice(letter: u8, span: Span) -> Fault {
    let letter = char::from(letter);
    Fault::new(
        span,
        format!("a second {letter} word in one block"),
        format!("at most one {letter} word (NISTIR 6556, 3.3.5)"),
        "take out the wrong one, or write two blocks",
    )
}

/// Why a letter has no number: the number is damaged, or the letter is text.
#[cold]
fn no_number(line: &[u8], at: usize, letter: u8, error: NumberError) -> Fault {
    let shown = char::from(letter);
    match error {
        NumberError::Missing => unread::letter_alone(line, at),
        NumberError::NoDigit(end) => Fault::new(
            Span::new(at, end),
            format!("the {shown} word has no digit"),
            "at least one digit",
            format!("write the whole number after {shown}, or take the word out"),
        ),
        NumberError::Malformed(end) => Fault::new(
            Span::new(at, end + 1),
            format!("the number after {shown} has a second sign or point"),
            "one sign at most, then digits with one point at most",
            "correct the number; the file may be damaged here",
        ),
        NumberError::Comma(end) => Fault::new(
            Span::new(at, end + 1),
            format!("a comma in the number after {shown}"),
            "a decimal point",
            "write a point for the comma; set the postprocessor to decimal points",
        ),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn read(line: &str) -> Words {
        let mut words = Words::default();
        assert_eq!(words.read(line.as_bytes()), Ok(Content::Words), "{line}");
        words
    }

    fn fault(line: &[u8]) -> Fault {
        let fault = Words::default().read(line).unwrap_err();
        assert!(!fault.help.is_empty(), "{fault:?}");
        fault
    }

    #[test]
    fn blanks_inside_words_and_small_letters_count_for_nothing() {
        // NISTIR 6556, 3.3: the report's own example.
        let words = read("g0x +0. 12 34y 7");
        assert_eq!(words.g.all().first().unwrap().tenths, 0);
        assert!((words.get(b'X').unwrap() - 0.1234).abs() < 1e-15);
        assert!((words.get(b'Y').unwrap() - 7.0).abs() < 1e-15);
    }

    #[test]
    fn comments_block_delete_and_line_number_are_no_words() {
        let words = read("/2 N10 (a; comment) G1 (another) X5. ; Y9");
        assert!(words.deleted.is_some());
        assert!(words.get(b'Y').is_none());
        assert!((words.get(b'X').unwrap() - 5.0).abs() < 1e-15);
        assert!(read("N10 / ").is_empty());
        assert!(read("(Block-X: G1 X5)").is_empty());
        for mark in ["%", " % ", "%O100", "%100 ", "% (part)"] {
            assert_eq!(Words::default().read(mark.as_bytes()), Ok(Content::TapeMark), "{mark}");
        }
    }

    #[test]
    fn codes_keep_their_tenths() {
        let words = read("G54.1 G 9 1 . 1 M30 G01");
        let tenths = |c: &Codes| c.all().iter().map(|c| c.tenths).collect::<Vec<_>>();
        assert_eq!(tenths(&words.g), [541, 911, 10]);
        assert_eq!(tenths(&words.m), [300]);
    }

    #[test]
    fn damaged_text_is_refused_with_its_likely_cure() {
        for (line, found) in [
            (&b"G1 Z-.-2"[..], "second sign or point"),
            (b"G1 Z,15", "comma"),
            (b"G1 Z3,15", "comma"),
            (b"G1 X1e999", "exponent"),
            (b"G1 XO.5", "letter O"),
            (b"G1 X1O.5", "letter O"),
            (b"G1 X10O", "letter O"),
            (b"G1 X", "no number"),
            (b"G1 X Y5", "no number"),
            (b"G1 X-", "no digit"),
            (b"PART NUMBER SEVEN", "text"),
            (b"(unclosed", "never closed"),
            (b"(a (b) c)", "comment inside a comment"),
            (b"G1 X)", "no number"),
            (b"G1 X5)", "never opened"),
            (b"#1=5", "variable"),
            (b"G1 X[1+2]", "expression"),
            (b"G1 X#2", "variable"),
            (b"WHILE [#1 LT 5] DO1", "program logic"),
            (b"G1 X5 \xC3\xA4", "character"),
            (b"G1 X5 \x07", "character"),
            (b"G1 X5 X6", "second X"),
            (b"G1 O5", "O word"),
            (b"M3.5", "M code"),
            (b"G1.25", "G code"),
            (b"G-1", "G code"),
            (b"G1 / X5", "slash"),
            (b"% G1 X5", "tape mark"),
            (b"G1 X5 %", "tape mark"),
        ] {
            let fault = fault(line);
            let text = String::from_utf8_lossy(line);
            assert!(fault.found.contains(found), "{text}: {}", fault.found);
            assert!((fault.span.at as usize) < line.len() && fault.span.at < fault.span.end, "{text}");
        }
    }

    #[test]
    fn too_many_codes_are_refused() {
        assert!(fault("G1".repeat(25).as_bytes()).found.contains("more than 24"));
    }
}
