//! From the spec's annotations to bound, measured and written ones.

use std::sync::Arc;

use super::Practice;
use super::annotation::{Annotation, Content, LinearSize, Target};
use super::hole_note::{self, Rims};
use super::label::Label;
use super::measure::{self, MeasureError};
use super::value_text::Written;
use crate::geom::{self, Line, View as ViewSpace};
use crate::ident::ShapeId;
use crate::scene::{ItemKind, Value, ValueUnit};
use crate::source::{Diagnostic, Diagnostics, Span};
use crate::spec::{
    AnchorRef, AnnotationSpec, Drawing, Form, HoleNote, LineDirection, Measure, Pin, RimSize, Says,
    Show, Side, Text, Tolerance,
};
use crate::view::{Anchor, AnchorError, Measured, Size, View};

/// Binds every annotation of the drawing to its view, measures it and writes its text. What cannot
/// be bound is left out and reported.
#[must_use]
pub fn resolve(
    drawing: &Drawing,
    views: &[View],
    practice: Practice<'_>,
    diagnostics: &mut Diagnostics,
) -> Vec<Annotation> {
    let binder = Binder { drawing, views, practice };
    drawing
        .annotations
        .iter()
        .filter_map(|spec| match binder.bind(spec) {
            Ok(annotation) => Some(annotation),
            Err(problem) => {
                diagnostics.push(*problem);
                None
            }
        })
        .collect()
}

/// A size may miss its limits by this much, mm: what f64 leaves of a decimal.
const LIMIT_SLACK: f64 = 1e-9;

type Bound<T> = Result<T, Box<Diagnostic>>;

struct Binder<'a> {
    drawing: &'a Drawing,
    views: &'a [View],
    practice: Practice<'a>,
}

/// What an annotation turned out to say.
struct Said {
    kind: ItemKind,
    content: Content,
    value: Option<Value>,
    text: String,
    shapes: Vec<ShapeId>,
}

