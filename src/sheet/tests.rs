//! What holds for furniture as a whole.

use super::testing::{bare, facts, format, full, furnish, revision, spanned, style, text};
use super::{Extent, Furniture, FurnitureFacts, Spot, furniture};
use crate::geom::{COINCIDENT, Point, Rect, Sheet};
use crate::ident::ItemId;
use crate::scene::{Item, ItemKind, Mark, PlacedText};
use crate::spec::{Drawing, FieldKey, Status};
use crate::style::{CellKey, Projection, Style};
use crate::units::Scale;

const SIZES: [&str; 5] = ["A4", "A3", "A2", "A1", "A0"];

/// Least white between lines of text, mm: 15h/10 less the tails and what round letters overshoot.
const BETWEEN_LINES: f64 = 0.48;

/// Least white between a text and a line, mm. Zone characters have 0.4875 less what round
/// letters overshoot: ISO 5457 puts 3.5 between lines 5 apart.
fn clear(item: &ItemId) -> f64 {
    if item.as_str() == "frame" { 0.42 } else { 0.5 }
}

fn item<'a>(f: &'a Furniture, id: &str) -> Option<&'a Item> {
    f.items.iter().find(|i| i.id.as_str() == id)
}

fn texts(f: &Furniture) -> Vec<(&ItemId, &PlacedText)> {
    f.items.iter().flat_map(|i| i.texts().map(move |t| (&i.id, t))).collect()
}

fn says(f: &Furniture, letters: &str) -> bool {
    texts(f).iter().any(|(_, t)| t.run.text == letters)
}

/// A drawing whose every field is far too long.
fn overfull() -> Drawing {
    let long = "Supercalibrated 12345678901234567890123456789 and so on, and so on; Ä, Ö, Ü and g";
    let mut drawing = full();
    for (_, field) in &mut drawing.sheet.fields {
        field.value = text(long);
    }
    drawing.sheet.number = spanned("WL-2045/778-03-L 1234567890123456789012".into());
    drawing.sheet.title = Some(spanned(long.into()));
    drawing.sheet.subtitle = Some(long.into());
    drawing.sheet.own_fields = (0..6).map(|_| (long.to_owned(), text(long))).collect();
    drawing.sheet.notes = (0..12).map(|_| spanned(text(&long.repeat(4)))).collect();
    drawing.revisions = (0..9).map(|i| revision(&format!("ABCDEFGHIJ{i}"), long)).collect();
    drawing
}

fn varied() -> Vec<Drawing> {
    let mut some = full();
    some.sheet.own_fields = vec![("Order".into(), text("5531"))];
    some.sheet.notes = vec![spanned(text("Bore free of paint.")); 3];
    some.revisions = vec![revision("A", "First issue"), revision("B", "Bore 40 → 42; seat moved")];
    vec![bare(), full(), some, overfull()]
}

#[test]
fn no_ink_touches_another_whatever_the_fields_hold() {
    for (n, drawing) in varied().iter().enumerate() {
        for size in SIZES {
            let f = furnish(drawing, size);
            let texts = texts(&f);
            for (i, (id, a)) in texts.iter().enumerate() {
                let quad = a.quad();
                for (_, b) in &texts[i + 1..] {
                    let gap = quad.distance(&b.quad());
                    assert!(
                        gap >= BETWEEN_LINES,
                        "{n} {size} {:?} {:?} {gap}",
                        a.run.text,
                        b.run.text
                    );
                }
                for stroke in f.items.iter().flat_map(|i| &i.marks) {
                    let Mark::Stroke(s) = stroke else { continue };
                    for curve in s.paths.iter().flat_map(|p| &p.curves) {
                        let gap = quad.distance_to_line(curve.start(), curve.end()) - s.width / 2.0;
                        assert!(gap >= clear(id), "{n} {size} {:?} {gap}", a.run.text);
                    }
                }
            }
        }
    }
}

#[test]
fn blocks_lie_in_the_frame_and_off_each_other() {
    for drawing in varied() {
        for size in SIZES {
            let f = furnish(&drawing, size);
            for (i, block) in f.blocks.iter().enumerate() {
                assert!(f.frame.grown(COINCIDENT).holds(&block.area), "{size} {:?}", block);
                for other in &f.blocks[i + 1..] {
                    assert!(!block.area.overlaps(&other.area), "{size} {block:?} {other:?}");
                }
            }
        }
    }
}

