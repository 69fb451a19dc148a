//! Dash patterns fitted to the length of a line.
//!
//! Takes a curve on paper, a pattern and the places along the curve where another line crosses;
//! gives the pieces that are drawn. The pattern is that of ISO 128-2 with its elements in line
//! widths; both ends are leading dashes, so that corners meet, and so is every crossing: only the
//! leading dash stretches, gaps and marks keep their length. On a closed curve the crossings alone
//! hold the pattern.

use crate::geom::{COINCIDENT, Curve, Paper};
use crate::style::DashSpec;

/// A pattern in mm of paper.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Pattern {
    dash: f64,
    least: f64,
    rest: Vec<f64>,
}

/// What a line becomes that is too short for its pattern.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Short {
    /// Continuous: centre lines, adjacent parts.
    Continuous,
    /// Two dashes with one gap: hidden edges stay told from visible ones.
    OneGap,
}

/// Next to a crossing the leading dash may shrink to this share of its least length: there both ends
/// of a stretch are held, so it cannot always come near it. At less the dashes of a hidden line
/// come down to the length of its gaps and read as dots.
const LEAST_SHARE: f64 = 0.5;

/// A drawn stretch, mm along the curve.
type Span = (f64, f64);

impl Pattern {
    /// The pattern of a style at a line width.
    pub(super) fn new(spec: &DashSpec, width: f64) -> Self {
        Self {
            dash: spec.dash * width,
            least: spec.least.unwrap_or(spec.dash) * width,
            rest: spec.rest.iter().map(|r| r * width).collect(),
        }
    }

    /// Length of the gap after a leading dash.
    pub(super) fn gap(&self) -> f64 {
        self.rest.first().copied().unwrap_or(0.0)
    }

    fn rest_length(&self) -> f64 {
        self.rest.iter().sum()
    }

    /// The pieces of `curve` that are drawn. `crossings` are mm along it, in any order.
    pub(super) fn fitted(
        &self,
        curve: &Curve<Paper>,
        crossings: &[f64],
        short: Short,
    ) -> Vec<Curve<Paper>> {
        let length = curve.length();
        let crossings = self.sorted(crossings, length);
        let spans = if curve.is_loop() && !crossings.is_empty() {
            self.around(length, &crossings)
        } else {
            self.along(length, &crossings, short)
        };
        match spans.as_slice() {
            [(from, to)] if to - from >= length - COINCIDENT => vec![*curve],
            _ => spans.into_iter().map(|(from, to)| piece(curve, length, from, to)).collect(),
        }
    }

    fn sorted(&self, crossings: &[f64], length: f64) -> Vec<f64> {
        let mut inside: Vec<f64> =
            crossings.iter().copied().filter(|c| *c >= 0.0 && *c <= length).collect();
        inside.sort_by(f64::total_cmp);
        inside.dedup_by(|a, b| *a - *b <= COINCIDENT);
        inside
    }

    /// An open line: a dash at each end, and a dash over each crossing.
    fn along(&self, length: f64, crossings: &[f64], short: Short) -> Vec<Span> {
        let (least, rest) = (self.least, self.rest_length());
        if length < 2.0 * least + rest {
            return match short {
                Short::Continuous => vec![(0.0, length)],
                Short::OneGap => self.one_gap(length),
            };
        }
        // A crossing so near an end is covered by the dash there.
        let end = LEAST_SHARE * least;
        let inner = crossings.iter().filter(|c| **c > end && **c < length - end);
        let mut stops = vec![(0.0, 1.0)];
        stops.extend(inner.map(|c| (*c, 0.5)));
        stops.push((length, 1.0));
        let mut spans = Vec::new();
        for pair in stops.windows(2) {
            self.stretch(pair[0], pair[1], &mut spans);
        }
        merged(spans)
    }

    /// A closed line: a dash centred on each crossing.
    fn around(&self, length: f64, crossings: &[f64]) -> Vec<Span> {
        let mut spans = Vec::new();
        let next = crossings.iter().skip(1).copied().chain([crossings[0] + length]);
        for (from, to) in crossings.iter().copied().zip(next) {
            self.stretch((from, 0.5), (to, 0.5), &mut spans);
        }
        let mut spans = merged(spans);
        // The halves of the dash over the first crossing stand at both ends of the list.
        if let [(first, end), .., (start, last)] = spans.as_slice()
            && last - first >= length - COINCIDENT
        {
            let whole = (*start, end + length);
            spans.pop();
            spans[0] = whole;
            spans.rotate_left(1);
        }
        spans
    }

