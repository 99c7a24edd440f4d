//! What a block may hold that is no word, and what the writer most likely meant: text without
//! parentheses, the letter O for a zero, an exponent, program logic, variables. Kept apart from the
//! lexer because none of it runs on a good program.

use super::faults::{Fault, Span};
use super::lines::decode;

/// Words of program logic in use in several dialects (common practice, no single source).
const LOGIC: [&str; 16] = [
    "IF",
    "WHILE",
    "DO",
    "END",
    "GOTO",
    "THEN",
    "ELSE",
    "ELSEIF",
    "ENDIF",
    "ENDWHILE",
    "SUB",
    "ENDSUB",
    "CALL",
    "RETURN",
    "REPEAT",
    "ENDREPEAT",
];

/// Advice for all that is computed while the program runs.
const COMPUTED: &str =
    "post the program with every value written out as a number: variables and logic are not read yet";

/// The length of the run of letters from `at` on.
fn run(line: &[u8], at: usize) -> usize {
    line.get(at..).unwrap_or_default().iter().take_while(|b| b.is_ascii_alphabetic()).count()
}

/// A letter that no number follows.
#[cold]
pub(super) fn letter_alone(line: &[u8], at: usize) -> Fault {
    let length = run(line, at);
    let text = decode(line.get(at..at + length).unwrap_or_default());
    let span = Span::new(at, at + length);
    let capitals = text.to_ascii_uppercase();
    let next = line.get(at + 1..).unwrap_or_default().trim_ascii_start().first().copied();
    if LOGIC.contains(&capitals.as_str()) {
        return Fault::new(
            span,
            format!("{text} is program logic"),
            "words: a letter and a number",
            COMPUTED,
        );
    }
    match next {
        Some(b'#' | b'[') => computed(line, at, next),
        Some(b'o' | b'O') if length == 2 => letter_o(at, at + 2),
        _ if length > 2 || is_prose(line, at) => prose(line, at),
        _ => {
            let letter = capitals.get(..1).unwrap_or_default();
            Fault::new(
                Span::new(at, at + 1),
                format!("the letter {letter} has no number"),
                "a number after the letter",
                format!("write the number after {letter}, take the letter out, or put text in parentheses"),
            )
        }
    }
}

/// Are there only letters, as in a heading, from `at` to the end?
fn is_prose(line: &[u8], at: usize) -> bool {
    let rest = line.get(at..).unwrap_or_default();
    rest.iter().filter(|b| b.is_ascii_alphabetic()).count() > 3 && !rest.iter().any(u8::is_ascii_digit)
}

fn prose(line: &[u8], at: usize) -> Fault {
    let end = line.iter().rposition(|b| !b.is_ascii_whitespace()).map_or(at, |last| last + 1);
    Fault::new(
        Span::new(at, end.max(at + 1)),
        "text that is no word of a program",
        "words: a letter and a number",
        "put it in parentheses if it is a comment, take it out if it does not belong here",
    )
}

fn computed(line: &[u8], at: usize, next: Option<u8>) -> Fault {
    let what = if next == Some(b'#') { "a variable" } else { "an expression" };
    Fault::new(
        Span::new(at, line.len().max(at + 1)),
        format!("{what} in place of a number"),
        "a number",
        COMPUTED,
    )
}

fn letter_o(at: usize, end: usize) -> Fault {
    Fault::new(
        Span::new(at, end),
        "the letter O where a digit belongs",
        "a number",
        "write the digit 0 for the letter O",
    )
}

