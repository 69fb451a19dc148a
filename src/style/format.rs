//! Sheet sizes, frame, title block and tables.

use serde::Deserialize;

/// A sheet size, trimmed.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct FormatSpec {
    /// Its name.
    pub name: String,
    /// Width as it lies before the reader.
    pub width: f64,
    /// Height as it lies before the reader.
    pub height: f64,
    /// Sides that carry zone letters, numerals and strokes.
    pub zones_on: Vec<SheetSide>,
}

/// A side of the sheet as it lies before the reader.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum SheetSide {
    /// The upper side.
    Top,
    /// The lower side.
    Bottom,
    /// The left side.
    Left,
    /// The right side.
    Right,
}

/// Frame, margins and zones.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct FrameSpec {
    /// Left margin (filing).
    pub left: f64,
    /// Right margin.
    pub right: f64,
    /// Upper margin.
    pub top: f64,
    /// Lower margin.
    pub bottom: f64,
    /// Width of the frame line.
    pub line: f64,
    /// Distance of the zone border outside the frame.
    pub border_offset: f64,
    /// Width of the zone border and of zone strokes.
    pub border_line: f64,
    /// Width of centring marks.
    pub centring_line: f64,
    /// How far centring marks reach into the frame.
    pub centring_reach: f64,
    /// Zones.
    pub zone: ZoneSpec,
}

/// Zones along the border.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ZoneSpec {
    /// Length of a field, counted from the centring marks.
    pub field: f64,
    /// Height of zone letters and numerals.
    pub text: f64,
    /// Letters that are left out.
    pub skip: String,
}

/// The title block. Cells tile it without gap or overlap; their places count from its upper left
/// corner, x to the right and y down.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct TitleBlockSpec {
    /// Width.
    pub width: f64,
    /// Height without a company's own fields.
    pub height: f64,
    /// Width of the outer lines.
    pub line: f64,
    /// Width of the lines between cells.
    pub inner_line: f64,
    /// Distance of text from the cell's left and right sides.
    pub padding: f64,
    /// Height of field names.
    pub name_text: f64,
    /// Upper side of the cell to the top of the field name's capitals.
    pub name_top: f64,
    /// Upper side of the cell to the highest place for the top of an entry's capitals.
    pub entry_top: f64,
    /// Last base line of an entry to the lower side of its cell; the least for centred ones.
    pub base: f64,
    /// Base line to base line of an entry's lines.
    pub line_pitch: LinePitch,
    /// Height of a row of a company's own fields, on top of the block.
    pub own_row: f64,
    /// Most own fields in a row.
    pub own_columns: u32,
    /// Text height of own fields.
    pub own_text: f64,
    /// Heights that an entry may fall back to, largest first.
    pub heights: Vec<f64>,
    /// The projection sign.
    pub sign: SignSpec,
    /// The cells.
    pub cell: Vec<Cell>,
}

/// Base line to base line, in text heights.
#[derive(Clone, Copy, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct LinePitch {
    /// Of lines without accents on capitals.
    pub plain: f64,
    /// Where a line below another has accents on capitals.
    pub accented: f64,
}

/// The projection sign as drawn in its cell.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct SignSpec {
    /// Lettering height that it goes with: the diameter of the small end.
    pub height: f64,
    /// Width of its outlines.
    pub line: f64,
    /// Width of its axes.
    pub axis: f64,
}

/// A cell of the title block.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Cell {
    /// Which entry it holds.
    pub key: CellKey,
    /// Its field name, as printed.
    pub name: String,
    /// Left side.
    pub x: f64,
    /// Upper side.
    pub y: f64,
    /// Width.
    pub width: f64,
    /// Height.
    pub height: f64,
    /// Text height of the entry where it fits.
    pub text: f64,
    /// Whether the entry stands in the middle of the height below the field name, instead of on
    /// the base line that it shares with its neighbours.
    #[serde(default)]
    pub centred: bool,
}

