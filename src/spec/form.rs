//! How a value is written: tolerance, fit, standing, places.
//!
//! Takes the form keys of a dimension, a callout or a member of a set; gives a [`Form`] that does
//! not contradict itself. The tolerance can be written as `"±0.05"` (also `+-`, `+/-`),
//! `{ plus = 0.1, minus = 0 }` (how far up and how far down, neither negative),
//! `{ upper = 0.02, lower = -0.01 }` (signed deviations), `{ limits = [41.975, 42] }` (least size,
//! then greatest), `"min"`, `"max"`, or `"none"` for a member that takes no part in what its set
//! says.

use toml::de::DeValue;

use super::drawing::{Form, Show, SizeSign, Standing, Tolerance};
use super::expression::Quantity;
use super::reader::{Field, Keys, Reader, Table, excerpt};
use super::sheet::places;
use crate::source::{Diagnostic, Span};

/// The keys that say how a value is written.
pub(super) const FORM_KEYS: [&str; 7] =
    ["as", "tolerance", "fit", "show", "reference", "basic", "places"];

const FORM: Keys = Keys::only(&FORM_KEYS);

/// What kind of value is written.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Sort {
    /// A distance or diameter.
    Length,
    /// A length whose sign is implied and that has no fit: a chamfer.
    Leg,
    /// A diameter, whose sign is implied.
    Hole,
    /// An angle.
    Angle,
}

/// What the keys of one table say, before they are put together with those of its set.
#[derive(Clone, Copy, Debug, Default)]
pub(super) struct Written<'t> {
    sign: Option<SizeSign>,
    tolerance: Option<(Tolerance, Span)>,
    fit: Option<(&'t str, Span)>,
    standing: Option<(Standing, Span)>,
    places: Option<u8>,
    show: Option<(Show, Span)>,
}

impl<'t> Written<'t> {
    /// What a member of a set says with what its set says where it is silent. A member that is
    /// reference or basic takes no tolerance from its set.
    fn over(self, set: Self) -> Self {
        let exempt = matches!(self.standing, Some((Standing::Reference | Standing::Basic, _)));
        let set_tolerance = set.tolerance.filter(|_| !exempt);
        let set_fit = set.fit.filter(|_| !exempt);
        let set_show = set.show.filter(|_| !exempt);
        // A tolerance of its own replaces the fit of the set as well, and the other way round.
        let own = self.tolerance.is_some() || self.fit.is_some();
        Self {
            sign: self.sign.or(set.sign),
            tolerance: self.tolerance.or(set_tolerance.filter(|_| !own)),
            fit: self.fit.or(set_fit.filter(|_| !own)),
            standing: self.standing.or(set.standing),
            places: self.places.or(set.places),
            show: self.show.or(set_show),
        }
    }

    /// The form, with contradictions reported.
    pub(super) fn resolved(self, reader: &mut Reader<'_>) -> Form {
        let form = Form {
            sign: self.sign,
            tolerance: self.tolerance.map(|(t, _)| t).unwrap_or_default(),
            fit: self.fit.map(|(f, _)| f.to_owned()),
            standing: self.standing.map(|(s, _)| s).unwrap_or_default(),
            places: self.places,
            show: self.show.map(|(s, _)| s).unwrap_or_default(),
        };
        self.check_standing(reader, &form);
        self.check_show(reader, &form);
        form
    }

    fn check_standing(&self, reader: &mut Reader<'_>, form: &Form) {
        let Some((standing, span)) = self.standing else { return };
        let (what, help) = match standing {
            Standing::Plain => return,
            Standing::Reference => (
                "a reference value is information only and has no tolerance",
                "leave out `reference`, or the tolerance or fit",
            ),
            Standing::Basic => (
                "a basic value is theoretically exact and has no tolerance of its own",
                "leave out `basic`, or the tolerance or fit",
            ),
        };
        let tolerance = self.tolerance.filter(|_| form.tolerance != Tolerance::None);
        if let Some(other) = tolerance.map(|(_, s)| s).or(self.fit.map(|(_, s)| s)) {
            let d = Diagnostic::error(other, what).related(span, "its standing is set here");
            reader.report(d.help(help));
        }
    }

