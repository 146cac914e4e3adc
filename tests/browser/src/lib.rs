//! The page as a person at the tablet uses it: open, type, choose, see.
//!
//! Things are found by their role, label or text, as a person finds them. Every wait ends in a
//! sentence that says what was wanted and what stood there.
//!
//! Run by `cargo xtask test --only browser`, which builds on the built page in `dist/` and gives:
//! `TUBEWRIGHT_PAGE` (its address), `TUBEWRIGHT_DRIVER` (the driver's), `TUBEWRIGHT_CHROMIUM` (the
//! browser), `TUBEWRIGHT_DIST` (the folder).

#![allow(
    clippy::missing_panics_doc,
    reason = "a test panics where what it wants is not there; that is what it is for"
)]

use std::path::PathBuf;
use std::time::{Duration, Instant};

use thirtyfour::prelude::*;

/// How long a person would wait before saying that nothing happens.
const PATIENCE: Duration = Duration::from_secs(20);

/// A browser with the page in it.
#[derive(Debug)]
pub struct Visit {
    driver: WebDriver,
}

/// Size of the window in pixels.
#[derive(Debug, Clone, Copy)]
pub enum Size {
    /// 820 x 1180.
    UprightTablet,
    /// 1180 x 820.
    LyingTablet,
    /// 1440 x 900.
    Laptop,
    /// 390 x 844.
    Phone,
}

impl Size {
    const fn pixels(self) -> (u32, u32) {
        match self {
            Self::UprightTablet => (820, 1180),
            Self::LyingTablet => (1180, 820),
            Self::Laptop => (1440, 900),
            Self::Phone => (390, 844),
        }
    }
}

fn given(name: &str) -> String {
    std::env::var(name).unwrap_or_else(|_| {
        panic!("{name} is not set: these tests are run by `cargo xtask test --only browser`")
    })
}

/// The built page's folder.
pub fn dist() -> PathBuf {
    PathBuf::from(given("TUBEWRIGHT_DIST"))
}

/// Opens a fresh browser on the page, does a journey in it, and closes it whatever comes.
pub fn visit<F>(size: Size, journey: impl FnOnce(Visit) -> F)
where
    F: Future<Output = WebDriverResult<()>>,
{
    visit_at(&given("TUBEWRIGHT_PAGE"), size, journey);
}

/// The same on a page served elsewhere.
pub fn visit_at<F>(address: &str, size: Size, journey: impl FnOnce(Visit) -> F)
where
    F: Future<Output = WebDriverResult<()>>,
{
    let runtime = tokio::runtime::Builder::new_multi_thread()
        .worker_threads(1)
        .enable_all()
        .build()
        .expect("a runtime starts");
    runtime.block_on(async {
        let driver = open(size).await.expect("the browser opens");
        let page = Visit {
            driver: driver.clone(),
        };
        let outcome = match driver.goto(address).await {
            Ok(()) => journey(page).await,
            Err(error) => Err(error),
        };
        let closed = driver.quit().await;
        outcome.expect("the journey");
        closed.expect("the browser closes");
    });
}

async fn open(size: Size) -> WebDriverResult<WebDriver> {
    let mut wanted = DesiredCapabilities::chrome();
    wanted.set_binary(&given("TUBEWRIGHT_CHROMIUM"))?;
    let (width, height) = size.pixels();
    for argument in xtask::chromium::ARGS.iter().chain(&["--hide-scrollbars"]) {
        wanted.add_arg(argument)?;
    }
    let driver = WebDriver::new(given("TUBEWRIGHT_DRIVER"), wanted).await?;
    // A headless window refuses to be as narrow as a phone; the viewport does not.
    driver
        .cdp()
        .send_raw(
            "Emulation.setDeviceMetricsOverride",
            serde_json::json!({
                "width": width, "height": height, "deviceScaleFactor": 1, "mobile": false,
            }),
        )
        .await?;
    Ok(driver)
}

/// A text as an `XPath` literal.
fn literal(text: &str) -> String {
    if text.contains('\'') {
        format!("\"{text}\"")
    } else {
        format!("'{text}'")
    }
}

impl Visit {
    /// The driver, for what no verb covers.
    pub const fn driver(&self) -> &WebDriver {
        &self.driver
    }

    /// Finds something and brings it into the middle of the window, out from under the header and the
    /// strip, as a person would before pressing it.
    async fn find(&self, path: &str) -> WebDriverResult<WebElement> {
        let found = self
            .driver
            .query(By::XPath(path))
            .wait(PATIENCE, Duration::from_millis(50))
            .and_displayed()
            .first()
            .await?;
        found.scroll_into_view().await?;
        Ok(found)
    }

    /// Where a field of a row is typed into.
    fn typed_in_row(row: usize, label: &str) -> String {
        Self::in_row(row, label, "*[self::input or self::textarea]")
    }

    fn in_row(row: usize, label: &str, control: &str) -> String {
        format!(
            "//li[@data-row='{}']//label[span[normalize-space()={}]]//{control}",
            row - 1,
            literal(label)
        )
    }

    /// Types a text into a field of a row (counted from 1), in place of what was there.
    pub async fn type_in_row(&self, row: usize, label: &str, text: &str) -> WebDriverResult<()> {
        let field = self.find(&Self::typed_in_row(row, label)).await?;
        self.retype(&field, text).await
    }

    /// Types a text into a field of a row and stays in the field.
    pub async fn begin_in_row(&self, row: usize, label: &str, text: &str) -> WebDriverResult<()> {
        let field = self.find(&Self::typed_in_row(row, label)).await?;
        field.send_keys(Key::Control + "a").await?;
        field.send_keys(text).await
    }

