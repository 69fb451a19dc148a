//! Properties of the whole line, from a spec's text to the sheet.

use proptest::prelude::*;
use witnessline::Drawn;
use witnessline::scene::ItemKind;
use witnessline::source::{Diagnostics, SourceMap};

fn draw(text: &str) -> Option<Drawn> {
    let (mut sources, mut diagnostics) = (SourceMap::default(), Diagnostics::default());
    let drawing = witnessline::spec::read_text("a.toml", text, &mut sources, &mut diagnostics);
    drawing.and_then(|d| witnessline::draw(d, &mut diagnostics))
}

/// A plate with holes, a chain through them, and what is asked of each hole.
fn plate(width: f64, holes: &[f64], diameter: f64) -> String {
    let shapes: String = holes
        .iter()
        .enumerate()
        .map(|(i, x)| {
            format!(
                "  {{ id = \"h{i}\", circle = {{ centre = [{x}, 20], diameter = {diameter} }} }},\n"
            )
        })
        .collect();
    let chain: String = (0..holes.len()).map(|i| format!("\"h{i}.centre\", ")).collect();
    format!(
        "format = 1\n[drawing]\nnumber = \"P-1\"\nsheet = \"auto\"\nscale = \"auto\"\n\
         [[view]]\nid = \"front\"\nfrom = \"front\"\nshapes = [\n\
         \x20 {{ id = \"plate\", rectangle = {{ corner = [0, 0], size = [{width}, 40] }} }},\n{shapes}]\n\
         dimensions = [\n  {{ of = \"plate.width\" }},\n\
         \x20 {{ id = \"links\", chain = [\"plate.left\", {chain}\"plate.right\"], tolerance = \"±0.1\" }},\n]\n\
         callouts = [{{ of = \"h0\" }}]\n"
    )
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(24))]

    #[test]
    fn values_are_those_of_the_geometry(
        width in 60.0..400.0f64, shares in prop::collection::btree_set(1..40u32, 1..6),
    ) {
        let width = (width * 10.0).round() / 10.0;
        let holes: Vec<f64> =
            shares.iter().map(|s| (width * f64::from(*s) / 41.0 * 10.0).round() / 10.0).collect();
        let drawn = draw(&plate(width, &holes, 3.0)).expect("a sound spec");
        let annotations = &drawn.layout.annotations;
        let of = |id: &str| annotations.iter().find(|p| p.annotation.id.as_str() == id);
        let overall = of("front.plate.width").and_then(|p| p.annotation.value).expect("measured");
        prop_assert!((overall.nominal - width).abs() < 1e-9);
        let links = of("links").expect("the chain is drawn");
        let sum: f64 = links
            .annotation
            .text
            .split(" | ")
            .map(|t| t.split(' ').next().unwrap_or("").replace(',', ".").parse::<f64>().unwrap_or(f64::NAN))
            .sum();
        prop_assert!((sum - width).abs() < 1e-6, "{} against {width}", links.annotation.text);
        // Each link carries its own value on the sheet, and they add up too.
        let item = drawn.scenes[0].items.iter().find(|i| i.id.as_str() == "links").expect("drawn");
        let values: Vec<f64> = item.texts().filter_map(|t| t.value).map(|v| v.nominal).collect();
        prop_assert_eq!(values.len(), holes.len() + 1);
        prop_assert!((values.iter().sum::<f64>() - width).abs() < 1e-6);
    }

    #[test]
    fn every_annotation_stands_once_on_the_sheet_and_its_limits_hold_its_value(
        n in 1..6u32, diameter in 2.0..8.0f64,
    ) {
        let holes: Vec<f64> = (1..=n).map(|i| f64::from(i) * 20.0).collect();
        let drawn = draw(&plate(140.0, &holes, diameter)).expect("a sound spec");
        let svg = witnessline::render::svg(&drawn.scenes[0]);
        for p in &drawn.layout.annotations {
            let id = format!("id=\"{}\"", p.annotation.id);
            prop_assert_eq!(svg.matches(&id).count(), 1);
        }
        for item in drawn.scenes[0].items.iter().filter(|i| i.kind == ItemKind::Dimension) {
            let Some(v) = item.value else { continue };
            prop_assert!(v.limits.0.is_none_or(|l| l <= v.nominal + 1e-12));
            prop_assert!(v.limits.1.is_none_or(|u| u >= v.nominal - 1e-12));
        }
    }

    #[test]
    fn a_mutated_example_never_panics(at in 0.0..1.0f64, cut in 0usize..40, put in "[ -~]{0,12}") {
        let text = std::fs::read_to_string("specs/stepped-shaft.toml").expect("it is there");
        let place = |share: f64| {
            let i = (share * text.len() as f64) as usize;
            (i..text.len()).find(|i| text.is_char_boundary(*i)).unwrap_or(text.len())
        };
        let from = place(at);
        let to = (from + cut..=text.len()).find(|i| text.is_char_boundary(*i)).unwrap_or(text.len());
        let _ = draw(&format!("{}{put}{}", &text[..from], &text[to..]));
    }
}