    fn check_show(&self, reader: &mut Reader<'_>, form: &Form) {
        let Some((show, span)) = self.show else { return };
        let has_deviations = match form.tolerance {
            Tolerance::None | Tolerance::Min | Tolerance::Max => false,
            Tolerance::Symmetric(_) | Tolerance::Deviations { .. } | Tolerance::Limits { .. } => {
                true
            }
        };
        let (message, help) = match show {
            Show::Class if form.fit.is_none() => {
                ("there is no fit class to show", "add one, as in fit = \"H7\"")
            }
            Show::Limits | Show::Deviations if !has_deviations && form.fit.is_none() => (
                "there is no tolerance to show that way",
                "add one, as in tolerance = \"±0.05\" or fit = \"H7\"",
            ),
            Show::AsGiven | Show::Limits | Show::Deviations | Show::Class => return,
        };
        reader.report(Diagnostic::error(span, message).help(help));
    }
}

/// What the form keys of `table` say about a value of this sort.
pub(super) fn written<'t>(reader: &mut Reader<'_>, table: &Table<'t>, sort: Sort) -> Written<'t> {
    let sign = reader.maybe(table, "as", |r, f| sign(r, f, sort));
    let tolerance = reader.maybe(table, "tolerance", |r, f| Some((tolerance(r, f, sort)?, f.span)));
    let fit = reader.maybe(table, "fit", |r, f| Some((fit(r, f, sort)?, f.span)));
    let places = reader.maybe(table, "places", places);
    let choices = [
        ("given", Show::AsGiven),
        ("limits", Show::Limits),
        ("deviations", Show::Deviations),
        ("class", Show::Class),
    ];
    let show = reader.maybe(table, "show", |r, f| Some((r.choice(f, &choices)?, f.span)));
    Written { sign, tolerance, fit, standing: standing(reader, table), places, show }
}

/// The forms of the members of a set: those in `forms`, over what the table says for all.
pub(super) fn member_forms(reader: &mut Reader<'_>, table: &Table<'_>, count: usize) -> Vec<Form> {
    let set = written(reader, table, Sort::Length);
    let Some(f) = table.get("forms") else {
        return vec![set.resolved(reader); count];
    };
    let Some(members) = reader.members(f, count.max(1)) else { return Vec::new() };
    if members.len() != count {
        let message =
            format!("`forms` is a list of {}; there are {count} dimensions", members.len());
        let help = "one for each dimension in order; write {} where there is nothing to say";
        reader.report(Diagnostic::error(f.span, message).help(help));
    }
    let mut forms = Vec::new();
    for f in members {
        if let Some(member) = reader.table(f, "a form", FORM) {
            let own = written(reader, &member, Sort::Length);
            forms.push(own.over(set).resolved(reader));
        }
    }
    forms
}

fn standing(reader: &mut Reader<'_>, table: &Table<'_>) -> Option<(Standing, Span)> {
    let reference = reader.maybe(table, "reference", |r, f| Some((r.boolean(f)?, f.span)));
    let basic = reader.maybe(table, "basic", |r, f| Some((r.boolean(f)?, f.span)));
    match (reference, basic) {
        (Some((true, first)), Some((true, second))) => {
            let message = "a value is reference or basic, not both";
            let d = Diagnostic::error(second, message).related(first, "`reference` is here");
            reader.fail(d.help("reference is information only; basic is theoretically exact"))
        }
        (Some((true, span)), _) => Some((Standing::Reference, span)),
        (_, Some((true, span))) => Some((Standing::Basic, span)),
        (Some((false, span)), _) | (None, Some((false, span))) => Some((Standing::Plain, span)),
        (None, None) => None,
    }
}

fn sign(reader: &mut Reader<'_>, f: Field<'_>, sort: Sort) -> Option<SizeSign> {
    let what = match sort {
        Sort::Length => {
            let choices = [("diameter", SizeSign::Diameter), ("square", SizeSign::Square)];
            return reader.choice(f, &choices);
        }
        Sort::Leg => "a chamfer",
        Sort::Hole => "a hole callout",
        Sort::Angle => "an angle",
    };
    let message = format!("`as` has no meaning for {what}");
    reader.fail(Diagnostic::error(f.key, message).help("leave it out"))
}

