//! From a layout to the scene: every line and letter where it will be drawn.
//!
//! Takes a [`Layout`]; gives a [`Scene`]. Here lines give way: where an extension line, a centre
//! line or hatching would run through a text or an arrowhead it is interrupted by a computed gap,
//! never covered.

mod annotations;
mod gaps;
mod views;

use crate::annotate::Practice;
use crate::layout::Layout;
use crate::scene::{Scene, SheetFacts};
use crate::spec::Drawing;
use crate::style::Style;
use gaps::Gaps;

/// The sheet of a drawing as strokes, fills and text.
#[must_use]
pub fn compose(drawing: &Drawing, layout: &Layout, style: &Style) -> Scene {
    let practice = Practice { style, group: style.group_of(&layout.format.name) };
    let gaps = Gaps::of(layout, &practice);
    let mut items = layout.furniture.clone();
    items.extend(views::items(layout, &gaps));
    items.extend(annotations::items(layout, &gaps, &practice));
    Scene { sheet: facts(drawing, layout, style), items }
}

fn facts(drawing: &Drawing, layout: &Layout, style: &Style) -> SheetFacts {
    let sheet = &drawing.sheet;
    let title = sheet.title.as_ref().map_or_else(String::new, |t| t.value.clone());
    SheetFacts {
        width: layout.format.width,
        height: layout.format.height,
        number: sheet.number.value.clone(),
        title,
        revision: drawing.revisions.last().map_or_else(String::new, |r| r.mark.value.clone()),
        style: style.name.clone(),
        format: layout.format.name.clone(),
        index: 1,
        count: 1,
    }
}
