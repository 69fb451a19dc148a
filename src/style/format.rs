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
    /// Sides that carry zone marks: any of `top`, `bottom`, `left`, `right`.
    pub zones_on: Vec<String>,
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

/// The title block.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct TitleBlockSpec {
    /// Width.
    pub width: f64,
    /// Height without a company's own fields.
    pub height: f64,
    /// Outer frame's line.
    pub line: f64,
    /// Inner lines.
    pub inner_line: f64,
    /// Height of field names.
    pub name_text: f64,
    /// Distance of text from the cell's left side.
    pub padding: f64,
    /// Height of a row of a company's own fields, on top of the block.
    pub own_row: f64,
    /// Most own fields in a row.
    pub own_columns: u32,
    /// Heights that an entry may fall back to, largest first.
    pub heights: Vec<f64>,
    /// The cells; x and y from the block's upper left corner.
    pub cell: Vec<Cell>,
}

/// A cell of the title block.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Cell {
    /// Which entry it holds.
    pub key: String,
    /// Left side.
    pub x: f64,
    /// Upper side.
    pub y: f64,
    /// Width.
    pub width: f64,
    /// Height.
    pub height: f64,
    /// Text height of the entry.
    pub text: f64,
}

/// What a cell shows.
#[derive(Clone, Debug, PartialEq)]
pub enum CellText {
    /// A line or more of text.
    Text(String),
    /// The projection sign.
    ProjectionSign,
}

/// A table whose rows grow from a corner.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct TableSpec {
    /// Widths of its columns.
    pub columns: Vec<f64>,
    /// Row height.
    pub row: f64,
    /// Text height.
    pub text: f64,
    /// Distance of text from the cell's left side.
    pub padding: f64,
    /// Outer lines.
    pub line: f64,
    /// Inner lines.
    pub inner_line: f64,
}
