//! Sheet size and scale: given, or the smallest sheet and the largest preferred scale at which
//! everything fits.

use std::sync::Arc;

use rayon::prelude::*;

use super::Layout;
use super::arrange::{Field, Room, Shortage, arrange};
use super::choice::Problem;
use super::conflict::pair_cost;
use super::grid::stands;
use super::ink::{Choice, Chooser, Ink, whole};
use super::surroundings::Surroundings;
use crate::annotate::{
    Annotation, Candidate, Fixed, Label, PlacedLabel, Practice, Sketch, candidates, resolve,
};
use crate::geom::{Curve, Paper, Point, Rect, Sheet, Shift};
use crate::ident::ViewId;
use crate::source::{Diagnostic, Diagnostics};
use crate::spec::{Drawing, FormatChoice, LineClass, ScaleChoice};
use crate::style::{FormatSpec, Style};
use crate::units::Scale;
use crate::view::{PaperView, View, on_paper};

/// A view where it stands.
#[derive(Clone, Debug)]
pub struct PlacedView {
    /// Its id.
    pub id: ViewId,
    /// The view on paper, around its own origin.
    pub paper: PaperView,
    /// Where that origin stands.
    pub shift: Shift,
    /// Its scale.
    pub scale: Scale,
    /// Its label.
    pub label: Option<PlacedLabel<Sheet>>,
}

/// An annotation where it stands.
#[derive(Clone, Debug)]
pub struct Placed {
    /// The annotation.
    pub annotation: Annotation,
    /// The drawing that was chosen.
    pub sketch: Sketch<Sheet>,
}

/// Why nothing can be laid out.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum LayoutError {
    /// The style knows no such sheet size.
    #[error("the style has no sheet size `{name}`")]
    UnknownFormat {
        /// As asked for.
        name: String,
        /// What there is.
        known: Vec<String>,
    },
    /// The views do not fit.
    #[error("at {scale} the views and their annotations need {} × {} mm, {format} has room for {} × {} mm",
        needed.0.ceil(), needed.1.ceil(), available.0.floor(), available.1.floor())]
    DoesNotFit {
        /// The scale tried last.
        scale: Scale,
        /// The sheet size tried last.
        format: String,
        /// Width and height needed, mm.
        needed: (f64, f64),
        /// Width and height inside the frame, mm.
        available: (f64, f64),
    },
}

impl LayoutError {
    /// The error with its place in the spec and a way out.
    #[must_use]
    pub fn diagnostic(&self, drawing: &Drawing) -> Diagnostic {
        let sheet = &drawing.sheet;
        let format_span = match &sheet.format {
            FormatChoice::Named(n) => Some(n.span),
            FormatChoice::Auto => None,
        };
        let scale_span = match &sheet.scale {
            ScaleChoice::Given(s) => Some(s.span),
            ScaleChoice::Auto => None,
        };
        match self {
            Self::UnknownFormat { name, known } => {
                let names: Vec<&str> = known.iter().map(String::as_str).collect();
                let help = match crate::source::nearest(name, names.iter().copied()) {
                    Some(near) => {
                        format!("did you mean `{near}`? The style has {}", names.join(", "))
                    }
                    None => format!("the style has {}; or say \"auto\"", names.join(", ")),
                };
                Diagnostic::error(format_span, self.to_string()).help(help)
            }
            Self::DoesNotFit { .. } => {
                let span = scale_span.or(format_span).unwrap_or(sheet.span);
                let help = match (format_span.is_some(), scale_span.is_some()) {
                    (true, true) => {
                        "take a smaller scale or a larger sheet, or let the program choose with \
                         scale = \"auto\" or sheet = \"auto\""
                    }
                    (true, false) => "take a larger sheet, or sheet = \"auto\"",
                    (false, true) => "take a smaller scale, or scale = \"auto\"",
                    (false, false) => "leave out annotations, or spread them over more views",
                };
                Diagnostic::error(span, self.to_string()).help(help)
            }
        }
    }
}

