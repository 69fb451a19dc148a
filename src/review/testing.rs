//! Drawings made by hand for the rules' examples.

use std::sync::Arc;

use super::{Conflict, Misfit, ReviewInput};
use crate::geom::{Arc as ArcCurve, Curve, Line, Path, Point, Sheet, Vector};
use crate::ident::{ItemId, ViewId};
use crate::scene::{
    Item, ItemKind, Mark, PlacedText, Role, Scene, SheetFacts, Stroke, Value, ValueUnit, filled,
    straight,
};
use crate::source::{FileId, Span};
use crate::spec::{Drawing, FormatChoice, ScaleChoice, SheetSpec, Spanned, Status};
use crate::style::{Style, builtin};
use crate::text::Run;
use crate::units::LengthUnit;

/// Everything that a review takes, owned.
pub(crate) struct Case {
    pub(crate) scenes: Vec<Scene>,
    pub(crate) style: Style,
    pub(crate) drawing: Option<Drawing>,
    pub(crate) misfits: Vec<Misfit>,
    pub(crate) conflicts: Vec<Conflict>,
}

impl Case {
    pub(crate) fn input(&self) -> ReviewInput<'_> {
        ReviewInput {
            scenes: &self.scenes,
            style: &self.style,
            drawing: self.drawing.as_ref(),
            misfits: &self.misfits,
            conflicts: &self.conflicts,
        }
    }

    pub(crate) fn with_drawing(mut self, drawing: Drawing) -> Self {
        self.drawing = Some(drawing);
        self
    }
}

type Place = (f64, f64);

const NARROW: f64 = 0.25;
const WIDE: f64 = 0.5;

/// Builds an A3 sheet item by item; marks go to the item begun last.
pub(crate) struct SheetBuilder {
    items: Vec<Item>,
}

/// An empty A3 sheet.
pub(crate) fn a3() -> SheetBuilder {
    SheetBuilder { items: Vec::new() }
}

fn point((x, y): Place) -> Point<Sheet> {
    Point::new(x, y)
}

impl SheetBuilder {
    /// Begins an item; an empty view stands for none.
    pub(crate) fn item(mut self, id: &str, kind: ItemKind, view: &str) -> Self {
        let mut item = Item::new(ItemId::new(id), kind, Vec::new());
        item.view = (!view.is_empty()).then(|| ViewId::new(view));
        self.items.push(item);
        self
    }

    pub(crate) fn mark(mut self, mark: Mark) -> Self {
        self.items.last_mut().expect("an item was begun").marks.push(mark);
        self
    }

    pub(crate) fn feature(mut self, feature: &str) -> Self {
        self.items.last_mut().expect("an item was begun").feature = Some(feature.to_owned());
        self
    }

    pub(crate) fn value(mut self, nominal: f64) -> Self {
        self.items.last_mut().expect("an item was begun").value =
            Some(Value { nominal, limits: (None, None), unit: ValueUnit::Millimetre });
        self
    }

    pub(crate) fn text(self, text: &str, at: Place) -> Self {
        self.text_of(text, at, 3.5, 0.0)
    }

    pub(crate) fn text_of(self, text: &str, at: Place, height: f64, angle: f64) -> Self {
        let run = Arc::new(Run::new(text, height));
        self.mark(Mark::Text(PlacedText::new(run, point(at), angle)))
    }

    pub(crate) fn stroke(self, width: f64, role: Option<Role>, from: Place, to: Place) -> Self {
        self.mark(straight(Line::new(point(from), point(to)), width, role))
    }

    pub(crate) fn wide(self, from: Place, to: Place) -> Self {
        self.stroke(WIDE, None, from, to)
    }

    pub(crate) fn narrow(self, from: Place, to: Place) -> Self {
        self.stroke(NARROW, None, from, to)
    }

    pub(crate) fn role(self, role: Role, from: Place, to: Place) -> Self {
        self.stroke(NARROW, Some(role), from, to)
    }