impl Binder<'_> {
    fn bind(&self, spec: &AnnotationSpec) -> Bound<Annotation> {
        let index = self.view_of(spec)?;
        let view = &self.views[index];
        let said = match &spec.says {
            Says::Dimension(measure, form) => self.dimension(view, measure, form)?,
            Says::Chain(anchors, direction, forms) => {
                let mut links = Vec::new();
                for (pair, form) in anchors.windows(2).zip(forms) {
                    links.push(self.between(view, &pair[0], &pair[1], *direction, form)?);
                }
                self.set(links, Content::Chain)
            }
            Says::Baseline(anchors, direction, forms) => {
                let mut members = Vec::new();
                if let [base, others @ ..] = anchors.as_slice() {
                    for (other, form) in others.iter().zip(forms) {
                        members.push(self.between(view, base, other, *direction, form)?);
                    }
                }
                members.sort_by(|a, b| a.0.length().total_cmp(&b.0.length()));
                self.set(members, Content::Baseline)
            }
            Says::Hole(anchor, note) => self.hole(view, anchor, note)?,
            Says::Note(anchor, texts) => self.note(view, anchor, texts)?,
        };
        check_pin(&said.content, &spec.pin)?;
        Ok(Annotation {
            id: spec.id.clone(),
            span: spec.span,
            view: index,
            kind: said.kind,
            shapes: said.shapes,
            value: said.value,
            text: said.text,
            content: said.content,
            pin: spec.pin,
        })
    }

    /// The view that the annotation names, or the only one that has its first anchor's shape.
    fn view_of(&self, spec: &AnnotationSpec) -> Bound<usize> {
        if let Some(named) = &spec.view {
            let found = self.views.iter().position(|v| v.id == named.value);
            return found.ok_or_else(|| {
                let ids: Vec<_> = self.views.iter().map(|v| v.id.as_str()).collect();
                let message = format!("there is no view `{}`", named.value);
                let help = match crate::source::nearest(named.value.as_str(), ids.iter().copied()) {
                    Some(near) => format!("did you mean `{near}`?"),
                    None => format!("the views are {}", ids.join(", ")),
                };
                Box::new(Diagnostic::error(named.span, message).help(help))
            });
        }
        let Some(anchor) = first_anchor(&spec.says) else { return Ok(0) };
        let holds = |v: &View| v.anchor(&anchor.name).is_ok() || v.size(&anchor.name).is_ok();
        let found: Vec<usize> = (0..self.views.len()).filter(|i| holds(&self.views[*i])).collect();
        match found.as_slice() {
            [one] => Ok(*one),
            [] => {
                let tried = self.views.first().map(|v| v.anchor(&anchor.name));
                let help = match (self.views, tried) {
                    ([_], Some(Err(e))) => e.help,
                    _ => "name a shape of a view, or say which view with view = \"…\"".to_owned(),
                };
                let message = format!("no view has a place or size `{}`", anchor.name);
                Err(Box::new(Diagnostic::error(anchor.span, message).help(help)))
            }
            several => {
                let ids: Vec<_> = several.iter().map(|i| self.views[*i].id.as_str()).collect();
                let message =
                    format!("`{}` stands in several views: {}", anchor.name, ids.join(", "));
                let help = format!("say which one, such as view = \"{}\"", ids[0]);
                Err(Box::new(Diagnostic::error(anchor.span, message).help(help)))
            }
        }
    }

    fn dimension(&self, view: &View, measure: &Measure, form: &Form) -> Bound<Said> {
        match measure {
            Measure::Between(a, b, direction) => {
                let (size, shapes, value) = self.between(view, a, b, *direction, form)?;
                let text = label_text(&size.label);
                Ok(said(Content::Linear(size), Some(value), text, shapes))
            }
            Measure::Of(anchor) => self.size(view, anchor, form),
            Measure::Angle(a, b) => self.angle(view, a, b, form),
            Measure::Chamfer(anchor) => self.chamfer(view, anchor, form),
        }
    }

    /// The distance of two anchors, each a single place.
    fn between(
        &self,
        view: &View,
        a: &AnchorRef,
        b: &AnchorRef,
        direction: LineDirection,
        form: &Form,
    ) -> Bound<(LinearSize, Vec<ShapeId>, Value)> {
        let (shape_a, from) = self.single(view, a)?;
        let (shape_b, to) = self.single(view, b)?;
        let span = Span { end: b.span.end.max(a.span.end), ..a.span };
        let size = measure::linear(measure::hold(&from), measure::hold(&to), direction)
            .map_err(|e| measure_problem(&e, span))?;
        check_form(size.length(), form, span)?;
        let sign = form.sign.map_or("", |s| s.text());
        let (label, value, _) = self.write(size.length(), ValueUnit::Millimetre, 1, sign, form);
        let size = LinearSize { label: Arc::new(label), ..size };
        Ok((size, joined([shape_a, shape_b]), value))
    }

    fn size(&self, view: &View, anchor: &AnchorRef, form: &Form) -> Bound<Said> {
        let found = view.size(&anchor.name).map_err(|e| anchor_problem(e, anchor))?;
        let count = found.members.len();
        let shapes = joined(found.members.iter().map(|(id, _)| id.clone()));
        let mm = ValueUnit::Millimetre;
        let Some((_, first)) = found.members.first() else {
            return Err(Box::new(Diagnostic::error(anchor.span, "this group has no members")));
        };
        match *first {
            Size::Diameter(circle) => {
                check_form(circle.radius * 2.0, form, anchor.span)?;
                let circles = rounds(&found);
                let (label, value, text) = self.write(circle.radius * 2.0, mm, count, "⌀", form);
                let content = Content::Diameter { circles, label: Arc::new(label) };
                Ok(said(content, Some(value), text, shapes))
            }
            Size::Radius(arc) => {
                check_form(arc.radius, form, anchor.span)?;
                let (label, value, text) = self.write(arc.radius, mm, count, "R", form);
                let content = Content::Radius { arcs: rounds(&found), label: Arc::new(label) };
                Ok(said(content, Some(value), text, shapes))
            }
            Size::Distance { from, to, direction, sign } => {
                let size = measure::linear(measure::hold(&from), measure::hold(&to), direction)
                    .map_err(|e| measure_problem(&e, anchor.span))?;
                check_form(size.length(), form, anchor.span)?;
                let sign = form.sign.or(sign).map_or("", |s| s.text());
                let (label, value, text) = self.write(size.length(), mm, count, sign, form);
                let size = LinearSize { label: Arc::new(label), ..size };
                Ok(said(Content::Linear(size), Some(value), text, shapes))
            }
        }
    }

    fn angle(&self, view: &View, a: &AnchorRef, b: &AnchorRef, form: &Form) -> Bound<Said> {
        let (shape_a, first) = self.edge(view, a)?;
        let (shape_b, second) = self.edge(view, b)?;
        let Some((vertex, legs)) = measure::corner(&first, &second) else {
            let problem = Diagnostic::error(a.span, "the two edges are parallel: no angle")
                .help("dimension their distance with between = [a, b]");
            return Err(Box::new(problem));
        };
        let [u, v] = legs.map(|l| l.vector());
        let degrees = u.cross(v).atan2(u.dot(v)).to_degrees().abs();
        check_form(degrees, form, a.span)?;
        let (label, value, text) = self.write(degrees, ValueUnit::Degree, 1, "", form);
        let content = Content::Angular { vertex, legs, label: Arc::new(label) };
        Ok(said(content, Some(value), text, joined([shape_a, shape_b])))
    }

    /// Leg × angle of a slanted edge; the leg lies along the nearer axis of the view.
    fn chamfer(&self, view: &View, anchor: &AnchorRef, form: &Form) -> Bound<Said> {
        let found = view.anchor(&anchor.name).map_err(|e| anchor_problem(e, anchor))?;
        let count = found.members.len();
        let edges: Vec<(ShapeId, Line<ViewSpace>)> = found
            .members
            .iter()
            .filter_map(|(id, a)| match a {
                Anchor::Edge(l) => Some((id.clone(), *l)),
                Anchor::Point(_) | Anchor::Centre { .. } | Anchor::Axis(_) | Anchor::Round(_) => {
                    None
                }
            })
            .collect();
        let Some((_, edge)) = edges.first() else {
            return Err(self.no_edge(anchor));
        };
        let v = edge.vector();
        let (dx, dy) = (v.x.abs(), v.y.abs());
        if dx.min(dy) < geom::COINCIDENT {
            let problem =
                Diagnostic::error(anchor.span, "this edge is level or upright: no chamfer")
                    .help("name the slanted edge of the chamfer");
            return Err(Box::new(problem));
        }
        let upright = view.has_upright_axis();
        let (leg, other) = if upright { (dy, dx) } else { (dx, dy) };
        let degrees = other.atan2(leg).to_degrees();
        let numbers = &self.practice.style.number;
        let written = Written {
            value: leg,
            unit: ValueUnit::Millimetre,
            count,
            sign: "",
            form,
            places: self.drawing.sheet.places,
        };
        let angle = numbers.write(degrees, None, numbers.angle_places);
        let text = format!("{}{}{angle}°", written.line(&self.practice), numbers.by);
        let targets = edges.iter().map(|(_, l)| Target::Edge(*l)).collect();
        let label = Arc::new(Label::line(&text, self.practice.group.text));
        let value = Some(written.data());
        let shapes = joined(edges.into_iter().map(|(id, _)| id));
        Ok(said(Content::Leader { targets, label }, value, text, shapes))
    }

    fn hole(&self, view: &View, anchor: &AnchorRef, note: &HoleNote) -> Bound<Said> {
        let diameter = format!("{}.diameter", anchor.name);
        let found = view.size(&diameter).map_err(|e| anchor_problem(e, anchor))?;
        let circles = rounds(&found);
        let Some(circle) = circles.first() else {
            let problem = Diagnostic::error(anchor.span, "a hole callout needs a circle")
                .help("name a circle or a group of circles; a note takes at = \"…\" and text");
            return Err(Box::new(problem));
        };
        let rim = |size: &RimSize| match size {
            RimSize::Given(mm) => Ok(*mm),
            RimSize::Shape(at) => self.circle_diameter(view, at),
        };
        let rims = Rims {
            counterbore: note.counterbore.as_ref().map(|e| rim(&e.diameter)).transpose()?,
            spotface: note.spotface.as_ref().map(|e| rim(&e.diameter)).transpose()?,
            countersink: note.countersink.as_ref().map(|e| rim(&e.diameter)).transpose()?,
        };
        let lines = hole_note::lines(
            note,
            circle.radius * 2.0,
            circles.len(),
            &rims,
            self.drawing.sheet.places,
            &self.practice,
        );
        // The leader ends on the outermost rim that the view shows.
        let outer = [&note.counterbore, &note.spotface]
            .into_iter()
            .flatten()
            .map(|e| &e.diameter)
            .chain(note.countersink.as_ref().map(|c| &c.diameter))
            .find_map(|d| match d {
                RimSize::Shape(at) => view.size(&format!("{}.diameter", at.name)).ok(),
                RimSize::Given(_) => None,
            });
        let targets = outer.as_ref().map_or_else(|| circles.clone(), rounds);
        let shapes = joined(found.members.into_iter().map(|(id, _)| id));
        let content = Content::Leader {
            targets: targets.into_iter().map(Target::Round).collect(),
            label: self.block(&lines),
        };
        Ok(Said { kind: ItemKind::Callout, content, value: None, text: lines.join(" "), shapes })
    }

    fn note(&self, view: &View, anchor: &AnchorRef, texts: &[Text]) -> Bound<Said> {
        let found = view.anchor(&anchor.name).map_err(|e| anchor_problem(e, anchor))?;
        let targets = found.members.iter().map(|(_, a)| target(a)).collect();
        let lines: Vec<String> =
            texts.iter().map(|t| t.format(&self.practice.style.number)).collect();
        let content = Content::Leader { targets, label: self.block(&lines) };
        let shapes = joined(found.members.into_iter().map(|(id, _)| id));
        Ok(Said { kind: ItemKind::Leader, content, value: None, text: lines.join(" "), shapes })
    }

    /// A chain or a baseline set as one annotation.
    fn set(
        &self,
        members: Vec<(LinearSize, Vec<ShapeId>, Value)>,
        content: impl Fn(Vec<LinearSize>) -> Content,
    ) -> Said {
        let shapes = joined(members.iter().flat_map(|(_, shapes, _)| shapes.clone()));
        let sizes: Vec<LinearSize> = members
            .into_iter()
            .map(|(size, _, value)| {
                let mut label = Label::clone(&size.label);
                label.value = Some(value);
                LinearSize { label: Arc::new(label), ..size }
            })
            .collect();
        let text = sizes.iter().map(|s| label_text(&s.label)).collect::<Vec<_>>().join(" | ");
        said(content(sizes), None, text, shapes)
    }

    fn write(
        &self,
        value: f64,
        unit: ValueUnit,
        count: usize,
        sign: &str,
        form: &Form,
    ) -> (Label, Value, String) {
        let written = Written { value, unit, count, sign, form, places: self.drawing.sheet.places };
        (written.label(&self.practice), written.data(), written.line(&self.practice))
    }

    fn block(&self, lines: &[String]) -> Arc<Label> {
        let h = self.practice.group.text;
        let pitch = self.practice.style.leader.line_pitch * h;
        let mut label = Label::default();
        for (i, line) in lines.iter().enumerate() {
            match i {
                0 => label.push(line, h),
                _ => label.below(line, h, pitch * i as f64),
            }
        }
        Arc::new(label)
    }

    fn single(&self, view: &View, anchor: &AnchorRef) -> Bound<(ShapeId, Anchor)> {
        let found = view.anchor(&anchor.name).map_err(|e| anchor_problem(e, anchor))?;
        match found.members.as_slice() {
            [(id, a)] => Ok((id.clone(), *a)),
            several => {
                let message = format!("`{}` names {} places, not one", anchor.name, several.len());
                let help = several.first().map_or_else(String::new, |(id, _)| {
                    let place = anchor.name.rsplit_once('.').map_or("", |(_, place)| place);
                    format!("pick a member, such as `{id}.{place}`")
                });
                Err(Box::new(Diagnostic::error(anchor.span, message).help(help)))
            }
        }
    }

    fn edge(&self, view: &View, anchor: &AnchorRef) -> Bound<(ShapeId, Line<ViewSpace>)> {
        match self.single(view, anchor)? {
            (id, Anchor::Edge(l) | Anchor::Axis(l)) => Ok((id, l)),
            (_, Anchor::Point(_) | Anchor::Centre { .. } | Anchor::Round(_)) => {
                Err(self.no_edge(anchor))
            }
        }
    }

    fn no_edge(&self, anchor: &AnchorRef) -> Box<Diagnostic> {
        let message = format!("`{}` is no straight edge", anchor.name);
        Box::new(Diagnostic::error(anchor.span, message).help("name a line or a side of a shape"))
    }

    fn circle_diameter(&self, view: &View, at: &AnchorRef) -> Bound<f64> {
        let found =
            view.size(&format!("{}.diameter", at.name)).map_err(|e| anchor_problem(e, at))?;
        rounds(&found).first().map(|c| c.radius * 2.0).ok_or_else(|| {
            Box::new(
                Diagnostic::error(at.span, format!("`{}` is no circle", at.name))
                    .help("name a circle, or give the diameter as a number"),
            )
        })
    }
}

