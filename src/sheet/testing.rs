//! A drawing for the tests of this module.

use super::{Furniture, FurnitureFacts, furniture};
use crate::source::{FileId, Span};
use crate::spec::{
    Drawing, FieldKey, FormatChoice, Revision, ScaleChoice, SheetSpec, Spanned, Status, Text,
    TextPiece,
};
use crate::style::{FormatSpec, Style, builtin};
use crate::units::{LengthUnit, Scale};

pub(super) fn span() -> Span {
    Span { file: FileId(0), start: 3, end: 7 }
}

pub(super) fn text(letters: &str) -> Text {
    Text { pieces: vec![TextPiece::Literal(letters.into())] }
}

pub(super) fn spanned<T>(value: T) -> Spanned<T> {
    Spanned { value, span: span() }
}

pub(super) fn style() -> Style {
    builtin("iso").expect("compiled in")
}

pub(super) fn format<'a>(style: &'a Style, name: &str) -> &'a FormatSpec {
    style.format.iter().find(|f| f.name == name).expect("a size of the style")
}

/// A drawing that fills in no more than it must.
pub(super) fn bare() -> Drawing {
    let sheet = SheetSpec {
        number: spanned("WL-2045".into()),
        title: None,
        subtitle: None,
        status: Status::Draft,
        style: spanned("iso".into()),
        units: LengthUnit::Millimetre,
        format: FormatChoice::Auto,
        scale: ScaleChoice::Auto,
        places: None,
        fields: Vec::new(),
        own_fields: Vec::new(),
        notes: Vec::new(),
        span: span(),
    };
    Drawing {
        sheet,
        parts: Vec::new(),
        views: Vec::new(),
        annotations: Vec::new(),
        revisions: Vec::new(),
        allow: Vec::new(),
    }
}

/// A drawing that fills in every field.
pub(super) fn full() -> Drawing {
    let fields = [
        (FieldKey::Owner, "Harrow Pump Works"),
        (FieldKey::Department, "Design 2"),
        (FieldKey::Reference, "M. Castell"),
        (FieldKey::Creator, "R. Tamm"),
        (FieldKey::Approver, "J. Okafor"),
        (FieldKey::Date, "2026-04-02"),
        (FieldKey::DocumentType, "Part drawing"),
        (FieldKey::Language, "en"),
        (FieldKey::Material, "EN-GJS-400-15"),
        (FieldKey::Finish, "Ra 6,3 unless stated"),
        (FieldKey::Edges, "ISO 13715"),
        (FieldKey::Mass, "1,84 kg"),
        (FieldKey::GeneralTolerance, "ISO 2768-m"),
        (FieldKey::Tolerancing, "ISO 8015"),
        (FieldKey::Classification, "Pedestals"),
    ];
    let mut drawing = bare();
    drawing.sheet.title = Some(spanned("Bearing pedestal".into()));
    drawing.sheet.subtitle = Some("Left hand, cast".into());
    drawing.sheet.fields =
        fields.into_iter().map(|(key, letters)| (key, spanned(text(letters)))).collect();
    drawing
}

pub(super) fn revision(mark: &str, change: &str) -> Revision {
    Revision {
        mark: spanned(mark.into()),
        date: spanned("2026-04-02".into()),
        change: text(change),
        by: "R. Tamm".into(),
    }
}

pub(super) fn facts() -> FurnitureFacts {
    FurnitureFacts { scale: Some(Scale::FULL), index: 1, count: 1 }
}

/// The furniture of the first sheet in one of the ISO style's sizes.
pub(super) fn furnish(drawing: &Drawing, size: &str) -> Furniture {
    let style = style();
    furniture(drawing, &facts(), &style, format(&style, size))
}
