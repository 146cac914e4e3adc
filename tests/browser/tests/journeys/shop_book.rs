//! The shop's own list decides.

use tubewright_browser_tests::{Size, visit};

#[test]
fn without_supplies_nothing_runs_and_the_page_says_what_to_do() {
    visit(Size::UprightTablet, async |page| {
        page.see("28 pieces").await?;
        page.press("Files").await?;
        page.press("Start my own book").await?;
        page.see("no supplies").await?;
        page.go("Circuits").await?;
        page.see("not in the shop book").await?;
        page.go("Sign").await?;
        page.choose_in_row(1, "Tube", "12 mm neon").await?;
        page.go("Circuits").await?;
        page.see("There is no supply to choose from").await?;
        Ok(())
    });
}

#[test]
fn a_supply_typed_in_from_its_nameplate_is_used() {
    visit(Size::Laptop, async |page| {
        page.see("28 pieces").await?;
        page.press("Files").await?;
        page.press("Start my own book").await?;
        page.see("no supplies").await?;
        page.press("Add").await?;
        page.type_in("Name", "Our 9 kV").await?;
        page.see("cannot be used").await?;
        page.type_in("No-load volts, V", "9000").await?;
        page.type_in("Short-circuit current, mA", "thirty").await?;
        page.see("Expected a number such as 450, but found “thirty”")
            .await?;
        page.type_in("Short-circuit current, mA", "30").await?;
        // What the plate does not say is not taken for granted: kind and earthing are asked for.
        page.see("The earthing of the output is not given").await?;
        page.choose("Kind", "iron transformer").await?;
        page.choose("Output", "mid-point earthed").await?;
        page.see_no("cannot be used").await?;
        page.choose("Made for", "wet, in the rain").await?;
        page.go("Sign").await?;
        page.press("Remove row 2").await?;
        page.choose_in_row(1, "Tube", "15 mm neon").await?;
        page.go("Circuits").await?;
        page.see("Our 9 kV").await?;
        page.see_kept().await?;
        page.reload().await?;
        page.see("Our 9 kV").await?;
        Ok(())
    });
}
