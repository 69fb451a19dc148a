//! From a file to a [`Drawing`].
//!
//! The stages: syntax (all errors that TOML recovers from), the language's version, parameters,
//! then every table lowered by hand. All problems are reported together; a spec with a syntax
//! error is not lowered, because half a table makes mistakes that its author did not.

use std::collections::BTreeMap;
use std::path::Path;

use toml::de::{DeTable, DeValue};

use super::annotations::{Home, callout, dimension};
use super::drawing::{AnnotationSpec, Drawing, ViewSpec};
use super::parameters::read_parameters;
use super::reader::{Field, Keys, Reader, Table, place};
use super::sheet::{drawing_table, read_allow, read_revisions, read_sheet, read_units};
use super::views::{DRAWN_ONLY, MOST_ANNOTATIONS, read_parts, read_views};
use crate::ident::ViewId;
use crate::source::{Diagnostic, Diagnostics, SourceMap, Span, World};

/// Version of the spec language that this program reads.
pub const FORMAT: u32 = 1;

/// Largest spec in bytes. One with ten thousand shapes takes about one million.
const LARGEST: usize = 4 << 20;

const TOP: Keys = Keys {
    known: &[
        "format",
        "drawing",
        "parameters",
        "part",
        "view",
        "dimension",
        "callout",
        "revision",
        "allow",
    ],
    later: &[
        ("feature", DRAWN_ONLY),
        ("variants", "this version reads one drawing per spec: write a spec for each variant"),
        ("include", "this version reads one file per drawing: write everything into the spec"),
    ],
};

/// Reads the spec at `path`. Problems go to `diagnostics`; `None` if any of them is an error.
///
/// A caller that must tell a file that cannot be read from one that is wrong reads it through
/// [`World::read`] itself and hands the text to [`read_text`].
pub fn read(
    world: &dyn World,
    path: &Path,
    sources: &mut SourceMap,
    diagnostics: &mut Diagnostics,
) -> Option<Drawing> {
    match world.read(path) {
        Ok(text) => read_text(&path.display().to_string(), &text, sources, diagnostics),
        Err(e) => {
            diagnostics.push(Diagnostic::error(None, e.to_string()));
            None
        }
    }
}

/// Reads a spec from its text; `name` is what messages call it.
pub fn read_text(
    name: &str,
    text: &str,
    sources: &mut SourceMap,
    diagnostics: &mut Diagnostics,
) -> Option<Drawing> {
    let file = sources.add(name, text.into());
    if text.len() > LARGEST {
        let message = format!("{name} has {} bytes; a spec has at most {LARGEST}", text.len());
        diagnostics.push(Diagnostic::error(None, message));
        return None;
    }
    let (document, errors) = DeTable::parse_recoverable(text);
    let mut reader = Reader::new(text);
    for e in &errors {
        // The limit on nesting comes without a place.
        let span = place(file, e.span().unwrap_or(0..0));
        reader.report(Diagnostic::error(span, format!("this is not TOML: {}", e.message())));
    }
    let document_span = Span { file, start: 0, end: 0 };
    let entries = DeValue::Table(document.into_inner());
    let root = Field { name: "spec", key: document_span, value: &entries, span: document_span };
    let drawing = if errors.is_empty() { lower(&mut reader, root) } else { None };
    let found = reader.into_found();
    let drawing = drawing.filter(|_| !found.has_errors());
    for d in found.into_sorted() {
        diagnostics.push(d);
    }
    drawing
}

fn lower(reader: &mut Reader<'_>, root: Field<'_>) -> Option<Drawing> {
    let version = reader.free_table(root, "the spec")?;
    check_format(reader, &version)?;
    let table = reader.table(root, "the spec", TOP)?;
    let sheet =
        required(reader, &table, "drawing", "[drawing]").and_then(|f| drawing_table(reader, f));
    if let Some(sheet) = &sheet {
        reader.units = read_units(reader, sheet);
    }
    if let Some(f) = table.get("parameters") {
        read_parameters(reader, f);
    }
    let sheet = sheet.and_then(|t| read_sheet(reader, &t));
    let revisions = table.get("revision").map(|f| read_revisions(reader, f)).unwrap_or_default();
    let allow = table.get("allow").map(|f| read_allow(reader, f)).unwrap_or_default();
    let parts = read_parts(reader, table.get("part"));
    let views = required(reader, &table, "view", "[[view]]");
    let (views, mut annotations) = views.map(|f| read_views(reader, f, &parts)).unwrap_or_default();
    annotations.extend(top_annotations(reader, &table, &views));
    annotations.sort_by_key(|a| a.span);
    check_ids(reader, &annotations, &views);
    Some(Drawing { sheet: sheet?, parts, views, annotations, revisions, allow })
}

/// A table without which there is nothing to draw.
fn required<'t>(
    reader: &mut Reader<'_>,
    table: &Table<'t>,
    key: &str,
    header: &str,
) -> Option<Field<'t>> {
    if table.get(key).is_none() && !table.is_suspect() {
        let message = format!("the spec has no {header}");
        let help = "`new` writes a spec to begin with";
        reader.report(Diagnostic::error(table.span, message).help(help));
    }
    table.get(key)
}

/// Gives up on another version of the language, of which every table may mean something else.
fn check_format(reader: &mut Reader<'_>, table: &Table<'_>) -> Option<()> {
    let Some(f) = table.get("format") else {
        let d = Diagnostic::error(table.span, "the spec does not say which version it is in");
        reader.report(d.help(format!("begin it with format = {FORMAT}")));
        return Some(());
    };
    let written = match f.value {
        DeValue::Integer(i) => i64::from_str_radix(i.as_str(), i.radix()).ok(),
        _ => None,
    };
    if written == Some(i64::from(FORMAT)) {
        return Some(());
    }
    let message = format!("this program reads format {FORMAT} of the spec language and no other");
    let help = format!(
        "write format = {FORMAT} if the spec is in it; otherwise use the program that it was \
         written for"
    );
    reader.fail(Diagnostic::error(f.span, message).help(help))
}

/// `[[dimension]]` and `[[callout]]`.
fn top_annotations(
    reader: &mut Reader<'_>,
    table: &Table<'_>,
    views: &[ViewSpec],
) -> Vec<AnnotationSpec> {
    let ids: Vec<ViewId> = views.iter().map(|v| v.id.clone()).collect();
    let home = Home::Top(&ids);
    let mut all = Vec::new();
    if let Some(f) = table.get("dimension") {
        all.extend(reader.rows(f, MOST_ANNOTATIONS, |r, f| dimension(r, f, home)));
    }
    if let Some(f) = table.get("callout") {
        all.extend(reader.rows(f, MOST_ANNOTATIONS, |r, f| callout(r, f, home)));
    }
    all
}

/// Every annotation has an id of its own, different from those of the views.
fn check_ids(reader: &mut Reader<'_>, annotations: &[AnnotationSpec], views: &[ViewSpec]) {
    let mut seen: BTreeMap<&str, (&str, Span)> =
        views.iter().map(|v| (v.id.as_str(), ("view", v.span))).collect();
    for a in annotations {
        if let Some((what, first)) = seen.get(a.id.as_str()) {
            let message = format!("this annotation and another {what} share the id `{}`", a.id);
            let d = Diagnostic::error(a.span, message)
                .related(*first, format!("the other {what} is here"));
            reader.report(d.help("give one of them an `id` of its own"));
        } else {
            seen.insert(a.id.as_str(), ("annotation", a.span));
        }
    }
}
