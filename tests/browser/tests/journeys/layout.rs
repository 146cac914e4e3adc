//! Letters in several lines, wider, on an arc: seen on the picture and in the glass.

use tubewright_browser_tests::{Size, visit};

/// The strokes of the first letter as they are drawn.
const FIRST: &str = "return document.querySelector('.picture-piece').getAttribute('d')";

#[test]
fn several_lines_on_an_arc_change_the_picture_and_the_glass() {
    visit(Size::UprightTablet, async |page| {
        page.see("28 pieces").await?;
        page.type_in_row(1, "What it says", "HILL\nTENT").await?;
        assert_eq!(page.in_field(1, "What it says").await?, "HILL\nTENT");
        page.see("8 pieces").await?;
        // Two lines of straight capitals of 280 mm with 60 % of that between them.
        page.see("728 mm high").await?;
        page.press("Layout").await?;
        page.type_in_row(1, "Line gap, %", "100").await?;
        page.see("840 mm high").await?;

        // Of H, I, L, L, T, E, N, T at 280 mm every stroke is upright or level, but one of N: twice
        // as wide takes more glass, and the same height.
        let row = async || {
            page.run("return document.querySelector('.row-sums b').innerText")
                .await
        };
        let narrow = row().await?;
        page.type_in_row(1, "Letter width, %", "200").await?;
        page.see("width 200 %, line gap 100 %").await?;
        page.see("840 mm high").await?;
        assert_ne!(row().await?, narrow, "wider letters take more glass");

        let wide = row().await?;
        let straight = page.run(FIRST).await?;
        page.choose_in_row(1, "Arc", "by radius").await?;
        page.type_in_row(1, "Radius of the arc", "1500").await?;
        assert_eq!(page.in_field(1, "Radius of the arc").await?, "1500 mm");
        page.see_no("840 mm high").await?;
        let stands = page.run(FIRST).await?;
        assert_ne!(stands, straight, "the first letter leans");
        page.type_in_row(1, "Radius of the arc", "-1500").await?;
        page.see("on an arc that hangs").await?;
        assert_ne!(page.run(FIRST).await?, stands, "the other way");
        assert_eq!(
            row().await?,
            wide,
            "letters on an arc are not bent themselves"
        );
        page.type_in_row(1, "Radius of the arc", "12 parsecs")
            .await?;
        page.see("drawn straight").await?;
        page.press("Undo").await?;
        page.type_in_row(1, "Turned, degrees", "askew").await?;
        page.see("found “askew”").await?;
        page.type_in_row(1, "Turned, degrees", "-30").await?;
        page.see_no("askew").await?;
        page.see_kept().await?;

        // What is not as usual is open when one comes back to it.
        page.reload().await?;
        page.see("on an arc that hangs, turned -30°").await?;
        assert_eq!(page.in_field(1, "Radius of the arc").await?, "-1500 mm");
        Ok(())
    });
}