    pub(crate) fn circle(self, width: f64, centre: Place, radius: f64) -> Self {
        let circle = Path::of(Curve::Arc(ArcCurve::circle(point(centre), radius)));
        self.mark(Mark::Stroke(Stroke::new(vec![circle], width, None)))
    }

    /// A filled arrowhead of 3.5 mm whose tip points towards `degrees`.
    pub(crate) fn arrow(self, tip: Place, degrees: f64) -> Self {
        let along = Vector::<Sheet>::at_angle(degrees);
        let base = point(tip) - along * 3.5;
        let corners = [point(tip), base + along.left() * 0.46, base - along.left() * 0.46];
        self.mark(filled(&corners, Role::Arrow))
    }

    /// A rectangle of outline as one item.
    pub(crate) fn outline(self, id: &str, view: &str, a: Place, b: Place) -> Self {
        let corners = [a, (b.0, a.1), b, (a.0, b.1)].map(point);
        let stroke = Stroke::new(vec![Path::polyline(&corners, true)], WIDE, None);
        self.item(id, ItemKind::Outline, view).mark(Mark::Stroke(stroke))
    }

    /// A level dimension from `x.0` to `x.1` of an outline at `y`, on a line at `line`.
    pub(crate) fn dimension(self, id: &str, view: &str, x: (f64, f64), y: f64, line: f64) -> Self {
        let label = format!("{}", x.1 - x.0);
        let width = Run::new(&label, 3.5).advance;
        let end = if line < y { line - 2.0 } else { line + 2.0 };
        self.item(id, ItemKind::Dimension, view)
            .role(Role::Ext, (x.0, y), (x.0, end))
            .role(Role::Ext, (x.1, y), (x.1, end))
            .role(Role::Dim, (x.0, line), (x.1, line))
            .arrow((x.0, line), 180.0)
            .arrow((x.1, line), 0.0)
            .text(&label, ((x.0 + x.1 - width) / 2.0, line - 1.125))
    }

    /// A note whose leader runs from `tip` to `elbow` and on under the text.
    pub(crate) fn leader(self, id: &str, view: &str, tip: Place, elbow: Place, text: &str) -> Self {
        let end = elbow.0 + Run::new(text, 3.5).advance;
        let towards = (point(tip) - point(elbow)).angle();
        self.item(id, ItemKind::Leader, view)
            .role(Role::Leader, tip, elbow)
            .role(Role::Leader, elbow, (end, elbow.1))
            .arrow(tip, towards)
            .text(text, (elbow.0, elbow.1 - 1.5))
    }

    pub(crate) fn scene(self) -> Scene {
        Scene {
            sheet: SheetFacts {
                width: 420.0,
                height: 297.0,
                number: "WL-1".into(),
                title: "Plate".into(),
                revision: String::new(),
                style: "iso".into(),
                format: "A3".into(),
                index: 1,
                count: 1,
            },
            items: self.items,
        }
    }

    pub(crate) fn case(self) -> Case {
        Case {
            scenes: vec![self.scene()],
            style: builtin("iso").expect("compiled in"),
            drawing: None,
            misfits: Vec::new(),
            conflicts: Vec::new(),
        }
    }
}

/// A place in a spec that does not matter.
pub(crate) fn nowhere() -> Span {
    Span { file: FileId(0), start: 0, end: 0 }
}

pub(crate) fn spanned<T>(value: T) -> Spanned<T> {
    Spanned { value, span: nowhere() }
}

/// A spec that says nothing but its number.
pub(crate) fn bare_drawing() -> Drawing {
    Drawing {
        sheet: SheetSpec {
            number: spanned("WL-1".to_owned()),
            title: None,
            subtitle: None,
            status: Status::Draft,
            style: spanned("iso".to_owned()),
            units: LengthUnit::Millimetre,
            format: FormatChoice::Auto,
            scale: ScaleChoice::Auto,
            places: None,
            fields: Vec::new(),
            own_fields: Vec::new(),
            notes: Vec::new(),
            span: nowhere(),
        },
        parts: Vec::new(),
        views: Vec::new(),
        annotations: Vec::new(),
        revisions: Vec::new(),
        allow: Vec::new(),
    }
}
