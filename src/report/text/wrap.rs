//! Fitting sentences to a width, counted in characters.

/// The words of `text` in lines of at most `width` characters. A longer word is broken.
pub fn wrap(text: &str, width: usize) -> Vec<String> {
    let width = width.max(8);
    let mut lines = Vec::new();
    let mut line = String::new();
    let mut used = 0;
    for word in text.split_whitespace().flat_map(|w| pieces(w, width)) {
        let length = word.chars().count();
        if used > 0 && used + 1 + length > width {
            lines.push(std::mem::take(&mut line));
            used = 0;
        }
        if used > 0 {
            line.push(' ');
            used += 1;
        }
        line.push_str(&word);
        used += length;
    }
    if used > 0 {
        lines.push(line);
    }
    lines
}

/// A word in pieces of at most `width` characters.
fn pieces(word: &str, width: usize) -> Vec<String> {
    let chars: Vec<char> = word.chars().collect();
    chars.chunks(width).map(|c| c.iter().collect()).collect()
}

/// `text` on one line of at most `width` characters, its end replaced by three dots where it is cut.
pub fn cut(text: &str, width: usize) -> String {
    if text.chars().count() <= width {
        return text.to_owned();
    }
    let kept: String = text.chars().take(width.saturating_sub(3)).collect();
    format!("{}...", kept.trim_end())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn lines_hold_whole_words_within_the_width() {
        assert_eq!(wrap("a bb ccc dddd eeeee", 8), ["a bb ccc", "dddd", "eeeee"]);
        assert!(wrap("", 20).is_empty());
    }

    #[test]
    fn a_word_longer_than_the_line_is_broken_not_lost() {
        assert_eq!(wrap("abcdefghijkl", 8), ["abcdefgh", "ijkl"]);
    }

    #[test]
    fn a_long_block_text_ends_in_dots() {
        assert_eq!(cut("N10 G1 X1. Y2.", 10), "N10 G1...");
        assert_eq!(cut("\u{e9}\u{e9}", 2), "\u{e9}\u{e9}");
    }
}
