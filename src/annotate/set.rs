//! Candidates of chains and baseline sets, whose members move together.

use super::annotation::LinearSize;
use super::candidate::{Candidate, Ground, Seat, is_on, side_towards};
use super::linear::{base, level, side_cost, spots, tier_cost, tiers};
use super::member::{Axes, End, Member, Spot, extension};
use super::sketch::Sketch;
use crate::spec::Pin;

/// All candidates of dimensions end to end on one line.
pub(super) fn chain(links: &[LinearSize], pin: &Pin, ground: &Ground<'_>) -> Vec<Candidate> {
    let Some(first) = links.first() else { return Vec::new() };
    let axes = Axes::new(first.along);
    let mut members: Vec<Member> = links.iter().map(|l| axes.member(l, ground)).collect();
    members.sort_by(|a, b| a.first.t.total_cmp(&b.first.t));
    let (placed, text_cost) = link_spots(&members, ground);
    let mut all = Vec::new();
    for (side, sign) in sides(&axes, pin) {
        let base = base_of(&axes, &members, sign, ground);
        for tier in tiers(pin, ground) {
            let level = level(base, sign, tier, ground);
            let mut sketch = Sketch::default();
            for station in stations(&members) {
                extension(&mut sketch, &axes, &station, level, &ground.practice);
            }
            for (member, (spot, ends)) in members.iter().zip(&placed) {
                member.body(&mut sketch, &axes, level, *spot, *ends, &ground.practice);
            }
            let cost = text_cost + tier_cost(tier, ground) + side_cost(side, ground);
            all.push(Candidate { sketch, cost, seats: vec![seat(side, tier, &members)] });
        }
    }
    all
}

/// All candidates of dimensions from one base, one tier each, shortest innermost.
pub(super) fn baseline(sizes: &[LinearSize], pin: &Pin, ground: &Ground<'_>) -> Vec<Candidate> {
    let Some(first) = sizes.first() else { return Vec::new() };
    let axes = Axes::new(first.along);
    let members: Vec<Member> = sizes.iter().map(|l| axes.member(l, ground)).collect();
    let count = u8::try_from(members.len()).unwrap_or(u8::MAX);
    let mut all = Vec::new();
    for (side, sign) in sides(&axes, pin) {
        let base = base_of(&axes, &members, sign, ground);
        for start in tiers(pin, ground) {
            for centred in [true, false] {
                let mut sketch = Sketch::default();
                let mut cost =
                    side_cost(side, ground) + tier_cost(start, ground) * f64::from(count);
                for (tier, member) in (start..).zip(&members) {
                    let level = level(base, sign, tier, ground);
                    let (spot, spot_cost) = baseline_spot(member, centred, pin, ground);
                    let fits = member.arrows_fit(&ground.practice);
                    let end = if fits { End::Inside } else { End::Outside };
                    member.extensions(&mut sketch, &axes, level, &ground.practice);
                    member.body(&mut sketch, &axes, level, spot, [end, end], &ground.practice);
                    cost += spot_cost;
                }
                let seats = (start..)
                    .zip(&members)
                    .map(|(tier, m)| seat(side, tier, std::slice::from_ref(m)))
                    .collect();
                all.push(Candidate { sketch, cost, seats });
            }
        }
    }
    all
}

/// The place of a member's text: in the middle of its line, or of the stretch that it does not
/// share with the shorter ones.
fn baseline_spot(member: &Member, centred: bool, pin: &Pin, ground: &Ground<'_>) -> (Spot, f64) {
    let all = spots(member, pin, ground);
    let (first, cost) = all[0];
    match (first, centred) {
        (Spot::Between(_), false) => {
            // Past the middle towards the far end, so that values of neighbouring tiers stagger.
            let p = &ground.practice;
            let room = member.span() - p.arrow() - p.style.dimension.inside_spare;
            let share = ((room - member.label.advance() / 2.0) / member.span()).max(0.5);
            (Spot::Between(share), cost + p.style.cost.unary.text_off_centre)
        }
        _ => (first, cost),
    }
}

/// Where each link's text stands and what ends its line, decided by the links beside it.
fn link_spots(members: &[Member], ground: &Ground<'_>) -> (Vec<(Spot, [End; 2])>, f64) {
    let p = &ground.practice;
    let costs = &p.style.cost.unary;
    let last = members.len().saturating_sub(1);
    let roomy = |i: usize| members[i].arrows_fit(p);
    let mut cost = 0.0;
    let placed = (0..members.len())
        .map(|i| {
            let end = |neighbour: Option<usize>| match (roomy(i), neighbour) {
                (true, _) => End::Inside,
                (false, None) => End::Outside,
                (false, Some(n)) if roomy(n) => End::Shared,
                (false, Some(n)) if n > i => End::Dot,
                (false, Some(_)) => End::Shared,
            };
            let ends = [end(i.checked_sub(1)), end((i < last).then_some(i + 1))];
            let spot = if members[i].text_fits(p) {
                Spot::Between(0.5)
            } else if i == 0 {
                Spot::Before
            } else if i == last {
                Spot::After
            } else {
                Spot::Lifted
            };
            if !roomy(i) {
                cost += costs.arrows_outside;
            }
            if spot != Spot::Between(0.5) {
                cost += costs.text_outside;
            }
            (spot, ends)
        })
        .collect();
    (placed, cost)
}

/// The distinct places of a chain; where two links meet, the stretch of both.
fn stations(members: &[Member]) -> Vec<super::member::Station> {
    let mut all: Vec<super::member::Station> = Vec::new();
    for station in members.iter().flat_map(|m| [m.first, m.second]) {
        match all.last_mut() {
            Some(last) if (last.t - station.t).abs() < 1e-6 => {
                last.low = last.low.min(station.low);
                last.high = last.high.max(station.high);
                last.reach = last.reach.max(station.reach);
                last.drawn.0 = last.drawn.0.min(station.drawn.0);
                last.drawn.1 = last.drawn.1.max(station.drawn.1);
            }
            _ => all.push(station),
        }
    }
    all
}

fn sides(axes: &Axes, pin: &Pin) -> Vec<(crate::spec::Side, f64)> {
    let both = [1.0, -1.0].map(|sign| (side_towards(axes.left * sign), sign));
    let asked = |sign: f64| pin.side.is_none_or(|p| is_on(p, axes.left * sign));
    let allowed: Vec<_> = both.into_iter().filter(|(_, sign)| asked(*sign)).collect();
    if allowed.is_empty() { both.to_vec() } else { allowed }
}

fn base_of(axes: &Axes, members: &[Member], sign: f64, ground: &Ground<'_>) -> f64 {
    let bases = members.iter().map(|m| base(axes, m, sign, ground));
    if sign > 0.0 {
        bases.fold(f64::NEG_INFINITY, f64::max)
    } else {
        bases.fold(f64::INFINITY, f64::min)
    }
}

fn seat(side: crate::spec::Side, tier: u8, members: &[Member]) -> Seat {
    let low = members.iter().map(|m| m.first.t).fold(f64::INFINITY, f64::min);
    let high = members.iter().map(|m| m.second.t).fold(f64::NEG_INFINITY, f64::max);
    Seat { side, tier, low, high }
}