/// Lays the drawing out.
///
/// # Errors
/// [`LayoutError`] where the sheet size is unknown or nothing that the spec allows fits.
pub fn lay_out(drawing: &Drawing, views: &[View], style: &Style) -> Result<Layout, LayoutError> {
    let formats = formats(drawing, style)?;
    let scales = scales(drawing, style);
    let given = drawing.sheet.scale != ScaleChoice::Auto;
    let (feature, view) = (smallest_feature(views), largest_extent(views));
    // First at a scale at which everything can be read, on whatever sheet; only then smaller, and
    // never so small that the part itself is a dot.
    let legible = |k: f64| feature * k >= style.views.smallest_feature;
    let visible = |k: f64| view * k >= style.views.smallest_view;
    let passes: [&dyn Fn(f64) -> bool; 2] = [&legible, &visible];
    let mut last = None;
    for accepts in passes {
        for format in &formats {
            let desk = Desk::new(drawing, views, style, format);
            for scale in scales.iter().filter(|s| given || accepts(s.factor())) {
                match desk.try_scale(*scale) {
                    Ok(layout) => return Ok(layout),
                    Err(short) => last = Some((short, *scale, format.name.clone())),
                }
            }
        }
    }
    let (short, scale, format) = last.unwrap_or_else(|| {
        let none = Shortage { needed: (0.0, 0.0), available: (0.0, 0.0) };
        (none, Scale::FULL, String::new())
    });
    let (needed, available) = (short.needed, short.available);
    Err(LayoutError::DoesNotFit { scale, format, needed, available })
}

/// The sheet sizes that the spec allows, smallest first.
fn formats<'a>(drawing: &Drawing, style: &'a Style) -> Result<Vec<&'a FormatSpec>, LayoutError> {
    match &drawing.sheet.format {
        FormatChoice::Named(name) => {
            let found = style.format.iter().find(|f| f.name == name.value);
            found.map(|f| vec![f]).ok_or_else(|| LayoutError::UnknownFormat {
                name: name.value.clone(),
                known: style.format.iter().map(|f| f.name.clone()).collect(),
            })
        }
        FormatChoice::Auto => {
            let mut all: Vec<&FormatSpec> = style.format.iter().collect();
            all.sort_by(|a, b| (a.width * a.height).total_cmp(&(b.width * b.height)));
            Ok(all)
        }
    }
}

/// The scales that the spec allows, largest first.
fn scales(drawing: &Drawing, style: &Style) -> Vec<Scale> {
    match &drawing.sheet.scale {
        ScaleChoice::Given(s) => vec![s.value],
        ScaleChoice::Auto => style.scales.iter().filter_map(|s| s.parse().ok()).collect(),
    }
}

/// The shortest visible edge or smallest diameter, mm of the part.
fn smallest_feature(views: &[View]) -> f64 {
    views
        .iter()
        .flat_map(|v| &v.edges)
        .filter(|e| e.class == LineClass::Visible)
        .map(|e| match &e.curve {
            Curve::Arc(a) if a.is_full() => a.radius * 2.0,
            other => other.length(),
        })
        .filter(|l| *l > 1e-3)
        .fold(f64::INFINITY, f64::min)
}

/// The longest side of any view, mm of the part.
fn largest_extent(views: &[View]) -> f64 {
    views.iter().map(|v| v.bounds.width().max(v.bounds.height())).fold(0.0, f64::max)
}

/// One sheet size, with what depends on it alone.
struct Desk<'a> {
    drawing: &'a Drawing,
    views: &'a [View],
    practice: Practice<'a>,
    format: &'a FormatSpec,
    annotations: Vec<Annotation>,
}

/// A view with its annotations placed as if it were alone.
struct Alone {
    paper: PaperView,
    scale: Scale,
    /// Places of its annotations in the drawing's list.
    members: Vec<usize>,
    offers: Vec<Vec<Candidate>>,
    picks: Vec<usize>,
    label: Option<Arc<Label>>,
}

impl<'a> Desk<'a> {
    fn new(
        drawing: &'a Drawing,
        views: &'a [View],
        style: &'a Style,
        format: &'a FormatSpec,
    ) -> Self {
        let practice = Practice { style, group: style.group_of(&format.name) };
        // What cannot be bound was reported before the layout began.
        let annotations = resolve(drawing, views, practice, &mut Diagnostics::default());
        Self { drawing, views, practice, format, annotations }
    }