#[test]
fn what_is_empty_leaves_no_trace() {
    let f = furnish(&bare(), "A3");
    let ids: Vec<&str> = f.items.iter().map(|i| i.id.as_str()).collect();
    assert_eq!(ids, ["frame", "title-block", "projection-sign"]);
    assert!(f.misfits.is_empty());
    let title_block = item(&f, "title-block").expect("every sheet has one");
    assert_eq!(title_block.kind, ItemKind::TitleBlock);
    // 25 field names, and the entries that the program knows: number, status, type, sheet, size,
    // scale, unit.
    assert_eq!(title_block.texts().count(), 25 + 7);
}

#[test]
fn fields_are_shown_as_written_and_approval_is_never_invented() {
    let f = furnish(&full(), "A3");
    assert!(f.misfits.is_empty(), "{:?}", f.misfits);
    for (_, field) in &full().sheet.fields {
        let written = field.value.format(&style().number);
        let lines: Vec<&str> = texts(&f).iter().map(|(_, t)| t.run.text.as_str()).collect();
        assert!(lines.join(" ").contains(&written), "{written}");
    }
    let mut unapproved = full();
    unapproved.sheet.status = Status::Released;
    unapproved.sheet.fields.retain(|(key, _)| *key != FieldKey::Approver);
    let count = |d: &Drawing| {
        let f = furnish(d, "A3");
        item(&f, "title-block").map(|i| i.texts().count())
    };
    assert_eq!(count(&unapproved), count(&full()).map(|n| n - 1));
}

#[test]
fn a_draft_says_so_in_larger_letters_than_its_neighbours() {
    let f = furnish(&full(), "A3");
    let draft = texts(&f)
        .into_iter()
        .find(|(_, t)| t.run.text == "Draft – not for manufacture")
        .map(|(_, t)| t.run.height);
    assert_eq!(draft, Some(3.5));
    let mut released = full();
    released.sheet.status = Status::Released;
    let f = furnish(&released, "A3");
    assert!(says(&f, "Released") && !says(&f, "Draft – not for manufacture"));
}

#[test]
fn number_and_title_are_the_largest_texts_of_the_block() {
    let f = furnish(&full(), "A3");
    let block = item(&f, "title-block").expect("every sheet has one");
    let mut sizes: Vec<(f64, &str)> =
        block.texts().map(|t| (t.run.height, t.run.text.as_str())).collect();
    sizes.sort_by(|a, b| b.0.total_cmp(&a.0));
    assert_eq!(sizes[0], (7.0, "WL-2045"));
    assert_eq!(sizes[1], (5.0, "Bearing pedestal"));
    assert!(sizes[2].0 < 5.0);
}

#[test]
fn the_title_block_says_what_is_known_of_the_sheet() {
    let mut drawing = full();
    drawing.revisions = vec![revision("A", "First issue"), revision("B", "Seat moved")];
    let style = style();
    let facts = FurnitureFacts { scale: "1:2.5".parse().ok(), index: 2, count: 3 };
    let f = furniture(&drawing, &facts, &style, format(&style, "A2"));
    for known in ["2/3", "A2", "1:2,5", "mm", "B"] {
        assert!(says(&f, known), "{known}");
    }
    let none = FurnitureFacts { scale: None, ..facts };
    assert!(says(&furniture(&drawing, &none, &style, format(&style, "A2")), "as noted"));
}

#[test]
fn further_sheets_have_ids_of_their_own_and_no_second_table_or_notes() {
    let mut drawing = full();
    drawing.revisions = vec![revision("A", "First issue")];
    drawing.sheet.notes = vec![spanned(text("Bore free of paint."))];
    let style = style();
    let facts = FurnitureFacts { scale: Some(Scale::FULL), index: 2, count: 2 };
    let f = furniture(&drawing, &facts, &style, format(&style, "A3"));
    let ids: Vec<&str> = f.items.iter().map(|i| i.id.as_str()).collect();
    assert_eq!(ids, ["frame-2", "title-block-2", "projection-sign-2"]);
}

