//! What the cells of the title block say.

use super::FurnitureFacts;
use crate::source::Span;
use crate::spec::{Drawing, FieldKey, SheetSpec, Status};
use crate::standards::title_block::Field;
use crate::style::{CellKey, FormatSpec, Style};
use crate::units::{LengthUnit, Scale};

/// The entry of a cell.
#[derive(Clone, Debug, PartialEq)]
pub struct Entry {
    /// What it shows.
    pub text: EntryText,
    /// Where it was written; `None` for what the program knows by itself.
    pub span: Option<Span>,
}

/// What a cell shows.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum EntryText {
    /// Text; empty for a field that the spec leaves open.
    Text(String),
    /// The projection sign.
    ProjectionSign,
}

/// The entry of a cell of the title block.
///
/// Names, dates and approvals come from the spec alone. The program adds what it knows: sheet
/// number, size, scale, unit, newest revision, and the style's words for the status and, where the
/// spec names none, for the document type.
#[must_use]
pub fn entry(
    key: CellKey,
    drawing: &Drawing,
    facts: &FurnitureFacts,
    style: &Style,
    format: &FormatSpec,
) -> Entry {
    let sheet = &drawing.sheet;
    let field = |key| field(sheet, key, style);
    match key {
        CellKey::Owner => field(FieldKey::Owner),
        CellKey::Number => Entry::written(&sheet.number.value, sheet.number.span),
        CellKey::Revision => newest_revision(drawing),
        CellKey::Date => field(FieldKey::Date),
        CellKey::Sheet => Entry::known(format!("{}/{}", facts.index, facts.count)),
        CellKey::Language => field(FieldKey::Language),
        CellKey::Title => match &sheet.title {
            Some(title) => Entry::written(&title.value, title.span),
            None => Entry::open(),
        },
        CellKey::Subtitle => match &sheet.subtitle {
            Some(subtitle) => Entry::written(subtitle, sheet.span),
            None => Entry::open(),
        },
        CellKey::Department => field(FieldKey::Department),
        CellKey::Reference => field(FieldKey::Reference),
        CellKey::Approver => field(FieldKey::Approver),
        CellKey::Creator => field(FieldKey::Creator),
        CellKey::DocumentType => document_type(field(FieldKey::DocumentType), style),
        CellKey::Status => Entry::known(style.words.get(match sheet.status {
            Status::Draft => "status-draft",
            Status::Released => "status-released",
        })),
        CellKey::Classification => field(FieldKey::Classification),
        CellKey::Size => Entry::known(&format.name),
        CellKey::Scale => Entry::known(scale(facts.scale, style)),
        CellKey::Units => Entry::known(style.words.get(match sheet.units {
            LengthUnit::Millimetre => "units-mm",
            LengthUnit::Inch => "units-in",
        })),
        CellKey::GeneralTolerance => field(FieldKey::GeneralTolerance),
        CellKey::Tolerancing => field(FieldKey::Tolerancing),
        CellKey::Material => field(FieldKey::Material),
        CellKey::Finish => field(FieldKey::Finish),
        CellKey::Edges => field(FieldKey::Edges),
        CellKey::Mass => field(FieldKey::Mass),
        CellKey::Projection => Entry { text: EntryText::ProjectionSign, span: None },
    }
}

/// The cell that shows a field of ISO 7200.
#[must_use]
pub fn cell_of(field: Field) -> CellKey {
    match field {
        Field::LegalOwner => CellKey::Owner,
        Field::IdentificationNumber => CellKey::Number,
        Field::RevisionIndex => CellKey::Revision,
        Field::DateOfIssue => CellKey::Date,
        Field::SheetNumber | Field::SheetCount => CellKey::Sheet,
        Field::LanguageCode => CellKey::Language,
        Field::Title => CellKey::Title,
        Field::SupplementaryTitle => CellKey::Subtitle,
        Field::Department => CellKey::Department,
        Field::TechnicalReference => CellKey::Reference,
        Field::ApprovalPerson => CellKey::Approver,
        Field::Creator => CellKey::Creator,
        Field::DocumentType => CellKey::DocumentType,
        Field::Classification => CellKey::Classification,
        Field::DocumentStatus => CellKey::Status,
        Field::PaperSize => CellKey::Size,
    }
}

impl Entry {
    fn known(text: impl Into<String>) -> Self {
        Self { text: EntryText::Text(text.into()), span: None }
    }

    fn written(text: impl Into<String>, span: Span) -> Self {
        Self { text: EntryText::Text(text.into()), span: Some(span) }
    }

    fn open() -> Self {
        Self::known("")
    }

    /// Whether the cell stays empty.
    #[must_use]
    pub fn is_open(&self) -> bool {
        match &self.text {
            EntryText::Text(text) => text.trim().is_empty(),
            EntryText::ProjectionSign => false,
        }
    }
}

fn field(sheet: &SheetSpec, key: FieldKey, style: &Style) -> Entry {
    match sheet.fields.iter().find(|(k, _)| *k == key) {
        Some((_, text)) => Entry::written(text.value.format(&style.number), text.span),
        None => Entry::open(),
    }
}

fn newest_revision(drawing: &Drawing) -> Entry {
    match drawing.revisions.last() {
        Some(newest) => Entry::written(&newest.mark.value, newest.mark.span),
        None => Entry::open(),
    }
}

/// The spec's document type, or the style's usual one; a style without one leaves the cell open.
fn document_type(written: Entry, style: &Style) -> Entry {
    match style.words.0.get("document-type") {
        Some(usual) if written.is_open() => Entry::known(usual),
        Some(_) | None => written,
    }
}

fn scale(scale: Option<Scale>, style: &Style) -> String {
    match scale {
        // A ratio such as 1:2.5 is a number to the reader and has the style's decimal sign.
        Some(s) => s.to_string().replace('.', &style.number.decimal.to_string()),
        None => style.words.get("scale-none").to_owned(),
    }
}
