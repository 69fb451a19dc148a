//! Zones: fields along the sides of the sheet, by which a reader is led to a place.
//!
//! ISO 5457:1999 clause 5: fields are counted from the centring marks and have one length; the
//! fields at the corners take the rest. Letters run down the upright sides from A at the top,
//! numerals along the level ones from 1 at the left.

use crate::geom::{Point, Sheet};
use crate::style::{FormatSpec, Style, ZoneSpec};

/// More fields on half a side than any sheet has; bounds what a style can ask for.
const MOST_ON_HALF: f64 = 100.0;

/// The fields of one side, by the strokes between them.
pub(super) struct Fields {
    /// Places of the strokes along the side, rising, mm from the trimmed edge.
    pub strokes: Vec<f64>,
}

impl Fields {
    /// The fields of a side of this length. A field at the corner is at least half as long as the
    /// others, so it takes in a rest that is too short to stand alone.
    pub(super) fn along(length: f64, zone: &ZoneSpec) -> Self {
        let half = length / 2.0;
        let on_half = (half / zone.field).round().clamp(1.0, MOST_ON_HALF);
        let last = on_half as i32 - 1;
        let strokes = (-last..=last).map(|k| half + f64::from(k) * zone.field).collect();
        Self { strokes }
    }

    /// The field at `place` mm from the trimmed edge, from 0.
    fn index(&self, place: f64) -> usize {
        self.strokes.iter().filter(|s| **s <= place).count()
    }

    /// Where each field begins and ends, the outer ones at `from` and `to`.
    pub(super) fn spans(&self, from: f64, to: f64) -> Vec<(f64, f64)> {
        let starts = std::iter::once(from).chain(self.strokes.iter().copied());
        let ends = self.strokes.iter().copied().chain(std::iter::once(to));
        starts.zip(ends).collect()
    }
}

/// The letters of the field with this index: A, B, … without those that the zones skip, then AA,
/// BB and so on.
pub(super) fn letters(index: usize, zone: &ZoneSpec) -> String {
    let alphabet: Vec<char> = ('A'..='Z').filter(|c| !zone.skip.contains(*c)).collect();
    match alphabet.len() {
        0 => numeral(index),
        n => alphabet[index % n].to_string().repeat(index / n + 1),
    }
}

/// The numeral of the field with this index.
pub(super) fn numeral(index: usize) -> String {
    (index + 1).to_string()
}

/// The zone of a place on a sheet, such as `B3`. Places beyond the edge belong to the nearest zone.
#[must_use]
pub fn zone(format: &FormatSpec, style: &Style, place: Point<Sheet>) -> String {
    let zone = &style.frame.zone;
    let row = Fields::along(format.height, zone).index(place.y);
    let column = Fields::along(format.width, zone).index(place.x);
    format!("{}{}", letters(row, zone), numeral(column))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::standards::sheets::{SHEETS, Side};
    use crate::style::builtin;

    #[test]
    fn every_size_has_the_number_of_fields_of_iso_5457() {
        let style = builtin("iso").expect("compiled in");
        for sheet in &SHEETS {
            let count =
                |side: Side| Fields::along(sheet.length(side), &style.frame.zone).strokes.len() + 1;
            assert_eq!(count(Side::Long), sheet.long_fields, "{}", sheet.name);
            assert_eq!(count(Side::Short), sheet.short_fields, "{}", sheet.name);
        }
    }

    #[test]
    fn zones_count_from_the_upper_left_corner() {
        let style = builtin("iso").expect("compiled in");
        let a3 = style.format.iter().find(|f| f.name == "A3").expect("a size of the style");
        let at = |x, y| zone(a3, &style, Point::new(x, y));
        assert_eq!(at(21.0, 11.0), "A1");
        assert_eq!(at(409.0, 286.0), "F8");
        assert_eq!(at(209.9, 148.4), "C4");
        assert_eq!(at(210.1, 148.6), "D5");
        assert_eq!(at(-5.0, 1e9), "F1");
        assert_eq!(at(f64::NAN, 20.0), "A1");
    }

    #[test]
    fn letters_leave_out_i_and_o_and_double_after_z() {
        let zone = builtin("iso").expect("compiled in").frame.zone;
        let row: String = (0..24).map(|i| letters(i, &zone)).collect();
        assert_eq!(row, "ABCDEFGHJKLMNPQRSTUVWXYZ");
        assert_eq!(letters(24, &zone), "AA");
        assert_eq!(letters(25, &zone), "BB");
    }
}
