//! What two candidates of different annotations pay for standing together.

use super::ink::{Choice, Ink, InkKind, InkLine, whole};
use crate::annotate::{Practice, Seat};
use crate::geom::{
    Crossing, Line, Quad, Rect, Space, distance_line_line, line_crossing, overlap_length,
};
use crate::spec::Side;
use crate::style::PairCosts;

/// Lines within this distance, mm, run on one another.
const ON_ONE_ANOTHER: f64 = 0.3;
/// So long a common stretch, mm, makes two lines run on one another.
const SHARED_STRETCH: f64 = 0.5;
/// So long a common stretch, mm, makes two dimension lines neighbours.
const NEIGHBOUR_STRETCH: f64 = 1.0;

/// The cost of the pair in 1/100; `same_view` says whether tiers can be compared.
pub(super) fn pair_cost<S: Space>(
    a: &Choice<S>,
    b: &Choice<S>,
    same_view: bool,
    practice: &Practice<'_>,
) -> i64 {
    let order = if same_view { tier_order(a, b, practice) } else { 0.0 };
    let reach = practice.group.least_pitch;
    if !a.ink.bounds.is_within(&b.ink.bounds, reach) {
        return whole(order);
    }
    // Tiers have their own distances; only what stands free of them wants more room.
    let tiered = |c: &Choice<S>| c.seats.iter().any(|s| s.side != Side::Inside);
    let roomy = if tiered(a) && tiered(b) { 0.0 } else { practice.style.clearance.roomy };
    let cost = order
        + texts(&a.ink, &b.ink, roomy, practice)
        + texts_and_lines(&a.ink, &b.ink, roomy, practice)
        + texts_and_lines(&b.ink, &a.ink, roomy, practice)
        + lines(&a.ink, &b.ink, practice);
    whole(cost)
}

fn texts<S: Space>(a: &Ink<S>, b: &Ink<S>, roomy: f64, practice: &Practice<'_>) -> f64 {
    let clear = practice.style.clearance.text_text;
    let mut cost = 0.0;
    for (p, p_box) in &a.texts {
        for (q, q_box) in &b.texts {
            let apart = p_box.distance(q_box);
            if apart < clear && p.distance(q) < clear {
                cost += practice.style.cost.pair.text_text;
            } else if apart < roomy {
                cost += practice.style.cost.group.texts_crowded;
            }
        }
    }
    cost
}

fn texts_and_lines<S: Space>(
    texts: &Ink<S>,
    lines: &Ink<S>,
    roomy: f64,
    practice: &Practice<'_>,
) -> f64 {
    let clear = practice.style.clearance.text_line + practice.group.narrow / 2.0;
    let pair = &practice.style.cost.pair;
    let widest = lines.lines.iter().map(|l| l.half_width).fold(0.0, f64::max);
    let farthest = roomy.max(clear).max(practice.style.clearance.text_arrow + widest);
    let mut cost = 0.0;
    for (quad, text_box) in &texts.texts {
        if !text_box.is_within(&lines.bounds, farthest) {
            continue;
        }
        for l in &lines.lines {
            let reach = match l.kind {
                InkKind::Arrow => practice.style.clearance.text_arrow + l.half_width,
                // From here on the line would be interrupted.
                InkKind::Ext => practice.style.dimension.text_gap,
                InkKind::Dim | InkKind::Leader => clear,
            };
            if text_box.distance(&l.bounds) >= roomy.max(reach) {
                continue;
            }
            if !enters(quad, text_box, &l.line, reach) {
                if enters(quad, text_box, &l.line, roomy) {
                    cost += practice.style.cost.group.text_and_line_crowded;
                }
            } else {
                cost += match l.kind {
                    InkKind::Dim => pair.text_dim,
                    InkKind::Ext => pair.text_ext,
                    InkKind::Leader => pair.text_leader,
                    InkKind::Arrow => pair.text_arrow,
                };
            }
        }
    }
    cost
}

fn enters<S: Space>(quad: &Quad<S>, bounds: &Rect<S>, line: &Line<S>, reach: f64) -> bool {
    if quad.is_upright(1e-6) {
        crate::geom::distance_line_rect(line.from, line.to, bounds) < reach
    } else {
        quad.distance_to_line(line.from, line.to) < reach
    }
}

fn lines<S: Space>(a: &Ink<S>, b: &Ink<S>, practice: &Practice<'_>) -> f64 {
    let reach = practice.group.least_pitch - 1e-6;
    let mut cost = 0.0;
    for p in a.lines.iter().filter(|p| p.bounds.is_within(&b.bounds, reach)) {
        for q in &b.lines {
            if p.bounds.is_within(&q.bounds, reach) {
                cost += meeting(p, q, practice);
            }
        }
    }
    cost
}

