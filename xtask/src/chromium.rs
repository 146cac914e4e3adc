//! Chromium and its driver: finding them, or saying what to install; starting and stopping the driver.

use std::fs::File;
use std::io::{Read, Write};
use std::net::{Ipv4Addr, TcpListener, TcpStream};
use std::path::{Path, PathBuf};
use std::process::{Child, Command, Stdio};
use std::time::{Duration, Instant};

use crate::Outcome;
use crate::programs::{self, Sought};

/// How Chromium is started for tests: unseen, in what a small machine or a container gives it, and
/// asking nothing of the network.
pub const ARGS: [&str; 9] = [
    "--headless",
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
    "--disable-dev-shm-usage",
];

/// How long the driver may take to answer on its port, and to stop.
const PATIENCE: Duration = Duration::from_secs(20);

/// A browser and the driver that steers it.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Browser {
    /// The browser's program.
    pub chromium: PathBuf,
    /// The driver's program.
    pub chromedriver: PathBuf,
}

const CHROMIUM: Sought = Sought {
    variable: "CHROME",
    names: &["chromium", "chromium-browser", "google-chrome"],
    places: &[
        "/usr/lib/chromium/chromium",
        "/usr/lib/chromium-browser/chromium-browser",
        "/snap/bin/chromium",
        "/Applications/Chromium.app/Contents/MacOS/Chromium",
        "/Applications/Google Chrome.app/Contents/MacOS/Google Chrome",
    ],
};

const CHROMEDRIVER: Sought = Sought {
    variable: "CHROMEDRIVER",
    names: &["chromedriver", "chromium.chromedriver"],
    places: &[
        "/usr/lib/chromium/chromedriver",
        "/usr/lib/chromium-browser/chromedriver",
        "/snap/bin/chromium.chromedriver",
    ],
};

/// Finds Chromium and its driver; installs them where this user may, on Debian and its kin.
///
/// # Errors
/// A sentence saying what to install.
pub fn ensure() -> Result<Browser, String> {
    programs::ensure(
        "Chromium and its driver",
        &["chromium", "chromium-driver"],
        find,
        missing,
    )
}

fn missing() -> String {
    "Chromium or its driver is missing. Install both, of the same version: `apt-get install \
     chromium chromium-driver` on Debian, `dnf install chromium chromedriver` on Fedora, `brew \
     install --cask chromium chromedriver` on macOS; or set CHROME and CHROMEDRIVER to where they \
     are."
        .to_owned()
}

fn find() -> Result<Option<Browser>, String> {
    let (chromium, chromedriver) = (CHROMIUM.find_here()?, CHROMEDRIVER.find_here()?);
    Ok(chromium
        .zip(chromedriver)
        .map(|(chromium, chromedriver)| Browser {
            chromium,
            chromedriver,
        }))
}

/// A running driver, stopped when dropped.
pub struct Driver {
    child: Child,
    port: u16,
}

impl Driver {
    /// Starts the driver on a free port and waits until it answers. What it says goes into a file.
    ///
    /// # Errors
    /// When it does not start, with the file to look into.
    pub fn start(chromedriver: &Path, log: &Path) -> Result<Self, String> {
        let says = |error: std::io::Error| {
            format!("{} cannot be started: {error}.", chromedriver.display())
        };
        let written = File::create(log)
            .map_err(|error| format!("Cannot write {}: {error}.", log.display()))?;
        // The driver takes no open port over; between here and its start the port is only likely free.
        let port = TcpListener::bind((Ipv4Addr::LOCALHOST, 0))
            .and_then(|listener| listener.local_addr())
            .map_err(says)?
            .port();
        let child = Command::new(chromedriver)
            .arg(format!("--port={port}"))
            .stdin(Stdio::null())
            .stderr(written.try_clone().map_err(says)?)
            .stdout(written)
            .spawn()
            .map_err(says)?;
        let mut driver = Self { child, port };
        let began = Instant::now();
        while TcpStream::connect((Ipv4Addr::LOCALHOST, port)).is_err() {
            let gone = driver.child.try_wait().map_err(says)?;
            if gone.is_some() || began.elapsed() > PATIENCE {
                return Err(format!(
                    "{} did not answer on port {port}; it may have said why in {}.",
                    chromedriver.display(),
                    log.display()
                ));
            }
            std::thread::sleep(Duration::from_millis(50));
        }
        Ok(driver)
    }

