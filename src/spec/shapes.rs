//! Shapes of drawn views.
//!
//! Takes one shape table; gives its outline, line class and repeat. How many curves a spec can
//! ask for is limited here, counted over all members of all repeats.

use svgtypes::{PathParser, PathSegment};
use toml::de::DeValue;

use super::drawing::{Axis, CentreLines, LineClass, Outline, Repeat, Shape, Spanned};
use super::lettered::fill_braces;
use super::reader::{Field, Keys, Reader, Table};
use crate::geom::Vector;
use crate::ident::ShapeId;
use crate::source::Diagnostic;
use crate::units::LengthUnit;

/// Most members of one repeat.
const MOST_MEMBERS: u32 = 10_000;
/// Most curves of all shapes of a spec with their repeats, roughly counted.
const MOST_CURVES: usize = 100_000;
/// Most corners of one polygon.
const MOST_CORNERS: usize = 10_000;
/// Longest path data in bytes.
const LONGEST_PATH: usize = 100_000;
/// Bytes of path data that are counted as one curve: as little as a curve of a real path takes.
const BYTES_PER_CURVE: usize = 8;

const OUTLINES: [&str; 7] = ["line", "arc", "circle", "slot", "rectangle", "polygon", "path"];

const SHAPE: Keys = Keys::only(&[
    "id",
    "class",
    "hatch",
    "centre",
    "repeat",
    "line",
    "arc",
    "circle",
    "slot",
    "rectangle",
    "polygon",
    "path",
]);

const CLASSES: [(&str, LineClass); 8] = [
    ("visible", LineClass::Visible),
    ("hidden", LineClass::Hidden),
    ("smooth", LineClass::Smooth),
    ("cut", LineClass::Cut),
    ("centre", LineClass::Centre),
    ("adjacent", LineClass::Adjacent),
    ("construction", LineClass::Construction),
    ("break", LineClass::Break),
];

const CENTRES: [(&str, CentreLines); 3] =
    [("auto", CentreLines::Auto), ("yes", CentreLines::Yes), ("no", CentreLines::No)];

const AXES: [(&str, Axis); 2] = [("x", Axis::X), ("y", Axis::Y)];

/// How many curves may still be asked for.
#[derive(Clone, Copy, Debug)]
pub(super) struct CurveBudget(usize);

impl Default for CurveBudget {
    fn default() -> Self {
        Self(MOST_CURVES)
    }
}

impl CurveBudget {
    /// Takes the curves of a shape off; says so once when none are left.
    fn take(&mut self, reader: &mut Reader<'_>, shape: &Shape) {
        let curves = curve_count(&shape.outline).saturating_mul(members(shape.repeat.as_ref()));
        if self.0 > 0 && curves > self.0 {
            let message = format!(
                "with this shape the views have more than {MOST_CURVES} curves, repeats included"
            );
            let help = "draw one member of the pattern and say the rest in a callout or a note";
            reader.report(Diagnostic::error(shape.span, message).help(help));
        }
        self.0 = self.0.saturating_sub(curves);
    }
}

fn curve_count(outline: &Outline) -> usize {
    match outline {
        Outline::Line { .. } | Outline::Arc { .. } | Outline::Circle { .. } => 1,
        Outline::Slot { .. } | Outline::Rectangle { .. } => 4,
        Outline::Polygon { points, .. } => points.len(),
        Outline::Path { data } => (data.value.len() / BYTES_PER_CURVE).max(1),
    }
}

fn members(repeat: Option<&Repeat>) -> usize {
    let wide = |n: u32| usize::try_from(n).unwrap_or(usize::MAX);
    match repeat {
        None => 1,
        Some(Repeat::Polar { count, .. }) => wide(*count),
        Some(Repeat::Grid { count: (columns, rows), .. }) => {
            wide(*columns).saturating_mul(wide(*rows))
        }
        Some(Repeat::At { offsets }) => offsets.len() + 1,
        Some(Repeat::Mirror { .. }) => 2,
    }
}

