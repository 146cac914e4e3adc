//! How long the built page takes in Chromium where a person waits for it. `cargo xtask bench` runs it.
//!
//! Wall-clock figures of this machine as it is now: nothing is asserted of them.

use core::fmt::Write;
use std::time::Duration;

use thirtyfour::prelude::*;
use tubewright_browser_tests::{Size, Visit, visit};

/// How often each is measured; the middle one is told beside the shortest and the longest.
const TIMES: usize = 5;
/// Moves of the mouse in a drag, and the time between two of them.
const MOVES: u32 = 150;
const BETWEEN: Duration = Duration::from_millis(12);

/// An SVG file of 10,000 curves, about 1 MB, in 100 lines of two colours.
fn large_drawing() -> String {
    let mut svg = String::from(
        r#"<svg xmlns="http://www.w3.org/2000/svg" width="2000mm" height="1000mm" viewBox="0 0 2000 1000">"#,
    );
    for line in 0..100_u32 {
        let colour = ["#ff0000", "#0000ff"][line as usize % 2];
        let y = 5.0 + 9.9 * f64::from(line);
        let _ = write!(
            svg,
            r#"<path stroke="{colour}" fill="none" d="M0.0000000 {y:.7}"#
        );
        for at in 0..100_u32 {
            let x = 19.9 * f64::from(at);
            let high = y + 4.0 * f64::from((line * 7 + at * 13) % 11) / 11.0;
            let _ = write!(
                svg,
                " C{:.9} {:.9} {:.9} {:.9} {:.9} {:.9}",
                x + 6.123_456_7,
                high,
                x + 13.765_432_1,
                2.0 * y - high,
                x + 19.9,
                y
            );
        }
        svg.push_str("\"/>");
    }
    svg.push_str("</svg>");
    svg
}

/// A job of 500 letters.
fn long_sign() -> String {
    let rows: Vec<serde_json::Value> = (0..10)
        .map(|_| {
            serde_json::json!({
                "row": "text", "text": "THE QUICK BROWN FOX JUMPS OVER THE LAZY DOG AND THEN SLUMBERS",
                "height": "200 mm", "face": "sans", "tube": "12 mm neon clear red", "count": 1,
            })
        })
        .collect();
    serde_json::json!({ "tubewright": "job", "version": 1, "name": "Long", "rows": rows })
        .to_string()
}

/// Drops a file and waits until the page shows a text, drawn; milliseconds in between.
async fn drop_until(page: &Visit, name: &str, text: &str, shows: &str) -> WebDriverResult<f64> {
    let [name, text, shows] = [name, text, shows].map(|text| serde_json::json!(text));
    let script = format!(
        "const done = arguments[arguments.length - 1];
         const files = new DataTransfer();
         files.items.add(new File([{text}], {name}));
         const began = performance.now();
         document.querySelector('main').dispatchEvent(
             new DragEvent('drop', {{ dataTransfer: files, bubbles: true, cancelable: true }}));
         const look = () => document.body.innerText.includes({shows})
             ? requestAnimationFrame(() => done(performance.now() - began))
             : setTimeout(look, 2);
         look();"
    );
    let took = page.driver().execute_async(script, vec![]).await?;
    Ok(took.json().as_f64().unwrap_or(f64::NAN))
}

fn tell(what: &str, mut took_ms: Vec<f64>) {
    took_ms.sort_by(f64::total_cmp);
    let (first, middle, last) = (
        took_ms[0],
        took_ms[took_ms.len() / 2],
        took_ms[took_ms.len() - 1],
    );
    println!("{what}: {middle:.0} ms ({first:.0} to {last:.0})");
}

fn reading() {
    let drawing = large_drawing();
    println!("An SVG file of 10,000 curves, {} kB", drawing.len() / 1000);
    let mut took = Vec::new();
    for _ in 0..TIMES {
        visit(Size::UprightTablet, async |page| {
            page.see("28 pieces").await?;
            took.push(drop_until(&page, "large.svg", &drawing, "2 kinds of lines").await?);
            Ok(())
        });
    }
    tell("  from dropping it to its lines on the page", took);
}

fn panning() {
    visit(Size::UprightTablet, async |page| {
        page.see("28 pieces").await?;
        let took = drop_until(&page, "long.json", &long_sign(), "500 pieces").await?;
        println!("A sign of 500 letters\n  opened in {took:.0} ms");
        page.press("Larger").await?;
        page.press("Larger").await?;
        tokio::time::sleep(Duration::from_millis(600)).await;
        let place = page
            .run(
                "document.querySelector('.picture').scrollIntoView({ block: 'center' });
                 const at = document.querySelector('.picture-view').getBoundingClientRect();
                 window.between = []; let before;
                 const frame = now => { if (before) window.between.push(now - before);
                                        before = now; requestAnimationFrame(frame); };
                 requestAnimationFrame(frame);
                 return [at.x + at.width / 2, at.y + at.height / 3];",
            )
            .await?;
        let [x, y]: [f64; 2] = serde_json::from_value(place).expect("a place");
        let mouse = async |what: &str, x: f64| {
            let event = serde_json::json!({
                "type": what, "x": x, "y": y, "button": "left", "buttons": 1, "clickCount": 1,
            });
            page.driver()
                .cdp()
                .send_raw("Input.dispatchMouseEvent", event)
                .await
        };
        mouse("mousePressed", x).await?;
        page.run("window.between = [];").await?;
        for step in 0..MOVES {
            // To and fro, so that the sign stays in sight.
            mouse("mouseMoved", x + 150.0 * (f64::from(step) / 12.0).sin()).await?;
            tokio::time::sleep(BETWEEN).await;
        }
        let between = page.run("return window.between;").await?;
        mouse("mouseReleased", x).await?;
        let between: Vec<f64> = serde_json::from_value(between).expect("milliseconds");
        let all: f64 = between.iter().sum();
        let longest = between.iter().copied().fold(0.0, f64::max);
        #[allow(clippy::cast_precision_loss, reason = "a count of frames")]
        let rate = 1_000.0 * between.len() as f64 / all;
        println!("  panned at {rate:.1} frames a second, the longest frame {longest:.0} ms");
        Ok(())
    });
}

fn main() {
    reading();
    panning();
}
