//! Sheets as drawn against tables that are not ours.
//!
//! What is compared is ink: lengths, places and widths of the strokes and the heights of the
//! lettering that the furniture of a sheet puts into the scene, not the numbers of the style. The
//! tables lie in `tests/data`; the first line of each says where its numbers come from.

use std::collections::BTreeMap;
use std::io::{self, Write};

use witnessline::geom::{Curve, Point, Rect, Sheet};
use witnessline::scene::{Item, ItemKind, Mark, PlacedText, Stroke};
use witnessline::sheet::{EntryText, Furniture, FurnitureFacts, cell_of, entry, furniture};
use witnessline::source::{FileId, Span};
use witnessline::spec::{
    Drawing, FieldKey, FormatChoice, ScaleChoice, SheetSpec, Spanned, Status, Text, TextPiece,
};
use witnessline::standards;
use witnessline::standards::title_block::{FIELDS, Field, Obligation};
use witnessline::style::{CellKey, FormatSpec, Style, builtin};
use witnessline::text::{Lettering, Run};
use witnessline::units::{LengthUnit, Scale};

/// Lengths of ink are compared to a thousandth of a millimetre: rounding in f64, and no more.
const EXACT: f64 = 1e-3;

/// Past the test harness, which keeps the output of passing tests to itself.
fn ran(check: &str) {
    // One write, so that lines of tests running beside this one do not cut it in two.
    let line = format!("\noutside check: {check}: ran\n");
    let _ = io::stderr().write_all(line.as_bytes());
}

/// A row of a table by its column names.
type Row = BTreeMap<String, String>;

/// The rows of a table in `tests/data`, below its source line and its header.
fn table(name: &str) -> Vec<Row> {
    let path = format!("{}/tests/data/{name}.csv", env!("CARGO_MANIFEST_DIR"));
    let text = std::fs::read_to_string(path).expect("the tables come with the tests");
    let mut lines = text.lines();
    assert!(lines.next().is_some_and(|l| l.starts_with("# source: ")), "{name}");
    let header = cells(lines.next().expect("a header"));
    let rows: Vec<Row> = lines
        .filter(|l| !l.trim().is_empty())
        .map(|l| header.iter().cloned().zip(cells(l)).collect())
        .collect();
    assert!(!rows.is_empty(), "{name}");
    rows
}

/// The cells of a line; quoted ones may hold commas.
fn cells(line: &str) -> Vec<String> {
    let mut cells = vec![String::new()];
    let mut quoted = false;
    for c in line.chars() {
        match c {
            '"' => quoted = !quoted,
            ',' if !quoted => cells.push(String::new()),
            _ => cells.last_mut().expect("there is always a last cell").push(c),
        }
    }
    cells
}

fn number(row: &Row, column: &str) -> f64 {
    row[column].parse().unwrap_or_else(|_| panic!("{column} of {row:?} is a number"))
}

fn equal(a: f64, b: f64) -> bool {
    (a - b).abs() < EXACT
}

fn spanned<T>(value: T) -> Spanned<T> {
    Spanned { value, span: Span { file: FileId(0), start: 0, end: 0 } }
}

fn text(letters: &str) -> Text {
    Text { pieces: vec![TextPiece::Literal(letters.into())] }
}

/// A drawing of which each field holds what `fill` gives for it.
fn drawing(fill: impl Fn(CellKey) -> String) -> Drawing {
    let fields = [
        (FieldKey::Owner, CellKey::Owner),
        (FieldKey::Department, CellKey::Department),
        (FieldKey::Reference, CellKey::Reference),
        (FieldKey::Creator, CellKey::Creator),
        (FieldKey::Approver, CellKey::Approver),
        (FieldKey::Date, CellKey::Date),
        (FieldKey::DocumentType, CellKey::DocumentType),
        (FieldKey::Language, CellKey::Language),
        (FieldKey::Classification, CellKey::Classification),
    ];
    let sheet = SheetSpec {
        number: spanned(fill(CellKey::Number)),
        title: Some(spanned(fill(CellKey::Title))),
        subtitle: Some(fill(CellKey::Subtitle)),
        status: Status::Released,
        style: spanned("iso".into()),
        units: LengthUnit::Millimetre,
        format: FormatChoice::Auto,
        scale: ScaleChoice::Auto,
        places: None,
        fields: fields.map(|(key, cell)| (key, spanned(text(&fill(cell))))).into(),
        own_fields: Vec::new(),
        notes: Vec::new(),
        span: spanned(()).span,
    };
    Drawing {
        sheet,
        parts: Vec::new(),
        views: Vec::new(),
        annotations: Vec::new(),
        revisions: Vec::new(),
        allow: Vec::new(),
    }
}