    /// Where it is reached: `http://127.0.0.1:PORT`.
    pub fn address(&self) -> String {
        format!("http://127.0.0.1:{}", self.port)
    }

    /// Asks the driver to end; unlike a killed one it takes its browsers along.
    fn ask_to_end(&self) -> std::io::Result<()> {
        let mut stream = TcpStream::connect((Ipv4Addr::LOCALHOST, self.port))?;
        stream.set_read_timeout(Some(PATIENCE))?;
        write!(
            stream,
            "GET /shutdown HTTP/1.1\r\nHost: 127.0.0.1:{}\r\n\r\n",
            self.port
        )?;
        stream.read(&mut [0; 64]).map(|_| ())
    }
}

impl Drop for Driver {
    fn drop(&mut self) {
        if self.ask_to_end().is_ok() {
            let began = Instant::now();
            while began.elapsed() < PATIENCE {
                if matches!(self.child.try_wait(), Ok(Some(_))) {
                    return;
                }
                std::thread::sleep(Duration::from_millis(50));
            }
        }
        // It has ended by itself, or nothing else is left to try.
        let _ended = self.child.kill();
        let _ended = self.child.wait();
    }
}

/// Settings for runners that start Chromium themselves, as the capabilities they ask for.
///
/// # Errors
/// When the file cannot be written.
pub fn write_capabilities(chromium: &Path, file: &Path) -> Outcome {
    let capabilities = serde_json::json!({
        "goog:chromeOptions": { "binary": chromium, "args": ARGS }
    });
    crate::files::write(file, capabilities.to_string().as_bytes())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::scratch::Scratch;

    const SOUGHT: Sought = Sought {
        variable: "SOUGHT",
        names: &["first", "second"],
        places: &["/nowhere/third"],
    };

    // Elsewhere a program's name has an ending.
    #[cfg(unix)]
    #[test]
    fn a_program_is_found_by_its_names_in_order() {
        let dir = Scratch::with(&[("a/second", ""), ("b/second", ""), ("b/first", "")]);
        let path = [dir.path().join("a"), dir.path().join("b")];
        assert_eq!(SOUGHT.find(None, &path), Ok(Some(path[1].join("first"))));
        assert_eq!(
            SOUGHT.find(None, &path[..1]),
            Ok(Some(path[0].join("second")))
        );
        assert_eq!(SOUGHT.find(None, &[]), Ok(None));
    }

    #[test]
    fn what_a_person_says_comes_first() {
        let dir = Scratch::with(&[("mine", ""), ("first", "")]);
        let path = [dir.path().to_owned()];
        let mine = dir.path().join("mine");
        assert_eq!(SOUGHT.find(Some(mine.clone()), &path), Ok(Some(mine)));
        let said = SOUGHT
            .find(Some(dir.path().join("none")), &path)
            .unwrap_err();
        assert!(
            said.starts_with("SOUGHT says ") && said.contains("no such program"),
            "{said}"
        );
    }

    #[test]
    fn a_driver_that_ends_at_once_is_reported() {
        let dir = Scratch::with(&[]);
        // This very test program ends at once, given an option it does not know.
        let program = std::env::current_exe().unwrap();
        let said = Driver::start(&program, &dir.path().join("log"))
            .err()
            .unwrap();
        assert!(
            said.contains("did not answer on port") && said.contains("log"),
            "{said}"
        );
        assert!(
            !crate::files::read(&dir.path().join("log"))
                .unwrap()
                .is_empty()
        );
    }

    #[test]
    fn the_capabilities_name_the_browser() {
        let dir = Scratch::with(&[]);
        let file = dir.path().join("webdriver.json");
        write_capabilities(Path::new("/bin/chromium"), &file).unwrap();
        let written: serde_json::Value =
            serde_json::from_str(&crate::files::read_text(&file).unwrap()).unwrap();
        assert_eq!(written["goog:chromeOptions"]["binary"], "/bin/chromium");
        assert_eq!(written["goog:chromeOptions"]["args"][0], "--headless");
    }
}
