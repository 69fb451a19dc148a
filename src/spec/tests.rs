//! Whole specs through the reader: what comes out, and that nothing makes it panic.

use std::path::{Path, PathBuf};
use std::sync::Arc;

use proptest::prelude::*;

use super::*;
use crate::geom::{Point, Vector};
use crate::source::{Diagnostics, SourceMap, World, WorldError, render::render};
use crate::units::LengthUnit;

const SPEC: &str = r##"
format = 1

[drawing]
number = "HX-7"
title = "Flange"
units = "in"
scale = "1:2"
sheet = "A2"
places = 2
date = 2026-04-02
material = "C45 {{{dia}}}"
fields = [{ key = "Order", value = "{dia + 0.5}" }]
notes = ["Rim {dia} from {25.4 mm}"]

[parameters]
dia = "2 * rad"
rad = 1.5

[[dimension]]
view = "front"
chain = ["rim.left", "bolt.1.centre", "rim.right"]
tolerance = "+-0.1"
forms = [{}, { reference = true, places = 3 }]

[[view]]
id = "front"
from = "front"
section = true
dimensions = [
  { of = "rim.diameter", tolerance = { plus = 0.1, minus = 0 }, place = { angle = 30 } },
  { between = ["rim.left", "bolt.1.centre"], direction = "horizontal", tolerance = { limits = ["25.4 mm", 2] } },
  { angle = ["a", "b"], tolerance = "±0.5" },
  { chamfer = "a" },
  { baseline = ["rim.left", "a.x", "b.x"], id = "base" },
]
callouts = [{ of = "bolt", thread = "M8", depth = 0.5, counterbore = { of = "rim", depth = 0.25 } }]

[[view.shapes]]
id = "rim"
circle = { centre = [0, 0], diameter = "dia" }
hatch = true

[[view.shapes]]
id = "bolt"
circle = { centre = [1, 0], diameter = 0.25 }
repeat = { polar = 4, about = [0, 0] }

[[view.shapes]]
id = "a"
path = "M 0 0 h {dia}"

[[view.shapes]]
id = "b"
class = "hidden"
arc = { centre = [0, 0], radius = 1, start = 350, end = 10 }
repeat = { linear = 3, step = [0, "1 in"] }

[[callout]]
at = "a.middle"
text = ["One", "Two"]
"##;

fn read_sound(text: &str) -> Drawing {
    let mut sources = SourceMap::default();
    let mut diagnostics = Diagnostics::default();
    let drawing = read_text("t.toml", text, &mut sources, &mut diagnostics);
    let said = render(&diagnostics.into_sorted(), &sources, false);
    drawing.unwrap_or_else(|| panic!("{said}"))
}

fn shapes(view: &ViewSpec) -> &[Shape] {
    let Geometry::Drawn(shapes) = &view.geometry;
    shapes
}

#[test]
fn ids_come_from_view_kind_and_anchors() {
    let drawing = read_sound(SPEC);
    let ids: Vec<&str> = drawing.annotations.iter().map(|a| a.id.as_str()).collect();
    let expected = [
        "front.chain.rim.left~bolt.1.centre~rim.right",
        "front.rim.diameter",
        "front.rim.left~bolt.1.centre",
        "front.angle.a~b",
        "front.a.chamfer",
        "base",
        "front.bolt.callout",
        "a.middle.note",
    ];
    assert_eq!(ids, expected);
}

#[test]
fn ids_do_not_depend_on_the_order_in_the_file() {
    let ids = |text: &str| {
        let mut ids: Vec<String> =
            read_sound(text).annotations.iter().map(|a| a.id.to_string()).collect();
        ids.sort();
        ids
    };
    let start = SPEC.find("[[dimension]]").expect("it has one");
    let end = SPEC.find("[[view]]").expect("it has one");
    let moved = [&SPEC[..start], &SPEC[end..], &SPEC[start..end]].concat();
    assert_eq!(ids(SPEC), ids(&moved));
}

