//! The lines of a hole callout, in the order of ISO practice: the hole first, then what enlarges
//! it, then notes.

use super::Practice;
use super::value_text::Written;
use crate::scene::ValueUnit;
use crate::spec::{Enlargement, Form, HoleDepth, HoleNote};

/// Diameters of a callout's enlargements, measured where the spec names circles, mm.
pub(super) struct Rims {
    /// Of the counterbore.
    pub counterbore: Option<f64>,
    /// Of the spotface.
    pub spotface: Option<f64>,
    /// Of the countersink.
    pub countersink: Option<f64>,
}

/// The lines of the callout of `count` holes of `diameter` mm.
pub(super) fn lines(
    note: &HoleNote,
    diameter: f64,
    count: usize,
    rims: &Rims,
    places: Option<u8>,
    practice: &Practice<'_>,
) -> Vec<String> {
    let hole = Written {
        value: diameter,
        unit: ValueUnit::Millimetre,
        count,
        sign: "⌀",
        form: &note.form,
        places,
    };
    let size = |mm: f64| practice.style.number.length(mm, places);
    let through = match note.depth {
        HoleDepth::Shown | HoleDepth::Blind(_) => String::new(),
        HoleDepth::Through => format!(" {}", practice.style.words.get("through")),
    };
    let mut lines = Vec::new();
    match (&note.thread, note.depth) {
        (None, HoleDepth::Blind(depth)) => {
            lines.push(format!("{} ↧{}", hole.line(practice), size(depth)));
        }
        (None, HoleDepth::Shown | HoleDepth::Through) => {
            lines.push(format!("{}{through}", hole.line(practice)));
        }
        (Some(thread), depth) => {
            let name = thread.format(&practice.style.number);
            let counted = Written { form: &Form::default(), ..hole };
            let tapped = note.thread_depth.map_or(String::new(), |d| format!(" ↧{}", size(d)));
            if let HoleDepth::Blind(depth) = depth {
                // What is made first stands first: the drilled hole, then its thread.
                lines.push(format!("{} ↧{}", counted.line(practice), size(depth)));
                lines.push(format!("{name}{tapped}"));
            } else {
                let times = counted.times_text(practice);
                lines.push(format!("{times}{name}{tapped}{through}"));
            }
        }
    }
    let enlarged = |e: &Option<Enlargement>, rim: Option<f64>| {
        e.as_ref().zip(rim).map(|(e, rim)| {
            let depth = e.depth.map_or(String::new(), |d| format!(" ↧{}", size(d)));
            format!("⌴⌀{}{depth}", size(rim))
        })
    };
    lines.extend(enlarged(&note.counterbore, rims.counterbore));
    lines.extend(enlarged(&note.spotface, rims.spotface));
    lines.extend(note.countersink.as_ref().zip(rims.countersink).map(|(c, rim)| {
        let angle = practice.style.number.write(c.angle, None, practice.style.number.angle_places);
        format!("⌵⌀{}{}{angle}°", size(rim), practice.style.number.by)
    }));
    lines.extend(note.notes.iter().map(|t| t.format(&practice.style.number)));
    lines
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::spec::{Countersink, RimSize, Text, TextPiece};
    use crate::style::builtin;

    fn note_lines(note: &HoleNote, count: usize, rims: &Rims) -> Vec<String> {
        let style = builtin("iso").expect("compiled in");
        let practice = Practice { style: &style, group: style.group_of("A3") };
        lines(note, 9.0, count, rims, None, &practice)
    }

    const NONE: Rims = Rims { counterbore: None, spotface: None, countersink: None };

    // Order and signs: ISO 129-1:2018, as common practice writes them.
    #[test]
    fn a_counterbored_group_reads_hole_then_enlargement() {
        let note = HoleNote {
            counterbore: Some(Enlargement { diameter: RimSize::Given(15.0), depth: Some(8.6) }),
            ..HoleNote::default()
        };
        let rims = Rims { counterbore: Some(15.0), ..NONE };
        assert_eq!(note_lines(&note, 4, &rims), ["4×⌀9", "⌴⌀15 ↧8,6"]);
    }

    #[test]
    fn a_blind_thread_names_its_drill_first() {
        let note = HoleNote {
            thread: Some(Text { pieces: vec![TextPiece::Literal("M10".into())] }),
            thread_depth: Some(16.0),
            depth: HoleDepth::Blind(22.0),
            ..HoleNote::default()
        };
        assert_eq!(note_lines(&note, 2, &NONE), ["2×⌀9 ↧22", "M10 ↧16"]);
        let through = HoleNote { depth: HoleDepth::Shown, thread_depth: None, ..note };
        assert_eq!(note_lines(&through, 2, &NONE), ["2×M10"]);
    }

    #[test]
    fn through_is_written_only_where_no_view_shows_it() {
        let note = HoleNote { depth: HoleDepth::Through, ..HoleNote::default() };
        assert_eq!(note_lines(&note, 1, &NONE), ["⌀9 THRU"]);
        assert_eq!(note_lines(&HoleNote::default(), 1, &NONE), ["⌀9"]);
    }

    #[test]
    fn a_countersink_gives_diameter_and_angle() {
        let note = HoleNote {
            countersink: Some(Countersink { diameter: RimSize::Given(17.0), angle: 90.0 }),
            ..HoleNote::default()
        };
        let rims = Rims { countersink: Some(17.0), ..NONE };
        assert_eq!(note_lines(&note, 1, &rims)[1], "⌵⌀17×90°");
    }
}
