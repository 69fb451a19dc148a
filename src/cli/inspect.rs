//! `inspect`: what a spec says, as facts: views with their edges, annotations with their values.

use std::path::PathBuf;

use clap::ValueEnum;
use serde_json::{Value, json};

use super::job::Job;
use super::{Outcome, print};
use crate::Drawn;
use crate::annotate::Content;
use crate::geom::{Curve, Point, View as ViewSpace};
use crate::scene::{Item, ValueUnit};
use crate::spec::{Direction, LineClass};
use crate::view::{Edge, View};

/// Options of `inspect`.
#[derive(Debug, clap::Args)]
#[command(after_help = "Example: witnessline inspect specs/stepped-shaft.toml --as json")]
pub(super) struct Options {
    /// The spec.
    spec: PathBuf,
    /// How to tell it.
    #[arg(long = "as", value_enum, default_value_t = FactsAs::Text)]
    facts: FactsAs,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
enum FactsAs {
    Text,
    Json,
}

pub(super) fn run(options: &Options) -> Outcome {
    let job = Job::load(&options.spec);
    print::err(&job.rendered());
    let Some(drawn) = &job.drawn else { return job.outcome };
    print::out(&match options.facts {
        FactsAs::Json => format!("{:#}\n", facts(drawn)),
        FactsAs::Text => text(drawn),
    });
    Outcome::Done
}

fn facts(drawn: &Drawn) -> Value {
    let views: Vec<Value> = drawn
        .views
        .iter()
        .zip(&drawn.layout.views)
        .map(|(v, placed)| {
            json!({
                "id": v.id.as_str(),
                "scale": placed.scale.to_string(),
                "direction": direction(v.from),
                "up": up(v.from),
                "edges": v.edges.iter().map(edge).collect::<Vec<_>>(),
                "section": Value::Null,
            })
        })
        .collect();
    json!({ "parts": [], "views": views, "annotations": annotations(drawn) })
}

/// The values of a chain or a baseline set, in the order of its texts.
fn members(content: &Content) -> Vec<Value> {
    let sizes = match content {
        Content::Chain(sizes) | Content::Baseline(sizes) => sizes.as_slice(),
        Content::Linear(_)
        | Content::Angular { .. }
        | Content::Diameter { .. }
        | Content::Radius { .. }
        | Content::Leader { .. } => &[],
    };
    sizes
        .iter()
        .filter_map(|s| s.label.value)
        .map(|v| {
            json!({
                "value": rounded(v.nominal),
                "lower": v.limits.0.map(rounded),
                "upper": v.limits.1.map(rounded),
            })
        })
        .collect()
}

fn annotations(drawn: &Drawn) -> Vec<Value> {
    let item = |id: &crate::ident::ItemId| {
        drawn.scenes.iter().flat_map(|s| &s.items).find(|i| i.id == *id)
    };
    drawn
        .layout
        .annotations
        .iter()
        .map(|p| {
            let a = &p.annotation;
            let limits = a.value.map_or((None, None), |v| v.limits);
            let unit = a.value.map(|v| match v.unit {
                ValueUnit::Millimetre => "mm",
                ValueUnit::Degree => "deg",
            });
            json!({
                "id": a.id.as_str(),
                "kind": a.kind.name(),
                "view": drawn.views.get(a.view).map(|v| v.id.as_str()),
                "text": a.text,
                "value": a.value.map(|v| rounded(v.nominal)),
                "lower": limits.0.map(rounded),
                "upper": limits.1.map(rounded),
                "unit": unit,
                "members": members(&a.content),
                "box": item(&a.id).and_then(Item::bounds).map(|b| {
                    [b.min.x, b.min.y, b.max.x, b.max.y].map(rounded)
                }),
            })
        })
        .collect()
}

fn edge(e: &Edge) -> Value {
    let class = match e.class {
        LineClass::Visible => "visible",
        LineClass::Hidden => "hidden",
        LineClass::Smooth => "smooth",
        LineClass::Cut => "cut",
        LineClass::Centre => "centre",
        LineClass::Adjacent => "adjacent",
        LineClass::Construction => "construction",
        LineClass::Break => "break",
    };
    let features: Vec<&str> = e.shapes.iter().map(|s| s.as_str()).collect();
    json!({
        "class": class,
        "features": features,
        "shape": shape(&e.curve),
        "length_mm": rounded(e.curve.length()),
    })
}

fn shape(curve: &Curve<ViewSpace>) -> Value {
    let at = |p: Point<ViewSpace>| [rounded(p.x), rounded(p.y)];
    match curve {
        Curve::Line(l) => json!({ "line": [at(l.from), at(l.to)] }),
        Curve::Arc(a) => json!({ "arc": {
            "centre": at(a.centre),
            "radius": rounded(a.radius),
            "start_deg": rounded(a.start),
            "sweep_deg": rounded(a.sweep),
        }}),
        Curve::Ellipse(e) => json!({ "ellipse": {
            "centre": at(e.centre),
            "radii": [rounded(e.radii.0), rounded(e.radii.1)],
            "turn_deg": rounded(e.turn),
            "start_deg": rounded(e.start),
            "sweep_deg": rounded(e.sweep),
        }}),
        Curve::Cubic(c) => json!({ "spline": c.0.map(at) }),
    }
}

/// Towards the viewer, in part axes.
fn direction(from: Direction) -> [f64; 3] {
    let third = 1.0 / 3f64.sqrt();
    match from {
        Direction::Front => [0.0, -1.0, 0.0],
        Direction::Top => [0.0, 0.0, 1.0],
        Direction::Right => [1.0, 0.0, 0.0],
        Direction::Left => [-1.0, 0.0, 0.0],
        Direction::Rear => [0.0, 1.0, 0.0],
        Direction::Bottom => [0.0, 0.0, -1.0],
        Direction::Iso => [third, -third, third],
    }
}

/// Upwards on the sheet, in part axes.
fn up(from: Direction) -> [f64; 3] {
    let sixth = 1.0 / 6f64.sqrt();
    match from {
        Direction::Front | Direction::Right | Direction::Left | Direction::Rear => [0.0, 0.0, 1.0],
        Direction::Top => [0.0, 1.0, 0.0],
        Direction::Bottom => [0.0, -1.0, 0.0],
        Direction::Iso => [-sixth, sixth, 2.0 * sixth],
    }
}

/// Six decimals: a nanometre, below every tolerance and above f64 noise.
fn rounded(v: f64) -> f64 {
    let r = (v * 1e6).round() / 1e6;
    if r == 0.0 { 0.0 } else { r }
}

fn text(drawn: &Drawn) -> String {
    let sheet = &drawn.drawing.sheet;
    let mut out = format!(
        "{} {}, {} {}\n",
        sheet.number.value,
        sheet.title.as_ref().map_or("", |t| t.value.as_str()),
        drawn.layout.format.name,
        drawn.layout.scale
    );
    for view in &drawn.views {
        out.push_str(&view_line(view));
    }
    for p in &drawn.layout.annotations {
        let a = &p.annotation;
        let limits = match a.value.map(|v| v.limits) {
            Some((Some(lower), Some(upper))) => {
                format!("  {} … {}", rounded(lower), rounded(upper))
            }
            Some((Some(lower), None)) => format!("  from {}", rounded(lower)),
            Some((None, Some(upper))) => format!("  up to {}", rounded(upper)),
            Some((None, None)) | None => String::new(),
        };
        out.push_str(&format!("  {:<44} {}{limits}\n", a.id.as_str(), a.text));
    }
    out
}

fn view_line(view: &View) -> String {
    let (w, h) = (view.bounds.width(), view.bounds.height());
    let count = view.edges.len();
    format!("  view {:<12} {count} edges, {} × {} mm\n", view.id.as_str(), rounded(w), rounded(h))
}
