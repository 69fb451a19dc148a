//! What an SVG of a sheet says, and that a scene comes back from it.

use std::sync::Arc;

use proptest::prelude::*;

use super::*;
use crate::geom::{self, Cubic, Curve, EllipticArc, Line, Point};
use crate::ident::{ItemId, ViewId};
use crate::scene::{PlacedText, filled, read_svg, straight};
use crate::text::Run;

/// How exactly a scene comes back, mm.
const EXACT: f64 = 1e-3;

fn p(x: f64, y: f64) -> Point<Sheet> {
    Point::new(x, y)
}

fn facts() -> SheetFacts {
    SheetFacts {
        width: 420.0,
        height: 297.0,
        number: "N-1".into(),
        title: "Plate".into(),
        revision: "B".into(),
        style: "iso".into(),
        format: "A3".into(),
        index: 1,
        count: 1,
    }
}

fn scene(items: Vec<Item>) -> Scene {
    Scene { sheet: facts(), items }
}

fn text(content: &str, at: Point<Sheet>, angle: f64) -> Mark {
    Mark::Text(PlacedText::new(Arc::new(Run::new(content, 3.5)), at, angle))
}

fn note(marks: Vec<Mark>) -> Item {
    Item::new(ItemId::new("n"), ItemKind::Note, marks)
}

#[test]
fn a_dimension_says_what_the_contract_asks() {
    let mut item = Item::new(
        ItemId::new("front.bore"),
        ItemKind::Dimension,
        vec![
            straight(Line::new(p(10.0, 20.0), p(40.0, 20.0)), 0.25, Some(Role::Dim)),
            filled(&[p(10.0, 20.0), p(13.0, 19.5), p(13.0, 20.5)], Role::Arrow),
            text("⌀42", p(20.0, 19.0), 0.0),
        ],
    );
    item.view = Some(ViewId::new("front"));
    item.feature = Some("bore".into());
    item.value =
        Some(Value { nominal: 42.0, limits: (Some(41.975), None), unit: ValueUnit::Degree });
    let svg = svg(&scene(vec![item]));
    for part in [
        r#"height="297mm""#,
        r#"width="420mm""#,
        r#"viewBox="0 0 420 297""#,
        r#"data-feature="bore" data-kind="dimension" data-lower="41.975" data-unit="deg" data-value="42" data-view="front" id="front.bore" stroke-width="0.25""#,
        r#"<path d="M10 20L40 20" data-role="dim"/>"#,
        r##"<path d="M10 20L13 19.5L13 20.5Z" data-role="arrow" fill="#000" stroke="none"/>"##,
        r#"<g data-bbox="20"#,
        ">⌀42</text>",
    ] {
        assert!(svg.contains(part), "{part} is not in\n{svg}");
    }
    assert!(!svg.contains("data-upper"));
}