#[test]
fn a_text_that_was_cut_is_a_misfit_with_its_whole_text_and_its_place() {
    let mut drawing = full();
    let long = "X5CrNiMo17-12-2 solution annealed, pickled, with certificate";
    for (key, field) in &mut drawing.sheet.fields {
        if *key == FieldKey::Material {
            field.value = text(long);
        }
    }
    let f = furnish(&drawing, "A3");
    let [misfit] = f.misfits.as_slice() else { panic!("{:?}", f.misfits) };
    assert_eq!(misfit.spot, Spot::Field(CellKey::Material));
    assert_eq!((misfit.text.as_str(), misfit.extent), (long, Extent::Width));
    assert_eq!(misfit.item.as_str(), "title-block");
    assert!(misfit.excess() > 0.0 && misfit.span.is_some());
    let cut = texts(&f).into_iter().find(|(_, t)| t.run.text.ends_with('…')).expect("cut");
    assert!(misfit.place.holds(&cut.1.quad().bounds()));
    assert!(misfit.to_string().contains("field material"), "{misfit}");
}

#[test]
fn cells_tile_the_title_block() {
    let spec = style().title_block;
    let area: f64 = spec.cell.iter().map(|c| c.width * c.height).sum();
    assert!((area - spec.width * spec.height).abs() < 1e-6);
    let boxes: Vec<Rect<Sheet>> = spec
        .cell
        .iter()
        .map(|c| Rect::from_sides(c.x, c.y, c.x + c.width, c.y + c.height))
        .collect();
    let whole = Rect::from_sides(0.0, 0.0, spec.width, spec.height);
    for (i, a) in boxes.iter().enumerate() {
        assert!(whole.holds(a), "{a:?}");
        assert!(boxes[i + 1..].iter().all(|b| !a.overlaps(b)), "{a:?}");
    }
    let mut keys: Vec<CellKey> = spec.cell.iter().map(|c| c.key).collect();
    keys.sort();
    let mut all = CellKey::ALL;
    all.sort();
    assert_eq!(keys, all, "each field has one cell");
}

/// Lengths of the upright sides of the sign's frustum with their places, and the place of its
/// circles, from left to right.
fn read_sign(style: &Style) -> (Vec<(f64, f64)>, f64) {
    let f = furniture(&full(), &facts(), style, format(style, "A3"));
    let sign = item(&f, "projection-sign").expect("every sheet has one");
    assert_eq!(sign.kind, ItemKind::Symbol);
    let Some(Mark::Stroke(outlines)) = sign.marks.first() else { panic!("{:?}", sign.marks) };
    let mut ends = Vec::new();
    let mut circles = Vec::new();
    for curve in outlines.paths.iter().flat_map(|p| &p.curves) {
        if curve.is_loop() {
            circles.push(curve.bounds().centre().x);
        } else if (curve.start().x - curve.end().x).abs() < 1e-9 {
            ends.push((curve.start().x, curve.length()));
        }
    }
    ends.sort_by(|a, b| a.0.total_cmp(&b.0));
    assert!(circles.len() == 2 && (circles[0] - circles[1]).abs() < 1e-9);
    (ends, circles[0])
}

#[test]
fn the_small_end_faces_away_from_the_circles_in_first_angle_and_towards_them_in_third() {
    let mut style = style();
    for projection in [Projection::FirstAngle, Projection::ThirdAngle] {
        style.projection = projection;
        let (ends, circles) = read_sign(&style);
        let [left, right] = ends.as_slice() else { panic!("{ends:?}") };
        let small = if left.1 < right.1 { left.0 } else { right.0 };
        let large = if left.1 < right.1 { right.0 } else { left.0 };
        let small_is_nearer = (small - circles).abs() < (large - circles).abs();
        assert_eq!(small_is_nearer, projection == Projection::ThirdAngle);
    }
}

#[test]
fn a_centring_mark_stops_at_the_frame_where_a_block_stands() {
    let marks_inside = |size| {
        let f = furnish(&full(), size);
        let frame = item(&f, "frame").expect("every sheet has one");
        let inside = f.frame.grown(-1.0);
        let strokes = frame.marks.iter().filter_map(|m| match m {
            Mark::Stroke(s) => Some(s),
            Mark::Fill(_) | Mark::Text(_) => None,
        });
        let ends = strokes.flat_map(|s| &s.paths).flat_map(|p| &p.curves).map(|c| c.end());
        ends.filter(|e: &Point<Sheet>| inside.contains(*e)).count()
    };
    assert_eq!((marks_inside("A3"), marks_inside("A4")), (4, 3));
}

