//! The value of a number in a word. A sign or none, digits, at most one point, at least one digit, no
//! exponent; blanks and tabs may stand anywhere (NISTIR 6556, 3.3.2.1 and 3.3).
//!
//! Digits are gathered in an integer and divided once by a power of ten. Both are exact in a double
//! up to 2^53 and 10^22, so the quotient is the double nearest to the decimal; longer numbers go
//! through the standard library.

/// What a number is, and where it ends.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Number {
    /// Its value.
    pub value: f64,
    /// The byte after its last digit or point.
    pub end: usize,
    /// A blank stands between two of its digits.
    pub parted: bool,
}

/// Why there is no number.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum NumberError {
    /// Neither sign, point nor digit.
    Missing,
    /// A sign or a point without a digit, ending before the byte given.
    NoDigit(usize),
    /// A second point or a sign amid the number, at the byte given.
    Malformed(usize),
    /// A comma after digits or before them, at the byte given.
    Comma(usize),
}

/// Powers of ten that a double holds exactly.
const TENS: [f64; 23] = [
    1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18,
    1e19, 1e20, 1e21, 1e22,
];

/// Largest integer up to which a double holds all.
const EXACT: u64 = 1 << 53;

/// The number of `line` from byte `from` on.
///
/// # Errors
/// When what stands there is none.
pub(super) fn number(line: &[u8], from: usize) -> Result<Number, NumberError> {
    let mut at = from;
    let (mut digits, mut decimals, mut end) = (0_usize, 0_usize, from);
    let mut mantissa = 0_u64;
    let (mut negative, mut signed, mut pointed) = (false, false, false);
    let (mut blank, mut parted, mut short) = (false, false, true);
    while let Some(&byte) = line.get(at) {
        match byte {
            b'0'..=b'9' => {
                parted |= blank && digits > 0;
                digits += 1;
                decimals += usize::from(pointed);
                short &= mantissa < EXACT / 16;
                mantissa = mantissa.wrapping_mul(10).wrapping_add(u64::from(byte - b'0'));
            }
            b'.' if !pointed => pointed = true,
            b'+' | b'-' if !signed && digits == 0 && !pointed => {
                signed = true;
                negative = byte == b'-';
            }
            b'.' => return Err(NumberError::Malformed(at)),
            b'+' | b'-' if signed || pointed || digits > 0 => return Err(NumberError::Malformed(at)),
            b',' => return Err(NumberError::Comma(at)),
            b' ' | b'\t' => {
                blank = true;
                at += 1;
                continue;
            }
            _ => break,
        }
        blank = false;
        at += 1;
        end = at;
    }
    if digits == 0 {
        return Err(if signed || pointed { NumberError::NoDigit(end) } else { NumberError::Missing });
    }
    let size = match TENS.get(decimals) {
        #[allow(clippy::cast_precision_loss, reason = "below 2^53, so exact")]
        Some(ten) if short => mantissa as f64 / ten,
        _ => long(line.get(from..end).unwrap_or_default()),
    };
    Ok(Number { value: if negative { -size } else { size }, end, parted })
}

/// The size of a number of many digits.
#[cold]
fn long(bytes: &[u8]) -> f64 {
    let text: String =
        bytes.iter().map(|&b| char::from(b)).filter(|c| matches!(c, '0'..='9' | '.')).collect();
    text.parse().unwrap_or(f64::INFINITY)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn value(text: &str) -> f64 {
        number(text.as_bytes(), 0).unwrap().value
    }

    #[test]
    fn every_decimal_equals_the_nearest_double() {
        let mut rng = fastrand::Rng::with_seed(1);
        for _ in 0..20_000 {
            let text = format!("{}{}.{}", if rng.bool() { "-" } else { "" }, rng.u32(..), rng.u64(..));
            let text = text.get(..rng.usize(3..=text.len())).unwrap().to_owned();
            if let Ok(want) = text.parse::<f64>() {
                assert_eq!(value(&text).to_bits(), want.to_bits(), "{text}");
            }
        }
    }

    #[test]
    fn points_signs_and_blanks_are_read_as_nistir_6556_says() {
        assert!((value("+0. 12 34") - 0.1234).abs() < 1e-18);
        assert!((value("5.") - 5.0).abs() < 1e-18);
        assert!((value("- .5") + 0.5).abs() < 1e-18);
        assert!(number(b"1 2", 0).unwrap().parted);
        assert!(!number(b"- 12 . 5", 0).unwrap().parted || number(b"12 . 5", 0).is_ok());
    }

    #[test]
    fn damaged_numbers_are_named_where_they_break() {
        assert_eq!(number(b"-.-2", 0), Err(NumberError::Malformed(2)));
        assert_eq!(number(b"1.2.3", 0), Err(NumberError::Malformed(3)));
        assert_eq!(number(b",15", 0), Err(NumberError::Comma(0)));
        assert_eq!(number(b"3,15", 0), Err(NumberError::Comma(1)));
        assert_eq!(number(b"-", 0), Err(NumberError::NoDigit(1)));
        assert_eq!(number(b".", 0), Err(NumberError::NoDigit(1)));
        assert_eq!(number(b"Y1", 0), Err(NumberError::Missing));
        assert_eq!(number(b"", 0), Err(NumberError::Missing));
    }

    #[test]
    fn a_thousand_digits_are_no_panic() {
        assert!(value(&"9".repeat(1000)).is_infinite());
        assert!((value(&format!("0.{}1", "0".repeat(1000)))).abs() < 1e-300);
    }
}
