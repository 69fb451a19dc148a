//! The choice of one candidate for each annotation.
//!
//! Greedy start, descent over single annotations, then over pairs: two annotations that are in each
//! other's way are re-placed together, exactly. Where that stalls, an annotation is taken off with
//! those in its way and all are put back in other orders. Bounded in rounds; the same result on any
//! machine.

use super::conflict::pair_cost;
use super::ink::Chooser;
use crate::annotate::Practice;
use crate::geom::{Rect, Space};
use crate::spec::Side;

/// Rounds of descent at most; on sheets of a hundred annotations some five are needed.
const ROUNDS: usize = 24;

/// Annotations rebuilt together at most: enough for the tiers of one side.
const PART: usize = 7;

/// A pair whose cost was not yet asked. Zero, because zeroed tables come from the system untouched
/// and most of their cells never are; costs are kept with one added.
const UNKNOWN: i32 = 0;

/// Beyond this many annotations parts are not rebuilt: no such sheet is readable, and the time goes
/// into what a person would not see.
const REBUILT: usize = 400;

/// Annotations, and what pairs of their candidates cost, computed when first asked.
pub(super) struct Problem<'a, S> {
    choosers: &'a [Chooser<S>],
    practice: Practice<'a>,
    /// Pairs of annotations whose candidates can meet.
    pairs: Vec<(usize, usize)>,
    /// For each annotation its neighbours and the pair's place.
    neighbours: Vec<Vec<(usize, usize)>>,
    tables: Vec<Vec<i32>>,
}

impl<'a, S: Space> Problem<'a, S> {
    /// Sets up the choice among `choosers`.
    pub(super) fn new(choosers: &'a [Chooser<S>], practice: Practice<'a>) -> Self {
        let reach: Vec<Option<Rect<S>>> = choosers
            .iter()
            .map(|c| Rect::union_of(c.choices.iter().map(|o| o.ink.bounds)))
            .collect();
        let ladders: Vec<Vec<Ladder>> = choosers.iter().map(ladders_of).collect();
        let overlap = |p: &Ladder, q: &Ladder| p.0 == q.0 && p.1 < q.2 && q.1 < p.2;
        let mut pairs = Vec::new();
        let mut neighbours = vec![Vec::new(); choosers.len()];
        for i in 0..choosers.len() {
            for j in i + 1..choosers.len() {
                let (Some(a), Some(b)) = (&reach[i], &reach[j]) else { continue };
                let meet = a.distance(b) <= practice.group.least_pitch;
                let one_ladder = choosers[i].view == choosers[j].view
                    && ladders[i].iter().any(|p| ladders[j].iter().any(|q| overlap(p, q)));
                if meet || one_ladder {
                    neighbours[i].push((j, pairs.len()));
                    neighbours[j].push((i, pairs.len()));
                    pairs.push((i, j));
                }
            }
        }
        let tables = vec![Vec::new(); pairs.len()];
        Self { choosers, practice, pairs, neighbours, tables }
    }

    /// The chosen candidate of each annotation, beginning from `start` where it is given.
    pub(super) fn solve(&mut self, start: Option<&[usize]>) -> Vec<usize> {
        let mut picks = match start {
            Some(start) => start.to_vec(),
            None => self.greedy(),
        };
        for _ in 0..ROUNDS {
            let moved = self.descend(&mut picks);
            let paired = self.descend_pairs(&mut picks);
            let rest = !moved && !paired;
            if rest && (picks.len() > REBUILT || !self.rebuild_parts(&mut picks)) {
                break;
            }
        }
        picks
    }

    /// Takes an annotation and those in its way off the sheet and puts them back in a few other
    /// orders; keeps what is cheaper. That clears knots of three and more.
    fn rebuild_parts(&mut self, picks: &mut Vec<usize>) -> bool {
        let mut better = false;
        let mut order: Vec<(i64, usize)> = (0..picks.len())
            .map(|i| {
                let costs = self.costs_of(i, picks, None);
                let least = self.choosers[i].choices.iter().map(|o| o.cost).min().unwrap_or(0);
                (costs[picks[i]] - least, i)
            })
            .filter(|(excess, _)| *excess > 0)
            .collect();
        order.sort_by(|a, b| b.0.cmp(&a.0).then(a.1.cmp(&b.1)));
        for (_, seed) in order {
            let part = self.part_around(seed, picks);
            let now = self.cost_of_part(&part, picks);
            for first in 0..part.len() {
                let mut trial = picks.clone();
                for i in &part {
                    trial[*i] = usize::MAX;
                }
                let turned = part[first..].iter().chain(&part[..first]);
                for i in turned {
                    let costs = self.costs_of(*i, &trial, None);
                    trial[*i] = least(&costs);
                }
                self.descend_within(&part, &mut trial);
                if self.cost_of_part(&part, &trial) < now {
                    *picks = trial;
                    better = true;
                    break;
                }
            }
        }
        better
    }

