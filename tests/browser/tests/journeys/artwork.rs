//! Artwork from a file.

use std::path::PathBuf;

use tubewright_browser_tests::{Size, visit};

const ORNAMENT: &str = r##"<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 100 50">
  <path stroke="#ff0000" fill="none" d="M0 0 H40"/>
  <path stroke="#ff0000" fill="none" d="M40 0 V30"/>
  <path stroke="#ff0000" fill="none" d="M60 0 H100"/>
  <circle stroke="#0000ff" fill="none" cx="50" cy="25" r="10"/>
  <text x="1" y="1">hello</text>
</svg>"##;

fn file(name: &str, text: &str) -> PathBuf {
    let path = std::env::temp_dir().join(format!("tubewright-{}-{name}", std::process::id()));
    std::fs::write(&path, text).expect("room for a file");
    path
}

#[test]
fn an_svg_is_sized_its_colours_given_tubes_and_kept() {
    visit(Size::UprightTablet, async |page| {
        page.see("28 pieces").await?;
        let path = file("ornament.svg", ORNAMENT);
        page.press("Files").await?;
        page.open_file(&path).await?;
        page.see("2 kinds of lines").await?;
        page.see("does not say how large it is").await?;
        page.see("text must be turned into outlines").await?;
        page.type_in_row(3, "Make it this wide", "500").await?;
        page.see("lines of #ff0000").await?;
        page.choose_in_row(3, "#ff0000", "12 mm neon clear red")
            .await?;
        page.choose_in_row(3, "#0000ff", "not tube").await?;
        // 40 and 30 join at the corner, 40 stays alone: five times the file's units.
        page.see("30 pieces").await?;
        page.see_no("have no tube yet").await?;
        page.see_kept().await?;
        page.reload().await?;
        page.see("30 pieces").await?;
        page.choose_in_row(3, "#0000ff", "12 mm neon clear red")
            .await?;
        page.see("31 pieces").await?;
        for _ in 0..5 {
            page.press("Undo").await?;
        }
        page.see("28 pieces").await?;
        let _ = std::fs::remove_file(path);
        Ok(())
    });
}

#[test]
fn artwork_that_is_none_is_refused_with_a_sentence() {
    visit(Size::Laptop, async |page| {
        page.see("28 pieces").await?;
        for (name, text, says) in [
            (
                "cut.svg",
                "<svg xmlns=\"http://www.w3.org/2000/svg\"><path d=\"M0",
                "was not opened",
            ),
            (
                "page.svg",
                "<html><script>document.title='broken-in'</script></html>",
                "was not opened",
            ),
            (
                "empty.svg",
                "<svg xmlns=\"http://www.w3.org/2000/svg\"/>",
                "no lines that can be measured",
            ),
            ("cut.dxf", "0\nSECTION\n2\nENT", "was not opened"),
        ] {
            let path = file(name, text);
            page.press("Files").await?;
            page.open_file(&path).await?;
            page.see(says).await?;
            page.see("28 pieces").await?;
            page.press("Close").await?;
            let _ = std::fs::remove_file(path);
        }
        assert_eq!(
            page.run("return document.title").await?,
            "Tubewright",
            "no script ran"
        );
        Ok(())
    });
}
