//! All stages in their order, as one function.

use crate::annotate::{Practice, resolve};
use crate::layout::{Layout, lay_out};
use crate::review::{Conflict, Misfit, Review, ReviewInput, review};
use crate::scene::Scene;
use crate::source::{Diagnostic, Diagnostics};
use crate::spec::{Drawing, FormatChoice};
use crate::style::{self, Style};
use crate::units::LengthUnit;
use crate::view::{SizeConflict, View, contradictions, drawn_view};

/// A drawing with its sheets.
#[derive(Clone, Debug)]
pub struct Drawn {
    /// What the spec asked for.
    pub drawing: Drawing,
    /// The style that it follows.
    pub style: Style,
    /// Its views, in view space.
    pub views: Vec<View>,
    /// Where everything went.
    pub layout: Layout,
    /// Its sheets.
    pub scenes: Vec<Scene>,
}

/// Draws a resolved spec. Everything that is wrong with it is reported at once; `None` if any of
/// that forbids making a sheet.
#[must_use]
pub fn draw(drawing: Drawing, diagnostics: &mut Diagnostics) -> Option<Drawn> {
    if drawing.sheet.units == LengthUnit::Inch {
        // Values are written in millimetres still: an inch drawing would lie.
        let problem = Diagnostic::error(drawing.sheet.span, "this version writes no inch drawings")
            .help("leave units out and write single sizes in inches, such as \"2.5 in\"");
        diagnostics.push(problem);
    }
    let style = style_of(&drawing, diagnostics);
    let views: Vec<View> =
        drawing.views.iter().filter_map(|v| drawn_view(v, diagnostics)).collect();
    // Anchors are bound against the views that could be made; a view that could not be made has
    // said so, and its annotations need not complain again.
    if views.len() < drawing.views.len() {
        return None;
    }
    let style = style?;
    if views.is_empty() {
        let problem = Diagnostic::error(drawing.sheet.span, "the drawing has no view")
            .help("add a [[view]] with an id, from = \"front\" and shapes");
        diagnostics.push(problem);
        return None;
    }
    let format = match &drawing.sheet.format {
        FormatChoice::Named(n) => n.value.as_str(),
        FormatChoice::Auto => style.format.first().map_or("", |f| f.name.as_str()),
    };
    let practice = Practice { style: &style, group: style.group_of(format) };
    let _bound = resolve(&drawing, &views, practice, diagnostics);
    if diagnostics.has_errors() {
        return None;
    }
    match lay_out(&drawing, &views, &style) {
        Ok(layout) => {
            let scene = crate::compose::compose(&drawing, &layout, &style);
            Some(Drawn { drawing, style, views, layout, scenes: vec![scene] })
        }
        Err(e) => {
            diagnostics.push(e.diagnostic(&drawing));
            None
        }
    }
}

/// What a checker would mark on the sheets of a drawing.
#[must_use]
pub fn check(drawn: &Drawn) -> Review {
    let misfits: Vec<Misfit> = drawn.layout.misfits.iter().map(misfit).collect();
    let views: Vec<&View> = drawn.views.iter().collect();
    let conflicts: Vec<Conflict> =
        contradictions(&views).iter().map(|c| conflict(c, &drawn.views, &drawn.style)).collect();
    review(&ReviewInput {
        scenes: &drawn.scenes,
        style: &drawn.style,
        drawing: Some(&drawn.drawing),
        misfits: &misfits,
        conflicts: &conflicts,
    })
}

fn misfit(m: &crate::sheet::Misfit) -> Misfit {
    Misfit {
        sheet: 1,
        item: m.item.clone(),
        area: m.place,
        excess: m.excess(),
        message: m.to_string(),
        span: m.span,
    }
}

fn conflict(c: &SizeConflict, views: &[View], style: &Style) -> Conflict {
    let mm = |v: f64| style.number.length(v, None);
    let (first, second) = (mm(c.first_length), mm(c.second_length));
    let span = |id: &crate::ident::ViewId| views.iter().find(|v| v.id == *id).map(|v| v.span);
    Conflict {
        views: vec![c.first.clone(), c.second.clone()],
        message: format!(
            "the part's {} is {first} in view `{}` and {second} in view `{}`",
            c.extent, c.first, c.second
        ),
        difference: (c.first_length - c.second_length).abs(),
        spans: [&c.first, &c.second].into_iter().filter_map(span).collect(),
    }
}

fn style_of(drawing: &Drawing, diagnostics: &mut Diagnostics) -> Option<Style> {
    let asked = &drawing.sheet.style;
    let found = style::builtin(&asked.value);
    if found.is_none() {
        let names = style::builtin_names();
        let help = match crate::source::nearest(&asked.value, names.iter().copied()) {
            Some(near) => format!("did you mean `{near}`?"),
            None => format!("the styles are {}", names.join(", ")),
        };
        let message = format!("there is no style `{}`", asked.value);
        diagnostics.push(Diagnostic::error(asked.span, message).help(help));
    }
    found
}
