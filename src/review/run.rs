//! Every rule over every sheet.

use rayon::prelude::*;

use super::allow::excuse;
use super::findings::Findings;
use super::page::Page;
use super::rule::Check;
use super::{Finding, Rule, Severity, rules};
use crate::geom::{Rect, Sheet};
use crate::ident::{ItemId, ViewId};
use crate::scene::{Item, Scene};
use crate::source::Span;
use crate::spec::Drawing;
use crate::style::Style;

/// What a review looks at.
#[derive(Clone, Copy, Debug)]
pub struct ReviewInput<'a> {
    /// The sheets of one drawing, in order.
    pub scenes: &'a [Scene],
    /// The practice that they shall follow.
    pub style: &'a Style,
    /// The spec, where there is one.
    pub drawing: Option<&'a Drawing>,
    /// Texts that did not fit where they belong.
    pub misfits: &'a [Misfit],
    /// Views that contradict each other.
    pub conflicts: &'a [Conflict],
}

/// A text that did not fit its cell.
#[derive(Clone, Debug, PartialEq)]
pub struct Misfit {
    /// The sheet's place among the drawing's sheets, from 1.
    pub sheet: u32,
    /// The item that it belongs to.
    pub item: ItemId,
    /// The cell.
    pub area: Rect<Sheet>,
    /// How much wider than its room the text is, mm.
    pub excess: f64,
    /// Which text, and what was done about it.
    pub message: String,
    /// Where the text was written.
    pub span: Option<Span>,
}

/// Views that show one part in different sizes.
#[derive(Clone, Debug, PartialEq)]
pub struct Conflict {
    /// The views.
    pub views: Vec<ViewId>,
    /// Which size differs, and by how much.
    pub message: String,
    /// How much the sizes differ, mm of the part.
    pub difference: f64,
    /// Where the views were written, in their order.
    pub spans: Vec<Span>,
}

/// What a review found.
#[derive(Clone, Debug, Default)]
pub struct Review {
    /// The findings, worst first, then by sheet and place.
    pub findings: Vec<Finding>,
    /// How many findings the spec accepts on purpose; they are not among the others.
    pub excused: usize,
}

impl Review {
    /// How many findings have this severity.
    #[must_use]
    pub fn count(&self, severity: Severity) -> usize {
        self.findings.iter().filter(|f| f.severity == severity).count()
    }

    /// The worst severity found.
    #[must_use]
    pub fn worst(&self) -> Option<Severity> {
        self.findings.iter().map(|f| f.severity).max()
    }
}

/// Checks the sheets of a drawing by every rule.
#[must_use]
pub fn review(input: &ReviewInput<'_>) -> Review {
    let pages: Vec<_> = input.scenes.iter().map(|s| Page::new(s, input.style)).collect();
    // Collected in the order of the rules, however many threads there are.
    let found: Vec<Vec<Finding>> =
        rules().par_iter().map(|rule| check(rule, input, &pages)).collect();
    let mut findings: Vec<Finding> = found.into_iter().flatten().collect();
    let excused = excuse(input, &mut findings);
    if let Some(drawing) = input.drawing {
        findings.iter_mut().for_each(|f| trace(f, drawing, input.scenes));
    }
    findings.sort_by(Finding::report_order);
    Review { findings, excused }
}

fn check(rule: &'static Rule, input: &ReviewInput<'_>, pages: &[Page<'_>]) -> Vec<Finding> {
    let mut found = Findings::of(rule);
    match rule.check {
        Check::Page(check) => pages.iter().for_each(|p| check(p, &mut found)),
        Check::Drawing(check) => check(input, &mut found),
        Check::Allow => {}
    }
    found.into_merged()
}

/// Gives a finding its place in the spec: that of its first item that the spec writes.
fn trace(finding: &mut Finding, drawing: &Drawing, scenes: &[Scene]) {
    if finding.span.is_some() {
        return;
    }
    finding.span = finding.items.iter().find_map(|id| annotation_span(id, drawing));
    if finding.span.is_none() {
        let items = scenes.iter().flat_map(|s| &s.items);
        let named = items.filter(|i| finding.items.contains(&i.id));
        finding.span = named.into_iter().find_map(|i| shape_span(i, drawing));
    }
    if finding.span.is_none() {
        let view = drawing.views.iter().find(|v| Some(&v.id) == finding.view.as_ref());
        finding.span = view.map(|v| v.span);
    }
}

/// Members of a set are items of their own: `stations.2` belongs to `stations`.
fn annotation_span(id: &ItemId, drawing: &Drawing) -> Option<Span> {
    let belongs = |to: &str| {
        id.as_str().strip_prefix(to).is_some_and(|rest| rest.is_empty() || rest.starts_with('.'))
    };
    let owner = drawing.annotations.iter().filter(|a| belongs(a.id.as_str()));
    owner.max_by_key(|a| a.id.as_str().len()).map(|a| a.span)
}

fn shape_span(item: &Item, drawing: &Drawing) -> Option<Span> {
    let features = item.feature.as_deref()?;
    let view = drawing.views.iter().find(|v| Some(&v.id) == item.view.as_ref())?;
    let crate::spec::Geometry::Drawn(shapes) = &view.geometry;
    let belongs = |shape: &str| {
        features.split(' ').any(|f| {
            f.strip_prefix(shape).is_some_and(|rest| rest.is_empty() || rest.starts_with('.'))
        })
    };
    shapes.iter().find(|s| belongs(s.id.as_str())).map(|s| s.span)
}
