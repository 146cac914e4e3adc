//! Letters from the user's own font file, and filled artwork: the tube inside an outline.

use std::path::PathBuf;

use tubewright_browser_tests::{Size, visit};

/// The font of `tests/reference/outlines`.
fn font() -> PathBuf {
    let path = PathBuf::from(env!("CARGO_MANIFEST_DIR")).join("../reference/outlines/letters.ttf");
    // The driver takes no path with a way back in it.
    path.canonicalize().expect("the font of the references")
}

#[test]
fn a_font_file_gives_letters_and_an_inset_moves_their_glass() {
    visit(Size::UprightTablet, async |page| {
        page.see("28 pieces").await?;
        page.press("Files").await?;
        page.open_file(&font()).await?;
        page.see("type what its letters say").await?;
        page.type_in_row(3, "What it says", "SA").await?;
        // S, and A with its counter.
        page.see("31 pieces").await?;
        page.type_in_row(3, "Letter height", "1493").await?;
        // tests/reference/outlines: S is 7.27 m around, A 7.47 m with its counter; 60 mm inside they are
        // 6.73 m and 7.31 m.
        page.see("14.74 m lit").await?;
        page.type_in_row(3, "Inset", "60").await?;
        page.see("14.04 m lit").await?;
        page.type_in_row(3, "Inset", "150").await?;
        page.see("nothing is left of “S”, “A”").await?;
        page.type_in_row(3, "Inset", "60").await?;
        page.type_in_row(3, "What it says", "SAM").await?;
        page.see("no shape that can be used for “M”").await?;
        page.see_kept().await?;
        page.reload().await?;
        page.see("14.04 m lit").await?;
        page.press("Remove row 3").await?;
        page.see("28 pieces").await?;
        page.press("Undo").await?;
        page.see("14.04 m lit").await?;
        Ok(())
    });
}

#[test]
fn filled_artwork_is_inset_where_a_person_asks_for_it() {
    // A frame of 1000 with a hole of 600, by the even-odd rule.
    let svg = r##"<svg xmlns="http://www.w3.org/2000/svg" width="1000mm" height="1000mm" viewBox="0 0 100 100">
  <path fill="#ff0000" fill-rule="evenodd" d="M0 0 H100 V100 H0 Z M20 20 H80 V80 H20 Z"/>
</svg>"##;
    visit(Size::Laptop, async |page| {
        page.see("28 pieces").await?;
        let path =
            std::env::temp_dir().join(format!("tubewright-{}-frame.svg", std::process::id()));
        std::fs::write(&path, svg).expect("room for a file");
        page.press("Files").await?;
        page.open_file(&path).await?;
        page.see("6.40 m lit").await?;
        page.see("Type an inset to run it that far inside").await?;
        page.type_in_row(3, "Inset", "50").await?;
        // 4 · 900 outside; the hole 4 · 600 and around its corners a circle of 50: 2π · 50.
        page.see("6.31 m lit").await?;
        page.type_in_row(3, "Inset", "120").await?;
        page.see("nothing is left of the filled areas").await?;
        let _ = std::fs::remove_file(path);
        Ok(())
    });
}
