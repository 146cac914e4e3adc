//! Files that are broken, strange or only half right.

use std::io::Write;
use std::path::PathBuf;

use tubewright_browser_tests::{Size, visit};

/// A file of a test; each has a name of its own.
fn file(name: &str, bytes: &[u8]) -> PathBuf {
    let path = std::env::temp_dir().join(format!("tubewright-{}-{name}", std::process::id()));
    let mut file = std::fs::File::create(&path).expect("a file in the temporary folder");
    file.write_all(bytes).expect("room for it");
    path
}

#[test]
fn a_broken_file_gets_a_sentence_and_the_old_job_stays() {
    visit(Size::UprightTablet, async |page| {
        page.see("28 pieces").await?;
        page.type_in_row(1, "What it says", "KEEPME").await?;
        let wrong: [(&str, &[u8], &str); 6] = [
            (
                "cut.json",
                b"{\"tubewright\": \"job\", \"version\": 1, \"na",
                "line 1",
            ),
            (
                "newer.json",
                b"{\"tubewright\":\"job\",\"version\":7,\"name\":\"x\"}",
                "version 7",
            ),
            ("other.json", b"{\"width\": 3}", "This is not a job file"),
            ("photo.json", &[0xff, 0xd8, 0xff, 0xe0, 0, 16], "neither"),
            ("empty.json", b"", "empty"),
            (
                "list.csv",
                b"name,no_load_volts,short_circuit_ma\nA,many,30\n",
                "many",
            ),
        ];
        for (name, bytes, says) in wrong {
            let path = file(name, bytes);
            page.press("Files").await?;
            page.open_file(&path).await?;
            page.see(says).await?;
            assert_eq!(
                page.in_field(1, "What it says").await?,
                "KEEPME",
                "after {name}"
            );
            page.press("Close").await?;
            let _ = std::fs::remove_file(path);
        }
        Ok(())
    });
}

#[test]
fn a_list_half_right_is_taken_half_and_says_which() {
    visit(Size::Laptop, async |page| {
        page.see("28 pieces").await?;
        let path = file(
            "supplies.csv",
            "name;no_load_volts;short_circuit_ma;price\nUnser 8 kV;8000;30;99,50\nKaputt;viel;30;1\n"
                .as_bytes(),
        );
        page.press("Files").await?;
        page.open_file(&path).await?;
        page.see("supplies: 1 added, 0 replaced, none removed")
            .await?;
        page.see("viel").await?;
        page.see("Unser 8 kV").await?;
        page.see("99.50").await?;
        page.press("Undo").await?;
        page.see_no("Unser 8 kV").await?;
        let _ = std::fs::remove_file(path);
        Ok(())
    });
}
