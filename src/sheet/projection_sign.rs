//! The projection sign: a frustum of a cone from the side and from its small end.
//!
//! ISO 5456-2:1996: in first angle the small end faces away from the circles, in third angle it
//! faces them. Sizes in shares of the lettering height (common practice): ends 1 and 2 in
//! diameter, 2 long, axes past the outlines by 0.3 to 0.5.

use crate::geom::{Curve, Line, Path, Point, Sheet};
use crate::ident::ItemId;
use crate::scene::{Item, ItemKind, Mark, Stroke};
use crate::style::{DashSpec, Projection, Style};

/// Where things stand along the axis, in shares of the lettering height from the leftmost outline.
struct Layout {
    small_end: f64,
    large_end: f64,
    circles: f64,
    /// Axis of the frustum, then level axis of the circles.
    axes: [(f64, f64); 2],
    /// Ends of the whole sign.
    extent: (f64, f64),
}

const SMALL_RADIUS: f64 = 0.5;
const LARGE_RADIUS: f64 = 1.0;
const UPRIGHT_AXIS: f64 = 1.3;

const FIRST_ANGLE: Layout = Layout {
    small_end: 0.0,
    large_end: 2.0,
    circles: 4.2,
    axes: [(-0.4, 2.4), (2.9, 5.5)],
    extent: (-0.4, 5.5),
};

const THIRD_ANGLE: Layout = Layout {
    small_end: 3.2,
    large_end: 5.2,
    circles: 1.0,
    axes: [(2.8, 5.6), (-0.3, 2.3)],
    extent: (-0.3, 5.6),
};

/// The sign of the style's projection method around `middle`.
pub(super) fn projection_sign(id: ItemId, style: &Style, middle: Point<Sheet>) -> Item {
    let layout = match style.projection {
        Projection::FirstAngle => FIRST_ANGLE,
        Projection::ThirdAngle => THIRD_ANGLE,
    };
    let spec = &style.title_block.sign;
    let left = middle.x - (layout.extent.0 + layout.extent.1) / 2.0 * spec.height;
    let at = |x: f64, up: f64| Point::new(left + x * spec.height, middle.y - up * spec.height);

    let frustum = [
        at(layout.small_end, SMALL_RADIUS),
        at(layout.small_end, -SMALL_RADIUS),
        at(layout.large_end, -LARGE_RADIUS),
        at(layout.large_end, LARGE_RADIUS),
    ];
    let circle = |r: f64| Path::of(Curve::circle(at(layout.circles, 0.0), r * spec.height));
    let outlines = vec![Path::polyline(&frustum, true), circle(SMALL_RADIUS), circle(LARGE_RADIUS)];

    let level = layout.axes.map(|(from, to)| Line::new(at(from, 0.0), at(to, 0.0)));
    let upright = Line::new(at(layout.circles, UPRIGHT_AXIS), at(layout.circles, -UPRIGHT_AXIS));
    let axes = level
        .iter()
        .chain(std::iter::once(&upright))
        .flat_map(|l| chain(l, &style.dash.centre, spec.axis))
        .collect();
    Item::new(
        id,
        ItemKind::Symbol,
        vec![
            Mark::Stroke(Stroke::new(outlines, spec.line, None)),
            Mark::Stroke(Stroke::new(axes, spec.axis, None)),
        ],
    )
}

/// A short axis as a chain of two periods: the long dash in its middle, so that axes cross on
/// dashes, and half of one at each end.
fn chain(axis: &Line<Sheet>, dash: &DashSpec, width: f64) -> Vec<Path<Sheet>> {
    let rest: f64 = dash.rest.iter().sum::<f64>() * width;
    let half_dash = (axis.length() - 2.0 * rest) / 4.0;
    let mut at = 0.0;
    let mut pieces = Vec::new();
    let mut put = |length: f64, is_ink: bool| {
        if is_ink {
            let (a, b) = (at / axis.length(), (at + length) / axis.length());
            pieces.push(Path::polyline(&[axis.at(a), axis.at(b)], false));
        }
        at += length;
    };
    for dash_length in [half_dash, 2.0 * half_dash] {
        put(dash_length, true);
        for (i, share) in dash.rest.iter().enumerate() {
            put(share * width, i % 2 == 1);
        }
    }
    put(half_dash, true);
    pieces
}
