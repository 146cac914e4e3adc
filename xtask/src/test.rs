//! `cargo xtask test [--only STEP]`: everything that must hold before a change is taken, in order
//! from what fails soonest to what takes longest.

use std::path::{Path, PathBuf};
use std::time::Instant;

use crate::chromium::{self, Driver};
use crate::serve::Server;
use crate::{Outcome, build, files, paths, programs, run};

/// A step: its name, what it does in a few words, and how.
struct Step {
    name: &'static str,
    does: &'static str,
    run: fn() -> Outcome,
}

const STEPS: [Step; 7] = [
    Step {
        name: "format",
        does: "is the code laid out as rustfmt does",
        run: format,
    },
    Step {
        name: "lint",
        does: "does clippy find nothing, on the desk and in the browser",
        run: lint,
    },
    Step {
        name: "native",
        does: "do the tests of the core and of the commands hold, and does a circuit simulator agree",
        run: native,
    },
    Step {
        name: "docs",
        does: "is the core documented without a broken link",
        run: docs,
    },
    Step {
        name: "build",
        does: "does the page build",
        run: build::build,
    },
    Step {
        name: "page",
        does: "do the page's own tests hold in Chromium",
        run: page,
    },
    Step {
        name: "browser",
        does: "do the journeys through the built page hold",
        run: browser,
    },
];

/// Package of the journeys.
pub(crate) const JOURNEYS: &str = "tubewright-browser-tests";

/// The command.
///
/// # Errors
/// When the arguments make no sense, or at the first step that fails, with how to run only it.
pub fn test(arguments: &[String]) -> Outcome {
    for step in wanted(arguments)? {
        println!("\n== {}: {} ==", step.name, step.does);
        let began = Instant::now();
        let outcome = (step.run)();
        let seconds = began.elapsed().as_secs_f64();
        outcome.map_err(|says| {
            format!(
                "Step {} failed after {seconds:.1} s: {says}\nTo run only it: `cargo xtask test \
                 --only {}`.",
                step.name, step.name
            )
        })?;
        println!("== {} took {seconds:.1} s ==", step.name);
    }
    Ok(())
}

fn wanted(arguments: &[String]) -> Result<&'static [Step], String> {
    let names = || STEPS.map(|step| step.name).join(", ");
    match arguments {
        [] => Ok(&STEPS),
        [option, name] if option == "--only" => STEPS
            .iter()
            .position(|step| step.name == name)
            .map(|at| &STEPS[at..=at])
            .ok_or_else(|| format!("There is no step “{name}”. These there are: {}.", names())),
        _ => Err(format!(
            "Expected nothing or `--only STEP`; the steps are {}.",
            names()
        )),
    }
}

fn format() -> Outcome {
    run::run(run::cargo().args(["fmt", "--all", "--check"]))
}

fn lint() -> Outcome {
    let strict = ["--", "-D", "warnings"];
    run::run(
        run::cargo()
            .args(["clippy", "--workspace", "--all-targets"])
            .args(strict),
    )?;
    build::ensure_target()?;
    // Code that is only compiled for the browser is seen by no other check.
    run::run(
        run::cargo()
            .args([
                "clippy",
                "--package",
                build::PAGE,
                "--target",
                build::TARGET,
                "--all-targets",
            ])
            .args(strict),
    )
}

fn native() -> Outcome {
    run::run(run::cargo().args(["test", "--workspace", "--exclude", JOURNEYS]))?;
    run::run(
        run::cargo()
            .args(["test", "--package", "tubewright", "--test", "spice"])
            .env("NGSPICE", programs::ngspice()?),
    )
}

fn docs() -> Outcome {
    run::run(
        run::cargo()
            .args(["doc", "--no-deps", "--package", "tubewright"])
            .env("RUSTDOCFLAGS", "-D warnings"),
    )
}

fn page() -> Outcome {
    build::ensure_target()?;
    let browser = chromium::ensure()?;
    let target = build::target_dir()?;
    let runner = ensure_runner(&target.join("tools"))?;
    let capabilities = target.join("webdriver.json");
    chromium::write_capabilities(&browser.chromium, &capabilities)?;
    run::run(
        run::cargo()
            .args(["test", "--package", build::PAGE, "--target", build::TARGET])
            .args(["--lib", "--tests"])
            .env("CARGO_TARGET_WASM32_UNKNOWN_UNKNOWN_RUNNER", runner)
            .env("CHROMEDRIVER", browser.chromedriver)
            .env("WASM_BINDGEN_TEST_WEBDRIVER_JSON", capabilities)
            // Tests that do not say where they run would be tried in Node, which nobody needs here.
            .env("WASM_BINDGEN_USE_BROWSER", "1")
            // The usual 20 and 5 seconds are short on a busy machine.
            .env("WASM_BINDGEN_TEST_TIMEOUT", "180")
            .env("WASM_BINDGEN_TEST_DRIVER_TIMEOUT", "30"),
    )
}

