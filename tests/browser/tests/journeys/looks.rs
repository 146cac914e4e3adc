//! What every place must look like on every screen.

use tubewright_browser_tests::{Size, visit};

/// Elements a finger presses that are smaller than 44 px (links inside sentences aside), elements
/// that reach beyond the window, and words on a ground they hardly stand out from.
const LOOK_AROUND: &str = r#"
const wrong = [];
const named = (e) => (e.tagName + "." + e.getAttribute("class") + " " + (e.textContent || e.ariaLabel || "").trim().slice(0, 30));
for (const e of document.querySelectorAll("button, select, textarea, a, summary, label.button, input:not(.unseen):not([type=checkbox])")) {
  const r = e.getBoundingClientRect();
  if (r.width && (r.height < 43.5 || r.width < 43.5)) wrong.push("too small to press: " + named(e) + " " + r.width + "x" + r.height);
}
if (document.documentElement.scrollWidth > innerWidth) {
  for (const e of document.querySelectorAll("main *")) {
    if (e.getBoundingClientRect().right > innerWidth + 1 && !e.closest(".scroll, svg")) wrong.push("reaches beyond the window: " + named(e));
  }
}
const parts = (colour) => (colour.match(/[\d.]+/g) || []).map(Number);
const light = ([r, g, b]) => {
  const f = (v) => { v /= 255; return v <= 0.04045 ? v / 12.92 : ((v + 0.055) / 1.055) ** 2.4; };
  return 0.2126 * f(r) + 0.7152 * f(g) + 0.0722 * f(b);
};
const ground = (e) => {
  for (let at = e; at; at = at.parentElement) {
    const c = parts(getComputedStyle(at).backgroundColor);
    if (c.length === 3 || c[3] > 0.8) return c;
    if (getComputedStyle(at).backgroundImage !== "none") return [22, 25, 30];
  }
  return [255, 255, 255];
};
for (const e of document.querySelectorAll("body *")) {
  if (e.closest("svg, option, script") || e.disabled) continue;
  const own = [...e.childNodes].some((n) => n.nodeType === 3 && n.textContent.trim());
  if (!own || !e.getBoundingClientRect().width) continue;
  const [a, b] = [light(parts(getComputedStyle(e).color)), light(ground(e))].sort((x, y) => y - x);
  const ratio = (a + 0.05) / (b + 0.05);
  if (ratio < 4.5) wrong.push("hard to read, " + ratio.toFixed(2) + ": " + named(e));
}
return [...new Set(wrong)];
"#;

fn every_place_in(size: Size, dark: bool) {
    visit(size, async move |page| {
        if dark {
            page.driver()
                .cdp()
                .send_raw(
                    "Emulation.setEmulatedMedia",
                    serde_json::json!({
                        "features": [{ "name": "prefers-color-scheme", "value": "dark" }]
                    }),
                )
                .await?;
        }
        page.see("28 pieces").await?;
        let mut wrong = Vec::new();
        for place in ["Glass", "Circuits", "Price", "Shop book", "Sign"] {
            page.go(place).await?;
            if place == "Sign" {
                page.press("Layout").await?;
                page.choose_in_row(1, "Arc", "by rise").await?;
                page.type_in_row(1, "Turned, degrees", "askew").await?;
                page.press("Plain lines").await?;
                page.press("Back view").await?;
                page.type_in_row(1, "Letter height", "12 parsecs").await?;
                page.press("Files").await?;
                page.see("Invented jobs to try").await?;
            }
            // Colours fade in; what counts is where they end.
            tokio::time::sleep(std::time::Duration::from_millis(300)).await;
            let found = page.run(LOOK_AROUND).await?;
            let found: Vec<String> = serde_json::from_value(found).expect("a list of sentences");
            wrong.extend(found.into_iter().map(|what| format!("{place}: {what}")));
        }
        assert!(wrong.is_empty(), "{}", wrong.join("\n"));
        Ok(())
    });
}

#[test]
fn on_an_upright_tablet() {
    every_place_in(Size::UprightTablet, false);
}

#[test]
fn on_a_lying_tablet_in_the_dark() {
    every_place_in(Size::LyingTablet, true);
}

#[test]
fn on_a_phone_in_the_dark() {
    every_place_in(Size::Phone, true);
}

#[test]
fn on_a_laptop() {
    every_place_in(Size::Laptop, false);
}
