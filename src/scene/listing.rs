//! A scene as text that people can read in a diff.

use std::fmt::Write;

use super::{Fill, Ink, Item, Mark, PlacedText, Role, Scene, Stroke, Value, ValueUnit};
use crate::geom::{Curve, Path, Rect, Sheet};

/// Strokes of annotations with at most this many curves are listed with all their places; a
/// reader of a diff can still picture them.
const IN_FULL: usize = 4;

/// One line per item and mark, coordinates with two decimals, in drawing order.
///
/// Strokes and fills of annotations that have few curves are listed in full, all others by the
/// number of their paths and the box around them.
#[must_use]
pub fn listing(scene: &Scene) -> String {
    let s = &scene.sheet;
    let mut out = format!(
        "sheet {:?} {:?} rev {:?} {} {} {}x{} {}/{}\n",
        s.number,
        s.title,
        s.revision,
        s.style,
        s.format,
        number(s.width),
        number(s.height),
        s.index,
        s.count
    );
    for item in &scene.items {
        push_item(&mut out, item);
    }
    out
}

fn push_item(out: &mut String, item: &Item) {
    line(out, &head(item));
    for mark in &item.marks {
        let text = match mark {
            Mark::Stroke(s) => stroke(s, item.kind.is_annotation()),
            Mark::Fill(f) => fill(f, item.kind.is_annotation()),
            Mark::Text(t) => placed_text(t),
        };
        line(out, &format!("  {text}"));
    }
}

fn line(out: &mut String, text: &str) {
    out.push_str(text);
    out.push('\n');
}

fn head(item: &Item) -> String {
    let mut head = format!("{} {}", item.kind, item.id);
    if let Some(view) = &item.view {
        head.push_str(&format!(" view {view}"));
    }
    if let Some(feature) = &item.feature {
        head.push_str(&format!(" of {feature}"));
    }
    if let Some(v) = &item.value {
        head.push_str(&format!(" = {}", value(v)));
    }
    head
}

/// Values in full: their decimals are what a diff is read for.
fn value(v: &Value) -> String {
    let unit = match v.unit {
        ValueUnit::Millimetre => "",
        ValueUnit::Degree => "°",
    };
    let limit = |l: Option<f64>| l.map_or_else(|| "open".to_owned(), |l| trimmed(l, 6));
    match v.limits {
        (None, None) => format!("{}{unit}", trimmed(v.nominal, 6)),
        (lower, upper) => {
            format!("{}{unit} [{} … {}]", trimmed(v.nominal, 6), limit(lower), limit(upper))
        }
    }
}

fn stroke(s: &Stroke, in_full: bool) -> String {
    let head = format!("stroke{}{} {}", role(s.role), ink(s.ink), trimmed(s.width, 3));
    format!("{head} {}", paths(&s.paths, in_full))
}

fn fill(f: &Fill, in_full: bool) -> String {
    format!("fill{}{} {}", role(f.role), ink(f.ink), paths(&f.paths, in_full))
}

fn placed_text(t: &PlacedText) -> String {
    let at = format!("{} {}", number(t.origin.x), number(t.origin.y));
    let turn = if t.angle == 0.0 { String::new() } else { format!(" turned {}", number(t.angle)) };
    format!("text{} {:?} h {} at {at}{turn}", ink(t.ink), t.run.text, trimmed(t.run.height, 3))
}

fn role(role: Option<Role>) -> String {
    role.map_or_else(String::new, |r| format!(" {r}"))
}

fn ink(ink: Ink) -> &'static str {
    match ink {
        Ink::Drawing => "",
        Ink::Finding => " (finding)",
    }
}

