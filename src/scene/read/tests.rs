//! Sheets as other hands leave them, and files that are none.

use super::*;
use crate::geom::{Curve, Point};
use crate::scene::{Ink, Role};

fn sheet(body: &str) -> String {
    format!(
        "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"420mm\" height=\"297mm\" \
         viewBox=\"0 0 420 297\" fill=\"none\" stroke=\"#000\">{body}</svg>"
    )
}

fn read(body: &str) -> Scene {
    read_svg(&sheet(body)).expect("it holds an item")
}

fn first_stroke(scene: &Scene) -> &Stroke {
    match &scene.items[0].marks[0] {
        Mark::Stroke(s) => s,
        other => panic!("{other:?} is no stroke"),
    }
}

#[test]
fn nested_transforms_and_inherited_widths_are_applied() {
    let scene = read(
        "<g transform=\"translate(100 50)\" stroke-width=\"0.25\"><g transform=\"scale(2)\">\
         <g id=\"a\" data-kind=\"outline\" data-view=\"front\">\
         <path d=\"m1 1h4\" data-role=\"ext\"/></g></g></g>",
    );
    let stroke = first_stroke(&scene);
    let (curve, width) = (stroke.paths[0].curves[0], stroke.width);
    assert!(curve.start().is_at(Point::new(102.0, 52.0)));
    assert!(curve.end().is_at(Point::new(110.0, 52.0)));
    assert!((width - 0.5).abs() < 1e-9);
    assert_eq!(stroke.role, Some(Role::Ext));
    assert_eq!(scene.items[0].view, Some(ViewId::new("front")));
}

#[test]
fn a_viewport_in_other_units_still_gives_millimetres() {
    // 210 mm wide, drawn in tenths of a millimetre from an origin of its own.
    let svg = "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"21cm\" height=\"100mm\" \
               viewBox=\"-100 -100 2100 1000\" stroke=\"#000\"><g data-kind=\"frame\">\
               <line x1=\"0\" y1=\"0\" x2=\"1000\" y2=\"0\" stroke-width=\"7\"/></g></svg>";
    let scene = read_svg(svg).expect("it holds an item");
    assert_eq!((scene.sheet.width, scene.sheet.height), (210.0, 100.0));
    let curve = first_stroke(&scene).paths[0].curves[0];
    assert!(curve.start().is_at(Point::new(10.0, 10.0)) && (curve.length() - 100.0).abs() < 1e-9);
    assert!((first_stroke(&scene).width - 0.7).abs() < 1e-9);
}

#[test]
fn basic_shapes_and_relative_data_read_as_their_geometry() {
    let scene = read(
        "<g data-kind=\"outline\"><rect x=\"10\" y=\"10\" width=\"20\" height=\"10\" rx=\"2\"/>\
         <polygon points=\"0,0 4,0 4,3\"/><ellipse cx=\"50\" cy=\"50\" rx=\"9\" ry=\"4\"/>\
         <path d=\"M10 10q5 5 10 0t10 0\"/><circle cx=\"5\" cy=\"6\" r=\"7\"/></g>",
    );
    let lengths: Vec<f64> = scene.items[0]
        .marks
        .iter()
        .map(|m| match m {
            Mark::Stroke(s) => s.paths.iter().map(crate::geom::Path::length).sum(),
            _ => 0.0,
        })
        .collect();
    let pi = std::f64::consts::PI;
    // Rectangle 2·(16 + 6) + 2π·2; triangle 3 + 4 + 5; circle 2π·7.
    assert!((lengths[0] - (44.0 + 4.0 * pi)).abs() < 1e-6, "{lengths:?}");
    assert!((lengths[1] - 12.0).abs() < 1e-9, "{lengths:?}");
    assert!((lengths[4] - 14.0 * pi).abs() < 1e-6, "{lengths:?}");
    let Mark::Stroke(circle) = &scene.items[0].marks[4] else { panic!("a circle is a stroke") };
    assert!(matches!(circle.paths[0].curves[..], [Curve::Arc(a)] if a.is_full()));
    let b = scene.items[0].marks[3].bounds().expect("it draws something");
    // The two parabolas swing 2.5 below and above y = 10.
    assert!((b.height() - (5.0 + 1.0)).abs() < 1e-6, "{b:?}");
}

#[test]
fn a_mirrored_or_stretched_circle_keeps_its_place() {
    let scene = read(
        "<g data-kind=\"outline\" transform=\"scale(-1 1) translate(-100 0)\">\
         <path d=\"M20 10A10 10 0 0 1 10 20\"/></g>\
         <g data-kind=\"outline\" transform=\"scale(2 1)\"><circle cx=\"20\" cy=\"10\" r=\"5\"/></g>",
    );
    let arc = first_stroke(&scene).paths[0].curves[0];
    assert!(arc.start().is_at(Point::new(80.0, 10.0)) && arc.end().is_at(Point::new(90.0, 20.0)));
    let bow = Point::new(100.0 - 10.0 - 10.0 * 0.5_f64.sqrt(), 10.0 + 10.0 * 0.5_f64.sqrt());
    assert!(arc.at(0.5).is_at(bow), "{arc:?}");
    let b = scene.items[1].bounds().expect("it draws something").grown(-1.0);
    assert!((b.width() - 20.0).abs() < 0.9 && (b.height() - 10.0).abs() < 0.9, "{b:?}");
}

const SQUARES: &str = "<defs><path id=\"q\" d=\"M0 0h1v-1h-1z\"/></defs>";

