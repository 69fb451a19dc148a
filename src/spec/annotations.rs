//! Dimensions and callouts, with their anchors, pins and ids.
//!
//! Takes one table from a view or from the top level; gives an [`AnnotationSpec`]. Whether its
//! anchors exist is not known here. An annotation without an `id` gets one from its view, kind and
//! anchors, never from its position in the file.

use toml::de::DeValue;

use super::drawing::{
    AnchorRef, AnnotationSpec, Countersink, Enlargement, HoleDepth, HoleNote, LineDirection,
    Measure, Pin, RimSize, Says, Side, Spanned,
};
use super::expression::Lookup;
use super::form::{FORM_KEYS, Sort, member_forms, written};
use super::reader::{Field, Keys, Reader, Table, excerpt, is_id};
use crate::ident::{ItemId, ViewId};
use crate::source::{Diagnostic, nearest};

/// Most anchors of a chain or baseline.
const MOST_ANCHORS: usize = 200;
/// Most lines of a callout.
const MOST_LINES: usize = 50;
/// Longest name of an anchor in bytes.
const LONGEST_ANCHOR: usize = 200;
/// Highest tier that a pin can ask for.
const HIGHEST_TIER: u32 = 99;
/// Included angle of a countersink that says nothing else, degrees (common practice).
const COUNTERSINK_ANGLE: f64 = 90.0;

const LATER: &[(&str, &str)] = &[
    ("running", "this version draws chains and baselines; give the sizes as `baseline`"),
    ("table", "this version draws chains and baselines; give the sizes as `baseline`"),
    ("not_to_scale", "this version writes only what the geometry measures; draw it to scale"),
];

const DIMENSION: Keys = Keys {
    known: &[
        "id",
        "view",
        "between",
        "of",
        "angle",
        "chamfer",
        "chain",
        "baseline",
        "direction",
        "as",
        "tolerance",
        "fit",
        "show",
        "reference",
        "basic",
        "places",
        "forms",
        "place",
    ],
    later: LATER,
};

const MEASURES: [&str; 6] = ["between", "of", "angle", "chamfer", "chain", "baseline"];

const CALLOUT: Keys = Keys::only(&[
    "id",
    "view",
    "of",
    "at",
    "text",
    "tolerance",
    "fit",
    "show",
    "reference",
    "basic",
    "places",
    "thread",
    "thread_depth",
    "depth",
    "counterbore",
    "spotface",
    "countersink",
    "notes",
    "place",
]);

/// Keys of a callout that speak of a hole.
const HOLE_KEYS: [&str; 7] =
    ["thread", "thread_depth", "depth", "counterbore", "spotface", "countersink", "notes"];

const DIRECTIONS: [(&str, LineDirection); 3] = [
    ("horizontal", LineDirection::Horizontal),
    ("vertical", LineDirection::Vertical),
    ("aligned", LineDirection::Aligned),
];

const SIDES: [(&str, Side); 5] = [
    ("above", Side::Above),
    ("below", Side::Below),
    ("left", Side::Left),
    ("right", Side::Right),
    ("inside", Side::Inside),
];

