//! `cargo xtask build`: the page, ready to be put on any web server, in `dist/`.
//!
//! What lands there: `page_bg.wasm` and `page.js` made of the crate in `www/`, that folder's static
//! files, and the offline worker with the exact list of all of it. `dist/` is replaced whole and last: a failed build leaves the old one alone.

use std::path::{Path, PathBuf};
use std::process::Command;

use serde_json::{Value, json};
use wasm_bindgen_cli_support::Bindgen;

use crate::{Outcome, files, paths, run};

/// What the page is compiled to.
pub const TARGET: &str = "wasm32-unknown-unknown";
/// The page's package.
pub const PAGE: &str = "tubewright-www";
/// The file by which the browser keeps the page for when it is offline.
const WORKER: &str = "offline.js";
/// Where the worker's source waits for the list of files: `[[path, sha256], …]`.
const FILES: &str = "\"__FILES__\"";
/// Where it waits for a word that changes when any file does.
const VERSION: &str = "\"__VERSION__\"";
/// What lies in the page's folder but is no part of the page; names at its top level.
const NOT_THE_PAGE: [&str; 5] = [
    "Cargo.toml",
    "clippy.toml",
    "src",
    "tests",
    "webdriver.json",
];

/// The command.
///
/// # Errors
/// The sentence of the step that failed; `dist/` is then as it was.
pub fn build() -> Outcome {
    ensure_target()?;
    println!("Compiling the page.");
    let wasm = compile()?;
    let (dist, fresh) = (paths::dist(), paths::root().join("dist.new"));
    files::remove(&fresh)?;
    println!("Joining the page to the browser.");
    bind(&wasm, &fresh)?;
    println!("Copying the static files.");
    copy_static(&paths::www(), &fresh)?;
    println!("Listing the files for the offline worker.");
    fill_worker(&fresh)?;
    replace(&fresh, &dist)?;
    println!("{}", files::sizes(&dist)?);
    println!("The page is in {}.", dist.display());
    Ok(())
}

/// Makes sure that Rust can compile for the browser.
///
/// # Errors
/// A sentence saying what to install where it cannot, and nothing here can install it.
pub fn ensure_target() -> Outcome {
    let libraries =
        run::output(Command::new("rustc").args(["--print", "target-libdir", "--target", TARGET]));
    if libraries.is_ok_and(|libraries| Path::new(libraries.trim()).is_dir()) {
        return Ok(());
    }
    if run::output(Command::new("rustup").arg("--version")).is_err() {
        return Err(format!(
            "Rust's standard library for {TARGET} is missing, and there is no rustup to fetch it \
             with. Install it from where this Rust came from (distributions call it \
             rust-std-static-{TARGET}, libstd-rust-dev-wasm32 or rust-wasm), or install Rust from \
             https://rustup.rs."
        ));
    }
    println!("Adding Rust's standard library for the browser.");
    run::run(Command::new("rustup").args(["target", "add", TARGET]))
}

/// Compiles the page and says where the wasm is.
fn compile() -> Result<PathBuf, String> {
    run::run(
        run::cargo()
            .args(["build", "--release", "--package", PAGE, "--target", TARGET])
            .args(["--config", &without_own_paths()]),
    )?;
    let wasm = target_dir()?
        .join(TARGET)
        .join("release")
        .join(PAGE)
        .with_extension("wasm");
    if wasm.is_file() {
        Ok(wasm)
    } else {
        Err(format!(
            "{PAGE} was compiled, but there is no {}: it needs a main.rs.",
            wasm.display()
        ))
    }
}

