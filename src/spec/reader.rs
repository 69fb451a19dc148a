//! From spanned TOML values to plain ones: the vocabulary in which the rest of the reader is
//! written.
//!
//! Takes one value with its key ([`Field`]) or one table with the keys it may have ([`Table`]);
//! gives a number, a point, a choice… or reports what is wrong with it and gives `None`. A caller
//! asks for everything that it needs before it gives up, so all mistakes of a spec are found in
//! one pass. Lengths leave this module in millimetres.

use toml::de::{DeTable, DeValue};

use super::expression::{Expression, Failure, Kind, Quantity};
use super::parameters::Parameters;
use crate::geom::{Point, Vector, View as ViewSpace};
use crate::source::{Diagnostic, Diagnostics, FileId, Span, nearest};
use crate::units::LengthUnit;

/// As many problems of one spec are kept; a file with more is not a spec.
const MOST_PROBLEMS: usize = 1000;
/// Farthest from the origin that anything can be, mm: a kilometre, and the reach of exact
/// comparisons in f64 with room to spare.
const FARTHEST: f64 = 1e6;
/// Smallest size that is one, mm: a nanometre.
const SMALLEST: f64 = 1e-6;
/// Largest angle, degrees: a hundred turns.
const WIDEST: f64 = 36_000.0;
/// Longest id in bytes.
const LONGEST_ID: usize = 64;

/// A value with its key.
#[derive(Clone, Copy, Debug)]
pub(super) struct Field<'t> {
    /// What messages call it: its key, or for a member of a list the key of the list.
    pub(super) name: &'t str,
    /// Where the key stands; for a member of a list where the member stands.
    pub(super) key: Span,
    /// The value.
    pub(super) value: &'t DeValue<'t>,
    /// Where the value stands.
    pub(super) span: Span,
}

/// A table whose keys have been checked.
#[derive(Clone, Copy, Debug)]
pub(super) struct Table<'t> {
    /// What it describes, with an article: `a circle`.
    pub(super) what: &'t str,
    /// Where it stands.
    pub(super) span: Span,
    entries: &'t DeTable<'t>,
    known: &'static [&'static str],
}

impl<'t> Table<'t> {
    /// The value of `key`, if the table has one.
    pub(super) fn get(&self, key: &str) -> Option<Field<'t>> {
        let (name, value) = self.entries.get_key_value(key)?;
        Some(field(self.span.file, name, value))
    }

    /// Its values in the order in which they were written.
    pub(super) fn fields(&self) -> Vec<Field<'t>> {
        let mut fields: Vec<Field<'t>> =
            self.entries.iter().map(|(k, v)| field(self.span.file, k, v)).collect();
        fields.sort_by_key(|f| f.key);
        fields
    }

    /// Whether it has keys that it may not have. They have been reported; that something else is
    /// missing then most likely follows from them.
    pub(super) fn is_suspect(&self) -> bool {
        self.entries.keys().any(|k| !self.known.contains(&k.get_ref().as_ref()))
    }

    /// Whether a key that it may not have was most likely meant to be `key`.
    fn misspells(&self, key: &str) -> bool {
        let known = self.known.iter().copied();
        let stray = |k: &str| !self.known.contains(&k) && nearest(k, known.clone()) == Some(key);
        self.entries.keys().any(|k| stray(k.get_ref()))
    }

    /// Which of these keys it has, in the order in which they were written.
    pub(super) fn among(&self, keys: &[&str]) -> Vec<Field<'t>> {
        self.fields().into_iter().filter(|f| keys.contains(&f.name)).collect()
    }
}

fn field<'t>(
    file: FileId,
    key: &'t toml::Spanned<std::borrow::Cow<'t, str>>,
    value: &'t toml::Spanned<DeValue<'t>>,
) -> Field<'t> {
    Field {
        name: key.get_ref(),
        key: place(file, key.span()),
        value: value.get_ref(),
        span: place(file, value.span()),
    }
}