/// What may run on directly after the number that ends at `end`: an exponent or the letter O.
///
/// # Errors
/// Always, but for an E word without a blank before it, such as `X1E`, left to the lexer.
#[cold]
pub(super) fn run_on(line: &[u8], at: usize, end: usize) -> Result<(), Fault> {
    if let Some(b'o' | b'O') = line.get(end) {
        return Err(letter_o(at, end + 1));
    }
    let sign = usize::from(matches!(line.get(end + 1), Some(b'+' | b'-')));
    let from = end + 1 + sign;
    let digits = line.get(from..).unwrap_or_default().iter().take_while(|b| b.is_ascii_digit()).count();
    if digits == 0 {
        return Ok(());
    }
    Err(Fault::new(
        Span::new(at, from + digits),
        "a number with an exponent",
        "digits with one decimal point at most (NISTIR 6556, 3.3.2.1)",
        "write the number out, without E",
    ))
}

/// A character that starts no word.
#[cold]
pub(super) fn character(line: &[u8], at: usize) -> Fault {
    let span = Span::new(at, at + 1);
    match line.get(at) {
        Some(b'#') => {
            Fault::new(Span::new(at, line.len()), "a variable", "words: a letter and a number", COMPUTED)
        }
        Some(b'[') => computed(line, at, Some(b'[')),
        Some(b')') => Fault::new(
            span,
            "a parenthesis that was never opened",
            "( before the comment",
            "write ( where the comment starts, or take the ) out",
        ),
        Some(b'/') => Fault::new(
            span,
            "a slash amid the block",
            "/ only at the start of a block, for block delete",
            "take the slash out, or put it first if the block is to be skipped by the switch",
        ),
        Some(b'%') => words_after_mark(line, at),
        Some(b',') => Fault::new(
            span,
            "a comma",
            "a decimal point, or the next word",
            "write a point for a decimal comma; chamfers and roundings (,C ,R) must be posted as moves",
        ),
        Some(b'0'..=b'9' | b'.' | b'+' | b'-') => Fault::new(
            span,
            "a number without a letter",
            "a letter before every number",
            "write the letter that belongs to the number, or put the text in parentheses",
        ),
        Some(b'*' | b'"' | b'\'' | b':') => Fault::new(
            span,
            "a character that is no part of a program",
            "words: a letter and a number",
            "take it out, or put the text in parentheses",
        ),
        _ => Fault::new(
            span,
            "a character that is no part of a program",
            "letters, digits, signs and points outside comments",
            "take it out, or put it in parentheses if it belongs to a comment; \
             if many lines are like this, the file is damaged or no program",
        ),
    }
}

/// A tape mark that shares its line with words.
#[cold]
pub(super) fn words_after_mark(line: &[u8], at: usize) -> Fault {
    Fault::new(
        Span::new(at, (at + 1).min(line.len())),
        "a tape mark % in one line with words",
        "% on a line of its own",
        "put % on its own line: what shares its line is not executed",
    )
}

/// An O word that is not the first of its block.
#[cold]
pub(super) fn late_o(span: Span) -> Fault {
    Fault::new(
        span,
        "an O word after other words",
        "a program number O on a line of its own",
        "write the digit 0 if it was meant, or put the program number on its own line",
    )
}

/// A G or M word whose number is no code.
#[cold]
pub(super) fn odd_code(letter: u8, span: Span) -> Fault {
    let (expected, letter) = if letter == b'M' {
        ("a whole number from 0 to 999", 'M')
    } else {
        ("a number from 0 to 999.9 with one decimal at most", 'G')
    };
    Fault::new(span, format!("this is no {letter} code"), expected, format!("correct the {letter} word"))
}

/// A comment that runs to the end of its line.
#[cold]
pub(super) fn open_comment(line: &[u8], at: usize) -> Fault {
    Fault::new(
        Span::new(at, line.len()),
        "a comment that is never closed",
        ") before the end of the line",
        "close the comment with ) so that it is clear which words belong to it",
    )
}

/// A comment inside a comment.
#[cold]
pub(super) fn nested_comment(line: &[u8], at: usize) -> Fault {
    Fault::new(
        Span::new(at, line.len()),
        "a comment inside a comment",
        "comments that do not nest (NISTIR 6556, 3.3.4)",
        "take the inner parentheses out: a control ends the comment at the first )",
    )
}