    /// The seed and the annotations that cost it most, or would if it stood where it likes best.
    fn part_around(&mut self, seed: usize, picks: &[usize]) -> Vec<usize> {
        let wish = self.choosers[seed]
            .choices
            .iter()
            .enumerate()
            .min_by_key(|(i, o)| (o.cost, *i))
            .map_or(0, |(i, _)| i);
        let mut others: Vec<(i64, usize)> = (0..self.neighbours[seed].len())
            .map(|n| {
                let (j, index) = self.neighbours[seed][n];
                let mut pair = |x: usize| {
                    if seed < j {
                        self.pair(index, x, picks[j])
                    } else {
                        self.pair(index, picks[j], x)
                    }
                };
                (pair(wish).max(pair(picks[seed])), j)
            })
            .filter(|(cost, _)| *cost > 0)
            .collect();
        others.sort_by(|a, b| b.0.cmp(&a.0).then(a.1.cmp(&b.1)));
        let mut part = vec![seed];
        part.extend(others.into_iter().take(PART - 1).map(|(_, j)| j));
        part
    }

    fn descend_within(&mut self, part: &[usize], picks: &mut [usize]) {
        for _ in 0..ROUNDS {
            let mut moved = false;
            for i in part {
                let costs = self.costs_of(*i, picks, None);
                let best = least(&costs);
                if costs[best] < costs[picks[*i]] {
                    picks[*i] = best;
                    moved = true;
                }
            }
            if !moved {
                break;
            }
        }
    }

    /// What the annotations of a part cost, pairs among themselves counted once.
    fn cost_of_part(&mut self, part: &[usize], picks: &[usize]) -> i64 {
        let mut total = 0;
        for i in part {
            total += self.choosers[*i].choices[picks[*i]].cost;
            for n in 0..self.neighbours[*i].len() {
                let (j, index) = self.neighbours[*i][n];
                if part.contains(&j) && j < *i {
                    continue;
                }
                total += if *i < j {
                    self.pair(index, picks[*i], picks[j])
                } else {
                    self.pair(index, picks[j], picks[*i])
                };
            }
        }
        total
    }

    /// One after another takes what is cheapest beside those before it; fewest cheap ways first.
    fn greedy(&mut self) -> Vec<usize> {
        let freedom = |c: &Chooser<S>| {
            let least = c.choices.iter().map(|o| o.cost).min().unwrap_or(0);
            let cheap = c.choices.iter().filter(|o| o.cost <= least + 500).count();
            let seats = c.choices.first().map_or(&[] as &[_], |o| &o.seats);
            let span = seats.iter().map(|s| s.high - s.low).fold(0.0, f64::max);
            let span = if seats.is_empty() { f64::INFINITY } else { span };
            (span, cheap)
        };
        let mut order: Vec<usize> = (0..self.choosers.len()).collect();
        order.sort_by(|a, b| {
            let (p, q) = (freedom(&self.choosers[*a]), freedom(&self.choosers[*b]));
            p.0.total_cmp(&q.0).then(p.1.cmp(&q.1)).then(a.cmp(b))
        });
        let mut picks = vec![usize::MAX; self.choosers.len()];
        for i in order {
            let costs = self.costs_of(i, &picks, None);
            picks[i] = least(&costs);
        }
        picks
    }

    fn descend(&mut self, picks: &mut [usize]) -> bool {
        let mut moved = false;
        for i in 0..picks.len() {
            let costs = self.costs_of(i, picks, None);
            let best = least(&costs);
            if costs[best] < costs[picks[i]] {
                picks[i] = best;
                moved = true;
            }
        }
        moved
    }