/// The program that runs the page's tests in a browser, of the one version that fits the page's.
fn ensure_runner(tools: &Path) -> Result<PathBuf, String> {
    let version = locked_version(&files::read_text(&paths::root().join("Cargo.lock"))?)?;
    let runner = tools
        .join("bin")
        .join("wasm-bindgen-test-runner")
        .with_extension(std::env::consts::EXE_EXTENSION);
    // Cargo's own list of what it installed there; a runner of another version refuses to work.
    let installed = files::read_text(&tools.join(".crates.toml")).unwrap_or_default();
    if !runner.is_file() || !installed.contains(&format!("\"wasm-bindgen-cli {version} ")) {
        println!("Installing wasm-bindgen-test-runner {version}; this takes some minutes, once.");
        run::run(
            run::cargo()
                .args(["install", "wasm-bindgen-cli", "--version", &version])
                .args(["--bin", "wasm-bindgen-test-runner", "--force", "--root"])
                .arg(tools),
        )?;
    }
    Ok(runner)
}

/// The version of wasm-bindgen that the workspace is locked to.
fn locked_version(lock: &str) -> Result<String, String> {
    let mut lines = lock
        .lines()
        .skip_while(|line| *line != "name = \"wasm-bindgen\"")
        .skip(1);
    lines
        .next()
        .and_then(|line| line.strip_prefix("version = \"")?.strip_suffix('"'))
        .map(str::to_owned)
        .ok_or_else(|| "Cargo.lock names no version of wasm-bindgen: `cargo update`?".to_owned())
}

fn browser() -> Outcome {
    in_browser(&["test", "--package", JOURNEYS, "--", "--test-threads=1"])
}

/// Runs a cargo command of the journeys with the built page served and a driver of Chromium.
///
/// # Errors
/// When there is no built page, no browser, or the command fails.
pub(crate) fn in_browser(arguments: &[&str]) -> Outcome {
    let dist = paths::dist();
    if !dist.join("index.html").is_file() {
        return Err(format!(
            "There is no built page in {}; `cargo xtask build` builds it.",
            dist.display()
        ));
    }
    let browser = chromium::ensure()?;
    let server = Server::start(&dist, None)
        .map_err(|error| format!("Cannot serve {}: {error}.", dist.display()))?;
    let log = build::target_dir()?.join("chromedriver.log");
    let driver = Driver::start(&browser.chromedriver, &log)?;
    println!(
        "The page is at {}, the driver at {}.",
        server.address(),
        driver.address()
    );
    run::run(
        run::cargo()
            .args(arguments)
            .env("TUBEWRIGHT_PAGE", server.address())
            .env("TUBEWRIGHT_DRIVER", driver.address())
            .env("TUBEWRIGHT_DIST", &dist)
            .env("TUBEWRIGHT_CHROMIUM", browser.chromium),
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    fn names(arguments: &[&str]) -> Result<Vec<&'static str>, String> {
        let arguments: Vec<String> = arguments.iter().map(|&word| word.to_owned()).collect();
        Ok(wanted(&arguments)?.iter().map(|step| step.name).collect())
    }

    #[test]
    fn all_steps_or_the_one_asked_for() {
        assert_eq!(
            names(&[]).unwrap(),
            [
                "format", "lint", "native", "docs", "build", "page", "browser"
            ]
        );
        assert_eq!(names(&["--only", "docs"]).unwrap(), ["docs"]);
        let said = names(&["--only", "doc"]).unwrap_err();
        assert!(
            said.contains("no step “doc”") && said.contains("native, docs, build"),
            "{said}"
        );
        assert!(names(&["--only"]).is_err() && names(&["docs"]).is_err());
    }

    #[test]
    fn the_help_names_every_step() {
        let steps = STEPS.map(|step| step.name).join(", ");
        assert!(include_str!("main.rs").contains(&format!("one step: {steps}\n")));
    }

    #[test]
    fn the_locked_version_is_that_of_the_bundler() {
        let lock = files::read_text(&paths::root().join("Cargo.lock")).unwrap();
        let version = locked_version(&lock).unwrap();
        let bundler = format!("name = \"wasm-bindgen-cli-support\"\nversion = \"{version}\"");
        assert!(lock.contains(&bundler), "{version}");
        assert!(locked_version("name = \"wasm-bindgen-shared\"\nversion = \"1\"").is_err());
    }
}
