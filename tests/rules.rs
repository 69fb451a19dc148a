//! What holds of all rules: their docs, and how they behave on any sheet.

use std::collections::BTreeSet;
use std::sync::Arc;

use proptest::prelude::*;
use witnessline::geom::{Arc as ArcCurve, Curve, Path, Point, Sheet};
use witnessline::ident::{ItemId, ViewId};
use witnessline::review::report::{Places, json, marked, text};
use witnessline::review::{Review, ReviewInput, Severity, explain, review, rules};
use witnessline::scene::{
    Item, ItemKind, Mark, PlacedText, Role, Scene, SheetFacts, Stroke, Value, ValueUnit, filled,
};
use witnessline::style::builtin;
use witnessline::text::Run;

const HEADINGS: [&str; 5] =
    ["## What it checks", "## Why it matters", "## Bad", "## Good", "## Source"];

#[test]
fn every_rule_explains_itself_under_the_same_headings() {
    for rule in rules() {
        let text = explain(rule.name).unwrap_or_else(|e| panic!("{e}"));
        let headings: Vec<_> = text.lines().filter(|l| l.starts_with("## ")).collect();
        assert_eq!(headings, HEADINGS, "{}", rule.name);
        let sections: Vec<_> = text.split("## ").skip(1).collect();
        for section in sections {
            let words = section.split_once('\n').map_or("", |(_, body)| body).trim();
            assert!(words.len() > 5, "{}: an empty section in {text}", rule.name);
        }
        assert!(text.starts_with(rule.name) && text.contains(rule.summary));
    }
}

#[test]
fn names_are_unique_and_say_area_and_fault() {
    let names: BTreeSet<_> = rules().iter().map(|r| r.name).collect();
    assert_eq!(names.len(), rules().len());
    for name in names {
        let (area, fault) = name.split_once('/').unwrap_or_else(|| panic!("{name} has no area"));
        assert!(matches!(area, "clutter" | "content"), "{name}");
        assert!(fault.chars().all(|c| c.is_ascii_lowercase() || c == '-'), "{name}");
    }
}

/// Severities that the trade gives these faults (common practice).
#[test]
fn severities_are_those_of_the_trade() {
    let expected = [
        ("clutter/text-on-line", Severity::Must),
        ("clutter/text-on-text", Severity::Must),
        ("clutter/text-heights", Severity::Should),
        ("clutter/dimension-lines-cross", Severity::Must),
        ("clutter/leaders-cross", Severity::Should),
        ("clutter/leader-crosses-dimension", Severity::Should),
        ("clutter/extension-crosses-dimension", Severity::Consider),
        ("clutter/order-of-tiers", Severity::Should),
        ("clutter/tier-spacing", Severity::Should),
        ("clutter/first-tier-close", Severity::Should),
        ("clutter/dimension-on-hatch", Severity::Should),
        ("clutter/arrow-crowded", Severity::Should),
        ("clutter/leader-angle", Severity::Should),
        ("clutter/leader-long", Severity::Consider),
        ("clutter/outside-frame", Severity::Must),
        ("clutter/lines-merge", Severity::Should),
        ("clutter/line-widths", Severity::Should),
        ("clutter/unbalanced-sheet", Severity::Consider),
        ("clutter/text-upside-down", Severity::Should),
        ("clutter/centre-line-long", Severity::Consider),
        ("clutter/too-close", Severity::Should),
        ("content/projection-sign-missing", Severity::Must),
        ("content/general-tolerance-missing", Severity::Must),
        ("content/material-missing", Severity::Must),
        ("content/title-field-missing", Severity::Must),
        ("content/title-field-too-long", Severity::Should),
        ("content/revision-order", Severity::Should),
        ("content/placeholder-text", Severity::Must),
        ("content/dimension-double", Severity::Must),
        ("content/number-format", Severity::Should),
    ];
    for (name, severity) in expected {
        let rule = rules().iter().find(|r| r.name == name);
        assert_eq!(rule.map(|r| r.severity), Some(severity), "{name}");
    }
}

fn coordinate() -> impl Strategy<Value = f64> {
    prop_oneof![
        // A grid makes the coincidences that free numbers never have.
        8 => (0..84i32).prop_map(|i| f64::from(i) * 5.0),
        8 => 0.0..420.0f64,
        1 => prop_oneof![
            Just(f64::NAN), Just(f64::INFINITY), Just(-1e300), Just(1e300), Just(1e15), Just(-0.0),
        ],
    ]
}

fn place() -> impl Strategy<Value = Point<Sheet>> {
    (coordinate(), coordinate()).prop_map(|(x, y)| Point::new(x, y))
}

fn role() -> impl Strategy<Value = Option<Role>> {
    proptest::option::of(proptest::sample::select(Role::ALL))
}