fn plain() -> Drawing {
    drawing(|key| format!("The {}", key.name()))
}

const FACTS: FurnitureFacts = FurnitureFacts { scale: Some(Scale::FULL), index: 1, count: 1 };

fn iso() -> Style {
    builtin("iso").expect("compiled in")
}

fn format<'a>(style: &'a Style, name: &str) -> &'a FormatSpec {
    style.format.iter().find(|f| f.name == name).expect("the style has the sheet size")
}

fn item(furniture: &Furniture, kind: ItemKind) -> &Item {
    furniture.items.iter().find(|i| i.kind == kind).expect("every sheet has one")
}

fn strokes(item: &Item) -> Vec<&Stroke> {
    let mut strokes = Vec::new();
    for mark in &item.marks {
        match mark {
            Mark::Stroke(s) => strokes.push(s),
            Mark::Fill(_) | Mark::Text(_) => {}
        }
    }
    strokes
}

/// A straight stroke with its width.
#[derive(Clone, Copy, Debug)]
struct Ruled {
    from: Point<Sheet>,
    to: Point<Sheet>,
    width: f64,
}

/// A frame as read from its ink.
struct DrawnFrame {
    /// Inner of the two rectangles and its width.
    frame: (Rect<Sheet>, f64),
    /// Outer of the two and its width.
    border: (Rect<Sheet>, f64),
    /// Single strokes that reach into the frame.
    centring: Vec<Ruled>,
    /// Other single strokes.
    zones: Vec<Ruled>,
    texts: Vec<PlacedText>,
}

fn read_frame(style: &Style, size: &str) -> DrawnFrame {
    let furniture = furniture(&plain(), &FACTS, style, format(style, size));
    let item = item(&furniture, ItemKind::Frame);
    let mut rectangles = Vec::new();
    let mut singles = Vec::new();
    for stroke in strokes(item) {
        for path in &stroke.paths {
            match (path.closed, path.curves.as_slice()) {
                (true, _) => rectangles.push((path.bounds().expect("ink"), stroke.width)),
                (false, [Curve::Line(l)]) => {
                    singles.push(Ruled { from: l.from, to: l.to, width: stroke.width });
                }
                (false, _) => panic!("a frame has rectangles and single strokes: {path:?}"),
            }
        }
    }
    rectangles.sort_by(|a, b| a.0.width().total_cmp(&b.0.width()));
    let [frame, border] = rectangles.as_slice() else { panic!("{rectangles:?}") };
    let trimmed = format(style, size);
    let on_axis = |r: &Ruled| {
        let near = |a: f64, b: f64| (a - b).abs() <= 1.0;
        let upright = near(r.from.x, r.to.x) && near(r.from.x, trimmed.width / 2.0);
        upright || near(r.from.y, r.to.y) && near(r.from.y, trimmed.height / 2.0)
    };
    let (centring, zones) = singles.into_iter().partition(on_axis);
    let texts = item.texts().cloned().collect();
    DrawnFrame { frame: *frame, border: *border, centring, zones, texts }
}

/// The rows of ISO 5457 for the sizes that the style has, each with its frame as drawn.
fn frames() -> Vec<(Row, DrawnFrame)> {
    let style = iso();
    let rows = table("iso5457_sheets");
    assert_eq!(rows.len(), style.format.len());
    rows.into_iter()
        .map(|row| {
            let drawn = read_frame(&style, &row["size"]);
            (row, drawn)
        })
        .collect()
}

fn rule(item: &str) -> String {
    let rows = table("iso5457_frame_rules");
    let row = rows.iter().find(|r| r["item"] == item).expect("the table has the rule");
    row["value"].clone()
}

