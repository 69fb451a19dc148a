//! `[drawing]`, `[[revision]]` and `[[allow]]`: what a sheet says besides its views.

use toml::de::DeValue;

use super::drawing::{
    Allow, FieldKey, FormatChoice, Revision, ScaleChoice, SheetSpec, Spanned, Status, Text,
    TextPiece,
};
use super::reader::{Field, Keys, Reader, Table, excerpt};
use crate::source::{Diagnostic, Span};
use crate::units::{LengthUnit, Scale};

/// Most general notes, own fields, revisions, allowed findings or items of one.
const MOST_ROWS: usize = 1000;
/// Most decimal places that can be asked for.
pub(super) const MOST_PLACES: u32 = 6;
/// Longest drawing number in characters: with an extension it fits every file system.
const LONGEST_NUMBER: usize = 64;

const DRAWING: Keys = Keys::only(&[
    "number",
    "title",
    "subtitle",
    "status",
    "style",
    "units",
    "sheet",
    "scale",
    "places",
    "material",
    "finish",
    "edges",
    "mass",
    "density",
    "general_tolerance",
    "tolerancing",
    "owner",
    "department",
    "reference",
    "creator",
    "approver",
    "date",
    "document_type",
    "language",
    "classification",
    "notes",
    "fields",
]);

/// Standing fields by their key in the spec; `date` is read apart.
const STANDING: [(&str, FieldKey); 14] = [
    ("owner", FieldKey::Owner),
    ("department", FieldKey::Department),
    ("reference", FieldKey::Reference),
    ("creator", FieldKey::Creator),
    ("approver", FieldKey::Approver),
    ("document_type", FieldKey::DocumentType),
    ("language", FieldKey::Language),
    ("material", FieldKey::Material),
    ("finish", FieldKey::Finish),
    ("edges", FieldKey::Edges),
    ("mass", FieldKey::Mass),
    ("general_tolerance", FieldKey::GeneralTolerance),
    ("tolerancing", FieldKey::Tolerancing),
    ("classification", FieldKey::Classification),
];

/// `[drawing]` with its keys checked.
pub(super) fn drawing_table<'t>(reader: &mut Reader<'_>, f: Field<'t>) -> Option<Table<'t>> {
    reader.table(f, "[drawing]", DRAWING)
}

/// The unit of plain numbers, which must be known before any of them is read.
pub(super) fn read_units(reader: &mut Reader<'_>, table: &Table<'_>) -> LengthUnit {
    let choices = [("mm", LengthUnit::Millimetre), ("in", LengthUnit::Inch)];
    reader.maybe(table, "units", |r, f| r.choice(f, &choices)).unwrap_or_default()
}

/// The rest of `[drawing]`.
pub(super) fn read_sheet(reader: &mut Reader<'_>, table: &Table<'_>) -> Option<SheetSpec> {
    if let Some(f) = table.get("density") {
        let help = "write the mass itself as `mass`, for example mass = \"1.2 kg\"";
        let message = "`density` is not used: mass is computed only once parts are described by \
                       features";
        reader.report(Diagnostic::warning(f.key, message).help(help));
    }
    let number = reader.need(table, "number", number);
    let title = reader.maybe(table, "title", uncomputed);
    let subtitle = reader.maybe(table, "subtitle", uncomputed).map(|s| s.value);
    let status = [("draft", Status::Draft), ("released", Status::Released)];
    let status = reader.maybe(table, "status", |r, f| r.choice(f, &status));
    let style = reader.maybe(table, "style", |r, f| spanned_string(r, f, "a style"));
    let format = reader.maybe(table, "sheet", format_choice).unwrap_or(FormatChoice::Auto);
    let scale = reader.maybe(table, "scale", scale_choice).unwrap_or(ScaleChoice::Auto);
    let places = reader.maybe(table, "places", places);
    let fields = standing_fields(reader, table);
    let own_fields = reader.maybe(table, "fields", |r, f| r.list(f, MOST_ROWS, own_field));
    let notes = reader.maybe(table, "notes", |r, f| r.list(f, MOST_ROWS, Reader::spanned_text));
    Some(SheetSpec {
        number: number?,
        title,
        subtitle,
        status: status.unwrap_or_default(),
        style: style.unwrap_or_else(|| Spanned { value: "iso".to_owned(), span: table.span }),
        units: reader.units,
        format,
        scale,
        places,
        fields,
        own_fields: own_fields.unwrap_or_default(),
        notes: notes.unwrap_or_default(),
        span: table.span,
    })
}