    /// Dashes between two stops. Each stop takes a share of a leading dash: 1 at an end, ½ at a
    /// crossing. With `n` gaps, L = n·r + (n − 1 + shares)·ℓ'.
    fn stretch(&self, from: (f64, f64), to: (f64, f64), spans: &mut Vec<Span>) {
        let length = to.0 - from.0;
        let (rest, shares) = (self.rest_length(), from.1 + to.1);
        let ideal = (length - (shares - 1.0) * self.dash) / (self.dash + rest);
        let mut n = ideal.round().max(1.0);
        let stretched = |n: f64| (length - n * rest) / (n - 1.0 + shares);
        while n >= 1.0 && stretched(n) < LEAST_SHARE * self.least {
            n -= 1.0;
        }
        if n < 1.0 {
            spans.push((from.0, to.0));
            return;
        }
        let dash = stretched(n);
        let mut at = from.0 + from.1 * dash;
        spans.push((from.0, at));
        for i in 1..=n as usize {
            at = self.marks(at, spans);
            let share = if i == n as usize { to.1 } else { 1.0 };
            spans.push((at, at + share * dash));
            at += share * dash;
        }
    }

    /// What follows a leading dash: gap, mark, gap …; gives where it ends.
    fn marks(&self, mut at: f64, spans: &mut Vec<Span>) -> f64 {
        for (i, element) in self.rest.iter().enumerate() {
            if i % 2 == 1 {
                spans.push((at, at + element));
            }
            at += element;
        }
        at
    }

    fn one_gap(&self, length: f64) -> Vec<Span> {
        let dash = (length - self.gap()) / 2.0;
        // Dashes shorter than the gap between them would no longer read as a line.
        if dash < self.gap() {
            return vec![(0.0, length)];
        }
        vec![(0.0, dash), (length - dash, length)]
    }
}

fn merged(spans: Vec<Span>) -> Vec<Span> {
    let mut whole: Vec<Span> = Vec::with_capacity(spans.len());
    for (from, to) in spans {
        match whole.last_mut() {
            Some(last) if from - last.1 <= COINCIDENT => last.1 = last.1.max(to),
            _ => whole.push((from, to)),
        }
    }
    whole
}

