//! Texts that have no room where they belong.

use std::fmt;

use crate::geom::{Rect, Sheet};
use crate::ident::ItemId;
use crate::source::Span;
use crate::style::{CellKey, RevisionKey};

/// A text that fits its place neither on several lines nor at the least height, and was cut.
#[derive(Clone, Debug, PartialEq)]
pub struct Misfit {
    /// The item that it belongs to.
    pub item: ItemId,
    /// Where in the item.
    pub spot: Spot,
    /// The whole text.
    pub text: String,
    /// The place that is too small for it.
    pub place: Rect<Sheet>,
    /// Along which way room is short.
    pub extent: Extent,
    /// Room that the text takes at its least height, mm.
    pub needed: f64,
    /// Room that there is, mm; less than `needed`.
    pub available: f64,
    /// Where the text was written, where that is known.
    pub span: Option<Span>,
}

/// Along which way room is short.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Extent {
    /// A line is too long.
    Width,
    /// The lines are too many.
    Height,
}

/// A place for text on the sheet's furniture.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Spot {
    /// Field name of a cell of the title block.
    FieldName(CellKey),
    /// Entry of a cell of the title block.
    Field(CellKey),
    /// Name of one of the company's own fields, counted from 1.
    OwnName(usize),
    /// Entry of one of the company's own fields, counted from 1.
    OwnField(usize),
    /// Heading of a column of the revision table.
    RevisionHeading(RevisionKey),
    /// Column of the revision table in the row of the revision, counted from 1, oldest first.
    Revision(usize, RevisionKey),
    /// The revision table as a whole.
    RevisionTable,
    /// The general notes as a whole.
    Notes,
}

impl Misfit {
    /// How much room is missing, mm.
    #[must_use]
    pub fn excess(&self) -> f64 {
        self.needed - self.available
    }
}

impl fmt::Display for Misfit {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let way = match self.extent {
            Extent::Width => "wide",
            Extent::Height => "high",
        };
        write!(
            f,
            "{}: `{}` is cut, because it takes a place {:.1} mm {way} and has {:.1} mm",
            self.spot, self.text, self.needed, self.available
        )
    }
}

impl fmt::Display for Spot {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::FieldName(key) => write!(f, "name of the title block's field {}", key.name()),
            Self::Field(key) => write!(f, "title block's field {}", key.name()),
            Self::OwnName(n) => write!(f, "name of own field {n}"),
            Self::OwnField(n) => write!(f, "own field {n}"),
            Self::RevisionHeading(key) => {
                write!(f, "heading of the revision table's column {}", key.name())
            }
            Self::Revision(n, key) => write!(f, "{} of revision {n}", key.name()),
            Self::RevisionTable => f.write_str("revision table"),
            Self::Notes => f.write_str("general notes"),
        }
    }
}
