//! Typing a word and seeing glass, circuits and supplies follow.

use tubewright_browser_tests::{Size, visit};

#[test]
fn a_word_and_a_height_choose_the_supply() {
    visit(Size::UprightTablet, async |page| {
        page.see("Shop front, two lines").await?;
        page.press("Files").await?;
        page.press("New sign").await?;
        page.see("A new, empty sign").await?;
        page.press("+ Word").await?;
        page.type_in_row(1, "What it says", "NOVA").await?;
        page.type_in_row(1, "Letter height", "150").await?;
        // The unit is written out, so that the figure means the same wherever it is opened.
        assert_eq!(page.in_field(1, "Letter height").await?, "150 mm");
        page.see("4 pieces").await?;
        page.go("Circuits").await?;
        page.see("High voltage kills.").await?;
        let small = page.supplies_other_than(&[]).await?;
        assert_eq!(small.len(), 1, "one circuit: {small:?}");

        page.go("Sign").await?;
        page.type_in_row(1, "Letter height", "2 x 300 mm").await?;
        page.go("Circuits").await?;
        let large = page.supplies_other_than(&small).await?;
        assert_ne!(large, small, "four times the height is another supply");

        page.press("Undo").await?;
        assert_eq!(
            page.supplies_other_than(&large).await?,
            small,
            "undo brings the first back"
        );
        Ok(())
    });
}

#[test]
fn what_was_typed_is_still_there_after_a_reload_and_undo_reaches_behind_it() {
    visit(Size::Laptop, async |page| {
        page.see_kept().await?;
        page.type_in_row(1, "What it says", "WREN").await?;
        page.type_in_row(1, "Letter height", "17 5/8 in").await?;
        page.press("ft in").await?;
        page.see_kept().await?;
        page.reload().await?;
        page.see_kept().await?;
        assert_eq!(page.in_field(1, "What it says").await?, "WREN");
        assert_eq!(
            page.in_field(1, "Letter height").await?,
            "17 5/8 in",
            "kept as typed"
        );
        page.see("ft lit").await?;
        page.press("Undo").await?;
        page.press("Undo").await?;
        assert_eq!(page.in_field(1, "What it says").await?, "QUILLMOOR");
        Ok(())
    });
}

#[test]
fn what_cannot_be_read_gets_a_sentence_and_the_rest_still_counts() {
    visit(Size::LyingTablet, async |page| {
        page.see("28 pieces").await?;
        page.type_in_row(1, "Letter height", "12 parsecs").await?;
        page.see("12 parsecs").await?;
        page.see("19 pieces").await?;
        page.type_in_row(1, "Letter height", "2 km").await?;
        page.see("19 pieces").await?;
        page.type_in_row(1, "Letter height", "280 mm").await?;
        page.type_in_row(1, "What it says", "QUÏLL").await?;
        page.see("Ï").await?;
        page.see("23 pieces").await?;
        page.type_in_row(1, "Times", "many").await?;
        page.see("Expected a whole number").await?;
        Ok(())
    });
}

#[test]
fn rows_are_added_moved_copied_and_removed() {
    visit(Size::Laptop, async |page| {
        page.see("28 pieces").await?;
        page.press("+ Strokes").await?;
        page.type_in_row(
            3,
            "Lengths, a piece of glass each; part them by ;",
            "1200; 3 x 180 + 60",
        )
        .await?;
        page.see("30 pieces").await?;
        assert_eq!(
            page.in_field(3, "Lengths, a piece of glass each; part them by ;")
                .await?,
            "1200 mm; 3 x 180 mm + 60 mm"
        );
        page.press("Move row 3 up").await?;
        assert_eq!(
            page.in_field(3, "What it says").await?,
            "kettles & lamps mended"
        );
        page.press("Remove row 1").await?;
        page.see("21 pieces").await?;
        page.press("Undo").await?;
        page.see("30 pieces").await?;
        Ok(())
    });
}

#[test]
fn text_is_only_text() {
    visit(Size::Laptop, async |page| {
        page.see("28 pieces").await?;
        let script = "<img src=x onerror=document.title='broken-in'>";
        page.type_in_row(1, "What it says", script).await?;
        page.type_in("Name", script).await?;
        page.see_kept().await?;
        page.go("Glass").await?;
        page.go("Circuits").await?;
        page.see("High voltage kills.").await?;
        let images = page.run("return document.images.length").await?;
        assert_eq!(images, 0, "no element is made from text");
        assert_eq!(
            page.run("return document.title").await?,
            "Tubewright",
            "no script ran"
        );
        Ok(())
    });
}
