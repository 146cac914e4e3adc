//! Price: a first simple sum.

use leptos::prelude::*;
use rust_decimal::Decimal;

use super::findings::line;
use crate::desk::{Where, desk};

/// An amount with two decimals and thin spaces between thousands.
pub(super) fn amount(amount: Decimal) -> String {
    let text = format!("{:.2}", amount.round_dp(2));
    let (whole, rest) = text.split_once('.').unwrap_or((&text, "00"));
    let (sign, digits) = whole
        .strip_prefix('-')
        .map_or(("", whole), |digits| ("−", digits));
    let mut out = String::from(sign);
    for (i, c) in digits.chars().enumerate() {
        if i > 0 && (digits.len() - i).is_multiple_of(3) {
            out.push('\u{202f}');
        }
        out.push(c);
    }
    format!("{out}.{rest}")
}

/// The place.
#[component]
pub fn Price() -> impl IntoView {
    let desk = desk();
    let lines = move || {
        desk.results.with(|results| {
            results
                .quote
                .lines
                .iter()
                .map(|line| {
                    view! {
                        <tr>
                            <th scope="row">{line.what.clone()}</th>
                            <td>{line.quantity.clone()}</td>
                            <td>{line.each.map_or_else(|| "no price".to_owned(), amount)}</td>
                            <td>{line.amount.map_or_else(|| "–".to_owned(), amount)}</td>
                        </tr>
                    }
                })
                .collect::<Vec<_>>()
        })
    };
    let sums = move || {
        desk.results.with(|results| {
            let quote = &results.quote;
            let rates = desk.book.with(|book| book.rates.clone());
            let sum = |what: String, figure: Decimal| {
                view! {
                    <tr>
                        <th scope="row" colspan="3">{what}</th>
                        <td>{amount(figure)}</td>
                    </tr>
                }
            };
            let total = format!("Total, {}", quote.currency);
            view! {
                {sum("Sum".to_owned(), quote.cost)}
                {sum(format!("Markup {} %", rates.markup_percent.normalize()), quote.markup)}
                {sum(format!("Tax {} %", rates.tax_percent.normalize()), quote.tax)}
                <tr class="total">
                    <th scope="row" colspan="3">{total}</th>
                    <td>{amount(quote.total)}</td>
                </tr>
            }
        })
    };
    let said = move || {
        desk.results
            .with(|results| results.quote.findings.iter().map(line).collect::<Vec<_>>())
    };
    let waste = move || desk.book.with(|book| book.allowances.waste_percent);
    view! {
        <section class="panel price" aria-label="Price">
            <header class="panel-head">
                <h2>"Price"</h2>
                <button on:click=move |_| desk.place.set(Where::ShopBook)>"Rates in the shop book"</button>
            </header>
            <p class="quiet">
                {move || format!("A first sum from the shop book's rates: glass with {} % waste, electrodes, supplies, labour. Mounting, cable, backing and freight are not in it.", waste())}
            </p>
            {said}
            <div class="scroll">
                <table>
                    <thead>
                        <tr>
                            <th scope="col">"What"</th>
                            <th scope="col">"How much"</th>
                            <th scope="col">"Each"</th>
                            <th scope="col">"Amount"</th>
                        </tr>
                    </thead>
                    <tbody>{lines}</tbody>
                    <tfoot>{sums}</tfoot>
                </table>
            </div>
        </section>
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn amounts_have_cents_and_groups() {
        assert_eq!(amount(Decimal::new(118_400, 2)), "1\u{202f}184.00");
        assert_eq!(amount(Decimal::new(-5, 2)), "−0.05");
        assert_eq!(
            amount(Decimal::new(1_234_567_891, 3)),
            "1\u{202f}234\u{202f}567.89"
        );
    }
}