/// A level dimension has no left side: a pin that asks for it cannot be kept.
fn check_pin(content: &Content, pin: &Pin) -> Bound<()> {
    let along = match content {
        Content::Linear(size) => size.along,
        Content::Chain(sizes) | Content::Baseline(sizes) => match sizes.first() {
            Some(size) => size.along,
            None => return Ok(()),
        },
        Content::Angular { .. }
        | Content::Diameter { .. }
        | Content::Radius { .. }
        | Content::Leader { .. } => return Ok(()),
    };
    let (level, upright) = (along.y.abs() < 1e-9, along.x.abs() < 1e-9);
    let (kind, sides) = match pin.side {
        Some(Side::Left | Side::Right) if level => ("a level", "\"above\" or \"below\""),
        Some(Side::Above | Side::Below) if upright => ("an upright", "\"left\" or \"right\""),
        _ => return Ok(()),
    };
    let message = format!("{kind} dimension does not stand on that side");
    let help = format!("say side = {sides}, or leave the side open");
    Err(Box::new(Diagnostic::error(pin.span, message).help(help)))
}

/// A form must agree with what is measured: limits hold the size, and what is to be shown is given.
fn check_form(value: f64, form: &Form, span: Span) -> Bound<()> {
    if let Tolerance::Limits { upper, lower } = form.tolerance
        && !(lower - LIMIT_SLACK..=upper + LIMIT_SLACK).contains(&value)
    {
        let message = format!("the size measures {value}, outside its limits {lower} and {upper}");
        let help = "draw the size within its limits, or correct the limits";
        return Err(Box::new(Diagnostic::error(span, message).help(help)));
    }
    let shown = matches!(form.show, Show::Limits | Show::Deviations);
    if shown && form.tolerance == Tolerance::None {
        let message = "limits or deviations are to be shown, but none are given";
        let help = "give a tolerance, such as { upper = 0.021, lower = 0 }";
        return Err(Box::new(Diagnostic::error(span, message).help(help)));
    }
    Ok(())
}