/// A setting for cargo that keeps the folders of whoever builds out of the page: the places of
/// panics hold the path of the source, and the page is for everyone.
fn without_own_paths() -> String {
    let cargo_home = std::env::var_os("CARGO_HOME")
        .map(PathBuf::from)
        .or_else(|| std::env::home_dir().map(|home| home.join(".cargo")));
    let flags: Vec<String> = [
        Some((paths::root(), ".")),
        cargo_home.map(|home| (home, "cargo")),
    ]
    .into_iter()
    .flatten()
    .map(|(from, to)| format!("--remap-path-prefix={}={to}", from.display()))
    .collect();
    // A list of strings is written the same in JSON as in cargo's TOML.
    format!("target.{TARGET}.rustflags={}", json!(flags))
}

/// Where cargo puts what it builds, whatever the environment or a settings file say of it.
///
/// # Errors
/// When cargo does not say.
pub fn target_dir() -> Result<PathBuf, String> {
    let said = run::output(run::cargo().args([
        "metadata",
        "--no-deps",
        "--offline",
        "--format-version=1",
    ]))?;
    let said: Value = serde_json::from_str(&said)
        .map_err(|error| format!("`cargo metadata` printed no JSON: {error}."))?;
    said["target_directory"]
        .as_str()
        .map(PathBuf::from)
        .ok_or_else(|| "`cargo metadata` named no target directory.".to_owned())
}

/// Writes the wasm as browsers load it, with the script that joins the two.
fn bind(wasm: &Path, into: &Path) -> Outcome {
    Bindgen::new()
        .input_path(wasm)
        .out_name("page")
        .typescript(false)
        // Names of functions and of tools are a tenth of the file and of no use to a reader.
        .remove_name_section(true)
        .remove_producers_section(true)
        .web(true)
        .and_then(|bindgen| bindgen.generate(into))
        .map_err(|error| format!("wasm-bindgen cannot join {}: {error:#}.", wasm.display()))
}

/// Copies what a browser needs of the page's folder.
fn copy_static(www: &Path, into: &Path) -> Outcome {
    let all = files::list(www)?;
    if !all.iter().any(|name| name == "index.html") {
        return Err(format!(
            "{} is missing: a page begins with it.",
            www.join("index.html").display()
        ));
    }
    for name in all {
        let top = name.split('/').next().unwrap_or_default();
        if !NOT_THE_PAGE.contains(&top) {
            files::write(&into.join(&name), &files::read(&www.join(&name))?)?;
        }
    }
    Ok(())
}

/// Tells the offline worker the exact files of the page.
fn fill_worker(dist: &Path) -> Outcome {
    let worker = dist.join(WORKER);
    let source = files::read_text(&worker)?;
    let mut listed = Vec::new();
    for name in files::list(dist)? {
        // The browser itself keeps the worker; a worker that kept itself would never be replaced.
        if name != WORKER {
            let hash = files::sha256(&files::read(&dist.join(&name))?);
            if name == "index.html" {
                listed.insert(0, json!(["./", hash]));
            }
            listed.push(json!([name, hash]));
        }
    }
    files::write(&worker, filled(&source, &json!(listed))?.as_bytes())
}

/// The worker's source with the list of files and their version in it.
fn filled(source: &str, listed: &Value) -> Result<String, String> {
    let listed = listed.to_string();
    let version = json!(files::sha256(listed.as_bytes())).to_string();
    let mut source = source.to_owned();
    for (placeholder, value) in [(FILES, listed), (VERSION, version)] {
        let found = source.matches(placeholder).count();
        if found != 1 {
            return Err(format!(
                "{WORKER} must hold {placeholder} once, where the build writes what it stands \
                 for, but holds it {found} times."
            ));
        }
        source = source.replace(placeholder, &value);
    }
    Ok(source)
}