fn paths(paths: &[Path<Sheet>], in_full: bool) -> String {
    let curves: usize = paths.iter().map(|p| p.curves.len()).sum();
    if in_full && curves <= IN_FULL {
        return paths.iter().map(path).collect::<Vec<_>>().join(" | ");
    }
    let count =
        if paths.len() == 1 { "1 path".to_owned() } else { format!("{} paths", paths.len()) };
    match Rect::union_of(paths.iter().filter_map(Path::bounds)) {
        Some(b) => format!(
            "{count} in {} {} {} {}",
            number(b.min.x),
            number(b.min.y),
            number(b.max.x),
            number(b.max.y)
        ),
        None => count,
    }
}

fn path(path: &Path<Sheet>) -> String {
    let mut text = String::new();
    if let Some(first) = path.curves.first() {
        let p = first.start();
        text.push_str(&format!("{} {}", number(p.x), number(p.y)));
    }
    for curve in &path.curves {
        let end = curve.end();
        let how = match curve {
            Curve::Line(_) => String::new(),
            Curve::Arc(a) => format!("arc r {} by {} ", number(a.radius), number(a.sweep)),
            Curve::Ellipse(e) => format!(
                "ellipse r {} {} by {} ",
                number(e.radii.0),
                number(e.radii.1),
                number(e.sweep)
            ),
            Curve::Cubic(_) => "curve ".to_owned(),
        };
        // Writing to a string cannot fail.
        let _ = write!(text, " > {how}{} {}", number(end.x), number(end.y));
    }
    if path.closed {
        text.push_str(" closed");
    }
    text
}

fn number(v: f64) -> String {
    trimmed(v, 2)
}

fn trimmed(v: f64, places: usize) -> String {
    let mut text = format!("{v:.places$}");
    if text.contains('.') {
        text.truncate(text.trim_end_matches('0').trim_end_matches('.').len());
    }
    if text == "-0" { "0".to_owned() } else { text }
}

#[cfg(test)]
mod tests {
    use std::sync::Arc;

    use super::*;
    use crate::geom::{Line, Point};
    use crate::ident::{ItemId, ViewId};
    use crate::scene::{ItemKind, SheetFacts, filled, straight};
    use crate::text::Run;

    #[test]
    fn a_dimension_is_listed_with_its_value_places_and_text() {
        let p = |x, y| Point::new(x, y);
        let mut item = Item::new(
            ItemId::new("front.bore.diameter"),
            ItemKind::Dimension,
            vec![
                straight(Line::new(p(10.0, 20.0), p(40.126, 20.0)), 0.25, Some(Role::Dim)),
                filled(&[p(10.0, 20.0), p(13.0, 19.5), p(13.0, 20.5)], Role::Arrow),
                Mark::Text(PlacedText::new(Arc::new(Run::new("⌀42 H7", 3.5)), p(22.0, 19.0), 90.0)),
            ],
        );
        item.view = Some(ViewId::new("front"));
        item.feature = Some("bore".into());
        item.value = Some(Value {
            nominal: 42.0,
            limits: (Some(42.0), Some(42.025)),
            unit: ValueUnit::Millimetre,
        });
        let outline = Item::new(
            ItemId::new("rim"),
            ItemKind::Outline,
            vec![Mark::Stroke(Stroke::new(
                vec![Path::of(Curve::circle(p(50.0, 50.0), 10.0))],
                0.5,
                None,
            ))],
        );
        let sheet = SheetFacts {
            width: 420.0,
            height: 297.0,
            number: "N-1".into(),
            title: "Plate".into(),
            revision: String::new(),
            style: "iso".into(),
            format: "A3".into(),
            index: 1,
            count: 2,
        };
        let listed = listing(&Scene { sheet, items: vec![outline, item] });
        let expected = "\
sheet \"N-1\" \"Plate\" rev \"\" iso A3 420x297 1/2
outline rim
  stroke 0.5 1 path in 40 40 60 60
dimension front.bore.diameter view front of bore = 42 [42 … 42.025]
  stroke dim 0.25 10 20 > 40.13 20
  fill arrow 10 20 > 13 19.5 > 13 20.5 > 10 20 closed
  text \"⌀42 H7\" h 3.5 at 22 19 turned 90
";
        assert_eq!(listed, expected);
    }
}