#[test]
fn the_ink_of_a_text_is_where_its_outlines_were_moved_to() {
    // The outlines of no font at all: the drawn ink is believed, not the measure and not the box.
    let scene = read(&format!(
        "{SQUARES}<g data-kind=\"note\"><g data-bbox=\"0 0 9 9\" transform=\"translate(0 -5)\">\
         <g transform=\"translate(50 80) scale(3)\" fill=\"#000\" stroke=\"none\">\
         <use href=\"#q\"/><use href=\"#q\" x=\"4\"/></g>\
         <text x=\"50\" y=\"80\" font-size=\"4\" fill-opacity=\"0\" fill=\"#000\">AB</text></g></g>"
    ));
    let texts: Vec<_> = scene.items[0].texts().collect();
    assert_eq!((texts.len(), texts[0].run.text.as_str()), (1, "AB"));
    let b = texts[0].quad().bounds();
    assert!(b.min.is_at(Point::new(50.0, 72.0)) && b.max.is_at(Point::new(65.0, 75.0)), "{b:?}");
}

#[test]
fn a_text_in_a_font_has_the_ink_that_its_box_states() {
    let scene = read(
        "<g data-kind=\"note\" transform=\"translate(100 0)\"><g data-bbox=\"10 20 40 25\">\
         <text x=\"10\" y=\"25\" font-size=\"5\" fill=\"#000\" stroke=\"none\">wide</text></g></g>",
    );
    let b = scene.items[0].texts().next().expect("there is a text").quad().bounds();
    assert!(b.min.is_at(Point::new(110.0, 20.0)) && b.max.is_at(Point::new(140.0, 25.0)), "{b:?}");
}

#[test]
fn what_is_not_seen_is_not_read() {
    let scene = read(
        "<rect width=\"420\" height=\"297\" fill=\"#fff\" stroke=\"none\"/>\
         <g data-kind=\"note\"><path d=\"M0 0h9\" display=\"none\"/>\
         <path d=\"M0 0h9\" style=\"stroke:none\"/><path d=\"M0 0h9\" visibility=\"hidden\"/>\
         <text fill=\"#000\" fill-opacity=\"0\">ghost</text></g>",
    );
    assert_eq!(scene.items.len(), 1);
    assert_eq!(scene.items[0].marks, []);
}

#[test]
fn what_belongs_to_no_item_is_kept_as_one_of_its_own() {
    let scene = read(
        "<g id=\"a\" data-kind=\"outline\"><path d=\"M0 0h9\"/></g>\
         <path d=\"M5 5h9\" style=\"stroke: red; stroke-width: 0.35px\"/>",
    );
    assert_eq!(scene.items.len(), 2);
    let [Mark::Stroke(s)] = &scene.items[1].marks[..] else { panic!("one stroke was loose") };
    assert_eq!((s.ink, s.width), (Ink::Finding, 0.35));
}

#[test]
fn an_item_within_an_item_keeps_its_own_marks() {
    let scene = read(
        "<g id=\"a\" data-kind=\"note\"><path d=\"M0 0h1\"/><g id=\"b\" data-kind=\"symbol\">\
         <path d=\"M0 0h2\"/></g><path d=\"M0 0h3\"/></g>",
    );
    let counts: Vec<_> =
        scene.items.iter().map(|i| (i.id.as_str().to_owned(), i.marks.len())).collect();
    assert_eq!(counts, [("a".to_owned(), 2), ("b".to_owned(), 1)]);
}

#[test]
fn files_that_are_no_issued_sheet_are_told_so() {
    let error = |text: &str| read_svg(text).expect_err("it is no sheet");
    assert!(matches!(error("<svg"), ReadError::Xml(_)));
    assert!(matches!(error("<html/>"), ReadError::NotIssued(_)));
    assert!(matches!(error(&sheet("<path d=\"M0 0h9\"/>")), ReadError::NotIssued(_)));
    let kind = error(&sheet("\n<g data-kind=\"doodle\"/>"));
    assert_eq!(kind.place(), Some(FilePlace { line: 2, column: 1 }));
    assert!(kind.to_string().contains("doodle"), "{kind}");
    let item = |body: &str| error(&sheet(&format!("<g data-kind=\"note\">{body}</g>")));
    assert!(matches!(item("<image href=\"a.png\"/>"), ReadError::Unsupported { .. }));
    for body in [
        "<path d=\"M0 0L x\"/>",
        "<path d=\"M0 0L1e999 0\"/>",
        "<path d=\"M0 0h1\" transform=\"spin(3)\"/>",
        "<circle r=\"wide\"/>",
        "<use href=\"#nowhere\"/>",
        "<g data-bbox=\"1 2 3\"/>",
        "<g data-kind=\"dimension\" data-value=\"about 5\"/>",
    ] {
        let e = item(body);
        assert!(matches!(e, ReadError::Attribute { .. }), "{body}: {e}");
        assert!(!e.help().is_empty());
    }
}

#[test]
fn bombs_meet_a_limit() {
    let deep = format!("{}{}", "<g>".repeat(5000), "</g>".repeat(5000));
    let error = |body: &str| {
        read_svg(&sheet(&format!("<g data-kind=\"note\">{body}</g>"))).expect_err("it is a bomb")
    };
    assert!(matches!(error(&deep), ReadError::TooMuch { .. }));
    assert!(matches!(error("<g id=\"l\"><use href=\"#l\"/></g>"), ReadError::TooMuch { .. }));
    let mut fan = "<path id=\"f0\" d=\"M0 0h1\"/>".to_owned();
    for i in 1..30 {
        let before = i - 1;
        fan.push_str(&format!(
            "<g id=\"f{i}\"><use href=\"#f{before}\"/><use href=\"#f{before}\"/></g>"
        ));
    }
    assert!(matches!(error(&fan), ReadError::TooMuch { .. }));
    let entities = "<!DOCTYPE svg [<!ENTITY a \"b\">]><svg/>";
    assert!(matches!(read_svg(entities), Err(ReadError::Xml(_))));
}