/// Puts a fresh folder in the place of an old one.
fn replace(fresh: &Path, old: &Path) -> Outcome {
    let aside = old.with_extension("old");
    files::remove(&aside)?;
    let says = |error| format!("Cannot put the page at {}: {error}.", old.display());
    if old.exists() {
        std::fs::rename(old, &aside).map_err(says)?;
    }
    std::fs::rename(fresh, old).map_err(says)?;
    files::remove(&aside)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::scratch::Scratch;

    #[test]
    fn the_sources_of_the_page_stay_behind() {
        let www = Scratch::with(&[
            ("Cargo.toml", ""),
            ("clippy.toml", ""),
            ("webdriver.json", ""),
            ("src/main.rs", ""),
            ("tests/page.rs", ""),
            ("index.html", "<p>"),
            ("icons/icon.svg", "<svg>"),
            ("icons/src/of-an-icon.svg", "<svg>"),
        ]);
        let dist = Scratch::with(&[]);
        copy_static(www.path(), dist.path()).unwrap();
        assert_eq!(
            files::list(dist.path()).unwrap(),
            ["icons/icon.svg", "icons/src/of-an-icon.svg", "index.html"]
        );
        assert_eq!(
            files::read_text(&dist.path().join("index.html")).unwrap(),
            "<p>"
        );
    }

    #[test]
    fn a_page_without_a_beginning_is_refused() {
        let www = Scratch::with(&[("style.css", "")]);
        let said = copy_static(www.path(), &www.path().join("dist")).unwrap_err();
        assert!(said.contains("index.html is missing"), "{said}");
    }

    const SOURCE: &str = "const FILES = \"__FILES__\";\nconst VERSION = \"__VERSION__\";\n";

    #[test]
    fn the_worker_knows_every_file_but_itself() {
        let page = |style: &str| {
            let dist = Scratch::with(&[
                ("index.html", "abc"),
                ("style.css", style),
                ("icons/a.svg", "{}"),
                ("offline.js", SOURCE),
            ]);
            fill_worker(dist.path()).unwrap();
            files::read_text(&dist.path().join("offline.js")).unwrap()
        };
        let worker = page("p {}");
        let mut lines = worker.lines();
        let listed = lines.next().unwrap();
        let listed = listed
            .strip_prefix("const FILES = ")
            .unwrap()
            .strip_suffix(';')
            .unwrap();
        let listed: Vec<(String, String)> = serde_json::from_str(listed).unwrap();
        let names: Vec<&str> = listed.iter().map(|(name, _)| name.as_str()).collect();
        assert_eq!(names, ["./", "icons/a.svg", "index.html", "style.css"]);
        let hash = files::sha256(b"abc");
        assert_eq!((&listed[0].1, &listed[2].1), (&hash, &hash));

        let version = |worker: &str| worker.lines().nth(1).unwrap().to_owned();
        assert_eq!(version(&worker).len(), "const VERSION = \"\";".len() + 64);
        assert_eq!(
            page("p {}"),
            worker,
            "the same files must give the same version"
        );
        assert_ne!(version(&page("a {}")), version(&worker));
    }

    #[test]
    fn a_worker_that_lost_a_placeholder_is_refused() {
        for lost in [FILES, VERSION] {
            let said = filled(&SOURCE.replace(lost, "[]"), &json!([])).unwrap_err();
            assert!(said.contains(&format!("must hold {lost} once")), "{said}");
            assert!(said.ends_with("holds it 0 times."), "{said}");
        }
        let said = filled(&format!("// {FILES}\n{SOURCE}"), &json!([])).unwrap_err();
        assert!(said.ends_with("holds it 2 times."), "{said}");
    }

    #[test]
    fn the_old_page_is_replaced_whole() {
        let outer = Scratch::with(&[("dist/old.js", ""), ("dist.new/new.js", "")]);
        let (fresh, dist) = (outer.path().join("dist.new"), outer.path().join("dist"));
        replace(&fresh, &dist).unwrap();
        assert_eq!(files::list(outer.path()).unwrap(), ["dist/new.js"]);
        // The first build finds no old page.
        std::fs::rename(&dist, &fresh).unwrap();
        replace(&fresh, &dist).unwrap();
        assert_eq!(files::list(outer.path()).unwrap(), ["dist/new.js"]);
    }

    #[test]
    fn cargo_names_its_folder() {
        assert!(target_dir().unwrap().is_absolute());
    }
}