/// Where annotations stand in the file.
#[derive(Clone, Copy, Debug)]
pub(super) enum Home<'v> {
    /// In the table of this view.
    View(&'v Spanned<ViewId>),
    /// At the top level; the views that there are.
    Top(&'v [ViewId]),
}

/// One dimension or set of dimensions.
pub(super) fn dimension(
    reader: &mut Reader<'_>,
    f: Field<'_>,
    home: Home<'_>,
) -> Option<AnnotationSpec> {
    let table = reader.table(f, "a dimension", DIMENSION)?;
    let says = says(reader, &table);
    annotation(reader, &table, home, says)
}

/// One hole callout or note on a leader.
pub(super) fn callout(
    reader: &mut Reader<'_>,
    f: Field<'_>,
    home: Home<'_>,
) -> Option<AnnotationSpec> {
    let table = reader.table(f, "a callout", CALLOUT)?;
    let says = match (table.get("of"), table.get("at")) {
        (Some(of), None) => hole_callout(reader, &table, of),
        (None, Some(at)) => note(reader, &table, at),
        (Some(of), Some(at)) => {
            let d = Diagnostic::error(at.key, "a callout has `of` or `at`, not both");
            reader.fail(d.related(of.key, "`of` is here").help(OF_OR_AT))
        }
        (None, None) if table.is_suspect() => None,
        (None, None) => {
            let d = Diagnostic::error(table.span, "a callout needs `of` or `at`");
            reader.fail(d.help(OF_OR_AT))
        }
    };
    annotation(reader, &table, home, says)
}

const OF_OR_AT: &str = "`of` names a hole that it describes; `at` names a place for its `text`";

/// What dimensions and callouts have in common: view, pin, id.
fn annotation(
    reader: &mut Reader<'_>,
    table: &Table<'_>,
    home: Home<'_>,
    says: Option<Says>,
) -> Option<AnnotationSpec> {
    let view = view_of(reader, table, home);
    let pin = reader.maybe(table, "place", pin).unwrap_or_default();
    let given = reader.maybe(table, "id", |r, f| r.id(f).map(ItemId::new));
    let says = says?;
    let id = given.unwrap_or_else(|| id_of(&says, view.as_ref().map(|v| &v.value)));
    Some(AnnotationSpec { id, span: table.span, view, says, pin })
}

fn view_of(reader: &mut Reader<'_>, table: &Table<'_>, home: Home<'_>) -> Option<Spanned<ViewId>> {
    let named = table.get("view");
    match home {
        Home::View(view) => {
            if let Some(f) = named {
                let message =
                    format!("{} inside the view `{}` is drawn there", table.what, view.value);
                let help = "leave `view` out, or move it to the top level";
                reader.report(Diagnostic::error(f.key, message).help(help));
            }
            Some(view.clone())
        }
        Home::Top(views) => {
            let f = named?;
            let name = reader.string(f)?;
            if let Some(view) = views.iter().find(|v| v.as_str() == name) {
                return Some(Spanned { value: view.clone(), span: f.span });
            }
            let names = views.iter().map(ViewId::as_str);
            let mut d =
                Diagnostic::error(f.span, format!("there is no view \"{}\"", excerpt(name)));
            d.help = nearest(name, names).map(|meant| format!("did you mean \"{meant}\"?"));
            reader.fail(d)
        }
    }
}

/// An id from kind and anchors, and the view where the spec names one.
fn id_of(says: &Says, view: Option<&ViewId>) -> ItemId {
    let set = |kind: &str, anchors: &[AnchorRef]| {
        let names: Vec<&str> = anchors.iter().map(|a| a.name.as_str()).collect();
        format!("{kind}.{}", names.join("~"))
    };
    let own = match says {
        Says::Dimension(Measure::Between(a, b, _), _) => format!("{}~{}", a.name, b.name),
        Says::Dimension(Measure::Of(a), _) => a.name.clone(),
        Says::Dimension(Measure::Angle(a, b), _) => format!("angle.{}~{}", a.name, b.name),
        Says::Dimension(Measure::Chamfer(a), _) => format!("{}.chamfer", a.name),
        Says::Chain(anchors, ..) => set("chain", anchors),
        Says::Baseline(anchors, ..) => set("baseline", anchors),
        Says::Hole(a, _) => format!("{}.callout", a.name),
        Says::Note(a, _) => format!("{}.note", a.name),
    };
    ItemId::new(view.map_or(own.clone(), |v| format!("{v}.{own}")))
}

/// What a dimension says: exactly one measure, in a form.
fn says(reader: &mut Reader<'_>, table: &Table<'_>) -> Option<Says> {
    let given = table.among(&MEASURES);
    let measure = match given[..] {
        [one] => one,
        [] if table.is_suspect() => return None,
        [] => {
            let help = format!("give it one of {}", MEASURES.join(", "));
            let message = "this dimension does not say what it measures";
            return reader.fail(Diagnostic::error(table.span, message).help(help));
        }
        [first, second, ..] => {
            let message =
                format!("a dimension has `{}` or `{}`, not both", first.name, second.name);
            let d = Diagnostic::error(second.key, message);
            return reader.fail(d.related(first.key, "the first is here"));
        }
    };
    reject_unfit(reader, table, measure.name);
    let direction = reader.maybe(table, "direction", |r, f| r.choice(f, &DIRECTIONS));
    let direction = direction.unwrap_or_default();
    match measure.name {
        "between" => {
            let ends = two_anchors(reader, measure);
            let form = written(reader, table, Sort::Length).resolved(reader);
            ends.map(|(a, b)| Says::Dimension(Measure::Between(a, b, direction), form))
        }
        "of" => {
            let size = anchor(reader, measure);
            let form = written(reader, table, Sort::Length).resolved(reader);
            size.map(|a| Says::Dimension(Measure::Of(a), form))
        }
        "angle" => {
            let edges = two_anchors(reader, measure);
            let form = written(reader, table, Sort::Angle).resolved(reader);
            edges.map(|(a, b)| Says::Dimension(Measure::Angle(a, b), form))
        }
        "chamfer" => {
            let edge = anchor(reader, measure);
            let form = written(reader, table, Sort::Leg).resolved(reader);
            edge.map(|a| Says::Dimension(Measure::Chamfer(a), form))
        }
        _ => set(reader, table, measure, direction),
    }
}

/// A chain or a baseline set.
fn set(
    reader: &mut Reader<'_>,
    table: &Table<'_>,
    f: Field<'_>,
    direction: LineDirection,
) -> Option<Says> {
    let written = reader.members(f, MOST_ANCHORS)?;
    if written.len() < 3 {
        let message = format!("`{}` has {} anchors; it needs at least 3", f.name, written.len());
        let help = "for a single dimension write between = [\"…\", \"…\"]";
        return reader.fail(Diagnostic::error(f.span, message).help(help));
    }
    let forms = member_forms(reader, table, written.len() - 1);
    let anchors: Vec<AnchorRef> = written.iter().filter_map(|m| anchor(reader, *m)).collect();
    for (i, a) in anchors.iter().enumerate() {
        if let Some(first) = anchors[..i].iter().find(|b| b.name == a.name) {
            let message = format!("`{}` names {} twice", f.name, a.name);
            let d = Diagnostic::error(a.span, message).related(first.span, "the first is here");
            reader.report(d);
        }
    }
    Some(if f.name == "chain" {
        Says::Chain(anchors, direction, forms)
    } else {
        Says::Baseline(anchors, direction, forms)
    })
}

/// Reports keys that say nothing about this measure.
fn reject_unfit(reader: &mut Reader<'_>, table: &Table<'_>, measure: &str) {
    let unfit: &[&str] = match measure {
        "between" => &["forms"],
        "of" | "angle" | "chamfer" => &["direction", "forms"],
        _ => &[],
    };
    for f in table.among(unfit) {
        let message = format!("`{}` has no meaning with `{measure}`", f.name);
        let help = if f.name == "forms" {
            "it is for the members of a chain or baseline; write its keys in the dimension itself"
        } else {
            "leave it out; the direction follows from what is measured"
        };
        reader.report(Diagnostic::error(f.key, message).help(help));
    }
}

fn two_anchors(reader: &mut Reader<'_>, f: Field<'_>) -> Option<(AnchorRef, AnchorRef)> {
    let (a, b) = reader.pair(f, "two anchors [\"…\", \"…\"]", anchor)?;
    if a.name == b.name {
        let message = format!("`{}` names {} twice", f.name, a.name);
        return reader
            .fail(Diagnostic::error(b.span, message).related(a.span, "the first is here"));
    }
    Some((a, b))
}

/// The name of an anchor: links with dots between them.
fn anchor(reader: &mut Reader<'_>, f: Field<'_>) -> Option<AnchorRef> {
    let DeValue::String(name) = f.value else {
        return reader.expected(f, "an anchor such as \"rim.left\"");
    };
    if name.len() <= LONGEST_ANCHOR && name.split('.').all(is_id) {
        return Some(AnchorRef { name: name.to_string(), span: f.span });
    }
    let message = format!("\"{}\" cannot be an anchor", excerpt(name));
    let help = "an anchor is a shape and a place or size of it with dots between them, as in \
                rim.left or bolt.1.centre";
    reader.fail(Diagnostic::error(f.span, message).help(help))
}

/// Where the author wants the annotation.
fn pin(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Pin> {
    let table = reader.table(f, "a place", Keys::only(&["side", "tier", "along", "angle"]))?;
    let side = reader.maybe(&table, "side", |r, f| r.choice(f, &SIDES));
    let tier = reader.maybe(&table, "tier", |r, f| r.whole(f, 1..=HIGHEST_TIER));
    let along = reader.maybe(&table, "along", |r, f| r.share(f, 0.0..=1.0));
    let angle = reader.maybe(&table, "angle", Reader::angle);
    let tier = tier.and_then(|t| u8::try_from(t).ok());
    Some(Pin { side, tier, along, angle, span: Some(table.span) })
}

fn note(reader: &mut Reader<'_>, table: &Table<'_>, at: Field<'_>) -> Option<Says> {
    for f in table.fields() {
        if HOLE_KEYS.contains(&f.name) || FORM_KEYS.contains(&f.name) {
            let message = format!("`{}` describes a hole; this callout is a note", f.name);
            let help = "name the hole with `of` instead of `at`, or leave it out";
            reader.report(Diagnostic::error(f.key, message).help(help));
        }
    }
    let anchor = anchor(reader, at);
    let lines = reader.need(table, "text", |r, f| r.lines(f, MOST_LINES));
    Some(Says::Note(anchor?, lines?))
}

fn hole_callout(reader: &mut Reader<'_>, table: &Table<'_>, of: Field<'_>) -> Option<Says> {
    if let Some(f) = table.get("text") {
        let message = "the text of a hole callout is made from what the hole is";
        let help = "write further lines as `notes`, or a note of your own with `at`";
        reader.report(Diagnostic::error(f.key, message).help(help));
    }
    let anchor = anchor(reader, of);
    let note = HoleNote {
        form: written(reader, table, Sort::Hole).resolved(reader),
        thread: reader.maybe(table, "thread", Reader::text),
        thread_depth: reader.maybe(table, "thread_depth", Reader::size),
        depth: reader.maybe(table, "depth", depth).unwrap_or_default(),
        counterbore: reader.maybe(table, "counterbore", counterbore),
        spotface: reader.maybe(table, "spotface", spotface),
        countersink: reader.maybe(table, "countersink", countersink),
        notes: reader.maybe(table, "notes", |r, f| r.lines(f, MOST_LINES)).unwrap_or_default(),
    };
    check_thread(reader, table, &note);
    Some(Says::Hole(anchor?, Box::new(note)))
}

/// A thread's depth needs a thread and a hole to be in; its class stands in its designation.
fn check_thread(reader: &mut Reader<'_>, table: &Table<'_>, note: &HoleNote) {
    if let (Some(f), None) = (table.get("thread_depth"), table.get("thread")) {
        let d = Diagnostic::error(f.key, "`thread_depth` without a `thread`");
        reader.report(d.help("add the thread, as in thread = \"M8\", or leave the depth out"));
    }
    if let (Some(f), Some(thread), HoleDepth::Blind(hole)) =
        (table.get("thread_depth"), note.thread_depth, note.depth)
        && thread > hole
    {
        let message = format!("the thread is {thread} mm deep and the hole only {hole} mm");
        reader.report(Diagnostic::error(f.span, message));
    }
    for f in table.among(&["fit", "tolerance"]) {
        if table.get("thread").is_some() {
            let message = format!("`{}` is about a diameter, which the thread replaces", f.name);
            let help = "write the class of the thread in its designation, as in \"M8 - 6H\"";
            reader.report(Diagnostic::error(f.key, message).help(help));
        }
    }
}

fn depth(reader: &mut Reader<'_>, f: Field<'_>) -> Option<HoleDepth> {
    match f.value {
        // A word close to the one choice is that choice misspelt, not a parameter.
        DeValue::String(s)
            if reader.parameters.lookup(s) == Lookup::Unknown
                && nearest(s, ["through"]).is_some() =>
        {
            reader.choice(f, &[("through", HoleDepth::Through)])
        }
        _ => reader.size(f).map(HoleDepth::Blind),
    }
}

fn counterbore(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Enlargement> {
    let table = reader.table(f, "a counterbore", Keys::only(&["diameter", "of", "depth"]))?;
    let diameter = rim(reader, &table);
    let depth = reader.need(&table, "depth", Reader::size);
    Some(Enlargement { diameter: diameter?, depth: Some(depth?) })
}

fn spotface(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Enlargement> {
    let table = reader.table(f, "a spotface", Keys::only(&["diameter", "of", "depth"]))?;
    let diameter = rim(reader, &table);
    let depth = reader.maybe(&table, "depth", Reader::size);
    Some(Enlargement { diameter: diameter?, depth })
}

fn countersink(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Countersink> {
    let table = reader.table(f, "a countersink", Keys::only(&["diameter", "of", "angle"]))?;
    let diameter = rim(reader, &table);
    let angle = reader.maybe(&table, "angle", |r, f| {
        let angle = r.angle(f)?;
        if angle <= 0.0 || angle >= 180.0 {
            let message = format!("the included angle is {angle}°; it lies between 0° and 180°");
            return r.fail(Diagnostic::error(f.span, message));
        }
        Some(angle)
    });
    Some(Countersink { diameter: diameter?, angle: angle.unwrap_or(COUNTERSINK_ANGLE) })
}

/// The diameter of an enlargement: given, or that of a circle of the view.
fn rim(reader: &mut Reader<'_>, table: &Table<'_>) -> Option<RimSize> {
    match (table.get("diameter"), table.get("of")) {
        (Some(f), None) => reader.size(f).map(RimSize::Given),
        (None, Some(f)) => anchor(reader, f).map(RimSize::Shape),
        (Some(_), Some(of)) => {
            let message = format!("{} has `diameter` or `of`, not both", table.what);
            let help = "`of` names the circle that a view draws for it; `diameter` is for one that \
                        no view draws";
            reader.fail(Diagnostic::error(of.key, message).help(help))
        }
        (None, None) => {
            let message = format!("{} needs `diameter` or `of`", table.what);
            let help = "`of` names the circle that a view draws for it";
            reader.fail(Diagnostic::error(table.span, message).help(help))
        }
    }
}
