//! Damaged texts: small whole ones, changed, cut and spliced at random.

/// A text of `corpus` with one to `most` changes; `bytes` are those that may be put in.
pub fn mutated(rng: &mut fastrand::Rng, corpus: &[&str], bytes: &[u8], most: usize) -> Vec<u8> {
    let mut text = corpus[rng.usize(..corpus.len())].as_bytes().to_vec();
    for _ in 0..rng.usize(1..=most) {
        let at = rng.usize(..=text.len());
        let to = (at + rng.usize(..=12)).min(text.len());
        let byte = bytes[rng.usize(..bytes.len())];
        match rng.u8(..7) {
            0 => text.insert(at, byte),
            1 => drop(text.drain(at..to)),
            2 if at < text.len() => text[at] = byte,
            3 => {
                let copy = text[at..to].to_vec();
                let into = rng.usize(..=text.len());
                drop(text.splice(into..into, copy));
            }
            4 => text.truncate(at),
            5 => {
                let other = corpus[rng.usize(..corpus.len())].as_bytes();
                let lines: Vec<&[u8]> = other.split_inclusive(|b| *b == b'\n').collect();
                let line = lines[rng.usize(..lines.len())].to_vec();
                drop(text.splice(at..at, line));
            }
            _ => drop(text.splice(at..at, std::iter::repeat_n(byte, rng.usize(..40)))),
        }
    }
    text
}
