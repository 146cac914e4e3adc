//! A first sum: glass, electrodes, supplies, labour, markup, tax. Exact decimals, halves away from
//! zero. A quantity is rounded to two decimals first and its amount is worked out from that, so that
//! what stands on paper multiplies out: 1.5 h at 46.00 is 69.00, not the 68.98 of 1.4996 h.

use rust_decimal::{Decimal, RoundingStrategy};

use crate::book::Rates;
use crate::measure::Length;
use crate::rules::{Finding, Grade, Place, Source};

/// Glass of one tube type to be priced.
#[derive(Debug, Clone, PartialEq)]
pub struct GlassPart {
    /// Name of the tube type.
    pub tube: String,
    /// Glass to bend, waste not counted.
    pub glass: Length,
    /// Price of a metre.
    pub price_per_m: Option<Decimal>,
}

/// What is priced.
#[derive(Debug, Clone, PartialEq)]
pub struct Parts {
    /// Glass by tube type.
    pub glass: Vec<GlassPart>,
    /// Pieces of glass, two electrodes each.
    pub pieces: usize,
    /// Circuits to wire.
    pub circuits: usize,
    /// Supplies by name, how many, price of one.
    pub supplies: Vec<(String, usize, Option<Decimal>)>,
    /// Waste, percent of glass.
    pub waste_percent: f64,
}

/// A line of the sum.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Line {
    /// What it is.
    pub what: String,
    /// How much of it, to two decimals, with its unit.
    pub quantity: String,
    /// Price of one, if there is one.
    pub each: Option<Decimal>,
    /// The quantity as shown times the price; None where a price is missing.
    pub amount: Option<Decimal>,
}

/// The sum.
#[derive(Debug, Clone, PartialEq)]
pub struct Quote {
    /// Currency, as written before a figure.
    pub currency: String,
    /// Lines in order: glass, electrodes, supplies, labour.
    pub lines: Vec<Line>,
    /// Sum of all lines with an amount.
    pub cost: Decimal,
    /// Markup on it.
    pub markup: Decimal,
    /// Cost with markup.
    pub net: Decimal,
    /// Tax on that.
    pub tax: Decimal,
    /// What the customer pays.
    pub total: Decimal,
    /// Prices that are missing, and rates that make no sense.
    pub findings: Vec<Finding>,
}

/// Sums up.
pub fn quote(parts: &Parts, rates: &Rates) -> Quote {
    let mut sum = Sum {
        lines: Vec::new(),
        findings: Vec::new(),
    };
    let waste = sum.sane_percent("Waste", decimal(parts.waste_percent));
    for part in &parts.glass {
        let metres = decimal(part.glass.m()) * (Decimal::ONE + waste / Decimal::ONE_HUNDRED);
        let what = format!("Glass, {}", part.tube);
        sum.line(what, metres, "m", part.price_per_m);
    }
    if parts.pieces > 0 {
        let electrodes = Decimal::from(2 * parts.pieces);
        sum.line(
            "Electrodes".to_owned(),
            electrodes,
            "",
            Some(rates.electrode),
        );
    }
    for (name, count, price) in &parts.supplies {
        sum.line(format!("Supply, {name}"), Decimal::from(*count), "", *price);
    }
    let metres: Decimal = parts.glass.iter().map(|part| decimal(part.glass.m())).sum();
    let minutes = sum.sane_minutes("piece", rates.minutes_per_piece) * Decimal::from(parts.pieces)
        + sum.sane_minutes("metre", rates.minutes_per_m) * metres
        + sum.sane_minutes("circuit", rates.minutes_per_circuit) * Decimal::from(parts.circuits);
    if !minutes.is_zero() {
        let hours = minutes / Decimal::from(60);
        sum.line("Labour".to_owned(), hours, "h", Some(rates.labour_hour));
    }
    let cost: Decimal = sum.lines.iter().filter_map(|line| line.amount).sum();
    let markup_percent = sum.sane_percent("Markup", rates.markup_percent);
    let tax_percent = sum.sane_percent("Tax", rates.tax_percent);
    let markup = cents(cost * markup_percent / Decimal::ONE_HUNDRED);
    let net = cost + markup;
    let tax = cents(net * tax_percent / Decimal::ONE_HUNDRED);
    Quote {
        currency: rates.currency.clone(),
        cost,
        markup,
        net,
        tax,
        total: net + tax,
        lines: sum.lines,
        findings: sum.findings,
    }
}

struct Sum {
    lines: Vec<Line>,
    findings: Vec<Finding>,
}

impl Sum {
    fn line(&mut self, what: String, quantity: Decimal, unit: &str, each: Option<Decimal>) {
        let missing = each.is_none();
        let each = each.filter(|&each| {
            let fine = (Decimal::ZERO..=MOST_EACH).contains(&each);
            if !fine {
                self.findings.push(finding(format!(
                    "{what}: a price must be 0 to {MOST_EACH}, but is {each}; it is left out."
                )));
            }
            fine
        });
        if missing {
            self.findings.push(finding(format!(
                "{what}: no price in the shop book; the sum is without it."
            )));
        }
        let quantity = cents(quantity);
        self.lines.push(Line {
            what,
            quantity: format!("{} {unit}", quantity.normalize())
                .trim_end()
                .to_owned(),
            amount: each.map(|each| cents(quantity * each)),
            each,
        });
    }