/// A fit class, or two of an assembly with a slash between them.
fn fit<'t>(reader: &mut Reader<'_>, f: Field<'t>, sort: Sort) -> Option<&'t str> {
    let class = reader.string(f)?;
    match sort {
        Sort::Length | Sort::Hole => {}
        Sort::Leg | Sort::Angle => {
            let message = "a fit belongs to a diameter or a width";
            let help = "write the tolerance itself, as in tolerance = \"±0.5\"";
            return reader.fail(Diagnostic::error(f.key, message).help(help));
        }
    }
    if class.split('/').count() <= 2 && class.split('/').all(is_fit_class) {
        return Some(class);
    }
    let message = format!("\"{}\" is not a fit class", excerpt(class));
    let help = "it is a letter or two and a grade from 01 to 18, as in H7 or js6";
    reader.fail(Diagnostic::error(f.span, message).help(help))
}

/// Whether a text is a tolerance class of ISO 286-1: fundamental deviation, then grade (letters
/// and grades from memory).
fn is_fit_class(class: &str) -> bool {
    const DEVIATIONS: [&str; 28] = [
        "A", "B", "C", "CD", "D", "E", "EF", "F", "FG", "G", "H", "J", "JS", "K", "M", "N", "P",
        "R", "S", "T", "U", "V", "X", "Y", "Z", "ZA", "ZB", "ZC",
    ];
    let letters = class.find(|c: char| c.is_ascii_digit()).unwrap_or(class.len());
    let (deviation, grade) = class.split_at(letters);
    let upper = deviation.to_ascii_uppercase();
    let one_case = deviation == upper || deviation == deviation.to_ascii_lowercase();
    let is_grade = grade == "0"
        || grade == "01"
        || (!grade.starts_with('0') && grade.parse::<u8>().is_ok_and(|g| (1..=18).contains(&g)));
    one_case && is_grade && DEVIATIONS.contains(&upper.as_str())
}

const TOLERANCE_HELP: &str = "write \"±0.05\", { plus = 0.1, minus = 0 }, { upper = 0.02, lower = \
                              -0.01 }, { limits = [least, greatest] }, \"min\" or \"max\"";

fn tolerance(reader: &mut Reader<'_>, f: Field<'_>, sort: Sort) -> Option<Tolerance> {
    match f.value {
        DeValue::String(text) => tolerance_text(reader, f, text, sort),
        DeValue::Table(_) => tolerance_table(reader, f, sort),
        DeValue::Integer(_) | DeValue::Float(_) => {
            let message = "a tolerance says which way it goes";
            reader.fail(Diagnostic::error(f.span, message).help(TOLERANCE_HELP))
        }
        _ => reader.expected(f, "a tolerance"),
    }
}

fn tolerance_text(
    reader: &mut Reader<'_>,
    f: Field<'_>,
    text: &str,
    sort: Sort,
) -> Option<Tolerance> {
    match text {
        "min" => return Some(Tolerance::Min),
        "max" => return Some(Tolerance::Max),
        "none" => return Some(Tolerance::None),
        _ => {}
    }
    let Some(rest) = ["±", "+-", "+/-"].iter().find_map(|sign| text.strip_prefix(sign)) else {
        let message = format!("\"{}\" is not a tolerance", excerpt(text));
        let help = if text.split('/').all(is_fit_class) {
            format!("a fit class goes into fit = \"{text}\"")
        } else {
            TOLERANCE_HELP.to_owned()
        };
        return reader.fail(Diagnostic::error(f.span, message).help(help));
    };
    let quantity = reader.evaluate(f, rest, text.len() - rest.len())?;
    let value = amount(reader, f, quantity, sort)?;
    if value <= 0.0 {
        let message = format!("a tolerance of ±{value} leaves no room");
        return reader.fail(Diagnostic::error(f.span, message).help("give it more than 0"));
    }
    Some(Tolerance::Symmetric(value))
}

/// A value of the sort that the tolerance belongs to: mm or degrees.
fn amount(reader: &mut Reader<'_>, f: Field<'_>, quantity: Quantity, sort: Sort) -> Option<f64> {
    match sort {
        Sort::Angle => reader.as_angle(f, quantity),
        Sort::Length | Sort::Leg | Sort::Hole => reader.as_length(f, quantity),
    }
}

