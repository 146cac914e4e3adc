//! Splitting a row of pieces into neighbouring parts with a supply each: exact, for any costs.

use std::ops::Range;

/// What a part on a supply comes to.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Fit<C> {
    /// It fits, at a cost.
    Fits(C),
    /// It does not fit, but with more pieces it might.
    NotYet,
    /// It does not fit, and with more pieces it never will.
    TooMuch,
}

impl<C> Fit<C> {
    /// The same fit with another cost.
    pub fn map<D>(self, to: impl FnOnce(C) -> D) -> Fit<D> {
        match self {
            Self::Fits(cost) => Fit::Fits(to(cost)),
            Self::NotYet => Fit::NotYet,
            Self::TooMuch => Fit::TooMuch,
        }
    }
}

/// A split.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Split<C> {
    /// Parts in order, each with its supply; None for a piece left out.
    pub parts: Vec<(Range<usize>, Option<usize>)>,
    /// Sum of all costs.
    pub cost: C,
}

/// The cheapest split of `pieces` pieces over `supplies` supplies, by dynamic programme over the
/// prefixes. Costs must not shrink when something is added, and must order alike before and after
/// adding the same to both (sums of non-negative numbers and lists of such do).
///
/// `left_out`, if given, is the cost of leaving one piece without a supply; without it, None is
/// returned when no split fits. Of equal splits the one whose parts come first in the search is
/// kept: shorter first parts, supplies in their order.
pub fn best_split<C: Ord + Copy + Summed>(
    pieces: usize,
    supplies: usize,
    left_out: Option<C>,
    mut fit: impl FnMut(Range<usize>, usize) -> Fit<C>,
) -> Option<Split<C>> {
    struct Reached<C> {
        cost: Option<C>,
        from: usize,
        supply: Option<usize>,
    }
    let mut reached: Vec<Reached<C>> = (0..=pieces)
        .map(|_| Reached {
            cost: None,
            from: 0,
            supply: None,
        })
        .collect();
    let improve = |slot: &mut Reached<C>, cost: C, from: usize, supply: Option<usize>| {
        if slot.cost.is_none_or(|known| cost < known) {
            *slot = Reached {
                cost: Some(cost),
                from,
                supply,
            };
        }
    };
    let mut open: Vec<usize> = Vec::with_capacity(supplies);
    for from in 0..pieces {
        let so_far = if from == 0 { None } else { reached[from].cost };
        if from > 0 && so_far.is_none() {
            continue;
        }
        let plus = |cost: C| so_far.map_or(cost, |so_far| so_far.plus(cost));
        if let Some(cost) = left_out {
            improve(&mut reached[from + 1], plus(cost), from, None);
        }
        open.clear();
        open.extend(0..supplies);
        for (to, slot) in reached.iter_mut().enumerate().skip(from + 1) {
            open.retain(|&supply| match fit(from..to, supply) {
                Fit::Fits(cost) => {
                    improve(slot, plus(cost), from, Some(supply));
                    true
                }
                Fit::NotYet => true,
                Fit::TooMuch => false,
            });
            if open.is_empty() {
                break;
            }
        }
    }
    let cost = reached[pieces].cost?;
    let mut parts = Vec::new();
    let mut at = pieces;
    while at > 0 {
        let Reached { from, supply, .. } = reached[at];
        parts.push((from..at, supply));
        at = from;
    }
    parts.reverse();
    Some(Split { parts, cost })
}

/// Adding costs; lists are added place by place.
pub trait Summed {
    /// The sum.
    #[must_use]
    fn plus(self, other: Self) -> Self;
}

impl Summed for u64 {
    fn plus(self, other: Self) -> Self {
        self.saturating_add(other)
    }
}

impl<const N: usize> Summed for [u64; N] {
    fn plus(mut self, other: Self) -> Self {
        for (sum, more) in self.iter_mut().zip(other) {
            *sum = sum.saturating_add(more);
        }
        self
    }
}