#[test]
fn inches_become_millimetres_where_a_length_is_read_and_nowhere_else() {
    let drawing = read_sound(SPEC);
    assert_eq!(drawing.sheet.units, LengthUnit::Inch);
    let shapes = shapes(&drawing.views[0]);
    let circle = Outline::Circle { centre: Point::new(0.0, 0.0), diameter: 3.0 * 25.4 };
    assert_eq!(shapes[0].outline, circle);
    let Outline::Path { data } = &shapes[2].outline else { panic!("a path") };
    assert_eq!(data.value, "M 0 0 h 76.19999999999999");
    let Outline::Arc { radius, start, sweep, .. } = shapes[3].outline else { panic!("an arc") };
    assert_eq!((radius, start, sweep), (25.4, 350.0, 20.0));
    let offsets = vec![Vector::new(0.0, 25.4), Vector::new(0.0, 50.8)];
    assert_eq!(shapes[3].repeat, Some(Repeat::At { offsets }));
    let pieces = &drawing.sheet.notes[0].value.pieces;
    let literal = |s: &str| TextPiece::Literal(s.to_owned());
    let expected =
        [literal("Rim "), TextPiece::Number(3.0), literal(" from "), TextPiece::Number(1.0)];
    assert_eq!(pieces[..], expected);
}

#[test]
fn tolerances_are_millimetres_or_degrees() {
    let drawing = read_sound(SPEC);
    let tolerance = |id: &str| {
        let a = drawing.annotations.iter().find(|a| a.id.as_str() == id).expect("it is there");
        match &a.says {
            Says::Dimension(_, form) => form.tolerance,
            other => panic!("{other:?}"),
        }
    };
    let deviations = Tolerance::Deviations { upper: 0.1 * 25.4, lower: 0.0 };
    assert_eq!(tolerance("front.rim.diameter"), deviations);
    let limits = Tolerance::Limits { upper: 50.8, lower: 25.4 };
    assert_eq!(tolerance("front.rim.left~bolt.1.centre"), limits);
    assert_eq!(tolerance("front.angle.a~b"), Tolerance::Symmetric(0.5));
}

#[test]
fn a_reference_member_takes_no_tolerance_from_its_chain() {
    let drawing = read_sound(SPEC);
    let Says::Chain(anchors, LineDirection::Auto, forms) = &drawing.annotations[0].says else {
        panic!("a chain")
    };
    assert_eq!((anchors.len(), forms.len()), (3, 2));
    assert_eq!(forms[0].tolerance, Tolerance::Symmetric(0.1 * 25.4));
    let reference = Form { standing: Standing::Reference, places: Some(3), ..Form::default() };
    assert_eq!(forms[1], reference);
}

#[test]
fn standing_fields_are_ordered_and_braces_escaped() {
    let sheet = read_sound(SPEC).sheet;
    let keys: Vec<FieldKey> = sheet.fields.iter().map(|(k, _)| *k).collect();
    assert_eq!(keys, [FieldKey::Date, FieldKey::Material]);
    let literal = |s: &str| TextPiece::Literal(s.to_owned());
    let material = [literal("C45 {"), TextPiece::Number(3.0), literal("}")];
    assert_eq!(sheet.fields[1].1.value.pieces[..], material);
    assert_eq!(sheet.own_fields[0].1.pieces[..], [TextPiece::Number(3.5)]);
}

#[test]
fn classes_follow_the_hatch_unless_given() {
    let drawing = read_sound(SPEC);
    let classes: Vec<LineClass> = shapes(&drawing.views[0]).iter().map(|s| s.class).collect();
    let expected = [LineClass::Cut, LineClass::Visible, LineClass::Visible, LineClass::Hidden];
    assert_eq!(classes, expected);
    assert!(drawing.views[0].is_section);
}

/// A world with nothing in it but a reason.
struct Broken(WorldError);

impl World for Broken {
    fn read(&self, _: &Path) -> Result<Arc<str>, WorldError> {
        Err(self.0.clone())
    }
}

#[test]
fn a_file_that_cannot_be_read_is_one_diagnostic() {
    let path = PathBuf::from("x.toml");
    let too_large = WorldError::TooLarge { path: path.clone(), bytes: 9, limit: 8 };
    for e in [WorldError::Missing(path.clone()), WorldError::NotText(path.clone()), too_large] {
        let mut diagnostics = Diagnostics::default();
        let message = e.to_string();
        let drawing = read(&Broken(e), &path, &mut SourceMap::default(), &mut diagnostics);
        let all = diagnostics.into_sorted();
        assert!(drawing.is_none() && all.len() == 1 && all[0].message == message, "{all:?}");
    }
}