/// The piece between two lengths, the second of which may lie past the end of a closed curve.
fn piece(curve: &Curve<Paper>, length: f64, from: f64, to: f64) -> Curve<Paper> {
    let parameter = |at: f64| {
        let turns = if curve.is_loop() { (at / length).floor().max(0.0) } else { 0.0 };
        turns + curve.parameter_at_length(at - turns * length)
    };
    curve.piece(parameter(from), parameter(to))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geom::{Arc, EllipticArc, Point};
    use crate::style::builtin;
    use proptest::prelude::*;

    /// Line width of the tests.
    const D: f64 = 0.25;

    fn hidden() -> Pattern {
        Pattern::new(&builtin("iso").expect("compiled in").dash.hidden, D)
    }

    fn centre() -> Pattern {
        Pattern::new(&builtin("iso").expect("compiled in").dash.centre, D)
    }

    fn adjacent() -> Pattern {
        Pattern::new(&builtin("iso").expect("compiled in").dash.adjacent, D)
    }

    fn level(length: f64) -> Curve<Paper> {
        Curve::line(Point::new(0.0, 0.0), Point::new(length, 0.0))
    }

    /// Lengths of dashes and gaps in line widths, beginning with a dash.
    fn elements(pieces: &[Curve<Paper>]) -> Vec<f64> {
        let mut found = Vec::new();
        for (i, p) in pieces.iter().enumerate() {
            if i > 0 {
                found.push(pieces[i - 1].end().distance(p.start()) / D);
            }
            found.push(p.length() / D);
        }
        found
    }

    fn near(found: &[f64], expected: &[f64]) -> bool {
        found.len() == expected.len()
            && found.iter().zip(expected).all(|(a, b)| (a - b).abs() < 1e-6)
    }

    // Element lengths of ISO 128-2:2020 (formerly ISO 128-20): dash 12d, long dash 24d, gap 3d, dot
    // 0.5d; a line of exactly the shortest length has them unstretched. Shortest lengths: 27d for
    // type 02, 54.5d for 04, 58d for 05.
    #[test]
    fn the_shortest_lines_have_the_elements_of_the_standard() {
        let one = |p: &Pattern, d: f64| elements(&p.fitted(&level(d * D), &[], Short::Continuous));
        assert!(near(&one(&hidden(), 27.0), &[12.0, 3.0, 12.0]));
        assert!(near(&one(&centre(), 54.5), &[24.0, 3.0, 0.5, 3.0, 24.0]));
        assert!(near(&one(&adjacent(), 58.0), &[24.0, 3.0, 0.5, 3.0, 0.5, 3.0, 24.0]));
    }

    #[test]
    fn a_style_may_let_dashes_shrink() {
        // Centre line of US practice in mm: 25, 1.5, 3, 1.5; the long dash down to 4.5, so that a
        // line of 15 has two (textbooks; from memory).
        let rest = vec![1.5, 3.0, 1.5];
        let us = Pattern::new(&DashSpec { dash: 25.0, least: Some(4.5), rest }, 1.0);
        let found = us.fitted(&level(15.0), &[], Short::Continuous);
        assert!(near(&elements(&found), &[18.0, 6.0, 12.0, 6.0, 18.0]), "{:?}", elements(&found));
        assert_eq!(us.fitted(&level(14.9), &[], Short::Continuous).len(), 1);
    }

    #[test]
    fn shorter_lines_are_continuous_or_have_one_gap() {
        let curve = level(50.0 * D);
        assert_eq!(centre().fitted(&curve, &[], Short::Continuous), vec![curve]);
        let two = elements(&hidden().fitted(&level(20.0 * D), &[], Short::OneGap));
        assert!(near(&two, &[8.5, 3.0, 8.5]));
        let tiny = level(5.0 * D);
        assert_eq!(hidden().fitted(&tiny, &[], Short::OneGap), vec![tiny]);
    }

    #[test]
    fn a_circle_has_a_dash_over_each_axis_crossing() {
        let circle = Curve::Arc(Arc::circle(Point::<Paper>::new(3.0, 4.0), 10.0));
        let quarter = circle.length() / 4.0;
        let stops = [0.0, quarter, 2.0 * quarter, 3.0 * quarter];
        let dashes = hidden().fitted(&circle, &stops, Short::OneGap);
        // n = max(4, round(πD/(ℓ + r))), a multiple of 4: 62.83/3.75 = 16.8 → 16.
        assert_eq!(dashes.len(), 16);
        for degrees in [0.0, 90.0, 180.0, 270.0] {
            let covering = dashes.iter().filter(|c| {
                let Curve::Arc(a) = c else { return false };
                let middle = (a.middle() - degrees).rem_euclid(360.0);
                middle.min(360.0 - middle) < 1e-9
            });
            assert_eq!(covering.count(), 1, "{degrees}");
        }
    }

    #[test]
    fn ellipses_keep_their_dashes_on_the_curve() {
        let e = Curve::Ellipse(EllipticArc {
            centre: Point::<Paper>::new(0.0, 0.0),
            radii: (20.0, 8.0),
            turn: 15.0,
            start: 0.0,
            sweep: 360.0,
        });
        let dashes = hidden().fitted(&e, &[0.0, e.length() / 2.0], Short::OneGap);
        let drawn: f64 = dashes.iter().map(Curve::length).sum();
        let gaps = e.length() - drawn;
        assert!((gaps - dashes.len() as f64 * 3.0 * D).abs() < 0.05, "{gaps}");
    }

    proptest! {
        #[test]
        fn a_fitted_line_begins_and_ends_with_a_dash_and_adds_up(
            length in 1.0..900.0f64, share in prop::collection::vec(0.0..1.0f64, 0..6),
        ) {
            let curve = level(length);
            let crossings: Vec<f64> = share.iter().map(|s| s * length).collect();
            for pattern in [hidden(), centre(), adjacent()] {
                let pieces = pattern.fitted(&curve, &crossings, Short::Continuous);
                let first = pieces.first().expect("a line is never left out");
                let last = pieces.last().expect("a line is never left out");
                prop_assert!(first.start().distance(curve.start()) < 1e-9);
                prop_assert!(last.end().distance(curve.end()) < 1e-9);
                prop_assert!((elements(&pieces).iter().sum::<f64>() * D - length).abs() < 1e-6);
                prop_assert!(first.length() >= LEAST_SHARE * pattern.dash - 1e-9 || pieces.len() == 1);
                prop_assert!(last.length() >= LEAST_SHARE * pattern.dash - 1e-9 || pieces.len() == 1);
                for c in &crossings {
                    let on = pieces.iter().any(|p| p.start().x <= c + 1e-6 && p.end().x >= c - 1e-6);
                    prop_assert!(on, "a gap at the crossing {c}");
                }
            }
        }

        #[test]
        fn gaps_and_dots_keep_their_length(length in 15.0..900.0f64) {
            let found = elements(&centre().fitted(&level(length), &[], Short::Continuous));
            for (i, e) in found.iter().enumerate() {
                let expected = [None, Some(3.0), Some(0.5), Some(3.0)][i % 4];
                if let Some(expected) = expected {
                    prop_assert!((e - expected).abs() < 1e-6);
                } else {
                    prop_assert!((e - found[0]).abs() < 1e-6, "dashes are equal");
                }
            }
        }
    }
}