#[test]
fn ten_thousand_shapes_are_drawn() {
    let shapes: String = (0..10_000)
        .map(|i| {
            let (x, y) = (f64::from(i % 100) * 5.0, f64::from(i / 100) * 5.0);
            format!("{{ id = \"c{i}\", circle = {{ centre = [{x}, {y}], diameter = 3 }} }},\n")
        })
        .collect();
    let text = format!(
        "format = 1\n[drawing]\nnumber = \"M-1\"\nsheet = \"auto\"\nscale = \"auto\"\n\
         [[view]]\nid = \"front\"\nfrom = \"front\"\nshapes = [\n{shapes}]\n\
         dimensions = [{{ of = \"c77.diameter\" }}]\n"
    );
    let drawn = draw(&text).expect("many shapes are no fault");
    assert!(drawn.scenes[0].items.len() > 10_000);
}

#[test]
fn markup_in_a_text_stays_text() {
    let text = witnessline::spec::starter("T-1").replace("Mounting plate", "<b>&amp;</b><script>");
    let drawn = draw(&text).expect("markup is no fault");
    let svg = witnessline::render::svg(&drawn.scenes[0]);
    assert!(!svg.contains("<b>") && !svg.contains("<script"));
    assert!(svg.contains("&lt;b&gt;"));
}

#[test]
fn views_line_up_in_whatever_order_they_are_written() {
    let view = |id: &str, from: &str, w: f64, h: f64| {
        format!(
            "[[view]]\nid = \"{id}\"\nfrom = \"{from}\"\nshapes = [{{ id = \"b\", rectangle = {{ corner = [0, 0], size = [{w}, {h}] }} }}]\n"
        )
    };
    let (front, top) = (view("front", "front", 60.0, 30.0), view("top", "top", 60.0, 20.0));
    let left = view("left", "left", 20.0, 30.0);
    let head = "format = 1\n[drawing]\nnumber = \"V-1\"\nsheet = \"A3\"\nscale = \"1:1\"\n";
    for order in [[&front, &top, &left], [&left, &top, &front], [&top, &left, &front]] {
        let text = format!("{head}{}{}{}", order[0], order[1], order[2]);
        let drawn = draw(&text).expect("a sound spec");
        let outline = |id: &str| {
            let placed = drawn.layout.views.iter().find(|v| v.id.as_str() == id).expect("drawn");
            placed.shift.rect(&placed.paper.outline)
        };
        let (f, t, l) = (outline("front"), outline("top"), outline("left"));
        // ISO 5456-2, first angle: the view from above stands below, the one from the left right.
        assert!((f.min.x - t.min.x).abs() < 1e-9 && t.min.y > f.max.y);
        assert!((f.min.y - l.min.y).abs() < 1e-9 && l.min.x > f.max.x);
    }
}
