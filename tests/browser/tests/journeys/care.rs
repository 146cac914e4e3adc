//! Small things that would cost trust.

use tubewright_browser_tests::{Size, visit};

#[test]
fn what_was_refused_does_not_stay_over_another_job() {
    visit(Size::UprightTablet, async |page| {
        page.see("28 pieces").await?;
        page.type_in_row(1, "Times", "abc").await?;
        page.see("found “abc”; 1 still counts").await?;
        page.type_in("Mains volts at the sign", "9,000").await?;
        page.see("9000").await?;
        page.press("Files").await?;
        page.press("Window word").await?;
        page.see("Opened the job “Window word”").await?;
        assert_eq!(page.in_field(1, "Times").await?, "1");
        page.see_no("still counts").await?;
        page.see_no("9000").await?;
        Ok(())
    });
}

#[test]
fn a_finding_leads_to_its_place() {
    visit(Size::Laptop, async |page| {
        page.see("28 pieces").await?;
        page.type_in_row(2, "Letter height", "2 m 3 parsecs")
            .await?;
        page.go("Price").await?;
        page.press("All findings").await?;
        page.press("Go to row 2").await?;
        page.see("What it says").await?;
        page.see_no("Go to row 2").await?;
        Ok(())
    });
}

#[test]
fn undo_never_puts_another_supply_under_ones_hands() {
    visit(Size::UprightTablet, async |page| {
        page.see("28 pieces").await?;
        page.go("Shop book").await?;
        page.press("Add").await?;
        page.see("cannot be used").await?;
        page.type_in("Name", "Mine").await?;
        page.type_in("No-load volts, V", "9 kV").await?;
        page.see("9 000 V").await?;
        for _ in 0..3 {
            page.press("Undo").await?;
        }
        page.see_no("Mine").await?;
        page.see_no("No-load volts, V").await?;
        assert!(!page.can_press("Undo").await?, "all of it is undone");
        Ok(())
    });
}

#[test]
fn a_second_tab_is_told_of_in_both() {
    visit(Size::Laptop, async |page| {
        page.see("28 pieces").await?;
        page.see_no("another window or tab").await?;
        let first = page.driver().window().await?;
        let address = page.driver().current_url().await?;
        let second = page.driver().new_tab().await?;
        page.driver().switch_to_window(second).await?;
        page.driver().goto(address.as_str()).await?;
        page.see("open in another window or tab").await?;
        page.driver().switch_to_window(first).await?;
        page.see("open in another window or tab").await?;
        Ok(())
    });
}

#[test]
fn leaving_a_place_in_the_middle_of_a_word_loses_nothing() {
    visit(Size::UprightTablet, async |page| {
        page.see("28 pieces").await?;
        page.begin_in_row(1, "What it says", "WREN").await?;
        page.run("location.hash = '#circuits'").await?;
        page.see("High voltage kills.").await?;
        page.run("location.hash = '#sign'").await?;
        assert_eq!(page.in_field(1, "What it says").await?, "WREN");
        page.begin_in_row(1, "Times", "tw").await?;
        page.run("history.back()").await?;
        page.see("High voltage kills.").await?;
        page.go("Price").await?;
        page.see("Total, €").await?;
        page.see_no("Something went wrong").await?;
        Ok(())
    });
}

#[test]
fn half_typed_heights_are_kept_through_a_reload() {
    visit(Size::LyingTablet, async |page| {
        page.see("28 pieces").await?;
        page.begin_in_row(1, "Letter height", "355").await?;
        page.see_kept().await?;
        page.reload().await?;
        page.see_kept().await?;
        assert_eq!(page.in_field(1, "Letter height").await?, "355 mm");
        Ok(())
    });
}
