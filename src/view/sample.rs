//! View specs written by hand, for the tests of this module.

use super::{View, drawn_view};
use crate::geom::{Point, Vector, View as ViewSpace};
use crate::ident::{PartId, ShapeId, ViewId};
use crate::source::{Diagnostic, Diagnostics, FileId, Span};
use crate::spec::{
    Axis, CentreLines, Direction, Geometry, LineClass, Outline, Repeat, Shape, Spanned, ViewSpec,
};

pub(super) fn p(x: f64, y: f64) -> Point<ViewSpace> {
    Point::new(x, y)
}

pub(super) fn span(start: usize, end: usize) -> Span {
    Span { file: FileId(0), start, end }
}

pub(super) fn shape(id: &str, outline: Outline) -> Shape {
    Shape {
        id: ShapeId::new(id),
        span: span(0, 1),
        class: LineClass::Visible,
        outline,
        hatch: false,
        centre: CentreLines::Auto,
        repeat: None,
    }
}

pub(super) fn circle(id: &str, x: f64, y: f64, diameter: f64) -> Shape {
    shape(id, Outline::Circle { centre: p(x, y), diameter })
}

pub(super) fn line(id: &str, from: (f64, f64), to: (f64, f64)) -> Shape {
    shape(id, Outline::Line { from: p(from.0, from.1), to: p(to.0, to.1) })
}

pub(super) fn rectangle(id: &str, x: f64, y: f64, width: f64, height: f64) -> Shape {
    let size = Vector::new(width, height);
    shape(id, Outline::Rectangle { corner: p(x, y), size, corner_radius: 0.0, turned: None })
}

pub(super) fn turned(id: &str, x: f64, y: f64, length: f64, diameter: f64) -> Shape {
    let size = Vector::new(length, diameter);
    let axis = Some(Axis::X);
    shape(id, Outline::Rectangle { corner: p(x, y), size, corner_radius: 0.0, turned: axis })
}

pub(super) fn path(id: &str, data: &str) -> Shape {
    let data = Spanned { value: data.to_owned(), span: span(100, 102 + data.len()) };
    shape(id, Outline::Path { data })
}

pub(super) fn polar(shape: Shape, count: u32) -> Shape {
    let step = 360.0 / f64::from(count.max(1));
    Shape { repeat: Some(Repeat::Polar { count, about: p(0.0, 0.0), step }), ..shape }
}

pub(super) fn cut_face(shape: Shape) -> Shape {
    Shape { hatch: true, class: LineClass::Cut, ..shape }
}

pub(super) fn class(class: LineClass, shape: Shape) -> Shape {
    Shape { class, ..shape }
}

pub(super) fn spec(id: &str, from: Direction, shapes: Vec<Shape>) -> ViewSpec {
    ViewSpec {
        id: ViewId::new(id),
        span: span(0, 99),
        part: PartId::new("part"),
        from,
        scale: None,
        label: None,
        is_section: false,
        geometry: Geometry::Drawn(shapes),
    }
}

/// The front view of these shapes, which must be sound.
pub(super) fn view(shapes: Vec<Shape>) -> View {
    let mut diagnostics = Diagnostics::default();
    let view = drawn_view(&spec("front", Direction::Front, shapes), &mut diagnostics);
    view.unwrap_or_else(|| panic!("{:?}", diagnostics.into_sorted()))
}

/// What is wrong with these shapes.
pub(super) fn complaints(shapes: Vec<Shape>) -> Vec<Diagnostic> {
    let mut diagnostics = Diagnostics::default();
    let _ = drawn_view(&spec("front", Direction::Front, shapes), &mut diagnostics);
    diagnostics.into_sorted()
}
