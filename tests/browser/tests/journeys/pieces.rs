//! Pieces of glass on the picture: joined, parted, cut, and wired in another order.

use thirtyfour::prelude::*;
use tubewright_browser_tests::{Size, Visit, visit};

/// 70 in one line with a corner, a circle of 10 round, and 40 straight, from left to right.
const ORNAMENT: &str = r##"<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 100 50"><path stroke="#ff0000" fill="none" d="M0 0 H40 V30"/><path stroke="#ff0000" fill="none" d="M60 0 H100"/><circle stroke="#0000ff" fill="none" cx="50" cy="25" r="10"/></svg>"##;

/// Drops a file on the page, as from a folder beside it.
async fn drop(page: &Visit, name: &str, text: &str) -> WebDriverResult<()> {
    let (name, text) = (serde_json::json!(name), serde_json::json!(text));
    let script = format!(
        "const files = new DataTransfer();
         files.items.add(new File([{text}], {name}));
         document.querySelector('.picture').dispatchEvent(
             new DragEvent('drop', {{ dataTransfer: files, bubbles: true, cancelable: true }}));"
    );
    page.run(&script).await?;
    Ok(())
}

async fn mouse(page: &Visit, what: &str, x: f64, y: f64) -> WebDriverResult<()> {
    let event = serde_json::json!({
        "type": what, "x": x, "y": y, "button": "left", "buttons": 1, "clickCount": 1,
    });
    page.driver()
        .cdp()
        .send_raw("Input.dispatchMouseEvent", event)
        .await?;
    Ok(())
}

/// Taps a piece (counted from 1) at a share of its length on the picture.
async fn tap(page: &Visit, piece: usize, share: f64) -> WebDriverResult<()> {
    let script = format!(
        "document.querySelector('.picture').scrollIntoView({{ block: 'center' }});
         const path = document.querySelector('.picture-piece[data-piece=\"{}\"]');
         const at = path.getPointAtLength({share} * path.getTotalLength());
         const there = at.matrixTransform(path.getScreenCTM());
         return [there.x, there.y];",
        piece - 1
    );
    let [x, y]: [f64; 2] =
        serde_json::from_value(page.run(&script).await?).expect("a point of the window");
    for what in ["mousePressed", "mouseReleased"] {
        mouse(page, what, x, y).await?;
    }
    Ok(())
}

/// What every circuit says, on its place.
async fn circuits(page: &Visit) -> WebDriverResult<String> {
    page.go("Circuits").await?;
    page.see("Circuit 1").await?;
    let found = page
        .run("return document.querySelector('main').innerText;")
        .await?;
    page.go("Sign").await?;
    page.see("This job").await?;
    Ok(found.as_str().unwrap_or_default().to_owned())
}

#[test]
fn a_dropped_drawing_is_joined_parted_and_cut_and_the_circuits_follow() {
    visit(Size::UprightTablet, async |page| {
        page.see("28 pieces").await?;
        drop(&page, "ornament.svg", ORNAMENT).await?;
        page.see("2 kinds of lines").await?;
        page.type_in_row(3, "Make it this wide", "500").await?;
        for colour in ["#ff0000", "#0000ff"] {
            page.choose_in_row(3, colour, "12 mm neon clear red")
                .await?;
        }
        page.see("31 pieces").await?;
        let apart = circuits(&page).await?;

        tap(&page, 29, 0.3).await?;
        page.see("piece 29, row 3").await?;
        page.press("Join with…").await?;
        page.see("Tap the piece to join it with").await?;
        tap(&page, 31, 0.5).await?;
        page.see("30 pieces").await?;
        page.see("1 joined").await?;
        let joined = circuits(&page).await?;
        assert_ne!(joined, apart, "the circuits follow");

        tap(&page, 29, 0.3).await?;
        page.press("Part at 1").await?;
        page.see("31 pieces").await?;
        tap(&page, 29, 0.3).await?;
        page.press("Cut…").await?;
        page.see("Tap the place on this piece").await?;
        tap(&page, 29, 0.4).await?;
        page.see("32 pieces").await?;
        page.see("1 cut").await?;
        assert_ne!(circuits(&page).await?, joined, "and follow again");
        page.go("Glass").await?;
        page.see("Pieces of glass").await?;
        let names = listed(&page).await?;
        assert!(
            names.iter().any(|name| name.ends_with(", part 3")),
            "the glass has the parts: {names:?}"
        );
        page.go("Sign").await?;

        page.see_kept().await?;
        page.reload().await?;
        page.see("32 pieces").await?;
        for pieces in ["31 pieces", "30 pieces", "31 pieces"] {
            page.press("Undo").await?;
            page.see(pieces).await?;
        }
        assert_eq!(circuits(&page).await?, apart, "as before anything was done");
        Ok(())
    });
}