#[test]
fn a_spec_that_is_too_large_is_refused_before_it_is_parsed() {
    let text = "#".repeat(5 << 20);
    let mut diagnostics = Diagnostics::default();
    assert!(read_text("t", &text, &mut SourceMap::default(), &mut diagnostics).is_none());
    assert!(diagnostics.into_sorted()[0].message.contains("a spec has at most"));
}

#[test]
fn problems_are_limited_in_number() {
    let text: String = (0..5000).map(|i| format!("x{i} = 1\n")).collect();
    let mut diagnostics = Diagnostics::default();
    let text = format!("format = 1\n{text}");
    assert!(read_text("t", &text, &mut SourceMap::default(), &mut diagnostics).is_none());
    assert_eq!(diagnostics.into_sorted().len(), 1001);
}

#[test]
fn a_long_chain_of_parameters_is_no_deeper_than_a_short_one() {
    let chain: String = (1..9000).map(|i| format!("p{i} = \"p{} + 1\"\n", i - 1)).collect();
    let text = SPEC.replace("[parameters]\n", &format!("[parameters]\n{chain}p0 = 1\n"));
    let text = text.replace("Rim {dia}", "Rim {p8999}");
    let drawing = read_sound(&text);
    let pieces = &drawing.sheet.notes[0].value.pieces;
    assert_eq!(pieces[1], TextPiece::Number(9000.0));
}

fn survives(text: &str) {
    let mut sources = SourceMap::default();
    let mut diagnostics = Diagnostics::default();
    let drawing = read_text("t.toml", text, &mut sources, &mut diagnostics);
    assert_eq!(drawing.is_none(), diagnostics.has_errors());
    let all = diagnostics.into_sorted();
    for d in &all {
        let spans = d.span.iter().chain(d.related.iter().map(|(s, _)| s));
        for span in spans {
            assert!(text.get(span.start..span.end).is_some(), "{d:?} is not in the text");
        }
    }
    assert!(all.is_empty() || !render(&all, &sources, false).is_empty());
}

/// Tokens that make trouble where they do not belong.
fn tokens() -> impl Strategy<Value = String> {
    let fixed = [
        "nan",
        "-inf",
        "1e308",
        "-0.0",
        "\"\"",
        "\"{\"",
        "\"}\"",
        "'''\n'''",
        "[]",
        "{}",
        "[[",
        "]]",
        "=",
        ".",
        "\n",
        "\"",
        "0x7fffffffffffffff",
        "2026-02-30",
        "true",
        "\"±\"",
        "\"1/0\"",
        "\"\\u0000\"",
        "\u{202e}",
        "é",
        "9999999999999999999999",
        "\"through\"",
        "id = ",
        "repeat = { grid = [10000, 10000], pitch = [1, 1] }",
    ];
    prop_oneof![proptest::sample::select(fixed.map(str::to_owned).to_vec()), "\\PC{0,6}"]
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 400, ..ProptestConfig::default() })]

    #[test]
    fn no_mutated_spec_panics(edits in prop::collection::vec((any::<prop::sample::Index>(), 0usize..12, tokens()), 1..6)) {
        let mut text = SPEC.to_owned();
        for (place, removed, token) in edits {
            let at = place.index(text.len() + 1);
            let at = (0..=at).rev().find(|i| text.is_char_boundary(*i)).unwrap_or(0);
            let end = (at + removed).min(text.len());
            let end = (end..=text.len()).find(|i| text.is_char_boundary(*i)).unwrap_or(text.len());
            text.replace_range(at..end, &token);
        }
        survives(&text);
    }

    #[test]
    fn no_value_in_any_place_panics(n in any::<prop::sample::Index>(), token in tokens()) {
        let values: Vec<usize> = SPEC.match_indices("= ").map(|(i, _)| i + 2).collect();
        let at = values[n.index(values.len())];
        let end = at + SPEC[at..].find([',', '}', '\n']).unwrap_or(0);
        survives(&[&SPEC[..at], &token, &SPEC[end..]].concat());
    }

    #[test]
    fn no_text_panics(text in "\\PC{0,200}") {
        survives(&text);
    }
}
