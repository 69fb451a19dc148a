//! SVG path data read as exact curves.
//!
//! Takes path data with y **up**; gives a [`Trace`]: lines stay lines, circular arcs stay arcs of
//! exactly the radius that is written, elliptical ones stay ellipses, quadratic Béziers become
//! cubic ones without loss. The grammar is that of SVG 1.1, 8.3, with two departures, since what is
//! drawn gets manufactured: an arc whose radius cannot span its ends, and one that ends where it
//! begins, are faults (SVG enlarges the one and leaves out the other without a word).

use svgtypes::{PathParser, PathSegment};

use super::figure::{Fault, Trace, number};
use crate::geom::{Arc, COINCIDENT, Cubic, Curve, EllipticArc, Path, Point, Vector, View};

/// Most pieces of one path; a traced contour has some thousands.
const MOST_PIECES: usize = 100_000;

/// The curves of path data.
///
/// # Errors
/// [`Fault`] that names the letter or the command that it is about.
pub(super) fn trace(data: &str) -> Result<Trace, Fault> {
    let mut pen = Pen::default();
    for (i, segment) in PathParser::from(data).enumerate() {
        let segment = segment.map_err(|e| syntax_fault(data, &e))?;
        if i >= MOST_PIECES {
            return Err(Fault::new(format!("the path has more than {MOST_PIECES} pieces")));
        }
        pen.draw(segment, i + 1)?;
    }
    pen.lift();
    if pen.trace.subpaths.is_empty() {
        return Err(Fault::new("the path data draws nothing")
            .help("begin with `M x y` and go on with `L`, `H`, `V`, `A`, `C`, `Q` or `Z`"));
    }
    Ok(pen.trace)
}

/// The state between two commands.
#[derive(Default)]
struct Pen {
    trace: Trace,
    curves: Vec<Curve<View>>,
    start: Option<Point<View>>,
    at: Option<Point<View>>,
    /// Whether the subpath's first point is already among the vertices.
    begun: bool,
    /// Last control point of a cubic, for `S`.
    cubic: Option<Point<View>>,
    /// Control point of a quadratic, for `T`.
    quadratic: Option<Point<View>>,
}

impl Pen {
    fn draw(&mut self, segment: PathSegment, count: usize) -> Result<(), Fault> {
        let at = self.at.unwrap_or(Point::new(0.0, 0.0));
        let place = |abs: bool, x: f64, y: f64| {
            if abs { Point::new(x, y) } else { at + Vector::new(x, y) }
        };
        let (cubic, quadratic) = (self.cubic.take(), self.quadratic.take());
        match segment {
            PathSegment::MoveTo { abs, x, y } => self.jump(place(abs, x, y)),
            PathSegment::LineTo { abs, x, y } => self.line_to(place(abs, x, y)),
            PathSegment::HorizontalLineTo { abs, x } => {
                self.line_to(Point::new(if abs { x } else { at.x + x }, at.y));
            }
            PathSegment::VerticalLineTo { abs, y } => {
                self.line_to(Point::new(at.x, if abs { y } else { at.y + y }));
            }
            PathSegment::CurveTo { abs, x1, y1, x2, y2, x, y } => {
                self.cubic_to(place(abs, x1, y1), place(abs, x2, y2), place(abs, x, y));
            }
            PathSegment::SmoothCurveTo { abs, x2, y2, x, y } => {
                let first = cubic.map_or(at, |c| at + (at - c));
                self.cubic_to(first, place(abs, x2, y2), place(abs, x, y));
            }
            PathSegment::Quadratic { abs, x1, y1, x, y } => {
                self.quadratic_to(place(abs, x1, y1), place(abs, x, y));
            }
            PathSegment::SmoothQuadratic { abs, x, y } => {
                self.quadratic_to(quadratic.map_or(at, |c| at + (at - c)), place(abs, x, y));
            }
            PathSegment::EllipticalArc { abs, rx, ry, x_axis_rotation, large_arc, sweep, x, y } => {
                let to = place(abs, x, y);
                let curve = match flat_arc(at, to, rx, ry) {
                    true => Curve::line(at, to),
                    false => ArcCommand { at, to, rx, ry, x_axis_rotation, large_arc, sweep }
                        .curve()
                        .map_err(|why| Fault::new(format!("command {count} of the path: {why}")))?,
                };
                self.push(Some(curve), to);
            }
            PathSegment::ClosePath { .. } => self.close(),
        }
        Ok(())
    }