pub(super) fn place(file: FileId, range: std::ops::Range<usize>) -> Span {
    Span { file, start: range.start, end: range.end }
}

/// Which keys a table may have.
#[derive(Clone, Copy, Debug)]
pub(super) struct Keys {
    /// Those that this version reads.
    pub(super) known: &'static [&'static str],
    /// Those of the language that it does not read yet, and what to say about each.
    pub(super) later: &'static [(&'static str, &'static str)],
}

impl Keys {
    /// These, and none for later.
    pub(super) const fn only(known: &'static [&'static str]) -> Self {
        Self { known, later: &[] }
    }
}

/// The state of reading one spec: what expressions may use, and what was found wrong.
pub(super) struct Reader<'a> {
    pub(super) text: &'a str,
    pub(super) units: LengthUnit,
    pub(super) parameters: Parameters,
    found: Diagnostics,
    count: usize,
}

impl<'a> Reader<'a> {
    pub(super) fn new(text: &'a str) -> Self {
        Self {
            text,
            units: LengthUnit::default(),
            parameters: Parameters::default(),
            found: Diagnostics::default(),
            count: 0,
        }
    }

    /// What was found wrong.
    pub(super) fn into_found(self) -> Diagnostics {
        self.found
    }

    /// Whether further problems would not be kept, so that there is no use in looking for them.
    fn is_full(&self) -> bool {
        self.count > MOST_PROBLEMS
    }

    /// Takes note of a problem.
    pub(super) fn report(&mut self, d: Diagnostic) {
        self.count += 1;
        if self.count <= MOST_PROBLEMS {
            self.found.push(d);
        } else if self.count == MOST_PROBLEMS + 1 {
            self.found.push(Diagnostic::error(
                None,
                format!("more than {MOST_PROBLEMS} problems; the rest is not reported"),
            ));
        }
    }

    /// Takes note of an error about a value and gives nothing, for `return`.
    pub(super) fn fail<T>(&mut self, d: Diagnostic) -> Option<T> {
        self.report(d);
        None
    }

    /// "expected … for `key`, found …".
    pub(super) fn expected<T>(&mut self, f: Field<'_>, what: &str) -> Option<T> {
        let found = kind_of(f.value);
        let message = format!("expected {what} for `{}`, found {found}", f.name);
        self.fail(Diagnostic::error(f.span, message))
    }

