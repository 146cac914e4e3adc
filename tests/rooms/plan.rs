//! The splitter against `tests/reference/circuits`, brute force and random splits.

use std::ops::Range;

use proptest::prelude::*;
use serde::Deserialize;
use tubewright::plan::{Fit, Split, best_split};

/// Source: `tests/reference/circuits/PROVENANCE.md`.
const CIRCUITS: &str = include_str!("../reference/circuits/circuits_small.json");

#[derive(Deserialize)]
struct Reference {
    instances: Vec<Instance>,
}

#[derive(Debug, Clone, Deserialize)]
struct Instance {
    name: String,
    #[serde(rename = "loads_V")]
    loads: Vec<u64>,
    types: Vec<Type>,
    optimum_cents: Option<u64>,
    greedy_fill_cents: Option<u64>,
}

#[derive(Debug, Clone, Deserialize)]
struct Type {
    #[serde(rename = "min_V")]
    min: u64,
    #[serde(rename = "max_V")]
    max: u64,
    price_cents: u64,
}

impl Instance {
    fn fit(&self, units: Range<usize>, supply: usize) -> Fit<u64> {
        let load: u64 = self.loads[units].iter().sum();
        let Type {
            min,
            max,
            price_cents,
        } = self.types[supply];
        match load {
            _ if load > max => Fit::TooMuch,
            _ if load < min => Fit::NotYet,
            _ => Fit::Fits(price_cents),
        }
    }

    fn best(&self) -> Option<Split<u64>> {
        best_split(self.loads.len(), self.types.len(), None, |units, supply| {
            self.fit(units, supply)
        })
    }

    /// The cheapest supply for some units.
    fn cheapest(&self, units: &Range<usize>) -> Option<u64> {
        (0..self.types.len())
            .filter_map(|supply| match self.fit(units.clone(), supply) {
                Fit::Fits(cost) => Some(cost),
                Fit::NotYet | Fit::TooMuch => None,
            })
            .min()
    }

    /// The price of a split cut after each unit whose bit is set; None where a part fits nothing.
    fn cut(&self, cuts: u32) -> Option<u64> {
        let count = self.loads.len();
        let ends = (1..=count).filter(|&end| end == count || cuts & (1 << (end - 1)) != 0);
        let mut from = 0;
        ends.map(|end| self.cheapest(&(std::mem::replace(&mut from, end)..end)))
            .sum()
    }

    fn brute_force(&self) -> Option<u64> {
        (0..1_u32 << (self.loads.len() - 1))
            .filter_map(|cuts| self.cut(cuts))
            .min()
    }

    /// A split must cover all units in order, each part on a supply it fits, and cost its sum.
    fn assert_valid(&self, split: &Split<u64>) {
        let mut at = 0;
        let mut sum = 0;
        for (units, supply) in &split.parts {
            assert_eq!(units.start, at, "{}: parts follow each other", self.name);
            at = units.end;
            let supply = supply.expect("nothing may be left out here");
            match self.fit(units.clone(), supply) {
                Fit::Fits(cost) => sum += cost,
                other => panic!("{}: {units:?} on {supply} is {other:?}", self.name),
            }
        }
        assert_eq!((at, sum), (self.loads.len(), split.cost), "{}", self.name);
    }
}

#[test]
fn the_reference_instances() {
    let reference: Reference = serde_json::from_str(CIRCUITS).expect("the reference is whole");
    assert_eq!(reference.instances.len(), 6, "no instance is missing");
    let mut infeasible = 0;
    let mut beaten = 0;
    for instance in &reference.instances {
        let found = instance.best();
        let cost = found.as_ref().map(|split| split.cost);
        assert_eq!(cost, instance.optimum_cents, "{}", instance.name);
        assert_eq!(
            instance.brute_force(),
            instance.optimum_cents,
            "{}",
            instance.name
        );
        infeasible += usize::from(found.is_none());
        if let Some(split) = &found {
            instance.assert_valid(split);
        }
        if let Some(optimum) = cost {
            // Filling up greedily is never better, and finds nothing at all for one of them.
            assert!(
                instance
                    .greedy_fill_cents
                    .is_none_or(|greedy| optimum <= greedy)
            );
            beaten += usize::from(instance.greedy_fill_cents != Some(optimum));
        }
    }
    assert_eq!((infeasible, beaten), (2, 2), "as the reference counts them");
}

/// Few units, so that brute force stays quick; loads and windows that often just miss each other.
fn instance(units: Range<usize>) -> impl Strategy<Value = Instance> {
    let supply = (0..40_u64, 1..60_u64, 1..100_u64).prop_map(|(min, more, price_cents)| Type {
        min,
        max: min + more,
        price_cents,
    });
    (
        prop::collection::vec(1..30_u64, units),
        prop::collection::vec(supply, 1..5),
    )
        .prop_map(|(loads, types)| Instance {
            name: "random".to_owned(),
            loads,
            types,
            optimum_cents: None,
            greedy_fill_cents: None,
        })
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(400))]

    #[test]
    fn as_good_as_brute_force(instance in instance(1..10)) {
        let found = instance.best();
        prop_assert_eq!(found.as_ref().map(|split| split.cost), instance.brute_force());
        if let Some(split) = found {
            instance.assert_valid(&split);
        }
    }

    #[test]
    fn never_worse_than_some_split(instance in instance(1..32), cuts in any::<u32>()) {
        let found = instance.best();
        if let Some(cost) = instance.cut(cuts) {
            let split = found.expect("a split exists");
            prop_assert!(split.cost <= cost, "{} against {cost}", split.cost);
        } else if let Some(split) = found {
            instance.assert_valid(&split);
        }
    }

    /// Lists of costs are compared place by place; a piece is left out only where nothing else runs.
    #[test]
    fn leaving_out_is_the_last_resort(instance in instance(1..10)) {
        let split = best_split(
            instance.loads.len(),
            instance.types.len(),
            Some([1, 0]),
            |units, supply| instance.fit(units, supply).map(|cost| [0, cost]),
        );
        let split = split.expect("leaving everything out is always possible");
        let left_out = split.parts.iter().filter(|(_, supply)| supply.is_none()).count();
        prop_assert_eq!(split.cost[0], left_out as u64);
        match instance.brute_force() {
            Some(cost) => prop_assert_eq!(split.cost, [0, cost]),
            None => prop_assert!(left_out > 0),
        }
    }
}

#[test]
fn nothing_to_split_and_nothing_to_split_over() {
    let fits = |_: Range<usize>, _: usize| Fit::Fits(1_u64);
    // No pieces: no circuits, whether pieces may be left out or not; the caller's plan is empty.
    assert!(best_split(0, 3, None, fits).is_none_or(|split| split.parts.is_empty()));
    assert_eq!(best_split(2, 0, None, fits), None);
    let left_out = best_split(2, 0, Some(5), fits).expect("both are left out");
    assert_eq!(left_out.parts, [(0..1, None), (1..2, None)]);
    assert_eq!(left_out.cost, 10);
}
