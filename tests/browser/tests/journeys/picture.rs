//! Looking at the sign from near, from the back, and in plain lines.

use thirtyfour::prelude::*;
use tubewright_browser_tests::{Size, Visit, visit};

/// What stands on the screen: the pixels and the millimetres of the scale bar, the height of the I of
/// 280 mm in pixels, and the middle of that I.
struct Seen {
    bar_px: f64,
    bar_mm: f64,
    high_px: f64,
    x: f64,
    y: f64,
}

async fn seen(page: &Visit) -> WebDriverResult<Seen> {
    // A picture that has just been stretched comes to rest.
    tokio::time::sleep(std::time::Duration::from_millis(400)).await;
    let found = page
        .run(
            "const bar = document.querySelector('.picture-scale');
             const i = document.querySelectorAll('.picture-piece')[2].getBoundingClientRect();
             return [bar.firstElementChild.getBoundingClientRect().width,
                     parseFloat(bar.textContent.replace(/[^0-9]/g, '')),
                     i.height, i.x + i.width / 2, i.y + i.height / 2];",
        )
        .await?;
    let [bar_px, bar_mm, high_px, x, y] = serde_json::from_value(found).expect("five figures");
    Ok(Seen {
        bar_px,
        bar_mm,
        high_px,
        x,
        y,
    })
}

impl Seen {
    fn is_true(&self, when: &str) {
        let (bar, letter) = (self.bar_px / self.bar_mm, self.high_px / 280.0);
        assert!(
            (bar / letter - 1.0).abs() < 0.005,
            "{when}: the bar has {bar} px for a millimetre, the letter {letter}"
        );
    }
}

async fn mouse(page: &Visit, what: &str, (x, y): (f64, f64), wheel: f64) -> WebDriverResult<()> {
    let button = if what == "mouseWheel" { "none" } else { "left" };
    let event = serde_json::json!({
        "type": what, "x": x, "y": y, "button": button, "buttons": 1, "clickCount": 1,
        "deltaX": 0, "deltaY": wheel,
    });
    page.driver()
        .cdp()
        .send_raw("Input.dispatchMouseEvent", event)
        .await?;
    Ok(())
}

#[test]
fn the_scale_bar_stays_true_however_near_the_sign_is_looked_at() {
    visit(Size::LyingTablet, async |page| {
        page.see("28 pieces").await?;
        let whole = seen(&page).await?;
        whole.is_true("the whole");
        assert!(!page.can_press("Fit").await?, "there is no more of it");
        page.press("Larger").await?;
        let near = seen(&page).await?;
        near.is_true("a step nearer");
        assert!(near.high_px > 1.4 * whole.high_px, "nearer by the button");

        // The wheel keeps what is under it: here the I.
        mouse(&page, "mouseWheel", (near.x, near.y), -400.0).await?;
        let nearer = seen(&page).await?;
        nearer.is_true("by the wheel");
        assert!(nearer.high_px > 1.5 * near.high_px, "nearer by the wheel");
        let off = (nearer.x - near.x).hypot(nearer.y - near.y);
        assert!(off < 1.5, "the letter under the wheel stays: {off} px off");

        // A drag moves it as far as the mouse, and marks nothing.
        mouse(&page, "mousePressed", (near.x, near.y), 0.0).await?;
        for step in 1..=10 {
            let to = (
                near.x + 6.0 * f64::from(step),
                near.y + 2.0 * f64::from(step),
            );
            mouse(&page, "mouseMoved", to, 0.0).await?;
        }
        mouse(&page, "mouseReleased", (near.x + 60.0, near.y + 20.0), 0.0).await?;
        let dragged = seen(&page).await?;
        dragged.is_true("dragged");
        let off = (dragged.x - nearer.x - 60.0).hypot(dragged.y - nearer.y - 20.0);
        assert!(off < 1.5, "the letter follows the mouse: {off} px off");
        page.see_no("piece 3, row 1").await?;

        // Where it is now, a tap finds it.
        let at = (dragged.x, dragged.y);
        mouse(&page, "mousePressed", at, 0.0).await?;
        mouse(&page, "mouseReleased", at, 0.0).await?;
        page.see("piece 3, row 1").await?;

        // The keyboard: off a step, along, and back to the whole.
        page.run("document.querySelector('[aria-label^=\"Picture of the sign\"]').focus()")
            .await?;
        let keys = page.driver().active_element().await?;
        keys.send_keys("-").await?;
        let off = seen(&page).await?;
        off.is_true("a key off");
        assert!(off.high_px < 0.7 * dragged.high_px, "further off by a key");
        keys.send_keys(Key::Right).await?;
        assert!(seen(&page).await?.x < off.x - 50.0, "what is on the right");
        keys.send_keys("0").await?;
        let back = seen(&page).await?;
        back.is_true("the whole again");
        assert!((back.x - whole.x).abs() < 0.5, "where it was");
        Ok(())
    });
}

/// The middle of each piece across, and whether numbers of circuits can be read.
const ACROSS: &str = "
return [[...document.querySelectorAll('.picture-piece')].map((piece) => {
  const around = piece.getBoundingClientRect();
  return around.x + around.width / 2;
}), [...document.querySelectorAll('.picture-number text')].every((text) => text.getScreenCTM().a > 0)]";

#[test]
fn the_back_view_mirrors_the_sign_and_says_so() {
    visit(Size::UprightTablet, async |page| {
        page.see("28 pieces").await?;
        page.press("Circuits").await?;
        let across = async || -> WebDriverResult<(Vec<f64>, bool)> {
            Ok(serde_json::from_value(page.run(ACROSS).await?).expect("figures"))
        };
        let (front, _) = across().await?;
        page.see_no("mirrored").await?;
        page.press("Back view").await?;
        page.see("mirrored").await?;
        let (back, readable) = across().await?;
        assert!(readable, "the circuits' numbers are not mirrored");
        assert_eq!(back.len(), front.len(), "every piece");
        let (first, second) = (front[0] + back[0], front[1] + back[1]);
        assert!(
            front[0] < front[1] && back[0] > back[1],
            "the other way round"
        );
        assert!(
            (first - second).abs() < 0.5
                && front
                    .iter()
                    .zip(&back)
                    .all(|(f, b)| (f + b - first).abs() < 0.5),
            "all about one middle: {front:?} {back:?}"
        );
        page.press("Back view").await?;
        page.see_no("mirrored").await?;
        assert_eq!(across().await?.0, front, "as before");

        page.press("Plain lines").await?;
        let widest = page
            .run("return Math.max(...[...document.querySelectorAll('.picture-tube path')].filter((path) => getComputedStyle(path).display !== 'none').map((path) => parseFloat(path.getAttribute('stroke-width')) * path.getScreenCTM().a))")
            .await?;
        let widest = widest.as_f64().unwrap_or_default();
        assert!((1.0..=2.5).contains(&widest), "thin lines: {widest} px");
        Ok(())
    });
}