fn rule_mm(item: &str) -> f64 {
    rule(item).parse().expect("a length")
}

#[test]
fn trimmed_sizes_are_those_of_iso_216() {
    let rows = table("iso216_paper_sizes");
    for format in &iso().format {
        let row = rows.iter().find(|r| r["size"] == format.name).expect("an A size");
        let (short, long) = (number(row, "short_mm"), number(row, "long_mm"));
        assert!(equal(format.width.min(format.height), short), "{}", format.name);
        assert!(equal(format.width.max(format.height), long), "{}", format.name);
        let size = standards::sheets::SHEETS.iter().find(|s| s.name == format.name);
        assert_eq!(size.map(|s| (s.short, s.long)), Some((short, long)));
    }
    ran("ISO 216 sheet sizes");
}

#[test]
fn drawing_space_and_margins_are_those_of_iso_5457() {
    let style = iso();
    for (row, drawn) in frames() {
        let trimmed = format(&style, &row["size"]);
        let (frame, _) = drawn.frame;
        let (short, long) = (number(&row, "a2_drawing_mm"), number(&row, "b2_drawing_mm"));
        let upright = row["orientation"] == "portrait";
        let (width, height) = if upright { (short, long) } else { (long, short) };
        assert!(equal(frame.width(), width) && equal(frame.height(), height), "{row:?} {frame:?}");
        assert!(equal(frame.min.x, number(&row, "border_left_mm")), "{row:?}");
        assert!(equal(trimmed.width - frame.max.x, number(&row, "border_right_mm")), "{row:?}");
        assert!(equal(frame.min.y, number(&row, "border_top_mm")), "{row:?}");
        assert!(equal(trimmed.height - frame.max.y, number(&row, "border_bottom_mm")), "{row:?}");
        assert!(equal(frame.min.x, rule_mm("filing_margin")));
    }
    ran("ISO 5457 drawing space and margins");
}

#[test]
fn frame_lines_are_as_wide_as_iso_5457_asks() {
    for (row, drawn) in frames() {
        assert!(equal(drawn.frame.1, rule_mm("frame_line_width")), "{row:?}");
        assert!(equal(drawn.border.1, rule_mm("grid_reference_line_width")), "{row:?}");
        for zone in &drawn.zones {
            assert!(equal(zone.width, rule_mm("grid_reference_line_width")), "{row:?}");
        }
        assert_eq!(drawn.centring.len(), 4, "{row:?}");
        for mark in &drawn.centring {
            assert!(equal(mark.width, rule_mm("centring_mark_line_width")), "{row:?}");
        }
    }
    ran("ISO 5457 line widths of the frame");
}

/// Places of the zone strokes along one side of the sheet, rising, with the centring mark's.
fn divisions(drawn: &DrawnFrame, side: &str) -> Vec<f64> {
    let (frame, border) = (drawn.frame.0, drawn.border.0);
    let between = |v: f64, a: f64, b: f64| v >= a.min(b) - EXACT && v <= a.max(b) + EXACT;
    let on_side = |r: &&Ruled| match side {
        "top" => equal(r.from.x, r.to.x) && between(r.from.y, border.min.y, frame.min.y),
        "bottom" => equal(r.from.x, r.to.x) && between(r.from.y, frame.max.y, border.max.y),
        "left" => equal(r.from.y, r.to.y) && between(r.from.x, border.min.x, frame.min.x),
        "right" => equal(r.from.y, r.to.y) && between(r.from.x, frame.max.x, border.max.x),
        _ => panic!("{side}"),
    };
    let level = matches!(side, "top" | "bottom");
    let mut places: Vec<f64> = drawn
        .zones
        .iter()
        .chain(&drawn.centring)
        .filter(on_side)
        .map(|r| if level { r.from.x } else { r.from.y })
        .collect();
    places.sort_by(f64::total_cmp);
    places
}

