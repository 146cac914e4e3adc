//! Reading lengths, volts and currents, showing them again, and the sentences when they cannot be
//! read.

use insta::assert_snapshot;
use proptest::prelude::*;
use serde::Deserialize;
use tubewright::measure::{
    Length, LengthUnit, Milliamps, Units, Volts, figure, glass, grouped, length, length_exact,
    length_shown, milliamps_shown, money, quoted, repeated, volts_shown, with_units,
};

/// Source: `tests/reference/electrical/PROVENANCE.md`.
const ELECTRICAL: &str = include_str!("../reference/electrical/electrical_units.json");

#[derive(Deserialize)]
struct Reference {
    /// As typed, the fraction of millimetres, the nearest decimal.
    lengths_exact: Vec<(String, String, f64)>,
    /// As typed, to the nearest sixteenth of an inch.
    nearest_1_16_in: Vec<(String, String)>,
}

fn reference() -> Reference {
    let reference: Reference = serde_json::from_str(ELECTRICAL).expect("the reference is whole");
    assert_eq!(reference.lengths_exact.len(), 7, "no length is missing");
    assert_eq!(reference.nearest_1_16_in.len(), 5, "no length is missing");
    reference
}

fn mm(text: &str) -> f64 {
    length(text, LengthUnit::Millimetres)
        .unwrap_or_else(|error| panic!("{error}"))
        .length()
        .mm()
}

fn inches(text: &str) -> f64 {
    length(text, LengthUnit::Inches)
        .unwrap_or_else(|error| panic!("{error}"))
        .length()
        .mm()
}

fn refused(text: &str) -> String {
    match length(text, LengthUnit::Millimetres) {
        Ok(length) => panic!("{text} was read as {length:?}"),
        Err(error) => error.to_string(),
    }
}

#[test]
fn feet_and_inches_against_exact_fractions() {
    for (typed, fraction, decimal) in reference().lengths_exact {
        let (numer, denom) = fraction.split_once('/').expect("a fraction");
        let fraction: (i128, i128) = (
            numer.parse().expect("a number"),
            denom.parse().expect("a number"),
        );
        let found = length(&typed, LengthUnit::Millimetres).expect("a length");
        assert_eq!(found.mm_fraction(), fraction, "{typed}");
        assert_eq!(found.length().mm(), decimal, "{typed}");
    }
}

#[test]
fn nearest_sixteenths_against_exact_fractions() {
    let mut ties = 0;
    for (typed, shown) in reference().nearest_1_16_in {
        let typed = typed.split(" (").next().expect("the length as typed");
        let found = length_shown(Length::from_mm(mm(typed)), Units::FeetInches);
        if shown.starts_with("tie") {
            // Half of a sixteenth: this program's rule is that a tie goes up.
            assert_eq!(found, "1/16 in");
            ties += 1;
        } else {
            // Nought feet are written in the reference and left away here.
            assert_eq!(found, shown.trim_start_matches("0 ft "), "{typed}");
        }
    }
    assert_eq!(ties, 1, "the tie was among them");
}

#[test]
fn every_way_of_typing_a_length() {
    // By hand: 1 in = 25.4 mm, 1 ft = 304.8 mm.
    for (typed, expect) in [
        ("450", 450.0),
        ("450 mm", 450.0),
        ("450mm", 450.0),
        ("45 cm", 450.0),
        ("1.2 m", 1200.0),
        ("1,2 m", 1200.0),
        ("0,5", 0.5),
        ("0,125 m", 125.0),
        ("17 5/8 in", 447.675),
        ("17-5/8\"", 447.675),
        ("17⅝ in", 447.675),
        ("½ in", 12.7),
        ("5/8 inch", 15.875),
        ("1' 6 1/2\"", 469.9),
        ("1′ 6½″", 469.9),
        ("1’6”", 457.2),
        ("1'-6''", 457.2),
        ("1 ft 6 in", 457.2),
        ("1 foot 6 inches", 457.2),
        ("1 ft 6", 457.2),
        ("2 ft", 609.6),
        ("3 x 180 + 2 x 95", 730.0),
        ("3x180+2x95", 730.0),
        ("3 × 180 mm + 2 * 95 mm", 730.0),
        ("2 x 3 x 10", 60.0),
        ("2 x 1.5 m", 3000.0),
        ("180 mm x 3", 540.0),
        ("2 x 1' 6\" + 40 mm", 954.4),
        ("1\u{202f}200", 1200.0),
        (" 450 ", 450.0),
        ("0", 0.0),
        ("450 MM", 450.0),
    ] {
        assert!(
            (mm(typed) - expect).abs() < 1e-9,
            "{typed}: {} not {expect}",
            mm(typed)
        );
    }
}