fn tolerance_table(reader: &mut Reader<'_>, f: Field<'_>, sort: Sort) -> Option<Tolerance> {
    let keys = Keys::only(&["plus", "minus", "upper", "lower", "limits"]);
    let table = reader.table(f, "a tolerance", keys)?;
    let has = |key| table.get(key).is_some();
    match (has("plus") || has("minus"), has("upper") || has("lower"), has("limits")) {
        (true, false, false) => plus_minus(reader, &table, sort),
        (false, true, false) => deviations(reader, &table, sort),
        (false, false, true) => limits(reader, &table, sort),
        (false, false, false) if table.is_suspect() => None,
        (false, false, false) => {
            let d = Diagnostic::error(f.span, "this tolerance says nothing");
            reader.fail(d.help(TOLERANCE_HELP))
        }
        (true, true, _) | (true, _, true) | (_, true, true) => {
            let d = Diagnostic::error(f.span, "this tolerance is given in two ways");
            reader.fail(d.help(TOLERANCE_HELP))
        }
    }
}

fn value(reader: &mut Reader<'_>, f: Field<'_>, sort: Sort) -> Option<f64> {
    let quantity = reader.quantity(f)?;
    amount(reader, f, quantity, sort)
}

/// `{ plus, minus }`: magnitudes upwards and downwards.
fn plus_minus(reader: &mut Reader<'_>, table: &Table<'_>, sort: Sort) -> Option<Tolerance> {
    let magnitude = |r: &mut Reader<'_>, f: Field<'_>| {
        let v = value(r, f, sort)?;
        if v < 0.0 {
            let message = format!("`{}` is {v}; it says how far, not which way", f.name);
            let help = "write signed deviations as { upper = 0.02, lower = -0.01 }";
            return r.fail(Diagnostic::error(f.span, message).help(help));
        }
        Some(v)
    };
    if let (Some(f), None) | (None, Some(f)) = (table.get("plus"), table.get("minus"))
        && !table.is_suspect()
    {
        let (given, other) = if f.name == "plus" { ("up", "minus") } else { ("down", "plus") };
        let message = format!("this tolerance says only how far {given}");
        let help = format!("write {other} = 0 if it does not go the other way");
        return reader.fail(Diagnostic::error(table.span, message).help(help));
    }
    let plus = reader.need(table, "plus", magnitude);
    let minus = reader.need(table, "minus", magnitude);
    let (upper, minus) = (plus?, minus?);
    // Not `-minus`, which would make a negative zero of 0.
    ordered(reader, table, upper, 0.0 - minus, "upper deviation")
        .map(|(upper, lower)| Tolerance::Deviations { upper, lower })
}

/// `{ upper, lower }`: signed deviations.
fn deviations(reader: &mut Reader<'_>, table: &Table<'_>, sort: Sort) -> Option<Tolerance> {
    let upper = reader.need(table, "upper", |r, f| value(r, f, sort));
    let lower = reader.need(table, "lower", |r, f| value(r, f, sort));
    ordered(reader, table, upper?, lower?, "upper deviation")
        .map(|(upper, lower)| Tolerance::Deviations { upper, lower })
}

/// `{ limits = [least, greatest] }`.
fn limits(reader: &mut Reader<'_>, table: &Table<'_>, sort: Sort) -> Option<Tolerance> {
    let limits = reader.need(table, "limits", |r, f| {
        r.pair(f, "limits [least, greatest]", |r, f| value(r, f, sort))
    });
    let (lower, upper) = limits?;
    ordered(reader, table, upper, lower, "greatest size")
        .map(|(upper, lower)| Tolerance::Limits { upper, lower })
}

/// Both values if the upper one is above the lower one.
fn ordered(
    reader: &mut Reader<'_>,
    table: &Table<'_>,
    upper: f64,
    lower: f64,
    what: &str,
) -> Option<(f64, f64)> {
    if upper > lower {
        return Some((upper, lower));
    }
    let message = format!("the {what} {upper} is not above {lower}");
    reader.fail(Diagnostic::error(table.span, message).help("the smaller one is the lower one"))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn fit_classes_are_letters_and_a_grade() {
        for class in ["H7", "h6", "js6", "JS13", "ZC8", "g01", "k5", "H18"] {
            assert!(is_fit_class(class), "{class}");
        }
        for class in ["", "H", "7", "I7", "Hs7", "H19", "H07", "hH7", "H7 ", "L6", "H-7", "H+7"] {
            assert!(!is_fit_class(class), "{class}");
        }
    }
}
