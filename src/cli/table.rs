//! A table of a job file that knows where each of its keys and values stands, and gathers what is
//! wrong with them.

use std::cell::RefCell;
use std::ops::Range;
use std::rc::Rc;

use clap::ValueEnum;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

use super::draft::Rule;
use super::job::names;
use crate::input::{Place, Problem};

/// A table under its dotted name (empty for the document itself).
pub struct Table<'a> {
    table: &'a DeTable<'a>,
    name: String,
    file: &'a str,
    text: &'a str,
    problems: Rc<RefCell<Vec<Problem>>>,
}

/// Line, column and excerpt of the bytes `span` of `text`. What is missing at the end of the file is
/// missed behind its last word, not on a line that is not there.
pub fn place(file: &str, text: &str, span: Range<usize>) -> Place {
    let before = text.get(..span.start.min(text.trim_end().len())).unwrap_or(text);
    let start = before.rfind('\n').map_or(0, |i| i + 1);
    let line = before.matches('\n').count() + 1;
    let excerpt = text.get(start..).unwrap_or("").lines().next().unwrap_or("");
    let column = before.get(start..).unwrap_or("").chars().count() + 1;
    let marked = text.get(span).unwrap_or("").lines().next().unwrap_or("").chars().count();
    Place::line(file, line, excerpt).at(column, marked.max(1))
}

/// The known name that a mistyped one most likely means. Closer than half of its letters, or none.
pub fn nearest<'n>(typed: &str, known: impl IntoIterator<Item = &'n str>) -> Option<&'n str> {
    known
        .into_iter()
        .map(|k| (strsim::damerau_levenshtein(&typed.to_lowercase(), &k.to_lowercase()), k))
        .filter(|(d, k)| 2 * d <= k.chars().count().max(typed.chars().count()))
        .min_by_key(|(d, _)| *d)
        .map(|(_, k)| k)
}

impl<'a> Table<'a> {
    pub fn new(table: &'a DeTable<'a>, name: &str, file: &'a str, text: &'a str) -> Self {
        Self { table, name: name.to_owned(), file, text, problems: Rc::default() }
    }

    fn inner(&self, table: &'a DeTable<'a>, name: String) -> Self {
        Table { table, name, problems: Rc::clone(&self.problems), ..*self }
    }

    /// What was wrong, in order of place.
    pub fn into_problems(self) -> Vec<Problem> {
        let mut problems = self.problems.take();
        problems.sort_by_key(|p| (p.place.line, p.place.column));
        problems
    }

    /// Every key must be one of `known`.
    pub fn known(&self, known: &[&str]) {
        for key in self.table.keys() {
            let typed: &str = key.get_ref();
            if known.contains(&typed) {
                continue;
            }
            let help = match nearest(typed, known.iter().copied()) {
                Some(k) => format!("write {k}, or take the line out"),
                None => format!("take the line out, or use one of: {}", known.join(", ")),
            };
            let within = if self.name.is_empty() { String::new() } else { format!(" in [{}]", self.name) };
            self.push(
                key.span(),
                format!("unknown key `{typed}`{within}"),
                &format!("one of: {}", known.join(", ")),
                &help,
            );
        }
    }

    /// All keys, in their order.
    pub fn keys(&self) -> Vec<String> {
        self.table.keys().map(|k| k.get_ref().to_string()).collect()
    }

    pub fn has(&self, key: &str) -> bool {
        self.get(key).is_some()
    }

    fn get(&self, key: &str) -> Option<&'a Spanned<DeValue<'a>>> {
        self.table.iter().find(|(k, _)| k.get_ref() == key).map(|(_, v)| v)
    }

    fn push(&self, span: Range<usize>, found: String, expected: &str, help: &str) {
        let at = place(self.file, self.text, span);
        self.problems.borrow_mut().push(Problem::error(at, found, expected, help));
    }

    /// Something is wrong with `key`.
    pub fn problem(&self, key: &str, found: String, expected: &str, help: &str) {
        let span = self.table.keys().find(|k| k.get_ref() == key).map_or(0..0, Spanned::span);
        self.push(span, found, expected, help);
    }

    fn wrong_type(&self, key: &str, value: &Spanned<DeValue>, expected: &str) {
        let found = format!("`{key}` is {}", in_words(value.get_ref()));
        self.push(value.span(), found, expected, &format!("write {expected}"));
    }