/// One shape.
pub(super) fn shape(
    reader: &mut Reader<'_>,
    f: Field<'_>,
    budget: &mut CurveBudget,
) -> Option<Shape> {
    let table = reader.table(f, "a shape", SHAPE)?;
    let id = reader.need(&table, "id", |r, f| r.id(f).map(ShapeId::new));
    let class = reader.maybe(&table, "class", |r, f| r.choice(f, &CLASSES));
    let hatch = reader.maybe(&table, "hatch", Reader::boolean).unwrap_or(false);
    let centre = reader.maybe(&table, "centre", |r, f| r.choice(f, &CENTRES)).unwrap_or_default();
    let repeat = reader.maybe(&table, "repeat", repeat);
    let outline = outline(reader, &table);
    let (id, outline) = (id?, outline?);
    if hatch && is_open(&outline) {
        let message = format!("the shape `{id}` is open and has no inside to hatch");
        let help = "close it, or leave `hatch` out";
        reader.report(Diagnostic::error(f.span, message).help(help));
    }
    // What is hatched is the face of a cut, so its outline is one too unless the spec says more.
    let default = if hatch { LineClass::Cut } else { LineClass::Visible };
    let class = class.unwrap_or(default);
    let shape = Shape { id, span: f.span, class, outline, hatch, centre, repeat };
    budget.take(reader, &shape);
    Some(shape)
}

fn is_open(outline: &Outline) -> bool {
    match outline {
        Outline::Line { .. } | Outline::Arc { .. } | Outline::Polygon { closed: false, .. } => true,
        // Whether path data closes is seen where it is walked.
        Outline::Polygon { closed: true, .. }
        | Outline::Circle { .. }
        | Outline::Slot { .. }
        | Outline::Rectangle { .. }
        | Outline::Path { .. } => false,
    }
}

/// The one outline that a shape has.
fn outline(reader: &mut Reader<'_>, table: &Table<'_>) -> Option<Outline> {
    let given = table.among(&OUTLINES);
    let Some(first) = given.first().copied() else {
        if table.is_suspect() {
            return None;
        }
        let message = "this shape has no outline";
        let help = format!("give it one of {}", OUTLINES.join(", "));
        return reader.fail(Diagnostic::error(table.span, message).help(help));
    };
    if let [_, second, ..] = given[..] {
        let message = format!("this shape has both `{}` and `{}`", first.name, second.name);
        let help = "one shape has one outline; make two shapes of it";
        let d = Diagnostic::error(second.key, message).related(first.key, "the first is here");
        return reader.fail(d.help(help));
    }
    match first.name {
        "line" => line(reader, first),
        "arc" => arc(reader, first),
        "circle" => circle(reader, first),
        "slot" => slot(reader, first),
        "rectangle" => rectangle(reader, first),
        "polygon" => polygon(reader, first),
        _ => path(reader, first),
    }
}

