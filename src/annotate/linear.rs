//! Candidates of a single linear dimension: side × tier × place of the text, and, across a body
//! whose edges both run past it, dimension lines inside.

use super::annotation::LinearSize;
use super::candidate::{Candidate, Ground, Seat, is_on, side_towards};
use super::member::{Axes, End, Member, Spot};
use super::sketch::Sketch;
use crate::spec::{Pin, Side};
use crate::style::SheetSide;

/// All candidates of `size` that the pin allows.
pub(super) fn candidates(size: &LinearSize, pin: &Pin, ground: &Ground<'_>) -> Vec<Candidate> {
    let axes = Axes::new(size.along);
    let member = axes.member(size, ground);
    let spots = spots(&member, pin, ground);
    let mut all = Vec::new();
    for sign in [1.0, -1.0] {
        let side = side_towards(axes.left * sign);
        if pin.side.is_some_and(|s| !is_on(s, axes.left * sign)) {
            continue;
        }
        let base = base(&axes, &member, sign, ground);
        for tier in tiers(pin, ground) {
            let level = level(base, sign, tier, ground);
            for (spot, cost) in &spots {
                let sketch = draw(&member, &axes, level, *spot, ground);
                let seat = Seat { side, tier, low: member.first.t, high: member.second.t };
                let cost = cost + tier_cost(tier, ground) + side_cost(side, ground);
                all.push(Candidate { sketch, cost, seats: vec![seat] });
            }
        }
    }
    if pin.tier.is_none() && matches!(pin.side, None | Some(Side::Inside)) {
        all.extend(inside(&member, &axes, &spots, ground));
    }
    if all.is_empty() {
        // Pinned inside a view whose edges leave no room for that.
        return candidates(size, &Pin { side: None, ..*pin }, ground);
    }
    all
}

/// Outermost place of what the tiers of a side stand clear of.
pub(super) fn base(axes: &Axes, member: &Member, sign: f64, ground: &Ground<'_>) -> f64 {
    let upright = axes.along.x.abs() < 1e-6 || axes.along.y.abs() < 1e-6;
    if upright {
        let (low, high) = axes.span_across(&ground.view.outline);
        if sign > 0.0 { high } else { low }
    } else if sign > 0.0 {
        member.first.high.max(member.second.high)
    } else {
        member.first.low.min(member.second.low)
    }
}

/// Place across of the dimension line in a tier.
pub(super) fn level(base: f64, sign: f64, tier: u8, ground: &Ground<'_>) -> f64 {
    let group = ground.practice.group;
    base + sign * (group.first_line + f64::from(tier) * group.pitch)
}

/// The tiers that are offered.
pub(super) fn tiers(pin: &Pin, ground: &Ground<'_>) -> std::ops::Range<u8> {
    match pin.tier {
        Some(tier) => tier.saturating_sub(1)..tier.max(1),
        None => 0..ground.practice.style.dimension.tiers,
    }
}

/// What standing in a tier costs.
pub(super) fn tier_cost(tier: u8, ground: &Ground<'_>) -> f64 {
    let costs = &ground.practice.style.cost.unary;
    costs.tier_per_mm * f64::from(tier) * ground.practice.group.pitch
}

/// What standing on a side costs that the style does not prefer.
pub(super) fn side_cost(side: Side, ground: &Ground<'_>) -> f64 {
    let style = ground.practice.style;
    let side = match side {
        Side::Above => SheetSide::Top,
        Side::Below => SheetSide::Bottom,
        Side::Left => SheetSide::Left,
        Side::Right => SheetSide::Right,
        Side::Inside => return 0.0,
    };
    let preferred = style.dimension.preferred_sides.contains(&side);
    if preferred { 0.0 } else { style.cost.unary.other_side }
}

/// Places of the text with what they cost.
pub(super) fn spots(member: &Member, pin: &Pin, ground: &Ground<'_>) -> Vec<(Spot, f64)> {
    let p = &ground.practice;
    let costs = &p.style.cost.unary;
    let arrows = if member.arrows_fit(p) { 0.0 } else { costs.arrows_outside };
    if let Some(share) = pin.along {
        let spot = match share {
            s if s < 0.0 => Spot::Before,
            s if s > 1.0 => Spot::After,
            s => Spot::Between(s),
        };
        return vec![(spot, arrows)];
    }
    let mut spots = Vec::new();
    if member.text_fits(p) {
        spots.push((Spot::Between(0.5), arrows));
        let half = member.label.advance() / 2.0 + p.arrow() + p.style.dimension.inside_spare;
        let span = member.span();
        if span >= 2.0 * half + p.group.text {
            for share in [half / span, 1.0 - half / span] {
                spots.push((Spot::Between(share), arrows + costs.text_off_centre));
            }
        }
    }
    spots.push((Spot::After, arrows + costs.text_outside));
    spots.push((Spot::Before, arrows + costs.text_outside * 1.1));
    spots
}

/// The whole dimension with its line at `level`.
fn draw(
    member: &Member,
    axes: &Axes,
    level: f64,
    spot: Spot,
    ground: &Ground<'_>,
) -> Sketch<crate::geom::Paper> {
    let p = &ground.practice;
    let end = if member.arrows_fit(p) { End::Inside } else { End::Outside };
    let mut sketch = Sketch::default();
    member.extensions(&mut sketch, axes, level, p);
    member.body(&mut sketch, axes, level, spot, [end, end], p);
    sketch
}

/// Dimension lines that touch both edges directly, as across a step of a shaft.
fn inside(
    member: &Member,
    axes: &Axes,
    spots: &[(Spot, f64)],
    ground: &Ground<'_>,
) -> Vec<Candidate> {
    let low = member.first.low.max(member.second.low);
    let high = member.first.high.min(member.second.high);
    let p = &ground.practice;
    // Room for the text beside the line, and for the line clear of the ends of the edges.
    let margin = p.group.text + 2.0 * p.style.dimension.text_lift + p.group.wide;
    let (from, to) = (low + p.arrow(), high - margin);
    if to < from {
        return Vec::new();
    }
    let steps = (((to - from) / (2.0 * p.group.text)).floor() as usize).clamp(1, 6);
    let mut all = Vec::new();
    for i in 0..=steps {
        let level = from + (to - from) * i as f64 / steps as f64;
        for (spot, cost) in spots.iter().copied().chain(off_axis(member, ground)) {
            let seat =
                Seat { side: Side::Inside, tier: 0, low: member.first.t, high: member.second.t };
            let sketch = draw(member, axes, level, spot, ground);
            let cost = cost + p.style.cost.unary.dim_inside_view;
            all.push(Candidate { sketch, cost, seats: vec![seat] });
        }
    }
    all
}

/// Places of the text between the axis and either edge, clear of a centre line in the middle.
fn off_axis(member: &Member, ground: &Ground<'_>) -> Vec<(Spot, f64)> {
    let p = &ground.practice;
    let clear = p.style.dimension.text_lift + p.group.narrow;
    let need = member.label.advance() + clear + p.arrow().max(clear);
    if member.span() / 2.0 < need {
        return Vec::new();
    }
    let shift = (member.label.advance() / 2.0 + clear) / member.span();
    let cost = p.style.cost.unary.text_off_centre;
    vec![(Spot::Between(0.5 + shift), cost), (Spot::Between(0.5 - shift), cost)]
}