    pub fn table(&self, key: &str) -> Option<Self> {
        let value = self.get(key)?;
        let name = if self.name.is_empty() { key.to_owned() } else { format!("{}.{key}", self.name) };
        if let Some(table) = value.get_ref().as_table() {
            return Some(self.inner(table, name));
        }
        self.wrong_type(key, value, &format!("a heading [{name}] with its keys under it"));
        None
    }

    pub fn tables(&self, key: &str) -> Option<Vec<Self>> {
        let value = self.get(key)?;
        let name = format!("{}.{key}", self.name);
        let all = value.get_ref().as_array().and_then(|list| {
            list.iter().map(|v| v.get_ref().as_table().map(|t| self.inner(t, name.clone()))).collect()
        });
        if all.is_none() {
            self.wrong_type(key, value, &format!("{key} = [{{ shift = [50.0, 0.0], turn = 90.0 }}]"));
        }
        all
    }

    pub fn string(&self, key: &str) -> Option<String> {
        let value = self.get(key)?;
        let text = value.get_ref().as_str().filter(|s| !s.is_empty());
        if text.is_none() {
            self.wrong_type(key, value, &format!("{key} = \"...\", a name in double quotes"));
        }
        text.map(str::to_owned)
    }

    /// One string or a list of them.
    pub fn strings(&self, key: &str) -> Option<Vec<String>> {
        let value = self.get(key)?;
        let all = match value.get_ref() {
            DeValue::String(s) => Some(vec![s.to_string()]),
            DeValue::Array(list) => list.iter().map(|v| v.get_ref().as_str().map(str::to_owned)).collect(),
            _ => None,
        };
        if all.is_none() {
            self.wrong_type(key, value, &format!("{key} = \"NAME\" or {key} = [\"ONE\", \"TWO\"]"));
        }
        all
    }

    pub fn number(&self, key: &str, rule: Rule) -> Option<f64> {
        let value = self.get(key)?;
        let Some(number) = as_number(value.get_ref()) else {
            self.wrong_type(key, value, &format!("{key} = 1.5, a number without quotes"));
            return None;
        };
        if let Some(problem) = rule.broken(key, number, &place(self.file, self.text, value.span())) {
            self.problems.borrow_mut().push(problem);
            return None;
        }
        Some(number)
    }

    pub fn pair(&self, key: &str) -> Option<[f64; 2]> {
        let value = self.get(key)?;
        let numbers: Option<Vec<f64>> =
            value.get_ref().as_array().and_then(|list| list.iter().map(|v| as_number(v.get_ref())).collect());
        match numbers.as_deref() {
            Some(&[x, y]) if x.is_finite() && y.is_finite() => Some([x, y]),
            _ => {
                self.wrong_type(key, value, &format!("{key} = [12.5, -3.0], x and y"));
                None
            }
        }
    }

    pub fn flag(&self, key: &str) -> Option<bool> {
        let value = self.get(key)?;
        if value.get_ref().as_bool().is_none() {
            self.wrong_type(key, value, &format!("{key} = true or {key} = false"));
        }
        value.get_ref().as_bool()
    }

    pub fn choice<T: ValueEnum>(&self, key: &str) -> Option<T> {
        let value = self.get(key)?;
        let all = names::<T>();
        let Some(text) = value.get_ref().as_str() else {
            self.wrong_type(key, value, &format!("one of \"{}\"", all.join("\", \"")));
            return None;
        };
        let choice = T::from_str(text, false).ok();
        if choice.is_none() {
            let help = match nearest(text, all.iter().map(String::as_str)) {
                Some(n) => format!("write {key} = \"{n}\""),
                None => format!("write one of: {}", all.join(", ")),
            };
            let expected = format!("one of: {}", all.join(", "));
            self.push(value.span(), format!("`{key}` is \"{text}\""), &expected, &help);
        }
        choice
    }
}

/// Integer or decimal; what is too large for either is infinite and refused by its rule.
fn as_number(value: &DeValue) -> Option<f64> {
    match value {
        DeValue::Float(f) => f.as_str().parse().ok(),
        DeValue::Integer(i) if i.radix() == 10 => i.as_str().parse().ok(),
        _ => None,
    }
}

fn in_words(value: &DeValue) -> String {
    match value {
        DeValue::String(s) if s.is_empty() => "empty".into(),
        DeValue::String(s) => format!("the text \"{s}\""),
        DeValue::Integer(_) | DeValue::Float(_) => "a number".into(),
        DeValue::Boolean(b) => format!("{b}"),
        DeValue::Array(_) => "a list".into(),
        DeValue::Table(_) => "a table".into(),
        DeValue::Datetime(_) => "a date".into(),
    }
}
