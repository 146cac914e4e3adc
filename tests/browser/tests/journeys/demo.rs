//! The invented jobs.

use tubewright_browser_tests::{Size, visit};

#[test]
fn every_demo_job_opens_and_can_be_built() {
    visit(Size::UprightTablet, async |page| {
        page.see("28 pieces").await?;
        for (job, circuits) in [
            ("Window word", 1),
            ("Long script in a double border", 3),
            ("Shop front, two lines", 3),
        ] {
            page.press("Files").await?;
            page.press(job).await?;
            page.see(&format!("Opened the job “{job}”")).await?;
            page.go("Circuits").await?;
            page.see("kept on this device").await?;
            let found = page.supplies_other_than(&[]).await?;
            assert_eq!(found.len(), circuits, "{job}: {found:?}");
            page.see_no("No supply in the shop book runs this.").await?;
            page.go("Price").await?;
            page.see("Total, €").await?;
            page.go("Sign").await?;
        }
        Ok(())
    });
}