#[test]
fn a_bare_number_takes_the_unit_of_its_field() {
    for (typed, expect) in [
        ("17 5/8", 447.675),
        ("3 x 10", 762.0),
        ("10 + 10 mm", 264.0),
        ("450 mm", 450.0),
        ("1'", 304.8),
        ("1' 6", 457.2),
    ] {
        assert!(
            (inches(typed) - expect).abs() < 1e-9,
            "{typed}: {} not {expect}",
            inches(typed)
        );
    }
}

#[test]
fn what_is_no_length_is_refused_with_its_place() {
    assert_snapshot!(refused(""), @"expected a number such as 450, but the text ends at character 1 of “”");
    assert_snapshot!(refused("   "), @"expected a number such as 450, but the text ends at character 4 of “   ”");
    assert_snapshot!(refused("abc"), @"expected a number such as 450, but found “abc” at character 1 of “abc”");
    assert_snapshot!(refused("12 parsecs"), @"expected “+”, “x” or the end, but found “parsecs” at character 4 of “12 parsecs”; units are mm, cm, m, in or ft");
    assert_snapshot!(refused("-5"), @"expected a figure from 0 on, but found “-5” at character 1 of “-5”; nothing here is ever negative");
    assert_snapshot!(refused("NaN"), @"expected a number such as 450, but found “NaN” at character 1 of “NaN”");
    assert_snapshot!(refused("inf"), @"expected a number such as 450, but found “inf” at character 1 of “inf”");
    assert_snapshot!(refused("1e9"), @"expected “+”, “x” or the end, but found “e9” at character 2 of “1e9”; units are mm, cm, m, in or ft");
    assert_snapshot!(refused("1/0"), @"expected a figure above zero under the bar, but found “0” at character 3 of “1/0”");
    assert_snapshot!(refused("3 x"), @"expected a number such as 450, but the text ends at character 4 of “3 x”");
    assert_snapshot!(refused("3 +"), @"expected a number such as 450, but the text ends at character 4 of “3 +”");
    assert_snapshot!(refused("x 3"), @"expected a number such as 450, but found “x 3” at character 1 of “x 3”");
    assert_snapshot!(refused("٤٥٠"), @"expected a number such as 450, but found “٤٥٠” at character 1 of “٤٥٠”");
    assert_snapshot!(refused("４５０"), @"expected a number such as 450, but found “４５０” at character 1 of “４５０”");
    assert_snapshot!(refused("1,200"), @"expected a point or no comma, but found “,200” at character 2 of “1,200”; 1,200 could be 1.200 or 1200");
    assert_snapshot!(refused("1.200,5"), @"expected one decimal point only, but found “,5” at character 6 of “1.200,5”");
    assert_snapshot!(refused("1.2.3"), @"expected one decimal point only, but found “.3” at character 4 of “1.2.3”");
    assert_snapshot!(refused("1 200"), @r#"expected “+”, “x” or the end, but found “200” at character 3 of “1 200”; write feet and inches as 1' 6 1/2", thousands without a space"#);
    assert_snapshot!(refused("5 mm x 3 mm"), @"expected a plain number, but found “3 mm” at character 8 of “5 mm x 3 mm”; only one figure of a product carries a unit, as in 3 x 180 mm");
    assert_snapshot!(refused("1' 6 mm"), @"expected inches after feet, but found “ mm” at character 5 of “1' 6 mm”");
    assert_snapshot!(refused("6\" 1'"), @r#"expected “+”, “x” or the end, but found “1'” at character 4 of “6" 1'”; write feet and inches as 1' 6 1/2", thousands without a space"#);
    assert_snapshot!(refused("1/2/3"), @"expected a plain fraction such as 5/8, but found “1/2/3” at character 1 of “1/2/3”");
    assert_snapshot!(refused("1.5/2"), @"expected “+”, “x” or the end, but found “/2” at character 4 of “1.5/2”");
    assert_snapshot!(refused("450 mm each"), @"expected “+”, “x” or the end, but found “each” at character 8 of “450 mm each”; units are mm, cm, m, in or ft");
    assert_snapshot!(refused("450 min"), @"expected “+”, “x” or the end, but found “min” at character 5 of “450 min”; units are mm, cm, m, in or ft");
    assert_snapshot!(refused("(450)"), @"expected a number such as 450, but found “(450)” at character 1 of “(450)”");
    assert_snapshot!(refused("450\u{0}"), @r#"expected “+”, “x” or the end, but found “\u{0}” at character 4 of “450\u{0}”"#);
    assert_snapshot!(refused("1234567890123"), @"expected at most 12 digits, but found “1234567890123” at character 1 of “1234567890123”");
    assert_snapshot!(refused("<b>450</b>"), @"expected a number such as 450, but found “<b>450</b>” at character 1 of “<b>450</b>”");
    assert_snapshot!(refused("999999999999 m x 999999999999 x 999999999999 x 999999999999"), @"expected a smaller figure, but found “999999999999 m x 9999999…” at character 1 of “999999999999 m x 9999999…”");
    assert_snapshot!(refused(&"9".repeat(10_000)), @"expected at most 200 characters besides spaces and units, but found “999999999999999999999999…” at character 201 of “999999999999999999999999…”");
    assert_snapshot!(refused(&"1+".repeat(5_000)), @"expected at most 200 characters besides spaces and units, but found “1+1+1+1+1+1+1+1+1+1+1+1+…” at character 201 of “1+1+1+1+1+1+1+1+1+1+1+1+…”");
}

#[test]
fn the_place_of_the_trouble_is_counted_in_characters() {
    let at = |text: &str| length(text, LengthUnit::Millimetres).map_err(|error| error.at());
    assert_eq!(at("½ in ½"), Err(5));
    assert_eq!(at("450 parsecs"), Err(4));
    assert_eq!(at(""), Err(0));
}

#[test]
fn a_product_is_told_from_a_sum_and_a_length() {
    let found = |typed: &str, bare| {
        let (count, each) = repeated(typed, bare)?;
        Some((count, each.length().mm()))
    };
    for (typed, expect) in [
        ("4 x 1200 mm", Some((4, 1200.0))),
        ("4x1200", Some((4, 1200.0))),
        ("1200 mm x 4", Some((4, 1200.0))),
        ("2 × 1' 6\"", Some((2, 457.2))),
        ("1200 mm", None),
        ("1 x 1200 mm", None),
        ("1.5 x 1200 mm", None),
        ("4 x 1200 mm + 95 mm", None),
        ("2 x 3 x 10 mm", None),
        ("4 x", None),
        ("2 mm x 3 mm", None),
        ("", None),
    ] {
        assert_eq!(found(typed, LengthUnit::Millimetres), expect, "{typed}");
    }
    assert_eq!(found("3 x 10", LengthUnit::Inches), Some((3, 254.0)));
}

#[test]
fn figures_of_a_nameplate() {
    for (typed, unit, expect) in [
        ("7500", "V", 7500.0),
        ("7.5 kV", "V", 7500.0),
        ("7,5kv", "V", 7500.0),
        (" 230 V ", "V", 230.0),
        ("9\u{202f}000 V", "V", 9000.0),
        ("30", "mA", 30.0),
        ("30 mA", "mA", 30.0),
        ("0.03 A", "mA", 30.0),
        ("0,02 A", "mA", 20.0),
        ("18.5ma", "mA", 18.5),
        ("12,5", "mm", 12.5),
        ("1.2 cm", "mm", 12.0),
        ("1/2 in", "mm", 12.7),
        ("1' 6", "mm", 457.2),
        ("30 %", "%", 30.0),
        ("33,3%", "%", 33.3),
        ("50 Hz", "Hz", 50.0),
        ("20 kHz", "Hz", 20_000.0),
        ("0.45 kVA", "VA", 450.0),
        ("450 va", "VA", 450.0),
        ("500 ms", "s", 0.5),
        ("0,5 s", "s", 0.5),
        ("850 V/m", "V/m", 850.0),
        ("0,25", "", 0.25),
        ("0", "", 0.0),
        // A comma that can only be a decimal one, and a point, which always is.
        ("0,125", "", 0.125),
        ("1234,567", "V", 1234.567),
        ("12,5000", "V", 12.5),
        ("1.250", "V", 1.25),
        ("12.500", "V", 12.5),
    ] {
        assert_eq!(figure(typed, unit), Ok(expect), "{typed} in {unit}");
    }
    // Every digit of a figure from a list comes back.
    let long = 0.1_f64 + 0.2;
    assert_eq!(figure(&long.to_string(), "V"), Ok(long));
}

#[test]
fn figures_that_are_none() {
    let refused = |typed: &str, unit: &str| match figure(typed, unit) {
        Ok(read) => panic!("{typed} was read as {read}"),
        Err(error) => error.to_string(),
    };
    assert_snapshot!(refused("9,000", "V"), @"expected a point or no comma, but found “,000” at character 2 of “9,000”; 9,000 could be 9.000 or 9000");
    assert_snapshot!(refused("12,500 V", "V"), @"expected a point or no comma, but found “,500 V” at character 3 of “12,500 V”; 12,500 could be 12.500 or 12500");
    assert_snapshot!(refused("1,200,000", "V"), @"expected a point or no comma, but found “,200,000” at character 2 of “1,200,000”; 1,200 could be 1.200 or 1200");
    assert_snapshot!(refused("1.250.000", "V"), @"expected one decimal point only, but found “.000” at character 6 of “1.250.000”");
    assert_snapshot!(refused("9 000", "V"), @"expected the end, but found “000” at character 3 of “9 000”; thousands are written without a space");
    assert_snapshot!(refused("30 mA", "V"), @"expected the end, but found “mA” at character 4 of “30 mA”; units are V or kV");
    assert_snapshot!(refused("9 kV", "mA"), @"expected the end, but found “kV” at character 3 of “9 kV”; units are mA or A");
    assert_snapshot!(refused("230 V/m", "V"), @"expected the end, but found “/m” at character 6 of “230 V/m”");
    assert_snapshot!(refused("30 V", ""), @"expected the end, but found “V” at character 4 of “30 V”; this figure takes no unit");
    assert_snapshot!(refused("2 x 30", "mA"), @"expected the end, but found “x 30” at character 3 of “2 x 30”; units are mA or A");
    assert_snapshot!(refused("-3", "%"), @"expected a figure from 0 on, but found “-3” at character 1 of “-3”; nothing here is ever negative");
    assert_snapshot!(refused("", "mA"), @"expected a number such as 450, but the text ends at character 1 of “”");
    assert_snapshot!(refused("1e5", "Hz"), @"expected the end, but found “e5” at character 2 of “1e5”; units are Hz or kHz");
    assert_snapshot!(refused("NaN", "V"), @"expected a number such as 450, but found “NaN” at character 1 of “NaN”");
    assert_snapshot!(refused("1234567890123", "V"), @"expected at most 12 digits, but found “1234567890123” at character 1 of “1234567890123”");
}

#[test]
fn sums_of_money() {
    let amount = |typed: &str| match money(typed) {
        Ok(amount) => amount.to_string(),
        Err(error) => error.to_string(),
    };
    for (typed, expect) in [
        ("12.50", "12.50"),
        ("12,50", "12.50"),
        (" 1250 ", "1250"),
        ("0", "0"),
        ("0,125", "0.125"),
        ("0.1250", "0.1250"),
        ("1\u{202f}250,00", "1250.00"),
    ] {
        assert_eq!(amount(typed), expect, "{typed}");
    }
    assert_snapshot!(amount("1,250"), @"expected a point or no comma, but found “,250” at character 2 of “1,250”; 1,250 could be 1.250 or 1250");
    assert_snapshot!(amount("1.250,00"), @"expected one decimal point only, but found “,00” at character 6 of “1.250,00”");
    assert_snapshot!(amount("-5"), @"expected a figure from 0 on, but found “-5” at character 1 of “-5”; nothing here is ever negative");
    assert_snapshot!(amount("12.50 EUR"), @"expected the end, but found “EUR” at character 7 of “12.50 EUR”; this figure takes no unit");
    assert_snapshot!(amount("1/2"), @"expected the end, but found “/2” at character 2 of “1/2”");
    assert_snapshot!(amount(""), @"expected an amount such as 12.50, but the text ends at character 1 of “”");
    assert_snapshot!(amount("999999999999.123456789012345678901234"), @"expected a figure with fewer digits, but found “999999999999.12345678901…” at character 1 of “999999999999.12345678901…”");
}

#[test]
fn figures_as_shown() {
    let shown = [
        grouped(999.5),
        grouped(1_234_567.4),
        grouped(-12_345.0),
        grouped(f64::NAN),
        length_shown(Length::from_mm(1234.5), Units::Metric),
        length_shown(Length::from_mm(1234.5), Units::FeetInches),
        length_shown(Length::from_mm(0.0), Units::FeetInches),
        length_exact(Length::from_mm(450.0), Units::Metric),
        length_exact(Length::from_mm(447.675), Units::FeetInches),
        glass(Length::from_mm(12_345.0), Units::Metric),
        glass(Length::from_mm(12_192.0), Units::FeetInches),
        volts_shown(Volts::from_volts(15_000.0)),
        milliamps_shown(Milliamps::from_ma(23.149)),
        milliamps_shown(Milliamps::from_ma(f64::INFINITY)),
    ];
    assert_snapshot!(shown.join("\n").replace('\u{202f}', "_"), @r"
    1_000
    1_234_567
    −12_345
    –
    1_235 mm
    4 ft 0 5/8 in
    0 in
    450 mm
    1 ft 5 5/8 in
    12.35 m
    40.00 ft
    15_000 V
    23.1 mA
    – mA
    ");
}

#[test]
fn nothing_is_nought_without_a_sign() {
    let nothing: Length = std::iter::empty::<Length>().sum();
    assert_eq!(glass(nothing, Units::Metric), "0.00 m");
    assert_eq!(glass(nothing, Units::FeetInches), "0.00 ft");
    assert_eq!(length_exact(nothing, Units::Metric), "0 mm");
}

#[test]
fn text_from_outside_is_quoted_short_and_without_control_characters() {
    assert_eq!(quoted("a\nb\u{1b}[31m"), "“a\\nb\\u{1b}[31m”");
    assert_eq!(quoted(&"é".repeat(100)), format!("“{}…”", "é".repeat(24)));
}

#[test]
fn units_are_written_out_where_a_number_has_none() {
    for (typed, expect) in [
        ("450", "450 mm"),
        ("3 x 180 + 2 x 95", "3 x 180 mm + 2 x 95 mm"),
        ("1' 6; 300;2 x 95 mm", "1' 6; 300 mm;2 x 95 mm"),
        ("450 parsecs; 5", "450 parsecs; 5 mm"),
        ("", ""),
        (" 5 ", " 5 mm "),
    ] {
        assert_eq!(
            with_units(typed, LengthUnit::Millimetres),
            expect,
            "{typed}"
        );
    }
    assert_eq!(with_units("6 1/2", LengthUnit::Inches), "6 1/2 in");
    // As long a sum as may be typed stays readable with its units.
    let longest = format!("{}1", "1+".repeat(99));
    let written = with_units(&longest, LengthUnit::Inches);
    assert_eq!(mm(&written), inches(&longest), "{written}");
}

/// Something a person might type: pieces of lengths in any order, some of it nonsense.
fn typed() -> impl Strategy<Value = String> {
    let part = prop::sample::select(vec![
        "450", "3", "1.2", "0,5", "17 5/8", "1/2", "½", "6-1/2", "1'", "1' 6", " mm", " in", "in",
        "\"", " m", "ft", " x ", "x", "+", " + ", "; ", ";", " ", "-", "é", "０",
    ]);
    prop::collection::vec(part, 0..8).prop_map(|parts| parts.concat())
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(1_000))]

    #[test]
    fn a_length_shown_exactly_reads_back(length_mm in 0.0..20_000.0_f64) {
        // Metric to thousandths of a millimetre, inches to 64ths: half a grain off at most.
        for (units, half_grain) in [(Units::Metric, 0.000_5), (Units::FeetInches, 25.4 / 128.0)] {
            let shown = length_exact(Length::from_mm(length_mm), units);
            for bare in [LengthUnit::Millimetres, LengthUnit::Inches] {
                let back = length(&shown, bare).expect("what is shown can be read").length();
                prop_assert!((back.mm() - length_mm).abs() <= half_grain + 1e-9, "{length_mm}: {shown}");
                // Shown again it is the same: nothing drifts.
                prop_assert_eq!(length_exact(back, units), shown.clone());
            }
        }
    }

    #[test]
    fn what_was_typed_on_the_grain_comes_back_whole(thousandths in 0..20_000_000_u32, ticks in 0..50_000_u32) {
        let typed = format!("{}.{:03} mm", thousandths / 1000, thousandths % 1000);
        let found = length(&typed, LengthUnit::Inches).expect("a length");
        let back = length(&length_exact(found.length(), Units::Metric), LengthUnit::Inches);
        prop_assert_eq!(back.as_ref(), Ok(&found));
        let typed = format!("{} {}/64 in", ticks / 64, ticks % 64);
        let found = length(&typed, LengthUnit::Millimetres).expect("a length");
        // 1/64 in = 127/320 mm.
        let (numer, denom) = found.mm_fraction();
        prop_assert_eq!(numer * 320, i128::from(ticks) * 127 * denom);
        let back = length(&length_exact(found.length(), Units::FeetInches), LengthUnit::Millimetres);
        prop_assert_eq!(back.as_ref(), Ok(&found));
    }

    #[test]
    fn units_written_out_change_no_length(typed in typed(), metric in any::<bool>()) {
        let (bare, other) = if metric {
            (LengthUnit::Millimetres, LengthUnit::Inches)
        } else {
            (LengthUnit::Inches, LengthUnit::Millimetres)
        };
        let written = with_units(&typed, bare);
        prop_assert_eq!(with_units(&written, other), written.clone(), "stable");
        for (typed, written) in typed.split(';').zip(written.split(';')) {
            // Errors name the text, so only lengths are compared.
            prop_assert_eq!(length(typed, bare).ok(), length(written, other).ok(), "{} {}", typed, written);
        }
    }

    #[test]
    fn no_text_brings_the_reader_down(text in any::<String>(), near in "[0-9x+/.,' \"½mifnt-]{0,40}") {
        for text in [text, near] {
            for unit in ["V", "mm", ""] {
                prop_assert!(figure(&text, unit).map_or(true, |found| found >= 0.0));
            }
            prop_assert!(money(&text).map_or(true, |found| !found.is_sign_negative()));
            for bare in [LengthUnit::Millimetres, LengthUnit::Inches] {
                match length(&text, bare) {
                    Ok(found) => prop_assert!(found.length().mm() >= 0.0),
                    Err(error) => prop_assert!(!error.to_string().is_empty()
                        && error.at() <= text.chars().count()),
                }
            }
        }
    }
}