#[test]
fn fields_are_counted_and_measured_as_in_iso_5457() {
    for (row, drawn) in frames() {
        let upright = row["orientation"] == "portrait";
        let sides: &[&str] = match row["references_on"].as_str() {
            "all four sides" => &["top", "bottom", "left", "right"],
            "top and right only" => &["top", "right"],
            other => panic!("{other}"),
        };
        for side in ["top", "bottom", "left", "right"] {
            let places = divisions(&drawn, side);
            if !sides.contains(&side) {
                assert_eq!(places.len(), 1, "only the centring mark: {row:?} {side}");
                continue;
            }
            let along_long = matches!(side, "left" | "right") == upright;
            let (fields, corner) = if along_long {
                ("fields_long_side", "corner_field_long_mm")
            } else {
                ("fields_short_side", "corner_field_short_mm")
            };
            assert!(equal(places.len() as f64 + 1.0, number(&row, fields)), "{row:?} {side}");
            assert!(equal(places[0], number(&row, corner)), "{row:?} {side} {places:?}");
            let length = number(&row, "field_length_mm");
            assert!(places.windows(2).all(|w| equal(w[1] - w[0], length)), "{places:?}");
        }
    }
    ran("ISO 5457 fields and corner fields");
}

#[test]
fn zone_characters_are_those_of_iso_5457() {
    for (row, drawn) in frames() {
        let height = rule_mm("grid_reference_text_height");
        assert!(drawn.texts.iter().all(|t| equal(t.run.height, height) && equal(t.angle, 0.0)));
        let frame = drawn.frame.0;
        let mut right: Vec<&PlacedText> =
            drawn.texts.iter().filter(|t| t.origin.x > frame.max.x).collect();
        right.sort_by(|a, b| a.origin.y.total_cmp(&b.origin.y));
        let mut top: Vec<&PlacedText> =
            drawn.texts.iter().filter(|t| t.origin.y < frame.min.y).collect();
        top.sort_by(|a, b| a.origin.x.total_cmp(&b.origin.x));

        assert!(rule("grid_letters").ends_with("without I and O"));
        let letters: Vec<String> =
            ('A'..='Z').filter(|c| !matches!(c, 'I' | 'O')).map(String::from).collect();
        let drawn_letters: Vec<&String> = right.iter().map(|t| &t.run.text).collect();
        assert!(!right.is_empty() && letters.iter().zip(&drawn_letters).all(|(a, b)| a == *b));
        let numerals: Vec<String> = (1..=top.len()).map(|n| n.to_string()).collect();
        let drawn_numerals: Vec<String> = top.iter().map(|t| t.run.text.clone()).collect();
        assert_eq!(drawn_numerals, numerals, "{row:?}");
    }
    ran("ISO 5457 letters and numerals");
}

#[test]
fn centring_marks_lie_on_the_axes_and_reach_into_the_drawing_space() {
    let style = iso();
    let tolerance = rule_mm("centring_mark_symmetry_tolerance");
    for (row, drawn) in frames() {
        let trimmed = format(&style, &row["size"]);
        let (frame, border) = (drawn.frame.0, drawn.border.0);
        for mark in &drawn.centring {
            let (off, outer, inner) = if equal(mark.from.x, mark.to.x) {
                let outer = [border.min.y, border.max.y].iter().any(|y| equal(*y, mark.from.y));
                let depth = (mark.to.y - frame.min.y).min(frame.max.y - mark.to.y);
                (mark.from.x - trimmed.width / 2.0, outer, depth)
            } else {
                let outer = [border.min.x, border.max.x].iter().any(|x| equal(*x, mark.from.x));
                let depth = (mark.to.x - frame.min.x).min(frame.max.x - mark.to.x);
                (mark.from.y - trimmed.height / 2.0, outer, depth)
            };
            assert!(off.abs() <= tolerance && outer, "{row:?} {mark:?}");
            // Ten millimetres by the table's note; on A4 the title block spans the width, and the
            // mark below it ends at the frame (common practice).
            let at_title_block = trimmed.name == "A4" && mark.to.y > frame.max.y - 1.0;
            assert!(equal(inner, if at_title_block { 0.0 } else { 10.0 }), "{row:?} {mark:?}");
        }
    }
    ran("ISO 5457 centring marks");
}