#[test]
fn a_full_circle_alone_is_a_circle_element() {
    let circle = Path::of(Curve::circle(p(50.0, 60.0), 10.25));
    let stroke = Mark::Stroke(Stroke::new(vec![circle], 0.5, None));
    let svg = svg(&scene(vec![Item::new(ItemId::new("c"), ItemKind::Outline, vec![stroke])]));
    assert!(svg.contains(r#"<circle cx="50" cy="60" r="10.25"/>"#), "{svg}");
}

#[test]
fn whatever_a_text_holds_stays_text() {
    let evil = "</text><script>alert('1')</script> & \u{1}\u{FFFF} ]]> \"";
    let mut item = note(vec![text(evil, p(10.0, 10.0), 0.0)]);
    item.feature = Some("a\"b<c\u{2}\n".into());
    let svg = svg(&scene(vec![item]));
    let doc = roxmltree::Document::parse(&svg).expect("it is well-formed");
    assert!(!doc.descendants().any(|n| n.has_tag_name("script")));
    let back = doc.descendants().find(|n| n.tag_name().name() == "text").and_then(|n| n.text());
    assert_eq!(back, Some("</text><script>alert('1')</script> & \u{FFFD} ]]> \""));
}

#[test]
fn blanks_around_a_text_are_kept_and_none_are_added() {
    for mode in [TextMode::Outlines, TextMode::Font] {
        let svg = svg_with(&scene(vec![note(vec![text(" ⌀ 4  A ", p(9.0, 9.0), 0.0)])]), mode);
        let back = read_svg(&svg).expect("it was issued");
        let found: Vec<_> = back.items[0].texts().map(|t| t.run.text.clone()).collect();
        assert_eq!(found, [" ⌀ 4  A "], "{mode:?}");
    }
}

#[test]
fn ids_stay_unique_even_if_a_scene_breaks_its_promise() {
    let twins = || note(vec![text("A", p(10.0, 10.0), 0.0)]);
    let mut glyph = twins();
    glyph.id = ItemId::new("g36");
    let svg = svg(&scene(vec![twins(), twins(), twins(), glyph]));
    let doc = roxmltree::Document::parse(&svg).expect("it is well-formed");
    let mut ids: Vec<_> = doc.descendants().filter_map(|n| n.attribute("id")).collect();
    ids.sort_unstable();
    let count = ids.len();
    ids.dedup();
    assert_eq!(ids.len(), count, "{ids:?}");
}

#[test]
fn the_font_travels_along_when_asked_for() {
    let svg = svg_with(&scene(vec![note(vec![text("⌀42", p(9.0, 9.0), 0.0)])]), TextMode::Font);
    assert!(svg.contains("data:font/woff2;base64,d09GMg"), "woff2 begins with wOF2");
    assert!(!svg.contains("textLength"));
    let back = read_svg(&svg).expect("it was issued");
    assert_eq!(back.items[0].marks.len(), 1, "the symbol's strokes belong to the text");
}

fn place() -> impl Strategy<Value = Point<Sheet>> {
    (5.0..400.0, 5.0..280.0).prop_map(|(x, y)| p(x, y))
}

fn sweep() -> impl Strategy<Value = f64> {
    prop_oneof![2.0..359.0, -359.0..-2.0, Just(360.0), Just(180.0), Just(-90.0)]
}

fn round() -> impl Strategy<Value = Curve<Sheet>> {
    let arc = (place(), 0.3..200.0, -360.0..360.0, sweep())
        .prop_map(|(c, r, start, sweep)| Curve::Arc(geom::Arc::new(c, r, start, sweep)));
    let ellipse = (place(), 0.3..90.0, 0.3..90.0, -180.0..180.0, -180.0..180.0, sweep()).prop_map(
        |(centre, a, b, turn, start, sweep)| {
            Curve::Ellipse(EllipticArc { centre, radii: (a, b), turn, start, sweep })
        },
    );
    prop_oneof![arc, ellipse]
}

fn path() -> impl Strategy<Value = Path<Sheet>> {
    let polyline = (prop::collection::vec(place(), 2..6), any::<bool>())
        .prop_map(|(points, closed)| Path::polyline(&points, closed && points.len() > 2));
    let cubic = [place(), place(), place(), place()].prop_map(|c| Path::of(Curve::Cubic(Cubic(c))));
    let chain = (place(), round(), place()).prop_map(|(a, curve, b)| Path {
        curves: vec![Curve::line(a, curve.start()), curve, Curve::line(curve.end(), b)],
        closed: false,
    });
    prop_oneof![polyline, cubic, round().prop_map(Path::of), chain]
}

fn role() -> impl Strategy<Value = Option<Role>> {
    prop::option::of(prop::sample::select(Role::ALL))
}

fn ink() -> impl Strategy<Value = Ink> {
    prop::sample::select(vec![Ink::Drawing, Ink::Finding])
}

fn mark() -> impl Strategy<Value = Mark> {
    let paths = || prop::collection::vec(path(), 1..4);
    let width = prop::sample::select(vec![0.18, 0.25, 0.35, 0.5, 0.7]);
    let stroke = (paths(), width, role(), ink())
        .prop_map(|(paths, width, role, ink)| Mark::Stroke(Stroke { paths, width, role, ink }));
    let fill = (paths(), role(), ink())
        .prop_map(|(paths, role, ink)| Mark::Fill(Fill { paths, role, ink }));
    let angle = prop_oneof![Just(0.0), Just(90.0), Just(-90.0), Just(180.0), -180.0..180.0];
    let text = ("[ -~⌀□↧⌴⌵°±×漢]{1,20}", place(), angle, 1.8..10.0, ink()).prop_map(
        |(content, origin, angle, h, ink)| {
            let run = Arc::new(Run::new(&content, f64::round(h * 10.0) / 10.0));
            Mark::Text(PlacedText { ink, ..PlacedText::new(run, origin, angle) })
        },
    );
    prop_oneof![stroke, fill, text]
}

fn value() -> impl Strategy<Value = Value> {
    let unit = prop::sample::select(vec![ValueUnit::Millimetre, ValueUnit::Degree]);
    let limit = || prop::option::of(-500.0..500.0);
    (-500.0..500.0, limit(), limit(), unit).prop_map(|(nominal, lower, upper, unit)| Value {
        nominal,
        limits: (lower, upper),
        unit,
    })
}

fn items() -> impl Strategy<Value = Vec<Item>> {
    let item = (
        prop::sample::select(ItemKind::ALL),
        prop::option::of("[a-z]{1,6}"),
        prop::option::of("[ -~]{0,12}"),
        prop::option::of(value()),
        prop::collection::vec(mark(), 0..6),
    );
    prop::collection::vec(item, 0..6).prop_map(|items| {
        let numbered = items.into_iter().enumerate();
        numbered
            .map(|(i, (kind, view, feature, value, marks))| Item {
                id: ItemId::new(format!("item.{i}")),
                kind,
                view: view.map(ViewId::new),
                feature,
                value,
                marks,
            })
            .collect()
    })
}

fn same_curve(a: &Curve<Sheet>, b: &Curve<Sheet>) -> bool {
    match (a, b) {
        // Where a circle begins is not written.
        (Curve::Arc(a), Curve::Arc(b)) if a.is_full() && b.is_full() => {
            a.centre.distance(b.centre) < EXACT && (a.radius - b.radius).abs() < EXACT
        }
        _ => (0..=8).all(|i| {
            let t = f64::from(i) / 8.0;
            a.at(t).distance(b.at(t)) < EXACT
        }),
    }
}

fn same_paths(a: &[Path<Sheet>], b: &[Path<Sheet>]) -> bool {
    a.len() == b.len()
        && a.iter().zip(b).all(|(a, b)| {
            a.curves.len() == b.curves.len()
                && a.closed == b.closed
                && a.curves.iter().zip(&b.curves).all(|(a, b)| same_curve(a, b))
        })
}

fn same_text(a: &PlacedText, b: &PlacedText) -> bool {
    let turn = (a.angle - b.angle).rem_euclid(360.0);
    a.run.text == b.run.text
        && (a.run.height - b.run.height).abs() < EXACT
        && a.origin.distance(b.origin) < EXACT
        && turn.min(360.0 - turn) < 1e-5
        && a.ink == b.ink
        && a.quad().0.iter().zip(b.quad().0).all(|(a, b)| a.distance(b) < 2.0 * EXACT)
}

fn same_mark(a: &Mark, b: &Mark) -> bool {
    match (a, b) {
        (Mark::Stroke(a), Mark::Stroke(b)) => {
            (a.width - b.width).abs() < 1e-6
                && (a.role, a.ink) == (b.role, b.ink)
                && same_paths(&a.paths, &b.paths)
        }
        (Mark::Fill(a), Mark::Fill(b)) => {
            (a.role, a.ink) == (b.role, b.ink) && same_paths(&a.paths, &b.paths)
        }
        (Mark::Text(a), Mark::Text(b)) => same_text(a, b),
        _ => false,
    }
}

fn same_value(a: &Value, b: &Value) -> bool {
    let near = |a: Option<f64>, b: Option<f64>| match (a, b) {
        (Some(a), Some(b)) => (a - b).abs() < 1e-5,
        (None, None) => true,
        _ => false,
    };
    near(Some(a.nominal), Some(b.nominal))
        && near(a.limits.0, b.limits.0)
        && near(a.limits.1, b.limits.1)
        && a.unit == b.unit
}

fn inked(item: &Item) -> Vec<&Mark> {
    item.marks.iter().filter(|m| !matches!(m, Mark::Text(t) if t.run.is_blank())).collect()
}

#[test]
fn a_flat_ellipse_comes_back_in_one_piece() {
    let flat = EllipticArc {
        centre: p(90.0, 90.0),
        radii: (0.3, 68.227_921),
        turn: 0.0,
        start: 0.0,
        sweep: 293.326_849,
    };
    let path = Path::of(Curve::Ellipse(flat));
    let stroke = Mark::Stroke(Stroke::new(vec![path.clone()], 0.5, None));
    let back = read_svg(&svg(&scene(vec![note(vec![stroke])]))).expect("it was issued");
    let Mark::Stroke(s) = &back.items[0].marks[0] else { panic!("a stroke was issued") };
    assert!(same_paths(&s.paths, &[path]), "{s:?}");
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(256))]

    /// Bytes struck out, doubled or replaced: whatever is left is read or refused.
    #[test]
    fn a_damaged_sheet_is_read_or_refused(
        items in items(),
        hits in prop::collection::vec((0.0..1.0, 0_usize..40, "[ -~]{0,8}"), 1..6),
    ) {
        let mut text: Vec<char> = svg(&scene(items)).chars().collect();
        for (share, length, put) in hits {
            let at = (share * text.len() as f64) as usize;
            let end = (at + length).min(text.len());
            text.splice(at..end, put.chars());
        }
        let text: String = text.into_iter().collect();
        if let Ok(back) = read_svg(&text) {
            prop_assert!(back.items.iter().filter_map(Item::bounds).all(|b| b.width().is_finite()));
        }
    }

    #[test]
    fn a_scene_comes_back_from_its_svg(items in items()) {
        let issued = scene(items);
        let svg = svg(&issued);
        let back = match read_svg(&svg) {
            Ok(back) => back,
            Err(e) => {
                prop_assert!(issued.items.is_empty(), "{e}\n{svg}");
                return Ok(());
            }
        };
        prop_assert_eq!(&back.sheet, &issued.sheet);
        prop_assert_eq!(back.items.len(), issued.items.len());
        for (a, b) in issued.items.iter().zip(&back.items) {
            prop_assert_eq!((&a.id, a.kind, &a.view, &a.feature), (&b.id, b.kind, &b.view, &b.feature));
            prop_assert_eq!(a.value.is_some(), b.value.is_some());
            if let (Some(a), Some(b)) = (&a.value, &b.value) {
                prop_assert!(same_value(a, b), "{:?} {:?}", a, b);
            }
            let (a, b) = (inked(a), inked(b));
            prop_assert_eq!(a.len(), b.len());
            for (a, b) in a.into_iter().zip(b) {
                prop_assert!(same_mark(a, b), "{:?}\nis not\n{:?}", a, b);
            }
        }
    }
}
