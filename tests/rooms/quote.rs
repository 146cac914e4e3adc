//! The first sum, worked by hand.

use proptest::prelude::*;
use rust_decimal::Decimal;
use tubewright::book::Rates;
use tubewright::measure::Length;
use tubewright::quote::{GlassPart, Parts, quote};

fn money(text: &str) -> Decimal {
    text.parse().expect("a figure")
}

fn glass(tube: &str, metres: f64, price_per_m: Option<Decimal>) -> GlassPart {
    GlassPart {
        tube: tube.to_owned(),
        glass: Length::from_mm(metres * 1000.0),
        price_per_m,
    }
}

#[test]
fn a_sign_summed_up_by_hand() {
    let parts = Parts {
        glass: vec![glass("neon", 12.345, Some(money("8.40")))],
        pieces: 6,
        circuits: 3,
        supplies: vec![
            ("S9".to_owned(), 2, Some(money("149.90"))),
            ("S4".to_owned(), 1, Some(money("89.50"))),
        ],
        waste_percent: 10.0,
    };
    let rates = Rates {
        currency: "€".to_owned(),
        electrode: money("3.25"),
        labour_hour: money("45"),
        minutes_per_piece: money("20"),
        minutes_per_m: money("15"),
        minutes_per_circuit: money("30"),
        markup_percent: money("12.5"),
        tax_percent: money("19"),
    };
    let found = quote(&parts, &rates);
    let lines: Vec<(&str, &str, Option<Decimal>)> = found
        .lines
        .iter()
        .map(|line| (line.what.as_str(), line.quantity.as_str(), line.amount))
        .collect();
    // Glass 12.345 m + 10 % = 13.5795, 13.58 m at 8.40 = 114.072. Twelve electrodes at 3.25.
    // Labour 6 x 20 + 12.345 x 15 + 3 x 30 = 395.175 min = 6.58625 h, 6.59 h at 45.
    assert_eq!(
        lines,
        [
            ("Glass, neon", "13.58 m", Some(money("114.07"))),
            ("Electrodes", "12", Some(money("39.00"))),
            ("Supply, S9", "2", Some(money("299.80"))),
            ("Supply, S4", "1", Some(money("89.50"))),
            ("Labour", "6.59 h", Some(money("296.55"))),
        ]
    );
    // 12.5 % of 838.92 is 104.865, a half, rounded away from zero. 19 % of 943.79 is 179.3201.
    let sums = [found.cost, found.markup, found.net, found.tax, found.total];
    assert_eq!(
        sums,
        ["838.92", "104.87", "943.79", "179.32", "1123.11"].map(money)
    );
    assert_eq!(found.findings, []);
}

#[test]
fn a_missing_price_is_a_gap_not_a_nought() {
    let parts = Parts {
        glass: vec![glass("neon", 1.0, None)],
        pieces: 0,
        circuits: 0,
        supplies: vec![("S9".to_owned(), 1, Some(money("100")))],
        waste_percent: 0.0,
    };
    let found = quote(&parts, &Rates::default());
    assert_eq!((found.lines[0].amount, found.total), (None, money("100")));
    assert_eq!(found.findings.len(), 1, "{:?}", found.findings);
}

proptest! {
    #[test]
    fn lines_sum_to_the_total(
        glasses in prop::collection::vec((0.0..1e5_f64, prop::option::of(0..1_000_000_i64)), 0..4),
        supplies in prop::collection::vec((1..50_usize, prop::option::of(0..1_000_000_i64)), 0..4),
        (pieces, circuits) in (0..4_000_usize, 0..4_000_usize),
        waste_percent in prop_oneof![0.0..50.0_f64, any::<f64>()],
        rates in prop::collection::vec(0..100_000_i64, 7),
    ) {
        let cents = |cents: i64| Decimal::new(cents, 2);
        let parts = Parts {
            glass: glasses.iter().map(|&(m, price)| glass("t", m, price.map(cents))).collect(),
            pieces,
            circuits,
            supplies: supplies.iter().map(|&(n, price)| ("s".to_owned(), n, price.map(cents))).collect(),
            waste_percent,
        };
        let rates = Rates {
            currency: String::new(),
            electrode: cents(rates[0]),
            labour_hour: cents(rates[1]),
            minutes_per_piece: cents(rates[2]),
            minutes_per_m: cents(rates[3]),
            minutes_per_circuit: cents(rates[4]),
            markup_percent: cents(rates[5]),
            tax_percent: cents(rates[6]),
        };
        let found = quote(&parts, &rates);
        let lines: Decimal = found.lines.iter().filter_map(|line| line.amount).sum();
        prop_assert_eq!(lines, found.cost);
        prop_assert_eq!(found.cost + found.markup, found.net);
        prop_assert_eq!(found.net + found.tax, found.total);
        for line in &found.lines {
            prop_assert_eq!(line.amount.is_some(), line.each.is_some());
            // To the hundredth, so that a printed column sums up as printed.
            prop_assert!(line.amount.is_none_or(|amount| amount.scale() <= 2));
        }
        let gaps = found.lines.iter().filter(|line| line.amount.is_none()).count();
        let insane = usize::from(!(0.0..=1_000.0).contains(&waste_percent));
        prop_assert!(found.findings.len() >= gaps && found.findings.len() <= gaps + insane);
    }
}
