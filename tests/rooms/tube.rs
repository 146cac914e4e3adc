//! Tube types: the default model, entries that are not whole, and volts of a piece.

use insta::assert_snapshot;
use tubewright::book::{ElectrodeEntry, Gas, TubeEntry};
use tubewright::measure::{Length, Milliamps};
use tubewright::rules::{Finding, Grade, Place};
use tubewright::tube::{Electrode, Known, TubeType, model};

fn entry() -> TubeEntry {
    TubeEntry {
        name: "12 mm neon".to_owned(),
        outer_mm: Some(12.0),
        ..TubeEntry::default()
    }
}

fn read(entry: &TubeEntry) -> TubeType {
    TubeType::read(entry).expect("the tube is whole")
}

fn refused(entry: &TubeEntry) -> String {
    let wrong = TubeType::read(entry).expect_err("the tube is not usable");
    let mut says = Vec::new();
    for finding in wrong {
        assert_eq!(finding.grade, Grade::Stop, "{}", finding.says);
        assert_eq!(
            finding.place,
            Place::Tube(entry.name.clone()),
            "{}",
            finding.says
        );
        says.push(finding.says);
    }
    says.join("\n")
}

#[test]
fn volts_of_a_piece_on_the_default_model() {
    // By hand. 12 mm neon, bore 10 mm: 180 + 720 V/m x 1.5 m = 1260 V at 25 mA; at 16 times the
    // current the column falls to half (n = 1/4).
    let neon = read(&entry());
    let volts = |tube: &TubeType, ma, cold| {
        tube.running(Length::from_mm(1_500.0), Milliamps::from_ma(ma), cold)
            .volts()
    };
    assert!((volts(&neon, 25.0, false) - 1_260.0).abs() < 1e-9);
    assert!((volts(&neon, 400.0, false) - 720.0).abs() < 1e-9);
    assert_eq!(
        volts(&neon, 25.0, true),
        volts(&neon, 25.0, false),
        "cold is nothing to neon"
    );
    // 12 mm argon-mercury: 210 + 425 V/m x 1.5 m = 847.5 V; below 0 °C the column takes 15 % more.
    let mercury = read(&TubeEntry {
        gas: Gas::ArgonMercury,
        ..entry()
    });
    assert!((volts(&mercury, 25.0, false) - 847.5).abs() < 1e-9);
    assert!((volts(&mercury, 25.0, true) - (210.0 + 637.5 * 1.15)).abs() < 1e-9);
}

#[test]
fn the_model_falls_with_the_bore() {
    // By hand: at 160 mm, 16 times the bore, 16^-3/4 = 1/8 of 720 V/m.
    assert!((model(Gas::Neon, 160.0).volts_per_m - 90.0).abs() < 1e-9);
    assert_eq!(model(Gas::Neon, 10.0).uncertainty_percent, 15.0);
    assert_eq!(model(Gas::Neon, 6.0).uncertainty_percent, 25.0);
}

#[test]
fn figures_of_the_shop_replace_the_model() {
    let own = read(&TubeEntry {
        volts_per_m: Some(800.0),
        at_ma: Some(30.0),
        ..entry()
    });
    let found = own
        .running(Length::from_mm(1_000.0), Milliamps::from_ma(30.0), false)
        .volts();
    assert!(
        (found - 980.0).abs() < 1e-9,
        "180 V and 800 V/m at 30 mA: {found}"
    );
    assert_eq!(
        (&own.known, own.uncertainty_percent()),
        (&Known::Entered, None)
    );
    // A reference current alone says nothing: the model's figures stay at their own.
    let odd = read(&TubeEntry {
        at_ma: Some(30.0),
        ..entry()
    });
    assert_eq!((odd.at_ma, odd.uncertainty_percent()), (25.0, Some(15.0)));
}

#[test]
fn a_colour_that_is_none_becomes_the_gas_s() {
    let colour = |typed: &str| {
        read(&TubeEntry {
            colour: typed.to_owned(),
            ..entry()
        })
        .colour
    };
    assert_eq!(colour("#A0b1c2"), "#A0b1c2");
    for typed in [
        "",
        "red",
        "#fff",
        "#12345g",
        "#12345é",
        "url(#x)",
        "\"/><script>",
    ] {
        assert_eq!(colour(typed), "#ff5a3c", "{typed}");
    }
}

#[test]
fn entries_that_are_not_whole_or_contradict_themselves() {
    assert_snapshot!(refused(&TubeEntry { outer_mm: None, ..entry() }), @"The outer diameter is missing: it is needed to draw and to model the tube.");
    assert_snapshot!(refused(&TubeEntry { outer_mm: Some(-12.0), ..entry() }), @"Outer diameter must be above 0 and at most 60 mm, but is -12.");
    assert_snapshot!(refused(&TubeEntry { outer_mm: Some(f64::NAN), ..entry() }), @"Outer diameter must be above 0 and at most 60 mm, but is NaN.");
    assert_snapshot!(refused(&TubeEntry { wall_mm: Some(6.0), ..entry() }), @"The walls leave no bore: outer diameter 12 mm.");
    assert_snapshot!(refused(&TubeEntry { volts_per_m: Some(0.0), ..entry() }), @"Volts per metre must be above 0 and at most 10000 V/m, but is 0.");
    assert_snapshot!(refused(&TubeEntry { exponent: Some(0.5), ..entry() }), @"The exponent must be 0 to 0.45, but is 0.5.");
    assert_snapshot!(refused(&TubeEntry { exponent: Some(f64::NAN), ..entry() }), @"The exponent must be 0 to 0.45, but is NaN.");
    assert_snapshot!(refused(&TubeEntry { cold_factor: Some(4.0), ..entry() }), @"Cold factor must be above 0 and at most 3, but is 4.");
    assert_snapshot!(
        refused(&TubeEntry { least_ma: Some(40.0), most_ma: Some(30.0), ..entry() }),
        @"The least current, 40 mA, is above the greatest, 30 mA."
    );
    assert_snapshot!(
        refused(&TubeEntry { pair_volts: Some(-1.0), most_ma: Some(f64::INFINITY), ..entry() }),
        @r"
    Volts of an electrode pair must be above 0 and at most 2000 V, but is -1.
    Greatest current must be above 0 and at most 1000 mA, but is inf.
    "
    );
}