    /// The table that `f` holds, with every key that it may not have reported.
    pub(super) fn table<'t>(
        &mut self,
        f: Field<'t>,
        what: &'t str,
        keys: Keys,
    ) -> Option<Table<'t>> {
        let DeValue::Table(entries) = f.value else { return self.expected(f, "a table") };
        let table = Table { what, span: f.span, entries, known: keys.known };
        self.check_keys(&table, keys);
        Some(table)
    }

    /// The table that `f` holds, whatever its keys.
    pub(super) fn free_table<'t>(&mut self, f: Field<'t>, what: &'t str) -> Option<Table<'t>> {
        let DeValue::Table(entries) = f.value else { return self.expected(f, "a table") };
        Some(Table { what, span: f.span, entries, known: &[] })
    }

    /// Reports every key that is not one of `keys`.
    fn check_keys(&mut self, table: &Table<'_>, keys: Keys) {
        for f in table.fields() {
            if keys.known.contains(&f.name) {
                continue;
            }
            if self.is_full() {
                break;
            }
            if let Some((_, words)) = keys.later.iter().find(|(key, _)| *key == f.name) {
                let message = format!("`{}` is not read by this version of the program", f.name);
                self.report(Diagnostic::error(f.key, message).help(*words));
                continue;
            }
            let all = keys.known.iter().copied().chain(keys.later.iter().map(|(k, _)| *k));
            let help = match nearest(f.name, all) {
                None => format!("the keys of {} are {}", table.what, keys.known.join(", ")),
                Some(meant) => match keys.later.iter().find(|(key, _)| *key == meant) {
                    Some((_, words)) => format!("`{meant}` is not read yet; {words}"),
                    None => format!("did you mean `{meant}`?"),
                },
            };
            let message = format!("unknown key `{}` in {}", f.name, table.what);
            self.report(Diagnostic::error(f.key, message).help(help));
        }
    }

    /// What `read` makes of a value that must be there; a key that was misspelt has been reported.
    pub(super) fn need<'t, T>(
        &mut self,
        table: &Table<'t>,
        key: &str,
        read: impl FnOnce(&mut Self, Field<'t>) -> Option<T>,
    ) -> Option<T> {
        match table.get(key) {
            Some(f) => read(self, f),
            None if table.misspells(key) => None,
            None => {
                let message = format!("{} needs `{key}`", table.what);
                self.fail(Diagnostic::error(table.span, message))
            }
        }
    }

    /// What `read` makes of a value that may be absent.
    pub(super) fn maybe<'t, T>(
        &mut self,
        table: &Table<'t>,
        key: &str,
        read: impl FnOnce(&mut Self, Field<'t>) -> Option<T>,
    ) -> Option<T> {
        table.get(key).and_then(|f| read(self, f))
    }

    /// The members of a list of at most `most`; those that cannot be read are reported and missing.
    pub(super) fn list<'t, T>(
        &mut self,
        f: Field<'t>,
        most: usize,
        mut read: impl FnMut(&mut Self, Field<'t>) -> Option<T>,
    ) -> Option<Vec<T>> {
        let members = self.members(f, most)?;
        let mut values = Vec::new();
        for member in members {
            if self.is_full() {
                break;
            }
            values.extend(read(self, member));
        }
        Some(values)
    }

    /// The same for a list of tables, which an author may have begun as a single one.
    pub(super) fn rows<'t, T>(
        &mut self,
        f: Field<'t>,
        most: usize,
        read: impl FnMut(&mut Self, Field<'t>) -> Option<T>,
    ) -> Vec<T> {
        if let DeValue::Table(_) = f.value {
            let message = format!("there can be several of `{0}`", f.name);
            let help = format!("write [[{0}]] with two brackets", f.name);
            self.report(Diagnostic::error(f.key, message).help(help));
            return Vec::new();
        }
        self.list(f, most, read).unwrap_or_default()
    }

    /// The members of a list of at most `most`, unread.
    pub(super) fn members<'t>(&mut self, f: Field<'t>, most: usize) -> Option<Vec<Field<'t>>> {
        let DeValue::Array(array) = f.value else { return self.expected(f, "a list") };
        if array.len() > most {
            let message = format!("`{}` has {} members; the limit is {most}", f.name, array.len());
            return self.fail(Diagnostic::error(f.span, message));
        }
        let member = |v: &'t toml::Spanned<DeValue<'t>>| {
            let span = place(f.span.file, v.span());
            Field { name: f.name, key: span, value: v.get_ref(), span }
        };
        Some(array.iter().map(member).collect())
    }

    pub(super) fn string<'t>(&mut self, f: Field<'t>) -> Option<&'t str> {
        match f.value {
            DeValue::String(s) => Some(s),
            _ => self.expected(f, "a text in quotes"),
        }
    }

    pub(super) fn boolean(&mut self, f: Field<'_>) -> Option<bool> {
        match f.value {
            DeValue::Boolean(b) => Some(*b),
            _ => self.expected(f, "true or false"),
        }
    }

    /// The choice that a text names.
    pub(super) fn choice<T: Copy>(&mut self, f: Field<'_>, choices: &[(&str, T)]) -> Option<T> {
        let names: Vec<&str> = choices.iter().map(|(name, _)| *name).collect();
        let DeValue::String(text) = f.value else {
            return self.expected(f, &format!("one of {}", quoted(&names)));
        };
        if let Some((_, value)) = choices.iter().find(|(name, _)| *name == text.as_ref()) {
            return Some(*value);
        }
        let message = format!("`{}` cannot be \"{}\"", f.name, excerpt(text));
        let help = match nearest(text, names.iter().copied()) {
            Some(meant) if names.len() == 1 => format!("did you mean \"{meant}\"?"),
            Some(meant) => format!("did you mean \"{meant}\"? It is one of {}", quoted(&names)),
            None => format!("it is one of {}", quoted(&names)),
        };
        self.fail(Diagnostic::error(f.span, message).help(help))
    }

    /// The number or the value of the expression that `f` holds.
    pub(super) fn quantity(&mut self, f: Field<'_>) -> Option<Quantity> {
        match f.value {
            DeValue::Integer(_) | DeValue::Float(_) => {
                let value = self.number(f)?;
                Some(Quantity { value, kind: Kind::Plain })
            }
            DeValue::String(text) => self.evaluate(f, text, 0),
            _ => self.expected(f, "a number or an expression"),
        }
    }

    /// A number that TOML itself has read.
    pub(super) fn number(&mut self, f: Field<'_>) -> Option<f64> {
        let value = match f.value {
            DeValue::Integer(i) =>
            {
                #[expect(clippy::cast_precision_loss, reason = "far beyond any limit on sizes")]
                i64::from_str_radix(i.as_str(), i.radix()).ok().map(|i| i as f64)
            }
            DeValue::Float(x) => x.as_str().parse::<f64>().ok(),
            _ => return self.expected(f, "a number"),
        };
        match value.filter(|v| v.is_finite()) {
            Some(value) => Some(value),
            None => {
                let message = format!("`{}` is not a finite number", f.name);
                self.fail(Diagnostic::error(f.span, message))
            }
        }
    }

    /// The value of the expression `text`, which begins `offset` bytes into the string `f`.
    pub(super) fn evaluate(&mut self, f: Field<'_>, text: &str, offset: usize) -> Option<Quantity> {
        let value = Expression::parse(text)
            .and_then(|e| e.value(self.units, &|name| self.parameters.lookup(name)));
        match value {
            Ok(quantity) => Some(quantity),
            Err(failure) => self.expression_failed(f, failure, offset),
        }
    }

    /// Reports why an expression inside the string `f`, `offset` bytes from its beginning, failed.
    pub(super) fn expression_failed<T>(
        &mut self,
        f: Field<'_>,
        failure: Failure,
        offset: usize,
    ) -> Option<T> {
        let Failure::Wrong(range, fault) = failure else { return None };
        let span = self.inside(f, offset + range.start..offset + range.end);
        let mut d = Diagnostic::error(span, fault.to_string());
        d.help = fault.help(self.parameters.names());
        self.fail(d)
    }

    /// Where bytes of the string value `f` stand in the file; all of it if escapes make that
    /// uncertain.
    pub(super) fn inside(&self, f: Field<'_>, range: std::ops::Range<usize>) -> Span {
        let DeValue::String(value) = f.value else { return f.span };
        match self.text.get(f.span.start..f.span.end).and_then(|raw| content_at(raw, value)) {
            Some(at) => {
                let start = f.span.start + at;
                Span { start: start + range.start, end: start + range.end, ..f.span }
            }
            None => f.span,
        }
    }

    /// A length in mm that may be negative or zero.
    pub(super) fn length(&mut self, f: Field<'_>) -> Option<f64> {
        let quantity = self.quantity(f)?;
        self.as_length(f, quantity)
    }

    /// A value of `f` as a length in mm.
    pub(super) fn as_length(&mut self, f: Field<'_>, quantity: Quantity) -> Option<f64> {
        if quantity.kind == Kind::Angle {
            let message = format!("`{}` is a length, not an angle", f.name);
            return self.fail(Diagnostic::error(f.span, message));
        }
        let mm = quantity.value * self.units.in_mm();
        if mm.abs() > FARTHEST {
            let message = format!("`{}` is {mm} mm; the limit is {FARTHEST} mm", f.name);
            let help = "a view is drawn in mm of the part; give large things in a smaller unit";
            return self.fail(Diagnostic::error(f.span, message).help(help));
        }
        Some(mm)
    }

    /// A length in mm of something that has a size.
    pub(super) fn size(&mut self, f: Field<'_>) -> Option<f64> {
        let mm = self.length(f)?;
        if mm < SMALLEST {
            let message = format!("`{}` is {mm} mm; it must be more than nothing", f.name);
            return self.fail(Diagnostic::error(f.span, message));
        }
        Some(mm)
    }

    /// A length in mm that is not negative.
    pub(super) fn size_or_zero(&mut self, f: Field<'_>) -> Option<f64> {
        let mm = self.length(f)?;
        if mm < 0.0 {
            let message = format!("`{}` is {mm} mm; it cannot be less than nothing", f.name);
            return self.fail(Diagnostic::error(f.span, message));
        }
        Some(mm)
    }

    /// An angle in degrees.
    pub(super) fn angle(&mut self, f: Field<'_>) -> Option<f64> {
        let quantity = self.quantity(f)?;
        self.as_angle(f, quantity)
    }

    /// A value of `f` as an angle in degrees.
    pub(super) fn as_angle(&mut self, f: Field<'_>, quantity: Quantity) -> Option<f64> {
        if quantity.kind == Kind::Length {
            let message = format!("`{}` is an angle in degrees, not a length", f.name);
            return self.fail(Diagnostic::error(f.span, message));
        }
        if quantity.value.abs() > WIDEST {
            let message = format!("`{}` is {}°; the limit is {WIDEST}°", f.name, quantity.value);
            return self.fail(Diagnostic::error(f.span, message));
        }
        Some(quantity.value)
    }

    /// A plain number in a range.
    pub(super) fn share(
        &mut self,
        f: Field<'_>,
        range: std::ops::RangeInclusive<f64>,
    ) -> Option<f64> {
        let value = self.quantity(f)?.value;
        if !range.contains(&value) {
            let (low, high) = range.into_inner();
            let message = format!("`{}` is {value}; it lies between {low} and {high}", f.name);
            return self.fail(Diagnostic::error(f.span, message));
        }
        Some(value)
    }

    /// A whole number in a range.
    pub(super) fn whole(
        &mut self,
        f: Field<'_>,
        range: std::ops::RangeInclusive<u32>,
    ) -> Option<u32> {
        let quantity = self.quantity(f)?;
        let (low, high) = range.into_inner();
        let value = quantity.value;
        let fits = value.fract() == 0.0 && (f64::from(low)..=f64::from(high)).contains(&value);
        if !fits || quantity.kind != Kind::Plain {
            let message =
                format!("`{}` is {value}; it is a whole number from {low} to {high}", f.name);
            return self.fail(Diagnostic::error(f.span, message));
        }
        #[expect(
            clippy::cast_possible_truncation,
            clippy::cast_sign_loss,
            reason = "whole and in the range of u32, as just checked"
        )]
        Some(value as u32)
    }

    /// Two values of one kind.
    pub(super) fn pair<'t, T>(
        &mut self,
        f: Field<'t>,
        what: &str,
        mut read: impl FnMut(&mut Self, Field<'t>) -> Option<T>,
    ) -> Option<(T, T)> {
        let members = match f.value {
            DeValue::Array(_) => self.members(f, usize::MAX)?,
            _ => return self.expected(f, what),
        };
        let [a, b] = members[..] else {
            let message =
                format!("expected {what} for `{}`, found a list of {}", f.name, members.len());
            return self.fail(Diagnostic::error(f.span, message));
        };
        let (a, b) = (read(self, a), read(self, b));
        Some((a?, b?))
    }

    /// A point `[x, y]` in mm.
    pub(super) fn point(&mut self, f: Field<'_>) -> Option<Point<ViewSpace>> {
        let (x, y) = self.pair(f, "a point [x, y]", Self::length)?;
        Some(Point::new(x, y))
    }

    /// A displacement `[x, y]` in mm.
    pub(super) fn vector(&mut self, f: Field<'_>) -> Option<Vector<ViewSpace>> {
        let (x, y) = self.pair(f, "a displacement [x, y]", Self::length)?;
        Some(Vector::new(x, y))
    }

    /// A name that the author gives to something.
    pub(super) fn id<'t>(&mut self, f: Field<'t>) -> Option<&'t str> {
        let id = self.string(f)?;
        if is_id(id) && id.len() <= LONGEST_ID {
            return Some(id);
        }
        let (message, help) = if id.len() > LONGEST_ID {
            (format!("`{}` has {} bytes; the limit is {LONGEST_ID}", f.name, id.len()), "")
        } else if id.is_empty() {
            (format!("`{}` is empty", f.name), "")
        } else if id.contains('.') {
            let help = "a dot leads from a shape to a member or a place of it, as in bolt.1.centre";
            (format!("the id \"{}\" has a dot in it", excerpt(id)), help)
        } else {
            (format!("\"{}\" cannot be an id", excerpt(id)), "")
        };
        let rule = "an id is made of the letters a to z and A to Z, digits, - and _";
        let help = if help.is_empty() { rule } else { help };
        self.fail(Diagnostic::error(f.span, message).help(help))
    }
}

