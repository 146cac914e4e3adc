//! A first sum: glass, electrodes, supplies, labour, markup, tax. Exact decimals, rounded once per
//! line to the hundredth, halves away from zero.

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
    /// How much of it, with its unit.
    pub quantity: String,
    /// Price of one, if there is one.
    pub each: Option<Decimal>,
    /// Amount; None where a price is missing.
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
    let minutes = rates.minutes_per_piece * Decimal::from(parts.pieces)
        + rates.minutes_per_m * metres
        + rates.minutes_per_circuit * Decimal::from(parts.circuits);
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
        let each = each.filter(|&each| {
            let fine = (Decimal::ZERO..=MOST_EACH).contains(&each);
            if !fine {
                self.findings.push(finding(format!(
                    "{what}: a price must be 0 to {MOST_EACH}, but is {each}; it is left out."
                )));
            }
            fine
        });
        if each.is_none() && !self.findings.iter().any(|f| f.says.starts_with(&what)) {
            self.findings.push(finding(format!(
                "{what}: no price in the shop book; the sum is without it."
            )));
        }
        let rounded = quantity.round_dp_with_strategy(2, RoundingStrategy::MidpointAwayFromZero);
        self.lines.push(Line {
            what,
            quantity: format!("{} {unit}", rounded.normalize())
                .trim_end()
                .to_owned(),
            amount: each.map(|each| cents(quantity * each)),
            each,
        });
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
const MOST_PERCENT: Decimal = Decimal::from_parts(1_000, 0, 0, false, 0);

fn finding(says: String) -> Finding {
    Finding::new(Grade::Look, Place::Price, says, Source::shop())
}

/// A measured figure as a decimal; six digits after the point are a millionth of a metre.
fn decimal(value: f64) -> Decimal {
    Decimal::try_from(value).map_or(Decimal::ZERO, |value| value.round_dp(6))
}

fn cents(amount: Decimal) -> Decimal {
    amount.round_dp_with_strategy(2, RoundingStrategy::MidpointAwayFromZero)
}