fn meeting<S: Space>(p: &InkLine<S>, q: &InkLine<S>, practice: &Practice<'_>) -> f64 {
    let pair = &practice.style.cost.pair;
    let trim = practice.style.cost.trim;
    let both_dims = p.kind == InkKind::Dim && q.kind == InkKind::Dim;
    let both_leaders = p.kind == InkKind::Leader && q.kind == InkKind::Leader;
    let near = p.bounds.is_within(&q.bounds, ON_ONE_ANOTHER);
    if near && let (Some(u), Some(v)) = (p.line.trimmed(trim), q.line.trimmed(trim)) {
        match line_crossing(&u, &v, ON_ONE_ANOTHER) {
            Crossing::At { .. } => return weight(p.kind, q.kind, pair),
            Crossing::Along { length } if length > SHARED_STRETCH => {
                let ext = p.kind == InkKind::Ext || q.kind == InkKind::Ext;
                return if ext { 0.0 } else { weight(p.kind, q.kind, pair) };
            }
            Crossing::Along { .. } | Crossing::Apart => {}
        }
    }
    if both_dims && neighbours(&p.line, &q.line, practice.group.least_pitch) {
        return pair.dim_near;
    }
    let both_extensions = p.kind == InkKind::Ext && q.kind == InkKind::Ext;
    if both_extensions && side_by_side(&p.line, &q.line, practice) {
        return practice.style.cost.group.extensions_close;
    }
    if both_leaders {
        let (a, b) = (&p.line, &q.line);
        if distance_line_line(a.from, a.to, b.from, b.to) < practice.style.clearance.apart / 2.0 {
            // One that touches another's elbow reads like one that crosses it.
            return pair.leader_leader;
        }
        return near_parallel(&p.line, &q.line, practice)
            * practice.style.cost.group.leaders_near_parallel_per_mm;
    }
    0.0
}

fn weight(a: InkKind, b: InkKind, pair: &PairCosts) -> f64 {
    use InkKind::{Arrow, Dim, Ext, Leader};
    match (a, b) {
        (Dim, Dim) => pair.dim_dim,
        (Dim, Ext) | (Ext, Dim) => pair.dim_ext,
        (Dim, Leader) | (Leader, Dim) => pair.dim_leader,
        (Dim, Arrow) | (Arrow, Dim) => pair.dim_arrow,
        (Ext, Ext) => pair.ext_ext,
        (Ext, Leader) | (Leader, Ext) => pair.ext_leader,
        (Ext, Arrow) | (Arrow, Ext) => pair.ext_arrow,
        (Leader, Leader) => pair.leader_leader,
        (Leader, Arrow) | (Arrow, Leader) => pair.leader_arrow,
        (Arrow, Arrow) => pair.arrow_arrow,
    }
}

/// Whether two lines run side by side nearer than `pitch`.
fn neighbours<S: Space>(a: &Line<S>, b: &Line<S>, pitch: f64) -> bool {
    let (Some(u), Some(v)) = (a.vector().unit(), b.vector().unit()) else { return false };
    if u.cross(v).abs() > 1e-3 {
        return false;
    }
    let apart = (b.from - a.from).cross(u).abs();
    apart > ON_ONE_ANOTHER && apart < pitch - 1e-6 && overlap_length(a, b) > NEIGHBOUR_STRETCH
}

/// Whether two lines run beside each other so near that they look like one or like a mistake.
fn side_by_side<S: Space>(a: &Line<S>, b: &Line<S>, practice: &Practice<'_>) -> bool {
    let (Some(u), Some(v)) = (a.vector().unit(), b.vector().unit()) else { return false };
    let apart = (b.from - a.from).cross(u).abs();
    u.cross(v).abs() < 1e-3
        && apart > crate::geom::COINCIDENT
        && apart < practice.style.clearance.apart
        && overlap_length(a, b) > NEIGHBOUR_STRETCH
}

/// Common stretch, mm, of two leaders that run almost parallel and close together.
fn near_parallel<S: Space>(a: &Line<S>, b: &Line<S>, practice: &Practice<'_>) -> f64 {
    let (Some(u), Some(v)) = (a.vector().unit(), b.vector().unit()) else { return 0.0 };
    let clear = &practice.style.clearance;
    if u.cross(v).abs() > clear.parallel_angle.to_radians().sin() {
        return 0.0;
    }
    let apart = (b.at(0.5) - a.from).cross(u).abs();
    if apart > clear.apart { 0.0 } else { overlap_length(a, b).max(0.0) }
}

/// Longer dimensions inside shorter ones on the same side, where they stand over each other.
fn tier_order<S>(a: &Choice<S>, b: &Choice<S>, practice: &Practice<'_>) -> f64 {
    let pairs = a.seats.iter().flat_map(|p| b.seats.iter().map(move |q| (p, q)));
    let wrong = pairs.filter(|(p, q)| longer_inside(p, q)).count();
    practice.style.cost.group.order_of_tiers * wrong as f64
}

fn longer_inside(p: &Seat, q: &Seat) -> bool {
    let over_each_other = p.high.min(q.high) - p.low.max(q.low) > NEIGHBOUR_STRETCH;
    if p.side != q.side || p.side == Side::Inside || !over_each_other {
        return false;
    }
    let (inner, outer) = match p.tier.cmp(&q.tier) {
        std::cmp::Ordering::Less => (p, q),
        std::cmp::Ordering::Greater => (q, p),
        std::cmp::Ordering::Equal => return false,
    };
    (inner.high - inner.low) > (outer.high - outer.low) + 1e-6
}
