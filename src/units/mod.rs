//! Angles and scales, and how lengths are named.
//!
//! A length is an `f64` in millimetres whose space (part or paper) is the space of the point,
//! vector or curve that it belongs to; see [`crate::geom`]. Only a [`Scale`] converts part
//! lengths to paper lengths. Inches are converted where a spec is read and where a value is
//! written; everything between is millimetres.

mod scale;

pub use scale::{Scale, ScaleError};

/// Millimetres in an inch, by definition.
pub const MM_PER_INCH: f64 = 25.4;

/// The unit that plain numbers of a spec are written in.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum LengthUnit {
    /// Millimetres.
    #[default]
    Millimetre,
    /// Inches of 25.4 mm.
    Inch,
}

impl LengthUnit {
    /// Millimetres in one of this unit.
    #[must_use]
    pub fn in_mm(self) -> f64 {
        match self {
            Self::Millimetre => 1.0,
            Self::Inch => MM_PER_INCH,
        }
    }
}