fn electrode(least: Option<f64>, most: Option<f64>) -> ElectrodeEntry {
    ElectrodeEntry {
        name: "Shell 12".to_owned(),
        rated_ma: Some(40.0),
        least_outer_mm: least,
        most_outer_mm: most,
        ..ElectrodeEntry::default()
    }
}

fn told(findings: &[Finding]) -> String {
    let told = |finding: &Finding| {
        format!(
            "{} {:?}: {}",
            finding.grade.word(),
            finding.place,
            finding.says
        )
    };
    findings.iter().map(told).collect::<Vec<_>>().join("\n")
}

#[test]
fn an_electrode_is_found_by_name_and_must_fit_the_glass() {
    let named = TubeEntry {
        electrode: "Shell 12".to_owned(),
        ..entry()
    };
    let with = |list: &[ElectrodeEntry]| {
        let tube = TubeType::of_book(&named, list).expect("volts can be worked out all the same");
        (tube.electrode, told(&tube.findings))
    };
    for (least, most) in [
        (Some(12.0), Some(12.0)),
        (Some(10.0), None),
        (None, Some(15.0)),
        (None, None),
    ] {
        let (found, says) = with(&[electrode(least, most)]);
        let found = found.expect("it is in the book");
        assert_eq!((found.name.as_str(), says.as_str()), ("Shell 12", ""));
        assert_eq!(found.rated, Some(Milliamps::from_ma(40.0)));
    }
    let says = |list: &[ElectrodeEntry]| with(list).1;
    assert_snapshot!(says(&[electrode(Some(13.0), Some(15.0))]), @r#"stop Tube("12 mm neon"): The electrode “Shell 12” does not fit: it is for glass of 13 to 15 mm outer diameter, but the tube has 12 mm."#);
    assert_snapshot!(says(&[electrode(Some(12.5), None)]), @r#"stop Tube("12 mm neon"): The electrode “Shell 12” does not fit: it is for glass of 12.5 mm and more outer diameter, but the tube has 12 mm."#);
    assert_snapshot!(says(&[electrode(None, Some(11.0))]), @r#"stop Tube("12 mm neon"): The electrode “Shell 12” does not fit: it is for glass of up to 11 mm outer diameter, but the tube has 12 mm."#);
    assert_snapshot!(says(&[]), @r#"look Tube("12 mm neon"): The electrode “Shell 12” is not in the shop book: whether it fits the glass and stands the current is not checked. Choose one of the book, or add it."#);
    assert_snapshot!(says(&[electrode(None, None), electrode(None, Some(8.0))]), @r#"look Electrode("Shell 12"): Two electrodes are called “Shell 12”: the first is used."#);
    // What contradicts itself is not compared with anything.
    let (found, says) = with(&[electrode(Some(15.0), Some(12.0))]);
    assert_eq!(found, None);
    assert_snapshot!(says, @r#"stop Electrode("Shell 12"): The least glass it fits, 15 mm, is above the greatest, 12 mm."#);
    // A tube that names none has none to be compared, and an entry alone knows of no book.
    let tube = TubeType::of_book(&entry(), &[electrode(None, None)]).expect("whole");
    assert_eq!((tube.electrode, tube.findings), (None, vec![]));
    assert_eq!(read(&named).electrode, None);
}

#[test]
fn electrodes_that_contradict_themselves() {
    let refused =
        |entry: ElectrodeEntry| told(&Electrode::read(&entry).expect_err("it cannot be so"));
    assert_snapshot!(refused(ElectrodeEntry { rated_ma: Some(0.0), ..electrode(Some(f64::NAN), Some(61.0)) }), @r#"
    stop Electrode("Shell 12"): Rated current must be above 0 and at most 1000 mA, but is 0.
    stop Electrode("Shell 12"): Least glass must be above 0 and at most 60 mm, but is NaN.
    stop Electrode("Shell 12"): Greatest glass must be above 0 and at most 60 mm, but is 61.
    "#);
    assert_snapshot!(refused(electrode(Some(15.0), Some(12.0))), @r#"stop Electrode("Shell 12"): The least glass it fits, 15 mm, is above the greatest, 12 mm."#);
    let unknown = Electrode::read(&ElectrodeEntry::default()).expect("everything may be unknown");
    assert!(unknown.rated.is_none() && unknown.fits(Length::from_mm(1.0)));
}
