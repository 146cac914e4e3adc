//! `cargo xtask bench`: how long the core and the built page take, and how much the page weighs.

use crate::{Outcome, files, paths, run, test};

/// The command.
///
/// # Errors
/// When the benches do not run, or the built page cannot be read.
pub fn bench() -> Outcome {
    println!("Timing the core.");
    run::run(run::cargo().args(["bench", "--package", "tubewright"]))?;
    let dist = paths::dist();
    if dist.is_dir() {
        println!("Timing the built page in Chromium.");
        // What is timed runs in the browser: what drives it need not be quick.
        let profile = ["bench", "--profile", "dev"];
        let page = ["--package", test::JOURNEYS, "--bench", "page"];
        test::in_browser(&[profile.as_slice(), &page].concat())?;
        println!("The built page weighs:");
        println!("{}", files::sizes(&dist)?);
    } else {
        println!(
            "The page is not built, so neither its speed nor its size is known; `cargo xtask build` builds it."
        );
    }
    Ok(())
}