    fn try_scale(&self, scale: Scale) -> Result<Layout, Shortage> {
        let facts = crate::sheet::FurnitureFacts { scale: Some(scale), index: 1, count: 1 };
        let furniture =
            crate::sheet::furniture(self.drawing, &facts, self.practice.style, self.format);
        self.outlines_fit(scale, &furniture.frame)?;
        let alone: Vec<Alone> =
            (0..self.views.len()).into_par_iter().map(|i| self.alone(i, scale)).collect();
        let stands = stands(self.views, self.practice.style.projection);
        let rooms: Vec<Room> = alone
            .iter()
            .zip(stands)
            .map(|(a, stand)| Room { stand, outline: a.paper.outline, ink: self.room(a) })
            .collect();
        let field = Field {
            frame: furniture.frame,
            blocks: furniture.blocks.iter().map(|b| b.area).collect(),
        };
        let shifts = arrange(&rooms, &field, &self.practice)?;
        let annotations = self.together(&alone, &shifts, &field);
        let views = self.placed_views(alone, &shifts, &annotations);
        Ok(Layout {
            format: self.format.clone(),
            scale,
            views,
            annotations,
            furniture: furniture.items,
            misfits: furniture.misfits,
            frame: furniture.frame,
        })
    }

    /// A quick look before anything is placed: no view may be larger than the frame.
    fn outlines_fit(&self, scale: Scale, frame: &Rect<Sheet>) -> Result<(), Shortage> {
        let inner = frame.grown(-self.practice.style.views.frame_gap_least);
        for view in self.views {
            let k = view.scale.unwrap_or(scale).factor();
            let needed = (view.bounds.width() * k, view.bounds.height() * k);
            if needed.0 > inner.width() || needed.1 > inner.height() {
                return Err(Shortage { needed, available: (inner.width(), inner.height()) });
            }
        }
        Ok(())
    }

    fn alone(&self, index: usize, main: Scale) -> Alone {
        let view = &self.views[index];
        let scale = view.scale.unwrap_or(main);
        let paper = on_paper(view, scale, self.practice.style, self.practice.group);
        let fixed = Fixed::of(&paper);
        let members: Vec<usize> =
            (0..self.annotations.len()).filter(|i| self.annotations[*i].view == index).collect();
        let offers: Vec<Vec<Candidate>> = members
            .iter()
            .map(|i| {
                candidates(&self.annotations[*i], &paper, &fixed, members.len(), self.practice)
            })
            .collect();
        let choosers: Vec<Chooser<Paper>> = offers
            .iter()
            .map(|offer| Chooser {
                view: index,
                choices: offer
                    .iter()
                    .map(|c| Choice {
                        cost: whole(c.cost),
                        ink: Ink::of(&c.sketch),
                        seats: c.seats.clone(),
                    })
                    .collect(),
            })
            .collect();
        let picks = Problem::new(&choosers, self.practice).solve(None);
        let label = self.label(view, scale, main);
        Alone { paper, scale, members, offers, picks, label }
    }

    /// The view's label; a scale of its own is part of it.
    fn label(&self, view: &View, scale: Scale, main: Scale) -> Option<Arc<Label>> {
        let number = &self.practice.style.number;
        let name = view.label.as_ref().map(|t| t.format(number));
        let own = (scale != main).then(|| format!("({scale})"));
        let text = match (name, own) {
            (None, None) => return None,
            (Some(n), None) => n,
            (None, Some(s)) => s,
            (Some(n), Some(s)) => format!("{n} {s}"),
        };
        Some(Arc::new(Label::line(&text, self.practice.group.label)))
    }

    /// Box around a view with its annotations as placed alone, and its label above them.
    fn room(&self, alone: &Alone) -> Rect<Paper> {
        let centres = alone.paper.centres.iter().flat_map(|c| c.lines.iter().map(Curve::bounds));
        // Adjacent parts and construction lines reach beyond the part's own outline.
        let edges = alone.paper.edges.iter().map(|e| e.curve.bounds());
        let picked =
            alone.offers.iter().zip(&alone.picks).filter_map(|(o, p)| o[*p].sketch.bounds());
        let ink = Rect::union_of(centres.chain(edges).chain(picked).chain([alone.paper.outline]))
            .unwrap_or(alone.paper.outline);
        match &alone.label {
            None => ink,
            Some(label) => {
                let placed = self.label_above(label, ink, alone.paper.outline);
                ink.union(placed.quad().bounds())
            }
        }
    }

    /// A label centred over the outline, above all ink.
    fn label_above<S: crate::geom::Space>(
        &self,
        label: &Arc<Label>,
        ink: Rect<S>,
        outline: Rect<S>,
    ) -> PlacedLabel<S> {
        let x = outline.centre().x - label.advance() / 2.0;
        let y = ink.min.y - self.practice.style.views.label_gap;
        PlacedLabel { label: label.clone(), origin: Point::new(x, y), angle: 0.0 }
    }