#[test]
fn the_title_block_stands_where_iso_5457_and_iso_7200_put_it() {
    let style = iso();
    for (row, drawn) in frames() {
        let furniture = furniture(&plain(), &FACTS, &style, format(&style, &row["size"]));
        let block = furniture.blocks.iter().find(|b| b.item.as_str() == "title-block");
        let area = block.expect("every sheet has one").area;
        let frame = drawn.frame.0;
        assert!(rule("title_block_position").starts_with("bottom right"));
        assert!(equal(area.max.x, frame.max.x) && equal(area.max.y, frame.max.y), "{row:?}");
        // The source line of iso7200_title_block_fields.csv: total width 180.
        assert!(equal(area.width(), 180.0) && equal(standards::title_block::WIDTH, 180.0));
        // The block's own ink reaches all over it and no further than half a line beyond.
        let ink = item(&furniture, ItemKind::TitleBlock).bounds().expect("ink");
        assert!(ink.grown(EXACT).holds(&area) && area.grown(0.25 + EXACT).holds(&ink), "{ink:?}");
    }
    ran("place and width of the title block");
}

#[test]
fn line_groups_are_those_of_iso_128() {
    let rows = table("iso128_line_widths");
    let column = |name: &str| rows.iter().map(|r| number(r, name)).collect::<Vec<_>>();
    let series = column("d_mm");
    assert_eq!(series, standards::lines::WIDTHS);
    for group in &iso().group {
        let row = rows.iter().find(|r| equal(number(r, "d_mm"), group.wide)).expect("a width");
        assert_eq!(row["is_line_group"], "yes");
        assert_eq!(row["preferred_group"], "yes");
        assert!(equal(group.narrow, number(row, "narrow_line_mm")), "{row:?}");
        assert!(equal(group.lettering, number(row, "text_and_symbol_line_mm")), "{row:?}");
    }
    for row in rows.iter().filter(|r| r["is_line_group"] == "yes") {
        let group = standards::lines::group(number(row, "wide_line_mm")).expect("a group");
        assert!(equal(group.narrow, number(row, "narrow_line_mm")), "{row:?}");
        assert!(equal(group.lettering, number(row, "text_and_symbol_line_mm")), "{row:?}");
    }
    // Whatever the furniture is drawn with is of the series.
    let style = iso();
    for name in ["A4", "A3", "A0"] {
        let furniture = furniture(&plain(), &FACTS, &style, format(&style, name));
        for width in furniture.items.iter().flat_map(strokes).map(|s| s.width) {
            assert!(series.iter().any(|w| equal(*w, width)), "{width}");
        }
    }
    ran("ISO 128 line widths and groups");
}

/// Box of a letter's ink at capital height 1.
fn ink(letter: char) -> kurbo::Rect {
    let font = Lettering::bundled();
    let glyph = font.glyph(letter).expect("the font has it");
    font.ink(glyph).expect("it is no blank")
}

#[test]
fn lettering_has_the_heights_and_proportions_of_iso_3098() {
    let rows = table("iso3098_text_heights");
    let heights: Vec<f64> = rows.iter().map(|r| number(r, "h_mm")).collect();
    assert_eq!(heights, standards::lettering::HEIGHTS);
    let style = iso();
    for name in ["A4", "A3", "A1"] {
        let furniture = furniture(&plain(), &FACTS, &style, format(&style, name));
        for placed in furniture.items.iter().flat_map(Item::texts) {
            let h = placed.run.height;
            assert!(heights.iter().any(|known| equal(*known, h)), "{h} {:?}", placed.run.text);
        }
    }
    for row in &rows {
        let h = number(row, "h_mm");
        assert!((Run::new("H", h).ink.height() - h).abs() < 0.01 * h, "capitals are h high");
        let lower = Run::new("x", h).ink.height();
        assert!((lower - number(row, "lower_case_B_mm")).abs() < 0.02 * h, "{lower} {row:?}");
        // Stems and bars of the font lie within a tenth of the widths of type B, which are a
        // whole step of the series away from those of type A.
        let (stem, bar) = (ink('I').width() * h, ink('-').height() * h);
        let nominal = number(row, "h_over_10_mm");
        for stroke in [stem, bar] {
            assert!((stroke / nominal - 1.0).abs() < 0.12, "{stroke} {row:?}");
        }
    }
    // The groups' lettering width goes with their text height.
    for group in &style.group {
        let row = rows.iter().find(|r| equal(number(r, "h_mm"), group.text)).expect("a height");
        assert!(equal(group.lettering, number(row, "line_B_nominal_mm")), "{row:?}");
    }
    ran("ISO 3098 heights and proportions");
}

