//! Fields of a title block: ISO 7200:2004 Tables 1 to 3 (from memory).

/// A field of a title block.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Field {
    /// Legal owner.
    LegalOwner,
    /// Identification number.
    IdentificationNumber,
    /// Revision index.
    RevisionIndex,
    /// Date of issue.
    DateOfIssue,
    /// Segment or sheet number.
    SheetNumber,
    /// Number of segments or sheets.
    SheetCount,
    /// Language code.
    LanguageCode,
    /// Title.
    Title,
    /// Supplementary title.
    SupplementaryTitle,
    /// Responsible department.
    Department,
    /// Technical reference.
    TechnicalReference,
    /// Approval person.
    ApprovalPerson,
    /// Creator.
    Creator,
    /// Document type.
    DocumentType,
    /// Classification, key words.
    Classification,
    /// Document status.
    DocumentStatus,
    /// Paper size.
    PaperSize,
}

/// Whether a title block must have a field.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Obligation {
    /// It must.
    Mandatory,
    /// It may.
    Optional,
}

/// What the standard says of a field.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct FieldRule {
    /// The field.
    pub field: Field,
    /// Whether it must be there.
    pub obligation: Obligation,
    /// Recommended number of characters; `None` where the standard names none.
    pub characters: Option<usize>,
}

/// Total width of a title block, mm (clause 4).
pub const WIDTH: f64 = 180.0;

use Field::{
    ApprovalPerson, Classification, Creator, DateOfIssue, Department, DocumentStatus, DocumentType,
    IdentificationNumber, LanguageCode, LegalOwner, PaperSize, RevisionIndex, SheetCount,
    SheetNumber, SupplementaryTitle, TechnicalReference, Title,
};
use Obligation::{Mandatory, Optional};

/// The fields, in the standard's order. Page number and number of pages are left out: they belong
/// to text documents.
pub const FIELDS: [FieldRule; 17] = [
    rule(LegalOwner, Mandatory, None),
    rule(IdentificationNumber, Mandatory, Some(16)),
    rule(RevisionIndex, Optional, Some(2)),
    rule(DateOfIssue, Mandatory, Some(10)),
    rule(SheetNumber, Mandatory, Some(4)),
    rule(SheetCount, Optional, Some(4)),
    rule(LanguageCode, Optional, Some(4)),
    rule(Title, Mandatory, Some(25)),
    rule(SupplementaryTitle, Optional, Some(25)),
    rule(Department, Optional, Some(10)),
    rule(TechnicalReference, Optional, Some(20)),
    rule(ApprovalPerson, Mandatory, Some(20)),
    rule(Creator, Mandatory, Some(20)),
    rule(DocumentType, Mandatory, Some(30)),
    rule(Classification, Optional, None),
    rule(DocumentStatus, Optional, Some(20)),
    rule(PaperSize, Optional, Some(4)),
];

const fn rule(field: Field, obligation: Obligation, characters: Option<usize>) -> FieldRule {
    FieldRule { field, obligation, characters }
}
