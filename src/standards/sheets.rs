//! Sheet sizes: ISO 216:2007 (A series), ISO 5457:1999 with Amd 1:2010, Table 1 and clause 5 (from
//! memory).

/// A sheet size.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SheetSize {
    /// Its name.
    pub name: &'static str,
    /// Shorter side, trimmed, mm.
    pub short: f64,
    /// Longer side, trimmed, mm.
    pub long: f64,
    /// Whether it stands upright before the reader.
    pub upright: bool,
    /// Zone fields along the longer side.
    pub long_fields: usize,
    /// Zone fields along the shorter side.
    pub short_fields: usize,
}

/// A side of a sheet.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Side {
    /// The longer one.
    Long,
    /// The shorter one.
    Short,
}

impl SheetSize {
    /// Length of a side, mm.
    #[must_use]
    pub fn length(&self, side: Side) -> f64 {
        match side {
            Side::Long => self.long,
            Side::Short => self.short,
        }
    }
}

/// The sizes of drawing sheets, largest first.
pub const SHEETS: [SheetSize; 5] = [
    size("A0", 841.0, 1189.0, 24, 16),
    size("A1", 594.0, 841.0, 16, 12),
    size("A2", 420.0, 594.0, 12, 8),
    size("A3", 297.0, 420.0, 8, 6),
    SheetSize { upright: true, ..size("A4", 210.0, 297.0, 6, 4) },
];

const fn size(
    name: &'static str,
    short: f64,
    long: f64,
    long_fields: usize,
    short_fields: usize,
) -> SheetSize {
    SheetSize { name, short, long, upright: false, long_fields, short_fields }
}