#[test]
fn rows_of_the_revision_table_stand_newest_last_and_grow_with_their_text() {
    let mut drawing = full();
    drawing.revisions = vec![
        revision("A", "First issue"),
        revision("B", "Counterbore deepened, holes moved outwards by 3 to clear the seal"),
        revision("C", "Material"),
    ];
    let f = furnish(&drawing, "A3");
    let table = item(&f, "revision-table").expect("there are revisions");
    assert_eq!(table.kind, ItemKind::Table);
    let base = |letters: &str| {
        let found = table.texts().find(|t| t.run.text == letters);
        found.map(|t| t.origin.y).expect("in the table")
    };
    assert!(base("Rev.") < base("A"));
    assert!((base("B") - base("A") - 7.0).abs() < 1e-9);
    assert!(base("C") - base("B") > 10.0, "the row of B holds several lines");
    assert!(f.misfits.is_empty());
}

#[test]
fn when_revisions_have_no_room_the_newest_stay_and_it_is_said() {
    let mut drawing = full();
    drawing.revisions = (0..60).map(|i| revision(&i.to_string(), "Changed")).collect();
    let f = furnish(&drawing, "A4");
    assert!(says(&f, "59") && !says(&f, "0"));
    let [misfit] = f.misfits.as_slice() else { panic!("{:?}", f.misfits) };
    assert_eq!((misfit.spot, misfit.extent), (Spot::RevisionTable, Extent::Height));
    assert!(misfit.excess() > 100.0);
}

#[test]
fn notes_are_numbered_hang_and_end_above_the_frame() {
    let mut drawing = full();
    let long = "Inner corners keep the radius that the tool leaves, at most 0,5; outer edges are \
                broken by hand and free of burrs on every machined face of the casting.";
    drawing.sheet.notes = (0..10).map(|_| spanned(text(long))).collect();
    let f = furnish(&drawing, "A3");
    let notes = item(&f, "general-notes").expect("there are notes");
    let at = |letters: &str| {
        notes.texts().find(|t| t.run.text.starts_with(letters)).expect("among the notes")
    };
    let right = |t: &PlacedText| t.origin.x + t.run.advance;
    assert!((right(at("1")) - right(at("10"))).abs() < 1e-9, "units stand below each other");
    let letters = |t: &&PlacedText| t.run.text.parse::<u32>().is_err();
    let lines: Vec<&PlacedText> = notes.texts().filter(letters).collect();
    let (first, next) = (lines[1], lines[2]);
    assert!(first.run.text.starts_with("Inner") && !next.run.text.starts_with("Inner"));
    assert!((first.origin.x - next.origin.x).abs() < 1e-9 && first.origin.y < next.origin.y);
    let bounds = notes.bounds().expect("there is ink");
    assert!(bounds.max.y <= f.frame.max.y - 5.0 + 1e-9);
    assert!(bounds.max.x <= f.blocks[0].area.min.x - 5.0);
    assert!(f.misfits.is_empty());

    let upright = furnish(&drawing, "A4");
    let title_block = upright.blocks[0].area;
    let bounds = item(&upright, "general-notes").and_then(Item::bounds).expect("there is ink");
    assert!(bounds.max.y <= title_block.min.y - 5.0 + 1e-9);
}

#[test]
fn notes_without_room_are_cut_and_it_is_said() {
    let mut drawing = full();
    drawing.sheet.notes = (0..60).map(|i| spanned(text(&format!("Note {i}")))).collect();
    let f = furnish(&drawing, "A3");
    let [misfit] = f.misfits.as_slice() else { panic!("{:?}", f.misfits) };
    assert_eq!((misfit.spot, misfit.extent), (Spot::Notes, Extent::Height));
    assert!(misfit.excess() > 0.0);
    assert!(texts(&f).last().is_some_and(|(_, t)| t.run.text.ends_with('…')));
}

#[test]
fn own_fields_stand_in_rows_on_top_and_too_many_are_a_misfit() {
    let mut drawing = full();
    drawing.sheet.own_fields = (0..5).map(|i| (format!("Own {i}"), text("value"))).collect();
    let f = furnish(&drawing, "A3");
    let block = f.blocks[0].area;
    assert!((block.height() - style().title_block.height - 18.0).abs() < 1e-9, "two rows");
    assert!(says(&f, "Own 4") && f.misfits.is_empty());

    drawing.sheet.own_fields = (0..900).map(|i| (format!("Own {i}"), text("value"))).collect();
    let f = furnish(&drawing, "A4");
    assert!(f.misfits.iter().any(|m| matches!(m.spot, Spot::OwnField(_))), "{:?}", f.misfits);
}

#[test]
fn the_same_drawing_makes_the_same_furniture() {
    assert_eq!(furnish(&overfull(), "A2"), furnish(&overfull(), "A2"));
}