/// What a cell of the title block holds.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum CellKey {
    /// Legal owner.
    Owner,
    /// Drawing number.
    Number,
    /// Newest revision index.
    Revision,
    /// Date of issue.
    Date,
    /// Number of this sheet and of all sheets.
    Sheet,
    /// Language code.
    Language,
    /// Title.
    Title,
    /// Supplementary title.
    Subtitle,
    /// Responsible department.
    Department,
    /// Technical reference.
    Reference,
    /// Who approved.
    Approver,
    /// Who made the drawing.
    Creator,
    /// Document type.
    DocumentType,
    /// Document status.
    Status,
    /// Classification or keywords.
    Classification,
    /// Sheet size.
    Size,
    /// Main scale.
    Scale,
    /// Unit of lengths.
    Units,
    /// General tolerances.
    GeneralTolerance,
    /// Tolerancing principle.
    Tolerancing,
    /// Material.
    Material,
    /// General surface statement.
    Finish,
    /// General statement on edges.
    Edges,
    /// Mass.
    Mass,
    /// The projection sign.
    Projection,
}

impl CellKey {
    /// Every one, in the order of ISO 7200 and then what a part drawing adds.
    pub const ALL: [Self; 25] = [
        Self::Owner,
        Self::Number,
        Self::Revision,
        Self::Date,
        Self::Sheet,
        Self::Language,
        Self::Title,
        Self::Subtitle,
        Self::Department,
        Self::Reference,
        Self::Approver,
        Self::Creator,
        Self::DocumentType,
        Self::Status,
        Self::Classification,
        Self::Size,
        Self::Scale,
        Self::Units,
        Self::GeneralTolerance,
        Self::Tolerancing,
        Self::Material,
        Self::Finish,
        Self::Edges,
        Self::Mass,
        Self::Projection,
    ];

    /// Its name in a style.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            Self::Owner => "owner",
            Self::Number => "number",
            Self::Revision => "revision",
            Self::Date => "date",
            Self::Sheet => "sheet",
            Self::Language => "language",
            Self::Title => "title",
            Self::Subtitle => "subtitle",
            Self::Department => "department",
            Self::Reference => "reference",
            Self::Approver => "approver",
            Self::Creator => "creator",
            Self::DocumentType => "document-type",
            Self::Status => "status",
            Self::Classification => "classification",
            Self::Size => "size",
            Self::Scale => "scale",
            Self::Units => "units",
            Self::GeneralTolerance => "general-tolerance",
            Self::Tolerancing => "tolerancing",
            Self::Material => "material",
            Self::Finish => "finish",
            Self::Edges => "edges",
            Self::Mass => "mass",
            Self::Projection => "projection",
        }
    }
}

/// The revision table: rows below a header, in the upper right corner.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct RevisionTableSpec {
    /// Its columns from left to right.
    pub column: Vec<RevisionColumn>,
    /// Height of a row with one line of text.
    pub row: f64,
    /// Text height.
    pub text: f64,
    /// Base line to base line of a row's lines.
    pub line_pitch: LinePitch,
    /// Distance of text from the cell's left and right sides.
    pub padding: f64,
    /// Width of the outer lines and of the one below the header.
    pub line: f64,
    /// Width of the other lines.
    pub inner_line: f64,
}

/// A column of the revision table.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct RevisionColumn {
    /// What it shows.
    pub key: RevisionKey,
    /// Its heading.
    pub name: String,
    /// Its width.
    pub width: f64,
}

/// What a column of the revision table shows.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum RevisionKey {
    /// Revision index.
    Mark,
    /// What changed.
    Change,
    /// Date of the change.
    Date,
    /// Who made it.
    By,
}

impl RevisionKey {
    /// Its name in a style.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            Self::Mark => "mark",
            Self::Change => "change",
            Self::Date => "date",
            Self::By => "by",
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[derive(Deserialize)]
    struct Keys {
        cell: Vec<CellKey>,
    }

    #[test]
    fn cells_are_called_as_a_style_calls_them() {
        let names: Vec<String> = CellKey::ALL.iter().map(|k| format!("\"{}\"", k.name())).collect();
        let read: Keys = toml::from_str(&format!("cell = [{}]", names.join(", ")))
            .expect("the names are those that a style is read with");
        assert_eq!(read.cell, CellKey::ALL);
    }
}