/// Whether a text can be an id, or one link of an anchor's name.
pub(super) fn is_id(text: &str) -> bool {
    let fits = |c: char| c.is_ascii_alphanumeric() || c == '-' || c == '_';
    !text.is_empty() && text.chars().all(fits)
}

/// What a value is, for "found …".
fn kind_of(value: &DeValue<'_>) -> String {
    match value {
        DeValue::String(s) => format!("the text \"{}\"", excerpt(s)),
        DeValue::Integer(i) => format!("the number {i}"),
        DeValue::Float(x) => format!("the number {x}"),
        DeValue::Boolean(b) => b.to_string(),
        DeValue::Datetime(d) => format!("the date {d}"),
        DeValue::Array(_) => "a list".to_owned(),
        DeValue::Table(_) => "a table".to_owned(),
    }
}

/// The beginning of a text that may be long, with control characters made visible.
pub(super) fn excerpt(text: &str) -> String {
    const LONGEST: usize = 40;
    let mut short: String = text.chars().take(LONGEST).flat_map(visible).collect();
    if text.chars().nth(LONGEST).is_some() {
        short.push('…');
    }
    short
}

fn visible(c: char) -> Vec<char> {
    if c.is_control() { c.escape_unicode().collect() } else { vec![c] }
}

/// Choices as a list for people.
fn quoted(names: &[&str]) -> String {
    names.iter().map(|n| format!("\"{n}\"")).collect::<Vec<_>>().join(", ")
}

