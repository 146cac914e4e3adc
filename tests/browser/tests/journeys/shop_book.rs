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

#[test]
fn a_tube_measured_at_the_bench_says_how_well_it_is_known_and_why_it_is_not() {
    visit(Size::UprightTablet, async |page| {
        page.see("28 pieces").await?;
        page.go("Shop book").await?;
        page.press("Tube types").await?;
        page.press("Add").await?;
        page.type_in("Name", "Our 15 mm neon").await?;
        page.type_in("Outer diameter, mm", "15").await?;
        page.see("591 V/m at 25 mA, model, ±15 %").await?;
        for (number, length, volts) in
            [(1, "500", "480"), (2, "1 m", "762"), (3, "1500 mm", "1038")]
        {
            page.press("Add a reading").await?;
            page.type_in(&format!("Length of reading {number}"), length)
                .await?;
            page.type_in(&format!("Milliamperes of reading {number}"), "30")
                .await?;
            page.type_in(&format!("Volts of reading {number}"), volts)
                .await?;
        }
        // By hand: the slope is 558 V/m, residuals are 1, -2 and 1 V, so that s² = 6; with Student's t
        // of 12.71 the slope is known to 12.71 x sqrt(6 / 0.5) = 44 V/m.
        page.see("558 ± 44 V/m").await?;
        page.see("558 V/m at 30 mA, measured here, 3 readings, ±4.1 %")
            .await?;
        page.type_in("Measured on", "2026-05-03").await?;
        page.see("measured here on 3 May 2026, 3 readings").await?;
        // First and last changed round: no tube takes fewer volts for more glass.
        page.type_in("Volts of reading 1", "1038").await?;
        page.type_in("Volts of reading 3", "480").await?;
        page.see(
            "The bench readings are not used: at 30.0 mA the volts fall by 558 V for each metre",
        )
        .await?;
        page.see_no("3 May 2026, 3 readings").await?;
        page.press("Undo").await?;
        page.press("Undo").await?;
        page.see("measured here on 3 May 2026, 3 readings").await?;
        page.see_kept().await?;
        page.reload().await?;
        page.press("Tube types").await?;
        page.see("measured here on 3 May 2026, 3 readings").await?;
        Ok(())
    });
}