#[test]
fn pieces_of_two_rows_are_not_joined() {
    visit(Size::Laptop, async |page| {
        page.see("28 pieces").await?;
        tap(&page, 1, 0.3).await?;
        page.press("Join with…").await?;
        tap(&page, 28, 0.3).await?;
        page.see("Only pieces of one row can be joined").await?;
        page.see("28 pieces").await?;
        Ok(())
    });
}

/// The pieces as the Glass place lists them.
async fn listed(page: &Visit) -> WebDriverResult<Vec<String>> {
    let found = page
        .run("return [...document.querySelectorAll('tr[data-piece] th button')].map(name => name.innerText.trim());")
        .await?;
    Ok(serde_json::from_value(found).unwrap_or_default())
}

#[test]
fn pieces_are_dragged_into_another_order() {
    visit(Size::LyingTablet, async |page| {
        page.see("28 pieces").await?;
        page.go("Glass").await?;
        page.see("Pieces of glass, in reading order").await?;
        let before = listed(&page).await?;
        assert_eq!(before[..3], ["Q", "U", "I"]);
        let middle = |piece: usize| {
            format!(
                "const handle = document.querySelector('tr[data-piece=\"{piece}\"] .handle');
                 handle.scrollIntoView({{ block: 'center' }});
                 const at = handle.getBoundingClientRect();
                 return [at.x + at.width / 2, at.y + at.height / 2];"
            )
        };
        let mut places: Vec<[f64; 2]> = Vec::new();
        for piece in [2, 0] {
            places.push(serde_json::from_value(page.run(&middle(piece)).await?).expect("a place"));
        }
        // The list has scrolled for the second: the first is looked up again, where it stands now.
        let look = middle(2).replace("handle.scrollIntoView({ block: 'center' });", "");
        places[0] = serde_json::from_value(page.run(&look).await?).expect("a place");
        let [[to_x, to_y], [x, y]] = [places[0], places[1]];
        mouse(&page, "mousePressed", x, y).await?;
        mouse(&page, "mouseMoved", x, f64::midpoint(y, to_y)).await?;
        mouse(&page, "mouseMoved", to_x, to_y).await?;
        mouse(&page, "mouseReleased", to_x, to_y).await?;
        page.see("Undo").await?;
        tokio::time::sleep(std::time::Duration::from_millis(300)).await;
        assert_eq!(listed(&page).await?[..3], ["U", "I", "Q"]);

        // By the keyboard back up again, the handle staying with its piece.
        page.run("document.querySelector('tr[data-piece=\"2\"] .handle').focus();")
            .await?;
        for _ in 0..2 {
            page.run(
                "document.activeElement.dispatchEvent(
                     new KeyboardEvent('keydown', { key: 'ArrowUp', bubbles: true, cancelable: true }));",
            )
            .await?;
            tokio::time::sleep(std::time::Duration::from_millis(300)).await;
        }
        assert_eq!(listed(&page).await?, before);
        // A piece stays in its row.
        page.run(
            "document.querySelector('tr[data-piece=\"8\"] .handle').dispatchEvent(
                 new KeyboardEvent('keydown', { key: 'ArrowDown', bubbles: true, cancelable: true }));",
        )
        .await?;
        page.see("among those of its row").await?;
        assert_eq!(listed(&page).await?, before);
        Ok(())
    });
}