/// Where in the raw TOML string the content begins, if the content stands there unescaped.
fn content_at(raw: &str, value: &str) -> Option<usize> {
    let quotes = ["\"\"\"", "'''", "\"", "'"].into_iter().find(|q| raw.starts_with(q))?;
    let inner = raw.strip_prefix(quotes)?.strip_suffix(quotes)?;
    let trimmed = inner.strip_prefix("\r\n").or_else(|| inner.strip_prefix('\n')).unwrap_or(inner);
    [inner, trimmed]
        .into_iter()
        .find(|content| *content == value)
        .map(|content| raw.len() - quotes.len() - content.len())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn content_is_found_inside_every_kind_of_quotes() {
        for (raw, value, at) in [
            ("\"a+b\"", "a+b", Some(1)),
            ("'a+b'", "a+b", Some(1)),
            ("\"\"\"\na+b\"\"\"", "a+b", Some(4)),
            ("'''a+b'''", "a+b", Some(3)),
            ("\"a\\tb\"", "a\tb", None),
            ("\"\"", "", Some(1)),
        ] {
            assert_eq!(content_at(raw, value), at, "{raw}");
        }
    }

    #[test]
    fn ids_have_no_dots_blanks_or_foreign_letters() {
        assert!(["rim", "bolt-1", "A_b", "7"].into_iter().all(is_id));
        assert!(!["", "a.b", "a b", "é", "a/b", "a\n"].into_iter().any(is_id));
    }
}