    fn jump(&mut self, to: Point<View>) {
        self.lift();
        self.start = Some(to);
        self.at = Some(to);
    }

    fn line_to(&mut self, to: Point<View>) {
        let from = self.at.unwrap_or(to);
        self.push((!from.is_at(to)).then(|| Curve::line(from, to)), to);
    }

    fn cubic_to(&mut self, b: Point<View>, c: Point<View>, to: Point<View>) {
        let from = self.at.unwrap_or(to);
        let still = [b, c, to].iter().all(|p| p.is_at(from));
        self.push((!still).then_some(Curve::Cubic(Cubic([from, b, c, to]))), to);
        self.cubic = Some(c);
    }

    fn quadratic_to(&mut self, control: Point<View>, to: Point<View>) {
        let from = self.at.unwrap_or(to);
        // Raising the degree: the cubic's inner points lie at two thirds of the way to the control.
        let toward = |p: Point<View>| p + (control - p) * (2.0 / 3.0);
        self.cubic_to(toward(from), toward(to), to);
        self.cubic = None;
        self.quadratic = Some(control);
    }

    fn push(&mut self, curve: Option<Curve<View>>, to: Point<View>) {
        if !self.begun {
            self.trace.vertices.extend(self.start);
            self.begun = true;
        }
        self.trace.edges.push(curve);
        self.curves.extend(curve);
        self.trace.vertices.push(to);
        self.at = Some(to);
    }

    fn close(&mut self) {
        if let (Some(at), Some(start)) = (self.at, self.start) {
            if !at.is_at(start) && self.begun {
                let curve = Curve::line(at, start);
                self.trace.edges.push(Some(curve));
                self.curves.push(curve);
            }
            self.finish(true);
            // Without a new `M` the next subpath begins where this one did.
            self.at = Some(start);
        }
    }

    fn lift(&mut self) {
        self.finish(false);
    }

    fn finish(&mut self, closed: bool) {
        let path = Path { curves: std::mem::take(&mut self.curves), closed };
        if !path.curves.is_empty() {
            let closed = closed || path.meets_itself();
            self.trace.subpaths.push(Path { closed, ..path });
        }
        self.begun = false;
    }
}

/// SVG: an arc with a zero radius is a straight line.
fn flat_arc(at: Point<View>, to: Point<View>, rx: f64, ry: f64) -> bool {
    !at.is_at(to) && (rx.abs() <= COINCIDENT || ry.abs() <= COINCIDENT)
}

struct ArcCommand {
    at: Point<View>,
    to: Point<View>,
    rx: f64,
    ry: f64,
    x_axis_rotation: f64,
    large_arc: bool,
    sweep: bool,
}

impl ArcCommand {
    fn curve(&self) -> Result<Curve<View>, String> {
        if self.at.is_at(self.to) {
            return Err("the arc ends where it begins; draw a whole circle as two halves".into());
        }
        if (self.rx.abs() - self.ry.abs()).abs() <= COINCIDENT {
            self.circular()
        } else {
            self.elliptic()
        }
    }

    /// The circle of radius `rx` through both ends; of the two centres the one that the flags ask
    /// for lies to the left of the way from end to end if exactly one of them is set.
    fn circular(&self) -> Result<Curve<View>, String> {
        let radius = self.rx.abs();
        let chord = self.to - self.at;
        let half = chord.length() / 2.0;
        if half > radius + COINCIDENT {
            return Err(too_small(radius, half));
        }
        // At a half circle rounding must not move the centre off the chord.
        let square = radius * radius - half * half;
        let height = if square <= COINCIDENT * COINCIDENT { 0.0 } else { square.sqrt() };
        let side = if self.large_arc == self.sweep { -1.0 } else { 1.0 };
        let left = chord.unit().ok_or("the arc has no length")?.left();
        let centre = self.at.middle(self.to) + left * (height * side);
        let (start, end) = ((self.at - centre).angle(), (self.to - centre).angle());
        let turn = (end - start).rem_euclid(360.0);
        let sweep = if self.sweep { turn } else { turn - 360.0 };
        Ok(Curve::Arc(Arc::new(centre, radius, start, sweep)))
    }

