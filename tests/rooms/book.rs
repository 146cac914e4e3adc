//! Files of the shop book and of jobs: what is read, what is refused, in which words.

use insta::assert_snapshot;
use proptest::prelude::*;
use rust_decimal::Decimal;
use tubewright::book::{
    self, Book, ChartLength, Dampness, Gas, OutputEarthing, Reading, Sheet, SupplyEntry,
    SupplyKind, TubeEntry, read_supplies, read_tubes, starter, write_supplies, write_tubes,
};

fn supplies(text: &str) -> Sheet<SupplyEntry> {
    read_supplies(text.as_bytes()).unwrap_or_else(|error| panic!("{error}"))
}

fn refused(bytes: &[u8]) -> String {
    read_supplies(bytes).expect_err("the file is no list of supplies")
}

/// Names read, then the sentences, one a line.
fn outcome(text: &str) -> String {
    let sheet = supplies(text);
    let names: Vec<&str> = sheet
        .entries
        .iter()
        .map(|entry| entry.name.as_str())
        .collect();
    let names = if names.is_empty() {
        "nothing".to_owned()
    } else {
        names.join(", ")
    };
    [vec![names], sheet.trouble].concat().join("\n")
}

#[test]
fn a_whole_line() {
    let sheet = supplies(
        "name,kind,no_load_volts,short_circuit_ma,earthing,earth_fault_protection,place,price,stock\n\
         Big,iron,15000,30,mid-point,yes,wet,129.50,3\n",
    );
    let expect = SupplyEntry {
        name: "Big".to_owned(),
        kind: Some(SupplyKind::Iron),
        earthing: Some(OutputEarthing::MidPoint),
        no_load_volts: Some(15_000.0),
        short_circuit_ma: Some(30.0),
        earth_fault_protection: true,
        place: Dampness::Wet,
        price: Some(Decimal::new(12_950, 2)),
        stock: Some(3),
        ..SupplyEntry::default()
    };
    assert_eq!(
        sheet,
        Sheet {
            entries: vec![expect],
            trouble: vec![]
        }
    );
}