    fn descend_pairs(&mut self, picks: &mut [usize]) -> bool {
        let mut moved = false;
        for index in 0..self.pairs.len() {
            let (i, j) = self.pairs[index];
            if self.pair(index, picks[i], picks[j]) <= 0 {
                continue;
            }
            let (a, b) = (self.costs_of(i, picks, Some(j)), self.costs_of(j, picks, Some(i)));
            let now = a[picks[i]] + b[picks[j]] + self.pair(index, picks[i], picks[j]);
            if let Some(at) = self.best_together(index, &a, &b, now) {
                (picks[i], picks[j]) = at;
                moved = true;
            }
        }
        moved
    }

    /// The cheapest pair of candidates that costs less than `now`, the first of equals; `a` and `b`
    /// are their costs without each other.
    fn best_together(
        &mut self,
        index: usize,
        a: &[i64],
        b: &[i64],
        now: i64,
    ) -> Option<(usize, usize)> {
        // Cheap ones first: pair costs are never negative, so a sum above the best ends the search
        // before most pairs were asked for their costs.
        let (rows, columns) = (cheapest_first(a), cheapest_first(b));
        let (mut best, mut at) = (now, None);
        for x in rows {
            for y in &columns {
                let apart = a[x] + b[*y];
                if apart > best {
                    break;
                }
                let earlier = at.is_some_and(|at| (x, *y) < at);
                if apart == best && !earlier {
                    continue;
                }
                let cost = apart + self.pair(index, x, *y);
                if cost < best || (cost == best && earlier) {
                    (best, at) = (cost, Some((x, *y)));
                }
            }
        }
        at
    }

    /// What each candidate of `i` costs beside the picks of all others but `without`.
    fn costs_of(&mut self, i: usize, picks: &[usize], without: Option<usize>) -> Vec<i64> {
        let mut costs: Vec<i64> = self.choosers[i].choices.iter().map(|o| o.cost).collect();
        for n in 0..self.neighbours[i].len() {
            let (j, index) = self.neighbours[i][n];
            if picks[j] == usize::MAX || Some(j) == without {
                continue;
            }
            for (x, cost) in costs.iter_mut().enumerate() {
                *cost += if i < j {
                    self.pair(index, x, picks[j])
                } else {
                    self.pair(index, picks[j], x)
                };
            }
        }
        costs
    }

    /// Cost of candidate `x` of the pair's first annotation beside candidate `y` of its second.
    fn pair(&mut self, index: usize, x: usize, y: usize) -> i64 {
        let (i, j) = self.pairs[index];
        let (a, b) = (&self.choosers[i], &self.choosers[j]);
        let table = &mut self.tables[index];
        if table.is_empty() {
            // Most pairs are never asked for: their annotations stand far apart.
            *table = vec![UNKNOWN; a.choices.len() * b.choices.len()];
        }
        let cell = &mut table[x * b.choices.len() + y];
        if *cell == UNKNOWN {
            let cost = pair_cost(&a.choices[x], &b.choices[y], a.view == b.view, &self.practice);
            *cell = i32::try_from(cost + 1).unwrap_or(i32::MAX);
        }
        i64::from(*cell) - 1
    }
}

/// A side, and from where to where an annotation's dimension lines may reach along it.
type Ladder = (Side, f64, f64);

fn ladders_of<S>(chooser: &Chooser<S>) -> Vec<Ladder> {
    let mut all: Vec<Ladder> = Vec::new();
    for seat in chooser.choices.iter().flat_map(|o| &o.seats) {
        match all.iter_mut().find(|l| l.0 == seat.side) {
            Some(l) => (l.1, l.2) = (l.1.min(seat.low), l.2.max(seat.high)),
            None => all.push((seat.side, seat.low, seat.high)),
        }
    }
    all
}

/// The places of the numbers, the smallest first.
fn cheapest_first(costs: &[i64]) -> Vec<usize> {
    let mut places: Vec<usize> = (0..costs.len()).collect();
    places.sort_by_key(|i| costs[*i]);
    places
}

/// The place of the smallest number, the first of equals.
fn least(costs: &[i64]) -> usize {
    let mut best = 0;
    for (i, c) in costs.iter().enumerate() {
        if *c < costs[best] {
            best = i;
        }
    }
    best
}