fn said(content: Content, value: Option<Value>, text: String, shapes: Vec<ShapeId>) -> Said {
    Said { kind: ItemKind::Dimension, content, value, text, shapes }
}

fn target(anchor: &Anchor) -> Target {
    match *anchor {
        Anchor::Point(p) => Target::Point(p),
        Anchor::Centre { at, .. } => Target::Point(at),
        Anchor::Edge(l) | Anchor::Axis(l) => Target::Edge(l),
        Anchor::Round(a) => Target::Round(a),
    }
}

fn rounds(found: &Measured<Size>) -> Vec<geom::Arc<ViewSpace>> {
    let round = |size: &Size| match *size {
        Size::Diameter(a) | Size::Radius(a) => Some(a),
        Size::Distance { .. } => None,
    };
    found.members.iter().filter_map(|(_, size)| round(size)).collect()
}

fn joined(shapes: impl IntoIterator<Item = ShapeId>) -> Vec<ShapeId> {
    let mut all: Vec<ShapeId> = Vec::new();
    for s in shapes {
        if !all.contains(&s) {
            all.push(s);
        }
    }
    all
}

fn label_text(label: &Label) -> String {
    label.runs.iter().map(|(_, run)| run.text.as_str()).collect::<Vec<_>>().join(" ")
}

fn first_anchor(says: &Says) -> Option<&AnchorRef> {
    match says {
        Says::Dimension(Measure::Between(a, ..) | Measure::Of(a), _)
        | Says::Dimension(Measure::Angle(a, _) | Measure::Chamfer(a), _)
        | Says::Hole(a, _)
        | Says::Note(a, _) => Some(a),
        Says::Chain(anchors, ..) | Says::Baseline(anchors, ..) => anchors.first(),
    }
}

fn anchor_problem(e: AnchorError, anchor: &AnchorRef) -> Box<Diagnostic> {
    Box::new(Diagnostic::error(anchor.span, e.message).help(e.help))
}

fn measure_problem(e: &MeasureError, span: Span) -> Box<Diagnostic> {
    Box::new(Diagnostic::error(span, e.to_string()).help(e.help()))
}
