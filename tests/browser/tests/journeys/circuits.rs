//! A circuit along its string: its joints and the stretch where a fault is not sensed.

use thirtyfour::prelude::*;
use tubewright_browser_tests::{Size, Visit, visit};

/// A tap at a place of the window that a script finds, once it has come to rest.
async fn tap(page: &Visit, place: &str) -> WebDriverResult<()> {
    let found = page.run(place).await?;
    let [x, y]: [f64; 2] = serde_json::from_value(found).expect("a place");
    for what in ["mousePressed", "mouseReleased"] {
        let event = serde_json::json!({
            "type": what, "x": x, "y": y, "button": "left", "buttons": 1, "clickCount": 1,
        });
        let driver = page.driver().cdp();
        driver.send_raw("Input.dispatchMouseEvent", event).await?;
    }
    Ok(())
}

/// The middle of the dot of joint 3.
const DOT: &str = "
    const dot = document.querySelectorAll('.plot-joint')[3];
    dot.scrollIntoView({ block: 'center' });
    const around = dot.getBoundingClientRect();
    return [around.x + around.width / 2, around.y + around.height / 2];";

/// The second electrode of the second piece.
const ELECTRODE: &str = "
    const path = document.querySelector('.picture-electrode');
    const [x, y] = path.getAttribute('d').split('M')[4].split('h')[0].split(' ').map(Number);
    const at = new DOMPoint(x, y).matrixTransform(path.getScreenCTM());
    return [at.x, at.y];";

async fn count(page: &Visit, find: &str) -> WebDriverResult<usize> {
    let found = page.driver().find_all(By::Css(find)).await?;
    Ok(found.len())
}

#[test]
fn a_joint_is_tapped_on_the_plot_and_seen_on_the_sign() {
    visit(Size::UprightTablet, async |page| {
        page.see("28 pieces").await?;
        page.go("Circuits").await?;
        page.see("Along the string").await?;
        assert_eq!(count(&page, ".picture-joint").await?, 0, "none is marked");
        tap(&page, DOT).await?;
        page.see("Joint 3, between “I” and “L”: ").await?;
        page.see(
            "to earth running, 4 500 V with a broken tube: insulation of the 5 kV class at least.",
        )
        .await?;
        let rings = ".picture-joint circle:not(.under)";
        assert_eq!(count(&page, rings).await?, 2, "both electrodes are ringed");

        // Where a fault is not sensed is told, drawn, and in the table.
        page.see("Hatched: a fault to earth here is not sensed")
            .await?;
        let hatched = page
            .run("return document.querySelector('.picture-unseen').getTotalLength()")
            .await?;
        assert!(hatched.as_f64().is_some_and(|mm| mm > 300.0), "{hatched}");
        page.see_no("A fault to earth is not sensed from").await?;
        page.press("As a table").await?;
        page.see("A fault to earth is not sensed from").await?;
        page.see("Joint 8, between “O” and “R”").await?;

        // By buttons to the end.
        for _ in 3..9 {
            page.press("Next joint").await?;
        }
        page.see("Lead B, at “R”: ").await?;
        assert!(!page.can_press("▸").await?, "there is no further");

        // Back on the sign, an electrode marks its joint.
        page.press("Show on the sign").await?;
        tap(&page, ELECTRODE).await?;
        page.see("Joint 2, between “U” and “I”: ").await?;
        page.see_no("Lead B, at “R”: ").await?;
        Ok(())
    });
}