fn standing_fields(reader: &mut Reader<'_>, table: &Table<'_>) -> Vec<(FieldKey, Spanned<Text>)> {
    let mut fields = Vec::new();
    for (key, field) in STANDING {
        if let Some(text) = reader.maybe(table, key, Reader::spanned_text) {
            fields.push((field, text));
        }
    }
    if let Some(Spanned { value, span }) = reader.maybe(table, "date", date) {
        let text = Text { pieces: vec![TextPiece::Literal(value)] };
        fields.push((FieldKey::Date, Spanned { value: text, span }));
    }
    fields.sort_by_key(|(key, _)| *key);
    fields
}

fn own_field(reader: &mut Reader<'_>, f: Field<'_>) -> Option<(String, Text)> {
    let table = reader.table(f, "a field", Keys::only(&["key", "value"]))?;
    let key = reader.need(&table, "key", Reader::plain_text);
    let value = reader.need(&table, "value", Reader::text);
    Some((key?.to_owned(), value?))
}

/// Decimal places.
pub(super) fn places(reader: &mut Reader<'_>, f: Field<'_>) -> Option<u8> {
    reader.whole(f, 0..=MOST_PLACES).and_then(|n| u8::try_from(n).ok())
}

/// A text on the sheet in which nothing is computed.
fn uncomputed(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Spanned<String>> {
    let value = reader.plain_text(f)?;
    if let Some(at) = value.find(['{', '}']) {
        let span = reader.inside(f, at..at + 1);
        let message = format!("nothing is computed in `{}`", f.name);
        let help = "braces are computed in notes, title-block fields, revisions and callouts; \
                    write the value itself";
        return reader.fail(Diagnostic::error(span, message).help(help));
    }
    Some(Spanned { value: value.to_owned(), span: f.span })
}

/// A text that names something and is not drawn.
fn spanned_string(reader: &mut Reader<'_>, f: Field<'_>, what: &str) -> Option<Spanned<String>> {
    let value = reader.string(f)?;
    if value.is_empty() || value.chars().any(char::is_control) {
        let message = format!("\"{}\" cannot name {what}", excerpt(value));
        return reader.fail(Diagnostic::error(f.span, message));
    }
    Some(Spanned { value: value.to_owned(), span: f.span })
}

fn format_choice(reader: &mut Reader<'_>, f: Field<'_>) -> Option<FormatChoice> {
    let name = spanned_string(reader, f, "a sheet size")?;
    Some(if name.value == "auto" { FormatChoice::Auto } else { FormatChoice::Named(name) })
}

fn scale_choice(reader: &mut Reader<'_>, f: Field<'_>) -> Option<ScaleChoice> {
    match f.value {
        DeValue::String(s) if s == "auto" => Some(ScaleChoice::Auto),
        _ => scale(reader, f).map(|value| ScaleChoice::Given(Spanned { value, span: f.span })),
    }
}

/// A scale such as `1:2`.
pub(super) fn scale(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Scale> {
    let DeValue::String(text) = f.value else {
        return reader.expected(f, "a scale such as \"1:2\"");
    };
    match text.parse() {
        Ok(scale) => Some(scale),
        Err(e) => {
            let message = format!("`{}` cannot be \"{}\": {e}", f.name, excerpt(text));
            reader.fail(Diagnostic::error(f.span, message))
        }
    }
}

/// The drawing number, which the issued files are named after.
fn number(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Spanned<String>> {
    let value = reader.plain_text(f)?;
    if let Some(why) = unfit_for_file_name(value) {
        let message = format!("the number \"{}\" cannot name a file: {why}", excerpt(value));
        let help = "use letters, digits, and - _ . + between them";
        return reader.fail(Diagnostic::error(f.span, message).help(help));
    }
    Some(Spanned { value: value.to_owned(), span: f.span })
}

/// Whether `number` can be a drawing number: issued files are named after it.
///
/// # Errors
/// Says why it cannot name a file.
pub fn check_number(number: &str) -> Result<(), String> {
    let fit = |c: char| !c.is_control() && c != '"' && c != '\\';
    match unfit_for_file_name(number) {
        Some(why) => Err(format!("the number \"{}\" cannot name a file: {why}", excerpt(number))),
        None if number.is_empty() => Err("the number is empty".to_owned()),
        None if !number.chars().all(fit) => {
            Err("the number has characters in it that no file name has".to_owned())
        }
        None => Ok(()),
    }
}

/// Why a text cannot name a file on some system; the empty text is reported elsewhere.
fn unfit_for_file_name(name: &str) -> Option<String> {
    const FORBIDDEN: [char; 9] = ['/', '\\', ':', '*', '?', '"', '<', '>', '|'];
    if let Some(c) = name.chars().find(|c| FORBIDDEN.contains(c)) {
        return Some(format!("it has a `{c}` in it"));
    }
    if name.starts_with('.') {
        return Some("it begins with a dot".to_owned());
    }
    if name.ends_with(['.', ' ']) || name.starts_with(' ') {
        return Some("it begins or ends with a blank, or ends with a dot".to_owned());
    }
    if name.chars().count() > LONGEST_NUMBER {
        return Some(format!("it is longer than {LONGEST_NUMBER} characters"));
    }
    let stem = name.split('.').next().unwrap_or(name).trim_end().to_ascii_uppercase();
    is_device(&stem).then(|| format!("{stem} is a device on some systems"))
}

/// Names that some systems keep for devices, whatever the extension.
fn is_device(stem: &str) -> bool {
    let numbered = |prefix: &str| {
        stem.strip_prefix(prefix).is_some_and(|n| matches!(n.as_bytes(), [b'0'..=b'9']))
    };
    ["CON", "PRN", "AUX", "NUL"].contains(&stem) || numbered("COM") || numbered("LPT")
}

/// A date, as TOML or as text, in ISO 8601.
fn date(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Spanned<String>> {
    const EXPECTED: &str = "a date such as 2026-04-02";
    let written = match f.value {
        DeValue::Datetime(d) if d.time.is_none() => d.to_string(),
        DeValue::Datetime(d) if d.date.is_some() => {
            let d = Diagnostic::error(f.span, format!("`{}` is a date without a time", f.name));
            return reader.fail(d.help(format!("write {EXPECTED}")));
        }
        DeValue::String(s) => s.to_string(),
        _ => return reader.expected(f, EXPECTED),
    };
    if is_date(&written) {
        return Some(Spanned { value: written, span: f.span });
    }
    let message = format!("\"{}\" is not a day of the calendar", excerpt(&written));
    reader.fail(Diagnostic::error(f.span, message).help(format!("write {EXPECTED}")))
}

/// Whether a text is `YYYY-MM-DD` and that day exists (Gregorian calendar, ISO 8601).
fn is_date(text: &str) -> bool {
    let parts: Vec<&str> = text.split('-').collect();
    let [y, m, d] = parts[..] else { return false };
    let digits = |s: &str, n| s.len() == n && s.bytes().all(|b| b.is_ascii_digit());
    if !(digits(y, 4) && digits(m, 2) && digits(d, 2)) {
        return false;
    }
    let (Ok(year), Ok(month), Ok(day)) = (y.parse::<u32>(), m.parse::<u32>(), d.parse::<u32>())
    else {
        return false;
    };
    let leap = year % 4 == 0 && (year % 100 != 0 || year % 400 == 0);
    let days = match month {
        1 | 3 | 5 | 7 | 8 | 10 | 12 => 31,
        4 | 6 | 9 | 11 => 30,
        2 if leap => 29,
        2 => 28,
        _ => 0,
    };
    (1..=days).contains(&day)
}

/// `[[revision]]`, all rows.
pub(super) fn read_revisions(reader: &mut Reader<'_>, f: Field<'_>) -> Vec<Revision> {
    let rows = reader.rows(f, MOST_ROWS, revision);
    let mut seen: std::collections::BTreeMap<&str, Span> = std::collections::BTreeMap::new();
    for row in &rows {
        if let Some(first) = seen.insert(&row.mark.value, row.mark.span) {
            let message = format!("two revisions have the mark \"{}\"", row.mark.value);
            let d = Diagnostic::error(row.mark.span, message).related(first, "the first is here");
            reader.report(d);
        }
    }
    rows
}

fn revision(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Revision> {
    let table = reader.table(f, "a revision", Keys::only(&["mark", "date", "change", "by"]))?;
    let mark = reader.need(&table, "mark", uncomputed);
    let date = reader.need(&table, "date", date);
    let change = reader.need(&table, "change", Reader::text);
    let by = reader.need(&table, "by", uncomputed);
    Some(Revision { mark: mark?, date: date?, change: change?, by: by?.value })
}

/// `[[allow]]`, all of them.
pub(super) fn read_allow(reader: &mut Reader<'_>, f: Field<'_>) -> Vec<Allow> {
    reader.rows(f, MOST_ROWS, allow)
}

fn allow(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Allow> {
    let keys = Keys::only(&["rule", "items", "reason"]);
    let table = reader.table(f, "an allowed finding", keys)?;
    let rule = reader.need(&table, "rule", rule_name);
    let items = reader.maybe(&table, "items", |r, f| {
        r.list(f, MOST_ROWS, |r, f| spanned_string(r, f, "an item"))
    });
    let reason = reader.need(&table, "reason", Reader::plain_text);
    Some(Allow {
        rule: rule?,
        items: items.unwrap_or_default(),
        reason: reason?.to_owned(),
        span: table.span,
    })
}

/// A rule's name: area and meaning with a slash between them.
fn rule_name(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Spanned<String>> {
    let name = reader.string(f)?;
    let is_word = |s: &str| {
        !s.is_empty() && s.chars().all(|c| c.is_ascii_lowercase() || c == '-' || c.is_ascii_digit())
    };
    if name.split_once('/').is_some_and(|(area, fault)| is_word(area) && is_word(fault)) {
        return Some(Spanned { value: name.to_owned(), span: f.span });
    }
    let message = format!("\"{}\" is not the name of a rule", excerpt(name));
    let help = "it is an area and a fault, as in clutter/leader-long; `check` prints it with each \
                finding";
    reader.fail(Diagnostic::error(f.span, message).help(help))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn days_of_the_calendar() {
        for (text, real) in [
            ("2026-04-02", true),
            ("2024-02-29", true),
            ("2026-02-29", false),
            ("2000-02-29", true),
            ("1900-02-29", false),
            ("2026-13-01", false),
            ("2026-04-31", false),
            ("2026-4-2", false),
            ("02.04.2026", false),
            ("", false),
        ] {
            assert_eq!(is_date(text), real, "{text}");
        }
    }

    #[test]
    fn numbers_that_no_file_can_have() {
        for name in
            ["a/b", "a\\b", "C:x", "*", ".x", "x.", "con", "NUL.7", "com1", " x", "lpt9.svg"]
        {
            assert!(unfit_for_file_name(name).is_some(), "{name}");
        }
        assert!(unfit_for_file_name(&"9".repeat(65)).is_some());
        for name in ["HX-1042", "7.1-A", "Blatt 3", "console", "com10"] {
            assert_eq!(unfit_for_file_name(name), None, "{name}");
        }
    }
}