fn line(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Outline> {
    let table = reader.table(f, "a line", Keys::only(&["from", "to"]))?;
    let from = reader.need(&table, "from", Reader::point);
    let to = reader.need(&table, "to", Reader::point);
    Some(Outline::Line { from: from?, to: to? })
}

fn arc(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Outline> {
    let keys = Keys::only(&["centre", "radius", "start", "sweep", "end"]);
    let table = reader.table(f, "an arc", keys)?;
    let centre = reader.need(&table, "centre", Reader::point);
    let radius = reader.need(&table, "radius", Reader::size);
    let start = reader.need(&table, "start", Reader::angle);
    let sweep = match (table.get("sweep"), table.get("end")) {
        (Some(sweep), None) => sweep_of(reader, sweep),
        // Counter-clockwise from start to end, a whole turn where they are the same direction.
        (None, Some(end)) => reader.angle(end).and_then(|end| {
            let turn = (end - start?).rem_euclid(360.0);
            Some(if turn == 0.0 { 360.0 } else { turn })
        }),
        (Some(sweep), Some(end)) => {
            let d = Diagnostic::error(end.key, "an arc has `sweep` or `end`, not both");
            reader.fail(d.related(sweep.key, "`sweep` is here"))
        }
        (None, None) => {
            let help = "`sweep` counts degrees from `start`, counter-clockwise if positive; `end` \
                        is a direction like `start`";
            let message = "an arc needs `sweep` or `end`";
            reader.fail(Diagnostic::error(table.span, message).help(help))
        }
    };
    Some(Outline::Arc { centre: centre?, radius: radius?, start: start?, sweep: sweep? })
}

fn sweep_of(reader: &mut Reader<'_>, f: Field<'_>) -> Option<f64> {
    let sweep = reader.angle(f)?;
    if sweep == 0.0 || sweep.abs() > 360.0 {
        let message = format!("`sweep` is {sweep}°; an arc goes on for up to 360° and is not 0");
        return reader.fail(Diagnostic::error(f.span, message));
    }
    Some(sweep)
}

fn circle(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Outline> {
    let table = reader.table(f, "a circle", Keys::only(&["centre", "diameter"]))?;
    let centre = reader.need(&table, "centre", Reader::point);
    let diameter = reader.need(&table, "diameter", Reader::size);
    Some(Outline::Circle { centre: centre?, diameter: diameter? })
}

fn slot(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Outline> {
    let table = reader.table(f, "a slot", Keys::only(&["from", "to", "width"]))?;
    let from = reader.need(&table, "from", Reader::point);
    let to = reader.need(&table, "to", Reader::point);
    let width = reader.need(&table, "width", Reader::size);
    Some(Outline::Slot { from: from?, to: to?, width: width? })
}

fn rectangle(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Outline> {
    let keys = Keys::only(&["corner", "size", "corner_radius", "turned"]);
    let table = reader.table(f, "a rectangle", keys)?;
    let corner = reader.need(&table, "corner", Reader::point);
    let size =
        reader.need(&table, "size", |r, f| r.pair(f, "a size [width, height]", Reader::size));
    let radius = reader.maybe(&table, "corner_radius", Reader::size_or_zero).unwrap_or(0.0);
    let turned = reader.maybe(&table, "turned", |r, f| r.choice(f, &AXES));
    let (corner, (width, height)) = (corner?, size?);
    if radius > width.min(height) / 2.0 {
        let message = "`corner_radius` is more than half of the shorter side";
        let span = table.get("corner_radius").map_or(table.span, |f| f.span);
        return reader.fail(Diagnostic::error(span, message).help("a slot has round ends"));
    }
    let size = Vector::new(width, height);
    Some(Outline::Rectangle { corner, size, corner_radius: radius, turned })
}

/// A polygon: a table, or just its corners.
fn polygon(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Outline> {
    let (corners, closed) = if let DeValue::Array(_) = f.value {
        (Some((f.span, reader.list(f, MOST_CORNERS, Reader::point))), true)
    } else {
        let table = reader.table(f, "a polygon", Keys::only(&["points", "closed"]))?;
        let closed = reader.maybe(&table, "closed", Reader::boolean).unwrap_or(true);
        let read = |r: &mut Reader<'_>, f: Field<'_>| {
            Some((f.span, r.list(f, MOST_CORNERS, Reader::point)))
        };
        (reader.need(&table, "points", read), closed)
    };
    let (span, points) = corners?;
    let points = points?;
    let least = if closed { 3 } else { 2 };
    if points.len() < least {
        let what = if closed { "a closed polygon" } else { "a polygon" };
        let message = format!("{what} has at least {least} corners, not {}", points.len());
        return reader.fail(Diagnostic::error(span, message));
    }
    Some(Outline::Polygon { points, closed })
}

/// Path data: a table, or just the text.
fn path(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Outline> {
    let f = if let DeValue::Table(_) = f.value {
        let table = reader.table(f, "a path", Keys::only(&["data"]))?;
        reader.need(&table, "data", |_, f| Some(f))?
    } else {
        f
    };
    let text = reader.string(f)?;
    if text.len() > LONGEST_PATH {
        let message =
            format!("the path data has {} bytes; the limit is {LONGEST_PATH}", text.len());
        return reader.fail(Diagnostic::error(f.span, message));
    }
    let filled = fill_braces(reader, f, text)?;
    let value = match reader.units {
        LengthUnit::Millimetre => filled,
        LengthUnit::Inch => scaled(&filled, LengthUnit::Inch.in_mm()),
    };
    Some(Outline::Path { data: Spanned { value, span: f.span } })
}

/// The same path with every length multiplied. Data that cannot be walked is left as it is, for
/// the stage that walks it to report.
fn scaled(data: &str, k: f64) -> String {
    let segments: Result<Vec<PathSegment>, _> = PathParser::from(data).collect();
    match segments {
        Ok(segments) => segments.into_iter().map(|s| written(s, k)).collect::<Vec<_>>().join(" "),
        Err(_) => data.to_owned(),
    }
}

/// One segment as path data, lengths multiplied by `k`.
fn written(segment: PathSegment, k: f64) -> String {
    let letter = |abs: bool, c: char| if abs { c } else { c.to_ascii_lowercase() };
    let lengths = |abs, c, values: &[f64]| {
        let values: Vec<String> = values.iter().map(|v| (v * k).to_string()).collect();
        format!("{} {}", letter(abs, c), values.join(" "))
    };
    match segment {
        PathSegment::MoveTo { abs, x, y } => lengths(abs, 'M', &[x, y]),
        PathSegment::LineTo { abs, x, y } => lengths(abs, 'L', &[x, y]),
        PathSegment::HorizontalLineTo { abs, x } => lengths(abs, 'H', &[x]),
        PathSegment::VerticalLineTo { abs, y } => lengths(abs, 'V', &[y]),
        PathSegment::CurveTo { abs, x1, y1, x2, y2, x, y } => {
            lengths(abs, 'C', &[x1, y1, x2, y2, x, y])
        }
        PathSegment::SmoothCurveTo { abs, x2, y2, x, y } => lengths(abs, 'S', &[x2, y2, x, y]),
        PathSegment::Quadratic { abs, x1, y1, x, y } => lengths(abs, 'Q', &[x1, y1, x, y]),
        PathSegment::SmoothQuadratic { abs, x, y } => lengths(abs, 'T', &[x, y]),
        PathSegment::EllipticalArc { abs, rx, ry, x_axis_rotation, large_arc, sweep, x, y } => {
            format!(
                "{} {} {} {x_axis_rotation} {} {} {} {}",
                letter(abs, 'A'),
                rx * k,
                ry * k,
                u8::from(large_arc),
                u8::from(sweep),
                x * k,
                y * k
            )
        }
        PathSegment::ClosePath { abs } => letter(abs, 'Z').to_string(),
    }
}

/// How a shape is repeated.
fn repeat(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Repeat> {
    const KEYS: Keys =
        Keys::only(&["polar", "about", "step", "grid", "pitch", "linear", "at", "mirror"]);
    let table = reader.table(f, "a repeat", KEYS)?;
    let given = table.among(&["polar", "grid", "linear", "mirror"]);
    match given[..] {
        [one] => repeat_of_kind(reader, &table, one.name),
        [] if table.get("at").is_some() => {
            reject_others(reader, &table, "at", &[]);
            reader.need(&table, "at", displacements)
        }
        [] if table.is_suspect() => None,
        [] => {
            let message = "this repeat does not say how";
            let help = "give it one of polar, grid, linear, at, mirror";
            reader.fail(Diagnostic::error(table.span, message).help(help))
        }
        [first, second, ..] => {
            let message = format!("a repeat is `{}` or `{}`, not both", first.name, second.name);
            let d = Diagnostic::error(second.key, message);
            reader.fail(d.related(first.key, "the first is here"))
        }
    }
}

fn displacements(reader: &mut Reader<'_>, f: Field<'_>) -> Option<Repeat> {
    let offsets = reader.list(f, MOST_MEMBERS as usize, Reader::vector)?;
    if matches!(f.value, DeValue::Array(a) if a.is_empty()) {
        let message = "this repeat lists no displacements";
        let help = "write them as [[dx, dy], …], or leave the repeat out";
        return reader.fail(Diagnostic::error(f.span, message).help(help));
    }
    Some(Repeat::At { offsets })
}

fn repeat_of_kind(reader: &mut Reader<'_>, table: &Table<'_>, kind: &str) -> Option<Repeat> {
    match kind {
        "polar" => {
            reject_others(reader, table, kind, &["about", "step"]);
            polar(reader, table)
        }
        "grid" => {
            reject_others(reader, table, kind, &["pitch"]);
            grid(reader, table)
        }
        "linear" => {
            reject_others(reader, table, kind, &["step"]);
            linear(reader, table)
        }
        _ => {
            reject_others(reader, table, kind, &["at"]);
            mirror(reader, table)
        }
    }
}

/// Reports keys that belong to another kind of repeat.
fn reject_others(reader: &mut Reader<'_>, table: &Table<'_>, kind: &str, fitting: &[&str]) {
    for f in table.among(&["about", "step", "pitch", "at"]) {
        if f.name != kind && !fitting.contains(&f.name) {
            let message = format!("`{}` has no meaning in a `{kind}` repeat", f.name);
            reader.report(Diagnostic::error(f.key, message));
        }
    }
}

fn polar(reader: &mut Reader<'_>, table: &Table<'_>) -> Option<Repeat> {
    let count = reader.need(table, "polar", |r, f| r.whole(f, 2..=MOST_MEMBERS));
    let about = reader.need(table, "about", Reader::point);
    let step = reader.maybe(table, "step", |r, f| {
        let step = r.angle(f)?;
        let steps = f64::from(count?.saturating_sub(1));
        if step == 0.0 || (step * steps).abs() >= 360.0 {
            let message = format!("with steps of {step}° members come to lie on one another");
            let help = "leave `step` out to space them equally";
            return r.fail(Diagnostic::error(f.span, message).help(help));
        }
        Some(step)
    });
    let count = count?;
    Some(Repeat::Polar { count, about: about?, step: step.unwrap_or(360.0 / f64::from(count)) })
}

fn grid(reader: &mut Reader<'_>, table: &Table<'_>) -> Option<Repeat> {
    let count = reader.need(table, "grid", |r, f| {
        let count = r.pair(f, "how many [columns, rows]", |r, f| r.whole(f, 1..=MOST_MEMBERS))?;
        let members = u64::from(count.0) * u64::from(count.1);
        if !(2..=u64::from(MOST_MEMBERS)).contains(&members) {
            let message =
                format!("`grid` makes {members} of the shape; it can be 2 to {MOST_MEMBERS}");
            return r.fail(Diagnostic::error(f.span, message));
        }
        Some(count)
    });
    let pitch = reader.need(table, "pitch", |r, f| {
        let pitch = r.vector(f)?;
        let (columns, rows) = count?;
        if (columns > 1 && pitch.x == 0.0) || (rows > 1 && pitch.y == 0.0) {
            let message = "with a pitch of 0 members come to lie on one another";
            return r.fail(Diagnostic::error(f.span, message));
        }
        Some(pitch)
    });
    Some(Repeat::Grid { count: count?, pitch: pitch? })
}

/// Along a line: the same as displacements that grow by a step.
fn linear(reader: &mut Reader<'_>, table: &Table<'_>) -> Option<Repeat> {
    let count = reader.need(table, "linear", |r, f| r.whole(f, 2..=MOST_MEMBERS));
    let step = reader.need(table, "step", |r, f| {
        let step = r.vector(f)?;
        if step.x == 0.0 && step.y == 0.0 {
            let message = "with a step of 0 members come to lie on one another";
            return r.fail(Diagnostic::error(f.span, message));
        }
        Some(step)
    });
    let (count, step) = (count?, step?);
    Some(Repeat::At { offsets: (1..count).map(|k| step * f64::from(k)).collect() })
}

fn mirror(reader: &mut Reader<'_>, table: &Table<'_>) -> Option<Repeat> {
    let axis = reader.need(table, "mirror", |r, f| r.choice(f, &AXES));
    let at = reader.maybe(table, "at", Reader::length).unwrap_or(0.0);
    Some(Repeat::Mirror { axis: axis?, at })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn scaling_a_path_keeps_angles_flags_and_commands() {
        assert_eq!(
            scaled("M0 0 h1 v-2 a1,2 30 0 1 3,4 q 1 1 2 2 z", 2.0),
            "M 0 0 h 2 v -4 a 2 4 30 0 1 6 8 q 2 2 4 4 z"
        );
        assert_eq!(scaled("M 0 0 nonsense", 2.0), "M 0 0 nonsense");
    }
}