#[test]
fn columns_in_any_order_missing_or_unknown() {
    assert_snapshot!(outcome("no_load_volts,colour,NAME\n9000,red,T\n"), @r"
    T
    Column “colour” is not known and was left out.
    ");
    assert_snapshot!(refused(b"title,volts\nT,9000\n"), @"This is not a list of supplies: its first line has no column “name”. The columns are: name, kind, input_volts, input_hertz, input_va, no_load_volts, short_circuit_ma, rated_ma, rated_load_volts, earthing, earth_fault_protection, trip_ma, trip_seconds, open_circuit_protection, output_hertz, least_load_percent, most_load_percent, place, price, stock, note, longest_lead_mm, chart.");
    assert_snapshot!(refused(b"9000,30\n"), @"This is not a list of supplies: its first line has no column “name”. The columns are: name, kind, input_volts, input_hertz, input_va, no_load_volts, short_circuit_ma, rated_ma, rated_load_volts, earthing, earth_fault_protection, trip_ma, trip_seconds, open_circuit_protection, output_hertz, least_load_percent, most_load_percent, place, price, stock, note, longest_lead_mm, chart.");
    let missing = supplies("name\nT\n");
    let entry = &missing.entries[0];
    assert_eq!(
        (entry.no_load_volts, entry.kind, entry.earthing),
        (None, None, None),
        "what is not given stays unknown"
    );
}

#[test]
fn a_column_named_twice_is_not_taken_silently() {
    assert_snapshot!(outcome("name,price,price\nT,10,20\n"), @r"
    T
    Column “price” is there twice: the first is used.
    ");
}

#[test]
fn separators_and_decimal_commas() {
    let price = |text: &str| {
        let sheet = supplies(text);
        assert_eq!(sheet.trouble, [""; 0], "{text}");
        (sheet.entries[0].no_load_volts, sheet.entries[0].price)
    };
    let expect = (Some(9_000.5), Some(Decimal::new(1_250, 2)));
    assert_eq!(price("name,no_load_volts,price\nT,9000.5,12.50\n"), expect);
    assert_eq!(
        price("name;no_load_volts;price\r\nT;9000,5;12,50\r\n"),
        expect
    );
    assert_eq!(
        price("name\tno_load_volts\tprice\nT\t9000,5\t12.50\n"),
        expect
    );
    assert_eq!(
        price(" name ; no_load_volts ; price \n T ; 9000.5 ; 12,50 \n"),
        expect
    );
    // Between commas a decimal comma must stand in quotes.
    assert_eq!(
        price("name,no_load_volts,price\nT,\"9000,5\",\"12,50\"\n"),
        expect
    );
    // A unit of the column's kind may follow.
    assert_eq!(
        price("name;no_load_volts;price\nT;9,0005 kV;12,50\n"),
        expect
    );
    for separated in [
        "name\tno_load_volts\nT\t9,000\n",
        "name;no_load_volts\nT;9,000\n",
        "name,no_load_volts\nT,\"9,000\"\n",
    ] {
        assert_eq!(
            outcome(separated),
            "nothing\n\
             Line 2 was left out: column no_load_volts, expected a point or no comma, but found \
             “,000” at character 2 of “9,000”; 9,000 could be 9.000 or 9000.",
            "{separated}"
        );
    }
    assert_snapshot!(outcome("name,price\nT,12,50\n"), @r"
    nothing
    Line 2 was left out: it has 3 cells where the first line names 2 columns. A text with a separator in it must stand in quotes.
    ");
    assert_snapshot!(outcome("name;price\nT;1.250,00\n"), @r"
    nothing
    Line 2 was left out: column price, expected one decimal point only, but found “,00” at character 6 of “1.250,00”.
    ");
}

#[test]
fn cells_that_are_no_figure() {
    assert_snapshot!(
        outcome(
            "name,no_load_volts,price,stock,kind,earth_fault_protection\n\
             A,9 mA,,,,\n\
             B,NaN,,,,\n\
             C,inf,,,,\n\
             D,,-5,,,\n\
             E,,,2.5,,\n\
             F,,,-1,,\n\
             G,,,,wooden,\n\
             H,,,,,perhaps\n\
             I,,1e30,,,\n\
             ,9000,,,,\n\
             ,,,,,\n\
             Z,9000,1,1,IRON,Yes\n"
        ),
        @r"
    Z
    Line 2 was left out: column no_load_volts, expected the end, but found “mA” at character 3 of “9 mA”; units are V or kV.
    Line 3 was left out: column no_load_volts, expected a number such as 450, but found “NaN” at character 1 of “NaN”.
    Line 4 was left out: column no_load_volts, expected a number such as 450, but found “inf” at character 1 of “inf”.
    Line 5 was left out: column price, expected a figure from 0 on, but found “-5” at character 1 of “-5”; nothing here is ever negative.
    Line 6 was left out: column stock, expected a whole number, but found “2.5”.
    Line 7 was left out: column stock, expected a whole number, but found “-1”.
    Line 8 was left out: column kind, expected iron or electronic, but found “wooden”.
    Line 9 was left out: column earth_fault_protection, expected yes or no, but found “perhaps”.
    Line 10 was left out: column price, expected the end, but found “e30” at character 2 of “1e30”; this figure takes no unit.
    Line 11 was left out: it has no name.
    "
    );
}

#[test]
fn lists_in_a_cell() {
    let readings = |cell: &str| {
        let sheet =
            read_tubes(format!("name;readings\nT;\"{cell}\"\n").as_bytes()).expect("a list");
        let read = sheet.entries.into_iter().flat_map(|tube| tube.readings);
        let read: Vec<_> = read.map(|r| (r.length_mm, r.ma, r.volts)).collect();
        (read, sheet.trouble.join(" "))
    };
    let (read, trouble) = readings("600 mm 25 mA 596 V; 1000mm 25,5mA 0.83 kV;");
    assert_eq!(read, [(600.0, 25.0, 596.0), (1_000.0, 25.5, 830.0)]);
    assert_eq!(trouble, "");
    assert_snapshot!(readings("600 mm 25 mA").1, @"Line 2 was left out: column readings, expected readings such as 600 mm 25 mA 596 V, parted by semicolons, but found “600 mm 25 mA”.");
    assert_snapshot!(readings("600 mm; 25 mA; 596 V").1, @"Line 2 was left out: column readings, expected readings such as 600 mm 25 mA 596 V, parted by semicolons, but found “600 mm”.");
    assert_snapshot!(readings("600 mm five mA 596 V").1, @"Line 2 was left out: column readings, expected a number such as 450, but found “five” at character 1 of “five”.");
    let chart = |cell: &str| {
        let cell = cell.replace('"', "\"\"");
        let sheet = supplies(&format!("name,chart\nS,\"{cell}\"\n"));
        let read = sheet.entries.into_iter().flat_map(|supply| supply.chart);
        let read: Vec<_> = read.map(|l| (l.tube, l.longest_mm, l.pair_mm)).collect();
        (read, sheet.trouble.join(" "))
    };
    let (read, trouble) = chart(r#"15 mm neon: 9000 mm, pair 300 mm; "a; ""b"": c" : 8,5 mm"#);
    assert_eq!(
        read,
        [
            ("15 mm neon".to_owned(), 9_000.0, Some(300.0)),
            ("a; \"b\": c".to_owned(), 8.5, None)
        ]
    );
    assert_eq!(trouble, "");
    for cell in [
        "15 mm neon",
        ": 9000 mm",
        "\"open: 9000 mm",
        "a; b: 9000 mm",
        "a: 9000 mm pair 300 mm",
    ] {
        let (read, trouble) = chart(cell);
        assert!(
            read.is_empty() && trouble.contains("expected lengths such as"),
            "{cell}: {trouble}"
        );
    }
    assert_snapshot!(chart("a: 9000 mm, pair none").1, @"Line 2 was left out: column chart, expected a number such as 450, but found “none” at character 1 of “none”.");
}

#[test]
fn lines_are_counted_as_an_editor_counts_them() {
    let text = "name,note,price\n\n\nA,x,cheap\r\n\r\nB,\"one\ntwo\nthree\",1\n\nC,x,dear\n";
    assert_snapshot!(outcome(text), @r"
    B
    Line 4 was left out: column price, expected an amount such as 12.50, but found “cheap” at character 1 of “cheap”.
    Line 10 was left out: column price, expected an amount such as 12.50, but found “dear” at character 1 of “dear”.
    ");
}

#[test]
fn trouble_without_end_is_counted_not_told() {
    let sheet = supplies(&format!("name,price\n{}", "T,x\n".repeat(1_000)));
    assert_eq!(sheet.trouble.len(), 101);
    assert_eq!(sheet.trouble[100], "And 900 more like these.");
    // Many names are held against each other at once, not each against all.
    let many: Vec<String> = (0..100_000).map(|number| number.to_string()).collect();
    assert_eq!(
        supplies(&format!("name\n{}", many.join("\n")))
            .entries
            .len(),
        100_000
    );
}

#[test]
fn a_quote_that_is_never_closed_swallows_no_names() {
    let text = format!("name,price\n\"A,1\n{}", "B,1\n".repeat(100));
    assert_snapshot!(outcome(&text), @r"
    nothing
    Lines 2 to 102 were left out: the quote that opens in line 2 is not closed where its cell ends; close it or take it away, and read the file again.
    ");
}

#[test]
fn a_quote_that_is_not_closed_swallows_no_line_silently() {
    // Closed only by the quote that opens a cell further down.
    assert_snapshot!(outcome("name,price,note\nA,1,\"dear\nB,2,x\nC,3,\"cheap\"\nD,4,x\n"), @r"
    D
    Lines 2 to 4 were left out: the quote that opens in line 2 is not closed where its cell ends; close it or take it away, and read the file again.
    ");
    // The closing quote of another cell fits by chance: the line inside gives it away.
    assert_snapshot!(outcome("name,price,note\nA,\"1,x\nB,2,y\nC,\",3\nD,4,x\n"), @r"
    D
    Lines 2 to 4 were left out: the quote that opens in line 2 is not closed where its cell ends; close it or take it away, and read the file again.
    ");
    // To the end of the file, in the last line of it too.
    assert_snapshot!(outcome("name;price\nZ;1\nA;\"1\nB;2\nC;3\n"), @r"
    Z
    Lines 3 to 5 were left out: the quote that opens in line 3 is not closed where its cell ends; close it or take it away, and read the file again.
    ");
    assert_snapshot!(outcome("name,price\nZ,1\nA,\"1"), @r"
    Z
    Line 3 was left out: the quote that opens in line 3 is not closed where its cell ends; close it or take it away, and read the file again.
    ");
    assert_snapshot!(refused(b"name,\"price\nA,1\nB,2\n"), @"The file of supplies cannot be read: the quote that opens in line 1 is not closed where its cell ends; close it or take it away, and read the file again.");
    // A cell of several lines, a sign for inches and a quote inside quotes are no such thing.
    assert_snapshot!(outcome("name,price,note\nA,1,\"two\nlines, with a comma\"\n3\" tube,2,\"say \"\"so\"\"\"\n\"B\" ,3,x\n"), @r#"A, 3" tube, B"#);
}

#[test]
fn names_that_come_twice() {
    assert_snapshot!(outcome("name,price\nT,1\nS,2\nT,3\n"), @r"
    T, S
    Line 4 was left out: the name “T” stands further up already.
    ");
    assert_eq!(
        supplies("name,price\nT,1\nT,3\n").entries[0].price,
        Some(Decimal::ONE)
    );
}

#[test]
fn bytes_of_other_programs() {
    let name = |bytes: &[u8]| {
        read_supplies(bytes)
            .unwrap_or_else(|error| panic!("{error}"))
            .entries[0]
            .name
            .clone()
    };
    assert_eq!(name("\u{feff}name,price\nMül,1\n".as_bytes()), "Mül");
    assert_eq!(name(b"name,price\nM\xfcl,1\n"), "Mül");
    assert_eq!(name(b"\"name\",\"price\"\r\n\"M\",\"1\"\r\n"), "M");
    assert_eq!(name(b"name\nM"), "M");
    assert_eq!(name(b"name,note\rM,old line ends\r"), "M");
    let utf_16: Vec<u8> = "\u{feff}name\nT\n"
        .encode_utf16()
        .flat_map(u16::to_le_bytes)
        .collect();
    assert_snapshot!(refused(&utf_16), @"The file is text in UTF-16: save it as UTF-8 (in a spreadsheet, as “CSV UTF-8”).");
    assert_snapshot!(refused(b"PK\x03\x04\x00\x00sheet"), @"The file is not plain text in UTF-8 or Latin-1: save it as UTF-8 (in a spreadsheet, as “CSV UTF-8”).");
}

#[test]
fn files_with_nothing_in_them() {
    assert_snapshot!(refused(b""), @"The file of supplies is empty.");
    assert_snapshot!(refused(b"\n\n"), @"The file of supplies is empty.");
    assert_snapshot!(refused(b"name,price\n"), @"The file of supplies has a first line but nothing under it.");
    assert_snapshot!(refused(b"name,price\n,\n"), @"The file of supplies has a first line but nothing under it.");
    assert_snapshot!(refused("\u{feff}".as_bytes()), @"The file of supplies is empty.");
}

#[test]
fn garbage_is_refused_in_a_sentence_of_fair_length() {
    let one_line = "x".repeat(5_000_000);
    assert_snapshot!(refused(one_line.as_bytes()), @"The file is larger than 4 MB.");
    for garbage in [
        "x".repeat(3_900_000),
        ",".repeat(100_000),
        "\"".repeat(100_001),
        format!("name\n{}", "\"".repeat(100_001)),
        format!("name\n{}\n", "x,".repeat(100_000)),
        format!("name,{}\nT\n", "é,".repeat(50_000)),
    ] {
        match read_supplies(garbage.as_bytes()) {
            Err(error) => assert!(error.len() < 1_000, "{} bytes of sentence", error.len()),
            Ok(sheet) => {
                let most = sheet
                    .trouble
                    .iter()
                    .map(String::len)
                    .max()
                    .unwrap_or_default();
                assert!(most < 1_000, "{most} bytes of sentence");
            }
        }
    }
}

#[test]
fn tubes_are_read_alike() {
    let sheet =
        read_tubes(b"name;gas;outer_mm;price_per_m\n12 mm;argon-mercury;12,0;7,20\nx;helium;;\n")
            .expect("a list of tubes");
    let expect = TubeEntry {
        name: "12 mm".to_owned(),
        gas: Gas::ArgonMercury,
        outer_mm: Some(12.0),
        price_per_m: Some(Decimal::new(720, 2)),
        ..TubeEntry::default()
    };
    assert_eq!(sheet.entries, [expect]);
    assert_snapshot!(sheet.trouble.join("\n"), @"Line 3 was left out: column gas, expected neon or argon-mercury, but found “helium”.");
    assert_snapshot!(read_tubes(b"price\n1\n").expect_err("no names"), @"This is not a list of tube types: its first line has no column “name”. The columns are: name, gas, outer_mm, wall_mm, colour, least_ma, most_ma, volts_per_m, at_ma, exponent, pair_volts, cold_factor, price_per_m, source, electrode, measured_on, readings.");
}

/// Text a cell gives back: csv trims around it, and only a name may not be empty.
fn text() -> impl Strategy<Value = String> {
    let awkward = prop::sample::select(vec![
        "plain",
        "a,b",
        "a;b",
        "say \"so\"",
        "two\nlines",
        "Ü ½ 漢",
        "=1+1",
        "-",
        "'",
        "\t",
        "#",
    ]);
    prop_oneof![awkward.prop_map(str::to_owned), "[ -~é]{0,12}"]
        .prop_map(|text| text.trim().to_owned())
}

/// Figures that may be typed, to the last bit.
fn figure() -> impl Strategy<Value = Option<f64>> {
    prop::option::of(prop_oneof![0.0..1e12, 0.0..1e5, 0.001..1.0])
}

fn price() -> impl Strategy<Value = Option<Decimal>> {
    prop::option::of(
        (0..1_000_000_000_000_i64, 0..6_u32).prop_map(|(units, scale)| Decimal::new(units, scale)),
    )
}

fn chart_length() -> impl Strategy<Value = ChartLength> {
    let name = prop_oneof![text(), "[;:\", a]{0,6}"];
    (name, 0.0..1e5, figure()).prop_map(|(tube, longest_mm, pair_mm)| ChartLength {
        tube,
        longest_mm,
        pair_mm,
    })
}

fn bench_reading() -> impl Strategy<Value = Reading> {
    (0.0..1e5, 0.0..1e5, 0.001..1e9).prop_map(|(length_mm, ma, volts)| Reading {
        length_mm,
        ma,
        volts,
    })
}

fn supply() -> impl Strategy<Value = SupplyEntry> {
    use prop::sample::select;
    (
        (
            text(),
            select(vec![
                None,
                Some(SupplyKind::Iron),
                Some(SupplyKind::Electronic),
            ]),
            select(vec![
                None,
                Some(OutputEarthing::MidPoint),
                Some(OutputEarthing::MidPointReturn),
                Some(OutputEarthing::OneEnd),
                Some(OutputEarthing::Isolated),
            ]),
            select(vec![Dampness::Dry, Dampness::Damp, Dampness::Wet]),
        ),
        prop::collection::vec(figure(), 12),
        (any::<bool>(), any::<bool>()),
        (price(), any::<Option<u32>>(), text()),
        (figure(), prop::collection::vec(chart_length(), 0..4)),
    )
        .prop_map(
            |(
                (name, kind, earthing, place),
                figures,
                (earth, open),
                (price, stock, note),
                (longest_lead_mm, chart),
            )| {
                SupplyEntry {
                    name,
                    kind,
                    input_volts: figures[0],
                    input_hertz: figures[1],
                    input_va: figures[2],
                    no_load_volts: figures[3],
                    short_circuit_ma: figures[4],
                    rated_ma: figures[5],
                    rated_load_volts: figures[6],
                    earthing,
                    earth_fault_protection: earth,
                    trip_ma: figures[7],
                    trip_seconds: figures[8],
                    open_circuit_protection: open,
                    output_hertz: figures[9],
                    least_load_percent: figures[10],
                    most_load_percent: figures[11],
                    place,
                    price,
                    stock,
                    note,
                    longest_lead_mm,
                    chart,
                }
            },
        )
}

fn tube() -> impl Strategy<Value = TubeEntry> {
    (
        text(),
        any::<bool>(),
        prop::collection::vec(figure(), 9),
        text(),
        price(),
        (text(), text(), text()),
        prop::collection::vec(bench_reading(), 0..5),
    )
        .prop_map(
            |(
                name,
                neon,
                figures,
                colour,
                price_per_m,
                (source, electrode, measured_on),
                readings,
            )| TubeEntry {
                name,
                gas: if neon { Gas::Neon } else { Gas::ArgonMercury },
                outer_mm: figures[0],
                wall_mm: figures[1],
                colour,
                least_ma: figures[2],
                most_ma: figures[3],
                volts_per_m: figures[4],
                at_ma: figures[5],
                exponent: figures[6],
                pair_volts: figures[7],
                cold_factor: figures[8],
                price_per_m,
                source,
                electrode,
                readings,
                measured_on,
            },
        )
}

/// Lists have no empty names and none twice, as the reader demands.
fn named<T: std::fmt::Debug>(
    entry: impl Strategy<Value = T>,
    name: fn(&mut T) -> &mut String,
) -> impl Strategy<Value = Vec<T>> {
    prop::collection::vec(entry, 1..6).prop_map(move |mut list| {
        for (at, entry) in list.iter_mut().enumerate() {
            name(entry).push_str(&at.to_string());
        }
        list
    })
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(300))]

    #[test]
    fn supplies_written_and_read_are_the_same(list in named(supply(), |entry| &mut entry.name)) {
        let sheet = read_supplies(write_supplies(&list).as_bytes()).expect("a list of supplies");
        prop_assert_eq!(sheet, Sheet { entries: list, trouble: vec![] });
    }

    #[test]
    fn tubes_written_and_read_are_the_same(list in named(tube(), |entry| &mut entry.name)) {
        let sheet = read_tubes(write_tubes(&list).as_bytes()).expect("a list of tubes");
        prop_assert_eq!(sheet, Sheet { entries: list, trouble: vec![] });
    }

    #[test]
    fn a_book_written_and_read_is_the_same(
        mut supplies in prop::collection::vec(supply(), 0..4),
        tubes in prop::collection::vec(tube(), 0..4),
        // As typed, up to 15 digits: the JSON reader is exact for those, and may be off in the last
        // bit of a 17-digit one.
        typed in prop::collection::vec(0..999_999_999_i32, 4),
    ) {
        for (supply, typed) in supplies.iter_mut().zip(typed) {
            let figure = Some(f64::from(typed) / 1000.0);
            *supply = SupplyEntry {
                no_load_volts: figure,
                trip_ma: figure,
                ..SupplyEntry {
                    name: supply.name.clone(),
                    earthing: supply.earthing,
                    price: supply.price,
                    stock: supply.stock,
                    note: supply.note.clone(),
                    ..SupplyEntry::default()
                }
            };
        }
        let tubes = tubes.into_iter().map(|tube| TubeEntry {
            outer_mm: Some(12.5),
            name: tube.name,
            gas: tube.gas,
            price_per_m: tube.price_per_m,
            ..TubeEntry::default()
        }).collect();
        let book = Book { supplies, tubes, ..starter() };
        prop_assert_eq!(book::read(&book::write(&book)), Ok(book));
    }

    #[test]
    fn no_bytes_bring_the_readers_down(bytes in prop::collection::vec(any::<u8>(), 0..300)) {
        let with_head = [b"name,price\n".as_slice(), &bytes].concat();
        for bytes in [bytes, with_head] {
            for sentence in [read_supplies(&bytes).err(), read_tubes(&bytes).err()].into_iter().flatten() {
                prop_assert!(sentence.ends_with('.'), "{}", sentence);
            }
        }
    }
}

fn book_error(text: &str) -> String {
    book::read(text).expect_err("no book")
}

#[test]
fn book_files_that_cannot_be_read() {
    assert_snapshot!(book_error(""), @"This is not a book file: expected JSON written by this program, but the file ends too early (line 1, column 0).");
    assert_snapshot!(book_error("name,price"), @"This is not a book file: expected JSON written by this program, but no value stands there (line 1, column 2).");
    assert_snapshot!(book_error("[]"), @"This is not a book file: it has no “tubewright” field that says “book”.");
    assert_snapshot!(book_error("{}"), @"This is not a book file: it has no “tubewright” field that says “book”.");
    assert_snapshot!(book_error(r#"{"tubewright": "job", "version": 1, "name": "x"}"#), @"Expected a book file, but this is a “job” file.");
    assert_snapshot!(book_error(r#"{"tubewright": 7, "version": 1, "name": "x"}"#), @"This is not a book file: it has no “tubewright” field that says “book”.");
    assert_snapshot!(book_error(r#"{"tubewright": "book", "name": "x"}"#), @"This book file names no version that exists; this program knows versions up to 3.");
    assert_snapshot!(book_error(r#"{"tubewright": "book", "version": 4, "name": "x"}"#), @"This book file has version 4; this program knows versions up to 3. Open it with a newer program.");
    assert_snapshot!(book_error(r#"{"tubewright": "book", "version": 0, "name": "x"}"#), @"This book file names no version that exists; this program knows versions up to 3.");
    assert_snapshot!(book_error(r#"{"tubewright": "book", "version": -1, "name": "x"}"#), @"This book file names no version that exists; this program knows versions up to 3.");
    assert_snapshot!(book_error(r#"{"tubewright": "book", "version": 1}"#), @"This book file cannot be read: “name” is missing (line 1, column 36).");
    assert_snapshot!(book_error(r#"{"tubewright": "book", "version": 1, "name": "x", "shop": 1}"#), @"This book file cannot be read: unknown field “shop” (line 1, column 56).");
    assert_snapshot!(
        book_error(r#"{"tubewright": "book", "version": 1, "name": "x", "supplies": [{"no_load_volts": "9 kV"}]}"#),
        @"This book file cannot be read: expected a number, but found “9 kV” (line 1, column 87)."
    );
    assert_snapshot!(
        book_error(r#"{"tubewright": "book", "version": 1, "name": "x", "supplies": [{"price": "cheap"}]}"#),
        @r#"This book file cannot be read: expected an amount such as "12.50", but found “cheap” (line 1, column 80)."#
    );
    assert_snapshot!(
        book_error(r#"{"tubewright": "book", "version": 1, "name": "x", "supplies": [{"stock": -1}]}"#),
        @"This book file cannot be read: expected a whole number from 0 on, but found “-1” (line 1, column 75)."
    );
    for (supply, says) in [
        (
            r#"{"kind": "wooden"}"#,
            "expected iron or electronic, but found “wooden”",
        ),
        (r#"{"stock": 1, "stock": 2}"#, "“stock” is there twice"),
        (
            r#"{"stock": 1,}"#,
            "a comma stands before a closing bracket",
        ),
        (r#"{"stock" 1}"#, "“:” is missing"),
        (r#"{"stock": 1 "name": "x"}"#, "“,” or “}” is missing"),
        (r"{stock: 1}", "the name of a field must stand in quotes"),
        (r#"{"stock": }"#, "no value stands there"),
        (
            r#"{"earth_fault_protection": "yes"}"#,
            "expected true or false, but found “yes”",
        ),
        (r#"{"name": 7}"#, "expected text in quotes, but found “7”"),
        ("7", "expected fields in curly brackets, but found “7”"),
    ] {
        let text = format!(
            r#"{{"tubewright": "book", "version": 1, "name": "x", "supplies": [{supply}]}}"#
        );
        let told = book_error(&text);
        assert!(
            told.contains(&format!(" {says} (line 1, column ")),
            "{told}"
        );
    }
    assert_snapshot!(
        book_error(r#"{"tubewright": "book", "version": 1, "name": "x", "supplies": [{"no_load_volts": 1e999}]}"#),
        @"This is not a book file: expected JSON written by this program, but a number is too large (line 1, column 86)."
    );
    assert_snapshot!(book_error(&book::write(&starter())[..200]), @"This is not a book file: expected JSON written by this program, but the file ends too early (line 9, column 26).");
}

#[test]
fn text_is_decoded_or_explained() {
    assert_eq!(book::text_of(b"\xef\xbb\xbf{}"), Ok("{}".to_owned()));
    assert_eq!(book::text_of(b"M\xfcl"), Ok("Mül".to_owned()));
    for bytes in [&b"\xff\xfe{\0"[..], b"\xfe\xff\0{"] {
        let why = book::text_of(bytes).expect_err("UTF-16");
        assert!(
            why.starts_with("The file is text in UTF-16: save it"),
            "{why}"
        );
    }
    let why = book::text_of(b"{\0}\0").expect_err("no text");
    assert!(why.starts_with("The file is not plain text"), "{why}");
}

#[test]
fn the_demonstration_book_comes_back_to_the_byte() {
    let text = include_str!("../../catalog-demo/book.json");
    let book = book::read(text).expect("a book");
    assert_eq!(book::write(&book).trim_end(), text.trim_end());
    assert_eq!(
        book.rule_sets,
        starter().rule_sets,
        "as the program ships them"
    );
    let sheets = [
        (
            write_supplies(&book.supplies),
            include_str!("../../catalog-demo/supplies.csv"),
        ),
        (
            write_tubes(&book.tubes),
            include_str!("../../catalog-demo/tubes.csv"),
        ),
    ];
    for (written, stands) in sheets {
        assert_eq!(written.replace("\r\n", "\n"), stands.replace("\r\n", "\n"));
    }
}

#[test]
fn a_book_with_little_in_it_is_read_with_the_defaults() {
    let little = r#"{"tubewright": "book", "version": 1, "name": "x"}"#;
    let expect = Book {
        name: "x".to_owned(),
        ..Book::default()
    };
    assert_eq!(book::read(little), Ok(expect.clone()));
    assert_eq!(
        book::read(&format!("\u{feff}{little}")),
        Ok(expect),
        "byte-order mark"
    );
}

#[test]
fn deep_nesting_does_not_crash() {
    for open in [
        "[",
        r#"{"a":"#,
        r#"{"tubewright":"book","version":1,"name":"x","note":["#,
    ] {
        let sentence = book_error(&open.repeat(200_000));
        assert!(sentence.len() < 500, "{sentence}");
    }
    let sentence = book_error(&format!(
        r#"{{"tubewright":"book","version":1,"name":{}1{}}}"#,
        "[".repeat(5_000),
        "]".repeat(5_000)
    ));
    assert!(
        sentence.starts_with("This is not a book file"),
        "{sentence}"
    );
}

#[test]
fn limits_of_bending_are_kept_and_ask_for_the_version_that_knows_them() {
    // Rules of leads and feeds ask for a later version of their own.
    let older = || {
        let mut book = starter();
        book.rule_sets.retain(|set| set.name == "Shop rules");
        book
    };
    let plain = book::write(&older());
    assert!(plain.contains("\"version\": 1") && !plain.contains("bending"));
    let mut changed = older();
    changed.bending.least_spacing_diameters = None;
    changed.allowances.crossover_mm = 35.5;
    let text = book::write(&changed);
    assert!(text.contains("\"version\": 2"), "{text}");
    assert_eq!(book::read(&text), Ok(changed));
    assert_eq!(book::read(&plain), Ok(older()), "an old book as before");
}

#[test]
fn what_wires_and_measures_is_kept_and_asks_for_the_version_that_knows_it() {
    let text = book::write(&starter());
    assert!(text.contains("\"version\": 3"), "rules of leads");
    let mut plain = starter();
    plain.rule_sets.clear();
    let with = |change: fn(&mut Book)| {
        let mut changed = plain.clone();
        change(&mut changed);
        let text = book::write(&changed);
        assert!(text.contains("\"version\": 3"), "{text}");
        assert_eq!(book::read(&text), Ok(changed));
    };
    with(|book| {
        book.electrodes
            .push(tubewright::book::ElectrodeEntry::default());
    });
    with(|book| book.cables.push(tubewright::book::CableEntry::default()));
    with(|book| book.tubes[0].electrode = "shell".to_owned());
    with(|book| {
        book.tubes[0].readings.push(tubewright::book::Reading {
            length_mm: 1_000.0,
            ma: 25.0,
            volts: 800.0,
        });
    });
    with(|book| {
        book.supplies.push(SupplyEntry {
            chart: vec![tubewright::book::ChartLength::default()],
            ..SupplyEntry::default()
        });
    });
}
