//! What elements inherit: transform, paint, widths, letter size.
//!
//! Presentation attributes and the `style` attribute are honoured, as other programs write the
//! one as the other; style sheets are not.

use kurbo::Affine;
use roxmltree::Node;

use super::error::ReadError;
use super::node::{attribute_error, number};
use crate::scene::{Ink, Role};

/// What holds at an element.
#[derive(Clone, Copy, Debug)]
pub(super) struct Look {
    /// From the element's coordinates to the sheet.
    pub(super) transform: Affine,
    pub(super) stroke: Paint,
    pub(super) fill: Paint,
    stroke_seen: bool,
    fill_seen: bool,
    stroke_width: f64,
    pub(super) font_size: f64,
    visible: bool,
    pub(super) role: Option<Role>,
}

/// A paint as far as a scene can tell it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Paint {
    /// Nothing, or the white of the paper.
    None,
    /// Something that shows.
    Ink(Ink),
}

impl Look {
    /// The initial values of SVG.
    pub(super) fn initial(transform: Affine) -> Self {
        Self {
            transform,
            stroke: Paint::None,
            fill: Paint::Ink(Ink::Drawing),
            stroke_seen: true,
            fill_seen: true,
            stroke_width: 1.0,
            font_size: 16.0,
            visible: true,
            role: None,
        }
    }

    /// What holds inside `node`; `None` if it and all in it is not displayed.
    pub(super) fn of(self, node: Node<'_, '_>) -> Result<Option<Self>, ReadError> {
        let mut look = self;
        if property(node, "display") == Some("none") || is_zero(property(node, "opacity")) {
            return Ok(None);
        }
        if let Some(text) = node.attribute("transform") {
            let t: svgtypes::Transform = text
                .parse()
                .map_err(|_| attribute_error(node, "transform", text, "a list of transforms"))?;
            look.transform *= Affine::new([t.a, t.b, t.c, t.d, t.e, t.f]);
        }
        if let Some(p) = property(node, "stroke").and_then(paint) {
            look.stroke = p;
        }
        if let Some(p) = property(node, "fill").and_then(paint) {
            look.fill = p;
        }
        if let Some(o) = property(node, "stroke-opacity") {
            look.stroke_seen = !is_zero(Some(o));
        }
        if let Some(o) = property(node, "fill-opacity") {
            look.fill_seen = !is_zero(Some(o));
        }
        if let Some(v) = property(node, "visibility") {
            look.visible = v == "visible";
        }
        look.stroke_width = sized(node, "stroke-width")?.unwrap_or(look.stroke_width);
        look.font_size = sized(node, "font-size")?.unwrap_or(look.font_size);
        if let Some(role) = node.attribute("data-role") {
            look.role = role.parse().ok();
        }
        Ok(Some(look))
    }

    /// The ink that strokes have, if they show.
    pub(super) fn stroke_ink(&self) -> Option<Ink> {
        shown(self.stroke, self.stroke_seen && self.visible)
    }

    /// The ink that fills and letters have, if they show.
    pub(super) fn fill_ink(&self) -> Option<Ink> {
        shown(self.fill, self.fill_seen && self.visible)
    }

    /// Width of strokes on the sheet in mm.
    pub(super) fn width_on_sheet(&self) -> f64 {
        self.stroke_width * self.transform.determinant().abs().sqrt()
    }
}

fn shown(paint: Paint, seen: bool) -> Option<Ink> {
    match paint {
        Paint::Ink(ink) if seen => Some(ink),
        Paint::Ink(_) | Paint::None => None,
    }
}

/// A property of an element itself: from its `style` attribute, else from its own attribute.
fn property<'a>(node: Node<'a, '_>, name: &str) -> Option<&'a str> {
    let styled = node.attribute("style").and_then(|style| {
        style.split(';').filter_map(|d| d.split_once(':')).rfind(|(n, _)| n.trim() == name)
    });
    styled.map(|(_, value)| value.trim()).or_else(|| node.attribute(name).map(str::trim))
}

fn sized(node: Node<'_, '_>, name: &'static str) -> Result<Option<f64>, ReadError> {
    let Some(text) = property(node, name) else { return Ok(None) };
    if text == "inherit" {
        return Ok(None);
    }
    match number(text.strip_suffix("px").unwrap_or(text)) {
        Some(v) if v >= 0.0 => Ok(Some(v)),
        _ => Err(attribute_error(node, name, text, "a length in user units")),
    }
}

fn is_zero(opacity: Option<&str>) -> bool {
    opacity.and_then(number).is_some_and(|o| o <= 0.0)
}

/// `None` where the value is inherited.
fn paint(text: &str) -> Option<Paint> {
    if text == "transparent" {
        return Some(Paint::None);
    }
    match svgtypes::Paint::from_str(text) {
        Ok(svgtypes::Paint::None) => Some(Paint::None),
        Ok(svgtypes::Paint::Color(c)) => Some(colour(c)),
        Ok(svgtypes::Paint::Inherit) | Err(_) => None,
        Ok(
            svgtypes::Paint::CurrentColor
            | svgtypes::Paint::FuncIRI(..)
            | svgtypes::Paint::ContextFill
            | svgtypes::Paint::ContextStroke,
        ) => Some(Paint::Ink(Ink::Drawing)),
    }
}

fn colour(c: svgtypes::Color) -> Paint {
    // Distances of 8-bit colour that no viewer's rounding bridges.
    const PAPER: u8 = 250;
    const REDDER: u8 = 64;
    if c.alpha == 0 || [c.red, c.green, c.blue].iter().all(|v| *v >= PAPER) {
        Paint::None
    } else if c.red.saturating_sub(c.green.max(c.blue)) > REDDER {
        Paint::Ink(Ink::Finding)
    } else {
        Paint::Ink(Ink::Drawing)
    }
}
