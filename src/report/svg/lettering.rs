//! Text on the sheet: how wide it gets, and how to make it fit.
//!
//! The reader's system chooses the sans-serif family, so widths are estimated by a wide one; what fits
//! by the estimate fits everywhere.

use svg::node::element::Text;

use super::hatch::INK;
use super::page::mm;
use crate::report::plain;

/// The family: the system's own sans-serif.
pub const FAMILY: &str = "system-ui, sans-serif";

/// Size of running text, mm.
pub const SIZE: f64 = 2.7;

/// Width of a character in parts of the text size, on the wide side.
fn advance(c: char) -> f64 {
    match c {
        'i' | 'j' | 'l' | '\'' | '|' => 0.3,
        ' ' | '.' | ',' | ':' | ';' | 'I' | '!' => 0.36,
        'f' | 't' | 'r' | '(' | ')' | '[' | ']' | '/' | '-' => 0.42,
        'm' | 'w' | 'M' | 'W' | '@' | '%' => 1.0,
        'A'..='Z' | '=' | '+' | '\u{b1}' | '<' | '>' | '~' | '#' => 0.8,
        ' '..='~' => 0.65,
        _ => 1.0,
    }
}

/// Estimated width of `text` in letters of `size`, on the wide side.
pub fn width(text: &str, size: f64) -> f64 {
    size * text.chars().map(advance).sum::<f64>()
}

/// `text`, its end replaced by an ellipsis where it is wider than `room`.
pub fn fit(text: &str, size: f64, room: f64) -> String {
    let text = plain(text);
    if width(&text, size) <= room {
        return text;
    }
    let mut kept = String::new();
    let mut used = width("\u{2026}", size);
    for c in text.chars() {
        used += size * advance(c);
        if used > room {
            break;
        }
        kept.push(c);
    }
    format!("{}\u{2026}", kept.trim_end())
}

/// A file's name, its middle replaced by an ellipsis where it is wider than `room`: both the beginning
/// and the ending tell files apart.
pub fn fit_name(name: &str, size: f64, room: f64) -> String {
    let name = plain(name);
    if width(&name, size) <= room {
        return name;
    }
    let chars: Vec<char> = name.chars().collect();
    let (mut head, mut tail) = (String::new(), Vec::new());
    let mut used = width("\u{2026}", size);
    for (&front, &back) in chars.iter().zip(chars.iter().rev()) {
        used += size * (advance(front) + advance(back));
        if used > room {
            break;
        }
        head.push(front);
        tail.push(back);
    }
    let tail: String = tail.into_iter().rev().collect();
    format!("{head}\u{2026}{tail}")
}

/// A number as text with as many of its decimals as fit. A number is never cut: what is left of it
/// would read as another one.
pub fn fit_number(number: &str, size: f64, room: f64) -> String {
    let mut text = number.to_owned();
    let Ok(value) = number.parse::<f64>() else { return text };
    let mut decimals = number.split_once('.').map_or(0, |(_, d)| d.len());
    while decimals > 0 && width(&text, size) > room {
        decimals -= 1;
        text = format!("{value:.decimals$}");
    }
    text
}

/// As many of `items` as fit into `most` lines, whole, and how many more there are.
pub fn listed(items: &[String], size: f64, room: f64, most: usize) -> Vec<String> {
    let mut best = vec![format!("{} in all", items.len())];
    for shown in 1..=items.len() {
        let more = items.len() - shown;
        let mut text = items.iter().take(shown).cloned().collect::<Vec<_>>().join(", ");
        if more > 0 {
            text.push_str(&format!(" and {more} more"));
        }
        let lines = lines(&text, size, room, most + 1);
        if lines.len() > most {
            break;
        }
        best = lines;
    }
    best
}

/// `text` in lines no wider than `room`; at most `most` of them, the last one cut where more follow.
pub fn lines(text: &str, size: f64, room: f64, most: usize) -> Vec<String> {
    let mut out: Vec<String> = Vec::new();
    let text = plain(text);
    let mut words = text.split_whitespace().peekable();
    while words.peek().is_some() && out.len() < most {
        let last = out.len() + 1 == most;
        let mut line = String::new();
        while let Some(word) = words.peek() {
            let longer = if line.is_empty() { (*word).to_owned() } else { format!("{line} {word}") };
            if !last && !line.is_empty() && width(&longer, size) > room {
                break;
            }
            line = longer;
            words.next();
        }
        out.push(fit(&line, size, room));
    }
    out
}

/// Which end of a text stands at its place.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Align {
    /// Its start.
    Start,
    /// Its middle.
    Middle,
    /// Its end.
    End,
}

/// A text on the base line through (x, y), in ink.
pub fn text(content: &str, x: f64, y: f64, size: f64, align: Align) -> Text {
    let anchor = match align {
        Align::Start => "start",
        Align::Middle => "middle",
        Align::End => "end",
    };
    Text::new(plain(content))
        .set("x", mm(x))
        .set("y", mm(y))
        .set("font-size", mm(size))
        .set("text-anchor", anchor)
        .set("fill", INK)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_does_not_fit_is_cut_and_says_so() {
        assert_eq!(fit("bracket.nc", 2.7, 60.0), "bracket.nc");
        let cut = fit(&"long-name-".repeat(20), 2.7, 60.0);
        assert!(cut.ends_with('\u{2026}') && width(&cut, 2.7) <= 60.0);
    }

    #[test]
    fn a_long_name_keeps_its_beginning_and_its_ending() {
        let name = fit_name("a-bracket-with-a-name-that-is-far-too-long-for-a-column.dxf", 2.7, 40.0);
        assert!(name.starts_with("a-brac") && name.ends_with(".dxf") && width(&name, 2.7) <= 40.0, "{name}");
        assert_eq!(fit_name("bracket.nc", 2.7, 40.0), "bracket.nc");
    }

    #[test]
    fn a_number_loses_decimals_and_never_digits() {
        assert_eq!(fit_number("0.3100", 2.7, 18.0), "0.3100");
        assert_eq!(fit_number("123456.7891", 2.7, 18.0), "123456.789");
        assert_eq!(fit_number("123456.7891", 2.7, 1.0), "123457");
    }

    #[test]
    fn a_list_shows_whole_items_and_counts_the_rest() {
        let items: Vec<String> = (1..=30).map(|n| format!("T{n} 12.5")).collect();
        let text = listed(&items, 2.7, 44.0, 2).join(" ");
        assert!(text.starts_with("T1 12.5, T2 12.5") && text.ends_with(" more"), "{text}");
        assert!(!text.contains('\u{2026}'));
        assert_eq!(listed(&items[..1], 2.7, 44.0, 2), ["T1 12.5"]);
    }

    #[test]
    fn lines_stop_at_the_most_allowed() {
        let text = "one two three four five six seven eight nine ten eleven twelve";
        let lines = lines(text, 3.0, 30.0, 3);
        assert_eq!(lines.len(), 3);
        assert!(lines.iter().all(|l| width(l, 3.0) <= 30.0));
        assert!(lines.last().is_some_and(|l| l.ends_with('\u{2026}')));
    }
}