    /// All annotations placed once more, among everything on the sheet.
    fn together(&self, alone: &[Alone], shifts: &[Shift], field: &Field) -> Vec<Placed> {
        let surroundings = Surroundings {
            frame: field.frame,
            blocks: field.blocks.clone(),
            views: alone.iter().zip(shifts).map(|(a, s)| s.rect(&a.paper.outline)).collect(),
        };
        // What stands clear of everything else is a rest point already: more neighbours can only
        // make the other candidates dearer.
        let picks = match self.is_clear(alone, shifts, &surroundings) {
            true => alone.iter().flat_map(|a| a.picks.clone()).collect(),
            false => self.placed_anew(alone, shifts, &surroundings),
        };
        let members = alone.iter().zip(shifts).flat_map(|(a, shift)| {
            a.members.iter().zip(&a.offers).map(move |(member, offer)| (*member, offer, shift))
        });
        let mut placed: Vec<(usize, Placed)> = members
            .zip(picks)
            .map(|((member, offer, shift), pick)| {
                let annotation = self.annotations[member].clone();
                (member, Placed { annotation, sketch: offer[pick].sketch.on_sheet(shift) })
            })
            .collect();
        placed.sort_by_key(|(member, _)| *member);
        placed.into_iter().map(|(_, p)| p).collect()
    }

    /// Whether the annotations as placed alone meet nothing outside their views.
    fn is_clear(&self, alone: &[Alone], shifts: &[Shift], surroundings: &Surroundings) -> bool {
        let picked: Vec<(usize, Choice<Sheet>)> = alone
            .iter()
            .zip(shifts)
            .enumerate()
            .flat_map(|(view, (a, shift))| {
                a.offers.iter().zip(&a.picks).map(move |(offer, pick)| {
                    let c = &offer[*pick];
                    let ink = Ink::of(&c.sketch.on_sheet(shift));
                    (view, Choice { cost: whole(c.cost), ink, seats: c.seats.clone() })
                })
            })
            .collect();
        picked.iter().enumerate().all(|(i, (view, c))| {
            let others = picked[..i].iter().filter(|(other, _)| other != view);
            surroundings.cost(&c.ink, *view, &self.practice) <= 0.0
                && others.map(|(_, o)| pair_cost(c, o, false, &self.practice)).all(|cost| cost <= 0)
        })
    }

    /// The picks of all annotations, view after view, chosen among everything on the sheet.
    fn placed_anew(
        &self,
        alone: &[Alone],
        shifts: &[Shift],
        surroundings: &Surroundings,
    ) -> Vec<usize> {
        let mut choosers = Vec::new();
        let mut start = Vec::new();
        for (view, (a, shift)) in alone.iter().zip(shifts).enumerate() {
            for (offer, pick) in a.offers.iter().zip(&a.picks) {
                let choices = offer
                    .iter()
                    .map(|c| {
                        let ink = Ink::of(&c.sketch.on_sheet(shift));
                        let around = surroundings.cost(&ink, view, &self.practice);
                        Choice { cost: whole(c.cost + around), ink, seats: c.seats.clone() }
                    })
                    .collect();
                choosers.push(Chooser { view, choices });
                start.push(*pick);
            }
        }
        Problem::new(&choosers, self.practice).solve(Some(&start))
    }

    fn placed_views(
        &self,
        alone: Vec<Alone>,
        shifts: &[Shift],
        annotations: &[Placed],
    ) -> Vec<PlacedView> {
        alone
            .into_iter()
            .zip(shifts)
            .enumerate()
            .map(|(i, (a, shift))| {
                let outline = shift.rect(&a.paper.outline);
                let centres = a.paper.centres.iter().flat_map(|c| &c.lines);
                let own = annotations.iter().filter(|p| p.annotation.view == i);
                let ink = Rect::union_of(
                    own.filter_map(|p| p.sketch.bounds())
                        .chain(centres.map(|c| shift.rect(&c.bounds())))
                        .chain([outline]),
                );
                let label =
                    a.label.as_ref().map(|l| self.label_above(l, ink.unwrap_or(outline), outline));
                let id = self.views[i].id.clone();
                PlacedView { id, paper: a.paper, shift: *shift, scale: a.scale, label }
            })
            .collect()
    }
}