fn mark() -> impl Strategy<Value = Mark> {
    let width = prop_oneof![Just(0.25), Just(0.5), Just(0.0)];
    let stroke = (proptest::collection::vec(place(), 0..5), any::<bool>(), width, role()).prop_map(
        |(points, closed, width, role)| {
            Mark::Stroke(Stroke::new(vec![Path::polyline(&points, closed)], width, role))
        },
    );
    let arc = (place(), coordinate(), -400.0..400.0f64, role()).prop_map(|(c, r, sweep, role)| {
        let arc = Curve::Arc(ArcCurve::new(c, r, 30.0, sweep));
        Mark::Stroke(Stroke::new(vec![Path::of(arc)], 0.25, role))
    });
    let text = (
        proptest::sample::select(vec!["", " ", "80", "⌀12,5 H7", "TBD", "(40)", "6×⌀9"]),
        place(),
        proptest::sample::select(vec![0.0, 90.0, -90.0, 37.0, f64::NAN]),
        proptest::sample::select(vec![3.5, 1.0, 0.0]),
    )
        .prop_map(|(words, at, angle, height)| {
            Mark::Text(PlacedText::new(Arc::new(Run::new(words, height)), at, angle))
        });
    let fill = proptest::collection::vec(place(), 0..5).prop_map(|c| filled(&c, Role::Arrow));
    prop_oneof![3 => stroke, 1 => arc, 3 => text, 1 => fill]
}

fn item() -> impl Strategy<Value = Item> {
    let view = proptest::option::of(proptest::sample::select(vec!["front", "top", "right"]));
    let kind = proptest::sample::select(ItemKind::ALL);
    let marks = proptest::collection::vec(mark(), 0..6);
    (kind, view, marks, proptest::option::of(0.0..100.0f64)).prop_map(
        |(kind, view, marks, value)| {
            let mut item = Item::new(ItemId::new(""), kind, marks);
            item.view = view.map(ViewId::new);
            item.value = value.map(|nominal| Value {
                nominal,
                limits: (None, None),
                unit: ValueUnit::Millimetre,
            });
            item
        },
    )
}

fn scene() -> impl Strategy<Value = Scene> {
    let items = proptest::collection::vec(item(), 0..24);
    items.prop_map(|mut items| {
        for (i, item) in items.iter_mut().enumerate() {
            item.id = ItemId::new(format!("i{i}"));
        }
        Scene { sheet: facts(), items }
    })
}

fn facts() -> SheetFacts {
    SheetFacts {
        width: 420.0,
        height: 297.0,
        number: "WL-2".into(),
        title: String::new(),
        revision: "A".into(),
        style: "iso".into(),
        format: "A3".into(),
        index: 1,
        count: 1,
    }
}

fn checked(scene: &Scene) -> Review {
    let style = builtin("iso").expect("compiled in");
    review(&ReviewInput {
        scenes: std::slice::from_ref(scene),
        style: &style,
        drawing: None,
        misfits: &[],
        conflicts: &[],
    })
}

/// Cases per property; `WITNESSLINE_CASES` asks for more.
fn cases() -> u32 {
    std::env::var("WITNESSLINE_CASES").ok().and_then(|n| n.parse().ok()).unwrap_or(64)
}

proptest! {
    #![proptest_config(ProptestConfig { cases: cases(), failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn nothing_makes_a_rule_or_a_report_panic(scene in scene()) {
        let review = checked(&scene);
        let told = text(&review, &Places::default());
        prop_assert!(told.contains("no approval"));
        let read: Result<serde_json::Value, _> =
            serde_json::from_str(&json(&review, Some(&scene.sheet), None));
        prop_assert!(read.is_ok());
        let _ = marked(&scene, &review.findings);
    }

    #[test]
    fn the_order_of_items_changes_no_finding(
        (scene, shuffled) in scene().prop_flat_map(|scene| {
            let items = Just(scene.items.clone()).prop_shuffle();
            (Just(scene), items)
        }),
    ) {
        let other = Scene { sheet: scene.sheet.clone(), items: shuffled };
        let as_json = |s: &Scene| json(&checked(s), Some(&s.sheet), None);
        prop_assert_eq!(as_json(&scene), as_json(&other));
    }

    #[test]
    fn findings_come_worst_first_and_no_two_tell_the_same(scene in scene()) {
        let findings = checked(&scene).findings;
        prop_assert!(findings.windows(2).all(|w| w[0].severity >= w[1].severity));
        let about = findings.iter().filter(|f| !f.items.is_empty());
        let mut keys: Vec<_> = about.map(|f| (f.rule.name, f.sheet, f.items.clone())).collect();
        let all = keys.len();
        keys.sort();
        keys.dedup();
        prop_assert_eq!(keys.len(), all);
    }
}
