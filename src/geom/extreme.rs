//! Where a curve turns back along a direction.

use super::{Curve, Space, Vector};

impl<S: Space> Curve<S> {
    /// The parameters strictly between 0 and 1, in order, at which the curve reaches farthest to
    /// one side or the other along `direction`. Between two of them (and the ends) the coordinate
    /// along `direction` only grows or only falls. A straight line has none.
    #[must_use]
    pub fn extremes(&self, direction: Vector<S>) -> Vec<f64> {
        let mut found = match self {
            Self::Line(_) => Vec::new(),
            Self::Arc(a) => turning_angles(a.start, a.sweep, direction.angle()),
            Self::Ellipse(e) => {
                let first = Vector::<S>::at_angle(e.turn);
                let along =
                    (e.radii.0 * first.dot(direction), e.radii.1 * first.left().dot(direction));
                turning_angles(e.start, e.sweep, along.1.atan2(along.0).to_degrees())
            }
            Self::Cubic(c) => {
                let [d0, d1, d2] = [0, 1, 2].map(|i| direction.dot(c.0[i + 1] - c.0[i]));
                // Bernstein form of the derivative, written out in powers of t.
                let roots = kurbo::common::solve_quadratic(d0, 2.0 * (d1 - d0), d0 - 2.0 * d1 + d2);
                roots.into_iter().filter(|t| inside(*t)).collect()
            }
        };
        found.sort_by(f64::total_cmp);
        found
    }
}

/// Parameters at which the angle passes `extreme` or its opposite, degrees.
fn turning_angles(start: f64, sweep: f64, extreme: f64) -> Vec<f64> {
    [extreme, extreme + 180.0]
        .into_iter()
        .map(|angle| ((angle - start) * sweep.signum()).rem_euclid(360.0) / sweep.abs())
        .filter(|t| inside(*t))
        .collect()
}

fn inside(t: f64) -> bool {
    t > 1e-12 && t < 1.0 - 1e-12
}

#[cfg(test)]
mod tests {
    use crate::geom::{Arc, Cubic, Curve, EllipticArc, Point, Vector, View};

    #[test]
    fn between_extremes_a_curve_runs_one_way() {
        let curves = [
            Curve::Arc(Arc::<View>::new(Point::new(1.0, 2.0), 5.0, 20.0, -300.0)),
            Curve::Ellipse(EllipticArc {
                centre: Point::new(0.0, 0.0),
                radii: (7.0, 2.0),
                turn: 33.0,
                start: 10.0,
                sweep: 340.0,
            }),
            Curve::Cubic(Cubic(
                [(0.0, 0.0), (9.0, 8.0), (-4.0, -7.0), (5.0, 1.0)].map(|(x, y)| Point::new(x, y)),
            )),
        ];
        for direction in [0.0, 45.0, 120.0].map(Vector::<View>::at_angle) {
            for curve in &curves {
                let along = |t: f64| direction.dot(curve.at(t) - Point::new(0.0, 0.0));
                let mut cuts = vec![0.0];
                cuts.extend(curve.extremes(direction));
                cuts.push(1.0);
                assert!(cuts.len() > 2, "{curve:?}");
                for pair in cuts.windows(2) {
                    let steps: Vec<f64> = (0..=20)
                        .map(|i| along(pair[0] + (pair[1] - pair[0]) * f64::from(i) / 20.0))
                        .collect();
                    let grows = steps.windows(2).all(|s| s[1] >= s[0] - 1e-9);
                    let falls = steps.windows(2).all(|s| s[1] <= s[0] + 1e-9);
                    assert!(grows || falls, "{curve:?} {pair:?}");
                }
            }
        }
    }
}
