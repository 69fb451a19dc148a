//! Dash patterns fitted to a length, so that lines begin, end and cross in dashes.
//!
//! Elements after ISO 128-2 (in widths of the line); the fit keeps gaps and marks and stretches the
//! dashes: `n = round((L − c·ℓ)/(ℓ + r))`, `ℓ' = (L − n·r)/(n + c)`, where ℓ is the dash, r the rest
//! of a period and c counts the dashes at the ends beyond whole periods.

use crate::style::DashSpec;

/// What a line does at one of its ends.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Tip {
    /// It ends, in a whole dash.
    Free,
    /// It goes on symmetrically: half a dash on this side.
    Crossing,
}

/// A dash pattern in mm of paper.
#[derive(Clone, Debug)]
pub(super) struct Pattern {
    dash: f64,
    rest: Vec<f64>,
    /// Whether a line too short for the pattern is drawn whole instead of in two dashes.
    short_is_whole: bool,
}

/// Dashes may shrink to this share of their nominal length before a line counts as too short.
const SHRINK: f64 = 0.6;

impl Pattern {
    /// The pattern of a line `width` mm wide.
    pub(super) fn new(spec: &DashSpec, width: f64, short_is_whole: bool) -> Self {
        let rest = spec.rest.iter().map(|e| e * width).collect();
        Self { dash: spec.dash * width, rest, short_is_whole }
    }

    fn period_rest(&self) -> f64 {
        self.rest.iter().sum()
    }

    /// Where ink lies on a line of `length` mm, as stretches in mm from its beginning.
    pub(super) fn fit(&self, length: f64, tips: [Tip; 2]) -> Vec<(f64, f64)> {
        let share = |t: Tip| match t {
            Tip::Free => 1.0,
            Tip::Crossing => 0.5,
        };
        let ends = share(tips[0]) + share(tips[1]);
        // n periods put n + 1 dashes on a free line; half dashes at crossings take from that.
        let c = ends - 1.0;
        let r = self.period_rest();
        let n = ((length - c * self.dash) / (self.dash + r)).round().max(1.0);
        let dash = (length - n * r) / (n + c);
        if dash < SHRINK * self.dash {
            return self.too_short(length);
        }
        let mut ink = Vec::new();
        let mut at = 0.0;
        for i in 0..=(n as usize) {
            let first = i == 0;
            let last = i == n as usize;
            let part = if first {
                share(tips[0])
            } else if last {
                share(tips[1])
            } else {
                1.0
            };
            ink.push((at, (at + dash * part).min(length)));
            at += dash * part;
            if !last {
                self.rest_of_period(&mut at, &mut ink);
            }
        }
        ink
    }

    /// Where ink lies on a circle of `round` mm circumference, from the middle of a dash at 0 on;
    /// a dash lies on every `1/parts` of it. The last stretch may reach past the circumference.
    pub(super) fn fit_circle(&self, round: f64, parts: u32) -> Vec<(f64, f64)> {
        let r = self.period_rest();
        let parts = f64::from(parts.max(1));
        let n = (round / (self.dash + r) / parts).round().max(1.0) * parts;
        let dash = round / n - r;
        if dash < SHRINK * self.dash {
            return vec![(0.0, round)];
        }
        let mut ink = Vec::new();
        for i in 0..(n as usize) {
            let mut at = round * i as f64 / n - dash / 2.0;
            ink.push((at, at + dash));
            at += dash;
            self.rest_of_period(&mut at, &mut ink);
        }
        ink
    }

    /// Walks over gap, mark, gap…, noting the marks.
    fn rest_of_period(&self, at: &mut f64, ink: &mut Vec<(f64, f64)>) {
        for (i, element) in self.rest.iter().enumerate() {
            if i % 2 == 1 {
                ink.push((*at, *at + element));
            }
            *at += element;
        }
    }

    fn too_short(&self, length: f64) -> Vec<(f64, f64)> {
        let gap = self.rest.first().copied().unwrap_or(0.0);
        if self.short_is_whole || length < 3.0 * gap {
            return vec![(0.0, length)];
        }
        let dash = (length - gap) / 2.0;
        vec![(0.0, dash), (dash + gap, length)]
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::style::builtin;
    use proptest::prelude::*;

    fn centre() -> Pattern {
        Pattern::new(&builtin("iso").expect("compiled in").dash.centre, 0.25, true)
    }

    // ISO 128-2:2020 (from memory): line 04 is dash 24d, gap 3d, dot 0.5d, gap 3d; line 02 is dash
    // 12d, gap 3d, in widths d of the line.
    #[test]
    fn elements_are_those_of_iso_128() {
        let ink = centre().fit(54.5 * 0.25, [Tip::Free, Tip::Free]);
        assert_eq!(ink.len(), 3);
        assert!((ink[0].1 - 24.0 * 0.25).abs() < 1e-9);
        assert!((ink[1].1 - ink[1].0 - 0.5 * 0.25).abs() < 1e-9);
        assert!((ink[1].0 - ink[0].1 - 3.0 * 0.25).abs() < 1e-9);
        let hidden = Pattern::new(&builtin("iso").expect("compiled in").dash.hidden, 0.25, false);
        let ink = hidden.fit(27.0 * 0.25, [Tip::Free, Tip::Free]);
        assert!(ink.len() == 2 && (ink[0].1 - 12.0 * 0.25).abs() < 1e-9);
    }

    #[test]
    fn a_short_hidden_line_is_two_dashes_a_short_centre_line_is_whole() {
        let hidden = Pattern::new(&builtin("iso").expect("compiled in").dash.hidden, 0.25, false);
        assert_eq!(hidden.fit(3.5, [Tip::Free, Tip::Free]).len(), 2);
        assert_eq!(centre().fit(5.0, [Tip::Free, Tip::Free]), vec![(0.0, 5.0)]);
    }

    proptest! {
        #[test]
        fn lines_begin_and_end_in_ink(
            length in 1.0..500.0f64, a in any::<bool>(), b in any::<bool>(),
        ) {
            let tip = |x: bool| if x { Tip::Crossing } else { Tip::Free };
            let ink = centre().fit(length, [tip(a), tip(b)]);
            prop_assert!(ink[0].0.abs() < 1e-9);
            prop_assert!((ink[ink.len() - 1].1 - length).abs() < 1e-6);
            prop_assert!(ink.windows(2).all(|w| w[0].1 < w[1].0));
        }

        #[test]
        fn circles_have_a_dash_on_every_axis(round in 20.0..900.0f64) {
            let ink = centre().fit_circle(round, 4);
            for quarter in 0..4 {
                let at = round * f64::from(quarter) / 4.0;
                prop_assert!(ink.iter().any(|(p, q)| *p <= at + 1e-9 && *q >= at - 1e-9));
            }
        }
    }
}