    fn sane_minutes(&mut self, per: &str, minutes: Decimal) -> Decimal {
        if (Decimal::ZERO..=MOST_MINUTES).contains(&minutes) {
            return minutes;
        }
        self.findings.push(finding(format!(
            "Minutes for each {per} must be 0 to {MOST_MINUTES}, but are {minutes}; counted as 0."
        )));
        Decimal::ZERO
    }

    fn sane_percent(&mut self, name: &str, percent: Decimal) -> Decimal {
        if (Decimal::ZERO..=MOST_PERCENT).contains(&percent) {
            return percent;
        }
        self.findings.push(finding(format!(
            "{name} must be 0 to {MOST_PERCENT} %, but is {percent}; counted as 0."
        )));
        Decimal::ZERO
    }
}

/// Above any real price; keeps sums inside what a decimal holds.
const MOST_EACH: Decimal = Decimal::from_parts(100_000_000, 0, 0, false, 0);
/// Ten weeks of day and night for one piece, metre or circuit.
const MOST_MINUTES: Decimal = Decimal::from_parts(100_000, 0, 0, false, 0);
const MOST_PERCENT: Decimal = Decimal::from_parts(1_000, 0, 0, false, 0);

fn finding(says: String) -> Finding {
    Finding::new(Grade::Look, Place::Price, says, Source::shop())
}

/// A measured figure as a decimal; six digits after the point are a millionth of a metre.
fn decimal(value: f64) -> Decimal {
    Decimal::try_from(value).map_or(Decimal::ZERO, |value| value.round_dp(6))
}

/// To the hundredth.
fn cents(amount: Decimal) -> Decimal {
    amount.round_dp_with_strategy(2, RoundingStrategy::MidpointAwayFromZero)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn glass(tube: &str, metres: f64, price: Option<&str>) -> GlassPart {
        GlassPart {
            tube: tube.to_owned(),
            glass: Length::from_mm(metres * 1000.0),
            price_per_m: price.map(money),
        }
    }

    fn money(text: &str) -> Decimal {
        text.parse().expect("a figure")
    }

    #[test]
    fn quantity_times_price_is_the_amount_shown() {
        let parts = Parts {
            // 2.205 m and a tenth of waste: 2.4255 m, shown as 2.43 m.
            glass: vec![glass("neon", 2.205, Some("7.20"))],
            pieces: 1,
            circuits: 1,
            supplies: vec![("T".to_owned(), 3, Some(money("69.00")))],
            waste_percent: 10.0,
        };
        // 40 + 27.775 min for 2.205 m + 22.2 min: 1.4996 h, shown as 1.5 h.
        let rates = Rates {
            labour_hour: money("46.00"),
            minutes_per_piece: money("40"),
            minutes_per_m: money("12.5964"),
            minutes_per_circuit: money("22.2"),
            electrode: money("3.20"),
            ..Rates::default()
        };
        let found = quote(&parts, &rates);
        let amounts: Vec<_> = found
            .lines
            .iter()
            .map(|line| (line.quantity.as_str(), line.amount.map(|a| a.to_string())))
            .collect();
        let amount = |text: &str| Some(text.to_owned());
        assert_eq!(
            amounts,
            [
                ("2.43 m", amount("17.50")),
                ("2", amount("6.40")),
                ("3", amount("207.00")),
                ("1.5 h", amount("69.00")),
            ]
        );
        for line in &found.lines {
            let (figure, each) = (line.quantity.split(' ').next(), line.each);
            let by_hand = money(figure.expect("a figure")) * each.expect("a price");
            assert_eq!(Some(cents(by_hand)), line.amount, "{}", line.what);
        }
        assert_eq!(
            found.cost,
            found.lines.iter().filter_map(|line| line.amount).sum()
        );
        assert_eq!(found.findings, []);
    }

    #[test]
    fn every_missing_price_is_named() {
        let parts = Parts {
            glass: vec![
                glass("12 mm ruby", 1.0, Some("-1")),
                glass("12 mm", 1.0, None),
            ],
            pieces: 0,
            circuits: 0,
            supplies: Vec::new(),
            waste_percent: 0.0,
        };
        let says: Vec<String> = quote(&parts, &Rates::default())
            .findings
            .into_iter()
            .map(|finding| finding.says)
            .collect();
        assert_eq!(
            says,
            [
                "Glass, 12 mm ruby: a price must be 0 to 100000000, but is -1; it is left out.",
                "Glass, 12 mm: no price in the shop book; the sum is without it.",
            ]
        );
    }

    #[test]
    fn rates_without_end_are_counted_as_none() {
        let parts = Parts {
            glass: Vec::new(),
            pieces: 2_000,
            circuits: 1,
            supplies: Vec::new(),
            waste_percent: 0.0,
        };
        let rates = Rates {
            minutes_per_piece: Decimal::MAX,
            minutes_per_circuit: money("-3"),
            ..Rates::default()
        };
        let found = quote(&parts, &rates);
        assert_eq!(found.findings.len(), 2, "{:?}", found.findings);
        assert_eq!(found.total, Decimal::ZERO);
    }
}