    /// Types a text into a field anywhere on the place.
    pub async fn type_in(&self, label: &str, text: &str) -> WebDriverResult<()> {
        let path = format!("//label[span[normalize-space()={}]]//input", literal(label));
        let field = self.find(&path).await?;
        self.retype(&field, text).await
    }

    async fn retype(&self, field: &WebElement, text: &str) -> WebDriverResult<()> {
        field.send_keys(Key::Control + "a").await?;
        field.send_keys(Key::Delete).await?;
        field.send_keys(text).await?;
        field.send_keys(Key::Tab).await
    }

    /// What a field of a row holds.
    pub async fn in_field(&self, row: usize, label: &str) -> WebDriverResult<String> {
        let field = self.find(&Self::typed_in_row(row, label)).await?;
        Ok(field.prop("value").await?.unwrap_or_default())
    }

    /// Chooses from a list of a row by the words shown.
    pub async fn choose_in_row(&self, row: usize, label: &str, words: &str) -> WebDriverResult<()> {
        let list = Self::in_row(row, label, "select");
        self.find(&list).await?;
        let option = format!("{list}/option[normalize-space()={}]", literal(words));
        self.driver
            .query(By::XPath(&option))
            .first()
            .await?
            .click()
            .await
    }

    /// Chooses from a list anywhere on the place by the words shown.
    pub async fn choose(&self, label: &str, words: &str) -> WebDriverResult<()> {
        let list = format!(
            "//label[span[normalize-space()={}]]//select",
            literal(label)
        );
        self.find(&list).await?;
        let option = format!("{list}/option[normalize-space()={}]", literal(words));
        self.driver
            .query(By::XPath(&option))
            .first()
            .await?
            .click()
            .await
    }

    /// Presses a button or opens a link by its words.
    pub async fn press(&self, words: &str) -> WebDriverResult<()> {
        let words = literal(words);
        let path = format!(
            "//*[self::button or self::a or self::summary][normalize-space()={words} or @aria-label={words} or @title={words}]"
        );
        self.find(&path).await?.click().await
    }

    /// Whether a button can be pressed.
    pub async fn can_press(&self, words: &str) -> WebDriverResult<bool> {
        let path = format!("//button[normalize-space()={}]", literal(words));
        self.find(&path).await?.is_enabled().await
    }

    /// Goes to a place.
    pub async fn go(&self, place: &str) -> WebDriverResult<()> {
        let path = format!("//nav//a[span[normalize-space()={}]]", literal(place));
        self.find(&path).await?.click().await
    }

    /// All text in sight.
    pub async fn text(&self) -> WebDriverResult<String> {
        let body = self.driver.find(By::Tag("body")).await?;
        // Thin spaces between thousands read as spaces.
        Ok(body.text().await?.replace('\u{202f}', " "))
    }

    /// Waits until a text is in sight.
    pub async fn see(&self, wanted: &str) -> WebDriverResult<()> {
        self.until(wanted, |text| text.contains(wanted)).await
    }

    /// Waits until a text is gone.
    pub async fn see_no(&self, unwanted: &str) -> WebDriverResult<()> {
        self.until(&format!("no more “{unwanted}”"), |text| {
            !text.contains(unwanted)
        })
        .await
    }

    async fn until(&self, wanted: &str, holds: impl Fn(&str) -> bool) -> WebDriverResult<()> {
        let start = Instant::now();
        loop {
            let text = self.text().await?;
            if holds(&text) {
                return Ok(());
            }
            assert!(
                start.elapsed() < PATIENCE,
                "wanted: {wanted}\n   got: {text}"
            );
            tokio::time::sleep(Duration::from_millis(50)).await;
        }
    }

    /// Waits until every edit is on the device.
    pub async fn see_kept(&self) -> WebDriverResult<()> {
        self.see("kept on this device").await
    }

    /// The supplies of the plan, in order of the circuits.
    pub async fn supplies(&self) -> WebDriverResult<Vec<String>> {
        let mut names = Vec::new();
        for card in self.driver.find_all(By::Css(".card .supply")).await? {
            names.push(card.text().await?);
        }
        Ok(names)
    }

    /// Waits until the plan has other supplies than these, and gives the new ones.
    pub async fn supplies_other_than(&self, old: &[String]) -> WebDriverResult<Vec<String>> {
        let start = Instant::now();
        loop {
            let now = self.supplies().await?;
            if now != old && !now.is_empty() {
                return Ok(now);
            }
            assert!(
                start.elapsed() < PATIENCE,
                "wanted: other supplies than\n   got: {old:?}"
            );
            tokio::time::sleep(Duration::from_millis(50)).await;
        }
    }

    /// Gives a file to the page's “Open a file…”, with the Files panel open.
    pub async fn open_file(&self, path: &std::path::Path) -> WebDriverResult<()> {
        let input = self.driver.find(By::Css("input[type=file]")).await?;
        input.send_keys(path.to_string_lossy()).await
    }

    /// Loads the page anew.
    pub async fn reload(&self) -> WebDriverResult<()> {
        self.driver.refresh().await
    }

    /// Waits until the page's own worker holds all its files.
    pub async fn wait_until_offline_ready(&self) -> WebDriverResult<()> {
        let script = "const done = arguments[0]; navigator.serviceWorker.ready.then(() => done('ready'), (why) => done(String(why)));";
        let found = self.driver.execute_async(script, vec![]).await?;
        assert_eq!(
            found.json().as_str(),
            Some("ready"),
            "wanted: the worker ready"
        );
        Ok(())
    }

    /// Runs a script and gives its answer.
    pub async fn run(&self, script: &str) -> WebDriverResult<serde_json::Value> {
        Ok(self.driver.execute(script, vec![]).await?.json().clone())
    }
}
