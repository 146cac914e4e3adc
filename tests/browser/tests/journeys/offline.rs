//! With the server gone.

use tubewright_browser_tests::{Size, dist, visit_at};
use xtask::serve::Server;

#[test]
fn once_loaded_the_page_works_with_the_server_gone() {
    let server = Server::start(&dist(), None).expect("a server of its own");
    let address = server.address();
    visit_at(&address.clone(), Size::UprightTablet, async move |page| {
        page.see("28 pieces").await?;
        page.wait_until_offline_ready().await?;
        server.stop();
        page.reload().await?;
        page.see("28 pieces").await?;
        page.type_in_row(1, "What it says", "AFAR").await?;
        page.see("23 pieces").await?;
        page.see_kept().await?;
        page.reload().await?;
        page.see("23 pieces").await?;
        page.go("Circuits").await?;
        let found = page.supplies_other_than(&[]).await?;
        assert!(!found.is_empty(), "the plan is worked out here");
        Ok(())
    });
}

#[test]
fn nothing_is_asked_of_any_other_origin() {
    let server = Server::start(&dist(), None).expect("a server of its own");
    let address = server.address();
    visit_at(&address.clone(), Size::Laptop, async move |page| {
        page.see("28 pieces").await?;
        for place in ["Glass", "Circuits", "Price", "Shop book", "Sign"] {
            page.go(place).await?;
        }
        let asked = page
            .run("return performance.getEntriesByType('resource').map((entry) => entry.name)")
            .await?;
        let asked: Vec<String> = serde_json::from_value(asked).expect("a list of addresses");
        assert!(asked.len() >= 3, "the page is made of files: {asked:?}");
        for name in asked {
            assert!(name.starts_with(&address), "{name} is not of {address}");
        }
        Ok(())
    });
}