    /// SVG 1.1, appendix F.6.5, as kurbo computes it.
    fn elliptic(&self) -> Result<Curve<View>, String> {
        let arc = kurbo::Arc::from_svg_arc(&kurbo::SvgArc {
            from: self.at.to_kurbo(),
            to: self.to.to_kurbo(),
            radii: kurbo::Vec2::new(self.rx, self.ry),
            x_rotation: self.x_axis_rotation.to_radians(),
            large_arc: self.large_arc,
            sweep: self.sweep,
        })
        .ok_or("the arc has no length")?;
        if (arc.radii.x - self.rx.abs()).abs() > COINCIDENT {
            return Err(too_small(self.rx.abs(), arc.radii.x));
        }
        Ok(Curve::Ellipse(EllipticArc {
            centre: Point::from_kurbo(arc.center),
            radii: (self.rx.abs(), self.ry.abs()),
            turn: self.x_axis_rotation,
            start: arc.start_angle.to_degrees(),
            sweep: arc.sweep_angle.to_degrees().clamp(-360.0, 360.0),
        }))
    }
}

fn too_small(radius: f64, needed: f64) -> String {
    format!(
        "the radius {} cannot reach from end to end; it needs {}",
        number(radius),
        number(needed)
    )
}

fn syntax_fault(data: &str, error: &svgtypes::Error) -> Fault {
    use svgtypes::Error;
    let place = match error {
        Error::UnexpectedData(at) | Error::InvalidNumber(at) => Some(*at),
        Error::InvalidChar(_, at) | Error::InvalidString(_, at) => Some(*at),
        Error::UnexpectedEndOfStream | Error::InvalidValue | Error::InvalidIdent => None,
    };
    // svgtypes counts letters from 1.
    let letter = place.and_then(|at| Some((at, data.chars().nth(at.checked_sub(1)?)?)));
    let Some((at, letter)) = letter else {
        return Fault::new("the path data ends in the middle of a command")
            .help("each command needs all its numbers: `L x y`, `A rx ry turn large sweep x y`");
    };
    let what = if matches!(error, Error::InvalidNumber(_)) { "a number" } else { "a path command" };
    Fault::new(format!("path data, letter {at}: expected {what}, found `{letter}`"))
        .help("path data is written as in SVG, with y upwards: `M 0 0 L 10 0 A 5 5 0 0 1 20 0 Z`")
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn curves(data: &str) -> Vec<Curve<View>> {
        trace(data).expect("sound data").subpaths.into_iter().flat_map(|p| p.curves).collect()
    }

    #[test]
    fn every_command_ends_where_svg_says() {
        // End points by hand from SVG 1.1, 8.3; the relative letters stand beside the absolute ones.
        let cases = [
            ("M 1 2 L 4 6", (4.0, 6.0)),
            ("M 1 2 l 4 6", (5.0, 8.0)),
            ("M 1 2 H 9", (9.0, 2.0)),
            ("M 1 2 h 9", (10.0, 2.0)),
            ("M 1 2 V 9", (1.0, 9.0)),
            ("M 1 2 v 9", (1.0, 11.0)),
            ("M 0 0 C 1 1 2 1 3 0", (3.0, 0.0)),
            ("M 1 1 c 1 1 2 1 3 0", (4.0, 1.0)),
            ("M 0 0 C 1 1 2 1 3 0 S 5 -1 6 0", (6.0, 0.0)),
            ("M 1 1 c 1 1 2 1 3 0 s 2 -1 3 0", (7.0, 1.0)),
            ("M 0 0 Q 1 1 2 0 T 4 0", (4.0, 0.0)),
            ("M 1 1 q 1 1 2 0 t 2 0", (5.0, 1.0)),
            ("M 0 0 A 5 5 0 0 1 10 0", (10.0, 0.0)),
            ("M 1 1 a 5 4 30 1 0 3 0", (4.0, 1.0)),
            ("M 0 0 1 0 1 1 Z l 5 5", (5.0, 5.0)),
        ];
        for (data, (x, y)) in cases {
            let end = curves(data).last().expect("a curve").end();
            assert!(end.distance(Point::new(x, y)) < 1e-9, "{data}: {end:?}");
        }
    }

    #[test]
    fn a_set_sweep_flag_turns_counter_clockwise_because_y_is_up() {
        let below = curves("M -5 0 A 5 5 0 0 1 5 0");
        assert!(below[0].at(0.5).distance(Point::new(0.0, -5.0)) < 1e-9);
        let above = curves("M -5 0 A 5 5 0 0 0 5 0");
        assert!(above[0].at(0.5).distance(Point::new(0.0, 5.0)) < 1e-9);
    }

    #[test]
    fn a_smooth_curve_goes_on_in_the_direction_of_the_one_before() {
        let c = curves("M 0 0 C 1 2 3 2 4 0 S 7 -2 8 0");
        let (a, b) = (c[0].direction(1.0).expect("moves"), c[1].direction(0.0).expect("moves"));
        assert!(a.dot(b) > 1.0 - 1e-9);
    }

    #[test]
    fn a_quadratic_keeps_its_middle() {
        // Middle of a quadratic: (p0 + 2 p1 + p2) / 4.
        let c = curves("M 0 0 Q 3 8 10 2");
        assert!(c[0].at(0.5).distance(Point::new(4.0, 4.5)) < 1e-12);
    }

    #[test]
    fn closing_adds_the_missing_piece_and_only_that() {
        let open = trace("M 0 0 L 4 0 L 4 3 Z").expect("sound");
        assert_eq!((open.edges.len(), open.vertices.len()), (3, 3));
        let met = trace("M 0 0 L 4 0 L 4 3 L 0 0 Z").expect("sound");
        assert_eq!((met.edges.len(), met.vertices.len()), (3, 4));
        assert!(open.subpaths[0].closed && met.subpaths[0].closed);
    }

    #[test]
    fn subpaths_number_their_points_on_and_on() {
        let t = trace("M 0 0 L 9 0 L 9 9 Z M 2 2 L 3 2 L 3 3 Z").expect("sound");
        assert_eq!((t.subpaths.len(), t.vertices.len(), t.edges.len()), (2, 6, 6));
    }

    #[test]
    fn what_cannot_be_read_says_where() {
        let fault = |data: &str| trace(data).expect_err("a fault");
        assert!(fault("M 0 0 L 5 x").message.contains("letter 11"));
        assert!(fault("10 10").message.contains("letter 1: expected a path command"));
        assert!(fault("").message.contains("draws nothing"));
        assert!(fault("M 1 1").message.contains("draws nothing"));
        assert!(fault("M 0 0 A 5 5 0 0 1 30 0").message.contains("needs 15"));
        assert!(fault("M 0 0 A 5 5 0 0 1 0 0").message.contains("ends where it begins"));
        assert!(fault("M 0 0 L 5").message.contains("ends in the middle"));
    }

    #[test]
    fn a_zero_radius_is_a_straight_line() {
        assert!(matches!(curves("M 0 0 A 0 5 0 0 1 3 4")[0], Curve::Line(_)));
    }

    proptest! {
        #[test]
        fn circular_arcs_keep_their_radius_to_the_last_bit(
            radius in 0.1..500.0f64, start in 0.0..360.0f64, turn in 1.0..359.0f64,
            cx in -300.0..300.0f64, cy in -300.0..300.0f64, sense in any::<bool>(),
        ) {
            let sweep = if sense { turn } else { -turn };
            let arc = Arc::<View>::new(Point::new(cx, cy), radius, start, sweep);
            let (a, b) = (Curve::Arc(arc).start(), Curve::Arc(arc).end());
            let data = format!(
                "M {} {} A {radius} {radius} 0 {} {} {} {}",
                a.x, a.y, u8::from(turn > 180.0), u8::from(sense), b.x, b.y
            );
            let c = curves(&data);
            let Curve::Arc(read) = c[0] else { panic!("{c:?}") };
            prop_assert_eq!(read.radius, radius);
            // Near a half circle the centre is ill-conditioned: ±1e-12 in the ends is √ of it there.
            prop_assert!(read.centre.distance(arc.centre) < 1e-3);
            prop_assert!(c[0].end().distance(b) < 1e-4);
        }

        #[test]
        fn no_text_makes_it_panic(data in "[MLHVCSQTAZmlhvcsqtaz0-9 .,eE+-]{0,60}") {
            let _ = trace(&data);
        }
    }
}