/// The field of the standard's table with this name.
fn field_named(name: &str) -> Option<Field> {
    Some(match name {
        "Legal owner" => Field::LegalOwner,
        "Identification number" => Field::IdentificationNumber,
        "Revision index" => Field::RevisionIndex,
        "Date of issue" => Field::DateOfIssue,
        "Segment/sheet number" => Field::SheetNumber,
        "Number of segments/sheets" => Field::SheetCount,
        "Language code" => Field::LanguageCode,
        "Title" => Field::Title,
        "Supplementary title" => Field::SupplementaryTitle,
        "Responsible department" => Field::Department,
        "Technical reference" => Field::TechnicalReference,
        "Approval person" => Field::ApprovalPerson,
        "Creator" => Field::Creator,
        "Document type" => Field::DocumentType,
        "Classification/key words" => Field::Classification,
        "Document status" => Field::DocumentStatus,
        "Paper size" => Field::PaperSize,
        // Of text documents, not of drawings.
        "Page number" | "Number of pages" => return None,
        _ => panic!("the table has a field {name} that is not known here"),
    })
}

#[test]
fn every_mandatory_field_of_iso_7200_is_drawn_with_its_name_and_entry() {
    let rows = table("iso7200_title_block_fields");
    let style = iso();
    let format = format(&style, "A3");
    let drawing = plain();
    let furniture = furniture(&drawing, &FACTS, &style, format);
    let block = item(&furniture, ItemKind::TitleBlock);
    let lines: Vec<&str> = block.texts().map(|t| t.run.text.as_str()).collect();
    let mut known = 0;
    for row in &rows {
        let Some(field) = field_named(&row["field"]) else { continue };
        known += 1;
        let rule = FIELDS.iter().find(|r| r.field == field).expect("each field has a rule");
        let mandatory = row["obligation"] == "mandatory";
        assert_eq!(rule.obligation == Obligation::Mandatory, mandatory, "{row:?}");
        assert_eq!(rule.characters, row["recommended_characters"].parse().ok(), "{row:?}");
        if !mandatory {
            continue;
        }
        let key = cell_of(field);
        let cell = style.title_block.cell.iter().find(|c| c.key == key).expect("a cell");
        assert!(lines.contains(&cell.name.as_str()), "{row:?}");
        let EntryText::Text(entry) = entry(key, &drawing, &FACTS, &style, format).text else {
            panic!("{row:?} is text");
        };
        assert!(!entry.is_empty() && lines.join(" ").contains(&entry), "{row:?} {entry}");
    }
    assert_eq!(known, FIELDS.len());
    ran("ISO 7200 mandatory fields");
}

#[test]
fn entries_of_the_recommended_length_of_iso_7200_have_room() {
    let rows = table("iso7200_title_block_fields");
    let letters = |key: CellKey| {
        let row = rows.iter().find(|r| field_named(&r["field"]).map(cell_of) == Some(key));
        let length = row.and_then(|r| r["recommended_characters"].parse().ok()).unwrap_or(12);
        "HOUSING for bearing 6204, left".chars().cycle().take(length).collect::<String>()
    };
    let style = iso();
    let furniture = furniture(&drawing(letters), &FACTS, &style, format(&style, "A4"));
    let cut: Vec<String> = furniture.misfits.iter().map(ToString::to_string).collect();
    assert!(cut.is_empty(), "{cut:#?}");
    ran("ISO 7200 recommended lengths");
}

#[test]
fn scales_are_those_of_iso_5455() {
    let rows = table("iso5455_scales");
    for row in &rows {
        let scale: Scale = row["scale"].parse().expect("a scale");
        assert!((scale.factor() / number(row, "factor") - 1.0).abs() < 1e-9, "{row:?}");
        assert!(standards::scales::is_preferred(scale), "{row:?}");
    }
    for scale in &iso().scales {
        assert!(rows.iter().any(|r| r["scale"] == *scale), "{scale}");
    }
    ran("ISO 5455 scales");
}
