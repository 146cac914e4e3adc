//! Leads and the feed: cable and lengths typed, what they leak, a lead that is too long, amperes.

use std::path::PathBuf;

use tubewright_browser_tests::{Size, visit};

/// A shop of one supply, one tube, one cable and rules of its own.
const BOOK: &str = r#"{
  "tubewright": "book", "version": 3, "name": "Wiring shop", "note": "Invented.",
  "supplies": [{
    "name": "6 kV 30 mA", "kind": "iron", "earthing": "mid-point", "input_volts": 230,
    "input_hertz": 50, "input_va": 184, "no_load_volts": 6000, "short_circuit_ma": 30,
    "earth_fault_protection": true, "trip_ma": 15, "open_circuit_protection": true
  }],
  "tubes": [{
    "name": "plain", "outer_mm": 12, "volts_per_m": 600, "exponent": 0, "pair_volts": 200
  }],
  "cables": [{ "name": "Sixty", "rated_volts": 5000, "pf_per_m": 60 }],
  "rule_sets": [{
    "name": "House rules", "edition": "1",
    "rules": [
      { "limits": "lead-in-metal", "value": 6096, "clause": "L1", "standing": "shop-setting" },
      { "limits": "tube-circuit", "value": 30, "clause": "F1", "standing": "shop-setting" },
      { "limits": "continuous-load", "value": 125, "clause": "F2", "standing": "shop-setting" }
    ]
  }]
}"#;

/// Two bars of 2 m, 1 400 V each.
const JOB: &str = r#"{
  "tubewright": "job", "version": 3, "name": "Two bars", "rules": "House rules",
  "rows": [{
    "row": "strokes", "label": "bar", "strokes": "2 m; 2 m", "tube": "plain", "count": 1
  }]
}"#;

/// A file of a test; each has a name of its own.
fn file(name: &str, text: &str) -> PathBuf {
    let path = std::env::temp_dir().join(format!("tubewright-{}-{name}", std::process::id()));
    std::fs::write(&path, text).expect("room for a file");
    path
}

#[test]
fn leads_leak_a_long_one_is_found_and_the_feed_has_its_amperes() {
    visit(Size::UprightTablet, async |page| {
        page.see("28 pieces").await?;
        let files = [file("wiring-book.json", BOOK), file("wiring-job.json", JOB)];
        page.press("Files").await?;
        page.open_file(&files[0]).await?;
        page.see("Wiring shop").await?;
        page.press("Files").await?;
        page.open_file(&files[1]).await?;
        page.see("2 pieces").await?;
        page.go("Circuits").await?;
        page.see("Leads are not described").await?;
        page.see("What these leads leak is not known").await?;

        page.choose("Cable", "Sixty").await?;
        page.type_in("Every lead A", "5 m").await?;
        page.type_in("Every lead B", "2 m").await?;
        page.type_in("Every jumper", "300").await?;
        // 60 pF/m, 7 m in all at 1 400 V and 50 Hz: 0.185 mA; 3 m more on one side: 0.079 mA.
        page.see("0.18 mA").await?;
        page.see("0.08 mA").await?;
        page.see("it trips at 14.92 mA more").await?;
        page.see("typed for all").await?;

        page.type_in("Lead A of this circuit", "7 m").await?;
        page.see("Lead A is 7 000 mm long in metal conduit; the limit is 6 096 mm")
            .await?;
        page.see("House rules (1), L1").await?;
        page.press("Undo").await?;
        page.see_no("Lead A is 7 000 mm long").await?;

        // 184 VA at 230 V are 0.8 A, counted as 1.0 A.
        page.see("0.8 A").await?;
        page.see("counted, 125 %").await?;
        page.see("1.0 A").await?;
        page.type_in("Branch circuit, A", "32").await?;
        page.see("at most 30 A, but this one for 32 A").await?;
        page.type_in("Branch circuit, A", "16").await?;
        page.see("branch circuit needed").await?;
        page.choose("Conductor", "2.5 mm², at 20 °C").await?;
        page.type_in("Length of the feed, one way", "50 m").await?;
        // 2 x 50 m x 7.41 ohm/km x 0.8 A.
        page.see("0.6 V").await?;
        page.see_kept().await?;
        page.reload().await?;
        page.see("0.18 mA").await?;
        page.see("0.6 V").await?;
        for file in files {
            let _ = std::fs::remove_file(file);
        }
        Ok(())
    });
}
